package sheet

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/picture"
)

// A cell is one panel with its caption, before its size is known.
type cell struct {
	body *picture.Body
	name string // in plain characters
	// title names what is shown, which tells it from others of that name, and
	// form writes it down.
	title, which, form notation.Text
	// small sets the form as second text, with as many lines as it takes.
	small bool
	// named writes the atoms' names.
	named bool
	// turn, if not nil, takes directions of the axes in which the body is given
	// to those of the grid's view.
	turn *mgl64.Mat3
}

// A row is cells that belong together. They stand on lines of their own, in
// columns whose number is a multiple of unit where there is room.
type row struct {
	label notation.Text
	unit  int
	cells []cell
}

// A grid is all panels of a sheet, at one scale.
type grid struct {
	rows []row
	view picture.Viewpoint
	// flows lets rows share lines.
	flows bool
	// widest is the width of a panel beyond which it is not enlarged, mm.
	widest float64
	// side is the room for names on both sides of the bodies, mm; above and
	// below them there is less.
	side float64
	// headed writes the labels of rows above their first cell, with a rule along
	// the row, instead of to the left of it.
	headed bool
	// unlettered leaves the letters of the panels out.
	unlettered bool
}

// Limits of panels, in millimetres, and of scales, in millimetres an ångström:
// small molecules do not swell to fill the page.
const (
	leastPanel = 8.0
	maxScale   = 22.0
	usualPanel = 58.0
	leastShape = 0.35 // height of a panel, of its width
	mostLines  = 4    // of a closed form
)

// A plan is a grid with everything that decides its size.
type plan struct {
	grid    grid
	columns int
	packed  bool
	forms   bool
	// apart sets partner and copy of all panels below their labels.
	apart bool
	width float64 // of a column
	gap   float64 // between columns
	label float64 // width of the rows' labels
	scale float64
	panel picture.Panel
	lines [][]slot
	above []float64 // height of the heads of each line
	below []float64 // height of the captions of each line
}

// A slot is a cell in a line.
type slot struct {
	row, cell int
	column    int
}

func (g grid) cells() int {
	n := 0
	for _, r := range g.rows {
		n += len(r.cells)
	}
	return n
}

// longest is the most columns that can be of use.
func (g grid) longest(packed bool) int {
	if packed {
		return g.cells()
	}
	n := 1
	for _, r := range g.rows {
		n = max(n, len(r.cells))
	}
	return n
}

// lines puts the cells into lines of columns.
func (g grid) lines(columns int, packed bool) [][]slot {
	var out [][]slot
	var line []slot
	flush := func() {
		if len(line) > 0 {
			out = append(out, line)
		}
		line = nil
	}
	for r, row := range g.rows {
		perLine := columns
		if unit := max(1, row.unit); columns >= unit {
			perLine -= columns % unit
		}
		if !packed || !g.flows && len(line)+len(row.cells) > columns {
			flush()
		}
		inRow := 0
		for c := range row.cells {
			if packed && g.flows && len(line) == columns || inRow == perLine && !(packed && g.flows) {
				flush()
				inRow = 0
			}
			line = append(line, slot{r, c, len(line)})
			inRow++
		}
	}
	flush()
	return out
}

