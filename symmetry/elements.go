package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// golden is the ratio (1+√5)/2 on which the icosahedral matrices rest.
const golden = 1.6180339887498948482

// sameMatrix is how far two equal 3×3 matrices of operations may differ in an
// entry. Entries are good to a few 1e-16; different operations of a group with
// n ≤ 2·MaxFold differ by more than 0.02.
const sameMatrix = 1e-9

// cosTurn returns cos(2π·num/den), exactly symmetric about the eighths of the
// circle and exact at the multiples of a quarter, a sixth and a twelfth where
// the value is rational.
func cosTurn(num, den int) float64 {
	num %= den
	if num < 0 {
		num += den
	}
	if 2*num > den {
		num = den - num // cos is even
	}
	switch {
	case num == 0:
		return 1
	case 4*num > den:
		return -cosTurn(den-2*num, 2*den)
	case 4*num == den:
		return 0
	case 6*num == den:
		return 0.5
	case 8*num > den:
		return math.Sin(2 * math.Pi * float64(den-4*num) / float64(4*den))
	}
	return math.Cos(2 * math.Pi * float64(num) / float64(den))
}

// sinTurn returns sin(2π·num/den) with the care of cosTurn.
func sinTurn(num, den int) float64 { return cosTurn(4*num-den, 4*den) }

// turnAboutZ is the rotation by num/den of a circle about z.
func turnAboutZ(num, den int) mgl64.Mat3 {
	c, s := cosTurn(num, den), sinTurn(num, den)
	return mgl64.Mat3FromCols(mgl64.Vec3{c, s, 0}, mgl64.Vec3{-s, c, 0}, mgl64.Vec3{0, 0, 1})
}

// flipAboutLine is the rotation by a half about the line in xy whose azimuth
// is num/den of a circle.
func flipAboutLine(num, den int) mgl64.Mat3 {
	c, s := cosTurn(2*num, den), sinTurn(2*num, den)
	return mgl64.Mat3FromCols(mgl64.Vec3{c, s, 0}, mgl64.Vec3{s, -c, 0}, mgl64.Vec3{0, 0, -1})
}

// verticalPlane is the reflection in the plane that holds z and the line in xy
// whose azimuth is num/den of a circle.
func verticalPlane(num, den int) mgl64.Mat3 {
	m := flipAboutLine(num, den)
	m.Set(2, 2, 1)
	return m
}

var (
	inversion       = mgl64.Diag3(mgl64.Vec3{-1, -1, -1})
	horizontalPlane = mgl64.Diag3(mgl64.Vec3{1, 1, -1})
)

// polyhedralGenerators returns operations that generate the cubic or
// icosahedral group in its standard axes: C4 (T, Th, Td: C2, S4) or three of
// the C2 along x, y and z, a C3 along (1,1,1).
func (k kind) polyhedralGenerators() []mgl64.Mat3 {
	c3 := mgl64.Mat3FromRows(mgl64.Vec3{0, 0, 1}, mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 1, 0})
	c2, c4 := turnAboutZ(1, 2), turnAboutZ(1, 4)
	switch k.family {
	case tetrahedralProper:
		return []mgl64.Mat3{c3, c2}
	case tetrahedral:
		return []mgl64.Mat3{c3, c4.Mul3(horizontalPlane)}
	case pyritohedral:
		return []mgl64.Mat3{c3, c2, inversion}
	case octahedralProper:
		return []mgl64.Mat3{c3, c4}
	case octahedral:
		return []mgl64.Mat3{c3, c4, inversion}
	case icosahedralProper:
		return []mgl64.Mat3{c3, c2, icosahedralFlip()}
	default:
		return []mgl64.Mat3{c3, c2, icosahedralFlip(), inversion}
	}
}

// icosahedralFlip is the C2 through the middle of the edge between the
// fivefold axes (0, 1, φ) and (1, φ, 0) of the standard setting.
func icosahedralFlip() mgl64.Mat3 {
	u := mgl64.Vec3{1, 1 + golden, golden}.Normalize()
	m := mgl64.Ident3().Mul(-1)
	for r := 0; r < 3; r++ {
		for c := 0; c < 3; c++ {
			m.Set(r, c, snapIcosahedral(m.At(r, c)+2*u[r]*u[c]))
		}
	}
	return m
}

// icosahedralEntries are the sizes that entries of the matrices take when
// three C2 lie along the axes.
var icosahedralEntries = []float64{0, 0.5, 1, golden / 2, (golden - 1) / 2}

// snapIcosahedral replaces an entry by the exact one next to it, so that
// products do not gather rounding errors.
func snapIcosahedral(v float64) float64 {
	for _, e := range icosahedralEntries {
		if math.Abs(math.Abs(v)-e) < sameMatrix {
			return math.Copysign(e, v) + 0 // no negative zero
		}
	}
	return v
}

// elements returns all matrices of the finite group in its standard axes, in
// no particular order but for E, which comes first.
func (k kind) elements() []mgl64.Mat3 {
	if k.axial() {
		return k.axialElements()
	}
	all := []mgl64.Mat3{mgl64.Ident3()}
	gens := k.polyhedralGenerators()
	for i := 0; i < len(all); i++ {
		for _, g := range gens {
			m := g.Mul3(all[i])
			for j := range m {
				m[j] = snapIcosahedral(m[j]) // also holds 0 and ±1 of the cubic groups
			}
			if !containsMatrix(all, m) {
				all = append(all, m)
			}
		}
	}
	return all
}

// axialElements writes the operations of an axial group from its formulas, so
// that no product spoils their digits.
func (k kind) axialElements() []mgl64.Mat3 {
	n := k.n
	var all []mgl64.Mat3
	for j := 0; j < n; j++ {
		all = append(all, turnAboutZ(j, n))
	}
	switch k.family {
	case pyramidal:
		for j := 0; j < n; j++ {
			all = append(all, verticalPlane(j, 2*n))
		}
	case cyclicHorizontal:
		all = appendProducts(all, all, horizontalPlane)
	case dihedral, prismatic, antiprismatic:
		for j := 0; j < n; j++ {
			all = append(all, flipAboutLine(j, 2*n))
		}
		switch k.family {
		case prismatic:
			all = appendProducts(all, all, horizontalPlane)
		case antiprismatic:
			for j := 0; j < n; j++ {
				all = append(all, turnAboutZ(2*j+1, 2*n).Mul3(horizontalPlane))
			}
			for j := 0; j < n; j++ {
				all = append(all, verticalPlane(2*j+1, 4*n))
			}
		}
	case improperCyclic:
		for j := 0; j < n; j++ {
			all = append(all, turnAboutZ(2*j+1, 2*n).Mul3(horizontalPlane))
		}
	}
	return all
}

func appendProducts(to, of []mgl64.Mat3, by mgl64.Mat3) []mgl64.Mat3 {
	for _, m := range of {
		to = append(to, m.Mul3(by))
	}
	return to
}

func containsMatrix(list []mgl64.Mat3, m mgl64.Mat3) bool {
	for _, l := range list {
		if equalMatrices(l, m) {
			return true
		}
	}
	return false
}

func equalMatrices(a, b mgl64.Mat3) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > sameMatrix {
			return false
		}
	}
	return true
}
