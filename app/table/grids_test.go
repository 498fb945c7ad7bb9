package table

import (
	"context"
	"encoding/csv"
	"math"
	"strconv"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

func orbitalsOf(t *testing.T, s study.Study) *work.Orbitals {
	t.Helper()
	o, err := work.New(structure.Inputs{Demo: assets.Demos()}).Orbitals(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return o
}

func records(t *testing.T, g Grid) [][]string {
	t.Helper()
	all, err := csv.NewReader(strings.NewReader(g.CSV())).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return all
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// The table of D3h as it stands in the handbooks, from memory: E′ has the
// characters 2 −1 0 2 −1 0.
func TestCharactersAreThoseOfTheGroup(t *testing.T) {
	o := orbitalsOf(t, study.Study{Structure: "demo:trimer", Basis: []string{"Re:s"}})
	say := assets.TextsIn(assets.English).Say
	all := records(t, CharactersGrid(o.Fit.Setting, say))
	if got := strings.Join(all[0], " "); got != "irrep E 2C3 3C2 σh 2S3 3σv functions" {
		t.Error(got)
	}
	if got := strings.Join(all[3][:7], " "); got != "E' 2 -1 0 2 -1 0" {
		t.Error(got)
	}
	if len(all) != 7 {
		t.Errorf("%d rows", len(all))
	}
}

func TestCoefficientsReadBackExactlyAndAreNormalized(t *testing.T) {
	o := orbitalsOf(t, study.Study{Structure: "demo:octahedron", Basis: []string{"C:sigma", "C:pi"}})
	all := records(t, CoefficientsGrid(o, assets.TextsIn(assets.English).Say))
	n := len(o.Functions)
	if len(all) != n+1 {
		t.Fatalf("%d rows for %d functions", len(all), n)
	}
	for i, row := range all[1:] {
		sum := 0.0
		for k, text := range row[len(row)-n:] {
			c := number(t, text)
			if c != o.Projection.Orbitals[i].Coefficients[k] {
				t.Fatalf("row %d: %s is not %v", i, text, o.Projection.Orbitals[i].Coefficients[k])
			}
			sum += c * c
		}
		if math.Abs(sum-1) > 1e-12 {
			t.Errorf("row %d: squares add up to %v", i, sum)
		}
	}
}

func TestContentAddsUpToTheCharactersOfTheBasis(t *testing.T) {
	o := orbitalsOf(t, study.Study{Structure: "demo:tetrahedron", Basis: []string{"Cl:s", "Cl:p"}})
	all := records(t, ContentGrid(o, assets.TextsIn(assets.German).Say))
	last := all[len(all)-1]
	for c := 2; c < len(last); c++ {
		sum := 0.0
		for _, row := range all[1 : len(all)-1] {
			sum += number(t, row[1]) * number(t, row[c])
		}
		if want := number(t, last[c]); math.Abs(sum-want) > 1e-9 {
			t.Errorf("%s: %v, want %v", all[0][c], sum, want)
		}
	}
}

func TestWaterExchangesB1AndB2BetweenItsTwoSettings(t *testing.T) {
	o := orbitalsOf(t, study.Study{Structure: "demo:water", Basis: []string{"H:s"}})
	all := records(t, FramesGrid(o.Exchanges(), assets.TextsIn(assets.English).Say))
	names := map[string]string{}
	for _, row := range all[1:] {
		names[row[1]] = row[2]
	}
	if all[0][2] != "plane-xz" || names["B1"] != "B2" || names["B2"] != "B1" || names["A2"] != "A2" || names["σv(xz)"] != "σv'(yz)" {
		t.Errorf("%s: %v", all[0][2], names)
	}
}

func TestOperationsCarryAtomsAsTheirPermutationsSay(t *testing.T) {
	o := orbitalsOf(t, study.Study{Structure: "demo:square-plane", Basis: []string{"Cl:s"}})
	all := records(t, OperationsGrid(o.Group, assets.TextsIn(assets.English).Say))
	names := o.CoreNames()
	if len(all) != len(o.Fit.Setting.Operations)+1 {
		t.Fatalf("%d rows", len(all))
	}
	for _, row := range all[1:] {
		for r, op := range o.Fit.Setting.Operations {
			if op.Name != row[1] {
				continue
			}
			for k, image := range o.Fit.Permutations[r] {
				if row[5+k] != names[image] {
					t.Errorf("%s carries %s to %s, not to %s", op.Name, names[k], names[image], row[5+k])
				}
			}
		}
	}
}
