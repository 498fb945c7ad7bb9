//go:build cgo && !nowindow

package window

import (
	"math"

	"strings"

	"fyne.io/fyne/v2"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// A secondFrame keeps the frame that is held against the one in force.
type secondFrame struct {
	group    *work.Group
	held     study.Held
	exchange *work.Exchange
	err      error
	tried    string // why what was asked for last is not taken
}

// of is the second frame of a study; nil if it holds none.
func (c *secondFrame) of(g *work.Group, h study.Held) (*work.Exchange, error) {
	h.Irrep, h.Copy, h.Partner = "", 0, 0
	if c.group != g || c.held != h {
		c.group, c.held, c.tried = g, h, ""
		c.exchange, c.err = g.Held(h)
	}
	return c.exchange, c.err
}

// secondFrame is the page on which another frame is held against the one in
// force, with what everything is called in each.
func (d *pageDrawing) secondFrame() {
	g := d.state.Group
	if g == nil {
		return
	}
	s := d.now()
	second := &d.pages.second
	e, err := second.of(g, s.Held)
	d.words(say("frames.secondText"), d.quiet)
	d.y += 4
	if second.tried != "" {
		d.words(second.tried, d.accent)
	}
	if err != nil {
		d.words(told(err), d.accent)
	}
	x := float64(pad)
	byHand := s.Held.Z != "" || s.Held.X != ""
	d.choice(&x, notation.Words(say("frames.none")), chip{name: "second none", on: e == nil && !byHand, do: func() { d.hold("", "", "") }})
	for _, f := range rulesOf(g) {
		name := f.Rule.Name
		if name == work.RuleHeld || name == g.Fit.Rule.Name {
			continue // it is the one in force
		}
		d.choice(&x, ruleLabel(name), chip{
			name: "second " + name, hint: ruleHint(f.Rule),
			on: s.Held.Frame == name && !byHand, do: func() { d.hold(name, "", "") },
		})
	}
	d.choice(&x, notation.Words(say("frames.typed")), chip{name: "second typed", hint: say("frames.typedHint"), on: byHand, do: d.ui.askSecond})
	d.endChoices()
	if !g.Fit.Setting.Infinite() {
		d.secondByHand(g, s.Held, e)
	}
	if e == nil {
		return
	}
	d.heading(say("frames.secondAxes"))
	for _, clause := range notation.ConventionTexts(texts(), e.Fit, g.CoreNames(), true) {
		d.line(clause, d.plain)
	}
	d.words(say("frames.rule", notation.SourceIn(texts(), e.Frame.Rule)), d.quiet)
	if e.Names == nil {
		d.words(say("frames.sameNames"), d.quiet)
		return
	}
	d.exchange(g, e)
}

// secondByHand offers where z₂ and x₂ can lie.
func (d *pageDrawing) secondByHand(g *work.Group, h study.Held, e *work.Exchange) {
	fit := g.Fit
	if e != nil {
		fit = e.Fit
	}
	turn := fit.Rotation.Mul3(g.Fit.Rotation.Transpose())
	offer := func(axis string, row int, choices []work.AxisChoice, do func(work.AxisChoice)) {
		d.line(notation.Text{{Text: axis, Italic: true}, {Text: "2", Place: notation.Sub}}.Then(notation.Words(" "+say("frames.along"))), d.quiet)
		d.y += 2
		x := float64(pad)
		for _, c := range choices {
			on := e != nil && c.Direction.Dot(turn.Row(row)) > 1-1e-6
			d.choice(&x, axisText(g, c), chip{name: "second " + axis + " " + c.Text, on: on, do: func() { do(c) }})
		}
		d.endChoices()
	}
	offer("z", 2, g.ZChoices(), func(c work.AxisChoice) { d.hold("", c.Text, "") })
	at := *g
	at.Fit = fit
	xs := at.XChoices()
	for i := range xs {
		xs[i].Direction = turn.Transpose().Mul3x1(xs[i].Direction)
		if xs[i].Operation != "" && e != nil && e.Names != nil {
			xs[i].Operation = nameHere(g, e, xs[i].Operation)
		}
	}
	offer("x", 0, xs, func(c work.AxisChoice) { d.hold("", at.ZNow(), c.Text) })
}

// nameHere is the name in the frame in force of an operation of the second.
func nameHere(g *work.Group, e *work.Exchange, there string) string {
	for r, o := range g.Fit.Setting.Operations {
		if e.Fit.Setting.Operations[e.Names.Operations[r]].Name == there {
			return o.Name
		}
	}
	return there
}

// hold holds a second frame, if it is possible; if not the one before stays.
func (u *ui) hold(frame, z, x string) {
	s := u.now()
	next := s.Held
	next.Frame, next.Z, next.X = frame, z, x
	if g := u.state.Group; g != nil {
		if _, err := g.Held(next); err != nil {
			u.pages.second.tried = told(err)
			u.pages.pane.Update()
			return
		}
	}
	u.pages.second.tried = ""
	s.Held = next
	u.do(study.StepHeld, s)
}

// askSecond asks for z₂ and x₂ as askAxes does for z and x.
func (u *ui) askSecond() {
	s := u.now()
	now := strings.TrimSuffix(s.Held.Z+"; "+s.Held.X, "; ")
	u.ask(say("frames.secondTitle"), say("frames.askText"), now, func(text string) error {
		z, x, _ := strings.Cut(text, ";")
		z, x = strings.TrimSpace(z), strings.TrimSpace(x)
		if g := u.state.Group; g != nil {
			if _, err := g.Held(study.Held{Z: z, X: x}); err != nil {
				return err
			}
		}
		u.hold("", z, x)
		return nil
	})
}

// Columns of the table of names, from the left edge.
const (
	thereColumn   = 76
	partnerColumn = 152
)

// exchange is the table of what every irrep and every operation is called in
// each frame, with the reason.
func (d *pageDrawing) exchange(g *work.Group, e *work.Exchange) {
	d.heading(say("frames.names"))
	d.line(axesChange(e), d.plain)
	d.y += 4
	x := float64(pad)
	d.choice(&x, notation.Words(say("frames.copy")), chip{name: "copy names", hint: say("frames.copyHint"), do: d.ui.copyNames})
	d.endChoices()
	here, there := g.Fit.Setting, e.Fit.Setting
	d.namesHead(say("frames.columnPartners"))
	for i, ir := range here.Irreps {
		other := there.Irreps[e.Names.Irreps[i]]
		ink := d.plain
		if ir.Label != other.Label {
			ink = d.strong
		}
		y := d.y + textSize
		d.board.text(pad, y, notation.Irrep(ir.Label), ink)
		d.board.text(pad+thereColumn, y, notation.Irrep(other.Label), ink)
		d.left, d.width = partnerColumn, d.width-partnerColumn
		d.y += textSize - secondSize
		d.line(partnersText(e, i), d.quiet)
		d.left, d.width = 0, d.width+partnerColumn
		d.y += 3
	}
	d.y += 4
	for _, text := range whyTexts(here, e) {
		d.line(text, d.quiet)
	}
	d.y += 8
	d.namesHead("")
	for r, o := range here.Operations {
		other := there.Operations[e.Names.Operations[r]]
		ink := d.quiet
		if o.Name != other.Name {
			ink = d.plain
		}
		y := d.y + textSize
		d.board.text(pad, y, notation.Operation(o.Name), ink)
		d.board.text(pad+thereColumn, y, notation.Operation(other.Name), ink)
		d.y += textSize + 5
	}
}

func (d *pageDrawing) namesHead(third string) {
	y := d.y + secondSize
	d.board.text(pad, y, notation.Words(say("frames.here")), d.quiet)
	d.board.text(pad+thereColumn, y, notation.Words(say("frames.there")), d.quiet)
	d.board.text(pad+partnerColumn, y, notation.Words(third), d.quiet)
	d.y += secondSize + 5
	d.board.fill(pad, d.y, d.width, 1, d.board.palette.Rule)
	d.y += 3
}

// partnersText writes the partners here as combinations of those there; "the
// same" where they are.
func partnersText(e *work.Exchange, irrep int) notation.Text {
	m := e.Names.Partners[irrep]
	n, _ := m.Dims()
	same := true
	var t notation.Text
	for k := range n {
		var terms []orbitals.Term
		for l := range n {
			if c := m.At(l, k); math.Abs(c) > 1e-9 {
				terms = append(terms, orbitals.Term{Function: l, Coefficient: c})
			}
		}
		same = same && len(terms) == 1 && terms[0].Function == k && terms[0].Coefficient > 0
		if k > 0 {
			t = t.Then(notation.Words(",  "))
		}
		t = t.Then(partnerText(itoa(k+1)), notation.Words("\u00a0=\u00a0"), combination(terms, secondPartner, shortCoefficient))
	}
	if same {
		return notation.Words(say("frames.samePartners"))
	}
	return t
}

// secondPartner names a partner in the second frame.
func secondPartner(number string) notation.Text {
	return partnerText(number).Then(notation.Text{{Text: "(2)", Place: notation.Super}})
}

// axesChange says how the second axes lie to the first.
func axesChange(e *work.Exchange) notation.Text {
	c := symmetry.DescribeTurn(e.Frame.Turn)
	letter := func(i int) notation.Text { return notation.Text{{Text: "xyz"[i : i+1], Italic: true}} }
	switch c.Kind {
	case symmetry.TurnNone:
		return notation.Words(say("frames.turnNone"))
	case symmetry.TurnSigns:
		return notation.Words(say("frames.turnSigns"))
	case symmetry.TurnExchange:
		return fill(say("frames.turnExchange"), letter(c.Axes[0]), letter(c.Axes[1]))
	case symmetry.TurnCycle:
		return fill(say("frames.turnCycle"), letter(c.Axes[0]), letter(c.Axes[1]), letter(c.Axes[2]))
	case symmetry.TurnAbout:
		return fill(say("frames.turnAbout"), letter(c.Axes[0]), notation.Words(degrees(c.Angle)))
	}
	return fill(say("frames.turnOther"), notation.Words(degrees(c.Angle)))
}

// degrees writes an angle in degrees to a tenth.
func degrees(angle float64) string {
	return plainText(math.Round(10*angle) / 10)
}

// whyTexts say of every irrep that changes its name why it does.
func whyTexts(here *symmetry.Setting, e *work.Exchange) []notation.Text {
	var out []notation.Text
	for _, r := range symmetry.Renamed(here, e.Fit.Setting, e.Names) {
		line := fill(say("frames.why"), notation.Irrep(r.Here), notation.Irrep(r.There), axesChange(e))
		if r.Operation != "" {
			character := notation.Words(notation.Minus(notation.Decimal(r.Character, 0)))
			line = fill(say("frames.whyOperation"), notation.Irrep(r.Here), notation.Irrep(r.There), axesChange(e),
				notation.Operation(r.Operation), character, notation.Operation(r.Called))
		}
		out = append(out, line)
	}
	return out
}

// copyNames puts the table of names on the clipboard as text.
func (u *ui) copyNames() {
	g := u.state.Group
	if g == nil {
		return
	}
	e, err := u.pages.second.of(g, u.now().Held)
	if e == nil || err != nil || e.Names == nil {
		return
	}
	u.app.Clipboard().SetContent(namesText(g, e))
	u.hint(say("frames.copied"), fyne.CurrentApp().Driver().AbsolutePositionForObject(u.pages.pane).AddXY(pad, 8))
}

// namesText is the table of names as text.
func namesText(g *work.Group, e *work.Exchange) string {
	both := []work.Exchange{g.Here(), *e}
	var b strings.Builder
	line := func(s string) { b.WriteString(s + "\n") }
	line(g.Fit.Setting.Symbol + ": " + notation.ConventionIn(texts(), g.Fit, g.CoreNames()))
	line(notation.RuleLabel(texts(), e.Frame.Rule.Name) + ": " + notation.ConventionIn(texts(), e.Fit, g.CoreNames()))
	line(axesChange(e).String())
	line("")
	line(table.IrrepNames(both).Text())
	for _, text := range whyTexts(g.Fit.Setting, e) {
		line(text.String())
	}
	line("")
	line(table.OperationNames(both).Text())
	if t := table.Partners(both); len(t.Rows) > 0 {
		line(t.Text())
	}
	return b.String()
}
