package work

import (
	"context"
	"strings"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// Ledger projects one function of the basis, operation by operation. A group
// with infinitely many operations has no ledger.
func (w *Work) Ledger(ctx context.Context, s study.Study) (*Ledger, error) {
	basis, err := w.Basis(ctx, s)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.ledgerOf(ctx, basis, s)
}

type ledgerInputs struct {
	*Basis
	function int
	irrep    string
	element  [2]int
	turn     string
}

func (w *Work) ledgerOf(ctx context.Context, basis *Basis, s study.Study) (*Ledger, error) {
	p := s.Projection
	return w.ledgers.get(ledgerInputs{basis, p.Function, p.Irrep, p.TheElement(), turnKey(s)}, func() (*Ledger, error) {
		setting := basis.Fit.Setting
		if setting.Infinite() {
			return nil, blame(StageLedger, ConcernStructure, message.Errorf(
				"%s has infinitely many operations, so there is no ledger; project lists its group orbitals", setting.Symbol))
		}
		if err := checkFunction(basis, p.Function); err != nil {
			return nil, blame(StageLedger, ConcernFunction, err)
		}
		irrep, err := FindIrrep(p.Irrep, setting.Symbol, setting.Irreps)
		if err != nil {
			return nil, blame(StageLedger, ConcernIrrep, err)
		}
		turned, err := turnedIrrep(setting.Irreps[irrep], s.Turn)
		if err != nil {
			return nil, blame(StageLedger, ConcernPartner, err)
		}
		element, err := elementOf(p, turned)
		if err != nil {
			return nil, blame(StageLedger, ConcernElement, err)
		}
		representation, err := w.representationOf(ctx, basis)
		if err != nil {
			return nil, err
		}
		ledger, err := representation.LedgerIn(p.Function-1, irrep, turned, element)
		if err != nil {
			return nil, blame(StageLedger, ConcernFunction, err)
		}
		partners, err := partnersOf(representation, p.Function-1, irrep, turned)
		if err != nil {
			return nil, blame(StageLedger, ConcernFunction, err)
		}
		return &Ledger{basis, ledger, turned, partners}, nil
	})
}

// partnersOf lists the partners of an irrep in which a function has a part: of
// partner l that is the sum with the matrix element l,l.
func partnersOf(r *orbitals.Representation, function, irrep int, a symmetry.Irrep) ([]int, error) {
	var partners []int
	for l := range a.Dimension {
		ledger, err := r.LedgerIn(function, irrep, a, [2]int{l, l})
		if err != nil {
			return nil, err
		}
		if ledger.Norm > 0 {
			partners = append(partners, l)
		}
	}
	return partners, nil
}

// checkFunction refuses a function, counted from 1, that a basis lacks.
func checkFunction(basis *Basis, function int) error {
	if n := len(basis.Functions); function < 1 || function > n {
		return message.Errorf("function %d does not exist; the basis has functions 1 to %d", function, n)
	}
	return nil
}

// elementOf is the matrix element that weighs the operations, from 0.
func elementOf(p study.Projection, irrep symmetry.Irrep) ([2]int, error) {
	if p.Character {
		return orbitals.ByCharacter, nil
	}
	e, d := p.TheElement(), irrep.Dimension
	if e[0] < 1 || e[0] > d || e[1] < 1 || e[1] > d {
		return e, message.Errorf("matrix element %d,%d does not exist; the matrices of %s have %d × %d elements",
			e[0], e[1], irrep.Label, d, d)
	}
	return [2]int{e[0] - 1, e[1] - 1}, nil
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
	return 0, message.Errorf("%s has no irrep %q; there are %s", group, spelling, strings.Join(labels, ", "))
}
