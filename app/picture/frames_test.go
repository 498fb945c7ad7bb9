package picture

import (
	"context"
	"math"
	"slices"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/render"
)

// drawnOut is an octahedron, drawn out along z by 0.3 Å.
const drawnOut = `7

Cu 0 0 0
O 2 0 0
O -2 0 0
O 0 2 0
O 0 -2 0
O 0 0 2.3
O 0 0 -2.3
`

func drawnOutGroup(t testing.TB, as string) *work.Group {
	t.Helper()
	g, err := newWork().Group(context.Background(), study.Study{Structure: "typed", Coordinates: drawnOut, As: as})
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func arrows(scene render.Scene) []render.Arrow {
	var out []render.Arrow
	for _, s := range scene.Shapes {
		if a, ok := s.Geometry.(render.Arrow); ok && s.Place == nil {
			out = append(out, a)
		}
	}
	return out
}

func TestArrowsShowTheDisplacementsByTheStatedFactor(t *testing.T) {
	g := drawnOutGroup(t, "Oh")
	factor, longest := DisplacementScale(g)
	// The mean distance is 2.1 Å: the two atoms on z lie 0.2 Å further out, the
	// others 0.1 Å further in.
	if math.Abs(longest-0.2) > 1e-3 || factor != 5 {
		t.Fatalf("the longest displacement is %v Å, drawn %v times", longest, factor)
	}
	f, err := new(Live).Frame(Shown{Group: g, Look: study.Look{Displacements: true}}, BestOrbit(g, nil), 400, 400, 96, false)
	if err != nil {
		t.Fatal(err)
	}
	list := arrows(f.Scene)
	if len(list) != 6 {
		t.Fatalf("%d arrows on six atoms", len(list))
	}
	outwards := 0
	for _, a := range list {
		way := a.To.Sub(a.From)
		outward := way.Dot(a.From) > 0
		want := 0.1 * factor
		if outward {
			outwards++
			want = 0.2 * factor
		}
		if l := way.Len(); l < want || l > want+0.1 {
			t.Errorf("the arrow from %v is %v Å long, not %v from the surface of its atom", a.From, l, want)
		}
	}
	if outwards != 2 {
		t.Errorf("%d atoms move out, not 2", outwards)
	}
	if f, _ := new(Live).Frame(Shown{Group: drawnOutGroup(t, ""), Look: study.Look{Displacements: true}}, BestOrbit(g, nil), 400, 400, 96, false); len(arrows(f.Scene)) > 0 {
		t.Error("an exact structure has arrows")
	}
}

func TestAllSymmetryElementsAreDrawnAndNamed(t *testing.T) {
	g, err := newWork().Group(context.Background(), study.Study{Structure: "demo:water"})
	if err != nil {
		t.Fatal(err)
	}
	f, err := new(Live).Frame(Shown{Group: g, Look: study.Look{Elements: true, NoLabels: true, NoAxes: true}}, BestOrbit(g, nil), 500, 500, 96, false)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	lines, discs := 0, 0
	for _, s := range f.Scene.Shapes {
		switch shape := s.Geometry.(type) {
		case render.Text:
			name := ""
			for _, r := range shape.Runs {
				name += r.Text
			}
			names = append(names, name)
		case render.Line:
			lines++
		case render.Disc:
			discs++
			if s.Material.Opacity > 0.2 {
				t.Errorf("a plane hides what lies behind it: opacity %v", s.Material.Opacity)
			}
		}
	}
	slices.Sort(names)
	if !slices.Equal(names, []string{"C2(z)", "σv(xz)", "σv′(yz)"}) {
		t.Errorf("the names are %q", names)
	}
	if lines != 3 || discs != 2 {
		t.Errorf("%d lines and %d discs for an axis and two planes with their rims", lines, discs)
	}
}

func TestASecondTriadIsDashedAndSharesWhatIsTheSame(t *testing.T) {
	o := orbitalsOf(t, "demo:water", "H:s")
	held, err := o.Group.Held(study.Held{Frame: "plane-xz"})
	if err != nil {
		t.Fatal(err)
	}
	marks := triadMarks(held)
	var letters []string
	for _, m := range marks {
		letters = append(letters, m.letters.String())
		if m.dashed && m.direction.Len() < 0.999 {
			t.Errorf("%v is no unit vector", m.direction)
		}
	}
	// z is the same; x and y of one lie along y and −x of the other, or along −y
	// and x: one pair shares its direction, the other does not.
	if len(marks) != 4 || !marks[3].dashed || !slices.Contains(letters, "z, z2") && !slices.Contains(letters, "z, z₂") {
		t.Errorf("the axes are %q", letters)
	}
	if n := len(triadMarks(nil)); n != 3 {
		t.Errorf("without a second frame there are %d axes", n)
	}
}

// TestBelowABandThePictureIsWhole moves a view under a heading: what touched
// the edges of the picture touches those of what is left.
func TestBelowABandThePictureIsWhole(t *testing.T) {
	o := NewOrbit(0.4, 0.3)
	o.Parallel, o.Span, o.Distance = true, 4, 20
	const w, h, band = 300, 200, 50.0
	moved := o.Below(band, w, h)
	camera := moved.Camera(w, h)
	up := o.Rows().Row(1)
	for _, c := range []struct{ at, want float64 }{{2, band}, {-2, h}} {
		if _, y, _, _ := camera.Project(o.Target.Add(up.Mul(c.at)), w, h); math.Abs(y-c.want) > 1e-9 {
			t.Errorf("the edge is at %.3f, want %g", y, c.want)
		}
	}
	if o.Below(0, w, h) != o || o.Below(180, w, h) != o {
		t.Error("without a band, or with one that leaves nothing, the view moves")
	}
}
