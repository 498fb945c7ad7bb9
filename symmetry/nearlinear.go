package symmetry

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"sort"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// onLines lists the linear groups that the points nearly have, each followed by
// its finite subgroups with the same z.
//
// C∞v leaves every point on the axis u: P = (Q·u)·u, and Σ|Q−P|² is the least for
// the axis of the largest spread. D∞h also exchanges points: P = ½(Q − Q′)·u·u for
// a point Q and its partner Q′, and u is the axis of the largest spread of these
// halves of differences.
//
// Partners follow from the order of the points along u, from both ends inward:
// of two points at a distance D at least 0.7·D must remain, which is half the sum
// of the differences in height of the two and of their partners; so both
// differences are at least 0.4·D and of one sign. For the same reason the order
// is that along any axis that is 0.4 radians or less from u, and axes in all
// directions, no more apart than that, show all pairings.
//
// across has finite groups without a turn about the line, of the same ideal points.
func (l *ladder) onLines(links []Link) (out []*Nearness, across []*placed) {
	c := l.cloud
	var polar *Nearness
	if axis := widest(c.at); l.along(axis, 0) {
		polar = l.onLine(axis, nil, links)
	}
	const directions = 320
	gap := 1.6 / math.Sqrt(directions)
	tried := map[string]bool{}
	for i := range directions {
		v := spiral(i, directions)
		if !l.along(v, gap) {
			continue
		}
		partner := c.mirrored(v)
		if key := fmt.Sprint(partner); partner == nil || tried[key] {
			continue
		} else {
			tried[key] = true
		}
		halves := make([]mgl64.Vec3, len(c.at))
		for k, q := range c.at {
			halves[k] = q.Sub(c.at[partner[k]]).Mul(0.5)
		}
		axis := widest(halves)
		central := l.onLine(axis, partner, links)
		if central == nil {
			continue
		}
		out = append(out, central)
		out = append(out, central.subgroups(prismatic, antiprismatic, dihedral, cyclicHorizontal, improperCyclic)...)
		if polar != nil && polar.Whole == nil && sameLine(polar, central) {
			polar.Whole = central
			out = append(out, central.subgroups(pyramidal, cyclic)...)
		}
		if !l.straight {
			across = append(across, l.across(axis, partner)...)
		}
	}
	if polar != nil {
		out = append(out, polar)
		if polar.Whole == nil {
			out = append(out, polar.subgroups(pyramidal, cyclic)...)
		}
	}
	return out, across
}

// sameLine tells whether C∞v and D∞h have the same ideal points, so that
// everything below C∞v is below D∞h.
func sameLine(polar, central *Nearness) bool {
	mean := 0.0
	for _, v := range polar.Fit.Ideal {
		mean += v[2] / float64(len(polar.Fit.Ideal))
	}
	for k, v := range central.Fit.Ideal {
		if math.Abs(math.Abs(polar.Fit.Ideal[k][2]-mean)-math.Abs(v[2])) > 1e-9 {
			return false
		}
	}
	return true
}

// across are C2v and C2h with their C2 square to the axis of a D∞h, where they,
// too, bring the points onto a line. The search for finite groups may miss them:
// it takes the matrix of each operation that is the best by itself, and these need
// not go together where a plane leaves all points in place.
func (l *ladder) across(axis mgl64.Vec3, partner []int) []*placed {
	c := l.cloud
	swap, stay := make([]int32, len(partner)), make([]int32, len(partner))
	for k, j := range partner {
		swap[k], stay[k] = int32(j), int32(k)
	}
	var out []*placed
	for _, k := range []kind{{pyramidal, 2}, {cyclicHorizontal, 2}} {
		var best *placed
		side, _, _ := c.bend(axis)
		for _, z := range []mgl64.Vec3{side, axis.Cross(side)} {
			p := &placed{kind: k, matrices: k.elements(), rotation: mgl64.Mat3FromRows(axis, z.Cross(axis), z)}
			for _, m := range p.matrices {
				if m.At(0, 0) < 0 {
					p.permutations = append(p.permutations, swap)
				} else {
					p.permutations = append(p.permutations, stay)
				}
			}
			if p.settle(c); best == nil || p.misfit(c) < best.misfit(c)-1e-9 {
				best = p
			}
		}
		if best.deviation <= l.limit && best.straight() {
			out = append(out, best)
		}
	}
	return out
}

