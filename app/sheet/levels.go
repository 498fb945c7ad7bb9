package sheet

import (
	"fmt"
	"math"
	"strconv"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/work"
	"lobewright/symmetry/message"
)

// A level is one set of partners: a group orbital on the left, orbitals of the
// central atom on the right.
type level struct {
	irrep     string
	copy      int // from 0, within its side
	dimension int
	text      notation.Text // label
	functions notation.Text // of the central atom
	body      *picture.Body
	height    float64 // 0 to 1 from below
	matched   bool
}

// The sides of a sketch, as study.Level names them.
const (
	groupSide   = "group"
	centralSide = "central"
)

// levels is a sketch for interactions: levels of group orbitals on the left,
// of the central atom's orbitals on the right, and lines between those that
// have one symmetry. Heights are set by hand or even; they claim no energy.
func (m *maker) levels() (*Sheet, error) {
	o, err := m.work.Orbitals(m.ctx, m.study)
	if err != nil {
		return nil, err
	}
	atom, err := m.centralAtom(o)
	if err != nil {
		return nil, err
	}
	centralStudy := m.study
	centralStudy.Basis = nil
	for _, shell := range []string{"s", "p", "d"} {
		centralStudy.Basis = append(centralStudy.Basis, strconv.Itoa(atom+1)+":"+shell)
	}
	// The results of another basis are not kept in the place of this one.
	central, err := m.work.Beside(m.ctx, o.Group, centralStudy)
	if err != nil {
		return nil, err
	}
	phase := func(irrep string, coefficients []float64) float64 {
		for i, ir := range o.Irreps {
			if ir.Label == irrep && o.Content[i] > 0 {
				return float64(work.Phase(o.Basis, partnerOf(o, i, 0, 0).Coefficients, atom, central.Basis, coefficients))
			}
		}
		return 1
	}
	left, right := m.levelsOf(o, groupSide, nil), m.levelsOf(central, centralSide, phase)
	match(left, right)
	d := card{group: o.Group, lobes: true}
	name := o.Group.AtomNames()[atom]
	d.lines = append(d.lines, cardLine{m.contentText(o), m.text()},
		cardLine{notation.Words(m.say("captions.levelsText", name)), m.quiet()},
		cardLine{notation.Words(m.heightsText()), m.quiet()})
	view := picture.NewViewpoint(m.study.Camera, left[0].body, right[0].body)
	content, err := m.sketch(left, right, view, d)
	if err != nil {
		return nil, err
	}
	return m.finish(m.say("captions.titleLevels", o.Molecule.Title, name), content)
}

func (m *maker) heightsText() string {
	if len(m.study.Levels) > 0 {
		return m.say("captions.levelsByHand")
	}
	return m.say("captions.levelsEven")
}

// centralAtom is the one that the study chooses, or the one that all operations
// leave in its place and that carries none of the functions.
func (m *maker) centralAtom(o *work.Orbitals) (int, error) {
	atoms := len(o.Group.Sites.Positions)
	if n := m.study.Central; n > 0 {
		if n > atoms {
			return 0, message.Errorf("there is no atom %d; the structure has %d", n, atoms)
		}
		return n - 1, nil
	}
	carries := make([]bool, atoms)
	for _, f := range o.Basis.Functions {
		carries[f.Site] = true
	}
	best, found := 0, false
	for i, p := range o.Group.Sites.Positions {
		fixed := true
		for _, permutation := range o.Group.Sites.Permutations {
			fixed = fixed && permutation[i] == i
		}
		if o.Fit.Setting.Infinite() {
			const onAxis = 1e-6
			fixed = math.Hypot(p[0], p[1]) < onAxis && (o.Fit.Setting.Symbol == "C∞v" || p.Len() < onAxis)
		}
		if fixed && !carries[i] && (!found || p.Len() < o.Group.Sites.Positions[best].Len()) {
			best, found = i, true
		}
	}
	if !found {
		return 0, message.Errorf("no atom without functions stays in its place under all operations; choose the central one")
	}
	return best, nil
}

