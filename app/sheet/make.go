package sheet

import (
	"context"
	"errors"

	"math"
	"strings"

	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/render"
	"lobewright/symmetry/message"
)

// The kinds of sheets, as study.Figure.Sheet names them.
const (
	One        = "one"        // one group orbital
	All        = "all"        // all group orbitals of a basis
	Set        = "set"        // all partners of one irrep
	Operations = "operations" // where each operation carries a function
	Molecule   = "molecule"   // the structure with axes and symmetry elements
	Frames     = "frames"     // two frames side by side
	Descent    = "descent"    // irreps followed into a subgroup
	Levels     = "levels"     // levels of group orbitals and central orbitals
)

// Make lays out the sheet that a study asks for. Where it asks for none it is
// the group orbital of the irrep chosen, all group orbitals where there is a
// basis only, and else the structure with its axes. The error is that of the
// results (see work), or one line that tells what the sheet needs.
func Make(ctx context.Context, w *work.Work, s study.Study) (*Sheet, error) {
	m, err := newMaker(ctx, w, s)
	if err != nil {
		return nil, err
	}
	sheet, err := m.make()
	if m.height > 0 && isTooSmall(err) {
		if m, err = newMaker(ctx, w, s); err != nil {
			return nil, err
		}
		m.cardless = true
		m.note("captions.noCard")
		sheet, err = m.make()
	}
	return sheet, err
}

func (m *maker) make() (*Sheet, error) {
	s := m.study
	kind := Kind(s)
	if kind != Molecule && kind != Frames && kind != Descent && len(s.Basis) == 0 {
		return nil, message.Errorf("a sheet of this kind (%s) shows functions, and none are chosen", kind)
	}
	switch kind {
	case One, Set:
		return m.orbitals(kind == Set)
	case All:
		return m.all()
	case Operations:
		return m.operations()
	case Molecule:
		return m.molecule(s.Figure.Sheet == Molecule)
	case Frames:
		return m.frames()
	case Descent:
		return m.descent()
	case Levels:
		return m.levels()
	}
	return nil, message.Errorf("%q is no kind of sheet", kind)
}

// Kind is the kind of sheet that a study asks for.
func Kind(s study.Study) string {
	switch {
	case s.Figure.Sheet != "":
		return s.Figure.Sheet
	case len(s.Basis) == 0:
		return Molecule
	case s.Projection.Irrep == "":
		return All
	}
	return One
}

// A maker lays out one sheet.
type maker struct {
	typesetter
	ctx     context.Context
	work    *work.Work
	study   study.Study
	figure  study.Figure
	palette assets.Palette
	bodies  picture.Maker

	width  float64 // of the page, mm
	height float64 // mm; 0 is free
	margin float64 // around everything
	size   float64 // of the text, pt
	notes  []string
	// cardless leaves the card out, where a page of a fixed height has no room
	// for it.
	cardless bool
	cards    map[float64]cardTexts
	texts    assets.Texts // in the language of the figure
}

// The size of a slide: 13⅓ × 7½ inches, common practice for 16:9.
const (
	slideWidth = 338.67
	slideSize  = 18 // pt
	textSize   = 8  // pt
	smallText  = 7  // pt, where the sheet is narrow
	narrow     = 60 // mm
	leastWidth = 25 // mm, of a sheet
)

func newMaker(ctx context.Context, w *work.Work, s study.Study) (*maker, error) {
	fonts, err := picture.FontsOf(s.Figure.Font)
	if err != nil {
		return nil, message.Errorf("the built-in typefaces cannot be read: %w", err)
	}
	f := s.Figure
	m := &maker{
		typesetter: typesetter{fonts}, ctx: ctx, work: w, study: s, figure: f, palette: picture.PaletteOf(s.Look),
		texts: assets.TextsIn(assets.Language(f.Language)),
		width: f.Width, height: f.Height, size: f.TextSize,
	}
	switch {
	case f.Slide && m.width == 0:
		m.width = slideWidth
	case m.width == 0:
		m.width = f.TheWidth()
	}
	if f.Slide && m.height == 0 {
		m.height = m.width * 9 / 16
	}
	if m.size == 0 {
		switch {
		case f.Slide:
			m.size = slideSize
		case m.width < narrow:
			m.size = smallText
		default:
			m.size = textSize
		}
	}
	m.margin = min(3, m.width/25)
	if f.Slide {
		m.margin = m.width / 34
	}
	if m.width < leastWidth {
		return nil, message.Errorf("a width of %.4g mm is too narrow for a picture; give at least %d mm", m.width, leastWidth)
	}
	return m, nil
}

// weight is how much thicker lines are than on paper, where the type is made
// to be read from afar.
func (m *maker) weight() float64 { return max(1, 0.8*m.size/textSize) }

// weigh thickens the lines of a panel.
func (p *Panel) weigh(by float64) {
	p.Look.OutlineWidth *= by
	for i := range p.Scene.Shapes {
		if l, ok := p.Scene.Shapes[i].Geometry.(render.Line); ok {
			l.Width *= by
			p.Scene.Shapes[i].Geometry = l
		}
	}
}

// largest is the width of a panel beyond which it is not enlarged where there
// are several.
func (m *maker) largest() float64 {
	if m.figure.Slide {
		return max(usualPanel, m.width/3)
	}
	return usualPanel
}

