package render

import (
	"encoding/binary"
	"image"
	"math/bits"
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
