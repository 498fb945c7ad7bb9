package render

import "math"

// The lit look shades a place by the bodies around it. Every body stands for
// a few balls, and a ball of radius r at distance d, seen at an angle θ from
// the normal, takes the share cos θ·(r/d)² of an even sky from the place (the
// form factor of a sphere; J. R. Howell, A Catalog of Radiation Heat Transfer
// Configuration Factors, 1982, from memory). Balls are found from the scene
// alone, so the shade has no noise, no seam between tiles and does not change
// as the picture is refined.
type shades struct {
	balls []ball
	// near lists the balls that matter to a part: near[head[i]:head[i+1]].
	head []int32
	near []int32
}

// ball is a body's stand-in, in camera space.
type ball struct {
	x, y, z, r float32
	part       int32
	weight     float32
}

const (
	// faintest is the share of the sky below which a ball is not felt; it is
	// taken off every share so that nothing jumps where a ball comes into
	// reach.
	faintest = 0.03
	// strength turns the share of the sky into shade: half the sky hidden is
	// full shade.
	strength = 2
)

// shadesOf finds the balls of the frame and, for every part, which matter.
func (r *Renderer) shadesOf() {
	f := &r.frame
	s := &f.shades
	s.balls, s.head, s.near = s.balls[:0], s.head[:0], s.near[:0]
	if f.light.style != Lit || !(f.light.shade > 0) {
		return
	}
	for i := range f.parts {
		p := &f.parts[i]
		if p.proj != 0 || p.flat {
			continue
		}
		first := len(s.balls)
		switch p.form {
		case formQuadric:
			s.addQuadric(&f.quadrics[p.index])
		case formMesh:
			s.addMesh(p)
		}
		for k := range s.balls[first:] {
			s.balls[first+k].part, s.balls[first+k].weight = int32(i), p.alpha
		}
	}
	for i := range f.parts {
		s.head = append(s.head, int32(len(s.near)))
		if f.parts[i].proj == 0 {
			s.neighbours(int32(i), &f.parts[i], f)
		}
	}
	s.head = append(s.head, int32(len(s.near)))
}

// neighbours lists the balls that a part feels.
func (s *shades) neighbours(i int32, p *part, f *frame) {
	// A ball around the part: of its own balls, or of a disc.
	var c ball
	found := false
	if p.form == formDisc {
		return // planes and mirrors stay even
	}
	for _, b := range s.balls {
		if b.part != i {
			continue
		}
		if !found {
			c, found = b, true
			continue
		}
		d := distance(&c, &b)
		if d+b.r > c.r {
			if d+c.r <= b.r {
				c = b
				continue
			}
			r := (d + c.r + b.r) / 2
			k := (r - c.r) / d
			c.x, c.y, c.z, c.r = c.x+(b.x-c.x)*k, c.y+(b.y-c.y)*k, c.z+(b.z-c.z)*k, r
		}
	}
	if !found {
		return
	}
	for k := range s.balls {
		b := &s.balls[k]
		if b.part == i {
			continue
		}
		d := max(distance(&c, b)-1.05*c.r, 1e-9)
		if b.weight*b.r*b.r > faintest*d*d {
			s.near = append(s.near, int32(k))
		}
	}
}

func distance(a, b *ball) float32 {
	x, y, z := a.x-b.x, a.y-b.y, a.z-b.z
	return float32(math.Sqrt(float64(x*x + y*y + z*z)))
}

// addQuadric adds balls along a round body.
func (s *shades) addQuadric(q *quadric) {
	m := &q.toCam
	col := func(k int) Vec3 { return m.Linear.Col(k) }
	at := func(p Vec3, r float64) {
		c := m.Apply(p)
		s.balls = append(s.balls, ball{x: float32(c[0]), y: float32(c[1]), z: float32(c[2]), r: float32(r)})
	}
	round := (col(0).Len() + col(1).Len()) / 2
	switch q.kind {
	case rodSphere:
		at(Vec3{}, math.Cbrt(round*round*col(2).Len()))
	case rodCone:
		at(Vec3{0, 0, -0.65}, 0.5*round)
	case rodCylinder:
		n := int(math.Min(6, math.Max(1, col(2).Len()/(2*round))))
		for k := range n {
			at(Vec3{0, 0, (float64(k) + 0.5) / float64(n)}, round)
		}
	}
}

