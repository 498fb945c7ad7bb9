package symmetry

import (
	"math"
	"sort"

	"github.com/go-gl/mathgl/mgl64"
)

// Where the axes point by default. Sources as far as seen: z on the principal
// axis, with several of one order on the one through most atoms, and the
// placing of planar molecules (x square to the plane where z lies in it, else
// x through most atoms): the page of a chemistry department, read; the plane
// of a planar C2v molecule in yz: R. S. Mulliken, J. Chem. Phys. 23, 1997
// (1955), as quoted elsewhere, read there. Cubic and icosahedral axes and σv
// through atoms: common practice. All else is our own choice and marked so.

// Keys of Rule.Z and Rule.X.
const (
	ZPrincipal      = "principal-axis"   // the axis of the highest order
	ZMostAtoms      = "c2-most-atoms"    // of three C2 the one with most atoms, then bonds, then extent
	ZPlanarC2       = "planar-c2"        // planar D2h: the same among the two in the plane
	ZPlaneNormal    = "plane-normal"     // Cs: square to the plane
	ZSmallestMoment = "smallest-moment"  // C1, Ci: axis of the smallest principal moment
	ZCubic          = "cubic-axes"       // C4 (T, Th, Td: C2, S4) on x, y and z
	ZIcosahedral    = "icosahedral-axes" // three C2 on x, y, z; C5 at (0, ±1, ±φ)
	ZMolecularAxis  = "molecular-axis"   // linear molecules
	ZInput          = "input-axes"       // a single atom

	XC2MostAtoms    = "c2-most-atoms"       // C2 through most atoms, then planes with most atoms, then bonds
	XPlaneMostAtoms = "plane-most-atoms"    // σv(xz) with most atoms, then bonds
	XPlanarNormal   = "planar-normal"       // square to the plane of a planar molecule
	XYZMostAtoms    = "yz-most-atoms"       // C2v: the plane with most atoms is yz
	XFirstOrbit     = "first-orbit"         // toward an atom of the largest orbit off the axis
	XSmallerMoment  = "smaller-moment"      // Cs, C2h: in the plane, axis of the smaller moment
	XLargestMoment  = "largest-moment"      // C1, Ci: axis of the largest principal moment
	XThreefold      = "threefold-orbit"     // T, Td, Th: first orbit on threefold axes has an atom on (1,1,1)
	XEquivalent     = "equivalent-settings" // all choices are equivalent
	XFree           = "free"                // linear: any direction
	XBend           = "bend-plane"          // linear ideal of a bent set: in the plane in which that is bent
	XInput          = "input-axes"
)

// Keys of Rule.Sources.
const (
	SourceDepartmentPage = "chemistry-department-page"
	SourceMulliken       = "mulliken-1955-as-quoted"
	SourceCommon         = "common-practice"
	SourceOwn            = "own-choice"
)

// Keys of Tie.What and Tie.Settled.
const (
	TieOrigin = "origin"
	TieZAxis  = "z-axis"
	TieZSense = "z-sense"
	TieXAxis  = "x-axis"
	TieXSense = "x-sense"

	SettledByCoordinates = "coordinates"   // the frame whose sorted coordinates are the larger
	SettledByNumber      = "lowest-number" // the atom with the lowest number
)

// A framing holds what the rules for axes look at: the ideal points in one set
// of standard axes of their group.
type framing struct {
	kind      kind
	points    []mgl64.Vec3
	kinds     []int
	links     []Link
	orbits    [][]int // first: most points, then the heavier kind, then farther
	tied      []int   // number of the orbit's place; equal where nothing tells two apart
	group     []mgl64.Mat3
	proper    []mgl64.Mat3 // the rotations of group
	tolerance float64
}

// frameTolerance (Å) is how far a point may lie from an axis or a plane that
// counts it, or the scores of two frames from each other: the points are ideal,
// so that those that an operation keeps in place lie there exactly.
const frameTolerance = DefaultTolerance

