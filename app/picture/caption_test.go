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
