package orbitals

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// everyFamily names a few groups of every family, small and large.
var everyFamily = []string{
	"C1", "Cs", "Ci", "C2", "C3", "C4", "C5", "C6", "C7", "C8", "C2v", "C3v", "C4v", "C5v", "C6v", "C9v",
	"C2h", "C3h", "C4h", "C5h", "C6h", "D2", "D3", "D4", "D5", "D6", "D2h", "D3h", "D4h", "D5h", "D6h", "D9h", "D12h",
	"D2d", "D3d", "D4d", "D5d", "D6d", "S4", "S6", "S8", "S10", "S12", "T", "Td", "Th", "O", "Oh", "I", "Ih",
}

// orbitOf adds the images of a place under a group.
func orbitAt(s *symmetry.Setting, p mgl64.Vec3) []mgl64.Vec3 {
	var out []mgl64.Vec3
	for _, op := range s.Operations {
		q := op.Matrix.Mul3x1(p)
		if !slices.ContainsFunc(out, func(r mgl64.Vec3) bool { return r.Sub(q).Len() < 1e-3 }) {
			out = append(out, q)
		}
	}
	return out
}

func TestGroupOrbitalsTransformInEveryFamily(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	for _, symbol := range everyFamily {
		group := setting(t, symbol)
		general := mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.Normalize().Mul(2.5)
		places := map[string]mgl64.Vec3{"general": general, "origin": {}, "z": {0, 0, 1.7}, "x": {1.6, 0, 0}, "(1,1,1)": {1, 1, 1}, "xy": {1.1, 0.4, 0}}
		for _, op := range group.Operations {
			if op.Turn.Improper && op.Turn.Num == 0 { // a place on a plane askew
				p := general.Sub(op.Axis.Mul(op.Axis.Dot(general)))
				places["plane"] = p.Normalize().Mul(2.2)
			}
		}
		for where, p := range places {
			s := sitesAt(t, symbol, carbon, orbitAt(group, p))
			choices := []string{"all:s,p"}
			if len(s.Positions) <= 8 {
				choices = []string{"all:s,p,d,f"}
			}
			switch {
			case len(s.Positions) > 60:
				choices = []string{"all:pi"}
			case where != "origin":
				choices = append(choices, "all:sigma,pi")
			}
			for _, c := range choices {
				b, err := NewBasis(s, parse(t, c)...)
				if err != nil {
					t.Fatalf("%s, %s, %s: %v", symbol, where, c, err)
				}
				r, err := b.Representation()
				if err != nil {
					t.Fatal(err)
				}
				p, err := Project(r)
				if err != nil {
					t.Fatalf("%s, %s, %s: %v", symbol, where, c, err)
				}
				checkProjection(t, r, p)
			}
		}
	}
}

// moleculeAt is a structure for the whole way from coordinates.
type moleculeAt struct {
	name     string
	elements []structure.Element
	places   []mgl64.Vec3
	choice   []string
}

// examples are structures in any axes: with one copy of each irrep and with
// several, with pairs of complex conjugates, and with sites in general
// positions.
func examples(t testing.TB) []moleculeAt {
	ring := func(n int, r, z, turn float64) []mgl64.Vec3 {
		var out []mgl64.Vec3
		for k := range n {
			a := turn + 2*math.Pi*float64(k)/float64(n)
			out = append(out, mgl64.Vec3{r * math.Cos(a), r * math.Sin(a), z})
		}
		return out
	}
	build := func(name string, choice []string, parts ...[]mgl64.Vec3) moleculeAt {
		m := moleculeAt{name: name, choice: choice}
		for i, part := range parts {
			for _, p := range part {
				m.elements = append(m.elements, []structure.Element{xenon, fluorine, carbon, hydrogen}[i])
				m.places = append(m.places, p)
			}
		}
		return m
	}
	centre := []mgl64.Vec3{{}}
	octahedron := []mgl64.Vec3{{1.9, 0, 0}, {-1.9, 0, 0}, {0, 1.9, 0}, {0, -1.9, 0}, {0, 0, 1.9}, {0, 0, -1.9}}
	return []moleculeAt{
		build("pyramid", []string{"F:sigma,pi", "Xe:p"}, centre, ring(3, 1.5, 0.6, 0.2)),
		build("square", []string{"F:sigma,pi", "Xe:d"}, centre, ring(4, 1.9, 0, 0.3)),
		build("bipyramid", []string{"F:sigma,pi", "C:sigma,pi"}, centre, ring(3, 1.8, 0, 0), []mgl64.Vec3{{0, 0, 2}, {0, 0, -2}}),
		build("octahedron", []string{"F:p", "Xe:f"}, centre, octahedron),
		build("twisted prism (D3)", []string{"F:sigma,pi"}, centre, append(ring(3, 1.5, 1, 0.2), ring(3, 1.5, -1, -0.2)...)),
		build("propeller (C3)", []string{"F:p", "C:sigma"}, centre, ring(3, 1.7, 0.2, 0), ring(3, 2.6, 0.9, 0.5)),
		build("S4", []string{"F:p", "F:s"}, centre, []mgl64.Vec3{{1.6, 0.3, 0.9}, {-1.6, -0.3, 0.9}, {-0.3, 1.6, -0.9}, {0.3, -1.6, -0.9}}),
		build("lopsided (C1)", []string{"all:s", "F:p"}, centre, []mgl64.Vec3{{1.5, 0.2, 0.1}, {-0.6, 1.7, 0.4}}, []mgl64.Vec3{{-0.4, -0.5, 2.1}}),
		build("linear", []string{"F:sigma,pi", "Xe:d"}, centre, []mgl64.Vec3{{0, 0, 1.9}, {0, 0, -1.9}}),
	}
}

