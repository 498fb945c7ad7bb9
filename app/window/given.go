//go:build cgo && !nowindow

package window

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/symmetry"
)

// drawGiven draws the left pane: what is given. Structure, group, frame,
// basis.
func (u *ui) drawGiven(b *board) {
	d := &givenDrawing{ui: u, board: b, y: pad - u.given.scroll, width: b.width - 2*pad}
	d.styles(b)
	d.messages()
	if u.state.Group == nil && u.state.Structure == nil {
		d.empty()
	} else {
		d.structure()
		if u.state.Group != nil {
			d.group()
			d.frameOfAxes()
			d.functions()
		} else {
			d.withoutGroup()
		}
	}
	u.given.extent = d.y + pad + u.given.scroll
}

type givenDrawing struct {
	*ui
	*board
	y, width                           float64
	left                               float64 // what lines are moved to the right by
	plain, quiet, head, strong, accent style
}

func (d *givenDrawing) styles(b *board) {
	d.plain = style{size: textSize, color: b.palette.Ink, align: -1}
	d.quiet = style{size: secondSize, color: b.palette.Quiet, align: -1}
	d.head = style{size: secondSize, color: b.palette.Quiet, align: -1, bold: true}
	d.strong = style{size: textSize, color: b.palette.Ink, align: -1, bold: true}
	d.accent = style{size: secondSize, color: b.palette.Accent, align: -1}
}

// line sets one paragraph and goes on below it.
func (d *givenDrawing) line(t notation.Text, s style) {
	d.y = d.board.paragraph(pad+d.left, d.y+s.size, d.width, t, s) - s.size
}

func (d *givenDrawing) words(text string, s style) { d.line(notation.Words(text), s) }

func (d *givenDrawing) heading(text string) {
	d.y += 10
	d.board.fill(pad, d.y, d.width, 1, faint(d.board.palette.Rule, 0x90))
	d.y += 8
	d.words(text, d.head)
	d.y += 2
}

// problem shows what is wrong with a thing, beside it.
func (d *givenDrawing) problem(concerns ...work.Concern) {
	for _, c := range concerns {
		if p := d.state.Problem(c); p != nil {
			d.words(told(p), d.accent)
		}
	}
}

// messages stand on top: about what was to be opened, and of the program.
func (d *givenDrawing) messages() {
	dismissable := func(name, text string, forget func()) {
		if text == "" {
			return
		}
		top := d.y
		d.words(text, d.accent)
		d.words(say("errors.dismiss"), d.quiet)
		d.board.spot(spot{x: pad - 4, y: top, width: d.width + 8, height: d.y - top, name: name, hint: say("errors.dismiss"), do: func() {
			forget()
			d.ui.given.Update()
		}})
		d.y += 8
	}
	d.drawChanged()
	dismissable("dismiss open", d.openProblem, func() { d.ui.openProblem = "" })
	dismissable("dismiss notice", d.notice, func() { d.ui.notice = "" })
}

func (d *givenDrawing) empty() {
	d.words(say("given.nothing"), d.strong)
	d.y += 4
	d.problem(work.ConcernStructure)
	if d.state.Progress == nil {
		d.words(say("given.nothingText"), d.quiet)
	}
}

func (d *givenDrawing) structure() {
	st := d.state
	s := st.Structure
	if st.Group != nil {
		s = st.Group.Structure
	}
	d.words(d.board.clipped(s.Molecule.Title, 2.6*d.width, d.strong), d.strong)
	source := sourceText(d.now())
	formula := formulaText(s.Molecule.Formula()).Then(notation.Words("   "))
	room := d.width - d.board.measure(formula, d.quiet)
	d.y += 2
	d.line(formula.Then(notation.Words(d.board.clipped(source, max(60, room), d.quiet))), d.quiet)
	for _, n := range s.Notes {
		n.File = "" // it stands above
		d.words(n.In(tongue()), d.quiet)
	}
	d.problem(work.ConcernStructure, work.ConcernCore, work.ConcernIgnore, work.ConcernProgram)
	if n := len(s.Molecule.Atoms); st.Group != nil && len(st.Group.Core) < n {
		d.words(say("given.coreOf", len(st.Group.Core), n), d.quiet)
	}
	if p := st.Progress; p != nil {
		d.progress(p)
	}
}

// progress is a bar that can be clicked to stop.
func (d *givenDrawing) progress(p *work.Progress) {
	d.y += 6
	d.board.fill(pad, d.y, d.width, 4, faint(d.board.palette.Ink, 0x20))
	d.board.fill(pad, d.y, d.width*min(1, p.Fraction()), 4, d.board.palette.Accent)
	d.y += 8
	top := d.y
	d.words(say("given.computing", say(stageTexts[p.Stage])), d.quiet)
	d.board.spot(spot{x: pad - 4, y: top - 14, width: d.width + 8, height: d.y - top + 14, name: "stop", hint: say("given.stopHint"), do: d.service.Cancel})
}

