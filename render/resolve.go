package render

import (
	"encoding/binary"
	"image"
	"math"
	"math/bits"
)

// fillGround fills a part of the picture with the ground.
func (f *frame) fillGround(out image.Rectangle) {
	px := f.groundPixel()
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

// resolve shades the canvas and writes it to the picture.
func (t *tile) resolve(out image.Rectangle) {
	f := t.f
	d := f.dst
	at := d.Rect.Min.Sub(f.rect.Min)
	gp := f.groundPixel()
	ground := binary.LittleEndian.Uint32(gp[:])
	n := 1 << t.lg
	full := uint32(1)<<n - 1
	inked := f.ink.half > 0
	inkLook := f.light.style == Ink
	if inkLook {
		t.drawInk()
	}
	lines := t.lines.dist
	for y := out.Min.Y; y < out.Max.Y; y++ {
		py := y - t.y
		row := d.Pix[d.PixOffset(out.Min.X+at.X, y+at.Y):][:4*out.Dx()]
		i := py*t.side + out.Min.X - t.x
		px := out.Min.X - t.x
		for ; len(row) >= 4; row = row[4:] {
			o := row[:4:4]
			keys := t.keys[i<<t.lg:][:n]
			line := inked && lines[i] < 1e9
			var any uint32
			if len(keys) == 4 {
				any = uint32(keys[0] | keys[1] | keys[2] | keys[3])
			} else {
				for _, k := range keys {
					any |= uint32(k)
				}
			}
			var c [4]float32
			if t.anyFrag && t.first[i] >= 0 {
				if any == 0 && !line {
					if v, ok := t.evenStack(i, full); ok {
						binary.LittleEndian.PutUint32(o, v)
						i++
						px++
						continue
					}
				}
				c = t.blend(keys, i, px, py)
			} else if any == 0 {
				if !line {
					binary.LittleEndian.PutUint32(o, ground)
					i++
					px++
					continue
				}
				c = t.under(t.solid(keys, px, py), f.inked(lines[i]))
			} else if k := t.whole(keys); k != 0 {
				var r, g, b float32
				if inkLook {
					r, g, b = t.inkWhole(i, px, py)
				} else {
					r, g, b = t.shadePlace(k, float32(px)+0.5, float32(py)+0.5)
				}
				if line {
					c = t.under([4]float32{r, g, b, 1}, f.inked(lines[i]))
					r, g, b = c[0], c[1], c[2]
				}
				binary.LittleEndian.PutUint32(o, uint32(encode(r, f.linear))|uint32(encode(g, f.linear))<<8|uint32(encode(b, f.linear))<<16|0xff<<24)
				i++
				px++
				continue
			} else {
				c = t.solid(keys, px, py)
				if line {
					c = t.under(c, f.inked(lines[i]))
				}
			}
			v := f.pixel(c[0], c[1], c[2], c[3])
			binary.LittleEndian.PutUint32(o, uint32(v[0])|uint32(v[1])<<8|uint32(v[2])<<16|uint32(v[3])<<24)
			i++
			px++
		}
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
func (t *tile) solid(keys []uint64, px, py int) [4]float32 {
	n := len(keys)
	todo := uint32(1)<<n - 1
	inv := 1 / float32(n)
	g := &t.f.ground
	var c [4]float32
	for todo != 0 {
		mask, slot := t.group(keys, todo)
		todo &^= mask
		w := float32(bits.OnesCount32(mask)) * inv
		if slot == 0 {
			w *= g[3]
			c[0], c[1], c[2], c[3] = c[0]+w*g[0], c[1]+w*g[1], c[2]+w*g[2], c[3]+w
			continue
		}
		mx, my := t.middle(mask)
		r, gr, b := t.shadePlace(slot, float32(px)+mx, float32(py)+my)
		c[0] += w * min(r, 1)
		c[1] += w * min(gr, 1)
		c[2] += w * min(b, 1)
		c[3] += w
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

// blend returns the colour of a pixel with translucent layers: for every
// sample the layers in front of its opaque surface, from front to back. Of two
// layers at the same place that of the later shape counts as nearer, as with
// opaque surfaces.
func (t *tile) blend(keys []uint64, i, px, py int) [4]float32 {
	n := len(keys)
	full := uint32(1)<<n - 1
	list := t.sorted[:0]
	frags := t.frags
	for k := t.first[i]; k >= 0; k = frags[k].next {
		list = append(list, k)
		for j := len(list) - 1; j > 0 && (frags[k].n > frags[list[j-1]].n || frags[k].n == frags[list[j-1]].n && frags[k].slot > frags[list[j-1]].slot); j-- {
			list[j], list[j-1] = list[j-1], list[j]
		}
	}
	t.sorted = list
	line, lineNear := float32(0), float32(0)
	if t.f.ink.half > 0 && t.lines.dist[i] < 1e9 {
		line, lineNear = t.f.inked(t.lines.dist[i]), t.lines.near[i]
	}
	if t.crossing(list) {
		t.blendSamples(list, n, px, py, line, lineNear)
		return t.behind(keys, px, py)
	}
	lc := &t.f.light.line
	// c and left are the colour and the light let through so far, as long as
	// all samples agree.
	var r, g, b float32
	left, same := float32(1), true
	acc := t.samples[:n]
	for _, k := range list {
		fr := &t.frags[k]
		if line > 0 && fr.n < lineNear {
			if same {
				w := left * line
				r, g, b, left = r+w*lc[0], g+w*lc[1], b+w*lc[2], left-w
			} else {
				t.add(full, lc[0], lc[1], lc[2], line)
			}
			line = 0
		}
		fr0, fg, fb, fa := t.fragColor(fr, px, py)
		if fr.mask == full && same {
			w := left * fa
			r, g, b, left = r+w*fr0, g+w*fg, b+w*fb, left-w
			continue
		}
		if same {
			same = false
			for k := range acc {
				acc[k] = [4]float32{r, g, b, left}
			}
		}
		t.add(fr.mask, fr0, fg, fb, fa)
	}
	if line > 0 && same {
		w := left * line
		r, g, b, left = r+w*lc[0], g+w*lc[1], b+w*lc[2], left-w
	} else if line > 0 {
		t.add(full, lc[0], lc[1], lc[2], line)
	}
	if !same {
		return t.behind(keys, px, py)
	}
	var any uint32
	for _, k := range keys {
		any |= uint32(k)
	}
	if any == 0 {
		o := &t.f.ground
		w := left * o[3]
		return [4]float32{min(r+w*o[0], 1), min(g+w*o[1], 1), min(b+w*o[2], 1), 1 - left + w}
	}
	if k := t.whole(keys); k != 0 {
		fr0, fg, fb := t.shadePlace(k, float32(px)+0.5, float32(py)+0.5)
		return [4]float32{min(r+left*fr0, 1), min(g+left*fg, 1), min(b+left*fb, 1), 1}
	}
	for k := range acc {
		acc[k] = [4]float32{r, g, b, left}
	}
	return t.behind(keys, px, py)
}

// add lays a colour under what the samples of a mask have so far.
func (t *tile) add(mask uint32, r, g, b, a float32) {
	for m := mask; m != 0; m &= m - 1 {
		c := &t.samples[bits.TrailingZeros32(m)&15]
		w := c[3] * a
		c[0] += w * r
		c[1] += w * g
		c[2] += w * b
		c[3] -= w
	}
}

// behind lays the opaque surfaces and the ground under the samples and
// returns their mean.
func (t *tile) behind(keys []uint64, px, py int) [4]float32 {
	n := len(keys)
	var out [4]float32
	inv := 1 / float32(n)
	ground := &t.f.ground
	for todo := uint32(1)<<n - 1; todo != 0; {
		mask, slot := t.group(keys, todo)
		todo &^= mask
		r, g, b, a := ground[0], ground[1], ground[2], ground[3]
		if slot != 0 {
			mx, my := t.middle(mask)
			r, g, b = t.shadePlace(slot, float32(px)+mx, float32(py)+my)
			a = 1
		}
		for m := mask; m != 0; m &= m - 1 {
			c := &t.samples[bits.TrailingZeros32(m)&15]
			w := c[3] * a
			out[0] += min(c[0]+w*r, 1)
			out[1] += min(c[1]+w*g, 1)
			out[2] += min(c[2]+w*b, 1)
			out[3] += 1 - c[3] + w
		}
	}
	for k := range out {
		out[k] *= inv
	}
	return out
}

// crossing tells whether two layers that follow each other may change places
// within the pixel.
func (t *tile) crossing(list []int32) bool {
	for j := 1; j < len(list); j++ {
		a, b := &t.frags[list[j-1]], &t.frags[list[j]]
		if a.n-b.n < (abs32(a.nx-b.nx)+abs32(a.ny-b.ny))/2 && t.slots[a.slot].part != t.slots[b.slot].part {
			return true
		}
	}
	return false
}

// blendSamples fills the samples with the layers in front of the opaque
// surfaces, in an order of their own for every sample.
func (t *tile) blendSamples(list []int32, n, px, py int, line, lineNear float32) {
	colors := t.colors[:0]
	for _, k := range list {
		r, g, b, a := t.fragColor(&t.frags[k], px, py)
		colors = append(colors, [4]float32{r, g, b, a})
	}
	t.colors = colors
	lc := &t.f.light.line
	for s := range n {
		x, y := float32(t.sx[s&15])-0.5, (float32(s)+0.5)/float32(n)-0.5
		acc := [4]float32{0, 0, 0, 1}
		lay := func(r, g, b, a float32) {
			w := acc[3] * a
			acc[0] += w * r
			acc[1] += w * g
			acc[2] += w * b
			acc[3] -= w
		}
		last := float32(math.Inf(1))
		lastK := -1
		line := line
		for range list {
			// The next layer behind the last.
			best, bestN := -1, float32(math.Inf(-1))
			for j, k := range list {
				fr := &t.frags[k]
				if fr.mask>>s&1 == 0 {
					continue
				}
				at := fr.n + fr.nx*x + fr.ny*y
				if (at < last || at == last && j > lastK) && at > bestN {
					best, bestN = j, at
				}
			}
			if best < 0 {
				break
			}
			if line > 0 && bestN < lineNear {
				lay(lc[0], lc[1], lc[2], line)
				line = 0
			}
			c := &colors[best]
			lay(c[0], c[1], c[2], c[3])
			last, lastK = bestN, best
		}
		if line > 0 {
			lay(lc[0], lc[1], lc[2], line)
		}
		t.samples[s] = acc
	}
}

// fragColor returns the colour and opacity of a fragment.
func (t *tile) fragColor(fr *frag, px, py int) (r, g, b, a float32) {
	p := &t.f.parts[t.slots[fr.slot].part]
	if p.form == formDisc && t.slots[fr.slot].batch != -2 {
		if c := &t.panes[t.slots[fr.slot].tri]; c.even {
			return c.r, c.g, c.b, p.alpha
		}
	}
	if p.form == formLabel {
		return t.labelColor(p, px, py)
	}
	if t.slots[fr.slot].batch == -2 {
		c := &t.f.light.line
		return c[0], c[1], c[2], fr.a
	}
	mx, my := t.middle(fr.mask)
	r, g, b = t.shadePlace(fr.slot, float32(px)+mx, float32(py)+my)
	return r, g, b, p.alpha
}

// paneColor is the colour of a translucent disc on a canvas; even tells that
// it is the same all over.
type paneColor struct {
	r, g, b float32
	even    bool
}

// evenColor finds the colour of a disc when it is even on the canvas: without
// hatching, seen from one side and away from the highlight.
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
	c.r, c.g, c.b = t.shadePlace(uint32(len(t.slots)-1), half, half)
	return c
}

const maxEven = 4

// evenStack returns the pixel of a stack of even discs in front of the
// ground. Neighbouring pixels mostly show the same stack, so that the last
// one is kept.
func (t *tile) evenStack(i int, full uint32) (uint32, bool) {
	var near [maxEven]float32
	var slope [maxEven]float32
	var order [maxEven]uint32
	n := 0
	for k := t.first[i]; k >= 0; {
		fr := &t.frags[k]
		s := &t.slots[fr.slot]
		if n == maxEven || fr.mask != full || s.batch != -1 || t.f.parts[s.part].form != formDisc || !t.panes[s.tri].even {
			return 0, false
		}
		j := n
		for ; j > 0 && fr.n > near[j-1]; j-- {
			near[j], slope[j], order[j] = near[j-1], slope[j-1], order[j-1]
		}
		near[j], slope[j], order[j] = fr.n, abs32(fr.nx)+abs32(fr.ny), fr.slot
		n++
		k = fr.next
	}
	same := n == t.lastCount
	for j := range n {
		if j > 0 && near[j-1]-near[j] < (slope[j]+slope[j-1])/2 {
			return 0, false // they may cross here
		}
		same = same && order[j] == t.last[j]
	}
	if same {
		return t.lastPixel, true
	}
	var c [4]float32
	left := float32(1)
	for j := range n {
		p := &t.panes[t.slots[order[j]].tri]
		w := left * t.f.parts[t.slots[order[j]].part].alpha
		c[0], c[1], c[2], left = c[0]+w*p.r, c[1]+w*p.g, c[2]+w*p.b, left-w
	}
	g := &t.f.ground
	w := left * g[3]
	v := t.f.pixel(min(c[0]+w*g[0], 1), min(c[1]+w*g[1], 1), min(c[2]+w*g[2], 1), 1-left+w)
	t.last, t.lastCount, t.lastPixel = order, n, binary.LittleEndian.Uint32(v[:])
	return t.lastPixel, true
}
