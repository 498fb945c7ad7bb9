package work

import (
	"cmp"
	"context"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
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
	return w.ladderOf(ctx, read, s, progress)
}

type ladderInputs struct {
	*Structure
	core, ignore string
}

// ladderOf is called without the lock: a search may take long, and only those
// who want a ladder wait for it.
func (w *Work) ladderOf(ctx context.Context, read *Structure, s study.Study, progress func(float64)) (*Ladder, error) {
	inputs := ladderInputs{read, s.Core, s.Ignore}
	if known := w.knownLadder(inputs); known != nil {
		return known, nil
	}
	select {
	case w.searching <- struct{}{}:
		defer func() { <-w.searching }()
	case <-ctx.Done():
		return nil, ctx.Err()
	}
	if known := w.knownLadder(inputs); known != nil {
		return known, nil
	}
	found, err := search(ctx, read, s, progress)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.ladders.get(inputs, func() (*Ladder, error) { return found, nil })
}

func (w *Work) knownLadder(inputs ladderInputs) *Ladder {
	w.mu.Lock()
	defer w.mu.Unlock()
	if w.ladders.known && w.ladders.key == inputs {
		return w.ladders.value
	}
	return nil
}

// ladderFor is the ladder that the group of a study is taken from; nil if the
// study takes none. What is no symbol is told before anything is sought.
func (w *Work) ladderFor(ctx context.Context, read *Structure, s study.Study, progress func(float64)) (*Ladder, error) {
	if s.As == "" {
		return nil, nil
	}
	if _, _, err := ParseEmbedding(s.As); err != nil {
		return nil, blame(StageGroup, ConcernAs, err)
	}
	return w.ladderOf(ctx, read, s, progress)
}

func search(ctx context.Context, read *Structure, s study.Study, progress func(float64)) (*Ladder, error) {
	core, err := coreOf(read, s)
	if err != nil {
		return nil, err
	}
	points, links := points(read, core)
	if fit, err := symmetry.Detect(points, links, symmetry.Options{}); err == nil && fit.Setting.Infinite() {
		return &Ladder{read, core, []*symmetry.Nearness{infinitelyNear(fit, points)}}, nil
	}
	groups, err := symmetry.Near(ctx, points, links, 0, progress)
	if err != nil {
		return nil, blame(StageGroup, ConcernStructure, err)
	}
	return &Ladder{read, core, groups}, nil
}

// infinitelyNear is the one entry for a linear molecule or an atom, whose
// subgroups cannot be listed.
func infinitelyNear(fit *symmetry.Fit, points []symmetry.Point) *symmetry.Nearness {
	n := &symmetry.Nearness{Fit: fit, Embedding: 1, Axis: fit.Rotation.Row(2)}
	var centre mgl64.Vec3
	for _, p := range points {
		centre = centre.Add(p.Position.Mul(1 / float64(len(points))))
	}
	moved, spread := 0.0, 0.0
	for k, p := range points {
		d := fit.Rotation.Mul3x1(p.Position.Sub(fit.Origin)).Sub(fit.Ideal[k])
		q := p.Position.Sub(centre)
		moved += d.Dot(d)
		spread += q.Dot(q)
	}
	if spread > 0 {
		n.Measure = 100 * moved / spread
	}
	return n
}

// ParseEmbedding reads "D4h" or "D4h:2"; without a number the embedding is 1.
func ParseEmbedding(text string) (symbol string, embedding int, err error) {
	name, number, numbered := strings.Cut(strings.TrimSpace(text), ":")
	embedding = 1
	if numbered {
		if embedding, err = strconv.Atoi(number); err != nil || embedding < 1 {
			return "", 0, message.Errorf("%q: the number behind the colon counts from 1", text)
		}
	}
	setting, err := symmetry.New(name)
	if err != nil {
		return "", 0, err
	}
	return setting.Symbol, embedding, nil
}

// ByOrder are the groups, by index, from the largest to the smallest: ways in
// which one lies in the structure together, the nearest first.
func (l *Ladder) ByOrder() []int {
	nearest := map[string]int{}
	order := make([]int, len(l.Groups))
	for i, n := range l.Groups {
		order[i] = i
		if n.Embedding == 1 {
			nearest[n.Fit.Setting.Symbol] = i
		}
	}
	slices.SortStableFunc(order, func(a, b int) int {
		x, y := l.Groups[a], l.Groups[b]
		return cmp.Or(
			cmp.Compare(y.Fit.Setting.Order(), x.Fit.Setting.Order()),
			cmp.Compare(nearest[x.Fit.Setting.Symbol], nearest[y.Fit.Setting.Symbol]),
			cmp.Compare(x.Embedding, y.Embedding))
	})
	return order
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
		return nil, message.Errorf("there is no %s:%d within %g Å: the last is %s:%d", symbol, embedding, symmetry.DefaultNearness, symbol, most)
	case len(symbols) == 0:
		return nil, message.Errorf("the structure is near to no group")
	}
	return nil, message.Errorf("the structure is not within %g Å of %s: it is of %s", symmetry.DefaultNearness, symbol, strings.Join(symbols, " "))
}

// Within finds the largest group that the structure has within the usual
// tolerance (the nearest of several) and marks those of the ladder that are its
// subgroups: these say nothing new.
func (l *Ladder) Within() (largest int, below []bool) {
	below = make([]bool, len(l.Groups))
	largest = -1
	for i, n := range l.Groups {
		if n.Fit.Deviation > symmetry.DefaultTolerance || n.Fit.Setting.Infinite() {
			continue
		}
		if largest < 0 || n.Fit.Setting.Order() > l.Groups[largest].Fit.Setting.Order() {
			largest = i
		}
	}
	if largest < 0 {
		return largest, below
	}
	for i, n := range l.Groups {
		below[i] = i != largest && !n.Fit.Setting.Infinite() && holds(l.Groups[largest], n.Fit) != nil
	}
	return largest, below
}

// Linear is the fit of a linear molecule, whose ladder is its one entry; else
// nil.
func (l *Ladder) Linear() *symmetry.Fit {
	if len(l.Groups) == 1 && l.Groups[0].Fit.Setting.Infinite() && len(l.Core) > 1 {
		return l.Groups[0].Fit
	}
	return nil
}

// choose is the fit of the group that a study takes the structure for. Its
// tolerance is that of the study, or what the group needs.
func (l *Ladder) choose(s study.Study) (*symmetry.Fit, error) {
	if linear := l.Linear(); linear != nil {
		symbol, embedding, err := ParseEmbedding(s.As)
		if err == nil && embedding > 1 {
			err = message.Errorf("there is one %s with the z of a linear molecule, not %d", symbol, embedding)
		}
		if err == nil && symbol != linear.Setting.Symbol {
			linear, err = linear.LinearAs(symbol)
		}
		return linear, blame(StageGroup, ConcernAs, err)
	}
	near, err := l.Find(s.As)
	if err != nil {
		return nil, blame(StageGroup, ConcernAs, err)
	}
	fit := *near.Fit
	fit.Tolerance = math.Max(s.TheTolerance(), fit.Deviation)
	if !s.KeepAxes {
		return &fit, nil
	}
	frame, err := l.held(&fit)
	if err != nil {
		return nil, blame(StageGroup, ConcernFrame, err)
	}
	return fit.In(frame), nil
}