// stageTexts are the keys of what is being computed.
var stageTexts = map[work.Stage]string{
	work.StageStructure: "given.stageStructure", work.StageGroup: "given.stageGroup", work.StageBasis: "given.stageBasis",
	work.StageOrbitals: "given.stageOrbitals", work.StageOrbital: "given.stageOrbital", work.StageLedger: "given.stageLedger",
	work.StagePlay: "given.stagePlay",
}

// formulaText sets a formula with its numbers lowered.
func formulaText(formula string) notation.Text {
	var t notation.Text
	for _, r := range formula {
		place := notation.OnLine
		if r >= '0' && r <= '9' {
			place = notation.Sub
		}
		t = t.Then(notation.Text{{Text: string(r), Place: place}})
	}
	return t
}

func (d *givenDrawing) group() {
	st := d.state
	fit := st.Group.Fit
	d.y += 6
	symbol := style{size: groupSize, color: d.board.palette.Ink, align: -1}
	if st.Stale(work.StageGroup) {
		symbol.color = d.board.palette.Quiet
	}
	x := pad + d.board.text(pad, d.y+groupSize, notation.Group(fit.Setting.Symbol), symbol)
	count := say("given.infinite")
	if !fit.Setting.Infinite() {
		count = say("given.operations", fit.Setting.Order())
		if fit.Setting.Order() == 1 {
			count = say("given.oneOperation")
		}
	}
	d.board.text(x+10, d.y+groupSize, notation.Words(count), d.quiet)
	d.y += groupSize + 10
	off := say("given.off", decimalText(fit.Deviation, 3))
	if fit.Deviation >= 0.0005 && fit.Worst < len(st.Group.Core) {
		off = say("given.offMost", decimalText(fit.Deviation, 3), st.Group.CoreNames()[fit.Worst])
	}
	d.words(off, d.plain)
	d.tolerance()
	d.takenFor()
	if fit.Doubtful {
		d.words(say("given.doubtful"), d.accent)
	}
	if st.Stale(work.StageGroup) {
		d.words(say("given.stale"), d.accent)
	}
}

// takenFor says that the group is one of the ladder, with a way back.
func (d *givenDrawing) takenFor() {
	as := d.now().As
	if as == "" {
		return
	}
	label := notation.Words(say("frames.asNow", as) + "  ×")
	w := d.board.measure(label, d.quiet) + 16
	drawChip(d.board, pad, d.y, w, label, secondSize, chip{name: "group none", hint: say("frames.asFoundHint"), on: true, do: func() { d.takeGroup("") }})
	d.y += chipHeight + 6
	d.problem(work.ConcernAs)
}

// withoutGroup shows what keeps a study that was just opened from having a
// group, with the way back from each choice.
func (d *givenDrawing) withoutGroup() {
	d.y += 6
	d.takenFor()
	if d.state.Problem(work.ConcernTolerance) != nil {
		d.tolerance()
	}
	s := d.now()
	if s.Frame+s.Z+s.X == "" {
		return
	}
	chosen := s.Frame
	for _, axis := range [][2]string{{"z", s.Z}, {"x", s.X}} {
		if axis[1] != "" {
			chosen = strings.TrimSpace(chosen + "  " + axis[0] + ": " + axis[1])
		}
	}
	label := notation.Words(d.board.clipped(chosen, d.width-40, d.quiet) + "  ×")
	w := d.board.measure(label, d.quiet) + 16
	drawChip(d.board, pad, d.y, w, label, secondSize, chip{name: "frame none", hint: say("frames.defaultHint"), on: true,
		do: func() { d.chooseFrame(symmetry.FrameDefault) }})
	d.y += chipHeight + 6
	d.problem(work.ConcernFrame, work.ConcernZ, work.ConcernX)
}

// tolerances are the steps that the two signs walk through, in Å.
var tolerances = []float64{0.001, 0.002, 0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.3, 0.5}

func (d *givenDrawing) tolerance() {
	now := d.now().TheTolerance()
	d.y += 2
	x := float64(pad)
	x += d.board.text(x, d.y+textSize, notation.Words(say("given.allowed")+" "), d.plain)
	value := plainText(now) + " Å"
	w := d.board.text(x, d.y+textSize, notation.Words(value), d.plain)
	d.board.fill(x, d.y+textSize+3, w, 1, d.board.palette.Rule)
	d.board.spot(spot{x: x - 3, y: d.y - 3, width: w + 6, height: 22, name: "tolerance", hint: say("given.allowedHint"), do: d.askTolerance})
	x += w + 10
	step := func(sign, name, hint string, to float64, ok bool) {
		var do func()
		if ok {
			do = func() { d.setTolerance(to) }
		}
		d.chip(x, d.y-4, 24, notation.Words(sign), chip{name: name, hint: say(hint), do: do, off: !ok})
		x += 28
	}
	below, above := 0.0, 0.0
	for _, t := range tolerances {
		if t < now-1e-9 {
			below = t
		}
		if t > now+1e-9 && above == 0 {
			above = t
		}
	}
	step("−", "tolerance less", "given.lessHint", below, below > 0)
	step("+", "tolerance more", "given.moreHint", above, above > 0)
	d.y += textSize + 10
	d.problem(work.ConcernTolerance)
}

