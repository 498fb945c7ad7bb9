package symmetry

import (
	"fmt"
	"math"
	"math/rand"
	"sort"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// atomicNumbers of the elements that occur in the published structures.
var atomicNumbers = map[string]int{
	"H": 1, "B": 5, "C": 6, "N": 7, "O": 8, "F": 9, "Si": 14, "P": 15, "S": 16, "Cl": 17, "Cr": 24, "Mn": 25, "Fe": 26,
	"Ni": 28, "Br": 35, "Mo": 42, "In": 49, "I": 53, "Xe": 54, "Ta": 73, "Re": 75, "Pt": 78, "U": 92,
}

type publishedStructure struct {
	Name, PointGroup string
	Atoms            []struct {
		Element  string
		Position mgl64.Vec3
	}
}

func publishedStructures(t testing.TB) []publishedStructure {
	var file struct{ Molecules []publishedStructure }
	load(t, &file, "structures", "structures.json")
	if len(file.Molecules) < 40 {
		t.Fatalf("only %d structures", len(file.Molecules))
	}
	return file.Molecules
}

func (m publishedStructure) points(t testing.TB) []Point {
	out := make([]Point, len(m.Atoms))
	for i, a := range m.Atoms {
		if atomicNumbers[a.Element] == 0 {
			t.Fatalf("%s: no number for %s", m.Name, a.Element)
		}
		out[i] = Point{a.Position, atomicNumbers[a.Element]}
	}
	return out
}

// links joins what lies within 1.3 Å of contact of rough spheres; the tests
// need only that they are the same in every orientation.
func links(points []Point) []Link {
	var out []Link
	for i, p := range points {
		for j := range points[:i] {
			if d := p.Position.Sub(points[j].Position).Len(); d < 1.6 || d < 2.5 && (p.Kind > 20 || points[j].Kind > 20) {
				out = append(out, Link{j, i})
			}
		}
	}
	return out
}

func randomRotation(rng *rand.Rand) mgl64.Mat3 {
	q := mgl64.Quat{W: rng.NormFloat64(), V: mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}}
	return q.Normalize().Mat4().Mat3()
}

// shuffled returns the points turned, moved and in another order, with noise
// of at most the given length, and where each has come from.
func shuffled(points []Point, noise float64, rng *rand.Rand) ([]Point, []int) {
	turn, shift := randomRotation(rng), mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}
	from := rng.Perm(len(points))
	out := make([]Point, len(points))
	for i, j := range from {
		step := mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.Normalize().Mul(noise * rng.Float64())
		out[i] = Point{turn.Mul3x1(points[j].Position).Add(shift).Add(step), points[j].Kind}
	}
	return out, from
}

func mustDetect(t testing.TB, points []Point, tolerance float64) *Fit {
	t.Helper()
	fit, err := Detect(points, links(points), Options{Tolerance: tolerance})
	if err != nil {
		t.Fatal(err)
	}
	return fit
}

// consistent checks what must hold for every Fit.
func consistent(t *testing.T, name string, points []Point, fit *Fit) {
	t.Helper()
	if d := fit.Rotation.Det(); math.Abs(d-1) > 1e-12 || !equalTo(fit.Rotation.Mul3(fit.Rotation.Transpose()), mgl64.Ident3(), 1e-12) {
		t.Errorf("%s: the frame is no rotation", name)
	}
	farthest := 0.0
	for k, p := range points {
		d := fit.Rotation.Mul3x1(p.Position.Sub(fit.Origin)).Sub(fit.Ideal[k]).Len()
		farthest = math.Max(farthest, d)
	}
	if math.Abs(farthest-fit.Deviation) > 1e-9 || fit.Deviation > fit.Tolerance {
		t.Errorf("%s: deviation %g, measured %g, tolerance %g", name, fit.Deviation, farthest, fit.Tolerance)
	}
	worst := fit.Rotation.Mul3x1(points[fit.Worst].Position.Sub(fit.Origin)).Sub(fit.Ideal[fit.Worst]).Len()
	if math.Abs(worst-farthest) > 1e-9 {
		t.Errorf("%s: point %d is off by %g, the worst by %g", name, fit.Worst+1, worst, farthest)
	}
	for r, o := range fit.Setting.Operations {
		seen := make([]bool, len(points))
		for k, j := range fit.Permutations[r] {
			if d := o.Matrix.Mul3x1(fit.Ideal[k]).Sub(fit.Ideal[j]).Len(); d > 1e-10 || seen[j] || points[k].Kind != points[j].Kind {
				t.Fatalf("%s: %s carries point %d to %d, off by %g", name, o.Name, k+1, j+1, d)
			}
			seen[j] = true
		}
	}
}

