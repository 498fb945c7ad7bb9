//go:build cgo && !nowindow

package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
)

// elementFor is the matrix element whose sum holds a partner, counted from 1,
// and what a function has of it. The first is the default and needs no choice.
func elementFor(partner int) [2]int {
	if partner <= 1 {
		return [2]int{}
	}
	return [2]int{partner, partner}
}

// weighWith chooses what weighs the operations: a matrix element, counted from
// 1, or the character.
func (u *ui) weighWith(element [2]int, character bool) {
	s := u.now()
	s.Projection.Element, s.Projection.Character = element, character
	if character || element == [2]int{1, 1} {
		s.Projection.Element = [2]int{}
	}
	u.do(study.StepElement, s)
}

// weightCommands are all that can weigh the operations.
func (u *ui) weightCommands() []*command {
	irrep, ok := u.chosenIrrep()
	if !ok {
		return []*command{{key: "ledger.noIrrep", can: func() bool { return false }}}
	}
	var out []*command
	for k := 1; k <= irrep; k++ {
		for l := 1; l <= irrep; l++ {
			e := [2]int{k, l}
			out = append(out, &command{key: "ledger.element", more: []any{k, l}, do: func() { u.weighWith(e, false) },
				on: func() bool { p := u.now().Projection; return !p.Character && p.TheElement() == e }})
		}
	}
	return append(out, &command{key: "ledger.character", do: func() { u.weighWith([2]int{}, true) },
		on: func() bool { return u.now().Projection.Character }})
}

// irrepCommands choose an irrep to project the function onto: those too of
// which the basis has no group orbital.
func (u *ui) irrepCommands() []*command {
	g := u.state.Group
	if g == nil || g.Fit.Setting.Infinite() {
		return []*command{{key: "ledger.noIrrep", can: func() bool { return false }}}
	}
	var out []*command
	for _, irrep := range g.Fit.Setting.Irreps {
		label := irrep.Label
		out = append(out, &command{key: "ledger.irrep", more: []any{notation.Irrep(label).String()}, do: func() { u.projectOnto(label) },
			on: func() bool { return u.now().Projection.Irrep == label }})
	}
	return out
}

// projectOnto chooses an irrep and keeps the function, the first unless one is
// chosen.
func (u *ui) projectOnto(label string) {
	s := u.now()
	p := study.Projection{Function: max(1, s.Projection.Function), Irrep: label, Subject: study.SubjectFunction, Character: s.Projection.Character}
	s.Projection, s.Moment = p, 0
	u.do(study.StepIrrep, s)
}

// chosenIrrep is the dimension of the irrep that is projected onto.
func (u *ui) chosenIrrep() (dimension int, ok bool) {
	g := u.state.Group
	if g == nil || g.Fit.Setting.Infinite() {
		return 0, false
	}
	for _, irrep := range g.Fit.Setting.Irreps {
		if irrep.Label == u.now().Projection.Irrep {
			return irrep.Dimension, true
		}
	}
	return 0, false
}

// ledgerTable is the ledger as a table; ok is false where there is none.
func (u *ui) ledgerTable() (g table.Grid, ok bool) {
	l := u.theLedger()
	if l == nil {
		return table.Grid{}, false
	}
	return table.LedgerGrid(l, say), true
}

// ledgerCopies copy the ledger in every format.
func (u *ui) ledgerCopies() []*command {
	var out []*command
	for _, f := range table.Formats() {
		out = append(out, &command{key: formatTexts[f], do: func() { u.copyLedger(f) }})
	}
	return out
}

// copyLedger puts the ledger on the clipboard.
func (u *ui) copyLedger(f table.Format) {
	if g, ok := u.ledgerTable(); ok {
		u.app.Clipboard().SetContent(g.As(f))
		u.remark(say("files.tableCopied", say("ledger.theTable"), say(formatTexts[f])))
	}
}

// offerWeights and offerCopies open their commands beside the ledger.
func (u *ui) offerWeights() {
	list := u.irrepCommands()
	if _, chosen := u.chosenIrrep(); chosen {
		list = append(u.weightCommands(), rule, &command{key: "ledger.onto", menu: list})
	}
	u.offer(list, "ledger weight")
}

func (u *ui) offerCopies() { u.offer(u.ledgerCopies(), "ledger copy") }

// offer shows commands as a menu at a spot of the ledger.
func (u *ui) offer(list []*command, at string) {
	u.hint("", fyne.Position{})
	menu := fyne.NewMenu("")
	for _, c := range list {
		item := u.makeItem(c)
		if c != rule {
			item.Checked = c.on != nil && c.on()
			item.Disabled = c.can != nil && !c.can()
		}
		menu.Items = append(menu.Items, item)
	}
	s, _ := u.ledger.spotNamed(at)
	z := float32(u.ledger.scale())
	place := fyne.CurrentApp().Driver().AbsolutePositionForObject(u.ledger)
	pop := widget.NewPopUpMenu(menu, u.win.Canvas())
	place = place.AddXY(z*float32(s.x), z*float32(s.y)-pop.MinSize().Height)
	place.Y = max(0, place.Y)
	pop.ShowAtPosition(place)
	u.win.Canvas().Focus(pop)
}

// tallyCommands are those of the sum that grows.
func (u *ui) tallyCommands() []*command {
	running := func() bool { return u.tally.ledger != nil }
	return []*command{
		(&command{key: "ledger.oneByOne", do: u.tally.start, can: func() bool { return running() || u.theLedger() != nil }}).byHand("o"),
		(&command{key: "ledger.faster", do: func() { u.tally.faster(1) }}).byHand(">"),
		(&command{key: "ledger.slower", do: func() { u.tally.faster(-1) }}).byHand("<"),
		{key: "ledger.onto", refresh: u.irrepCommands},
		{key: "ledger.weigh", refresh: u.weightCommands},
	}
}
