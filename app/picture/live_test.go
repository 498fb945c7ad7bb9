package picture

import (
	"context"
	"image"
	"image/png"
	"math"
	"os"
	"testing"
	"time"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

func orbitalsOf(t testing.TB, spec string, basis ...string) *work.Orbitals {
	t.Helper()
	w := work.New(structure.Inputs{Demo: assets.Demos()})
	o, err := w.Orbitals(context.Background(), study.Study{Structure: spec, Basis: basis})
	if err != nil {
		t.Fatal(err)
	}
	return o
}

func equal(a, b mgl64.Mat3) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > 1e-9 {
			return false
		}
	}
	return true
}

func TestAMotionEndsAsItsOperation(t *testing.T) {
	for _, demo := range []string{"octahedron", "sandwich-staggered", "cage", "trimer"} {
		w := work.New(structure.Inputs{Demo: assets.Demos()})
		g, err := w.Group(context.Background(), study.Study{Structure: "demo:" + demo})
		if err != nil {
			t.Fatal(err)
		}
		for _, op := range g.Fit.Setting.Operations {
			m := MotionOf(op)
			if start := m.At(0); !equal(start, mgl64.Ident3()) {
				t.Errorf("%s of %s starts at %v", op.Name, demo, start)
			}
			if end := m.At(1); !equal(end, op.Matrix) {
				t.Errorf("%s of %s ends at\n%v, not at\n%v", op.Name, demo, end, op.Matrix)
			}
		}
	}
}

func TestAnImproperRotationTurnsBeforeItReflects(t *testing.T) {
	m := Motion{Axis: mgl64.Vec3{0, 0, 1}, Angle: math.Pi / 2, Improper: true}
	half := m.At(0.5)
	if want := mgl64.Rotate3DZ(math.Pi / 2); !equal(half, want) {
		t.Errorf("half of S4 is\n%v, not C4", half)
	}
	if flat := m.At(0.75).Mul3x1(mgl64.Vec3{0, 0, 1}); flat.Len() > 1e-12 {
		t.Errorf("halfway through the reflection z is %v", flat)
	}
	if got := m.Moment(eachStep + betweenIt/2); got != 0.5 {
		t.Errorf("between the steps the moment is %v", got)
	}
}

func TestTimeAndMomentAgree(t *testing.T) {
	for _, m := range []Motion{{Axis: mgl64.Vec3{0, 0, 1}, Angle: 1}, {Axis: mgl64.Vec3{0, 0, 1}, Angle: 1, Improper: true}, {Inverts: true}, {}} {
		last := -1.0
		for e := time.Duration(0); e <= m.Duration(); e += m.Duration() / 50 {
			now := m.Moment(e)
			if now < last {
				t.Fatalf("%+v runs backward at %v", m, e)
			}
			last = now
			if back := m.Moment(m.Elapsed(now)); math.Abs(back-now) > 0.01 {
				t.Errorf("%+v: moment %.3f comes back as %.3f", m, now, back)
			}
		}
		if end := m.Moment(m.Duration()); math.Abs(end-1) > 1e-9 {
			t.Errorf("%+v ends at %v", m, end)
		}
	}
}

func TestWhatLiesUnderThePointerStaysThereWhenZoomed(t *testing.T) {
	o := NewOrbit(0.4, 0.3)
	o.Parallel = true
	const w, h, x, y = 800, 600, 610.0, 130.0
	// A point of the target's plane under the pointer.
	m := o.Turn.Mat4().Mat3()
	p := o.Target.Add(m.Row(0).Mul((x - w/2) * o.perPixel(w, h))).Sub(m.Row(1).Mul((y - h/2) * o.perPixel(w, h)))
	for _, factor := range []float64{1.7, 0.4, 1e9, 1e-9, math.NaN(), -1} {
		z := o.Zoomed(factor, x, y, w, h)
		px, py, _, _ := z.Camera(w, h).Project(p, w, h)
		if math.Hypot(px-x, py-y) > 1e-6 {
			t.Errorf("zoomed by %v it lies at %.3f, %.3f", factor, px, py)
		}
	}
}

func TestTurningHasNoPole(t *testing.T) {
	o := NewOrbit(0.4, 0.3)
	for i := range 400 {
		was := o.Turn.Mat4().Mat3()
		o = o.Turned(1, 3+float64(i%7), 800, 600)
		now := o.Turn.Mat4().Mat3()
		// Each step is a small turn, wherever the camera stands.
		if step := now.Sub(was); step.Row(0).Len()+step.Row(1).Len()+step.Row(2).Len() > 0.3 {
			t.Fatalf("step %d jumps:\n%v\n%v", i, was, now)
		}
	}
	if l := o.Turn.Len(); math.Abs(l-1) > 1e-9 {
		t.Errorf("the quaternion has length %v", l)
	}
}

func TestDraggingToTheRightTurnsTheFrontToTheRight(t *testing.T) {
	o := NewOrbit(0.4, 0.3)
	front := o.Turn.Mat4().Mat3().Row(2) // toward the viewer
	after := o.Turned(20, 0, 800, 600).Turn.Mat4().Mat3().Mul3x1(front)
	if after[0] <= 0 || math.Abs(after[1]) > 1e-9 {
		t.Errorf("the front goes to %v", after)
	}
	after = o.Turned(0, 20, 800, 600).Turn.Mat4().Mat3().Mul3x1(front)
	if after[1] >= 0 || math.Abs(after[0]) > 1e-9 {
		t.Errorf("dragged down, the front goes to %v", after)
	}
}

