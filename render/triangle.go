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

// triEdges are the edge functions a·x + b·y + c of a triangle in grid units
// of the canvas, less 1 where 0 is outside.
type triEdges struct {
	a, b, c [3]int64
}

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
	masks       *uint8      // 568: where a layer's masks go, one a pair
	slot        uint32      // 576: of the next triangle that is seen
	ox, oy      float32     // 580, 584: place of the canvas
	rim         int32       // 588: from a pixel's rim to the first sample
	clip        [4]int32    // 592: first column and row, last column and row
	side, shift int32       // 608, 612: of the canvas; log2 of the bytes of a pixel
	ids         [8]uint32   // entries of the batch
	n           int
	maskBuf     [maxMasks]uint8
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
	s.masks = &s.maskBuf[0]
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
	large := uint32(1) // anything: look at every triangle
	if s.ids[0]&looseBit != 0 || !useVectors {
		for i := range n {
			a, b, c := s.corners(i, verts, loose)
			s.setup(i, a, b, c)
		}
	} else {
		for i := n; i < 8; i++ {
			s.a[i], s.b[i], s.c[i] = s.a[0], s.b[0], s.c[0]
		}
		large = setupEight(s)
	}
	if !layered && large == 0 && t.lg == 2 && useVectors {
		s.slot = uint32(len(t.slots))
		for seen := drawEight(s, 1<<n-1); seen != 0; seen &= seen - 1 {
			t.slots = append(t.slots, slot{it.part, it.batch, s.ids[bits.TrailingZeros32(seen)&7]})
		}
		return
	}
	for i := range n {
		if s.rows[i] == 0 {
			continue
		}
		k := uint32(len(t.slots))
		// Known before it is drawn: a layer may turn into fragments on the
		// way.
		t.slots = append(t.slots, slot{it.part, it.batch, s.ids[i]})
		a, b, c := s.corners(i, verts, loose)
		var l *layer
		if layered {
			l = &t.front
			if ((b.x-a.x)*(a.y-c.y)-(c.x-a.x)*(a.y-b.y) < 0) != p.mirrored {
				l = &t.back
			}
		}
		if !t.triangle(i, a, b, c, k, l) {
			t.slots = t.slots[:k]
		}
	}
}

// triangle draws a triangle of the block: onto the samples when l is nil,
// otherwise into the layer. It tells whether it reached a sample.
func (t *tile) triangle(i int, a, b, c *vert, slot uint32, l *layer) bool {
	s := &t.tris
	if s.rows[i] < 0 || l != nil && s.rows[i]*s.pairs[i] > maxMasks {
		return t.large(a, b, c, s.n0[i], s.gx[i], s.gy[i], slot, l)
	}
	if l == nil && t.lg == 2 && useVectors {
		s.slot = slot
		return drawEight(s, 1<<i) != 0
	}
	k := s.lane(i, slot)
	if l == nil {
		return t.drawPlain(&k)
	}
	if t.lg == 2 && useVectors {
		if !maskFour(s, i) {
			return false
		}
	} else if !t.maskPlain(&k) {
		return false
	}
	return t.addMasks(&k, l)
}

// onEdge is -1 for edges whose own samples belong to the neighbour.
func onEdge(a, b int32) int32 {
	if a > 0 || a == 0 && b > 0 {
		return 0
	}
	return -1
}

// drawPlain draws a small triangle, sample by sample. drawFour does the same
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

