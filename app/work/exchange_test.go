package work

import (
	"context"
	"testing"

	"lobewright/app/study"
)

func TestASecondFrameIsNamedAsTheListOfFramesNamesIt(t *testing.T) {
	w := demoWork()
	for _, name := range []string{"demo:octahedron", "demo:square-plane", "demo:water", "demo:rod"} {
		for _, first := range []string{"", "file"} {
			if name == "demo:rod" && first != "" {
				continue // it does not lie along the z of its file
			}
			g, err := w.Group(context.Background(), study.Study{Structure: name, Frame: first})
			if err != nil {
				t.Fatal(name, err)
			}
			for _, e := range g.Exchanges()[1:] {
				held, err := g.Held(study.Held{Frame: e.Frame.Rule.Name})
				if err != nil {
					t.Fatal(name, e.Frame.Rule.Name, err)
				}
				if d := held.Frame.Turn.Sub(e.Frame.Turn); d.Mul3(d.Transpose()).Trace() > 1e-12 {
					t.Errorf("%s: %s is turned by %v, not %v", name, e.Frame.Rule.Name, held.Frame.Turn, e.Frame.Turn)
				}
				if (held.Names == nil) != (e.Names == nil) {
					t.Errorf("%s: only one of two has names", name)
				}
				if e.Names == nil {
					continue
				}
				for i := range e.Names.Irreps {
					a, b := held.Fit.Setting.Irreps[held.Names.Irreps[i]].Label, e.Fit.Setting.Irreps[e.Names.Irreps[i]].Label
					if a != b {
						t.Errorf("%s: in %s an irrep is %s and %s", name, e.Frame.Rule.Name, a, b)
					}
				}
			}
		}
	}
}

func TestImpossibleAxesAreRefusedWithWhatWouldBePossible(t *testing.T) {
	g, err := demoWork().Group(context.Background(), study.Study{Structure: "demo:water"})
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range [][3]string{{"z-c3", "", ""}, {"", "C3", ""}, {"", "9", ""}, {"", "1,1,1", ""}} {
		if err := g.TryAxes(bad[0], bad[1], bad[2]); err == nil {
			t.Errorf("%q was taken", bad)
		}
		if held, err := g.Held(study.Held{Frame: bad[0], Z: bad[1], X: bad[2]}); err == nil || held != nil {
			t.Errorf("%q was held", bad)
		}
	}
	if held, err := g.Held(study.Held{}); held != nil || err != nil {
		t.Errorf("nothing is held, and %v, %v came of it", held, err)
	}
	if err := g.TryAxes("plane-xz", "", ""); err != nil {
		t.Error(err)
	}
}
