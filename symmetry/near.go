package symmetry

import (
	"context"
	"math"
	"slices"
	"sort"

	"github.com/go-gl/mathgl/mgl64"
)

// DefaultNearness (Å) is how far an atom may move to a group of the ladder.
const DefaultNearness = 1.0

// MaxNearFold is the highest n of an axis that Near looks for.
const MaxNearFold = 12

// leastShare is the share of their distance that two points must keep on the
// way to their ideal places: nearer, they would merge into one, and the ideal
// points would no longer be those of the same molecule.
const leastShare = 0.7

// A Nearness is a group that a set of points nearly has.
type Nearness struct {
	// Fit is the group in its default frame with the nearest points.
	Fit *Fit
	// Embedding counts, from 1, the ways in which a group of this symbol is
	// near, by rising deviation.
	Embedding int
	// Axis is the principal axis in the input's axes: the z of the Fit.
	Axis mgl64.Vec3
	// Measure is the continuous symmetry measure of the points for this
	// group and this assignment, S = 100·Σ|Q−P|²/Σ|Q−Q₀|², Q₀ the centroid
	// (H. Zabrodsky, S. Peleg, D. Avnir, J. Am. Chem. Soc. 114, 7843 (1992);
	// the scale to 100 is the later one, from memory).
	Measure float64
	// Whole is the linear group with the same z and the same ideal points, for a
	// subgroup of one with a turn about z; else nil.
	Whole *Nearness
}

// Near lists the groups, and their embeddings, that a set of points has
// when no point moves by more than a limit (Å; 0 means DefaultNearness), none
// changes its kind, and no two come nearer than 0.7 of their distance; by
// rising deviation, the larger group first among equals. Axes go up to n = MaxNearFold.
//
// Operations are sought from turns and rotatory reflections about axes spread
// evenly over the sphere, so densely that each way in which one can carry the
// points shows from some start (covers); each then gets the best of all axes.
// Groups are what these generate, and all their subgroups. So the list depends
// neither on the axes of the input nor on the order of the points, and of two
// structures that are near to each other's groups both are told so. In sets of
// more than smallCloud points only operations are sought that leave neighbours
// neighbours.
//
// Points that a group brings onto one line have a linear group there with all of
// its subgroups, of which permutations tell nothing: these are found apart
// (onLines), and listed as far as they have the z of the line.
//
// progress, if not nil, is told the share done, from 0 to 1. Near stops with
// the error of ctx when that is cancelled. Other errors are those of Detect.
func Near(ctx context.Context, points []Point, links []Link, limit float64, progress func(share float64)) ([]*Nearness, error) {
	if limit == 0 {
		limit = DefaultNearness
	}
	if err := check(points, links, limit); err != nil {
		return nil, err
	}
	if progress == nil {
		progress = func(float64) {}
	}
	l := &ladder{cloud: newCloud(points), limit: limit, seen: map[elementKey]*placed{}}
	if len(points) == 1 {
		return nil, nil
	}
	if _, straight := l.cloud.line(1e-6); straight {
		return NearLinear(points, links, limit)
	}
	if err := l.search(ctx, func(share float64) { progress(0.8 * share) }); err != nil {
		return nil, err
	}
	groups, err := l.groups(ctx, func(share float64) { progress(0.8 + 0.2*share) })
	if err != nil {
		return nil, err
	}
	linear, across := l.onLines(links)
	return ranked(append(linear, l.sorted(append(groups, across...), links)...)), nil
}

// NearLinear is Near for points that lie nearly on one line, and taken for such:
// it lists only groups that bring them onto it.
func NearLinear(points []Point, links []Link, limit float64) ([]*Nearness, error) {
	if limit == 0 {
		limit = DefaultNearness
	}
	if err := check(points, links, limit); err != nil || len(points) == 1 {
		return nil, err
	}
	l := &ladder{cloud: newCloud(points), limit: limit, straight: true}
	linear, _ := l.onLines(links)
	return ranked(linear), nil
}

// A ladder is the search for all groups near a cloud.
type ladder struct {
	cloud *cloud
	limit float64
	// straight says that the points are taken for ones that lie on a line.
	straight bool
	seen     map[elementKey]*placed
	// generators has one element of each cyclic group found, of an order that
	// is a power of a prime; pool has all of their powers, and others holds other
	// elements. All have the matrices that are the best for them.
	generators []*element
	pool       map[elementKey]*element
	others     map[elementKey]*element
	tried      map[elementKey]bool
}

// widened is the factor by which parts of a group may be farther than the
// limit: its farthest point can be so in a subgroup, though not all together.
const widened = 1.25

// What takes the place of leastShare for parts of a group, and for a motion that
// is not yet the best one.
const (
	leastPart  = 0.6
	leastStart = 0.5
)

// place fits a group, once; nil if it is too far or brings points together,
// even if it were a part of another.
func (l *ladder) place(group []*element) *placed {
	if group == nil {
		return nil
	}
	key := keyOf(group)
	if p, ok := l.seen[key]; ok {
		return p
	}
	p, ok := l.cloud.placeFar(group)
	if !ok || p.deviation > widened*l.limit || !l.keepsApart(p, leastPart) {
		p = nil
	}
	l.seen[key] = p
	return p
}

