package render

import (
	"encoding/binary"
	"math"
	"math/bits"
)

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
