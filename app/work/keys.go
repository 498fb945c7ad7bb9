package work

import (
	"strings"

	"lobewright/app/study"
)

// The keys hold what of a study a stage reads, directly or through the stages
// before it. They can be made while others compute.

type structureKey struct {
	structure, coordinates string
	reading                int64
}

func (w *Work) keyOfStructure(s study.Study) structureKey {
	return structureKey{s.Structure, s.Coordinates, w.reading.Load()}
}

type groupKey struct {
	structureKey
	core, ignore, frame string
	tolerance           float64
}

func (w *Work) keyOfGroup(s study.Study) groupKey {
	return groupKey{w.keyOfStructure(s), s.Core, s.Ignore, s.Frame, s.TheTolerance()}
}

type basisKey struct {
	groupKey
	basis string
}

func (w *Work) keyOfBasis(s study.Study) basisKey {
	// No selection contains a line feed.
	return basisKey{w.keyOfGroup(s), strings.Join(s.Basis, "\n")}
}

type orbitalKey struct {
	basisKey
	irrep         string
	copy, partner int
}

func (w *Work) keyOfOrbital(s study.Study) orbitalKey {
	p := s.Projection
	return orbitalKey{w.keyOfBasis(s), p.Irrep, max(p.Copy, 1), max(p.Partner, 1)}
}

type ledgerKey struct {
	basisKey
	function int
	irrep    string
	element  [2]int
}

func (w *Work) keyOfLedger(s study.Study) ledgerKey {
	p := s.Projection
	return ledgerKey{w.keyOfBasis(s), p.Function, p.Irrep, p.TheElement()}
}

type playKey struct {
	orbitalKey
	operation string
	angle     float64
	subject   study.Subject
	function  int
}

func (w *Work) keyOfPlay(s study.Study) playKey {
	key := playKey{operation: s.Operation, subject: s.Projection.TheSubject()}
	if isFamily(s.Operation) {
		key.angle = s.Angle
	}
	switch {
	case len(s.Basis) == 0 || key.subject == study.NoSubject:
		key.subject = study.NoSubject
		key.groupKey = w.keyOfGroup(s)
	case key.subject == study.SubjectFunction:
		key.basisKey = w.keyOfBasis(s)
		key.function = s.Projection.Function
	default:
		key.orbitalKey = w.keyOfOrbital(s)
	}
	return key
}
