package study

import (
	"math"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"pgregory.net/rapid"
)

func near(a, b mgl64.Mat3) bool {
	d := 0.0
	for i := range a {
		d = math.Max(d, math.Abs(a[i]-b[i]))
	}
	return d < 1e-7
}

func orthogonal(m mgl64.Mat3) bool {
	return near(m.Mul3(m.Transpose()), mgl64.Ident3()) && math.Abs(m.Det()-1) < 1e-7
}

func anyView(t *rapid.T) mgl64.Mat3 {
	angle := rapid.Float64Range(-4, 4)
	return mgl64.Rotate3DZ(angle.Draw(t, "a")).Mul3(mgl64.Rotate3DX(angle.Draw(t, "b"))).Mul3(mgl64.Rotate3DZ(angle.Draw(t, "c")))
}

func TestAViewComesBackFromItsRotation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		view := anyView(t)
		c := Camera{Set: true, Azimuth: 5}.WithView(view)
		got, chosen := c.View()
		if !chosen || !near(got, view) || c.Set {
			t.Fatalf("%v\n%v", view, got)
		}
		if again := c.Orbited(got, 0, 0); again != c {
			t.Fatalf("turned by nothing it differs: %v, %v", c.Rotation, again.Rotation)
		}
		if err := (Study{Camera: c}).Check(); err != nil {
			t.Fatal(err)
		}
	})
}

// TestOneRotationHasOneFile: q and −q are the same rotation.
func TestOneRotationHasOneFile(t *testing.T) {
	for _, axis := range []mgl64.Vec3{{1, 0, 0}, {0, 1, 0}, {0, 0, 1}, {1, 1, 0}} {
		for _, angle := range []float64{0, 0.5, math.Pi / 2, math.Pi, 3} {
			a := Camera{}.WithView(mgl64.HomogRotate3D(angle, axis.Normalize()).Mat3())
			b := Camera{}.WithView(mgl64.HomogRotate3D(2*math.Pi-angle, axis.Normalize().Mul(-1)).Mat3())
			if a.Rotation != b.Rotation {
				t.Errorf("%v about %v: %v, %v", angle, axis, a.Rotation, b.Rotation)
			}
		}
	}
}

func TestAnglesTypedAreTheViewOfMaps(t *testing.T) {
	rows, chosen := Camera{Set: true, Azimuth: 90, Elevation: 0}.View()
	if want := mgl64.Mat3FromRows(mgl64.Vec3{-1, 0, 0}, mgl64.Vec3{0, 0, 1}, mgl64.Vec3{0, 1, 0}); !chosen || !near(rows, want) {
		t.Errorf("from +y: %v", rows)
	}
	rows, _ = Camera{Set: true, Azimuth: 0, Elevation: 90}.View()
	if want := mgl64.Mat3FromRows(mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 1, 0}, mgl64.Vec3{0, 0, 1}); !near(rows, want) {
		t.Errorf("from above: %v", rows)
	}
	if _, chosen := (Camera{Zoom: 2}).View(); chosen {
		t.Error("a zoom alone chooses no view")
	}
}

func TestDraggingMovesTheFrontWithTheHand(t *testing.T) {
	from := mgl64.Ident3() // the frame's z points to the eye
	for _, c := range []struct{ right, up float64 }{{0.1, 0}, {0, 0.1}, {-0.2, 0}, {0.3, -0.2}} {
		rows, _ := Camera{}.Orbited(from, c.right, c.up).View()
		front := rows.Mul3x1(mgl64.Vec3{0, 0, 1})
		if front[0]*c.right < 0 || front[1]*c.up < 0 || math.Hypot(front[0], front[1]) < 0.09 {
			t.Errorf("%+v: the front goes to %v", c, front)
		}
	}
}

