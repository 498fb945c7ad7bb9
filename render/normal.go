package render

import "math"

// roundKernel is what normals of a round body's wall need in a row of pixels;
// places are measured from the body's middle. The layout is known to the
// assembly.
type roundKernel struct {
	first      float64    // 0: the first pixel's middle
	c0, c1, c2 float64    // 8, 16, 24: what stands under the root
	b0, b1     float64    // 32, 40: middle of the two ends
	sign       float64    // 48: of the root
	k0, k1     float64    // 56, 64: nearness without perspective
	persp      int64      // 72
	o0, o1     [3]float64 // 80, 104: line of sight in the body's own space
	d0, d1     [3]float64 // 128, 152
	sz         float64    // 176
	m          [9]float32 // 184: normals to camera space
	_          float32
	n          [lanes]float32 // 224
	nx, ny, nz [lanes]float32 // 256, 288, 320
}

// aimRound fills in the sights of a round body, slot k, for those of eight
// neighbouring pixels that have a bit in want; (px, py) is the first.
func (t *tile) aimRound(o *eight, k uint32, p *part, want uint8, px, py int) {
	q := &t.f.quadrics[p.index]
	r := &t.rounds
	x, y := float64(px+t.x)+0.5, float64(py+t.y)+0.5
	kind := t.slots[k].tri
	if kind == wallFront || kind == wallBack {
		q.kernel(r, x-q.mx, y-q.my, kind)
		if useVectors {
			normalEight(r)
		} else {
			r.plain()
		}
	} else {
		l := &q.s0
		if kind == capHigh {
			l = &q.s1
		}
		for i := range lanes {
			r.n[i] = float32(l.at(x+float64(i)-q.mx, y-q.my))
			r.nx[i], r.ny[i], r.nz[i] = q.nrm[2], q.nrm[5], q.nrm[8]
		}
	}
	for m := want; m != 0; m &= m - 1 {
		i := lowest(m)
		o.slot[i], o.x[i], o.y[i] = k, float32(x+float64(i)), float32(y)
		o.nx[i], o.ny[i], o.nz[i], o.n[i] = r.nx[i], r.ny[i], r.nz[i], r.n[i]
		o.side[i], o.hatched[i] = 0, 0
	}
}

// kernel readies the wall for the row at height y, with its first pixel at x.
func (q *quadric) kernel(k *roundKernel, x, y float64, kind uint32) {
	k.first = x
	k.c0, k.c1, k.c2 = q.q[0]+y*(q.q[2]+q.q[5]*y), q.q[1]+q.q[4]*y, q.q[3]
	k.b0, k.b1 = q.b[0]+q.b[2]*y, q.b[1]
	k.sign = 1
	if kind == wallBack {
		k.sign = -1
	}
	k.k0, k.k1, k.persp = q.k0, q.k1, 0
	if q.persp {
		k.persp = 1
	}
	for c := range 3 {
		k.o0[c], k.o1[c] = q.o[c][0]+q.o[c][2]*y, q.o[c][1]
		k.d0[c], k.d1[c] = q.d[c][0]+q.d[c][2]*y, q.d[c][1]
	}
	k.sz, k.m = q.sz, q.nrm
}

// plain finds the normals one by one. normalEight does the same side by side.
func (k *roundKernel) plain() {
	for i := range lanes {
		x := k.first + float64(i)
		d := float64(x*(k.c1+float64(x*k.c2))) + k.c0
		if !(d > 0) {
			d = 0
		}
		n := k.b0 + float64(k.b1*x) + float64(math.Sqrt(d)*k.sign)
		k.n[i] = float32(n)
		t := (k.k0 - n) / k.k1
		if k.persp != 0 {
			t = 1 / n
		}
		var g [3]float64
		for c := range g {
			g[c] = k.o0[c] + float64(k.o1[c]*x) + float64(t*(k.d0[c]+float64(k.d1[c]*x)))
		}
		a, b, c := float32(g[0]), float32(g[1]), float32(g[2]*k.sz)
		m := &k.m
		k.nx[i] = float32(float32(m[0]*a)+float32(m[1]*b)) + float32(m[2]*c)
		k.ny[i] = float32(float32(m[3]*a)+float32(m[4]*b)) + float32(m[5]*c)
		k.nz[i] = float32(float32(m[6]*a)+float32(m[7]*b)) + float32(m[8]*c)
	}
}
