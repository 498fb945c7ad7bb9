package work

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/orbitals"
)

func played(t testing.TB, w *Work, s study.Study) *Play {
	t.Helper()
	p, err := w.Play(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// text writes terms with the names and atoms of their functions.
func text(b *Basis, terms []orbitals.Term) string {
	var out []string
	for _, t := range terms {
		f := b.Functions[t.Function]
		out = append(out, fmt.Sprintf("%.3g %s%d", t.Coefficient, f.Name, f.Site+1))
	}
	return strings.Join(out, " + ")
}

// TestFunctionsBecomeWhatTheyMust: worked out by hand. On a square, C4 about z
// carries ligand 1 on x to the one on y and its pz along; on a triangle, C3
// turns px into −½ px + √3/2 py of the next atom.
func TestFunctionsBecomeWhatTheyMust(t *testing.T) {
	w := demoWork()
	for _, c := range []struct {
		s    study.Study
		want string
	}{
		{study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:pz"}, Operation: "C4(z)"}, "1 pz3"},
		{study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:pz"}, Operation: "C2'(x)"}, "-1 pz2"},
		{study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:pz"}, Operation: "i"}, "-1 pz4"},
		{study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:px,py"}, Operation: "C4(z)"}, "1 py3"},
		{study.Study{Structure: "ideal:ring-3", Basis: []string{"C:px,py"}, Operation: "C3(z)"}, "-0.5 px2 + 0.866 py2"},
		{study.Study{Structure: "ideal:ring-3", Basis: []string{"C:px,py"}, Operation: "C3^2(z)"}, "-0.5 px3 + -0.866 py3"},
	} {
		c.s.Projection.Function = 1
		p := played(t, w, c.s)
		if got := text(p.Basis, p.Terms); got != c.want {
			t.Errorf("%s %v %s: %s, want %s", c.s.Structure, c.s.Basis, c.s.Operation, got, c.want)
		}
		if p.Subject != study.SubjectFunction || p.Function != 0 || p.Orbital != nil || p.Matrix != nil || p.Start[0] != 1 {
			t.Errorf("%+v", p)
		}
	}
}

// TestOrbitalsGoIntoTheirPartners: the image of a group orbital, worked out
// function by function, is what the matrix of the irrep makes of the partners.
func TestOrbitalsGoIntoTheirPartners(t *testing.T) {
	for _, s := range []study.Study{
		{Structure: "demo:square-plane", Basis: []string{"Cl:sigma,pi", "Pt:d"}},
		{Structure: "demo:tetrahedron", Basis: []string{"2-5:s"}},
		{Structure: "demo:benzenetriol", Basis: []string{"C:pz"}},
		{Structure: "demo:crown", Basis: []string{"S:s"}},
		{Structure: "demo:rod", Basis: []string{"C:s,p", "Ag:d"}, Angle: 40},
		{Structure: "demo:cyanide", Basis: []string{"C:p,d", "N:p"}, Angle: 77},
	} {
		w := demoWork()
		all, err := w.Orbitals(context.Background(), s)
		if err != nil {
			t.Fatal(err)
		}
		for _, o := range all.Group.Operations(s.Angle) {
			for _, g := range all.Projection.Orbitals {
				s.Operation = o.Name
				s.Projection = study.Projection{Irrep: all.Irreps[g.Irrep].Label, Copy: g.Copy + 1, Partner: g.Partner + 1}
				p := played(t, w, s)
				want := make([]float64, len(all.Functions))
				for _, term := range p.Partners {
					partner := s.Projection
					partner.Partner = term.Function + 1
					other, err := all.Orbital(partner)
					if err != nil {
						t.Fatal(err)
					}
					for i, c := range other.Coefficients {
						want[i] += term.Coefficient * c
					}
				}
				got := make([]float64, len(want))
				for _, term := range p.Terms {
					got[term.Function] = term.Coefficient
				}
				for i := range want {
					if math.Abs(p.Image[i]-want[i]) > 1e-12 || math.Abs(p.Image[i]-got[i]) > 1e-12 {
						t.Fatalf("%s %s of %s: φ%d has %g, %g in its terms; the partners give %g",
							o.Name, s.Projection.Irrep, s.Structure, i+1, p.Image[i], got[i], want[i])
					}
				}
				if p.Subject != study.SubjectOrbital || p.Orbital == nil || p.Function != -1 {
					t.Fatalf("%+v", p)
				}
			}
		}
	}
}

// TestLinearMoleculesHaveTheirPublishedMatrices: under C(φ), partners cos Λφ
// and sin Λφ turn by Λφ, and σv(φ) reflects them at Λφ; the characters are
// 2 cos Λφ and 0, those of i ±2 (the tables of C∞v and D∞h as in every
// handbook, such as F. A. Cotton, Chemical Applications of Group Theory).
func TestLinearMoleculesHaveTheirPublishedMatrices(t *testing.T) {
	w := demoWork()
	s := study.Study{Structure: "demo:rod", Basis: []string{"Ag:s,p,d,f", "N:p"}}
	for label, c := range map[string]struct{ lambda, parity float64 }{
		"Σg+": {0, 1}, "Σu+": {0, -1}, "Πg": {1, 1}, "Πu": {1, -1}, "Δg": {2, 1}, "Δu": {2, -1}, "Φu": {3, -1},
	} {
		s.Projection = study.Projection{Irrep: label}
		for _, angle := range angles {
			phi := c.lambda * mgl64DegToRad(angle)
			sin, cos := math.Sincos(phi)
			sin2, cos2 := math.Sincos(2 * phi)
			want := map[string][]float64{
				"C(φ)": {cos, -sin, sin, cos}, "σv(φ)": {cos2, sin2, sin2, -cos2},
				"i": {c.parity, 0, 0, c.parity}, "E": {1, 0, 0, 1},
			}
			if c.lambda == 0 {
				want = map[string][]float64{"C(φ)": {1}, "σv(φ)": {1}, "i": {c.parity}, "C2(φ)": {c.parity}, "S(φ)": {c.parity}, "σh": {c.parity}}
			}
			for name, matrix := range want {
				s.Operation, s.Angle = name, angle
				p := played(t, w, s)
				for k, x := range matrix {
					d, _ := p.Matrix.Dims()
					if got := p.Matrix.At(k/d, k%d); d*d != len(matrix) || math.Abs(got-x) > 1e-12 {
						t.Fatalf("%s of %s at %g°: element %d is %g, not %g", name, label, angle, k, got, x)
					}
				}
			}
		}
	}
}

func mgl64DegToRad(degrees float64) float64 { return degrees * math.Pi / 180 }

// TestAtomsHaveThePublishedCharacters: a turn by φ has the character
// sin((l+½)φ)/sin(φ/2) in the shell l, and i has (−1)^l (2l+1) (E. P. Wigner,
// Gruppentheorie, 1931; from memory).
func TestAtomsHaveThePublishedCharacters(t *testing.T) {
	w := demoWork()
	s := study.Study{Structure: "xenon", Coordinates: "1\nxenon\nXe 1 2 3\n", Basis: []string{"Xe:s,p,d,f"}}
	for l, label := range []string{"Sg", "Pu", "Dg", "Fu"} {
		s.Projection = study.Projection{Irrep: label}
		trace := func(name string, angle float64) float64 {
			s.Operation, s.Angle = name, angle
			return played(t, w, s).Matrix.Trace()
		}
		n := float64(2*l + 1)
		parity := 1 - 2*float64(l%2)
		for _, angle := range []float64{17.3, 30, 90, 120, 180, 300} {
			phi := mgl64DegToRad(angle)
			if got, want := trace("C(φ)", angle), math.Sin(n/2*phi)/math.Sin(phi/2); math.Abs(got-want) > 1e-12 {
				t.Errorf("%s: C(%g°) has %g, not %g", label, angle, got, want)
			}
			// σ is i with a half turn.
			if got, want := trace("σ(φ)", angle), parity*math.Sin(n/2*math.Pi); math.Abs(got-want) > 1e-12 {
				t.Errorf("%s: σ(%g°) has %g, not %g", label, angle, got, want)
			}
		}
		if got := trace("i", 0); math.Abs(got-parity*n) > 1e-12 {
			t.Errorf("%s: i has %g", label, got)
		}
	}
}

func TestSitesGoWhereTheOperationCarriesThem(t *testing.T) {
	for _, s := range []study.Study{
		{Structure: "demo:square-plane", Operation: "C4(z)"},
		{Structure: "demo:rod", Operation: "i"}, {Structure: "demo:rod", Operation: "C2(φ)", Angle: 50}, {Structure: "demo:rod", Operation: "C(φ)", Angle: 50},
	} {
		p := played(t, demoWork(), s)
		for k, to := range p.Sites {
			from := p.Group.Sites.Positions[k]
			if p.Operation.Matrix.Mul3x1(from).Sub(p.Group.Sites.Positions[to]).Len() > 1e-9 {
				t.Errorf("%s: atom %d goes to %d", s.Operation, k+1, to+1)
			}
		}
		if p.Subject != study.NoSubject || p.Basis != nil || p.Terms != nil {
			t.Errorf("%+v", p)
		}
	}
}

func TestWhatCannotBePlayedIsBlamedOnTheRightChoice(t *testing.T) {
	good := study.Study{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Operation: "C4(z)", Projection: study.Projection{Function: 1}}
	for concern, change := range map[Concern]func(*study.Study){
		ConcernOperation: func(s *study.Study) { s.Operation = "C5(z)" },
		ConcernFunction:  func(s *study.Study) { s.Projection.Function = 5 },
		ConcernIrrep:     func(s *study.Study) { s.Projection.Irrep = "A2u" },
		ConcernCopy:      func(s *study.Study) { s.Projection.Irrep, s.Projection.Copy = "Eu", 2 },
		ConcernPartner:   func(s *study.Study) { s.Projection.Irrep, s.Projection.Partner = "Eu", 3 },
		ConcernBasis:     func(s *study.Study) { s.Basis = []string{"Cl:s", "F:s"} },
	} {
		s := good
		change(&s)
		_, err := demoWork().Play(context.Background(), s)
		var p *Problem
		if !errors.As(err, &p) || p.Concern != concern || strings.Contains(p.Error(), "\n") {
			t.Errorf("%s: %v", concern, err)
		}
		if concern == ConcernBasis && p.Index != 1 {
			t.Errorf("selection %d is blamed", p.Index+1)
		}
	}
}