// TestNoViewIsAPlaceToGetStuck: from every view, the poles included, each drag
// moves the front by its angle.
func TestNoViewIsAPlaceToGetStuck(t *testing.T) {
	poles := []mgl64.Mat3{mgl64.Ident3(), mgl64.Rotate3DX(math.Pi), mgl64.Rotate3DX(math.Pi / 2)}
	rapid.Check(t, func(t *rapid.T) {
		from := rapid.SampledFrom(append(poles, anyView(t))).Draw(t, "from")
		direction := rapid.Float64Range(0, 2*math.Pi).Draw(t, "direction")
		const angle = 0.2
		rows, _ := Camera{}.Orbited(from, angle*math.Cos(direction), angle*math.Sin(direction)).View()
		front := rows.Mul3(from.Transpose()).Mul3x1(mgl64.Vec3{0, 0, 1})
		if moved := math.Acos(min(1, front[2])); math.Abs(moved-angle) > 1e-6 || !orthogonal(rows) {
			t.Fatalf("the front moves by %g", moved)
		}
	})
}

func TestTenThousandDragsLeaveARotation(t *testing.T) {
	c := Camera{}.WithView(mgl64.Ident3())
	for i := range 10000 {
		from, _ := c.View()
		c = c.Orbited(from, 0.01*math.Sin(float64(i)), 0.01*math.Cos(float64(3*i)))
	}
	if rows, _ := c.View(); !orthogonal(rows) {
		t.Error("the view is no rotation any more")
	}
	if err := (Study{Camera: c}).Check(); err != nil {
		t.Error(err)
	}
}

func TestLookingAlongAnAxis(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(-1, 1)
		axis := mgl64.Vec3{x.Draw(t, "x"), x.Draw(t, "y"), x.Draw(t, "z")}
		if axis.Len() < 1e-3 {
			return
		}
		up := rapid.SampledFrom([]mgl64.Vec3{{0, 0, 1}, {0, 1, 0}, {}, axis}).Draw(t, "up")
		rows, _ := Camera{}.Along(axis, up).View()
		if !orthogonal(rows) || rows.Mul3x1(axis.Normalize()).Sub(mgl64.Vec3{0, 0, 1}).Len() > 1e-6 {
			t.Fatalf("%v: %v", axis, rows)
		}
	})
	if c := (Camera{}).Along(mgl64.Vec3{}, mgl64.Vec3{0, 0, 1}); c != (Camera{}) {
		t.Error("no axis is looked along")
	}
}

// TestZoomKeepsWhatIsUnderThePointer: a point of the scene that is seen at p
// times the zoom stays there.
func TestZoomKeepsWhatIsUnderThePointer(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(-5, 5)
		c := Camera{Zoom: rapid.Float64Range(0.1, 10).Draw(t, "zoom"), Pan: [2]float64{x.Draw(t, "px"), x.Draw(t, "py")}}
		at := [2]float64{x.Draw(t, "x"), x.Draw(t, "y")}
		after := c.ZoomedAt(rapid.Float64Range(0.2, 5).Draw(t, "factor"), at)
		for i := range at {
			point := at[i] - c.Pan[i] // of the scene
			if seen := (point + after.Pan[i]) * after.TheZoom(); math.Abs(seen-at[i]*c.TheZoom()) > 1e-4 {
				t.Fatalf("%+v %v: %+v", c, at, after)
			}
		}
	})
}

func TestZoomAndPanHaveLimits(t *testing.T) {
	c := Camera{}
	for range 1000 {
		c = c.ZoomedAt(1.5, [2]float64{1, 1}).Panned(1e5, -1e5)
	}
	if err := (Study{Camera: c}).Check(); err != nil || c.Zoom != MaxZoom {
		t.Errorf("%v: %+v", err, c)
	}
	for range 2000 {
		c = c.ZoomedAt(0.5, [2]float64{-1e5, 1})
	}
	if err := (Study{Camera: c}).Check(); err != nil || c.Zoom != MinZoom {
		t.Errorf("%v: %+v", err, c)
	}
	if c = c.ZoomedAt(math.NaN(), [2]float64{}); c.Zoom != MinZoom {
		t.Error("no number is a zoom")
	}
	if c = c.Fitted(); c.TheZoom() != 1 || c.Pan != [2]float64{} {
		t.Errorf("%+v", c)
	}
}
