package command

import (
	"math"
	"strings"
	"testing"
)

type contractDescent struct {
	PointGroup string `json:"pointGroup"`
	Subgroup   string `json:"subgroup"`
	Embeddings []struct {
		Operations  []string    `json:"operations"`
		Rotation    [][]float64 `json:"rotation"`
		Correlation []struct {
			Irrep   string            `json:"irrep"`
			Content []contractContent `json:"content"`
		} `json:"correlation"`
		Partners []struct {
			Irrep  string      `json:"irrep"`
			Matrix [][]float64 `json:"matrix"`
		} `json:"partners"`
	} `json:"embeddings"`
}

// The matrices of the kept operations, taken to the partners of the subgroup,
// are those of the irreps of the subgroup, one block after the other.
func TestDescentsKeepTheContract(t *testing.T) {
	for _, c := range []struct {
		structure string
		choice    []string
		model     string // a structure that has the subgroup, for its matrices
		ways      int
		some      string // correlations of the first embedding
	}{
		{"ideal:OC-6", []string{"--to", "D4h"}, "ideal:SP-4", 1, "T1u=A2u + Eu; Eg=A1g + B1g; T2g=B2g + Eg"},
		{"ideal:OC-6", []string{"--to", "D2h"}, "ideal:SP-4 --as D2h", 2, "T1u=B1u + B2u + B3u; Eg=2Ag"},
		{"ideal:OC-6", []string{"--to", "D3d"}, "ideal:OC-6 --as D3d", 1, "T2g=A1g + Eg; T1u=A2u + Eu"},
		{"ideal:OC-6", []string{"--fix", "2"}, "ideal:SPY-5", 1, "T1u=A1 + E; T2u=B1 + E"},
		{"ideal:T-4", []string{"--to", "C3v"}, "ideal:TPY-3", 1, "T2=A1 + E; T1=A2 + E"},
		{"ideal:TP-3", []string{"--to", "C2v"}, "demo:water", 1, "E'=A1 + B2"},
		{"demo:benzene", []string{"--to", "D2h"}, "ideal:SP-4 --as D2h", 1, "E1g=B2g + B3g; E2u=Au + B1u"},
		{"ideal:OC-6", []string{"--keep", "C4(z)", "--frame", "z-c2"}, "", 0, ""},
	} {
		var d contractDescent
		args := append([]string{"descend", c.structure}, c.choice...)
		if c.ways == 0 { // C4(z) is none of its names there
			if status, _, messages := run(t, args...); status != 1 || !strings.Contains(messages, "C4(z)") {
				t.Errorf("%v: %s", args, messages)
			}
			continue
		}
		runJSON(t, &d, args...)
		var group, model contractGroup
		runJSON(t, &group, "group", c.structure)
		if c.model != "" {
			runJSON(t, &model, append([]string{"group"}, strings.Fields(c.model)...)...)
		}
		if d.PointGroup != group.PointGroup || d.Subgroup != model.PointGroup || len(d.Embeddings) != c.ways {
			t.Fatalf("%v: %s into %s (%s), %d ways", args, d.PointGroup, d.Subgroup, model.PointGroup, len(d.Embeddings))
		}
		for _, pair := range strings.Split(c.some, "; ") {
			label, want, _ := strings.Cut(pair, "=")
			for _, row := range d.Embeddings[0].Correlation {
				if row.Irrep == label && contentOf(row.Content) != want {
					t.Errorf("%v: %s becomes %s, want %s", args, label, contentOf(row.Content), want)
				}
			}
		}
		for _, e := range d.Embeddings {
			if len(e.Operations) != model.Order || math.Abs(determinant(e.Rotation)-1) > 1e-12 {
				t.Errorf("%v: %d operations, rotation %v", args, len(e.Operations), e.Rotation)
			}
			for _, name := range e.Operations {
				at, image := operationNamed(group, name), -1
				moved := multiply(multiply(e.Rotation, group.Operations[at].Matrix), transposed(e.Rotation))
				for i, o := range model.Operations {
					if farthest(o.Matrix, moved) < 1e-9 {
						image = i
					}
				}
				if image < 0 {
					t.Fatalf("%v: %s is no operation of the subgroup in its frame", args, name)
				}
				for i, row := range e.Correlation {
					m := e.Partners[i].Matrix
					got := multiply(multiply(m, group.Irreps[i].Matrices[at]), transposed(m))
					want := make([][]float64, len(m))
					for k := range want {
						want[k] = make([]float64, len(m))
					}
					first := 0
					for _, part := range row.Content {
						ir := irrepNamed(model.Irreps, part.Irrep)
						for range part.Copies {
							for k := range ir.Dimension {
								for l := range ir.Dimension {
									want[first+k][first+l] = ir.Matrices[image][k][l]
								}
							}
							first += ir.Dimension
						}
					}
					if off := farthest(got, want); off > 1e-10 {
						t.Fatalf("%v: %s of %s goes over wrongly, off by %g", args, name, row.Irrep, off)
					}
				}
			}
		}
	}
}

func operationNamed(g contractGroup, name string) int {
	for i, o := range g.Operations {
		if o.Name == name {
			return i
		}
	}
	return -1
}

// Tables of any textbook (from memory).
func TestLinearGroupsDescend(t *testing.T) {
	for _, c := range []struct{ in, to, some string }{
		{"D∞h", "D2h", "Σg+=Ag; Σg-=B1g; Πu=B2u + B3u; Σu+=B1u; Δg=Ag + B1g"},
		{"Dinfh", "D4h", "Σu+=A2u; Πg=Eg; Δg=B1g + B2g"},
		{"C∞v", "C2v", "Σ+=A1; Σ-=A2; Π=B1 + B2; Δ=A1 + A2"},
	} {
		var d contractDescent
		runJSON(t, &d, "descend", "--in", c.in, "--to", c.to)
		for _, pair := range strings.Split(c.some, "; ") {
			label, want, _ := strings.Cut(pair, "=")
			found := false
			for _, row := range d.Embeddings[0].Correlation {
				found = found || row.Irrep == label && contentOf(row.Content) == want
			}
			if !found {
				t.Errorf("%s into %s: %s is not %s", c.in, c.to, label, want)
			}
		}
	}
}

// A numbered subgroup is that one of all that are listed.
func TestNumberedSubgroupsAreThoseListed(t *testing.T) {
	var all contractDescent
	runJSON(t, &all, "descend", "ideal:OC-6", "--to", "C2v")
	for i, e := range all.Embeddings {
		var one contractDescent
		runJSON(t, &one, "descend", "ideal:OC-6", "--to", "C2v:"+string(rune('1'+i)))
		if len(one.Embeddings) != 1 || strings.Join(one.Embeddings[0].Operations, " ") != strings.Join(e.Operations, " ") {
			t.Errorf("C2v:%d: %v", i+1, one.Embeddings)
		}
	}
}
