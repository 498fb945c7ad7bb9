package work

import (
	"strings"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/symmetry/message"
)

// Orbital returns the group orbital that a projection chooses: of an irrep,
// the copy and the partner, each the first unless chosen. What does not occur
// is refused with what does.
func (o *Orbitals) Orbital(p study.Projection) (*orbitals.GroupOrbital, error) {
	irrep, err := FindIrrep(p.Irrep, o.Fit.Setting.Symbol, o.Irreps)
	if err != nil {
		return nil, blame(StageOrbital, ConcernIrrep, err)
	}
	label, copies, dimension := o.Irreps[irrep].Label, o.Content[irrep], o.Irreps[irrep].Dimension
	number, partner := max(p.Copy, 1), max(p.Partner, 1)
	switch {
	case copies == 0:
		return nil, orbitalProblem(ConcernIrrep, "the basis has no group orbital of %s; it has %s", label, o.occurring())
	case number > copies:
		return nil, orbitalProblem(ConcernCopy, "copy %d of %s does not exist; the basis has %d", number, label, copies)
	case partner > dimension:
		return nil, orbitalProblem(ConcernPartner, "partner %d of %s does not exist; it has %d", partner, label, dimension)
	}
	for i, orbital := range o.Projection.Orbitals {
		if orbital.Irrep == irrep && orbital.Copy == number-1 && orbital.Partner == partner-1 {
			return &o.Projection.Orbitals[i], nil
		}
	}
	return nil, orbitalProblem(ConcernIrrep, "%s, copy %d, partner %d was not found", label, number, partner)
}

func orbitalProblem(concern Concern, format string, arguments ...any) error {
	return blame(StageOrbital, concern, message.Errorf(format, arguments...))
}

// occurring lists the labels of the irreps that the basis contains.
func (o *Orbitals) occurring() string {
	var out []string
	for i, n := range o.Content {
		if n > 0 {
			out = append(out, o.Irreps[i].Label)
		}
	}
	return strings.Join(out, ", ")
}
