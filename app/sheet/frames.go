package sheet

import (
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/symmetry/message"
)

// frames shows the structure, or the group orbital that is chosen, in the frame
// in force and in the one that is held beside it, both seen from one place, and
// says what is called differently.
func (m *maker) frames() (*Sheet, error) {
	g, err := m.group()
	if err != nil {
		return nil, err
	}
	e, err := g.Held(m.study.Held)
	if err != nil {
		return nil, err
	}
	if e == nil {
		return nil, message.Errorf("no second frame is chosen")
	}
	second := m.secondStudy(g, e)
	cells := make([]cell, 2)
	turn := e.Frame.Turn.Transpose()
	for i, s := range []study.Study{m.study, second} {
		if cells[i], err = m.frameCell(s, i == 1); err != nil {
			return nil, err
		}
	}
	cells[1].turn = &turn
	cells[0].body.Reserve(cells[1].body, turn)
	both := grid{rows: []row{{unit: 2, cells: cells}}, widest: 80, side: m.labelRoom(2)}
	both.view = picture.NewViewpoint(m.study.Camera, cells[0].body)
	c := card{group: g, bare: true, lobes: len(m.study.Basis) > 0 && m.study.Projection.Irrep != ""}
	c.lines = append(c.lines, cardLine{notation.Words(g.Molecule.Title + "   ").Then(notation.Group(g.Fit.Setting.Symbol)), m.title()})
	for _, t := range m.renamed(g, e) {
		c.lines = append(c.lines, cardLine{t, m.text()})
	}
	content, err := m.compose(both, c)
	if err != nil {
		return nil, err
	}
	return m.finish(m.say("captions.titleFrames", g.Molecule.Title, g.Fit.Setting.Symbol), content)
}

// secondStudy is the study in the second frame. A group orbital that is not
// chosen there is the one of the same irrep by its name there.
func (m *maker) secondStudy(g *work.Group, e *work.Exchange) study.Study {
	s := m.study
	s.Frame, s.Z, s.X = s.Held.Frame, s.Held.Z, s.Held.X
	if s.Held.Irrep != "" {
		s.Projection.Irrep, s.Projection.Copy, s.Projection.Partner = s.Held.Irrep, s.Held.Copy, s.Held.Partner
		return s
	}
	if e.Names == nil || s.Projection.Irrep == "" {
		return s
	}
	if i, err := work.FindIrrep(s.Projection.Irrep, g.Fit.Setting.Symbol, g.Fit.Setting.Irreps); err == nil {
		s.Projection.Irrep = e.Fit.Setting.Irreps[e.Names.Irreps[i]].Label
	}
	return s
}

// frameCell is the panel of one frame.
func (m *maker) frameCell(s study.Study, second bool) (cell, error) {
	var c cell
	g, err := m.work.Group(m.ctx, s)
	if err != nil {
		return c, err
	}
	name := frameName(s.Frame, s.Z, s.X, m)
	c.title, c.name = notation.Sentence(name), m.say("captions.frame", name)
	c.form, c.small = notation.Sentence(notation.ShortConventionIn(m.texts, g.Fit)), true
	letters := plainLetters
	if second {
		for i := range letters {
			letters[i] = letters[i].Then(notation.Text{{Text: "2", Place: notation.Sub}})
		}
	}
	if len(s.Basis) > 0 && s.Projection.Irrep != "" {
		o, err := m.work.Orbitals(m.ctx, s)
		if err != nil {
			return c, err
		}
		orbital, err := o.Orbital(s.Projection)
		if err != nil {
			return c, err
		}
		c.body = m.bodies.Lobes(o.Basis, orbital.Coefficients, s)
		irrep := o.Irreps[orbital.Irrep]
		c.title = c.title.Then(notation.Words(":  "), notation.OrbitalText(irrep.Label))
		if irrep.Dimension > 1 {
			c.which = notation.Words(m.say("captions.partnerOf", orbital.Partner+1, irrep.Dimension))
		}
	} else {
		c.body = m.bodies.Molecule(g, s)
	}
	c.body.AddAxes(letters)
	c.named = true
	return c, nil
}

// renamed says which irreps and which classes have other names in the second
// frame.
func (m *maker) renamed(g *work.Group, e *work.Exchange) []notation.Text {
	here, there := g.Fit.Setting, e.Fit.Setting
	if e.Names == nil {
		return []notation.Text{notation.Words(m.say("captions.sameNames"))}
	}
	var out []notation.Text
	list := func(pairs [][2]notation.Text) notation.Text {
		var t notation.Text
		for i, p := range pairs {
			if i > 0 {
				t = t.Then(notation.Words(", "))
			}
			t = t.Then(p[0], notation.Words("\u00a0→\u00a0"), p[1])
		}
		return t
	}
	var irreps, classes [][2]notation.Text
	for i, ir := range here.Irreps {
		if other := there.Irreps[e.Names.Irreps[i]].Label; other != ir.Label {
			irreps = append(irreps, [2]notation.Text{notation.Irrep(ir.Label), notation.Irrep(other)})
		}
	}
	for _, c := range here.Classes {
		if other := there.Classes[there.Operations[e.Names.Operations[c.Members[0]]].Class].Name; other != c.Name {
			classes = append(classes, [2]notation.Text{notation.Operation(c.Name), notation.Operation(other)})
		}
	}
	if len(irreps) == 0 {
		out = append(out, notation.Words(m.say("captions.sameNames")))
	} else {
		out = append(out, notation.Fill(m.say("captions.irreps"), list(irreps)))
	}
	if len(classes) > 0 {
		out = append(out, notation.Fill(m.say("captions.classes"), list(classes)))
	}
	return out
}

// labelRoom is the room on both sides of bodies for names beside them, in a
// sheet with a number of columns.
func (m *maker) labelRoom(columns int) float64 {
	if m.study.Look.NoLabels {
		return 1
	}
	return min(6, m.width/float64(10*columns)) * max(1, min(m.size/textSize, 2))
}

// view is from where a cell is seen.
func (c cell) seen(v picture.Viewpoint) picture.Viewpoint {
	if c.turn == nil {
		return v
	}
	return v.Turned(mgl64.Mat3(*c.turn))
}
