//go:build cgo && !nowindow

package window

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// A ledgerColumn is what the ledger shows of one operation.
type ledgerColumn struct {
	op    work.Operation
	class int // −1 for a family
	// set are the entries of the rows: operation, image, weight, sum.
	set   [4]notation.Text
	mark  string // the letter of the set that cancels; "" if there is none
	hint  string
	width float64
}

// A ledgerSheet is the whole ledger, set but not drawn.
type ledgerSheet struct {
	columns []ledgerColumn
	classes []string // names, by class
	heads   [4]notation.Text
	// ledger is the projection in the rows, or nil if no function or no irrep
	// is chosen, or if the group is infinite.
	ledger *work.Ledger
	end    []ledgerEnd
	// matrices says that the third row has those of a linear molecule's irrep.
	matrices bool
	// remark stands in the place of the last two rows.
	remark string
}

// rows is how many rows the columns have: the last two only where a function is
// projected.
func (l *ledgerSheet) rows() float64 {
	switch {
	case l.ledger != nil:
		return 4
	case l.matrices:
		return 3
	case len(l.heads[1]) > 0:
		return 2
	}
	return 1
}

// A ledgerEnd is a line after the last column.
type ledgerEnd struct {
	text notation.Text
	name string // of its spot
	hint string
	do   func()
}

// A ledgerKey is what the sheet is made from.
type ledgerKey struct {
	group          *work.Group
	basis          *work.Basis
	orbitals       *work.Orbitals
	ledger         *work.Ledger
	representation *orbitals.Representation
	projection     study.Projection
	angle          float64
	none           bool // no basis is chosen
	language       any
}

// sheetOf is the ledger of what is known, made anew only where that changed:
// 120 columns take longer to set than a frame of the picture lasts.
func (u *ui) sheetOf(measure func(notation.Text, style) float64) *ledgerSheet {
	s, st := u.now(), u.state
	key := ledgerKey{group: st.Group, basis: st.Basis, orbitals: st.Orbitals, ledger: st.Ledger, projection: s.Projection, none: len(s.Basis) == 0, language: spoken.Load()}
	if u.images.basis == st.Basis {
		key.representation = u.images.representation
	}
	if st.Group != nil && st.Group.Fit.Setting.Infinite() {
		key.angle = s.Angle
	}
	if u.book.sheet == nil || u.book.key != key {
		u.book.key, u.book.sheet = key, u.makeSheet(measure)
	}
	return u.book.sheet
}

// A ledgerBook keeps the sheet at hand.
type ledgerBook struct {
	key   ledgerKey
	sheet *ledgerSheet
}

// theLedger is the projection that fits to what is chosen; nil while it is being
// made.
func (u *ui) theLedger() *work.Ledger {
	s, st := u.now(), u.state
	l := st.Ledger
	if l == nil || st.Basis != l.Basis || len(s.Basis) == 0 || st.Stale(work.StageLedger) {
		return nil
	}
	e := s.Projection.TheElement()
	if l.Ledger.Function+1 != s.Projection.Function || l.Irrep.Label != s.Projection.Irrep || l.ByCharacter() != s.Projection.Character ||
		!l.ByCharacter() && l.Element != [2]int{e[0] - 1, e[1] - 1} {
		return nil
	}
	return l
}

func (u *ui) makeSheet(measure func(notation.Text, style) float64) *ledgerSheet {
	g := u.state.Group
	sheet := &ledgerSheet{ledger: u.theLedger()}
	if g == nil {
		return sheet
	}
	for _, c := range g.Fit.Setting.Classes {
		sheet.classes = append(sheet.classes, c.Name)
	}
	sheet.heads[0] = notation.Words(say("ledger.operation"))
	u.imageHead(sheet)
	marks := map[int]string{}
	if l := sheet.ledger; l != nil {
		f := notation.PhiText(strconv.Itoa(l.Ledger.Function + 1))
		sheet.heads[2] = notation.Irrep(l.Irrep.Label).Then(notation.Words("  "), weightShort(l))
		sheet.heads[3] = fill(say("ledger.sumOfFunction"), f)
		marks = cancelMarks(l)
	} else if u.state.Basis != nil && len(u.now().Basis) > 0 && !g.Fit.Setting.Infinite() {
		sheet.heads[2] = notation.Words(say("ledger.onto"))
	}
	if irrep, ok := u.linearIrrep(); ok {
		sheet.heads[2], sheet.matrices = fill(say("frames.matrixOf"), notation.Irrep(irrep)), true
	}
	for i, op := range g.Operations(u.now().Angle) {
		c := ledgerColumn{op: op, class: op.Class, mark: marks[i]}
		if op.Index < 0 {
			c.class = -1
		}
		c.set[0] = notation.Operation(op.Name)
		if op.Family {
			c.set[0] = familyText(op, u.now().Angle)
		}
		image, full := u.imageOf(op)
		c.set[1] = image
		lines := []string{operationHint(op)}
		if full != "" {
			lines = append(lines, say("ledger.hintImage", full))
		}
		if sheet.matrices {
			c.set[2] = u.linearMatrix(op)
		}
		if l := sheet.ledger; l != nil {
			row := l.Rows[i]
			c.set[2] = notation.Words(weightText(row.Weight))
			sum := notation.Terms(row.Sum)
			c.set[3] = abbreviated(sum, notation.PhiText)
			lines = append(lines, say("ledger.hintSum", combination(sum, notation.PhiText, notation.OneKind(sum)).String()))
		}
		c.hint = strings.Join(lines, "; ")
		c.width = columnWidth(c, measure)
		sheet.columns = append(sheet.columns, c)
	}
	switch {
	case g.Fit.Setting.Infinite() || sheet.ledger == nil:
		sheet.remark = u.ledgerNeed()
	default:
		sheet.end = u.ledgerEnd(sheet.ledger)
	}
	return sheet
}

