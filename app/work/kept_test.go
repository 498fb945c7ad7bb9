package work

import (
	"slices"
	"testing"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// Of the subgroups that the group carries into each other the operations that are
// kept choose one, and name it again.
func TestKeptOperationsChooseAConjugate(t *testing.T) {
	w := New(structure.Inputs{Demo: assets.Demos()})
	g, err := w.Group(t.Context(), study.Study{Structure: "demo:octahedron"})
	if err != nil {
		t.Fatal(err)
	}
	all, err := Descents(g.Fit.Setting, "C4v", nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, axis := range []string{"x", "y", "z"} {
		name := "C4(" + axis + ")"
		d, err := g.Conjugate(all[0], name)
		if err != nil {
			t.Fatal(err)
		}
		o, err := g.Operation(name, 0)
		if err != nil || !slices.Contains(d.Operations, o.Index) || len(d.Operations) != 8 {
			t.Errorf("%s: %v (%v)", name, d.Operations, err)
		}
		again, err := g.Conjugate(all[0], Kept(d))
		if err != nil || !slices.Equal(again.Operations, d.Operations) {
			t.Errorf("%s: by %q it is %v, not %v (%v)", name, Kept(d), again.Operations, d.Operations, err)
		}
	}
	if d, err := g.Conjugate(all[0], ""); err != nil || d != all[0] {
		t.Error("nothing kept: another one")
	}
	for kept, want := range map[string]string{
		"C3(1)": "no subgroup C4v of Oh holds C3(1)",
		"i":     "no subgroup C4v of Oh holds i",
	} {
		if _, err := g.Conjugate(all[0], kept); err == nil || err.Error() != want {
			t.Errorf("%s: %v", kept, err)
		}
	}
	if _, err := g.Conjugate(all[0], "C9(z)"); err == nil {
		t.Error("an operation that is none is kept")
	}
}
