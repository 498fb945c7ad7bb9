package symmetry

import (
	"math"
	"math/rand"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

func at(x, y, z float64, kind int) Point { return Point{mgl64.Vec3{x, y, z}, kind} }

// ring is n points of a kind in a plane at height z, the first at an azimuth
// in degrees.
func ring(n int, radius, z, azimuth float64, kind int) []Point {
	var out []Point
	for k := range n {
		a := azimuth*math.Pi/180 + 2*math.Pi*float64(k)/float64(n)
		out = append(out, at(radius*math.Cos(a), radius*math.Sin(a), z, kind))
	}
	return out
}

func join(lists ...[]Point) []Point {
	var out []Point
	for _, l := range lists {
		out = append(out, l...)
	}
	return out
}

// What must lie where, rule by rule; the sources stand in frame.go. Each
// structure is given turned and shuffled.
func TestFramesFollowTheRules(t *testing.T) {
	near := func(a, b float64) bool { return math.Abs(a-b) < 1e-6 }
	type place = func(v mgl64.Vec3, kind int) bool
	onX := func(kind int) place {
		return func(v mgl64.Vec3, k int) bool { return k == kind && near(v[1], 0) && near(v[2], 0) && v[0] > 0.1 }
	}
	onZ := func(kind int) place {
		return func(v mgl64.Vec3, k int) bool { return k == kind && near(v[0], 0) && near(v[1], 0) && v[2] > 0.1 }
	}
	inXZ := func(kind int) place {
		return func(v mgl64.Vec3, k int) bool { return k == kind && near(v[1], 0) && v[0] > 0.1 }
	}
	c := []Point{at(0, 0, 0, 26)}
	for _, test := range []struct {
		what, symbol string
		points       []Point
		somewhere    []place // each is where some point lies
		everywhere   place   // where all points lie
		ties         int
	}{
		{"square: C2' through the ligands", "D4h", join(c, ring(4, 2.3, 0, 13, 17)), []place{onX(17)}, nil, 0},
		{"trigonal: the deciding atom at 0°, not 60°", "D3h", join(c, ring(3, 2.3, 0, 40, 17)), []place{onX(17)}, nil, 0},
		{"two unlike triangles: the heavier on +x", "D3h", join(c, ring(3, 2.3, 0, 40, 9), ring(3, 2.5, 0, 100, 17)), []place{onX(17)}, nil, 0},
		{"prism: vertical planes through the ligands, on +x", "D3h", join(c, ring(3, 1.8, 1.3, 11, 16), ring(3, 1.8, -1.3, 11, 16)), []place{inXZ(16)}, nil, 0},
		{"eclipsed dimer with eight ligands", "D4h", join([]Point{at(0, 0, 1.1, 75), at(0, 0, -1.1, 75)}, ring(4, 2.2, 1.6, 20, 17), ring(4, 2.2, -1.6, 20, 17)),
			[]place{inXZ(17), onZ(75)}, nil, 0},
		{"staggered rings: C2 along x", "D5d", join(c, ring(5, 1.2, 1.66, 18, 6), ring(5, 1.2, -1.66, 54, 6)), nil, nil, 0},
		{"planar C2v: x square to the plane", "C2v", join([]Point{at(0, 0, 0, 8)}, []Point{at(0.76, 0.59, 0, 1), at(-0.76, 0.59, 0, 1)}),
			[]place{func(v mgl64.Vec3, k int) bool { return k == 1 && near(v[2], 0.59) && near(v[1], 0.76) }},
			func(v mgl64.Vec3, _ int) bool { return near(v[0], 0) }, 0},
		{"planar D2h: x square to the plane, z through most atoms", "D2h",
			[]Point{at(0.67, 0, 0, 6), at(-0.67, 0, 0, 6), at(1.24, 0.93, 0, 1), at(1.24, -0.93, 0, 1), at(-1.24, 0.93, 0, 1), at(-1.24, -0.93, 0, 1)},
			[]place{onZ(6)}, func(v mgl64.Vec3, _ int) bool { return near(v[0], 0) }, 0},
		{"pyramid: σv(xz) through the ligands, apex up", "C4v", join(c, ring(4, 2.1, -0.3, 25, 9), []Point{at(0, 0, 1.9, 9)}), []place{inXZ(9), onZ(9)}, nil, 0},
		{"tetrahedron: an atom on (1,1,1)", "Td", []Point{at(0, 0, 0, 30), at(1, 1, 1, 17), at(1, -1, -1, 17), at(-1, 1, -1, 17), at(-1, -1, 1, 17)},
			[]place{func(v mgl64.Vec3, k int) bool { return k == 17 && near(v[0], 1) && near(v[1], 1) && near(v[2], 1) }}, nil, 0},
		{"octahedron: ligands on the axes", "Oh", join(c, ring(4, 2, 0, 0, 9), []Point{at(0, 0, 2, 9), at(0, 0, -2, 9)}), []place{onX(9), onZ(9)}, nil, 0},
		{"stretched octahedron: z along the long axis", "D4h", join(c, ring(4, 2, 0, 0, 9), []Point{at(0, 0, 2.4, 9), at(0, 0, -2.4, 9)}),
			[]place{onX(9), func(v mgl64.Vec3, k int) bool { return k == 9 && near(v[2], 2.4) }}, nil, 0},
		{"linear: +z to the heavier side", "C∞v", []Point{at(0, 0, 0, 6), at(1.16, 0, 0, 8), at(-1.56, 0, 0, 16)}, []place{onZ(16)}, nil, 0},
	} {
		rng := rand.New(rand.NewSource(2))
		for trial := range 5 {
			points, _ := shuffled(test.points, 0.004*float64(trial/4), rng)
			fit := mustDetect(t, points, 0)
			if fit.Setting.Symbol != test.symbol || len(fit.Ties) != test.ties {
				t.Errorf("%s: %s, want %s; ties %v", test.what, fit.Setting.Symbol, test.symbol, fit.Ties)
				continue
			}
			consistent(t, test.what, points, fit)
			if trial == 4 {
				continue // with noise the places are not the round ones
			}
			for i, p := range test.somewhere {
				found := false
				for k, v := range fit.Ideal {
					found = found || p(v, points[k].Kind)
				}
				if !found {
					t.Errorf("%s: nothing at place %d: %.3f", test.what, i+1, fit.Ideal)
				}
			}
			for _, v := range fit.Ideal {
				if test.everywhere != nil && !test.everywhere(v, 0) {
					t.Errorf("%s: %v is not where all should be", test.what, v)
				}
			}
		}
	}
}

// Equivalent axes are no choice: the point with the lowest number decides.
func TestLowestNumberDecidesBetweenEquivalentAxes(t *testing.T) {
	square := join([]Point{at(0, 0, 0, 46)}, ring(4, 2.3, 0, 0, 17))
	for first := 1; first <= 4; first++ {
		points := append([]Point(nil), square...)
		points[1], points[first] = points[first], points[1]
		fit := mustDetect(t, points, 0)
		if v := fit.Ideal[1]; math.Abs(v[0]-2.3) > 1e-9 || len(fit.Ties) != 0 {
			t.Errorf("the first ligand lies at %.3f, ties %v", v, fit.Ties)
		}
	}
	octahedron := join([]Point{at(0, 0, 0, 27)}, ring(4, 2, 0, 0, 7), []Point{at(0, 0, 2, 7), at(0, 0, -2, 7)})
	fit := mustDetect(t, octahedron, 0)
	if v := fit.Ideal[1]; math.Abs(v[2]-2) > 1e-9 {
		t.Errorf("the first ligand of the octahedron lies at %.3f", v)
	}
}

// fac-MA3B3: xz holds the first of the atoms that decide the sense of x.
func TestLowestNumberOfTheDecidingAtomsLiesInXZ(t *testing.T) {
	points := join([]Point{at(0, 0, 0, 27)},
		[]Point{at(2, 0, 0, 7), at(0, 2, 0, 7), at(0, 0, 2, 7)}, []Point{at(-2.3, 0, 0, 17), at(0, -2.3, 0, 17), at(0, 0, -2.3, 17)})
	fit := mustDetect(t, points, 0)
	if v := fit.Ideal[4]; fit.Setting.Symbol != "C3v" || math.Abs(v[1]) > 1e-9 || v[0] <= 0 {
		t.Errorf("%s with the first heavy ligand at %.3f", fit.Setting.Symbol, v)
	}
}

// Naphthalene: z is the short axis, since two atoms lie on it and none on the
// long one (the rule's own consequence, noted in the references).
func TestNaphthaleneHasZAlongItsShortAxis(t *testing.T) {
	points := []Point{at(0.70, 0, 0, 6), at(-0.70, 0, 0, 6)}
	for _, sx := range []float64{1, -1} {
		for _, sy := range []float64{1, -1} {
			points = append(points, at(sx*1.40, sy*1.24, 0, 6), at(sx*0.70, sy*2.43, 0, 6))
		}
	}
	fit := mustDetect(t, points, 0)
	if fit.Setting.Symbol != "D2h" || math.Abs(math.Abs(fit.Ideal[0][2])-0.70) > 1e-9 {
		t.Errorf("%s with the middle atom at %.3f", fit.Setting.Symbol, fit.Ideal[0])
	}
}
