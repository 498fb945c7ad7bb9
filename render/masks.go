package render

import (
	"math"
	"math/bits"
)

// How small triangles reach the layers: first all triangles of a block find
// the samples that they cover in front of what is there, as records, then
// these go to the strips.
//
// A record is two neighbouring pixels of one triangle: their masks in the
// bits 0 to 15 and 16 to 31, the triangle's place in the block in 32 to 34,
// the first pixel's x on the canvas from 35 and its y from 48 on.

// coverSmall adds those small triangles of the block that have a bit in todo
// to the layers.
func (t *tile) coverSmall(it *item, p *part, todo uint32) {
	s := &t.tris
	n := 0
	if t.lg == 2 && useVectors {
		n = maskEight(s, todo)
	} else {
		n = t.maskPlain(todo)
	}
	last := uint64(8)
	var l *layer
	var slot uint32
	var n0, gx, gy float32
	for _, r := range s.recordBuf[:n] {
		if i := r >> 32 & 7; i != last {
			last = i
			a, b, c := s.corners(int(i), t.f.verts, t.f.batches[it.batch].loose)
			l = t.layerOf(p, a, b, c)
			slot = t.addSlot(it, s.ids[i])
			n0, gx, gy = s.n0[i], s.gx[i], s.gy[i]
		}
		x, y := int(r>>35&0x1fff), int(r>>48)
		n := n0 + float32(gy*(float32(y)+0.5))
		for m := uint32(r); m != 0; m >>= 16 {
			if m := uint16(m); m != 0 {
				at := x + t.pad
				t.coverMask(l, y*t.perRow+at>>3, at&7, y, m, slot, n+float32(gx*(float32(x)+0.5)), gx, gy)
			}
			x++
		}
	}
}

// layerOf returns the layer of a triangle: the front when its corners run
// counter-clockwise for the viewer.
func (t *tile) layerOf(p *part, a, b, c *vert) *layer {
	if ((b.x-a.x)*(a.y-c.y)-(c.x-a.x)*(a.y-b.y) < 0) != p.mirrored {
		return &t.back
	}
	return &t.front
}

// maskPlain makes the records of small triangles and returns their number.
// maskEight does the same for four samples a pixel.
func (t *tile) maskPlain(todo uint32) (n int) {
	for ; todo != 0; todo &= todo - 1 {
		i := bits.TrailingZeros32(todo) & 7
		k := t.tris.lane(i, 0)
		for r := range int(k.rows) {
			for x := 0; x < 2*int(k.pairs); x += 2 {
				masks := uint64(0)
				for s := range 1 << t.lg {
					if t.inside(&k, r, x, s) {
						masks |= 1 << s
					}
					if t.inside(&k, r, x+1, s) {
						masks |= 1 << (16 + s)
					}
				}
				if masks != 0 {
					t.tris.recordBuf[n] = masks | uint64(i)<<32 | uint64(int(k.x)+x)<<35 | uint64(int(k.y)+r)<<48
					n++
				}
			}
		}
	}
	return n
}

// inside tells whether a sample of pixel (x, r) of the kernel's field is
// covered and not hidden.
func (t *tile) inside(k *kernel, r, x, s int) bool {
	sy := int32(r*sub + (2*s+1)*sub/2>>t.lg)
	sx := int32(x*sub) + int32(t.sx[s&15]*sub)
	e0 := k.e[0] + k.a[0]*sx + k.b[0]*sy
	e1 := k.e[1] + k.a[1]*sx + k.b[1]*sy
	e2 := k.e[2] + k.a[2]*sx + k.b[2]*sy
	if e0|e1|e2 < 0 {
		return false
	}
	y := k.y + float32(r) + (float32(s)+0.5)/float32(int(1)<<t.lg)
	n := (k.n0 + k.gy*y) + k.gx*(k.x+float32(x)+float32(t.sx[s&15]))
	return int64(uint64(math.Float32bits(n))<<32|math.MaxUint32) > int64(t.keys[k.at+(r*t.side+x)<<t.lg+s])
}
