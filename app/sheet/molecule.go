package sheet

import (
	"fmt"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/work"
)

// molecule is the structure with its axes; with elements also a panel for each
// class of symmetry elements. An operation that is chosen shows its own element
// alone.
func (m *maker) molecule(elements bool) (*Sheet, error) {
	g, err := m.group()
	if err != nil {
		return nil, err
	}
	first := cell{
		body: m.bodies.Molecule(g, m.study), named: true, name: m.say("captions.structure"),
		title: notation.Words(g.Molecule.Title + "   ").Then(notation.Group(g.Fit.Setting.Symbol)),
	}
	kinds := elementKinds(g, m.study.Angle)
	if !elements || m.study.Operation != "" || len(kinds) == 0 {
		return m.single(g, first, card{group: g, lines: []cardLine{{first.title, m.title()}}}, m.say("captions.structureInAxes"))
	}
	r := row{unit: 1}
	alone := m.study // each panel has the elements of its class
	alone.Look.Elements = false
	first.body = m.bodies.Molecule(g, alone)
	for _, k := range kinds {
		r.cells = append(r.cells, cell{body: m.bodies.Molecule(g, alone), title: k.title, name: k.name})
	}
	v := picture.NewViewpoint(m.study.Camera, r.cells[0].body)
	bodies := []*picture.Body{first.body}
	for i, k := range kinds {
		r.cells[i].body.AddElements(k.operations, v, false)
		bodies = append(bodies, r.cells[i].body)
	}
	v = picture.NewViewpoint(m.study.Camera, bodies...)
	key := first.body
	content, err := m.compose(grid{rows: []row{r}, view: v, widest: m.largest()}, card{group: g, key: key, lines: []cardLine{{first.title, m.title()}}})
	if err != nil {
		return nil, err
	}
	return m.finish(m.say("captions.titleElements", g.Molecule.Title, g.Fit.Setting.Symbol), content)
}

// An elementKind is symmetry elements of one class.
type elementKind struct {
	title      notation.Text
	name       string
	operations []work.Operation
}

// elementKinds gathers the symmetry elements of a group: axes, planes and the
// centre, each class once. Powers have the axis of the operation itself, and a
// rotatory reflection of odd order has axis and plane of two others.
func elementKinds(g *work.Group, angle float64) []elementKind {
	var out []elementKind
	all := g.Operations(angle)
	if g.Fit.Setting.Infinite() {
		for _, o := range all {
			if o.Steps() > 0 {
				out = append(out, elementKind{notation.Operation(o.Name), o.Name, []work.Operation{o}})
			}
		}
		return out
	}
	classes := map[int]int{}
	for _, o := range all {
		if o.Steps() == 0 || o.HasAxis() && o.Turn.Num != 1 || o.HasAxis() && o.HasPlane() && o.Turn.Den%2 == 1 {
			continue
		}
		if o.HasAxis() && !o.HasPlane() && isPower(all, o) {
			continue
		}
		k, known := classes[o.Class]
		if !known {
			k = len(out)
			classes[o.Class] = k
			out = append(out, elementKind{})
		}
		out[k].operations = append(out[k].operations, o)
	}
	for i := range out {
		k := &out[i]
		n := distinctElements(k.operations)
		symbol := elementSymbol(k.operations[0].Name)
		count := ""
		if n > 1 {
			count = fmt.Sprint(n)
		}
		k.title = notation.Words(count).Then(notation.Operation(symbol))
		k.name = count + symbol
	}
	return out
}

// isPower tells whether an axis is also that of a rotation of a higher order
// of which the operation is a power: the C2 that is C4².
func isPower(all []work.Operation, o work.Operation) bool {
	for _, other := range all {
		if other.HasAxis() && !other.HasPlane() && other.Turn.Den > o.Turn.Den && other.Turn.Den%o.Turn.Den == 0 && parallel(other, o) {
			return true
		}
	}
	return false
}

func parallel(a, b work.Operation) bool {
	d := a.Axis.Dot(b.Axis)
	return d > 1-1e-6 || d < -1+1e-6
}

func distinctElements(operations []work.Operation) int {
	n := 0
	for i, o := range operations {
		same := false
		for _, p := range operations[:i] {
			same = same || parallel(o, p)
		}
		if !same {
			n++
		}
	}
	return n
}

// elementSymbol is the name of an operation without what tells it from others
// of its class: "C3" of "C3(1)", "σd" of "σd(2)".
func elementSymbol(name string) string {
	for i, r := range name {
		if r == '(' {
			return name[:i]
		}
	}
	return name
}
