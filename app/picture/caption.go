package picture

import (
	"fmt"
	"strconv"
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
	text notation.Text
	// beside follows on the same line if there is room, else on its own.
	beside notation.Text
	size   float64 // pt
	quiet  bool    // second text
	legend bool    // begins with the two signs of lobes
}

// Sizes of type, in points, and distances in millimetres.
const (
	titleSize     = 9.0
	captionSize   = 8.0
	secondSize    = 7.0
	lineSpacing   = 1.45
	captionMargin = 3.0
)

// narrowest is the width in millimetres from which a figure has room for the
// line on the frame, and for the labels of all atoms.
const narrowest = 60.0

func isNarrow(s study.Study) bool { return s.Figure.TheWidth() < narrowest }

// moleculeCaption names structure and group, the operation of which the
// element is shown, and the frame.
func moleculeCaption(g *work.Group, s study.Study) caption {
	title := notation.Words(g.Molecule.Title + "   ").Then(notation.Group(g.Fit.Setting.Symbol))
	return caption{
		{text: title.Then(operationText(g, s.Operation)), size: titleSize},
	}.withFrame(g, s)
}

// operationText names an operation of a group behind a title.
func operationText(g *work.Group, name string) notation.Text {
	if name == "" {
		return nil
	}
	op, err := operationNamed(g.Fit.Setting, name)
	if err != nil { // told where its element is drawn
		return nil
	}
	return notation.Words("   ").Then(notation.Operation(op.Name))
}

// withFrame adds the line on the frame where there is room for it.
func (c caption) withFrame(g *work.Group, s study.Study) caption {
	if isNarrow(s) {
		return c
	}
	return append(c, frameLine(g))
}

// orbitalCaption names a group orbital, writes it down, and explains signs and
// sizes of lobes.
func orbitalCaption(o *work.Orbitals, orbital *orbitals.GroupOrbital, s study.Study) caption {
	irrep := o.Irreps[orbital.Irrep]
	var which []string
	if irrep.Dimension > 1 {
		which = append(which, fmt.Sprintf("partner %d of %d", orbital.Partner+1, irrep.Dimension))
	}
	if n := o.Content[orbital.Irrep]; n > 1 {
		which = append(which, fmt.Sprintf("copy %d of %d", orbital.Copy+1, n))
	}
	title := captionLine{text: notation.OrbitalText(irrep.Label), size: titleSize}
	if len(which) > 0 {
		title.text = title.text.Then(notation.Words("   " + strings.Join(which, ", ")))
	}
	title.text = title.text.Then(operationText(o.Group, s.Operation))
	lines := caption{title}
	form, ok := orbitals.FindClosedForm(orbital.Coefficients)
	functions := basisText(o.Basis, orbital.Coefficients)
	switch {
	case !ok || notation.Width(form.String()) > longestForm:
		if len(functions) > 0 {
			lines = append(lines, captionLine{text: functions, size: captionSize})
		}
	case len(form.Terms) == 1 && !form.Terms[0].Negative && len(functions) > 0:
		lines = append(lines, captionLine{text: functions, size: captionSize})
	default:
		lines = append(lines, captionLine{text: notation.ClosedForm(form), size: captionSize, beside: functions})
	}
	return append(lines, captionLine{text: legendText(s.Look), size: secondSize, quiet: true, legend: true}).withFrame(o.Group, s)
}

// longestForm is how many characters a closed form may have to stand below
// its picture. A longer one is not read there.
const longestForm = 56

func legendText(look study.Look) notation.Text {
	size := look.Size
	if size == "" {
		size = "length"
	}
	return notation.Words(size+" of a lobe as |").Then(notation.Text{{Text: "c", Italic: true}}, notation.Words("|"))
}

func frameLine(g *work.Group) captionLine {
	text := notation.Group(g.Fit.Setting.Symbol).Then(notation.Words(": "), notation.Sentence(notation.ShortConvention(g.Fit)))
	return captionLine{text: text, size: secondSize, quiet: true}
}

