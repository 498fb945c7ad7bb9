package work

import (
	"context"
	"math"
	"testing"

	"lobewright/app/study"
	"lobewright/assets"
)

func TestEveryAxisThatIsOfferedCanBeTaken(t *testing.T) {
	ctx := context.Background()
	for _, demo := range assets.DemoList() {
		if demo.Name == "cage" && testing.Short() {
			continue
		}
		w, s := demoWork(), study.Study{Structure: "demo:" + demo.Name}
		g, err := w.Group(ctx, s)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range g.ZChoices() {
			fit, err := g.framed("", c.Text, "")
			if err != nil {
				t.Fatalf("%s: z along %s is offered and refused: %v", demo.Name, c.Text, err)
			}
			z := fit.Rotation.Mul3(g.Fit.Rotation.Transpose()).Row(2)
			if z.Dot(c.Direction) < 1-1e-4 {
				t.Errorf("%s: z along %s lies along %v, not %v", demo.Name, c.Text, z, c.Direction)
			}
		}
		now := g.ZNow()
		if g.Fit.Setting.Infinite() {
			continue
		}
		for _, c := range g.XChoices() {
			fit, err := g.framed("", now, c.Text)
			if err != nil {
				t.Fatalf("%s: x along %s is offered and refused: %v", demo.Name, c.Text, err)
			}
			turn := fit.Rotation.Mul3(g.Fit.Rotation.Transpose())
			if x := turn.Row(0); x.Dot(c.Direction) < 1-1e-4 {
				t.Errorf("%s: x along %s lies along %v, not %v", demo.Name, c.Text, x, c.Direction)
			}
			if math.Abs(turn.At(2, 2)-1) > 1e-6 {
				t.Errorf("%s: x along %s turns z to %v", demo.Name, c.Text, turn.Row(2))
			}
		}
	}
}

func TestElementsAreThoseOfTextbooks(t *testing.T) {
	for name, want := range map[string][3]int{ // axes, planes, centre
		"water": {1, 2, 0}, "square-plane": {5, 5, 1}, "octahedron": {13, 9, 1}, "tetrahedron": {7, 6, 0}, "cage": {31, 15, 1},
		"propadiene": {3, 2, 0}, "silicic-acid": {1, 0, 0}, "rod": {1, 1, 1}, "cyanide": {1, 0, 0},
	} {
		g, err := demoWork().Group(context.Background(), study.Study{Structure: "demo:" + name})
		if err != nil {
			t.Fatal(err)
		}
		var got [3]int
		for _, e := range g.Elements() {
			got[e.Kind]++
			if e.Name == "" {
				t.Errorf("%s: an element without a name: %+v", name, e)
			}
			if name == "propadiene" && e.Kind == ElementAxis && e.Direction[2] > 0.99 && e.Name != "S4(z)" {
				t.Errorf("the principal axis of D2d is called %s", e.Name)
			}
		}
		if got != want {
			t.Errorf("%s has %v axes, planes and centres, not %v", name, got, want)
		}
	}
}