// addMesh adds up to three balls along the longest direction of a mesh, found
// from some of its vertices.
func (s *shades) addMesh(p *part) {
	const most = 48
	var q [most]Vec3
	n := 0
	pos := p.mesh.Positions
	for k := range most {
		// Vertices in the order of the golden section, which follows no row
		// of a grid.
		v := pos[int(math.Mod(float64(k)*0.6180339887498949, 1)*float64(len(pos)))]
		m := &p.cam
		c := Vec3{
			float64(m[0]*v[0] + m[1]*v[1] + m[2]*v[2] + m[3]),
			float64(m[4]*v[0] + m[5]*v[1] + m[6]*v[2] + m[7]),
			float64(m[8]*v[0] + m[9]*v[1] + m[10]*v[2] + m[11]),
		}
		if finite3(c) {
			q[n] = c
			n++
		}
	}
	if n == 0 {
		return
	}
	var mid Vec3
	for _, c := range q[:n] {
		mid = mid.Add(c.Mul(1 / float64(n)))
	}
	axis := longest(q[:n], mid)
	lo, hi := math.Inf(1), math.Inf(-1)
	wide := 0.0
	for _, c := range q[:n] {
		d := c.Sub(mid)
		z := d.Dot(axis)
		lo, hi = math.Min(lo, z), math.Max(hi, z)
		wide = math.Max(wide, d.Sub(axis.Mul(z)).Len())
	}
	long := (hi - lo) / 2
	if !(long > 0) || math.IsInf(long, 0) {
		return
	}
	k := 1
	if long > 1.25*wide {
		k = 2
	}
	if long > 2*wide {
		k = 3
	}
	for i := range k {
		z0, z1 := lo+2*long*float64(i)/float64(k), lo+2*long*float64(i+1)/float64(k)
		var c Vec3
		cnt, rad := 0.0, 0.0
		for _, v := range q[:n] {
			d := v.Sub(mid)
			if z := d.Dot(axis); z >= z0-1e-9*long && z <= z1+1e-9*long {
				side := d.Sub(axis.Mul(z))
				c, cnt, rad = c.Add(side), cnt+1, math.Max(rad, side.Len())
			}
		}
		if cnt == 0 {
			continue
		}
		c = mid.Add(axis.Mul((z0 + z1) / 2))
		if k == 1 {
			rad = math.Cbrt(long * wide * wide)
		}
		s.balls = append(s.balls, ball{x: float32(c[0]), y: float32(c[1]), z: float32(c[2]), r: float32(rad)})
	}
}

// longest returns the direction in which points reach farthest from mid, by
// repeated multiplication with their second moments.
func longest(q []Vec3, mid Vec3) Vec3 {
	axis := Vec3{0.61, 0.53, 0.59}
	for range 12 {
		var next Vec3
		for _, c := range q {
			d := c.Sub(mid)
			next = next.Add(d.Mul(d.Dot(axis)))
		}
		axis = unit(next, axis)
	}
	return axis
}

// hidden returns the share of the sky that the balls take from a place of a
// part, 0 to 1; x, y, z is in camera space, the normal of unit length.
func (s *shades) hidden(part int32, x, y, z, nx, ny, nz float32) float32 {
	sum := float32(0)
	for _, k := range s.near[s.head[part]:s.head[part+1]] {
		b := &s.balls[k]
		dx, dy, dz := b.x-x, b.y-y, b.z-z
		d2 := dx*dx + dy*dy + dz*dz
		r2 := b.r * b.r * b.weight
		if r2 < faintest*d2 {
			continue
		}
		h := nx*dx + ny*dy + nz*dz
		// Part of a ball may stand above the horizon though its middle does
		// not.
		if h < -b.r {
			continue
		}
		if d2 < b.r*b.r {
			d2 = b.r * b.r
		}
		d := float32(math.Sqrt(float64(d2)))
		up := (h + b.r) / (d + b.r)
		sum += (r2/d2 - faintest) * up * up
	}
	return min(1, strength*sum)
}

// lit returns the share of its colour that a place shows in the lit look; the
// normal is of unit length.
func (t *tile) lit(part int32, nx, ny, nz, nl, x, y float32) float32 {
	l := &t.f.light
	// Light that reaches a little round the edge of night.
	const wrap = 0.3
	d := l.ambient * (0.85 + 0.15*ny)
	if k := (nl + wrap) / (1 + wrap); k > 0 {
		d += l.diffuse * k * k * (1.5 - 0.5*k)
	}
	if k := nx*l.fx + ny*l.fy + nz*l.fz; k > 0 {
		d += l.fill * k
	}
	if sh := &t.f.shades; l.shade > 0 && len(sh.head) > 0 && sh.head[part] < sh.head[part+1] {
		px, py, pz := l.spot(&t.f.projs[0], x+float32(t.x), y+float32(t.y), t.surf.n)
		d *= 1 - l.shade*sh.hidden(part, px, py, pz, nx, ny, nz)
	}
	return d
}

// spot returns the point of camera space at a pixel place and nearness.
func (l *light) spot(p *projection, x, y, n float32) (float32, float32, float32) {
	a, b := (x-l.cx)*l.invF, (l.cy-y)*l.invF
	if l.persp {
		w := 1 / n
		return a * w, b * w, -w
	}
	return a, b, (n - float32(p.k0)) / float32(p.k1)
}
