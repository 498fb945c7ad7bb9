package orbitals

import (
	"math"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry"
)

type coefficientsFile struct {
	Cases []struct {
		Name, Group, Functions string
		Positions              []mgl64.Vec3
		GroupOrbitals          []textbookOrbital
		Complete               bool
	}
}

type textbookOrbital struct {
	Irrep, TransformsAs string
	Partner             int
	Coefficients        []float64
}

// The textbook sets of group orbitals. A copy has one free sign; where an irrep
// occurs several times only the span is defined; partners that are said to
// transform as functions must be those of our partner with these functions,
// others span the same space.
func TestTextbookCoefficients(t *testing.T) {
	var file coefficientsFile
	readCheckValues(t, "coefficients.json", &file)
	if len(file.Cases) < 20 {
		t.Fatal("cases are missing")
	}
	for _, c := range file.Cases {
		t.Run(c.Name, func(t *testing.T) {
			s := sitesAt(t, c.Group, carbon, c.Positions)
			choice := "all:s"
			switch {
			case c.Name == "octahedron pi":
				choice = "all:pi"
			case strings.HasPrefix(c.Functions, "pz"):
				choice = "all:pz"
			case strings.HasPrefix(c.Functions, "one function a site"):
				choice = "all:sigma"
			}
			b := basis(t, s, choice)
			p := project(t, b)
			byIrrep := map[string][]textbookOrbital{}
			total := 0
			for _, o := range c.GroupOrbitals {
				if c.Name == "octahedron pi" {
					o.Coefficients = inPi(b, o.Coefficients)
				}
				byIrrep[o.Irrep] = append(byIrrep[o.Irrep], o)
				total++
			}
			if c.Complete && total != len(p.Orbitals) {
				t.Errorf("%d group orbitals, want %d", len(p.Orbitals), total)
			}
			for label, want := range byIrrep {
				compareIrrep(t, p, label, want)
			}
		})
	}
}

// inPi writes coefficients of p functions along the axes square to the line to
// the origin (1y 1z 2y 2z 3x 3z 4x 4z 5x 5y 6x 6y) as coefficients of pi1, pi2.
func inPi(b *Basis, c []float64) []float64 {
	axes := []int{1, 2, 1, 2, 0, 2, 0, 2, 0, 1, 0, 1}
	out := make([]float64, len(b.Functions))
	for i, f := range b.Functions {
		for k := 2 * f.Site; k < 2*f.Site+2; k++ {
			out[i] += c[k] * f.Direction[axes[k]]
		}
	}
	return out
}

func compareIrrep(t *testing.T, p *Projection, label string, want []textbookOrbital) {
	t.Helper()
	var irrep symmetry.Irrep
	var ours [][]float64
	for _, g := range p.Orbitals {
		if p.Irreps[g.Irrep].Label == label {
			irrep = p.Irreps[g.Irrep]
			ours = append(ours, g.Coefficients)
		}
	}
	if len(ours) != len(want) {
		t.Fatalf("%s: %d group orbitals, want %d", label, len(ours), len(want))
	}
	for _, w := range want {
		square := 0.0
		for _, o := range ours {
			square += math.Pow(dot(o, w.Coefficients), 2)
		}
		if math.Abs(square-1) > 1e-12 {
			t.Errorf("%s, partner %d: %g of the textbook's orbital lies in ours", label, w.Partner, square)
		}
	}
	if len(ours) != irrep.Dimension || want[0].TransformsAs == "" {
		return
	}
	sign := 0.0
	for _, w := range want {
		partner, factor, ok := partnerLike(irrep, w.TransformsAs)
		if !ok {
			t.Fatalf("%s has no partner like %s", label, w.TransformsAs)
		}
		overlap := factor * dot(ours[partner], w.Coefficients)
		if math.Abs(math.Abs(overlap)-1) > 1e-12 || sign*overlap < 0 {
			t.Errorf("%s like %s: overlap with ours %g, sign of the copy %g", label, w.TransformsAs, overlap, sign)
		}
		sign = overlap
	}
}

// partnerLike finds the partner of an irrep that transforms like a function,
// and the sign with which it does.
func partnerLike(irrep symmetry.Irrep, function string) (partner int, sign float64, ok bool) {
	full := map[string]string{"z2": "2z2-x2-y2"}
	if irrep.Dimension > 1 && full[function] != "" {
		function = full[function]
	}
	for k, list := range irrep.Functions {
		for _, f := range list {
			sign = 1
			if rest, minus := strings.CutPrefix(f, "-"); minus {
				f, sign = rest, -1
			}
			for _, factor := range []string{"", "2", "√3", "2√3"} {
				if f == factor+function || f == factor+"("+function+")" {
					return k, sign, true
				}
			}
		}
	}
	return 0, 0, false
}

