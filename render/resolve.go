package render

import (
	"encoding/binary"
	"image"
	"math/bits"
	"slices"
)

// fillGround fills a part of the picture with the ground.
func (f *frame) fillGround(out image.Rectangle) {
	f.fill(out, f.groundPixel())
}

// fill fills a part of the picture with a pixel.
func (f *frame) fill(out image.Rectangle, px [4]uint8) {
	d := f.dst
	at := out.Sub(f.rect.Min).Add(d.Rect.Min)
	n := 4 * out.Dx()
	first := d.Pix[d.PixOffset(at.Min.X, at.Min.Y):]
	for i := 0; i < n; i += 4 {
		copy(first[i:i+4], px[:])
	}
	for y := 1; y < out.Dy(); y++ {
		copy(first[y*d.Stride:y*d.Stride+n], first[:n])
	}
}

func (f *frame) groundPixel() [4]uint8 {
	return f.pixel(f.ground[0]*f.ground[3], f.ground[1]*f.ground[3], f.ground[2]*f.ground[3], f.ground[3])
}

// pixel returns the bytes of a working colour that is weighed with its
// opacity a. Bytes are weighed in sRGB numbers, as image.RGBA wants.
func (f *frame) pixel(r, g, b, a float32) [4]uint8 {
	if a >= 0.9995 {
		return [4]uint8{encode(r, f.linear), encode(g, f.linear), encode(b, f.linear), 255}
	}
	if !(a > 0) {
		return [4]uint8{}
	}
	one := func(v float32) uint8 {
		return uint8(float32(encode(v/a, f.linear))*a + 0.5)
	}
	return [4]uint8{one(r), one(g), one(b), uint8(a*255 + 0.5)}
}

// share is a part of a pixel: samples that show the same surface, and its
// sight; -1 is the ground.
type share struct {
	mask  uint32
	sight int32
}

// group is what eight neighbouring pixels of a row show and want.
type group struct {
	x                    int   // the first pixel
	block                int32 // of the sights of opaque pixels, or -1
	pileFrom, pileTo     int32 // of its strips
	mixedFrom, mixedTo   int32 // of its pixels that show several surfaces
	valid, ground, lines uint8 // pixels to write, with nothing opaque, with an outline over what is opaque
	cells                uint8 // pixels whose colour is that of their ink cell
}

// mixed is a pixel that shows several opaque surfaces.
type mixed struct {
	lane     int
	from, to int32 // of its shares
}

// resolve shades the canvas and writes it to the picture, row by row: first
// groups of pixels say which sights they want, then these are looked at
// together, then pixels are composed of their colours.
func (t *tile) resolve(out image.Rectangle) {
	f := t.f
	if f.light.style == Ink {
		t.drawInk()
	}
	t.findCalm()
	if px, ok := t.blank(); ok {
		var b [4]uint8
		binary.LittleEndian.PutUint32(b[:], px)
		f.fill(out, b)
		return
	}
	at := f.dst.Rect.Min.Sub(f.rect.Min)
	gp := f.groundPixel()
	t.groundPixel = binary.LittleEndian.Uint32(gp[:])
	for y := out.Min.Y; y < out.Max.Y; y++ {
		row := f.dst.Pix[f.dst.PixOffset(out.Min.X+at.X, y+at.Y):][:4*out.Dx()]
		t.wishRow(row, y-t.y)
		t.look()
		for i := range t.groups {
			t.compose(row, &t.groups[i], y-t.y)
		}
	}
}

// wishRow collects the sights of a row of pixels and writes those groups that
// need none.
func (t *tile) wishRow(row []uint8, py int) {
	t.sights.reset()
	t.groups, t.pile, t.mixed, t.shares = t.groups[:0], t.pile[:0], t.mixed[:0], t.shares[:0]
	t.strips = t.strips[:t.kept]
	lo, hi := t.inner.Min.X, t.inner.Max.X
	for k := (lo + t.pad) >> 3; k <= (hi-1+t.pad)>>3; k++ {
		x := k<<3 - t.pad
		valid := laneBits(lo-x, hi-x)
		any, same := t.scan(py*t.side + x)
		any &= valid
		lines := t.lined(py*t.side+x, valid)
		layered := t.layered && t.piles[py*t.perRow+k] >= 0
		if any|lines == 0 && !layered {
			if len(t.wides) == 0 {
				fillLanes(row, x-lo, valid, t.groundPixel)
				continue
			} else if t.calm {
				fillLanes(row, x-lo, valid, t.calmPixel)
				continue
			}
		}
		g := group{x: x, block: -1, valid: valid, ground: valid &^ any, mixedFrom: int32(len(t.mixed)), pileFrom: int32(len(t.pile))}
		if layered || len(t.wides) > 0 {
			t.collectPile(&g, py, py*t.perRow+k, any, lines)
		} else {
			g.lines = lines
		}
		g.pileTo = int32(len(t.pile))
		t.wishSolid(&g, py, any, same)
		g.mixedTo = int32(len(t.mixed))
		t.groups = append(t.groups, g)
	}
}

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

