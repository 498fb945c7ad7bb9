package render

import (
	"image"
	"math"
)

// tile is one worker's canvas: a square of the picture with an apron around
// it, as wide as the widest outline. First every sample learns which surface
// is nearest, then translucent layers are collected, then pixels are shaded.
type tile struct {
	f    *frame
	lg   uint
	side int             // of the canvas with its apron
	x, y int             // place of the canvas in the whole picture
	clip image.Rectangle // of the canvas, in its own pixels
	rows [2]int          // first and last sample row to draw, in the whole picture
	sx   [16]float64

	// keys holds, for every sample, the nearness of the nearest surface in
	// the upper half and its slot in the lower. Positive floats are ordered
	// as their bits are.
	keys        []uint64
	empty       uint64
	slots       []slot
	front, back layer
	frags       []frag
	first       []int32 // of a pixel's layers
	anyFrag     bool
	solidAny    bool // something opaque is on the canvas, or there is a far limit

	kernel    kernel
	sky       skyKernel
	surf      surf
	free      bool // look beyond the edges of a triangle
	deep      bool // shading needs the nearness
	inks      []inkFrag
	samples   [16][4]float32
	panes     []paneColor     // of the translucent discs
	last      [maxEven]uint32 // the even discs of the pixel before, from the front
	lastCount int
	lastPixel uint32
	sorted    []int32
	colors    [][4]float32
	lines     inkTile
}

// slot says what a sample shows: a triangle of a batch, a kind of surface of
// a round body, or a part alone.
type slot struct {
	part  int32
	batch int32
	tri   uint32
}

// layer collects one sheet of a translucent part, pixel by pixel.
type layer struct {
	at     []sheet
	any    bool
	y0, y1 int // rows that were touched
}

// sheet is a layer's share of a pixel; n, nx and ny are as in frag and set
// for meshes only.
type sheet struct {
	mask, slot uint32
	n, nx, ny  float32
}

// frag is one translucent sheet in one pixel.
type frag struct {
	next   int32
	slot   uint32
	mask   uint32
	n      float32 // nearness at the pixel's middle
	nx, ny float32 // its growth to the right and down
	a      float32 // opacity of a line
}

// drawTile draws one tile of the frame into the destination.
func (r *Renderer) drawTile(w *worker, i int) {
	f := &r.frame
	list := f.listed[f.heads[i]:f.heads[i+1]]
	tx, ty := f.tiles.Min.X+i%f.tiles.Dx(), f.tiles.Min.Y+i/f.tiles.Dx()
	out := image.Rect(tx*tileSide, ty*tileSide, (tx+1)*tileSide, (ty+1)*tileSide).Intersect(f.rect)
	if out.Empty() {
		return
	}
	if len(list) == 0 {
		f.fillGround(out)
		return
	}
	t := &w.tile
	t.begin(f, out)
	t.see(list)
	t.resolve(out)
}

// begin readies the canvas for a part of the picture.
func (t *tile) begin(f *frame, out image.Rectangle) {
	t.f, t.lg = f, uint(f.lg)
	t.side = tileSide + 2*f.apron
	t.x, t.y = out.Min.X/tileSide*tileSide-f.apron, out.Min.Y/tileSide*tileSide-f.apron
	t.clip = out.Inset(-f.apron).Sub(image.Pt(t.x, t.y))
	t.rows = [2]int{(t.y + t.clip.Min.Y) << t.lg, (t.y + t.clip.Max.Y) << t.lg}
	t.sx = f.sx
	t.deep = f.light.style == Lit
	n := t.side * t.side
	t.keys = grow(t.keys, n<<t.lg)
	t.first = grow(t.first, n)
	if len(t.front.at) != n {
		t.front.at, t.back.at = make([]sheet, n), make([]sheet, n)
	}
}

// reset forgets what the canvas shows.
func (t *tile) reset() {
	t.empty = uint64(math.Float32bits(float32(t.f.projs[0].nMin))) << 32
	if t.empty == 0 {
		clear(t.keys)
	} else {
		for i := range t.keys {
			t.keys[i] = t.empty
		}
	}
	t.slots = append(t.slots[:0], slot{part: -1})
	t.frags = t.frags[:0]
	t.inks = t.inks[:0]
	t.panes = t.panes[:0]
	t.lastCount = 0
	t.anyFrag = false
}

