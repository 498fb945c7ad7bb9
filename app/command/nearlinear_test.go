package command

import (
	"math"
	"os"
	"strings"
	"testing"
)

const bent = `3
sulfur dioxide, 1.43 Å, 119.5°
S 0 0 0
O 1.235272 0.720398 0
O -1.235272 0.720398 0
`

// The bend is on paper Σd² = 2h²/3 with h = 0.720398 Å (see the test of the
// search): 0.5882 Å, all of it in Πu, along x.
func TestABentMoleculeIsTakenForALinearOne(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.WriteFile("bent.xyz", []byte(bent), 0o666); err != nil {
		t.Fatal(err)
	}
	var l contractLadder
	runJSON(t, &l, "near", "bent.xyz")
	amount := math.Sqrt(2.0/3) * 0.720398
	want := map[string]string{"D∞h": "Πu", "C∞v": "Π", "D2h": "B3u", "D3h": "E'", "D4h": "Eu", "D12d": "E1"}
	for _, n := range l.Groups {
		irrep := want[n.PointGroup]
		if irrep == "" {
			continue
		}
		delete(want, n.PointGroup)
		sum := 0.0
		for _, s := range n.Distortion {
			sum += s.Amount * s.Amount
			if s.Irrep != irrep || s.Partner != 1 {
				t.Errorf("%s: %+v, all of the bend is in the first partner of %s", n.PointGroup, s, irrep)
			}
		}
		if math.Abs(math.Sqrt(sum)-amount) > 1e-5 {
			t.Errorf("%s: the bend is %g, want %g", n.PointGroup, math.Sqrt(sum), amount)
		}
	}
	for symbol := range want {
		t.Errorf("%s is missing", symbol)
	}
	// In the linear group everything is as for a molecule that is linear: three
	// p sets are 2Σu+ + Σg+ + 2Πu + Πg.
	var p contractProjection
	runJSON(t, &p, "project", "bent.xyz", "--as", "Dinfh", "--on", "all:p")
	if got := contentIn(p); p.PointGroup != "D∞h" || got != "Σg+ + Πg + 2Σu+ + 2Πu" {
		t.Errorf("%s: %s", p.PointGroup, got)
	}
	runJSON(t, &p, "project", "bent.xyz", "--as", "D2h", "--on", "O:p")
	checkGroup(t, p.contractGroup)
	checkFunctions(t, p.contractGroup)
	checkProjection(t, p)
	if got := contentIn(p); got != "Ag + B2g + B3g + B1u + B2u + B3u" {
		t.Errorf("D2h: %s", got)
	}
	// And the ideal structure is linear.
	for _, as := range []string{"D∞h", "C∞v", "D2h", "D7d"} {
		if status, out, messages := run(t, "idealize", "bent.xyz", "--as", as, "-o", "ideal.xyz", "--force"); status != 0 || out != "" {
			t.Fatal(out, messages)
		}
		var g contractGroup
		runJSON(t, &g, "group", "ideal.xyz", "--tolerance", "1e-6")
		if g.PointGroup != "D∞h" || g.Deviation > 1e-7 {
			t.Errorf("ideal for %s: %s, deviation %g", as, g.PointGroup, g.Deviation)
		}
	}
}

// x of a linear group is free: it can be laid square to the bend.
func TestTheXOfALinearMoleculeIsChosen(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.WriteFile("bent.xyz", []byte(bent), 0o666); err != nil {
		t.Fatal(err)
	}
	for as, irreps := range map[string]string{"D∞h": "Σg+ + Πg + Σu+ + Πu", "D2h": "Ag + B2g + B3g + B1u + B2u + B3u"} {
		var p contractProjection
		runJSON(t, &p, "project", "bent.xyz", "--as", as, "--x", "0,0,2", "--on", "O:p")
		if got := contentIn(p); got != irreps || distance(p.Frame.Rotation[0], []float64{0, 0, 1}) > 1e-9 || math.Abs(math.Abs(p.Frame.Rotation[2][0])-1) > 1e-9 {
			t.Errorf("%s: %s in the frame %v", as, got, p.Frame.Rotation)
		}
	}
	status, out, messages := run(t, "group", "bent.xyz", "--as", "D∞h", "--z", "0,1,0")
	if want := "lobewright: z cannot lie there in D∞h: it lies along the molecule, and x is free\n"; status != 1 || out != "" || messages != want {
		t.Errorf("status %d, %q %q", status, out, messages)
	}
}

func contentIn(p contractProjection) string {
	var content []contractContent
	for _, part := range p.Content {
		content = append(content, contractContent(part))
	}
	return contentOf(content)
}

func TestLaddersOfBentMoleculesAreRead(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.WriteFile("bent.xyz", []byte(bent), 0o666); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ line, want string }{
		{"near bent.xyz", "D∞h             πu 0.5882                     0.4803  10.1826       (1, 0, 0)  πu 0.5882, 0.0000"},
		{"near bent.xyz", "up to n = 12 (--all"},
		{"near bent.xyz --all", "D11d   of D∞h"},
		{"frames bent.xyz --as D∞h", "x in the plane in which the structure is bent"},
		{"ledger bent.xyz --as D2h --on O:s --function 1 --irrep Ag", "4 φ1 + 4 φ2"},
		{"project bent.xyz --as D3h --on O:s", "A1'  Σg+"},
		{"descend bent.xyz --as D∞h --to D2h", "Πu   B2u + B3u"},
		{"group bent.xyz --as C2v --keep-axes", "near as can be to those of D2h"},
	} {
		status, out, messages := run(t, strings.Fields(c.line)...)
		if status != 0 || !strings.Contains(squeezed(out), squeezed(c.want)) {
			t.Errorf("%s: %q is not in\n%s%s", c.line, c.want, out, messages)
		}
	}
	for _, c := range []struct{ line, want string }{
		{"group bent.xyz --as D20h", "lobewright: the structure is not within 1 Å of D20h: it is of C2v Cs C2 C1 D∞h D2h C2h Ci\n"},
		{"group bent.xyz --as D∞h:2", "lobewright: there is no D∞h:2 within 1 Å: the last is D∞h:1\n"},
		{"ledger bent.xyz --as D∞h --on O:s --function 1 --irrep Σg+", "lobewright: D∞h has infinitely many operations, so there is no ledger; project lists its group orbitals\n"},
	} {
		if status, out, messages := run(t, strings.Fields(c.line)...); status != 1 || out != "" || messages != c.want {
			t.Errorf("%s: status %d, %q %q", c.line, status, out, messages)
		}
	}
}

// squeezed has one blank where there were several.
func squeezed(s string) string { return strings.Join(strings.Fields(s), " ") }
