package symmetry

import (
	"context"
	"fmt"
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
}

// Near lists the finite groups, and their embeddings, that a set of points has
// when no point moves by more than a limit (Å; 0 means DefaultNearness), none
// changes its kind, and no two come nearer than 0.7 of their distance; by
// rising deviation, then by falling order. Axes go up to n = MaxNearFold.
//
// Operations are sought from rotations, reflections and rotatory reflections
// about axes spread evenly over the sphere, each improved by all points that
// find an image; groups are what these generate, and all their subgroups.
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
		return nil, fmt.Errorf("the points lie on one line: only finite groups are sought, and a linear set has infinitely many of them")
	}
	elements, err := l.elements(ctx, progress)
	if err != nil {
		return nil, err
	}
	groups, err := l.groups(ctx, elements, progress)
	if err != nil {
		return nil, err
	}
	return l.sorted(groups, links), nil
}

// A ladder is the search for all groups near a cloud.
type ladder struct {
	cloud *cloud
	limit float64
	seen  map[elementKey]*placed
}

// axesTried spreads over half of the sphere, some 8° apart: an operation of a
// structure is found if the start is nearer to it than half of the angle
// between neighbouring atoms, as seen from the centre.
const axesTried = 320

// elements finds operations, each with the cyclic group that it generates
// within the limit.
func (l *ladder) elements(ctx context.Context, progress func(float64)) ([]*element, error) {
	type found struct {
		element   *element
		deviation float64
	}
	var list []found
	known := map[elementKey]bool{}
	try := func(start mgl64.Mat3) {
		e := l.settle(start)
		if e == nil || known[e.key()] {
			return
		}
		known[e.key()] = true
		if e.order() > 2*MaxNearFold {
			return
		}
		if p := l.place(l.cloud.generate([]*element{e}, 2*MaxNearFold)); p != nil {
			list = append(list, found{e, p.deviation})
		}
	}
	try(inversion)
	for i := range axesTried {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		axis := spiral(i, axesTried)
		for n := 1; n <= MaxNearFold; n++ {
			turn := mgl64.QuatRotate(2*math.Pi/float64(n), axis).Mat4().Mat3()
			if n > 1 {
				try(turn)
			}
			if n != 2 { // S2 is the inversion
				try(reflectionIn(axis).Mul3(turn))
			}
		}
		progress(0.5 * float64(i+1) / axesTried)
	}
	sort.SliceStable(list, func(a, b int) bool { return list[a].deviation < list[b].deviation })
	out := make([]*element, len(list))
	for i, f := range list {
		out[i] = f.element
	}
	return out, nil
}

// spiral is the i-th of n directions spread evenly over the upper half of the
// sphere (points of the golden angle on a spiral).
func spiral(i, n int) mgl64.Vec3 {
	z := 1 - (float64(i)+0.5)/float64(n)
	azimuth := float64(i) * math.Pi * (3 - math.Sqrt(5))
	r := math.Sqrt(1 - z*z)
	return mgl64.Vec3{r * math.Cos(azimuth), r * math.Sin(azimuth), z}
}

func reflectionIn(normal mgl64.Vec3) mgl64.Mat3 {
	m := mgl64.Ident3()
	for r := range 3 {
		for c := range 3 {
			m.Set(r, c, m.At(r, c)-2*normal[r]*normal[c])
		}
	}
	return m
}

// smallCloud is the number of points up to which more is tried: an assignment
// that nearest images leave open is settled by the least sum of squares, and
// groups are grown from every element, not only from those that no group holds
// yet.
const smallCloud = 40

// settle improves a start by the images that it gives the points until they
// stay the same; nil if they are not one to one or too far.
func (l *ladder) settle(m mgl64.Mat3) *element {
	c := l.cloud
	improper := m.Det() < 0
	n := len(c.at)
	image, last := make([]int32, n), make([]int32, n)
	all := make([]int, n)
	for i := range all {
		all[i] = i
	}
	reach := 2 * l.limit
	for round := range 8 {
		oneToOne := true
		taken := make([]bool, n)
		for i, v := range c.at {
			// Most images lie near; only for the others is far looked.
			w := m.Mul3x1(v)
			j := c.nearest(w, c.kind[i], c.cell/2)
			if j < 0 {
				j = c.nearest(w, c.kind[i], 1.5*reach)
			}
			if j < 0 {
				return nil
			}
			image[i] = int32(j)
			oneToOne = oneToOne && !taken[j]
			taken[j] = true
		}
		if !oneToOne {
			if n > smallCloud {
				if round == 7 {
					return nil
				}
			} else if !c.assignment(m, image) {
				return nil
			}
		}
		if round > 0 && equalImages(image, last) {
			if n > smallCloud && !oneToOne {
				return nil
			}
			break
		}
		copy(last, image)
		m = c.improve(m, all, image)
	}
	mismatch := 0.0
	seen := make([]bool, n)
	for i, j := range image {
		mismatch = math.Max(mismatch, m.Mul3x1(c.at[i]).Sub(c.at[j]).Len())
		if seen[j] {
			return nil
		}
		seen[j] = true
	}
	if mismatch > 1.5*reach {
		return nil
	}
	return &element{permutation: image, improper: improper, matrix: m, mismatch: mismatch}
}

func equalImages(a, b []int32) bool {
	for i := range a {
		if a[i] != b[i] {
			return false
		}
	}
	return true
}

// place fits a group, once; nil if it is too far or brings points together.
func (l *ladder) place(group []*element) *placed {
	if group == nil {
		return nil
	}
	key := keyOf(group)
	if p, ok := l.seen[key]; ok {
		return p
	}
	p, ok := l.cloud.place(group)
	if !ok || p.deviation > l.limit || !l.keepsApart(p) {
		p = nil
	}
	l.seen[key] = p
	return p
}

