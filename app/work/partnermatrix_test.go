package work

import (
	"context"
	"math"
	"testing"

	"lobewright/app/study"
)

// In Π a turn by φ has the matrix of the turn, in Δ that of the turn by 2φ.
func TestPartnersOfALinearMoleculeTurnByLambdaTimesTheAngle(t *testing.T) {
	o, err := demoWork().Orbitals(context.Background(), study.Study{Structure: "demo:rod", Basis: []string{"C:p", "Ag:d"}})
	if err != nil {
		t.Fatal(err)
	}
	for _, angle := range []float64{0, 30, 77, 200} {
		for _, op := range o.Group.Operations(angle) {
			for i := range o.Projection.Orbitals {
				orbital := &o.Projection.Orbitals[i]
				m, err := o.PartnerMatrix(op, orbital)
				if err != nil {
					t.Fatal(err)
				}
				irrep := o.Irreps[orbital.Irrep]
				n, _ := m.Dims()
				if n != irrep.Dimension {
					t.Fatalf("%s has a matrix of %d rows", irrep.Label, n)
				}
				if op.Name != "C(φ)" || n != 2 {
					continue
				}
				lambda := map[rune]float64{'Π': 1, 'Δ': 2}[[]rune(irrep.Label)[0]]
				sin, cos := math.Sincos(lambda * angle * math.Pi / 180)
				for at, want := range map[[2]int]float64{{0, 0}: cos, {1, 0}: sin, {0, 1}: -sin, {1, 1}: cos} {
					if got := m.At(at[0], at[1]); math.Abs(got-want) > 1e-9 {
						t.Errorf("%s, C(%g°): element %v is %v, not %v", irrep.Label, angle, at, got, want)
					}
				}
			}
		}
	}
}
