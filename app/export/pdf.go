package export

import (
	"bytes"
	"compress/zlib"
	"context"
	"fmt"
	"image"
	"image/color"
	"io"
	"slices"
	"strconv"
	"strings"
	"unicode/utf16"

	"lobewright/app/sheet"
	"lobewright/assets"
	"lobewright/render"
)

// Numbers and names of this format: ISO 32000-1:2008 (PDF 1.7).

// sheetPDF writes a sheet as a page of its size. Texts are set in the program's
// own typefaces, of which the signs that occur are embedded, so that they can
// be searched and copied; lines are vectors; panels are pictures without loss.
// There is no date in the file.
func sheetPDF(ctx context.Context, w io.Writer, s *sheet.Sheet, dpi float64, study []byte) error {
	fonts, err := s.Fonts()
	if err != nil {
		return err
	}
	d := &pdfWriter{w: w}
	page := &pdfPage{pdf: d, fonts: fonts, height: s.Height, faces: map[int]*pdfFace{}, states: map[uint8]string{}}
	d.raw("%PDF-1.7\n%\xe2\xe3\xcf\xd3\n")
	if s.Ground.A > 0 {
		page.fill(s.Ground)
		page.f("0 0 %s %s re f\n", number(s.Width*pointPerMM), number(s.Height*pointPerMM))
	}
	for _, item := range s.Items {
		if err := ctx.Err(); err != nil {
			return err
		}
		if err := page.item(ctx, s, item, dpi); err != nil {
			return err
		}
		if d.err != nil {
			return d.err
		}
	}
	content := d.stream("", page.content.Bytes())
	var resources strings.Builder
	resources.WriteString("/Font <<")
	for _, cut := range sortedKeys(page.faces) {
		face := page.faces[cut]
		fmt.Fprintf(&resources, " /F%d %d 0 R", cut, face.write(d, s.Font, cut))
	}
	resources.WriteString(" >> /XObject <<")
	for i, object := range page.pictures {
		fmt.Fprintf(&resources, " /P%d %d 0 R", i, object)
	}
	resources.WriteString(" >> /ExtGState <<")
	for _, a := range sortedKeys(page.states) {
		fmt.Fprintf(&resources, " %s << /ca %s /CA %s >>", page.states[a], number(float64(a)/255), number(float64(a)/255))
	}
	resources.WriteString(" >>")
	pages := d.reserve()
	sheetObject := d.object(fmt.Sprintf("<< /Type /Page /Parent %d 0 R /MediaBox [0 0 %s %s] /Contents %d 0 R /Resources << %s >> >>",
		pages, number(s.Width*pointPerMM), number(s.Height*pointPerMM), content, resources.String()))
	d.put(pages, fmt.Sprintf("<< /Type /Pages /Kids [%d 0 R] /Count 1 >>", sheetObject))
	attached := ""
	if len(study) > 0 {
		attached = d.attach(study)
	}
	catalog := d.object(fmt.Sprintf("<< /Type /Catalog /Pages %d 0 R /ViewerPreferences << /DisplayDocTitle true >>%s >>", pages, attached))
	info := d.object(fmt.Sprintf("<< /Title %s /Producer (lobewright) >>", pdfText(s.Title)))
	d.end(catalog, info)
	return d.err
}

const pointPerMM = 72 / 25.4

