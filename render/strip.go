package render

import (
	"math"
	"math/bits"
)

// Translucent sheets are kept in strips: what one sheet shows in eight pixels
// of a row, field by field, so that they are shaded and blended side by side.
// The canvas is divided into groups of eight pixels; each has a list of its
// strips.

// lanes is the number of pixels in a group.
const lanes = 8

// strip is one translucent sheet in a group of pixels. The layout is known to
// the assembly.
type strip struct {
	n       [lanes]float32 // 0: nearness at the pixel's middle
	nx, ny  [lanes]float32 // 32, 64: its growth to the right and down
	r, g, b [lanes]float32 // 96, 128, 160: colour
	a       [lanes]float32 // 192: opacity, 0 where the sheet is not
	part    int32          // 224; -1 for a line that lies over its depth
	next    int32          // 228: older strip of the group, or -1
	group   int32          // 232
	even    bool           // 236: its colour is known
	partial uint8          // 237: pixels of which it covers some samples only
	rank    uint8          // 238: which sheet of its part
	mask    [lanes]uint16  // 240: samples that it covers
	slot    [lanes]uint32  // 256
}

// The ranks of strips.
const (
	frontSheet = iota
	backSheet
	outline
)

// order is the place of a strip in its group's pile. It does not depend on
// what came into the group first, so that the sums of a pixel do not depend
// on its neighbours.
func (s *strip) order() int32 {
	if s.rank == outline {
		return 1<<30 + s.part
	}
	return 2*s.part + int32(s.rank)
}

// layer collects one sheet of a translucent part, pixel by pixel.
type layer struct {
	rank    uint8
	at      []int32 // strip of a group, or -1
	touched []int32 // strips of the part
	spill   int32   // strip that took a pixel last, or -1
	y0, y1  int     // rows that were touched
}

// ready makes a layer fit a canvas of n groups.
func (l *layer) ready(n int) {
	if len(l.at) == n {
		return
	}
	l.at = grow(l.at, n)
	for i := range l.at {
		l.at[i] = -1
	}
	l.touched = l.touched[:0]
}

// groupOf returns group and lane of a pixel of the canvas.
func (t *tile) groupOf(x, y int) (g, lane int) {
	x += t.pad
	return y*t.perRow + x>>3, x & 7
}

// place returns the row and the first pixel of a group.
func (t *tile) place(g int) (x, y int) {
	y = g / t.perRow
	return (g-y*t.perRow)<<3 - t.pad, y
}

// newStrip adds an empty strip to a group.
func (t *tile) newStrip(g int, part int32) int32 {
	k := t.takeStrip(int32(g), part)
	t.strips[k].next = t.piles[g]
	t.piles[g] = k
	return k
}

// takeStrip returns an empty strip.
func (t *tile) takeStrip(g, part int32) int32 {
	k := len(t.strips)
	if k < cap(t.strips) {
		t.strips = t.strips[:k+1]
	} else {
		t.strips = append(t.strips, strip{})
	}
	s := &t.strips[k]
	s.part, s.group, s.next, s.even, s.partial, s.rank = part, g, -1, false, 0, frontSheet
	s.mask = [lanes]uint16{}
	return int32(k)
}

// sheet returns the strip of a layer in a group, with row y.
func (t *tile) sheet(l *layer, g, y int, part int32) *strip {
	k := l.at[g]
	if k < 0 {
		k = t.newStrip(g, part)
		t.strips[k].rank = l.rank
		l.at[g] = k
		l.touch(y)
		l.touched = append(l.touched, k)
	}
	return &t.strips[k]
}

func (l *layer) touch(y int) {
	if len(l.touched) == 0 {
		l.y0, l.y1, l.spill = y, y, -1
	} else if y < l.y0 {
		l.y0 = y
	} else if y > l.y1 {
		l.y1 = y
	}
}

// cover adds one sample to a layer when nothing opaque hides it. A sample
// that the layer has already belongs to another sheet: the pixel so far moves
// to a strip of its own.
func (t *tile) cover(l *layer, py, x, k int, n float32, slot uint32) bool {
	i := py*t.side + x
	if int64(uint64(math.Float32bits(n))<<32|math.MaxUint32) <= int64(t.keys[i<<t.lg+k]) {
		return false
	}
	g, lane := t.groupOf(x, py)
	s := t.sheet(l, g, py, t.slots[slot].part)
	if s.mask[lane]>>k&1 != 0 {
		s = t.moveOut(l, g, lane)
	}
	s.mask[lane] |= 1 << k
	s.slot[lane] = slot
	return true
}

// covers tells whether a layer has a sample.
func (t *tile) covers(l *layer, py, x, k int) bool {
	g, lane := t.groupOf(x, py)
	s := l.at[g]
	return s >= 0 && t.strips[s].mask[lane]>>k&1 != 0
}

// coverMask adds samples of one pixel to a layer, with the plane of the
// kernel's triangle.
func (t *tile) coverMask(l *layer, g, lane, y int, mask uint16, slot uint32, n, nx, ny float32) {
	s := t.sheet(l, g, y, t.slots[slot].part)
	if s.mask[lane]&mask != 0 {
		s = t.moveOut(l, g, lane)
	}
	s.mask[lane] |= mask
	s.slot[lane] = slot
	s.n[lane], s.nx[lane], s.ny[lane] = n, nx, ny
}

