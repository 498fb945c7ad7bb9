package render

import (
	"image"
	"math"

	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
	"golang.org/x/image/vector"
)

// labels are the texts of a frame.
type labels struct {
	list  []label
	used  int
	set   setter
	fonts *Fonts
	job   func(w *worker, i int)
}

// label is one text on the picture, drawn as a mask of its own.
type label struct {
	part   int32
	runs   []Run
	x, y   float64 // left end of the base line, pixels
	em     float64 // pixels
	halo   float64
	n      float32
	rect   image.Rectangle // of the masks, in the whole picture
	box    box             // of the signs, without halo
	sign   *image.Alpha
	rim    []uint8
	colRim [3]float32
	fixed  bool
}

// typist is a worker's means to draw signs.
type typist struct {
	set  setter
	rast vector.Rasterizer
}

// placeLabels finds the place of every text, pushes apart those that would
// overlap, and draws their masks.
func (r *Renderer) placeLabels(scene *Scene) {
	f := &r.frame
	ls := &r.labels
	ls.used, ls.fonts, f.labels = 0, scene.Fonts, nil
	if scene.Fonts == nil {
		return
	}
	projOf := int32(0)
	for i := range scene.Shapes {
		s := &scene.Shapes[i]
		pr := int32(0)
		seen := s.Material.Opacity > 0 && s.Geometry != nil
		if seen && s.Place != nil {
			projOf++
			pr = projOf
		}
		if !seen {
			continue
		}
		if g, ok := s.Geometry.(Text); ok {
			r.addLabel(scene, s, int32(i), pr, &g)
		}
	}
	pushApart(ls.list[:ls.used], f.w, f.h)
	for i := range ls.list[:ls.used] {
		l := &ls.list[i]
		pad := int(math.Ceil(l.halo)) + 2
		side := 0.35 * l.em // slanted signs reach over their ends
		l.rect = image.Rect(int(math.Floor(l.box.x0-side))-pad, int(math.Floor(l.box.y0-0.3*l.em))-pad,
			int(math.Ceil(l.box.x1+side))+pad, int(math.Ceil(l.box.y1+0.2*l.em))+pad)
		p := &f.parts[l.part]
		p.box = box{float64(l.rect.Min.X), float64(l.rect.Min.Y), float64(l.rect.Max.X), float64(l.rect.Max.Y)}
	}
	if ls.job == nil {
		ls.job = r.drawLabel
	}
	f.labels = ls.list[:ls.used]
	r.phase(ls.used, ls.job)
}

// addLabel measures a text and finds its anchor.
func (r *Renderer) addLabel(scene *Scene, s *Shape, index, proj int32, g *Text) {
	f := &r.frame
	ls := &r.labels
	pr := &f.projs[proj]
	em := g.Size / 72 * 25.4 * f.pxPerMM
	if !(em > 0.5) || !(em < 4096) || len(g.Runs) == 0 {
		return
	}
	q := pr.toCamera(s.Transform).Apply(g.At)
	if !finite3(q) {
		return
	}
	x, y, n := pr.point(q)
	if !(n > 0) || !(x > -1e5 && x < 1e5 && y > -1e5 && y < 1e5) {
		return
	}
	if g.Lift != 0 {
		if pr.persp {
			n = 1 / math.Max(1/n-g.Lift, 1/pr.nMax)
		} else {
			n += g.Lift * pr.k1
		}
	}
	if g.Through && proj == 0 {
		n = 1.9 * pr.nMax
	}
	ls.set.layout(scene.Fonts, g.Runs, em)
	if ls.used == len(ls.list) {
		ls.list = append(ls.list, label{sign: &image.Alpha{}})
	}
	l := &ls.list[ls.used]
	ls.used++
	set := &ls.set
	l.runs, l.em, l.n, l.fixed = g.Runs, em, float32(n), g.Fixed || proj != 0
	l.halo = 0
	if g.Halo > 0 {
		l.halo = math.Min(64, g.Halo*f.pxPerMM)
	}
	l.colRim = f.tone(g.HaloColor)
	ax := math.Max(-1, math.Min(1, g.AlignX))
	ay := math.Max(-1, math.Min(1, g.AlignY))
	l.x = x + g.OffsetX*f.pxPerMM - (ax+1)/2*set.width
	// Aligned by the height of capitals above the base line.
	const capital = 0.7
	l.y = y - g.OffsetY*f.pxPerMM + (ay+1)/2*capital*em
	l.box = box{l.x, l.y - set.ascent, l.x + set.width, l.y + set.descent}
	if !(l.x > -1e5 && l.x < 1e5 && l.y > -1e5 && l.y < 1e5 && set.width < 1e5 && l.em*set.width < 1<<26) {
		ls.used--
		return
	}
	p := f.newPart(s, index, proj)
	p.form, p.flat, p.layered, p.outline = formLabel, true, true, false
	p.index = int32(ls.used - 1)
	l.part = int32(len(f.parts))
	f.parts = append(f.parts, p)
}

