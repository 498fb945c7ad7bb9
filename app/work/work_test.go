package work

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/orbitals/structure"
)

const waterFile = "3\nwater\nO 0 0 0.117\nH 0 0.757 -0.469\nH 0 -0.757 -0.469\n"

// aStudy projects the hydrogens of a molecule of water that is read from a
// file.
func aStudy(t *testing.T) study.Study {
	t.Helper()
	path := filepath.Join(t.TempDir(), "water.xyz")
	if err := os.WriteFile(path, []byte(waterFile), 0o666); err != nil {
		t.Fatal(err)
	}
	return study.Study{Structure: path, Basis: []string{"H:s"}, Projection: study.Projection{Function: 1, Irrep: "B2"}}
}

func must[V any](t *testing.T) func(V, error) V {
	return func(v V, err error) V {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

func TestAStageIsKeptUntilWhatItReadsChanges(t *testing.T) {
	ctx, w, s := context.Background(), New(structure.Inputs{}), aStudy(t)
	group, orbitals := must[*Group](t), must[*Orbitals](t)
	g, o := group(w.Group(ctx, s)), orbitals(w.Orbitals(ctx, s))

	turned := s
	turned.Camera, turned.Look.Style, turned.Projection.Partner = study.Camera{Set: true, Azimuth: 10}, "ink", 1
	if group(w.Group(ctx, turned)) != g || orbitals(w.Orbitals(ctx, turned)) != o {
		t.Error("another camera, look or partner computes anew")
	}
	other := s
	other.Basis = []string{"O:p"}
	if orbitals(w.Orbitals(ctx, other)) == o {
		t.Error("another basis does not compute anew")
	}
	if group(w.Group(ctx, other)) != g {
		t.Error("another basis finds the group anew")
	}
	looser := s
	looser.Tolerance = 0.1
	again := group(w.Group(ctx, looser))
	if again == g || again.Structure != g.Structure {
		t.Error("another tolerance must find the group anew, in the structure as read")
	}
}

func TestErrorsAreNotKept(t *testing.T) {
	ctx, w, s := context.Background(), New(structure.Inputs{}), aStudy(t)
	moved := s
	moved.Structure = filepath.Join(t.TempDir(), "later.xyz")
	if _, err := w.Group(ctx, moved); err == nil {
		t.Fatal("no error for a file that does not exist")
	}
	if err := os.WriteFile(moved.Structure, []byte(waterFile), 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := w.Group(ctx, moved); err != nil {
		t.Errorf("the file exists now: %v", err)
	}
}

func TestACancelledComputationLeavesNothing(t *testing.T) {
	w, s := New(structure.Inputs{}), aStudy(t)
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := w.Orbitals(ctx, s); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v", err)
	}
	if _, err := w.Orbitals(context.Background(), s); err != nil {
		t.Errorf("afterwards: %v", err)
	}
}

func TestTheToleranceErrorNamesTheAtoms(t *testing.T) {
	w := New(structure.Inputs{Stdin: strings.NewReader("4\n\nO 0 0 0\nXe 5 0 0\nH 0 0.8 0\nH 0 -0.8 0.1\n")})
	_, err := w.Group(context.Background(), study.Study{Structure: "-", Core: "H", Tolerance: 1})
	if err == nil || !strings.Contains(err.Error(), "H3 and H4") {
		t.Errorf("error %v", err)
	}
}

func TestLedgersAndOrbitalsThatDoNotExistAreRefused(t *testing.T) {
	ctx, w, s := context.Background(), New(structure.Inputs{}), aStudy(t)
	must[*Ledger](t)(w.Ledger(ctx, s))
	for want, change := range map[string]func(*study.Study){
		"functions 1 to 2": func(s *study.Study) { s.Projection.Function = 3 },
		"A1, A2, B1, B2":   func(s *study.Study) { s.Projection.Irrep = "Eg" },
		"1 × 1":            func(s *study.Study) { s.Projection.Element = [2]int{1, 2} },
	} {
		wrong := s
		change(&wrong)
		if _, err := w.Ledger(ctx, wrong); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
	o := must[*Orbitals](t)(w.Orbitals(ctx, s))
	for want, p := range map[string]study.Projection{
		"it has A1, B2":   {Irrep: "A2"},
		"the basis has 1": {Irrep: "A1", Copy: 2},
		"it has 1":        {Irrep: "B2", Partner: 2},
		"no irrep":        {Irrep: ""},
	} {
		if _, err := o.Orbital(p); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%+v: error %v, want one with %q", p, err, want)
		}
	}
}
