package structure

import (
	"sort"

	"github.com/go-gl/mathgl/mgl64"
)

// An Atom is an element at a place.
type Atom struct {
	Element  Element
	Position mgl64.Vec3 // Å, in the axes of the input
}

// A Molecule is a structure as it was read: a title and atoms, which count from 0 in the order of the input.
type Molecule struct {
	Title string
	Atoms []Atom
}

// Elements lists the elements that occur, by atomic number.
func (m *Molecule) Elements() []Element {
	var seen [MaxElement + 1]bool
	for _, a := range m.Atoms {
		if a.Element.Valid() {
			seen[a.Element] = true
		}
	}
	var out []Element
	for e := Element(1); e <= MaxElement; e++ {
		if seen[e] {
			out = append(out, e)
		}
	}
	return out
}

// Formula returns the formula in Hill's order, as plain characters: carbon first, then hydrogen, then the
// others by their symbols; without carbon all by their symbols (E. A. Hill, J. Am. Chem. Soc. 22, 478 (1900);
// from memory).
func (m *Molecule) Formula() string {
	counts := map[Element]int{}
	for _, a := range m.Atoms {
		counts[a.Element]++
	}
	elements := m.Elements()
	const hydrogen, carbon = 1, 6
	rank := func(e Element) string {
		if counts[carbon] > 0 {
			switch e {
			case carbon:
				return ""
			case hydrogen:
				return " "
			}
		}
		return e.Symbol()
	}
	sort.Slice(elements, func(i, j int) bool { return rank(elements[i]) < rank(elements[j]) })
	var out []byte
	for _, e := range elements {
		out = append(out, e.Symbol()...)
		if n := counts[e]; n > 1 {
			out = appendInt(out, n)
		}
	}
	return string(out)
}
