//go:build cgo && !nowindow

package window

import (
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// subgroups keeps the subgroups of the group that is shown, and how the list is
// narrowed.
type subgroups struct {
	setting *symmetry.Setting // whose list it is, or is being made
	list    []work.Embedded   // nil until it is made
	problem string

	// keep are operations, by name, that the subgroup holds; leave atoms, from
	// 0, that it leaves in place.
	keep  []string
	leave []int

	// narrowed is the list by keep and leave.
	narrowed    []work.Embedded
	narrowedFor string

	// taken says why a subgroup cannot be used.
	taken string
}

// want has the list made, beside the toolkit, if it is not that of the group.
func (c *subgroups) want(u *ui) {
	g := u.state.Group
	if g == nil || g.Fit.Setting == c.setting || g.Fit.Setting.Infinite() {
		return
	}
	setting := g.Fit.Setting
	*c = subgroups{setting: setting}
	go func() {
		list, err := listSubgroups(setting)
		u.post(func() {
			u.guard(func() {
				if u.closing || c.setting != setting {
					return
				}
				c.list = list
				if err != nil {
					c.problem = told(err)
				}
				u.pages.pane.Update()
			})
		})
	}()
}

// listSubgroups turns a panic, which nobody could catch there, into an error.
func listSubgroups(s *symmetry.Setting) (list []work.Embedded, err error) {
	defer func() {
		if fault := recover(); fault != nil {
			list, err = []work.Embedded{}, faultError{fault}
		}
	}()
	return work.Subgroups(s)
}

// narrow is the list of those subgroups that hold what is kept.
func (c *subgroups) narrow(g *work.Group) []work.Embedded {
	key := strings.Join(c.keep, " ") + "|" + atomsText(c.leave)
	if c.narrowed != nil && c.narrowedFor == key {
		return c.narrowed
	}
	var keep []int
	for _, name := range c.keep {
		if o, err := g.Operation(name, 0); err == nil {
			keep = append(keep, o.Index)
		}
	}
	list, err := work.Holding(c.setting, c.list, keep)
	if err == nil && len(c.leave) > 0 {
		// All that leaves the atoms in place, and what is within that.
		stay := g.Leaving(c.leave)
		d, wrong := c.setting.Descend(stay)
		if wrong == nil {
			list = slices.DeleteFunc(slices.Clone(list), func(e work.Embedded) bool {
				return slices.ContainsFunc(e.Operations, func(o int) bool { return !slices.Contains(stay, o) })
			})
			list = placeFirst(list, c.list, d)
		}
	}
	c.narrowed, c.narrowedFor = list, key
	return list
}

// placeFirst puts a subgroup first, where it may stand already in another of
// its conjugates; all are the subgroups of the group, one a class, which tell the
// number of its class.
func placeFirst(list, all []work.Embedded, d *symmetry.Descent) []work.Embedded {
	for i, e := range list {
		if slices.Equal(e.Operations, d.Operations) {
			return append([]work.Embedded{e}, slices.Delete(slices.Clone(list), i, i+1)...)
		}
	}
	first := work.Embedded{Descent: d, Embedding: 1, Of: 1}
	if alike, err := work.Holding(d.Group, all, d.Operations); err == nil {
		for _, e := range alike {
			if len(e.Operations) == len(d.Operations) {
				first.Embedding, first.Of = e.Embedding, e.Of
			}
		}
	}
	return append([]work.Embedded{first}, list...)
}

// allSubgroups is the page of subgroups and of what becomes of everything
// there.
func (d *pageDrawing) allSubgroups() {
	g := d.state.Group
	if g == nil {
		return
	}
	if g.Fit.Setting.Infinite() {
		d.linearSubgroups(g)
		return
	}
	c := &d.pages.subgroups
	c.want(d.ui)
	d.narrowing(g)
	if c.problem != "" {
		d.words(c.problem, d.accent)
	}
	if c.taken != "" {
		d.words(c.taken, d.accent)
	}
	if c.list == nil {
		d.words(say("frames.listing"), d.quiet)
		return
	}
	list := c.narrow(g)
	s := d.now()
	var chosen *work.Embedded
	x := float64(pad)
	for i, e := range list {
		name := e.Name()
		on := s.Subgroup == name && (chosen == nil)
		if on {
			chosen = &list[i]
		}
		label, hint := notation.Group(e.Subgroup.Symbol), say("frames.subgroupHint", keptText(e.Descent))
		if e.Of > 1 {
			label, hint = markedGroup(e, c.list), say("frames.subgroupOfHint", keptText(e.Descent), name)
			if d.board.measure(label, d.quiet) > d.width/2 {
				label = notation.Group(e.Subgroup.Symbol).Then(notation.Words(" " + strconv.Itoa(e.Embedding)))
			}
		}
		d.choice(&x, label, chip{
			name: "subgroup " + name, hint: hint, on: on, do: func() { d.chooseSubgroup(name, d.pages.subgroups.kept(e)) },
		})
	}
	d.endChoices()
	if len(list) == 0 {
		d.words(say("frames.noSubgroup"), d.quiet)
	}
	if chosen == nil {
		d.words(say("frames.chooseSubgroup"), d.quiet)
		return
	}
	if held, err := g.Conjugate(chosen.Descent, s.Kept); err == nil {
		chosen = &work.Embedded{Descent: held, Embedding: chosen.Embedding, Of: chosen.Of}
	}
	d.descent(g, *chosen)
}

// kept says which of the subgroups that the group carries into each other is
// meant: nothing for the one that stands in the list of all.
func (c *subgroups) kept(e work.Embedded) string {
	for _, other := range c.list {
		if slices.Equal(other.Operations, e.Operations) {
			return ""
		}
	}
	return work.Kept(e.Descent)
}

// keptText lists the operations that a subgroup holds.
func keptText(d *symmetry.Descent) string {
	const most = 8
	var names []string
	for i, o := range d.Operations {
		if i == most {
			names = append(names, "…")
			break
		}
		names = append(names, notation.Operation(d.Group.Operations[o].Name).String())
	}
	return strings.Join(names, "  ")
}

// markedGroup writes a subgroup with what tells it from the others of its
// symbol: its axis, and what they do not hold.
func markedGroup(e work.Embedded, all []work.Embedded) notation.Text {
	marks := marksOf(e, all)
	if len(marks) == 0 {
		return notation.Group(e.Subgroup.Symbol)
	}
	names := notation.Text(nil)
	for i, m := range marks {
		if i > 0 {
			names = names.Then(notation.Words(", "))
		}
		names = names.Then(notation.Operation(e.Group.Operations[m].Name))
	}
	sentence := say("frames.subgroupAlong")
	if first := e.Group.Operations[marks[0]].Turn; first.Improper {
		sentence = say("frames.subgroupWith")
	}
	return fill(sentence, notation.Group(e.Subgroup.Symbol), names)
}

// marksOf are operations of a subgroup, by index in the group, that no other
// subgroup of its symbol holds all of, nor any that the group carries into it:
// the principal one first.
func marksOf(e work.Embedded, all []work.Embedded) []int {
	main := mainOperation(e)
	if main < 0 {
		return nil
	}
	marks := []int{main}
	holds := func(o work.Embedded, class int) bool {
		return slices.ContainsFunc(o.Operations, func(k int) bool { return o.Group.Operations[k].Class == class })
	}
	for _, o := range all {
		if o.Subgroup.Symbol != e.Subgroup.Symbol || o.Embedding == e.Embedding {
			continue
		}
		missing := func(k int) bool { return !holds(o, e.Group.Operations[k].Class) }
		if slices.ContainsFunc(marks, missing) {
			continue
		}
		if i := slices.IndexFunc(e.Operations, missing); i >= 0 {
			marks = append(marks, e.Operations[i])
		}
	}
	return marks
}

// mainOperation is the turn of the highest order, along the z of the subgroup
// where several have it, or without turns the first operation beside E; -1 if
// there is none.
func mainOperation(e work.Embedded) int {
	best, order := -1, 0.0
	z := e.Rotation.Row(2)
	for _, k := range e.Operations {
		o := e.Group.Operations[k]
		if o.Name == "E" {
			continue
		}
		rank := 0.5
		if !o.Turn.Improper && o.Turn.Num == 1 {
			rank = float64(o.Turn.Den)
			if cos := o.Axis.Dot(z); cos*cos > 1-1e-6 {
				rank += 0.5
			}
		}
		if rank > order {
			best, order = k, rank
		}
	}
	return best
}

// narrowing offers to keep operations and to leave atoms in place.
func (d *pageDrawing) narrowing(g *work.Group) {
	c := &d.pages.subgroups
	d.words(say("frames.subgroupsText"), d.quiet)
	d.y += 4
	x := float64(pad)
	for _, name := range c.keep {
		name := name
		d.choice(&x, fill(say("frames.keeps"), notation.Operation(name)).Then(notation.Words("  ×")), chip{name: "drop " + name, hint: say("frames.dropHint"), on: true, do: func() {
			c.keep = slices.DeleteFunc(c.keep, func(n string) bool { return n == name })
		}})
	}
	if len(c.leave) > 0 {
		names := g.AtomNames()
		var list []string
		for _, a := range c.leave {
			list = append(list, names[a])
		}
		d.choice(&x, notation.Words(say("frames.leaves", strings.Join(list, ", "))+"  ×"), chip{name: "drop atoms", hint: say("frames.dropHint"), on: true, do: func() { c.leave = nil }})
	}
	at := d.y
	d.choice(&x, notation.Words(say("frames.keepOperation")), chip{name: "keep operation", hint: say("frames.keepOperationHint"), do: func() { d.ui.operationMenu(at) }})
	d.choice(&x, notation.Words(say("frames.leaveAtom")), chip{name: "leave atom", hint: say("frames.leaveAtomHint"), do: func() { d.ui.atomMenu(at) }})
	d.endChoices()
}

// operationMenu offers every operation to be kept.
func (u *ui) operationMenu(y float64) {
	g := u.state.Group
	if g == nil || g.Fit.Setting.Infinite() {
		return
	}
	c := &u.pages.subgroups
	var items []*fyne.MenuItem
	for _, o := range g.Fit.Setting.Operations {
		name := o.Name
		if name == "E" || slices.Contains(c.keep, name) {
			continue
		}
		items = append(items, fyne.NewMenuItem(notation.Operation(name).String(), func() {
			u.guard(func() { c.keep = append(c.keep, name); u.pages.pane.Update() })
		}))
	}
	u.menuOnPage(items, y)
}

// atomMenu offers every kind of place of the core, and the atoms that are
// chosen, to be left in place.
func (u *ui) atomMenu(y float64) {
	g := u.state.Group
	if g == nil {
		return
	}
	c := &u.pages.subgroups
	names := g.AtomNames()
	const most = 60
	var items []*fyne.MenuItem
	add := func(label string, atoms []int) {
		items = append(items, fyne.NewMenuItem(label, func() {
			u.guard(func() { c.leave = atoms; u.pages.pane.Update() })
		}))
	}
	if marked := u.now().Atoms; len(marked) > 0 {
		var atoms []int
		var list []string
		for _, a := range marked {
			if a <= len(names) {
				atoms = append(atoms, a-1)
				list = append(list, names[a-1])
			}
		}
		add(say("frames.chosenAtoms", strings.Join(list, ", ")), atoms)
	}
	for i, a := range g.Core {
		if i < most {
			add(names[a], []int{a})
		}
	}
	u.menuOnPage(items, y)
}

// menuOnPage shows a menu at a height of the page.
func (u *ui) menuOnPage(items []*fyne.MenuItem, y float64) {
	if len(items) == 0 {
		return
	}
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(u.pages.pane)
	z := u.pages.pane.scale()
	widget.ShowPopUpMenuAtPosition(fyne.NewMenu("", items...), u.win.Canvas(), at.AddXY(float32(pad*z), float32((y+chipHeight)*z)))
}

func (u *ui) chooseSubgroup(name, kept string) {
	s := u.now()
	if s.Subgroup == name && s.Kept == kept {
		name, kept = "", ""
	}
	s.Subgroup, s.Kept = name, kept
	u.pages.subgroups.taken = ""
	u.do(study.StepSubgroup, s)
}

// descent shows one subgroup: its operations and axes, the correlation of the
// irreps, and how partners go over.
func (d *pageDrawing) descent(g *work.Group, e work.Embedded) {
	title := notation.Group(g.Fit.Setting.Symbol).Then(notation.Words(" → "), notation.Group(e.Subgroup.Symbol))
	if e.Of > 1 {
		title = title.Then(notation.Words("   " + say("frames.embedding", e.Embedding, e.Of)))
	}
	d.y += 6
	d.line(title, style{size: groupSize, color: d.board.palette.Ink, align: -1})
	d.y += 4
	var kept notation.Text
	for i, o := range e.Operations {
		name, there := g.Fit.Setting.Operations[o].Name, e.Subgroup.Operations[e.Images[i]].Name
		if i > 0 {
			kept = kept.Then(notation.Words("  "))
		}
		kept = kept.Then(notation.Operation(name))
		if there != name {
			kept = kept.Then(notation.Words("\u00a0→\u00a0"), notation.Operation(there))
		}
	}
	d.line(kept, d.plain)
	d.y += 2
	if e.Rotation.Trace() < 3-1e-9 {
		d.line(say3(say("frames.subgroupAxes"), e.Rotation), d.quiet)
	} else {
		d.words(say("frames.subgroupSameAxes"), d.quiet)
	}
	d.y += 4
	x := float64(pad)
	d.choice(&x, notation.Words(say("frames.useGroup")), chip{name: "use group", hint: say("frames.useGroupHint"), do: func() { d.ui.useSubgroup(e.Descent) }})
	d.endChoices()
	d.correlation(g.Fit.Setting.Symbol, g.Fit.Setting.Irreps, e.Subgroup, e.Correlation, e.Partners)
}

// say3 fills a sentence with where x, y and z of a frame lie in another.
func say3(sentence string, m mgl64.Mat3) notation.Text {
	var parts []notation.Text
	for i := range 3 {
		r := m.Row(i)
		parts = append(parts, notation.Words(vectorText(r[:], 3)))
	}
	return fill(sentence, parts...)
}

const contentColumn = 66

// correlation is a table of what each irrep becomes, with the partners below
// where they are not the same.
func (d *pageDrawing) correlation(symbol string, irreps []symmetry.Irrep, sub *symmetry.Setting, contents [][]symmetry.Content, partners []*mat.Dense) {
	y := d.y + secondSize
	d.board.text(pad, y, notation.Group(symbol), d.quiet)
	d.board.text(pad+contentColumn, y, notation.Group(sub.Symbol), d.quiet)
	d.y += secondSize + 6
	d.board.fill(pad, d.y, d.width, 1, d.board.palette.Rule)
	d.y += 3
	for i, ir := range irreps {
		d.board.text(pad, d.y+textSize, notation.Irrep(ir.Label), d.strong)
		var t notation.Text
		for _, c := range contents[i] {
			if len(t) > 0 {
				t = t.Then(notation.Words(" + "))
			}
			if c.Copies > 1 {
				t = t.Then(notation.Words(strconv.Itoa(c.Copies) + "\u00a0"))
			}
			t = t.Then(notation.Irrep(c.Irrep.Label))
		}
		d.board.text(pad+contentColumn, d.y+textSize, t, d.plain)
		d.y += textSize + 6
		if over := goingOver(contents[i], partners[i]); len(over) > 0 {
			d.left = contentColumn
			d.width -= contentColumn
			d.line(over, d.quiet)
			d.left, d.width = 0, d.width+contentColumn
			d.y += 2
		}
	}
}

// goingOver writes the partners of an irrep as combinations of the subgroup's;
// nothing where they are those in their order, or where there is one only.
func goingOver(content []symmetry.Content, partners *mat.Dense) notation.Text {
	n, _ := partners.Dims()
	if n < 2 {
		return nil
	}
	var names []notation.Text
	for _, c := range content {
		for number := range c.Copies {
			for k := range c.Irrep.Dimension {
				name := notation.Irrep(c.Irrep.Label)
				if c.Irrep.Dimension > 1 {
					name = name.Then(notation.Words(":" + strconv.Itoa(k+1)))
				}
				if c.Copies > 1 {
					name = notation.Words(strconv.Itoa(number+1) + "\u00a0").Then(name)
				}
				names = append(names, name)
			}
		}
	}
	var t notation.Text
	for k := range n {
		var terms []orbitals.Term
		for l := range n {
			if c := partners.At(l, k); c > 1e-9 || c < -1e-9 {
				terms = append(terms, orbitals.Term{Function: l, Coefficient: c})
			}
		}
		if k > 0 {
			t = t.Then(notation.Words(",  "))
		}
		t = t.Then(partnerText(itoa(k+1)), notation.Words("\u00a0=\u00a0"), combination(terms, func(number string) notation.Text {
			if i, err := strconv.Atoi(number); err == nil && i <= len(names) {
				return names[i-1]
			}
			return notation.Words(number)
		}, shortCoefficient))
	}
	return t
}

// useSubgroup takes the structure for a subgroup of its group, as soon as the
// ladder is known, in which it stands.
func (u *ui) useSubgroup(d *symmetry.Descent) {
	g := u.state.Group
	if g == nil {
		return
	}
	u.pages.subgroups.taken = ""
	u.pages.wanted = &wantedGroup{group: g, descent: d}
	if n := u.pages.nearby; n.Ladder != nil && n.Ladder.Structure == g.Structure && slices.Equal(n.Ladder.Core, g.Core) {
		u.pages.takeWanted()
		return
	}
	u.pages.subgroups.taken = say("frames.searching")
	u.pages.search.Want(u.now())
	if n := u.pages.nearby; n.Cancelled || n.Problem != nil {
		u.pages.search.Again(u.now())
	}
}

// A wantedGroup is a subgroup that is to be used when the ladder is known.
type wantedGroup struct {
	group   *work.Group
	descent *symmetry.Descent
}

// takeWanted uses the subgroup that is wanted.
func (p *pages) takeWanted() {
	w := p.wanted
	p.wanted = nil
	if w == nil || w.group != p.u.state.Group {
		return
	}
	p.subgroups.taken = ""
	n := p.nearby.Ladder.FindSubgroup(w.group, w.descent)
	if n == nil {
		p.subgroups.taken = say("frames.notInLadder", w.descent.Subgroup.Symbol)
		p.pane.Update()
		return
	}
	p.u.takeGroup(asText(n))
}

// linearSubgroups is the page for a linear molecule, whose subgroups cannot be
// listed: the groups with the same z that are met most.
func (d *pageDrawing) linearSubgroups(g *work.Group) {
	symbol := g.Fit.Setting.Symbol
	d.words(say("frames.linearSubgroups"), d.quiet)
	d.y += 6
	s := d.now()
	x := float64(pad)
	for _, sub := range withChosen(linearGroups[symbol], s.Subgroup) {
		d.choice(&x, notation.Group(sub), chip{name: "subgroup " + sub, on: s.Subgroup == sub, do: func() { d.chooseSubgroup(sub, "") }})
	}
	u := d.ui
	d.choice(&x, notation.Words(say("frames.otherGroup")), chip{name: "other subgroup", hint: say("frames.otherGroupHint"), do: func() {
		u.askLinearGroup(symbol, s.Subgroup, func(sub string) error {
			if _, err := symmetry.DescendLinear(symbol, sub, 0); err != nil {
				return err
			}
			if u.now().Subgroup != sub {
				u.chooseSubgroup(sub, "")
			}
			return nil
		})
	}})
	d.endChoices()
	if s.Subgroup == "" {
		return
	}
	const most = 4
	l, err := symmetry.DescendLinear(symbol, s.Subgroup, most)
	if err != nil {
		d.words(told(err), d.accent)
		return
	}
	d.y += 6
	x = pad
	d.choice(&x, notation.Words(say("frames.useGroup")), chip{name: "use group", hint: say("frames.useGroupHint"), do: func() { d.takeGroup(s.Subgroup) }})
	d.endChoices()
	d.correlation(symbol, l.Irreps, l.Subgroup, l.Correlation, l.Partners)
}
