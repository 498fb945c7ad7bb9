//go:build cgo && !nowindow

package window

import (
	"fmt"
	"math"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// orbitalName names the spot of a group orbital; all counted from 0.
func orbitalName(irrep, number, partner int) string {
	return fmt.Sprintf("orbital %d %d %d", irrep, number, partner)
}

// mostCopies is how many copies the pane lists; the command line lists all.
const mostCopies = 400

// drawFollows draws the right pane: the content of the basis, and its group
// orbitals with partners side by side.
func (u *ui) drawFollows(b *board) {
	y := pad - u.follows.scroll
	width := b.width - 2*pad
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	accent := style{size: secondSize, color: b.palette.Accent, align: -1}
	s, st := u.now(), u.state
	defer func() { u.follows.extent = y + pad + u.follows.scroll }()
	if len(s.Basis) == 0 || st.Orbitals == nil {
		text := say("follows.none")
		if st.Progress != nil {
			text = say("follows.computing")
		}
		y = b.paragraph(pad, y+textSize, width, notation.Words(text), quiet)
		return
	}
	o := st.Orbitals
	if st.Stale(work.StageOrbitals) {
		y = b.paragraph(pad, y+secondSize, width, notation.Words(say("follows.stale")), accent)
	}
	y = u.drawContent(b, y, width, o)
	if p := st.Problem(work.ConcernIrrep); p != nil {
		y = b.paragraph(pad, y, width, problemWords(p), accent)
	}
	y += 2
	chosen := u.orbital()
	if s.Projection.TheSubject() != study.SubjectOrbital {
		chosen = nil
	}
	list := o.Projection.Orbitals
	u.thumbs.missing = 0
	defer func() {
		if !st.Stale(work.StageOrbitals) && u.thumbs.missing == 0 {
			u.measured.pictures(st.Study.Basis)
		}
	}()
	copies := 0
	for i := 0; i < len(list); {
		n := o.Irreps[list[i].Irrep].Dimension
		if copies++; copies > mostCopies {
			y = b.paragraph(pad, y+secondSize, width, notation.Words(say("follows.more", len(list)-i)), quiet)
			break
		}
		y = u.drawCopy(b, y, width, o, list[i:i+n], i, chosen)
		i += n
	}
}

// contentText writes the content with irreps set as such: "2A1g + Eu".
func contentText(o *work.Orbitals) notation.Text {
	t := notation.Words("Γ = ")
	first := true
	for i, n := range o.Content {
		if n == 0 {
			continue
		}
		if !first {
			t = t.Then(notation.Words(" + "))
		}
		first = false
		if n > 1 {
			t = t.Then(notation.Words(fmt.Sprint(n, " ")))
		}
		t = t.Then(notation.Irrep(o.Irreps[i].Label))
	}
	return t
}

// chosenSet names the place of the chosen copy, which does nothing by itself.
const chosenSet = "chosen set"

// drawCopy draws one copy: its label and a picture of every partner.
func (u *ui) drawCopy(b *board, y, width float64, o *work.Orbitals, partners []orbitals.GroupOrbital, first int, chosen *orbitals.GroupOrbital) (bottom float64) {
	irrep := o.Irreps[partners[0].Irrep]
	label := style{size: headSize, color: b.palette.Ink, align: -1}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	if chosen != nil && chosen.Irrep == partners[0].Irrep && chosen.Copy == partners[0].Copy {
		// What belongs to the choice is scrolled to as a whole.
		at, top := len(b.spots), y
		b.spot(spot{x: pad, y: y, width: width, name: chosenSet})
		defer func() { b.spots[at].height = bottom - top }()
	}
	b.fill(pad, y, width, 1, faint(b.palette.Rule, 0x60))
	y += 6
	w := b.text(pad, y+headSize, notation.OrbitalText(irrep.Label), label)
	if n := o.Content[partners[0].Irrep]; n > 1 {
		b.text(pad+w+10, y+headSize, notation.Words(say("follows.copy", partners[0].Copy+1, n)), quiet)
	}
	y += headSize + 8
	const gap = 6
	columns := min(max(len(partners), 2), 3)
	side := math.Floor((width - gap*float64(columns-1)) / float64(columns))
	if len(partners) == 1 {
		side = math.Floor((width - 2*gap) / 3)
	}
	side = min(side, 112)
	x := float64(pad)
	for k := range partners {
		if k > 0 && k%columns == 0 {
			x = pad
			y += side + 20
		}
		p := partners[k]
		if y+side > 0 && y < b.height {
			b.fill(x, y, side, side, b.palette.Ground)
			b.image(x+2, y+2, u.thumbs.get(first+k, side-4))
		}
		name := orbitalName(p.Irrep, p.Copy, p.Partner)
		if chosen != nil && chosen.Irrep == p.Irrep && chosen.Copy == p.Copy && chosen.Partner == p.Partner {
			b.frame(x, y, side, side, 2, b.palette.Accent)
		} else {
			b.frame(x, y, side, side, 1, faint(b.palette.Rule, 0x70))
		}
		under, small := likeness(irrep, p.Partner), style{size: secondSize, color: b.palette.Quiet}
		if b.measure(under, small) > side+gap {
			under = notation.Words(say("partners.partner", p.Partner+1)) // after a turn by any angle
		}
		b.text(x+side/2, y+side+13, under, small)
		b.spot(spot{x: x, y: y, width: side, height: side + 17, name: name, do: func() { u.chooseOrbital(irrep.Label, p.Copy+1, p.Partner+1) }})
		x += side + gap
	}
	y += side + 22
	y = u.drawWith(b, y, width, partners)
	if chosen != nil && chosen.Irrep == partners[0].Irrep && chosen.Copy == partners[0].Copy {
		y = u.drawSet(b, y, width, o, partners)
	}
	return y + 4
}

// likeness is the simplest function that a partner transforms like.
func likeness(irrep symmetry.Irrep, partner int) notation.Text {
	if partner < len(irrep.Functions) && len(irrep.Functions[partner]) > 0 {
		return fill(say("partners.like"), spelledText(notation.Polynomial(irrep.Functions[partner][notation.Likest(irrep.Functions[0])])))
	}
	if irrep.Dimension > 1 {
		return notation.Words(say("partners.partner", partner+1))
	}
	return nil
}

// drawDetail draws what is known of the chosen group orbital or function.
func (u *ui) drawDetail(b *board) {
	y := pad - u.detail.scroll
	width := b.width - 2*pad
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	plain := style{size: textSize, color: b.palette.Ink, align: -1}
	head := style{size: headSize, color: b.palette.Ink, align: -1}
	defer func() { u.detail.extent = y + u.detail.scroll }()
	s, st := u.now(), u.state
	switch s.Projection.TheSubject() {
	case study.SubjectOrbital:
		o := u.orbital()
		if o == nil {
			break
		}
		irrep := st.Orbitals.Irreps[o.Irrep]
		w := b.text(pad, y+headSize, notation.OrbitalText(irrep.Label), head)
		var which []string
		if irrep.Dimension > 1 {
			which = append(which, say("partners.partnerOf", o.Partner+1, irrep.Dimension))
		}
		if n := st.Orbitals.Content[o.Irrep]; n > 1 {
			which = append(which, say("follows.copy", o.Copy+1, n))
		}
		b.text(pad+w+10, y+headSize, notation.Words(strings.Join(which, ", ")), quiet)
		y += headSize + 12
		formula := plain
		formula.whole = true
		y = b.paragraph(pad, y+textSize-4, width, u.forms.text(o.Coefficients), formula)
		if f := irrepFunctions(irrep, o.Partner); f != nil {
			y = b.paragraph(pad, y+2, width, fill(say("partners.transforms"), f), quiet)
		}
		y = u.drawNodes(b, y, width, o)
		y = u.drawMatrix(b, y, o)
		return
	case study.SubjectFunction:
		if st.Basis == nil || s.Projection.Function > len(st.Basis.Functions) || len(s.Basis) == 0 {
			break
		}
		f := st.Basis.Functions[s.Projection.Function-1]
		w := b.text(pad, y+headSize, notation.PhiText(fmt.Sprint(s.Projection.Function)), head)
		b.text(pad+w+10, y+headSize, fill(say("follows.functionOn"), notation.Function(f.Name), notation.Words(st.Basis.AtomNames()[f.Site])), plain)
		y += headSize + 10
		y = b.paragraph(pad, y+secondSize, width, notation.Words(say("follows.oneFunction")), quiet)
		return
	}
	y = b.paragraph(pad, y+secondSize, width, notation.Words(say("follows.choose")), quiet)
}

// combinationText is the closed form, or the sum with decimals.
func combinationText(c []float64) notation.Text {
	if form, ok := orbitals.FindClosedForm(c); ok {
		return notation.ClosedForm(form)
	}
	return spelledText(phiTexts(strings.Join(notation.Combination(notation.Terms(c), notation.DecimalCoefficient), " ")))
}

// phiTexts sets the names of functions in a plain combination ("φ3" with the
// number lowered).
func phiTexts(plain string) notation.Text {
	pieces := strings.Split(plain, "φ")
	t := notation.Words(pieces[0])
	for _, piece := range pieces[1:] {
		n := len(piece) - len(strings.TrimLeft(piece, "0123456789"))
		t = t.Then(notation.PhiText(piece[:n]), notation.Words(piece[n:]))
	}
	return t
}

func irrepFunctions(irrep symmetry.Irrep, partner int) notation.Text {
	if partner >= len(irrep.Functions) {
		return nil
	}
	var t notation.Text
	for i, f := range irrep.Functions[partner] {
		if i == 4 {
			return t.Then(notation.Words(" …"))
		}
		if i > 0 {
			t = t.Then(notation.Words(", "))
		}
		t = t.Then(spelledText(notation.Polynomial(f)))
	}
	return t
}

// drawMatrix shows the matrix of the operation at hand among the partners.
func (u *ui) drawMatrix(b *board, y float64, o *orbitals.GroupOrbital) float64 {
	op, ok := u.operation()
	if !ok {
		return y
	}
	m := u.matrix(o, op)
	if m == nil {
		return y
	}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	y += 6
	w := b.text(pad, y+secondSize, fill(say("partners.matrix"), notation.Operation(op.Name)), quiet)
	if len(m) == 1 {
		b.text(pad+w+10, y+secondSize+1, notation.Words(entry(m[0][0])), style{size: textSize, color: b.palette.Ink, align: -1})
		return y + 22
	}
	y += secondSize + 6
	b.matrix(pad, y, m, b.palette.Ink)
	return y + 18*float64(len(m)) + 12
}

// entry writes an entry of a matrix: in closed form where that is short.
func entry(x float64) string {
	if exact, ok := notation.Exact(x); ok && notation.Width(exact) <= 6 {
		return exact
	}
	return shortText(x, 3)
}
