package orbitals

import (
	"slices"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
)

func TestChoicesAreReadAsWritten(t *testing.T) {
	for text, want := range map[string]string{
		"F:sigma":                  "F:sigma",
		" 2-4,7 : px , py ":        "2-4,7:px,py",
		"all:s,p,d,f":              "all:s,p,d,f",
		"orbit:2:pi":               "orbit:2:pi",
		"orbit:2:sigma@orbit:1,pi": "orbit:2:sigma@orbit:1,pi",
		"F:sigma@1":                "F:sigma@1",
		"C:sigma@2-6":              "C:sigma@2-6",
		"C:sigma@2,4-6,8,pz":       "C:sigma@2,4-6,8,pz",
		"C:pi-in@Xe,pi-out":        "C:pi-in@Xe,pi-out",
		"1:fz(x2-y2),fx(x2-3y2)":   "1:fz(x2-y2),fx(x2-3y2)",
	} {
		c, err := ParseChoice(text)
		if err != nil {
			t.Errorf("%q: %v", text, err)
			continue
		}
		if c.String() != want {
			t.Errorf("%q is read as %q", text, c)
		}
	}
}

func TestChoicesThatAreWrongSayWhatWouldBeRight(t *testing.T) {
	for text, want := range map[string][]string{
		"":             {"empty", "F:sigma"},
		"F":            {`"F" names no functions`, "ATOMS:FUNCTIONS"},
		":s":           {"names no atoms"},
		"orbit:2":      {"names no functions"},
		"F:":           {"function is missing", "sigma"},
		"F:s,,p":       {"function is missing"},
		"F:sp3":        {`"sp3" is no function`, "pi-in"},
		"F:dz":         {"d shell are dz2, dxz, dyz, dx2-y2, dxy"},
		"F:Pz":         {"p shell are px, py, pz"},
		"F:fx3":        {"fz3, fxz2"},
		"F:π":          {`"π" is no function`},
		"F:px@1":       {"px has no centre", "sigma"},
		"F:sigma@":     {"sigma@ names no atoms"},
		"F:\xff":       {"is no function"},
		"F:pi-sideway": {"is no function", "pi-out"},
	} {
		_, err := ParseChoice(text)
		if err == nil {
			t.Errorf("%q is accepted", text)
			continue
		}
		for _, part := range want {
			if !strings.Contains(err.Error(), part) {
				t.Errorf("%q: %q does not say %q", text, err, part)
			}
		}
	}
	if _, err := ParseChoice(strings.Repeat("F", maxChoice+1)); err == nil || len(err.Error()) > 200 {
		t.Errorf("a choice without end: %v", err)
	}
}

// squareWithSpectator is XeF4 with a water molecule beside it.
func squareWithSpectator(t testing.TB) *Sites {
	s := &Sites{
		Setting:   setting(t, "D4h"),
		Positions: []mgl64.Vec3{{}, {1.95, 0, 0}, {0, 1.95, 0}, {-1.95, 0, 0}, {0, -1.95, 0}},
		Elements:  []structure.Element{xenon, fluorine, fluorine, fluorine, fluorine},
		Links:     [][2]int{{0, 1}, {0, 2}, {0, 3}, {0, 4}},
	}
	permute(t, s)
	const oxygen = 8
	s.Core = []bool{true, true, true, true, true, false, false, false}
	s.Positions = append(s.Positions, mgl64.Vec3{4, 3, 2}, mgl64.Vec3{4.5, 3.5, 2}, mgl64.Vec3{4, 3, 3})
	s.Elements = append(s.Elements, oxygen, hydrogen, hydrogen)
	for r := range s.Permutations {
		s.Permutations[r] = append(s.Permutations[r], -1, -1, -1)
	}
	for k := 5; k < 8; k++ {
		s.Permutations[0][k] = k
	}
	return s
}