// levelsOf lists the sets of a projection, from above down by irrep and copy
// unless they are placed by hand. With phase, which gives the sign to draw
// functions of an irrep with, they are those of the central atom.
func (m *maker) levelsOf(o *work.Orbitals, side string, phase func(irrep string, coefficients []float64) float64) []level {
	var out []level
	central := phase != nil
	for i, irrep := range o.Irreps {
		for copy := range o.Content[i] {
			coefficients := partnerOf(o, i, copy, 0).Coefficients
			sign := 1.0
			if central {
				sign = phase(irrep.Label, coefficients)
				coefficients = scaled(coefficients, sign)
			}
			l := level{
				irrep: irrep.Label, copy: copy, dimension: irrep.Dimension, text: notation.OrbitalText(irrep.Label),
				body: m.bodies.Lobes(o.Basis, coefficients, m.study),
			}
			if o.Content[i] > 1 && !central {
				l.text = l.text.Then(notation.Words(fmt.Sprintf(" (%d)", copy+1)))
			}
			if central {
				l.functions = functionsOf(o, i, copy, sign)
			}
			out = append(out, l)
		}
	}
	for k := range out {
		// The middle of equal parts, from above.
		out[k].height = 1 - (float64(k)+0.5)/float64(len(out))
		for _, set := range m.study.Levels {
			if set.Side == side && max(set.Copy, 1) == out[k].copy+1 && set.Irrep == out[k].irrep {
				out[k].height = set.Height / 100
			}
		}
	}
	return out
}

func scaled(v []float64, by float64) []float64 {
	out := make([]float64, len(v))
	for i, x := range v {
		out[i] = by * x
	}
	return out
}

// functionsOf names the functions of an atom that a set is made of, with a minus
// where a partner is one function that is drawn so.
func functionsOf(o *work.Orbitals, irrep, copy int, sign float64) notation.Text {
	var t notation.Text
	used := map[string]bool{}
	for partner := range o.Irreps[irrep].Dimension {
		g := partnerOf(o, irrep, copy, partner)
		several := -1
		for _, c := range g.Coefficients {
			if math.Abs(c) >= 1e-9 {
				several++
			}
		}
		for i, c := range g.Coefficients {
			name := o.Basis.Functions[i].Name
			if math.Abs(c) < 1e-9 || used[name] {
				continue
			}
			used[name] = true
			if len(t) > 0 {
				t = t.Then(notation.Words(", "))
			}
			if several == 0 && sign*c < 0 {
				t = t.Then(notation.Words("−"))
			}
			t = t.Then(notation.Function(name))
		}
	}
	return t
}

// match marks the levels that have a partner on the other side.
func match(left, right []level) {
	for i := range left {
		for k := range right {
			if left[i].irrep == right[k].irrep {
				left[i].matched, right[k].matched = true, true
			}
		}
	}
}

// Levels on paper, in millimetres.
const (
	levelWidth = 0.45 // of a level's line
	levelGap   = 0.9  // between the lines of a degenerate level
	levelClear = 1.2
	nearLevels = 0.9 // levels nearer than this stand side by side
)

// A column is one side of a sketch.
type column struct {
	levels  []level
	heights []float64 // mm from above, of the levels
	rows    []float64 // of labels and panels
	slots   []int     // side by side, from the inside
	most    int       // slots
	label   float64   // width of the labels
	caption []block
}

// sketch lays out both sides.
func (m *maker) sketch(left, right []level, view picture.Viewpoint, d card) (block, error) {
	columns := [2]column{{levels: left}, {levels: right}}
	var line float64 // of a level, with all its partners
	for i := range columns {
		c := &columns[i]
		for _, l := range c.levels {
			b := m.levelCaption(l)
			c.caption = append(c.caption, b)
			c.label = max(c.label, b.w)
		}
	}
	rows := float64(max(len(left), len(right)))
	line = max(3.2, min(9*m.weight(), 0.07*m.inner()))
	fixed := columns[0].label + columns[1].label + 2*(line+4*levelClear)
	const leastFan = 0.16 // of the width, for the lines between
	free := m.inner() - fixed - leastFan*m.inner()
	scale := min(maxScale, (min(free/2-1, m.largest())-1)/view.Width)
	pl := plan{grid: grid{view: view}, scale: scale}
	at := m.placeCard(d, pl, m.inner(), false)
	room := m.room() - at.h - cardGap
	if pitch := room / rows; view.Height*scale+1.2 > pitch {
		scale = (pitch - 1.2) / view.Height
	}
	var panel picture.Panel
	if max(view.Width, view.Height)*scale >= 0.8*leastPanel {
		panel = picture.Panel{Width: view.Width*scale + 1, Height: view.Height*scale + 0.7, Scale: scale}
	} else {
		m.note("captions.noPictures")
	}
	caption := 0.0
	for _, c := range columns {
		for _, b := range c.caption {
			caption = max(caption, b.h)
		}
	}
	pitch := max(panel.Height, caption) + 0.5
	height := rows * pitch
	if m.height > 0 {
		height = max(height, min(room, 1.4*height))
	}
	for i := range columns {
		columns[i].place(height, pitch)
	}
	drawn, err := m.drawSketch(columns, view, panel, line, height)
	if err != nil {
		return block{}, err
	}
	foot, err := m.drawCard(d, at, pl)
	if err != nil {
		return block{}, err
	}
	out := block{}
	out.put(drawn, 0, 0)
	if foot.h > 0 {
		out.put(foot, (drawn.w-foot.w)/2, out.h+cardGap)
	}
	return out, nil
}

