package symmetry

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// everyGroup lists the finite groups with n up to a limit.
func everyGroup(most int) []string {
	list := []string{"C1", "Cs", "Ci", "T", "Td", "Th", "O", "Oh", "I", "Ih"}
	for n := 2; n <= most; n++ {
		for _, form := range []string{"C%d", "C%dv", "C%dh", "D%d", "D%dh", "D%dd"} {
			list = append(list, fmt.Sprintf(form, n))
		}
		list = append(list, fmt.Sprintf("S%d", 2*n))
	}
	kept := list[:0]
	for _, g := range list {
		if _, err := New(g); err == nil { // S2n with odd n is S6, S10 …, all there
			kept = append(kept, g)
		}
	}
	return kept
}

func TestOperationsFormAGroup(t *testing.T) {
	for _, symbol := range everyGroup(24) {
		s := mustNew(t, symbol)
		names := map[string]bool{}
		for a, o := range s.Operations {
			if names[o.Name] {
				t.Errorf("%s: two operations are called %s", symbol, o.Name)
			}
			names[o.Name] = true
			if d := math.Abs(math.Abs(o.Matrix.Det()) - 1); d > 1e-14 {
				t.Errorf("%s, %s: determinant off by %g", symbol, o.Name, d)
			}
			if l := o.Axis.Len(); l != 0 && math.Abs(l-1) > 1e-14 || (l == 0) != (o.Name == "E" || o.Name == "i") {
				t.Errorf("%s, %s: axis of length %g", symbol, o.Name, l)
			}
			if s.Product(a, s.Inverse(a)) != 0 {
				t.Errorf("%s, %s: no inverse", symbol, o.Name)
			}
			for b, q := range s.Operations {
				if !equalTo(o.Matrix.Mul3(q.Matrix), s.Operations[s.Product(a, b)].Matrix, 1e-14) {
					t.Fatalf("%s: the product of %s and %s is wrong", symbol, o.Name, q.Name)
				}
			}
		}
		if s.Operations[0].Name != "E" {
			t.Errorf("%s begins with %s", symbol, s.Operations[0].Name)
		}
	}
}

// Cn^k(a) is the k-th power of Cn(a), and Sn^k(a) that of Sn(a).
func TestPowersAreNamedAfterTheirBase(t *testing.T) {
	for _, symbol := range everyGroup(12) {
		s := mustNew(t, symbol)
		at := map[string]int{}
		for i, o := range s.Operations {
			at[o.Name] = i
		}
		for i, o := range s.Operations {
			base, rest, found := strings.Cut(o.Name, "^")
			if !found {
				continue
			}
			digits, bracket, _ := strings.Cut(rest, "(")
			first, ok := at[base+"("+bracket]
			if !ok {
				t.Fatalf("%s: %s without its base", symbol, o.Name)
			}
			p := first
			for range atoi(digits) - 1 {
				p = s.Product(p, first)
			}
			if p != i {
				t.Errorf("%s: %s is not that power of %s", symbol, o.Name, s.Operations[first].Name)
			}
		}
	}
}

func TestClassesAreThoseOfConjugation(t *testing.T) {
	for _, symbol := range everyGroup(12) {
		s := mustNew(t, symbol)
		count := 0
		for c, class := range s.Classes {
			count += len(class.Members)
			for _, m := range class.Members {
				if s.Operations[m].Class != c {
					t.Errorf("%s: %s is not in its class", symbol, s.Operations[m].Name)
				}
				for x := range s.Operations {
					if y := s.Product(s.Product(x, m), s.Inverse(x)); s.Operations[y].Class != c {
						t.Fatalf("%s: %s and %s are conjugate", symbol, s.Operations[m].Name, s.Operations[y].Name)
					}
				}
			}
		}
		if count != s.Order() {
			t.Errorf("%s: classes of %d operations, not %d", symbol, count, s.Order())
		}
	}
}

func TestIrrepsAreOrthogonalRepresentations(t *testing.T) {
	for _, symbol := range everyGroup(24) {
		s := mustNew(t, symbol)
		sum := 0
		for _, ir := range s.Irreps {
			sum += ir.Dimension * ir.Dimension
			if ir.ComplexPair {
				sum -= 2 // two of dimension 1, not one of 2
			}
			d := ir.Dimension
			flat := make([][]float64, s.Order())
			for a, m := range ir.Matrices {
				flat[a] = m.RawMatrix().Data
				if x := mat.Trace(m); math.Abs(x-ir.Characters[s.Operations[a].Class]) > 1e-12 {
					t.Fatalf("%s %s: trace %v of %s is not its character", symbol, ir.Label, x, s.Operations[a].Name)
				}
			}
			worst := 0.0
			for a := range flat {
				for b := range flat {
					c := flat[s.Product(a, b)]
					for i := 0; i < d; i++ {
						for j := 0; j < d; j++ {
							x := -c[i*d+j]
							y := 0.0 // of D·Dᵀ
							for k := 0; k < d; k++ {
								x += flat[a][i*d+k] * flat[b][k*d+j]
								y += flat[a][i*d+k] * flat[a][j*d+k]
							}
							if i == j {
								y--
							}
							worst = math.Max(worst, math.Max(math.Abs(x), math.Abs(y)))
						}
					}
				}
			}
			if worst > 1e-12 {
				t.Errorf("%s %s: off by %g", symbol, ir.Label, worst)
			}
		}
		if sum != s.Order() {
			t.Errorf("%s: Σ d² = %d, order %d", symbol, sum, s.Order())
		}
	}
}

