package symmetry

import (
	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// A Turn says what an operation does about its axis: a rotation by Num/Den of
// a full circle, counterclockwise for an eye on the positive end of the axis
// that looks toward the origin, followed, if Improper, by the reflection in
// the plane square to the axis. The fraction is in lowest terms with
// 0 ≤ Num < Den. The zero fraction is written 0/1: E, or with Improper a
// reflection. The inversion is 1/2 and Improper, about any axis.
type Turn struct {
	Num, Den int
	Improper bool
}

// An Operation is one individual element of a point group, written in the
// frame of its Setting. It is active: a point p goes to Matrix·p, a function f
// to the function r ↦ f(Matrix⁻¹·r).
type Operation struct {
	// Name is unique within the Setting: "E", "C3^2(z)", "σv(xz)", "S6^5(1)".
	Name string
	// Matrix is orthogonal (3×3, dimensionless).
	Matrix mgl64.Mat3
	// Axis is the unit vector along the axis of a rotation, or the normal of
	// a plane; the zero vector for E and i.
	Axis mgl64.Vec3
	// Turn is what the operation does about Axis.
	Turn Turn
	// Class is the index of the conjugacy class in Setting.Classes.
	Class int
}

// A Class is a conjugacy class of operations.
type Class struct {
	// Name is the printed name with the number of members, such as "2C3".
	Name string
	// Members are indices into Setting.Operations, rising.
	Members []int
}

// An Irrep is an irreducible representation over the real numbers. A pair of
// complex conjugate one-dimensional representations counts as one Irrep of
// dimension 2.
type Irrep struct {
	// Label is Mulliken's label in plain characters: "A1'", "E1u", "Σg+".
	Label string
	// Dimension is the number of partners.
	Dimension int
	// ComplexPair is set for a pair of complex conjugates.
	ComplexPair bool
	// Characters has one real number a class; for a pair the sum of the two.
	Characters []float64
	// Matrices has one real orthogonal d×d matrix an operation: operation R
	// carries partner k into Σ_l Matrices[R].At(l, k) · partner l.
	Matrices []*mat.Dense
	// Functions has one list a partner, of polynomials in x, y, z and of the
	// rotations Rx, Ry, Rz. The j-th entries of all partners together
	// transform with exactly Matrices, signs and factors included.
	Functions [][]string
	// Lambda is |Λ|, the angular momentum about the axis, for an irrep of a
	// linear group, and l for one of the group of a single atom. It is zero
	// for finite groups.
	Lambda int
	// Gerade is +1 or −1 for the parity g or u under inversion, 0 where the
	// label carries none. Mirror is +1 or −1 for Σ+ and Σ−, else 0. Both are
	// set only for infinite groups.
	Gerade, Mirror int

	// azimuthal is the j of the partners (cos jφ, sin jφ) in an axial group.
	azimuthal int
	// sets are the functions of Functions as tensors, to compare frames by.
	sets []functionSet
}

// A Setting is a point group together with the frame it is written in. It
// needs no molecule. Make one with New, or take it from a Fit; it must not be
// changed afterwards, since settings are shared.
type Setting struct {
	// Symbol is the Schoenflies symbol in plain characters: "D4h", "C∞v".
	Symbol string
	// Operations lists every operation, E first, the others class by class.
	// It is empty for the infinite groups C∞v, D∞h and Kh.
	Operations []Operation
	// Classes and Irreps stand in the order of the usual printed tables. For
	// an infinite group Classes is empty, and Irreps too: see InfiniteIrrep.
	Classes []Class
	Irreps  []Irrep

	kind kind
	// turn takes the standard axes of the group to those of this frame.
	turn    mgl64.Mat3
	product [][]int32
	inverse []int
}

// Order is the number of operations, 0 for an infinite group.
func (s *Setting) Order() int { return len(s.Operations) }

// Infinite tells whether the group is C∞v, D∞h or Kh.
func (s *Setting) Infinite() bool { return len(s.Operations) == 0 }

// Product returns the index of the operation a·b, which is b first, then a.
func (s *Setting) Product(a, b int) int { return int(s.product[a][b]) }

// Inverse returns the index of the inverse of operation a.
func (s *Setting) Inverse(a int) int { return s.inverse[a] }
