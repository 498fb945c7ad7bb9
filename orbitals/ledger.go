package orbitals

import (
	"math"

	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// ByCharacter as the element of a Ledger weighs the operations with the
// characters of the irrep instead of a matrix element.
var ByCharacter = [2]int{-1, -1}

// A Ledger is the projection of one function, operation by operation:
// Σ_R w(R) R f, with w the matrix element D(R)_kl of an irrep, or its
// character. The factor d/h is left out, so the sum is not normalized.
type Ledger struct {
	Function, Irrep int
	Element         [2]int // k and l, or ByCharacter
	Rows            []LedgerRow
	// Norm is the length of the final sum, exactly 0 where the function
	// projects to nothing.
	Norm float64
}

// A LedgerRow is what one operation adds.
type LedgerRow struct {
	Operation int
	Image     []Term    // what the function becomes
	Weight    float64   // the matrix element or character
	Sum       []float64 // up to this operation, one number a function
}

// Ledger projects a function onto an irrep of the setting with one of its
// matrix elements, or ByCharacter. Without partners to tell apart (dimension 1)
// the two are the same.
func (r *Representation) Ledger(function, irrep int, element [2]int) (*Ledger, error) {
	if irrep < 0 || irrep >= len(r.setting.Irreps) {
		return nil, message.Errorf("there is no irrep %d: %s has %d", irrep+1, r.setting.Symbol, len(r.setting.Irreps))
	}
	return r.LedgerIn(function, irrep, r.setting.Irreps[irrep], element)
}

// LedgerIn is Ledger with the irrep of that index in partners of its own, as
// Irrep.WithPartners makes them.
func (r *Representation) LedgerIn(function, irrep int, a symmetry.Irrep, element [2]int) (*Ledger, error) {
	if function < 0 || function >= r.Size() {
		return nil, message.Errorf("there is no function %d: the basis has functions 1 to %d", function+1, r.Size())
	}
	k, l := element[0], element[1]
	if element != ByCharacter && (min(k, l) < 0 || max(k, l) >= a.Dimension) {
		return nil, message.Errorf("%s has no matrix element [%d,%d]: its matrices have %d rows and columns", a.Label, k+1, l+1, a.Dimension)
	}
	ledger := &Ledger{Function: function, Irrep: irrep, Element: element}
	sum := make([]float64, r.Size())
	for op, o := range r.setting.Operations {
		weight := a.Characters[o.Class]
		if element != ByCharacter {
			weight = a.Matrices[op].At(k, l)
		}
		if math.Abs(weight) < negligible {
			weight = 0
		}
		image := r.Image(op, function)
		for _, t := range image {
			sum[t.Function] += weight * t.Coefficient
		}
		row := LedgerRow{Operation: op, Image: image, Weight: weight, Sum: make([]float64, len(sum))}
		copy(row.Sum, sum)
		clean(row.Sum)
		ledger.Rows = append(ledger.Rows, row)
	}
	last := ledger.Rows[len(ledger.Rows)-1].Sum
	ledger.Norm = math.Sqrt(dot(last, last))
	return ledger, nil
}

// clean sets to zero what is zero but for the rounding of a sum over all
// operations.
func clean(v []float64) {
	for i, x := range v {
		if math.Abs(x) < 1e-12 {
			v[i] = 0
		}
	}
}
