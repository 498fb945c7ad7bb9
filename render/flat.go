package render

import "math"

// disc is a flat plate. At a place on the picture (u, v)/w are its own
// coordinates in units of its radius and n its nearness; all are linear.
type disc struct {
	u, v, w, n [3]float64 // 1, x, y relative to (mx, my)
	mx, my     float64
	hole       float64 // square of the hole's radius in units of the disc's
	normal     [3]float32
	light      float32 // cosine between the normal and the key light
	radius     float64
	nMax       float64
}

// addDisc adds a plate.
func (f *frame) addDisc(p part, m Affine, g Disc) {
	if !(g.Radius > 0) || !(g.Hole < g.Radius) {
		return
	}
	u, v := across(g.Normal)
	e1, e2 := m.Linear.Mul3x1(u.Mul(g.Radius)), m.Linear.Mul3x1(v.Mul(g.Radius))
	c := m.Apply(g.Center)
	normal := e1.Cross(e2)
	size := normal.Len()
	if !(size > 1e-12*e1.Len()*e2.Len()) || !finite3(c) || !finite3(normal) {
		return
	}
	pr := &f.projs[p.proj]
	var lo, hi Vec3
	for k := range 3 {
		r := math.Hypot(e1[k], e2[k])
		lo[k], hi[k] = c[k]-r, c[k]+r
	}
	p.box = pr.boxOf(lo, hi)
	if p.box.x0 >= p.box.x1 || p.box.y0 >= p.box.y1 {
		return
	}
	d := disc{radius: g.Radius, nMax: pr.nMax}
	d.hole = -1
	if g.Hole > 0 {
		d.hole = g.Hole / g.Radius * g.Hole / g.Radius
	}
	if p.box != everywhere {
		d.mx, d.my = math.Floor((p.box.x0+p.box.x1)/2), math.Floor((p.box.y0+p.box.y1)/2)
	}
	// Directions dual to e1 and e2 within the plane.
	g1, g2 := e2.Cross(normal).Mul(1/size/size), normal.Cross(e1).Mul(1/size/size)
	a, b := (d.mx-pr.cx)/pr.f, (pr.cy-d.my)/pr.f
	h := normal.Dot(c)
	if pr.persp {
		if !(math.Abs(h) > 1e-12*size*c.Len()) {
			return
		}
		ray := [3]Vec3{{a, b, -1}, {1 / pr.f, 0, 0}, {0, -1 / pr.f, 0}}
		for k, r := range ray {
			d.n[k] = normal.Dot(r) / h
			d.u[k] = g1.Dot(r) - d.n[k]*g1.Dot(c)
			d.v[k] = g2.Dot(r) - d.n[k]*g2.Dot(c)
		}
		d.w = d.n
	} else {
		if !(math.Abs(normal[2]) > 1e-9*size) {
			return
		}
		z := [3]float64{(h - normal[0]*a - normal[1]*b) / normal[2], -normal[0] / pr.f / normal[2], normal[1] / pr.f / normal[2]}
		x := [3]Vec3{Vec3{a, b, z[0]}.Sub(c), {1 / pr.f, 0, z[1]}, {0, -1 / pr.f, z[2]}}
		for k := range 3 {
			d.u[k], d.v[k] = g1.Dot(x[k]), g2.Dot(x[k])
			d.n[k] = pr.k1 * z[k]
		}
		d.n[0] += pr.k0
		d.w = [3]float64{1, 0, 0}
	}
	for k := range 3 {
		d.normal[k] = float32(normal[k] / size)
	}
	d.light = d.normal[0]*f.light.kx + d.normal[1]*f.light.ky + d.normal[2]*f.light.kz
	p.form, p.index = formDisc, int32(len(f.discs))
	f.discs = append(f.discs, d)
	f.parts = append(f.parts, p)
}

// fills tells whether a rectangle of the picture lies wholly on the disc and
// nearer than the limit nMin.
func (d *disc) fills(x0, y0, x1, y1, nMin float64) bool {
	for _, c := range [4][2]float64{{x0, y0}, {x1, y0}, {x0, y1}, {x1, y1}} {
		x, y := c[0]-d.mx, c[1]-d.my
		u, v, w := d.u[0]+d.u[1]*x+d.u[2]*y, d.v[0]+d.v[1]*x+d.v[2]*y, d.w[0]+d.w[1]*x+d.w[2]*y
		if n := d.n[0] + d.n[1]*x + d.n[2]*y; !(n > max(1e-12, nMin) && n <= d.nMax && w > 0 && u*u+v*v <= w*w) {
			return false
		}
	}
	return true // the disc is convex
}

