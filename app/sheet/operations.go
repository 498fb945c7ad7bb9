package sheet

import (
	"strconv"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry/message"
)

// operations is a strip with a panel for each operation, by class, that shows
// where the chosen function or group orbital goes.
func (m *maker) operations() (*Sheet, error) {
	subject, err := m.subject()
	if err != nil {
		return nil, err
	}
	b := subject.basis
	all := b.Operations(m.study.Angle)
	if len(all) > mostPanels {
		return nil, message.Errorf("%s has %d operations; a sheet holds %d panels", b.Fit.Setting.Symbol, len(all), mostPanels)
	}
	g := grid{flows: true, widest: m.largest(), unlettered: len(all) > 26}
	first := m.bodies.Lobes(b, subject.coefficients, m.study)
	g.view = picture.NewViewpoint(m.study.Camera, first)
	bodies := []*picture.Body{first}
	for i, op := range all { // class by class
		c := cell{body: m.bodies.Moved(b, subject.coefficients, op, m.study), title: notation.Operation(op.Name), name: op.Name}
		c.body.AddElements([]work.Operation{op}, g.view, false)
		c.form = subject.image(op)
		bodies = append(bodies, c.body)
		if i == 0 || b.Fit.Setting.Infinite() || op.Class != all[i-1].Class {
			g.rows = append(g.rows, row{unit: 1, label: m.classText(b.Group, op)})
			g.headed = g.headed || len(g.rows[0].label) > 0
		}
		r := &g.rows[len(g.rows)-1]
		r.cells = append(r.cells, c)
	}
	g.view = picture.NewViewpoint(m.study.Camera, bodies...)
	c := card{group: b.Group, lobes: true, key: m.bodies.Carriers(b, m.study)}
	c.lines = append(c.lines, cardLine{subject.text, m.title()})
	if t := m.basisText(b, subject.shown); len(t) > 0 {
		c.lines = append(c.lines, cardLine{t, m.text()})
	}
	content, err := m.compose(g, c)
	if err != nil {
		return nil, err
	}
	return m.finish(m.say("captions.titleOperations", b.Molecule.Title, b.Fit.Setting.Symbol, subject.name), content)
}

func (m *maker) classText(g *work.Group, op work.Operation) notation.Text {
	if g.Fit.Setting.Infinite() {
		return nil
	}
	return notation.Operation(g.Fit.Setting.Classes[op.Class].Name)
}

// A subject is what the operations are done on.
type subject struct {
	basis        *work.Basis
	coefficients []float64
	shown        []float64 // 1 for the functions that are named in the card
	text         notation.Text
	name         string
	image        func(work.Operation) notation.Text
}

// subject is the function or group orbital that the study chooses; without a
// choice the first function.
func (m *maker) subject() (subject, error) {
	p := m.study.Projection
	if p.TheSubject() == study.SubjectOrbital {
		return m.orbitalSubject()
	}
	b, err := m.work.Basis(m.ctx, m.study)
	if err != nil {
		return subject{}, err
	}
	n := max(p.Function, 1)
	if n > len(b.Functions) {
		return subject{}, message.Errorf("function %d does not exist; the basis has %d", n, len(b.Functions))
	}
	s := subject{basis: b, coefficients: make([]float64, len(b.Functions)), shown: make([]float64, len(b.Functions))}
	s.coefficients[n-1] = 1
	for i, f := range b.Functions {
		if f.Orbit == b.Functions[n-1].Orbit {
			s.shown[i] = 1
		}
	}
	s.name = notation.Phi(n - 1)
	s.text = notation.Fill(m.say("captions.operations"), notation.PhiText(strconv.Itoa(n)))
	representation, err := m.representation(b)
	if err != nil {
		return s, err
	}
	s.image = func(op work.Operation) notation.Text {
		if representation == nil {
			return nil
		}
		return notation.PhiText(strconv.Itoa(n)).Then(notation.Words(" → "), combinationText(representation.Image(op.Index, n-1)))
	}
	return s, nil
}

// representation is what the operations make of a basis; nil for an infinite
// group.
func (m *maker) representation(b *work.Basis) (*orbitals.Representation, error) {
	if b.Fit.Setting.Infinite() {
		return nil, nil
	}
	return b.Representation()
}

func (m *maker) orbitalSubject() (subject, error) {
	o, err := m.work.Orbitals(m.ctx, m.study)
	if err != nil {
		return subject{}, err
	}
	chosen, err := o.Orbital(m.study.Projection)
	if err != nil {
		return subject{}, err
	}
	s := subject{basis: o.Basis, coefficients: chosen.Coefficients, shown: chosen.Coefficients}
	irrep := o.Irreps[chosen.Irrep]
	label := notation.OrbitalText(irrep.Label)
	s.name = notation.Orbital(irrep.Label)
	s.text = notation.Fill(m.say("captions.operations"), label)
	if irrep.Dimension > 1 {
		s.text = notation.Fill(m.say("captions.operationsPartner", chosen.Partner+1), label)
		s.name = m.say("captions.partner", s.name, chosen.Partner+1)
	}
	s.image = func(op work.Operation) notation.Text {
		if op.Index < 0 || op.Index >= len(irrep.Matrices) {
			return nil
		}
		d := irrep.Matrices[op.Index]
		var terms []orbitals.Term
		for k := range irrep.Dimension {
			if x := d.At(k, chosen.Partner); x > 1e-9 || x < -1e-9 {
				terms = append(terms, orbitals.Term{Function: k, Coefficient: x})
			}
		}
		return notation.Words("→ ").Then(partnersText(terms, irrep.Dimension))
	}
	return s, nil
}

// combinationText sets a sum of functions of the basis.
func combinationText(terms []orbitals.Term) notation.Text {
	return sumText(terms, func(i int) notation.Text { return notation.PhiText(strconv.Itoa(i + 1)) })
}

// partnersText sets a sum of partners: the first, second … as ψ with an index.
func partnersText(terms []orbitals.Term, dimension int) notation.Text {
	return sumText(terms, func(i int) notation.Text {
		t := notation.Text{{Text: "ψ", Italic: true}}
		if dimension > 1 {
			t = t.Then(notation.Text{{Text: strconv.Itoa(i + 1), Place: notation.Sub}})
		}
		return t
	})
}

func sumText(terms []orbitals.Term, name func(int) notation.Text) notation.Text {
	var t notation.Text
	for _, term := range terms {
		c := term.Coefficient
		switch {
		case c < 0 && len(t) == 0:
			t = t.Then(notation.Words("−"))
		case c < 0:
			t = t.Then(notation.Words(" − "))
		case len(t) > 0:
			t = t.Then(notation.Words(" + "))
		}
		if c < 0 {
			c = -c
		}
		if c < 1-1e-9 || c > 1+1e-9 {
			t = t.Then(notation.Words(notation.ExactCoefficient(c) + " "))
		}
		t = t.Then(name(term.Function))
	}
	return t
}
