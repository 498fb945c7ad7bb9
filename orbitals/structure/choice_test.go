package structure

import (
	"errors"
	"fmt"
	"slices"
	"testing"
	"unicode/utf8"
)

// complexIon has nine atoms: Cu 1, O 2-4, Cl 5, H 6-9.
var complexIon = &Molecule{Atoms: []Atom{
	{Element: 29}, {Element: 8}, {Element: 8}, {Element: 8}, {Element: 17}, {Element: 1}, {Element: 1}, {Element: 1}, {Element: 1},
}}

func twoOrbits(n int) ([]int, error) {
	switch n {
	case 1:
		return []int{0, 4}, nil
	case 2:
		return []int{3, 1, 2}, nil
	}
	return nil, fmt.Errorf("there is no orbit %d", n)
}

func TestAtomsAreChosenByElementNumberAllAndOrbit(t *testing.T) {
	cases := map[string][]int{
		"Cu":          {0},
		"O":           {1, 2, 3},
		"o,CU":        {0, 1, 2, 3},
		"7":           {6},
		"2-4,7":       {1, 2, 3, 6},
		" 2 - 4 , 7 ": {1, 2, 3, 6},
		"7,2-4,3-5,7": {1, 2, 3, 4, 6},
		"3-3":         {2},
		"all":         {0, 1, 2, 3, 4, 5, 6, 7, 8},
		"orbit:2":     {1, 2, 3},
		"orbit:1,H":   {0, 4, 5, 6, 7, 8},
		"009":         {8},
	}
	for text, want := range cases {
		got, err := ParseAtoms(text, complexIon, twoOrbits)
		if err != nil || !slices.Equal(got, want) {
			t.Errorf("%q: %v, %v, want %v", text, got, err, want)
		}
	}
}

func TestBadChoicesSayWhatWouldBeRight(t *testing.T) {
	cases := map[string]string{
		"":                     `a choice of atoms is empty; ` + wantAtoms.String(),
		"O,,H":                 `a choice of atoms is empty; ` + wantAtoms.String(),
		"Fe":                   `the structure has no Fe; its elements are H, O, Cl, Cu`,
		"Xx":                   `"Xx" is no choice of atoms; ` + wantAtoms.String(),
		"CuO":                  `"CuO" is no choice of atoms; ` + wantAtoms.String(),
		"0":                    `atom 0 does not exist; the structure's atoms are 1 to 9`,
		"10":                   `atom 10 does not exist; the structure's atoms are 1 to 9`,
		"8-10":                 `atom 10 does not exist; the structure's atoms are 1 to 9`,
		"99999999999999999999": `atom 99999999999999999999 does not exist; the structure's atoms are 1 to 9`,
		"4-2":                  `the range "4-2" runs backward; write 2-4`,
		"4-":                   `a range of atoms has no end; ` + wantAtoms.String(),
		"2-4-6":                `"4-6" is no atom number; ` + wantAtoms.String(),
		"-4":                   `"-4" is no choice of atoms; ` + wantAtoms.String(),
		"2.5":                  `"2.5" is no atom number; ` + wantAtoms.String(),
		"orbit:":               `"orbit:" is no orbit; ` + wantAtoms.String(),
		"orbit:0":              `"orbit:0" is no orbit; ` + wantAtoms.String(),
		"orbit:3":              `there is no orbit 3`,
	}
	for text, want := range cases {
		if got, err := ParseAtoms(text, complexIon, twoOrbits); err == nil || err.Error() != want {
			t.Errorf("%q: %v,\n got %v\nwant %s", text, got, err, want)
		}
	}
	if _, err := ParseAtoms("orbit:1", complexIon, nil); err == nil || err.Error() != "orbits are not known here; choose atoms by element (F), number (2-4,7) or all" {
		t.Errorf("got %v", err)
	}
}

func TestCoreIsTheChoiceLessWhatIsIgnored(t *testing.T) {
	cases := []struct {
		core, ignore string
		want         []int
	}{
		{"", "", []int{0, 1, 2, 3, 4, 5, 6, 7, 8}},
		{"Cu,O", "", []int{0, 1, 2, 3}},
		{"", "H", []int{0, 1, 2, 3, 4}},
		{"2-7", "O,7-9", []int{4, 5}},
		{"1", "9", []int{0}},
	}
	for _, c := range cases {
		got, err := Core(complexIon, c.core, c.ignore)
		if err != nil || !slices.Equal(got, c.want) {
			t.Errorf("core %q, ignore %q: %v, %v, want %v", c.core, c.ignore, got, err, c.want)
		}
	}
	for _, c := range [][2]string{{"O", "2-4"}, {"", "all"}} {
		var e *Error
		if got, err := Core(complexIon, c[0], c[1]); !errors.As(err, &e) || e.Problem != NoCore {
			t.Errorf("core %q, ignore %q: %v, %v", c[0], c[1], got, err)
		}
	}
	if _, err := Core(complexIon, "", "Fe"); err == nil {
		t.Error("an element that does not occur is ignored without a word")
	}
}

func FuzzParseAtoms(f *testing.F) {
	for _, s := range []string{"Cu,O", "2-4,7", "all", "orbit:2", " 1 - 3 ,h", "4-2", ",", "-", "orbit:x", "１"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		got, err := ParseAtoms(text, complexIon, twoOrbits)
		if err != nil {
			if utf8.ValidString(text) {
				holdsOneLine(t, err.Error())
			}
			return
		}
		if len(got) == 0 || !slices.IsSorted(got) || got[0] < 0 || got[len(got)-1] >= len(complexIon.Atoms) {
			t.Errorf("%q chooses %v", text, got)
		}
		if len(slices.Compact(slices.Clone(got))) != len(got) {
			t.Errorf("%q chooses an atom twice: %v", text, got)
		}
	})
}
