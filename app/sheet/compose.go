package sheet

import (
	"math"
	"slices"
)

// An option is a way to lay a sheet out.
type option struct {
	plan
	card   placedCard
	beside bool
	// within names the atoms in the first panel instead of in a key.
	within bool
	height float64
	score  float64
}

// How much smaller panels may be for what they keep: closed forms below them,
// and a line of its own for each irrep; and for a key that is saved. Found by
// looking.
const (
	withoutForms = 0.5
	sharedLines  = 0.55
	brokenUnits  = 0.6
	withoutKey   = 1.3
)

// compose lays out a grid with its card, with the largest panels that fit.
func (m *maker) compose(g grid, c card) (block, error) {
	room := m.room()
	if g.flows && m.height == 0 {
		room = max(room, min(tallestPage, 2.4*m.width)-2*m.margin) // a strip of many panels may be long
	}
	best, ok := m.search(g, c, room)
	if !ok && m.height == 0 {
		// More panels than a page of a journal takes: as low as can be.
		best, ok = m.lowest(g, c)
	}
	if !ok {
		return block{}, errTooSmall
	}
	const seen = 15.0 // mm, at 18 pt: less is not seen from afar
	if m.height > 0 && !m.cardless && m.figure.Slide && g.cells() > 1 && max(g.view.Width, g.view.Height)*best.scale < seen {
		return block{}, errTooSmall
	}
	if !best.forms && g.hasForms() && !m.figure.NoCoefficients && !m.figure.NoCaption {
		m.note("captions.noCoefficients")
	}
	if best.card.keyless {
		m.note("captions.noKey")
	}
	if best.within {
		// Rows are shared by all options.
		best.grid.rows = slices.Clone(best.grid.rows)
		best.grid.rows[0].cells = slices.Clone(best.grid.rows[0].cells)
		best.grid.rows[0].cells[0].named = true
		c.key = nil
	}
	drawn, err := m.draw(best.plan)
	if err != nil {
		return block{}, err
	}
	drawnCard, err := m.drawCard(c, best.card, best.plan)
	if err != nil {
		return block{}, err
	}
	out := block{}
	switch {
	case best.beside:
		out.put(drawn, 0, max(0, (drawnCard.h-drawn.h)/2))
		out.put(drawnCard, drawn.w+cardGap, max(0, (drawn.h-drawnCard.h)/2))
	default:
		width := max(drawn.w, drawnCard.w)
		out.put(drawn, (width-drawn.w)/2, 0)
		if drawnCard.h > 0 {
			out.put(drawnCard, (width-drawnCard.w)/2, out.h+cardGap)
		}
	}
	return out, nil
}

const cardGap = 4.0 // mm

// unit is the most cells that belong on one line.
func (g grid) unit() int {
	n := 1
	for _, r := range g.rows {
		n = max(n, r.unit)
	}
	return n
}

func (g grid) hasForms() bool {
	for _, r := range g.rows {
		for _, c := range r.cells {
			if len(c.form) > 0 {
				return true
			}
		}
	}
	return false
}

// options are all ways that are tried, each with its largest panels before the
// height is looked at.
func (m *maker) options(g grid, c card) []option {
	var out []option
	forms := []bool{true, false}
	if m.figure.NoCoefficients || m.figure.NoCaption || !g.hasForms() {
		forms = []bool{false}
	}
	packings := []bool{false}
	switch {
	case g.flows:
		packings = []bool{true}
	case len(g.rows) > 1:
		packings = []bool{false, true}
	}
	for _, beside := range []bool{false, true} {
		width := m.inner()
		if beside {
			if m.width < 120 || !c.wanted() || m.cardless {
				continue
			}
			width -= m.besideWidth() + cardGap
		}
		for _, packed := range packings {
			for columns := 1; columns <= g.longest(packed); columns++ {
				for _, withForms := range forms {
					p, ok := m.plan(g, width, columns, packed, withForms)
					if !ok {
						continue
					}
					o := option{plan: p, beside: beside, score: 1}
					if !withForms && len(forms) > 1 {
						o.score *= withoutForms
					}
					if packed && !g.flows {
						o.score *= sharedLines
					}
					if columns < g.unit() {
						o.score *= brokenUnits
					}
					out = append(out, o)
					if large, ok := m.namedWithin(o, width, c); ok {
						out = append(out, large)
					}
				}
			}
		}
	}
	return out
}

// namedWithin is an option with the names of the atoms in the first panel, where
// panels are large enough for that.
func (m *maker) namedWithin(o option, width float64, c card) (option, bool) {
	if c.key == nil || m.figure.NoCard || m.study.Look.NoLabels || o.width < largePanel*m.size/textSize {
		return o, false
	}
	g := o.grid
	g.side = 0.7 * m.labelRoom(1)
	p, ok := m.plan(g, width, o.columns, o.packed, o.forms)
	o.plan, o.within = p, true
	o.score *= withoutKey
	return o, ok
}

// largePanel is the width in millimetres from which a panel has room for the
// names of atoms in type of the usual size.
const largePanel = 36.0

// besideWidth is the width of a card beside the panels.
func (m *maker) besideWidth() float64 { return min(0.34*m.inner(), 46+m.size*2) }

// measured is an option with its card and its height, at the plan's scale.
func (m *maker) measured(o option, c card) option {
	_, h := o.size()
	width := m.inner()
	if o.beside {
		width = m.besideWidth()
	}
	if o.within {
		c.key = nil
	}
	o.card = m.placeCard(c, o.plan, width, o.beside)
	switch {
	case o.beside && (o.card.torn || o.card.keyless):
		o.height = math.Inf(1)
	case o.card.h == 0:
		o.height = h
	case o.beside:
		o.height = max(h, o.card.h)
	default:
		o.height = h + cardGap + o.card.h
	}
	return o
}

// search finds the best option within a height.
func (m *maker) search(g grid, c card, room float64) (option, bool) {
	var best option
	found := false
	for _, o := range m.options(g, c) {
		p, ok := o.bisected(func(p plan) bool {
			o.plan = p
			return m.measured(o, c).height <= room
		})
		const share = 0.7 // of a panel's width that bodies with names beside them take
		if !ok || o.within && max(p.grid.view.Width, p.grid.view.Height)*p.scale < share*largePanel*m.size/textSize {
			continue
		}
		o.plan = p
		o = m.measured(o, c)
		o.score *= o.scale
		const better = 1.02 // equal ones differ in the last bits
		if !found || o.score > best.score*better || o.score > best.score/better && o.height < best.height-0.1 {
			best, found = o, true
		}
	}
	return best, found
}

// lowest finds the option of the least height, however tall.
func (m *maker) lowest(g grid, c card) (option, bool) {
	var best option
	found := false
	for _, o := range m.options(g, c) {
		if o = m.measured(o, c); math.IsInf(o.height, 1) {
			continue
		}
		if !found || o.height*o.score < best.height*best.score {
			best, found = o, true
		}
	}
	return best, found
}
