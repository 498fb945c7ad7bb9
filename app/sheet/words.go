package sheet

import (
	"fmt"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/work"
)

// longestForm is how many characters a text of functions may have to stand
// below its picture. A longer one is not read there.
const longestForm = 56

// basisText says which functions on which atoms occur in a combination:
// "φ1–φ4: σ on Cl2–Cl5", "φ1, φ6: dz² on Re1, Re2". Where that is too long the
// numbers are left out, and then the names of the atoms: "s on 60 atoms".
func basisText(b *work.Basis, coefficients []float64) notation.Text {
	names := b.AtomNames()
	var kinds []string
	numbers, atoms := map[string][]string{}, map[string][]string{}
	for i, f := range b.Functions {
		if coefficients[i] == 0 {
			continue
		}
		if numbers[f.Name] == nil {
			kinds = append(kinds, f.Name)
		}
		numbers[f.Name] = append(numbers[f.Name], strconv.Itoa(i+1))
		atoms[f.Name] = append(atoms[f.Name], names[f.Site])
	}
	list := func(numbered, named bool) notation.Text {
		var t notation.Text
		for i, kind := range kinds {
			if i > 0 {
				t = t.Then(notation.Words("; "))
			}
			if numbered {
				for k, run := range runsOf(numbers[kind]) {
					if k > 0 {
						t = t.Then(notation.Words(", "))
					}
					t = t.Then(notation.PhiText(run[0]))
					if len(run) > 1 {
						t = t.Then(notation.Words("–"), notation.PhiText(run[1]))
					}
				}
				t = t.Then(notation.Words(": "))
			}
			on := fmt.Sprintf(" on %d atoms", len(atoms[kind]))
			if named {
				var parts []string
				for _, run := range runsOf(atoms[kind]) {
					parts = append(parts, strings.Join(run, "–"))
				}
				on = " on " + strings.Join(parts, ", ")
			}
			t = t.Then(notation.Function(kind), notation.Words(on))
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