// pushApart moves texts that overlap an earlier one to the nearest free place
// around where they belong.
func pushApart(ls []label, w, h int) {
	for i := range ls {
		l := &ls[i]
		if l.fixed {
			continue
		}
		best, bestX, bestY := math.Inf(1), 0.0, 0.0
		step := 0.35 * l.em
		for ring := 0; ring <= 16 && best > 0; ring++ {
			n := 1
			if ring > 0 {
				n = 12
			}
			for k := range n {
				a := 2 * math.Pi * (float64(k) + 0.5) / 12
				dx, dy := float64(ring)*step*math.Cos(a), float64(ring)*step*math.Sin(a)
				if c := crowding(ls, i, dx, dy, w, h); c < best {
					best, bestX, bestY = c, dx, dy
				}
				if best == 0 {
					break
				}
			}
		}
		l.x, l.y = l.x+bestX, l.y+bestY
		l.box = box{l.box.x0 + bestX, l.box.y0 + bestY, l.box.x1 + bestX, l.box.y1 + bestY}
	}
}

// crowding is the area that text i would share with earlier texts when it is
// moved.
func crowding(ls []label, i int, dx, dy float64, w, h int) float64 {
	b := ls[i].box
	b = box{b.x0 + dx, b.y0 + dy, b.x1 + dx, b.y1 + dy}
	sum := 0.0
	for j := range ls {
		if j == i || j > i && !ls[j].fixed {
			continue
		}
		c := &ls[j].box
		x, y := math.Min(b.x1, c.x1)-math.Max(b.x0, c.x0), math.Min(b.y1, c.y1)-math.Max(b.y0, c.y0)
		if x > 0 && y > 0 {
			sum += x * y
		}
	}
	return sum
}

// drawLabel draws the masks of a text's signs and of its halo.
func (r *Renderer) drawLabel(w *worker, i int) {
	f := &r.frame
	l := &r.labels.list[i]
	if l.rect.Intersect(f.rect).Empty() {
		l.sign.Rect = image.Rectangle{}
		return
	}
	t := &w.typist
	t.set.layout(r.labels.fonts, l.runs, l.em)
	wd, ht := l.rect.Dx(), l.rect.Dy()
	t.rast.Reset(wd, ht)
	ox, oy := l.x-float64(l.rect.Min.X), l.y-float64(l.rect.Min.Y)
	for _, g := range t.set.glyphs {
		t.outline(&g, ox, oy, float64(wd), float64(ht))
	}
	m := l.sign
	m.Pix, m.Stride, m.Rect = grow(m.Pix, wd*ht), wd, image.Rect(0, 0, wd, ht)
	clear(m.Pix)
	t.rast.Draw(m, m.Rect, image.Opaque, image.Point{})
	l.rim = grow(l.rim, wd*ht)
	clear(l.rim)
	if l.halo > 0 {
		l.spread(wd, ht)
	}
}

