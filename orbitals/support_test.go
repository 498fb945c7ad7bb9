package orbitals

import (
	"math"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// settings keeps the settings that tests have made.
var settings = map[string]*symmetry.Setting{}

func setting(t testing.TB, symbol string) *symmetry.Setting {
	t.Helper()
	if s := settings[symbol]; s != nil {
		return s
	}
	s, err := symmetry.New(symbol)
	if err != nil {
		t.Fatal(err)
	}
	settings[symbol] = s
	return s
}

const (
	carbon   structure.Element = 6
	fluorine structure.Element = 9
	xenon    structure.Element = 54
)

// sitesAt are atoms of one element, and optionally one at the origin first,
// that have the group in its standard axes. The places are made exact.
func sitesAt(t testing.TB, symbol string, element structure.Element, positions []mgl64.Vec3) *Sites {
	t.Helper()
	s := &Sites{Setting: setting(t, symbol)}
	for _, p := range positions {
		s.Positions = append(s.Positions, p)
		s.Elements = append(s.Elements, element)
	}
	permute(t, s)
	return s
}

// permute finds the permutations of the atoms and moves the atoms to the mean
// of what the operations say.
func permute(t testing.TB, s *Sites) {
	t.Helper()
	s.Permutations = nil
	mean := make([]mgl64.Vec3, len(s.Positions))
	for _, op := range s.Setting.Operations {
		permutation := make([]int, len(s.Positions))
		for k, p := range s.Positions {
			image, found := op.Matrix.Mul3x1(p), -1
			for j, q := range s.Positions {
				if s.Elements[j] == s.Elements[k] && q.Sub(image).Len() < 1e-3 {
					found = j
				}
			}
			if found < 0 {
				t.Fatalf("%s of %s has no image of atom %d at %v", op.Name, s.Setting.Symbol, k+1, p)
			}
			permutation[k] = found
			mean[k] = mean[k].Add(op.Matrix.Transpose().Mul3x1(s.Positions[found]).Mul(1 / float64(s.Setting.Order())))
		}
		s.Permutations = append(s.Permutations, permutation)
	}
	if !s.Setting.Infinite() {
		s.Positions = mean
	}
}

func parse(t testing.TB, texts ...string) []Choice {
	t.Helper()
	var out []Choice
	for _, text := range texts {
		c, err := ParseChoice(text)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, c)
	}
	return out
}

func basis(t testing.TB, s *Sites, choices ...string) *Basis {
	t.Helper()
	b, err := NewBasis(s, parse(t, choices...)...)
	if err != nil {
		t.Fatalf("%v: %v", choices, err)
	}
	return b
}

func project(t testing.TB, b *Basis) *Projection {
	t.Helper()
	p, err := b.Project()
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// contentOf lists the copies by label.
func contentOf(p *Projection) map[string]int {
	out := map[string]int{}
	for a, copies := range p.Content {
		if copies > 0 {
			out[p.Irreps[a].Label] = copies
		}
	}
	return out
}

// partnersOf returns the coefficients of the partners of a copy.
func partnersOf(t testing.TB, p *Projection, label string, copy int) [][]float64 {
	t.Helper()
	var out [][]float64
	for _, g := range p.Orbitals {
		if p.Irreps[g.Irrep].Label == label && g.Copy == copy {
			out = append(out, g.Coefficients)
		}
	}
	if len(out) == 0 {
		t.Fatalf("there is no copy %d of %s", copy+1, label)
	}
	return out
}

// tight is what orthonormality and transformation are held to: a hundred times
// better than what is promised a person.
const tight = 1e-12

// checkProjection holds what must be true of every projection: as many group
// orbitals as functions, orthonormal, each on one orbit, the sign as ruled, and
// partners that go into each other with exactly the matrices of the irrep.
func checkProjection(t testing.TB, r *Representation, p *Projection) {
	t.Helper()
	if len(p.Orbitals) != r.Size() {
		t.Fatalf("%d group orbitals of %d functions", len(p.Orbitals), r.Size())
	}
	for i, g := range p.Orbitals {
		for j := range i + 1 {
			want := 0.0
			if i == j {
				want = 1
			}
			if got := dot(g.Coefficients, p.Orbitals[j].Coefficients); math.Abs(got-want) > tight {
				t.Fatalf("group orbitals %d and %d have the scalar product %g", i+1, j+1, got)
			}
		}
		for f, c := range g.Coefficients {
			if c != 0 && r.orbits[f] != g.Orbit {
				t.Fatalf("group orbital %d leaves its orbit", i+1)
			}
		}
	}
	for i := 0; i < len(p.Orbitals); {
		irrep := p.Irreps[p.Orbitals[i].Irrep]
		partners := p.Orbitals[i : i+irrep.Dimension]
		checkSign(t, irrep.Label, partners[0].Coefficients)
		for op := range r.setting.Operations {
			for k, partner := range partners {
				if partner.Partner != k || partner.Copy != partners[0].Copy {
					t.Fatalf("the partners of %s are not together", irrep.Label)
				}
				image := r.Apply(op, partner.Coefficients)
				for f := range image {
					want := 0.0
					for l := range partners {
						want += irrep.Matrices[op].At(l, k) * partners[l].Coefficients[f]
					}
					if math.Abs(image[f]-want) > tight {
						t.Fatalf("%s of %s: partner %d of copy %d of %s becomes %g at function %d, not %g",
							r.setting.Operations[op].Name, r.setting.Symbol, k+1, partner.Copy+1, irrep.Label, image[f], f+1, want)
					}
				}
			}
		}
		i += irrep.Dimension
	}
}

func checkSign(t testing.TB, label string, c []float64) {
	t.Helper()
	largest := 0.0
	for _, x := range c {
		largest = math.Max(largest, math.Abs(x))
	}
	for _, x := range c {
		if math.Abs(x) > largest-1e-9 {
			if x < 0 {
				t.Errorf("%s: the first of the largest coefficients is negative in %v", label, c)
			}
			return
		}
	}
}

// shellRepresentation is that of the real harmonics of degree l on an atom at
// the origin, by order m.
func shellRepresentation(t testing.TB, group string, l int) *Representation {
	t.Helper()
	s := setting(t, group)
	var permutations [][]int
	var blocks []*mat.Dense
	for _, op := range s.Operations {
		permutations = append(permutations, []int{0})
		blocks = append(blocks, RotationByM(l, op.Matrix))
	}
	r, err := NewRepresentation(s, permutations, blocks)
	if err != nil {
		t.Fatal(err)
	}
	return r
}
