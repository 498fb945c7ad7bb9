package work

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/orbitals/structure"
)

func TestAContainedStudyHasTheSameAtomsAndNoPath(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "home", "someone")
	if err := os.MkdirAll(folder, 0o777); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(folder, "water.xyz")
	const text = "3\n\nO 0.1 0.30000000000000004 1e-7\nh 0 .757 -.5865\n1 0 -.757 -.5865 9 9\n\n"
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	ctx := context.Background()
	for _, s := range []study.Study{{Structure: path, Core: "O"}, {Structure: "-", Core: "O"}} {
		w := New(structure.Inputs{Stdin: strings.NewReader(text)})
		contained, err := w.Contained(ctx, s)
		if err != nil {
			t.Fatal(err)
		}
		encoded, err := study.Encode(contained)
		if err != nil || strings.Contains(string(encoded), "someone") || contained.Core != "O" {
			t.Errorf("%v: %s", err, encoded)
		}
		before, err := w.Structure(ctx, s)
		if err != nil {
			t.Fatal(err)
		}
		after, err := New(structure.Inputs{}).Structure(ctx, contained)
		if err != nil {
			t.Fatal(err)
		}
		if before.Molecule.Title != after.Molecule.Title || len(after.Molecule.Atoms) != 3 {
			t.Errorf("%q became %q", before.Molecule.Title, after.Molecule.Title)
		}
		for i, a := range before.Molecule.Atoms {
			if after.Molecule.Atoms[i] != a {
				t.Errorf("atom %d: %v became %v", i+1, a, after.Molecule.Atoms[i])
			}
		}
		again, err := New(structure.Inputs{}).Contained(ctx, contained)
		if err != nil || !again.Equal(contained) {
			t.Errorf("%v: contained twice it is another", err)
		}
	}
}

func TestWhatTheProgramHasIsOnlyNamed(t *testing.T) {
	for _, name := range []string{"demo:water", "ideal:OC-6,Co,N,1.96"} {
		s, err := New(structure.Inputs{}).Contained(context.Background(), study.Study{Structure: name})
		if err != nil || !s.Equal(study.Study{Structure: name}) {
			t.Errorf("%v: %+v", err, s)
		}
	}
}
