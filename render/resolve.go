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

// task is a pixel that waits for its sights.
type task struct {
	x        int32 // on the canvas
	from, to int32 // of its shares
	layered  bool
	line     bool
}

// resolve shades the canvas and writes it to the picture, row by row: first
// pixels say which sights they want, then these are looked at together, then
// pixels are composed of their colours.
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
	for y := out.Min.Y; y < out.Max.Y; y++ {
		row := f.dst.Pix[f.dst.PixOffset(out.Min.X+at.X, y+at.Y):][:4*out.Dx()]
		t.sights.n, t.tasks, t.shares = 0, t.tasks[:0], t.shares[:0]
		frags := len(t.frags)
		t.wishRow(row, y-t.y, out.Min.X-t.x)
		t.look()
		for i := range t.tasks {
			t.compose(row[4*(int(t.tasks[i].x)+t.x-out.Min.X):], &t.tasks[i], y-t.y)
		}
		t.frags = t.frags[:frags]
	}
}

// wishRow collects the sights of a row of pixels and writes those pixels that
// need none.
func (t *tile) wishRow(row []uint8, py, px int) {
	f := t.f
	gp := f.groundPixel()
	ground := binary.LittleEndian.Uint32(gp[:])
	n := 1 << t.lg
	inked := f.ink.half > 0
	inkLook := f.light.style == Ink
	i := py*t.side + px - 1
	px--
	for ; len(row) >= 4; row = row[4:] {
		o := row[:4:4]
		i++
		px++
		keys := t.keys[i<<t.lg:][:n]
		line := inked && t.lines.dist[i] < 1e9
		var any uint32
		if len(keys) == 4 {
			any = uint32(keys[0] | keys[1] | keys[2] | keys[3])
		} else {
			for _, k := range keys {
				any |= uint32(k)
			}
		}
		frags := t.anyFrag && t.first[i] >= 0
		if any == 0 && !line {
			if !frags && len(t.wides) == 0 {
				binary.LittleEndian.PutUint32(o, ground)
				continue
			}
			if v, ok := t.evenStack(i, px, py, frags); ok {
				binary.LittleEndian.PutUint32(o, v)
				continue
			}
		}
		k := uint32(0)
		if any != 0 {
			k = t.whole(keys)
		}
		layered := frags || len(t.wides) > 0
		if k != 0 && inkLook && !layered && f.parts[t.slots[k].part].hatch.period == 0 {
			r, g, b := t.inkWhole(i, px, py)
			if line {
				c := t.under([4]float32{r, g, b, 1}, f.inked(t.lines.dist[i]))
				r, g, b = c[0], c[1], c[2]
			}
			binary.LittleEndian.PutUint32(o, f.solidPixel(r, g, b))
			continue
		}
		from := int32(len(t.shares))
		switch {
		case k != 0:
			t.shares = append(t.shares, share{1<<n - 1, t.want(k, float32(px)+0.5, float32(py)+0.5)})
		case any == 0:
			t.shares = append(t.shares, share{1<<n - 1, -1})
		default:
			t.wishParts(keys, px, py)
		}
		if layered {
			if len(t.wides) > 0 {
				t.layWides(i, px, py, any != 0)
			}
			t.wishFrags(t.first[i], px, py)
		}
		t.tasks = append(t.tasks, task{int32(px), from, int32(len(t.shares)), layered, line})
	}
}

// wishParts wants a sight of every surface that a pixel shows.
func (t *tile) wishParts(keys []uint64, px, py int) {
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
}

// compose writes a pixel from its sights.
func (t *tile) compose(o []uint8, k *task, py int) {
	f := t.f
	i := py*t.side + int(k.x)
	shares := t.shares[k.from:k.to]
	var c [4]float32
	switch {
	case k.layered:
		c = t.blend(i, int(k.x), py, shares)
	case len(shares) == 1 && shares[0].sight >= 0:
		r, g, b := t.sights.color(shares[0].sight)
		if !k.line {
			binary.LittleEndian.PutUint32(o, f.solidPixel(r, g, b))
			return
		}
		c = [4]float32{r, g, b, 1}
	default:
		c = t.solid(shares)
	}
	if k.line && !k.layered {
		c = t.under(c, f.inked(t.lines.dist[i]))
	}
	v := f.pixel(c[0], c[1], c[2], c[3])
	binary.LittleEndian.PutUint32(o, uint32(v[0])|uint32(v[1])<<8|uint32(v[2])<<16|uint32(v[3])<<24)
}

// solidPixel returns the bytes of an opaque working colour as a number.
func (f *frame) solidPixel(r, g, b float32) uint32 {
	return uint32(encode(r, f.linear)) | uint32(encode(g, f.linear))<<8 | uint32(encode(b, f.linear))<<16 | 0xff<<24
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
