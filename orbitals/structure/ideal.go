package structure

import (
	"math"
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

const (
	// MaxRing is the greatest number of atoms of an ideal ring.
	MaxRing = 100
	// minIdeal and maxIdeal (Å) bound the distance of an ideal structure: no bond is shorter than half of the
	// lower one, none so long as the upper one.
	minIdeal, maxIdeal = 0.3, 100
	// carbonRing (Å) is the distance of neighbours in a ring of carbon, that of benzene (common value).
	carbonRing = 1.39
)

var (
	wantPolyhedron = message.Words("write ideal:OC-6, or with elements and distance ideal:OC-6,Co,N,1.96")
	wantRing       = message.Words("write ideal:ring-6, or with element and distance of neighbours ideal:ring-6,C,1.39")
)

// Ideal makes an ideal structure from what follows "ideal:":
//
//	OC-6,Co,N,1.96    polyhedral symbol, centre, ligand, distance in Å; see Polyhedra
//	ring-5,C,1.39     a planar ring without a centre: number of atoms, element, distance of neighbours in Å
//
// From the second on each part may be left out, from the end. The distance is then the sum of the covalent radii;
// in a ring of carbon it is benzene's. The origin is the centre, z the principal axis, the first atom the centre
// (of a ring, on x). The title is the whole text with all parts, so that it makes the same structure again. The
// error is an *Error.
func Ideal(text string) (*Molecule, error) {
	parts := strings.Split(text, ",")
	for i := range parts {
		parts[i] = strings.TrimSpace(parts[i])
	}
	if n, ok := cutPrefixFold(parts[0], "ring-"); ok {
		return idealRing(text, n, parts[1:])
	}
	for _, p := range Polyhedra() {
		if strings.EqualFold(p.Symbol, parts[0]) {
			return idealPolyhedron(text, p, parts[1:])
		}
	}
	var known []string
	for _, p := range Polyhedra() {
		known = append(known, p.Symbol)
	}
	return nil, &Error{Problem: UnknownShape, What: message.Words("unknown polyhedral symbol %s", found(parts[0])),
		Want: message.Words("there are %s and ring-3 to ring-%d", strings.Join(known, " "), MaxRing)}
}

func cutPrefixFold(text, prefix string) (string, bool) {
	if len(text) < len(prefix) || !strings.EqualFold(text[:len(prefix)], prefix) {
		return text, false
	}
	return text[len(prefix):], true
}

func idealPolyhedron(text string, p Polyhedron, parts []string) (*Molecule, error) {
	if len(parts) > 3 {
		return nil, badIdeal(text, wantPolyhedron, "too many parts")
	}
	centre, ligand := p.Centre, p.Ligand
	for i, e := range []*Element{&centre, &ligand} {
		if err := idealElement(text, parts, i, e, wantPolyhedron); err != nil {
			return nil, err
		}
	}
	d := roundedDistance(centre.Radius() + ligand.Radius())
	if err := idealDistance(text, parts, 2, &d, wantPolyhedron); err != nil {
		return nil, err
	}
	m := &Molecule{
		Title: strings.Join([]string{"ideal:" + p.Symbol, centre.Symbol(), ligand.Symbol(), plainNumber(d)}, ","),
		Atoms: []Atom{{Element: centre}},
	}
	for _, v := range p.Directions {
		m.Atoms = append(m.Atoms, Atom{ligand, v.Mul(d)})
	}
	return m, nil
}

func idealRing(text, count string, parts []string) (*Molecule, error) {
	n, err := strconv.Atoi(count)
	if err != nil || n < 3 || n > MaxRing {
		return nil, badIdeal(text, wantRing, "a ring has 3 to %d atoms, not %s", MaxRing, found(count))
	}
	if len(parts) > 2 {
		return nil, badIdeal(text, wantRing, "too many parts")
	}
	e := Element(6)
	if err := idealElement(text, parts, 0, &e, wantRing); err != nil {
		return nil, err
	}
	d := roundedDistance(2 * e.Radius())
	if e == 6 {
		d = carbonRing
	}
	if err := idealDistance(text, parts, 1, &d, wantRing); err != nil {
		return nil, err
	}
	m := &Molecule{Title: strings.Join([]string{"ideal:ring-" + strconv.Itoa(n), e.Symbol(), plainNumber(d)}, ",")}
	radius := d / (2 * math.Sin(math.Pi/float64(n)))
	for _, v := range ring(n, right, 0) {
		m.Atoms = append(m.Atoms, Atom{e, v.Mul(radius)})
	}
	return m, nil
}

// idealElement reads part i into e, if there is one.
func idealElement(text string, parts []string, i int, e *Element, want message.Text) error {
	if i >= len(parts) {
		return nil
	}
	read, ok := ElementOf(parts[i])
	if !ok {
		return badIdeal(text, want, "unknown element %s", found(parts[i]))
	}
	*e = read
	return nil
}

// idealDistance reads part i into d (Å), if there is one.
func idealDistance(text string, parts []string, i int, d *float64, want message.Text) error {
	if i >= len(parts) {
		return nil
	}
	x, err := number(parts[i])
	if err != nil {
		return badIdeal(text, want, "the distance is %s", found(parts[i]))
	}
	if x < minIdeal || x > maxIdeal {
		return badIdeal(text, message.Words("it must lie between %g and %g Å", minIdeal, float64(maxIdeal)),
			"the distance is %s Å", strings.Trim(found(parts[i]), `"`))
	}
	*d = x
	return nil
}

// roundedDistance takes away the rounding error of a sum of two radii, which are given to 0.01 Å.
func roundedDistance(d float64) float64 { return math.Round(d*100) / 100 }

func plainNumber(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

func badIdeal(text string, want message.Text, format string, args ...any) *Error {
	return &Error{File: "ideal:" + shorten(text), Problem: BadIdeal, What: message.Words(format, args...), Want: want}
}

// shorten cuts a long text for the head of a message.
func shorten(text string) string {
	const most = 60
	if runes := []rune(text); len(runes) > most {
		return string(runes[:most]) + " …"
	}
	return text
}
