package render

import (
	"encoding/binary"
	"math"
)

// Translucent discs mostly cover tiles from edge to edge and have one colour
// there. A disc that fills a tile is kept as an equation, and where all its
// discs lie in one order the tile's ground is one colour.

// paneColor is the colour of a translucent disc on a canvas; even tells that
// it is the same all over.
type paneColor struct {
	r, g, b float32
	even    bool
}

// wide is a translucent disc that fills the canvas: its nearness at the
// middle of the pixel (px, py) is n + nx·px + ny·py.
type wide struct {
	slot      uint32
	part      int32
	n, nx, ny float32
}

func (w *wide) near(px, py int) float32 { return w.n + w.nx*float32(px) + w.ny*float32(py) }

// evenColor finds the colour of a disc, that of the last slot, when it is
// even on the canvas: without hatching, seen from one side and away from the
// highlight.
func (t *tile) evenColor(p *part) (c paneColor) {
	d := &t.f.discs[p.index]
	l := &t.f.light
	if p.hatch.period > 0 {
		return c
	}
	front, back := 0, 0
	for _, e := range [4][2]int{{0, 0}, {t.side, 0}, {0, t.side}, {t.side, t.side}} {
		va, vb := l.sightAt(float32(t.x+e[0]), float32(t.y+e[1]))
		nl, nv := d.light, d.normal[0]*va+d.normal[1]*vb+d.normal[2]
		if nv < 0 {
			nl, nv = -nl, -nv
			back++
		} else {
			front++
		}
		if nl+nv >= l.glintSum && !p.flat {
			return c
		}
	}
	if front > 0 && back > 0 {
		return c
	}
	c.even = true
	half := float32(t.side) / 2
	t.sights.reset()
	o := &t.sights.all[t.sights.block()]
	t.aim(o, 0, uint32(len(t.slots)-1), half, half)
	t.look()
	c.r, c.g, c.b = o.red[0], o.green[0], o.blue[0]
	return c
}

// pane draws a translucent disc without a hole. It is one sheet, so its
// strips are made at once, pixel row by pixel row; the layer gets them when
// it is wanted for an outline.
func (t *tile) pane(d *disc, p *part, slot uint32, keep bool) {
	b := &p.box
	area := t.clip
	all := d.fills(float64(t.x), float64(t.y), float64(t.x+t.side), float64(t.y+t.side), t.f.projs[p.proj].nMin)
	if keep = keep && (!all || t.bodies); !keep {
		area = t.inner
	}
	at := func(x, y float64) float64 {
		return d.n[0] + d.n[1]*(float64(t.x)+x-d.mx) + d.n[2]*(float64(t.y)+y-d.my)
	}
	part := t.slots[slot].part
	if all && !keep {
		t.wides = append(t.wides, wide{slot, part, float32(at(0.5, 0.5)), float32(d.n[1]), float32(d.n[2])})
		return
	}
	side := float64(t.side)
	hidden := t.bodies || min(at(0, 0), at(side, 0), at(0, side), at(side, side)) <= 1.001*float64(t.near)
	y0, y1 := max(area.Min.Y, int(math.Max(-1e6, b.y0))-t.y-1), min(area.Max.Y, int(math.Min(1e6, b.y1))-t.y+2)
	for py := y0; py < y1; py++ {
		row := chord{from: area.Min.X, to: area.Max.X, coreTo: math.MaxInt}
		if !all {
			row = t.chord(d, b, py)
			row.from, row.to = max(row.from, area.Min.X), min(row.to, area.Max.X)
		}
		if row.from >= row.to {
			continue
		}
		for k := (row.from + t.pad) >> 3; k <= (row.to-1+t.pad)>>3; k++ {
			x := k<<3 - t.pad
			masks, any := t.paneMasks(&row, x, py)
			if !any {
				continue
			}
			n := at(float64(x)+0.5, float64(py)+0.5)
			if hidden && !t.paneSeen(&masks, x, py, n, d) {
				continue
			}
			g := py*t.perRow + k
			var s *strip
			if keep {
				s = t.sheet(&t.front, g, py, part)
			} else {
				s = &t.strips[t.newStrip(g, part)]
			}
			s.mask = masks
			t.fillPlane(s, slot, n, d.n[1], float32(d.n[1]), float32(d.n[2]))
		}
	}
}

// fillPlane gives a strip of a disc its nearness, n at its first pixel, and
// its colour where that is even.
func (t *tile) fillPlane(s *strip, slot uint32, n, step float64, nx, ny float32) {
	for i := range lanes {
		s.n[i], s.nx[i], s.ny[i], s.slot[i] = float32(n+step*float64(i)), nx, ny, slot
	}
	if c := &t.panes[t.slots[slot].tri]; c.even {
		s.even = true
		for i := range lanes {
			s.r[i], s.g[i], s.b[i] = c.r, c.g, c.b
		}
		t.finish(s, t.f.parts[s.part].alpha)
	}
}

// chord is what a disc covers of a row of pixels: from where to where the
// samples of every kind, the pixels with any, and those with all.
type chord struct {
	x0, x1           [16]int
	from, to         int
	coreFrom, coreTo int
}

