package render

import "math"

// How the samples of a tile are reached by everything that is not a triangle.

// pixelRange returns the first and the end pixel of the canvas whose sample
// in the row of kind k lies in the half-open interval x0 to x1.
func (t *tile) pixelRange(x0, x1 float64, k int) (int, int) {
	ox := float64(t.x) + t.sx[k]
	a, b := math.Ceil(x0-ox), math.Ceil(x1-ox)
	lo, hi := float64(t.clip.Min.X), float64(t.clip.Max.X)
	if !(a > lo) {
		a = lo
	}
	if !(b < hi) {
		b = hi
	}
	if a >= b {
		return 0, 0
	}
	return int(a), int(b)
}

// rowRange returns the sample rows of a box on the canvas.
func (t *tile) rowRange(y0, y1 float64) (int, int) {
	r := float64(int(1) << t.lg)
	lo, hi := float64(t.rows[0]), float64(t.rows[1])
	return int(math.Min(hi, math.Max(lo, math.Floor(y0*r-0.5)))), int(math.Max(lo, math.Min(hi, math.Ceil(y1*r+0.5))))
}

// body draws any round body, opaque or as two layers.
func (t *tile) body(q *quadric, p *part, slot uint32, layered bool) {
	b := &p.box
	j0, j1 := t.rowRange(b.y0, b.y1)
	step := 1 / float64(int(1)<<t.lg)
	nMax := t.f.projs[p.proj].nMax
	if !layered && q.safe && q.mode == wallBetween && q.slab != slabBetween {
		t.round(q, b, slot)
		return
	}
	for j := j0; j < j1; j++ {
		y := (float64(j) + 0.5) * step
		l, r := q.span(y, b.x0, b.x1)
		k := j & (1<<t.lg - 1)
		x0, x1 := t.pixelRange(l, r, k)
		py := (j >> t.lg) - t.y
		for x := x0; x < x1; x++ {
			in, out, inKind, outKind, ok := q.ends(float64(t.x+x)+t.sx[k], y)
			if !ok {
				continue
			}
			seen := in <= nMax
			if !layered {
				if !seen {
					if !(out > 0 && out <= nMax) {
						continue
					}
					in, inKind = out, outKind
				}
				key := uint64(math.Float32bits(float32(in)))<<32 | uint64(slot+inKind)
				if p := &t.keys[(py*t.side+x)<<t.lg+k]; int64(key) > int64(*p) {
					*p = key
				}
				continue
			}
			if seen {
				t.cover(&t.front, py, x, k, float32(in), slot+inKind)
			}
			if out > 0 && out <= nMax {
				t.cover(&t.back, py, x, k, float32(out), slot+outKind)
			}
		}
	}
}

// plate draws a disc, opaque or as a layer.
func (t *tile) plate(d *disc, p *part, layered bool) {
	b := &p.box
	j0, j1 := t.rowRange(b.y0, b.y1)
	step := 1 / float64(int(1)<<t.lg)
	slot := uint32(len(t.slots) - 1)
	if layered && d.hole < 0 {
		t.pane(d, p, slot, t.f.ink.half > 0 && p.outline)
		return
	}
	var parts [2][2]float64
	lo, hi := math.Max(b.x0, float64(t.x)), math.Min(b.x1, float64(t.x+t.side+1))
	for j := j0; j < j1; j++ {
		y := (float64(j) + 0.5) * step
		k := j & (1<<t.lg - 1)
		py := (j >> t.lg) - t.y
		n := d.spans(y, lo, hi, &parts)
		n0 := d.n[0] + d.n[2]*(y-d.my) + d.n[1]*(float64(t.x)+t.sx[k]-d.mx)
		for i := range n {
			x0, x1 := t.pixelRange(parts[i][0], parts[i][1], k)
			t.run(py, x0, x1, k, float32(n0), float32(d.n[1]), slot, layered)
		}
	}
}

// run draws a piece of a sample row whose nearness is linear: n0 + n1·x.
func (t *tile) run(py, x0, x1, k int, n0, n1 float32, slot uint32, layered bool) {
	row := py * t.side
	if !layered {
		for x := x0; x < x1; x++ {
			n := n0 + n1*float32(x)
			key := uint64(math.Float32bits(n))<<32 | uint64(slot)
			if p := &t.keys[(row+x)<<t.lg+k]; int64(key) > int64(*p) {
				*p = key
			}
		}
		return
	}
	for x := x0; x < x1; x++ {
		t.cover(&t.front, py, x, k, n0+n1*float32(x), slot)
	}
}

// stroke draws a straight piece of a line.
func (t *tile) stroke(s *stroke, layered bool) {
	b := s.box()
	j0, j1 := t.rowRange(b.y0, b.y1)
	step := 1 / float64(int(1)<<t.lg)
	slot := uint32(len(t.slots) - 1)
	for j := j0; j < j1; j++ {
		y := (float64(j) + 0.5) * step
		l, r, ok := s.span(y)
		if !ok {
			continue
		}
		k := j & (1<<t.lg - 1)
		py := (j >> t.lg) - t.y
		x0, x1 := t.pixelRange(l, r, k)
		for x := x0; x < x1; x++ {
			n := float32(s.near(float64(t.x+x)+t.sx[k], y))
			if layered {
				if !t.covers(&t.front, py, x, k) {
					t.cover(&t.front, py, x, k, n, slot)
				}
				continue
			}
			key := uint64(math.Float32bits(n))<<32 | uint64(slot)
			if p := &t.keys[(py*t.side+x)<<t.lg+k]; int64(key) > int64(*p) {
				*p = key
			}
		}
	}
}
