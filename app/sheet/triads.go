package sheet

import (
	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/symmetry"
)

// withSecond draws the axes of the frame in force and, dashed, those of the second
// one into a panel, if a second frame is held against it; the card then tells both
// rules, and what is called differently, in the place of its own triad.
func (m *maker) withSecond(g *work.Group, c *cell, d *card) error {
	e, err := g.Held(m.study.Held)
	if err != nil || e == nil {
		return err
	}
	c.body.AddTriads(e)
	d.bare = true
	if m.figure.NoCard {
		return nil
	}
	s := m.study
	d.lines = append(d.lines,
		cardLine{m.ruleLine("", frameName(s.Frame, s.Z, s.X, m), g.Fit), m.text()},
		cardLine{m.ruleLine("2", frameName(s.Held.Frame, s.Held.Z, s.Held.X, m), e.Fit), m.text()})
	for _, t := range m.renamed(g, e) {
		d.lines = append(d.lines, cardLine{t, m.text()})
	}
	return nil
}

// ruleLine tells by which rule the axes with an index lie.
func (m *maker) ruleLine(index, name string, fit *symmetry.Fit) notation.Text {
	var t notation.Text
	for i, letter := range plainLetters {
		if i > 0 {
			t = t.Then(notation.Words(", "))
		}
		t = t.Then(letter)
		if index != "" {
			t = t.Then(notation.Text{{Text: index, Place: notation.Sub}})
		}
	}
	return t.Then(notation.Words(" ("), notation.Sentence(name), notation.Words("): "), notation.Sentence(notation.ShortConventionIn(m.texts, fit)))
}

// ghostAlpha is how strongly axes show through bodies, of 255.
const ghostAlpha = 110

// ghostAxes draws the axes of a body lightly over its picture, so that one sees them
// where atoms and lobes cover them.
func (m *maker) ghostAxes(body *picture.Body, v picture.Viewpoint, p picture.Panel) []Item {
	const width = 0.2
	var out []Item
	ink := m.palette.Ink
	ink.A = ghostAlpha
	for _, l := range body.AxisLines(v, p) {
		if onPanel(l.From, p) && onPanel(l.To, p) {
			out = append(out, Line{Points: [][2]float64{l.From, l.To}, Width: width * m.weight(), Dash: l.Dash, Color: ink})
		}
	}
	return out
}

func onPanel(at [2]float64, p picture.Panel) bool {
	return at[0] >= 0 && at[1] >= 0 && at[0] <= p.Width && at[1] <= p.Height
}

// frameName is what a choice of axes is called: a rule in English as in the
// commands.
func frameName(frame, z, x string, m *maker) string {
	switch {
	case frame == "" && (z != "" || x != ""):
		return m.say("captions.byHand")
	case frame == "":
		frame = symmetry.FrameDefault
	}
	if assets.Language(m.figure.Language) == assets.German {
		return notation.RuleLabel(m.texts, frame)
	}
	return frame
}

// HoldsSecond tells whether a kind of sheet shows a second frame that a study
// holds: two panels in two frames, or one picture with both triads.
func HoldsSecond(s study.Study) bool {
	switch Kind(s) {
	case Frames, One:
		return true
	case Molecule:
		return s.Figure.Sheet != Molecule || s.Operation != ""
	}
	return false
}
