package render

import (
	"image"
	"math"
)

// tileSide is the side of a tile in pixels. A tile's samples stay in the
// processor's cache.
const tileSide = 48

// A batch is a run of triangles of one part. It sorts them into tiles.
type batch struct {
	part     int32
	from, to int32
	rect     image.Rectangle // tiles that the batch touches
	offset   []int32         // of a tile's first entry, and one more
	entries  []uint32        // triangle of the mesh, or loose | index
	loose    []loose
}

// loose is a triangle made by cutting one at the near limit. weight gives its
// corners as mixtures of the corners of the uncut triangle.
type loose struct {
	v      [3]vert
	weight [3][3]float32
	tri    uint32
}

const looseBit = 1 << 31

// item is the unit that tiles list: a batch, or a part that is not a mesh.
type item struct {
	part  int32
	batch int32 // -1 for none
	rect  image.Rectangle
	first int32 // stroke or label
}

// binScratch is what a worker needs to sort a batch.
type binScratch struct {
	tri            []uint32
	rect           [][4]int16
	count          []int32
	all            image.Rectangle // tiles of all triangles
	lx, ly, hx, hy float32         // the band with its apron
	rows           float64         // sample rows a pixel
}

const (
	chunkSize = 16384
	batchSize = 8192
)

// split cuts the meshes into chunks of vertices and batches of triangles.
func (f *frame) split() {
	f.verts = grow(f.verts, f.nVert)
	f.chunks = f.chunks[:0]
	old := f.batches[:cap(f.batches)]
	f.batches = f.batches[:0]
	for i := range f.parts {
		p := &f.parts[i]
		if p.form != formMesh {
			continue
		}
		n := len(p.mesh.Positions)
		p.chunk0 = int32(len(f.chunks))
		for a := 0; a < n; a += chunkSize {
			f.chunks = append(f.chunks, chunk{part: int32(i), from: int32(a), to: int32(min(n, a+chunkSize))})
		}
		n = min(len(p.mesh.Triangles), looseBit-1)
		p.index = int32(len(f.batches))
		for a := 0; a < n; a += batchSize {
			var b batch
			if k := len(f.batches); k < len(old) {
				b = old[k]
			}
			b.part, b.from, b.to = int32(i), int32(a), int32(min(n, a+batchSize))
			f.batches = append(f.batches, b)
		}
		p.count = int32(len(f.batches)) - p.index
	}
}

// projectChunk takes a chunk of vertices to the picture.
func (r *Renderer) projectChunk(_ *worker, i int) {
	f := &r.frame
	c := f.chunks[i]
	p := &f.parts[c.part]
	pr := &f.projs[p.proj]
	m := p.cam
	out := f.verts[p.vert0+int(c.from) : p.vert0+int(c.to)]
	in := p.mesh.Positions[c.from:c.to]
	sx, sy := float32(pr.f), float32(-pr.f)
	cx, cy := float32(pr.cx), float32(pr.cy)
	k0, k1 := float32(pr.k0), float32(pr.k1)
	near := float32(1 / pr.nMax)
	behind := false
	for j, v := range in {
		x := m[0]*v[0] + m[1]*v[1] + m[2]*v[2] + m[3]
		y := m[4]*v[0] + m[5]*v[1] + m[6]*v[2] + m[7]
		z := m[8]*v[0] + m[9]*v[1] + m[10]*v[2] + m[11]
		o := &out[j]
		if !pr.persp {
			o.x, o.y, o.n = snap(cx+sx*x), snap(cy+sy*y), k0+k1*z
			continue
		}
		if !(-z >= near) {
			*o = vert{n: -1}
			behind = true
			continue
		}
		n := -1 / z
		o.x, o.y, o.n = snap(cx+sx*x*n), snap(cy+sy*y*n), n
	}
	f.chunks[i].behind = behind
	if p.mesh.Normals == nil {
		return
	}
	k := p.nrm
	for j, g := range p.mesh.Normals[c.from:c.to] {
		o := &out[j]
		w := float32(1)
		if pr.persp {
			w = o.n
		}
		o.nx = (k[0]*g[0] + k[1]*g[1] + k[2]*g[2]) * w
		o.ny = (k[3]*g[0] + k[4]*g[1] + k[5]*g[2]) * w
		o.nz = (k[6]*g[0] + k[7]*g[1] + k[8]*g[2]) * w
	}
}

