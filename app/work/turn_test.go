package work

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"lobewright/app/study"
	"lobewright/orbitals"
)

func projected(t testing.TB, w *Work, s study.Study) *Orbitals {
	t.Helper()
	o, err := w.Orbitals(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return o
}

var turnable = []study.Study{
	{Structure: "ideal:SP-4", Basis: []string{"2-5:p"}, Projection: study.Projection{Irrep: "Eu"}},
	{Structure: "ideal:OC-6", Basis: []string{"2-7:s,p"}, Projection: study.Projection{Irrep: "T1u"}},
	{Structure: "ideal:OC-6", Basis: []string{"2-7:p"}, Projection: study.Projection{Irrep: "T2g"}},
	{Structure: "ideal:TBPY-5", Basis: []string{"2-6:s"}, Projection: study.Projection{Irrep: "E'"}},
	{Structure: "demo:crown", Basis: []string{"S:p"}, Projection: study.Projection{Irrep: "E3"}},
	{Structure: "demo:rod", Basis: []string{"C:p", "Ag:d"}, Projection: study.Projection{Irrep: "Πu"}},
}

// drawn are a few rotations by any angles, from 1.
func drawn(random *rand.Rand, n int) []study.PlaneRotation {
	if n < 2 {
		return nil
	}
	var out []study.PlaneRotation
	for range random.IntN(4) {
		from := 1 + random.IntN(n)
		to := (from+random.IntN(n-1))%n + 1
		out = append(out, study.PlaneRotation{From: from, To: to, Angle: 720*random.Float64() - 360})
	}
	return out
}

// TestTurnedPartnersAreASetLikeAnyOther: whatever is turned and mixed, the
// group orbitals stay orthonormal, the matrices multiply like the operations,
// and the operations carry the partners with exactly these matrices.
func TestTurnedPartnersAreASetLikeAnyOther(t *testing.T) {
	for _, s := range turnable {
		w := demoWork()
		plain := projected(t, w, s)
		a, err := FindIrrep(s.Projection.Irrep, "", plain.Irreps)
		if err != nil {
			t.Fatal(err)
		}
		random := rand.New(rand.NewPCG(1, uint64(a)))
		for range 6 {
			turn, mixing := drawn(random, plain.Irreps[a].Dimension), drawn(random, plain.Content[a])
			o, err := plain.Turned(s.Projection.Irrep, turn, mixing)
			if err != nil {
				t.Fatal(err)
			}
			for i, x := range o.Projection.Orbitals {
				for j, y := range o.Projection.Orbitals[:i+1] {
					want := 0.0
					if i == j {
						want = 1
					}
					if d := dotted(x.Coefficients, y.Coefficients); math.Abs(d-want) > 1e-10 {
						t.Fatalf("%d·%d = %g", i, j, d)
					}
				}
			}
			if plain.Fit.Setting.Infinite() {
				continue
			}
			checkRepresentation(t, o, a)
		}
	}
}

func checkRepresentation(t *testing.T, o *Orbitals, a int) {
	setting, irrep := o.Fit.Setting, o.Irreps[a]
	representation, err := o.Representation()
	if err != nil {
		t.Fatal(err)
	}
	for r := range setting.Operations {
		q := (7*r + 3) % setting.Order()
		var product mat.Dense
		product.Mul(irrep.Matrices[r], irrep.Matrices[q])
		if !mat.EqualApprox(&product, irrep.Matrices[setting.Product(r, q)], 1e-10) {
			t.Fatalf("the matrices of %d and %d do not multiply", r, q)
		}
	}
	for c := range o.Content[a] {
		partners := o.Partners(a, c)
		for k, p := range partners {
			for r := range setting.Operations {
				image := representation.Apply(r, p.Coefficients)
				for l, q := range partners {
					addTo(image, -irrep.Matrices[r].At(l, k), q.Coefficients)
				}
				if dotted(image, image) > 1e-18 {
					t.Fatalf("%s carries partner %d out of what the matrix says", setting.Operations[r].Name, k+1)
				}
			}
		}
	}
}

func dotted(a, b []float64) float64 {
	sum := 0.0
	for i := range a {
		sum += a[i] * b[i]
	}
	return sum
}

func TestAFullTurnChangesNothing(t *testing.T) {
	for _, s := range turnable {
		w := demoWork()
		plain := projected(t, w, s)
		s.Turn = []study.PlaneRotation{{From: 1, To: 2, Angle: 360}}
		turned := projected(t, w, s)
		for i, g := range plain.Projection.Orbitals {
			if !slices.Equal(g.Coefficients, turned.Projection.Orbitals[i].Coefficients) {
				t.Errorf("%s: orbital %d differs", s.Projection.Irrep, i)
			}
		}
	}
}

// TestATurnOfEuPutsLobesBetweenTheLigands: worked out by hand. Partners (x, y)
// of the σ functions of a square, (φ1 − φ3)/√2 and (φ2 − φ4)/√2, become
// (φ1 + φ2 − φ3 − φ4)/2, like x + y, and (−φ1 + φ2 + φ3 − φ4)/2, like y − x;
// C4 still carries the first into the second.
func TestATurnOfEuPutsLobesBetweenTheLigands(t *testing.T) {
	w := demoWork()
	s := study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:s"}, Projection: study.Projection{Irrep: "eu"},
		Turn: []study.PlaneRotation{{From: 1, To: 2, Angle: 45}}}
	o := projected(t, w, s)
	a, _ := FindIrrep("Eu", "", o.Irreps)
	for k, want := range []struct{ form, like string }{
		{"(φ1 + φ2 − φ3 − φ4)/2", "x+y"},
		{"(−φ1 + φ2 + φ3 − φ4)/2", "y-x"},
	} {
		form, _ := orbitals.FindClosedForm(o.Partners(a, 0)[k].Coefficients)
		if form.String() != want.form || o.Irreps[a].Functions[k][0] != want.like {
			t.Errorf("partner %d: %s like %v", k+1, form, o.Irreps[a].Functions[k])
		}
	}
	s.Operation = "C4(z)"
	if p := played(t, w, s); len(p.Partners) != 1 || p.Partners[0] != (orbitals.Term{Function: 1, Coefficient: 1}) {
		t.Errorf("C4(z): %v", p.Partners)
	}
	s.Operation = "σv(xz)"
	if p := played(t, w, s); len(p.Partners) != 1 || p.Partners[0].Function != 1 || math.Abs(p.Partners[0].Coefficient+1) > 1e-12 {
		t.Errorf("σv(xz) exchanges x + y with −(y − x): %v", p.Partners)
	}
	s.Projection.Function = 1
	l, err := w.Ledger(context.Background(), s)
	if err != nil || !(l.Norm > 0) {
		t.Errorf("the ledger with the turned element: %v %v", l, err)
	}
	if sum := l.Rows[len(l.Rows)-1].Sum; math.Abs(sum[0]-sum[1]) > 1e-12 || math.Abs(sum[0]+sum[2]) > 1e-12 {
		t.Errorf("the ledger ends at %v", sum)
	}
}

