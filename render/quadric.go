package render

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// rod is the kind of a round body. In its own space it is
// x² + y² + sz² + const ≤ 0 between two planes of z.
type rod uint8

const (
	rodSphere   rod = iota // x² + y² + z² ≤ 1
	rodCylinder            // x² + y² ≤ 1, 0 ≤ z ≤ 1
	rodCone                // x² + y² ≤ z², -1 ≤ z ≤ 0
)

// lin is the linear function v[0] + v[1]·x + v[2]·y of a place relative to a
// quadric's middle.
type lin [3]float64

func (l *lin) at(x, y float64) float64 { return l[0] + l[1]*x + l[2]*y }

// Along a line of sight a round body is an interval of nearness. Both ends of
// its wall are B ± √Q with B linear and Q quadratic in the place on the
// picture, and the planes that end it are linear.
type quadric struct {
	kind   rod
	mode   wallMode
	slab   slabMode
	safe   bool // no part of it crosses the near limit
	mx, my float64
	b      lin
	q      [6]float64 // 1, x, y, x², xy, y²
	s0, s1 lin

	// Back to the body's own space for shading.
	o, d   [3]lin
	persp  bool
	k0, k1 float64
	sz     float64
	nrm    [9]float32
	length float64
	toCam  Affine
}

// wallMode says which side of the two ends of the wall is inside.
type wallMode uint8

const (
	wallBetween wallMode = iota // from B+√Q away to B-√Q
	wallAround                  // from the eye to B+√Q
	wallBeyond                  // from B-√Q to infinity
)

type slabMode uint8

const (
	slabNone    slabMode = iota
	slabAhead            // both planes in front of the eye
	slabAnyhow           // no eye: no perspective
	slabBetween          // the eye is between the planes
)

// The kinds of surface of a quadric, as they are kept in a slot.
const (
	wallFront = iota
	wallBack
	capLow
	capHigh
	surfaceKinds
)

// addBody adds a round body given the map from its own space to camera space.
func (f *frame) addBody(p part, local Affine, kind rod, length float64) {
	if kind == rodCone { // the apex becomes the origin
		local = local.After(Affine{mgl64.Ident3(), Vec3{0, 0, 1}})
	}
	if !finite9(local.Linear) || !finite3(local.Shift) {
		return
	}
	m := local.Linear
	// Rays are met in the body's own space; when that is pressed so flat that
	// the eye lies a million units away there, their numbers get too coarse.
	inv := m.Inv()
	if far := inv.Mul3x1(local.Shift).Len() + inv.Col(2).Len(); !(m.Det() != 0 && far < 1e6) {
		f.addMesh(p, local, flatBodies()[kind])
		return
	}
	pr := &f.projs[p.proj]
	lo, hi := bodyBox(local, kind)
	p.box = pr.boxOf(lo, hi)
	if p.box.x0 >= p.box.x1 || p.box.y0 >= p.box.y1 {
		return
	}
	q := quadric{kind: kind, persp: pr.persp, k0: pr.k0, k1: pr.k1, length: length, toCam: local}
	q.safe = !pr.persp || -hi[2]*pr.nMax >= 1
	if p.box != everywhere {
		q.mx, q.my = math.Floor((p.box.x0+p.box.x1)/2), math.Floor((p.box.y0+p.box.y1)/2)
	} else {
		q.mx, q.my = pr.cx, pr.cy
	}
	n := cofactors(m)
	big := 0.0
	for _, v := range n {
		big = math.Max(big, math.Abs(v))
	}
	q.nrm = rows32(n, 1/big)
	if !q.solve(pr, local) {
		return
	}
	p.form, p.index = formQuadric, int32(len(f.quadrics))
	f.quadrics = append(f.quadrics, q)
	f.parts = append(f.parts, p)
}

// bodyBox bounds the body in camera space.
func bodyBox(a Affine, kind rod) (lo, hi Vec3) {
	x, y, z := a.Linear.Col(0), a.Linear.Col(1), a.Linear.Col(2)
	for k := range 3 {
		r := math.Hypot(x[k], y[k])
		switch kind {
		case rodSphere:
			r = math.Hypot(r, z[k])
			lo[k], hi[k] = a.Shift[k]-r, a.Shift[k]+r
		case rodCylinder:
			lo[k], hi[k] = a.Shift[k]+math.Min(0, z[k])-r, a.Shift[k]+math.Max(0, z[k])+r
		case rodCone:
			lo[k], hi[k] = a.Shift[k]+math.Min(0, -z[k]-r), a.Shift[k]+math.Max(0, -z[k]+r)
		}
	}
	return lo, hi
}

