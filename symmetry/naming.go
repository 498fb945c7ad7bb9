package symmetry

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
)

// prefix is the name of an operation up to its exponent and its bracket: the
// symbol of the operation that it is a power of, with h, v, d and primes.
func (k kind) prefix(o Operation) string {
	base := o.Turn.baseSymbol()
	vertical := math.Abs(o.Axis.Z()) < 1e-9
	switch {
	case base == "C2" && vertical && k.family >= dihedral && k.family <= antiprismatic:
		return base + k.flipPrimes(azimuthStep(o.Axis, k.n))
	case base == "σ":
		return base + k.planeIndex(o)
	}
	return base
}

// azimuthStep counts the azimuth of a line in xy in steps of π/n.
func azimuthStep(a mgl64.Vec3, n int) int {
	return int(math.Round(math.Atan2(a.Y(), a.X()) / math.Pi * float64(n)))
}

// flipPrimes tells C2′ from C2″ by the azimuth of the axis, in steps of π/n
// from x. Where all C2 square to z are equivalent, or are told apart by
// letters (D2), they carry no prime; in Dnd with even n one, for the C2 on z.
func (k kind) flipPrimes(step int) string {
	switch {
	case k.n%2 == 1, k.n == 2 && k.family != antiprismatic:
		return ""
	case k.family == antiprismatic, step%2 == 0:
		return "'"
	}
	return "''"
}

// planeIndex tells σh, σv and σd apart.
func (k kind) planeIndex(o Operation) string {
	horizontal := math.Abs(o.Axis.Z()) > 0.5
	odd := azimuthStep(traceOf(o.Axis), k.n)%2 != 0
	switch k.family {
	case cyclicHorizontal, pyritohedral:
		return "h"
	case pyramidal:
		switch {
		case k.n == 2 && odd:
			return "v'"
		case k.n%2 == 0 && odd:
			return "d"
		}
		return "v"
	case prismatic:
		switch {
		case k.n == 2:
			return ""
		case horizontal:
			return "h"
		case k.n%2 == 0 && odd:
			return "d"
		}
		return "v"
	case octahedral:
		if axisLetter(o.Axis) != 0 {
			return "h"
		}
		return "d"
	case icosahedral:
		return ""
	}
	return "d" // Dnd, Td
}

// traceOf is the line, square to z, in which the plane with this normal cuts
// xy; it points to positive x, else y.
func traceOf(normal mgl64.Vec3) mgl64.Vec3 {
	t := mgl64.Vec3{normal.Y(), -normal.X(), 0}
	if !positive(t) {
		t = t.Mul(-1)
	}
	return t
}

// axisLetter is 'x', 'y' or 'z' for a line along an axis of the frame, else 0.
func axisLetter(a mgl64.Vec3) byte {
	for i, letter := range []byte("xyz") {
		if math.Abs(math.Abs(a[i])-1) < 1e-9 {
			return letter
		}
	}
	return 0
}

// nameOperations gives every operation its name (the rule is in Operation's
// contract: a symbol, primes, and in brackets the axis, the plane or a number).
// Numbers run over the axes that have no letter, by azimuth and then by polar
// angle of the axis; planes that hold z are counted by the azimuth of their
// trace in xy, so that σv(1) holds C2(1).
func nameOperations(k kind, ops []Operation, prefixes []string) {
	numbered := map[string][]direction{}
	for i, o := range ops {
		if o.Axis == (mgl64.Vec3{}) || axisLetter(o.Axis) != 0 {
			continue
		}
		p, prefix := k.direction(o), prefixes[i]
		known := false
		for _, q := range numbered[prefix] {
			known = known || p.same(q)
		}
		if !known {
			numbered[prefix] = append(numbered[prefix], p)
		}
	}
	for _, list := range numbered {
		sort.Slice(list, func(a, b int) bool { return list[a].less(list[b]) })
	}
	for i := range ops {
		ops[i].Name = prefixes[i] + exponent(ops[i].Turn) + k.bracket(ops[i], prefixes[i], numbered[prefixes[i]])
	}
}

// bracket is what tells an operation from its like, with the brackets.
func (k kind) bracket(o Operation, prefix string, numbered []direction) string {
	switch letter := axisLetter(o.Axis); {
	case o.Axis == (mgl64.Vec3{}):
		return "" // E and i
	case prefix == "σh" && k.axial():
		return "" // there is only one
	case letter != 0 && strings.HasPrefix(prefix, "σ"):
		return map[byte]string{'x': "(yz)", 'y': "(xz)", 'z': "(xy)"}[letter]
	case letter != 0:
		return fmt.Sprintf("(%c)", letter)
	}
	for j, q := range numbered {
		if k.direction(o).same(q) {
			return fmt.Sprintf("(%d)", j+1)
		}
	}
	panic("symmetry: an axis that was not counted")
}

// A direction is where an axis points, in radians.
type direction struct{ azimuth, polar float64 }

// direction is that of the axis or normal by which an operation is counted; a
// plane that holds z in an axial group goes by its trace.
func (k kind) direction(o Operation) direction {
	a := o.Axis
	if o.Turn.baseSymbol() == "σ" && k.axial() && math.Abs(a.Z()) < 1e-9 {
		a = traceOf(a)
	}
	azimuth := math.Atan2(a.Y(), a.X())
	if azimuth < -1e-9 {
		azimuth += 2 * math.Pi
	}
	return direction{azimuth, math.Acos(mgl64.Clamp(a.Z(), -1, 1))}
}

// directionStep is less than the angle between any two axes of a group and
// more than their rounding errors.
const directionStep = 1e-6

func (d direction) same(e direction) bool {
	return math.Abs(d.azimuth-e.azimuth) < directionStep && math.Abs(d.polar-e.polar) < directionStep
}

func (d direction) less(e direction) bool {
	if math.Abs(d.azimuth-e.azimuth) > directionStep {
		return d.azimuth < e.azimuth
	}
	return d.polar < e.polar-directionStep
}

// exponent is "^k", or nothing for the first power.
func exponent(t Turn) string {
	if _, _, p := t.power(); p > 1 && t.baseSymbol() != "i" {
		return fmt.Sprintf("^%d", p)
	}
	return ""
}

// untagged is the name without its bracket.
func untagged(name string) string {
	name, _, _ = strings.Cut(name, "(")
	return name
}