// TestFunctionsFollowATurn: a cyclic exchange of x, y and z turns E(2z²−x²−y²,
// √3(x²−y²)) by 120°.
func TestFunctionsFollowATurn(t *testing.T) {
	w := demoWork()
	s := study.Study{Structure: "ideal:OC-6", Basis: []string{"2-7:s"}, Projection: study.Projection{Irrep: "Eg"},
		Turn: []study.PlaneRotation{{From: 1, To: 2, Angle: 120}}}
	o := projected(t, w, s)
	a, _ := FindIrrep("Eg", "", o.Irreps)
	if got := o.Irreps[a].Functions; got[0][0] != "2x2-y2-z2" || got[1][0] != "√3(y2-z2)" {
		t.Errorf("%v", got)
	}
}

func anglesOf(marks []Mark) string {
	var out []string
	for _, m := range marks {
		out = append(out, fmt.Sprintf("%g", m.Angle))
	}
	return strings.Join(out, " ")
}

// TestMarksAreWherePartnersMeetElements: on a triangle (E′ of D3h) planes stand
// every 60°, and a partner lies in or square to one every 30°; E of an octahedron
// likewise; a p-like or xy-like pair of an octahedron meets axes and planes every 45°.
func TestMarksAreWherePartnersMeetElements(t *testing.T) {
	thirty := "0 30 60 90 120 150 180 210 240 270 300 330"
	for _, c := range []struct {
		structure, basis, irrep string
		from, to                int
		want                    string
	}{
		{"ideal:TP-3", "2-4:s", "E'", 0, 1, thirty},
		{"ideal:OC-6", "2-7:s", "Eg", 0, 1, thirty},
		{"ideal:OC-6", "2-7:p", "T2g", 0, 1, "0 45 90 135 180 225 270 315"},
		{"ideal:OC-6", "2-7:s", "T1u", 2, 0, "0 45 90 135 180 225 270 315"},
		{"ideal:SP-4", "2-5:s", "Eu", 0, 1, "0 45 90 135 180 225 270 315"},
	} {
		s := study.Study{Structure: c.structure, Basis: []string{c.basis}}
		o := projected(t, demoWork(), s)
		a, err := FindIrrep(c.irrep, "", o.Irreps)
		if err != nil {
			t.Fatal(err)
		}
		marks := o.Marks(a, c.from, c.to)
		if got := anglesOf(marks); got != c.want {
			t.Errorf("%s of %s: %s", c.irrep, c.structure, got)
		}
		for _, m := range marks {
			turned, err := o.Turned(c.irrep, []study.PlaneRotation{{From: c.from + 1, To: c.to + 1, Angle: m.Angle}}, nil)
			if err != nil {
				t.Fatal(err)
			}
			for _, why := range m.Reasons {
				if got := turned.Symmetries(turned.Partners(a, 0)[why.Partner])[why.Operation]; got != why.Sign {
					t.Errorf("%s at %g°: partner %d has the sign %d under %s, not %d", c.irrep, m.Angle, why.Partner+1, got,
						o.Fit.Setting.Operations[why.Operation].Name, why.Sign)
				}
			}
		}
	}
}

