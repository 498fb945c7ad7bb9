package work

import (
	"cmp"
	"context"
	"math"
	"slices"
	"strconv"
	"strings"

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

	// linear is the group within the usual tolerance, if it is a linear one.
	linear *symmetry.Nearness
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
		return linearLadder(read, core, fit, points, links)
	}
	groups, err := symmetry.Near(ctx, points, links, 0, progress)
	if err != nil {
		return nil, blame(StageGroup, ConcernStructure, err)
	}
	return &Ladder{Structure: read, Core: core, Groups: groups}, nil
}

// linearLadder is that of a linear molecule, or of an atom, which has one entry:
// the subgroups of Kh are not listed.
func linearLadder(read *Structure, core []int, fit *symmetry.Fit, points []symmetry.Point, links []symmetry.Link) (*Ladder, error) {
	l := &Ladder{Structure: read, Core: core}
	if len(points) == 1 {
		l.Groups = []*symmetry.Nearness{{Fit: fit, Embedding: 1, Axis: fit.Rotation.Row(2)}}
		return l, nil
	}
	groups, err := symmetry.NearLinear(points, links, 0)
	if err != nil {
		return nil, blame(StageGroup, ConcernStructure, err)
	}
	l.Groups = groups
	for _, n := range groups {
		if n.Fit.Setting.Symbol == fit.Setting.Symbol && n.Embedding == 1 {
			l.linear = n
		}
	}
	if l.linear == nil {
		return nil, blame(StageGroup, ConcernStructure, message.Errorf("two atoms are too near to each other along %s for a linear molecule", fit.Setting.Symbol))
	}
	return l, nil
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
			cmp.Compare(size(y), size(x)),
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
		if !slices.Contains(symbols, name) && (n.Whole == nil || Usual(n)) {
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
		if n.Fit.Deviation <= symmetry.DefaultTolerance && (largest < 0 || size(n) > size(l.Groups[largest])) {
			largest = i
		}
	}
	if largest < 0 {
		return largest, below
	}
	has := l.Groups[largest]
	for i, n := range l.Groups {
		if has.Fit.Setting.Infinite() {
			below[i] = i != largest && n.Fit.Deviation <= symmetry.DefaultTolerance && (n.Whole != nil || n.Fit.Setting.Infinite())
			continue
		}
		below[i] = i != largest && holds(has, n) != nil
	}
	return largest, below
}

// size orders groups: that of a linear molecule with a centre is larger than that
// of one without, and both than all others.
func size(n *symmetry.Nearness) int {
	switch {
	case !n.Fit.Setting.Infinite():
		return n.Fit.Setting.Order()
	case n.Fit.Setting.Symbol == "C∞v":
		return math.MaxInt - 1
	}
	return math.MaxInt
}

// Usual tells whether a subgroup of a linear group is the one in which linear
// molecules are usually computed: the abelian D2h, and C2v without a centre.
func Usual(n *symmetry.Nearness) bool {
	switch n.Fit.Setting.Symbol {
	case "D2h":
		return n.Whole != nil
	case "C2v":
		return n.Whole != nil && n.Whole.Fit.Setting.Symbol == "C∞v"
	}
	return false
}

// Linear is the fit of a molecule that is linear within the usual tolerance; else
// nil.
func (l *Ladder) Linear() *symmetry.Fit {
	if l.linear == nil {
		return nil
	}
	return l.linear.Fit
}

// find is Find; in a linear molecule it takes finite groups with the same z that
// are not listed, too: those of a higher n.
func (l *Ladder) find(text string) (*symmetry.Nearness, error) {
	near, err := l.Find(text)
	if err == nil || l.linear == nil {
		return near, err
	}
	symbol, embedding, wrong := ParseEmbedding(text)
	if wrong != nil || embedding > 1 {
		return nil, err
	}
	fit, err := l.linear.Fit.LinearAs(symbol)
	if err != nil {
		return nil, err
	}
	return &symmetry.Nearness{Fit: fit, Embedding: 1, Axis: l.linear.Axis, Measure: l.linear.Measure, Whole: l.linear}, nil
}

// choose is the fit of the group that a study takes the structure for, and the
// linear group that it is a subgroup of, if any. Its tolerance is that of the
// study, or what the group needs.
func (l *Ladder) choose(s study.Study) (*symmetry.Fit, string, error) {
	near, err := l.find(s.As)
	if err != nil {
		return nil, "", blame(StageGroup, ConcernAs, err)
	}
	linear := ""
	if whole := near.Whole; whole != nil {
		if l.linear != nil && size(whole) < size(l.linear) {
			whole = l.linear // a centre within the tolerance
		}
		linear = whole.Fit.Setting.Symbol
	}
	fit := *near.Fit
	fit.Tolerance = math.Max(s.TheTolerance(), fit.Deviation)
	if !s.KeepAxes || near.Whole != nil || fit.Setting.Infinite() { // these have the axes of the line
		return &fit, linear, nil
	}
	frame, err := l.held(near)
	if err != nil {
		return nil, "", blame(StageGroup, ConcernFrame, err)
	}
	return fit.In(frame), linear, nil
}
