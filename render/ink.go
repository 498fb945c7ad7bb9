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
	cells []cell
	dist  []float32 // to the nearest piece of line
	near  []float32 // nearness of that line
	touch []int32   // pixels that dist was set for
	right []border  // between a pixel and the next on its right
	down  []border  // between a pixel and the next below
}

// cell is what a pixel shows for the most part.
type cell struct {
	slot    uint32
	part    int32   // -1 for the ground
	n       float32 // nearness of one of its samples
	step    float32 // nearness that counts as a jump
	x, y, z float32 // unit normal towards the viewer
	nl      float32 // cosine between it and the key light
	whole   bool    // its colour is that of the pixel
}

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
	k.cells = grow(k.cells, t.side*t.side)
	t.fillCells()
	if !(t.f.ink.half > 0) {
		return
	}
	k.ready(t.side*t.side, t.clip.Min.Y*t.side, t.clip.Max.Y*t.side)
	any := false
	for y := t.clip.Min.Y; y < t.clip.Max.Y; y++ {
		for x := t.clip.Min.X; x < t.clip.Max.X; x++ {
			i := y*t.side + x
			p := &k.cells[i]
			if x+1 < t.clip.Max.X && !p.goesOn(&k.cells[i+1]) && t.differ(i, i+1, 1, 0, &k.right[i]) {
				any = true
			}
			if y+1 < t.clip.Max.Y && !p.goesOn(&k.cells[i+t.side]) && t.differ(i, i+t.side, 0, 1, &k.down[i]) {
				any = true
			}
		}
	}
	if any {
		t.join(t.clip)
	}
}

// goesOn tells whether the surface of a pixel goes on smoothly into another.
func (p *cell) goesOn(q *cell) bool {
	if p.slot == q.slot {
		return true
	}
	d := p.n - q.n
	return p.part == q.part && d < p.step && d > -p.step && p.x*q.x+p.y*q.y+p.z*q.z > creaseCos
}

// ready makes the buffers fit a canvas of n pixels and empties them, the
// borders from one pixel to another.
func (k *inkTile) ready(n, from, to int) {
	if len(k.dist) != n {
		k.dist, k.near = make([]float32, n), make([]float32, n)
		k.right, k.down = make([]border, n), make([]border, n)
		for i := range k.dist {
			k.dist[i] = 1e9
		}
		k.touch = k.touch[:0]
	}
	for _, i := range k.touch {
		k.dist[i] = 1e9
	}
	k.touch = k.touch[:0]
	clear(k.right[from:to])
	clear(k.down[from:to])
}

// fillCells finds what every pixel shows for the most part.
func (t *tile) fillCells() {
	for y := t.clip.Min.Y; y < t.clip.Max.Y; y++ {
		t.sights.reset()
		for x := t.clip.Min.X; x < t.clip.Max.X; x += lanes {
			valid := laneBits(0, t.clip.Max.X-x)
			any, same := t.scan(y*t.side + x)
			for m := valid &^ any; m != 0; m &= m - 1 {
				t.lines.cells[y*t.side+x+lowest(m)] = cell{part: -1}
			}
			if any &= valid; any == 0 {
				continue
			}
			b := t.sights.block()
			t.sights.owner[b] = int32(x)
			for m := any; m != 0; m &= m - 1 {
				t.fillCell(b, x, y, lowest(m), same)
			}
		}
		t.seeSights()
		for b := range t.sights.n {
			t.readCells(&t.sights.all[b], y*t.side+int(t.sights.owner[b]))
		}
	}
}

// fillCell finds what pixel i of the group at x shows, and wants its sight in
// block b.
func (t *tile) fillCell(b, x, y, i int, same uint8) {
	x += i
	c := &t.lines.cells[y*t.side+x]
	keys := t.keys[(y*t.side+x)<<t.lg:][:1<<t.lg]
	slot := t.scanned.slot[i]
	if same>>i&1 == 0 {
		slot = t.whole(keys)
	}
	mx, my := float32(0.5), float32(0.5)
	whole := slot != 0
	if !whole {
		best := uint32(0)
		for todo := uint32(t.full); todo != 0; {
			mask, s := t.partGroup(keys, todo)
			todo &^= mask
			if bits.OnesCount32(mask) > bits.OnesCount32(best) {
				best, slot = mask, s
			}
		}
		if slot == 0 {
			*c = cell{part: -1}
			return
		}
		mx, my = t.middle(best)
	}
	t.aim(&t.sights.all[b], i, slot, float32(x)+mx, float32(y)+my)
	c.slot, c.part, c.whole = slot, t.slots[slot].part, whole
	c.whole = whole && t.f.parts[c.part].hatch.period == 0
	for _, k := range keys {
		if uint32(k) == slot {
			c.n = math.Float32frombits(uint32(k >> 32))
			break
		}
	}
	c.step = jumpPixels * t.f.pixelDepth(c.part, c.n)
}

