package sheet

import (
	"slices"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
)

// longestForm is how many characters a text of functions may have to stand
// below its picture. A longer one is not read there.
const longestForm = 56

// basisText says which functions on which atoms occur in a combination:
// "φ1–φ4: σ on Cl2–Cl5", "φ1, φ6: dz² on Re1, Re2"; a shell of which all
// functions occur by its letter alone, "φ1–φ10: d on Re1, Re2". Where that is
// too long the numbers are left out, and then the names of the atoms: "s on 60
// atoms".
func (m *maker) basisText(b *work.Basis, coefficients []float64) notation.Text {
	parts := functionGroups(b, coefficients)
	list := func(numbered, named bool) notation.Text {
		var t notation.Text
		for i, p := range parts {
			if i > 0 {
				t = t.Then(notation.Words("; "))
			}
			if numbered {
				t = t.Then(p.phis(), notation.Words(": "))
			}
			on := m.say("captions.onMany", len(p.atoms))
			if named {
				var parts []string
				for _, run := range runsOf(p.atoms) {
					parts = append(parts, strings.Join(run, "–"))
				}
				on = m.say("captions.onAtoms", strings.Join(parts, ", "))
			}
			t = t.Then(notation.Fill(on, p.name))
		}
		return t
	}
	for _, t := range []notation.Text{list(true, true), list(false, true), list(false, false)} {
		if notation.Width(t.String()) <= longestForm {
			return t
		}
	}
	return nil
}

// A functionGroup is functions of one name, or of one shell, on some atoms.
type functionGroup struct {
	name    notation.Text
	numbers []string
	atoms   []string
}

func (g functionGroup) phis() notation.Text {
	var t notation.Text
	for k, run := range runsOf(g.numbers) {
		if k > 0 {
			t = t.Then(notation.Words(", "))
		}
		t = t.Then(notation.PhiText(run[0]))
		if len(run) > 1 {
			t = t.Then(notation.Words("–"), notation.PhiText(run[1]))
		}
	}
	return t
}

// functionGroups gathers the functions of a combination by name, and those of a
// whole shell or π set by its letter.
func functionGroups(b *work.Basis, coefficients []float64) []functionGroup {
	sizes := map[orbitals.Kind]int{orbitals.KindP: 3, orbitals.KindD: 5, orbitals.KindF: 7, orbitals.KindPi: 2}
	type onAtom struct {
		kind orbitals.Kind
		site int
	}
	count := map[onAtom]int{}
	for i, f := range b.Functions {
		if coefficients[i] != 0 {
			count[onAtom{f.Kind, f.Site}]++
		}
	}
	whole := func(k orbitals.Kind) bool {
		if sizes[k] == 0 {
			return false
		}
		for at, n := range count {
			if at.kind == k && n != sizes[k] {
				return false
			}
		}
		return true
	}
	letters := map[orbitals.Kind]string{orbitals.KindP: "p", orbitals.KindD: "d", orbitals.KindF: "f", orbitals.KindPi: "π"}
	names := b.AtomNames()
	var out []functionGroup
	for i, f := range b.Functions {
		if coefficients[i] == 0 {
			continue
		}
		name := notation.Function(f.Name)
		if whole(f.Kind) {
			name = notation.Words(letters[f.Kind])
		}
		k := slices.IndexFunc(out, func(g functionGroup) bool { return slices.Equal(g.name, name) })
		if k < 0 {
			k = len(out)
			out = append(out, functionGroup{name: name})
		}
		g := &out[k]
		g.numbers = append(g.numbers, strconv.Itoa(i+1))
		if !slices.Contains(g.atoms, names[f.Site]) {
			g.atoms = append(g.atoms, names[f.Site])
		}
	}
	return out
}

// runsOf cuts a list of names into runs of three or more whose numbers run on,
// of each the first and the last, and single names: C1, C2–C6, C12–C16.
func runsOf(list []string) [][]string {
	var runs [][]string
	for len(list) > 0 {
		n := 1
		for n < len(list) && runsOn(list[:n+1]) {
			n++
		}
		if n > 2 {
			runs = append(runs, []string{list[0], list[n-1]})
		} else {
			n = 1
			runs = append(runs, list[:1])
		}
		list = list[n:]
	}
	return runs
}

// runsOn tells whether a list of names that end in numbers, or of numbers, has
// one beginning and numbers without gaps.
func runsOn(list []string) bool {
	split := func(s string) (string, int) {
		letters := strings.TrimRight(s, "0123456789")
		n, _ := strconv.Atoi(s[len(letters):])
		return letters, n
	}
	letters, first := split(list[0])
	for i, s := range list {
		if l, n := split(s); l != letters || n != first+i {
			return false
		}
	}
	return true
}