func (t *tile) chord(d *disc, b *box, py int) (c chord) {
	n := 1 << t.lg
	lo, hi := math.Max(b.x0, float64(t.x)), math.Min(b.x1, float64(t.x+t.side+1))
	var piece [2][2]float64
	c.from, c.coreTo = math.MaxInt, math.MaxInt
	for k := range n {
		y := float64(t.y+py) + (float64(k)+0.5)/float64(n)
		if d.spans(y, lo, hi, &piece) > 0 {
			c.x0[k], c.x1[k] = t.pixelRange(piece[0][0], piece[0][1], k)
		}
		if c.x0[k] < c.x1[k] {
			c.from, c.to = min(c.from, c.x0[k]), max(c.to, c.x1[k])
		}
		c.coreFrom, c.coreTo = max(c.coreFrom, c.x0[k]), min(c.coreTo, c.x1[k])
	}
	return c
}

// paneMasks returns the samples of a group, with its first pixel at x, that a
// disc covers, and whether there are any.
func (t *tile) paneMasks(c *chord, x, py int) (m [lanes]uint16, any bool) {
	for i := range lanes {
		px := x + i
		switch {
		case px < c.from || px >= c.to:
			continue
		case px >= c.coreFrom && px < c.coreTo:
			m[i] = t.full
		default:
			for k := range 1 << t.lg {
				if px >= c.x0[k] && px < c.x1[k] {
					m[i] |= 1 << k
				}
			}
		}
		any = any || m[i] != 0
	}
	return m, any
}

// paneSeen takes from the masks of a group what bodies hide, and tells
// whether anything is left.
func (t *tile) paneSeen(m *[lanes]uint16, x, py int, n float64, d *disc) bool {
	any := false
	for i := range lanes {
		if m[i] != 0 {
			m[i] &= t.inFront(py*t.side+x+i, float32(n+d.n[1]*float64(i)), float32(d.n[1]), float32(d.n[2]))
			any = any || m[i] != 0
		}
	}
	return any
}

// blank tells that the canvas shows nothing but its ground and the discs that
// fill it, in one order, and returns its pixel.
func (t *tile) blank() (uint32, bool) {
	return t.calmPixel, t.calm && t.kept == 0 && !t.bodies
}

// layWides adds the discs that fill the canvas to the pile of a group, each
// at the place of its part; solid has the pixels where something opaque may
// hide them.
func (t *tile) layWides(from, x, py int, solid uint8) {
	for k := range t.wides {
		w := &t.wides[k]
		j := t.takeStrip(-1, w.part)
		s := &t.strips[j]
		for i := range lanes {
			s.mask[i] = t.full
		}
		n := w.near(x, py)
		for m := solid; m != 0; m &= m - 1 {
			i := lowest(m)
			s.mask[i] = t.inFront(py*t.side+x+i, n+w.nx*float32(i), w.nx, w.ny)
		}
		t.fillPlane(s, w.slot, float64(n), float64(w.nx), w.nx, w.ny)
		t.pile = append(t.pile, j)
		at := len(t.pile) - 1
		for ; at > from && t.strips[t.pile[at-1]].order() > s.order(); at-- {
			t.pile[at] = t.pile[at-1]
		}
		t.pile[at] = j
	}
}

const maxEven = 4

// findCalm finds out whether the discs that fill the canvas lie in one order
// all over it.
func (t *tile) findCalm() {
	t.calm = false
	if len(t.wides) == 0 || len(t.wides) > maxEven {
		return
	}
	var first [maxEven]int
	for k, c := range [4][2]int{{0, 0}, {t.side - 1, 0}, {0, t.side - 1}, {t.side - 1, t.side - 1}} {
		order, ok := t.orderOfWides(c[0], c[1])
		if !ok || k > 0 && order != first {
			return
		}
		first = order
	}
	t.calm, t.calmPixel = true, t.stackPixel(first[:len(t.wides)])
}

// orderOfWides returns the discs that fill the canvas from front to back at a
// pixel, and whether they are even and keep their order in it.
func (t *tile) orderOfWides(px, py int) (order [maxEven]int, ok bool) {
	for k := range t.wides {
		w := &t.wides[k]
		if !t.panes[t.slots[w.slot].tri].even {
			return order, false
		}
		j := k
		for ; j > 0 && w.near(px, py) > t.wides[order[j-1]].near(px, py); j-- {
			order[j] = order[j-1]
		}
		order[j] = k
	}
	for j := 1; j < len(t.wides); j++ {
		a, b := &t.wides[order[j-1]], &t.wides[order[j]]
		if a.near(px, py)-b.near(px, py) < (abs32(a.nx)+abs32(a.ny)+abs32(b.nx)+abs32(b.ny))/2 {
			return order, false
		}
	}
	return order, true
}

// stackPixel blends even discs over the ground.
func (t *tile) stackPixel(order []int) uint32 {
	var c [4]float32
	left := float32(1)
	for _, k := range order {
		s := &t.slots[t.wides[k].slot]
		p := &t.panes[s.tri]
		w := left * t.f.parts[s.part].alpha
		c[0], c[1], c[2], left = c[0]+w*p.r, c[1]+w*p.g, c[2]+w*p.b, left-w
	}
	g := &t.f.ground
	w := left * g[3]
	v := t.f.pixel(min(c[0]+w*g[0], 1), min(c[1]+w*g[1], 1), min(c[2]+w*g[2], 1), 1-left+w)
	return binary.LittleEndian.Uint32(v[:])
}
