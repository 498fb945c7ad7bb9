package picture

import (
	"context"
	"fmt"
	"image"
	"math"
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

func TestEveryAtomAndLobeCanBePicked(t *testing.T) {
	o := orbitalsOf(t, "demo:square-plane", "Cl:sigma")
	orbit := BestOrbit(o.Group, o.Basis).Seen(study.Camera{}.Along(mgl64.Vec3{0, 0, 1}, mgl64.Vec3{0, 1, 0}))
	op := o.Group.Operations(0)[1]
	shown := Shown{Group: o.Group, Basis: o.Basis, Operation: &op}
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

func TestTimeAndMomentAgree(t *testing.T) {
	o := orbitalsOf(t, "demo:octahedron", "C:sigma")
	for _, op := range o.Group.Operations(0) {
		last := -1.0
		for e := time.Duration(0); e <= Duration(op); e += Duration(op) / 50 {
			now := Moment(op, e)
			if now < last {
				t.Fatalf("%s runs backward at %v", op.Name, e)
			}
			last = now
			if back := Moment(op, Elapsed(op, now)); math.Abs(back-now) > 0.01 {
				t.Errorf("%s: moment %.3f comes back as %.3f", op.Name, now, back)
			}
		}
		if end := Moment(op, Duration(op)); math.Abs(end-1) > 1e-9 {
			t.Errorf("%s ends at %v", op.Name, end)
		}
		if op.Steps() == 2 {
			if got := Moment(op, eachStep+betweenIt/2); got != 0.5 {
				t.Errorf("%s: between the steps the moment is %v", op.Name, got)
			}
		}
	}
}

// A place that is zoomed at, in the measures of study.Camera, stays where it
// is on the picture.
func TestWhatLiesUnderThePointerStaysThereWhenZoomed(t *testing.T) {
	o := orbitalsOf(t, "demo:square-plane", "Cl:sigma")
	best := BestOrbit(o.Group, o.Basis)
	const w, h, x, y = 800, 600, 610.0, 130.0
	c := study.Camera{Orthographic: true}.WithView(best.Rows()).Panned(0.3, -0.2)
	seen := best.Seen(c)
	rows, perPixel := seen.Rows(), seen.PerPixel(w, h)
	p := seen.Target.Add(rows.Row(0).Mul((x - w/2) * perPixel)).Add(rows.Row(1).Mul((h/2 - y) * perPixel))
	for _, factor := range []float64{1.7, 0.4, 30, 0.01} {
		z := best.Seen(c.ZoomedAt(factor, [2]float64{(x - w/2) * perPixel, (h/2 - y) * perPixel}))
		px, py, _, _ := z.Camera(w, h).Project(p, w, h)
		if math.Hypot(px-x, py-y) > 0.01 {
			t.Errorf("zoomed by %v it lies at %.3f, %.3f", factor, px, py)
		}
	}
}

// The scene follows the pointer pixel by pixel when it is moved.
func TestTheSceneFollowsTheHandThatMovesIt(t *testing.T) {
	o := orbitalsOf(t, "demo:square-plane", "Cl:sigma")
	best := BestOrbit(o.Group, o.Basis)
	const w, h = 800, 600
	perPixel := best.PerPixel(w, h)
	moved := best.Seen(study.Camera{}.Panned(50*perPixel, 20*perPixel))
	x, y, _, _ := moved.Camera(w, h).Project(best.Target, w, h)
	if math.Hypot(x-(w/2+50), y-(h/2-20)) > 0.01 {
		t.Errorf("the middle is at %.2f, %.2f", x, y)
	}
}

func TestTheFirstViewHoldsEverything(t *testing.T) {
	for _, c := range [][2]string{{"demo:square-plane", "Cl:sigma"}, {"demo:cage", "C:sigma@1-60"}, {"demo:rod", "N:p"}, {"demo:hexaaqua", "O:sigma"}} {
		o := orbitalsOf(t, c[0], c[1])
		var live Live
		coefficients := make([]float64, len(o.Functions))
		for i := range coefficients {
			coefficients[i] = 1
		}
		op := o.Group.Operations(30)[1]
		f, err := live.Frame(Shown{Group: o.Group, Basis: o.Basis, Coefficients: coefficients, Operation: &op}, BestOrbit(o.Group, o.Basis), 500, 400, 96, false)
		if err != nil {
			t.Fatal(err)
		}
		for i, p := range o.Group.Sites.Positions {
			if x, y, _, ok := f.Camera.Project(p, 500, 400); !ok || x < 10 || y < 10 || x > 490 || y > 390 {
				t.Errorf("%s: atom %d is at %.0f, %.0f", c[0], i+1, x, y)
			}
		}
	}
}

func TestASignChangesThroughGrey(t *testing.T) {
	o := orbitalsOf(t, "demo:square-plane", "Cl:sigma")
	before := []float64{1, 0, 0, 0}
	after := []float64{-1, 0, 0, 0}
	var live Live
	colour := func(fade float64) render.Color {
		f, err := live.Frame(Shown{Group: o.Group, Basis: o.Basis, Before: before, Coefficients: after, Fade: fade}, BestOrbit(o.Group, o.Basis), 50, 40, 96, true)
		if err != nil {
			t.Fatal(err)
		}
		for _, s := range f.Scene.Shapes {
			if s.Material.ID >= firstLobe && s.Material.ID < elementID {
				return s.Material.Color
			}
		}
		t.Fatal("no lobe")
		return render.Color{}
	}
	p := assets.Light()
	if got := colour(0); got != paint(p.Plus) {
		t.Errorf("at the start it is %v", got)
	}
	if got := colour(0.5); got != paint(p.Quiet) {
		t.Errorf("halfway it is %v", got)
	}
	if got := colour(0.999999); got != paint(p.Minus) {
		t.Errorf("at the end it is %v", got)
	}
}

// The travelled function ends exactly where the representation says.
func TestLobesArriveWhereTheRepresentationSays(t *testing.T) {
	o := orbitalsOf(t, "demo:octahedron", "C:pi")
	r, err := o.Basis.Representation()
	if err != nil {
		t.Fatal(err)
	}
	for n, op := range o.Group.Operations(0) {
		at := op.At(1)
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
			ops := o.Group.Operations(0)
			return Shown{Group: o.Group, Basis: o.Basis, Coefficients: orbital.Coefficients,
				Operation: &ops[len(ops)-1], Moment: 0.3}, BestOrbit(o.Group, o.Basis)
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
				shown, best := liveScene(b, c.spec, c.basis)
				var camera study.Camera
				var live Live
				var r render.Renderer
				img := image.NewRGBA(image.Rect(0, 0, 800, 640))
				for b.Loop() {
					camera = camera.Orbited(best.Rows(), 0.02, 0.005)
					orbit := best.Seen(camera)
					f, err := live.Frame(shown, orbit, 800, 640, 96, quick)
					if err != nil {
						b.Fatal(err)
					}
					if err := r.Draw(context.Background(), img, &f.Scene, f.Camera, f.Look, f.Quality, render.Band{}); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}

// The arrow of a turn lies on the viewer's side, whichever way one looks, and
// has the positive sense.
func TestTheSenseOfATurnIsOnTheViewersSide(t *testing.T) {
	axes := []mgl64.Vec3{{0, 0, 1}, {1, 0, 0}, mgl64.Vec3{1, 1, 1}.Normalize()}
	for _, axis := range axes {
		for _, toward := range []mgl64.Vec3{{3, 1, 2}, {-1, 4, 0.5}, {0, 0, 5}, {-2, -2, -2}, {}} {
			u, v := senseAxes(axis, toward)
			if d := u.Cross(v).Sub(axis).Len(); d > 1e-9 {
				t.Errorf("axis %v seen from %v: the sense is off by %g", axis, toward, d)
			}
			if side := toward.Sub(axis.Mul(axis.Dot(toward))); side.Len() > 1e-9 && u.Dot(side.Normalize()) < 1-1e-9 {
				t.Errorf("axis %v seen from %v: the arrow points along %v", axis, toward, u)
			}
		}
	}
}

// The octahedron has 22 elements with names: on a picture of a usual size no two
// of these lie on each other, nor on the name of an atom, and what has no room is
// counted.
func TestNamesOfElementsDoNotLieOnEachOther(t *testing.T) {
	g, err := newWork().Group(context.Background(), study.Study{Structure: "demo:octahedron"})
	if err != nil {
		t.Fatal(err)
	}
	for _, side := range []int{300, 700} {
		live := new(Live)
		form := "%d elements have no name"
		f, err := live.Frame(Shown{Group: g, Look: study.Look{Elements: true, NoAxes: true}, Nameless: form}, BestOrbit(g, nil), side, side, 96, false)
		if err != nil {
			t.Fatal(err)
		}
		perMM := 96 / 25.4
		seen := newSight(f.Camera, screen{width: side, height: side, pixelsPerMM: perMM})
		var boxes []rectangle
		var names []string
		written, said := 0, ""
		for _, s := range f.Scene.Shapes {
			text, ok := s.Geometry.(render.Text)
			if !ok {
				continue
			}
			name := ""
			for _, r := range text.Runs {
				name += r.Text
			}
			if s.Place != nil {
				said = name
				continue
			}
			w, ascent, _ := f.Scene.Fonts.Measure(text.Runs, text.Size)
			w, ascent = w*perMM, ascent*perMM
			at := seen.disc(ball{text.At, 0})
			x, y := at.x+text.OffsetX*perMM-w/2*(1+text.AlignX), at.y-text.OffsetY*perMM-ascent/2*(1-text.AlignY)
			boxes = append(boxes, rectangle{x, x + w, y, y + ascent})
			names = append(names, name)
			if text.Size == elementSize {
				written++
			}
		}
		for i, a := range boxes {
			for k, b := range boxes[:i] {
				if a.overlaps(b) {
					t.Errorf("%d pixels: %s lies on %s", side, names[i], names[k])
				}
			}
		}
		all := len(g.Elements())
		if written+live.nameless != all || side == 700 && live.nameless > 0 {
			t.Errorf("%d pixels: %d of %d elements have names, %d are counted as without", side, written, all, live.nameless)
		}
		if want := fmt.Sprintf(form, live.nameless); live.nameless > 0 && said != want {
			t.Errorf("%d pixels: it says %q, not %q", side, said, want)
		}
	}
}
