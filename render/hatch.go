package render

import "math"

// hatching returns how much of a pixel the hatching covers. Lines keep their
// width on the picture wherever the surface turns; where they would run
// together they become an even tone.
func (t *tile) hatching(s *slot, p *part, x, y float32) float32 {
	h := &p.hatch
	at := t.surf.u
	if h.second {
		at = t.surf.v
	}
	ux := t.slope(s, p, x, y, 0.5, 0, h.second)
	uy := t.slope(s, p, x, y, 0, 0.5, h.second)
	grad := float32(math.Sqrt(float64(ux*ux + uy*uy)))
	if !(grad > 0) {
		return 0
	}
	gap := h.period / grad // pixels between two lines
	q := at / h.period
	q -= float32(math.Floor(float64(q) + 0.5))
	d := float32(math.Abs(float64(q))) * gap
	line := min(1, max(0, h.half+0.5-d)) * min(1, 2*h.half)
	even := min(1, 2*h.half/gap)
	mix := min(1, max(0, (gap-2*h.half)/(2*h.half+1)))
	return even + (line-even)*mix
}

// slope returns the growth of a surface coordinate over a pixel in direction
// (dx, dy), which is half a pixel long.
func (t *tile) slope(s *slot, p *part, x, y, dx, dy float32, second bool) float32 {
	keep := t.surf
	t.free = true
	t.lookAt(s, p, x+dx, y+dy)
	a := t.surf
	t.lookAt(s, p, x-dx, y-dy)
	b := t.surf
	t.free = false
	t.surf = keep
	d := a.u - b.u
	if second {
		d = a.v - b.v
	}
	if p.form == formQuadric { // an angle may have come round
		if d > math.Pi {
			d -= 2 * math.Pi
		} else if d < -math.Pi {
			d += 2 * math.Pi
		}
	}
	return d
}
