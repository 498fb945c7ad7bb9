package render

import (
	"math"
	"math/bits"
)

// wishFrags wants a sight of every layer of a pixel that has no colour yet.
func (t *tile) wishFrags(first int32, px, py int) {
	for k := first; k >= 0; {
		fr := &t.frags[k]
		s := &t.slots[fr.slot]
		p := &t.f.parts[s.part]
		fr.sight = -1
		if s.batch != -2 && p.form != formLabel && !(p.form == formDisc && t.panes[s.tri].even) {
			mx, my := t.middle(fr.mask)
			fr.sight = t.want(fr.slot, float32(px)+mx, float32(py)+my)
		}
		k = fr.next
	}
}

// sort lists the layers of a pixel from front to back. Of two layers at the
// same place that of the later shape counts as nearer, as with opaque
// surfaces.
func (t *tile) sort(first int32) []int32 {
	list := t.sorted[:0]
	frags := t.frags
	for k := first; k >= 0; k = frags[k].next {
		list = append(list, k)
		for j := len(list) - 1; j > 0 && (frags[k].n > frags[list[j-1]].n || frags[k].n == frags[list[j-1]].n && frags[k].slot > frags[list[j-1]].slot); j-- {
			list[j], list[j-1] = list[j-1], list[j]
		}
	}
	t.sorted = list
	return list
}

// blend returns the colour of a pixel with translucent layers: for every
// sample the layers in front of its opaque surface, from front to back, then
// that surface.
func (t *tile) blend(i, px, py int, shares []share) [4]float32 {
	n := 1 << t.lg
	full := uint32(1)<<n - 1
	list := t.sort(t.first[i])
	line, lineNear := float32(0), float32(0)
	if t.f.ink.half > 0 && t.lines.dist[i] < 1e9 {
		line, lineNear = t.f.inked(t.lines.dist[i]), t.lines.near[i]
	}
	if t.crossing(list) {
		t.blendSamples(list, n, px, py, line, lineNear)
		return t.behind(shares)
	}
	lc := &t.f.light.line
	// r, g, b and left are the colour and the light let through so far, as
	// long as all samples agree.
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
		return t.behind(shares)
	}
	if len(shares) == 1 {
		s := shares[0].sight
		if s < 0 {
			o := &t.f.ground
			w := left * o[3]
			return [4]float32{min(r+w*o[0], 1), min(g+w*o[1], 1), min(b+w*o[2], 1), 1 - left + w}
		}
		sr, sg, sb := t.sights.color(s)
		return [4]float32{min(r+left*sr, 1), min(g+left*sg, 1), min(b+left*sb, 1), 1}
	}
	for k := range acc {
		acc[k] = [4]float32{r, g, b, left}
	}
	return t.behind(shares)
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
func (t *tile) behind(shares []share) (out [4]float32) {
	inv := 1 / float32(int(1)<<t.lg)
	for _, s := range shares {
		o := &t.f.ground
		r, g, b, a := o[0], o[1], o[2], o[3]
		if s.sight >= 0 {
			r, g, b = t.sights.color(s.sight)
			a = 1
		}
		for m := s.mask; m != 0; m &= m - 1 {
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
	s := &t.slots[fr.slot]
	p := &t.f.parts[s.part]
	switch {
	case fr.sight >= 0:
		r, g, b = t.sights.color(fr.sight)
		return r, g, b, p.alpha
	case s.batch == -2:
		c := &t.f.light.line
		return c[0], c[1], c[2], fr.a
	case p.form == formLabel:
		return t.labelColor(p, px, py)
	}
	c := &t.panes[s.tri]
	return c.r, c.g, c.b, p.alpha
}