// frame chooses axes for a placed group and writes everything in them.
func (c *cloud) frame(p *placed, links []Link, tolerance float64) *Fit {
	s := newSetting(p.kind)
	f := framing{kind: p.kind, points: p.ideal, kinds: c.kind, links: links, group: p.matrices, tolerance: min(tolerance, frameTolerance)}
	for _, m := range p.matrices {
		if m.Det() > 0 {
			f.proper = append(f.proper, m)
		}
	}
	fit := &Fit{Setting: s, Tolerance: tolerance, Deviation: p.deviation, fromDefault: mgl64.Ident3()}
	origin := f.origin(p, fit)
	f.points = make([]mgl64.Vec3, len(p.ideal))
	for k, v := range p.ideal {
		f.points[k] = v.Sub(origin)
	}
	f.sortOrbits(p.permutations)
	turn := f.choose(fit)
	fit.Rotation = orthonormal(turn.Mul3(p.rotation))
	fit.Origin = c.centre.Add(p.rotation.Transpose().Mul3x1(origin))
	fit.Ideal = make([]mgl64.Vec3, len(f.points))
	for k, v := range f.points {
		fit.Ideal[k] = clean(turn.Mul3x1(v))
	}
	fit.Permutations = f.carry(p, s, turn)
	fit.Rule = f.rule()
	for k, q := range c.at {
		if d := p.rotation.Mul3x1(q).Sub(p.ideal[k]).Len(); d >= fit.Deviation-1e-12 {
			fit.Worst = k
			break
		}
	}
	fit.keep(c)
	return fit
}

// clean removes what rounding leaves of coordinates that are zero.
func clean(v mgl64.Vec3) mgl64.Vec3 {
	for i := range v {
		if math.Abs(v[i]) < 1e-12 {
			v[i] = 0
		}
	}
	return v
}

// carry finds the permutation of each operation of the Setting in the turned
// axes: S acts there as turn⁻¹·S·turn does in the old ones.
func (f *framing) carry(p *placed, s *Setting, turn mgl64.Mat3) [][]int {
	out := make([][]int, s.Order())
	for r, o := range s.Operations {
		m := turn.Transpose().Mul3(o.Matrix).Mul3(turn)
		for i, old := range p.matrices {
			if equalTo(m, old, 1e-6) {
				out[r] = make([]int, len(f.points))
				for k, to := range p.permutations[i] {
					out[r][k] = int(to)
				}
				break
			}
		}
		if out[r] == nil {
			panic("symmetry: a frame that does not keep the setting of " + s.Symbol)
		}
	}
	return out
}

// origin is the point that all operations leave. Where that is a line, a plane
// or all space it is the core point on it with most links, then of the heavier
// kind, then nearest to the centroid; else the centroid.
func (f *framing) origin(p *placed, fit *Fit) mgl64.Vec3 {
	switch f.kind.family {
	case cyclic, pyramidal:
	case cyclicHorizontal:
		if f.kind.n > 1 {
			return mgl64.Vec3{}
		}
	default:
		return mgl64.Vec3{}
	}
	var fixed []int
	for k := range f.points {
		still := true
		for _, perm := range p.permutations {
			still = still && int(perm[k]) == k
		}
		if still {
			fixed = append(fixed, k)
		}
	}
	at, tie := f.mostLinked(fixed)
	if tie {
		fit.Ties = append(fit.Ties, Tie{TieOrigin, SettledByNumber})
	}
	if at < 0 {
		return mgl64.Vec3{}
	}
	return f.points[at]
}

// mostLinked picks the point with most links, then the heavier, then the one
// nearest to the centroid; −1 for none. tie: another one is as good.
func (f *framing) mostLinked(among []int) (best int, tie bool) {
	degree := make([]float64, len(f.points))
	for _, l := range f.links {
		degree[l[0]]++
		degree[l[1]]++
	}
	best = -1
	for _, k := range among {
		if best < 0 {
			best = k
			continue
		}
		mine := []float64{degree[k], float64(f.kinds[k]), -f.points[k].Len()}
		other := []float64{degree[best], float64(f.kinds[best]), -f.points[best].Len()}
		order := compare(mine, other, f.tolerance)
		switch {
		case order == 0:
			tie = true
		case order > 0:
			tie = false
		}
		if compare(mine, other, 1e-9) > 0 {
			best = k
		}
	}
	return best, tie
}

