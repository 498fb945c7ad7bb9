package work

import (
	"lobewright/app/study"
	"lobewright/orbitals"
)

// Results are what follows from a study, as far as it is known. They always
// fit together: Basis belongs to Group, Orbitals and Ledger to Basis, Orbital
// to Orbitals, Match too, and Play to Group and, where it has a subject, to Basis. Only
// Structure may be newer than Group, if the group of the new one cannot be
// found; pictures go out from Group.
//
// A pointer stays the same as long as nothing changes on which its result
// depends.
type Results struct {
	Structure *Structure
	Group     *Group
	Basis     *Basis
	Orbitals  *Orbitals
	Orbital   *orbitals.GroupOrbital
	Ledger    *Ledger
	Play      *Play
	Match     *Match
}

// A State is how far the work on the newest study has come. It is never changed
// after it was delivered.
type State struct {
	// Study is the newest that was requested.
	Study study.Study
	Results
	// Problems say why results are missing, by rising stage.
	Problems []*Problem
	// Progress is nil unless work has been going on for a while.
	Progress *Progress
	// Cancelled says that the work on Study was stopped.
	Cancelled bool

	stale [stages]bool
}

// Progress is how far a computation has come.
type Progress struct {
	// Stage is being worked at.
	Stage Stage
	// Done stages of Of are finished.
	Done, Of int
	// Share is how much of the stage at hand is done, from 0 to 1, where that
	// is known.
	Share float64
}

// Fraction is the share of stages that are finished. Stages take different
// times, so it says little about the time that is left.
func (p *Progress) Fraction() float64 { return (float64(p.Done) + p.Share) / float64(max(p.Of, 1)) }

// Stale tells whether a stage has a result that is not that of Study: it is
// being made anew, or cannot be made.
func (s *State) Stale(stage Stage) bool { return s.stale[stage] }

// AnyStale tells whether any result is stale.
func (s *State) AnyStale() bool { return s.stale != [stages]bool{} }

// Problem returns the first problem with a choice, or nil.
func (s *State) Problem(c Concern) *Problem {
	for _, p := range s.Problems {
		if p.Concern == c {
			return p
		}
	}
	return nil
}

// has tells which results there are.
func (r *Results) has() [stages]bool {
	return [stages]bool{
		StageStructure: r.Structure != nil, StageGroup: r.Group != nil, StageBasis: r.Basis != nil,
		StageOrbitals: r.Orbitals != nil, StageOrbital: r.Orbital != nil, StageLedger: r.Ledger != nil, StagePlay: r.Play != nil,
		StageMatch: r.Match != nil,
	}
}

// A chain is results with the keys of what they were made from.
type chain struct {
	Results
	keys [stages]any
}

// keysOf are the keys of all stages for a study; nil for a stage that the study
// does not ask for.
func (w *Work) keysOf(s study.Study) [stages]any {
	var k [stages]any
	if s.Structure == "" && s.Coordinates == "" {
		return k
	}
	k[StageStructure] = w.keyOfStructure(s)
	k[StageGroup] = w.keyOfGroup(s)
	if s.Operation != "" {
		k[StagePlay] = w.keyOfPlay(s)
	}
	if len(s.Basis) == 0 {
		return k
	}
	k[StageBasis] = w.keyOfBasis(s)
	k[StageOrbitals] = w.keyOfOrbitals(s)
	k[StageMatch] = w.keyOfMatch(s)
	if s.Projection.Irrep == "" {
		return k
	}
	k[StageOrbital] = w.keyOfOrbital(s)
	if s.Projection.Function > 0 {
		k[StageLedger] = w.keyOfLedger(s)
	}
	return k
}

// settle puts what is known of a new chain over an old one. Where the new one
// has nothing yet, or could not be made, the old result stays if it fits to the
// rest; what is not asked for any more goes.
func settle(old, next chain, asked [stages]any) chain {
	out := next
	keep := func(stage Stage, fits bool) bool {
		if next.keys[stage] != nil || asked[stage] == nil || !fits {
			return false
		}
		out.keys[stage] = old.keys[stage]
		return true
	}
	if keep(StageStructure, true) {
		out.Structure = old.Structure
	}
	if keep(StageGroup, true) {
		out.Group = old.Group
	}
	if keep(StageBasis, old.Group == out.Group) {
		out.Basis = old.Basis
	}
	if keep(StageOrbitals, old.Basis == out.Basis) {
		out.Orbitals = old.Orbitals
	}
	if keep(StageOrbital, old.Orbitals == out.Orbitals) {
		out.Orbital = old.Orbital
	}
	if keep(StageLedger, old.Basis == out.Basis) {
		out.Ledger = old.Ledger
	}
	if keep(StagePlay, old.Play != nil && old.Play.Group == out.Group && (old.Play.Basis == nil || old.Play.Basis == out.Basis)) {
		out.Play = old.Play
	}
	if keep(StageMatch, old.Orbitals == out.Orbitals) {
		out.Match = old.Match
	}
	return out
}

// stale marks the results that were not made from the keys of a study.
func (c *chain) stale(asked [stages]any) [stages]bool {
	out := c.has()
	for stage := range out {
		out[stage] = out[stage] && c.keys[stage] != asked[stage]
	}
	return out
}
