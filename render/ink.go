package render

import (
	"image"
	"math"
	"math/bits"
)

// The ink look draws a line wherever two sheets of surface meet on the
// picture: at silhouettes, where bodies cut each other, at creases and where
// a body hides a part of itself. Between the middles of two neighbouring
// pixels that show different sheets the border is placed by how many samples
// of the two pixels belong to each; the border points around a corner of four
// pixels are joined by straight pieces, and a pixel is inked by its distance
// from the nearest piece. So lines have one width everywhere, whatever the
// number of samples.

type ink struct {
	half float32 // half the width of outlines in pixels
}

// inkTile is what a tile needs for lines.
type inkTile struct {
	cells cells
	dist  []float32 // to the nearest piece of line
	near  []float32 // nearness of that line
	touch []int32   // pixels that dist was set for
	right []border  // between a pixel and the next on its right
	down  []border  // between a pixel and the next below
	rows  []extent  // where a row has borders
}

// extent is a run of pixels in a row, from first to last; empty when last is
// less.
type extent struct{ first, last int }

// border is a place where a line crosses the way from one pixel's middle to
// the next's: at is its share of the way.
type border struct {
	on   bool
	at   float32
	near float32
}

// inkApron returns the width of the apron that lines need.
func (f *frame) inkApron() int {
	f.ink.half = 0
	if f.look.Style != Ink {
		return 0
	}
	if !(f.look.OutlineWidth > 0) {
		return 1
	}
	f.ink.half = float32(math.Min(f.look.OutlineWidth*f.pxPerMM/2, 62)) // what the widest apron holds
	// The farthest middle of a pixel that a line reaches, and one more for
	// the pixels on the other side of the border.
	return min(int(math.Ceil(float64(f.ink.half)+0.5))+1, 64)
}

// creaseCos is the cosine of the angle between normals from which on a crease
// is drawn: 45°.
const creaseCos = 0.7071

// jumpPixels is the depth in pixels from which on a step within a body may be
// a fold.
const jumpPixels = 6

// drawInk finds the lines between opaque surfaces. It is called when the
// samples are known and fills dist and near.
func (t *tile) drawInk() {
	k := &t.lines
	t.fillCells()
	if !(t.f.ink.half > 0) {
		return
	}
	k.ready(t.side)
	for y := t.clip.Min.Y; y < t.clip.Max.Y; y++ {
		for x := t.clip.Min.X; x < t.clip.Max.X; x += lanes {
			i := y*t.side + x
			for m := laneBits(0, t.clip.Max.X-1-x) &^ k.cells.goOn(i, i+1); m != 0; m &= m - 1 {
				j := lowest(m)
				if b := &k.right[i+j]; t.differ(i+j, i+j+1, 1, 0, b) {
					k.rows[y].take(x + j)
				}
			}
			if y+1 == t.clip.Max.Y {
				continue
			}
			for m := laneBits(0, t.clip.Max.X-x) &^ k.cells.goOn(i, i+t.side); m != 0; m &= m - 1 {
				j := lowest(m)
				if b := &k.down[i+j]; t.differ(i+j, i+j+t.side, 0, 1, b) {
					k.rows[y].take(x + j)
				}
			}
		}
	}
	t.join(t.clip)
}

func (e *extent) take(x int) { e.first, e.last = min(e.first, x), max(e.last, x) }

// ready makes the buffers fit a canvas and empties them.
func (k *inkTile) ready(side int) {
	n := side * side
	if len(k.dist) != n {
		k.dist, k.near = make([]float32, n), make([]float32, n)
		k.right, k.down = make([]border, n), make([]border, n)
		k.rows = make([]extent, side)
		for i := range k.dist {
			k.dist[i] = 1e9
		}
		for y := range k.rows {
			k.rows[y] = extent{math.MaxInt, -1}
		}
		k.touch = k.touch[:0]
	}
	for _, i := range k.touch {
		k.dist[i] = 1e9
	}
	k.touch = k.touch[:0]
	for y := range k.rows {
		e := &k.rows[y]
		if e.last < 0 {
			continue
		}
		clear(k.right[y*side+e.first : y*side+e.last+1])
		clear(k.down[y*side+e.first : y*side+e.last+1])
		*e = extent{math.MaxInt, -1}
	}
}

