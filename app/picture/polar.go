package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// The shapes of lobes: surfaces of equal value, or polar plots, whose points
// are as far from the atom as |Y| or Y² is large in their direction.
const (
	contoured = "contour"
	polar     = "polar"
	square    = "square"
)

// A form is what a lobe is and how finely it is cut.
type form struct {
	shape string
	detail
}

// formOf is the form for what a study asks for; anything else is contoured.
func formOf(shape string, d detail) form {
	if shape != polar && shape != square {
		shape = contoured
	}
	return form{shape, d}
}

// power is the one that |Y| is raised to in a polar plot.
func (f form) power() float64 {
	if f.shape == square {
		return 2
	}
	return 1
}

// polarPlot is the closed surface of the lobes of one sign; nil if there are
// none. All of them begin in the nucleus, where y is 0.
func polarPlot(y angular, sign float64, f form) *render.Mesh {
	points, triangles := directions(f.halvings)
	power := f.power()
	radius := func(d mgl64.Vec3) float64 { return math.Pow(max(0, sign*y(d)), power) }
	out := &render.Mesh{Closed: true}
	at := map[int]uint32{}
	add := func(p, n mgl64.Vec3) uint32 {
		out.Positions = append(out.Positions, [3]float32{float32(p[0]), float32(p[1]), float32(p[2])})
		out.Normals = append(out.Normals, [3]float32{float32(n[0]), float32(n[1]), float32(n[2])})
		out.Coords = append(out.Coords, [2]float32{float32(p.Len()), float32(math.Atan2(p[1], p[0]))})
		return uint32(len(out.Positions) - 1)
	}
	vertex := func(i int) (uint32, mgl64.Vec3, bool) {
		d := points[i]
		r := radius(d)
		if r == 0 {
			return 0, mgl64.Vec3{}, false
		}
		n := polarNormal(radius, d, r)
		v, known := at[i]
		if !known {
			v = add(d.Mul(r), n)
			at[i] = v
		}
		return v, n, true
	}
	for _, t := range triangles {
		// Where the sign changes between two directions the surface runs to
		// the nucleus, whatever the direction there.
		var corners [3]uint32
		var missing []int
		var normal mgl64.Vec3
		for k, i := range t {
			v, n, there := vertex(i)
			if !there {
				missing = append(missing, k)
				continue
			}
			corners[k] = v
			normal = normal.Add(n)
		}
		if len(missing) > 1 {
			continue // a triangle without area
		}
		for _, k := range missing {
			corners[k] = add(mgl64.Vec3{}, normal.Normalize())
		}
		out.Triangles = append(out.Triangles, corners)
	}
	if len(out.Triangles) == 0 {
		return nil
	}
	return out
}

// polarNormal is the unit normal, pointing outward, of the surface that has
// the distance radius(d) from the origin in each direction d, by central
// differences along two tangents.
func polarNormal(radius func(mgl64.Vec3) float64, d mgl64.Vec3, r float64) mgl64.Vec3 {
	const step = 1e-4
	u, v := across(d)
	slope := func(along mgl64.Vec3) float64 {
		return (radius(d.Add(along.Mul(step)).Normalize()) - radius(d.Sub(along.Mul(step)).Normalize())) / (2 * step)
	}
	n := d.Mul(r).Sub(u.Mul(slope(u))).Sub(v.Mul(slope(v)))
	if n.Len() == 0 {
		return d
	}
	return n.Normalize()
}