// detected carries a structure through the detection of its group.
func detected(t testing.TB, m moleculeAt, turn mgl64.Mat3, shift mgl64.Vec3, order []int) *Sites {
	t.Helper()
	read := &structure.Molecule{}
	var points []symmetry.Point
	var core []int
	for i, k := range order {
		p := turn.Mul3x1(m.places[k]).Add(shift)
		read.Atoms = append(read.Atoms, structure.Atom{Element: m.elements[k], Position: p})
		points = append(points, symmetry.Point{Position: p, Kind: int(m.elements[k])})
		core = append(core, i)
	}
	fit, err := symmetry.Detect(points, nil, symmetry.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := NewSites(fit, core, read, structure.Bonds(read))
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func inOrder(n int) []int {
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	return out
}

func TestCoefficientsDependNeitherOnTurnNorOnPlace(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	for _, m := range examples(t) {
		order := inOrder(len(m.places))
		first := detected(t, m, mgl64.Ident3(), mgl64.Vec3{}, order)
		want := project(t, basis(t, first, m.choice...))
		for range 8 {
			turn := randomOrthogonal(rng, false)
			s := detected(t, m, turn, mgl64.Vec3{3, -7, 11}, order)
			if s.Setting.Symbol != first.Setting.Symbol {
				t.Fatalf("%s: %s becomes %s", m.name, first.Setting.Symbol, s.Setting.Symbol)
			}
			b := basis(t, s, m.choice...)
			got := project(t, b)
			compareProjections(t, m.name, want, got, 1e-9)
			if r, err := b.Representation(); err == nil {
				checkProjection(t, r, got)
				for i, f := range b.Functions {
					if r.Orbits()[i] != f.Orbit {
						t.Fatalf("%s: function %d is in orbit %d of the basis and %d of its representation", m.name, i+1, f.Orbit+1, r.Orbits()[i]+1)
					}
				}
			}
		}
	}
}

func compareProjections(t *testing.T, name string, want, got *Projection, tolerance float64) {
	t.Helper()
	if len(want.Orbitals) != len(got.Orbitals) {
		t.Fatalf("%s: %d group orbitals, then %d", name, len(want.Orbitals), len(got.Orbitals))
	}
	for i, w := range want.Orbitals {
		g := got.Orbitals[i]
		for f, c := range w.Coefficients {
			if math.Abs(c-g.Coefficients[f]) > tolerance {
				t.Fatalf("%s: %s, copy %d, partner %d was\n%v and becomes\n%v", name,
					want.Irreps[w.Irrep].Label, w.Copy+1, w.Partner+1, w.Coefficients, g.Coefficients)
			}
		}
	}
}

// The atoms may come in any order: content stays, and so does everything that
// a projection must have.
func TestOrderOfAtomsKeepsTheContent(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	for _, m := range examples(t) {
		want := contentOf(project(t, basis(t, detected(t, m, mgl64.Ident3(), mgl64.Vec3{}, inOrder(len(m.places))), m.choice...)))
		for range 5 {
			order := rng.Perm(len(m.places))
			b := basis(t, detected(t, m, randomOrthogonal(rng, false), mgl64.Vec3{1, 2, 3}, order), m.choice...)
			p := project(t, b)
			if got := contentOf(p); fmt.Sprint(got) != fmt.Sprint(want) {
				t.Errorf("%s: %v becomes %v", m.name, want, got)
			}
			if r, err := b.Representation(); err == nil {
				checkProjection(t, r, p)
			}
		}
	}
}

// A deformation within the group moves the coefficients by no more than itself:
// copies of one irrep do not change places or mix anew. Sites in general
// positions and on mirror planes askew in the frame are where they could.
func TestCopiesDoNotJumpUnderSmallDisplacements(t *testing.T) {
	rng := rand.New(rand.NewPCG(13, 14))
	const step = 1e-4
	for _, symbol := range everyFamily {
		group := setting(t, symbol)
		for trial := range 4 {
			p := mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.Normalize().Mul(2.5)
			q := p.Add(mgl64.Vec3{rng.Float64(), rng.Float64(), rng.Float64()}.Mul(step))
			if trial%2 == 1 { // on a plane
				for _, op := range group.Operations {
					if op.Turn.Improper && op.Turn.Num == 0 {
						p = p.Sub(op.Axis.Mul(op.Axis.Dot(p)))
						q = q.Sub(op.Axis.Mul(op.Axis.Dot(q)))
						break
					}
				}
			}
			here, there := orbitAt(group, p), make([]mgl64.Vec3, 0)
			for _, h := range here { // in the same order
				for _, r := range orbitAt(group, q) {
					if r.Sub(h).Len() < 10*step {
						there = append(there, r)
					}
				}
			}
			if len(there) != len(here) || len(here) > 60 {
				continue
			}
			for _, choice := range []string{"all:p", "all:sigma,pi"} {
				a := project(t, basis(t, sitesAt(t, symbol, carbon, here), choice))
				b := project(t, basis(t, sitesAt(t, symbol, carbon, there), choice))
				compareProjections(t, symbol+" "+choice, a, b, 100*step)
			}
		}
	}
}

// Axial and equatorial functions share A1′ and stay apart, and so do σ and π
// of a tetrahedron in T2.
func TestOrbitsAndKindsStayApart(t *testing.T) {
	s3 := math.Sqrt(3) / 2
	bipyramid := sitesAt(t, "D3h", fluorine, []mgl64.Vec3{{1, 0, 0}, {-.5, s3, 0}, {-.5, -s3, 0}, {0, 0, 1.2}, {0, 0, -1.2}})
	p := project(t, basis(t, bipyramid, "F:sigma"))
	for copy, axial := range []bool{false, true} {
		for i, c := range partnersOf(t, p, "A1'", copy)[0] {
			if (i >= 3) != axial && c != 0 {
				t.Errorf("copy %d of A1' has %g on atom %d", copy+1, c, i+1)
			}
		}
	}
	tetrahedron := sitesAt(t, "Td", fluorine, []mgl64.Vec3{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}})
	b := basis(t, tetrahedron, "F:pi,sigma,s")
	p = project(t, b)
	for copy, kind := range []Kind{KindPi, KindSigma, KindS} {
		for _, partner := range partnersOf(t, p, "T2", copy) {
			for i, c := range partner {
				if b.Functions[i].Kind != kind && c != 0 {
					t.Errorf("copy %d of T2 holds %s", copy+1, b.Functions[i].Name)
				}
			}
		}
	}
	// In the plane of a triangle, px and py fall into radial and tangential
	// copies of E′, though no atom but one has them along the axes.
	triangle := sitesAt(t, "D3h", fluorine, []mgl64.Vec3{{-.5, s3, 0}, {-.5, -s3, 0}, {1, 0, 0}})
	b = basis(t, triangle, "F:px,py")
	p = project(t, b)
	for copy := range 2 {
		radial, all := 0.0, 0.0
		for _, partner := range partnersOf(t, p, "E'", copy) {
			for atom, place := range triangle.Positions {
				place = place.Normalize()
				along := 0.0
				for i, f := range b.Functions {
					if f.Site == atom {
						along += partner[i] * dot(f.Vector, place[:])
						all += partner[i] * partner[i]
					}
				}
				radial += along * along
			}
		}
		if share := radial / all; math.Abs(share-math.Round(share)) > 1e-12 {
			t.Errorf("copy %d of E' is radial to %g", copy+1, share)
		}
	}
}

func TestPairOfComplexConjugates(t *testing.T) {
	// Three s functions in C3: partner 1 is the first function's, partner 2
	// what a turn makes of it.
	three := sitesAt(t, "C3", carbon, []mgl64.Vec3{{1, 0, 0.2}, {-.5, math.Sqrt(3) / 2, 0.2}, {-.5, -math.Sqrt(3) / 2, 0.2}})
	p := project(t, basis(t, three, "C:s"))
	partners := partnersOf(t, p, "E", 0)
	want := [][]float64{{2 / math.Sqrt(6), -1 / math.Sqrt(6), -1 / math.Sqrt(6)}, {0, 1 / math.Sqrt(2), -1 / math.Sqrt(2)}}
	for k := range want {
		for i, c := range want[k] {
			if math.Abs(partners[k][i]-c) > 1e-14 {
				t.Errorf("partner %d: %v, want %v", k+1, partners[k], want[k])
			}
		}
	}
	if got := contentOf(p); got["E"] != 1 || got["A"] != 1 {
		t.Errorf("content %v", got)
	}
}

func TestResultsAreTheSameEveryTime(t *testing.T) {
	s := cage60(t)
	var first string
	for range 3 {
		p := project(t, basis(t, s, "all:p"))
		text := fmt.Sprint(p.Orbitals)
		if first == "" {
			first = text
		}
		if text != first {
			t.Fatal("the same input has given other bytes")
		}
	}
}
