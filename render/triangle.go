package render

import (
	"math"
	"math/bits"
)

// Vertices lie on a grid of 1/256 pixel, and which samples a triangle covers
// is decided with whole numbers: a sample is inside where all three edge
// functions are positive, or 0 on an edge that looks to the right or, when it
// is level, down. So two triangles that share an edge split the samples
// between them without gap and without overlap, whichever of the ways below
// finds them (J. Pineda, Computer Graphics 22 (4), 17, 1988).
const (
	subBits = 8
	sub     = 1 << subBits
)

// snapBig is added and taken away to round a float64 to the grid.
const snapBig = 1.5 * (1 << (52 - subBits))

func snap(v float32) float32 { return float32(float64(v) + snapBig - snapBig) }

// kernel is what the innermost loop needs of a triangle.
type kernel struct {
	e           [3]int32 // edge functions at the corner of the first pixel
	a, b        [3]int32 // their growth over a grid unit
	n0          float32  // nearness at the canvas's corner
	gx, gy      float32  // its growth over a pixel
	x, y        float32  // the first pixel
	at          int      // its first sample
	slot        uint32
	rows, pairs int32 // of pixels in a row
}

// triEight is a block of eight triangles, field by field; its layout is known
// to the assembly.
type triEight struct {
	a, b, c     [8]uint32   // 0, 32, 64: corners in the frame's list of vertices
	ab          [3][8]int32 // 96: growth of the edge functions, to the right in the lower half and down in the upper
	e           [3][8]int32 // 192: as in kernel
	n0, gx, gy  [8]float32  // 288, 320, 352
	x, y        [8]float32  // 384, 416
	rows, pairs [8]int32    // 448, 480: rows is -1 for large triangles
	at          [8]int32    // 512: bytes from the first sample of the canvas
	verts       *vert       // 544
	keys        *uint64     // 552
	stride      int64       // 560: bytes from row to row
	records     *uint64     // 568: where a layer's masks go
	slot        uint32      // 576: of the next triangle that is seen
	ox, oy      float32     // 580, 584: place of the canvas
	rim         int32       // 588: from a pixel's rim to the first sample
	clip        [4]int32    // 592: first column and row, last column and row
	side, shift int32       // 608, 612: of the canvas; log2 of the bytes of a pixel
	ids         [8]uint32   // entries of the batch
	n           int
	recordBuf   [8 * maxMasks]uint64
}

// maxMasks is the largest field of pixel pairs that the innermost loop takes.
const maxMasks = 56 * 28

// ready prepares for a canvas.
func (s *triEight) ready(t *tile) {
	s.n = 0
	s.keys, s.stride = &t.keys[0], int64(t.side)<<(t.lg+3)
	s.ox, s.oy = float32(t.x), float32(t.y)
	s.rim = sub / 2 >> t.lg
	s.clip = [4]int32{int32(t.clip.Min.X), int32(t.clip.Min.Y), int32(t.clip.Max.X - 1), int32(t.clip.Max.Y - 1)}
	s.side, s.shift = int32(t.side), int32(t.lg+3)
	s.records = &s.recordBuf[0]
	if len(t.f.verts) > 0 {
		s.verts = &t.f.verts[0]
	}
}

// setup readies a triangle for the innermost loop. Triangles that are large
// or lie far out get -1 rows.
func (s *triEight) setup(i int, a, b, c *vert) {
	ax, ay, bx, by, cx, cy := a.x-s.ox, a.y-s.oy, b.x-s.ox, b.y-s.oy, c.x-s.ox, c.y-s.oy
	s.n0[i], s.gx[i], s.gy[i] = slopes(ax, ay, bx, by, cx, cy, a.n, b.n, c.n)
	x0, x1, y0, y1 := min(ax, bx, cx), max(ax, bx, cx), min(ay, by, cy), max(ay, by, cy)
	if !(x1-x0 < 100 && y1-y0 < 100 && min(x0, y0) > -100 && max(x1, y1) < 300) {
		s.rows[i] = -1
		return
	}
	px, py := [3]int32{int32(ax * sub), int32(bx * sub), int32(cx * sub)}, [3]int32{int32(ay * sub), int32(by * sub), int32(cy * sub)}
	if (px[1]-px[0])*(py[2]-py[0])-(px[2]-px[0])*(py[1]-py[0]) < 0 {
		px[1], py[1], px[2], py[2] = px[2], py[2], px[1], py[1]
	}
	// No sample lies within half a sample row of a pixel's rim, but some lie
	// just there.
	left, top := max((min(px[0], px[1], px[2])+s.rim-1)>>subBits, s.clip[0])&^1, max((min(py[0], py[1], py[2])+s.rim-1)>>subBits, s.clip[1])
	right, low := min((max(px[0], px[1], px[2])-s.rim)>>subBits, s.clip[2]), min((max(py[0], py[1], py[2])-s.rim)>>subBits, s.clip[3])
	s.rows[i] = low - top + 1
	if right < left || low < top {
		s.rows[i] = 0
	}
	s.pairs[i] = (right-left)>>1 + 1
	s.x[i], s.y[i] = float32(left), float32(top)
	s.at[i] = (top*s.side + left) << s.shift
	// The edge from P to Q has a = Py - Qy and b = Qx - Px.
	for k := range 3 {
		q := (k + 1) % 3
		a, b := py[k]-py[q], px[q]-px[k]
		s.e[k][i] = a*(left*sub-px[k]) + b*(top*sub-py[k]) + onEdge(a, b)
		s.ab[k][i] = a&0xffff | b<<16
	}
}