// coordinateSet lists the ideal points without their order.
func coordinateSet(points []Point, fit *Fit) []string {
	var out []string
	for k, v := range fit.Ideal {
		out = append(out, fmt.Sprintf("%d %.3f %.3f %.3f", points[k].Kind, v[0]+0.00001, v[1]+0.00001, v[2]+0.00001))
	}
	sort.Strings(out)
	return out
}

// The groups are those of testdata/structures/structures.json, which names the
// sources of lengths and angles.
func TestPublishedStructuresHaveTheirGroups(t *testing.T) {
	rng := rand.New(rand.NewSource(7))
	for _, m := range publishedStructures(t) {
		points := m.points(t)
		base := mustDetect(t, points, 0)
		consistent(t, m.Name, points, base)
		for range 6 {
			for _, noise := range []float64{0, 0.01} { // half of the tolerance
				turned, _ := shuffled(points, noise, rng)
				fit := mustDetect(t, turned, 0)
				if fit.Setting.Symbol != m.PointGroup {
					t.Errorf("%s: %s, want %s (noise %g)", m.Name, fit.Setting.Symbol, m.PointGroup, noise)
					continue
				}
				consistent(t, m.Name, turned, fit)
				if noise > 0 {
					continue
				}
				if got, want := coordinateSet(turned, fit), coordinateSet(points, base); strings.Join(got, "|") != strings.Join(want, "|") {
					t.Errorf("%s: another orientation or order gives other coordinates:\n%v\n%v (ties %v, %v)", m.Name, got, want, fit.Ties, base.Ties)
				}
				if fmt.Sprint(fit.Ties) != fmt.Sprint(base.Ties) || fmt.Sprint(fit.Rule) != fmt.Sprint(base.Rule) {
					t.Errorf("%s: another orientation gives other rules or ties", m.Name)
				}
			}
		}
	}
}

// orbitOf makes the points that a group makes of one in general position.
func orbitOf(s *Setting, v mgl64.Vec3, kind int) []Point {
	var out []Point
	for _, o := range s.Operations {
		w := o.Matrix.Mul3x1(v)
		fresh := true
		for _, p := range out {
			fresh = fresh && p.Position.Sub(w).Len() > 1e-6
		}
		if fresh {
			out = append(out, Point{w, kind})
		}
	}
	return out
}

// Points in general position on two or three orbits have no other group than
// the one that made them; the frame writes it in its standard matrices.
func TestEveryGroupIsFoundInItsGeneralOrbits(t *testing.T) {
	rng := rand.New(rand.NewSource(3))
	for _, symbol := range everyGroup(24) {
		s := mustNew(t, symbol)
		size := 1.5 + 0.35*float64(s.Order())/6
		for trial := range 3 {
			var points []Point
			for i, length := range []float64{1, 1.31, 1.57, 1.76, 1.93} {
				v := mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}
				points = append(points, orbitOf(s, v.Normalize().Mul(size*length), 6+i)...)
			}
			if d, _, _ := newCloud(points).closestLike(3); d < 0.1 {
				continue // a chance neighbour of a plane: no molecule
			}
			noise := []float64{0, 0.002, 0.01}[trial]
			turned, _ := shuffled(points, noise, rng)
			fit, err := Detect(turned, nil, Options{})
			if err != nil {
				t.Fatal(symbol, err)
			}
			if fit.Setting.Symbol != symbol {
				t.Errorf("%s is found as %s (noise %g)", symbol, fit.Setting.Symbol, noise)
				continue
			}
			consistent(t, symbol, turned, fit)
		}
	}
}

