package render

// A sight is a place of the canvas that wants shading. Sights are collected
// for a row of pixels, in blocks that mostly belong to a group of pixels,
// looked at eight side by side, and then coloured as the look has it. Every
// look goes this way.
//
// The fields of a block of eight sights lie side by side; its layout is known
// to the assembly.
type eight struct {
	a, b, c    [8]uint32  // 0, 32, 64: corners in the frame's list of vertices
	mesh       [8]int32   // 96: -1 where the normal is mixed from the corners
	turn       [8]float32 // 128: what the side is when the corners run with the clock, 0 when the surface is open
	x, y       [8]float32 // 160, 192: place in the whole picture
	nx, ny, nz [8]float32 // 224, 256, 288: normal; afterwards of unit length and towards the viewer
	side       [8]float32 // 320: 1 when the normal is known to point to the viewer, -1 away, 0 unknown
	n          [8]float32 // 352: nearness
	nl         [8]float32 // 384: cosine between normal and key light
	glint      [8]float32 // 416: highlight
	hatched    [8]float32 // how much of the place the hatching covers
	slot       [8]uint32
	red, green [8]float32
	blue       [8]float32
}

// sights are the blocks of a row and what looking at them needs; its head is
// known to the assembly.
type sights struct {
	verts     *vert   // 0
	blocks    *eight  // 8
	count     int64   // 16: of blocks
	style     int32   // 24: not 0 for Plain, which turns every normal to the viewer
	shine     int32   // 28
	kx, ky    float32 // 32, 36
	kz, invF  float32 // 40, 44
	cx, cy    float32 // 48, 52
	glintSum  float32 // 56
	glint     float32 // 60
	specular  float32 // 64
	_         int32   // 68
	all       []eight
	n         int     // blocks in use
	owner     []int32 // strips whose colours the blocks show, or -1
	open      int32   // the next sight that want gives
	noCorners [1]vert
}

// ready prepares for a frame.
func (s *sights) ready(f *frame) {
	l := &f.light
	s.kx, s.ky, s.kz, s.invF, s.cx, s.cy = l.kx, l.ky, l.kz, 0, l.cx, l.cy
	if l.persp {
		s.invF = l.invF
	}
	s.glint, s.glintSum, s.specular, s.shine = l.glint, l.glintSum, l.specular, int32(l.shine)
	s.style = 0
	if l.style == Plain {
		s.style = 1
	}
	s.verts = &s.noCorners[0]
	if len(f.verts) > 0 {
		s.verts = &f.verts[0]
	}
	s.reset()
}

// emptyEight is a block without sights: slot 0 is the ground.
var emptyEight = func() (o eight) {
	for i := range lanes {
		o.nz[i] = 1
	}
	return o
}()

// reset forgets all sights.
func (s *sights) reset() {
	s.n, s.open, s.owner = 0, -1, s.owner[:0]
}

// block adds an empty block and returns its number.
func (s *sights) block() int {
	if s.n == len(s.all) {
		s.all = append(s.all, make([]eight, len(s.all)+8)...)
	}
	o := &s.all[s.n]
	o.a, o.b, o.c, o.mesh, o.slot = emptyEight.a, emptyEight.b, emptyEight.c, emptyEight.mesh, emptyEight.slot
	o.nx, o.ny, o.nz = emptyEight.nx, emptyEight.ny, emptyEight.nz
	s.owner = append(s.owner, -1)
	s.n++
	return s.n - 1
}

// want adds a sight of a slot at a place of the canvas and returns its
// number.
func (t *tile) want(k uint32, x, y float32) int32 {
	s := &t.sights
	if s.open < 0 || s.open&7 == 0 {
		s.open = int32(s.block() * lanes)
	}
	i := s.open
	s.open++
	t.aim(&s.all[i>>3], int(i&7), k, x, y)
	return i
}

