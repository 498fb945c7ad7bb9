//go:build cgo && !nowindow

package window

import (
	"slices"
	"strconv"

	"fyne.io/fyne/v2"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
)

// companions are the group orbitals that are shown side by side, the chosen one
// included: all partners of its set, or it and the one that is held; nil where
// the picture is not split.
func (u *ui) companions() []*orbitals.GroupOrbital {
	s, o := u.now(), u.orbital()
	if o == nil || len(s.Basis) == 0 || s.Projection.TheSubject() != study.SubjectOrbital {
		return nil
	}
	all := u.state.Orbitals
	var out []*orbitals.GroupOrbital
	if s.Look.Split {
		out = all.Partners(o.Irrep, o.Copy)
	} else {
		out = []*orbitals.GroupOrbital{o}
	}
	if s.Held.Irrep != "" {
		held, err := all.Orbital(study.Projection{Irrep: s.Held.Irrep, Copy: s.Held.Copy, Partner: s.Held.Partner})
		if err == nil && !contains(out, held) {
			out = append(out[:len(out):len(out)], held)
		}
	}
	if len(out) < 2 {
		return nil
	}
	return out
}

func contains(list []*orbitals.GroupOrbital, o *orbitals.GroupOrbital) bool {
	for _, x := range list {
		if x.Irrep == o.Irrep && x.Copy == o.Copy && x.Partner == o.Partner {
			return true
		}
	}
	return false
}

// split makes the pictures of a split view of what would be shown alone.
func (u *ui) split(alone picture.Shown) (first picture.Shown, beside []picture.Shown) {
	list := u.companions()
	if _, growing := u.tally.column(); list == nil || growing {
		return alone, nil // a sum that grows has the picture for itself
	}
	s := u.now()
	for i, o := range list {
		shown := alone
		shown.Coefficients, shown.Nodes = o.Coefficients, u.nodes(s, o)
		shown.Notes = []notation.Text{u.orbitalTitle(o)}
		if len(shown.Before) > 0 && !sameOrbital(o, u.orbital()) {
			shown.Before, shown.Fade = nil, 0
		}
		if i == 0 {
			shown.Notes = append(shown.Notes, alone.Notes...)
			first = shown
			continue
		}
		shown.Look.NoAxes, shown.Held = true, nil // one triad is enough under one camera
		beside = append(beside, shown)
	}
	return first, beside
}

func sameOrbital(a, b *orbitals.GroupOrbital) bool {
	return a != nil && b != nil && a.Irrep == b.Irrep && a.Copy == b.Copy && a.Partner == b.Partner
}

// orbitalTitle names a group orbital: "eu  2  like y".
func (u *ui) orbitalTitle(o *orbitals.GroupOrbital) notation.Text {
	irrep := u.state.Orbitals.Irreps[o.Irrep]
	t := notation.OrbitalText(irrep.Label)
	if irrep.Dimension > 1 {
		t = t.Then(notation.Words("  " + say("partners.partner", o.Partner+1)))
	}
	if n := u.state.Orbitals.Content[o.Irrep]; n > 1 {
		t = t.Then(notation.Words("  " + say("follows.copy", o.Copy+1, n)))
	}
	if f := likeOnly(irrep.Functions, o.Partner); f != nil {
		t = t.Then(notation.Words("  "), fill(say("partners.like"), f))
	}
	return t
}

// besideHeight is the height of the pane below a split view for d partners.
func besideHeight(d int) float32 { return float32(18*d + 20) }

// fitBeside shows the pane with the matrix where partners are side by side.
func (u *ui) fitBeside() {
	o, _, ok := u.besideOf()
	ok = ok && u.pages.open != sheetPage // the picture is not there
	least := fyne.NewSize(100, 0)
	if ok {
		least.Height = besideHeight(u.state.Orbitals.Irreps[o.Irrep].Dimension)
	}
	if ok == u.beside.Visible() && u.beside.least == least {
		return
	}
	u.beside.least = least
	if ok {
		u.beside.Show()
	} else {
		u.beside.Hide()
	}
	u.win.Content().Refresh()
}