func TestLookingAlongAnAxisSeesItAsAPoint(t *testing.T) {
	for _, axis := range []mgl64.Vec3{{0, 0, 1}, {1, 0, 0}, {1, 1, 1}, {0, 0, -3}} {
		o := NewOrbit(0.1, 0.2).Along(axis, mgl64.Vec3{0, 0, 1})
		if got := o.Turn.Mat4().Mat3().Mul3x1(axis.Normalize()); got.Sub(mgl64.Vec3{0, 0, 1}).Len() > 1e-9 {
			t.Errorf("along %v it points to %v", axis, got)
		}
	}
}

func TestEveryAtomAndLobeCanBePicked(t *testing.T) {
	o := orbitalsOf(t, "demo:square-plane", "Cl:sigma")
	orbit := BestOrbit(o.Group, o.Basis).Along(mgl64.Vec3{0, 0, 1}, mgl64.Vec3{0, 1, 0})
	shown := Shown{Group: o.Group, Basis: o.Basis, Chosen: -1, Element: true, Motion: MotionOf(o.Fit.Setting.Operations[1])}
	var live Live
	const w, h = 640, 480
	f, err := live.Frame(shown, orbit, w, h, 96, true)
	if err != nil {
		t.Fatal(err)
	}
	var r render.Renderer
	for i, p := range o.Group.Sites.Positions[1:] {
		x, y, _, _ := f.Camera.Project(p, w, h)
		got, ok := f.Pick(&r, int(x), int(y), 4)
		if !ok || got.Atom != i+1 || got.Lobe {
			t.Errorf("atom %d: %+v, %v", i+2, got, ok)
		}
	}
	for k, function := range o.Functions {
		shown.Coefficients = make([]float64, len(o.Functions))
		shown.Coefficients[k] = 1
		f, err := live.Frame(shown, orbit, w, h, 96, true)
		if err != nil {
			t.Fatal(err)
		}
		at := o.Group.Sites.Positions[function.Site]
		x, y, _, _ := f.Camera.Project(at.Add(function.Direction.Mul(0.6*lobeUnit(o.Group, carriers(o.Basis)))), w, h)
		got, ok := f.Pick(&r, int(x), int(y), 4)
		if !ok || got.Atom != function.Site || !got.Lobe {
			t.Errorf("lobe of function %d: %+v, %v", k+1, got, ok)
		}
	}
	if _, ok := f.Pick(&r, 3, 3, 4); ok {
		t.Error("something was picked on empty ground")
	}
}

// The travelled function ends exactly where the representation says.
func TestLobesArriveWhereTheRepresentationSays(t *testing.T) {
	o := orbitalsOf(t, "demo:octahedron", "C:pi")
	r, err := o.Basis.Representation()
	if err != nil {
		t.Fatal(err)
	}
	for n, op := range o.Fit.Setting.Operations {
		at := MotionOf(op).At(1)
		for k, f := range o.Functions {
			image := r.Image(n, k)
			if len(image) != 1 {
				t.Fatalf("%s carries φ%d into a sum", op.Name, k+1)
			}
			to := o.Functions[image[0].Function]
			want := to.Direction.Mul(image[0].Coefficient)
			if got := at.Mul3x1(f.Direction); got.Sub(want).Len() > 1e-6 {
				t.Fatalf("%s carries the lobe of φ%d to %v, not %v", op.Name, k+1, got, want)
			}
		}
	}
}

func liveScene(t testing.TB, spec, basis string) (Shown, Orbit) {
	o := orbitalsOf(t, spec, basis)
	for _, orbital := range o.Projection.Orbitals {
		if orbital.Partner > 0 {
			ops := o.Fit.Setting.Operations
			return Shown{Group: o.Group, Basis: o.Basis, Coefficients: orbital.Coefficients, Element: true,
				Motion: MotionOf(ops[len(ops)-1]), Moment: 0.3, Chosen: -1}, BestOrbit(o.Group, o.Basis)
		}
	}
	t.Fatal("no degenerate orbital")
	return Shown{}, Orbit{}
}

func BenchmarkLiveFrame(b *testing.B) {
	for _, c := range []struct{ spec, basis string }{
		{"demo:square-plane", "Cl:sigma"}, {"demo:octahedron", "C:pi"}, {"demo:sandwich-staggered", "C:pz"}, {"demo:dimer", "Re:d"}, {"demo:cage", "C:sigma@1-60"},
	} {
		for _, quick := range []bool{true, false} {
			b.Run(c.spec+map[bool]string{true: "/quick", false: "/full"}[quick], func(b *testing.B) {
				shown, orbit := liveScene(b, c.spec, c.basis)
				var live Live
				var r render.Renderer
				img := image.NewRGBA(image.Rect(0, 0, 800, 640))
				for b.Loop() {
					orbit = orbit.Turned(5, 1, 800, 640)
					f, err := live.Frame(shown, orbit, 800, 640, 96, quick)
					if err != nil {
						b.Fatal(err)
					}
					if err := r.Draw(context.Background(), img, &f.Scene, f.Camera, f.Look, f.Quality, render.Band{}); err != nil {
						b.Fatal(err)
					}
				}
				if dir := os.Getenv("LOBEWRIGHT_PICTURES"); dir != "" {
					out, _ := os.Create(dir + "/live-" + c.spec[5:] + ".png")
					png.Encode(out, img)
					out.Close()
				}
			})
		}
	}
}
