package work

import (
	"context"

	"lobewright/app/study"
)

// advance computes all that a study asks for, stage by stage; asked are its
// keys. begin is called before each stage with what is known so far. It returns
// what became known and why the rest did not; done is false if ctx was
// cancelled.
func (w *Work) advance(ctx context.Context, s study.Study, asked [stages]any, begin func(Progress, chain)) (c chain, problems []*Problem, done bool) {
	order := []Stage{StageStructure, StageGroup, StageBasis, StageOrbitals, StageOrbital, StageLedger, StagePlay}
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
		progress.Stage = stage
		begin(progress, c)
		err := w.step(ctx, s, stage, &c)
		if cancelled(err) || ctx.Err() != nil {
			return c, nil, false
		}
		progress.Done++
		if err != nil {
			problems = noted(problems, err.(*Problem))
		}
		if c.has()[stage] {
			c.keys[stage] = asked[stage]
		}
	}
	return c, problems, true
}

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
func (w *Work) step(ctx context.Context, s study.Study, stage Stage, c *chain) (err error) {
	defer func() {
		if value := recover(); value != nil {
			err = caught(stage, value)
		}
	}()
	switch stage {
	case StageStructure:
		c.Structure, err = w.Structure(ctx, s)
	case StageGroup:
		c.Group, err = w.Group(ctx, s)
	case StageBasis:
		c.Basis, err = w.Basis(ctx, s)
	case StageOrbitals:
		c.Orbitals, err = w.Orbitals(ctx, s)
	case StageOrbital:
		c.Orbital, err = c.Orbitals.Orbital(s.Projection)
	case StageLedger:
		c.Ledger, err = w.Ledger(ctx, s)
	case StagePlay:
		if c.Basis != nil {
			c.Play, err = w.Play(ctx, s)
		}
		if c.Play == nil && !cancelled(err) {
			s.Basis = nil // the operation alone
			var wrong error
			if c.Play, wrong = w.Play(ctx, s); err == nil {
				err = wrong
			}
		}
	}
	return blame(stage, ConcernProgram, err)
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
