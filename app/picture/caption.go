package picture

import (
	"fmt"
	"math"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/render"
)

// A caption is the lines below a picture, before they are broken to its width.
type caption []captionLine

type captionLine struct {
	text   notation.Text
	size   float64 // pt
	bold   bool
	quiet  bool // second text
	legend bool // begins with the two signs of lobes
}

// Sizes of type, in points, and distances in millimetres.
const (
	titleSize     = 9.0
	captionSize   = 8.0
	secondSize    = 7.0
	lineSpacing   = 1.45
	captionMargin = 3.0
)

// moleculeCaption names structure and group, and the frame.
func moleculeCaption(g *work.Group) caption {
	return caption{
		{text: notation.Words(g.Molecule.Title + "  ").Then(notation.Group(g.Fit.Setting.Symbol)), size: titleSize},
		frameLine(g),
	}
}

// orbitalCaption names a group orbital, writes it down, and explains signs and
// sizes of lobes.
func orbitalCaption(o *work.Orbitals, orbital *orbitals.GroupOrbital, look study.Look) caption {
	irrep := o.Irreps[orbital.Irrep]
	which := ""
	if irrep.Dimension > 1 {
		which = fmt.Sprintf("partner %d of %d", orbital.Partner+1, irrep.Dimension)
	}
	if n := o.Content[orbital.Irrep]; n > 1 {
		which = strings.TrimPrefix(fmt.Sprintf("%s, copy %d of %d", which, orbital.Copy+1, n), ", ")
	}
	title := notation.OrbitalText(irrep.Label)
	if which != "" {
		title = title.Then(notation.Words("   " + which))
	}
	lines := caption{{text: title, size: titleSize}}
	if form, ok := orbitals.FindClosedForm(orbital.Coefficients); ok && len(o.Functions) <= maxWritten {
		lines = append(lines, captionLine{text: notation.ClosedForm(form).Then(notation.Words("   "), basisText(o.Basis)), size: captionSize})
	}
	return append(lines, captionLine{text: legendText(look), size: secondSize, quiet: true, legend: true}, frameLine(o.Group))
}

// maxWritten is how many functions a combination may have to be written below
// its picture.
const maxWritten = 12

func legendText(look study.Look) notation.Text {
	size := look.Size
	if size == "" {
		size = "length"
	}
	return notation.Words(size+" of a lobe as |").
		Then(notation.Text{{Text: "c", Italic: true}}, notation.Words("|"))
}

func frameLine(g *work.Group) captionLine {
	text := notation.Group(g.Fit.Setting.Symbol).Then(notation.Words(": " + notation.ShortConvention(g.Fit)))
	return captionLine{text: text, size: secondSize, quiet: true}
}

// basisText says on which atoms the functions are, where that is short:
// "φ1–φ4: σ on Cl2–5".
func basisText(b *work.Basis) notation.Text {
	first := b.Functions[0]
	for i, f := range b.Functions {
		if f.Name != first.Name || b.Group.Sites.Elements[f.Site] != b.Group.Sites.Elements[first.Site] || f.Site != first.Site+i {
			return nil
		}
	}
	n := len(b.Functions)
	t := phi(1)
	atoms := fmt.Sprintf("%s%d", b.Group.Sites.Elements[first.Site].Symbol(), first.Site+1)
	if n > 1 {
		t = t.Then(notation.Words("–"), phi(n))
		atoms += fmt.Sprintf("–%d", first.Site+n)
	}
	return t.Then(notation.Words(": "), notation.Function(first.Name), notation.Words(" on "+atoms))
}

func phi(n int) notation.Text {
	return notation.Text{{Text: "φ", Italic: true}, {Text: fmt.Sprint(n), Place: notation.Sub}}
}

// A setCaption is broken into lines and has a height.
type setCaption struct {
	lines  []setLine
	height float64 // mm, with the space below
}

type setLine struct {
	captionLine
	base   float64 // mm of the base line above the picture's lower edge
	indent float64 // mm
}

const (
	legendIndent = 12.0 // mm, room for the signs
	signRadius   = 1.1  // mm
)

