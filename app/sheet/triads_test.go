package sheet

import (
	"strings"
	"testing"

	"lobewright/app/study"
)

// One picture bears the names of both triads, and the card both rules and what is
// called differently.
func TestOnePictureShowsTwoFrames(t *testing.T) {
	s := sheetOf(t, study.Study{Structure: "demo:water", Held: study.Held{Frame: "plane-xz"}})
	panels := 0
	for _, item := range s.Items {
		if _, ok := item.(*Panel); ok {
			panels++
		}
	}
	if panels != 1 {
		t.Errorf("%d panels", panels)
	}
	text := strings.Join(strings.Fields(strings.ReplaceAll(said(s), "\u00a0", " ")), " ")
	// z stays, and the y of the second frame lies along x.
	for _, want := range []string{
		"z, z2", "x, y2", "x2, y2, z2 (plane-xz): z along C2; xz is the plane",
		"x, y, z (default): z along C2; x square to the molecular", "B1 → B2", "B2 → B1",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not said: %s", want, text)
		}
	}
}

// Axes that atoms and lobes cover are drawn lightly over them.
func TestAxesShowThroughBodies(t *testing.T) {
	for _, s := range []study.Study{
		{Structure: "demo:square-plane", Held: study.Held{Frame: "x-between"}},
		{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Projection: study.Projection{Irrep: "Eu"}, Held: study.Held{Frame: "x-between"}},
	} {
		full, dashed := 0, 0
		for _, item := range sheetOf(t, s).Items {
			if l, ok := item.(Line); ok && l.Color.A == ghostAlpha {
				if len(l.Dash) > 0 {
					dashed++
				} else {
					full++
				}
			}
		}
		if full != 3 || dashed != 2 { // both z are one
			t.Errorf("%v: %d full and %d dashed axes", s.Basis, full, dashed)
		}
	}
}
