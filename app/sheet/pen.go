package sheet

import (
	"image"
	"image/color"
	"math"

	"golang.org/x/image/vector"

	"lobewright/render"
)

// A pen makes masks of areas and lays colours through them.
type pen struct {
	raster vector.Rasterizer
	mask   image.Alpha
	rim    []uint8
}

// begin makes the mask ready for a part of the picture.
func (p *pen) begin(r image.Rectangle) {
	p.raster.Reset(r.Dx(), r.Dy())
	n := r.Dx() * r.Dy()
	if cap(p.mask.Pix) < n {
		p.mask.Pix = make([]uint8, n)
	}
	p.mask.Pix, p.mask.Stride, p.mask.Rect = p.mask.Pix[:n], r.Dx(), r.Sub(r.Min)
	clear(p.mask.Pix)
}

// end draws what was outlined since begin.
func (p *pen) end() { p.raster.Draw(&p.mask, p.mask.Rect, image.Opaque, image.Point{}) }

// fill lays a colour on polygons given in millimetres.
func (p *painter) fill(polygons [][][2]float64, c color.NRGBA) {
	var all [][2]float64
	for _, polygon := range polygons {
		all = append(all, polygon...)
	}
	if len(all) == 0 || c.A == 0 {
		return
	}
	box := p.pixels(around(all, 0))
	if box.Intersect(p.dst.Rect).Empty() {
		return
	}
	p.pen.begin(box)
	for _, polygon := range polygons {
		for i, q := range polygon {
			x, y := float32(q[0]*p.perMM-float64(box.Min.X)), float32(q[1]*p.perMM-float64(box.Min.Y))
			if i == 0 {
				p.pen.raster.MoveTo(x, y)
			} else {
				p.pen.raster.LineTo(x, y)
			}
		}
		p.pen.raster.ClosePath()
	}
	p.pen.end()
	p.lay(box, p.pen.mask.Pix, c)
}

// pixels is the rectangle of pixels that holds one in millimetres, with a rim.
func (p *painter) pixels(r Rect) image.Rectangle {
	return image.Rect(
		int(math.Floor(r.X*p.perMM))-1, int(math.Floor(r.Y*p.perMM))-1,
		int(math.Ceil((r.X+r.W)*p.perMM))+1, int(math.Ceil((r.Y+r.H)*p.perMM))+1)
}

// lay mixes a colour over the part box of the picture through a mask.
func (p *painter) lay(box image.Rectangle, mask []uint8, c color.NRGBA) {
	part := box.Intersect(p.dst.Rect)
	for y := part.Min.Y; y < part.Max.Y; y++ {
		row := p.dst.Pix[p.dst.PixOffset(part.Min.X, y):]
		covers := mask[(y-box.Min.Y)*box.Dx()+part.Min.X-box.Min.X:][:part.Dx()]
		for x, cover := range covers {
			if cover != 0 {
				over(row[4*x:4*x+4:4*x+4], c, uint32(cover))
			}
		}
	}
}

// over mixes a colour over a premultiplied pixel; cover is up to 255.
func over(pixel []uint8, c color.NRGBA, cover uint32) {
	a := (uint32(c.A)*cover + 127) / 255
	rest := 255 - a
	for i, v := range [4]uint8{c.R, c.G, c.B, 255} {
		pixel[i] = uint8((uint32(v)*a + uint32(pixel[i])*rest + 127) / 255)
	}
}

// text paints a line of type with its halo.
func (p *painter) text(t Text) {
	glyphs := p.fonts.Glyphs(t.Runs, t.Size)
	if len(glyphs) == 0 {
		return
	}
	room := Box(t, p.fonts)
	em := t.Size * 25.4 / 72
	// Slanted signs reach over their ends, accents above the capitals.
	room.X, room.Y, room.W, room.H = room.X-0.35*em, room.Y-0.35*em, room.W+0.7*em, room.H+0.6*em
	box := p.pixels(room).Inset(-int(math.Ceil(t.Halo*p.perMM)) - 1)
	if box.Intersect(p.dst.Rect).Empty() {
		return
	}
	p.pen.begin(box)
	for _, g := range glyphs {
		p.glyph(g, t.X*p.perMM-float64(box.Min.X), t.Y*p.perMM-float64(box.Min.Y))
	}
	p.pen.end()
	if t.Halo > 0 {
		p.lay(box, p.pen.spread(t.Halo*p.perMM), t.HaloColor)
	}
	p.lay(box, p.pen.mask.Pix, t.Color)
}

// glyph outlines a sign; x and y are the text's origin in the mask.
func (p *painter) glyph(g render.Glyph, x, y float64) {
	at := func(q [2]float64) (float32, float32) {
		return float32(x + q[0]*p.perMM), float32(y - q[1]*p.perMM)
	}
	z := &p.pen.raster
	for _, s := range g.Outline() {
		ax, ay := at(s.Points[0])
		switch s.Kind {
		case 'M':
			z.ClosePath()
			z.MoveTo(ax, ay)
		case 'L':
			z.LineTo(ax, ay)
		case 'Q':
			bx, by := at(s.Points[1])
			z.QuadTo(ax, ay, bx, by)
		case 'C':
			bx, by := at(s.Points[1])
			cx, cy := at(s.Points[2])
			z.CubeTo(ax, ay, bx, by, cx, cy)
		}
	}
	z.ClosePath()
}

// spread is the mask widened by a radius in pixels: every pixel on the rim of
// a sign casts a disc.
func (p *pen) spread(radius float64) []uint8 {
	w, h, pix := p.mask.Stride, p.mask.Rect.Dy(), p.mask.Pix
	if cap(p.rim) < len(pix) {
		p.rim = make([]uint8, len(pix))
	}
	p.rim = p.rim[:len(pix)]
	copy(p.rim, pix)
	r := int(math.Ceil(radius))
	disc := make([]float64, 0, (2*r+1)*(2*r+1))
	for dy := -r; dy <= r; dy++ {
		for dx := -r; dx <= r; dx++ {
			disc = append(disc, min(1, max(0, radius+0.5-math.Hypot(float64(dx), float64(dy)))))
		}
	}
	for y := r; y < h-r; y++ {
		for x := r; x < w-r; x++ {
			i := y*w + x
			c := pix[i]
			if c == 0 || c == 255 && pix[i-1] == 255 && pix[i+1] == 255 && pix[i-w] == 255 && pix[i+w] == 255 {
				continue
			}
			k := 0
			for dy := -r; dy <= r; dy++ {
				row := p.rim[i+dy*w-r:][:2*r+1]
				for dx := range row {
					row[dx] = max(row[dx], uint8(disc[k]*float64(c)))
					k++
				}
			}
		}
	}
	return p.rim
}
