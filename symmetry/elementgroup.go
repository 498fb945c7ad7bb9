package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// generate closes a set of elements of a cloud under multiplication, E first;
// it returns nil when more than limit come up.
func (c *cloud) generate(generators []*element, limit int) []*element {
	identity := &element{permutation: make([]int32, len(c.at)), matrix: mgl64.Ident3()}
	for i := range identity.permutation {
		identity.permutation[i] = int32(i)
	}
	group := []*element{identity}
	known := map[elementKey]bool{identity.key(): true}
	add := func(e *element) {
		if k := e.key(); !known[k] {
			known[k] = true
			group = append(group, e)
		}
	}
	for i := 0; i < len(group); i++ {
		for _, g := range generators {
			add(g.times(group[i]))
			if len(group) > limit {
				return nil
			}
		}
	}
	return group
}

// times is the element that does b first.
func (e *element) times(b *element) *element {
	p := make([]int32, len(b.permutation))
	for i, j := range b.permutation {
		p[i] = e.permutation[j]
	}
	return &element{permutation: p, improper: e.improper != b.improper, matrix: e.matrix.Mul3(b.matrix)}
}

// order is the smallest power that is E.
func (e *element) order() int {
	n := 1
	seen := make([]bool, len(e.permutation))
	for i := range e.permutation {
		length := 0
		for j := i; !seen[j]; j = int(e.permutation[j]) {
			seen[j] = true
			length++
		}
		if length > 0 {
			n = n / gcd(n, length) * length
		}
	}
	if e.improper && n%2 == 1 {
		n *= 2
	}
	return n
}

// axis is that of a rotation or the normal of a plane; zero for E and i.
func (e *element) axis() mgl64.Vec3 {
	m := e.matrix
	if e.improper {
		m = m.Mul(-1)
	}
	return rotationAxis(m)
}

// A recognized group is one of elements whose kind and rough axes are known.
type recognized struct {
	kind kind
	z, x mgl64.Vec3 // unit, perpendicular; x is zero where it is free
}

// recognize tells which point group the elements form, and along which lines
// (roughly, in the input's axes) its axes lie. False: they form none, which
// happens when elements that are no symmetries of anything nearby were taken
// together.
func recognize(group []*element) (recognized, bool) {
	var proper, improper []*element
	highest := group[0]
	for _, e := range group {
		if e.improper {
			improper = append(improper, e)
			continue
		}
		proper = append(proper, e)
		if e.order() > highest.order() {
			highest = e
		}
	}
	n, top := len(proper), highest.order()
	switch {
	case top > MaxFold, len(improper) > 0 && len(improper) != n:
		return recognized{}, false
	case top == n:
		return recognizeCyclic(n, highest.axis(), improper)
	case n == 12 && top == 3, n == 24 && top == 4, n == 60 && top == 5:
		return recognizePolyhedral(n, proper, improper)
	case n == 2*top:
		return recognizeDihedral(top, proper, improper, highest.axis())
	}
	return recognized{}, false
}

func (e *element) isPlane() bool     { return e.improper && e.matrix.Trace() > 0.5 && e.order() == 2 }
func (e *element) isInversion() bool { return e.improper && e.matrix.Trace() < -2.5 }

// alongLine tells whether two unit axes are closer to parallel than to square.
func alongLine(a, b mgl64.Vec3) bool { return math.Abs(a.Dot(b)) > 0.7 }

func recognizeCyclic(n int, z mgl64.Vec3, improper []*element) (recognized, bool) {
	if len(improper) == 0 {
		return recognized{kind: kind{cyclic, n}, z: z}, true
	}
	for _, e := range improper {
		if !e.isPlane() {
			continue
		}
		normal := e.axis()
		if n == 1 || alongLine(normal, z) {
			if n == 1 {
				z = normal
			}
			return recognized{kind: kind{cyclicHorizontal, n}, z: z}, true
		}
		return recognized{kind{pyramidal, n}, z, normal.Cross(z).Normalize()}, true
	}
	return recognized{kind: kind{improperCyclic, n}, z: z}, true
}

func recognizeDihedral(n int, proper, improper []*element, z mgl64.Vec3) (recognized, bool) {
	k := kind{dihedral, n}
	inverts, plane := false, false
	for _, e := range improper {
		inverts = inverts || e.isInversion()
		plane = plane || e.isPlane() && alongLine(e.axis(), z)
		if n == 2 && e.order() == 4 { // S4: then this is the z of D2d
			z = e.axis()
		}
	}
	switch {
	case len(improper) == 0:
	case n == 2 && inverts, n > 2 && plane:
		k.family = prismatic
	default:
		k.family = antiprismatic
	}
	for _, e := range proper[1:] {
		if a := e.axis(); e.order() == 2 && math.Abs(a.Dot(z)) < 0.3 {
			return recognized{k, z, a.Sub(z.Mul(a.Dot(z))).Normalize()}, true
		}
	}
	return recognized{}, false
}

func recognizePolyhedral(n int, proper, improper []*element) (recognized, bool) {
	k := kind{}
	inverts := false
	for _, e := range improper {
		inverts = inverts || e.isInversion()
	}
	switch {
	case n == 12 && len(improper) == 0:
		k.family = tetrahedralProper
	case n == 12 && inverts:
		k.family = pyritohedral
	case n == 12:
		k.family = tetrahedral
	case len(improper) > 0 && !inverts:
		return recognized{}, false
	case n == 24:
		k.family = octahedralProper
	case n == 60:
		k.family = icosahedralProper
	}
	if n > 12 && inverts {
		k.family++ // O → Oh, I → Ih
	}
	along := 2 // the order of the operations whose axes become x, y and z
	if n == 24 {
		along = 4
	}
	var z mgl64.Vec3
	for _, e := range proper[1:] {
		a := e.axis()
		switch {
		case e.order() != along:
		case z == (mgl64.Vec3{}):
			z = a
		case math.Abs(a.Dot(z)) < 0.2: // the next nearest angle is 72°
			return recognized{k, z, a.Sub(z.Mul(a.Dot(z))).Normalize()}, true
		}
	}
	return recognized{}, false
}