// plan decides the sizes of a grid in a width with a number of columns; ok is
// false where something does not fit into a column.
func (m *maker) plan(g grid, width float64, columns int, packed, forms bool) (p plan, ok bool) {
	p = plan{grid: g, columns: columns, packed: packed, forms: forms, gap: min(2.2, width/40)}
	if !packed && !g.headed && m.width >= 120 {
		for _, r := range g.rows {
			p.label = max(p.label, m.typesetter.width(r.label, m.title()))
		}
		if p.label > 0 {
			p.label += 2.5
		}
	}
	p.width = (width - p.label - p.gap*float64(columns-1)) / float64(columns)
	if p.width < leastPanel {
		return p, false
	}
	p.width = min(p.width, g.widest)
	p.lines = g.lines(columns, packed)
	for _, r := range g.rows {
		for _, c := range r.cells {
			p.apart = p.apart || len(c.which) > 0 && m.captionHead(c, p, "m").w > p.width
		}
	}
	n := 0
	for _, line := range p.lines {
		head, foot := 0.0, 0.0
		for _, s := range line {
			c := g.rows[s.row].cells[s.cell]
			caption, fits := m.caption(c, p, "z")
			_, own := m.caption(c, p, letterOf(n)) // "m" and "aa" are wider
			if !fits || !own {
				return p, false
			}
			n++
			foot = max(foot, caption.h)
			if g.headed {
				head = m.quiet().line() + headGap
				if s.cell == 0 && m.typesetter.width(g.rows[s.row].label, m.quiet()) > p.width {
					return p, false
				}
			}
		}
		p.above, p.below = append(p.above, head), append(p.below, foot)
	}
	return p.scaled(maxScale), true
}

// pad is the room around the bodies of a panel.
func (p plan) pad() float64 { return max(p.grid.side, 0.5+0.012*p.width) }

// scaled is the plan at the largest scale up to a limit that its columns allow.
func (p plan) scaled(most float64) plan {
	v, pad := p.grid.view, p.pad()
	over := 0.7 * pad // above and below
	p.scale = min(most, (p.width-2*pad)/v.Width)
	const tallest = 1.3 // of a panel, of its width
	if v.Height*p.scale+2*over > tallest*p.width && p.width > 2*over {
		p.scale = (tallest*p.width - 2*over) / v.Height
	}
	height := v.Height*p.scale + 2*over
	if p.grid.cells() == 1 {
		height = max(height, leastShape*p.width)
	}
	p.panel = picture.Panel{Width: p.width, Height: height, Scale: p.scale}
	return p
}

// Distances in millimetres.
const (
	captionGap = 0.9
	rowGap     = 3.0
	headGap    = 1.0
)

// size is the width and height of the grid.
func (p plan) size() (width, height float64) {
	used := 0
	for i, line := range p.lines {
		used = max(used, len(line))
		if i > 0 {
			height += rowGap
		}
		height += p.above[i] + p.panel.Height
		if p.below[i] > 0 {
			height += captionGap + p.below[i]
		}
	}
	return p.label + float64(used)*p.width + float64(used-1)*p.gap, height
}

// caption sets the lines below a panel, centred. fits is false where they are
// wider than the column or too long.
func (m *maker) caption(c cell, p plan, letter string) (b block, fits bool) {
	if m.figure.NoCaption {
		return block{}, true
	}
	var lines []block
	letterText := m.lettering(p.grid, letter)
	if len(c.title) == 0 {
		return block{}, true
	}
	if p.apart && len(c.which) > 0 {
		lines = append(lines, m.joined(letterText, m.line(c.title, m.title())))
		for _, l := range m.broken(c.which, m.quiet(), p.width) {
			lines = append(lines, m.line(l, m.quiet()))
		}
	} else {
		lines = append(lines, m.captionHead(c, p, letter))
	}
	if p.forms && len(c.form) > 0 {
		s := m.text()
		if c.small {
			s = m.quiet()
		}
		form := m.broken(c.form, s, p.width)
		if m.tears(c.form, s, p.width) || len(form) > mostLines && !c.small {
			return b, false
		}
		for _, l := range form {
			lines = append(lines, m.line(l, s))
		}
	}
	const slack = 1e-6
	for _, l := range lines {
		if l.w > p.width+slack {
			return b, false
		}
		b.put(l, (p.width-l.w)/2, b.h)
	}
	b.w = p.width
	return b, true
}

// captionHead is the first line of a caption: letter, label, partner and copy.
func (m *maker) captionHead(c cell, p plan, letter string) block {
	return m.joined(m.lettering(p.grid, letter), m.line(c.title, m.title()), m.line(c.which, m.quiet()))
}