// binBatch sorts a batch of triangles into tiles. Those that cannot be seen
// are left out: turned away, without a sample, off the picture.
func (r *Renderer) binBatch(w *worker, i int) {
	f := &r.frame
	b := &f.batches[i]
	p := &f.parts[b.part]
	s := &w.bin
	b.loose = b.loose[:0]
	vs := f.verts[p.vert0 : p.vert0+len(p.mesh.Positions)]
	nv := uint32(len(vs))
	cull := p.cull && !f.inside(p)
	sign := float32(1)
	if p.mirrored {
		sign = -1
	}
	s.begin(f)
	for t, tri := range p.mesh.Triangles[b.from:b.to] {
		if tri[0] >= nv || tri[1] >= nv || tri[2] >= nv {
			continue
		}
		a, c, d := &vs[tri[0]], &vs[tri[1]], &vs[tri[2]]
		if !(a.n > 0 && c.n > 0 && d.n > 0) {
			n := len(b.loose)
			f.cutNear(b, p, uint32(t)+uint32(b.from))
			for k := n; k < len(b.loose); k++ {
				l := &b.loose[k]
				s.add(f, looseBit|uint32(k), &l.v[0], &l.v[1], &l.v[2])
			}
			continue
		}
		// Positive when the corners run counter-clockwise for the viewer.
		area := ((c.x-a.x)*(a.y-d.y) - (d.x-a.x)*(a.y-c.y)) * sign
		if cull {
			if !(area > 0) {
				continue
			}
		} else if !(area > 0 || area < 0) {
			continue
		}
		s.add(f, uint32(t)+uint32(b.from), a, c, d)
	}
	b.rect = image.Rectangle{}
	if len(s.tri) > 0 {
		b.rect = s.all
	}
	b.fill(s)
}

// begin readies for a batch.
func (s *binScratch) begin(f *frame) {
	s.tri, s.rect = s.tri[:0], s.rect[:0]
	s.all = image.Rectangle{Min: image.Pt(math.MaxInt16, math.MaxInt16), Max: image.Pt(-1, -1)}
	lim := f.rect.Inset(-f.apron)
	s.lx, s.ly, s.hx, s.hy = float32(lim.Min.X), float32(lim.Min.Y), float32(lim.Max.X), float32(lim.Max.Y)
	s.rows = float64(int(1) << f.lg)
}

// add adds a triangle that lies on the band and may reach a sample.
func (s *binScratch) add(f *frame, id uint32, a, c, d *vert) {
	x0, x1 := min(a.x, c.x, d.x), max(a.x, c.x, d.x)
	y0, y1 := min(a.y, c.y, d.y), max(a.y, c.y, d.y)
	if !(x1 > s.lx && x0 < s.hx && y1 > s.ly && y0 < s.hy) {
		return
	}
	if y1-y0 < 1 && rowFrom(float64(y0), s.rows) >= rowFrom(float64(y1), s.rows) {
		return
	}
	if x1-x0 < 1 && rowFrom(float64(x0), s.rows) >= rowFrom(float64(x1), s.rows) {
		return
	}
	t := f.tileRect(x0, y0, x1, y1)
	s.tri = append(s.tri, id)
	s.rect = append(s.rect, t)
	s.all.Min.X, s.all.Min.Y = min(s.all.Min.X, int(t[0])), min(s.all.Min.Y, int(t[1]))
	s.all.Max.X, s.all.Max.Y = max(s.all.Max.X, int(t[2])+1), max(s.all.Max.Y, int(t[3])+1)
}

// fill makes the lists of a batch's tiles from the sorted-out triangles.
func (b *batch) fill(s *binScratch) {
	w, n := b.rect.Dx(), b.rect.Dx()*b.rect.Dy()
	b.offset = grow(b.offset, n+1)
	s.count = grow(s.count, n)
	clear(s.count)
	x0, y0 := int16(b.rect.Min.X), int16(b.rect.Min.Y)
	for _, t := range s.rect {
		for y := t[1] - y0; y <= t[3]-y0; y++ {
			for x := t[0] - x0; x <= t[2]-x0; x++ {
				s.count[int(y)*w+int(x)]++
			}
		}
	}
	sum := int32(0)
	for i, c := range s.count {
		b.offset[i] = sum
		s.count[i] = sum
		sum += c
	}
	b.offset[n] = sum
	b.entries = grow(b.entries, int(sum))
	for i, t := range s.rect {
		for y := t[1] - y0; y <= t[3]-y0; y++ {
			for x := t[0] - x0; x <= t[2]-x0; x++ {
				k := &s.count[int(y)*w+int(x)]
				b.entries[*k] = s.tri[i]
				*k++
			}
		}
	}
}

// tileRect returns the first and last tile in x and y that a box touches,
// each with its apron.
func (f *frame) tileRect(x0, y0, x1, y1 float32) [4]int16 {
	a := float32(f.apron)
	t := f.tiles
	to := func(v float32, lo, hi int) int16 {
		if v < 0 {
			v = 0
		}
		return int16(min(max(int(v*(1.0/tileSide)), lo), hi-1))
	}
	return [4]int16{
		to(x0-a, t.Min.X, t.Max.X), to(y0-a, t.Min.Y, t.Max.Y),
		to(x1+a, t.Min.X, t.Max.X), to(y1+a, t.Min.Y, t.Max.Y),
	}
}

// inside tells whether the eye may be inside the part's mesh or cut it: a
// surface around the eye has vertices behind the eye.
func (f *frame) inside(p *part) bool {
	if !p.persp {
		return false
	}
	for _, c := range f.chunks[p.chunk0 : int(p.chunk0)+(len(p.mesh.Positions)+chunkSize-1)/chunkSize] {
		if c.behind {
			return true
		}
	}
	return false
}