// wishSolid wants a sight of what is opaque in the pixels of a group.
func (t *tile) wishSolid(g *group, py int, any, same uint8) {
	if any == 0 {
		return
	}
	if t.f.light.style == Ink {
		g.cells = any & t.lines.cells.wholes(py*t.side+g.x)
		if any &^= g.cells; any == 0 {
			return
		}
	}
	b := t.sights.block()
	g.block = int32(b)
	for m := any &^ same; m != 0; m &= m - 1 {
		i := lowest(m)
		keys := t.keys[(py*t.side+g.x+i)<<t.lg:][:1<<t.lg]
		if t.scanned.slot[i] = t.whole(keys); t.scanned.slot[i] == 0 {
			any &^= 1 << i
			t.wishParts(keys, i, g.x+i, py)
		}
	}
	t.aimLanes(&t.sights.all[b], &t.scanned.slot, any, g.x, py)
}

// wishParts wants a sight of every surface that a pixel shows.
func (t *tile) wishParts(keys []uint64, lane, px, py int) {
	from := int32(len(t.shares))
	for todo := uint32(1)<<len(keys) - 1; todo != 0; {
		mask, slot := t.group(keys, todo)
		todo &^= mask
		s := int32(-1)
		if slot != 0 {
			mx, my := t.middle(mask)
			s = t.want(slot, float32(px)+mx, float32(py)+my)
		}
		t.shares = append(t.shares, share{mask, s})
	}
	t.mixed = append(t.mixed, mixed{lane, from, int32(len(t.shares))})
}

// compose writes a group of pixels from its sights.
func (t *tile) compose(row []uint8, g *group, py int) {
	if g.ground|g.lines|g.cells == 0 && g.mixedTo == g.mixedFrom && g.pileTo == g.pileFrom {
		o := &t.sights.all[g.block]
		t.pack(row, g, &o.red, &o.green, &o.blue, &ones)
		return
	}
	k := &t.stack
	t.behindGroup(g, py)
	if pile := t.pile[g.pileFrom:g.pileTo]; len(pile) > 0 {
		t.blendGroup(g, pile)
	}
	for m := g.lines; m != 0; m &= m - 1 {
		i := lowest(m)
		c := t.under([4]float32{k.r[i], k.g[i], k.b[i], k.a[i]}, t.f.inked(t.lines.dist[py*t.side+g.x+i]))
		k.r[i], k.g[i], k.b[i], k.a[i] = c[0], c[1], c[2], c[3]
	}
	t.pack(row, g, &k.r, &k.g, &k.b, &k.a)
}

// pack writes the bytes of a group of pixels.
func (t *tile) pack(row []uint8, g *group, r, gr, b, a *[lanes]float32) {
	f := t.f
	at := 4 * (g.x - t.inner.Min.X)
	if g.valid == 0xff && useVectors && min(a[0], a[1], a[2], a[3], a[4], a[5], a[6], a[7]) >= 0.9995 {
		if o := row[at:][:4*lanes]; f.linear {
			packLinear(&o[0], r, &toSRGB[0])
		} else {
			packNumbers(&o[0], r)
		}
		return
	}
	for m := g.valid; m != 0; m &= m - 1 {
		i := lowest(m)
		v := f.pixel(r[i], gr[i], b[i], a[i])
		binary.LittleEndian.PutUint32(row[at+4*i:], binary.LittleEndian.Uint32(v[:]))
	}
}

var ones = [lanes]float32{1, 1, 1, 1, 1, 1, 1, 1}

// behindGroup fills the stack with what is opaque in the pixels of a group.
func (t *tile) behindGroup(g *group, py int) {
	k := &t.stack
	if g.block >= 0 {
		o := &t.sights.all[g.block]
		k.r, k.g, k.b = o.red, o.green, o.blue
		k.a = ones
	}
	if g.ground != 0 {
		c := &t.f.ground
		r, gr, b := c[0]*c[3], c[1]*c[3], c[2]*c[3]
		for m := g.ground; m != 0; m &= m - 1 {
			i := lowest(m)
			k.r[i], k.g[i], k.b[i], k.a[i] = r, gr, b, c[3]
		}
	}
	t.inkCells(g, py)
	for _, m := range t.mixed[g.mixedFrom:g.mixedTo] {
		c := t.solid(t.shares[m.from:m.to])
		k.r[m.lane], k.g[m.lane], k.b[m.lane], k.a[m.lane] = c[0], c[1], c[2], c[3]
	}
}

