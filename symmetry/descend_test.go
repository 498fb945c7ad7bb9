package symmetry

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
)

func contentMap(list []Content) map[string]int {
	out := map[string]int{}
	for _, c := range list {
		out[c.Irrep.Label] = c.Copies
	}
	return out
}

// Correlations of testdata/checkvalues/content.json, recomputed there with the
// axes named; each must be that of an embedding in one of its frames.
func TestCorrelationsAgreeWithThePublishedOnes(t *testing.T) {
	var file struct {
		Descent []struct {
			Group, Subgroup, How string
			Correlation          map[string]map[string]int
		}
	}
	load(t, &file, "checkvalues", "content.json")
	if len(file.Descent) < 40 {
		t.Fatalf("only %d correlations", len(file.Descent))
	}
	for _, want := range file.Descent {
		s := mustNew(t, want.Group)
		if _, err := s.Descents(want.Subgroup); err != nil {
			t.Errorf("%s in %s: %v", want.Subgroup, want.Group, err)
			continue
		}
		found := false
		var got []string
		for _, p := range everyPlacement(t, s, want.Subgroup) {
			d := s.descend(p)
			all := map[string]map[string]int{}
			for i, c := range d.Correlation {
				all[s.Irreps[i].Label] = contentMap(c)
			}
			found = found || fmt.Sprint(all) == fmt.Sprint(want.Correlation)
			got = append(got, fmt.Sprint(all))
		}
		if !found {
			t.Errorf("%s in %s (%s):\n%v\n%s", want.Subgroup, want.Group, want.How, want.Correlation, strings.Join(got, "\n"))
		}
	}
}

// everyPlacement lists all standard frames of the subgroups of a symbol, one
// subgroup a class.
func everyPlacement(t *testing.T, s *Setting, symbol string) []placement {
	sets, err := s.subgroups()
	if err != nil {
		t.Fatal(err)
	}
	var out []placement
	for _, set := range sets {
		list, err := s.placements(set)
		if err != nil {
			t.Fatal(err)
		}
		if list[0].kind.symbol() == symbol {
			out = append(out, list...)
		}
	}
	return out
}

// The 32 crystallographic groups and Ih: every subgroup by two computations,
// the projection of partners and the restriction of characters.
func TestCorrelationsByPartnersAndByCharactersAgree(t *testing.T) {
	groups := strings.Fields(`C1 Ci Cs C2 C2h C2v D2 D2h C3 S6 C3v D3 D3d C3h D3h C4 S4 C4h C4v D2d D4 D4h C6 C6h C6v D6 D6h T Th Td O Oh Ih`)
	if len(groups) != 33 {
		t.Fatal(len(groups))
	}
	for _, symbol := range groups {
		s := mustNew(t, symbol)
		sets, err := s.Subgroups()
		if err != nil {
			t.Fatal(err)
		}
		for _, set := range sets {
			d, err := s.Descend(set)
			if err != nil {
				t.Fatal(err)
			}
			for i, ir := range s.Irreps {
				characters := make([]float64, len(d.Subgroup.Classes))
				for r, o := range d.Operations {
					characters[d.Subgroup.Operations[d.Images[r]].Class] = ir.Characters[s.Operations[o].Class]
				}
				content, err := d.Subgroup.Reduce(characters)
				if err != nil {
					t.Fatalf("%s in %s, %s: %v", d.Subgroup.Symbol, symbol, ir.Label, err)
				}
				if got, want := fmt.Sprint(contentMap(d.Correlation[i])), fmt.Sprint(contentMap(content)); got != want {
					t.Errorf("%s in %s: %s is %s by partners, %s by characters", d.Subgroup.Symbol, symbol, ir.Label, got, want)
				}
				partnersTransform(t, d, i)
			}
		}
	}
}