func (d *givenDrawing) frameOfAxes() {
	fit := d.state.Group.Fit
	d.heading(say("frames.heading"))
	// How a rule settles ties stands on the page of the axes: here the functions
	// below are to be in sight.
	for _, clause := range notation.ConventionTexts(texts(), fit, d.state.Group.CoreNames(), false) {
		d.line(clause, d.plain)
	}
	d.words(say("frames.rule", notation.SourceIn(texts(), fit.Rule)), d.quiet)
	for _, tie := range notation.TiesIn(texts(), fit.Ties) {
		d.words(tie, d.quiet)
	}
	if d.pages.axesProblem != "" {
		d.words(d.pages.axesProblem, d.accent)
	}
	d.problem(work.ConcernFrame, work.ConcernZ, work.ConcernX)
	d.frames()
}

// frames offers every choice of axes: by the name of its rule, and by hand.
func (d *givenDrawing) frames() {
	s := d.now()
	byHand := s.Z != "" || s.X != ""
	x := float64(pad)
	d.y += 4
	offer := func(name string, label notation.Text, hint string, on bool, do func()) {
		w := d.board.measure(label, d.quiet) + 14
		if x+w > pad+d.width {
			x = pad
			d.y += chipHeight + 3
		}
		drawChip(d.board, x, d.y, w, label, secondSize, chip{name: "frame " + name, hint: hint, on: on, do: do})
		x += w + 3
	}
	for _, f := range d.state.Group.Fit.Frames() {
		name := f.Rule.Name
		if name == symmetry.FrameExplicit {
			continue
		}
		now := s.Frame == name || s.Frame == "" && name == symmetry.FrameDefault
		offer(name, ruleLabel(name), ruleHint(f.Rule), now && !byHand, func() { d.chooseFrame(name) })
	}
	offer("by hand", notation.Words(say("frames.byHand")), say("frames.byHandHint"), byHand, func() { d.pages.turnTo(axesPage) })
	d.y += chipHeight + 5
	x = pad
	offer("ladder", notation.Words(say("frames.toLadder")), say("frames.toLadderHint"), s.As != "", func() { d.pages.turnTo(ladderPage) })
	offer("second", notation.Words(say("frames.toSecond")), say("frames.toSecondHint"), s.Held.Frame != "" || s.Held.Z != "" || s.Held.X != "", func() { d.pages.turnTo(secondPage) })
	offer("subgroups", notation.Words(say("frames.toSubgroups")), say("frames.toSubgroupsHint"), false, func() { d.pages.turnTo(subgroupsPage) })
	d.y += chipHeight + 4
}

// A chip is a word that can be switched.
type chip struct {
	name, hint string
	do         func()
	on, off    bool
}

const chipHeight = 24

// chip draws a chip of a width.
func (d *givenDrawing) chip(x, y, width float64, t notation.Text, c chip) {
	drawChip(d.board, x, y, width, t, textSize, c)
}

func drawChip(b *board, x, y, width float64, t notation.Text, size float64, c chip) {
	p := b.palette
	ink, line := p.Ink, p.Rule
	switch {
	case c.on:
		b.fill(x, y, width, chipHeight, p.Accent)
		ink, line = p.Ground, p.Accent
	case c.off:
		ink, line = between(p.Panel, p.Quiet, 0.6), faint(p.Rule, 0x60)
	}
	b.frame(x, y, width, chipHeight, 1, line)
	b.text(x+width/2, y+chipHeight/2+0.36*size, t, style{size: size, color: ink})
	if c.do != nil {
		b.spot(spot{x: x, y: y, width: width, height: chipHeight, name: c.name, hint: c.hint, do: c.do})
	}
}

// kinds are the sets of functions that have a chip.
var kinds = []struct{ word, hint string }{
	{"s", "given.everyS"}, {"p", "given.everyP"}, {"d", "given.everyD"}, {"f", "given.everyF"}, {"sigma", "given.everySigma"}, {"pi", "given.everyPi"},
}

