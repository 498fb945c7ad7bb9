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
	strips      []strip
	piles       []int32 // the last strip of every group, or -1
	kept        int     // strips of the canvas; those of a row follow
	perRow, pad int     // groups in a row, and empty pixels before the first
	full        uint16  // the mask of all samples
	allFull     [lanes]uint16
	near        float32 // the far limit

	tris        triEight
	rods        rodKernel
	rounds      roundKernel
	sky         skyKernel
	surf        surf
	free        bool // look beyond the edges of a triangle
	deep        bool // shading needs the nearness
	inks        []inkFrag
	samples     [16][4]float32
	panes       []paneColor // of the translucent discs
	wides       []wide
	calm        bool // all pixels without other layers are calmPixel
	calmPixel   uint32
	groundPixel uint32
	layered     bool // something translucent is on the canvas
	bodies      bool // something opaque is on the canvas
	sights      sights
	scanned     scan
	groups      []group
	pile        []int32 // strips of the row's groups
	mixed       []mixed
	shares      []share
	frags       []frag
	stack       stack
	rearShare   [1]share
	rear        [4]float32
	lines       inkTile
}

// slot says what a sample shows: a triangle of a batch, a kind of surface of
// a round body, or a part alone.
type slot struct {
	part  int32
	batch int32
	tri   uint32
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
	t.keys = grow(t.keys, (n+lanes)<<t.lg) // a group may reach beyond the last row
	t.full = uint16(uint32(1)<<(1<<t.lg) - 1)
	for i := range t.allFull {
		t.allFull[i] = t.full
	}
	// The first pixel without apron begins a group.
	t.pad = -f.apron & (lanes - 1)
	t.perRow = (t.side + t.pad + lanes - 1) / lanes
	t.piles = grow(t.piles, t.side*t.perRow)
	t.front.ready(len(t.piles))
	t.back.ready(len(t.piles))
	t.back.rank = backSheet
	t.tris.ready(t)
}

// reset forgets what the canvas shows.
func (t *tile) reset() {
	t.near = float32(t.f.projs[0].nMin)
	t.empty = uint64(math.Float32bits(t.near)) << 32
	if t.empty == 0 {
		clear(t.keys)
	} else {
		for i := range t.keys {
			t.keys[i] = t.empty
		}
	}
	t.slots = append(t.slots[:0], slot{part: -1})
	t.strips = t.strips[:0]
	t.inks = t.inks[:0]
	t.panes = t.panes[:0]
	t.wides = t.wides[:0]
	t.kept = 0
}

// see finds what every sample shows: first the opaque items, then the
// translucent layers in front of them.
func (t *tile) see(list []int32) {
	f := t.f
	t.reset()
	layered := false
	t.bodies = false
	for _, k := range list {
		it := &f.items[k]
		p := &f.parts[it.part]
		if p.layered || p.form == formLabel {
			layered = true
			continue
		}
		t.opaque(it, p)
	}
	t.bodies = len(t.slots) > 1
	t.layered = layered
	if !layered {
		return
	}
	for i := range t.piles {
		t.piles[i] = -1
	}
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
	t.kept = len(t.strips)
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