// partnersTransform checks that in the subgroup's partners every operation
// kept has the subgroup's matrices, block by block.
func partnersTransform(t *testing.T, d *Descent, irrep int) {
	t.Helper()
	ir, p := d.Group.Irreps[irrep], d.Partners[irrep]
	for r, o := range d.Operations {
		blocks := mat.NewDense(ir.Dimension, ir.Dimension, nil)
		at := 0
		for _, c := range d.Correlation[irrep] {
			for range c.Copies {
				m := c.Irrep.Matrices[d.Images[r]]
				for i := range c.Irrep.Dimension {
					for j := range c.Irrep.Dimension {
						blocks.Set(at+i, at+j, m.At(i, j))
					}
				}
				at += c.Irrep.Dimension
			}
		}
		var left, right mat.Dense // P·D_group = D_blocks·P
		left.Mul(p, ir.Matrices[o])
		right.Mul(blocks, p)
		left.Sub(&left, &right)
		if worst := mat.Max(absolute(&left)); worst > 1e-10 {
			t.Errorf("%s in %s: partners of %s are off by %g under %s", d.Subgroup.Symbol, d.Group.Symbol, ir.Label, worst, d.Group.Operations[o].Name)
			return
		}
	}
}

func absolute(m *mat.Dense) *mat.Dense {
	var out mat.Dense
	out.Apply(func(_, _ int, v float64) float64 { return math.Abs(v) }, m)
	return &out
}

// A subgroup keeps the group's partners where their axes coincide.
func TestPartnersAreKeptWhereTheAxesCoincide(t *testing.T) {
	for _, c := range [][3]string{{"Oh", "D4h", "T1u"}, {"Oh", "Td", "T2g"}, {"D4h", "C4v", "Eu"}, {"D3h", "C3v", "E'"}, {"Oh", "D4h", "Eg"}} {
		s := mustNew(t, c[0])
		list, err := s.Descents(c[1])
		if err != nil {
			t.Fatal(err)
		}
		d := list[0]
		if !equalTo(d.Rotation, turnAboutZ(0, 1), 1e-12) {
			t.Errorf("%s in %s turns the axes", c[1], c[0])
		}
		for i, ir := range s.Irreps {
			if ir.Label != c[2] {
				continue
			}
			for k := range ir.Dimension { // each partner is one of the subgroup's
				for l := range ir.Dimension {
					if v := math.Abs(d.Partners[i].At(l, k)); v > 1e-12 && math.Abs(v-1) > 1e-12 {
						t.Errorf("%s of %s in %s: partners mix by %g", ir.Label, c[0], c[1], v)
					}
				}
			}
		}
	}
}

// On paper: the plane of C3v along the direction at 120° keeps (−1/2, √3/2) of
// the partners x, y of E and turns (√3/2, 1/2) round. Each is written with its
// largest coefficient positive, though the projection of x on the first is a
// positive multiple of (1/2, −√3/2).
func TestThePartnersOfASubgroupHaveTheirLargestCoefficientPositive(t *testing.T) {
	s := mustNew(t, "C3v")
	h := math.Sqrt(3) / 2
	plane := s.find(func(o Operation) bool {
		m := o.Matrix
		return m.Det() < 0 && math.Abs(m.At(0, 0)+0.5) < 1e-9 && math.Abs(m.At(0, 1)+h) < 1e-9
	})
	d, err := s.Descend([]int{0, plane})
	if err != nil {
		t.Fatal(err)
	}
	e := slices.IndexFunc(s.Irreps, func(ir Irrep) bool { return ir.Label == "E" })
	if got := spell(d.Correlation[e]); got != "A' A''" {
		t.Fatalf("E goes over into %s", got)
	}
	want := mat.NewDense(2, 2, []float64{-0.5, h, h, 0.5})
	if !mat.EqualApprox(d.Partners[e], want, 1e-12) {
		t.Errorf("the partners are %v, not %v", mat.Formatted(d.Partners[e]), mat.Formatted(want))
	}
}

// The numbers of subgroups up to conjugacy are known facts of the groups:
// 33 of Oh = S4 × C2, 11 of S4 = Td, 9 of A5 = I, 22 of A5 × C2 = Ih (from
// memory).
func TestNumbersOfSubgroupsAreTheKnownOnes(t *testing.T) {
	for symbol, want := range map[string]int{"Oh": 33, "Td": 11, "O": 11, "I": 9, "Ih": 22, "C6": 4, "D2": 5, "D3": 4, "C1": 1} {
		sets, err := mustNew(t, symbol).Subgroups()
		if err != nil || len(sets) != want {
			t.Errorf("%s: %d classes of subgroups, want %d (%v)", symbol, len(sets), want, err)
		}
	}
	if _, err := mustNew(t, "Oh").Descents("D5h"); err == nil || !strings.Contains(err.Error(), "D4h") {
		t.Errorf("D5h in Oh: %v", err)
	}
	if _, err := mustNew(t, "Oh").Descend([]int{0, 1}); err == nil {
		t.Error("E and C3 are taken for a group")
	}
}

