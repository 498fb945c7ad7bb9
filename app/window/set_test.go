//go:build cgo && !nowindow

package window

import (
	"image"
	"math"
	"testing"

	"fyne.io/fyne/v2"

	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

// euChosen opens the square plane and chooses the first partner of Eu.
func euChosen(t *testing.T) *bench {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.chooseOrbital("Eu", 1, 1)
	b.until("the orbital", func() bool { return b.state.Orbital != nil && b.state.Match != nil })
	return b
}

// TestATurnByHandSnapsAndIsOneStep drags the slider, whose marks stand every 45°
// on a square: near one it takes it, and the lobes are those of x + y.
func TestATurnByHandSnapsAndIsOneStep(t *testing.T) {
	b := euChosen(t)
	b.follows.Resize(fyne.NewSize(rightWidth, 700))
	b.follows.reveal(chosenSet)
	s, ok := b.follows.spotNamed("turn")
	if !ok {
		t.Fatal("there is no slider")
	}
	at := func(angle float64) fyne.Position {
		const reach = 6
		return fyne.NewPos(float32(s.x+reach+(s.width-2*reach)*angle/360), float32(s.y+s.height/2))
	}
	for _, angle := range []float64{10, 20, 46.5} {
		b.follows.Dragged(&fyne.DragEvent{PointEvent: fyne.PointEvent{Position: at(angle)}, Dragged: fyne.NewDelta(3, 0)})
		b.drain()
	}
	b.follows.DragEnd()
	if got := b.now().Turn; len(got) != 1 || got[0] != (study.PlaneRotation{From: 1, To: 2, Angle: 45}) {
		t.Fatalf("the turn is %v", got)
	}
	b.until("the turned set", func() bool { c := b.coefficients(); return math.Abs(c[0]-c[1]) < 1e-9 })
	for i, want := range []float64{0.5, 0.5, -0.5, -0.5} {
		if got := b.coefficients()[i]; math.Abs(got-want) > 1e-12 {
			t.Errorf("coefficient %d is %g", i+1, got)
		}
	}
	if got := likeOnly(b.state.Orbitals.Irreps[b.orbital().Irrep].Functions, 0).String(); got != "x+y" {
		t.Errorf("partner 1 is like %s", got)
	}
	b.undo()
	if got := b.now().Turn; len(got) != 0 {
		t.Errorf("one step back leaves %v", got)
	}
}

func TestMarksAreReachedByKeysAndAnglesAreTyped(t *testing.T) {
	b := euChosen(t)
	b.typed(']')
	b.typed(']')
	b.typed('[')
	b.typed(']')
	if got := turnAngle(b.now().Turn, [2]int{1, 2}); got != 90 {
		t.Errorf("%g°", got)
	}
	b.setTurn(33.33, false)
	b.commit()
	if got := turnAngle(b.now().Turn, [2]int{1, 2}); got != 33.3 {
		t.Errorf("%g°", got)
	}
	b.chooseOrbital("A1g", 1, 1)
	if len(b.now().Turn) != 0 {
		t.Error("the turn of another irrep stays")
	}
}

// TestPartnersStandSideBySide: one camera, one operation, and the matrix below.
func TestPartnersStandSideBySide(t *testing.T) {
	b := euChosen(t)
	b.chooseOperation("C4(z)")
	b.toggleSplit()
	if n := len(b.view.beside); n != 1 {
		t.Fatalf("%d further pictures", n)
	}
	one, two := b.view.shown, b.view.beside[0]
	if one.Operation == nil || two.Operation == nil || one.Operation.Name != two.Operation.Name || one.Moment != two.Moment {
		t.Error("the operations differ")
	}
	if !b.beside.Visible() {
		t.Error("the matrix is not shown")
	}
	if m := b.matrix(b.orbital(), *one.Operation); m[0][0] != 0 || m[1][0] != 1 || m[0][1] != -1 {
		t.Errorf("the matrix of C4(z) is %v", m)
	}
	if c, d := one.Coefficients, two.Coefficients; dotOf(c, d) != 0 {
		t.Error("both pictures show the same")
	}
	b.toggleSplit()
	b.holdOrbital()
	b.chooseOrbital("A1g", 1, 1)
	if n := len(b.view.beside); n != 1 {
		t.Errorf("the orbital that is held is not beside: %d", n)
	}
	b.holdOrbital()
	if len(b.view.beside) > 0 {
		t.Error("the orbital that was held stays")
	}
}

func dotOf(a, b []float64) float64 {
	sum := 0.0
	for i := range a {
		sum += a[i] * b[i]
	}
	return sum
}

func TestNodalPlanesAreShownOnDemand(t *testing.T) {
	b := euChosen(t)
	b.toggleNodes()
	if n := b.view.shown.Nodes; len(n) != 1 || n[0].Name != "σv(yz)" {
		t.Errorf("%v", n)
	}
	b.toggleNodes()
	if b.view.shown.Nodes != nil {
		t.Error("they stay")
	}
}

func TestTheCentralAtomIsKnownAndChosen(t *testing.T) {
	b := euChosen(t)
	m := b.state.Match
	if m.Central != 0 || m.PairOf(b.orbital().Irrep, 0) == nil || len(m.PairOf(b.orbital().Irrep, 0).Central) != 3 {
		t.Errorf("%+v", m)
	}
	b.chooseCentral(2)
	b.until("the reason", func() bool { return b.state.Match != nil && b.state.Match.None != nil })
	b.undo()
	b.until("the platinum", func() bool { return b.state.Match != nil && b.state.Match.None == nil })
}

func TestPicturesShareTheirImage(t *testing.T) {
	for n := 1; n <= 6; n++ {
		area := 0
		cells := cellsOf(n, 750, 600)
		for i, c := range cells {
			area += c.Dx() * c.Dy()
			for _, d := range cells[:i] {
				if c.Overlaps(d) {
					t.Errorf("%d: %v and %v overlap", n, c, d)
				}
			}
		}
		if area < 750*600*n/(n+2) {
			t.Errorf("%d pictures leave most of the image empty: %v", n, cells)
		}
	}
}

// BenchmarkFrames is what a quick frame costs at 750×600 while an operation plays:
// of one partner, and of two side by side.
func BenchmarkFrames(b *testing.B) {
	w := work.New(structure.Inputs{Demo: assets.Demos()})
	s := study.Study{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Projection: study.Projection{Irrep: "Eu"}}
	o, err := w.Orbitals(b.Context(), s)
	if err != nil {
		b.Fatal(err)
	}
	op, err := o.Group.Operation("C4(z)", 0)
	if err != nil {
		b.Fatal(err)
	}
	light := assets.Light()
	shown := picture.Shown{Group: o.Group, Basis: o.Basis, Operation: &op, Palette: &light}
	r := request{shown: shown, sight: picture.BestOrbit(o.Group, o.Basis), width: 750, height: 600, dpi: 96}
	first, err := o.Orbital(s.Projection)
	if err != nil {
		b.Fatal(err)
	}
	partners := o.Partners(first.Irrep, 0)
	r.shown.Coefficients = partners[0].Coefficients
	run := func(b *testing.B) {
		var w drawer
		d := &drawn{image: image.NewRGBA(image.Rect(0, 0, r.width, r.height))}
		for n := 0; b.Loop(); n++ {
			moment := float64(n%60) / 60
			r.shown.Moment = moment
			for i := range r.beside {
				r.beside[i].Moment = moment
			}
			if err := w.draw(b.Context(), d, r, true); err != nil {
				b.Fatal(err)
			}
		}
	}
	b.Run("one", run)
	second := r.shown
	second.Coefficients = partners[1].Coefficients
	r.beside = []picture.Shown{second}
	b.Run("two", run)
}

// TestAChosenOrbitalIsProjectedFromAFunctionThatHasAPart chooses partner y of
// Eu: σ1, which was watched, lies on x, and the sum would be nothing.
func TestAChosenOrbitalIsProjectedFromAFunctionThatHasAPart(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	for _, c := range []struct{ partner, want int }{{1, 1}, {2, 2}, {2, 2}, {1, 1}} {
		b.chooseOrbital("Eu", 1, c.partner)
		if got := b.now().Projection.Function; got != c.want {
			t.Errorf("partner %d is projected from function %d, want %d", c.partner, got, c.want)
		}
	}
	b.chooseFunction(4)
	b.chooseOrbital("Eu", 1, 2)
	if got := b.now().Projection.Function; got != 4 {
		t.Errorf("function 4, which has a part, gives way to %d", got)
	}
}

// TestNodalPlanesGoWithTheLobes plays C4 on partner y: at its end the plane of
// the nodes, xz at first, is yz.
func TestNodalPlanesGoWithTheLobes(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.chooseOrbital("Eu", 1, 2)
	b.toggleNodes()
	s := b.now()
	s.Operation, s.Moment = "C4(z)", 1
	b.do(study.StepPlay, s)
	b.until("the planes", func() bool { return len(b.view.shown.Nodes) > 0 })
	end := b.view.beside[len(b.view.beside)-1] // without motion: start, middle, end
	var live picture.Live
	f, err := live.Frame(end, b.view.sight, 200, 200, 96, true)
	if err != nil {
		t.Fatal(err)
	}
	planes := 0
	for _, shape := range f.Scene.Shapes {
		if d, ok := shape.Geometry.(render.Disc); ok && shape.Transform != nil {
			planes++
			if n := shape.Transform.Linear.Mul3x1(d.Normal); math.Abs(n[0]) < 0.99 {
				t.Errorf("the plane that lay in xz has the normal %v", n)
			}
		}
	}
	if planes != 1 {
		t.Errorf("%d planes go with the lobes", planes)
	}
}
