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

// Groups that are far off can be reached from several starts by way of
// different assignments; those nearer than a quarter of an ångström are the
// same in every orientation.
func TestLadderIsTheSameInEveryOrientation(t *testing.T) {
	rng := rand.New(rand.NewSource(23))
	spell := func(list []*Nearness) string {
		var out []string
		for _, n := range list {
			if n.Fit.Deviation < 0.25 {
				out = append(out, fmt.Sprintf("%s %.5f", n.Fit.Setting.Symbol, n.Fit.Deviation+1e-7))
			}
		}
		sort.Strings(out)
		return strings.Join(out, ", ")
	}
	for _, m := range publishedStructures(t) {
		if len(m.Atoms) > 7 || strings.Contains(m.PointGroup, "∞") {
			continue
		}
		points, _ := shuffled(m.points(t), 0.05, rng)
		list := mustNear(t, points)
		want := spell(list)
		turned, _ := shuffled(points, 0, rng)
		if got := spell(mustNear(t, turned)); got != want {
			t.Errorf("%s: %s\nturned: %s", m.Name, want, got)
		}
		if nearest(list, m.PointGroup) == nil {
			t.Errorf("%s is not near to %s", m.Name, m.PointGroup)
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
