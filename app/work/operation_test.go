package work

import (
	"context"
	"math"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

func demoWork() *Work { return New(structure.Inputs{Demo: assets.Demos()}) }

func groupOf(t testing.TB, spec string) *Group {
	t.Helper()
	g, err := demoWork().Group(context.Background(), study.Study{Structure: spec})
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func distance(a, b mgl64.Mat3) float64 {
	d := 0.0
	for i := range a {
		d = math.Max(d, math.Abs(a[i]-b[i]))
	}
	return d
}

// angles of φ in degrees: simple ones and others.
var angles = []float64{0, 17.3, 30, 45, 60, 90, 120, 180, 200, 270, 315, 359.9, 360}

var groupsPlayed = []string{"demo:square-plane", "demo:tetrahedron", "demo:cage", "demo:sandwich-staggered", "demo:crown",
	"demo:benzenetriol", "demo:rod", "demo:cyanide", "ideal:ring-7"}

func eachOperation(t *testing.T, visit func(*Group, Operation)) {
	for _, spec := range groupsPlayed {
		g := groupOf(t, spec)
		if !g.Fit.Setting.Infinite() {
			for _, o := range g.Operations(33) {
				visit(g, o)
			}
			continue
		}
		for _, angle := range angles {
			for _, o := range g.Operations(angle) {
				visit(g, o)
			}
		}
	}
	atom := &Group{Fit: groupOf(t, "demo:rod").Fit}
	for _, o := range infiniteOperations("Kh", 50) {
		visit(atom, o)
	}
}

// TestMotionsEndWhereTheOperationCarries holds that a motion begins with
// nothing, ends with the operation's matrix, and jumps nowhere between.
func TestMotionsEndWhereTheOperationCarries(t *testing.T) {
	eachOperation(t, func(g *Group, o Operation) {
		if o.At(0) != mgl64.Ident3() || o.At(1) != o.Matrix || o.At(math.NaN()) != mgl64.Ident3() || o.At(2) != o.Matrix {
			t.Errorf("%s %s: wrong at an end", g.Fit.Setting.Symbol, o.Name)
		}
		const frames = 400
		// A full turn of 2π in half the frames is the fastest there is.
		const fastest = 2.01 * 2 * math.Pi / frames
		for k := range frames {
			if d := distance(o.At(float64(k)/frames), o.At(float64(k+1)/frames)); d > fastest {
				t.Errorf("%s %s: a jump of %g at frame %d", g.Fit.Setting.Symbol, o.Name, d, k)
				break
			}
		}
	})
}

// TestMotionsAreOfTheirKind holds that rotations keep lengths all the way, and
// that axis and plane are what the matrix leaves.
func TestMotionsAreOfTheirKind(t *testing.T) {
	eachOperation(t, func(g *Group, o Operation) {
		name := g.Fit.Setting.Symbol + " " + o.Name
		letter := o.Name[:1]
		axis, plane, centre, steps := letter == "C" || letter == "S", letter == "S" || strings.HasPrefix(o.Name, "σ"), letter == "i", 1
		if letter == "S" {
			steps = 2
		}
		if letter == "E" {
			steps = 0
		}
		if o.HasAxis() != axis || o.HasPlane() != plane || o.HasCentre() != centre || o.Steps() != steps {
			t.Errorf("%s: axis %v, plane %v, centre %v, %d steps", name, o.HasAxis(), o.HasPlane(), o.HasCentre(), o.Steps())
		}
		if m := o.Matrix; distance(m.Mul3(m.Transpose()), mgl64.Ident3()) > 1e-12 || math.Abs(m.Det()) < 0.9 || (m.Det() < 0) != o.Improper {
			t.Errorf("%s: the matrix is not orthogonal or of the other handedness", name)
		}
		for _, at := range []float64{0.1, 0.25, 0.4} {
			m := o.At(at)
			if axis && distance(m.Mul3(m.Transpose()), mgl64.Ident3()) > 1e-12 {
				t.Errorf("%s: it does not turn at %g", name, at)
			}
			if axis && m.Mul3x1(o.Axis).Sub(o.Axis).Len() > 1e-12 {
				t.Errorf("%s: the axis moves at %g", name, at)
			}
		}
		if plane || axis {
			along := o.Matrix.Mul3x1(o.Axis).Dot(o.Axis)
			if want := map[bool]float64{true: -1, false: 1}[plane]; math.Abs(along-want) > 1e-12 {
				t.Errorf("%s: the axis goes to %g times itself", name, along)
			}
		}
		if half := o.At(0.5); plane && !axis && math.Abs(half.Det()) > 1e-12 {
			t.Errorf("%s: it does not pass through the plane", name)
		}
	})
}

// TestTurnsAreAsTheirNamesSay: C4^3 turns by three quarters, counterclockwise.
func TestTurnsAreAsTheirNamesSay(t *testing.T) {
	g := groupOf(t, "demo:square-plane")
	o, err := g.Operation("C4^3(z)", 0)
	if err != nil || math.Abs(o.Angle-1.5*math.Pi) > 1e-15 {
		t.Fatalf("%v: %g", err, o.Angle)
	}
	third := o.At(1.0 / 3).Mul3x1(mgl64.Vec3{1, 0, 0})
	if third.Sub(mgl64.Vec3{0, 1, 0}).Len() > 1e-12 {
		t.Errorf("after a third it is at %v", third)
	}
}

func TestOperationsOfLinearMoleculesFollowTheirAngle(t *testing.T) {
	point := mgl64.Vec3{0.3, -0.4, 0.7}
	for _, angle := range angles {
		phi := mgl64.DegToRad(angle)
		toward := mgl64.Vec3{math.Cos(phi), math.Sin(phi), 0}
		find := func(spec, name string) mgl64.Mat3 {
			o, err := groupOf(t, spec).Operation(name, angle)
			if err != nil {
				t.Fatal(err)
			}
			return o.Matrix
		}
		c := find("demo:cyanide", "C(φ)")
		if got := c.Mul3x1(mgl64.Vec3{1, 0, 0}); got.Sub(toward).Len() > 1e-12 {
			t.Errorf("C(%g) carries x to %v", angle, got)
		}
		v := find("demo:cyanide", "σv(φ)")
		if got := v.Mul3x1(toward); got.Sub(toward).Len() > 1e-12 || v.Mul3x1(mgl64.Vec3{0, 0, 1}) != (mgl64.Vec3{0, 0, 1}) {
			t.Errorf("σv(%g) does not hold its own direction", angle)
		}
		if two := find("demo:rod", "C2(φ)"); two.Mul3x1(toward).Sub(toward).Len() > 1e-12 || math.Abs(two.Trace()+1) > 1e-12 {
			t.Errorf("C2(%g) has another axis", angle)
		}
		s, h, i := find("demo:rod", "S(φ)"), find("demo:rod", "σh"), find("demo:rod", "i")
		if got := h.Mul3x1(c.Mul3x1(point)); s.Mul3x1(point).Sub(got).Len() > 1e-12 {
			t.Errorf("S(%g) is not the turn with the reflection after it", angle)
		}
		if angle == 180 && s != i {
			t.Error("S(180°) is not i")
		}
	}
}

func TestSimpleAnglesAreExact(t *testing.T) {
	for degrees, want := range map[float64][2]float64{
		0: {0, 1}, 30: {0.5, math.Sqrt(3) / 2}, 60: {math.Sqrt(3) / 2, 0.5}, 90: {1, 0}, 120: {math.Sqrt(3) / 2, -0.5},
		180: {0, -1}, 210: {-0.5, -math.Sqrt(3) / 2}, 270: {-1, 0}, 300: {-math.Sqrt(3) / 2, 0.5}, 360: {0, 1}, -90: {-1, 0},
		45: {math.Sqrt2 / 2, math.Sqrt2 / 2}, 225: {-math.Sqrt2 / 2, -math.Sqrt2 / 2},
	} {
		sin, cos := sincos(degrees)
		if math.Abs(sin-want[0]) > 1e-16 || math.Abs(cos-want[1]) > 1e-16 || math.Signbit(sin) && sin == 0 || math.Signbit(cos) && cos == 0 {
			t.Errorf("%g°: %v %v", degrees, sin, cos)
		}
	}
}

func TestOperationsAreFoundByTheirNames(t *testing.T) {
	for _, spec := range groupsPlayed {
		g := groupOf(t, spec)
		for i, o := range g.Operations(25) {
			if found, err := g.Operation(o.Name, 25); err != nil || found != o || !g.Fit.Setting.Infinite() && found.Index != i {
				t.Errorf("%s: %v", o.Name, err)
			}
		}
	}
	g := groupOf(t, "demo:square-plane")
	for spelling, want := range map[string]string{"C₂′(x)": "C2'(x)", "C2’(x)": "C2'(x)", "C₄(z)": "C4(z)", "σᵥ(xz)": "σv(xz)"} {
		if o, err := g.Operation(spelling, 0); err != nil || o.Name != want {
			t.Errorf("%q: %v %v", spelling, o.Name, err)
		}
	}
	for _, wrong := range []string{"", "C5(z)", "C(φ)", "c4(z)"} {
		if _, err := g.Operation(wrong, 0); err == nil || !strings.Contains(err.Error(), "D4h has no operation") || !strings.Contains(err.Error(), "C4^3(z)") {
			t.Errorf("%q: %v", wrong, err)
		}
	}
	if _, err := groupOf(t, "demo:cage").Operation("C4(z)", 0); err == nil || len(err.Error()) > 100 {
		t.Errorf("%v", err)
	}
}