// spans returns where the line at height y, within x0 to x1, meets the disc:
// one or two pieces.
func (d *disc) spans(y, x0, x1 float64, out *[2][2]float64) int {
	y -= d.my
	u0, v0, w0, n0 := d.u[0]+d.u[2]*y, d.v[0]+d.v[2]*y, d.w[0]+d.w[2]*y, d.n[0]+d.n[2]*y
	x0, x1 = x0-d.mx, x1-d.mx
	// In front of the eye and beyond the near limit: 0 < n ≤ nMax.
	x0, x1 = halfLine(d.n[1], n0-1e-12, x0, x1)
	x0, x1 = halfLine(-d.n[1], d.nMax-n0, x0, x1)
	quad := func(r2 float64) (float64, float64, bool) {
		a := d.u[1]*d.u[1] + d.v[1]*d.v[1] - r2*d.w[1]*d.w[1]
		b := u0*d.u[1] + v0*d.v[1] - r2*w0*d.w[1]
		c := u0*u0 + v0*v0 - r2*w0*w0
		disc := b*b - a*c
		if !(disc >= 0) {
			return 0, 0, false
		}
		s := math.Sqrt(disc)
		if math.Abs(a) < 1e-18 {
			return 0, 0, false
		}
		l, r := (-b-s)/a, (-b+s)/a
		if a < 0 {
			// The line of sight lies nearly in the plane: the inside is
			// outside of the roots, of which one is in front of the eye.
			l, r = r, l
			if n0+d.n[1]*(r+1) > n0+d.n[1]*(l-1) {
				return r, 1e9, true
			}
			return -1e9, l, true
		}
		return l, r, true
	}
	l, r, ok := quad(1)
	if !ok {
		return 0
	}
	l, r = math.Max(l, x0), math.Min(r, x1)
	if !(l < r) {
		return 0
	}
	if d.hole > 0 {
		if hl, hr, ok := quad(d.hole); ok {
			out[0] = [2]float64{l + d.mx, math.Min(r, hl) + d.mx}
			out[1] = [2]float64{math.Max(l, hr) + d.mx, r + d.mx}
			return 2
		}
	}
	out[0] = [2]float64{l + d.mx, r + d.mx}
	return 1
}

// halfLine cuts the interval x0..x1 to where k·x + c is not negative.
func halfLine(k, c, x0, x1 float64) (float64, float64) {
	switch {
	case k > 0:
		x0 = math.Max(x0, -c/k)
	case k < 0:
		x1 = math.Min(x1, -c/k)
	case c < 0:
		return 1, 0
	}
	return x0, x1
}

// stroke is a straight piece of a line on the picture, with round ends or,
// for a dash, with straight ones.
type stroke struct {
	x0, y0, x1, y1 float64
	n0, n1         float64
	half           float64
	butt           bool
}

// addLine adds a polyline as strokes.
func (f *frame) addLine(p part, m Affine, g *Line) {
	half := g.Width * f.pxPerMM / 2
	if !(half > 0) || len(g.Points) < 2 || math.IsInf(half, 0) {
		return
	}
	pr := &f.projs[p.proj]
	p.form, p.flat, p.index = formStroke, true, int32(len(f.strokes))
	p.outline = false
	dash, period := f.dashes(g.Dash)
	at := 0.0 // length along the line on the picture
	n := len(g.Points)
	last := n - 1
	if g.Closed {
		last = n
	}
	for i := 0; i < last; i++ {
		a, b := m.Apply(g.Points[i]), m.Apply(g.Points[(i+1)%n])
		if !finite3(a) || !finite3(b) {
			continue
		}
		a, b, ok := pr.clipNear(a, b)
		if !ok {
			continue
		}
		s := stroke{half: half}
		s.x0, s.y0, s.n0 = pr.point(a)
		s.x1, s.y1, s.n1 = pr.point(b)
		if !(s.n0 > 0) || !(s.n1 > 0) {
			continue
		}
		const most = 1e6 // pixels; dashes of a longer line would be lost in rounding
		if period == 0 || math.Abs(s.x0)+math.Abs(s.y0)+math.Abs(s.x1)+math.Abs(s.y1) > most {
			f.strokes = append(f.strokes, s)
			continue
		}
		at = f.addDashes(s, dash, period, at)
	}
	p.count = int32(len(f.strokes)) - p.index
	if p.count == 0 {
		return
	}
	p.box = box{math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)}
	for _, s := range f.strokes[p.index:] {
		b := s.box()
		p.box.x0, p.box.y0 = math.Min(p.box.x0, b.x0), math.Min(p.box.y0, b.y0)
		p.box.x1, p.box.y1 = math.Max(p.box.x1, b.x1), math.Max(p.box.y1, b.y1)
	}
	f.parts = append(f.parts, p)
}

func (s *stroke) box() box {
	return box{
		math.Min(s.x0, s.x1) - s.half, math.Min(s.y0, s.y1) - s.half,
		math.Max(s.x0, s.x1) + s.half, math.Max(s.y0, s.y1) + s.half,
	}
}