func (m *maker) levelCaption(l level) block {
	var b block
	if m.figure.NoCaption {
		return b
	}
	b.put(m.line(l.text, m.title()), 0, 0)
	if len(l.functions) > 0 {
		b.put(m.line(l.functions, m.text()), 0, b.h)
	}
	return b
}

// place finds the heights of levels, and those of labels and panels, which may
// not touch.
func (c *column) place(height, pitch float64) {
	for _, l := range c.levels {
		c.heights = append(c.heights, (1-l.height)*(height-2*nearLevels)+nearLevels)
	}
	c.rows = spread(c.heights, pitch, pitch/2, height-pitch/2)
	c.slots = make([]int, len(c.levels))
	for i := range c.levels {
		taken := map[int]bool{}
		for k := range i {
			if math.Abs(c.heights[i]-c.heights[k]) < nearLevels {
				taken[c.slots[k]] = true
			}
		}
		for taken[c.slots[i]] {
			c.slots[i]++
		}
		c.most = max(c.most, c.slots[i]+1)
	}
}

// drawSketch draws both sides from the outside in: panel, label, level; and the
// lines between levels of one symmetry.
func (m *maker) drawSketch(columns [2]column, view picture.Viewpoint, panel picture.Panel, line, height float64) (block, error) {
	var out block
	var lines []Item
	inner := map[int]map[int][2]float64{0: {}, 1: {}} // ends of levels by side and number
	for side, c := range columns {
		// x runs from the outer edge inward.
		x := func(from, width float64) float64 {
			if side == 0 {
				return from
			}
			return m.inner() - from - width
		}
		labelFrom := panel.Width + levelClear
		leadFrom := labelFrom + c.label + levelClear
		levelFrom := leadFrom + 2*levelClear
		slot := line + levelClear
		for i, l := range c.levels {
			if panel.Width > 0 {
				drawn, err := m.panel(l.body, view, panel, l.irrep, false)
				if err != nil {
					return out, err
				}
				out.put(drawn, x(0, panel.Width), c.rows[i]-panel.Height/2)
			}
			caption := c.caption[i]
			out.put(caption, x(labelFrom, c.label), c.rows[i]-caption.h/2)
			from := levelFrom + float64(c.most-1-c.slots[i])*slot
			y := c.heights[i]
			gap := levelGap * m.weight()
			part := (line - gap*float64(l.dimension-1)) / float64(l.dimension)
			for k := range l.dimension {
				a := x(from+float64(k)*(part+gap), part)
				lines = append(lines, Line{Points: [][2]float64{{a, y}, {a + part, y}}, Width: levelWidth * m.weight(), Color: m.palette.Ink})
			}
			if c.most == 1 && math.Abs(c.rows[i]-y) > 0.3 {
				// The level stands elsewhere than its label.
				a, b := x(leadFrom, 0), x(from-0.5*levelClear, 0)
				lines = append(lines, Line{Points: [][2]float64{{a, c.rows[i]}, {b, y}}, Width: 0.12, Color: m.palette.Rule})
			}
			inner[side][i] = [2]float64{x(from+line+0.5*levelClear, 0), y}
		}
	}
	for i, l := range columns[0].levels {
		for k, r := range columns[1].levels {
			if l.irrep == r.irrep {
				lines = append(lines, Line{Points: [][2]float64{inner[0][i], inner[1][k]}, Width: tieWidth * m.weight(), Dash: []float64{1.1, 0.8}, Color: m.palette.Quiet})
			}
		}
	}
	out.items = append(out.items, lines...)
	out.w, out.h = m.inner(), height
	return out, nil
}
