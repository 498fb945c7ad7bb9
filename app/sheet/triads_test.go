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