// see finds what every sample shows: first the opaque items, then the
// translucent layers in front of them.
func (t *tile) see(list []int32) {
	f := t.f
	t.reset()
	layered := false
	for _, k := range list {
		it := &f.items[k]
		p := &f.parts[it.part]
		if p.layered || p.form == formLabel {
			layered = true
			continue
		}
		t.opaque(it, p)
	}
	if !layered {
		return
	}
	for i := range t.first {
		t.first[i] = -1
	}
	t.solidAny = len(t.slots) > 1 || t.empty != 0
	last := int32(-1)
	for _, k := range list {
		it := &f.items[k]
		p := &f.parts[it.part]
		if !p.layered && p.form != formLabel {
			continue
		}
		if it.part != last {
			t.flush(last)
			last = it.part
		}
		t.translucent(it, p)
	}
	t.flush(last)
	t.addInks()
}

// opaque draws an item whose samples hide what is behind them.
func (t *tile) opaque(it *item, p *part) {
	f := t.f
	switch p.form {
	case formMesh:
		t.batch(it, p, false)
	case formQuadric:
		s := uint32(len(t.slots))
		for k := range uint32(surfaceKinds) {
			t.slots = append(t.slots, slot{it.part, -1, k})
		}
		q := &f.quadrics[it.first]
		if q.kind == rodSphere && q.mode == wallBetween && q.safe {
			t.ball(q, &p.box, s)
		} else {
			t.body(q, p, s, false)
		}
	case formDisc:
		t.slots = append(t.slots, slot{it.part, -1, 0})
		t.plate(&f.discs[it.first], p, false)
	case formStroke:
		t.slots = append(t.slots, slot{it.part, -1, uint32(it.first)})
		t.stroke(&f.strokes[it.first], false)
	}
}

// translucent adds an item to the layers of its part.
func (t *tile) translucent(it *item, p *part) {
	f := t.f
	switch p.form {
	case formMesh:
		t.batch(it, p, true)
	case formQuadric:
		s := uint32(len(t.slots))
		for k := range uint32(surfaceKinds) {
			t.slots = append(t.slots, slot{it.part, -1, k})
		}
		t.body(&f.quadrics[it.first], p, s, true)
	case formDisc:
		t.slots = append(t.slots, slot{it.part, -1, uint32(len(t.panes))})
		t.panes = append(t.panes, t.evenColor(p))
		t.plate(&f.discs[it.first], p, true)
	case formStroke:
		t.slots = append(t.slots, slot{it.part, -1, uint32(it.first)})
		t.stroke(&f.strokes[it.first], true)
	case formLabel:
		t.label(it)
	}
}

// batch draws the triangles of a batch that this tile lists.
func (t *tile) batch(it *item, p *part, layered bool) {
	f := t.f
	b := &f.batches[it.batch]
	tx, ty := (t.x+f.apron)/tileSide-b.rect.Min.X, (t.y+f.apron)/tileSide-b.rect.Min.Y
	k := ty*b.rect.Dx() + tx
	vs := f.verts[p.vert0 : p.vert0+len(p.mesh.Positions)]
	tris := p.mesh.Triangles
	for _, e := range b.entries[b.offset[k]:b.offset[k+1]] {
		var a, c, d *vert
		if e&looseBit != 0 {
			l := &b.loose[e&^looseBit]
			a, c, d = &l.v[0], &l.v[1], &l.v[2]
		} else {
			tri := &tris[e]
			a, c, d = &vs[tri[0]], &vs[tri[1]], &vs[tri[2]]
		}
		s := uint32(len(t.slots))
		if !layered {
			if t.triangle(a, c, d, s, nil) {
				t.slots = append(t.slots, slot{it.part, it.batch, e})
			}
			continue
		}
		l := &t.front
		if ((c.x-a.x)*(a.y-d.y)-(d.x-a.x)*(a.y-c.y) < 0) != p.mirrored {
			l = &t.back
		}
		// Known before it is drawn: a layer may turn into fragments on the way.
		t.slots = append(t.slots, slot{it.part, it.batch, e})
		if !t.triangle(a, c, d, s, l) {
			t.slots = t.slots[:s]
		}
	}
}

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

