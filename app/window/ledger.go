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
)

// drawLedger draws the pane below: a column for every individual operation,
// class by class, with what it makes of the chosen function or group orbital.
func (u *ui) drawLedger(b *board) {
	const row = 28
	x := pad - u.ledger.scroll
	defer func() { u.ledger.extent = x + pad + u.ledger.scroll }()
	g := u.state.Group
	if g == nil {
		return
	}
	s := u.now()
	plain := style{size: textSize, color: b.palette.Ink}
	second := style{size: secondSize, color: b.palette.Quiet}
	operations := g.Operations(s.Angle)
	class := -1
	for i, op := range operations {
		if op.Index >= 0 && op.Class != class {
			if class >= 0 {
				b.fill(x+2, 8, 1, 2*row-8, faint(b.palette.Rule, 0xA0))
				x += 5
			}
			class = op.Class
		}
		name, image := notation.Operation(op.Name), u.images.image(u, i)
		w := math.Ceil(max(44, b.measure(name, plain)+16, b.measure(image, second)+12))
		if x+w > 0 && x < b.width {
			chosen := s.Operation == op.Name
			ink := plain
			if chosen {
				b.fill(x, 3, w, 2*row, b.palette.Accent)
				ink.color = b.palette.Ground
			}
			b.text(x+w/2, 3+19, name, ink)
			below := second
			if chosen {
				below.color = b.palette.Ground
			}
			b.text(x+w/2, 3+row+17, image, below)
			if p := u.state.Problem(work.ConcernOperation); p != nil && chosen {
				b.frame(x, 3, w, 2*row, 2, b.palette.Ink)
			}
		}
		b.spot(spot{x: x, y: 3, width: w, height: 2 * row, name: "operation " + op.Name, hint: operationHint(op), do: func() { u.playOperation(op.Name) }})
		x += w
	}
}

// operationHint says in words what an operation does.
func operationHint(op work.Operation) string {
	axis := notation.Vector(op.Axis[:], 3)
	degrees := notation.Short(op.Angle*180/math.Pi, 1) + "°"
	switch {
	case op.HasCentre():
		return say("ledger.inversion")
	case op.HasAxis() && op.HasPlane():
		return say("ledger.improper", degrees, axis)
	case op.HasAxis():
		return say("ledger.turn", degrees, axis)
	case op.HasPlane():
		return say("ledger.reflection", axis)
	}
	return say("ledger.identity")
}

// An imageCache holds what every operation makes of what is chosen, set as
// text. The representation is made in the background.
type imageCache struct {
	basis          *work.Basis
	representation *orbitals.Representation
	wanted         *work.Basis // being made
}

// update has the representation of a new basis made.
func (c *imageCache) update(u *ui) {
	b := u.state.Basis
	if b == nil || b == c.basis || b == c.wanted || b.Fit.Setting.Infinite() {
		return
	}
	c.wanted = b
	go func() {
		defer func() {
			if fault := recover(); fault != nil {
				u.failedAside(fault)
			}
		}()
		r, err := b.Representation()
		if err != nil {
			return
		}
		u.post(func() {
			if c.wanted == b {
				c.basis, c.representation, c.wanted = b, r, nil
				u.ledger.Update()
				u.said.Update()
			}
		})
	}()
}

// image is what operation number i makes of what is chosen.
func (c *imageCache) image(u *ui, i int) notation.Text {
	s, st := u.now(), u.state
	if st.Basis == nil || len(s.Basis) == 0 || st.Group.Fit.Setting.Infinite() {
		return nil
	}
	switch s.Projection.TheSubject() {
	case study.SubjectFunction:
		n := s.Projection.Function
		if c.basis == st.Basis && n >= 1 && n <= len(st.Basis.Functions) {
			return combination(c.representation.Image(i, n-1), notation.PhiText, 2)
		}
	case study.SubjectOrbital:
		if o := u.orbital(); o != nil {
			return combination(partnerImage(st.Orbitals, o, i), partnerText, 3)
		}
	}
	return nil
}

// partnerImage is what an operation makes of a partner, among the partners of
// its copy.
func partnerImage(o *work.Orbitals, orbital *orbitals.GroupOrbital, operation int) []orbitals.Term {
	irrep := o.Irreps[orbital.Irrep]
	var terms []orbitals.Term
	for l := range irrep.Dimension {
		if c := irrep.Matrices[operation].At(l, orbital.Partner); math.Abs(c) > 1e-9 {
			terms = append(terms, orbitals.Term{Function: l, Coefficient: c})
		}
	}
	return terms
}

// partnerText names a partner.
func partnerText(number string) notation.Text {
	return notation.Text{{Text: "ψ", Italic: true}, {Text: number, Place: notation.Sub}}
}

// combination sets a sum of few terms; of more than most only how many there
// are.
func combination(terms []orbitals.Term, name func(number string) notation.Text, most int) notation.Text {
	if len(terms) > most {
		return notation.Words(say("ledger.sumOf", len(terms)))
	}
	return notation.CombinationText(terms, name, shortCoefficient)
}

// shortCoefficient is exact where that is short.
func shortCoefficient(x float64) string {
	if exact := notation.ExactCoefficient(x); notation.Width(exact) <= 5 {
		return exact
	}
	return notation.Short(x, 3)
}