// compare orders two lists of numbers by their first difference above a limit.
func compare(a, b []float64, limit float64) int {
	for i := range a {
		switch {
		case a[i] > b[i]+limit:
			return 1
		case a[i] < b[i]-limit:
			return -1
		}
	}
	return 0
}

// sortOrbits collects the orbits and puts the first in front: most points,
// then the heavier kind, then the farther from the origin.
func (f *framing) sortOrbits(permutations [][]int32) {
	seen := make([]bool, len(f.points))
	for k := range f.points {
		if seen[k] {
			continue
		}
		var orbit []int
		for _, perm := range permutations {
			if j := int(perm[k]); !seen[j] {
				seen[j] = true
				orbit = append(orbit, j)
			}
		}
		sort.Ints(orbit)
		f.orbits = append(f.orbits, orbit)
	}
	value := func(o []int) []float64 {
		return []float64{float64(len(o)), float64(f.kinds[o[0]]), f.points[o[0]].Len()}
	}
	sort.SliceStable(f.orbits, func(a, b int) bool { return compare(value(f.orbits[a]), value(f.orbits[b]), 0) > 0 })
	f.tied = make([]int, len(f.orbits))
	for i := 1; i < len(f.orbits); i++ {
		f.tied[i] = f.tied[i-1]
		if compare(value(f.orbits[i-1]), value(f.orbits[i]), f.tolerance) != 0 {
			f.tied[i]++
		}
	}
}

// choose returns the rotation from the axes in hand to those of the rules.
func (f *framing) choose(fit *Fit) mgl64.Mat3 {
	turns := f.turns()
	if len(turns) == 0 { // no point is off the axis: no direction is better
		turns = []mgl64.Mat3{mgl64.Ident3()}
	}
	if len(turns) > len(f.proper) { // else all are equivalent
		for _, c := range f.criteria() {
			turns = f.keepBest(turns, c)
		}
	}
	turns = f.settle(turns, fit)
	return f.byNumber(turns)
}

// keepBest keeps the turns with the highest score.
func (f *framing) keepBest(turns []mgl64.Mat3, c criterion) []mgl64.Mat3 {
	var kept []mgl64.Mat3
	var best []float64
	turned := make([]mgl64.Vec3, len(f.points))
	for _, t := range turns {
		for k, v := range f.points {
			turned[k] = t.Mul3x1(v)
		}
		score := c.score(turned)
		order := 1
		if best != nil {
			order = compare(score, best, c.limit)
		}
		if order > 0 {
			kept, best = kept[:0], score
		}
		if order >= 0 {
			kept = append(kept, t)
		}
	}
	return kept
}

// settle leaves one class of turns that differ by rotations of the group. If
// there are several, the class is taken whose coordinates, sorted, are the
// largest. That is no choice where z and x of the others point in equivalent
// directions (an improper operation of the group carries them there, so that
// only the side of y differs); else the rules have left something open, and a
// tie is noted.
func (f *framing) settle(turns []mgl64.Mat3, fit *Fit) []mgl64.Mat3 {
	var classes [][]mgl64.Mat3
next:
	for _, t := range turns {
		for i, c := range classes {
			if f.equivalent(c[0], t) {
				classes[i] = append(c, t)
				continue next
			}
		}
		classes = append(classes, []mgl64.Mat3{t})
	}
	if len(classes) == 1 {
		return classes[0]
	}
	best := 0
	lists := make([][]float64, len(classes))
	for i, c := range classes {
		for _, t := range c {
			if list := f.coordinates(t); lists[i] == nil || compare(list, lists[i], 1e-6) > 0 {
				lists[i] = list
			}
		}
		if compare(lists[i], lists[best], 1e-6) > 0 {
			best = i
		}
	}
	open := map[string]bool{}
	for _, c := range classes {
		open[f.difference(classes[best][0], c[0])] = true
	}
	for _, what := range []string{TieZAxis, TieZSense, TieXAxis, TieXSense} {
		if open[what] {
			fit.Ties = append(fit.Ties, Tie{what, SettledByCoordinates})
		}
	}
	return classes[best]
}