// ledgerNeed says why no function is projected, or what must be chosen first;
// it is empty if there is a projection or will be as soon as it is computed.
func (u *ui) ledgerNeed() string {
	s, g := u.now(), u.state.Group
	switch {
	case g != nil && g.Fit.Setting.Infinite():
		return say("ledger.infinite", g.Fit.Setting.Symbol)
	case len(s.Basis) == 0:
		return u.onLeft(say("ledger.needBasis"))
	case u.state.Problem(work.ConcernElement) != nil:
		return told(u.state.Problem(work.ConcernElement))
	case s.Projection.Irrep == "":
		return say("ledger.needIrrep")
	case s.Projection.Function == 0:
		return u.onLeft(say("ledger.needFunction"))
	}
	return ""
}

// onLeft adds to what is to be chosen on the left how to get there.
func (u *ui) onLeft(text string) string {
	if u.pages.open != noPage || u.atoms.pane.Visible() {
		text += " " + say("ledger.covered")
	}
	return text
}

// columnWidth is that of the widest entry, and no less than columns need to be
// hit.
func columnWidth(c ledgerColumn, measure func(notation.Text, style) float64) float64 {
	const least, room = 44, 14
	w := float64(least)
	for i, t := range c.set {
		size := style{size: secondSize}
		if i == 0 {
			size.size = textSize
		}
		w = max(w, measure(t, size)+room)
	}
	if c.mark != "" {
		w += 8
	}
	return math.Ceil(w)
}

// imageHead names the row of images: of the function whose projection stands
// below, or of the group orbital that is chosen without one.
func (u *ui) imageHead(sheet *ledgerSheet) {
	s, st := u.now(), u.state
	switch {
	case st.Basis == nil || len(s.Basis) == 0:
	case s.Projection.Function >= 1 && s.Projection.Function <= len(st.Basis.Functions):
		f := st.Basis.Functions[s.Projection.Function-1]
		sheet.heads[1] = fill(say("ledger.functionOn"), notation.PhiText(fmt.Sprint(s.Projection.Function)), notation.Function(f.Name),
			notation.Words(st.Basis.AtomNames()[f.Site]))
	case u.orbital() != nil:
		sheet.heads[1] = u.orbitalText(u.orbital())
	}
}

// imageOf is what an operation makes of the function, or of the group orbital
// where no function is chosen, and the same in full as plain words if it is
// abbreviated.
func (u *ui) imageOf(op work.Operation) (notation.Text, string) {
	s, st := u.now(), u.state
	if st.Basis == nil || len(s.Basis) == 0 {
		return nil, ""
	}
	var terms []orbitals.Term
	name := notation.PhiText
	n := s.Projection.Function
	switch {
	case n >= 1 && n <= len(st.Basis.Functions) && op.Index < 0:
		terms, _ = st.Basis.ImageUnder(op, n-1)
	case n >= 1 && n <= len(st.Basis.Functions):
		if u.images.basis == st.Basis && u.images.representation != nil {
			terms = u.images.representation.Image(op.Index, n-1)
		}
	case u.orbital() != nil && op.Index >= 0:
		o := u.orbital()
		terms, name = partnerImage(st.Orbitals, o, op.Index), partnerNames(st.Orbitals.Irreps[o.Irrep])
	case u.orbital() != nil:
		o := u.orbital()
		terms, name = u.linearImage(op, o), partnerNames(st.Orbitals.Irreps[o.Irrep])
	}
	if len(terms) == 0 {
		return nil, ""
	}
	text := abbreviated(terms, name)
	if full := combination(terms, name, notation.OneKind(terms)).String(); full != text.String() {
		return text, full
	}
	return text, ""
}

