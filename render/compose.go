package render

import (
	"encoding/binary"
	"math/bits"
)

// How pixels are composed of what they show, a group at a time.

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
		t.rearShare[0] = share{uint32(t.full), -1}
		shares := t.rearShare[:]
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