// aim fills in one of the sights of a block: a slot at a place of the canvas.
func (t *tile) aim(o *eight, i int, k uint32, x, y float32) {
	i &= 7
	sl := &t.slots[k]
	p := &t.f.parts[sl.part]
	o.slot[i] = k
	o.x[i], o.y[i] = x+float32(t.x), y+float32(t.y)
	if p.smooth && sl.tri&looseBit == 0 {
		ix := &p.mesh.Triangles[sl.tri]
		v := uint32(p.vert0)
		o.a[i], o.b[i], o.c[i] = v+ix[0], v+ix[1], v+ix[2]
		o.mesh[i], o.turn[i], o.hatched[i] = -1, p.turn, 0
		return
	}
	if p.flat && p.hatch.period == 0 {
		o.nx[i], o.ny[i], o.nz[i], o.side[i], o.n[i], o.hatched[i] = 0, 0, 1, 0, 0, 0
		return
	}
	nx, ny, nz, side := t.lookAt(sl, p, x, y)
	o.nx[i], o.ny[i], o.nz[i], o.side[i], o.n[i] = nx, ny, nz, float32(side), t.surf.n
	o.hatched[i] = 0
	if p.hatch.period > 0 {
		o.hatched[i] = t.hatching(sl, p, x, y)
	}
}

// aimLanes fills in those sights of a block that have a bit in want: slots at
// the middles of neighbouring pixels, of which the first is (px, py).
func (t *tile) aimLanes(o *eight, slots *[lanes]uint32, want uint8, px, py int) {
	y := float32(py+t.y) + 0.5
	for m := want; m != 0; m &= m - 1 {
		i := lowest(m)
		k := slots[i]
		sl := &t.slots[k]
		p := &t.f.parts[sl.part]
		if p.form == formQuadric && p.hatch.period == 0 && !p.flat {
			same := uint8(0)
			for n := m; n != 0; n &= n - 1 {
				if j := lowest(n); slots[j] == k {
					same |= 1 << j
				}
			}
			t.aimRound(o, k, p, same, px, py)
			m = m&^same | 1<<i // the loop takes this one away
			continue
		}
		if !p.smooth || sl.tri&looseBit != 0 {
			t.aim(o, i, k, float32(px+i)+0.5, float32(py)+0.5)
			continue
		}
		ix := &p.mesh.Triangles[sl.tri]
		v := uint32(p.vert0)
		o.slot[i] = k
		o.x[i], o.y[i] = float32(px+t.x+i)+0.5, y
		o.a[i], o.b[i], o.c[i] = v+ix[0], v+ix[1], v+ix[2]
		o.mesh[i], o.turn[i], o.hatched[i] = -1, p.turn, 0
	}
}

// color returns the colour of a sight.
func (s *sights) color(i int32) (r, g, b float32) {
	o := &s.all[i>>3]
	return o.red[i&7], o.green[i&7], o.blue[i&7]
}

// seeSights finds normals and light of the sights.
func (t *tile) seeSights() {
	s := &t.sights
	if s.n == 0 {
		return
	}
	if useVectors {
		s.blocks, s.count = &s.all[0], int64(s.n)
		lookEight(s)
	} else {
		s.lookPlain(t.f.verts, s.all[:s.n])
	}
}

// look finds normals, light and colours of the sights; strips get theirs.
func (t *tile) look() {
	t.seeSights()
	s := &t.sights
	blocks := s.all[:s.n]
	for k := range blocks {
		t.colorEight(&blocks[k])
		if s.owner[k] >= 0 {
			o, to := &blocks[k], &t.strips[s.owner[k]]
			to.r, to.g, to.b = o.red, o.green, o.blue
		}
	}
}

// colorEight gives the sights of a block their colours. It is where the looks
// part.
func (t *tile) colorEight(o *eight) {
	f := t.f
	l := &f.light
	for i := range lanes {
		if o.slot[i] == 0 {
			continue
		}
		sl := &t.slots[o.slot[i]]
		p := &f.parts[sl.part]
		r, g, b := p.col[0], p.col[1], p.col[2]
		if w := o.hatched[i]; w > 0 {
			h := &p.hatch.col
			r, g, b = r+(h[0]-r)*w, g+(h[1]-g)*w, b+(h[2]-b)*w
		}
		if !p.flat {
			nl, h := o.nl[i], o.glint[i]
			d := l.ambient
			switch l.style {
			case Plain:
				if nl > 0 {
					d += l.diffuse * nl
				}
			case Lit:
				d = t.lit(sl.part, o.nx[i], o.ny[i], o.nz[i], nl, o.x[i], o.y[i], o.n[i])
				h *= p.gloss * min(d, 1)
			case Ink:
				d, h = t.tone(sl, p, nl, o.x[i]-float32(t.x), o.y[i]-float32(t.y)), 0
			}
			r, g, b = r*d+h, g*d+h, b*d+h
		}
		o.red[i], o.green[i], o.blue[i] = r, g, b
	}
}

