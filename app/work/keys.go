package work

import (
	"strings"

	"lobewright/app/study"
)

// The keys hold what of a study a stage reads, directly or through the stages
// before it. They tell whether a result is that of a study, and can be made
// while others compute.

type structureKey struct {
	structure, coordinates string
	reading                int64
}

func (w *Work) keyOfStructure(s study.Study) structureKey {
	return structureKey{s.Structure, s.Coordinates, w.reading.Load()}
}

type groupKey struct {
	structureKey
	core, ignore, as, frame, z, x string
	keepAxes                      bool
	tolerance                     float64
}

func (w *Work) keyOfGroup(s study.Study) groupKey {
	return groupKey{w.keyOfStructure(s), s.Core, s.Ignore, s.As, s.Frame, s.Z, s.X, s.KeepAxes, s.TheTolerance()}
}

type basisKey struct {
	groupKey
	basis string
}

func (w *Work) keyOfBasis(s study.Study) basisKey {
	return basisKey{w.keyOfGroup(s), joinBasis(s)}
}

// joinBasis makes one text of all selections, none of which contains a line
// feed.
func joinBasis(s study.Study) string { return strings.Join(s.Basis, "\n") }

// orbitalsKey has, beside the basis, only what is turned or mixed, so that
// choosing another group orbital projects nothing anew.
type orbitalsKey struct {
	basisKey
	turn string
}

func (w *Work) keyOfOrbitals(s study.Study) orbitalsKey {
	return orbitalsKey{w.keyOfBasis(s), turnKey(s)}
}

type orbitalKey struct {
	orbitalsKey
	irrep         string
	copy, partner int
}

func (w *Work) keyOfOrbital(s study.Study) orbitalKey {
	p := s.Projection
	return orbitalKey{w.keyOfOrbitals(s), p.Irrep, max(p.Copy, 1), max(p.Partner, 1)}
}

type ledgerKey struct {
	basisKey
	function int
	irrep    string
	element  [2]int
	turn     string
}

func (w *Work) keyOfLedger(s study.Study) ledgerKey {
	p := s.Projection
	return ledgerKey{w.keyOfBasis(s), p.Function, p.Irrep, p.TheElement(), turnKey(s)}
}

type playKey struct {
	orbitalKey
	operation string
	angle     float64
	subject   study.Subject
	function  int
}

func (w *Work) keyOfPlay(s study.Study) playKey {
	key := playKey{operation: s.Operation, angle: angleOf(s), subject: subjectOf(s)}
	switch key.subject {
	case study.SubjectFunction:
		key.basisKey = w.keyOfBasis(s)
		key.function = s.Projection.Function
	case study.SubjectOrbital:
		key.orbitalKey = w.keyOfOrbital(s)
	default:
		key.groupKey = w.keyOfGroup(s)
	}
	return key
}

// angleOf is the angle as far as the operation of a study depends on it.
func angleOf(s study.Study) float64 {
	if isFamily(s.Operation) {
		return s.Angle
	}
	return 0
}

type matchKey struct {
	orbitalsKey
	central int
}

func (w *Work) keyOfMatch(s study.Study) matchKey { return matchKey{w.keyOfOrbitals(s), s.Central} }