// outline adds a sign to the rasterizer, which wants it within w and h.
func (t *typist) outline(g *glyph, ox, oy, w, h float64) {
	upm := g.font.UnitsPerEm()
	segs, err := g.font.LoadGlyph(&t.set.buf, g.index, fixed.Int26_6(upm)<<6, nil)
	if err != nil {
		return
	}
	k := g.size / float64(upm) / 64
	at := func(p fixed.Point26_6) (float32, float32) {
		return float32(min(max(ox+g.x+float64(p.X)*k, 0), w)), float32(min(max(oy-g.y+float64(p.Y)*k, 0), h))
	}
	for _, s := range segs {
		x, y := at(s.Args[0])
		switch s.Op {
		case sfnt.SegmentOpMoveTo:
			t.rast.ClosePath()
			t.rast.MoveTo(x, y)
		case sfnt.SegmentOpLineTo:
			t.rast.LineTo(x, y)
		case sfnt.SegmentOpQuadTo:
			x1, y1 := at(s.Args[1])
			t.rast.QuadTo(x, y, x1, y1)
		case sfnt.SegmentOpCubeTo:
			x1, y1 := at(s.Args[1])
			x2, y2 := at(s.Args[2])
			t.rast.CubeTo(x, y, x1, y1, x2, y2)
		}
	}
	t.rast.ClosePath()
}

// spread widens the signs by the halo: every pixel on the rim of a sign casts
// a disc.
func (l *label) spread(w, h int) {
	r := int(math.Ceil(l.halo))
	pix := l.sign.Pix
	for y := 1; y < h-1; y++ {
		for x := 1; x < w-1; x++ {
			i := y*w + x
			c := pix[i]
			if c == 0 {
				continue
			}
			l.rim[i] = max(l.rim[i], c)
			if c == 255 && pix[i-1] == 255 && pix[i+1] == 255 && pix[i-w] == 255 && pix[i+w] == 255 {
				continue
			}
			for dy := max(-r, -y); dy <= min(r, h-1-y); dy++ {
				for dx := max(-r, -x); dx <= min(r, w-1-x); dx++ {
					v := l.halo + 0.5 - math.Hypot(float64(dx), float64(dy))
					if v <= 0 {
						continue
					}
					o := &l.rim[i+dy*w+dx]
					*o = max(*o, uint8(math.Min(1, v)*float64(c)))
				}
			}
		}
	}
}

// label adds a text's pixels to the strips of the canvas.
func (t *tile) label(it *item) {
	l := &t.f.labels[it.first]
	if l.sign.Rect.Empty() {
		return
	}
	p := &t.f.parts[it.part]
	r := l.rect.Sub(image.Pt(t.x, t.y)).Intersect(t.inner)
	for y := r.Min.Y; y < r.Max.Y; y++ {
		last := -1
		var s *strip
		for x := r.Min.X; x < r.Max.X; x++ {
			a, b := l.at(x+t.x, y+t.y)
			if a|b == 0 {
				continue
			}
			mask := t.before(y*t.side+x, l.n)
			if mask == 0 {
				continue
			}
			g, lane := t.groupOf(x, y)
			if g != last {
				last, s = g, &t.strips[t.newStrip(g, it.part)]
			}
			r, gr, b8, o := t.labelColor(p, x, y)
			t.paint(s, lane, mask, l.n, r, gr, b8, o)
		}
	}
}

// at returns the coverage of a pixel by the signs and by the halo.
func (l *label) at(x, y int) (sign, rim uint8) {
	i := (y-l.rect.Min.Y)*l.rect.Dx() + x - l.rect.Min.X
	return l.sign.Pix[i], l.rim[i]
}

// labelColor returns the colour and opacity of a text's pixel.
func (t *tile) labelColor(p *part, x, y int) (r, g, b, a float32) {
	l := &t.f.labels[p.index]
	s8, h8 := l.at(x+t.x, y+t.y)
	s, h := float32(s8)/255, float32(h8)/255
	a = s + (1-s)*h
	if a == 0 {
		return 0, 0, 0, 0
	}
	k := (1 - s) * h / a
	c, d := &p.col, &l.colRim
	return c[0] + (d[0]-c[0])*k, c[1] + (d[1]-c[1])*k, c[2] + (d[2]-c[2])*k, a * p.alpha
}