func (d *givenDrawing) functions() {
	d.heading(say("given.basis"))
	d.y += 2
	g, s := d.state.Group, d.now()
	var rows []basisRow
	for _, i := range g.Core {
		symbol := g.Molecule.Atoms[i].Element.Symbol()
		if !slices.ContainsFunc(rows, func(r basisRow) bool { return r.atoms == symbol }) {
			rows = append(rows, basisRow{symbol, symbol, false})
		}
	}
	const most = 8
	if len(rows) > most {
		rows = rows[:most]
	}
	if len(s.Atoms) > 0 {
		rows = append(rows, basisRow{atomsText(s.Atoms), say("given.chosen"), true})
	}
	known := map[string]bool{}
	for _, r := range rows {
		d.basisRow(r, s, known)
	}
	// What was typed and has no chip.
	for _, entry := range s.Basis {
		if !known[entry] {
			w := d.board.measure(notation.Words(entry), d.plain)
			d.board.text(pad, d.y+16, notation.Words(d.board.clipped(entry, d.width-32, d.plain)), d.plain)
			d.chip(pad+min(w, d.width-32)+8, d.y, 24, notation.Words("×"), chip{
				name: "remove " + entry, hint: say("given.takeOut"), do: func() { d.removeBasis(entry) },
			})
			d.y += chipHeight + 4
		}
	}
	d.problem(work.ConcernBasis)
	if b := d.state.Basis; b != nil && len(s.Basis) > 0 {
		for _, n := range b.Notes {
			d.words(notation.NoteIn(texts(), n, b.Basis, s.Basis, g.AtomNames()), d.quiet)
		}
		d.list(b)
	} else if len(s.Basis) == 0 {
		d.words(say("given.noBasis"), d.quiet)
	}
}

// A basisRow is the chips of an element or of chosen atoms.
type basisRow struct {
	atoms, label string
	chosen       bool
}

func (d *givenDrawing) basisRow(r basisRow, s study.Study, known map[string]bool) {
	d.board.text(pad, d.y+17, notation.Words(d.board.clipped(r.label, 66, d.plain)), d.plain)
	x := pad + 34.0
	if r.chosen {
		x = pad + max(34, math.Ceil(d.board.measure(notation.Words(r.label), d.plain))+6)
	}
	w := (pad + d.width - x - 5*3) / 6
	for _, k := range kinds {
		entry := r.atoms + ":" + k.word
		known[entry] = true
		what := r.label
		if r.chosen {
			what = say("given.chosenAtom")
		}
		hint := say(k.hint, what)
		d.chip(x, d.y, w, kindText(k.word), chip{
			name: "basis " + entry, hint: hint,
			on: slices.Contains(s.Basis, entry), do: func() { d.toggleBasis(entry) },
		})
		x += w + 3
	}
	d.y += chipHeight + 4
}

func kindText(word string) notation.Text {
	switch word {
	case "sigma":
		return notation.Words("σ")
	case "pi":
		return notation.Words("π")
	}
	return notation.Words(word)
}

// list shows every function of the basis as a chip.
func (d *givenDrawing) list(b *work.Basis) {
	s := d.now()
	d.y += 4
	d.words(functionsHead(len(b.Functions)), d.quiet)
	d.y += 2
	names := b.AtomNames()
	x := float64(pad)
	const gap = 3.0
	const columns = 6 // so that those of six ligands, or of a ring, stand in one row
	width := (d.width - (columns-1)*gap) / columns
	for i, f := range b.Functions {
		if x+width > pad+d.width+0.5 {
			x = pad
			d.y += chipHeight + gap
		}
		label := notation.PhiText(strconv.Itoa(i + 1))
		drawChip(d.board, x, d.y, width, label, textSize, chip{
			name: "function " + strconv.Itoa(i+1), hint: say("given.functionHint", i+1, notation.Function(f.Name).String(), names[f.Site]),
			on: s.Projection.TheSubject() == study.SubjectFunction && s.Projection.Function == i+1,
			do: func() { d.chooseFunction(i + 1) },
		})
		x += width + gap
	}
	d.y += chipHeight + gap
	d.problem(work.ConcernFunction)
}

func functionsHead(n int) string {
	if n == 1 {
		return say("given.oneFunction")
	}
	return say("given.functions", n)
}

// atomsText writes atoms, counted from 1, as a selection takes them: "2-4,7".
func atomsText(atoms []int) string {
	var parts []string
	for i := 0; i < len(atoms); {
		j := i
		for j+1 < len(atoms) && atoms[j+1] == atoms[j]+1 {
			j++
		}
		switch j - i {
		case 0:
			parts = append(parts, strconv.Itoa(atoms[i]))
		case 1:
			parts = append(parts, strconv.Itoa(atoms[i]), strconv.Itoa(atoms[j]))
		default:
			parts = append(parts, strconv.Itoa(atoms[i])+"-"+strconv.Itoa(atoms[j]))
		}
		i = j + 1
	}
	return strings.Join(parts, ",")
}