// equivalent tells whether two turns differ by a rotation of the group.
func (f *framing) equivalent(a, b mgl64.Mat3) bool {
	d := b.Mul3(a.Transpose())
	for _, g := range f.proper {
		if equalTo(d, g, 1e-6) {
			return true
		}
	}
	return false
}

// coordinates lists kinds and places of all points in the turned axes, sorted
// downward, so that lists can be compared whatever the points' numbers.
func (f *framing) coordinates(t mgl64.Mat3) []float64 {
	rows := make([][]float64, len(f.points))
	for k, v := range f.points {
		w := t.Mul3x1(v)
		rows[k] = []float64{float64(f.kinds[k]), w[2], w[0], w[1]}
	}
	sort.Slice(rows, func(a, b int) bool { return compare(rows[a], rows[b], 1e-6) > 0 })
	var list []float64
	for _, r := range rows {
		list = append(list, r...)
	}
	return list
}

// difference names the least in which the directions of z and x of two turns
// differ, up to operations of the group; "" if they do not.
func (f *framing) difference(a, b mgl64.Mat3) string {
	names := []string{TieZAxis, TieZSense, TieXAxis, TieXSense, ""}
	least := 0
	d := b.Mul3(a.Transpose())
	for _, g := range f.group {
		m := g.Mul3(d)
		zz, xx := m.At(2, 2), m.At(0, 0)
		rank := 0
		switch {
		case zz < -1+1e-6:
			rank = 1
		case zz > 1-1e-6 && xx > 1-1e-6:
			rank = 4
		case zz > 1-1e-6 && xx < -1+1e-6:
			rank = 3
		case zz > 1-1e-6:
			rank = 2
		}
		least = max(least, rank)
	}
	return names[least]
}

// byNumber chooses among equivalent turns. Of the points that come to lie on
// +z, else on +x, else in the half of xz with positive x, the lowest number
// decides; then the point with the lowest number comes to lie at the largest z,
// then x, then y; then the next point.
func (f *framing) byNumber(turns []mgl64.Mat3) mgl64.Mat3 {
	left := make([]mgl64.Mat3, 0, len(f.proper))
	for _, g := range f.proper {
		left = append(left, g.Mul3(turns[0]))
	}
	for _, there := range []func(mgl64.Vec3) bool{
		func(v mgl64.Vec3) bool { return f.onZ(v) && v[2] > f.tolerance },
		func(v mgl64.Vec3) bool { return f.onX(v) && v[0] > 0 },
		func(v mgl64.Vec3) bool { return f.near(v[1]) && v[0] > f.tolerance },
	} {
		left = f.lowestNumber(left, there)
	}
	for _, v := range f.points {
		if len(left) == 1 {
			break
		}
		var kept []mgl64.Mat3
		var best []float64
		for _, t := range left {
			w := t.Mul3x1(v)
			place := []float64{w[2], w[0], w[1]}
			order := 1
			if best != nil {
				order = compare(place, best, 1e-6)
			}
			if order > 0 {
				kept, best = kept[:0], place
			}
			if order >= 0 {
				kept = append(kept, t)
			}
		}
		left = kept
	}
	return left[0]
}

// lowestNumber keeps the turns that bring the point with the lowest number
// somewhere; all, if none brings any there.
func (f *framing) lowestNumber(turns []mgl64.Mat3, there func(mgl64.Vec3) bool) []mgl64.Mat3 {
	for _, v := range f.points {
		var kept []mgl64.Mat3
		for _, t := range turns {
			if there(t.Mul3x1(v)) {
				kept = append(kept, t)
			}
		}
		if kept != nil {
			return kept
		}
	}
	return turns
}
