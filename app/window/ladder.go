//go:build cgo && !nowindow

package window

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/symmetry"
)

// ladder is the page of the groups that the structure nearly has.
func (d *pageDrawing) ladder() {
	s := d.now()
	if d.state.Group != nil {
		d.words(say("frames.ladderText"), d.quiet)
		d.y += 6
	}
	d.check("keep axes", say("frames.keepAxes"), say("frames.keepAxesHint"), s.KeepAxes, d.ui.toggleKeepAxes)
	d.check("displacements", say("frames.displacements"), say("frames.displacementsHint"), s.Look.Displacements, d.ui.toggleDisplacements)
	d.y += 4
	d.problem(work.ConcernAs)
	none := d.searching()
	d.asFound()
	if none {
		return
	}
	l := d.pages.nearby.Ladder
	if l.Linear() != nil {
		d.linearChoices(l.Linear())
		d.otherLine(l)
		return
	}
	d.ladderHead()
	// Of the groups of a linear structure with the same z the linear one stands
	// for all; of the ways in which another lies, the first.
	count, lead := map[string]int{}, map[string]int{}
	for _, n := range l.Groups {
		if n.Whole == nil || work.Usual(n) {
			symbol := n.Fit.Setting.Symbol
			count[symbol]++
			if first := lead[symbol]; first == 0 || n.Embedding < first {
				lead[symbol] = n.Embedding
			}
		}
	}
	for _, i := range l.ByOrder() {
		n := l.Groups[i]
		symbol := n.Fit.Setting.Symbol
		on := s.As == asText(n)
		if n.Whole != nil && !work.Usual(n) && !on {
			continue
		}
		if leads := n.Embedding == lead[symbol]; leads || d.pages.opened[symbol] || on {
			d.ladderRow(n, d.pages.nearby.Shares[i], count[symbol], leads, on)
		}
	}
}

// asFound is the row that goes back to the group within the tolerance.
func (d *pageDrawing) asFound() {
	s := d.now()
	d.row("as found", say("frames.asFoundHint"), s.As == "", func() { d.takeGroup("") }, func() {
		d.words(say("frames.asFound", plainText(s.TheTolerance())), d.plain)
	})
}

// Columns of the ladder, from the left edge of a row: the right ends of the
// numbers.
const (
	embeddingColumn = 52
	deviationColumn = 190
	measureColumn   = 290
)

func (d *pageDrawing) ladderHead() {
	d.y += 6
	y := d.y + secondSize
	right := d.quiet
	right.align = 1
	d.board.text(pad+10, y, notation.Words(say("frames.columnGroup")), d.quiet)
	d.board.text(pad+deviationColumn, y, notation.Words(say("frames.columnDeviation")), right)
	d.board.text(pad+measureColumn, y, notation.Words(say("frames.columnMeasure")), right)
	d.y += secondSize + 5
	d.board.fill(pad, d.y, d.width, 1, d.board.palette.Rule)
	d.y += 2
}

// ladderRow is one group: how far an atom moves, the measure, and the
// distortion by symmetry.
func (d *pageDrawing) ladderRow(n *symmetry.Nearness, shares []work.Share, of int, leads, on bool) {
	symbol := n.Fit.Setting.Symbol
	name := asText(n)
	right := d.plain
	right.align = 1
	d.row("group "+name, say("frames.rowHint", symbol), on, func() { d.takeGroup(name) }, func() {
		y := d.y + textSize
		d.board.text(pad+d.left, y, notation.Group(symbol), d.strong)
		d.board.text(pad+deviationColumn, y, notation.Words(decimalText(n.Fit.Deviation, 3)), right)
		d.board.text(pad+measureColumn, y, notation.Words(decimalText(n.Measure, 3)), right)
		d.y += textSize + 5
		if text := distortionText(shares); len(text) > 0 {
			d.line(text, d.quiet)
		} else if shares == nil {
			d.words("…", d.quiet)
		}
	})
	if of < 2 {
		return
	}
	label := say("frames.embedding", n.Embedding, of)
	w := d.board.measure(notation.Words(label), d.quiet)
	d.embeddingMark(leads, label, w, symbol)
}

// embeddingMark says which of several ways in which a group lies in the
// structure a row is; a click on the one that leads shows or hides the others.
func (d *pageDrawing) embeddingMark(leads bool, label string, width float64, symbol string) {
	spots := d.board.spots
	top := spots[len(spots)-1].y
	d.board.text(pad+embeddingColumn, top+4+textSize, notation.Words(label), d.quiet)
	if !leads {
		return
	}
	d.board.fill(pad+embeddingColumn, top+textSize+7, width, 1, d.board.palette.Rule)
	hint := say("frames.moreHint", symbol)
	if d.pages.opened[symbol] {
		hint = say("frames.fewerHint", symbol)
	}
	d.board.spot(spot{x: pad + embeddingColumn - 4, y: top, width: width + 8, height: textSize + 10, name: "embeddings " + symbol, hint: hint, do: func() {
		d.pages.opened[symbol] = !d.pages.opened[symbol]
	}})
}

