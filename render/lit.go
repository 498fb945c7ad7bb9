package render

import (
	"math"
	"slices"
)

// The lit look shades a place by the bodies around it. Every body stands for
// a few balls, and a ball of radius r at distance d, seen at an angle θ from
// the normal, takes the share cos θ·(r/d)² of an even sky from the place (the
// form factor of a sphere; J. R. Howell, A Catalog of Radiation Heat Transfer
// Configuration Factors, 1982, from memory). Balls are found from the scene
// alone, so the shade has no noise, no seam between tiles and does not change
// as the picture is refined.
type shades struct {
	balls []ball
	first []int32 // of a part's own balls, and one more
	near  []near  // the balls that matter to a part
	tree  shadeTree
}

// near lists balls in blocks of eight: eight times x, then y, z, the radius,
// and its square with the weight.
type near struct {
	blocks []float32
	count  int
}

const blockSize = 5 * 8

// emptyBlock is eight balls of no weight.
var emptyBlock = func() (b [blockSize]float32) {
	for i := range 8 {
		b[24+i] = 1
	}
	return b
}()

// ball is a body's stand-in, in camera space.
type ball struct {
	x, y, z, r float32
	weight     float32
}

const (
	// faintest is the share of the sky below which a ball is not felt; it is
	// taken off every share so that nothing jumps where a ball comes into
	// reach.
	faintest = 0.045
	// strength turns the share of the sky into shade: about half the sky hidden is
	// full shade.
	strength = 2.2
)

// shadesOf finds the balls of the frame and, for every part, which matter.
func (r *Renderer) shadesOf() {
	f := &r.frame
	s := &f.shades
	s.balls, s.first = s.balls[:0], s.first[:0]
	s.near = s.near[:0]
	if f.light.style != Lit || !(f.light.shade > 0) {
		return
	}
	for i := range f.parts {
		p := &f.parts[i]
		first := len(s.balls)
		s.first = append(s.first, int32(first))
		if p.proj != 0 || p.flat {
			continue
		}
		switch p.form {
		case formQuadric:
			s.addQuadric(&f.quadrics[p.index])
		case formMesh:
			s.addMesh(p)
		}
		for k := range s.balls[first:] {
			s.balls[first+k].weight = p.alpha
		}
	}
	s.first = append(s.first, int32(len(s.balls)))
	s.tree.build(s.balls)
	s.near = grow(s.near[:cap(s.near)], len(f.parts))
	r.phase(len(f.parts), r.nearJob)
}

// neighbours lists the balls that a part feels.
func (r *Renderer) neighbours(worker *worker, i int) {
	s := &r.frame.shades
	out := &s.near[i]
	out.blocks, out.count = out.blocks[:0], 0
	own := s.balls[s.first[i]:s.first[i+1]]
	if len(own) == 0 {
		return // planes and lines stay even
	}
	// A ball around the part.
	c := own[0]
	for k := range own[1:] {
		c = around(c, own[1+k])
	}
	// In the order of the balls, so that sums do not depend on the tree; with
	// a little more than the reach, for rounding.
	worker.found = s.tree.around(0, c.center(), 1.06*c.r, worker.found[:0])
	slices.Sort(worker.found)
	for _, k := range worker.found {
		b := &s.balls[k]
		d := distance(&c, b) - 1.05*c.r
		w := b.weight * b.r * b.r
		if d > 0 && w <= faintest*d*d || k >= s.first[i] && k < s.first[i+1] {
			continue
		}
		at := out.count % 8
		if at == 0 {
			out.blocks = append(out.blocks, emptyBlock[:]...)
		}
		o := out.blocks[len(out.blocks)-blockSize:]
		o[at], o[8+at], o[16+at], o[24+at], o[32+at] = b.x, b.y, b.z, b.r, w
		out.count++
	}
}

// around returns a ball around two balls.
func around(c, b ball) ball {
	d := distance(&c, &b)
	switch {
	case d+b.r <= c.r:
		return c
	case d+c.r <= b.r:
		return b
	}
	r := (d + c.r + b.r) / 2
	k := (r - c.r) / d
	c.x, c.y, c.z, c.r = c.x+(b.x-c.x)*k, c.y+(b.y-c.y)*k, c.z+(b.z-c.z)*k, r
	return c
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
		n := int(math.Min(4, math.Max(1, col(2).Len()/(2*round))))
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

// skyKernel is a place and its unit normal, with the balls to look at; its
// layout is known to the assembly.
type skyKernel struct {
	x, y, z, nx, ny, nz float32
	blocks              *float32
	n                   int64 // blocks
	faintest            float32
	sum                 [8]float32
}

// hidden returns the share of the sky that balls take from a place, 0 to 1.
func (k *skyKernel) hidden(l *near) float32 {
	k.blocks, k.n, k.faintest = &l.blocks[0], int64(len(l.blocks)/blockSize), faintest
	if useVectors {
		skyEight(k)
	} else {
		k.skyPlain(l.blocks)
	}
	a := &k.sum
	sum := ((a[0] + a[4]) + (a[1] + a[5])) + ((a[2] + a[6]) + (a[3] + a[7]))
	return min(1, strength*sum)
}

// skyPlain sums the shares of the sky, eight sums side by side. skyEight does
// the same.
func (k *skyKernel) skyPlain(blocks []float32) {
	k.sum = [8]float32{}
	for ; len(blocks) >= blockSize; blocks = blocks[blockSize:] {
		for i := range 8 {
			dx, dy, dz := blocks[i]-k.x, blocks[8+i]-k.y, blocks[16+i]-k.z
			r, w := blocks[24+i], blocks[32+i]
			d2 := max(float32(dx*dx+dy*dy)+dz*dz, r*r)
			share := max(w/d2-faintest, 0)
			h := float32(k.nx*dx+k.ny*dy) + k.nz*dz
			// A part of a ball may stand above the horizon though its middle
			// does not.
			up := max(h+r, 0) / (sqrt32(d2) + r)
			k.sum[i] += share * up * up
		}
	}
}

// lit returns the share of its colour that a place shows in the lit look; the
// normal is of unit length, (x, y) a place of the whole picture and n the
// nearness there.
func (t *tile) lit(part int32, nx, ny, nz, nl, x, y, n float32) float32 {
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
	if sh := t.f.shades.near; l.shade > 0 && len(sh) > 0 && sh[part].count > 0 {
		k := &t.sky
		k.x, k.y, k.z = l.spot(&t.f.projs[0], x, y, n)
		k.nx, k.ny, k.nz = nx, ny, nz
		d *= 1 - l.shade*k.hidden(&sh[part])
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
