package work

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/orbitals/structure"
)

func matched(t testing.TB, s study.Study) *Match {
	t.Helper()
	m, err := demoWork().Match(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// written says what goes with what: "a1g:s,d" for every copy, and "-" where
// nothing does.
func written(m *Match) string {
	var out []string
	for _, p := range m.Pairs {
		shells := ""
		for _, c := range p.Central {
			first := m.Functions.Partners(c.Irrep, c.Copy)[0]
			for i, x := range first.Coefficients {
				if math.Abs(x) > 1e-9 {
					shells += "spdf"[m.Functions.Functions[i].Shell : m.Functions.Functions[i].Shell+1]
					break
				}
			}
		}
		if shells == "" {
			shells = "-"
		}
		out = append(out, m.Orbitals.Irreps[p.Irrep].Label+":"+shells)
	}
	return strings.Join(out, " ")
}

// TestTextbookMatches holds the cases that every textbook of coordination
// chemistry has (common practice), f functions included: σ of an octahedron
// finds s, d and p; of its π sets t1g finds none; on a square plane b1g finds
// d(x²−y²); and so on.
func TestTextbookMatches(t *testing.T) {
	for _, c := range []struct{ structure, basis, want, lone string }{
		{"ideal:OC-6", "2-7:sigma", "A1g:s Eg:d T1u:pf", "T2g A2u T2u"},
		{"ideal:OC-6", "2-7:pi", "T1g:- T2g:d T1u:pf T2u:f", "A1g Eg A2u"},
		{"ideal:SP-4", "2-5:sigma", "A1g:sd B1g:d Eu:pff", "B2g Eg A2u A2u B1u B2u"},
		{"ideal:T-4", "2-5:sigma", "A1:sf T2:pdf", "E T1"},
		{"ideal:T-4", "2-5:pi", "E:d T1:f T2:pdf", "A1 A1"},
		{"ideal:TBPY-5", "2-6:sigma", "A1':sdf A1':sdf E':pdf A2'':pf", ""},
		{"demo:rod", "C:p", "", ""},
	} {
		m := matched(t, study.Study{Structure: c.structure, Basis: []string{c.basis}})
		if got := written(m); c.want != "" && got != c.want {
			t.Errorf("%s %s: %s", c.structure, c.basis, got)
		}
		var lone []string
		for _, l := range m.Lone {
			lone = append(lone, m.Functions.Irreps[l.Irrep].Label)
		}
		if got := strings.Join(lone, " "); c.lone != "" && got != c.lone {
			t.Errorf("%s %s: alone stay %s", c.structure, c.basis, got)
		}
		if m.Central != 0 && c.structure != "demo:rod" || m.None != nil {
			t.Errorf("%s: central atom %d, %v", c.structure, m.Central+1, m.None)
		}
	}
}

// TestPartnersGoWithTheirOwnKindAlone: the overlap of partner k of a group
// orbital with partner l of a central copy is the same number for k = l and zero
// else (Schur's lemma), whatever is turned; its sign is the phase.
func TestPartnersGoWithTheirOwnKindAlone(t *testing.T) {
	for _, s := range []study.Study{
		{Structure: "ideal:OC-6", Basis: []string{"2-7:p"}},
		{Structure: "ideal:SP-4", Basis: []string{"2-5:p"}},
		{Structure: "ideal:T-4", Basis: []string{"2-5:p"}},
		{Structure: "ideal:TBPY-5", Basis: []string{"2-6:s,p"}},
		{Structure: "ideal:SP-4", Basis: []string{"2-5:p"}, Projection: study.Projection{Irrep: "Eu"}, Turn: []study.PlaneRotation{{From: 1, To: 2, Angle: 33}}},
		{Structure: "demo:rod", Basis: []string{"C:p"}},
	} {
		m := matched(t, s)
		for _, p := range m.Pairs {
			group := m.Orbitals.Partners(p.Irrep, p.Copy)
			for _, c := range p.Central {
				central := m.Functions.Partners(c.Irrep, c.Copy)
				first := m.overlap(group[0].Coefficients, central[0].Coefficients)
				if math.Abs(first) > 1e-9 && (first > 0) != (c.Phase > 0) {
					t.Errorf("the phase is %d and the overlap %g", c.Phase, first)
				}
				for k := range group {
					for l := range central {
						want := 0.0
						if k == l {
							want = first
						}
						if d := m.overlap(group[k].Coefficients, central[l].Coefficients); math.Abs(d-want) > 1e-9 {
							t.Errorf("%s %s: partner %d with %d: %g, not %g", s.Structure, m.Orbitals.Irreps[p.Irrep].Label, k+1, l+1, d, want)
						}
					}
				}
			}
		}
	}
}

// TestPhasesFaceEachOther: worked out by hand. σ functions of ligands point with
// their positive lobe to the metal, so that the one on +x goes with +px, which is
// positive there, and the totally symmetric one with +s.
func TestPhasesFaceEachOther(t *testing.T) {
	m := matched(t, study.Study{Structure: "ideal:SP-4", Basis: []string{"2-5:sigma"}})
	for _, p := range m.Pairs {
		for _, c := range p.Central {
			group, central := m.Orbitals.Partners(p.Irrep, p.Copy)[0], m.Functions.Partners(c.Irrep, c.Copy)[0]
			// The sign of the ligand's function toward the metal is that of its
			// coefficient; the sign of the metal's toward the ligand its value there.
			sum := 0.0
			for i, x := range group.Coefficients {
				at := m.Orbitals.Group.Sites.Positions[m.Orbitals.Functions[i].Site]
				for j, y := range central.Coefficients {
					sum += x * y * m.Functions.Functions[j].Value(at)
				}
			}
			if math.Abs(sum) > 1e-9 && (sum > 0) != (c.Phase > 0) {
				t.Errorf("%s: %g toward each other, phase %d", m.Orbitals.Irreps[p.Irrep].Label, sum, c.Phase)
			}
		}
	}
}

func TestCentralAtomsAreThoseThatStayInPlace(t *testing.T) {
	for _, c := range []struct {
		structure, basis string
		chosen           int
		want             string
	}{
		{"ideal:SP-4,Pd,Cl,2.31", "Cl:s", 0, "Pd1"},
		{"ideal:SP-4,Pd,Cl,2.31", "Cl:s", 2, "Cl2 cannot be the central atom: C4(z) carries it to Cl3, so that its functions are no set by themselves; Pd1 can"},
		{"ideal:SP-4,Pd,Cl,2.31", "Cl:s", 9, "atom 9 does not exist; there are atoms 1 to 5"},
		{"ideal:ring-6,C", "C:pz", 0, "there is no central atom: the operations of D6h leave no atom in its place"},
		{"demo:water", "H:s", 0, "O1"},
		{"demo:cyanide", "N:p", 0, ""},
	} {
		s := study.Study{Structure: c.structure, Basis: []string{c.basis}, Central: c.chosen}
		m, err := demoWork().Match(context.Background(), s)
		if err != nil {
			t.Errorf("%s: %v", c.structure, err)
			continue
		}
		got := fmt.Sprint(m.None)
		if m.None == nil {
			got = m.Orbitals.AtomNames()[m.Central]
		}
		if c.want != "" && got != c.want {
			t.Errorf("%s %d: %s", c.structure, c.chosen, got)
		}
	}
}

// TestShellsOfElements: 5s 5p 4d 4f of palladium, 3d of sulfur and of iron, 4d of
// selenium (common practice).
func TestShellsOfElements(t *testing.T) {
	for symbol, want := range map[string]string{"Pd": "5 5 4 4", "Fe": "4 4 3 4", "S": "3 3 3 4", "Se": "4 4 4 4", "C": "2 2 3 4", "H": "1 2 3 4", "Pt": "6 6 5 4", "U": "7 7 6 5", "Xe": "5 5 5 4"} {
		e, _ := structure.ElementOf(symbol)
		if got := fmt.Sprint(e.Valence(0), e.Valence(1), e.Valence(2), e.Valence(3)); got != want {
			t.Errorf("%s: %s", symbol, got)
		}
	}
}

// The sign of functions of an atom that faces a group orbital in phase is that of
// the match. In bis(cyclopentadienyl)iron the lobes toward the metal of a1g are
// negative where the outer ones are positive (pz of both rings points outward), so
// that the metal's s goes with a minus; in the square plane a positive sum of σ
// functions, which point to the metal, goes with +s.
func TestPhaseIsThatOfTheMatch(t *testing.T) {
	signs := map[string]int{}
	for _, s := range []study.Study{
		{Structure: "demo:sandwich-staggered", Basis: []string{"C:pz"}},
		{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}},
		{Structure: "demo:octahedron", Basis: []string{"C:sigma,pi"}},
	} {
		w := demoWork()
		m, err := w.Match(t.Context(), s)
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range m.Pairs {
			for _, c := range p.Central {
				group, central := m.Orbitals.of(p.Irrep)[p.Copy], m.Functions.of(c.Irrep)[c.Copy]
				for k := range group {
					got := Phase(m.Orbitals.Basis, group[k].Coefficients, m.Central, m.Functions.Basis, central[k].Coefficients)
					if got != c.Phase {
						t.Errorf("%s %s: %d, want %d", s.Structure, m.Orbitals.Irreps[p.Irrep].Label, got, c.Phase)
					}
				}
				if c.Copy == 0 {
					signs[s.Structure+" "+m.Orbitals.Irreps[p.Irrep].Label] = c.Phase
				}
			}
		}
	}
	if signs["demo:sandwich-staggered A1g"] != -1 || signs["demo:square-plane A1g"] != 1 {
		t.Errorf("a1g with s: %v", signs)
	}
}