func sortedKeys[K ~int | ~uint8, V any](m map[K]V) []K {
	keys := make([]K, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	return keys
}

// A pdfWriter writes objects, which count from 1, and keeps the first error.
type pdfWriter struct {
	w       io.Writer
	at      int
	offsets []int
	err     error
}

func (d *pdfWriter) raw(s string) {
	if d.err == nil {
		_, d.err = io.WriteString(d.w, s)
	}
	d.at += len(s)
}

func (d *pdfWriter) reserve() int {
	d.offsets = append(d.offsets, 0)
	return len(d.offsets)
}

func (d *pdfWriter) put(object int, body string) {
	d.offsets[object-1] = d.at
	d.raw(fmt.Sprintf("%d 0 obj\n%s\nendobj\n", object, body))
}

func (d *pdfWriter) object(body string) int {
	n := d.reserve()
	d.put(n, body)
	return n
}

// stream writes data compressed, with more entries for its dictionary.
func (d *pdfWriter) stream(entries string, data []byte) int {
	var packed bytes.Buffer
	z := zlib.NewWriter(&packed)
	_, _ = z.Write(data) // memory takes everything
	_ = z.Close()
	return d.packed(entries, packed.Bytes())
}

// packed writes data that is compressed already.
func (d *pdfWriter) packed(entries string, data []byte) int {
	if entries != "" {
		entries += " "
	}
	n := d.reserve()
	d.offsets[n-1] = d.at
	d.raw(fmt.Sprintf("%d 0 obj\n<< %s/Filter /FlateDecode /Length %d >>\nstream\n", n, entries, len(data)))
	d.raw(string(data))
	d.raw("\nendstream\nendobj\n")
	return n
}

// attach writes a study as an attached file and returns what the catalog says
// of it.
func (d *pdfWriter) attach(study []byte) string {
	const name = "(study.lobewright)"
	file := d.stream(fmt.Sprintf("/Type /EmbeddedFile /Subtype %s /Params << /Size %d >>", pdfSubtype, len(study)), study)
	spec := d.object(fmt.Sprintf("<< /Type /Filespec /F %s /UF %s /Desc (the work that this figure shows; lobewright opens it) /EF << /F %d 0 R >> /AFRelationship /Source >>", name, name, file))
	return fmt.Sprintf(" /Names << /EmbeddedFiles << /Names [%s %d 0 R] >> >> /AF [%d 0 R]", name, spec, spec)
}

// end writes the table of objects.
func (d *pdfWriter) end(catalog, info int) {
	start := d.at
	var b strings.Builder
	fmt.Fprintf(&b, "xref\n0 %d\n0000000000 65535 f \n", len(d.offsets)+1)
	for _, o := range d.offsets {
		fmt.Fprintf(&b, "%010d 00000 n \n", o)
	}
	fmt.Fprintf(&b, "trailer\n<< /Size %d /Root %d 0 R /Info %d 0 R >>\nstartxref\n%d\n%%%%EOF\n", len(d.offsets)+1, catalog, info, start)
	d.raw(b.String())
}

// pdfText is a text as UTF-16 in hexadecimal.
func pdfText(s string) string {
	out := "<FEFF"
	for _, u := range utf16.Encode([]rune(s)) {
		out += fmt.Sprintf("%04X", u)
	}
	return out + ">"
}

// A pdfPage collects the content of the page.
type pdfPage struct {
	pdf      *pdfWriter
	fonts    *render.Fonts
	height   float64 // mm
	content  bytes.Buffer
	faces    map[int]*pdfFace
	pictures []int
	states   map[uint8]string // of opacities
}

func (p *pdfPage) f(format string, args ...any) { fmt.Fprintf(&p.content, format, args...) }

// at is a place on the page in points, which count from below.
func (p *pdfPage) at(x, y float64) string {
	return number(x*pointPerMM) + " " + number((p.height-y)*pointPerMM)
}

func (p *pdfPage) item(ctx context.Context, s *sheet.Sheet, item sheet.Item, dpi float64) error {
	switch item := item.(type) {
	case *sheet.Panel:
		return p.panel(ctx, s, item, dpi)
	case sheet.Text:
		p.text(item)
	case sheet.Line:
		p.line(item)
	case sheet.Polygon:
		p.fill(item.Color)
		p.polyline(item.Points)
		p.f("f\n")
	case sheet.Disc:
		p.disc(item)
	}
	return nil
}

func (p *pdfPage) colour(c color.NRGBA, operator string) {
	share := func(v uint8) string { return strconv.FormatFloat(float64(v)/255, 'f', 4, 64) }
	p.f("%s %s %s %s %s gs\n", share(c.R), share(c.G), share(c.B), operator, p.opacity(c.A))
}

func (p *pdfPage) fill(c color.NRGBA)   { p.colour(c, "rg") }
func (p *pdfPage) stroke(c color.NRGBA) { p.colour(c, "RG") }

// opacity is the name of the state with an opacity.
func (p *pdfPage) opacity(a uint8) string {
	if p.states[a] == "" {
		p.states[a] = "/A" + strconv.Itoa(int(a))
	}
	return p.states[a]
}

func (p *pdfPage) polyline(points [][2]float64) {
	for i, q := range points {
		operator := "l"
		if i == 0 {
			operator = "m"
		}
		p.f("%s %s\n", p.at(q[0], q[1]), operator)
	}
}

func (p *pdfPage) line(l sheet.Line) {
	if len(l.Points) == 0 {
		return
	}
	p.stroke(l.Color)
	ends, dash := 1, "" // round
	if len(l.Dash) > 0 {
		ends = 0
		for _, x := range l.Dash {
			dash += " " + number(x*pointPerMM)
		}
	}
	p.f("%s w %d J 1 j [%s] 0 d\n", number(l.Width*pointPerMM), ends, strings.TrimSpace(dash))
	p.polyline(l.Points)
	if l.Closed {
		p.f("s\n")
	} else {
		p.f("S\n")
	}
}

// disc draws a circle of four curves; they leave it by 0.03 % of the radius.
func (p *pdfPage) disc(d sheet.Disc) {
	const k = 0.5522847498
	r := d.Radius
	circle := func() {
		p.f("%s m\n", p.at(d.X+r, d.Y))
		for _, q := range [4][6]float64{{1, k, k, 1, 0, 1}, {-k, 1, -1, k, -1, 0}, {-1, -k, -k, -1, 0, -1}, {k, -1, 1, -k, 1, 0}} {
			p.f("%s %s %s c\n", p.at(d.X+r*q[0], d.Y+r*q[1]), p.at(d.X+r*q[2], d.Y+r*q[3]), p.at(d.X+r*q[4], d.Y+r*q[5]))
		}
		p.f("h ")
	}
	p.fill(d.Color)
	circle()
	p.f("f\n")
	if d.EdgeWidth > 0 {
		p.stroke(d.Edge)
		p.f("%s w [] 0 d\n", number(d.EdgeWidth*pointPerMM))
		circle()
		p.f("S\n")
	}
}

// panel places a picture.
func (p *pdfPage) panel(ctx context.Context, s *sheet.Sheet, panel *sheet.Panel, dpi float64) error {
	pic, err := pictureOf(ctx, s, panel, dpi)
	if err != nil || pic == nil {
		return err
	}
	w, h := pic.img.Rect.Dx(), pic.img.Rect.Dy()
	mask := ""
	if !pic.opaque {
		mask = fmt.Sprintf(" /SMask %d 0 R", p.pdf.packed(pdfImage(w, h, "/DeviceGray", 1, ""), filtered(pic.img, 1)))
	}
	object := p.pdf.packed(pdfImage(w, h, "/DeviceRGB", 3, mask), filtered(pic.img, 3))
	r := pic.rect
	p.f("q %s gs %s 0 0 %s %s cm /P%d Do Q\n", p.opacity(255), number(r.W*pointPerMM), number(r.H*pointPerMM), p.at(r.X, r.Y+r.H), len(p.pictures))
	p.pictures = append(p.pictures, object)
	return nil
}

// pdfImage is the dictionary of a picture with rows filtered as in PNG.
func pdfImage(w, h int, space string, colours int, more string) string {
	return fmt.Sprintf("/Type /XObject /Subtype /Image /Width %d /Height %d /ColorSpace %s /BitsPerComponent 8 /Interpolate true /DecodeParms << /Predictor 15 /Colors %d /Columns %d >>%s",
		w, h, space, colours, w, more)
}

// filtered are the rows of a picture, three bytes a pixel for the colour or one
// for the opacity, filtered as in PNG and compressed.
func filtered(img *image.RGBA, depth int) []byte {
	var out bytes.Buffer
	r := newRows(&out, img.Rect.Dx(), depth)
	for y := range img.Rect.Dy() {
		r.write(img.Pix[y*img.Stride:])
	}
	_ = r.close() // memory takes everything
	return out.Bytes()
}

// A pdfFace is a typeface with the signs of it that occur.
type pdfFace struct {
	widths map[int]float64 // thousandths of the em
	runes  map[int]rune
}

const (
	italicCut = 1
	boldCut   = 2
)

func (p *pdfPage) text(t sheet.Text) {
	glyphs := p.fonts.Glyphs(t.Runs, t.Size)
	if len(glyphs) == 0 {
		return
	}
	if t.Halo > 0 {
		p.stroke(t.HaloColor)
		p.f("%s w 1 j [] 0 d\n", number(2*t.Halo*pointPerMM))
		p.glyphs(t, glyphs, 1)
	}
	p.fill(t.Color)
	p.glyphs(t, glyphs, 0)
}

// glyphs writes signs, those of one face and size on one line together.
func (p *pdfPage) glyphs(t sheet.Text, glyphs []render.Glyph, mode int) {
	p.f("BT %d Tr\n", mode)
	for len(glyphs) > 0 {
		first := glyphs[0]
		n := 1
		for n < len(glyphs) && sameType(first, glyphs[n]) {
			n++
		}
		p.f("/F%d %s Tf 1 0 0 1 %s Tm [", p.use(first), number(first.Size), p.at(t.X+first.X, t.Y-first.Y))
		end := first.X
		for _, g := range glyphs[:n] {
			if off := (end - g.X) * pointPerMM / g.Size * 1000; off > 0.5 || off < -0.5 {
				p.f("%s", number(off))
			}
			p.f("<%04X>", p.sign(g))
			end = g.X + g.Advance
		}
		p.f("] TJ\n")
		glyphs = glyphs[n:]
	}
	p.f("ET\n")
}

func sameType(a, b render.Glyph) bool {
	return a.Italic == b.Italic && a.Bold == b.Bold && a.Size == b.Size && a.Y == b.Y
}

func cutOf(g render.Glyph) int {
	cut := 0
	if g.Italic {
		cut |= italicCut
	}
	if g.Bold {
		cut |= boldCut
	}
	return cut
}

func (p *pdfPage) use(g render.Glyph) int {
	cut := cutOf(g)
	if p.faces[cut] == nil {
		p.faces[cut] = &pdfFace{map[int]float64{}, map[int]rune{}}
	}
	return cut
}

// sign is the number of a sign in its face.
func (p *pdfPage) sign(g render.Glyph) int {
	face, index := p.faces[p.use(g)], g.Index()
	face.widths[index] = g.Advance * pointPerMM / g.Size * 1000
	face.runes[index] = g.Rune
	return index
}

// write embeds the signs of a face that occur and returns the font's object.
func (f *pdfFace) write(d *pdfWriter, family string, cut int) int {
	style := []assets.Style{assets.Regular, assets.Oblique, assets.Bold, assets.BoldOblique}[cut]
	data, name := assets.Font(style), "DejaVuSans"
	if family == "serif" {
		data, name = assets.Serif(style), "DejaVuSerif"
	}
	name += []string{"", "-Oblique", "-Bold", "-BoldOblique"}[cut]
	signs := sortedKeys(f.widths)
	name = subsetTag(signs) + "+" + name
	small, m := subset(data, signs)
	file := d.stream(fmt.Sprintf("/Length1 %d", len(small)), small)
	flags, angle := 4, 0 // symbolic: signs by number
	if cut&italicCut != 0 {
		flags, angle = flags|64, -11
	}
	if family == "serif" {
		flags |= 2
	}
	descriptor := d.object(fmt.Sprintf("<< /Type /FontDescriptor /FontName /%s /Flags %d /FontBBox [%d %d %d %d] /ItalicAngle %d /Ascent %d /Descent %d /CapHeight 729 /StemV %d /FontFile2 %d 0 R >>",
		name, flags, m.box[0], m.box[1], m.box[2], m.box[3], angle, m.ascent, m.descent, 80+40*(cut>>1), file))
	var widths, unicode strings.Builder
	for _, g := range signs {
		fmt.Fprintf(&widths, " %d [%s]", g, number(f.widths[g]))
	}
	descendant := d.object(fmt.Sprintf("<< /Type /Font /Subtype /CIDFontType2 /BaseFont /%s /CIDSystemInfo << /Registry (Adobe) /Ordering (Identity) /Supplement 0 >> /FontDescriptor %d 0 R /CIDToGIDMap /Identity /W [%s] >>",
		name, descriptor, strings.TrimSpace(widths.String())))
	unicode.WriteString("/CIDInit /ProcSet findresource begin 12 dict begin begincmap /CIDSystemInfo << /Registry (Adobe) /Ordering (UCS) /Supplement 0 >> def /CMapName /Adobe-Identity-UCS def /CMapType 2 def\n1 begincodespacerange <0000> <FFFF> endcodespacerange\n")
	for part := range slices.Chunk(signs, 100) { // the most in a piece
		fmt.Fprintf(&unicode, "%d beginbfchar\n", len(part))
		for _, g := range part {
			fmt.Fprintf(&unicode, "<%04X> <", g)
			for _, u := range utf16.Encode([]rune{f.runes[g]}) {
				fmt.Fprintf(&unicode, "%04X", u)
			}
			unicode.WriteString(">\n")
		}
		unicode.WriteString("endbfchar\n")
	}
	unicode.WriteString("endcmap CMapName currentdict /CMap defineresource pop end end\n")
	toUnicode := d.stream("", []byte(unicode.String()))
	return d.object(fmt.Sprintf("<< /Type /Font /Subtype /Type0 /BaseFont /%s /Encoding /Identity-H /DescendantFonts [%d 0 R] /ToUnicode %d 0 R >>", name, descendant, toUnicode))
}
