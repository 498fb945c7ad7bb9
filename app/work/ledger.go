package work

import (
	"context"
	"fmt"
	"strings"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// Ledger projects one function of the basis, operation by operation. A group
// with infinitely many operations has no ledger.
func (w *Work) Ledger(ctx context.Context, s study.Study) (*Ledger, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	p := s.Projection
	key := ledgerKey{keyOfBasis(s), p.Function, p.Irrep, p.TheElement()}
	return w.ledgers.get(key, func() (*Ledger, error) {
		basis, err := w.basis(ctx, s)
		if err != nil {
			return nil, err
		}
		setting := basis.Fit.Setting
		if setting.Infinite() {
			return nil, fmt.Errorf("%s has infinitely many operations, so there is no ledger; project lists its group orbitals", setting.Symbol)
		}
		if n := len(basis.Functions); p.Function < 1 || p.Function > n {
			return nil, fmt.Errorf("function %d does not exist; the basis has functions 1 to %d", p.Function, n)
		}
		irrep, err := FindIrrep(p.Irrep, setting.Symbol, setting.Irreps)
		if err != nil {
			return nil, err
		}
		element := orbitals.ByCharacter
		if !p.Character {
			e := p.TheElement()
			if d := setting.Irreps[irrep].Dimension; e[0] < 1 || e[0] > d || e[1] < 1 || e[1] > d {
				return nil, fmt.Errorf("matrix element %d,%d does not exist; the matrices of %s have %d × %d elements",
					e[0], e[1], setting.Irreps[irrep].Label, d, d)
			}
			element = [2]int{e[0] - 1, e[1] - 1}
		}
		representation, err := basis.Representation()
		if err != nil {
			return nil, err
		}
		ledger, err := representation.Ledger(p.Function-1, irrep, element)
		if err != nil {
			return nil, err
		}
		return &Ledger{basis, ledger, setting.Irreps[irrep]}, nil
	})
}

// ByCharacter tells whether the operations are weighed with the character.
func (l *Ledger) ByCharacter() bool { return l.Element == orbitals.ByCharacter }

// FindIrrep returns the index of the irrep that a person names. An unknown
// name is refused with the labels that there are.
func FindIrrep(spelling, group string, irreps []symmetry.Irrep) (int, error) {
	labels := make([]string, len(irreps))
	for i, irrep := range irreps {
		labels[i] = irrep.Label
	}
	if i, ok := matchLabel(spelling, labels); ok {
		return i, nil
	}
	return 0, fmt.Errorf("%s has no irrep %q; there are %s", group, spelling, strings.Join(labels, ", "))
}
