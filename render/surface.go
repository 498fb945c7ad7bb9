package render

import "math"

// surf is what a surface shows at the place last looked at.
type surf struct {
	n    float32 // nearness
	u, v float32 // surface coordinates
}

// corners returns the corners of a mesh's triangle on the picture, its index
// and, for a cut one, what its corners are made of.
func (t *tile) corners(s *slot) (p *part, a, b, c *vert, tri uint32, l *loose) {
	f := t.f
	p = &f.parts[s.part]
	if s.tri&looseBit != 0 {
		l = &f.batches[s.batch].loose[s.tri&^looseBit]
		return p, &l.v[0], &l.v[1], &l.v[2], l.tri, l
	}
	tr := &p.mesh.Triangles[s.tri]
	vs := f.verts[p.vert0:]
	return p, &vs[tr[0]], &vs[tr[1]], &vs[tr[2]], s.tri, nil
}

// plane returns the nearness of a slot's surface at a place of the canvas and
// its growth.
func (t *tile) plane(k uint32, x, y float32) (n, nx, ny float32) {
	s := &t.slots[k]
	f := t.f
	p := &f.parts[s.part]
	switch p.form {
	case formMesh:
		_, a, b, c, _, _ := t.corners(s)
		ux, uy := b.x-a.x, b.y-a.y
		vx, vy := c.x-a.x, c.y-a.y
		det := ux*vy - vx*uy
		if det > 1e-4 || det < -1e-4 {
			un, vn := b.n-a.n, c.n-a.n
			nx, ny = (un*vy-vn*uy)/det, (vn*ux-un*vx)/det
		}
		n = a.n + nx*(x-a.x+float32(t.x)) + ny*(y-a.y+float32(t.y))
		return min(max(n, min(a.n, b.n, c.n)), max(a.n, b.n, c.n)), nx, ny
	case formQuadric:
		q := &f.quadrics[p.index]
		return q.tangent(float64(x)+float64(t.x), float64(y)+float64(t.y), s.tri)
	case formDisc:
		d := &f.discs[p.index]
		n = float32(d.n[0] + d.n[1]*(float64(x)+float64(t.x)-d.mx) + d.n[2]*(float64(y)+float64(t.y)-d.my))
		return n, float32(d.n[1]), float32(d.n[2])
	case formStroke:
		return float32(f.strokes[s.tri].near(float64(x)+float64(t.x), float64(y)+float64(t.y))), 0, 0
	}
	return 0, 0, 0
}

// tangent returns the nearness of a surface and its growth at a place.
func (q *quadric) tangent(x, y float64, kind uint32) (n, nx, ny float32) {
	x, y = x-q.mx, y-q.my
	switch kind {
	case capLow:
		return float32(q.s0.at(x, y)), float32(q.s0[1]), float32(q.s0[2])
	case capHigh:
		return float32(q.s1.at(x, y)), float32(q.s1[1]), float32(q.s1[2])
	}
	d := q.q[0] + x*(q.q[1]+q.q[3]*x+q.q[4]*y) + y*(q.q[2]+q.q[5]*y)
	if !(d > 0) {
		d = 0
	}
	s := math.Sqrt(d)
	h := 0.5 / math.Max(s, 1e-9)
	if kind == wallBack {
		s, h = -s, -h
	}
	dx := q.q[1] + 2*q.q[3]*x + q.q[4]*y
	dy := q.q[2] + 2*q.q[5]*y + q.q[4]*x
	return float32(q.b.at(x, y) + s), float32(q.b[1] + h*dx), float32(q.b[2] + h*dy)
}

// lookAt returns the normal, in camera space and of any length, of a slot's
// surface at a place of the canvas, and whether it is known to point to the
// viewer or, negated, away; 0 when its sign means nothing. Nearness, when
// t.deep is set, and surface coordinates of hatched parts go to t.surf.
func (t *tile) lookAt(s *slot, p *part, x, y float32) (nx, ny, nz float32, side int) {
	f := t.f
	switch p.form {
	case formMesh:
		return t.lookAtMesh(s, p, x, y)
	case formQuadric:
		q := &f.quadrics[p.index]
		n, c, g := q.surface(float64(x)+float64(t.x), float64(y)+float64(t.y), s.tri)
		g0, g1, g2 := float32(g[0]), float32(g[1]), float32(g[2])
		m := &q.nrm
		t.surf.n = float32(n)
		if p.hatch.period > 0 {
			t.surf.u, t.surf.v = q.coords(c)
		}
		return m[0]*g0 + m[1]*g1 + m[2]*g2, m[3]*g0 + m[4]*g1 + m[5]*g2, m[6]*g0 + m[7]*g1 + m[8]*g2, 0
	case formDisc:
		d := &f.discs[p.index]
		if t.deep || p.hatch.period > 0 {
			X, Y := float64(x)+float64(t.x)-d.mx, float64(y)+float64(t.y)-d.my
			t.surf.n = float32(d.n[0] + d.n[1]*X + d.n[2]*Y)
			w := d.radius / (d.w[0] + d.w[1]*X + d.w[2]*Y)
			t.surf.u = float32((d.u[0] + d.u[1]*X + d.u[2]*Y) * w)
			t.surf.v = float32((d.v[0] + d.v[1]*X + d.v[2]*Y) * w)
		}
		return d.normal[0], d.normal[1], d.normal[2], 0
	}
	t.surf.n = 1
	return 0, 0, 1, 0
}