// drawSaid draws the sentence that says what the function has become.
func (u *ui) drawSaid(b *board) {
	ink := style{size: textSize, color: b.palette.Ink, align: -1}
	lines := 1.0
	t := u.sentence()
	if b.measure(t, ink) > b.width-pad {
		lines = 2
	}
	b.paragraph(pad/2, b.height/2+0.36*textSize-(lines-1)*0.7*textSize, b.width-pad, t, ink)
}

// sentence says what happens, and at the end what has become of what was
// chosen.
func (u *ui) sentence() notation.Text {
	s, st := u.now(), u.state
	op, ok := u.operation()
	if p := st.Problem(work.ConcernOperation); p != nil {
		return problemWords(p)
	}
	if !ok || st.Group == nil {
		return notation.Words(say("ledger.choose"))
	}
	name := notation.Operation(op.Name)
	if op.Family {
		name = familyText(op, s.Angle)
	}
	subject := u.subjectText()
	switch {
	case s.Moment > 0 && s.Moment < 1:
		return fill(say("ledger.now"), name, notation.Words(stepText(op, s.Moment)))
	case len(subject) == 0:
		if s.Moment == 0 {
			return fill(say("ledger.noSubject"), name)
		}
		return fill(say("ledger.done"), name)
	}
	image := u.imageText(op)
	if len(image) == 0 {
		return name
	}
	if s.Moment == 0 {
		return fill(say("ledger.carries"), name, subject, image)
	}
	return fill(say("ledger.become"), name, subject, image)
}

// familyText names an operation of a linear molecule with its angle.
func familyText(op work.Operation, angle float64) notation.Text {
	before, after, _ := strings.Cut(op.Name, "φ")
	t := notation.Operation(strings.TrimSuffix(before, "("))
	return t.Then(notation.Words("(" + notation.Short(angle, 1) + "°" + after))
}

// stepText says what happens at a moment.
func stepText(op work.Operation, moment float64) string {
	degrees := func(share float64) string {
		return notation.Decimal(share*op.Angle*180/math.Pi, 0) + "°"
	}
	switch {
	case op.HasCentre():
		return say("ledger.throughCentre")
	case op.Steps() == 2 && moment <= 0.5:
		return say("ledger.firstTurn", degrees(2*moment), degrees(1))
	case op.Steps() == 2:
		return say("ledger.thenReflection")
	case op.HasAxis():
		return say("ledger.turned", degrees(moment), degrees(1))
	case op.HasPlane():
		return say("ledger.throughPlane")
	}
	return say("ledger.nothingMoves")
}

// subjectText names what is chosen.
func (u *ui) subjectText() notation.Text {
	s, st := u.now(), u.state
	if u.coefficients() == nil {
		return nil
	}
	if s.Projection.TheSubject() == study.SubjectFunction {
		f := st.Basis.Functions[s.Projection.Function-1]
		return fill(say("ledger.functionOn"), notation.PhiText(fmt.Sprint(s.Projection.Function)), notation.Function(f.Name),
			notation.Words(st.Basis.AtomNames()[f.Site]))
	}
	o := u.orbital()
	irrep := st.Orbitals.Irreps[o.Irrep]
	t := notation.OrbitalText(irrep.Label)
	if irrep.Dimension > 1 {
		t = t.Then(notation.Words(" "), partnerText(fmt.Sprint(o.Partner+1)))
	}
	return t
}

// imageText writes what the operation makes of what is chosen.
func (u *ui) imageText(op work.Operation) notation.Text {
	s, st := u.now(), u.state
	name := notation.PhiText
	var terms []orbitals.Term
	switch p := st.Play; {
	case s.Projection.TheSubject() == study.SubjectOrbital && op.Index >= 0:
		o := u.orbital()
		terms, name = partnerImage(st.Orbitals, o, op.Index), partnerText
		if st.Orbitals.Irreps[o.Irrep].Dimension == 1 {
			if len(terms) == 1 && terms[0].Coefficient < 0 {
				return notation.Words(say("ledger.negative"))
			}
			return notation.Words(say("ledger.itself"))
		}
	case u.images.basis == st.Basis && op.Index >= 0 && s.Projection.TheSubject() == study.SubjectFunction:
		terms = u.images.representation.Image(op.Index, s.Projection.Function-1)
	case p != nil && p.Operation.Name == op.Name && p.Operation.Angle == op.Angle && p.Subject == s.Projection.TheSubject():
		terms = p.Terms
		if len(p.Partners) > 0 {
			terms, name = p.Partners, partnerText
			if st.Orbitals != nil && p.Orbital != nil && st.Orbitals.Irreps[p.Orbital.Irrep].Dimension == 1 {
				name = func(string) notation.Text { return notation.OrbitalText(st.Orbitals.Irreps[p.Orbital.Irrep].Label) }
			}
		}
	default:
		return nil
	}
	write := notation.ExactCoefficient
	if op.Family {
		write = shortCoefficient // for any angle there is some long cosine
	}
	t := notation.CombinationText(terms, name, write)
	// The function that it has become is named, where it is one.
	if s.Projection.TheSubject() == study.SubjectFunction && len(terms) == 1 && math.Abs(math.Abs(terms[0].Coefficient)-1) < 1e-9 {
		f := st.Basis.Functions[terms[0].Function]
		t = fill(say("ledger.functionOn"), t, notation.Function(f.Name), notation.Words(st.Basis.AtomNames()[f.Site]))
	}
	return t
}