// Ammonia's three hydrogen s functions in C3v, worked by hand. The first atom
// lies in the xz plane; the atoms stand at 0°, 120° and 240°.
//
//	χ: E 3, C3 0, σv 1; n(A1) = (1·3·1 + 2·0·1 + 3·1·1)/6 = 1,
//	n(A2) = (3 − 3)/6 = 0, n(E) = (2·3 + 2·(−1)·0 + 3·0·1)/6 = 1.
//
// With D(R) that of x and y: D_11 is 1 for E, −1/2 for C3 and C3², and for the
// planes at 0°, 60° and 120° cos(2·0°) = 1, cos 120° = −1/2, cos 240° = −1/2.
// The images of φ1 are φ1 (E), φ2, φ3 (C3, C3²), φ1 (plane at 0°), and by the
// other planes φ2 (the one at 60°, since 2·60° − 0° = 120°) and φ3. So
//
//	Σ D_11(R) R φ1 = φ1 − ½φ2 − ½φ3 + φ1 − ½φ2 − ½φ3 = 2φ1 − φ2 − φ3,
//
// normalized (2φ1 − φ2 − φ3)/√6. D_21 is sin 120° = √3/2 for C3, −√3/2 for C3²,
// sin(2α) for the planes: 0, √3/2 (60°), −√3/2 (120°):
//
//	Σ D_21(R) R φ1 = (√3/2)(φ2 − φ3) + (√3/2)(φ2 − φ3) = √3(φ2 − φ3),
//
// and with the factor of partner 1, (d/h)/(norm) = 1/√6: (√3/√6)(φ2 − φ3)
// = (φ2 − φ3)/√2.
func TestAmmoniaByHand(t *testing.T) {
	s3 := math.Sqrt(3) / 2
	s := sitesAt(t, "C3v", hydrogen, []mgl64.Vec3{{1, 0, -0.3}, {-0.5, s3, -0.3}, {-0.5, -s3, -0.3}})
	b := basis(t, s, "H:s")
	p := project(t, b)
	want := map[string][][]float64{
		"A1": {{1 / math.Sqrt(3), 1 / math.Sqrt(3), 1 / math.Sqrt(3)}},
		"E":  {{2 / math.Sqrt(6), -1 / math.Sqrt(6), -1 / math.Sqrt(6)}, {0, 1 / math.Sqrt(2), -1 / math.Sqrt(2)}},
	}
	for label, partners := range want {
		for k, got := range partnersOf(t, p, label, 0) {
			for i := range got {
				if math.Abs(got[i]-partners[k][i]) > 1e-14 {
					t.Errorf("%s, partner %d: %v, want %v", label, k+1, got, partners[k])
				}
			}
		}
	}
	if len(p.Orbitals) != 3 {
		t.Errorf("%d group orbitals, want 3", len(p.Orbitals))
	}
	r, err := b.Representation()
	if err != nil {
		t.Fatal(err)
	}
	for _, a := range []struct {
		label   string
		element [2]int
		sum     []float64
	}{
		{"A1", [2]int{0, 0}, []float64{2, 2, 2}},
		{"A2", [2]int{0, 0}, []float64{0, 0, 0}},
		{"E", [2]int{0, 0}, []float64{2, -1, -1}},
		{"E", [2]int{1, 0}, []float64{0, math.Sqrt(3), -math.Sqrt(3)}},
		{"E", [2]int{0, 1}, []float64{0, 0, 0}},
		{"E", ByCharacter, []float64{2, -1, -1}},
	} {
		irrep := irrepNamed(t, s.Setting, a.label)
		ledger, err := r.Ledger(0, irrep, a.element)
		if err != nil {
			t.Fatal(err)
		}
		if len(ledger.Rows) != 6 {
			t.Fatalf("%d rows, want one an operation", len(ledger.Rows))
		}
		last := ledger.Rows[5].Sum
		for i := range last {
			if math.Abs(last[i]-a.sum[i]) > 1e-14 {
				t.Errorf("%s %v: sum %v, want %v", a.label, a.element, last, a.sum)
			}
		}
		if want := math.Sqrt(dot(a.sum, a.sum)); math.Abs(ledger.Norm-want) > 1e-14 || want == 0 && ledger.Norm != 0 {
			t.Errorf("%s %v: norm %g, want %g", a.label, a.element, ledger.Norm, want)
		}
	}
}

func irrepNamed(t testing.TB, s *symmetry.Setting, label string) int {
	t.Helper()
	for a, irrep := range s.Irreps {
		if irrep.Label == label {
			return a
		}
	}
	t.Fatalf("%s has no irrep %s", s.Symbol, label)
	return 0
}

func TestDisplacementsAreProjectedLikeFunctions(t *testing.T) {
	// A tetrahedron of four atoms alone: the 12 displacements hold
	// A1 + E + T1 + 2T2, of which T1 turns and one T2 shifts the whole
	// (E. B. Wilson, J. Chem. Phys. 2, 432 (1934); content from memory).
	s := sitesAt(t, "Td", carbon, []mgl64.Vec3{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}})
	var blocks []*mat.Dense
	for _, op := range s.Setting.Operations {
		block := mat.NewDense(3, 3, nil)
		for i := range 3 {
			for k := range 3 {
				block.Set(i, k, op.Matrix.At(i, k))
			}
		}
		blocks = append(blocks, block)
	}
	r, err := NewRepresentation(s.Setting, s.Permutations, blocks)
	if err != nil {
		t.Fatal(err)
	}
	p, err := Project(r)
	if err != nil {
		t.Fatal(err)
	}
	checkProjection(t, r, p)
	got := contentOf(p)
	for label, copies := range map[string]int{"A1": 1, "E": 1, "T1": 1, "T2": 2} {
		if got[label] != copies {
			t.Errorf("content %v", got)
		}
	}
	// p functions are carried like displacements.
	q := project(t, basis(t, s, "C:p"))
	for i, g := range q.Orbitals {
		for k, c := range g.Coefficients {
			if math.Abs(c-p.Orbitals[i].Coefficients[k]) > tight {
				t.Fatalf("orbital %d of p functions is not that of displacements", i+1)
			}
		}
	}
}
