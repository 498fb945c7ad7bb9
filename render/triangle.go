package render

import "math"

// Vertices lie on a grid of 1/256 pixel, and which samples a triangle covers
// is decided with whole numbers: a sample is inside where all three edge
// functions are positive, or 0 on an edge that looks to the right or, when it
// is level, down. So two triangles that share an edge split the samples
// between them without gap and without overlap, whichever of the ways below
// finds them (J. Pineda, Computer Graphics 22 (4), 17, 1988).
const (
	subBits = 8
	sub     = 1 << subBits
)

// snapBig is added and taken away to round a float64 to the grid.
const snapBig = 1.5 * (1 << (52 - subBits))

func snap(v float32) float32 { return float32(float64(v) + snapBig - snapBig) }

// triEdges are the edge functions a·x + b·y + c of a triangle in grid units
// of the canvas, less 1 where 0 is outside.
type triEdges struct {
	a, b, c [3]int64
}

// kernel is what the innermost loop needs. Its layout is known to the
// assembly.
type kernel struct {
	e       [3]int32   // 0: edge functions at the corner of the first pixel
	a, b    [3]int32   // 12, 24: their growth over a grid unit
	n0      float32    // 36: nearness at the canvas's corner
	gx, gy  float32    // 40, 44: its growth over a pixel
	x, y    float32    // 48, 52: the first pixel
	slot    uint32     // 56
	rows    int32      // 60
	pairs   int32      // 64: of pixels in a row
	_       int32      // 68
	keys    *uint64    // 72: of the first pixel
	stride  int64      // 80: bytes from row to row
	masks   *uint8     // 88: where a layer's masks go, one a pair
	_       [4]float64 // spare
	maskBuf [maxMasks]uint8
}

// maxMasks is the largest field of pixel pairs that the innermost loop takes.
const maxMasks = 56 * 28

// triangle draws a triangle: onto the samples when l is nil, otherwise into
// the layer. It tells whether it reached a sample.
func (t *tile) triangle(a, b, c *vert, slot uint32, l *layer) bool {
	ox, oy := float32(t.x), float32(t.y)
	fax, fay, fbx, fby, fcx, fcy := a.x-ox, a.y-oy, b.x-ox, b.y-oy, c.x-ox, c.y-oy
	x0, x1 := min(fax, fbx, fcx), max(fax, fbx, fcx)
	y0, y1 := min(fay, fby, fcy), max(fay, fby, fcy)
	ux, uy := fbx-fax, fby-fay
	vx, vy := fcx-fax, fcy-fay
	det := ux*vy - vx*uy
	un, vn := b.n-a.n, c.n-a.n
	var gx, gy float32
	if det > 1e-4 || det < -1e-4 {
		inv := 1 / det
		gx, gy = (un*vy-vn*uy)*inv, (vn*ux-un*vx)*inv
	}
	n0 := a.n - gx*fax - gy*fay

	// Large triangles, and all when there is more than one way to reach a
	// sample, take the long way.
	const wide = 96
	if !(x0 > -wide && x1 < wide && y0 > -wide && y1 < wide) {
		return t.large(a, b, c, n0, gx, gy, slot, l)
	}
	k := &t.kernel
	ax, ay := int32(fax*sub), int32(fay*sub)
	bx, by := int32(fbx*sub), int32(fby*sub)
	cx, cy := int32(fcx*sub), int32(fcy*sub)
	if (bx-ax)*(cy-ay)-(cx-ax)*(by-ay) < 0 {
		bx, by, cx, cy = cx, cy, bx, by
	}
	// No sample lies within half a sample row of a pixel's rim, but some lie
	// just there.
	rim := t.rim
	px0, py0 := max(int(x0+rim+wide-0.5/sub)-wide, t.clip.Min.X)&^1, max(int(y0+rim+wide-0.5/sub)-wide, t.clip.Min.Y)
	px1, py1 := min(int(x1-rim+wide+1)-wide-1, t.clip.Max.X-1), min(int(y1-rim+wide+1)-wide-1, t.clip.Max.Y-1)
	if px1 < px0 || py1 < py0 {
		return false
	}
	if l != nil && (py1-py0+1)*((px1-px0)/2+1) > maxMasks {
		return t.large(a, b, c, n0, gx, gy, slot, l)
	}
	sx, sy := int32(px0*sub), int32(py0*sub)
	// The edge from P to Q has a = Py - Qy and b = Qx - Px.
	k.a[0], k.b[0] = ay-by, bx-ax
	k.a[1], k.b[1] = by-cy, cx-bx
	k.a[2], k.b[2] = cy-ay, ax-cx
	k.e[0] = k.a[0]*(sx-ax) + k.b[0]*(sy-ay) + onEdge(k.a[0], k.b[0])
	k.e[1] = k.a[1]*(sx-bx) + k.b[1]*(sy-by) + onEdge(k.a[1], k.b[1])
	k.e[2] = k.a[2]*(sx-cx) + k.b[2]*(sy-cy) + onEdge(k.a[2], k.b[2])
	k.n0, k.gx, k.gy = n0, gx, gy
	k.x, k.y = float32(px0), float32(py0)
	k.slot, k.rows, k.pairs = slot, int32(py1-py0+1), int32((px1-px0)/2+1)
	at := (py0*t.side + px0) << t.lg
	k.keys, k.stride = &t.keys[at], int64(t.side)<<(t.lg+3)
	if l == nil {
		if t.lg == 2 && useVectors {
			return drawFour(k)
		}
		return t.drawPlain(k, at)
	}
	k.masks = &k.maskBuf[0]
	if t.lg == 2 && useVectors {
		if !maskFour(k) {
			return false
		}
	} else if !t.maskPlain(k, at) {
		return false
	}
	return t.addMasks(k, py0*t.side+px0, l)
}

