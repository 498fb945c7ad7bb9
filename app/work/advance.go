package work

import (
	"context"
	"errors"

	"lobewright/app/study"
)

// advance computes all that a study asks for, stage by stage; asked are its
// keys. begin is called before each stage with what is known so far. It returns
// what became known and why the rest did not; done is false if ctx was
// cancelled.
func (w *Work) advance(ctx context.Context, s study.Study, asked [stages]any, begin func(Progress, chain)) (c chain, problems []*Problem, done bool) {
	order := []Stage{StageStructure, StageGroup, StageBasis, StageOrbitals, StageOrbital, StageLedger, StagePlay, StageMatch}
	progress := Progress{}
	for _, key := range asked {
		if key != nil {
			progress.Of++
		}
	}
	for _, stage := range order {
		if asked[stage] == nil || !c.ready(stage) {
			continue
		}
		progress.Stage, progress.Share = stage, 0
		begin(progress, c)
		err := w.step(ctx, s, stage, &c, func(share float64) {
			if share-progress.Share >= leastProgress {
				progress.Share = share
				begin(progress, c)
			}
		})
		if cancelled(err) || ctx.Err() != nil {
			return c, nil, false
		}
		progress.Done, progress.Share = progress.Done+1, 0
		var problem *Problem
		if errors.As(err, &problem) {
			problems = noted(problems, problem)
		}
		if c.has()[stage] {
			c.keys[stage] = asked[stage]
		}
	}
	return c, problems, true
}

// leastProgress is the share of a stage that is worth telling of.
const leastProgress = 0.02

// ready tells whether the stages are there from which a stage goes out.
func (c *chain) ready(stage Stage) bool {
	switch stage {
	case StageStructure:
		return true
	case StageGroup:
		return c.Structure != nil
	case StageBasis, StagePlay:
		return c.Group != nil
	case StageOrbitals:
		return c.Basis != nil
	case StageLedger:
		return c.Basis != nil && !c.Group.Fit.Setting.Infinite()
	}
	return c.Orbitals != nil
}

// step computes one stage. The error is a *Problem or that of ctx.
func (w *Work) step(ctx context.Context, s study.Study, stage Stage, c *chain, share func(float64)) (err error) {
	defer func() {
		if value := recover(); value != nil {
			err = caught(stage, value)
		}
	}()
	if stage == StageStructure {
		c.Structure, err = w.Structure(ctx, s)
		return err
	}
	var ladder *Ladder
	if stage == StageGroup {
		if ladder, err = w.ladderFor(ctx, c.Structure, s, share); err != nil {
			return err
		}
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	switch stage {
	case StageGroup:
		c.Group, err = w.groupOf(ctx, c.Structure, ladder, s)
	case StageBasis:
		c.Basis, err = w.basisOf(ctx, c.Group, s)
	case StageOrbitals:
		if c.Orbitals, err = w.orbitalsOf(ctx, c.Basis); err == nil {
			c.Orbitals, err = w.turnedOf(c.Orbitals, s)
		}
	case StageOrbital:
		c.Orbital, err = c.Orbitals.Orbital(s.Projection)
	case StageLedger:
		c.Ledger, err = w.ledgerOf(ctx, c.Basis, s)
	case StagePlay:
		err = w.playWhatIsThere(ctx, s, c)
	case StageMatch:
		c.Match, err = w.matchOf(ctx, c.Orbitals, s)
	}
	return blame(stage, ConcernProgram, err)
}

// playWhatIsThere plays the operation alone if it cannot be played on the
// subject, so that at least its element is seen.
func (w *Work) playWhatIsThere(ctx context.Context, s study.Study, c *chain) (err error) {
	switch subject := subjectOf(s); {
	case subject == study.SubjectOrbital && c.Orbitals != nil:
		c.Play, err = w.playOf(ctx, c.Group, nil, c.Orbitals, s)
	case subject == study.SubjectFunction && c.Basis != nil:
		c.Play, err = w.playOf(ctx, c.Group, c.Basis, nil, s)
	}
	if c.Play != nil || cancelled(err) {
		return err
	}
	alone, wrong := w.playOf(ctx, c.Group, nil, nil, s)
	c.Play = alone
	if err == nil {
		err = wrong
	}
	return err
}

// noted adds a problem unless another stage has told the same.
func noted(list []*Problem, p *Problem) []*Problem {
	for _, q := range list {
		if q.Concern == p.Concern && q.Index == p.Index && (q.Error() == p.Error() || p.Stage == StagePlay) {
			return list
		}
	}
	return append(list, p)
}
