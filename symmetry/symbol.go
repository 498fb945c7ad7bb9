package symmetry

import (
	"fmt"
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// family is a series of point groups that are built alike.
type family int

const (
	cyclic            family = iota // Cn, with C1
	pyramidal                       // Cnv
	cyclicHorizontal                // Cnh, with Cs = C1h
	dihedral                        // Dn
	prismatic                       // Dnh
	antiprismatic                   // Dnd
	improperCyclic                  // S2n, with Ci = S2
	tetrahedralProper               // T
	tetrahedral                     // Td
	pyritohedral                    // Th
	octahedralProper                // O
	octahedral                      // Oh
	icosahedralProper               // I
	icosahedral                     // Ih
	linearPolar                     // C∞v
	linearCentral                   // D∞h
	spherical                       // Kh
)

// MaxFold is the highest n of an axis that the package handles. It bounds the
// order of a group to 4·MaxFold and with it the size of the product table.
const MaxFold = 120

// kind is a family with the n of its principal rotation axis: for S2n the n
// is half of the index, and it is 0 for families without one.
type kind struct {
	family family
	n      int
}

var namedKinds = map[string]kind{
	"C1": {cyclic, 1}, "Cs": {cyclicHorizontal, 1}, "Ci": {improperCyclic, 1},
	"T": {family: tetrahedralProper}, "Td": {family: tetrahedral}, "Th": {family: pyritohedral},
	"O": {family: octahedralProper}, "Oh": {family: octahedral},
	"I": {family: icosahedralProper}, "Ih": {family: icosahedral},
	"C∞v": {family: linearPolar}, "D∞h": {family: linearCentral}, "Kh": {family: spherical},
	// A keyboard seldom has ∞.
	"Cinfv": {family: linearPolar}, "Dinfh": {family: linearCentral},
}

var symbolsKnown = message.Words("C1 Cs Ci Cn Cnv Cnh Dn Dnh Dnd (n from 2) S4 S6 S8 … T Td Th O Oh I Ih C∞v D∞h Kh")

// parseSymbol reads a Schoenflies symbol in plain characters. Symbols that
// name a group twice (S3 for C3h, C1v for Cs) are refused, with the usual one.
func parseSymbol(symbol string) (kind, error) {
	if k, ok := namedKinds[symbol]; ok {
		return k, nil
	}
	unknown := message.Errorf("unknown point group %q: known are %s", symbol, symbolsKnown)
	if len(symbol) < 2 || !strings.ContainsRune("CDS", rune(symbol[0])) {
		return kind{}, unknown
	}
	digits := strings.TrimRight(symbol[1:], "vhd")
	suffix := symbol[1+len(digits):]
	n, err := strconv.Atoi(digits)
	if err != nil || n < 1 || strconv.Itoa(n) != digits {
		return kind{}, unknown
	}
	if n > MaxFold {
		return kind{}, message.Errorf("point group %q: n goes up to %d", symbol, MaxFold)
	}
	f, ok := map[string]family{
		"C": cyclic, "Cv": pyramidal, "Ch": cyclicHorizontal,
		"D": dihedral, "Dh": prismatic, "Dd": antiprismatic, "S": improperCyclic,
	}[symbol[:1]+suffix]
	if !ok {
		return kind{}, unknown
	}
	if usual := usualSymbol(f, n); usual != "" {
		return kind{}, message.Errorf("point group %q is usually written %s", symbol, usual)
	}
	if f == improperCyclic {
		n /= 2
	}
	return kind{f, n}, nil
}

// usualSymbol gives the accepted symbol of a group that has two, else "".
func usualSymbol(f family, n int) string {
	switch {
	case f == improperCyclic && n == 1, n == 1 && (f == pyramidal || f == cyclicHorizontal):
		return "Cs"
	case f == improperCyclic && n == 2:
		return "Ci"
	case f == improperCyclic && n%2 == 1:
		return fmt.Sprintf("C%dh", n)
	case n == 1 && f == dihedral:
		return "C2"
	case n == 1 && f == prismatic:
		return "C2v"
	case n == 1 && f == antiprismatic:
		return "C2h"
	}
	return ""
}

// symbol writes the Schoenflies symbol.
func (k kind) symbol() string {
	for _, name := range []string{"C1", "Cs", "Ci", "T", "Td", "Th", "O", "Oh", "I", "Ih", "C∞v", "D∞h", "Kh"} {
		if namedKinds[name] == k {
			return name
		}
	}
	switch k.family {
	case cyclic:
		return fmt.Sprintf("C%d", k.n)
	case pyramidal:
		return fmt.Sprintf("C%dv", k.n)
	case cyclicHorizontal:
		return fmt.Sprintf("C%dh", k.n)
	case dihedral:
		return fmt.Sprintf("D%d", k.n)
	case prismatic:
		return fmt.Sprintf("D%dh", k.n)
	case antiprismatic:
		return fmt.Sprintf("D%dd", k.n)
	default:
		return fmt.Sprintf("S%d", 2*k.n)
	}
}

// axial tells whether the group is finite and has a single principal axis, or
// none at all (C1, Cs, Ci), or is D2 or D2h: whether every operation keeps z
// or turns it round.
func (k kind) axial() bool { return k.family <= improperCyclic }

// infinite tells whether the group is C∞v, D∞h or Kh.
func (k kind) infinite() bool { return k.family >= linearPolar }

// evenImproper tells whether the powers of S2n with even n, rather than those
// of Cn, are the turns about z that decide order and labels (Dnd, S2n).
func (k kind) evenImproper() bool {
	return k.n%2 == 0 && (k.family == antiprismatic || k.family == improperCyclic)
}
