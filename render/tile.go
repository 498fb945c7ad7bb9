package render

import (
	"image"
	"math"
)

// tile is one worker's canvas: a square of the picture with an apron around
// it, as wide as the widest outline. First every sample learns which surface
// is nearest, then translucent layers are collected, then pixels are shaded.
type tile struct {
	f     *frame
	lg    uint
	side  int             // of the canvas with its apron
	x, y  int             // place of the canvas in the whole picture
	clip  image.Rectangle // of the canvas, in its own pixels
	inner image.Rectangle // without the apron
	rows  [2]int          // first and last sample row to draw, in the whole picture
	sx    [16]float64

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

	tris      triEight
	rods      rodKernel
	sky       skyKernel
	surf      surf
	free      bool // look beyond the edges of a triangle
	deep      bool // shading needs the nearness
	inks      []inkFrag
	samples   [16][4]float32
	panes     []paneColor // of the translucent discs
	wides     []wide
	last      stack // the even discs of the pixel before
	calm      bool  // all pixels without other layers are calmPixel
	calmPixel uint32
	bodies    bool // something opaque is on the canvas
	sights    sights
	tasks     []task
	shares    []share
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
	sight  int32   // that shows its colour
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
	t.inner = out.Sub(image.Pt(t.x, t.y))
	t.rows = [2]int{(t.y + t.clip.Min.Y) << t.lg, (t.y + t.clip.Max.Y) << t.lg}
	t.sx = f.sx
	t.deep = f.light.style == Lit
	t.sights.ready(f)
	n := t.side * t.side
	t.keys = grow(t.keys, n<<t.lg)
	t.first = grow(t.first, n)
	if len(t.front.at) != n {
		t.front.at, t.back.at = make([]sheet, n), make([]sheet, n)
	}
	t.tris.ready(t)
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
	t.wides = t.wides[:0]
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
	t.bodies = len(t.slots) > 1
	t.solidAny = t.bodies || t.empty != 0
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
		t.body(&f.quadrics[it.first], p, s, false)
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
	tris, v0 := p.mesh.Triangles, uint32(p.vert0)
	s := &t.tris
	for _, e := range b.entries[b.offset[k]:b.offset[k+1]] {
		if e&looseBit != 0 { // its corners are not in the list
			t.drawBlock(it, p, layered)
			s.ids[0], s.n = e, 1
			t.drawBlock(it, p, layered)
			continue
		}
		i := s.n & 7
		tri := &tris[e]
		s.a[i], s.b[i], s.c[i], s.ids[i] = v0+tri[0], v0+tri[1], v0+tri[2], e
		if s.n++; s.n == 8 {
			t.drawBlock(it, p, layered)
		}
	}
	t.drawBlock(it, p, layered)
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
		apron := t.f.apron > 0
		form := t.f.parts[part].form
		mesh := form == formMesh || form == formDisc && t.f.discs[t.f.parts[part].index].hole < 0
		for i := range at {
			s := &at[i]
			if s.mask == 0 {
				continue
			}
			if apron && !image.Pt(i%t.side, l.y0+i/t.side).In(t.inner) {
				s.mask = 0 // wanted for outlines alone
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