// The styles of type.
func (m *maker) title() style { return style{size: 1.125 * m.size, color: m.palette.Ink} }
func (m *maker) text() style  { return style{size: m.size, color: m.palette.Ink} }
func (m *maker) quiet() style { return style{size: 0.875 * m.size, color: m.palette.Quiet} }
func (m *maker) letter() style {
	return style{size: 1.125 * m.size, color: m.palette.Ink, bold: true}
}

// inner is the width between the margins.
func (m *maker) inner() float64 { return m.width - 2*m.margin }

// room is the height that the content may have: what a fixed page leaves, or
// about what a page of a journal can give.
func (m *maker) room() float64 {
	if m.height > 0 {
		return m.height - 2*m.margin
	}
	const shape = 1.7
	return min(tallestPage, max(shape*m.width, 110)) - 2*m.margin
}

// tallestPage is what a page of a journal can give a figure, in millimetres.
const tallestPage = 240.0

// finish puts the content on its page.
func (m *maker) finish(title string, content block) (*Sheet, error) {
	height := m.height
	if height == 0 {
		height = math.Ceil((content.h+2*m.margin)*100) / 100
	}
	const slack = 0.01 // mm, of sums
	if content.h > height-2*m.margin+slack {
		return nil, tooSmall{message.Words("a height of %.4g mm is too low for this sheet; give at least %.0f mm, or leave captions out",
			height, math.Ceil(content.h+2*m.margin))}
	}
	if content.w > m.inner()+slack {
		return nil, message.Errorf("a width of %.4g mm is too narrow for this sheet; give at least %.0f mm, or a smaller text",
			m.width, math.Ceil(content.w+2*m.margin))
	}
	page := block{}
	page.put(content, m.margin+(m.inner()-content.w)/2, (height-content.h)/2)
	sheet := &Sheet{
		Width: m.width, Height: height, Ground: m.palette.Ground, Font: "sans", Title: title, Items: page.items, Notes: m.notes,
	}
	if m.figure.Font == "serif" {
		sheet.Font = "serif"
	}
	if m.study.Look.Ground == "transparent" {
		sheet.Ground.A = 0
	}
	if _, _, err := sheet.Pixels(m.figure.TheResolution()); err != nil {
		return nil, err
	}
	return sheet, m.ctx.Err()
}

// note says something that the sheet leaves out.
func (m *maker) note(key string, arguments ...any) {
	m.notes = append(m.notes, m.say(key, arguments...))
}

// say is a text in the language of the figure.
func (m *maker) say(key string, arguments ...any) string { return m.texts.Say(key, arguments...) }

// group is the study's group.
func (m *maker) group() (*work.Group, error) { return m.work.Group(m.ctx, m.study) }

// tooSmall is the error of a page on which a sheet has no room.
type tooSmall struct{ message.Text }

// Error implements error.
func (e tooSmall) Error() string { return e.String() }

func isTooSmall(err error) bool {
	var e tooSmall
	return errors.As(err, &e)
}

// errTooSmall is refused where panels would be too small to show anything.
var errTooSmall = tooSmall{message.Words("there is no room for the panels: give a larger width or height, or a smaller text")}

// panel is a body on paper with its labels.
func (m *maker) panel(body *picture.Body, v picture.Viewpoint, p picture.Panel, name string, named bool) (block, error) {
	drawn := &Panel{Rect: Rect{0, 0, p.Width, p.Height}, Name: name, Scene: body.Scene(p.Scale), Camera: v.Camera(p), Look: body.Look()}
	drawn.weigh(m.weight())
	out := block{w: p.Width, h: p.Height, items: []Item{drawn}}
	out.items = append(out.items, m.ghostAxes(body, v, p)...)
	var labels []picture.Label
	if named && !m.study.Look.NoLabels {
		var missing picture.Unnamed
		var err error
		labels, missing, err = body.Labels(m.ctx, v, p, m.size, m.fonts, nil)
		if err != nil {
			return out, err
		}
		if len(missing.Atoms) > 0 {
			m.note("captions.noNames", m.enumerated(missing.Atoms, "captions.atoms"))
		}
		if len(missing.Elements) > 0 {
			m.note("captions.noElements", m.enumerated(missing.Elements, "captions.elements"))
		}
	} else {
		labels = body.Signs(v, p, m.size, m.fonts)
	}
	for _, l := range labels {
		out.items = append(out.items, m.label(l)...)
	}
	return out, nil
}

// label is a placed label as items.
func (m *maker) label(l picture.Label) []Item {
	const lead = 0.18 // mm
	var out []Item
	if l.Leader != nil {
		line := Line{Points: l.Leader, Width: lead, Color: m.palette.Ink}
		if l.Element {
			line.Color = m.palette.Element
		}
		out = append(out, line)
	}
	colour := m.palette.Ink
	if l.Element {
		colour = m.palette.Element
	}
	if l.Sign != 0 {
		colour = picture.OnLobe(m.palette, l.Sign)
	}
	text := Text{X: l.X, Y: l.Y, Runs: l.Runs, Size: l.Size, Color: colour}
	if l.Over {
		const rim = 0.5 // mm
		text.Halo, text.HaloColor = rim, m.palette.Ground
	}
	return append(out, text)
}

// enumerated lists a few names; of many it says how many there are, with a text of
// their kind.
func (m *maker) enumerated(names []string, many string) string {
	const most = 12
	if n := len(names); n > most {
		return m.say(many, n)
	}
	if n := len(names); n > 1 {
		return m.say("axes.and", strings.Join(names[:n-1], ", "), names[n-1])
	}
	return strings.Join(names, "")
}
