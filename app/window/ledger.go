//go:build cgo && !nowindow

package window

import (
	"math"
	"strings"

	"fyne.io/fyne/v2"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
)

// Sizes of the ledger, in units.
const (
	classRow  = 19.0
	ledgerRow = 28.0
	headWidth = 132.0
	classGap  = 9.0
	// ledgerHeight has the classes, four rows, and room for the scroll bar.
	ledgerHeight = classRow + 4*ledgerRow + 9
)

// drawLedger draws the pane below: a column for every individual operation,
// class by class, with what it makes of the chosen function, its weight, and
// the sum up to it. Everything stands in one picture.
func (u *ui) drawLedger(b *board) {
	u.ledger.inset = headWidth
	x := headWidth + pad/2 - u.ledger.scroll
	defer func() { u.ledger.extent = x + pad + u.ledger.scroll }()
	if u.state.Group == nil {
		return
	}
	sheet := u.sheetOf(b.measure)
	at, growing := u.tally.column()
	height := sheet.rows() * ledgerRow
	class, began := -1, x
	for i, c := range sheet.columns {
		if c.class != class && c.class >= 0 {
			if class >= 0 {
				u.drawClass(b, sheet.classes[class], began, x)
				b.fillFrom(headWidth, x+classGap/2, 5, 1, classRow+height-8, faint(b.palette.Rule, 0xA0))
				x += classGap
			}
			class, began = c.class, x
		}
		if x+c.width > headWidth && x < b.width {
			u.drawColumn(b, c, x, height, growing && i > at)
		}
		name := c.op.Name
		b.spot(spot{x: x, y: classRow, width: c.width, height: height, from: headWidth, name: "operation " + name, hint: c.hint, do: func() { u.playOperation(name) }})
		x += c.width
	}
	if class >= 0 {
		u.drawClass(b, sheet.classes[class], began, x)
	}
	x = u.drawEnd(b, sheet, x+pad)
	u.drawHeads(b, sheet)
}

// drawClass writes the name of a class over its columns, where they are seen.
func (u *ui) drawClass(b *board, name string, from, to float64) {
	from, to = max(from, headWidth), min(to, b.width)
	t := notation.Operation(name)
	s := style{size: secondSize, color: b.palette.Quiet}
	if w := b.measure(t, s); to-from > w {
		b.text((from+to)/2, 14, t, s)
	}
	b.fill(from+4, classRow-1, to-from-8, 1, faint(b.palette.Rule, 0x80))
}

// drawColumn draws one operation; what a growing sum has not come to yet is
// left out of it.
func (u *ui) drawColumn(b *board, c ledgerColumn, x, height float64, awaited bool) {
	chosen := u.now().Operation == c.op.Name
	ink := style{size: textSize, color: b.palette.Ink}
	second := style{size: secondSize, color: b.palette.Ink}
	if chosen {
		b.fillFrom(headWidth, x, classRow+ledgerRow, c.width, height-ledgerRow, faint(b.palette.Accent, 0x28))
		b.fillFrom(headWidth, x, classRow, c.width, ledgerRow, b.palette.Accent)
		ink.color = b.palette.Ground
		if p := u.state.Problem(work.ConcernOperation); p != nil {
			b.frameFrom(headWidth, x, classRow, c.width, height, 2, b.palette.Ink)
		}
	}
	middle := x + c.width/2
	for i, t := range c.set {
		s := second
		if i == 0 {
			s = ink
		}
		// Text lies over everything, so what reached under the heads is left out.
		if i == 3 && awaited || middle-b.measure(t, s)/2 < headWidth+2 {
			continue
		}
		b.text(middle, classRow+float64(i)*ledgerRow+18, t, s)
	}
	if c.mark != "" && x+c.width-12 > headWidth {
		b.text(x+c.width-3, classRow+2*ledgerRow+11, notation.Words(c.mark), style{size: 9, color: b.palette.Accent, align: 1, bold: true})
	}
}

// drawEnd draws what stands after the last column and returns where it ends.
func (u *ui) drawEnd(b *board, sheet *ledgerSheet, x float64) float64 {
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	if sheet.remark != "" {
		// Below the rows that there are, where they are seen.
		b.paragraph(headWidth+pad/2, classRow+sheet.rows()*ledgerRow+18, b.width-headWidth-2*pad, notation.Words(sheet.remark), quiet)
		return x
	}
	if _, growing := u.tally.column(); growing && !u.tally.finished() {
		return x + u.endWidth(b, sheet)
	}
	plain := style{size: secondSize, color: b.palette.Ink, align: -1}
	if len(sheet.end) > 0 {
		b.fillFrom(headWidth, x-pad/2, 5, 1, classRow+4*ledgerRow-8, b.palette.Rule)
	}
	for i, line := range sheet.end {
		s := plain
		if line.do != nil {
			s.color = b.palette.Accent
		}
		y := classRow + float64(i)*ledgerRow
		if x < b.width && x > headWidth-4 {
			b.text(x+4, y+18, line.text, s)
		}
		if line.do != nil || line.hint != "" {
			name := line.name
			if name == "" {
				name = "ledger end " + letterOf(i)
			}
			b.spot(spot{x: x, y: y, width: b.measure(line.text, s) + 8, height: ledgerRow, from: headWidth, name: name, hint: line.hint, do: line.do})
		}
	}
	return x + u.endWidth(b, sheet)
}