// partGroup is like group, but takes all surfaces of a part as one.
func (t *tile) partGroup(keys []uint64, todo uint32) (mask, slot uint32) {
	slot = uint32(keys[bits.TrailingZeros32(todo)])
	part := t.slots[slot].part
	count := 0
	for m := todo; m != 0; m &= m - 1 {
		k := bits.TrailingZeros32(m)
		if t.slots[uint32(keys[k])].part == part {
			mask |= 1 << k
			count++
			if count&1 == 0 {
				slot = uint32(keys[k])
			}
		}
	}
	return mask, slot
}

// differ tells whether a line runs between the pixels i and j, which lie next
// to each other in direction (dx, dy), and fills in where.
func (t *tile) differ(i, j int, dx, dy float32, b *border) bool {
	p, q := t.lines.cells.at(i), t.lines.cells.at(j)
	if p.part < 0 && q.part < 0 {
		return false
	}
	if p.part != q.part {
		front := &p
		if p.part < 0 || q.part >= 0 && q.n > p.n {
			front = &q
		}
		if !t.f.parts[front.part].outline {
			return false
		}
		// Where a drawn line dips into a body there is no edge.
		if p.part >= 0 && q.part >= 0 && (t.f.parts[p.part].form == formStroke || t.f.parts[q.part].form == formStroke) &&
			abs32(p.n-q.n) < 12*t.f.pixelDepth(front.part, front.n) {
			return false
		}
		// A little nearer than the body, whose depth changes by some pixels
		// within the pixel at its rim: otherwise a translucent plane through
		// its axis would lie now before and now behind the line.
		b.on, b.near = true, front.n+10*t.f.pixelDepth(front.part, front.n)
		b.at = t.between(i, j, p.part, q.part)
		return true
	}
	if !t.f.parts[p.part].outline {
		return false
	}
	fold := false
	if abs32(p.n-q.n) > p.step && t.f.parts[p.part].form != formDisc {
		// A jump in depth of more than some pixels, and more than the slopes
		// account for. Where both sides are seen at a glancing angle the
		// slopes of facets say little.
		x, y := float32(i%t.side)+0.5, float32(i/t.side)+0.5
		pn, px, py := t.plane(p.slot, x, y)
		qn, qx, qy := t.plane(q.slot, x+dx, y+dy)
		gp, gq := px*dx+py*dy, qx*dx+qy*dy
		jump := abs32((pn + gp/2) - (qn - gq/2))
		fold = jump > p.step && jump > 3*min(abs32(gp), abs32(gq)) && (max(p.z, q.z) > 0.35 || jump > 10*p.step)
	}
	if !fold && p.x*q.x+p.y*q.y+p.z*q.z > creaseCos {
		return false
	}
	b.on, b.near = true, max(p.n, q.n)
	b.at = t.betweenPlanes(i, j, dx, dy)
	return true
}

// pixelDepth is the nearness that a depth as large as a pixel makes.
func (f *frame) pixelDepth(part int32, n float32) float32 {
	pr := &f.projs[f.parts[part].proj]
	if pr.persp {
		return n / float32(pr.f)
	}
	return float32(pr.k1 / pr.f)
}

func abs32(v float32) float32 {
	if v < 0 {
		return -v
	}
	return v
}

// between returns the place of the border between the parts p and q from the
// samples of the pixels i and j.
func (t *tile) between(i, j int, p, q int32) float32 {
	n := 1 << t.lg
	cp, cq := 0, 0
	for _, at := range [2]int{i, j} {
		for _, k := range t.keys[at<<t.lg:][:n] {
			switch t.slots[uint32(k)].part {
			case p:
				cp++
			case q:
				cq++
			}
		}
	}
	if cp+cq == 0 {
		return 0.5
	}
	return min(1, max(0, 2*float32(cp)/float32(cp+cq)-0.5))
}