// ball draws a sphere or ellipsoid that lies wholly in front of the eye.
func (t *tile) ball(q *quadric, b *box, slot uint32) {
	j0, j1 := t.rowRange(b.y0, b.y1)
	step := 1 / float64(int(1)<<t.lg)
	keys := t.keys
	for j := j0; j < j1; j++ {
		y := (float64(j) + 0.5) * step
		l, r := q.span(y, b.x0, b.x1)
		k := j & (1<<t.lg - 1)
		x0, x1 := t.pixelRange(l, r, k)
		if x0 >= x1 {
			continue
		}
		dy := y - q.my
		b0 := q.b[0] + q.b[2]*dy
		c0, c1, c2 := q.q[0]+dy*(q.q[2]+q.q[5]*dy), q.q[1]+q.q[4]*dy, q.q[3]
		row := (((j >> t.lg) - t.y) * t.side << t.lg) + k
		dx := float64(t.x) + t.sx[k] - q.mx
		for x := x0; x < x1; x++ {
			u := float64(x) + dx
			d := c0 + u*(c1+u*c2)
			if d < 0 {
				d = 0
			}
			n := b0 + q.b[1]*u + math.Sqrt(d)
			key := uint64(math.Float32bits(float32(n)))<<32 | uint64(slot)
			if p := &keys[row+x<<t.lg]; int64(key) > int64(*p) {
				*p = key
			}
		}
	}
}

