package export

import (
	"context"
	"image"
	"image/color"
	"io"
	"path/filepath"
	"strconv"
	"strings"

	"lobewright/app/sheet"
	"lobewright/symmetry/message"
)

// SheetEndings are the endings of files that sheets can be written to.
var SheetEndings = []string{".png", ".svg", ".pdf"}

// IsSheetFile tells whether a file has one of SheetEndings.
func IsSheetFile(path string) bool {
	ending := strings.ToLower(filepath.Ext(path))
	for _, e := range SheetEndings {
		if e == ending {
			return true
		}
	}
	return false
}

// WriteSheet writes a sheet in the format that the ending of a file's name
// chooses, with a study's file, which may be empty. PNG is painted at dpi dots
// per inch; in SVG and PDF texts and lines are vectors, and only panels are
// painted. The error is that of w or of ctx, or tells of a size that no picture
// may have.
func WriteSheet(ctx context.Context, w io.Writer, s *sheet.Sheet, name string, dpi float64, study []byte) error {
	switch strings.ToLower(filepath.Ext(name)) {
	case ".png":
		return sheetPNG(ctx, w, s, dpi, study)
	case ".svg":
		return sheetSVG(ctx, w, s, dpi, study)
	case ".pdf":
		return sheetPDF(ctx, w, s, dpi, study)
	}
	endings := message.Words("%s", SheetEndings[0])
	for _, e := range SheetEndings[1:] {
		endings = message.Words("%s or %s", endings, e)
	}
	return message.Errorf("%s: the name must end in %s", name, endings)
}

func sheetPNG(ctx context.Context, w io.Writer, s *sheet.Sheet, dpi float64, study []byte) error {
	width, height, err := s.Pixels(dpi)
	if err != nil {
		return err
	}
	return PNG{
		Width: width, Height: height, DPI: dpi, Opaque: s.Ground.A == 255, Study: study,
		Paint: func(dst *image.RGBA) error { return s.PaintBand(ctx, dst, dpi) },
	}.Encode(w)
}

// A painted panel is its picture, without the even ground around it.
type painted struct {
	img  *image.RGBA
	rect sheet.Rect // where it lies on the sheet
	// opaque says that no pixel is transparent.
	opaque bool
}

// pictureOf paints a panel. It is nil if only ground is seen, which the sheet
// itself has.
func pictureOf(ctx context.Context, s *sheet.Sheet, p *sheet.Panel, dpi float64) (*painted, error) {
	if r := p.Pixels(dpi); r.Dx() > maxPanel || r.Dy() > maxPanel {
		return nil, message.Errorf("a panel of %d × %d pixels is too large; each side may have %d", r.Dx(), r.Dy(), maxPanel)
	}
	img, err := p.Paint(ctx, dpi)
	if err != nil {
		return nil, err
	}
	g := color.RGBAModel.Convert(s.Ground).(color.RGBA)
	ground := [4]byte{g.R, g.G, g.B, g.A}
	w, h := img.Rect.Dx(), img.Rect.Dy()
	part := differing(w, h, func(x, y int) bool { return *(*[4]byte)(img.Pix[y*img.Stride+4*x:]) != ground })
	if part.Empty() {
		return nil, nil
	}
	perX, perY := p.W/float64(w), p.H/float64(h)
	out := &painted{rect: sheet.Rect{
		X: p.X + float64(part.Min.X)*perX, Y: p.Y + float64(part.Min.Y)*perY,
		W: float64(part.Dx()) * perX, H: float64(part.Dy()) * perY,
	}}
	cut := img.SubImage(part).(*image.RGBA)
	out.opaque = cut.Opaque()
	out.img = &image.RGBA{Pix: cut.Pix, Stride: cut.Stride, Rect: image.Rect(0, 0, part.Dx(), part.Dy())}
	return out, nil
}

// maxPanel is the most pixels along a side of a panel.
const maxPanel = 16384

// number writes a length with a thousandth of its unit.
func number(x float64) string {
	s := strconv.FormatFloat(x, 'f', 3, 64)
	s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	if s == "-0" || s == "" {
		return "0"
	}
	return s
}