// lookPlain finds normals, cosines and highlights of the sights, one after
// the other. lookEight does the same for eight side by side.
func (s *sights) lookPlain(verts []vert, blocks []eight) {
	for k := range blocks {
		o := &blocks[k]
		for i := range 8 {
			if o.mesh[i] != 0 {
				o.mix(i, &verts[o.a[i]], &verts[o.b[i]], &verts[o.c[i]])
			}
			s.light(o, i)
		}
	}
}

// mix finds normal and nearness of a place in a triangle from its corners.
// The normal's length does not matter, so the shares of the corners need not
// add up to 1. They are kept from going below 0: the place may be a pixel's
// middle that belongs to a neighbour.
func (o *eight) mix(i int, a, b, c *vert) {
	x, y := o.x[i]-a.x, o.y[i]-a.y
	ux, uy := b.x-a.x, b.y-a.y
	vx, vy := c.x-a.x, c.y-a.y
	det := float32(ux*vy) - float32(vx*uy)
	wb, wc := float32(x*vy)-float32(vx*y), float32(ux*y)-float32(x*uy)
	o.side[i] = -o.turn[i]
	if det < 0 {
		det, wb, wc = -det, -wb, -wc
		o.side[i] = o.turn[i]
	}
	wa := det - wb - wc
	wa, wb, wc = above(wa), above(wb), above(wc)
	o.n[i] = a.n
	if sum := wa + wb + wc; sum > 0 {
		o.n[i] = (float32(float32(wa*a.n)+float32(wb*b.n)) + float32(wc*c.n)) / sum
	}
	o.nx[i] = float32(float32(wa*a.nx)+float32(wb*b.nx)) + float32(wc*c.nx)
	o.ny[i] = float32(float32(wa*a.ny)+float32(wb*b.ny)) + float32(wc*c.ny)
	o.nz[i] = float32(float32(wa*a.nz)+float32(wb*b.nz)) + float32(wc*c.nz)
}

func above(v float32) float32 {
	if v > 0 {
		return v
	}
	return 0
}

// light turns a normal to the viewer and finds its cosine with the key light
// and the highlight. Most places are far from the highlight and cost next to
// nothing.
func (s *sights) light(o *eight, i int) {
	// The direction (va, vb, 1) leads to the eye.
	va, vb := (s.cx-o.x[i])*s.invF, (o.y[i]-s.cy)*s.invF
	nx, ny, nz, side := o.nx[i], o.ny[i], o.nz[i], o.side[i]
	v2 := float32(float32(va*va)+float32(vb*vb)) + 1
	nv := float32(float32(nx*va)+float32(ny*vb)) + nz
	q := float32(float32(nx*nx)+float32(ny*ny)) + float32(nz*nz)
	if !(q > 1e-36) {
		nx, ny, nz, nv, q, side = va, vb, 1, v2, v2, 0
	}
	inv := 1 / sqrt32(q)
	away := nv < 0
	if s.style == 0 && side != 0 {
		away = side < 0
	}
	if away {
		inv = -inv
	}
	nx, ny, nz, nv = nx*inv, ny*inv, nz*inv, nv*inv
	nl := float32(float32(nx*s.kx)+float32(ny*s.ky)) + float32(nz*s.kz)
	o.nx[i], o.ny[i], o.nz[i], o.nl[i], o.glint[i] = nx, ny, nz, nl, 0
	// The cosine with the direction half way, (nl + nv/v)/|L + V|, is at
	// most half the sum times what |L + V| can be less than 2.
	if nl+nv < s.glintSum {
		return
	}
	iv := 1 / sqrt32(v2)
	lv := (float32(float32(s.kx*va)+float32(s.ky*vb)) + s.kz) * iv
	nh := (nl + float32(nv*iv)) / sqrt32(2.000001+float32(2*lv))
	if nh < s.glint {
		return
	}
	o.glint[i] = s.specular * power(nh, int(s.shine))
}
