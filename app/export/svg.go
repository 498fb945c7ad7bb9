package export

import (
	"bufio"
	"context"
	"encoding/base64"
	"encoding/xml"
	"fmt"
	"image/color"
	"io"
	"strings"

	"lobewright/app/sheet"
	"lobewright/render"
)

// sheetSVG writes a sheet as SVG 1.1 (W3C, Scalable Vector Graphics (SVG) 1.1,
// second edition, 2011). Signs are outlines, so that no font is needed; what
// they say stands beside them as a description.
func sheetSVG(ctx context.Context, w io.Writer, s *sheet.Sheet, dpi float64, study []byte) error {
	fonts, err := s.Fonts()
	if err != nil {
		return err
	}
	o := &svgWriter{w: bufio.NewWriterSize(w, 1<<16), fonts: fonts}
	width, height := number(s.Width), number(s.Height)
	o.f(`<?xml version="1.0" encoding="UTF-8"?>` + "\n")
	o.f(`<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" version="1.1" width="%smm" height="%smm" viewBox="0 0 %s %s">`+"\n",
		width, height, width, height)
	o.f("<title>%s</title>\n", escaped(s.Title))
	if len(study) > 0 {
		o.f("<metadata><study xmlns=%q>%s</study></metadata>\n", svgSpace, escaped(string(ascii(study))))
	}
	if s.Ground.A > 0 {
		o.f(`<rect width="%s" height="%s"%s/>`+"\n", width, height, svgPaint("fill", s.Ground))
	}
	for _, item := range s.Items {
		if err := ctx.Err(); err != nil {
			return err
		}
		switch item := item.(type) {
		case *sheet.Panel:
			err = o.panel(ctx, s, item, dpi)
		case sheet.Text:
			o.text(item)
		case sheet.Line:
			o.line(item)
		case sheet.Polygon:
			o.f(`<path d="%s"%s/>`+"\n", svgPolyline(item.Points, true), svgPaint("fill", item.Color))
		case sheet.Disc:
			o.disc(item)
		}
		if err != nil {
			return err
		}
	}
	o.f("</svg>\n")
	return o.w.Flush()
}

type svgWriter struct {
	w     *bufio.Writer // keeps the first error
	fonts *render.Fonts
}

func (o *svgWriter) f(format string, args ...any) { fmt.Fprintf(o.w, format, args...) }

// escaped writes a text between elements. There quotes and line ends may stand
// as they are, and a study can be read by people.
func escaped(s string) string {
	var b strings.Builder
	_ = xml.EscapeText(&b, []byte(s)) // memory takes everything
	return plainInText.Replace(b.String())
}

var plainInText = strings.NewReplacer("&#xA;", "\n", "&#34;", `"`, "&#39;", "'")

// svgPaint is a colour as attributes, with a blank in front.
func svgPaint(what string, c color.NRGBA) string {
	out := fmt.Sprintf(` %s="#%02x%02x%02x"`, what, c.R, c.G, c.B)
	if c.A < 255 {
		out += fmt.Sprintf(` %s-opacity="%s"`, what, number(float64(c.A)/255))
	}
	return out
}

func svgPolyline(points [][2]float64, closed bool) string {
	var b strings.Builder
	for i, p := range points {
		kind := "L"
		if i == 0 {
			kind = "M"
		}
		b.WriteString(kind + number(p[0]) + " " + number(p[1]))
	}
	if closed {
		b.WriteString("Z")
	}
	return b.String()
}

func (o *svgWriter) panel(ctx context.Context, s *sheet.Sheet, p *sheet.Panel, dpi float64) error {
	pic, err := pictureOf(ctx, s, p, dpi)
	if err != nil || pic == nil {
		return err
	}
	r := pic.rect
	o.f(`<image x="%s" y="%s" width="%s" height="%s" preserveAspectRatio="none" xlink:href="data:image/png;base64,`, number(r.X), number(r.Y), number(r.W), number(r.H))
	encoder := base64.NewEncoder(base64.StdEncoding, o.w)
	png := PNG{Width: pic.img.Rect.Dx(), Height: pic.img.Rect.Dy(), DPI: dpi, Opaque: pic.opaque, Paint: copying(pic.img)}
	if err := png.Encode(encoder); err != nil {
		return err
	}
	if err := encoder.Close(); err != nil {
		return err
	}
	o.f(`"><title>%s</title></image>`+"\n", escaped(p.Name))
	return nil
}

// text draws the halo of all signs below all signs.
func (o *svgWriter) text(t sheet.Text) {
	var d, words strings.Builder
	for _, g := range o.fonts.Glyphs(t.Runs, t.Size) {
		words.WriteRune(g.Rune)
		svgOutline(&d, g, t.X, t.Y)
	}
	if d.Len() == 0 {
		return
	}
	o.f("<g><desc>%s</desc>", escaped(words.String()))
	if t.Halo > 0 {
		o.f(`<path d="%s" fill="none" stroke-width="%s" stroke-linejoin="round"%s/>`, d.String(), number(2*t.Halo), svgPaint("stroke", t.HaloColor))
	}
	o.f(`<path d="%s"%s/></g>`+"\n", d.String(), svgPaint("fill", t.Color))
}

// svgOutline adds the contour of a sign of a text whose origin is at x and y.
func svgOutline(d *strings.Builder, g render.Glyph, x, y float64) {
	points := map[byte]int{'M': 1, 'L': 1, 'Q': 2, 'C': 3}
	open := false
	for _, s := range g.Outline() {
		if s.Kind == 'M' && open {
			d.WriteByte('Z')
		}
		open = true
		d.WriteByte(s.Kind)
		for i := range points[s.Kind] {
			if i > 0 {
				d.WriteByte(' ')
			}
			d.WriteString(number(x+s.Points[i][0]) + " " + number(y-s.Points[i][1]))
		}
	}
	if open {
		d.WriteByte('Z')
	}
}

func (o *svgWriter) line(l sheet.Line) {
	if len(l.Points) == 0 {
		return
	}
	ends, dash := "round", ""
	if len(l.Dash) > 0 {
		var lengths []string
		for _, x := range l.Dash {
			lengths = append(lengths, number(x))
		}
		ends, dash = "butt", fmt.Sprintf(` stroke-dasharray="%s"`, strings.Join(lengths, " "))
	}
	o.f(`<path d="%s" fill="none" stroke-width="%s" stroke-linecap="%s" stroke-linejoin="round"%s%s/>`+"\n",
		svgPolyline(l.Points, l.Closed), number(l.Width), ends, dash, svgPaint("stroke", l.Color))
}

func (o *svgWriter) disc(d sheet.Disc) {
	edge := ""
	if d.EdgeWidth > 0 {
		edge = fmt.Sprintf(` stroke-width="%s"%s`, number(d.EdgeWidth), svgPaint("stroke", d.Edge))
	}
	o.f(`<circle cx="%s" cy="%s" r="%s"%s%s/>`+"\n", number(d.X), number(d.Y), number(d.Radius), svgPaint("fill", d.Color), edge)
}
