package orbitals

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
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

// carry returns the vector of the image of a function.
func (c *carrier) carry(f Function) []float64 {
	if f.Shell == 0 {
		return f.Vector
	}
	d := c.rotation(f.Shell)
	image := make([]float64, len(f.Vector))
	for k, v := range f.Vector {
		if v != 0 {
			for i := range image {
				image[i] += v * d.At(i, k)
			}
		}
	}
	return image
}

// carriers returns the operations of a finite group, and of an infinite one
// some that generate a dense part of it: what these leave, all leave. A turn
// by one radian is no part of a full one.
func (s *Sites) carriers() []*carrier {
	var out []*carrier
	if !s.Setting.Infinite() {
		for r, op := range s.Setting.Operations {
			out = append(out, &carrier{name: op.Name, matrix: op.Matrix, images: s.Permutations[r]})
		}
		return out
	}
	out = append(out,
		&carrier{name: "C∞(z)", matrix: turnZ(1)},
		&carrier{name: "σv(xz)", matrix: mgl64.Diag3(mgl64.Vec3{1, -1, 1})},
	)
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

// turnZ is the turn about z by an angle in radians.
func turnZ(angle float64) mgl64.Mat3 {
	c, s := math.Cos(angle), math.Sin(angle)
	return mgl64.Mat3FromRows(mgl64.Vec3{c, -s, 0}, mgl64.Vec3{s, c, 0}, mgl64.Vec3{0, 0, 1})
}
