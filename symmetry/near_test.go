package symmetry

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand"
	"sort"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

func mustNear(t testing.TB, points []Point) []*Nearness {
	t.Helper()
	list, err := Near(context.Background(), points, links(points), 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	return list
}

func nearest(list []*Nearness, symbol string) *Nearness {
	for _, n := range list {
		if n.Fit.Setting.Symbol == symbol {
			return n
		}
	}
	return nil
}

// testdata/checkvalues/symmetry_distance.json: the measures of H. Zabrodsky,
// S. Peleg, D. Avnir, J. Am. Chem. Soc. 114, 7843 (1992), recomputed there.
func TestSymmetryMeasuresAgreeWithThePublishedOnes(t *testing.T) {
	var file struct {
		Group []struct {
			What   string
			Points [][]float64
			Value  float64
		}
	}
	load(t, &file, "checkvalues", "symmetry_distance.json")
	for _, c := range file.Group {
		var points []Point
		for _, p := range c.Points {
			v := mgl64.Vec3{p[0], p[1]}
			if len(p) == 3 {
				v[2] = p[2]
			}
			points = append(points, Point{v, 6})
		}
		group := "D3h"
		if len(c.Points) == 6 {
			group = "Oh"
		}
		if strings.Contains(c.What, "line") {
			continue // the ideal points fall together with the centre: no molecule
		}
		n := nearest(mustNear(t, points), group)
		if n == nil || math.Abs(n.Measure-c.Value) > 1e-4 {
			t.Errorf("%s: %v, want %v", c.What, n, c.Value)
		}
	}
}

// By hand: an octahedron with bonds of 1 and a pair of 1.2 on z has the mean
// 16/15; the deviation from Oh is 2/15, and Σ|Q−P|² = 4/225 + 2·4/225·… as
// (4·(1/15)² + 2·(2/15)²) = 12/225. Σ Q² = 4 + 2.88, so S = 0.775194.
func TestStretchedOctahedronStandsOnTheLadderWhereItShould(t *testing.T) {
	points := join(ring(4, 1, 0, 0, 6), []Point{at(0, 0, 1.2, 6), at(0, 0, -1.2, 6)})
	list := mustNear(t, points)
	oh := nearest(list, "Oh")
	if math.Abs(oh.Fit.Deviation-2.0/15) > 1e-9 || math.Abs(oh.Measure-100*(12.0/225)/6.88) > 1e-9 {
		t.Errorf("Oh: deviation %g, measure %g", oh.Fit.Deviation, oh.Measure)
	}
	var squares []*Nearness
	for i, n := range list {
		if n.Fit.Setting.Symbol == "D4h" {
			squares = append(squares, n)
		}
		if i > 0 && n.Fit.Deviation < list[i-1].Fit.Deviation-1e-6 {
			t.Error("deviations fall")
		}
	}
	if len(squares) != 3 || squares[0].Fit.Deviation > 1e-9 || squares[1].Fit.Deviation < 0.05 {
		t.Fatalf("%d ways to be D4h", len(squares))
	}
	for i, n := range squares {
		if n.Embedding != i+1 {
			t.Errorf("embedding %d has number %d", i+1, n.Embedding)
		}
	}
	if a := squares[0].Axis; math.Abs(math.Abs(a[2])-1) > 1e-9 {
		t.Errorf("the first is along %v", a)
	}
}

// A cage with noise has all subgroups of Ih near: 164, counted with their
// places (a known number, from memory).
func TestNoisyCageIsNearToAllSubgroupsOfItsGroup(t *testing.T) {
	rng := rand.New(rand.NewSource(3))
	points, _ := shuffled(cage60(), 0.05, rng)
	list := mustNear(t, points)
	if len(list) != 164 || nearest(list, "Ih") == nil {
		t.Errorf("%d groups", len(list))
	}
	for _, n := range list {
		consistent(t, n.Fit.Setting.Symbol, points, n.Fit)
	}
}

// spellLadder lists groups with their deviations.
func spellLadder(list []*Nearness) string {
	var out []string
	for _, n := range list {
		out = append(out, fmt.Sprintf("%s %.5f", n.Fit.Setting.Symbol, n.Fit.Deviation+1e-7))
	}
	sort.Strings(out)
	return strings.Join(out, ", ")
}

// However far off the groups are.
func TestLadderIsTheSameInEveryOrientationAndOrder(t *testing.T) {
	rng := rand.New(rand.NewSource(23))
	for _, m := range publishedStructures(t) {
		if len(m.Atoms) > 7 || strings.Contains(m.PointGroup, "∞") {
			continue
		}
		points, _ := shuffled(m.points(t), 0.05, rng)
		list := mustNear(t, points)
		turned, _ := shuffled(points, 0, rng)
		if got, want := spellLadder(mustNear(t, turned)), spellLadder(list); got != want {
			t.Errorf("%s: %s\nturned: %s", m.Name, want, got)
		}
		if nearest(list, m.PointGroup) == nil {
			t.Errorf("%s is not near to %s", m.Name, m.PointGroup)
		}
	}
	for _, points := range [][]Point{sandwich(5, 0), sandwich(8, 0), cage60()} {
		points, _ := shuffled(points, 0.05, rng)
		turned, _ := shuffled(points, 0, rng)
		if got, want := spellLadder(mustNear(t, turned)), spellLadder(mustNear(t, points)); got != want {
			t.Errorf("%d points: %s\nturned: %s", len(points), want, got)
		}
	}
}

// sandwich is two rings CnHn, turned by an angle in degrees against each other,
// with an atom between them; carbon atoms alone for n = 2.
func sandwich(n int, angle float64) []Point {
	out := []Point{at(0, 0, 0, 26)}
	r := 0.7 / math.Sin(math.Pi/float64(n))
	for i, z := range []float64{1.7, -1.7} {
		out = append(out, ring(n, r, z, float64(i)*angle, 6)...)
		if n > 2 {
			out = append(out, ring(n, r+1, z, float64(i)*angle, 1)...)
		}
	}
	return out
}

// Eclipsed and staggered rings are half-way from each other: each ring turns by
// a quarter of its period, so every atom moves by r·sin(π/2n).
func TestEclipsedAndStaggeredSandwichesAreNearToEachOther(t *testing.T) {
	rng := rand.New(rand.NewSource(7))
	for n := 2; n <= 8; n++ {
		eclipsed, staggered := fmt.Sprintf("D%dh", n), fmt.Sprintf("D%dd", n)
		far := 0.7/math.Sin(math.Pi/float64(n)) + 1
		if n == 2 {
			far = 0.7
		}
		far *= math.Sin(math.Pi / float64(2*n))
		for _, c := range []struct {
			angle float64
			other string
		}{{0, staggered}, {180 / float64(n), eclipsed}} {
			for _, noise := range []float64{0, 0.05} {
				if n == 2 && noise > 0 {
					continue // pairs keep 0.707 of their distance as it is
				}
				points, _ := shuffled(sandwich(n, c.angle), noise, rng)
				list := mustNear(t, points)
				other := nearest(list, c.other)
				if other == nil || math.Abs(other.Fit.Deviation-far) > 1e-6+noise {
					t.Errorf("n = %d, turned by %g°, noise %g: %s is missing or not at %.3f Å: %v", n, c.angle, noise, c.other, far, other)
				}
			}
		}
	}
	// Caps of two sorts, so that nothing exchanges them: Cnv to Cnv. The larger
	// cap turns less.
	for _, n := range []int{4, 7} {
		points := sandwich(n, 0)
		for i := range points {
			if p := &points[i]; p.Kind == 1 && p.Position[2] < 0 {
				p.Kind = 9
				p.Position[0] *= 1.12
				p.Position[1] *= 1.12
			}
		}
		points, _ = shuffled(points, 0.02, rng)
		symbol := fmt.Sprintf("C%dv", n)
		ways := 0
		for _, e := range mustNear(t, points) {
			if e.Fit.Setting.Symbol == symbol {
				ways++
			}
		}
		if ways < 3 { // eclipsed, and turned to either side
			t.Errorf("n = %d, two sorts of caps: %d ways to be %s", n, ways, symbol)
		}
	}
}

// If a structure A is near to a group, with B the ideal structure, B is near to
// the group of A, provided that no point moves too far.
func TestNearnessIsMutual(t *testing.T) {
	rng := rand.New(rand.NewSource(11))
	structures := [][]Point{sandwich(2, 0), sandwich(3, 0), randomWith(rng, "D3", 1), randomWith(rng, "S4", 2), randomWith(rng, "C3h", 1)}
	for _, m := range publishedStructures(t) {
		if n := len(m.Atoms); n > 3 && n < 7 && !strings.Contains(m.PointGroup, "∞") {
			structures = append(structures, m.points(t))
		}
	}
	tried := 0
	for _, a := range structures {
		fit := mustDetect(t, a, 1e-4)
		symbol := fit.Setting.Symbol
		for _, entry := range mustNear(t, a) {
			if entry.Embedding > 1 || entry.Fit.Deviation < 0.05 {
				continue
			}
			b := make([]Point, len(a))
			for k, v := range entry.Fit.Ideal {
				b[k] = Point{v, a[k].Kind}
			}
			// How far A's group is from B, if A's operations carry the points
			// as they do there.
			l := &ladder{cloud: newCloud(b), limit: DefaultNearness}
			p, ok := l.cloud.place(elementsOf(fit, entry.Fit.Rotation))
			if !ok || p.deviation > 0.95 || !l.keepsApart(p, 0.72) {
				continue
			}
			tried++
			back := nearest(mustNear(t, b), symbol)
			if back == nil || back.Fit.Deviation > p.deviation+1e-6 {
				t.Errorf("%s, %d atoms, is %.3f Å from %s, but not the other way round: %v, want %.3f Å",
					symbol, len(a), entry.Fit.Deviation, entry.Fit.Setting.Symbol, back, p.deviation)
			}
		}
	}
	if tried < 15 {
		t.Errorf("only %d pairs were tried", tried)
	}
}

// elementsOf are the operations of a fit, with their matrices in other axes.
func elementsOf(fit *Fit, rotation mgl64.Mat3) []*element {
	turn := rotation.Mul3(fit.Rotation.Transpose())
	var out []*element
	for r, o := range fit.Setting.Operations {
		e := &element{improper: o.Turn.Improper, matrix: turn.Mul3(o.Matrix).Mul3(turn.Transpose())}
		for _, k := range fit.Permutations[r] {
			e.permutation = append(e.permutation, int32(k))
		}
		out = append(out, e)
	}
	return out
}

// randomWith is a random set of points that has a group exactly, in so many
// orbits of different kinds, with no two points too near.
func randomWith(rng *rand.Rand, symbol string, orbits int) []Point {
	s, err := New(symbol)
	if err != nil {
		panic(err)
	}
	for {
		out := []Point{at(0, 0, 0, 26)}
		for kind := range orbits {
			v := mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.Mul(1.8)
			for _, o := range s.Operations {
				out = append(out, Point{o.Matrix.Mul3x1(v), 6 + kind})
			}
		}
		apart := true
		for i, p := range out {
			for _, q := range out[:i] {
				apart = apart && p.Position.Sub(q.Position).Len() > 1.2
			}
		}
		if apart {
			return out
		}
	}
}

// Every point is moved by up to 0.2 Å; the points of a large set, where
// neighbours must stay neighbours, by up to 0.1 Å.
func TestPerturbedStructuresAreNearToTheirGroups(t *testing.T) {
	rng := rand.New(rand.NewSource(5))
	for _, symbol := range []string{"Ci", "Cs", "C2", "C3", "C5", "S4", "S6", "C2v", "C3v", "D2", "D3", "C2h", "C3h", "D2d", "D3d", "D5h", "T", "O"} {
		ideal := randomWith(rng, symbol, 1)
		noise := 0.2
		if len(ideal) > smallCloud {
			noise = 0.1
		}
		points, _ := shuffled(ideal, noise, rng)
		n := nearest(mustNear(t, points), symbol)
		if n == nil || n.Fit.Deviation > 0.6 {
			t.Errorf("%s: %v", symbol, n)
		}
	}
}

func TestSearchOfTheLadderStopsWhenTold(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	told := 0.0
	_, err := Near(ctx, cage60(), nil, 0, func(share float64) {
		if share < told || share > 1 {
			t.Errorf("progress goes from %g to %g", told, share)
		}
		told = share
		if share > 0.1 {
			cancel()
		}
	})
	if !errors.Is(err, context.Canceled) || told > 0.2 {
		t.Errorf("error %v after %g", err, told)
	}
}

func BenchmarkNear(b *testing.B) {
	rng := rand.New(rand.NewSource(3))
	cage, _ := shuffled(cage60(), 0.05, rng)
	many := make([]Point, 200)
	for i := range many {
		v := spiral(i/2, 100).Mul(8) // both halves: a centre of symmetry
		if i%2 == 1 {
			v = v.Mul(-1)
		}
		many[i] = Point{v, 6}
	}
	many, _ = shuffled(many, 0.05, rng)
	for name, points := range map[string][]Point{"cage of 60": cage, "200 points": many} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				mustNear(b, points)
			}
		})
	}
}

