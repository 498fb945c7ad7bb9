package work

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"lobewright/orbitals"
)

// PartnerMatrix is the matrix of an operation among the partners of a group
// orbital's set: column k is the image of partner k. For an infinite group it
// is found from the functions themselves, at the angle of the operation. The
// error says that the basis lacks what a function becomes.
func (o *Orbitals) PartnerMatrix(op Operation, orbital *orbitals.GroupOrbital) (*mat.Dense, error) {
	if op.Index >= 0 {
		return o.Irreps[orbital.Irrep].Matrices[op.Index], nil
	}
	var set []*orbitals.GroupOrbital
	for i := range o.Projection.Orbitals {
		if p := &o.Projection.Orbitals[i]; p.Irrep == orbital.Irrep && p.Copy == orbital.Copy {
			set = append(set, p)
		}
	}
	m := mat.NewDense(len(set), len(set), nil)
	for k, from := range set {
		image := make([]float64, len(from.Coefficients))
		for i, c := range from.Coefficients {
			if c == 0 {
				continue
			}
			terms, err := o.Basis.ImageUnder(op, i)
			if err != nil {
				return nil, err
			}
			for _, t := range terms {
				image[t.Function] += c * t.Coefficient
			}
		}
		for l, to := range set {
			x := 0.0
			for i, c := range to.Coefficients {
				x += c * image[i]
			}
			if math.Abs(x) < 1e-12 {
				x = 0
			}
			m.Set(l, k, x)
		}
	}
	return m, nil
}