func TestMomentsThatAgreeByAccidentDoNotMisleadTheGroup(t *testing.T) {
	// Six points of three kinds on the axes with equal Σ x², Σ y², Σ z²: a
	// spherical top that has only D2h.
	points := []Point{
		{mgl64.Vec3{2, 0, 0}, 6}, {mgl64.Vec3{-2, 0, 0}, 6},
		{mgl64.Vec3{0, 2, 0}, 7}, {mgl64.Vec3{0, -2, 0}, 7},
		{mgl64.Vec3{0, 0, 2}, 8}, {mgl64.Vec3{0, 0, -2}, 8},
	}
	if fit := mustDetect(t, points, 0); fit.Setting.Symbol != "D2h" {
		t.Errorf("three unlike pairs: %s", fit.Setting.Symbol)
	}
	// A square and two points above and below at the height at which all
	// moments agree, one of them of another kind.
	points = []Point{
		{mgl64.Vec3{2, 0, 0}, 6}, {mgl64.Vec3{-2, 0, 0}, 6}, {mgl64.Vec3{0, 2, 0}, 6}, {mgl64.Vec3{0, -2, 0}, 6},
		{mgl64.Vec3{0, 0, 2}, 7}, {mgl64.Vec3{0, 0, -2}, 8},
	}
	if fit := mustDetect(t, points, 0); fit.Setting.Symbol != "C4v" {
		t.Errorf("octahedron with three kinds: %s", fit.Setting.Symbol)
	}
}

func TestStretchedOctahedronChangesItsGroupAtTheTolerance(t *testing.T) {
	octahedron := func(stretch float64) []Point {
		points := []Point{{mgl64.Vec3{}, 26}}
		for _, v := range []mgl64.Vec3{{2, 0, 0}, {-2, 0, 0}, {0, 2, 0}, {0, -2, 0}, {0, 0, 2 + stretch}, {0, 0, -2 - stretch}} {
			points = append(points, Point{v, 8})
		}
		return points
	}
	// By hand: the mean length is 2 + s/3, so the atoms on z lie 2s/3 off.
	for _, c := range []struct {
		stretch  float64
		symbol   string
		doubtful bool
	}{
		{0, "Oh", false}, {0.009, "Oh", false}, {0.02, "Oh", true}, {0.029, "Oh", true}, {0.031, "D4h", true}, {0.08, "D4h", true}, {0.1, "D4h", false},
	} {
		fit := mustDetect(t, octahedron(c.stretch), 0)
		if fit.Setting.Symbol != c.symbol || fit.Doubtful != c.doubtful {
			t.Errorf("stretched by %g: %s, doubtful %v; want %s, %v", c.stretch, fit.Setting.Symbol, fit.Doubtful, c.symbol, c.doubtful)
		}
		if c.symbol == "Oh" && math.Abs(fit.Deviation-2*c.stretch/3) > 1e-9 {
			t.Errorf("stretched by %g: deviation %g, want %g", c.stretch, fit.Deviation, 2*c.stretch/3)
		}
	}
}

// A wider tolerance never loses a group that a narrower one has found.
func TestWiderToleranceKeepsTheGroup(t *testing.T) {
	rng := rand.New(rand.NewSource(13))
	for _, m := range publishedStructures(t) {
		if strings.Contains(m.PointGroup, "∞") {
			continue
		}
		points, _ := shuffled(m.points(t), 0.004, rng)
		closest, _, _ := newCloud(points).closestLike(3)
		for _, tolerance := range []float64{0.01, 0.05, 0.1, 0.2, 0.3} {
			if tolerance >= closest/2 {
				break
			}
			fit := mustDetect(t, points, tolerance)
			if fit.Setting.Symbol != m.PointGroup && fit.Setting.Order() < mustNew(t, m.PointGroup).Order() && !fit.Setting.Infinite() {
				t.Errorf("%s at %g Å: %s, want %s or more", m.Name, tolerance, fit.Setting.Symbol, m.PointGroup)
			}
		}
	}
}

func TestLinearSetsAndSingleAtomsHaveTheirInfiniteGroups(t *testing.T) {
	rng := rand.New(rand.NewSource(5))
	on := func(kinds []int, heights ...float64) []Point {
		var out []Point
		for i, h := range heights {
			out = append(out, Point{mgl64.Vec3{0, 0, h}, kinds[i]})
		}
		return out
	}
	for _, c := range []struct {
		points []Point
		symbol string
	}{
		{on([]int{8, 6, 8}, -1.16, 0, 1.16), "D∞h"}, {on([]int{8, 6, 16}, -1.16, 0, 1.56), "C∞v"}, {on([]int{1, 1}, 0, 0.74), "D∞h"},
		{on([]int{1, 9}, 0, 0.92), "C∞v"}, {on([]int{8, 6, 8}, -1.16, 0, 1.25), "C∞v"}, {on([]int{7}, 3), "Kh"},
		{on([]int{1, 6, 6, 1}, -1.66, -0.6, 0.6, 1.66), "D∞h"},
	} {
		for range 5 {
			turned, _ := shuffled(c.points, 0.005, rng)
			fit := mustDetect(t, turned, 0)
			if fit.Setting.Symbol != c.symbol {
				t.Errorf("%v: %s, want %s", c.points, fit.Setting.Symbol, c.symbol)
			}
			consistent(t, c.symbol, turned, fit)
			for _, v := range fit.Ideal {
				if v[0] != 0 || v[1] != 0 {
					t.Errorf("%s: %v is not on z", c.symbol, v)
				}
			}
		}
	}
}

