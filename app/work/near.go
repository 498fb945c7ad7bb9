package work

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"lobewright/app/study"
	"lobewright/symmetry"
)

// A Ladder is the groups that a structure's core nearly has, by rising
// deviation.
type Ladder struct {
	*Structure
	Core   []int // atoms, from 0, rising
	Groups []*symmetry.Nearness
}

// Ladder finds the groups that a study's core has within 1 Å. progress, if not
// nil, is told the share done, from 0 to 1.
func (w *Work) Ladder(ctx context.Context, s study.Study, progress func(share float64)) (*Ladder, error) {
	read, err := w.Structure(ctx, s)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.ladderOf(ctx, read, s, progress)
}

type ladderInputs struct {
	*Structure
	core, ignore string
}

func (w *Work) ladderOf(ctx context.Context, read *Structure, s study.Study, progress func(float64)) (*Ladder, error) {
	return w.ladders.get(ladderInputs{read, s.Core, s.Ignore}, func() (*Ladder, error) {
		core, err := coreOf(read, s)
		if err != nil {
			return nil, err
		}
		points, links := points(read, core)
		groups, err := symmetry.Near(ctx, points, links, 0, progress)
		if err != nil {
			return nil, blame(StageGroup, ConcernStructure, err)
		}
		return &Ladder{read, core, groups}, nil
	})
}

// ParseEmbedding reads "D4h" or "D4h:2"; without a number the embedding is 1.
func ParseEmbedding(text string) (symbol string, embedding int, err error) {
	name, number, numbered := strings.Cut(strings.TrimSpace(text), ":")
	embedding = 1
	if numbered {
		if embedding, err = strconv.Atoi(number); err != nil || embedding < 1 {
			return "", 0, fmt.Errorf("%q: the number behind the colon counts from 1", text)
		}
	}
	setting, err := symmetry.New(name)
	if err != nil {
		return "", 0, err
	}
	return setting.Symbol, embedding, nil
}

// Find returns the group "D4h" or "D4h:2" of the ladder.
func (l *Ladder) Find(text string) (*symmetry.Nearness, error) {
	symbol, embedding, err := ParseEmbedding(text)
	if err != nil {
		return nil, err
	}
	var symbols []string
	most := 0
	for _, n := range l.Groups {
		name := n.Fit.Setting.Symbol
		if name == symbol {
			most = max(most, n.Embedding)
			if n.Embedding == embedding {
				return n, nil
			}
		}
		if !slices.Contains(symbols, name) {
			symbols = append(symbols, name)
		}
	}
	switch {
	case most > 0:
		return nil, fmt.Errorf("there is no %s:%d within %g Å: the last is %s:%d", symbol, embedding, symmetry.DefaultNearness, symbol, most)
	case len(symbols) == 0:
		return nil, errors.New("the structure is near to no group")
	}
	return nil, fmt.Errorf("the structure is not within %g Å of %s: it is of %s", symmetry.DefaultNearness, symbol, strings.Join(symbols, " "))
}

// choose is the fit of the group that a study takes the structure for. Its
// tolerance is that of the study, or what the group needs.
func (l *Ladder) choose(s study.Study) (*symmetry.Fit, error) {
	near, err := l.Find(s.As)
	if err != nil {
		return nil, blame(StageGroup, ConcernAs, err)
	}
	fit := *near.Fit
	fit.Tolerance = math.Max(s.TheTolerance(), fit.Deviation)
	return &fit, nil
}
