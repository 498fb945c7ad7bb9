package symmetry

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// The class functions of every group are compared with those that GAP, a
// general system for computational algebra, finds for the same group given
// only as permutations: the regular representation made from our product
// table. Set LOBEWRIGHT_NEEDS_GAP to make its absence a failure.
func TestCharactersAgreeWithAGeneralAlgebraSystem(t *testing.T) {
	gap, err := exec.LookPath("gap")
	if err != nil {
		if os.Getenv("LOBEWRIGHT_NEEDS_GAP") != "" {
			t.Fatal("gap is not installed: install gap-core and gap-character-tables")
		}
		t.Skip("gap is not installed")
	}
	groups := everyGroup(8)
	var script strings.Builder
	script.WriteString(gapPrelude)
	for _, symbol := range groups {
		s := mustNew(t, symbol)
		var gens, reps []string
		for a := range s.Operations {
			gens = append(gens, regular(s, a))
		}
		for _, c := range s.Classes {
			reps = append(reps, gens[c.Members[0]])
		}
		fmt.Fprintf(&script, "show(%q,[%s],[%s]);\n", symbol, strings.Join(gens, ","), strings.Join(reps, ","))
	}
	script.WriteString("Print(\"@\\n\");\nQuitGap(0);\n") // QUIT would lose the last lines
	file := filepath.Join(t.TempDir(), "groups.g")
	if err := os.WriteFile(file, []byte(script.String()), 0o644); err != nil {
		t.Fatal(err)
	}
	out, err := exec.Command(gap, "-q", "-b", "-A", file).Output()
	if err != nil {
		t.Fatal(err)
	}
	// The system breaks its lines where it likes.
	text := strings.NewReplacer("\\\n", "", "\n", " ").Replace(string(out))
	lines := strings.Split(text, "@")
	if len(lines) != len(groups)+2 {
		t.Fatalf("%d answers for %d groups: %.300s", len(lines)-2, len(groups), out)
	}
	for i, symbol := range groups {
		_, list, _ := strings.Cut(lines[i+1], " ")
		compareWithGap(t, mustNew(t, symbol), list)
	}
}

// gapPrelude defines the answer for one group: for every irreducible character
// and class the coefficients of the value in powers of exp(2πi/e).
const gapPrelude = `
show:=function(name,ops,reps)
 local G,e;
 G:=Group(ops); e:=Exponent(G);
 Print("@",name," ",List(Irr(G),chi->List(reps,g->CoeffsCyc(g^chi,e))));
end;
`

// regular writes left multiplication by an operation as a list permutation.
func regular(s *Setting, a int) string {
	images := make([]string, s.Order())
	for b := range images {
		images[b] = itoa(s.Product(a, b) + 1)
	}
	return "PermList([" + strings.Join(images, ",") + "])"
}

func compareWithGap(t *testing.T, s *Setting, list string) {
	t.Helper()
	var coefficients [][][]float64
	if err := json.Unmarshal([]byte(list), &coefficients); err != nil {
		t.Fatalf("%s: %v in …%s", s.Symbol, err, list[max(0, len(list)-200):])
	}
	// Real characters, and sums of a complex one and its conjugate.
	var rows [][]float64
	for _, chi := range coefficients {
		row := make([]float64, len(chi))
		complexRow, first := false, 0
		for c, value := range chi {
			re, im := 0.0, 0.0
			for k, x := range value {
				angle := 2 * math.Pi * float64(k) / float64(len(value))
				re += x * math.Cos(angle)
				im += x * math.Sin(angle)
			}
			row[c] = re
			if math.Abs(im) > 1e-9 {
				if !complexRow {
					complexRow = true
					first = 1
					if im < 0 {
						first = -1
					}
				}
			}
		}
		if complexRow {
			if first < 0 {
				continue // the conjugate of one that stands elsewhere
			}
			for c := range row {
				row[c] *= 2
			}
		}
		rows = append(rows, row)
	}
	if len(rows) != len(s.Irreps) {
		t.Errorf("%s: %d irreps, the algebra system has %d", s.Symbol, len(s.Irreps), len(rows))
		return
	}
next:
	for _, ir := range s.Irreps {
		for r, row := range rows {
			same := row != nil
			for c := range row {
				same = same && math.Abs(row[c]-ir.Characters[c]) < 1e-9
			}
			if same {
				rows[r] = nil
				continue next
			}
		}
		t.Errorf("%s %s: %v is no character of the group", s.Symbol, ir.Label, ir.Characters)
	}
}