// keepsApart tells whether no two points come nearer than leastShare of their
// distance.
func (l *ladder) keepsApart(p *placed) bool {
	c := l.cloud
	// Only pairs that are near can lose so much by moving at most the limit
	// each: d − 2·limit < 0.7·d.
	far := 2 * l.limit / (1 - leastShare)
	ok := true
	for i := range c.at {
		c.visit(c.at[i], far, func(j int) {
			if j <= i || !ok {
				return
			}
			before := c.at[i].Sub(c.at[j]).Len()
			if p.ideal[i].Sub(p.ideal[j]).Len() < leastShare*before {
				ok = false
			}
		})
		if !ok {
			return false
		}
	}
	return true
}

// mostGroups bounds the list; a structure of a few atoms that is near to many
// groups has some hundreds.
const mostGroups = 3000

// groups grows the largest groups that the elements generate within the limit,
// from each element that no larger group holds yet, and lists all of their
// subgroups that are near.
func (l *ladder) groups(ctx context.Context, elements []*element, progress func(float64)) ([]*placed, error) {
	covered := map[elementKey]bool{}
	found := map[elementKey]bool{}
	var out []*placed
	add := func(group []*element) {
		p := l.place(group)
		if k := keyOf(group); p != nil && !found[k] && len(out) < mostGroups {
			found[k] = true
			out = append(out, p)
		}
	}
	for i, e := range elements {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		if !covered[e.key()] || len(l.cloud.at) <= smallCloud {
			largest, err := l.grow(ctx, e, elements)
			if err != nil {
				return nil, err
			}
			for _, g := range largest {
				covered[g.key()] = true
			}
			if found[keyOf(largest)] {
				continue
			}
			if err := l.subgroups(ctx, largest, add); err != nil {
				return nil, err
			}
		}
		progress(0.5 + 0.5*float64(i+1)/float64(len(elements)))
	}
	add(l.cloud.generate(nil, 1)) // every structure has the trivial group
	return out, nil
}

// grow adds elements to the group of one, by rising deviation, each if the
// whole stays near enough.
func (l *ladder) grow(ctx context.Context, first *element, elements []*element) ([]*element, error) {
	generators := []*element{first}
	group := l.cloud.generate(generators, 4*MaxNearFold)
	known := map[elementKey]bool{}
	for _, g := range group {
		known[g.key()] = true
	}
	for _, e := range elements {
		if known[e.key()] {
			continue
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		larger := l.cloud.generate(append(generators[:len(generators):len(generators)], e), 120)
		if l.place(larger) == nil {
			continue
		}
		generators, group = append(generators, e), larger
		for _, g := range group {
			known[g.key()] = true
		}
	}
	return group, nil
}

// subgroups hands every subgroup of a group of elements to a function, by the
// group's own product table.
func (l *ladder) subgroups(ctx context.Context, group []*element, add func([]*element)) error {
	place := map[elementKey]int{}
	for i, e := range group {
		place[e.key()] = i
	}
	s := &Setting{Operations: make([]Operation, len(group)), product: make([][]int32, len(group))}
	for i, e := range group {
		s.product[i] = make([]int32, len(group))
		for j, f := range group {
			s.product[i][j] = int32(place[e.times(f).key()])
		}
	}
	s.inverse = inverses(s.product)
	classes, err := s.subgroups()
	if err != nil {
		return err
	}
	for _, class := range classes {
		for _, set := range s.conjugates(class) {
			if err := ctx.Err(); err != nil {
				return err
			}
			var members []*element
			for _, i := range set.members() {
				members = append(members, group[i])
			}
			add(members)
		}
	}
	return nil
}

// standsAmong tells whether the same group with the same ideal points was found
// before, in an embedding of the same kind: near a line or a plane different
// elements may lead there, and in an exactly symmetric structure all subgroups
// that its operations carry into each other do.
func (p *placed) standsAmong(earlier []*placed) bool {
next:
	for i := len(earlier) - 1; i >= 0 && earlier[i].deviation > p.deviation-1e-6; i-- {
		q := earlier[i]
		if q.kind != p.kind || !p.liesAlike(q) {
			continue
		}
		for k := range p.ideal {
			a := p.rotation.Transpose().Mul3x1(p.ideal[k])
			b := q.rotation.Transpose().Mul3x1(q.ideal[k])
			if a.Sub(b).Len() > 1e-4 {
				continue next
			}
		}
		return true
	}
	return false
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

// sorted writes the groups in their default frames, by rising deviation, then
// by falling order; the trivial group, which every structure has, comes last
// among equals.
func (l *ladder) sorted(groups []*placed, links []Link) []*Nearness {
	sort.SliceStable(groups, func(a, b int) bool {
		p, q := groups[a], groups[b]
		if math.Abs(p.deviation-q.deviation) > 1e-6 {
			return p.deviation < q.deviation
		}
		return len(p.matrices) > len(q.matrices)
	})
	spread := 0.0
	for _, q := range l.cloud.at {
		spread += q.Dot(q)
	}
	count := map[string]int{}
	var out []*Nearness
	for i, p := range groups {
		if p.standsAmong(groups[:i]) {
			continue
		}
		fit := l.cloud.frame(p, links, l.limit)
		sum := 0.0
		for k, q := range l.cloud.at {
			d := p.rotation.Mul3x1(q).Sub(p.ideal[k])
			sum += d.Dot(d)
		}
		count[fit.Setting.Symbol]++
		out = append(out, &Nearness{
			Fit: fit, Embedding: count[fit.Setting.Symbol], Axis: fit.Rotation.Row(2), Measure: 100 * sum / spread,
		})
	}
	return out
}
