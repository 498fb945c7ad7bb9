package structure

import (
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// maxChoice is the greatest length in bytes of a choice of atoms; every one of 20,000 atoms by its number takes
// about 120,000.
const maxChoice = 200_000

var wantAtoms = message.Words("atoms are chosen by element (F), number (2-4,7), all, or orbit (orbit:2)")

// ParseAtoms reads a choice of atoms: terms with commas between them, each an element in any case ("F"), an atom
// number or a range of them, which count from 1 ("7", "2-4"), "all", or "orbit:N". It returns their indices, from
// 0, rising, each once. orbit returns the indices (from 0) of the atoms of orbit n (from 1); where it is nil,
// orbits are refused. The error is an *Error, or the error of orbit.
func ParseAtoms(text string, m *Molecule, orbit func(n int) ([]int, error)) ([]int, error) {
	if len(text) > maxChoice {
		return nil, badAtoms("a choice of atoms of %s characters", message.Count(len(text)))
	}
	chosen := make([]bool, len(m.Atoms))
	for term := range strings.SplitSeq(text, ",") {
		term = strings.TrimSpace(term)
		if err := chooseTerm(term, m, orbit, chosen); err != nil {
			return nil, err
		}
	}
	var out []int
	for i, c := range chosen {
		if c {
			out = append(out, i)
		}
	}
	return out, nil
}

// chooseTerm marks the atoms of one term.
func chooseTerm(term string, m *Molecule, orbit func(n int) ([]int, error), chosen []bool) error {
	switch {
	case term == "":
		return badAtoms("a choice of atoms is empty")
	case strings.EqualFold(term, "all"):
		for i := range chosen {
			chosen[i] = true
		}
		return nil
	case '0' <= term[0] && term[0] <= '9':
		return chooseNumbers(term, chosen)
	}
	if n, ok := strings.CutPrefix(term, "orbit:"); ok {
		return chooseOrbit(n, orbit, chosen)
	}
	e, ok := ElementOf(term)
	if !ok {
		return badAtoms("%s is no choice of atoms", found(term))
	}
	occurs := false
	for i, a := range m.Atoms {
		if a.Element == e {
			chosen[i], occurs = true, true
		}
	}
	if !occurs {
		return &Error{Problem: NoSuchAtom, What: message.Words("the structure has no %s", e.Symbol()),
			Want: message.Words("its elements are %s", list(m.Elements()))}
	}
	return nil
}

// chooseNumbers marks the atoms of "7" or "2-4".
func chooseNumbers(term string, chosen []bool) error {
	low, high, isRange := strings.Cut(term, "-")
	from, err := atomNumber(low, chosen)
	if err != nil {
		return err
	}
	to := from
	if isRange {
		if to, err = atomNumber(high, chosen); err != nil {
			return err
		}
	}
	if to < from {
		return &Error{Problem: BadAtoms, What: message.Words("the range %s runs backward", found(term)),
			Want: message.Words("write %d-%d", to, from)}
	}
	for i := from; i <= to; i++ {
		chosen[i-1] = true
	}
	return nil
}

// atomNumber reads the number of an atom, from 1.
func atomNumber(text string, chosen []bool) (int, error) {
	text = strings.TrimSpace(text)
	for _, c := range []byte(text) {
		if c < '0' || c > '9' {
			return 0, badAtoms("%s is no atom number", found(text))
		}
	}
	if text == "" {
		return 0, badAtoms("a range of atoms has no end")
	}
	n, err := strconv.Atoi(text)
	if err != nil || n < 1 || n > len(chosen) {
		return 0, &Error{Problem: NoSuchAtom, What: message.Words("atom %s does not exist", strings.Trim(found(text), `"`)),
			Want: message.Words("the structure's atoms are 1 to %d", len(chosen))}
	}
	return n, nil
}

// chooseOrbit marks the atoms of an orbit.
func chooseOrbit(text string, orbit func(n int) ([]int, error), chosen []bool) error {
	n, err := strconv.Atoi(text)
	if err != nil || n < 1 {
		return badAtoms("%s is no orbit", found("orbit:"+text))
	}
	if orbit == nil {
		return &Error{Problem: BadAtoms, What: message.Words("orbits are not known here"),
			Want: message.Words("choose atoms by element (F), number (2-4,7) or all")}
	}
	atoms, err := orbit(n)
	if err != nil {
		return err
	}
	for _, i := range atoms {
		chosen[i] = true
	}
	return nil
}

// Core returns the indices (from 0, rising) of the atoms that decide the group: those of the choice core, or all
// where core is empty, less those of the choice ignore. Both are written as for ParseAtoms, without orbits, which
// are known only once the group is. The error is an *Error, also where no atom is left.
func Core(m *Molecule, core, ignore string) ([]int, error) {
	if core == "" {
		core = "all"
	}
	chosen, err := ParseAtoms(core, m, nil)
	if err != nil || ignore == "" {
		return chosen, err
	}
	ignored, err := ParseAtoms(ignore, m, nil)
	if err != nil {
		return nil, err
	}
	out := chosen[:0]
	for _, i := range chosen {
		for len(ignored) > 0 && ignored[0] < i {
			ignored = ignored[1:]
		}
		if len(ignored) == 0 || ignored[0] != i {
			out = append(out, i)
		}
	}
	if len(out) == 0 {
		return nil, &Error{Problem: NoCore, What: message.Words("no atom is left to decide the group"),
			Want: message.Words("ignore fewer atoms or choose a larger core")}
	}
	return out, nil
}

func badAtoms(format string, args ...any) *Error {
	return &Error{Problem: BadAtoms, What: message.Words(format, args...), Want: wantAtoms}
}

// list writes elements with commas between them.
func list(elements []Element) string {
	var b strings.Builder
	for i, e := range elements {
		if i > 0 {
			b.WriteString(", ")
		}
		b.WriteString(e.Symbol())
	}
	return b.String()
}
