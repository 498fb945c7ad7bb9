package table

import (
	"slices"
	"strings"
	"testing"

	"lobewright/symmetry"
)

func TestColumnsAreAlignedByCharactersNotBytes(t *testing.T) {
	table := Table{Title: "Title", Head: []string{"", "σv", "x"}, Align: []Align{Left, Right}}
	table.Add("A1'", "−1", "z²")
	table.Add("E", "10")
	table.Break()
	table.Add("Σg+")
	table.Notes = []string{"note"}
	want := "Title\n       σv  x\n  A1'  −1  z²\n  E    10\n\n  Σg+\n  note\n"
	if got := table.Text(); got != want {
		t.Errorf("laid out as\n%q, want\n%q", got, want)
	}
}

func TestBlankColumnsAreDropped(t *testing.T) {
	table := Table{Head: []string{"a", "b", "c"}, Align: []Align{Right, Right, Left}}
	table.Add("1", "", "x")
	table.Add("22")
	if got, want := table.withoutBlankColumns().Text(), "   a  c\n   1  x\n  22\n"; got != want {
		t.Errorf("laid out as %q, want %q", got, want)
	}
}

func TestIrrationalCharactersAreExplained(t *testing.T) {
	s, err := symmetry.New("D7")
	if err != nil {
		t.Fatal(err)
	}
	text := Characters(s).Text()
	for _, want := range []string{"1.247 = 2cos(2π/7)", "0.445 = ", "1.802 = ", "E3", "(x, y)"} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
}

func TestCombinationsBreakBetweenTermsOnly(t *testing.T) {
	for form, want := range map[string][]string{
		"(2φ1 − φ2 + φ3)/√6":          {"(2φ1 ", "− φ2 ", "+ φ3)/√6"},
		"((1 + √5)φ1 − (√5 − 1)φ2)/4": {"((1 + √5)φ1 ", "− (√5 − 1)φ2)/4"},
		"(1 + √5)φ1 + φ2":             {"(1 + √5)φ1 ", "+ φ2"},
		"−φ1":                         {"−φ1"},
	} {
		if got := formTerms(form); !slices.Equal(got, want) {
			t.Errorf("%s is cut into %q", form, got)
		}
	}
	lines := fold([]string{strings.Repeat("a", 40) + " ", "+ " + strings.Repeat("b", 40)})
	if len(lines) != 2 || strings.HasSuffix(lines[0], " ") {
		t.Errorf("folded to %q", lines)
	}
}