// set breaks a caption to a width in millimetres.
func (c caption) set(width float64, fonts *render.Fonts) setCaption {
	if len(c) == 0 {
		return setCaption{}
	}
	var out setCaption
	below := 0.0
	for _, line := range c {
		indent := 0.0
		if line.legend {
			indent = legendIndent
		}
		for i, text := range breakText(line.text, line.size, width-indent, fonts) {
			piece := line
			piece.text = text
			piece.legend = line.legend && i == 0
			below += line.size * lineSpacing * mmPerPoint
			out.lines = append(out.lines, setLine{captionLine: piece, base: -below, indent: indent})
		}
	}
	const bottom = 2.6 // mm
	out.height = below + bottom
	for i := range out.lines {
		out.lines[i].base += out.height
	}
	return out
}

// breakText breaks a text at its blanks into lines of a width in millimetres.
func breakText(t notation.Text, size, width float64, fonts *render.Fonts) []notation.Text {
	measure := func(t notation.Text) float64 {
		w, _, _ := fonts.Measure(runs(t), size)
		return w
	}
	var lines []notation.Text
	var line notation.Text
	for _, word := range words(t) {
		longer := line.Then(word)
		if len(line) > 0 && measure(longer) > width {
			lines = append(lines, line)
			longer = trimLeft(word)
		}
		line = longer
	}
	return append(lines, line)
}

// words cuts a text before its blanks.
func words(t notation.Text) []notation.Text {
	var out []notation.Text
	for _, r := range t {
		for i, part := range strings.SplitAfter(r.Text, " ") {
			piece := notation.Text{{Text: part, Italic: r.Italic, Place: r.Place}}
			if n := len(out); n > 0 && i == 0 && !strings.HasSuffix(out[n-1].String(), " ") {
				out[n-1] = out[n-1].Then(piece)
			} else if part != "" {
				out = append(out, piece)
			}
		}
	}
	return out
}

func trimLeft(t notation.Text) notation.Text {
	out := append(notation.Text(nil), t...)
	if len(out) > 0 {
		out[0].Text = strings.TrimLeft(out[0].Text, " ")
	}
	return out
}

// addCaption puts the lines on the picture.
func (s *stage) addCaption(c setCaption) {
	for _, line := range c.lines {
		colour := s.palette.Ink
		if line.quiet {
			colour = s.palette.Quiet
		}
		set := runs(line.text)
		s.addOnPaper(render.Text{
			At: mgl64.Vec3{captionMargin + line.indent, line.base}, Runs: set, Size: line.size,
			AlignX: -1, AlignY: -1, Fixed: true, Through: true,
		}, render.Material{Color: paint(colour), Opacity: 1, Flat: true, NoOutline: true})
		if line.legend {
			s.addSigns(line)
		}
	}
}

// addSigns explains which colour is which sign.
func (s *stage) addSigns(line setLine) {
	middle := line.base + line.size*mmPerPoint*0.36 // half the height of a capital
	for i, sign := range []string{"+", "−"} {
		x := captionMargin + signRadius + 5.6*float64(i)
		s.addOnPaper(render.Sphere{Center: mgl64.Vec3{x, middle}, Radius: signRadius}, s.lobeMaterial(1-2*float64(i)))
		s.addOnPaper(render.Text{
			At: mgl64.Vec3{x + signRadius + 0.5, line.base}, Runs: []render.Run{{Text: sign}}, Size: line.size,
			AlignX: -1, AlignY: -1, Fixed: true, Through: true,
		}, render.Material{Color: paint(s.palette.Quiet), Opacity: 1, Flat: true, NoOutline: true})
	}
}

// addOnPaper adds a shape whose lengths are millimetres from the lower left
// corner of the picture.
func (s *stage) addOnPaper(g render.Geometry, m render.Material) {
	s.scene.Shapes = append(s.scene.Shapes, render.Shape{Geometry: g, Material: m, Place: &render.Place{}})
}

func cosSin(k, n int) (cos, sin float64) {
	sin, cos = math.Sincos(2 * math.Pi * float64(k) / float64(n))
	return cos, sin
}
