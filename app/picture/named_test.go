package picture

import (
	"slices"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
)

// Of all symmetry elements each is named or told to be left without a name, and
// those of the chosen operation are always named.
func TestElementsOfTheChosenOperationAreNamed(t *testing.T) {
	fonts, err := FontsOf("")
	if err != nil {
		t.Fatal(err)
	}
	for _, structure := range []string{"demo:octahedron", "demo:square-plane", "demo:cage"} {
		s := study.Study{Structure: structure, Look: study.Look{Elements: true}}
		g, err := newWork().Group(t.Context(), s)
		if err != nil {
			t.Fatal(err)
		}
		for i, op := range g.Operations(0) {
			if i%3 != 1 && structure != "demo:square-plane" || i%17 != 1 && structure == "demo:cage" {
				continue // each takes time
			}
			var m Maker
			body := m.Molecule(g, s)
			v := NewViewpoint(s.Camera, body)
			body.AddElements([]work.Operation{op}, v, false)
			v = NewViewpoint(s.Camera, body)
			p := Panel{Width: 70, Height: 60, Scale: min(66/v.Width, 56/v.Height)}
			labels, missing, err := body.Labels(t.Context(), v, p, 8, fonts, nil)
			if err != nil {
				t.Fatal(err)
			}
			bold, elements := 0, 0
			for _, l := range labels {
				if l.Element {
					elements++
					if l.Runs[0].Bold {
						bold++
					}
				}
			}
			want := 0
			for _, n := range body.stage.named {
				if n.belongs(body.chosen) {
					want++
					if slices.Contains(missing.Elements, n.Name) {
						t.Errorf("%s %s: %s is missing", structure, op.Name, n.Name)
					}
				}
			}
			if bold != want || want != min(1, op.Steps()) && op.Steps() != 2 {
				t.Errorf("%s %s: %d names stand out of %d", structure, op.Name, bold, want)
			}
			if elements+len(missing.Elements) != len(g.Elements()) {
				t.Errorf("%s %s: %d named and %d told, of %d", structure, op.Name, elements, len(missing.Elements), len(g.Elements()))
			}
		}
	}
}