// blendGroup blends the strips of a group over what is in the stack: side by
// side where every sheet covers all samples or none and lies clearly before
// or behind the others, else sample by sample.
func (t *tile) blendGroup(g *group, pile []int32) {
	k := &t.stack
	single := uint8(0)
	for _, m := range t.mixed[g.mixedFrom:g.mixedTo] {
		single |= 1 << m.lane
	}
	for _, s := range pile {
		single |= t.strips[s].partial
	}
	behind := [4][lanes]float32{k.r, k.g, k.b, k.a}
	k.blend(t.strips, pile)
	single |= uint8(k.crosses)
	for m := single & g.valid; m != 0; m &= m - 1 {
		i := lowest(m)
		list := t.collect(pile, i)
		if len(list) == 0 {
			continue
		}
		t.opaque1[0] = share{uint32(t.full), -1}
		shares := t.opaque1[:]
		t.rear = [4]float32{behind[0][i], behind[1][i], behind[2][i], behind[3][i]}
		for _, x := range t.mixed[g.mixedFrom:g.mixedTo] {
			if x.lane == i {
				shares = t.shares[x.from:x.to]
				o := &t.f.ground
				t.rear = [4]float32{o[0] * o[3], o[1] * o[3], o[2] * o[3], o[3]}
			}
		}
		c := t.blend(list, shares)
		k.r[i], k.g[i], k.b[i], k.a[i] = c[0], c[1], c[2], c[3]
	}
}

// whole returns a slot of the part that all samples show, or 0.
func (t *tile) whole(keys []uint64) uint32 {
	k := uint32(keys[len(keys)/2])
	if k == 0 {
		return 0
	}
	s := &t.slots[k]
	for _, v := range keys {
		if uint32(v) != k {
			if o := &t.slots[uint32(v)]; o.part != s.part || o.batch < 0 && o.tri != s.tri {
				return 0
			}
		}
	}
	return k
}

// middle returns the mean place of the samples of a mask within a pixel.
func (t *tile) middle(mask uint32) (x, y float32) {
	if t.lg <= 2 {
		m := &t.f.middles[mask&15]
		return m[0], m[1]
	}
	return t.f.middleOf(mask)
}

func (f *frame) middleOf(mask uint32) (x, y float32) {
	n := 1 << f.lg
	c := bits.OnesCount32(mask)
	if c == n || c == 0 {
		return 0.5, 0.5
	}
	var sx float64
	var sk int
	for m := mask; m != 0; m &= m - 1 {
		k := bits.TrailingZeros32(m)
		sx += f.sx[k&15]
		sk += 2*k + 1
	}
	return float32(sx / float64(c)), float32(float64(sk) / float64(c) / float64(2*n))
}

// group returns the mask of the samples among todo that show the same part as
// the first of them, and a slot from their middle.
func (t *tile) group(keys []uint64, todo uint32) (mask, slot uint32) {
	k := bits.TrailingZeros32(todo)
	slot = uint32(keys[k])
	if slot == 0 {
		for m := todo; m != 0; m &= m - 1 {
			if k := bits.TrailingZeros32(m); uint32(keys[k]) == 0 {
				mask |= 1 << k
			}
		}
		return mask, 0
	}
	first := t.slots[slot]
	form := t.f.parts[first.part].form
	for m := todo; m != 0; m &= m - 1 {
		k := bits.TrailingZeros32(m)
		s := uint32(keys[k])
		if s == slot {
			mask |= 1 << k
			continue
		}
		if o := &t.slots[s]; o.part == first.part && (form == formMesh || o.tri == first.tri) {
			mask |= 1 << k
		}
	}
	half := bits.OnesCount32(mask) / 2
	m := mask
	for ; half > 0; half-- {
		m &= m - 1
	}
	return mask, uint32(keys[bits.TrailingZeros32(m)])
}

// solid returns the colour of a pixel without translucent layers.
func (t *tile) solid(shares []share) (c [4]float32) {
	inv := 1 / float32(int(1)<<t.lg)
	g := &t.f.ground
	for _, s := range shares {
		w := float32(bits.OnesCount32(s.mask)) * inv
		if s.sight < 0 {
			w *= g[3]
			c[0], c[1], c[2], c[3] = c[0]+w*g[0], c[1]+w*g[1], c[2]+w*g[2], c[3]+w
			continue
		}
		r, gr, b := t.sights.color(s.sight)
		c[0], c[1], c[2], c[3] = c[0]+w*min(r, 1), c[1]+w*min(gr, 1), c[2]+w*min(b, 1), c[3]+w
	}
	return c
}

// under returns a colour with a line drawn over it.
func (t *tile) under(c [4]float32, a float32) [4]float32 {
	l := &t.f.light.line
	for k := range 3 {
		c[k] += a * (l[k] - c[k])
	}
	c[3] += a * (1 - c[3])
	return c
}
