package render

import (
	"math"
	"math/bits"
)

// frag is one translucent sheet in one pixel.
type frag struct {
	mask    uint32
	part    int32
	n       float32 // nearness at the pixel's middle
	nx, ny  float32 // its growth to the right and down
	r, g, b float32
	a       float32
}

// collect lists the sheets of one pixel of a group from front to back. Of two
// at the same place that of the later strip counts as nearer, as with opaque
// surfaces.
func (t *tile) collect(pile []int32, lane int) []frag {
	list := t.frags[:0]
	for _, k := range pile {
		s := &t.strips[k]
		if s.mask[lane] == 0 {
			continue
		}
		fr := frag{uint32(s.mask[lane]), s.part, s.n[lane], s.nx[lane], s.ny[lane], s.r[lane], s.g[lane], s.b[lane], s.a[lane]}
		list = append(list, fr)
		j := len(list) - 1
		for ; j > 0 && fr.n >= list[j-1].n; j-- {
			list[j] = list[j-1]
		}
		list[j] = fr
	}
	t.frags = list
	return list
}

// blend returns the colour of a pixel with translucent layers: for every
// sample the layers in front of its opaque surface, from front to back, then
// that surface.
func (t *tile) blend(list []frag, shares []share) [4]float32 {
	n := 1 << t.lg
	if crossing(list) {
		t.blendSamples(list, n)
		return t.behind(shares)
	}
	acc := t.samples[:n]
	for k := range acc {
		acc[k] = [4]float32{0, 0, 0, 1}
	}
	for i := range list {
		fr := &list[i]
		t.add(fr.mask, fr.r, fr.g, fr.b, fr.a)
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

// behind lays the opaque surfaces under the samples, and the rear colour,
// which is weighed with its opacity, where there are none, and returns their
// mean.
func (t *tile) behind(shares []share) (out [4]float32) {
	inv := 1 / float32(int(1)<<t.lg)
	for _, s := range shares {
		r, g, b, a := t.rear[0], t.rear[1], t.rear[2], t.rear[3]
		if s.sight >= 0 {
			r, g, b = t.sights.color(s.sight)
			a = 1
		}
		for m := s.mask; m != 0; m &= m - 1 {
			c := &t.samples[bits.TrailingZeros32(m)&15]
			out[0] += min(c[0]+c[3]*r, 1)
			out[1] += min(c[1]+c[3]*g, 1)
			out[2] += min(c[2]+c[3]*b, 1)
			out[3] += 1 - c[3] + c[3]*a
		}
	}
	for k := range out {
		out[k] *= inv
	}
	return out
}

// crossing tells whether two layers that follow each other may change places
// within the pixel.
func crossing(list []frag) bool {
	for j := 1; j < len(list); j++ {
		a, b := &list[j-1], &list[j]
		if a.part != b.part && a.part >= 0 && b.part >= 0 && a.n-b.n < (abs32(a.nx-b.nx)+abs32(a.ny-b.ny))/2 {
			return true
		}
	}
	return false
}

// blendSamples fills the samples with the layers in front of the opaque
// surfaces, in an order of their own for every sample.
func (t *tile) blendSamples(list []frag, n int) {
	for s := range n {
		x, y := float32(t.sx[s&15])-0.5, (float32(s)+0.5)/float32(n)-0.5
		acc := [4]float32{0, 0, 0, 1}
		last := float32(math.Inf(1))
		lastK := -1
		for range list {
			// The next layer behind the last.
			best, bestN := -1, float32(math.Inf(-1))
			for j := range list {
				fr := &list[j]
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
			fr := &list[best]
			w := acc[3] * fr.a
			acc[0] += w * fr.r
			acc[1] += w * fr.g
			acc[2] += w * fr.b
			acc[3] -= w
			last, lastK = bestN, best
		}
		t.samples[s] = acc
	}
}