// dashes returns the dash lengths in pixels and their sum, 0 for a full line.
// A period finer than half a pixel is drawn as a full line.
func (f *frame) dashes(mm []float64) ([]float64, float64) {
	f.dash = f.dash[:0]
	sum := 0.0
	for _, d := range mm {
		if !(d >= 0) || math.IsInf(d, 0) {
			return nil, 0
		}
		f.dash = append(f.dash, d*f.pxPerMM)
		sum += d * f.pxPerMM
	}
	if len(f.dash)%2 == 1 {
		f.dash = append(f.dash, f.dash...)
		sum *= 2
	}
	if sum < 0.5 {
		return nil, 0
	}
	return f.dash, sum
}

// addDashes cuts a stroke into dashes; at is how far along the line it
// begins, and the result how far it ends. Only what can lie on the picture is
// cut.
func (f *frame) addDashes(s stroke, dash []float64, period, at float64) float64 {
	dx, dy := s.x1-s.x0, s.y1-s.y0
	long := math.Hypot(dx, dy)
	if !(long > 0) {
		return at
	}
	from, to := 0.0, long
	pad := s.half + 1
	from, to = halfLine(dx/long, s.x0+pad, from, to)
	from, to = halfLine(-dx/long, float64(f.w)+pad-s.x0, from, to)
	from, to = halfLine(dy/long, s.y0+pad, from, to)
	from, to = halfLine(-dy/long, float64(f.h)+pad-s.y0, from, to)
	if from < to {
		pos := math.Floor((at+from)/period)*period - at
		for pos < to {
			for i, d := range dash {
				l, r := math.Max(pos, 0), math.Min(pos+d, long)
				if i%2 == 0 && l < r {
					c := s
					c.butt = true
					c.x0, c.y0, c.n0 = s.x0+dx*l/long, s.y0+dy*l/long, s.n0+(s.n1-s.n0)*l/long
					c.x1, c.y1, c.n1 = s.x0+dx*r/long, s.y0+dy*r/long, s.n0+(s.n1-s.n0)*r/long
					f.strokes = append(f.strokes, c)
				}
				pos += d
			}
		}
	}
	return math.Mod(at+long, period)
}

// clipNear cuts a line of camera space at the near limit.
func (p *projection) clipNear(a, b Vec3) (Vec3, Vec3, bool) {
	if !p.persp {
		return a, b, true
	}
	near := 1.000001 / p.nMax
	da, db := -a[2]-near, -b[2]-near
	if da < 0 && db < 0 {
		return a, b, false
	}
	if da < 0 {
		a = a.Add(b.Sub(a).Mul(da / (da - db)))
	} else if db < 0 {
		b = b.Add(a.Sub(b).Mul(db / (db - da)))
	}
	return a, b, true
}

// span returns where the line at height y meets the stroke, and ok.
func (s *stroke) span(y float64) (l, r float64, ok bool) {
	dx, dy := s.x1-s.x0, s.y1-s.y0
	long := math.Hypot(dx, dy)
	l, r = math.Inf(1), math.Inf(-1)
	if long > 0 {
		ux, uy := dx/long, dy/long
		// 0 ≤ along ≤ long and |across| ≤ half, both linear in x.
		a, b := -1e9, 1e9
		c := -ux*s.x0 + uy*(y-s.y0)
		a, b = halfLine(ux, c, a, b)
		a, b = halfLine(-ux, long-c, a, b)
		c = uy*s.x0 + ux*(y-s.y0)
		a, b = halfLine(-uy, s.half+c, a, b)
		a, b = halfLine(uy, s.half-c, a, b)
		if a <= b {
			l, r = a, b
		}
	}
	if !s.butt {
		for _, e := range [2][2]float64{{s.x0, s.y0}, {s.x1, s.y1}} {
			if h := s.half*s.half - (y-e[1])*(y-e[1]); h >= 0 {
				h = math.Sqrt(h)
				l, r = math.Min(l, e[0]-h), math.Max(r, e[0]+h)
			}
		}
	}
	return l, r, l < r
}

// near returns the nearness of the stroke at a place.
func (s *stroke) near(x, y float64) float64 {
	dx, dy := s.x1-s.x0, s.y1-s.y0
	l2 := dx*dx + dy*dy
	if !(l2 > 0) {
		return math.Max(s.n0, s.n1)
	}
	t := ((x-s.x0)*dx + (y-s.y0)*dy) / l2
	return s.n0 + (s.n1-s.n0)*math.Min(1, math.Max(0, t))
}

// addPolygon adds a flat polygon as a mesh that is kept from frame to frame.
func (r *Renderer) addPolygon(p part, m Affine, g Polygon) {
	mesh := r.polygonMesh(g.Points)
	if mesh != nil {
		r.frame.addMesh(p, m, mesh)
	}
}
