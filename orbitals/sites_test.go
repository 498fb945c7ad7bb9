package orbitals

import (
	"math"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// The core is a pyramid XeF3 in C3v; three hydrogens follow it nearly, a carbon
// does not.
func TestSpectatorsHaveImagesWhereTheyNearlyFollow(t *testing.T) {
	read := &structure.Molecule{}
	add := func(e structure.Element, p mgl64.Vec3) {
		read.Atoms = append(read.Atoms, structure.Atom{Element: e, Position: p})
	}
	around := func(e structure.Element, r, z, turn, wobble float64) {
		for k := range 3 {
			a := turn + 2*math.Pi*float64(k)/3
			add(e, mgl64.Vec3{r*math.Cos(a) + wobble*float64(k), r * math.Sin(a), z})
		}
	}
	around(hydrogen, 2.6, -0.8, 0.3, 0.004)
	add(xenon, mgl64.Vec3{0, 0, 0.5})
	add(carbon, mgl64.Vec3{3, 2, 2})
	around(fluorine, 1.5, 0, 0.3, 0)
	core := []int{3, 5, 6, 7}
	var points []symmetry.Point
	for _, k := range core {
		points = append(points, symmetry.Point{Position: read.Atoms[k].Position, Kind: int(read.Atoms[k].Element)})
	}
	fit, err := symmetry.Detect(points, nil, symmetry.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if fit.Setting.Symbol != "C3v" {
		t.Fatal(fit.Setting.Symbol)
	}
	s, err := NewSites(fit, core, read, nil)
	if err != nil {
		t.Fatal(err)
	}
	for r, op := range fit.Setting.Operations {
		for k, p := range s.Positions {
			j := s.Permutations[r][k]
			switch {
			case k == 4:
				if op.Name != "E" && j >= 0 {
					t.Errorf("%s carries the carbon to atom %d", op.Name, j+1)
				}
			case j < 0:
				t.Errorf("%s has no image of atom %d", op.Name, k+1)
			case op.Matrix.Mul3x1(p).Sub(s.Positions[j]).Len() > fit.Tolerance || s.Elements[j] != s.Elements[k]:
				t.Errorf("%s carries atom %d to atom %d", op.Name, k+1, j+1)
			}
		}
	}
	// Directions on spectators are exact all the same.
	b := basis(t, s, "H:pi", "F:sigma")
	r, err := b.Representation()
	if err != nil {
		t.Fatal(err)
	}
	checkProjection(t, r, project(t, b))
	if _, err := NewBasis(s, parse(t, "5:s")...); err == nil || !strings.Contains(err.Error(), "spectator") {
		t.Errorf("the carbon: %v", err)
	}
	if _, err := NewSites(fit, core[1:], read, nil); err == nil {
		t.Error("a core that does not fit is accepted")
	}
}

func TestRepresentationsFromBlocksAreChecked(t *testing.T) {
	s := setting(t, "C2")
	one := mat.NewDense(1, 1, []float64{1})
	for what, make := range map[string]func() (*Representation, error){
		"one permutation": func() (*Representation, error) {
			return NewRepresentation(s, [][]int{{0}}, []*mat.Dense{one, one})
		},
		"one block": func() (*Representation, error) {
			return NewRepresentation(s, [][]int{{0}, {0}}, []*mat.Dense{one})
		},
		"no permutation": func() (*Representation, error) {
			return NewRepresentation(s, [][]int{{0, 1}, {1, 1}}, []*mat.Dense{one, one})
		},
		"a site outside": func() (*Representation, error) {
			return NewRepresentation(s, [][]int{{0, 1}, {1, 2}}, []*mat.Dense{one, one})
		},
		"unequal blocks": func() (*Representation, error) {
			return NewRepresentation(s, [][]int{{0}, {0}}, []*mat.Dense{one, mat.NewDense(2, 2, nil)})
		},
		"a block that is not orthogonal": func() (*Representation, error) {
			return NewRepresentation(s, [][]int{{0}, {0}}, []*mat.Dense{one, mat.NewDense(1, 1, []float64{2})})
		},
	} {
		if _, err := make(); err == nil {
			t.Errorf("%s: accepted", what)
		}
	}
	// Permutations that do not follow each other as the operations do.
	three := setting(t, "C3")
	r, err := NewRepresentation(three, [][]int{{0, 1}, {1, 0}, {0, 1}}, []*mat.Dense{one, one, one})
	if err == nil {
		_, err = Project(r)
	}
	if err == nil {
		t.Error("permutations that are no representation are projected")
	}
}

func TestLedgerRefusesWhatDoesNotExist(t *testing.T) {
	r, err := basis(t, square(t), "F:s").Representation()
	if err != nil {
		t.Fatal(err)
	}
	eu := irrepNamed(t, r.Setting(), "Eu")
	for _, c := range []struct {
		function, irrep int
		element         [2]int
	}{{-1, 0, ByCharacter}, {4, 0, ByCharacter}, {0, -1, ByCharacter}, {0, 10, ByCharacter}, {0, eu, [2]int{2, 0}}, {0, eu, [2]int{0, -1}}, {0, 0, [2]int{0, 1}}} {
		if _, err := r.Ledger(c.function, c.irrep, c.element); err == nil {
			t.Errorf("%+v is accepted", c)
		}
	}
}

// The last sum of a ledger, times d/h, is P_kl f: what the coefficients of the
// group orbitals say it is.
func TestLedgerEndsInTheProjectedFunction(t *testing.T) {
	for _, choice := range []string{"F:sigma", "F:pi", "Xe:d"} {
		b := basis(t, square(t), choice)
		r, err := b.Representation()
		if err != nil {
			t.Fatal(err)
		}
		p := project(t, b)
		for a, irrep := range p.Irreps {
			for f := range b.Functions {
				for k := range irrep.Dimension {
					for l := range irrep.Dimension {
						ledger, err := r.Ledger(f, a, [2]int{k, l})
						if err != nil {
							t.Fatal(err)
						}
						want := make([]float64, r.Size())
						for i, g := range p.Orbitals {
							if g.Irrep == a && g.Partner == l { // the same copy's partner k stands k − l further on
								add(want, g.Coefficients[f]*float64(r.Setting().Order())/float64(irrep.Dimension), p.Orbitals[i+k-l].Coefficients)
							}
						}
						last := ledger.Rows[len(ledger.Rows)-1].Sum
						for i := range want {
							if math.Abs(last[i]-want[i]) > 1e-12 {
								t.Fatalf("%s, function %d, %s [%d,%d]: %v, want %v", choice, f+1, irrep.Label, k+1, l+1, last, want)
							}
						}
						if norm := math.Sqrt(dot(last, last)); math.Abs(norm-ledger.Norm) > 1e-14 || norm < 1e-9 && ledger.Norm != 0 {
							t.Errorf("norm %g, want %g", ledger.Norm, norm)
						}
					}
				}
			}
		}
	}
}
