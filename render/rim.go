package render

import (
	"image"
	"math/bits"
)

// The outlines of translucent sheets in the ink look.

// lined returns which of the pixels of a group, of which i is the first, have
// an outline over what is opaque.
func (t *tile) lined(i int, valid uint8) (bit uint8) {
	if !(t.f.ink.half > 0) {
		return 0
	}
	for m := valid; m != 0; m &= m - 1 {
		if k := lowest(m); t.lines.dist[i+k] < 1e9 {
			bit |= 1 << k
		}
	}
	return bit
}

// lineStrip makes a strip of the outlines over what is opaque, for a group
// that has other strips too.
func (t *tile) lineStrip(i int, lines uint8) int32 {
	k := t.takeStrip(-1, -1)
	s := &t.strips[k]
	c := &t.f.light.line
	s.even, s.a, s.n = true, [lanes]float32{}, [lanes]float32{}
	for m := lines; m != 0; m &= m - 1 {
		j := lowest(m)
		t.paint(s, j, t.full, t.lines.near[i+j], c[0], c[1], c[2], t.f.inked(t.lines.dist[i+j]))
	}
	return k
}

// inkLayer draws the outline of a translucent sheet as strips: where the
// samples of the layer end.
func (t *tile) inkLayer(l *layer, part int32) {
	f := t.f
	if !(f.ink.half > 0) || !f.parts[part].outline {
		return
	}
	k := &t.lines
	area := t.clip
	area.Min.Y, area.Max.Y = max(area.Min.Y, l.y0-1), min(area.Max.Y, l.y1+2)
	k.ready(t.side)
	for y := area.Min.Y; y < area.Max.Y; y++ {
		for g := y * t.perRow; g < (y+1)*t.perRow; g++ {
			if !t.even(l, g, y) {
				t.rimGroup(l, part, g, area)
			}
		}
	}
	t.join(area)
	for _, i := range k.touch {
		x, y := int(i)%t.side, int(i)/t.side
		if a := f.inked(k.dist[i]); a > 0 && image.Pt(x, y).In(t.inner) {
			t.inks = append(t.inks, inkFrag{pixel: i, n: t.overSheet(l, x, y, k.near[i], part), a: a, part: part})
		}
	}
}

// overSheet returns the nearness of a layer's outline in a pixel, no less
// than that of its sheet: beside the rim a round body soon comes nearer.
func (t *tile) overSheet(l *layer, x, y int, n float32, part int32) float32 {
	g, lane := t.groupOf(x, y)
	if k := l.at[g]; k >= 0 {
		s := &t.strips[k]
		reach := 24 * (t.f.ink.half + 1) * t.f.pixelDepth(part, n)
		if s.mask[lane] != 0 && s.n[lane] > n && s.n[lane]-n < reach {
			return s.n[lane]
		}
	}
	return n
}

// even tells that the pixels of a group, the next pixel and those below are
// all covered by a layer or all not, so that no rim runs there.
func (t *tile) even(l *layer, g, y int) bool {
	m := t.masksOf(l, g)
	if *m != t.allFull && *m != noMask {
		return false
	}
	if y+1 < t.side && *t.masksOf(l, g+t.perRow) != *m {
		return false
	}
	return (g+1)%t.perRow == 0 || t.masksOf(l, g+1)[0] == m[0]
}

var noMask [lanes]uint16

// masksOf returns the samples of a group that a layer covers.
func (t *tile) masksOf(l *layer, g int) *[lanes]uint16 {
	if k := l.at[g]; k >= 0 {
		return &t.strips[k].mask
	}
	return &noMask
}

// rimGroup fills in the borders between the pixels of a group and from them
// to their neighbours on the right and below, within an area.
func (t *tile) rimGroup(l *layer, part int32, g int, area image.Rectangle) {
	k := &t.lines
	x0, y := t.place(g)
	for x := max(x0, area.Min.X); x < min(x0+lanes, area.Max.X); x++ {
		i := y*t.side + x
		m := t.maskAt(l, x, y)
		if x+1 < area.Max.X && m != t.maskAt(l, x+1, y) && t.rim(l, part, x, y, x+1, y, &k.right[i]) {
			k.rows[y].take(x)
		}
		if y+1 < area.Max.Y && m != t.maskAt(l, x, y+1) && t.rim(l, part, x, y, x, y+1, &k.down[i]) {
			k.rows[y].take(x)
		}
	}
}

// maskAt returns the samples of a pixel that a layer covers.
func (t *tile) maskAt(l *layer, x, y int) uint16 {
	g, lane := t.groupOf(x, y)
	if k := l.at[g]; k >= 0 {
		return t.strips[k].mask[lane]
	}
	return 0
}

// rim fills in the border between two neighbouring pixels of which a layer
// covers one for the most part and the other not.
func (t *tile) rim(l *layer, part int32, x, y, x1, y1 int, b *border) bool {
	n := float32(int(1) << t.lg)
	cp, cq := float32(bits.OnesCount16(t.maskAt(l, x, y)))/n, float32(bits.OnesCount16(t.maskAt(l, x1, y1)))/n
	if (cp >= 0.5) == (cq >= 0.5) {
		return false
	}
	at := cp + cq - 0.5
	if cp < 0.5 {
		at = 1 - at
		x, y = x1, y1
	}
	b.on, b.at = true, min(1, max(0, at))
	g, lane := t.groupOf(x, y)
	// A little nearer than the sheet, so that a line where it dips into a
	// body is seen on both sides; but facets at the rim are so steep that
	// their slope says little.
	z, zx, zy := t.plane(t.strips[l.at[g]].slot[lane], float32(x)+0.5, float32(y)+0.5)
	d := t.f.pixelDepth(part, z)
	b.near = z + min(2*(abs32(zx)+abs32(zy)), 10*d) + 4*d
	return true
}

// inkFrag is a pixel of a translucent sheet's outline.
type inkFrag struct {
	pixel, part int32
	n, a        float32
}

// addInks turns the outlines of translucent sheets into strips.
func (t *tile) addInks() {
	lc := &t.f.light.line
	l := &t.front
	last := int32(-1)
	for _, k := range t.inks {
		if k.part != last {
			last = k.part
			t.forget(l)
		}
		x, y := int(k.pixel)%t.side, int(k.pixel)/t.side
		mask := t.before(int(k.pixel), k.n)
		if mask == 0 {
			continue
		}
		g, lane := t.groupOf(x, y)
		s := t.sheet(l, g, y, k.part)
		s.rank = outline
		t.paint(s, lane, mask, k.n, lc[0], lc[1], lc[2], k.a)
	}
	t.forget(l)
}
