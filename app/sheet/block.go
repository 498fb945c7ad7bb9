package sheet

// A block is items laid out together, with its upper left corner at the
// origin.
type block struct {
	items []Item
	w, h  float64
}

// put adds the items of another block with its corner at x and y. The size
// stays; see grow.
func (b *block) put(o block, x, y float64) {
	for _, item := range o.items {
		b.items = append(b.items, moved(item, x, y))
	}
	b.grow(x+o.w, y+o.h)
}

// grow makes the block at least as large as w and h.
func (b *block) grow(w, h float64) { b.w, b.h = max(b.w, w), max(b.h, h) }

// moved is an item elsewhere.
func moved(item Item, dx, dy float64) Item {
	shifted := func(points [][2]float64) [][2]float64 {
		out := make([][2]float64, len(points))
		for i, p := range points {
			out[i] = [2]float64{p[0] + dx, p[1] + dy}
		}
		return out
	}
	switch item := item.(type) {
	case *Panel:
		p := *item
		p.X, p.Y = p.X+dx, p.Y+dy
		return &p
	case Text:
		item.X, item.Y = item.X+dx, item.Y+dy
		return item
	case Line:
		item.Points = shifted(item.Points)
		return item
	case Polygon:
		item.Points = shifted(item.Points)
		return item
	case Disc:
		item.X, item.Y = item.X+dx, item.Y+dy
		return item
	}
	return item
}