func (u *ui) endWidth(b *board, sheet *ledgerSheet) float64 {
	w := 0.0
	for _, line := range sheet.end {
		w = max(w, b.measure(line.text, style{size: secondSize}))
	}
	return w + 8
}

// drawHeads draws the names of the rows on the left; columns pass under them.
func (u *ui) drawHeads(b *board, sheet *ledgerSheet) {
	b.fill(0, 0, headWidth, classRow+4*ledgerRow+9, b.palette.Panel)
	b.fill(headWidth-1, 5, 1, classRow+4*ledgerRow-8, b.palette.Rule)
	b.spot(spot{width: headWidth, height: classRow + 4*ledgerRow, name: "ledger heads"})
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	for i, head := range sheet.heads {
		y := classRow + float64(i)*ledgerRow
		s := quiet
		if i == 2 && len(head) > 0 && !sheet.matrices {
			s.color = b.palette.Accent
			head = head.Then(notation.Words("  ▾"))
			b.spot(spot{x: 4, y: y + 2, width: headWidth - 10, height: ledgerRow - 4, name: "ledger weight", hint: say("ledger.chooseWeight"), do: u.offerWeights})
		}
		b.text(pad, y+18, head, s)
	}
	if sheet.ledger != nil {
		b.text(pad, 14, notation.Words(say("ledger.copyTable")), style{size: secondSize, color: b.palette.Accent, align: -1})
		b.spot(spot{x: 4, y: 0, width: headWidth - 10, height: classRow, name: "ledger copy", hint: say("ledger.copyHint"), do: u.offerCopies})
	}
}

// ledgerKeys serves the keys of the ledger while an operation is marked, and
// tells whether it did.
func (u *ui) ledgerKeys(e *fyne.KeyEvent) bool {
	marked, onColumn := strings.CutPrefix(u.ledger.mark, "operation ")
	if !onColumn {
		marked = u.now().Operation
	}
	onColumn = onColumn || u.ledger.mark == ""
	switch e.Name {
	case fyne.KeyRight:
		if onColumn {
			u.operationFrom(marked, 1)
		}
		return onColumn
	case fyne.KeyLeft:
		if onColumn {
			u.operationFrom(marked, -1)
		}
		return onColumn
	case fyne.KeyHome:
		u.edgeOperation(false)
	case fyne.KeyEnd:
		u.edgeOperation(true)
	case fyne.KeyEscape:
		u.escape()
	default:
		return false
	}
	return true
}

// edgeOperation plays the first operation or the last.
func (u *ui) edgeOperation(last bool) {
	if u.state.Group == nil {
		return
	}
	list := u.state.Group.Operations(u.now().Angle)
	op := list[0]
	if last {
		op = list[len(list)-1]
	}
	u.playOperation(op.Name)
	u.ledger.mark = "operation " + op.Name
	if last {
		u.ledger.scrollTo(math.Inf(1))
	}
}

// operationHint says in words what an operation does.
func operationHint(op work.Operation) string {
	axis := vectorText(op.Axis[:], 3)
	degrees := shortText(op.Angle*180/math.Pi, 1) + "°"
	switch {
	case op.HasCentre():
		return say("ledger.inversion")
	case op.HasAxis() && op.HasPlane():
		return say("ledger.improper", degrees, axis)
	case op.HasAxis():
		return say("ledger.turn", degrees, axis)
	case op.HasPlane():
		return say("ledger.reflection", axis)
	}
	return say("ledger.identity")
}

// An imageCache holds the representation of the basis, from which images are
// read. It is made in the background.
type imageCache struct {
	basis          *work.Basis
	representation *orbitals.Representation
	wanted         *work.Basis // being made
}

// update has the representation of a new basis made.
func (c *imageCache) update(u *ui) {
	b := u.state.Basis
	if b == nil || b == c.basis || b == c.wanted || b.Fit.Setting.Infinite() {
		return
	}
	c.wanted = b
	go func() {
		defer func() {
			if fault := recover(); fault != nil {
				u.failedAside(fault)
			}
		}()
		r, err := b.Representation()
		if err != nil {
			return
		}
		u.post(func() {
			if c.wanted == b {
				c.basis, c.representation, c.wanted = b, r, nil
				u.ledger.Update()
				u.said.Update()
			}
		})
	}()
}

// partnerImage is what an operation makes of a partner, among the partners of
// its copy.
func partnerImage(o *work.Orbitals, orbital *orbitals.GroupOrbital, operation int) []orbitals.Term {
	irrep := o.Irreps[orbital.Irrep]
	var terms []orbitals.Term
	for l := range irrep.Dimension {
		if c := irrep.Matrices[operation].At(l, orbital.Partner); math.Abs(c) > 1e-9 {
			terms = append(terms, orbitals.Term{Function: l, Coefficient: c})
		}
	}
	return terms
}

// shortCoefficient is exact where that is short.
func shortCoefficient(x float64) string {
	if exact := notation.ExactCoefficient(x); notation.Width(exact) <= 8 {
		return exact
	}
	return notation.Short(x, 3)
}