func TestSnappingTakesTheNearestMark(t *testing.T) {
	marks := []Mark{{Angle: 0}, {Angle: 45}, {Angle: 90}}
	for angle, want := range map[float64]float64{358.5: 0, 44: 45, 46.9: 45, 91: 90} {
		if m, ok := Snapped(marks, angle, 2); !ok || m.Angle != want {
			t.Errorf("%g: %v %v", angle, m, ok)
		}
	}
	if _, ok := Snapped(marks, 60, 2); ok {
		t.Error("nothing is near 60°")
	}
}

// TestATurnThatCannotBeIsToldAndTheSetStays: the window shows the set as it is.
func TestATurnThatCannotBeIsToldAndTheSetStays(t *testing.T) {
	w := demoWork()
	s := study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:s"}, Projection: study.Projection{Irrep: "Eu"},
		Turn: []study.PlaneRotation{{From: 1, To: 3, Angle: 45}}}
	o, err := w.Orbitals(context.Background(), s)
	if err == nil || err.Error() != "1 cannot be turned into 3: Eu has partners 1 to 2" || o == nil {
		t.Errorf("%v %v", o, err)
	}
}

// TestNodalPlanesAreThoseOfTheTextbook: p-like sets have one, π sets of a ring
// have Λ planes beside the one of the ring.
func TestNodalPlanesAreThoseOfTheTextbook(t *testing.T) {
	names := func(structure, basis, irrep string, partner int) string {
		o := projected(t, demoWork(), study.Study{Structure: structure, Basis: []string{basis}})
		g, err := o.Orbital(study.Projection{Irrep: irrep, Partner: partner})
		if err != nil {
			t.Fatal(err)
		}
		var out []string
		for _, n := range o.NodalPlanes(g) {
			out = append(out, n.Name)
		}
		return strings.Join(out, " ")
	}
	for _, c := range []struct {
		structure, basis, irrep string
		partner                 int
		want                    string
	}{
		{"ideal:SP-4", "2-5:s", "Eu", 1, "σv(yz)"},
		{"ideal:SP-4", "2-5:s", "B1g", 1, "σd(1) σd(2)"},
		{"ideal:SP-4", "2-5:s", "A1g", 1, ""},
		{"ideal:ring-6,C", "C:pz", "E2u", 2, "σh σd(yz) σv(xz)"},
		{"demo:rod", "C:p", "Πu", 1, "σv(90°)"},
		{"demo:rod", "C:p", "Πg", 1, "σv(90°) σh"},
	} {
		if got := names(c.structure, c.basis, c.irrep, c.partner); got != c.want {
			t.Errorf("%s of %s, partner %d: %q", c.irrep, c.structure, c.partner, got)
		}
	}
}
