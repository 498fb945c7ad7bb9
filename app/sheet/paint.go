package sheet

import (
	"context"
	"image"
	"image/color"
	"math"

	"lobewright/render"
	"lobewright/symmetry/message"
)

// samples a pixel: enough that the edges of bodies look even in print.
const samples = 8

// Pixels is the size of the painted sheet at a resolution in dots per inch.
// The error tells of a size that no picture may have.
func (s *Sheet) Pixels(dpi float64) (width, height int, err error) {
	perMM := dpi / 25.4
	w, h := math.Round(s.Width*perMM), math.Round(s.Height*perMM)
	switch {
	case !(w >= 1) || !(h >= 1):
		return 0, 0, message.Errorf("%.4g mm × %.4g mm at %g dots per inch are less than a pixel", s.Width, s.Height, dpi)
	case w > render.MaxSide || h > render.MaxSide:
		return 0, 0, message.Errorf("%g mm × %.5g mm at %g dots per inch are %.0f × %.0f pixels; each side may have %d",
			s.Width, s.Height, dpi, w, h, render.MaxSide)
	}
	return int(w), int(h), nil
}

// Paint paints the whole sheet at a resolution in dots per inch. The same
// sheet gives the same pixels on any number of processors. The error is that
// of ctx, or tells of a size that no picture may have.
func (s *Sheet) Paint(ctx context.Context, dpi float64) (*image.RGBA, error) {
	w, h, err := s.Pixels(dpi)
	if err != nil {
		return nil, err
	}
	img := image.NewRGBA(image.Rect(0, 0, w, h))
	return img, s.PaintBand(ctx, img, dpi)
}

// PaintBand paints the part of the sheet that dst.Rect names, in pixels of the
// whole, so that a large sheet can be written band by band. Bands fit together
// without a seam.
func (s *Sheet) PaintBand(ctx context.Context, dst *image.RGBA, dpi float64) error {
	if _, _, err := s.Pixels(dpi); err != nil {
		return err
	}
	fonts, err := s.Fonts()
	if err != nil {
		return err
	}
	p := &painter{dst: dst, perMM: dpi / 25.4, dpi: dpi, fonts: fonts}
	p.ground(s.Ground)
	for _, item := range s.Items {
		if err := ctx.Err(); err != nil {
			return err
		}
		if err := p.item(ctx, item); err != nil {
			return err
		}
	}
	return nil
}

// A painter paints items on a part of a picture.
type painter struct {
	dst      *image.RGBA
	perMM    float64
	dpi      float64
	fonts    *render.Fonts
	renderer render.Renderer
	pen      pen
}

func (p *painter) item(ctx context.Context, item Item) error {
	switch item := item.(type) {
	case *Panel:
		return p.panel(ctx, item)
	case Text:
		p.text(item)
	case Line:
		p.fill(item.outline(), item.Color)
	case Polygon:
		p.fill([][][2]float64{oriented(item.Points)}, item.Color)
	case Disc:
		p.disc(item)
	}
	return nil
}

func (p *painter) ground(c color.NRGBA) {
	r, g, b, a := c.RGBA()
	pixel := [4]uint8{uint8(r >> 8), uint8(g >> 8), uint8(b >> 8), uint8(a >> 8)}
	for y := range p.dst.Rect.Dy() {
		row := p.dst.Pix[y*p.dst.Stride:][:4*p.dst.Rect.Dx()]
		for x := 0; x < len(row); x += 4 {
			copy(row[x:], pixel[:])
		}
	}
}

// Pixels is the rectangle of a panel on the painted sheet. All panels of one
// size in millimetres have one size in pixels, and so one scale.
func (p *Panel) Pixels(dpi float64) image.Rectangle {
	perMM := dpi / 25.4
	x, y := int(math.Round(p.X*perMM)), int(math.Round(p.Y*perMM))
	w, h := int(math.Round(p.W*perMM)), int(math.Round(p.H*perMM))
	return image.Rect(x, y, x+max(1, w), y+max(1, h))
}

// Paint paints the panel alone at a resolution in dots per inch, on the ground
// of its look.
func (p *Panel) Paint(ctx context.Context, dpi float64) (*image.RGBA, error) {
	img := image.NewRGBA(p.Pixels(dpi).Sub(p.Pixels(dpi).Min))
	return img, render.Draw(ctx, img, &p.Scene, p.Camera, p.Look, render.Quality{Samples: samples, DPI: dpi}, render.Band{})
}

// panel draws into the sheet's own pixels.
func (p *painter) panel(ctx context.Context, panel *Panel) error {
	whole := panel.Pixels(p.dpi)
	part := whole.Intersect(p.dst.Rect)
	if part.Empty() {
		return nil
	}
	dst := *p.dst
	dst.Pix = dst.Pix[dst.PixOffset(part.Min.X, part.Min.Y):]
	dst.Rect = part.Sub(whole.Min)
	quality := render.Quality{Samples: samples, DPI: p.dpi}
	return p.renderer.Draw(ctx, &dst, &panel.Scene, panel.Camera, panel.Look, quality,
		render.Band{Width: whole.Dx(), Height: whole.Dy()})
}

func (p *painter) disc(d Disc) {
	p.fill([][][2]float64{circle(d.X, d.Y, d.Radius)}, d.Color)
	if d.EdgeWidth > 0 {
		p.fill(Line{Points: circle(d.X, d.Y, d.Radius), Closed: true, Width: d.EdgeWidth}.outline(), d.Edge)
	}
}

// circle is a polygon that no eye and no printer tells from a circle.
func circle(x, y, radius float64) [][2]float64 {
	const corners = 72
	out := make([][2]float64, corners)
	for k := range out {
		sin, cos := math.Sincos(2 * math.Pi * float64(k) / corners)
		out[k] = [2]float64{x + radius*cos, y + radius*sin}
	}
	return out
}