// lettering is the letter of a panel.
func (m *maker) lettering(g grid, letter string) block {
	if m.figure.NoLetters || g.unlettered || g.cells() < 2 {
		return block{}
	}
	return m.line(notation.Words(letter), m.letter())
}

// joined sets blocks side by side on one base line.
func (m *maker) joined(parts ...block) block {
	var out block
	gap := 0.6 * m.size * mmPerPoint
	base := 0.0
	for _, p := range parts {
		for _, item := range p.items {
			if t, ok := item.(Text); ok {
				base = max(base, t.Y)
			}
		}
	}
	x := 0.0
	for _, p := range parts {
		if len(p.items) == 0 {
			continue
		}
		if x > 0 {
			x += gap
		}
		own := 0.0
		for _, item := range p.items {
			if t, ok := item.(Text); ok {
				own = max(own, t.Y)
			}
		}
		out.put(p, x, base-own)
		x += p.w
	}
	return out
}

// letterOf names panels: a … z, aa, ab …
func letterOf(n int) string {
	s := ""
	for n >= 0 {
		s = string(rune('a'+n%26)) + s
		n = n/26 - 1
	}
	return s
}

// draw makes the block of a plan.
func (m *maker) draw(p plan) (block, error) {
	var out block
	n, y := 0, 0.0
	for i, line := range p.lines {
		if i > 0 {
			y += rowGap
		}
		last := -1
		for _, s := range line {
			r := p.grid.rows[s.row]
			c := r.cells[s.cell]
			x := p.label + float64(s.column)*(p.width+p.gap)
			if s.row != last && p.label > 0 && s.cell == 0 {
				label := m.line(r.label, m.title())
				out.put(label, 0, y+p.above[i]+(p.panel.Height-label.h)/2)
			}
			last = s.row
			if p.grid.headed {
				m.head(&out, p, s, x, y)
			}
			panel, err := m.panel(c.body, c.seen(p.grid.view), p.panel, c.name, c.named)
			if err != nil {
				return out, err
			}
			out.put(panel, x, y+p.above[i])
			caption, _ := m.caption(c, p, letterOf(n))
			if len(caption.items) > 0 {
				out.put(caption, x, y+p.above[i]+p.panel.Height+captionGap)
			}
			n++
		}
		y += p.above[i] + p.panel.Height
		if p.below[i] > 0 {
			y += captionGap + p.below[i]
		}
	}
	w, h := p.size()
	out.grow(w, h)
	return out, nil
}

// bisected finds the largest scale at which a plan fits, by a test that holds
// for all smaller ones; ok is false if there is none that shows anything.
func (p plan) bisected(fits func(plan) bool) (plan, bool) {
	if fits(p) {
		return p, true
	}
	low, high := 0.0, p.scale
	for range 24 {
		middle := (low + high) / 2
		if fits(p.scaled(middle)) {
			low = middle
		} else {
			high = middle
		}
	}
	out := p.scaled(low)
	return out, low > 0 && out.panel.Height >= leastPanel*0.75 && out.grid.view.Width*out.scale >= leastPanel*0.6 && !math.IsNaN(low)
}

// head draws the label of a row above its first cell, and a rule above every
// cell that joins it to the next of its row.
func (m *maker) head(out *block, p plan, s slot, x, y float64) {
	const rule = 0.18 // mm
	h := m.quiet().line()
	if s.cell == 0 {
		out.put(m.line(p.grid.rows[s.row].label, m.quiet()), x, y)
	}
	end := x + p.width
	if s.cell+1 < len(p.grid.rows[s.row].cells) && s.column+1 < p.columns {
		end += p.gap
	}
	out.items = append(out.items, Line{Points: [][2]float64{{x, y + h + 0.25}, {end, y + h + 0.25}}, Width: rule, Color: m.palette.Rule})
}