// keepsApart tells whether no two points come nearer than a share of their
// distance.
func (l *ladder) keepsApart(p *placed, share float64) bool {
	c := l.cloud
	// Only pairs that are near can lose so much by moving at most the deviation
	// each: d − 2·deviation < share·d.
	far := 2 * p.deviation / (1 - share)
	ok := true
	for i := range c.at {
		c.visit(c.at[i], far, func(j int) {
			if j <= i || !ok {
				return
			}
			before := c.at[i].Sub(c.at[j]).Len()
			if p.ideal[i].Sub(p.ideal[j]).Len() < share*before {
				ok = false
			}
		})
		if !ok {
			return false
		}
	}
	return true
}

// equalDeviation (Å) is the difference below which deviations count as equal:
// it comes from rounding.
const equalDeviation = 1e-6

// sorted writes the groups in their default frames, by rising deviation, among
// equals the larger group first.
func (l *ladder) sorted(groups []*placed, links []Link) []*Nearness {
	sort.SliceStable(groups, func(a, b int) bool { return groups[a].deviation < groups[b].deviation })
	spread := 0.0
	for _, q := range l.cloud.at {
		spread += q.Dot(q)
	}
	var out []*Nearness
	for len(groups) > 0 {
		n := 1
		for n < len(groups) && groups[n].deviation < groups[0].deviation+equalDeviation {
			n++
		}
		equal := groups[:n]
		groups = groups[n:]
		sort.SliceStable(equal, func(a, b int) bool { return equal[a].before(equal[b]) })
		for i, p := range equal {
			if p.turnsAboutLine() || p.standsAmong(equal[:i]) {
				continue
			}
			fit := l.cloud.frame(p, links, l.limit)
			out = append(out, &Nearness{Fit: fit, Axis: fit.Rotation.Row(2), Measure: 100 * p.misfit(l.cloud) / spread})
		}
	}
	return out
}

// turnsAboutLine tells whether a turn of the group leaves all points in place:
// then they lie on its axis, and onLines finds the group.
func (p *placed) turnsAboutLine() bool {
	for r, m := range p.matrices {
		still := m.Det() > 0 && m.Trace() < 3-1e-6
		for k, to := range p.permutations[r] {
			still = still && int(to) == k
		}
		if still {
			return true
		}
	}
	return false
}

// before orders groups of equal deviation: the larger first, then by what they
// do to the points.
func (p *placed) before(q *placed) bool {
	if a, b := len(p.matrices), len(q.matrices); a != b {
		return a > b
	}
	if p.kind != q.kind {
		return p.kind.family > q.kind.family
	}
	for r := range p.permutations {
		if c := slices.Compare(p.permutations[r], q.permutations[r]); c != 0 {
			return c < 0
		}
	}
	return false
}

// standsAmong tells whether the same group with the same ideal points was found
// before, in an embedding of the same kind: near a line or a plane different
// permutations lead there, and in an exactly symmetric structure all subgroups
// that its operations carry into each other do.
func (p *placed) standsAmong(earlier []*placed) bool {
	for _, q := range earlier {
		if q.kind == p.kind && p.sameIdeal(q) && p.liesAlike(q) {
			return true
		}
	}
	return false
}

func (p *placed) sameIdeal(q *placed) bool {
	turn := q.rotation.Mul3(p.rotation.Transpose())
	for k, v := range p.ideal {
		if turn.Mul3x1(v).Sub(q.ideal[k]).Len() > 1e-4 {
			return false
		}
	}
	return true
}

// alikeTolerance is the share by which sums of squares of ways may differ that
// alike operations carry the points: far less than tells two embeddings apart.
const alikeTolerance = 0.01

// liesAlike tells whether two embeddings of one group may be carried into each
// other by an operation of a larger one: whether their operations are alike one
// by one, and carry the points as far.
func (p *placed) liesAlike(q *placed) bool {
	a, b := p.signature(), q.signature()
	for r := range a {
		for i := 3; i < len(a[r]); i++ {
			if math.Abs(a[r][i]-b[r][i]) > alikeTolerance*(1+math.Abs(a[r][i])) {
				return false
			}
		}
		if !slices.Equal(a[r][:3], b[r][:3]) {
			return false
		}
	}
	return true
}

// signature has of each operation, sorted, the trace in thousandths, the
// determinant, how many points stay in place, Σ|R·P−P|² (Å²) and Σ|R·P−P|⁴.
func (p *placed) signature() [][5]float64 {
	list := make([][5]float64, len(p.matrices))
	for r, m := range p.matrices {
		s := [5]float64{math.Round(1000 * m.Trace()), math.Round(m.Det())}
		for k, v := range p.ideal {
			if int(p.permutations[r][k]) == k {
				s[2]++
			}
			d := m.Mul3x1(v).Sub(v)
			s[3] += d.Dot(d)
			s[4] += d.Dot(d) * d.Dot(d)
		}
		list[r] = s
	}
	slices.SortFunc(list, func(a, b [5]float64) int { return slices.Compare(a[:], b[:]) })
	return list
}