// readCells takes the normals of a block to the cells, of which i is the
// first.
func (t *tile) readCells(o *eight, i int) {
	for j := range lanes {
		if o.slot[j] != 0 {
			c := &t.lines.cells[i+j]
			c.x, c.y, c.z, c.nl = o.nx[j], o.ny[j], o.nz[j], o.nl[j]
		}
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
	p, q := &t.lines.cells[i], &t.lines.cells[j]
	if p.part < 0 && q.part < 0 {
		return false
	}
	if p.part != q.part {
		front := p
		if p.part < 0 || q.part >= 0 && q.n > p.n {
			front = q
		}
		if !t.f.parts[front.part].outline {
			return false
		}
		// Where a drawn line dips into a body there is no edge.
		if p.part >= 0 && q.part >= 0 && (t.f.parts[p.part].form == formStroke || t.f.parts[q.part].form == formStroke) &&
			abs32(p.n-q.n) < 12*t.f.pixelDepth(front.part, front.n) {
			return false
		}
		b.on, b.near = true, front.n
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
	p, q := &t.lines.cells[i], &t.lines.cells[j]
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
		for x := area.Min.X; x+1 < area.Max.X; x++ {
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

// lined returns which of the pixels of a group, of which i is the first, have
// an outline over what is opaque.
func (t *tile) lined(i int, valid uint8) (bit uint8) {
	if !(t.f.ink.half > 0) {
		return 0
	}
	for m := valid; m != 0; m &= m - 1 {
		if k := lowest(m); t.lines.dist[i+k] < 1e9 {
			bit |= 1 << k
		}
	}
	return bit
}

// lineStrip makes a strip of the outlines over what is opaque, for a group
// that has other strips too.
func (t *tile) lineStrip(i int, lines uint8) int32 {
	k := t.takeStrip(-1, -1)
	s := &t.strips[k]
	c := &t.f.light.line
	s.even, s.a, s.n = true, [lanes]float32{}, [lanes]float32{}
	for m := lines; m != 0; m &= m - 1 {
		j := lowest(m)
		t.paint(s, j, t.full, t.lines.near[i+j], c[0], c[1], c[2], t.f.inked(t.lines.dist[i+j]))
	}
	return k
}

// inkLayer draws the outline of a translucent sheet as strips: where the
// samples of the layer end.
func (t *tile) inkLayer(l *layer, part int32) {
	f := t.f
	if !(f.ink.half > 0) || !f.parts[part].outline {
		return
	}
	k := &t.lines
	area := t.clip
	area.Min.Y, area.Max.Y = max(area.Min.Y, l.y0-1), min(area.Max.Y, l.y1+2)
	k.ready(t.side*t.side, area.Min.Y*t.side, area.Max.Y*t.side)
	any := false
	for y := area.Min.Y; y < area.Max.Y; y++ {
		for x := area.Min.X; x < area.Max.X; x++ {
			i := y*t.side + x
			m := t.maskAt(l, x, y)
			if x+1 < area.Max.X && m != t.maskAt(l, x+1, y) && t.rim(l, part, x, y, x+1, y, &k.right[i]) {
				any = true
			}
			if y+1 < area.Max.Y && m != t.maskAt(l, x, y+1) && t.rim(l, part, x, y, x, y+1, &k.down[i]) {
				any = true
			}
		}
	}
	if !any {
		return
	}
	t.join(area)
	for _, i := range k.touch {
		t.inks = append(t.inks, inkFrag{pixel: i, n: k.near[i], a: f.inked(k.dist[i]), part: part})
	}
}

// maskAt returns the samples of a pixel that a layer covers.
func (t *tile) maskAt(l *layer, x, y int) uint16 {
	g, lane := t.groupOf(x, y)
	if k := l.at[g]; k >= 0 {
		return t.strips[k].mask[lane]
	}
	return 0
}

// rim fills in the border between two neighbouring pixels of which a layer
// covers one for the most part and the other not.
func (t *tile) rim(l *layer, part int32, x, y, x1, y1 int, b *border) bool {
	n := float32(int(1) << t.lg)
	cp, cq := float32(bits.OnesCount16(t.maskAt(l, x, y)))/n, float32(bits.OnesCount16(t.maskAt(l, x1, y1)))/n
	if (cp >= 0.5) == (cq >= 0.5) {
		return false
	}
	at := cp + cq - 0.5
	if cp < 0.5 {
		at = 1 - at
		x, y, x1, y1 = x1, y1, x, y
	}
	b.on, b.at = true, min(1, max(0, at))
	g, lane := t.groupOf(x, y)
	// A little nearer than the sheet, so that a line where it dips into a
	// body is seen on both sides; but facets at the rim are so steep that
	// their slope says little.
	z, zx, zy := t.plane(t.strips[l.at[g]].slot[lane], float32(min(x, x1))+0.5, float32(min(y, y1))+0.5)
	d := t.f.pixelDepth(part, z)
	b.near = z + min(2*(abs32(zx)+abs32(zy)), 10*d) + 4*d
	return true
}

// inkFrag is a pixel of a translucent sheet's outline.
type inkFrag struct {
	pixel, part int32
	n, a        float32
}

// addInks turns the outlines of translucent sheets into strips.
func (t *tile) addInks() {
	lc := &t.f.light.line
	l := &t.front
	last := int32(-1)
	for _, k := range t.inks {
		if k.part != last {
			last = k.part
			t.forget(l)
		}
		x, y := int(k.pixel)%t.side, int(k.pixel)/t.side
		if k.a <= 0 || !image.Pt(x, y).In(t.inner) {
			continue
		}
		mask := t.before(int(k.pixel), k.n)
		if mask == 0 {
			continue
		}
		g, lane := t.groupOf(x, y)
		s := t.sheet(l, g, y, k.part)
		s.rank = outline
		t.paint(s, lane, mask, k.n, lc[0], lc[1], lc[2], k.a)
	}
	t.forget(l)
}
