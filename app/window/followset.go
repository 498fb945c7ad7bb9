//go:build cgo && !nowindow

package window

import (
	"fmt"
	"math"
	"strconv"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
)

// drawContent draws the content of the basis; a click shows its characters.
func (u *ui) drawContent(b *board, y, width float64, o *work.Orbitals) float64 {
	plain := style{size: textSize, color: b.palette.Ink, align: -1}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	top := y
	y = b.paragraph(pad, y+textSize, width, contentText(o), plain)
	if len(o.Projection.Characters) == 0 {
		return y
	}
	b.spot(spot{x: pad, y: top, width: width, height: y - top - textSize + 4, name: "content", hint: say("partners.charactersHint"), do: u.toggleCharacters})
	if !u.sets.characters {
		return y
	}
	const row = 32.0
	x := float64(pad)
	for i, class := range o.Fit.Setting.Classes {
		name := notation.Operation(class.Name)
		value := notation.Words(entry(o.Projection.Characters[i]))
		w := math.Max(b.measure(name, quiet), b.measure(value, plain)) + 14
		if x+w > pad+width && x > pad {
			x = pad
			y += row
		}
		b.text(x, y, name, quiet)
		b.text(x, y+15, value, plain)
		x += w
	}
	return y + row
}

// drawWith says what goes with a copy on the central atom.
func (u *ui) drawWith(b *board, y, width float64, partners []orbitals.GroupOrbital) float64 {
	m := u.state.Match
	if m == nil || m.Functions == nil || m.Orbitals != u.state.Orbitals {
		return y
	}
	p := m.PairOf(partners[0].Irrep, partners[0].Copy)
	if p == nil || p.Own {
		return y
	}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	atom := notation.Words(m.Orbitals.AtomNames()[m.Central])
	if len(p.Central) == 0 {
		return b.paragraph(pad, y+7, width, fill(say("partners.nonBonding"), atom), quiet)
	}
	names := m.Names()
	top := y
	t := fill(say("partners.goesWith"), atom)
	for i, c := range p.Central {
		if i > 0 {
			t = t.Then(notation.Words(";"))
		}
		for k := range partners {
			if k > 0 {
				t = t.Then(notation.Words(","))
			}
			t = t.Then(notation.Words(" "), spelledText(notation.Named(m.With(c, k), names, notation.Shell)))
		}
	}
	y = b.paragraph(pad, y+7, width, t, quiet)
	if len(m.Orbitals.CentralAtoms()) > 1 {
		b.spot(spot{x: pad, y: top - 8, width: width, height: y - top - 2, name: "with " + strconv.Itoa(p.Irrep) + " " + strconv.Itoa(p.Copy), hint: say("partners.centralHint"), do: u.centralMenu})
	}
	return y
}

// drawSet draws what belongs to the chosen copy: the coefficients of all
// partners, and the turn and the mixing.
func (u *ui) drawSet(b *board, y, width float64, o *work.Orbitals, partners []orbitals.GroupOrbital) float64 {
	formula := style{size: secondSize, color: b.palette.Ink, align: -1, whole: true}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	irrep := o.Irreps[partners[0].Irrep]
	if len(partners) > 1 {
		for _, p := range partners {
			label := fill(say("partners.equals"), u.shortName(b, irrep.Functions, p.Partner))
			form := label.Then(u.forms.text(p.Coefficients))
			if len(b.wrapped(form, width, formula)) > mostFormLines {
				y = b.paragraph(pad, y+4, width, label.Then(notation.Words(say("partners.longForm", terms(p.Coefficients)))), quiet)
				continue
			}
			y = b.paragraph(pad, y+4, width, form, formula)
		}
		y += 4
	}
	if pair, ok := u.turnPair(); ok {
		y = u.drawPairs(b, y, "turning", irrep.Dimension, pair, func(p [2]int) { u.sets.turning = p })
		now := turnAngle(u.now().Turn, pair)
		y = u.drawSlider(b, y, width, slider{
			name: "turn", label: say("partners.turn"), hint: say("partners.turnHint"), angle: now, marks: u.turnMarks(),
			set: func(angle float64) { u.setTurn(angle, true) }, step: u.turnStep, ask: u.askTurn,
		})
		if m, ok := work.Snapped(u.turnMarks(), now, 0.051); ok {
			y = b.paragraph(pad, y+2, width, markText(o, m), quiet)
		}
	}
	if pair, ok := u.mixPair(); ok {
		y = u.drawPairs(b, y, "mixing", o.Content[partners[0].Irrep], pair, func(p [2]int) { u.sets.mixing = p })
		y = u.drawSlider(b, y, width, slider{
			name: "mix", label: say("partners.mix", pair[0], pair[1]), hint: say("partners.mixHint"), angle: turnAngle(u.now().Mixing, pair),
			set: u.setMixing, step: u.mixStep, ask: u.askMixing,
		})
	}
	return y
}

// mostFormLines is how long a combination may be to be listed with those of its
// partners; the chosen one is written out below in any case.
const mostFormLines = 4

// terms is how many functions take part in a combination.
func terms(coefficients []float64) int {
	n := 0
	for _, c := range coefficients {
		if math.Abs(c) > 1e-9 {
			n++
		}
	}
	return n
}

// likeOnly is the simplest function that a partner is like; nil without one.
func likeOnly(functions [][]string, partner int) notation.Text {
	if partner >= len(functions) || len(functions[partner]) == 0 {
		return nil
	}
	return spelledText(notation.Polynomial(functions[partner][notation.Likest(functions[0])]))
}

// longestName is the width of a function that still stands for a partner in
// sentences and matrices.
const longestName = 72