func TestChoicesThatDoNotFitTheStructureSayWhy(t *testing.T) {
	s := squareWithSpectator(t)
	for text, want := range map[string]string{
		"Cl:s":             "Xe",
		"9:s":              "1 to 8",
		"0:s":              "1 to 8",
		"orbit:3:s":        "orbits 1 to 2",
		"orbit:x:s":        "orbit",
		"6:s":              "spectator",
		"O:s":              "spectator",
		"Xe:sigma":         "on the centre",
		"all:sigma":        "on the centre",
		"Xe:pi":            "on the centre",
		"F:sigma@2":        "on the centre",
		"3:sigma@2":        "centre",
		"3-4:sigma@2":      "centre",
		"F:sigma@9":        "1 to 8",
		"2:sigma,p@1":      "p has no centre",
		"F:sigma,pi@2,pz,": "function is missing",
	} {
		c, err := ParseChoice(text)
		if err == nil {
			_, err = NewBasis(s, c)
		}
		if err == nil {
			t.Errorf("%q is accepted", text)
			continue
		}
		if !strings.Contains(err.Error(), want) || strings.Contains(err.Error(), "\n") {
			t.Errorf("%q: %q does not say %q in one line", text, err, want)
		}
	}
	if _, err := NewBasis(s); err == nil {
		t.Error("no choice at all is accepted")
	}
}

func TestElementsLeaveSpectatorsOut(t *testing.T) {
	s := squareWithSpectator(t)
	b := basis(t, s, "all:s")
	if len(b.Functions) != 5 || len(b.Notes) != 1 || b.Notes[0].Key != NoteSpectators || len(b.Notes[0].Atoms) != 3 {
		t.Errorf("%d functions, notes %v", len(b.Functions), b.Notes)
	}
	if orbits := s.Orbits(); len(orbits) != 2 || len(orbits[0]) != 1 || len(orbits[1]) != 4 {
		t.Errorf("orbits %v", orbits)
	}
}

// Whatever is written, the answer is a basis that can be projected or an error
// of one line.
func FuzzChoice(f *testing.F) {
	for _, text := range []string{
		"F:sigma", "2-4,5:px,py", "all:s,p,d,f", "orbit:2:pi", "F:sigma@1", "2:sigma@2-3,pz", "F:pi-in,pi-out",
		"Xe:fz(x2-y2)", "6:s", "all:sigma", ":", "@", "1:sigma@@", "999999999999999999999:s", "2-1:s", "F:sigma@orbit:1",
	} {
		f.Add(text)
	}
	s := squareWithSpectator(f)
	f.Fuzz(func(t *testing.T, text string) {
		c, err := ParseChoice(text)
		if err == nil {
			again, second := ParseChoice(c.String())
			if second != nil || again.String() != c.String() {
				t.Fatalf("%q is written as %q, which is read as %q, %v", text, c, again, second)
			}
			var b *Basis
			if b, err = NewBasis(s, c); err == nil {
				p, err := b.Project()
				if err != nil {
					t.Fatalf("%q: %v", text, err)
				}
				if len(p.Orbitals) != len(b.Functions) {
					t.Fatalf("%q: %d group orbitals of %d functions", text, len(p.Orbitals), len(b.Functions))
				}
				return
			}
		}
		if strings.ContainsAny(err.Error(), "\n\r") || len(err.Error()) > 1000 {
			t.Fatalf("%q: the error is no line: %q", text, err)
		}
	})
}

func TestSeveralChoicesAreTakenApart(t *testing.T) {
	singles := []string{"Cl:sigma", "2-4,7:px,py", "C:sigma@2-6,9,pz", "Fe:d", "orbit:2:pz", "all:s", "1:d", "C:pi@2"}
	for _, one := range singles {
		if got := SplitChoices(one); !slices.Equal(got, []string{one}) {
			t.Errorf("%q: %q", one, got)
		}
		for _, two := range singles {
			want := []string{one, two}
			for _, between := range []string{";", " ; ", ",", ", "} {
				if strings.Contains(between, ",") && strings.HasPrefix(one, "C:pi@2") && strings.HasPrefix(two, "2-4,7") {
					continue // 2-4 may belong to the centre
				}
				if got := SplitChoices(one + between + two); !slices.Equal(got, want) {
					t.Errorf("%q: %q", one+between+two, got)
				}
			}
		}
	}
	for _, none := range []string{"", " ", ";", " ; ;"} {
		if got := SplitChoices(none); len(got) != 0 {
			t.Errorf("%q: %q", none, got)
		}
	}
	if _, err := ParseChoice("C:pz Fe:d"); err == nil || !strings.Contains(err.Error(), "semicolon") {
		t.Error(err)
	}
}