// coords returns the surface coordinates of a point of a round body.
func (q *quadric) coords(p [3]float64) (u, v float32) {
	round := float32(math.Atan2(p[1], p[0]))
	if q.kind == rodSphere {
		return float32(math.Acos(math.Min(1, math.Max(-1, p[2])))), round
	}
	return float32(p[2] * q.length), round
}

// lookAtMesh mixes the normals and coordinates of a triangle's corners. The
// mixture need not be weighed out to 1 for the normal, whose length does not
// matter, which saves divisions.
func (t *tile) lookAtMesh(s *slot, p *part, x, y float32) (nx, ny, nz float32, side int) {
	f := t.f
	m := p.mesh
	var a, b, c *vert
	tri := s.tri
	var l *loose
	if tri&looseBit == 0 {
		ix := &m.Triangles[tri]
		vs := f.verts[p.vert0:]
		a, b, c = &vs[ix[0]], &vs[ix[1]], &vs[ix[2]]
	} else {
		l = &f.batches[s.batch].loose[tri&^looseBit]
		a, b, c = &l.v[0], &l.v[1], &l.v[2]
		tri = l.tri
	}
	ix := &m.Triangles[tri]
	x += float32(t.x) - a.x
	y += float32(t.y) - a.y
	ux, uy := b.x-a.x, b.y-a.y
	vx, vy := c.x-a.x, c.y-a.y
	det := ux*vy - vx*uy
	wb, wc := x*vy-vx*y, ux*y-x*uy
	if m.Closed {
		side = 1
		if (det < 0) == p.mirrored {
			side = -1
		}
	}
	if det < 0 {
		det, wb, wc = -det, -wb, -wc
	}
	wa := det - wb - wc
	if !t.free {
		// Stay within the triangle: the place may be a pixel's middle that
		// belongs to its neighbour.
		wa, wb, wc = max(wa, 0), max(wb, 0), max(wc, 0)
	}
	if t.deep {
		sum := wa + wb + wc
		t.surf.n = a.n
		if sum > 0 {
			t.surf.n = (wa*a.n + wb*b.n + wc*c.n) / sum
		}
	}
	if m.Normals != nil {
		nx = wa*a.nx + wb*b.nx + wc*c.nx
		ny = wa*a.ny + wb*b.ny + wc*c.ny
		nz = wa*a.nz + wb*b.nz + wc*c.nz
	} else {
		nx, ny, nz = p.flatNormal(ix)
	}
	if p.hatch.period > 0 && m.Coords != nil {
		if p.persp {
			wa, wb, wc = wa*a.n, wb*b.n, wc*c.n
		}
		if l != nil {
			w := &l.weight
			wa, wb, wc = wa*w[0][0]+wb*w[1][0]+wc*w[2][0], wa*w[0][1]+wb*w[1][1]+wc*w[2][1], wa*w[0][2]+wb*w[1][2]+wc*w[2][2]
		}
		t.mixCoords(m, ix, wa, wb, wc)
	}
	return nx, ny, nz, side
}

// flatNormal returns the normal of a triangle's plane.
func (p *part) flatNormal(ix *[3]uint32) (nx, ny, nz float32) {
	pos := p.mesh.Positions
	pa, pb, pc := &pos[ix[0]], &pos[ix[1]], &pos[ix[2]]
	ax, ay, az := pb[0]-pa[0], pb[1]-pa[1], pb[2]-pa[2]
	bx, by, bz := pc[0]-pa[0], pc[1]-pa[1], pc[2]-pa[2]
	gx, gy, gz := ay*bz-az*by, az*bx-ax*bz, ax*by-ay*bx
	r := &p.nrm
	return r[0]*gx + r[1]*gy + r[2]*gz, r[3]*gx + r[4]*gy + r[5]*gz, r[6]*gx + r[7]*gy + r[8]*gz
}

// mixCoords mixes the surface coordinates of a triangle's corners.
func (t *tile) mixCoords(m *Mesh, ix *[3]uint32, wa, wb, wc float32) {
	ca, cb, cc := &m.Coords[ix[0]], &m.Coords[ix[1]], &m.Coords[ix[2]]
	k := float32(0)
	if sum := wa + wb + wc; sum != 0 {
		k = 1 / sum
	}
	t.surf.u = (wa*ca[0] + wb*cb[0] + wc*cc[0]) * k
	t.surf.v = (wa*ca[1] + wb*cb[1] + wc*cc[1]) * k
}