// slopes returns the nearness of a triangle's plane at the canvas's corner
// and its growth to the right and down.
func slopes(ax, ay, bx, by, cx, cy, an, bn, cn float32) (n0, gx, gy float32) {
	ux, uy, vx, vy := bx-ax, by-ay, cx-ax, cy-ay
	det := float32(ux*vy) - float32(vx*uy)
	un, vn := bn-an, cn-an
	if det > 1e-4 || det < -1e-4 {
		inv := 1 / det
		gx, gy = float32(float32(un*vy)-float32(vn*uy))*inv, float32(float32(vn*ux)-float32(un*vx))*inv
	}
	return an - float32(gx*ax) - float32(gy*ay), gx, gy
}

// lane returns one of the eight triangles.
func (s *triEight) lane(i int, slot uint32) kernel {
	k := kernel{n0: s.n0[i], gx: s.gx[i], gy: s.gy[i], x: s.x[i], y: s.y[i], slot: slot, rows: s.rows[i], pairs: s.pairs[i]}
	k.at = int(s.at[i]) >> 3
	for j := range 3 {
		k.e[j], k.a[j], k.b[j] = s.e[j][i], s.ab[j][i]<<16>>16, s.ab[j][i]>>16
	}
	return k
}

// corners returns the corners of one of the eight triangles, which may be one
// of the batch's loose ones.
func (s *triEight) corners(i int, verts []vert, loose []loose) (a, b, c *vert) {
	if id := s.ids[i]; id&looseBit != 0 {
		l := &loose[id&^looseBit]
		return &l.v[0], &l.v[1], &l.v[2]
	}
	return &verts[s.a[i]], &verts[s.b[i]], &verts[s.c[i]]
}

// drawBlock draws the triangles of a block and adds a slot for each of those
// that reach a sample: onto the samples, or into the layers.
func (t *tile) drawBlock(it *item, p *part, layered bool) {
	s := &t.tris
	n := s.n
	s.n = 0
	if n == 0 {
		return
	}
	verts, loose := t.f.verts, t.f.batches[it.batch].loose
	large := uint32(0)
	if s.ids[0]&looseBit != 0 || !useVectors {
		for i := range n {
			a, b, c := s.corners(i, verts, loose)
			s.setup(i, a, b, c)
			if s.rows[i] < 0 {
				large |= 1 << i
			}
		}
	} else {
		for i := n; i < 8; i++ {
			s.a[i], s.b[i], s.c[i] = s.a[0], s.b[0], s.c[0]
		}
		large = setupEight(s) & (1<<n - 1)
	}
	if layered && t.side > 56 { // the buffer would not hold their masks
		for i := range n {
			if s.rows[i]*s.pairs[i] > maxMasks {
				large |= 1 << i
			}
		}
	}
	if large == 0 {
		t.drawSmall(it, p, 1<<n-1, layered)
		return
	}
	for i := range n {
		if large>>i&1 == 0 {
			t.drawSmall(it, p, 1<<i, layered)
			continue
		}
		a, b, c := s.corners(i, verts, loose)
		var l *layer
		if layered {
			l = t.layerOf(p, a, b, c)
		}
		slot := t.addSlot(it, s.ids[i])
		if !t.large(a, b, c, s.n0[i], s.gx[i], s.gy[i], slot, l) {
			t.slots = t.slots[:slot]
		}
	}
}

// addSlot adds a slot for a triangle of a batch.
func (t *tile) addSlot(it *item, id uint32) uint32 {
	t.slots = append(t.slots, slot{it.part, it.batch, id})
	return uint32(len(t.slots) - 1)
}

// drawSmall draws those small triangles of the block that have a bit in todo.
func (t *tile) drawSmall(it *item, p *part, todo uint32, layered bool) {
	s := &t.tris
	if layered {
		t.coverSmall(it, p, todo)
		return
	}
	if t.lg == 2 && useVectors {
		s.slot = uint32(len(t.slots))
		for seen := drawEight(s, todo); seen != 0; seen &= seen - 1 {
			t.addSlot(it, s.ids[bits.TrailingZeros32(seen)&7])
		}
		return
	}
	for ; todo != 0; todo &= todo - 1 {
		i := bits.TrailingZeros32(todo) & 7
		if k := s.lane(i, uint32(len(t.slots))); t.drawPlain(&k) {
			t.addSlot(it, s.ids[i])
		}
	}
}

// onEdge is -1 for edges whose own samples belong to the neighbour.
func onEdge(a, b int32) int32 {
	if a > 0 || a == 0 && b > 0 {
		return 0
	}
	return -1
}

// drawPlain draws a small triangle, sample by sample. drawEight does the same
// for four samples a pixel.
func (t *tile) drawPlain(k *kernel) bool {
	n := 1 << t.lg
	hit := false
	for r := range int(k.rows) {
		for s := range n {
			sy := int32(r*sub + (2*s+1)*sub/2>>t.lg)
			sx := int32(t.sx[s&15] * sub)
			e0 := k.e[0] + k.a[0]*sx + k.b[0]*sy
			e1 := k.e[1] + k.a[1]*sx + k.b[1]*sy
			e2 := k.e[2] + k.a[2]*sx + k.b[2]*sy
			y := k.y + float32(r) + (float32(s)+0.5)/float32(n)
			row := k.n0 + k.gy*y
			x := k.x + float32(t.sx[s&15])
			i := k.at + r*t.side<<t.lg + s
			for range 2 * int(k.pairs) {
				if e0|e1|e2 >= 0 {
					key := uint64(math.Float32bits(row+k.gx*x))<<32 | uint64(k.slot)
					if p := &t.keys[i]; int64(key) > int64(*p) {
						*p = key
						hit = true
					}
				}
				e0 += k.a[0] << subBits
				e1 += k.a[1] << subBits
				e2 += k.a[2] << subBits
				x++
				i += n
			}
		}
	}
	return hit
}
