package work

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// An Element is a symmetry element of a Group: an axis, a plane or the centre.
type Element struct {
	Kind ElementKind
	// Direction is that of the axis, or the normal of the plane; zero for the
	// centre.
	Direction mgl64.Vec3
	// Name is that of the operation that the element is named by: the smallest
	// proper rotation of an axis, or its smallest improper one where that has
	// twice the even order (S4 on the z of D2d) or no proper one stands beside
	// it; "C∞" for the axis of a linear molecule.
	Name string
	// Order is n of the name of an axis; 0 for C∞, a plane and the centre.
	Order int
}

// An ElementKind tells axes, planes and the centre apart.
type ElementKind int

// The kinds.
const (
	ElementAxis ElementKind = iota
	ElementPlane
	ElementCentre
)

// Elements lists the symmetry elements, each once, in the order of the
// operations. The planes and axes of a linear molecule that belong to every φ
// are left out, and of a single atom all but the centre.
func (g *Group) Elements() []Element {
	var out []Element
	if g.Fit.Setting.Infinite() {
		z := mgl64.Vec3{0, 0, 1}
		switch g.Fit.Setting.Symbol {
		case "C∞v":
			return []Element{{Kind: ElementAxis, Direction: z, Name: "C∞"}}
		case "D∞h":
			return []Element{{Kind: ElementAxis, Direction: z, Name: "C∞"}, {Kind: ElementPlane, Direction: z, Name: "σh"}, {Kind: ElementCentre, Name: "i"}}
		}
		return []Element{{Kind: ElementCentre, Name: "i"}}
	}
	at := func(kind ElementKind, direction mgl64.Vec3) int {
		for i, e := range out {
			if e.Kind == kind && math.Abs(math.Abs(e.Direction.Dot(direction))-1) < 1e-6 {
				return i
			}
		}
		out = append(out, Element{Kind: kind, Direction: direction})
		return len(out) - 1
	}
	for _, o := range g.Operations(0) {
		n := o.Turn.Den
		switch {
		case o.HasCentre():
			out = append(out, Element{Kind: ElementCentre, Name: o.Name})
		case o.HasPlane() && !o.HasAxis():
			out[at(ElementPlane, o.Axis)].Name = o.Name
		case o.HasAxis() && o.Turn.Num == 1:
			e := &out[at(ElementAxis, o.Axis)]
			principal := o.Improper && n == 2*e.Order && e.Order%2 == 0
			if e.Order == 0 || principal || !o.Improper && n > e.Order && e.Name[0] != 'S' {
				e.Name, e.Order = o.Name, n
			}
		}
	}
	return out
}
