package work

import (
	"context"

	"lobewright/app/study"
)

// Beside projects another basis on a group that is at hand, without keeping the
// result in the place of the study's own. Only the Basis of s is read.
func (w *Work) Beside(ctx context.Context, g *Group, s study.Study) (*Orbitals, error) {
	var other Work
	basis, err := other.basisOf(ctx, g, s)
	if err != nil {
		return nil, err
	}
	return other.orbitalsOf(ctx, basis)
}
