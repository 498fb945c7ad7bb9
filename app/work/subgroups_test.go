package work

import (
	"context"
	"testing"

	"lobewright/app/study"
)

// Every subgroup of the group that a structure has is one that it nearly has.
func TestEverySubgroupStandsInTheLadder(t *testing.T) {
	ctx := context.Background()
	for _, name := range []string{"water", "square-plane", "octahedron", "propadiene", "bipyramid"} {
		w, s := demoWork(), study.Study{Structure: "demo:" + name}
		g, err := w.Group(ctx, s)
		if err != nil {
			t.Fatal(err)
		}
		if g.Fit.Setting.Infinite() {
			continue
		}
		ladder, err := w.Ladder(ctx, s, nil)
		if err != nil {
			t.Fatal(err)
		}
		list, err := Subgroups(g.Fit.Setting)
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range list {
			n := ladder.FindSubgroup(g, e.Descent)
			if n == nil {
				t.Errorf("%s: %s (%d of %d) of %s is not in the ladder", name, e.Subgroup.Symbol, e.Embedding, e.Of, g.Fit.Setting.Symbol)
				continue
			}
			if n.Fit.Deviation > 1.5*g.Fit.Deviation+0.02 {
				t.Errorf("%s: %s is %v Å away, and the group itself %v Å", name, e.Name(), n.Fit.Deviation, g.Fit.Deviation)
			}
		}
	}
}