func TestPlanarSetsKeepTheirPlane(t *testing.T) {
	rng := rand.New(rand.NewSource(9))
	for n := 3; n <= 24; n++ {
		var ring []Point
		radius := 0.7 / math.Sin(math.Pi/float64(n))
		for k := range n {
			a := 2 * math.Pi * float64(k) / float64(n)
			ring = append(ring, Point{mgl64.Vec3{radius * math.Cos(a), radius * math.Sin(a), 0}, 6})
		}
		turned, _ := shuffled(ring, 0.009, rng)
		if fit := mustDetect(t, turned, 0); fit.Setting.Symbol != fmt.Sprintf("D%dh", n) {
			t.Errorf("ring of %d: %s", n, fit.Setting.Symbol)
		} else {
			consistent(t, fit.Setting.Symbol, turned, fit)
		}
	}
}

func TestBadPointsAreRefused(t *testing.T) {
	circle := func(n int) []Point {
		var out []Point
		for k := range n {
			a := 2 * math.Pi * float64(k) / float64(n)
			out = append(out, Point{mgl64.Vec3{40 * math.Cos(a), 40 * math.Sin(a), 0}, 6})
		}
		return out
	}
	two := []Point{{mgl64.Vec3{}, 1}, {mgl64.Vec3{0, 0, 0.7}, 1}, {mgl64.Vec3{0, 1, 0}, 8}}
	for _, c := range []struct {
		points    []Point
		links     []Link
		tolerance float64
		want      string
	}{
		{nil, nil, 0, "no points"}, {[]Point{{mgl64.Vec3{math.NaN(), 0, 0}, 1}}, nil, 0, "point 1"},
		{[]Point{{mgl64.Vec3{}, 1}, {mgl64.Vec3{1e308, 0, 0}, 1}}, nil, 0, "point 2"}, {two, nil, -1, "must be positive"},
		{two, nil, math.NaN(), "must be positive"}, {two, nil, 0.4, "too large"}, {join([]Point{at(0, 0, 0, 78)}, ring(4, 2.3, 0, 0, 17)), nil, 2, "too large"}, {two, []Link{{0, 3}}, 0, "link"}, {circle(121), nil, 0, "operations"},
	} {
		_, err := Detect(c.points, c.links, Options{Tolerance: c.tolerance})
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("error %v, want one about %q", err, c.want)
		}
	}
}

// Noise beyond the tolerance leaves some lower group: whichever it is, it is
// within the tolerance, and the same in every orientation and order.
func TestNoisyStructuresHaveOneGroupInEveryOrientation(t *testing.T) {
	rng := rand.New(rand.NewSource(11))
	for _, m := range publishedStructures(t) {
		for _, noise := range []float64{0.02, 0.04, 0.08} {
			points, _ := shuffled(m.points(t), noise, rng)
			base := mustDetect(t, points, 0)
			consistent(t, m.Name, points, base)
			for range 2 {
				turned, _ := shuffled(points, 0, rng)
				fit := mustDetect(t, turned, 0)
				consistent(t, m.Name, turned, fit)
				if fit.Setting.Symbol != base.Setting.Symbol || math.Abs(fit.Deviation-base.Deviation) > 1e-7 || fit.Doubtful != base.Doubtful {
					t.Errorf("%s with noise %g: %s off by %g (doubtful %v), turned %s off by %g (%v)", m.Name, noise,
						base.Setting.Symbol, base.Deviation, base.Doubtful, fit.Setting.Symbol, fit.Deviation, fit.Doubtful)
				}
				if got, want := coordinateSet(turned, fit), coordinateSet(points, base); strings.Join(got, "|") != strings.Join(want, "|") {
					t.Errorf("%s with noise %g: another orientation gives other coordinates (ties %v)", m.Name, noise, fit.Ties)
				}
			}
		}
	}
}