// onEdge is -1 for edges whose own samples belong to the neighbour.
func onEdge(a, b int32) int32 {
	if a > 0 || a == 0 && b > 0 {
		return 0
	}
	return -1
}

// drawPlain draws a small triangle, sample by sample. drawFour does the same
// for four samples a pixel.
func (t *tile) drawPlain(k *kernel, at int) bool {
	n := 1 << t.lg
	hit := false
	for r := range int(k.rows) {
		for s := range n {
			sy := int32(r*sub + (2*s+1)*sub/2>>t.lg)
			sx := int32(t.sx[s&15] * sub)
			e0 := k.e[0] + k.a[0]*sx + k.b[0]*sy
			e1 := k.e[1] + k.a[1]*sx + k.b[1]*sy
			e2 := k.e[2] + k.a[2]*sx + k.b[2]*sy
			y := k.y + float32(r) + (float32(s)+0.5)/float32(n)
			row := k.n0 + k.gy*y
			x := k.x + float32(t.sx[s&15])
			i := at + r*t.side<<t.lg + s
			for range 2 * int(k.pairs) {
				if e0|e1|e2 >= 0 {
					key := uint64(math.Float32bits(row+k.gx*x))<<32 | uint64(k.slot)
					if p := &t.keys[i]; int64(key) > int64(*p) {
						*p = key
						hit = true
					}
				}
				e0 += k.a[0] << subBits
				e1 += k.a[1] << subBits
				e2 += k.a[2] << subBits
				x++
				i += n
			}
		}
	}
	return hit
}

// maskPlain finds which samples a small triangle covers in front of what is
// there: for each pixel pair a byte for up to four samples a pixel. With more
// samples it draws nothing and leaves them to addMasks.
func (t *tile) maskPlain(k *kernel, at int) bool {
	if t.lg > 2 {
		return true
	}
	n := 1 << t.lg
	m := 0
	any := uint8(0)
	for r := range int(k.rows) {
		for p := range int(k.pairs) {
			mask := uint8(0)
			for q := range 2 {
				for s := range n {
					if t.inside(k, at, r, 2*p+q, s) {
						mask |= 1 << (4*q + s)
					}
				}
			}
			k.maskBuf[m] = mask
			any |= mask
			m++
		}
	}
	return any != 0
}

// inside tells whether a sample of pixel (x, r) of the kernel's field is
// covered and not hidden.
func (t *tile) inside(k *kernel, at, r, x, s int) bool {
	sy := int32(r*sub + (2*s+1)*sub/2>>t.lg)
	sx := int32(x*sub) + int32(t.sx[s&15]*sub)
	e0 := k.e[0] + k.a[0]*sx + k.b[0]*sy
	e1 := k.e[1] + k.a[1]*sx + k.b[1]*sy
	e2 := k.e[2] + k.a[2]*sx + k.b[2]*sy
	if e0|e1|e2 < 0 {
		return false
	}
	y := k.y + float32(r) + (float32(s)+0.5)/float32(int(1)<<t.lg)
	n := (k.n0 + k.gy*y) + k.gx*(k.x+float32(x)+float32(t.sx[s&15]))
	return int64(uint64(math.Float32bits(n))<<32|math.MaxUint32) > int64(t.keys[at+(r*t.side+x)<<t.lg+s])
}

