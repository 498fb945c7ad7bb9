package work

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"

	"lobewright/orbitals"
)

// A Mark is an angle of a turn at which a partner stands in a special way.
type Mark struct {
	// Angle is in degrees, from 0 to below 360, counted from the set as it is:
	// partner From of the mark becomes cos·From + sin·To.
	Angle   float64
	Reasons []MarkReason
}

// A MarkReason says what is special.
type MarkReason struct {
	// Partner is the one that is special, from 0.
	Partner int
	// Operation, an index in Setting.Operations, leaves the partner as it is
	// (Sign +1) or changes its sign (−1), and does neither at angles beside. It
	// is −1 where the reason is an atom.
	Operation, Sign int
	// Atom, from 0, has the largest part that it can have in the partner; −1
	// where the reason is an operation.
	Atom int
}

// sameAngle (degrees) is the distance below which two marks are one; marks that
// differ are farther apart by far, rounding is far smaller.
const sameAngle = 1e-6

// Marks are the angles at which a turn of partner from into partner to, both
// from 0, brings one of the two to a special place: where it is symmetric or
// antisymmetric under more operations, so that it meets their axis or lies in
// or square to their plane, or, where no operation tells directions apart (in
// pairs of complex conjugates), where an atom has its largest part. They rise.
//
// Partner v = cos θ·p + sin θ·q has the sign ±1 under an operation with matrix D
// where (D ∓ 1)v = 0: the direction of the least eigenvalue, zero, of the square
// form of that within the plane of p and q, if the other one is not zero too.
func (o *Orbitals) Marks(irrep, from, to int) []Mark {
	ir := o.Irreps[irrep]
	if from < 0 || to < 0 || from >= ir.Dimension || to >= ir.Dimension || from == to {
		return nil
	}
	var marks marker
	for r, m := range ir.Matrices {
		for _, sign := range []int{1, -1} {
			if angle, ok := specialIn(m, from, to, float64(sign)); ok {
				marks.add(angle, from, to, MarkReason{Operation: r, Sign: sign, Atom: -1})
			}
		}
	}
	if len(marks) == 0 {
		o.markAtoms(&marks, irrep, from, to)
	}
	slices.SortFunc(marks, func(a, b Mark) int { return cmp.Compare(a.Angle, b.Angle) })
	for _, m := range marks {
		slices.SortStableFunc(m.Reasons, func(a, b MarkReason) int { return cmp.Compare(a.Partner, b.Partner) })
	}
	return marks
}

// specialIn is the angle at which a vector in the plane of two partners is an
// eigenvector with a sign; ok is false if none or all of the plane is.
func specialIn(d *mat.Dense, from, to int, sign float64) (angle float64, ok bool) {
	n, _ := d.Dims()
	aa, bb, ab := 0.0, 0.0, 0.0
	for i := range n {
		a, b := d.At(i, from), d.At(i, to)
		if i == from {
			a -= sign
		}
		if i == to {
			b -= sign
		}
		aa, bb, ab = aa+a*a, bb+b*b, ab+a*b
	}
	return leastDirection(aa, bb, ab)
}

// leastDirection is the angle, in degrees from 0 to below 180, of the vector
// on which the form (aa, ab; ab, bb) is zero; ok is false if there is none, or
// the form is zero everywhere.
func leastDirection(aa, bb, ab float64) (angle float64, ok bool) {
	const zero = 1e-9
	mean, half := (aa+bb)/2, math.Hypot((aa-bb)/2, ab)
	if mean-half > zero || mean+half < 1e-6 {
		return 0, false
	}
	return halfTurn(math.Atan2(2*ab, aa-bb)/2 + math.Pi/2), true
}

// halfTurn is an angle (radians) in degrees from 0 to below 180, exact near
// whole degrees.
func halfTurn(angle float64) float64 {
	degrees := math.Mod(angle*180/math.Pi, 180)
	if degrees < 0 {
		degrees += 180
	}
	if whole := math.Round(2*degrees) / 2; math.Abs(whole-degrees) < sameAngle {
		degrees = whole
	}
	return math.Mod(degrees, 180)
}

// markAtoms marks where an atom has its largest part in a partner.
func (o *Orbitals) markAtoms(marks *marker, irrep, from, to int) {
	set := o.of(irrep)
	if len(set) == 0 {
		return
	}
	p, q := set[0][from].Coefficients, set[0][to].Coefficients
	for site := range o.Group.Sites.Positions {
		aa, bb, ab := 0.0, 0.0, 0.0
		for i, f := range o.Functions {
			if f.Site == site {
				aa, bb, ab = aa+p[i]*p[i], bb+q[i]*q[i], ab+p[i]*q[i]
			}
		}
		// The part of an atom depends on the direction if the form does.
		if math.Hypot((aa-bb)/2, ab) > 1e-6 {
			marks.add(halfTurn(math.Atan2(2*ab, aa-bb)/2), from, to, MarkReason{Operation: -1, Atom: site})
		}
	}
}

type marker []Mark

// add enters an angle of partner from as its own, with the opposite one, and
// with a quarter turn less that at which partner to takes the place.
func (m *marker) add(angle float64, from, to int, why MarkReason) {
	for _, at := range []struct {
		angle   float64
		partner int
	}{{angle, from}, {angle + 180, from}, {angle + 90, to}, {angle + 270, to}} {
		why.Partner = at.partner
		m.enter(math.Mod(at.angle, 360), why)
	}
}

func (m *marker) enter(angle float64, why MarkReason) {
	for i := range *m {
		if d := math.Abs((*m)[i].Angle - angle); d < sameAngle || d > 360-sameAngle {
			(*m)[i].Reasons = append((*m)[i].Reasons, why)
			return
		}
	}
	*m = append(*m, Mark{angle, []MarkReason{why}})
}

// Snapped is the nearest mark within a reach (degrees) of an angle (degrees);
// ok is false if there is none.
func Snapped(marks []Mark, angle, reach float64) (Mark, bool) {
	var best Mark
	found := false
	for _, m := range marks {
		d := math.Abs(math.Remainder(m.Angle-angle, 360))
		if d <= reach {
			best, reach, found = m, d, true
		}
	}
	return best, found
}

// Symmetries tells of each operation of a finite group whether it leaves a group
// orbital as it is (+1), changes its sign (−1), or makes something else of it
// (0).
func (o *Orbitals) Symmetries(orbital *orbitals.GroupOrbital) []int {
	matrices := o.Irreps[orbital.Irrep].Matrices
	out := make([]int, len(matrices))
	for r, m := range matrices {
		if x := m.At(orbital.Partner, orbital.Partner); math.Abs(math.Abs(x)-1) < 1e-9 {
			out[r] = int(math.Round(x))
		}
	}
	return out
}
