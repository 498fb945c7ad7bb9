package work

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/assets"

	"lobewright/orbitals/structure"
)

func ledgerOf(t *testing.T, w *Work, spec, basis string, p study.Projection) (*Ledger, *Orbitals) {
	t.Helper()
	s := study.Study{Structure: spec, Basis: []string{basis}, Projection: p}
	l, err := w.Ledger(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	all, err := w.Orbitals(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return l, all
}

func named(l *Ledger, sets []Cancelling) string {
	var out []string
	for _, c := range sets {
		var names []string
		for _, r := range c.Rows {
			names = append(names, l.Fit.Setting.Operations[l.Rows[r].Operation].Name)
		}
		out = append(out, strings.Join(names, " "))
	}
	return strings.Join(out, "; ")
}

// The projections of one hydrogen of water were done by hand: E and one plane
// leave it, the other two operations carry it to its neighbour.
func TestTheLedgersOfWaterAreThoseDoneByHand(t *testing.T) {
	w := New(structure.Inputs{Demo: assets.Demos()})
	for _, c := range []struct {
		irrep, cancelling, orbital string
		total                      []float64
	}{
		{"A1", "", "A1", []float64{2, 2}},
		{"B2", "", "B2", []float64{2, -2}},
		{"A2", "E σv'(yz); C2(z) σv(xz)", "", []float64{0, 0}},
		{"B1", "E σv'(yz); C2(z) σv(xz)", "", []float64{0, 0}},
	} {
		l, all := ledgerOf(t, w, "demo:water", "H:s", study.Projection{Function: 1, Irrep: c.irrep})
		if got := named(l, l.Cancelling()); got != c.cancelling {
			t.Errorf("%s: cancelled are %q, want %q", c.irrep, got, c.cancelling)
		}
		if !slices.Equal(l.Total(), c.total) {
			t.Errorf("%s: the sum is %v, want %v", c.irrep, l.Total(), c.total)
		}
		among := l.Among(all)
		if c.orbital == "" {
			if len(among) != 0 || len(l.Partners) != 0 || l.Result() != nil {
				t.Errorf("%s: nothing is resolved into %v", c.irrep, among)
			}
			continue
		}
		if len(among) != 1 || among[0].Coefficient != 1 || all.Irreps[all.Projection.Orbitals[among[0].Function].Irrep].Label != c.orbital {
			t.Errorf("%s: the result is resolved into %v", c.irrep, among)
		}
	}
}

// With the element 2,2 the function that lies in the plane of reflection has
// no part in the second partner, but one in the irrep.
func TestAFunctionMayHaveNoPartInOnePartner(t *testing.T) {
	w := New(structure.Inputs{})
	l, _ := ledgerOf(t, w, "ideal:TPY-3,N,H,1.01", "H:s", study.Projection{Function: 1, Irrep: "E", Element: [2]int{2, 2}})
	if l.Norm != 0 || !slices.Equal(l.Partners, []int{0}) {
		t.Fatalf("the norm is %v, its partners %v", l.Norm, l.Partners)
	}
	sets := l.Cancelling()
	if len(sets) != 3 {
		t.Errorf("cancelled are %q", named(l, sets))
	}
	for _, c := range sets {
		if len(c.Rows) != 2 || c.Image == nil {
			t.Errorf("%v is no pair", c)
		}
	}
}

// Whatever projects to nothing: the sets hold each operation of weight other
// than 0 once, and each of them adds up to nothing by itself.
func TestSetsThatCancelAddUpToNothing(t *testing.T) {
	w := New(structure.Inputs{Demo: assets.Demos()})
	zeros := 0
	for _, spec := range []string{"demo:water", "demo:square-plane", "demo:tetrahedron", "demo:trimer", "demo:crown", "ideal:ring-5,C,1.4"} {
		g := groupOf(t, spec)
		for _, irrep := range g.Fit.Setting.Irreps {
			for k := range irrep.Dimension {
				for l := range irrep.Dimension {
					for function := 1; function <= 4; function++ {
						s := study.Study{Structure: spec, Basis: []string{"all:p"}, Projection: study.Projection{Function: function, Irrep: irrep.Label, Element: [2]int{k + 1, l + 1}}}
						ledger, err := w.Ledger(context.Background(), s)
						if err != nil {
							t.Fatal(err)
						}
						if ledger.Norm > 0 {
							if ledger.Cancelling() != nil {
								t.Errorf("%s, %s: %q cancel where something is left", spec, irrep.Label, named(ledger, ledger.Cancelling()))
							}
							continue
						}
						zeros++
						checkCancelling(t, fmt.Sprint(spec, irrep.Label, k+1, l+1, function), ledger)
					}
				}
			}
		}
	}
	if zeros < 50 {
		t.Errorf("only %d projections were to nothing", zeros)
	}
}

func checkCancelling(t *testing.T, what string, l *Ledger) {
	t.Helper()
	seen := make([]int, len(l.Rows))
	for _, i := range l.Idle() {
		seen[i]++
	}
	for _, c := range l.Cancelling() {
		sum := make([]float64, len(l.Functions))
		for _, i := range c.Rows {
			seen[i]++
			for _, term := range l.Rows[i].Image {
				sum[term.Function] += l.Rows[i].Weight * term.Coefficient
			}
		}
		for _, x := range sum {
			if math.Abs(x) > 1e-9 {
				t.Errorf("%s: %v adds up to %v", what, c.Rows, sum)
				break
			}
		}
	}
	for i, n := range seen {
		if n != 1 {
			t.Errorf("%s: row %d stands in %d sets", what, i, n)
		}
	}
}

func TestAResultIsResolvedIntoGroupOrbitalsWhole(t *testing.T) {
	w := New(structure.Inputs{Demo: assets.Demos()})
	for _, basis := range []string{"Cl:sigma", "Cl:p"} {
		for _, character := range []bool{false, true} {
			l, all := ledgerOf(t, w, "demo:square-plane", basis, study.Projection{Function: 1, Irrep: "Eu", Character: character})
			back := make([]float64, len(l.Functions))
			for _, term := range l.Among(all) {
				for i, c := range all.Projection.Orbitals[term.Function].Coefficients {
					back[i] += term.Coefficient * c
				}
			}
			for i, c := range l.Result() {
				if math.Abs(c-back[i]) > 1e-9 {
					t.Errorf("%s: %v, from the group orbitals %v", basis, l.Result(), back)
					break
				}
			}
		}
	}
}

// Images under operations in no list are those of the representation where an
// operation stands in one.
func TestImagesUnderAnOperationAreThoseOfTheRepresentation(t *testing.T) {
	w := New(structure.Inputs{Demo: assets.Demos()})
	l, _ := ledgerOf(t, w, "demo:tetrahedron", "Cl:p", study.Projection{Function: 1, Irrep: "T2"})
	for _, row := range l.Rows {
		got, err := l.ImageUnder(l.Group.Operations(0)[row.Operation], 0)
		if err != nil {
			t.Fatal(err)
		}
		if signOf(got, row.Image) != 1 {
			t.Errorf("%v, in the ledger %v", got, row.Image)
		}
	}
}