// maskPlain finds which samples a small triangle covers in front of what is
// there: for each pixel pair a byte for up to four samples a pixel. With more
// samples it draws nothing and leaves them to addMasks.
func (t *tile) maskPlain(k *kernel) bool {
	if t.lg > 2 {
		return true
	}
	n := 1 << t.lg
	m := 0
	any := uint8(0)
	for r := range int(k.rows) {
		for p := range int(k.pairs) {
			mask := uint8(0)
			for q := range 2 {
				for s := range n {
					if t.inside(k, r, 2*p+q, s) {
						mask |= 1 << (4*q + s)
					}
				}
			}
			t.tris.maskBuf[m] = mask
			any |= mask
			m++
		}
	}
	return any != 0
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

// addMasks adds the covered samples to a layer.
func (t *tile) addMasks(k *kernel, l *layer) bool {
	hit := false
	m := 0
	pixel := k.at >> t.lg
	y0 := pixel / t.side
	x0 := pixel - y0*t.side + t.pad
	for r := range int(k.rows) {
		y := y0 + r
		row := y * t.perRow
		n := k.n0 + k.gy*(k.y+float32(r)+0.5) + k.gx*(k.x+0.5)
		for q := range 2 * int(k.pairs) {
			mask := uint16(0)
			if t.lg > 2 {
				for s := range 1 << t.lg {
					if t.inside(k, r, q, s) {
						mask |= 1 << s
					}
				}
			} else {
				mask = uint16(t.tris.maskBuf[m]) >> (4 * (q & 1)) & 15
				m += q & 1
			}
			if mask == 0 {
				continue
			}
			hit = true
			x := x0 + q
			t.coverMask(l, row+x>>3, x&7, y, mask, k.slot, n+k.gx*float32(q), k.gx, k.gy)
		}
	}
	return hit
}

// large draws a triangle of any size, sample row by sample row: the whole
// pixels whose samples lie inside are found by division.
func (t *tile) large(a, b, c *vert, n0, gx, gy float32, slot uint32, l *layer) bool {
	const most = 1 << 22
	var x, y [3]int64
	for i, v := range [3]*vert{a, b, c} {
		if !(v.x > -most && v.x < most && v.y > -most && v.y < most) {
			return false
		}
		x[i], y[i] = int64(v.x*sub)-int64(t.x)*sub, int64(v.y*sub)-int64(t.y)*sub
	}
	if (x[1]-x[0])*(y[2]-y[0])-(x[2]-x[0])*(y[1]-y[0]) < 0 {
		x[1], y[1], x[2], y[2] = x[2], y[2], x[1], y[1]
	}
	var e triEdges
	for i := range 3 {
		j := (i + 1) % 3
		e.a[i], e.b[i] = y[i]-y[j], x[j]-x[i]
		e.c[i] = -e.a[i]*x[i] - e.b[i]*y[i]
		if !(e.a[i] > 0 || e.a[i] == 0 && e.b[i] > 0) {
			e.c[i]--
		}
	}
	n := 1 << t.lg
	yLo, yHi := min(y[0], y[1], y[2]), max(y[0], y[1], y[2])
	hit := false
	for py := t.clip.Min.Y; py < t.clip.Max.Y; py++ {
		if int64(py+1)*sub < yLo || int64(py)*sub > yHi {
			continue
		}
		for s := range n {
			sy := int64(py*sub + (2*s+1)*sub/2>>t.lg)
			sx := int64(t.sx[s&15] * sub)
			x0, x1 := int64(t.clip.Min.X), int64(t.clip.Max.X-1)
			for i := range 3 {
				// Inside where d + a·256·x is not negative.
				d, g := e.a[i]*sx+e.b[i]*sy+e.c[i], e.a[i]*sub
				switch {
				case g > 0:
					x0 = max(x0, -floorDiv(d, g))
				case g < 0:
					x1 = min(x1, floorDiv(d, -g))
				case d < 0:
					x1 = x0 - 1
				}
			}
			if x0 > x1 {
				continue
			}
			hit = true
			row := n0 + gy*(float32(py)+(float32(s)+0.5)/float32(n))
			for x := int(x0); x <= int(x1); x++ {
				near := row + gx*(float32(x)+float32(t.sx[s&15]))
				if l != nil {
					if t.cover(l, py, x, s, near, slot) {
						g, lane := t.groupOf(x, py)
						sh := &t.strips[l.at[g]]
						sh.n[lane], sh.nx[lane], sh.ny[lane] = n0+gy*(float32(py)+0.5)+gx*(float32(x)+0.5), gx, gy
					}
					continue
				}
				key := uint64(math.Float32bits(near))<<32 | uint64(slot)
				if p := &t.keys[(py*t.side+x)<<t.lg+s]; int64(key) > int64(*p) {
					*p = key
				}
			}
		}
	}
	return hit
}

// floorDiv returns the largest whole number not above a/b, for b > 0.
func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}
