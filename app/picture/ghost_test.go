package picture

import (
	"context"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// TestAGhostUnderWhatHasComeThereIsNotDrawn ends operations on a square plane:
// ghosts are left only where nothing of the same shape has arrived.
func TestAGhostUnderWhatHasComeThereIsNotDrawn(t *testing.T) {
	w := work.New(structure.Inputs{Demo: assets.Demos()})
	for _, c := range []struct {
		basis     string
		functions []float64
		operation string
		left      int // atoms with a ghost
	}{
		{"Cl:sigma", []float64{0.5, -0.5, 0.5, -0.5}, "C4(z)", 0},
		{"Cl:sigma", []float64{1, 0, 0, 0}, "C4(z)", 1},
		{"Cl:sigma", []float64{1, 0, 0, 0}, "C2'(x)", 0},
		{"Cl:sigma", []float64{0.9, 0, 0.1, 0}, "C2(z)", 1}, // the larger one left its place to the smaller
		{"Cl:s", []float64{1, 1, 1, 1}, "C4(z)", 0},
		{"Pt:d", []float64{1, 0, 0, 0, 0}, "C4(z)", 0}, // z²
		{"Pt:d", []float64{0, 1, 0, 0, 0}, "C4(z)", 1}, // xz, which becomes yz
		{"Pt:d", []float64{0, 0, 0, 1, 0}, "C4(z)", 0}, // x²−y² becomes its negative
	} {
		o, err := w.Orbitals(context.Background(), study.Study{Structure: "demo:square-plane", Basis: []string{c.basis}})
		if err != nil {
			t.Fatal(err)
		}
		op, err := o.Group.Operation(c.operation, 0)
		if err != nil {
			t.Fatal(err)
		}
		var live Live
		stage := newStage(study.Study{})
		stage.carries = carriers(o.Basis)
		parts := live.parts(stage, Shown{Group: o.Group, Basis: o.Basis, Coefficients: c.functions})
		left := 0
		for _, p := range uncovered(o.Group, parts, op.At(1)) {
			if p.length > 1e-6 {
				left++
			}
		}
		if left != c.left {
			t.Errorf("%s %v after %s leaves %d ghosts, want %d", c.basis, c.functions, c.operation, left, c.left)
		}
	}
}