// solve finds the ends of the body as functions of the place on the picture.
func (q *quadric) solve(pr *projection, local Affine) bool {
	inv := local.Linear.Inv()
	ex, ey := inv.Col(0).Mul(1/pr.f), inv.Col(1).Mul(-1/pr.f)
	a, b := (q.mx-pr.cx)/pr.f, (pr.cy-q.my)/pr.f
	var o, d [3]lin
	if pr.persp {
		d0 := inv.Mul3x1(Vec3{a, b, -1})
		o0 := inv.Mul3x1(local.Shift.Mul(-1))
		for k := range 3 {
			d[k], o[k] = lin{d0[k], ex[k], ey[k]}, lin{o0[k]}
		}
	} else {
		d0 := inv.Mul3x1(Vec3{0, 0, -1})
		o0 := inv.Mul3x1(Vec3{a, b, 0}.Sub(local.Shift))
		for k := range 3 {
			d[k], o[k] = lin{d0[k]}, lin{o0[k], ex[k], ey[k]}
		}
	}
	q.o, q.d = o, d
	con := -1.0
	switch q.kind {
	case rodSphere:
		q.sz = 1
	case rodCone:
		q.sz, con = -1, 0
	}
	aa, bb, cc := q.form(d, d), q.form(o, d), q.form(o, o)
	cc[0] += con
	disc := times(lin{bb[0], bb[1], bb[2]}, lin{bb[0], bb[1], bb[2]})
	if pr.persp {
		// In perspective o is fixed, so bb is linear and cc a number.
		c := nonzero(cc[0])
		for k := range disc {
			q.q[k] = (disc[k] - aa[k]*c) / (c * c)
		}
		bb = q.form(o, d)
		q.b = lin{-bb[0] / c, -bb[1] / c, -bb[2] / c}
		switch {
		case c > 0:
			q.mode = wallBetween
		case q.kind == rodCone && o[2][0] > 0:
			q.mode = wallBeyond
		default:
			q.mode = wallAround
		}
	} else {
		a := nonzero(aa[0])
		for k := range disc {
			q.q[k] = (disc[k] - a*cc[k]) / (a * a) * pr.k1 * pr.k1
		}
		q.b = lin{pr.k0 + pr.k1*bb[0]/a, pr.k1 * bb[1] / a, pr.k1 * bb[2] / a}
		switch {
		case a > 0:
			q.mode = wallBetween
		case d[2][0] < 0:
			q.mode = wallBeyond
		default:
			q.mode = wallAround
		}
	}
	q.planes(pr)
	for _, v := range q.q {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

// planes finds the nearness of the two ends.
func (q *quadric) planes(pr *projection) {
	z0, z1 := 0.0, 1.0
	switch q.kind {
	case rodSphere:
		q.slab = slabNone
		return
	case rodCone:
		z0, z1 = -1, 0
	}
	oz, dz := q.o[2], q.d[2]
	if pr.persp {
		for k := range 3 {
			q.s0[k], q.s1[k] = dz[k]/nonzero(z0-oz[0]), dz[k]/nonzero(z1-oz[0])
		}
		q.slab = slabAhead
		if z0 < oz[0] && oz[0] < z1 {
			q.slab = slabBetween
		}
		return
	}
	q.slab = slabAnyhow
	k := pr.k1 / nonzero(dz[0])
	q.s0 = lin{pr.k0 - k*(z0-oz[0]), k * oz[1], k * oz[2]}
	q.s1 = lin{pr.k0 - k*(z1-oz[0]), k * oz[1], k * oz[2]}
}

// nonzero keeps a divisor away from 0.
func nonzero(v float64) float64 {
	if math.Abs(v) < 1e-12 {
		if v < 0 {
			return -1e-12
		}
		return 1e-12
	}
	return v
}

// form returns x² + y² + sz² of two linear vectors as a polynomial.
func (q *quadric) form(u, v [3]lin) (p [6]float64) {
	for k, w := range [3]float64{1, 1, q.sz} {
		t := times(u[k], v[k])
		for i := range p {
			p[i] += w * t[i]
		}
	}
	return p
}

// times multiplies two linear functions.
func times(a, b lin) [6]float64 {
	return [6]float64{
		a[0] * b[0], a[0]*b[1] + a[1]*b[0], a[0]*b[2] + a[2]*b[0],
		a[1] * b[1], a[1]*b[2] + a[2]*b[1], a[2] * b[2],
	}
}

// ends returns the nearness of both ends of the body at a place, with the
// kinds of surface found there; ok is false when the line of sight misses it.
func (q *quadric) ends(x, y float64) (in, out float64, inKind, outKind uint32, ok bool) {
	x, y = x-q.mx, y-q.my
	d := q.q[0] + x*(q.q[1]+q.q[3]*x+q.q[4]*y) + y*(q.q[2]+q.q[5]*y)
	s := 0.0
	if d > 0 {
		s = math.Sqrt(d)
	} else if q.mode == wallBetween && d < 0 {
		return 0, 0, 0, 0, false
	}
	b := q.b.at(x, y)
	switch q.mode {
	case wallBetween:
		in, out = b+s, b-s
	case wallAround:
		in, out = math.Inf(1), b+s
		if d < 0 {
			out = math.Inf(-1)
		}
	default:
		in, out = b-s, math.Inf(-1)
		if d < 0 {
			return 0, 0, 0, 0, false
		}
	}
	inKind, outKind = wallFront, wallBack
	if q.mode == wallAround {
		outKind = wallFront
	} else if q.mode == wallBeyond {
		inKind = wallBack
	}
	if q.slab == slabNone {
		return in, out, inKind, outKind, in > 0
	}
	n0, n1 := q.s0.at(x, y), q.s1.at(x, y)
	k0, k1 := uint32(capLow), uint32(capHigh)
	if n0 < n1 {
		n0, n1, k0, k1 = n1, n0, k1, k0
	}
	switch q.slab {
	case slabBetween:
		n1, k1 = n0, k0
		n0 = math.Inf(1)
	case slabAhead:
		if n1 <= 0 {
			return 0, 0, 0, 0, false
		}
	}
	if n0 < in {
		in, inKind = n0, k0
	}
	if n1 > out {
		out, outKind = n1, k1
	}
	return in, out, inKind, outKind, in >= out && in > 0
}

// span returns the pixel places between which the wall is met on the line at
// height y, within x0 and x1.
func (q *quadric) span(y, x0, x1 float64) (float64, float64) {
	if q.mode != wallBetween {
		return x0, x1
	}
	y -= q.my
	a, b, c := q.q[3], q.q[1]+q.q[4]*y, q.q[0]+y*(q.q[2]+q.q[5]*y)
	if !(a < 0) {
		return x0, x1
	}
	d := b*b - 4*a*c
	if !(d >= 0) {
		return 1, 0
	}
	d = math.Sqrt(d)
	h := -0.5 / a
	return math.Max(x0, q.mx+(b-d)*h), math.Min(x1, q.mx+(b+d)*h)
}

// surface returns the nearness, the point in the body's own space and the
// direction of its normal there, for a kind of surface at a place.
func (q *quadric) surface(x, y float64, kind uint32) (n float64, p [3]float64, g [3]float64) {
	x, y = x-q.mx, y-q.my
	switch kind {
	case capLow:
		n = q.s0.at(x, y)
	case capHigh:
		n = q.s1.at(x, y)
	default:
		d := q.q[0] + x*(q.q[1]+q.q[3]*x+q.q[4]*y) + y*(q.q[2]+q.q[5]*y)
		if !(d > 0) {
			d = 0
		}
		n = q.b.at(x, y)
		if kind == wallFront {
			n += math.Sqrt(d)
		} else {
			n -= math.Sqrt(d)
		}
	}
	t := 1 / n
	if !q.persp {
		t = (q.k0 - n) / q.k1
	}
	for k := range 3 {
		p[k] = q.o[k].at(x, y) + t*q.d[k].at(x, y)
	}
	if kind >= capLow {
		return n, p, [3]float64{0, 0, 1}
	}
	return n, p, [3]float64{p[0], p[1], q.sz * p[2]}
}
