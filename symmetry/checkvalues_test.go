package symmetry

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// load reads a file of published values from testdata; each file names its
// sources in its own "source" key.
func load(t testing.TB, into any, path ...string) {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join(append([]string{"..", "testdata"}, path...)...))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(raw, into); err != nil {
		t.Fatal(err)
	}
}

func mustNew(t testing.TB, symbol string) *Setting {
	t.Helper()
	s, err := New(symbol)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

type printedTable struct {
	Group   string
	Order   int
	Classes []struct {
		Name string
		Size int
	}
	Irreps []struct {
		Label                               string
		Dimension                           int
		ComplexPair                         bool
		Characters                          []float64
		Linear, Rotations, Quadratic, Cubic [][]string
	}
}

// Published tables: order of classes and irreps as printed in F. A. Cotton,
// Chemical Applications of Group Theory, and G. Herzberg (1945), from memory;
// characters recomputed and compared with GAP (testdata/checkvalues).
func TestTablesAgreeWithThePrintedOnes(t *testing.T) {
	var file struct{ Groups []printedTable }
	load(t, &file, "checkvalues", "characters.json")
	if len(file.Groups) < 60 {
		t.Fatalf("only %d tables", len(file.Groups))
	}
	for _, want := range file.Groups {
		t.Run(want.Group, func(t *testing.T) {
			s := mustNew(t, want.Group)
			if s.Order() != want.Order || len(s.Classes) != len(want.Classes) || len(s.Irreps) != len(want.Irreps) {
				t.Fatalf("order %d, %d classes, %d irreps; want %d, %d, %d", s.Order(), len(s.Classes), len(s.Irreps),
					want.Order, len(want.Classes), len(want.Irreps))
			}
			for i, c := range want.Classes {
				if s.Classes[i].Name != c.Name || len(s.Classes[i].Members) != c.Size {
					t.Errorf("class %d is %q of %d; want %q of %d", i+1, s.Classes[i].Name, len(s.Classes[i].Members), c.Name, c.Size)
				}
			}
			for i, w := range want.Irreps {
				got := s.Irreps[i]
				if got.Label != w.Label || got.Dimension != w.Dimension || got.ComplexPair != w.ComplexPair {
					t.Errorf("irrep %d is %s (dimension %d, pair %v); want %s (%d, %v)", i+1,
						got.Label, got.Dimension, got.ComplexPair, w.Label, w.Dimension, w.ComplexPair)
				}
				for c, x := range w.Characters {
					if math.Abs(got.Characters[c]-x) > 1e-9 {
						t.Errorf("%s, class %s: %v, want %v", w.Label, want.Classes[c].Name, got.Characters[c], x)
					}
				}
				n := len(w.Linear) + len(w.Rotations) + len(w.Quadratic) + len(w.Cubic)
				if len(got.Functions[0]) != n {
					t.Errorf("%s: %d sets of functions %q; want %d: %v %v %v %v", w.Label,
						len(got.Functions[0]), got.Functions, n, w.Linear, w.Rotations, w.Quadratic, w.Cubic)
				}
				sameSpans(t, w.Label, got.Functions, append(append(append(w.Linear, w.Rotations...), w.Quadratic...), w.Cubic...))
			}
		})
	}
}

// sameSpans compares, degree by degree, what the functions of an irrep span.
func sameSpans(t *testing.T, label string, got, want [][]string) {
	t.Helper()
	var a, b []string
	for _, partner := range got {
		a = append(a, partner...)
	}
	for _, set := range want {
		b = append(b, set...)
	}
	for _, all := range [][2][]string{{a, b}, {b, a}} {
		for _, f := range all[0] {
			if !spanned(f, all[1]) {
				t.Errorf("%s: %s is not among the span of %q", label, f, all[1])
			}
		}
	}
}

func TestOperationNamesOfPowersAgreeWithTheRule(t *testing.T) {
	var file struct{ PowersOfCn, PowersOfSn, InversionTimesCn map[string][]string }
	load(t, &file, "checkvalues", "operation_names.json")
	name := func(turn Turn) string { return turn.baseSymbol() + exponent(turn) }
	check := func(what string, k int, got, want string) {
		if got == "σ" {
			got = "σh"
		}
		if got != want {
			t.Errorf("%s, %d: %s, want %s", what, k, got, want)
		}
	}
	for symbol, powers := range file.PowersOfCn {
		n := len(powers) + 1
		for i, want := range powers {
			check(symbol, i+1, name(newTurn(i+1, n, false)), want)
		}
	}
	for symbol, powers := range file.PowersOfSn {
		n := len(powers) + 1 // even n: n−1 powers, odd n: 2n−1
		if (len(powers)+1)/2%2 == 1 && symbol[1:] == itoa((len(powers)+1)/2) {
			n = (len(powers) + 1) / 2
		}
		for i, want := range powers {
			check(symbol, i+1, name(newTurn(i+1, n, (i+1)%2 == 1)), want)
		}
	}
	for n, names := range file.InversionTimesCn {
		for k, want := range names {
			m := inversion.Mul3(turnAboutZ(k, atoi(n)))
			_, turn := describe(m, 2*atoi(n))
			check("i·C"+n, k, name(turn), want)
		}
	}
}

func TestLabelsOfInfiniteGroupsAgreeWithThePrintedOnes(t *testing.T) {
	var file struct {
		Infinite []struct {
			Group  string
			Irreps []struct {
				Label             string
				Dimension         int
				Linear, Rotations [][]string
				Quadratic         [][]string
			}
		}
	}
	load(t, &file, "checkvalues", "characters.json")
	for _, g := range file.Infinite {
		for _, w := range g.Irreps {
			lambda := map[rune]int{'Σ': 0, 'Π': 1, 'Δ': 2, 'Φ': 3}[[]rune(w.Label)[0]]
			parity, mirror := 0, 0
			for _, r := range w.Label {
				switch r {
				case 'g':
					parity = 1
				case 'u':
					parity = -1
				case '+':
					mirror = 1
				case '-':
					mirror = -1
				}
			}
			ir, err := InfiniteIrrep(g.Group, lambda, parity, mirror)
			if err != nil {
				t.Fatal(err)
			}
			if ir.Label != w.Label || ir.Dimension != w.Dimension {
				t.Errorf("%s: %s of dimension %d, want %s of %d", g.Group, ir.Label, ir.Dimension, w.Label, w.Dimension)
			}
			for _, set := range append(append(w.Linear, w.Rotations...), w.Quadratic...) {
				for _, f := range set {
					var all []string
					for _, p := range ir.Functions {
						all = append(all, p...)
					}
					if !spanned(f, all) {
						t.Errorf("%s %s lacks %s: %q", g.Group, w.Label, f, ir.Functions)
					}
				}
			}
		}
	}
	for _, bad := range [][4]any{{"D∞h", 0, 0, 1}, {"D∞h", 1, 1, 1}, {"C∞v", 0, 0, 0}, {"Kh", 1, 0, 0}, {"D4h", 0, 1, 1}, {"C∞v", -1, 0, 0}, {"Kh", 99, 1, 0}} {
		if _, err := InfiniteIrrep(bad[0].(string), bad[1].(int), bad[2].(int), bad[3].(int)); err == nil {
			t.Errorf("%v is accepted", bad)
		}
	}
}