// straight tells whether the ideal points lie on the x axis.
func (p *placed) straight() bool {
	for _, v := range p.ideal {
		if math.Hypot(v[1], v[2]) > 1e-6 {
			return false
		}
	}
	return true
}

// along tells whether all points are within the limit from a line through the
// centre that is no more than an angle (radians) from an axis.
func (l *ladder) along(axis mgl64.Vec3, angle float64) bool {
	for k, q := range l.cloud.at {
		if q.Sub(axis.Mul(q.Dot(axis))).Len() > l.limit+angle*l.cloud.radius[k] {
			return false
		}
	}
	return true
}

// widest is the direction of the largest spread of vectors about zero.
func widest(vectors []mgl64.Vec3) mgl64.Vec3 {
	sum := mat.NewSymDense(3, nil)
	for _, v := range vectors {
		for r := range 3 {
			for s := r; s < 3; s++ {
				sum.SetSym(r, s, sum.At(r, s)+v[r]*v[s])
			}
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(sum, true) {
		panic("symmetry: a spread without axes")
	}
	var axes mat.Dense
	eigen.VectorsTo(&axes)
	return mgl64.Vec3{axes.At(0, 2), axes.At(1, 2), axes.At(2, 2)}
}

// mirrored pairs the points in their order along an axis, from both ends inward;
// nil if those are of different kinds.
func (c *cloud) mirrored(axis mgl64.Vec3) []int {
	n := len(c.at)
	order := make([]int, n)
	height := make([]float64, n)
	for k, q := range c.at {
		order[k], height[k] = k, q.Dot(axis)
	}
	sort.SliceStable(order, func(a, b int) bool { return height[order[a]] < height[order[b]] })
	partner := make([]int, n)
	for k, i := range order {
		j := order[n-1-k]
		if c.kind[i] != c.kind[j] {
			return nil
		}
		partner[i] = j
	}
	return partner
}

// onLine is the fit of C∞v, or with partners of D∞h, along an axis; nil if the
// points are not near to it.
func (l *ladder) onLine(axis mgl64.Vec3, partner []int, links []Link) *Nearness {
	c := l.cloud
	ideal := make([]mgl64.Vec3, len(c.at))
	fit := &Fit{Tolerance: l.limit, fromDefault: mgl64.Ident3(), Setting: newSetting(kind{family: linearPolar})}
	misfit, spread := 0.0, 0.0
	for k, q := range c.at {
		height := q.Dot(axis)
		if partner != nil {
			height = (height - c.at[partner[k]].Dot(axis)) / 2
		}
		ideal[k] = axis.Mul(height)
		d := q.Sub(ideal[k])
		misfit, spread = misfit+d.Dot(d), spread+q.Dot(q)
		if d.Len() > fit.Deviation+1e-12 {
			fit.Deviation, fit.Worst = d.Len(), k
		}
	}
	if fit.Deviation > l.limit || !l.keepsApart(&placed{ideal: ideal, deviation: fit.Deviation}, leastShare) {
		return nil
	}
	if partner != nil {
		fit.Setting = newSetting(kind{family: linearCentral})
	}
	f := framing{kinds: c.kind, links: links, tolerance: min(l.limit, frameTolerance)}
	for _, p := range ideal {
		f.points = append(f.points, mgl64.Vec3{0, 0, p.Dot(axis)})
	}
	x, rule, tied := c.bend(axis)
	f.linear(fit, mgl64.Mat3FromRows(x, axis.Cross(x), axis), c.centre, partner != nil)
	if fit.Rule.X = rule; tied {
		fit.Ties = append(fit.Ties, Tie{TieXAxis, SettledByNumber})
	}
	fit.keep(c)
	return &Nearness{Fit: fit, Axis: fit.Rotation.Row(2), Measure: 100 * misfit / spread}
}

// bend is the x of a nearly linear set: in the plane in which it is bent, toward
// the side of the larger Σ kind·x, so that a planar bend is all in the first
// partner. In a set that is bent in no plane more than in others x goes through
// the point farthest from the axis, and that is a tie; in one that is not bent by
// more than frameTolerance it is free.
func (c *cloud) bend(axis mgl64.Vec3) (x mgl64.Vec3, rule string, tied bool) {
	u := perpendicular(axis)
	v := axis.Cross(u)
	var aa, ab, bb, far float64
	first := -1
	for k, q := range c.at {
		a, b := q.Dot(u), q.Dot(v)
		aa, ab, bb = aa+a*a, ab+a*b, bb+b*b
		if d := math.Hypot(a, b); d > far+frameTolerance {
			far, first = d, k
		}
	}
	if first < 0 {
		return u, XFree, false
	}
	mean, half := (aa+bb)/2, math.Hypot((aa-bb)/2, ab)
	if math.Sqrt(mean+half)-math.Sqrt(max(0, mean-half)) < frameTolerance {
		q := c.at[first]
		return q.Sub(axis.Mul(q.Dot(axis))).Normalize(), XBend, true
	}
	angle := math.Atan2(2*ab, aa-bb) / 2
	x = u.Mul(math.Cos(angle)).Add(v.Mul(math.Sin(angle)))
	side, sign := 0.0, 0.0
	for k, q := range c.at {
		side += float64(max(1, c.kind[k])) * q.Dot(x)
		if sign == 0 && math.Abs(q.Dot(x)) > frameTolerance {
			sign = q.Dot(x)
		}
	}
	if math.Abs(side) > frameTolerance {
		sign = side
	}
	return x.Mul(math.Copysign(1, sign)), XBend, false
}

// subgroups are the finite subgroups of some families with the z of a linear
// group, up to n = MaxNearFold, that bring every point onto the axis: those with a
// turn about it. Cn and Cnv ask for no more than C∞v, the others for as much as
// D∞h.
func (n *Nearness) subgroups(families ...family) []*Nearness {
	var out []*Nearness
	for fold := 2; fold <= MaxNearFold; fold++ {
		for _, f := range families {
			out = append(out, n.subgroup(kind{f, fold}))
		}
	}
	return out
}

// subgroup is a finite subgroup of a linear group, with its ideal points.
func (n *Nearness) subgroup(k kind) *Nearness {
	fit, err := n.Fit.LinearAs(k.symbol())
	if err != nil {
		panic("symmetry: " + err.Error())
	}
	return &Nearness{Fit: fit, Axis: n.Axis, Measure: n.Measure, Whole: n}
}

// ranked merges groups: by rising deviation, among equals the larger first, and
// else in the order in which they stand.
func ranked(list []*Nearness) []*Nearness {
	order := func(n *Nearness) int {
		if k := n.Fit.Setting.kind; k.infinite() {
			return math.MaxInt - int(spherical-k.family)
		}
		return n.Fit.Setting.Order()
	}
	place := map[*Nearness]int{}
	for i, n := range list {
		place[n] = i
	}
	slices.SortFunc(list, func(a, b *Nearness) int { return cmp.Compare(a.Fit.Deviation, b.Fit.Deviation) })
	for first := 0; first < len(list); {
		end := first + 1
		for end < len(list) && list[end].Fit.Deviation < list[first].Fit.Deviation+equalDeviation {
			end++
		}
		slices.SortFunc(list[first:end], func(a, b *Nearness) int {
			return cmp.Or(cmp.Compare(order(b), order(a)), cmp.Compare(place[a], place[b]))
		})
		first = end
	}
	count := map[string]int{}
	for _, n := range list {
		count[n.Fit.Setting.Symbol]++
		n.Embedding = count[n.Fit.Setting.Symbol]
	}
	return list
}