// addMasks adds the covered samples to a layer.
func (t *tile) addMasks(k *kernel, pixel int, l *layer) bool {
	hit := false
	m := 0
	at := pixel << t.lg
	l.touch(pixel / t.side)
	l.touch(pixel/t.side + int(k.rows) - 1)
	for r := range int(k.rows) {
		for p := range int(k.pairs) {
			if t.lg > 2 {
				for q := range 2 {
					mask := uint32(0)
					for s := range 1 << t.lg {
						if t.inside(k, at, r, 2*p+q, s) {
							mask |= 1 << s
						}
					}
					if mask != 0 {
						t.coverMask(l, pixel+r*t.side+2*p+q, mask, k, 2*p+q, r)
						hit = true
					}
				}
				continue
			}
			b := k.maskBuf[m]
			m++
			if b == 0 {
				continue
			}
			hit = true
			i := pixel + r*t.side + 2*p
			if b&15 != 0 {
				t.coverMask(l, i, uint32(b&15), k, 2*p, r)
			}
			if b>>4 != 0 {
				t.coverMask(l, i+1, uint32(b>>4), k, 2*p+1, r)
			}
		}
	}
	return hit
}

// coverMask adds samples of one pixel to a layer. When the layer has one of
// them already, they belong to another sheet: the pixel so far becomes a
// fragment of its own.
func (t *tile) coverMask(l *layer, i int, mask uint32, k *kernel, x, y int) {
	s := &l.at[i]
	if s.mask&mask != 0 {
		t.emit(s, i)
	}
	s.mask |= mask
	s.slot = k.slot
	s.n = k.n0 + k.gy*(k.y+float32(y)+0.5) + k.gx*(k.x+float32(x)+0.5)
	s.nx, s.ny = k.gx, k.gy
}

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
	if (x[1]-x[0])*(y[2]-y[0])-(x[2]-x[0])*(y[1]-y[0]) < 0 {
		x[1], y[1], x[2], y[2] = x[2], y[2], x[1], y[1]
	}
	var e triEdges
	for i := range 3 {
		j := (i + 1) % 3
		e.a[i], e.b[i] = y[i]-y[j], x[j]-x[i]
		e.c[i] = -e.a[i]*x[i] - e.b[i]*y[i]
		if !(e.a[i] > 0 || e.a[i] == 0 && e.b[i] > 0) {
			e.c[i]--
		}
	}
	n := 1 << t.lg
	yLo, yHi := min(y[0], y[1], y[2]), max(y[0], y[1], y[2])
	hit := false
	for py := t.clip.Min.Y; py < t.clip.Max.Y; py++ {
		if int64(py+1)*sub < yLo || int64(py)*sub > yHi {
			continue
		}
		for s := range n {
			sy := int64(py*sub + (2*s+1)*sub/2>>t.lg)
			sx := int64(t.sx[s&15] * sub)
			x0, x1 := int64(t.clip.Min.X), int64(t.clip.Max.X-1)
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
			if x0 > x1 {
				continue
			}
			hit = true
			row := n0 + gy*(float32(py)+(float32(s)+0.5)/float32(n))
			for x := int(x0); x <= int(x1); x++ {
				near := row + gx*(float32(x)+float32(t.sx[s&15]))
				if l != nil {
					t.cover(l, py, x, s, near, slot)
					if sh := &l.at[py*t.side+x]; sh.slot == slot {
						sh.n = n0 + gy*(float32(py)+0.5) + gx*(float32(x)+0.5)
						sh.nx, sh.ny = gx, gy
					}
					continue
				}
				key := uint64(math.Float32bits(near))<<32 | uint64(slot)
				if p := &t.keys[(py*t.side+x)<<t.lg+s]; int64(key) > int64(*p) {
					*p = key
				}
			}
		}
	}
	return hit
}

// floorDiv returns the largest whole number not above a/b, for b > 0.
func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}