// mostTerms is how many terms of a sum a column shows.
const mostTerms = 4

// abbreviated sets a sum with short numbers; of many terms the first ones, and
// how many there are.
func abbreviated(terms []orbitals.Term, name func(string) notation.Text) notation.Text {
	write := notation.OneKind(terms)
	for _, t := range terms {
		if notation.Width(write(math.Abs(t.Coefficient))) > 8 {
			write = notation.DecimalCoefficient
		}
	}
	if len(terms) <= mostTerms {
		return combination(terms, name, write)
	}
	return combination(terms[:mostTerms-1], name, write).Then(notation.Words(say("ledger.andMore", len(terms)-mostTerms+1)))
}

// weightShort says how the operations are weighed: D with its indices, or χ.
func weightShort(l *work.Ledger) notation.Text {
	if l.ByCharacter() {
		return notation.Text{{Text: "χ", Italic: true}}
	}
	return notation.Text{{Text: "D", Italic: true}, {Text: fmt.Sprintf("%d,%d", l.Element[0]+1, l.Element[1]+1), Place: notation.Sub}}
}

// cancelMarks gives every set of operations that cancel a letter, by row.
func cancelMarks(l *work.Ledger) map[int]string {
	out := map[int]string{}
	for i, c := range l.Cancelling() {
		for _, row := range c.Rows {
			out[row] = letterOf(i)
		}
	}
	return out
}

// letterOf counts a, b, … z, a1, b1 …
func letterOf(i int) string {
	letter := string(rune('a' + i%26))
	if i >= 26 {
		letter += strconv.Itoa(i / 26)
	}
	return letter
}

// ledgerEnd are the lines after the last column: the total, its length, and
// what group orbital that is; or why nothing is left.
func (u *ui) ledgerEnd(l *work.Ledger) []ledgerEnd {
	if l.Norm == 0 {
		return u.zeroEnd(l)
	}
	total := notation.Terms(l.Total())
	out := []ledgerEnd{
		{text: notation.Words(say("ledger.total") + " ").Then(totalText(l)), hint: combination(total, notation.PhiText, notation.OneKind(total)).String()},
		{text: fill(say("ledger.norm"), notation.Words(table.NormText(l.Norm)))},
		{text: notation.Words("⇒ ").Then(table.CombinationForm(l.Result()))},
	}
	last := ledgerEnd{text: notation.Words("= ").Then(u.amongText(l))}
	if o, sign := u.madeOrbital(l); o != nil {
		irrep := u.state.Orbitals.Irreps[o.Irrep].Label
		last.name, last.do = "ledger result", func() { u.chooseOrbital(irrep, o.Copy+1, o.Partner+1) }
		last.hint = say("ledger.chooseResult")
		if sign < 0 {
			last.hint = say("ledger.chooseNegative")
		}
	}
	return append(out, last)
}

// totalText sets a total with its common factor before a bracket: 4(φ1 − φ3).
func totalText(l *work.Ledger) notation.Text {
	terms := notation.Terms(l.Total())
	least := math.Inf(1)
	for _, t := range terms {
		least = min(least, math.Abs(t.Coefficient))
	}
	factor, ok := notation.Exact(least)
	if !ok || factor == "1" || len(terms) < 2 {
		return abbreviated(terms, notation.PhiText)
	}
	within := make([]orbitals.Term, len(terms))
	for i, t := range terms {
		within[i] = orbitals.Term{Function: t.Function, Coefficient: t.Coefficient / least}
		if x := math.Round(within[i].Coefficient); math.Abs(x-within[i].Coefficient) < 1e-9 {
			within[i].Coefficient = x
		}
	}
	return notation.Words(factor+"(").Then(abbreviated(within, notation.PhiText), notation.Words(")"))
}

// madeOrbital is the group orbital that a projection makes, and the sign with
// which it does; nil if it makes a mixture of several.
func (u *ui) madeOrbital(l *work.Ledger) (*orbitals.GroupOrbital, float64) {
	all := u.state.Orbitals
	among := l.Among(all)
	if len(among) != 1 || math.Abs(among[0].Coefficient) != 1 {
		return nil, 0
	}
	return &all.Projection.Orbitals[among[0].Function], among[0].Coefficient
}

// amongText says which group orbital a projection makes, or which mixture.
func (u *ui) amongText(l *work.Ledger) notation.Text {
	all := u.state.Orbitals
	among := l.Among(all)
	if len(among) == 0 {
		return notation.Words("…")
	}
	name := func(number string) notation.Text {
		n, _ := strconv.Atoi(number)
		return u.orbitalText(&all.Projection.Orbitals[n-1])
	}
	return combination(among, name, notation.OneKind(among))
}

