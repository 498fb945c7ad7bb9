package orbitals

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry"
)

// A carrier is an operation at work on functions and atoms.
type carrier struct {
	name   string
	matrix mgl64.Mat3
	images []int // of the atoms; nil: each stays
	shells [MaxShell + 1]*mat.Dense
}

// to returns the image of an atom.
func (c *carrier) to(site int) int {
	if c.images == nil {
		return site
	}
	return c.images[site]
}

// rotation returns the matrix of the operation among the functions of shell l.
func (c *carrier) rotation(l int) *mat.Dense {
	if c.shells[l] == nil {
		c.shells[l] = Rotation(l, c.matrix)
	}
	return c.shells[l]
}

// carry returns the vector of the image of a function, in into if that is long
// enough.
func (c *carrier) carry(f Function, into []float64) []float64 {
	image := append(into[:0], f.Vector...)
	if f.Shell == 0 {
		return image
	}
	clear(image)
	d := c.rotation(f.Shell).RawMatrix()
	for k, v := range f.Vector {
		if v == 0 {
			continue
		}
		for i := range image {
			image[i] += v * d.Data[i*d.Stride+k]
		}
	}
	return image
}

// operations returns the operations of a finite group.
func (s *Sites) operations() []*carrier {
	out := make([]*carrier, s.Setting.Order())
	for r, op := range s.Setting.Operations {
		out[r] = &carrier{name: op.Name, matrix: op.Matrix, images: s.Permutations[r]}
	}
	return out
}

// generators returns operations that generate the group, or, if it is infinite,
// a dense part of it (a turn by one radian is no part of a full one): what these
// carry into itself, all do.
func (s *Sites) generators() []*carrier {
	if !s.Setting.Infinite() {
		all := s.operations()
		out := all[:1:1] // E alone generates C1
		for _, r := range generating(s.Setting) {
			out = append(out, all[r])
		}
		return out
	}
	out := []*carrier{
		{name: "C∞(z)", matrix: turnZ(1)},
		{name: "σv(xz)", matrix: mgl64.Diag3(mgl64.Vec3{1, -1, 1})},
	}
	if s.Setting.Symbol == "C∞v" {
		return out
	}
	opposite := make([]int, len(s.Positions))
	for k := range opposite {
		opposite[k] = s.opposite(k)
	}
	out = append(out, &carrier{name: "i", matrix: mgl64.Diag3(mgl64.Vec3{-1, -1, -1}), images: opposite})
	if s.Setting.Symbol == "Kh" {
		toX := mgl64.Mat3FromRows(mgl64.Vec3{0, 0, 1}, mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 1, 0})
		out = append(out, &carrier{name: "C∞(x)", matrix: toX.Mul3(turnZ(1)).Mul3(toX.Transpose())})
	}
	return out
}

// generating lists operations of a finite group, by index, that generate it:
// in order each that those before do not make.
func generating(setting *symmetry.Setting) []int {
	in := make([]bool, setting.Order())
	in[0] = true
	members := []int{0}
	var out []int
	for r := range in {
		if in[r] {
			continue
		}
		out = append(out, r)
		for i := 0; i < len(members); i++ {
			for _, g := range out {
				if p := setting.Product(g, members[i]); !in[p] {
					in[p] = true
					members = append(members, p)
				}
			}
		}
	}
	return out
}

// turnZ is the turn about z by an angle in radians.
func turnZ(angle float64) mgl64.Mat3 {
	c, s := math.Cos(angle), math.Sin(angle)
	return mgl64.Mat3FromRows(mgl64.Vec3{c, -s, 0}, mgl64.Vec3{s, c, 0}, mgl64.Vec3{0, 0, 1})
}