// shortName stands for a partner: the function that it is like, or, where one of
// the set has none or a long one, its number.
func (u *ui) shortName(b *board, functions [][]string, partner int) notation.Text {
	for k := range functions {
		f := likeOnly(functions, k)
		if f == nil || b.measure(f, style{size: secondSize}) > longestName {
			return numberedPartner(partner)
		}
	}
	return likeOnly(functions, partner)
}

// mostPairs is how many of the functions that pair with each other are listed.
const mostPairs = 6

// drawPairs draws the pairs that can be turned where there are several.
func (u *ui) drawPairs(b *board, y float64, name string, n int, now [2]int, choose func([2]int)) float64 {
	if n < 3 {
		return y
	}
	x := float64(pad)
	for i := 1; i <= min(n, mostPairs); i++ {
		for k := i + 1; k <= min(n, mostPairs); k++ {
			label := notation.Words(fmt.Sprintf("%d ↔ %d", i, k))
			quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
			w := b.measure(label, quiet) + 12
			if x+w > b.width-pad {
				x = pad
				y += 22
			}
			if now == [2]int{i, k} {
				quiet.color = b.palette.Accent
				b.frame(x, y, w, 19, 1, b.palette.Accent)
			} else {
				b.frame(x, y, w, 19, 1, faint(b.palette.Rule, 0x80))
			}
			b.text(x+6, y+14, label, quiet)
			b.spot(spot{x: x, y: y, width: w, height: 19, name: fmt.Sprintf("%s %d %d", name, i, k), do: func() {
				choose([2]int{i, k})
				u.refreshPanes()
			}})
			x += w + 5
		}
	}
	return y + 26
}

// A slider chooses an angle from 0 to 360°.
type slider struct {
	name, label, hint string
	angle             float64
	marks             []work.Mark
	set               func(angle float64)
	step              func(by int)
	ask               func()
}

// drawSlider draws a slider with its marks; a click on the number asks for one.
func (u *ui) drawSlider(b *board, y, width float64, s slider) float64 {
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	number := notation.Words(decimalText(s.angle, decimals(s.angle)) + "°")
	w := b.measure(notation.Words("359.9°"), quiet) + 8
	lead := b.text(pad, y+15, notation.Words(s.label), quiet) + 12
	left, long := pad+lead, width-lead-w-8
	b.text(pad+width-w+4, y+15, number, style{size: secondSize, color: b.palette.Accent, align: -1})
	b.spot(spot{x: pad + width - w, y: y, width: w, height: 22, name: s.name + " angle", hint: say("partners.typeHint"), do: s.ask})
	middle := y + 11
	b.fill(left, middle-1, long, 2, b.palette.Rule)
	at := func(angle float64) float64 { return left + long*angle/360 }
	for _, m := range s.marks {
		b.fill(at(m.Angle)-0.75, middle-6, 1.5, 12, b.palette.Quiet)
	}
	b.fill(at(s.angle)-4, middle-8, 8, 16, b.palette.Accent)
	const reach = 6 // on both sides of the line
	b.spot(spot{x: left - reach, y: y, width: long + 2*reach, height: 22, name: s.name, hint: s.hint, do: s.ask, step: s.step,
		at: func(x, _ float64) {
			s.set(angleAt(x-reach, long))
			u.commit()
		},
		drag:    func(x, _ float64) { s.set(angleAt(x-reach, long)) },
		release: u.commit,
	})
	return y + 28
}

func angleAt(x, long float64) float64 { return 360 * min(max(x/long, 0), 1) }

// decimals is how many decimals an angle wants.
func decimals(angle float64) int {
	if angle == math.Round(angle) {
		return 0
	}
	return 1
}

// drawNodes says on which planes a group orbital vanishes by symmetry.
func (u *ui) drawNodes(b *board, y, width float64, o *orbitals.GroupOrbital) float64 {
	if !u.now().Look.Nodes {
		return y
	}
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	planes := u.state.Orbitals.NodalPlanes(o)
	if len(planes) == 0 {
		return b.paragraph(pad, y+2, width, notation.Words(say("partners.noNodes")), quiet)
	}
	var t notation.Text
	for i, p := range planes {
		if i > 0 {
			t = t.Then(notation.Words(", "))
		}
		t = t.Then(notation.Operation(p.Name))
	}
	return b.paragraph(pad, y+2, width, fill(say("partners.vanishes"), t), quiet)
}

// nodes are the nodal planes to be drawn of a group orbital.
func (u *ui) nodes(s study.Study, o *orbitals.GroupOrbital) []work.NodalPlane {
	if !s.Look.Nodes || o == nil || s.Projection.TheSubject() != study.SubjectOrbital {
		return nil
	}
	return u.state.Orbitals.NodalPlanes(o)
}

// A formCache keeps the last combinations that were put into closed form: to
// find a form takes longer than to draw it.
type formCache struct{ texts map[uint64]notation.Text }

const mostForms = 512

func (c *formCache) text(coefficients []float64) notation.Text {
	key := fingerprint(coefficients)
	if t, ok := c.texts[key]; ok {
		return t
	}
	if c.texts == nil || len(c.texts) >= mostForms {
		c.texts = map[uint64]notation.Text{}
	}
	t := combinationText(coefficients)
	c.texts[key] = t
	return t
}

// fingerprint tells lists of coefficients apart.
func fingerprint(coefficients []float64) uint64 {
	const offset, prime = 14695981039346656037, 1099511628211 // FNV-1a, of words
	h := uint64(offset)
	for _, c := range coefficients {
		h = (h ^ math.Float64bits(c)) * prime
		h ^= h >> 29
	}
	return h
}