// body draws any round body, opaque or as two layers.
func (t *tile) body(q *quadric, p *part, slot uint32, layered bool) {
	b := &p.box
	j0, j1 := t.rowRange(b.y0, b.y1)
	step := 1 / float64(int(1)<<t.lg)
	nMax := t.f.projs[p.proj].nMax
	if !layered && q.safe && q.mode == wallBetween && (q.slab == slabAhead || q.slab == slabAnyhow) {
		t.rod(q, b, slot)
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

// rod draws an opaque cylinder or cone that lies wholly in front of the eye.
func (t *tile) rod(q *quadric, b *box, slot uint32) {
	j0, j1 := t.rowRange(b.y0, b.y1)
	step := 1 / float64(int(1)<<t.lg)
	keys := t.keys
	ahead := q.slab == slabAhead
	for j := j0; j < j1; j++ {
		y := (float64(j) + 0.5) * step
		l, r := q.span(y, b.x0, b.x1)
		k := j & (1<<t.lg - 1)
		x0, x1 := t.pixelRange(l, r, k)
		if x0 >= x1 {
			continue
		}
		dy := y - q.my
		c0, c1, c2 := q.q[0]+dy*(q.q[2]+q.q[5]*dy), q.q[1]+q.q[4]*dy, q.q[3]
		u := float64(t.x+x0) + t.sx[k] - q.mx
		wall, low, high := q.b.at(u, dy), q.s0.at(u, dy), q.s1.at(u, dy)
		i := ((j>>t.lg-t.y)*t.side+x0)<<t.lg + k
		for ; x0 < x1; x0++ {
			d := c0 + u*(c1+u*c2)
			s := 0.0
			if d > 0 {
				s = math.Sqrt(d)
			} else if c2 >= 0 { // a cone whose span is not bounded
				s = math.Inf(-1)
			}
			in, out := wall+s, wall-s
			near, far, id := low, high, slot+capLow
			if near < far {
				near, far, id = far, near, slot+capHigh
			}
			if near >= in {
				id = slot
			}
			in, out = min(in, near), max(out, far)
			if in >= out && (!ahead || far > 0) {
				key := uint64(math.Float32bits(float32(in)))<<32 | uint64(id)
				if p := &keys[i]; int64(key) > int64(*p) {
					*p = key
				}
			}
			i += 1 << t.lg
			u++
			wall += q.b[1]
			low += q.s0[1]
			high += q.s1[1]
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
		t.pane(d, b, slot, t.f.ink.half > 0 && p.outline)
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

// pane draws a translucent disc without a hole. It is one sheet, so its
// fragments are made at once, pixel row by pixel row, unless the layer is
// wanted for an outline.
func (t *tile) pane(d *disc, b *box, slot uint32, keep bool) {
	n := 1 << t.lg
	y0, y1 := max(t.clip.Min.Y, int(math.Max(-1e6, b.y0))-t.y-1), min(t.clip.Max.Y, int(math.Min(1e6, b.y1))-t.y+2)
	lo, hi := math.Max(b.x0, float64(t.x)), math.Min(b.x1, float64(t.x+t.side+1))
	var piece [2][2]float64
	var x0, x1 [16]int
	nx, ny := float32(d.n[1]), float32(d.n[2])
	full := uint32(1)<<n - 1
	frags := t.frags
	all := d.fills(float64(t.x), float64(t.y), float64(t.x+t.side), float64(t.y+t.side))
	for py := y0; py < y1; py++ {
		from, to, coreFrom, coreTo := math.MaxInt, 0, 0, math.MaxInt
		if all {
			from, to = t.clip.Min.X, t.clip.Max.X
		}
		for k := 0; k < n && !all; k++ {
			x0[k], x1[k] = 0, 0
			y := float64(t.y+py) + (float64(k)+0.5)/float64(n)
			if d.spans(y, lo, hi, &piece) > 0 {
				x0[k], x1[k] = t.pixelRange(piece[0][0], piece[0][1], k)
			}
			if x0[k] < x1[k] {
				from, to = min(from, x0[k]), max(to, x1[k])
			}
			coreFrom, coreTo = max(coreFrom, x0[k]), min(coreTo, x1[k])
		}
		row := d.n[0] + d.n[2]*(float64(t.y+py)+0.5-d.my) + d.n[1]*(float64(t.x)+0.5-d.mx)
		for x := from; x < to; x++ {
			mask := full
			if x < coreFrom || x >= coreTo {
				mask = 0
				for k := range n {
					if x >= x0[k] && x < x1[k] {
						mask |= 1 << k
					}
				}
			}
			i := py*t.side + x
			near := float32(row + d.n[1]*float64(x))
			if t.solidAny {
				keys := t.keys[i<<t.lg:][:n]
				any := t.empty
				for _, key := range keys {
					any |= key
				}
				if any != 0 {
					mask &= t.ahead(keys, near, nx, ny)
					if mask == 0 {
						continue
					}
				}
			}
			if keep {
				t.front.at[i] = sheet{mask, slot, near, nx, ny}
				t.front.touch(py)
				continue
			}
			frags = append(frags, frag{next: t.first[i], slot: slot, mask: mask, n: near, nx: nx, ny: ny})
			t.first[i] = int32(len(frags) - 1)
		}
	}
	t.frags = frags
	t.anyFrag = len(frags) > 0
}

// ahead returns the samples of a pixel where a plane lies in front of what is
// there.
func (t *tile) ahead(keys []uint64, near, nx, ny float32) (mask uint32) {
	step := 1 / float32(len(keys))
	for k, key := range keys {
		at := near + nx*(float32(t.sx[k&15])-0.5) + ny*((float32(k)+0.5)*step-0.5)
		if int64(uint64(math.Float32bits(at))<<32|math.MaxUint32) > int64(key) {
			mask |= 1 << k
		}
	}
	return mask
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
				if t.front.at[py*t.side+x].mask>>k&1 == 0 {
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

// cover adds one sample to a layer when nothing opaque hides it. A sample
// that the layer has already belongs to another sheet: the pixel so far
// becomes a fragment of its own.
func (t *tile) cover(l *layer, py, x, k int, n float32, slot uint32) {
	i := py*t.side + x
	if int64(uint64(math.Float32bits(n))<<32|math.MaxUint32) <= int64(t.keys[i<<t.lg+k]) {
		return
	}
	s := &l.at[i]
	if s.mask>>k&1 != 0 {
		t.emit(s, i)
	}
	l.touch(py)
	s.mask |= 1 << k
	s.slot = slot
}

func (l *layer) touch(y int) {
	if !l.any {
		l.any, l.y0, l.y1 = true, y, y
	} else if y < l.y0 {
		l.y0 = y
	} else if y > l.y1 {
		l.y1 = y
	}
}

// flush turns what the layers hold into fragments.
func (t *tile) flush(part int32) {
	if t.front.any {
		t.inkLayer(&t.front, part)
	}
	for _, l := range [2]*layer{&t.front, &t.back} {
		if !l.any {
			continue
		}
		at := l.at[l.y0*t.side : (l.y1+1)*t.side]
		form := t.f.parts[part].form
		mesh := form == formMesh || form == formDisc && t.f.discs[t.f.parts[part].index].hole < 0
		for i := range at {
			s := &at[i]
			if s.mask == 0 {
				continue
			}
			if mesh {
				t.push(l.y0*t.side+i, frag{slot: s.slot, mask: s.mask, n: s.n, nx: s.nx, ny: s.ny})
				s.mask = 0
			} else {
				t.emit(s, l.y0*t.side+i)
			}
		}
		l.any = false
	}
}

// emit makes a fragment of a layer's share of pixel i and empties it.
func (t *tile) emit(s *sheet, i int) {
	fr := frag{slot: s.slot, mask: s.mask, n: s.n, nx: s.nx, ny: s.ny}
	if t.f.parts[t.slots[s.slot].part].form != formMesh {
		fr.n, fr.nx, fr.ny = t.plane(s.slot, float32(i%t.side)+0.5, float32(i/t.side)+0.5)
	}
	t.push(i, fr)
	s.mask = 0
}

// push adds a fragment to a pixel.
func (t *tile) push(i int, fr frag) {
	fr.next = t.first[i]
	t.first[i] = int32(len(t.frags))
	t.frags = append(t.frags, fr)
	t.anyFrag = true
}
