package render

import "slices"

// A pile is the list of the strips of a group, from the first shape to the
// last.

// collectPile lists the strips of a group from the first shape to the last
// and wants the sights of those that have no colour.
func (t *tile) collectPile(g *group, py, k int, any, lines uint8) {
	from := len(t.pile)
	if lines != 0 {
		t.pile = append(t.pile, t.lineStrip(py*t.side+g.x, lines))
	}
	first := len(t.pile)
	if t.layered {
		for s := t.piles[k]; s >= 0; s = t.strips[s].next {
			t.pile = append(t.pile, s)
		}
		slices.Reverse(t.pile[first:])
		t.sortPile(t.pile[first:])
	}
	t.layWides(first, g.x, py, any)
	for _, s := range t.pile[from:] {
		if !t.strips[s].even {
			t.wishStrip(s, g.x, py)
		}
	}
}

// sortPile puts strips, mostly so already, into their order.
func (t *tile) sortPile(pile []int32) {
	for i := 1; i < len(pile); i++ {
		k := pile[i]
		o := t.strips[k].order()
		j := i
		for ; j > 0 && t.strips[pile[j-1]].order() > o; j-- {
			pile[j] = pile[j-1]
		}
		pile[j] = k
	}
}

// pileAt returns the strips of the group of a pixel.
func (t *tile) pileAt(x, y int) []int32 {
	g, _ := t.groupOf(x, y)
	x, y = t.place(g)
	grp := group{x: x}
	t.pile = t.pile[:0]
	t.sights.reset()
	_, _ = t.scan(y*t.side + x)
	t.collectPile(&grp, y, g, 0xff, 0)
	return t.pile
}
