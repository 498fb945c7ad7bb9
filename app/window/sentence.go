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
	if u.tally.ledger != nil {
		return u.tally.sentence()
	}
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
	return t.Then(notation.Words("(" + shortText(angle, 1) + "°" + after))
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
	return u.orbitalText(u.orbital())
}

// imageText writes what the operation makes of what is chosen.
func (u *ui) imageText(op work.Operation) notation.Text {
	s, st := u.now(), u.state
	name := notation.PhiText
	var terms []orbitals.Term
	switch p := st.Play; {
	case s.Projection.TheSubject() == study.SubjectOrbital && op.Index >= 0:
		o := u.orbital()
		terms, name = partnerImage(st.Orbitals, o, op.Index), partnerNames(st.Orbitals.Irreps[o.Irrep])
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
			terms = p.Partners
			if st.Orbitals != nil && p.Orbital != nil {
				name = partnerNames(st.Orbitals.Irreps[p.Orbital.Irrep])
			}
		}
	default:
		return nil
	}
	write := notation.OneKind(terms)
	if op.Family {
		write = shortCoefficient // for any angle there is some long cosine
	}
	t := combination(terms, name, write)
	// The function that it has become is named, where it is one.
	if s.Projection.TheSubject() == study.SubjectFunction && len(terms) == 1 && math.Abs(math.Abs(terms[0].Coefficient)-1) < 1e-9 {
		f := st.Basis.Functions[terms[0].Function]
		t = fill(say("ledger.functionOn"), t, notation.Function(f.Name), notation.Words(st.Basis.AtomNames()[f.Site]))
	}
	return t
}

// partnerText names a partner by its number alone, where its irrep is named
// beside it.
func partnerText(number string) notation.Text {
	return notation.Text{{Text: "ψ", Italic: true}, {Text: number, Place: notation.Sub}}
}