// basisText says which functions on which atoms occur in a combination:
// "φ1–φ4: σ on Cl2–Cl5", "φ1, φ6: dz² on Re1, Re2". Where that is too long the
// numbers are left out, and then the names of the atoms: "s on 60 atoms".
func basisText(b *work.Basis, coefficients []float64) notation.Text {
	names := b.AtomNames()
	var kinds []string
	numbers, atoms := map[string][]string{}, map[string][]string{}
	for i, f := range b.Functions {
		if coefficients[i] == 0 {
			continue
		}
		if numbers[f.Name] == nil {
			kinds = append(kinds, f.Name)
		}
		numbers[f.Name] = append(numbers[f.Name], strconv.Itoa(i+1))
		atoms[f.Name] = append(atoms[f.Name], names[f.Site])
	}
	list := func(numbered, named bool) notation.Text {
		var t notation.Text
		for i, kind := range kinds {
			if i > 0 {
				t = t.Then(notation.Words("; "))
			}
			if numbered {
				for k, run := range runsOf(numbers[kind]) {
					if k > 0 {
						t = t.Then(notation.Words(", "))
					}
					t = t.Then(notation.PhiText(run[0]))
					if len(run) > 1 {
						t = t.Then(notation.Words("–"), notation.PhiText(run[1]))
					}
				}
				t = t.Then(notation.Words(": "))
			}
			on := fmt.Sprintf(" on %d atoms", len(atoms[kind]))
			if named {
				var parts []string
				for _, run := range runsOf(atoms[kind]) {
					parts = append(parts, strings.Join(run, "–"))
				}
				on = " on " + strings.Join(parts, ", ")
			}
			t = t.Then(notation.Function(kind), notation.Words(on))
		}
		return t
	}
	for _, t := range []notation.Text{list(true, true), list(false, true), list(false, false)} {
		if notation.Width(t.String()) <= longestForm {
			return t
		}
	}
	return nil
}

// runsOf cuts a list of names into runs of three or more whose numbers run on,
// of each the first and the last, and single names: C1, C2–C6, C12–C16.
func runsOf(list []string) [][]string {
	var runs [][]string
	for len(list) > 0 {
		n := 1
		for n < len(list) && runsOn(list[:n+1]) {
			n++
		}
		if n > 2 {
			runs = append(runs, []string{list[0], list[n-1]})
		} else {
			n = 1
			runs = append(runs, list[:1])
		}
		list = list[n:]
	}
	return runs
}

// runsOn tells whether a list of names that end in numbers, or of numbers, has
// one beginning and numbers without gaps.
func runsOn(list []string) bool {
	split := func(s string) (string, int) {
		letters := strings.TrimRight(s, "0123456789")
		n, _ := strconv.Atoi(s[len(letters):])
		return letters, n
	}
	letters, first := split(list[0])
	for i, s := range list {
		if l, n := split(s); l != letters || n != first+i {
			return false
		}
	}
	return true
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
		for i, text := range line.broken(width-indent, fonts) {
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

// broken breaks a line of a caption into lines of a width in millimetres.
func (line captionLine) broken(width float64, fonts *render.Fonts) []notation.Text {
	if len(line.beside) == 0 {
		return breakText(line.text, line.size, width, fonts)
	}
	whole := line.text.Then(notation.Words("   "), line.beside)
	if w, _, _ := fonts.Measure(runs(whole), line.size); w <= width {
		return []notation.Text{whole}
	}
	return append(breakText(line.text, line.size, width, fonts), breakText(line.beside, line.size, width, fonts)...)
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

// words cuts a text behind its blanks, but not within brackets.
func words(t notation.Text) []notation.Text {
	var out []notation.Text
	open, ended := 0, true
	for _, r := range t {
		for _, part := range strings.SplitAfter(r.Text, " ") {
			if part == "" {
				continue
			}
			piece := notation.Text{{Text: part, Italic: r.Italic, Place: r.Place}}
			if ended {
				out = append(out, piece)
			} else {
				out[len(out)-1] = out[len(out)-1].Then(piece)
			}
			open += strings.Count(part, "(") - strings.Count(part, ")")
			ended = open == 0 && strings.HasSuffix(part, " ")
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
		}, flat(colour))
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
		}, flat(s.palette.Quiet))
	}
}

// addOnPaper adds a shape whose lengths are millimetres from the lower left
// corner of the picture.
func (s *stage) addOnPaper(g render.Geometry, m render.Material) {
	s.scene.Shapes = append(s.scene.Shapes, render.Shape{Geometry: g, Material: m, Place: &render.Place{}})
}
