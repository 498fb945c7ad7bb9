package picture

import (
	"math"
	"testing"
	"time"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/render"
)

// widestSphere is the radius of the largest ball among the shapes with an opacity,
// for a basis of s functions.
func widestSphere(t *testing.T, shown Shown, opaque bool) float64 {
	t.Helper()
	var live Live
	orbit := BestOrbit(shown.Group, shown.Basis).Seen(study.Camera{})
	f, err := live.Frame(shown, orbit, 200, 200, 96, true)
	if err != nil {
		t.Fatal(err)
	}
	largest := 0.0
	for _, s := range f.Scene.Shapes {
		if ball, ok := s.Geometry.(render.Sphere); ok && s.Transform != nil && (s.Material.Opacity == 1) == opaque {
			largest = max(largest, ball.Radius)
		}
	}
	return largest
}

func TestSumsOfOneScaleGrow(t *testing.T) {
	o := orbitalsOf(t, "demo:water", "H:s")
	shown := Shown{Group: o.Group, Basis: o.Basis, Look: study.Look{NoAxes: true}}
	op := o.Group.Operations(0)[1]
	shown.Operation, shown.Moment = &op, 0.3
	shown.Traveller = []float64{1, 0}
	shown.Full = 2
	last := 0.0
	for _, c := range []float64{0.5, 1, 2} {
		shown.Coefficients = []float64{c, -c}
		r := widestSphere(t, shown, true)
		if math.Abs(r/c-last) > 1e-9 && last > 0 {
			t.Errorf("a coefficient of %v has a ball of %v, %v for each 1 before", c, r, last)
		}
		last = r / c
	}
	// What travels has the size of a function by itself.
	if r, want := widestSphere(t, shown, false), 2*last*ghostSize; math.Abs(r-want) > 1e-9 {
		t.Errorf("what travels has a ball of %v, not %v", r, want)
	}
	shown.Coefficients = []float64{0, 0}
	if r := widestSphere(t, shown, true); r != 0 {
		t.Errorf("a sum of 0 has a ball of %v", r)
	}
}

func TestWhatTravelsIsWhereTheOperationHasCarriedIt(t *testing.T) {
	o := orbitalsOf(t, "demo:water", "H:s")
	op := o.Group.Operations(0)[1]
	shown := Shown{Group: o.Group, Basis: o.Basis, Coefficients: []float64{1, 1}, Traveller: []float64{1, 0}, Operation: &op, Moment: 1, Look: study.Look{NoAxes: true}}
	var live Live
	f, err := live.Frame(shown, BestOrbit(o.Group, o.Basis).Seen(study.Camera{}), 200, 200, 96, true)
	if err != nil {
		t.Fatal(err)
	}
	var at []mgl64.Vec3
	for _, s := range f.Scene.Shapes {
		if ball, ok := s.Geometry.(render.Sphere); ok && s.Transform != nil && s.Material.Opacity < 1 {
			at = append(at, s.Transform.Apply(ball.Center))
		}
	}
	if want := o.Group.Sites.Positions[o.Functions[1].Site]; len(at) != 1 || at[0].Sub(want).Len() > 1e-9 {
		t.Errorf("it is at %v, not at %v", at, want)
	}
}

func TestASumGrowsFromStepToStepWithoutAJump(t *testing.T) {
	o := orbitalsOf(t, "demo:octahedron", "C:sigma")
	for i, op := range o.Group.Operations(0) {
		for _, n := range []int{0, SlowSteps} {
			whole := StepDuration(op, n)
			if m, g := StepMoment(op, n, 0); m != 0 || g != 0 {
				t.Fatalf("%s begins at %v, %v", op.Name, m, g)
			}
			if m, g := StepMoment(op, n, whole); m != 1 || g != 1 {
				t.Fatalf("%s ends at %v, %v", op.Name, m, g)
			}
			last := 0.0
			for e := time.Duration(0); e <= whole; e += 10 * time.Millisecond {
				if _, g := StepMoment(op, n, e); g < last || g > last+0.12 {
					t.Fatalf("%d: %s jumps from %v to %v", i, op.Name, last, g)
				} else {
					last = g
				}
			}
		}
	}
}
