package symmetry

import (
	"fmt"
	"math"
	"sort"
)

// label gives Mulliken's labels (R. S. Mulliken, J. Chem. Phys. 23, 1997
// (1955); the rules as commonly restated, from memory) and sorts the irreps as
// the usual tables print them.
func label(k kind, s *Setting, list []Irrep) {
	names := make([]mulliken, len(list))
	for i := range list {
		if k.axial() {
			names[i] = k.axialName(s, list[i])
		} else {
			names[i] = k.polyhedralName(s, list[i])
		}
		names[i].parity = parity(k, s, list[i])
	}
	dropLoneNumbers(names)
	sort.Sort(&byPrint{names, list})
	for i := range list {
		list[i].Label = names[i].String()
	}
}

// mulliken is a label in parts; parity is 0 for none, 1 for g or ′, 2 for u
// or ″, in that order of print.
type mulliken struct {
	letter byte
	number int
	parity parityMark
}

type parityMark struct {
	order int
	mark  string
}

func (m mulliken) String() string {
	if m.number == 0 {
		return fmt.Sprintf("%c%s", m.letter, m.parity.mark)
	}
	return fmt.Sprintf("%c%d%s", m.letter, m.number, m.parity.mark)
}

// byPrint sorts irreps and their names together: parity first, then the
// letters A B E T G H, then the numbers.
type byPrint struct {
	names []mulliken
	list  []Irrep
}

func (b *byPrint) Len() int { return len(b.list) }
func (b *byPrint) Swap(i, j int) {
	b.names[i], b.names[j] = b.names[j], b.names[i]
	b.list[i], b.list[j] = b.list[j], b.list[i]
}
func (b *byPrint) Less(i, j int) bool {
	m, n := b.names[i], b.names[j]
	switch place := map[byte]int{'A': 0, 'B': 1, 'E': 2, 'T': 3, 'G': 4, 'H': 5}; {
	case m.parity.order != n.parity.order:
		return m.parity.order < n.parity.order
	case m.letter != n.letter:
		return place[m.letter] < place[n.letter]
	}
	return m.number < n.number
}

// dropLoneNumbers removes the number of an E that is the only one of its
// parity.
func dropLoneNumbers(names []mulliken) {
	count := map[parityMark]int{}
	for _, n := range names {
		if n.letter == 'E' {
			count[n.parity]++
		}
	}
	for i, n := range names {
		if n.letter == 'E' && count[n.parity] == 1 {
			names[i].number = 0
		}
	}
}

// parity reads g and u from the inversion, else ′ and ″ from σh, in the groups
// whose tables print primes (Cs, C3h, D3h, C5h …).
func parity(k kind, s *Setting, ir Irrep) parityMark {
	marks := [2]string{"g", "u"}
	at := s.find(func(o Operation) bool { return o.Turn == Turn{1, 2, true} })
	if at < 0 && k.axial() {
		marks = [2]string{"'", "''"}
		at = s.find(func(o Operation) bool { return o.Name == "σh" })
	}
	if at < 0 {
		return parityMark{}
	}
	if ir.Characters[s.Operations[at].Class] > 0 {
		return parityMark{1, marks[0]}
	}
	return parityMark{2, marks[1]}
}

// find returns the index of the first operation that a test accepts, or −1.
func (s *Setting) find(is func(Operation) bool) int {
	for i, o := range s.Operations {
		if is(o) {
			return i
		}
	}
	return -1
}

// character is χ of the named operation, 0 if there is none.
func (s *Setting) character(ir Irrep, name string) float64 {
	at := s.find(func(o Operation) bool { return o.Name == name })
	if at < 0 {
		return 0
	}
	return ir.Characters[s.Operations[at].Class]
}

// axialName: A and B by the sign under the turn that generates the axis, 1 and
// 2 by the C2 on x, else by the σv that holds x; Ek by 2cos(2πk/n).
func (k kind) axialName(s *Setting, ir Irrep) mulliken {
	turn := Turn{1, k.n, false}
	if k.evenImproper() {
		turn = Turn{1, 2 * k.n, true}
	}
	generator := 1.0 * float64(ir.Dimension)
	if k.n > 1 {
		at := s.find(func(o Operation) bool { return o.Turn == turn && axisLetter(o.Axis) == 'z' })
		generator = ir.Characters[s.Operations[at].Class]
	}
	if ir.Dimension == 2 {
		step := math.Acos(mgl(generator/2)) / (2 * math.Pi) * float64(turn.Den)
		return mulliken{letter: 'E', number: int(math.Round(step))}
	}
	if k.n == 2 && (k.family == dihedral || k.family == prismatic) {
		return k.rectangularName(s, ir)
	}
	m := mulliken{letter: 'A'}
	if generator < 0 {
		m.letter = 'B'
	}
	across := s.find(func(o Operation) bool { return o.Turn == Turn{1, 2, false} && axisLetter(o.Axis) == 'x' })
	if across < 0 || k.family == cyclic {
		across = s.find(func(o Operation) bool { return o.Turn == Turn{0, 1, true} && axisLetter(o.Axis) == 'y' })
	}
	if across >= 0 {
		m.number = 1
		if ir.Characters[s.Operations[across].Class] < 0 {
			m.number = 2
		}
	}
	return m
}

func mgl(c float64) float64 { return math.Max(-1, math.Min(1, c)) }

// rectangularName: in D2 and D2h B1, B2 and B3 are +1 under C2 on z, y and x.
func (k kind) rectangularName(s *Setting, ir Irrep) mulliken {
	z, y := s.character(ir, "C2(z)") > 0, s.character(ir, "C2(y)") > 0
	switch {
	case z && y:
		return mulliken{letter: 'A'}
	case z:
		return mulliken{letter: 'B', number: 1}
	case y:
		return mulliken{letter: 'B', number: 2}
	}
	return mulliken{letter: 'B', number: 3}
}

// polyhedralName: A1, A2 and T1, T2 by the sign under C4 (in Td S4);
// icosahedral T1 by χ(C5) = φ, T2 by 1−φ.
func (k kind) polyhedralName(s *Setting, ir Irrep) mulliken {
	m := mulliken{letter: " AETGH"[ir.Dimension]}
	decides, threshold := Turn{1, 4, k.family == tetrahedral}, 0.0
	if k.family == icosahedral || k.family == icosahedralProper {
		decides = Turn{1, 5, false}
	}
	if k.polar3() || ir.Dimension != 1 && ir.Dimension != 3 || decides.Den == 5 && ir.Dimension == 1 {
		return m
	}
	at := s.find(func(o Operation) bool { return o.Turn == decides })
	m.number = 1
	if ir.Characters[s.Operations[at].Class] < threshold {
		m.number = 2
	}
	return m
}