func TestCharactersAreOrthogonal(t *testing.T) {
	for _, symbol := range everyGroup(24) {
		s := mustNew(t, symbol)
		labels := map[string]bool{}
		for i, a := range s.Irreps {
			if labels[a.Label] {
				t.Errorf("%s: two irreps are called %s", symbol, a.Label)
			}
			labels[a.Label] = true
			for j, b := range s.Irreps {
				sum := 0.0
				for c, class := range s.Classes {
					sum += float64(len(class.Members)) * a.Characters[c] * b.Characters[c]
				}
				want := 0.0
				if i == j {
					want = float64(s.Order())
					if a.ComplexPair {
						want *= 2
					}
				}
				if math.Abs(sum-want) > 1e-9 {
					t.Errorf("%s: ⟨%s|%s⟩ = %v, want %v", symbol, a.Label, b.Label, sum, want)
				}
			}
		}
	}
}

// What the functions printed beside an irrep do under every operation is what
// its matrices say: f_k(R⁻¹r) = Σ_l D_lk f_l(r).
func TestFunctionsTransformWithTheMatrices(t *testing.T) {
	for _, symbol := range everyGroup(12) {
		s := mustNew(t, symbol)
		for _, ir := range s.Irreps {
			for set := range ir.Functions[0] {
				for r, o := range s.Operations {
					for k := range ir.Functions {
						for _, at := range places[:4] {
							left, axial := valueOf(ir.Functions[k][set], o.Matrix.Transpose().Mul3x1(at))
							if axial && o.Turn.Improper {
								left = -left
							}
							right := 0.0
							for l := range ir.Functions {
								v, _ := valueOf(ir.Functions[l][set], at)
								right += ir.Matrices[r].At(l, k) * v
							}
							if math.Abs(left-right) > 1e-10 {
								t.Fatalf("%s %s: %s under %s", symbol, ir.Label, ir.Functions[k][set], o.Name)
							}
						}
					}
				}
			}
		}
	}
}

// The partners that the conventions name: (x, y), (xz, yz); cubic E as
// (z², x²−y²) and T2 as (yz, xz, xy).
func TestPartnersStandInTheConventionalOrder(t *testing.T) {
	for _, c := range []struct {
		group, irrep string
		contains     []string
	}{
		{"D3h", "E'", []string{"x", "y"}}, {"D3h", "E''", []string{"xz", "yz"}}, {"D4h", "Eg", []string{"xz", "yz"}},
		{"D3d", "Eg", []string{"xz", "yz"}}, {"D2d", "E", []string{"x", "y"}}, {"C3v", "E", []string{"x", "y"}},
		{"D6h", "E2g", []string{"x2-y2", "2xy"}}, {"D4d", "E3", []string{"xz", "yz"}}, {"S8", "E1", []string{"x", "y"}},
		{"Oh", "Eg", []string{"2z2-x2-y2", "√3(x2-y2)"}}, {"Oh", "T2g", []string{"yz", "xz", "xy"}}, {"Oh", "T1u", []string{"x", "y", "z"}},
		{"Td", "T2", []string{"x", "y", "z"}}, {"Td", "T2", []string{"yz", "xz", "xy"}}, {"Td", "T1", []string{"Rx", "Ry", "Rz"}},
		{"Ih", "T1u", []string{"x", "y", "z"}}, {"D3h", "E'", []string{"x2-y2", "-2xy"}}, {"C3v", "E", []string{"Ry", "-Rx"}},
	} {
		s := mustNew(t, c.group)
		found := false
		for _, ir := range s.Irreps {
			if ir.Label != c.irrep {
				continue
			}
			for set := range ir.Functions[0] {
				all := true
				for p := range c.contains {
					all = all && ir.Functions[p][set] == c.contains[p]
				}
				found = found || all
			}
		}
		if !found {
			t.Errorf("%s %s: no partners %q", c.group, c.irrep, c.contains)
		}
	}
}

func TestUnknownSymbolsAreRefusedWithTheUsualOne(t *testing.T) {
	for symbol, want := range map[string]string{
		"": "unknown", "D": "unknown", "C0": "unknown", "C-2": "unknown", "Q4": "unknown", "C2x": "unknown", "C02": "unknown", "D4hh": "unknown", "D4vh": "unknown",
		"S3": "C3h", "S2": "Ci", "S1": "Cs", "C1v": "Cs", "C1h": "Cs", "D1": "C2", "D1h": "C2v", "D1d": "C2h", "C121": "n goes up to", "C99999999999999999999": "unknown",
	} {
		_, err := New(symbol)
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, want a word of %q", symbol, err, want)
		}
	}
	for _, symbol := range []string{"C∞v", "D∞h", "Kh", "Cinfv"} {
		if s := mustNew(t, symbol); !s.Infinite() {
			t.Errorf("%s is not infinite", symbol)
		}
	}
}