// By hand in D4h: Eu × Eu = A1g + A2g + B1g + B2g, the second antisymmetric.
// Oh: Eg × T1u = T1u + T2u; T1u × T1u = A1g + Eg + T1g + T2g, T1g antisymmetric
// (any text on the groups). D∞h: Πu × Πu = Σg+ + Σg- + Δg, Σg- antisymmetric.
func TestProductsAreTheKnownOnes(t *testing.T) {
	for _, c := range []struct {
		group     string
		factors   []string
		want      string
		sym, anti string
	}{
		{"D4h", []string{"Eu", "Eu"}, "A1g A2g B1g B2g", "A1g B1g B2g", "A2g"},
		{"Oh", []string{"Eg", "T1u"}, "T1u T2u", "", ""},
		{"Oh", []string{"T1u", "T1u"}, "A1g Eg T1g T2g", "A1g Eg T2g", "T1g"},
		{"Ih", []string{"T1u", "T1u"}, "Ag T1g Hg", "Ag Hg", "T1g"},
		{"C2v", []string{"B1", "B2"}, "A2", "", ""},
		{"C3", []string{"E", "E"}, "A A E", "A E", "A"},
		{"Td", []string{"E", "E", "E"}, "A1 A2 E E E", "", ""},
	} {
		s := mustNew(t, c.group)
		content, err := s.Multiply(c.factors...)
		if err != nil || spell(content) != c.want {
			t.Errorf("%s: %v = %s, want %s (%v)", c.group, c.factors, spell(content), c.want, err)
		}
		if c.sym == "" {
			continue
		}
		sym, anti, err := s.Squares(c.factors[0])
		if err != nil || spell(sym) != c.sym || spell(anti) != c.anti {
			t.Errorf("%s: squares of %s are %s and %s (%v)", c.group, c.factors[0], spell(sym), spell(anti), err)
		}
	}
	for _, c := range [][6]string{
		{"D∞h", "Πu", "Πu", "Σg+ Σg- Δg", "Σg+ Δg", "Σg-"}, {"D∞h", "Σu+", "Πg", "Πu", "", ""}, {"C∞v", "Π", "Δ", "Π Φ", "", ""},
		{"C∞v", "Σ-", "Σ-", "Σ+", "Σ+", ""}, {"Kh", "Pu", "Pu", "Sg Pg Dg", "Sg Dg", "Pg"}, {"Kh", "Pu", "Dg", "Pu Du Fu", "", ""},
	} {
		a, err := InfiniteIrrepByLabel(c[0], c[1])
		if err != nil {
			t.Fatal(err)
		}
		b, err := InfiniteIrrepByLabel(c[0], c[2])
		if err != nil {
			t.Fatal(err)
		}
		content, sym, anti, err := MultiplyInfinite(c[0], a, b)
		if err != nil || spell(content) != c[3] || spell(sym) != c[4] || spell(anti) != c[5] {
			t.Errorf("%s: %s × %s = %s (%s | %s), %v", c[0], c[1], c[2], spell(content), spell(sym), spell(anti), err)
		}
	}
	if _, err := mustNew(t, "Oh").Multiply("E1g"); err == nil || !strings.Contains(err.Error(), "T1u") {
		t.Errorf("an irrep that Oh has not: %v", err)
	}
}

func spell(list []Content) string {
	var out []string
	for _, c := range list {
		for range c.Copies {
			out = append(out, c.Irrep.Label)
		}
	}
	return strings.Join(out, " ")
}