// zeroEnd says why nothing is left.
func (u *ui) zeroEnd(l *work.Ledger) []ledgerEnd {
	out := []ledgerEnd{{text: notation.Words(say("ledger.total") + " 0")}}
	sets := l.Cancelling()
	const most = 4
	var shown, all notation.Text
	for i, c := range sets {
		if i > 0 {
			all = all.Then(notation.Words("; "))
		}
		all = all.Then(notation.Words(letterOf(i)+": "), rowNames(l, c.Rows))
		if i < most {
			shown = all
		}
	}
	if len(sets) > most {
		shown = shown.Then(notation.Words("; …"))
	}
	if len(sets) == 0 {
		out = append(out, ledgerEnd{text: notation.Words(say("ledger.allIdle"))})
	} else {
		out = append(out, ledgerEnd{text: fill(say("ledger.cancel"), shown), hint: fill(say("ledger.cancel"), all).String()})
	}
	if idle := l.Idle(); len(idle) > 0 && len(sets) > 0 {
		out = append(out, ledgerEnd{text: notation.Words(say("ledger.idle", len(idle)))})
	}
	last := ledgerEnd{text: u.nonePart(l)}
	if !l.ByCharacter() && len(l.Partners) > 0 {
		partner := l.Partners[0] + 1
		row := l.Element[0] + 1
		last.name, last.hint = "ledger otherElement", say("ledger.useElement", row, partner)
		last.do = func() { u.weighWith([2]int{row, partner}, false) }
	}
	return append(out, last)
}

// nonePart says whether the function has no part in the irrep at all, or only
// none in this partner.
func (u *ui) nonePart(l *work.Ledger) notation.Text {
	f, irrep := notation.PhiText(strconv.Itoa(l.Ledger.Function+1)), notation.Irrep(l.Irrep.Label)
	if l.ByCharacter() || len(l.Partners) == 0 {
		return fill(say("ledger.noPart"), f, irrep)
	}
	names := partnerNames(l.Irrep)
	var others notation.Text
	for i, p := range l.Partners {
		if i > 0 {
			others = others.Then(notation.Words(", "))
		}
		others = others.Then(names(strconv.Itoa(p + 1)))
	}
	return fill(say("ledger.noPartHere"), f, names(strconv.Itoa(l.Element[1]+1)), others)
}

// rowNames are the names of the operations of some rows.
func rowNames(l *work.Ledger, rows []int) notation.Text {
	var t notation.Text
	for i, r := range rows {
		if i > 0 {
			t = t.Then(notation.Words(", "))
		}
		t = t.Then(notation.Operation(l.Fit.Setting.Operations[l.Rows[r].Operation].Name))
	}
	return t
}

// orbitalText names a group orbital of the list at hand: its label, the copy
// where there are several, and of several partners which.
func (u *ui) orbitalText(o *orbitals.GroupOrbital) notation.Text {
	all := u.state.Orbitals
	irrep := all.Irreps[o.Irrep]
	t := notation.OrbitalText(irrep.Label)
	if irrep.Dimension > 1 {
		t = partnerNames(irrep)(strconv.Itoa(o.Partner + 1))
	}
	if all.Content[o.Irrep] > 1 {
		t = notation.Words(fmt.Sprint(o.Copy+1, " ")).Then(t)
	}
	return t
}

// partnerNames names the partners of an irrep, counted from 1: eu(x) where it
// is like x, else eu(1).
func partnerNames(irrep symmetry.Irrep) func(number string) notation.Text {
	return func(number string) notation.Text {
		if irrep.Dimension == 1 {
			return notation.OrbitalText(irrep.Label)
		}
		which := notation.Words(number)
		if n, err := strconv.Atoi(number); err == nil && n >= 1 && n <= len(irrep.Functions) && len(irrep.Functions[n-1]) > 0 {
			like := spelledText(notation.Polynomial(irrep.Functions[n-1][notation.Likest(irrep.Functions[0])]))
			const short = 6
			if notation.Width(like.String()) <= short {
				which = like
			}
		}
		return notation.OrbitalText(irrep.Label).Then(notation.Words("("), which, notation.Words(")"))
	}
}

// weightText is exact where that is not too long.
func weightText(x float64) string {
	sign := ""
	if x < 0 {
		sign, x = "−", -x
	}
	const longest = 10 // (1 + √5)/4
	if exact := notation.ExactCoefficient(x); notation.Width(exact) <= longest {
		return sign + exact
	}
	return sign + shortText(x, 3)
}