// moveOut moves a pixel of a layer's strip to another strip and returns the
// first one, now empty there.
func (t *tile) moveOut(l *layer, g, lane int) *strip {
	k := l.at[g]
	to := l.spill
	if to < 0 || t.strips[to].group != int32(g) || t.strips[to].mask[lane] != 0 {
		to = t.newStrip(g, t.strips[k].part)
		t.strips[to].rank = l.rank
		l.spill = to
		l.touched = append(l.touched, to)
	}
	s, o := &t.strips[k], &t.strips[to]
	o.mask[lane], o.slot[lane] = s.mask[lane], s.slot[lane]
	o.n[lane], o.nx[lane], o.ny[lane] = s.n[lane], s.nx[lane], s.ny[lane]
	s.mask[lane] = 0
	return s
}

// flush ends the layers of a part.
func (t *tile) flush(part int32) {
	for _, l := range [2]*layer{&t.front, &t.back} {
		if len(l.touched) > 0 && !t.knowsPlanes(part) {
			for _, k := range l.touched {
				t.setPlanes(&t.strips[k])
			}
		}
	}
	if len(t.front.touched) > 0 {
		t.inkLayer(&t.front, part)
	}
	t.forget(&t.front)
	t.forget(&t.back)
}

// forget empties a layer whose strips are done.
func (t *tile) forget(l *layer) {
	for _, k := range l.touched {
		l.at[t.strips[k].group] = -1
	}
	l.touched = l.touched[:0]
}

// knowsPlanes tells that the strips of a part have their nearness already.
func (t *tile) knowsPlanes(part int32) bool {
	p := &t.f.parts[part]
	return p.form == formMesh || p.form == formDisc && t.f.discs[p.index].hole < 0
}

// setPlanes finds the nearness of a strip's sheet in its pixels.
func (t *tile) setPlanes(s *strip) {
	x, y := t.place(int(s.group))
	if y < t.inner.Min.Y || y >= t.inner.Max.Y {
		return // wanted for outlines alone
	}
	for i, m := range s.mask {
		if m != 0 {
			s.n[i], s.nx[i], s.ny[i] = t.plane(s.slot[i], float32(x+i)+0.5, float32(y)+0.5)
		}
	}
}

// inFront returns the samples of a pixel where a plane with these numbers at
// the pixel's middle is not hidden.
func (t *tile) inFront(i int, near, nx, ny float32) uint16 {
	keys := t.keys[i<<t.lg:][:1<<t.lg]
	// Mostly all samples agree.
	lo, hi := keys[0], keys[0]
	for _, key := range keys[1:] {
		lo, hi = min(lo, key), max(hi, key)
	}
	half := (abs32(nx) + abs32(ny)) / 2
	if near-half > math.Float32frombits(uint32(hi>>32)) {
		return t.full
	}
	if near+half < math.Float32frombits(uint32(lo>>32)) {
		return 0
	}
	step := 1 / float32(len(keys))
	mask := uint16(0)
	for k, key := range keys {
		at := near + nx*(float32(t.sx[k&15])-0.5) + ny*((float32(k)+0.5)*step-0.5)
		if int64(uint64(math.Float32bits(at))<<32|math.MaxUint32) > int64(key) {
			mask |= 1 << k
		}
	}
	return mask
}

// before returns the samples of a pixel that lie farther than n.
func (t *tile) before(i int, n float32) (mask uint16) {
	key := uint64(math.Float32bits(n))<<32 | math.MaxUint32
	for k, v := range t.keys[i<<t.lg:][:1<<t.lg] {
		if key > v {
			mask |= 1 << k
		}
	}
	return mask
}

// paint adds a pixel of even colour to a strip that has nothing else.
func (t *tile) paint(s *strip, lane int, mask uint16, n, r, g, b, a float32) {
	if !s.even {
		s.even, s.a = true, [lanes]float32{}
	}
	s.mask[lane], s.n[lane], s.nx[lane], s.ny[lane] = mask, n, 0, 0
	s.r[lane], s.g[lane], s.b[lane], s.a[lane] = r, g, b, a
	if mask != t.full {
		s.partial |= 1 << lane
	}
}

// finish sets a strip's opacity from its masks and notes the pixels that it
// covers in part.
func (t *tile) finish(s *strip, alpha float32) {
	s.partial = 0
	for i, m := range s.mask {
		s.a[i] = 0
		if m != 0 {
			s.a[i] = alpha
			if m != t.full {
				s.partial |= 1 << i
			}
		}
	}
}

// wishStrip wants a sight of every pixel of a strip, in a block of its own.
func (t *tile) wishStrip(k int32, px, py int) {
	s := &t.strips[k]
	t.finish(s, t.f.parts[s.part].alpha)
	b := t.sights.block()
	t.sights.owner[b] = k
	o := &t.sights.all[b]
	t.aimLanes(o, &s.slot, s.covered()&^s.partial, px, py)
	for m := s.partial; m != 0; m &= m - 1 {
		i := lowest(m)
		mx, my := t.middle(uint32(s.mask[i]))
		t.aim(o, i, s.slot[i], float32(px+i)+mx, float32(py)+my)
	}
}

// covered returns the lanes of a strip that have samples.
func (s *strip) covered() (bit uint8) {
	for i, m := range s.mask {
		if m != 0 {
			bit |= 1 << i
		}
	}
	return bit
}

// laneBits returns the bits of the lanes from a to b-1, cut to a group.
func laneBits(a, b int) uint8 {
	a, b = max(a, 0), min(b, lanes)
	if a >= b {
		return 0
	}
	return uint8(0xff) << a & (0xff >> (lanes - b))
}

func lowest(bit uint8) int { return bits.TrailingZeros8(bit) & 7 }