// besideOf is the set whose matrix is shown, and the operation at hand; its
// name is empty if there is none.
func (u *ui) besideOf() (*orbitals.GroupOrbital, work.Operation, bool) {
	o := u.orbital()
	if !u.now().Look.Split || o == nil || u.companions() == nil || u.state.Orbitals.Irreps[o.Irrep].Dimension < 2 {
		return nil, work.Operation{}, false
	}
	op, _ := u.operation()
	return o, op, true
}

// drawBeside draws the matrix of the operation at hand and what it makes of
// every partner.
func (u *ui) drawBeside(b *board) {
	o, op, ok := u.besideOf()
	if !ok {
		return
	}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	plain := style{size: textSize, color: b.palette.Ink, align: -1}
	if op.Name == "" {
		b.paragraph(pad, 22, b.width-2*pad, notation.Words(say("partners.noOperation")), quiet)
		return
	}
	m := u.matrix(o, op)
	if m == nil {
		return
	}
	name := fill(say("partners.matrix"), notation.Operation(op.Name))
	middle := 8 + (18*float64(len(m))+4)/2
	w := b.text(pad, middle+4, name, quiet)
	x := b.matrix(pad+w+12, 8, m, plain.color) + 20
	functions := u.state.Orbitals.Irreps[o.Irrep].Functions
	lines := becomes(m, func(k int) notation.Text { return u.shortName(b, functions, k) })
	fit := func() bool {
		return !slices.ContainsFunc(lines, func(t notation.Text) bool { return b.measure(t, quiet) > b.width-x-pad })
	}
	if !fit() {
		lines = becomes(m, numberedPartner)
	}
	if !fit() {
		return // the matrix says it too
	}
	for k, t := range lines {
		b.text(x, 8+18*float64(k)+14, t, quiet)
	}
}

// becomes writes what a matrix makes of every partner: "x → −1/2 x + √3/2 y".
func becomes(m [][]float64, name func(k int) notation.Text) []notation.Text {
	out := make([]notation.Text, len(m))
	for k := range m {
		t := name(k).Then(notation.Words(" → "))
		first := true
		for l := range m {
			v := m[l][k]
			if v < 1e-9 && v > -1e-9 {
				continue
			}
			t = t.Then(notation.Words(factor(v, first)), bracketed(name(l), v))
			first = false
		}
		out[k] = t
	}
	return out
}

// numberedPartner stands for a partner where its function is too long.
func numberedPartner(k int) notation.Text {
	return notation.Text{{Text: "ψ", Italic: true}, {Text: strconv.Itoa(k + 1), Place: notation.Sub}}
}

// bracketed puts a sum that a factor other than 1 stands before in brackets.
func bracketed(t notation.Text, v float64) notation.Text {
	if v > 1-1e-9 {
		return t
	}
	for _, r := range t.String() {
		if r == '−' || r == '+' {
			return notation.Words("(").Then(t, notation.Words(")"))
		}
	}
	return t
}

// factor writes the sign and the size of a factor within a sum.
func factor(v float64, first bool) string {
	sign := ""
	switch {
	case v < 0 && first:
		sign = "−"
	case v < 0:
		sign = " − "
	case !first:
		sign = " + "
	}
	size := entry(max(v, -v))
	if size == "1" {
		return sign
	}
	return sign + size + " "
}

// matrix is what an operation makes of the partners of a set, by rows; nil if it
// is not known.
func (u *ui) matrix(o *orbitals.GroupOrbital, op work.Operation) [][]float64 {
	irrep := u.state.Orbitals.Irreps[o.Irrep]
	m := irrep.Matrices
	d := irrep.Dimension
	out := make([][]float64, d)
	if op.Index >= 0 && op.Index < len(m) {
		for i := range out {
			out[i] = append([]float64(nil), m[op.Index].RawRowView(i)...)
		}
		return out
	}
	p := u.state.Play
	if p == nil || p.Matrix == nil || p.Operation.Name != op.Name || !sameOrbital(p.Orbital, o) {
		return nil
	}
	for i := range out {
		out[i] = append([]float64(nil), p.Matrix.RawRowView(i)...)
	}
	return out
}
