package render

// The flat tones of the ink look.

// inkCells puts the colours of a group's pixels that show one part alone into
// the stack, from their cells.
func (t *tile) inkCells(g *group, py int) {
	k, c, l := &t.stack, &t.lines.cells, &t.f.light
	i := py*t.side + g.x
	for m := g.cells; m != 0; m &= m - 1 {
		j := lowest(m)
		p := &t.f.parts[c.part[i+j]]
		tone := float32(1)
		if !p.flat {
			tone = l.tones[0]
			nl := c.nl[i+j]
			for s := 1; s < l.nTones; s++ {
				d, step := nl-l.edges[s-1], l.tones[s]-tone
				if d > 0.15 {
					tone += step
				} else if d > -0.15 {
					tone += step * softStep(d, t.cellSlope(i+j, g.x+j, py)*max(l.soft, 0.7))
				}
			}
		}
		k.r[j], k.g[j], k.b[j], k.a[j] = p.col[0]*tone, p.col[1]*tone, p.col[2]*tone, 1
	}
}

// softStep is 0 well below d = 0 and 1 well above, with a change of width w.
func softStep(d, w float32) float32 {
	v := min(1, max(0, d/max(w, 1e-6)+0.5))
	return v * v * (3 - 2*v)
}

// cellSlope returns how much the key light changes over a pixel, from the
// pixels around.
func (t *tile) cellSlope(i, px, py int) float32 {
	c := &t.lines.cells
	part := c.part[i]
	along := func(a, b int) float32 {
		k := float32(0.5)
		if c.part[a] != part {
			a, k = i, 1
		}
		if c.part[b] != part {
			b, k = i, 1
		}
		return (c.nl[a] - c.nl[b]) * k
	}
	var gx, gy float32
	if px > t.clip.Min.X && px+1 < t.clip.Max.X {
		gx = along(i-1, i+1)
	}
	if py > t.clip.Min.Y && py+1 < t.clip.Max.Y {
		gy = along(i-t.side, i+t.side)
	}
	return sqrt32(gx*gx + gy*gy)
}

// tone returns the share of the colour that the ink look shows where the
// light is nl. The step from one tone to the next is soft over some pixels.
func (t *tile) tone(s *slot, p *part, nl, x, y float32) float32 {
	l := &t.f.light
	m := l.tones[0]
	for i := 1; i < l.nTones; i++ {
		d := nl - l.edges[i-1]
		step := l.tones[i] - m
		switch {
		case d > 0.15:
			m += step
		case d > -0.15:
			m += step * softStep(d, t.lightSlope(s, p, x, y)*max(l.soft, 0.7))
		}
	}
	return m
}

// lightSlope returns how much the key light changes over a pixel.
func (t *tile) lightSlope(s *slot, p *part, x, y float32) float32 {
	keep := t.surf
	a := t.keyLight(s, p, x, y)
	gx := t.keyLight(s, p, x+0.5, y) - a
	gy := t.keyLight(s, p, x, y+0.5) - a
	t.surf = keep
	return 2 * sqrt32(gx*gx+gy*gy)
}

func (t *tile) keyLight(s *slot, p *part, x, y float32) float32 {
	t.free = true
	nx, ny, nz, _ := t.lookAt(s, p, x, y)
	t.free = false
	l := &t.f.light
	return (nx*l.kx + ny*l.ky + nz*l.kz) / sqrt32(nx*nx+ny*ny+nz*nz+1e-30)
}