// The published values: square from tetrahedron 33.33, trigonal prism from
// octahedron 16.74 (testdata/checkvalues/symmetry_distance.json).
func TestShapeMeasuresAgreeWithThePublishedOnes(t *testing.T) {
	var file struct {
		Shape []struct {
			What, Note        string
			Reference, Points []mgl64.Vec3
			Value             float64
		}
	}
	load(t, &file, "checkvalues", "symmetry_distance.json")
	rng := rand.New(rand.NewSource(1))
	for _, c := range file.Shape {
		var points, reference []Point
		for i := range c.Points {
			kind := 8
			if c.Note != "" && i == len(c.Points)-1 {
				kind = 26 // the centre of both
			}
			points = append(points, Point{c.Points[i], kind})
			reference = append(reference, Point{c.Reference[i].Mul(1.7), kind})
		}
		points, _ = shuffled(points, 0, rng)
		got, err := ShapeMeasure(points, reference)
		if err != nil || math.Abs(got-c.Value) > 1e-4 {
			t.Errorf("%s: %v, want %v (%v)", c.What, got, c.Value, err)
		}
	}
	// More points than are tried in every way: a prism of two rings of six
	// against itself, turned, mirrored and enlarged, and with a stretched axis.
	prism := join(ring(6, 2, 1.1, 10, 6), ring(6, 2, -1.1, 10, 6))
	turned, _ := shuffled(prism, 0, rng)
	for i := range turned {
		turned[i].Position = turned[i].Position.Mul(-2.2)
	}
	if got, err := ShapeMeasure(turned, prism); err != nil || got > 1e-9 {
		t.Errorf("a prism against itself: %v (%v)", got, err)
	}
	for _, bad := range [][2][]Point{{nil, nil}, {ring(3, 1, 0, 0, 6), ring(4, 1, 0, 0, 6)}, {ring(3, 1, 0, 0, 6), ring(3, 1, 0, 0, 7)}, {{at(0, 0, 0, 1)}, {at(0, 0, 0, 1)}}} {
		if _, err := ShapeMeasure(bad[0], bad[1]); err == nil {
			t.Errorf("%v against %v is accepted", bad[0], bad[1])
		}
	}
}

// Without any near operation there is the trivial group, with nothing moved.
func TestEveryStructureHasTheTrivialGroup(t *testing.T) {
	points := []Point{at(0, 0, 0, 6), at(1.1, 0, 0, 1), at(0, 1.7, 0, 9), at(0, 0, 2.1, 17), at(-1, -1, -1, 35)}
	list, err := Near(context.Background(), points, nil, 0, nil)
	if err != nil || len(list) != 1 || list[0].Fit.Setting.Symbol != "C1" || list[0].Fit.Deviation > 1e-12 || list[0].Embedding != 1 {
		t.Errorf("%v: %d groups", err, len(list))
	}
}
