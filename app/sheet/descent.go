package sheet

import (
	"strconv"
	"strings"

	"gonum.org/v1/gonum/mat"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// A correlation says what becomes of the irreps of a group in a subgroup.
type correlation struct {
	symbol, subgroup string
	order            []string // irreps of the subgroup
	labels           []string // of the group
	content          [][]symmetry.Content
	partners         []*mat.Dense
}

// correlate follows the irreps of a group into the subgroup that a study names,
// "C4v" or "C4v:2" for the second way in which it lies in the group; kept are
// operations that it holds.
func correlate(g *work.Group, text, kept string) (*correlation, error) {
	setting := g.Fit.Setting
	if text == "" {
		return nil, message.Errorf("no subgroup is chosen")
	}
	symbol, number, numbered := strings.Cut(text, ":")
	c := &correlation{symbol: setting.Symbol}
	fill := func(sub *symmetry.Setting, irreps []symmetry.Irrep) {
		c.subgroup = sub.Symbol
		for _, ir := range sub.Irreps {
			c.order = append(c.order, ir.Label)
		}
		for _, ir := range irreps {
			c.labels = append(c.labels, ir.Label)
		}
	}
	if setting.Infinite() {
		const most = 6 // |Λ|: what occurs for functions up to f, and more
		d, err := symmetry.DescendLinear(setting.Symbol, symbol, most)
		if err != nil {
			return nil, err
		}
		fill(d.Subgroup, d.Irreps)
		c.content, c.partners = d.Correlation, d.Partners
		return c, nil
	}
	all, err := work.Descents(setting, symbol, nil)
	if err != nil {
		return nil, err
	}
	n := 1
	if numbered {
		if n, err = strconv.Atoi(number); err != nil || n < 1 || n > len(all) {
			return nil, message.Errorf("%s lies in %s in %d ways that differ; %q is none of them", symbol, setting.Symbol, len(all), text)
		}
	}
	d, err := g.Conjugate(all[n-1], kept)
	if err != nil {
		return nil, err
	}
	fill(d.Subgroup, setting.Irreps)
	c.content, c.partners = d.Correlation, d.Partners
	return c, nil
}

// index is that of an irrep of the group; −1 if it is not followed.
func (c *correlation) index(label string) int {
	for i, l := range c.labels {
		if l == label {
			return i
		}
	}
	return -1
}

// A branch is an irrep of the subgroup that comes from one of the group, with
// its partners as combinations of the functions of a basis.
type branch struct {
	label  string
	bodies []*picture.Body
}

// A parent is an irrep of the group, or one copy of it, with its branches.
type parent struct {
	label    string
	branches []branch
}

// descent shows what becomes of the irreps of the group in a subgroup: irreps
// on the left, those of the subgroup on the right, lines between, and on the
// lines the group orbitals adapted to the subgroup.
func (m *maker) descent() (*Sheet, error) {
	g, err := m.group()
	if err != nil {
		return nil, err
	}
	c, err := correlate(g, m.study.Subgroup, m.study.Kept)
	if err != nil {
		return nil, err
	}
	var parents []parent
	d := card{group: g}
	if len(m.study.Basis) > 0 {
		o, err := m.work.Orbitals(m.ctx, m.study)
		if err != nil {
			return nil, err
		}
		if parents, err = m.adapted(o, c); err != nil {
			return nil, err
		}
		d.lobes = true
		d.lines = append(d.lines, cardLine{m.contentText(o), m.text()})
	} else {
		parents = bareParents(c)
	}
	head := notation.Words(g.Molecule.Title+"   ").Then(notation.Group(c.symbol), notation.Words(" → "), notation.Group(c.subgroup))
	d.lines = append([]cardLine{{head, m.title()}}, d.lines...)
	content, err := m.branches(g, parents, c, d)
	if err != nil {
		return nil, err
	}
	return m.finish(m.say("captions.titleDescent", g.Molecule.Title, c.symbol, c.subgroup), content)
}

func bareParents(c *correlation) []parent {
	var out []parent
	for i, label := range c.labels {
		p := parent{label: label}
		for _, content := range c.content[i] {
			for range content.Copies {
				p.branches = append(p.branches, branch{label: content.Irrep.Label})
			}
		}
		out = append(out, p)
	}
	return out
}

// adapted turns the partners of every set of group orbitals into those of the
// subgroup: if column k of the matrix is partner k as a combination of the
// subgroup's, row j has the subgroup's partner j as one of ours.
func (m *maker) adapted(o *work.Orbitals, c *correlation) ([]parent, error) {
	var out []parent
	for i, irrep := range o.Irreps {
		at := c.index(irrep.Label)
		if o.Content[i] > 0 && at < 0 {
			return nil, message.Errorf("%s cannot be followed into %s", irrep.Label, c.subgroup)
		}
		for copy := range o.Content[i] {
			p := parent{label: irrep.Label}
			row := 0
			for _, content := range c.content[at] {
				for range content.Copies {
					b := branch{label: content.Irrep.Label}
					for range content.Irrep.Dimension {
						sum := make([]float64, len(o.Basis.Functions))
						for k := range irrep.Dimension {
							add(sum, partnerOf(o, i, copy, k), c.partners[at].At(row, k))
						}
						b.bodies = append(b.bodies, m.bodies.Lobes(o.Basis, sum, m.study))
						row++
					}
					p.branches = append(p.branches, b)
				}
			}
			out = append(out, p)
		}
	}
	return out, nil
}

func partnerOf(o *work.Orbitals, irrep, copy, partner int) *orbitals.GroupOrbital {
	for i := range o.Projection.Orbitals {
		if g := &o.Projection.Orbitals[i]; g.Irrep == irrep && g.Copy == copy && g.Partner == partner {
			return g
		}
	}
	return nil
}

func add(sum []float64, orbital *orbitals.GroupOrbital, by float64) {
	if orbital == nil {
		return
	}
	for i, c := range orbital.Coefficients {
		sum[i] += by * c
	}
}

// bared are parents without pictures.
func bared(parents []parent) []parent {
	out := make([]parent, len(parents))
	for i, p := range parents {
		out[i].label = p.label
		for _, b := range p.branches {
			out[i].branches = append(out[i].branches, branch{label: b.label})
		}
	}
	return out
}

// branches lays out a descent.
func (m *maker) branches(g *work.Group, parents []parent, c *correlation, d card) (block, error) {
	var view picture.Viewpoint
	most, rows := 0, 0
	for _, p := range parents {
		rows += len(p.branches)
		for _, b := range p.branches {
			if len(b.bodies) > 0 && most == 0 {
				view = picture.NewViewpoint(m.study.Camera, b.bodies[0])
			}
			most = max(most, len(b.bodies))
		}
	}
	if rows > mostPanels {
		return block{}, message.Errorf("there are %d branches; a sheet holds %d", rows, mostPanels)
	}
	if most == 0 {
		view = picture.NewViewpoint(m.study.Camera, m.bodies.Molecule(g, m.study))
	}
	s := m.title()
	left, right := m.labelWidths(parents, c, s)
	// Between the labels: a fan, the panels, a fan.
	fan := max(6, 0.09*m.inner())
	between := m.inner() - left - right - 4*tieClear
	pl := plan{grid: grid{view: view}, width: 1e9, scale: 0}
	measure := func(scale float64) (panel picture.Panel, rowHeight, gap, height float64, at placedCard) {
		if most > 0 {
			panel = picture.Panel{Width: view.Width*scale + 1, Height: view.Height*scale + 0.7, Scale: scale}
		}
		pl.scale = scale
		at = m.placeCard(d, pl, m.inner(), false)
		rowHeight = max(panel.Height, s.line())
		gap = 0.25 * s.line()
		height = float64(rows)*(rowHeight+gap) + float64(len(parents)-1)*2*gap + s.line() + 1
		if at.h > 0 {
			height += cardGap + at.h
		}
		return panel, rowHeight, gap, height, at
	}
	scale := 1.0
	if most > 0 {
		widest := min((between-2*fan)/float64(most)-1, 0.5*between, m.largest())
		scale = min(maxScale, widest/view.Width)
		if widest < leastPanel {
			m.note("captions.noOrbitals")
			return m.branches(g, bared(parents), c, d)
		}
		room := m.room()
		for _, _, _, h, _ := measure(scale); h > room && max(view.Width, view.Height)*scale > leastPanel; _, _, _, h, _ = measure(scale) {
			scale *= 0.97
		}
	}
	panel, rowHeight, gap, _, at := measure(scale)
	t := tree{maker: m, style: s, panel: panel, rowHeight: rowHeight, gap: gap, left: left, right: right, most: most}
	drawn, err := t.draw(parents, c, view)
	if err != nil {
		return block{}, err
	}
	foot, err := m.drawCard(d, at, pl)
	if err != nil {
		return block{}, err
	}
	out := block{}
	width := max(drawn.w, foot.w)
	out.put(drawn, (width-drawn.w)/2, 0)
	if foot.h > 0 {
		out.put(foot, (width-foot.w)/2, out.h+cardGap)
	}
	return out, nil
}

func (m *maker) labelWidths(parents []parent, c *correlation, s style) (left, right float64) {
	left, right = m.typesetter.width(notation.Group(c.symbol), s), m.typesetter.width(notation.Group(c.subgroup), s)
	for _, p := range parents {
		left = max(left, m.typesetter.width(notation.Irrep(p.label), s))
	}
	for _, l := range c.order {
		right = max(right, m.typesetter.width(notation.Irrep(l), s))
	}
	return left, right
}
