package symmetry

import (
	"math"
	"math/rand"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// bentSO2 is sulfur dioxide with bonds of 1.43 Å at 119.5°.
func bentSO2() []Point {
	half := 119.5 / 2 * math.Pi / 180
	x, y := 1.43*math.Sin(half), 1.43*math.Cos(half)
	return []Point{at(0, 0, 0, 16), at(x, y, 0, 8), at(-x, y, 0, 8)}
}

// By hand: in SO2 the oxygens lie h = 1.43·cos 59.75° = 0.7204 Å above the sulfur
// and a = 1.43·sin 59.75° = 1.2353 Å to its sides. The centroid is at 2h/3, and the
// nearest structure on a line is the projection on the line through it: S moves by
// 2h/3 = 0.4803 Å, each O by h/3 = 0.2401 Å, along x alone (the plane of the bend).
// Σd² = (4/9 + 2/9)·h² = 2h²/3, so the bend is 0.8165·h = 0.5882 Å, and with
// Σq² = 2h²/3 + 2a² the measure is 100·h²/(h² + 3a²) = 10.183.
func TestBentTriatomicIsAsFarFromTheLineAsOnPaper(t *testing.T) {
	points := bentSO2()
	h, a := 0.720398, 1.235272
	list := mustNear(t, points)
	for _, symbol := range []string{"D∞h", "C∞v", "D2h", "D3h", "D4d", "D12h", "C2h", "S6", "C3v", "C7", "Ci"} {
		n := nearest(list, symbol)
		if n == nil {
			t.Errorf("%s is missing", symbol)
			continue
		}
		consistent(t, symbol, points, n.Fit)
		if math.Abs(n.Fit.Deviation-2*h/3) > 1e-5 || math.Abs(n.Measure-100*h*h/(h*h+3*a*a)) > 1e-3 || n.Fit.Worst != 0 {
			t.Errorf("%s: deviation %g, measure %g, point %d moves most", symbol, n.Fit.Deviation, n.Measure, n.Fit.Worst)
		}
		if symbol == "C2h" || symbol == "Ci" {
			continue
		}
		for k, want := range []float64{2 * h / 3, -h / 3, -h / 3} {
			d := n.Fit.Rotation.Mul3x1(points[k].Position.Sub(n.Fit.Origin)).Sub(n.Fit.Ideal[k])
			if math.Abs(d[0]-want) > 1e-5 || math.Abs(d[1]) > 1e-9 || math.Abs(d[2]) > 1e-9 {
				t.Errorf("%s: point %d moves by %v, want %.4f along x", symbol, k+1, d, want)
			}
		}
	}
	if n := nearest(list, "C2v"); n.Fit.Deviation > 1e-9 || n.Whole != nil {
		t.Errorf("C2v, which it has: %+v", n)
	}
}

// bentChains are molecules that are bent by some tenths of an ångström, with the
// linear group that they nearly have.
func bentChains() map[string][]Point {
	return map[string][]Point{
		"C∞v HCN":            {at(0, 0, 0, 6), at(0, 0, 1.156, 7), at(0.3, 0, -1.03, 1)},
		"C∞v OCS":            {at(0, 0.2, 0, 6), at(0, 0, 1.16, 8), at(0, 0, -1.56, 16)},
		"D∞h CO2":            {at(0, 0, 0, 6), at(1.155, 0.05, 0, 8), at(-1.155, 0.05, 0, 8)},
		"D∞h water":          {at(0, 0, 0, 8), at(0.759, 0.588, 0, 1), at(-0.759, 0.588, 0, 1)},
		"D∞h diazene, trans": {at(0.62, 0, 0, 7), at(-0.62, 0, 0, 7), at(0.92, 0.98, 0, 1), at(-0.92, -0.98, 0, 1)},
		"D∞h ethyne, cis":    {at(0.6, 0, 0, 6), at(-0.6, 0, 0, 6), at(1.6, 0.4, 0, 1), at(-1.6, 0.4, 0, 1)},
		"D∞h ethyne, skew":   {at(0.6, 0, 0, 6), at(-0.6, 0, 0, 6), at(1.6, 0.4, 0, 1), at(-1.6, 0.1, 0.35, 1)},
		"D∞h triiodide":      {at(0, 0, 0, 53), at(2.8, 0.1, 0, 53), at(-3.1, 0, 0, 53)},
		"D∞h C5":             {at(0, 0.1, 0, 6), at(1.3, 0, 0, 6), at(2.6, 0.2, 0, 6), at(-1.3, 0, 0.1, 6), at(-2.55, 0.1, 0, 6)},
	}
}

// Every linear group and every subgroup of it that is listed is one of the ideal
// structure, in which no two atoms have come near; and it is the whole of it.
func TestIdealStructuresOnALineHaveTheirGroups(t *testing.T) {
	for name, points := range bentChains() {
		symbol := name[:len("D∞h")]
		list := mustNear(t, points)
		if nearest(list, symbol) == nil {
			t.Errorf("%s is not near to it", name)
		}
		subgroups := 0
		for _, n := range list {
			if !n.Fit.Setting.Infinite() && n.Whole == nil {
				continue
			}
			consistent(t, name+" as "+n.Fit.Setting.Symbol, points, n.Fit)
			ideal := make([]Point, len(points))
			for k, v := range n.Fit.Ideal {
				ideal[k] = Point{v, points[k].Kind}
				for j := range k {
					now, before := v.Sub(n.Fit.Ideal[j]).Len(), points[k].Position.Sub(points[j].Position).Len()
					if now < 0.7*before {
						t.Errorf("%s as %s: points %d and %d come as near as %.3f Å", name, n.Fit.Setting.Symbol, j+1, k+1, now)
					}
				}
			}
			whole := n
			if n.Whole != nil {
				subgroups++
				whole = n.Whole
			}
			found := mustDetect(t, ideal, 1e-6)
			if got := found.Setting.Symbol; got != whole.Fit.Setting.Symbol && !(got == "D∞h" && n.Fit.Setting.Symbol == "C∞v") || found.Deviation > 1e-9 {
				t.Errorf("%s as %s: the ideal structure has %s", name, n.Fit.Setting.Symbol, got)
			}
		}
		if subgroups < 2*(MaxNearFold-1) {
			t.Errorf("%s: only %d subgroups", name, subgroups)
		}
	}
}

// Rotation and order change nothing, noise of a quarter of the tolerance neither
// the frame of a linear ideal nor what is listed; but for ties.
func TestLinearIdealsAreTheSameInEveryOrientationAndOrder(t *testing.T) {
	rng := rand.New(rand.NewSource(29))
	for name, points := range bentChains() {
		symbol := name[:len("D∞h")]
		list := mustNear(t, points)
		n := nearest(list, symbol)
		for trial := range 12 {
			noise := 0.0
			if trial%2 == 1 {
				noise = DefaultTolerance / 4
			}
			turned, from := shuffled(points, noise, rng)
			other := mustNear(t, turned)
			if got, want := spellLadder(other), spellLadder(list); noise == 0 && got != want {
				t.Errorf("%s: %s\nturned: %s", name, want, got)
			}
			m := nearest(other, symbol)
			if m == nil || math.Abs(m.Fit.Deviation-n.Fit.Deviation) > 2*noise+1e-9 {
				t.Errorf("%s, noise %g: %s is missing or has moved", name, noise, symbol)
				continue
			}
			if len(n.Fit.Ties) > 0 {
				continue
			}
			// The group itself may exchange the ends and turn the bend about z.
			far := math.Inf(1)
			for _, end := range []float64{1, -1} {
				for _, side := range []float64{1, -1} {
					far = math.Min(far, farthestApart(n.Fit, points, m.Fit, turned, from, mgl64.Vec3{side, side * end, end}))
				}
			}
			// The plane of the bend is known as well as the noise leaves it.
			if far > 6*noise+1e-6 {
				t.Errorf("%s, noise %g: displacements differ by %g Å in the two frames", name, noise, far)
			}
		}
	}
}

// farthestApart compares, in the frames of two fits of one structure, places and
// displacements, with the axes of the first taken with signs.
func farthestApart(a *Fit, points []Point, b *Fit, other []Point, from []int, signs mgl64.Vec3) (far float64) {
	for i, j := range from {
		p := a.Rotation.Mul3x1(points[j].Position.Sub(a.Origin))
		q := b.Rotation.Mul3x1(other[i].Position.Sub(b.Origin))
		for k := range p {
			far = math.Max(far, math.Abs(signs[k]*p[k]-q[k]))
			far = math.Max(far, math.Abs(signs[k]*a.Ideal[j][k]-b.Ideal[i][k]))
		}
	}
	return far
}

// What is linear already has the linear groups alone: a triiodide with unequal
// bonds is C∞v, and 0.1 Å from D∞h: by hand, bonds of 2.8 and 3.1 Å become 2.95, so
// that each atom moves by 0.15 from the centre, which itself moves by 0.1 against
// the centroid: 0.05, 0.05 and 0.1 Å.
func TestLinearPointsAreNearToLinearGroups(t *testing.T) {
	points := []Point{at(0, 0, 0, 53), at(2.8, 0, 0, 53), at(-3.1, 0, 0, 53)}
	list := mustNear(t, points)
	polar, central := nearest(list, "C∞v"), nearest(list, "D∞h")
	if polar == nil || central == nil || polar.Fit.Deviation > 1e-12 || math.Abs(central.Fit.Deviation-0.1) > 1e-9 {
		t.Fatalf("C∞v %v, D∞h %v", polar, central)
	}
	if math.Abs(central.Measure-100*0.015/(2.8*2.8+3.1*3.1-0.3*0.3/3)) > 1e-9 {
		t.Errorf("measure %g", central.Measure)
	}
	if n := nearest(list, "C2v"); n == nil || n.Whole != polar || n.Fit.Deviation > 1e-12 {
		t.Errorf("C2v: %+v", n)
	}
	for _, n := range list {
		if !n.Fit.Setting.Infinite() && n.Whole == nil {
			t.Errorf("%s among the groups of points on a line", n.Fit.Setting.Symbol)
		}
	}
	if list, err := NearLinear(points[:1], nil, 0); err != nil || len(list) != 0 {
		t.Errorf("one point: %v, %v", list, err)
	}
}

// A bend that would bring atoms together is none: the ends of a cis diazene would
// lie where its middle does, and three points in a triangle stay what they are.
func TestAtomsDoNotMergeOnALine(t *testing.T) {
	for name, points := range map[string][]Point{
		"diazene, cis": {at(0.62, 0, 0, 7), at(-0.62, 0, 0, 7), at(0.92, 0.98, 0, 1), at(-0.92, 0.98, 0, 1)},
		"triangle":     ring(3, 0.8, 0, 0, 8),
		"square":       ring(4, 0.9, 0, 0, 8),
	} {
		for _, n := range mustNear(t, points) {
			if n.Fit.Setting.Infinite() || n.Whole != nil {
				t.Errorf("%s as %s", name, n.Fit.Setting.Symbol)
			}
		}
	}
}
