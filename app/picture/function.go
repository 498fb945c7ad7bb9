package picture

import (
	"math"
	"slices"
	"sync"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/render"
)

// A mixture is the part of a group orbital on one atom within one shell.
type mixture struct {
	site, shell int
	vector      []float64 // along the functions of the shell
}

// amplitude is the square root of the mixture's weight; for a single function
// it is |c|.
func (m mixture) amplitude() float64 {
	sum := 0.0
	for _, x := range m.vector {
		sum += x * x
	}
	return math.Sqrt(sum)
}

func (m mixture) angular() angular {
	return func(d mgl64.Vec3) float64 {
		sum := 0.0
		for k, h := range orbitals.Harmonics(m.shell, d) {
			sum += m.vector[k] * h
		}
		return sum
	}
}

// mixtures gathers a combination of the basis atom by atom, in the order of
// the basis.
func mixtures(b *work.Basis, coefficients []float64) []mixture {
	var out []mixture
	for i, f := range b.Functions {
		k := slices.IndexFunc(out, func(m mixture) bool { return m.site == f.Site && m.shell == f.Shell })
		if k < 0 {
			k = len(out)
			out = append(out, mixture{f.Site, f.Shell, make([]float64, len(f.Vector))})
		}
		for j, x := range f.Vector {
			out[k].vector[j] += coefficients[i] * x
		}
	}
	return out
}

// negligible is the share of the largest coefficient below which nothing is
// drawn: a lobe a thousandth as long cannot be seen, rounding is far smaller.
const negligible = 1e-3

// sizing takes the share that a coefficient has of the largest one to the
// share that its lobe has of the longest.
func sizing(size string) func(float64) float64 {
	switch size {
	case "area":
		return math.Sqrt
	case "volume":
		return math.Cbrt
	}
	return func(x float64) float64 { return x }
}

// maxFine is how many atoms may have finely cut lobes; with more of them each
// is small on the picture.
const maxFine = 24

func (s *stage) lobeMaterial(sign float64) render.Material {
	colour := s.palette.Plus
	if sign < 0 {
		colour = s.palette.Minus
	}
	m := render.Solid(paint(colour))
	if sign < 0 && s.look.Signs == "hatching" {
		m.Hatch = render.Hatch{Width: hatchLine, Color: paint(s.palette.Ink)}
	}
	return m
}

// shapeOf returns the meshes of a mixture and the rotation that brings them
// into the scene. All p functions share one pair of meshes.
func shapeOf(m mixture, form form) (plus, minus *render.Mesh, turn mgl64.Mat3) {
	if m.shell == 1 {
		plus, minus = pLobes[form]()
		return plus, minus, turnFromZ(mgl64.Vec3{m.vector[0], m.vector[1], m.vector[2]}.Normalize())
	}
	plus, minus = lobes(m.angular(), m.shell, form)
	return plus, minus, mgl64.Ident3()
}

// pLobes are the lobes of pz, cut once.
var pLobes = func() map[form]func() (plus, minus *render.Mesh) {
	all := map[form]func() (plus, minus *render.Mesh){}
	for _, shape := range []string{contoured, polar, square} {
		for _, detail := range []detail{fine, coarse} {
			f := form{shape, detail}
			all[f] = sync.OnceValues(func() (plus, minus *render.Mesh) { return lobes(alongZ, 1, f) })
		}
	}
	return all
}()

func alongZ(d mgl64.Vec3) float64 { return d[2] }

// turnFromZ is a rotation that takes z to a unit vector.
func turnFromZ(to mgl64.Vec3) mgl64.Mat3 {
	u, v := across(to)
	if u.Cross(v).Dot(to) < 0 {
		u, v = v, u
	}
	return mgl64.Mat3FromCols(u, v, to)
}

// lobeBalls stand for the lobes of an angular function where views and labels
// are chosen: one ball at each maximum of |Y|, several along a ring. Lengths
// are those of lobes.
func lobeBalls(y angular, shell int, shape string) []ball {
	half, narrow, power, least := 0.55, 0.38, 1.0, contourOf(shell).level // the middle and half the width of a lobe
	switch shape {
	case polar:
		half, narrow, least = 0.5, 0.45, 0.1
	case square:
		half, narrow, power, least = 0.55, 0.33, 2, 0.1
	}
	points, triangles := directions(2)
	y = normalized(y)
	highest := make([]bool, len(points))
	values := make([]float64, len(points))
	for i, p := range points {
		highest[i], values[i] = true, math.Abs(y(p))
	}
	for _, t := range triangles {
		for k := range t {
			if values[t[k]] < values[t[(k+1)%3]] {
				highest[t[k]] = false
			}
			if values[t[k]] < values[t[(k+2)%3]] {
				highest[t[k]] = false
			}
		}
	}
	var out []ball
	for i, p := range points {
		if size := math.Pow(values[i], power); highest[i] && size > least {
			out = append(out, ball{p.Mul(half * size), narrow * size})
		}
	}
	return out
}
