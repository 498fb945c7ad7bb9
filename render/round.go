package render

import "math"

// rodKernel is what the innermost loop needs of a round body in a row of
// pixels: for every sample of a pixel, at u = x + dx, the wall's ends are
// b0 + b1·u ± √(c0 + c1·u + c2·u²) and the ends of the body low and high, all
// as nearness. The layout is known to the assembly.
type rodKernel struct {
	dx, c0, c1, b0, low0, high0 [16]float64 // 0, 128, 256, 384, 512, 640
	x0, x1                      [16]float64 // 768, 896: first and end pixel
	c2, b1, low1, high1         float64     // 1024, 1032, 1040, 1048
	none                        float64     // 1056: for the root where it does not exist
	least                       float64     // 1064: what the farther end is not below
	from                        float64     // 1072: first pixel
	count                       int64       // 1080: of pixels
	keys                        *uint64     // 1088: of the first pixel
	slot                        uint64      // 1096
}

// round draws an opaque round body that lies wholly in front of the eye.
func (t *tile) round(q *quadric, b *box, slot uint32) {
	k := &t.rods
	k.c2, k.b1, k.slot = q.q[3], q.b[1], uint64(slot)
	k.none, k.least = 0, math.Inf(-1)
	if q.kind != rodSphere && k.c2 >= 0 { // its span is not bounded
		k.none = math.Inf(-1)
	}
	s0, s1 := q.s0, q.s1
	switch q.slab {
	case slabNone:
		s0, s1 = lin{math.Inf(1)}, lin{math.Inf(-1)}
	case slabAhead:
		k.least = math.SmallestNonzeroFloat64
	}
	k.low1, k.high1 = s0[1], s1[1]
	n := 1 << t.lg
	j0, j1 := t.rowRange(b.y0, b.y1)
	for py := j0 >> t.lg; py < (j1+n-1)>>t.lg; py++ {
		from, to := math.MaxInt, 0
		for s := range n {
			y := float64(py) + (float64(s)+0.5)/float64(n)
			l, r := q.span(y, b.x0, b.x1)
			x0, x1 := t.pixelRange(l, r, s)
			k.x0[s], k.x1[s] = float64(x0), float64(x1)
			if x0 < x1 {
				from, to = min(from, x0), max(to, x1)
			}
			dy := y - q.my
			k.dx[s] = float64(t.x) + t.sx[s] - q.mx
			k.c0[s], k.c1[s] = q.q[0]+dy*(q.q[2]+q.q[5]*dy), q.q[1]+q.q[4]*dy
			k.b0[s], k.low0[s], k.high0[s] = q.b[0]+q.b[2]*dy, s0[0]+s0[2]*dy, s1[0]+s1[2]*dy
		}
		if from >= to {
			continue
		}
		row := t.keys[((py-t.y)*t.side+from)<<t.lg:][:(to-from)<<t.lg]
		k.from, k.count, k.keys = float64(from), int64(to-from), &row[0]
		if t.lg == 2 && useVectors {
			rodFour(k)
			continue
		}
		for s := range n {
			k.plain(s, row, n)
		}
	}
}

// plain draws the samples s of a row of pixels with n samples each. rodFour
// does the same for all four samples of a pixel at once.
func (k *rodKernel) plain(s int, keys []uint64, n int) {
	for i := s; i < len(keys); i += n {
		x := k.from + float64(i/n)
		if x < k.x0[s] || x >= k.x1[s] {
			continue
		}
		u := x + k.dx[s]
		d := k.c0[s] + float64(u*(k.c1[s]+float64(u*k.c2)))
		root := k.none
		if d > 0 {
			root = math.Sqrt(d)
		}
		wall := k.b0[s] + float64(k.b1*u)
		low, high := k.low0[s]+float64(k.low1*u), k.high0[s]+float64(k.high1*u)
		in, out := wall+root, wall-root
		near, far, id := low, high, k.slot+capLow
		if low < high {
			near, far, id = high, low, k.slot+capHigh
		}
		if near < in {
			in = near
		} else {
			id = k.slot
		}
		if far > out {
			out = far
		}
		if !(in >= out && far >= k.least) {
			continue
		}
		key := uint64(math.Float32bits(float32(in)))<<32 | id
		if int64(key) > int64(keys[i]) {
			keys[i] = key
		}
	}
}