// cutNear cuts a triangle of the mesh at the near limit and adds what is left
// to the batch's loose triangles.
func (f *frame) cutNear(b *batch, p *part, t uint32) {
	pr := &f.projs[p.proj]
	tri := p.mesh.Triangles[t]
	near := float32(1.00001 / pr.nMax)
	type corner struct {
		q [3]float32
		w [3]float32
	}
	var in [3]corner
	for k, v := range tri {
		a := p.mesh.Positions[v]
		for r := range 3 {
			in[k].q[r] = p.cam[4*r]*a[0] + p.cam[4*r+1]*a[1] + p.cam[4*r+2]*a[2] + p.cam[4*r+3]
		}
		in[k].w[k] = 1
	}
	var out [4]corner
	n := 0
	for k := range 3 {
		a, c := in[k], in[(k+1)%3]
		da, dc := -a.q[2]-near, -c.q[2]-near
		if da != da || dc != dc {
			return
		}
		if da >= 0 {
			out[n] = a
			n++
		}
		if (da >= 0) != (dc >= 0) {
			s := da / (da - dc)
			for r := range 3 {
				out[n].q[r] = a.q[r] + s*(c.q[r]-a.q[r])
				out[n].w[r] = a.w[r] + s*(c.w[r]-a.w[r])
			}
			n++
		}
	}
	for k := 2; k < n; k++ {
		l := loose{tri: t}
		for i, c := range [3]*corner{&out[0], &out[k-1], &out[k]} {
			x, y, z := pr.point(Vec3{float64(c.q[0]), float64(c.q[1]), float64(c.q[2])})
			v := vert{x: snap(float32(x)), y: snap(float32(y)), n: float32(z)}
			if p.mesh.Normals != nil {
				var g [3]float32
				for k, q := range tri {
					for r := range 3 {
						g[r] += c.w[k] * p.mesh.Normals[q][r]
					}
				}
				r := &p.nrm
				v.nx = (r[0]*g[0] + r[1]*g[1] + r[2]*g[2]) * v.n
				v.ny = (r[3]*g[0] + r[4]*g[1] + r[5]*g[2]) * v.n
				v.nz = (r[6]*g[0] + r[7]*g[1] + r[8]*g[2]) * v.n
			}
			l.v[i], l.weight[i] = v, c.w
		}
		if l.v[0].n > 0 && l.v[1].n > 0 && l.v[2].n > 0 {
			b.loose = append(b.loose, l)
		}
	}
}

// list makes the frame's items and the list of every tile, in the order of
// the scene.
func (f *frame) list() {
	f.items = f.items[:0]
	for i := range f.parts {
		p := &f.parts[i]
		switch p.form {
		case formMesh:
			for k := p.index; k < p.index+p.count; k++ {
				if b := &f.batches[k]; !b.rect.Empty() {
					f.items = append(f.items, item{part: int32(i), batch: k, rect: b.rect})
				}
			}
		case formStroke:
			for k := p.index; k < p.index+p.count; k++ {
				f.addItem(int32(i), k, f.strokes[k].box())
			}
		default:
			f.addItem(int32(i), p.index, p.box)
		}
	}
	w := f.tiles.Dx()
	n := w * f.tiles.Dy()
	f.heads = grow(f.heads, n+1)
	clear(f.heads)
	for i := range f.items {
		t := f.items[i].rect.Sub(f.tiles.Min)
		for y := t.Min.Y; y < t.Max.Y; y++ {
			for x := t.Min.X; x < t.Max.X; x++ {
				f.heads[y*w+x]++
			}
		}
	}
	sum := int32(0)
	for i, c := range f.heads {
		f.heads[i] = sum
		sum += c
	}
	f.listed = grow(f.listed, int(sum))
	for i := range f.items {
		t := f.items[i].rect.Sub(f.tiles.Min)
		for y := t.Min.Y; y < t.Max.Y; y++ {
			for x := t.Min.X; x < t.Max.X; x++ {
				k := &f.heads[y*w+x]
				f.listed[*k] = int32(i)
				*k++
			}
		}
	}
	// Every head now is the end of its list: shift them back.
	copy(f.heads[1:], f.heads[:n])
	f.heads[0] = 0
}

// addItem adds an item that covers a box of the picture.
func (f *frame) addItem(part, first int32, b box) {
	lim := f.rect.Inset(-f.apron)
	if !(b.x1 >= float64(lim.Min.X) && b.x0 <= float64(lim.Max.X) && b.y1 >= float64(lim.Min.Y) && b.y0 <= float64(lim.Max.Y)) {
		return
	}
	t := f.tileRect(float32(b.x0)-1, float32(b.y0)-1, float32(b.x1)+1, float32(b.y1)+1)
	f.items = append(f.items, item{
		part: part, batch: -1, first: first,
		rect: image.Rect(int(t[0]), int(t[1]), int(t[2])+1, int(t[3])+1),
	})
}

// rowFrom returns the first sample row whose place is not above y; rows is
// the number of sample rows a pixel.
func rowFrom(y, rows float64) int {
	const bias = 1 << 20
	return bias - int(0.5-y*rows+bias)
}
