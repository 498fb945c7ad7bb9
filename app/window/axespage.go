//go:build cgo && !nowindow

package window

import (
	"strings"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/symmetry"
)

// axes is the page on which x, y and z are laid: by a rule, or each along one
// of the directions that are possible for this molecule.
func (d *pageDrawing) axes() {
	g := d.state.Group
	if g == nil {
		return
	}
	s := d.now()
	d.axesMessage()
	d.words(say("frames.byRule"), d.head)
	d.y += 2
	byHand := s.Z != "" || s.X != ""
	for _, e := range rulesOf(g) {
		name := e.Rule.Name
		on := !byHand && (s.Frame == name || s.Frame == "" && name == symmetry.FrameDefault)
		if name == work.RuleHeld {
			on = !byHand && s.Frame == ""
		}
		d.ruleRow("rule "+name, g, e, on, func() { d.chooseFrame(name) })
	}
	if g.Fit.Setting.Infinite() {
		d.words(say("frames.axesLinear"), d.quiet)
		return
	}
	d.heading(say("frames.zAlong"))
	d.axisChoices("z", g.ZChoices(), func(c work.AxisChoice) { d.setAxes("", c.Text, "") })
	d.heading(say("frames.xAlong"))
	d.axisChoices("x", g.XChoices(), func(c work.AxisChoice) { d.setAxes("", g.ZNow(), c.Text) })
	d.y += 8
	x := float64(pad)
	d.choice(&x, notation.Words(say("frames.typed")), chip{name: "type axes", hint: say("frames.typedHint"), do: d.askAxes, on: false})
	d.endChoices()
}

// axesMessage says, on top, why the axes that were asked for are not taken.
func (d *pageDrawing) axesMessage() {
	if d.pages.axesProblem != "" {
		d.words(d.pages.axesProblem, d.accent)
		d.y += 6
	}
	d.problem(work.ConcernFrame, work.ConcernZ, work.ConcernX)
}

// rulesOf lists the choices of axes that a rule gives, the default first and
// every one once.
func rulesOf(g *work.Group) []symmetry.Frame {
	var out []symmetry.Frame
	for _, f := range g.Fit.Frames() {
		switch f.Rule.Name {
		case symmetry.FrameExplicit:
		case symmetry.FrameDefault:
			out = append([]symmetry.Frame{f}, out...)
		default:
			out = append(out, f)
		}
	}
	return out
}

// ruleRow shows a rule in words, with its source.
func (d *pageDrawing) ruleRow(name string, g *work.Group, f symmetry.Frame, on bool, do func()) {
	d.row(name, ruleHint(f.Rule), on, do, func() {
		d.line(ruleLabel(f.Rule.Name), d.strong)
		for _, clause := range notation.ConventionTexts(texts(), g.Fit.In(f), g.CoreNames(), true) {
			d.line(clause, d.plain)
		}
		d.words(notation.SourceIn(texts(), f.Rule), d.quiet)
	})
}

// ruleLabel names a rule for the axes on a button.
func ruleLabel(name string) notation.Text {
	return notation.Sentence(notation.RuleLabel(texts(), name))
}

// ruleHint adds to the label of a rule its name for the commands, and who made
// it.
func ruleHint(rule symmetry.Rule) string {
	return say("frames.ruleHint", notation.RuleLabel(texts(), rule.Name), rule.Name, notation.SourceIn(texts(), rule))
}

// axisChoices shows the directions that an axis can take.
func (d *pageDrawing) axisChoices(axis string, choices []work.AxisChoice, do func(work.AxisChoice)) {
	x := float64(pad)
	for _, c := range choices {
		c := c
		d.choice(&x, axisText(d.state.Group, c), chip{
			name: axis + " " + c.Text, hint: say("frames.axisHint", axis), on: c.Now, do: func() { do(c) },
		})
	}
	d.endChoices()
}

// axisText names a direction: by its axis or plane, and by atoms.
func axisText(g *work.Group, c work.AxisChoice) notation.Text {
	const most = 3
	var t notation.Text
	switch {
	case c.Input > 0:
		return fill(say("frames.inputAxis"), notation.Text{{Text: "xyz"[c.Input-1 : c.Input], Italic: true}})
	case c.Plane:
		t = fill(say("frames.inPlane"), notation.Operation(c.Operation))
	case c.Operation != "":
		t = notation.Operation(c.Operation)
	}
	if len(c.Atoms) == 0 {
		return t
	}
	names := g.AtomNames()
	var list []string
	for i, a := range c.Atoms {
		if i == most {
			list = append(list, "…")
			break
		}
		list = append(list, names[a])
	}
	to := notation.Words("→ " + strings.Join(list, ", "))
	if len(t) == 0 {
		return to
	}
	return t.Then(notation.Words(" "), to)
}

// tryAxes takes axes, if they are possible for the group that is shown. If not
// the choice before stays, and why is said beside it.
func (u *ui) tryAxes(frame, z, x string) error {
	if g := u.state.Group; g != nil && !u.state.Stale(work.StageGroup) {
		if err := g.TryAxes(frame, z, x); err != nil {
			u.pages.axesProblem, u.pages.axesTried = told(err), u.now()
			u.refreshPanes()
			return err
		}
	}
	u.pages.axesProblem = ""
	s := u.now()
	s.Frame, s.Z, s.X = frame, z, x
	u.do(study.StepFrame, withoutNames(s))
	return nil
}
