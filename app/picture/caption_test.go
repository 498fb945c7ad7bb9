package picture

import (
	"strings"
	"testing"

	"lobewright/app/study"
)

func plain(c caption) string {
	var lines []string
	for _, line := range c {
		lines = append(lines, line.text.String()+line.beside.String())
	}
	return strings.Join(lines, "\n")
}

func TestCaptionsNameTheOperationAndNarrowOnesLeaveOutTheFrame(t *testing.T) {
	s := study.Study{Structure: "demo:square-plane"}
	g, err := newWork().Group(t.Context(), s)
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"C4(z)", "C4^3(z)", "C2(z)"} {
		s.Operation = name
		wide := moleculeCaption(g, s)
		if first, want := wide[0].text.String(), operationText(g, name).String(); want == "" || !strings.HasSuffix(first, want) {
			t.Errorf("%s: the caption says %q", name, first)
		}
		narrow := s
		narrow.Figure.Width = narrowest - 1
		if got := plain(moleculeCaption(g, narrow)); len(wide) != 2 || !strings.HasPrefix(plain(wide), got+"\n") || strings.Contains(got, "along") {
			t.Errorf("wide:\n%s\nnarrow:\n%s", plain(wide), got)
		}
	}
}

func TestAWidthThatIsTooSmallIsNamed(t *testing.T) {
	s := study.Study{Structure: "demo:square-plane"}
	g, err := newWork().Group(t.Context(), s)
	if err != nil {
		t.Fatal(err)
	}
	s.Figure.Width = 5
	if _, err := Molecule(g, s); err == nil || !strings.Contains(err.Error(), "width of 5 mm") || !strings.Contains(err.Error(), "at least 27 mm") {
		t.Errorf("got %v", err)
	}
	s.Figure.Width = 27
	if _, err := Molecule(g, s); err != nil {
		t.Error(err)
	}
}

func TestNamesAreDrawnTogetherInRuns(t *testing.T) {
	for list, want := range map[string]string{
		"C2 C3 C4 C12 C13 C14": "C2–C4 C12–C14", "C1 C2 N3": "C1 C2 N3", "1 3 4 5 6": "1 3–6", "Cl5": "Cl5",
	} {
		var got []string
		for _, run := range runsOf(strings.Fields(list)) {
			got = append(got, strings.Join(run, "–"))
		}
		if strings.Join(got, " ") != want {
			t.Errorf("%s: got %v, want %s", list, got, want)
		}
	}
}

func TestACaptionWithoutAFormTellsTheFunctions(t *testing.T) {
	s := study.Study{Structure: "demo:sandwich-eclipsed", Basis: []string{"C:pz"}}
	s.Projection.Irrep = "E1''"
	o, err := newWork().Orbitals(t.Context(), s)
	if err != nil {
		t.Fatal(err)
	}
	orbital, err := o.Orbital(s.Projection)
	if err != nil {
		t.Fatal(err)
	}
	if got := plain(orbitalCaption(o, orbital, s)); !strings.Contains(got, "on C2–C11") {
		t.Errorf("got\n%s", got)
	}
}