// asText is what Study.As takes for a group of the ladder.
func asText(n *symmetry.Nearness) string {
	if n.Embedding == 1 {
		return n.Fit.Setting.Symbol
	}
	return fmt.Sprintf("%s:%d", n.Fit.Setting.Symbol, n.Embedding)
}

// leastAmount (Å) is the least part of a distortion that is written.
const leastAmount = 5e-4

// distortionText sets the distortion by irrep: all copies together, and the
// partners of a degenerate irrep behind it.
func distortionText(shares []work.Share) notation.Text {
	var t notation.Text
	for _, p := range work.DistortionByIrrep(shares) {
		if p.Amount < leastAmount {
			continue
		}
		if len(t) > 0 {
			t = t.Then(notation.Words(",\u00a0 "))
		}
		t = t.Then(notation.OrbitalText(p.Irrep), notation.Words("\u00a0"+decimalText(p.Amount, 3)))
		if len(p.Partners) > 1 {
			text := ""
			for i, a := range p.Partners {
				if i > 0 {
					text += "\u00a0|\u00a0"
				}
				text += decimalText(a, 3)
			}
			t = t.Then(notation.Words("\u00a0(" + text + ")"))
		}
	}
	return t
}

// linearGroups are what a linear molecule can be taken for, beside its own
// group.
var linearGroups = map[string][]string{
	"C∞v": {"C6v", "C5v", "C4v", "C3v", "C2v", "C2"},
	"D∞h": {"D6h", "D5h", "D4h", "D3h", "D2h", "D4d", "D3d", "D2d", "C6v", "C4v", "C2v", "C2h"},
}

func (d *pageDrawing) linearChoices(fit *symmetry.Fit) {
	symbol := fit.Setting.Symbol
	d.y += 4
	d.words(say("frames.linearText"), d.quiet)
	d.y += 4
	x := float64(pad)
	s := d.now()
	for _, as := range withChosen(append([]string{symbol}, linearGroups[symbol]...), s.As) {
		d.choice(&x, notation.Group(as), chip{name: "group " + as, on: s.As == as, do: func() { d.takeGroup(as) }})
	}
	u := d.ui
	d.choice(&x, notation.Words(say("frames.otherGroup")), chip{name: "other group", hint: say("frames.otherGroupHint"), do: func() {
		u.askLinearGroup(symbol, s.As, func(as string) error {
			if _, err := fit.LinearAs(as); err != nil {
				return err
			}
			u.takeGroup(as)
			return nil
		})
	}})
	d.endChoices()
}

// withChosen adds to usual groups the one that was chosen beyond them.
func withChosen(usual []string, chosen string) []string {
	if chosen == "" || strings.Contains(chosen, ":") || slices.Contains(usual, chosen) {
		return usual
	}
	return append(slices.Clip(usual), chosen)
}

// askLinearGroup asks for a finite group with the z of a linear one, by its
// symbol.
func (u *ui) askLinearGroup(linear, now string, take func(symbol string) error) {
	example := "C7v"
	if linear == "D∞h" {
		example = "D8h"
	}
	u.ask(say("frames.otherGroupAsk"), say("frames.otherGroupText", linear, example), now, func(text string) error {
		return take(strings.TrimSpace(text))
	})
}

// otherLine shows the linear groups that a linear molecule nearly has.
func (d *pageDrawing) otherLine(l *work.Ladder) {
	_, below := l.Within()
	head := false
	for i, n := range l.Groups {
		if !n.Fit.Setting.Infinite() || n.Fit == l.Linear() || below[i] {
			continue
		}
		if !head {
			d.ladderHead()
			head = true
		}
		d.ladderRow(n, d.pages.nearby.Shares[i], 1, true, d.now().As == asText(n))
	}
}

// takeGroup takes the structure for a group of the ladder, or for the one that
// it has within the tolerance.
func (u *ui) takeGroup(as string) {
	s := u.now()
	if s.As == as {
		return
	}
	frame := s.Frame
	s = withGroup(s, as)
	if l := u.pages.nearby.Ladder; l != nil && as != "" && frame != "" && l.Linear() == nil {
		s.Frame = ""
		if n, err := l.Find(as); err == nil {
			if _, err := n.Fit.Frame(frame); err == nil {
				s.Frame = frame
			}
		}
	} else {
		s.Frame = ""
	}
	u.do(study.StepAs, s)
}

func (u *ui) toggleKeepAxes() {
	s := u.now()
	s.KeepAxes = !s.KeepAxes
	if s.As != "" {
		s = withoutNames(s)
	}
	u.do(study.StepAs, s)
}

func (u *ui) toggleDisplacements() {
	s := u.now()
	s.Look.Displacements = !s.Look.Displacements
	u.do(study.StepLook, s)
}

// displacementNote says what the arrows of the picture mean.
func displacementNote(g *work.Group) notation.Text {
	factor, longest := picture.DisplacementScale(g)
	switch {
	case factor == 0:
		return notation.Words(say("frames.noDisplacement"))
	case factor == 1:
		return notation.Words(say("frames.displacementsTrue", decimalText(longest, 3)))
	}
	return notation.Words(say("frames.displacementsTimes", strconv.Itoa(int(math.Round(factor))), decimalText(longest, 3)))
}