// betweenPlanes does the same for two sheets of one part: a sample belongs to
// the one in whose plane it lies.
func (t *tile) betweenPlanes(i, j int, dx, dy float32) float32 {
	n := 1 << t.lg
	x0, y0 := float32(i%t.side), float32(i/t.side)
	p, q := t.lines.cells.at(i), t.lines.cells.at(j)
	pn, px, py := t.plane(p.slot, x0+0.5, y0+0.5)
	qn, qx, qy := t.plane(q.slot, x0+0.5+dx, y0+0.5+dy)
	cp := 0
	for s, at := range [2]int{i, j} {
		for k, key := range t.keys[at<<t.lg:][:n] {
			x, y := float32(t.sx[k&15])-0.5, (float32(k)+0.5)/float32(n)-0.5
			z := math.Float32frombits(uint32(key >> 32))
			far := float32(s)
			zp := pn + px*(x+far*dx) + py*(y+far*dy)
			zq := qn + qx*(x-(1-far)*dx) + qy*(y-(1-far)*dy)
			if abs32(z-zp) <= abs32(z-zq) {
				cp++
			}
		}
	}
	return min(1, max(0, float32(cp)/float32(n)-0.5))
}

// join makes pieces of line from the borders around every corner of four
// pixels and measures the pixels near them.
func (t *tile) join(area image.Rectangle) {
	k := &t.lines
	for y := area.Min.Y; y+1 < area.Max.Y; y++ {
		e, below := k.rows[y], k.rows[y+1]
		from, to := max(min(e.first-1, below.first), area.Min.X), min(max(e.last, below.last), area.Max.X-2)
		for x := from; x <= to; x++ {
			i := y*t.side + x
			top, bottom, left, right := &k.right[i], &k.right[i+t.side], &k.down[i], &k.down[i+1]
			if !top.on && !bottom.on && !left.on && !right.on {
				continue
			}
			var px, py, pn [4]float32
			n := 0
			add := func(b *border, x, y float32) {
				if b.on {
					px[n], py[n], pn[n] = x, y, b.near
					n++
				}
			}
			fx, fy := float32(x)+0.5, float32(y)+0.5
			add(top, fx+top.at, fy)
			add(right, fx+1, fy+right.at)
			add(bottom, fx+bottom.at, fy+1)
			add(left, fx, fy+left.at)
			if n == 2 {
				t.measure(px[0], py[0], px[1], py[1], max(pn[0], pn[1]))
				continue
			}
			// A single end, or more than two sheets: lines to the middle.
			var mx, my float32
			for j := range n {
				mx, my = mx+px[j]/float32(n), my+py[j]/float32(n)
			}
			for j := range n {
				t.measure(px[j], py[j], mx, my, pn[j])
			}
		}
	}
}

// measure notes the distance of pixels from a short piece of line.
func (t *tile) measure(x0, y0, x1, y1, near float32) {
	k := &t.lines
	reach := t.f.ink.half + 0.5
	ax, bx := int(min(x0, x1)-reach-0.5), int(max(x0, x1)+reach+0.5)
	ay, by := int(min(y0, y1)-reach-0.5), int(max(y0, y1)+reach+0.5)
	ax, ay = max(ax, t.clip.Min.X), max(ay, t.clip.Min.Y)
	bx, by = min(bx, t.clip.Max.X-1), min(by, t.clip.Max.Y-1)
	dx, dy := x1-x0, y1-y0
	l2 := dx*dx + dy*dy
	inv := float32(0)
	if l2 > 1e-12 {
		inv = 1 / l2
	}
	for y := ay; y <= by; y++ {
		for x := ax; x <= bx; x++ {
			ex, ey := float32(x)+0.5-x0, float32(y)+0.5-y0
			s := min(1, max(0, (ex*dx+ey*dy)*inv))
			ex, ey = ex-s*dx, ey-s*dy
			d := ex*ex + ey*ey
			i := y*t.side + x
			if d < k.dist[i] && d < reach*reach {
				if k.dist[i] >= 1e9 {
					k.touch = append(k.touch, int32(i))
				}
				k.dist[i], k.near[i] = d, near
			}
		}
	}
}

// inked returns how much of a pixel a line covers, given the square of its
// distance. Lines thinner than a pixel are paler.
func (f *frame) inked(d2 float32) float32 {
	d := float32(math.Sqrt(float64(d2)))
	h := f.ink.half
	return min(1, max(0, h+0.5-d)) * min(1, 2*h)
}
