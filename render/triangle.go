package render

import "math"

// edge is one side of a triangle on the sample rows: x at the first row and
// its growth from row to row, in 32.32 fixed point. It depends on the two
// ends alone, so that two triangles that share it split the samples between
// them without gap and without overlap: a sample belongs to the triangle on
// its right.
type edge struct {
	x, dx  int64
	j0, j1 int
}

const fix = 1 << 32

// edgeOf returns the edge from a down to b; rows is the number of sample rows
// a pixel, ja and jb the first rows not above the ends.
func edgeOf(a, b *vert, ja, jb int, rows float64) edge {
	if ja >= jb {
		return edge{j0: ja, j1: ja}
	}
	s := (float64(b.x) - float64(a.x)) / (float64(b.y) - float64(a.y))
	x := float64(a.x) + ((float64(ja)+0.5)/rows-float64(a.y))*s
	d := s / rows
	const most = 1 << 28
	if !(x > -most && x < most && d > -most && d < most) {
		x = math.Min(most, math.Max(-most, x))
		d = math.Min(most, math.Max(-most, d))
	}
	return edge{int64(x * fix), int64(d * fix), ja, jb}
}

// triangle draws a triangle: onto the samples when l is nil, otherwise into
// the layer. It tells whether it reached a sample.
func (t *tile) triangle(a, b, c *vert, slot uint32, l *layer) bool {
	// From top to bottom.
	if b.y < a.y {
		a, b = b, a
	}
	if c.y < b.y {
		b, c = c, b
		if b.y < a.y {
			a, b = b, a
		}
	}
	rows := float64(int(1) << t.lg)
	ja, jb, jc := sampleRow(a.y, rows), sampleRow(b.y, rows), sampleRow(c.y, rows)
	if ja >= jc || jc <= t.rows[0] || ja >= t.rows[1] {
		return false
	}
	ux, uy := b.x-a.x, b.y-a.y
	vx, vy := c.x-a.x, c.y-a.y
	det := ux*vy - vx*uy
	un, vn := b.n-a.n, c.n-a.n
	var gx, gy float32
	if det > 1e-4 || det < -1e-4 {
		gx, gy = (un*vy-vn*uy)/det, (vn*ux-un*vx)/det
	}
	ox := a.x - float32(t.x)
	oy := a.y - float32(t.y)
	n0 := a.n - gx*ox - gy*oy

	long := edgeOf(a, c, ja, jc, rows)
	upper := edgeOf(a, b, ja, jb, rows)
	lower := edgeOf(b, c, jb, jc, rows)
	hit := false
	if det > 0 { // b is on the right
		if t.strip(&long, &upper, n0, gx, gy, slot, l) {
			hit = true
		}
		if t.strip(&long, &lower, n0, gx, gy, slot, l) {
			hit = true
		}
	} else {
		if t.strip(&upper, &long, n0, gx, gy, slot, l) {
			hit = true
		}
		if t.strip(&lower, &long, n0, gx, gy, slot, l) {
			hit = true
		}
	}
	return hit
}

// sampleRow returns the first sample row whose place is not above y.
func sampleRow(y float32, rows float64) int {
	const most = 1 << 19
	v := float64(y) * rows
	if !(v > -most) {
		return -most
	}
	if v > most {
		return most
	}
	return rowFrom(v, 1)
}

// strip draws the samples between two edges on the rows that both have.
func (t *tile) strip(left, right *edge, n0, gx, gy float32, slot uint32, l *layer) bool {
	j0, j1 := max(left.j0, right.j0, t.rows[0]), min(left.j1, right.j1, t.rows[1])
	if j0 >= j1 {
		return false
	}
	xl := left.x + int64(j0-left.j0)*left.dx - int64(t.x)<<32
	xr := right.x + int64(j0-right.j0)*right.dx - int64(t.x)<<32
	lg := t.lg
	last := 1<<lg - 1
	lo, hi := t.clip.Min.X, t.clip.Max.X
	step := 1 / float32(int(1)<<lg)
	keys := t.keys
	hit := false
	for j := j0; j < j1; j++ {
		k := j & last
		f := t.sfix[k&15]
		x0, x1 := int((xl+f)>>32), int((xr+f)>>32)
		xl += left.dx
		xr += right.dx
		if x0 < lo {
			x0 = lo
		}
		if x1 > hi {
			x1 = hi
		}
		if x0 >= x1 {
			continue
		}
		hit = true
		py := (j >> lg) - t.y
		y := (float32(j-t.y<<lg) + 0.5) * step
		n := n0 + gy*y + gx*(float32(x0)+float32(t.sx[k&15]))
		if l != nil {
			for x := x0; x < x1; x++ {
				t.cover(l, py, x, k, n, slot)
				n += gx
			}
			continue
		}
		i := (py*t.side+x0)<<lg + k
		for x := x0; x < x1; x++ {
			key := uint64(math.Float32bits(n))<<32 | uint64(slot)
			if p := &keys[i]; int64(key) > int64(*p) {
				*p = key
			}
			i += 1 << lg
			n += gx
		}
	}
	return hit
}