// The usual correlation tables of linear molecules (G. Herzberg 1945; from
// memory): in C2v Σ+ is A1, Σ− A2, Π B1 + B2, Δ A1 + A2; in D2h Σg+ Ag, Σu+
// B1u, Σg− B1g, Πg B2g + B3g, Πu B2u + B3u, Δg Ag + B1g; in Dnh Σu+ is A2u.
func TestLinearGroupsDescendAsPrinted(t *testing.T) {
	for _, c := range []struct{ group, sub, pairs string }{
		{"C∞v", "C2v", "Σ+=A1 Σ-=A2 Π=B1+B2 Δ=A1+A2"}, {"C∞v", "C4v", "Σ+=A1 Σ-=A2 Π=E Δ=B1+B2"}, {"C∞v", "C3v", "Π=E Δ=E Φ=A1+A2"},
		{"D∞h", "D2h", "Σg+=Ag Σu+=B1u Σg-=B1g Σu-=Au Πg=B2g+B3g Πu=B2u+B3u Δg=Ag+B1g Δu=Au+B1u"},
		{"D∞h", "D4h", "Σg+=A1g Σu+=A2u Σg-=A2g Σu-=A1u Πu=Eu Δg=B1g+B2g"}, {"D∞h", "D6h", "Πg=E1g Δu=E2u Φu=B1u+B2u"},
		{"D∞h", "C∞v", ""}, {"C∞v", "D2h", ""}, {"D∞h", "Td", ""}, {"Kh", "C2v", ""},
	} {
		d, err := DescendLinear(c.group, c.sub, 3)
		if c.pairs == "" {
			if err == nil {
				t.Errorf("%s in %s is accepted", c.sub, c.group)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		for _, pair := range strings.Fields(c.pairs) {
			label, want, _ := strings.Cut(pair, "=")
			found := false
			for i, ir := range d.Irreps {
				if ir.Label == label {
					found = true
					if got := strings.ReplaceAll(spell(d.Correlation[i]), " ", "+"); got != want {
						t.Errorf("%s in %s: %s is %s, want %s", c.sub, c.group, label, got, want)
					}
				}
			}
			if !found {
				t.Errorf("%s has no %s", c.group, label)
			}
		}
	}
}

// In every frame that gives a subgroup other names its operations multiply as they
// do in the group, and what becomes of each irrep has its characters.
func TestRenamedSubgroupsMultiplyAndCorrelateAlike(t *testing.T) {
	for _, c := range []struct {
		group, subgroup string
		ways            []int // by embedding
	}{
		// Three like axes of D2h can be laid in six ways, and so can the others.
		{"Oh", "D2h", []int{6, 6}}, {"Oh", "C2v", []int{2, 2, 2}}, {"D4h", "D2h", []int{6, 6}}, {"Oh", "D4h", []int{2}}, {"Ih", "D3d", []int{1}},
	} {
		s, err := New(c.group)
		if err != nil {
			t.Fatal(err)
		}
		descents, err := s.Descents(c.subgroup)
		if err != nil || len(descents) != len(c.ways) {
			t.Fatalf("%s in %s: %d ways, %v", c.subgroup, c.group, len(descents), err)
		}
		for e, first := range descents {
			list, err := first.Renamings()
			if err != nil || len(list) != c.ways[e] || list[0] != first {
				t.Errorf("%s:%d in %s: %d frames, want %d (%v)", c.subgroup, e+1, c.group, len(list), c.ways[e], err)
			}
			for _, d := range list {
				at := map[int]int{}
				for i, o := range d.Operations {
					at[o] = d.Images[i]
				}
				for _, a := range d.Operations {
					for _, b := range d.Operations {
						if at[s.Product(a, b)] != d.Subgroup.Product(at[a], at[b]) {
							t.Fatalf("%s in %s: %d·%d does not multiply alike", c.subgroup, c.group, a, b)
						}
					}
				}
				for i, ir := range s.Irreps {
					for _, o := range d.Operations {
						sum := 0.0
						for _, part := range d.Correlation[i] {
							sum += float64(part.Copies) * part.Irrep.Characters[d.Subgroup.Operations[at[o]].Class]
						}
						if math.Abs(sum-ir.Characters[s.Operations[o].Class]) > 1e-9 {
							t.Errorf("%s in %s: %s has the character %g, not %g", c.subgroup, c.group, ir.Label, sum, ir.Characters[s.Operations[o].Class])
						}
					}
				}
			}
		}
	}
}
