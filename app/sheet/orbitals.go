package sheet

import (
	"fmt"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry/message"
)

// all is the sheet of all group orbitals: a row an irrep, in columns by partner
// and copy.
func (m *maker) all() (*Sheet, error) {
	o, err := m.work.Orbitals(m.ctx, m.study)
	if err != nil {
		return nil, err
	}
	g := grid{widest: m.largest()}
	for i, irrep := range o.Irreps {
		r := row{label: notation.Irrep(irrep.Label), unit: irrep.Dimension}
		for k := range o.Projection.Orbitals {
			if orbital := &o.Projection.Orbitals[k]; orbital.Irrep == i {
				r.cells = append(r.cells, m.orbitalCell(o, orbital))
			}
		}
		if len(r.cells) > 0 {
			g.rows = append(g.rows, r)
		}
	}
	if g.cells() > mostPanels {
		return nil, message.Errorf("the basis has %d group orbitals; a sheet holds %d: choose an irrep", g.cells(), mostPanels)
	}
	return m.orbitalSheet(o, g, m.say("captions.allOrbitals"))
}

// mostPanels bounds a sheet to what can still be looked at.
const mostPanels = 400

// orbitals is the sheet of one group orbital, or of all partners of its set.
func (m *maker) orbitals(set bool) (*Sheet, error) {
	o, err := m.work.Orbitals(m.ctx, m.study)
	if err != nil {
		return nil, err
	}
	chosen, err := o.Orbital(m.study.Projection)
	if err != nil {
		return nil, err
	}
	label := notation.Orbital(o.Irreps[chosen.Irrep].Label)
	if !set || o.Irreps[chosen.Irrep].Dimension == 1 {
		c := m.orbitalCell(o, chosen)
		c.named = true
		d := card{group: o.Group, lobes: true}
		title := c.title
		if len(c.which) > 0 {
			title = title.Then(notation.Words("   "), c.which)
		}
		d.lines = append(d.lines, cardLine{title, m.title()})
		if len(c.form) > 0 && !m.figure.NoCoefficients {
			d.lines = append(d.lines, cardLine{c.form, m.text()})
		}
		if t := m.basisText(o.Basis, chosen.Coefficients); len(t) > 0 && m.width >= narrow {
			d.lines = append(d.lines, cardLine{t, m.text()})
		}
		return m.single(o.Group, c, d, m.say("captions.oneOrbital", label))
	}
	r := row{unit: o.Irreps[chosen.Irrep].Dimension}
	for k := range o.Projection.Orbitals {
		if orbital := &o.Projection.Orbitals[k]; orbital.Irrep == chosen.Irrep && orbital.Copy == chosen.Copy {
			r.cells = append(r.cells, m.orbitalCell(o, orbital))
		}
	}
	return m.orbitalSheet(o, grid{rows: []row{r}, widest: m.largest()}, m.say("captions.partners", label))
}

// orbitalCell is the panel of a group orbital.
func (m *maker) orbitalCell(o *work.Orbitals, orbital *orbitals.GroupOrbital) cell {
	irrep := o.Irreps[orbital.Irrep]
	c := cell{
		body:  m.bodies.Lobes(o.Basis, orbital.Coefficients, m.study),
		title: notation.OrbitalText(irrep.Label), name: notation.Orbital(irrep.Label),
	}
	if m.study.Look.Nodes {
		c.body.AddNodes(o.NodalPlanes(orbital))
	}
	which := ""
	if irrep.Dimension > 1 {
		which = m.say("captions.partnerOf", orbital.Partner+1, irrep.Dimension)
	}
	if n := o.Content[orbital.Irrep]; n > 1 {
		if which != "" {
			which += ", "
		}
		which += m.say("captions.copy", orbital.Copy+1)
	}
	if which != "" {
		c.which, c.name = notation.Words(which), c.name+" "+strings.ReplaceAll(which, "\u00a0", " ")
	}
	if form, ok := orbitals.FindClosedForm(orbital.Coefficients); ok && notation.Width(form.String()) <= longestClosed {
		c.form = notation.ClosedForm(form)
	}
	return c
}

// longestClosed is how many characters a closed form may have to be read below
// a panel.
const longestClosed = 110

// orbitalSheet lays out group orbitals with the card of their basis.
func (m *maker) orbitalSheet(o *work.Orbitals, g grid, what string) (*Sheet, error) {
	g.view = picture.NewViewpoint(m.study.Camera, g.rows[0].cells[0].body)
	if err := m.addOperation(o.Group, g); err != nil {
		return nil, err
	}
	c := card{group: o.Group, lobes: true, key: m.bodies.Carriers(o.Basis, m.study)}
	all := make([]float64, len(o.Basis.Functions))
	for i := range all {
		all[i] = 1
	}
	if t := m.basisText(o.Basis, all); len(t) > 0 {
		c.lines = append(c.lines, cardLine{t, m.text()})
	}
	c.lines = append(c.lines, cardLine{m.contentText(o), m.text()})
	content, err := m.compose(g, c)
	if err != nil {
		return nil, err
	}
	return m.finish(fmt.Sprintf("%s: %s (%s)", o.Molecule.Title, what, o.Fit.Setting.Symbol), content)
}

// contentText writes the content of a basis: "Γ = A1g + 2T1u".
func (m *maker) contentText(o *work.Orbitals) notation.Text {
	t := notation.Words("Γ = ")
	first := true
	for i, n := range o.Content {
		if n == 0 {
			continue
		}
		if !first {
			t = t.Then(notation.Words(" + "))
		}
		first = false
		if n > 1 {
			t = t.Then(notation.Words(fmt.Sprint(n)))
		}
		t = t.Then(notation.Irrep(o.Irreps[i].Label))
	}
	return t
}

// addOperation draws the symmetry elements of the operation that the study
// chooses in all panels.
func (m *maker) addOperation(g *work.Group, cells grid) error {
	if m.study.Operation == "" {
		return nil
	}
	op, err := g.Operation(m.study.Operation, m.study.Angle)
	if err != nil {
		return err
	}
	for _, r := range cells.rows {
		for _, c := range r.cells {
			c.body.AddElements([]work.Operation{op}, cells.view, false)
		}
	}
	return nil
}

// single is a sheet of one panel.
func (m *maker) single(g *work.Group, c cell, d card, what string) (*Sheet, error) {
	if err := m.withSecond(g, &c, &d); err != nil {
		return nil, err
	}
	v := picture.NewViewpoint(m.study.Camera, c.body)
	if m.study.Operation != "" {
		op, err := g.Operation(m.study.Operation, m.study.Angle)
		if err != nil {
			return nil, err
		}
		c.body.AddElements([]work.Operation{op}, v, false)
		v = picture.NewViewpoint(m.study.Camera, c.body)
		if len(d.lines) > 0 {
			d.lines[0].text = d.lines[0].text.Then(notation.Words("   "), notation.Operation(op.Name))
		}
	}
	// What a caption says stands beside the triad.
	c.title, c.which, c.form = nil, nil, nil
	content, err := m.compose(grid{rows: []row{{unit: 1, cells: []cell{c}}}, view: v, widest: m.inner(), side: m.labelRoom(1)}, d)
	if err != nil {
		return nil, err
	}
	return m.finish(fmt.Sprintf("%s: %s (%s)", g.Molecule.Title, what, g.Fit.Setting.Symbol), content)
}
