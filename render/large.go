package render

import "math"

// large draws a triangle of any size, sample row by sample row: the whole
// pixels whose samples lie inside are found by division.
func (t *tile) large(a, b, c *vert, n0, gx, gy float32, slot uint32, l *layer) bool {
	const most = 1 << 22
	var x, y [3]int64
	for i, v := range [3]*vert{a, b, c} {
		if !(v.x > -most && v.x < most && v.y > -most && v.y < most) {
			return false
		}
		x[i], y[i] = int64(v.x*sub)-int64(t.x)*sub, int64(v.y*sub)-int64(t.y)*sub
	}
	e := edgesOf(x, y)
	n := 1 << t.lg
	yLo, yHi := min(y[0], y[1], y[2]), max(y[0], y[1], y[2])
	hit := false
	for py := t.clip.Min.Y; py < t.clip.Max.Y; py++ {
		if int64(py+1)*sub < yLo || int64(py)*sub > yHi {
			continue
		}
		for s := range n {
			sy := int64(py*sub + (2*s+1)*sub/2>>t.lg)
			x0, x1 := e.span(int64(t.sx[s&15]*sub), sy, t.clip.Min.X, t.clip.Max.X-1)
			if x0 > x1 {
				continue
			}
			hit = true
			row := n0 + gy*(float32(py)+(float32(s)+0.5)/float32(n))
			for x := x0; x <= x1; x++ {
				near := row + gx*(float32(x)+float32(t.sx[s&15]))
				if l == nil {
					key := uint64(math.Float32bits(near))<<32 | uint64(slot)
					if p := &t.keys[(py*t.side+x)<<t.lg+s]; int64(key) > int64(*p) {
						*p = key
					}
				} else if t.cover(l, py, x, s, near, slot) {
					g, lane := t.groupOf(x, py)
					sh := &t.strips[l.at[g]]
					sh.n[lane], sh.nx[lane], sh.ny[lane] = n0+gy*(float32(py)+0.5)+gx*(float32(x)+0.5), gx, gy
				}
			}
		}
	}
	return hit
}

// triEdges are the edge functions a·x + b·y + c of a triangle in grid units
// of the canvas, less 1 where 0 is outside.
type triEdges struct {
	a, b, c [3]int64
}

// edgesOf returns the edge functions of a triangle, whichever way its corners
// run.
func edgesOf(x, y [3]int64) (e triEdges) {
	if (x[1]-x[0])*(y[2]-y[0])-(x[2]-x[0])*(y[1]-y[0]) < 0 {
		x[1], y[1], x[2], y[2] = x[2], y[2], x[1], y[1]
	}
	for i := range 3 {
		j := (i + 1) % 3
		e.a[i], e.b[i] = y[i]-y[j], x[j]-x[i]
		e.c[i] = -e.a[i]*x[i] - e.b[i]*y[i]
		if !(e.a[i] > 0 || e.a[i] == 0 && e.b[i] > 0) {
			e.c[i]--
		}
	}
	return e
}

// span returns the first and the last of the pixels from first to last whose
// sample, sx to the right of the pixel and at height sy, lies inside.
func (e *triEdges) span(sx, sy int64, first, last int) (int, int) {
	x0, x1 := int64(first), int64(last)
	for i := range 3 {
		// Inside where d + a·256·x is not negative.
		d, g := e.a[i]*sx+e.b[i]*sy+e.c[i], e.a[i]*sub
		switch {
		case g > 0:
			x0 = max(x0, -floorDiv(d, g))
		case g < 0:
			x1 = min(x1, floorDiv(d, -g))
		case d < 0:
			x1 = x0 - 1
		}
	}
	return int(x0), int(x1)
}

// floorDiv returns the largest whole number not above a/b, for b > 0.
func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}
