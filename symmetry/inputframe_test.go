package symmetry

import (
	"math/rand"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

func labelled(s *Setting) string {
	var out []string
	for _, o := range s.Operations {
		out = append(out, o.Name)
	}
	for _, ir := range s.Irreps {
		out = append(out, ir.Label)
	}
	return strings.Join(out, " ")
}

// inFile is the fit of points in the axes of the input.
func inFile(t *testing.T, points []Point) *Fit {
	t.Helper()
	fit := mustDetect(t, points, 0)
	frame, err := fit.Frame(FrameFile)
	if err != nil {
		t.Fatal(err)
	}
	return fit.In(frame)
}

// A bent molecule in the plane xz of its file is labelled by that plane, one in
// the plane yz as by default; labels of a square stay whatever way it is laid.
func TestInTheFrameOfTheFileLabelsAreThoseOfTheDefaultRuleOrOfTheAxes(t *testing.T) {
	bent := func(x, y, z mgl64.Vec3) []Point {
		p := []Point{at(0, 0, 0, 8), at(0.76, 0, 0.59, 1), at(-0.76, 0, 0.59, 1)}
		m := mgl64.Mat3FromCols(x, y, z)
		for i := range p {
			p[i].Position = m.Mul3x1(p[i].Position)
		}
		return p
	}
	ex, ey, ez := mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 1, 0}, mgl64.Vec3{0, 0, 1}
	for _, c := range []struct {
		what     string
		points   []Point
		along    bool
		function string // a function and the irrep that it belongs to
		irrep    string
	}{
		{"bent in xz", bent(ex, ey, ez), true, "x", "B1"},
		{"bent in yz", bent(ey, ex.Mul(-1), ez), true, "y", "B2"},
		{"bent in xz, upside down", bent(ex, ey.Mul(-1), ez.Mul(-1)), true, "x", "B1"},
		{"bent with C2 on x", bent(ey, ez, ex), false, "", ""},
		{"square on x and y", join([]Point{at(0, 0, 0, 46)}, ring(4, 2.3, 0, 0, 17)), false, "x2-y2", "B1g"},
		{"square between x and y", join([]Point{at(0, 0, 0, 46)}, ring(4, 2.3, 0, 45, 17)), false, "xy", "B1g"},
		{"hexagon on y", ring(6, 1.4, 0, 90, 6), false, "y(3x2-y2)", "B1u"},
		{"hexagon on x", ring(6, 1.4, 0, 0, 6), false, "x(x2-3y2)", "B1u"},
		{"ethene-like, long axis on x", []Point{at(0.66, 0, 0, 6), at(-0.66, 0, 0, 6), at(1.2, 0.9, 0, 1), at(1.2, -0.9, 0, 1), at(-1.2, 0.9, 0, 1), at(-1.2, -0.9, 0, 1)}, true, "x", "B3u"},
	} {
		g := inFile(t, c.points)
		consistent(t, c.what, c.points, g)
		if along := g.Rule.X == XInputLabels; along != c.along {
			t.Errorf("%s: labelled by the axes of the input: %t", c.what, along)
		}
		found := c.function == ""
		for _, ir := range g.Setting.Irreps {
			for _, f := range ir.Functions[0] {
				found = found || ir.Label == c.irrep && f == c.function
			}
		}
		if !found {
			t.Errorf("%s: %s is not %s", c.what, c.function, c.irrep)
		}
	}
}

// Rounded coordinates lie along the axes of their file as far as the tolerance
// tells; the ideal points then do exactly, and the rotation is none.
func TestNoiseDoesNotTurnTheFrameOfTheFile(t *testing.T) {
	rng := rand.New(rand.NewSource(3))
	for name, points := range map[string][]Point{
		"bent":                   {at(0, 0, 0.1, 8), at(0, 0.76, -0.49, 1), at(0, -0.76, -0.49, 1)},
		"octahedron":             {at(0, 0, 0, 24), at(2, 0, 0, 7), at(-2, 0, 0, 7), at(0, 2, 0, 7), at(0, -2, 0, 7), at(0, 0, 2, 7), at(0, 0, -2, 7)},
		"square between x and y": join([]Point{at(0, 0, 0, 46)}, ring(4, 2.3, 0, 45, 17)),
		"pyramid on x":           join([]Point{at(0.4, 0, 0, 7)}, onX(ring(3, 0.95, 0, 0.3, 1))),
	} {
		exact := inFile(t, points)
		var noisy []Point
		for _, p := range points {
			for i := range p.Position {
				p.Position[i] += 0.003 * (2*rng.Float64() - 1)
			}
			noisy = append(noisy, p)
		}
		g := inFile(t, noisy)
		consistent(t, name, noisy, g)
		if !equalTo(g.Rotation, mgl64.Ident3(), 0) || labelled(g.Setting) != labelled(exact.Setting) {
			t.Errorf("%s: rotation %v, %s\nbut without noise %s", name, g.Rotation, labelled(g.Setting), labelled(exact.Setting))
		}
		back, err := g.Frame(FrameDefault)
		if err != nil {
			t.Fatal(err)
		}
		consistent(t, name+" back", noisy, g.In(back))
	}
}

// onX lays points whose axis is z along x.
func onX(points []Point) []Point {
	for i, p := range points {
		points[i].Position = mgl64.Vec3{p.Position[2], p.Position[0], p.Position[1]}
	}
	return points
}
