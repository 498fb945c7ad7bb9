package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// A placed group is one found in a cloud together with the nearest points that
// have it exactly.
type placed struct {
	kind     kind
	matrices []mgl64.Mat3 // kind.elements()
	// permutations[r] is what matrices[r] does to the points.
	permutations [][]int32
	// rotation takes the centred input to the group's standard axes, in one
	// of the ways that there are; frame.go chooses among them.
	rotation  mgl64.Mat3
	ideal     []mgl64.Vec3 // in those axes
	deviation float64      // Å
}

// place fits a group of elements to the cloud: the orientation and the exactly
// symmetric points P with the least Σ|Q−P|². For a given orientation these are
// P_k = (1/h) Σ_R R⁻¹·Q_R(k); orientation and points are improved in turn
// until neither moves.
func (c *cloud) place(group []*element) (*placed, bool) {
	rec, ok := recognize(group)
	if !ok {
		return nil, false
	}
	p := &placed{kind: rec.kind, matrices: rec.kind.elements()}
	if len(p.matrices) != len(group) {
		return nil, false
	}
	p.rotation = rec.axes()
	misfit, ok := p.assign(group)
	if rec.kind.icosahedral() {
		// The three C2 can be taken in two ways that differ by 90°; the other
		// one may do.
		other := *p
		other.rotation = turnAboutZ(1, 4).Mul3(p.rotation)
		if m, good := other.assign(group); good && (!ok || m < misfit) {
			*p, ok = other, true
		}
	}
	if !ok {
		return nil, false
	}
	p.settle(c)
	return p, true
}

func (k kind) icosahedral() bool { return k.family == icosahedral || k.family == icosahedralProper }

// axes is the rotation with the recognized lines as its z and x.
func (r recognized) axes() mgl64.Mat3 {
	z, x := r.z, r.x
	if z == (mgl64.Vec3{}) {
		z = mgl64.Vec3{0, 0, 1}
	}
	if x == (mgl64.Vec3{}) {
		x = perpendicular(z)
	}
	return mgl64.Mat3FromRows(x, z.Cross(x), z)
}

// perpendicular returns some unit vector square to a unit vector.
func perpendicular(z mgl64.Vec3) mgl64.Vec3 {
	x := mgl64.Vec3{1, 0, 0}
	if math.Abs(z.X()) > 0.7 {
		x = mgl64.Vec3{0, 1, 0}
	}
	return x.Sub(z.Mul(x.Dot(z))).Normalize()
}

// assign tells which matrix each element is, and the sum of the squares of what
// is left between them. False: two are the same, so that the axes cannot be
// right.
func (p *placed) assign(group []*element) (misfit float64, ok bool) {
	p.permutations = make([][]int32, len(group))
	for _, e := range group {
		m := p.rotation.Mul3(e.matrix).Mul3(p.rotation.Transpose())
		best, least := -1, math.Inf(1)
		for i, s := range p.matrices {
			if (s.Det() < 0) != e.improper {
				continue
			}
			d := 0.0
			for j := range s {
				d += (s[j] - m[j]) * (s[j] - m[j])
			}
			if d < least {
				best, least = i, d
			}
		}
		if best < 0 || p.permutations[best] != nil {
			return 0, false
		}
		p.permutations[best] = e.permutation
		misfit += least
	}
	return misfit, true
}

// settled (radians) is a turn too small to matter: the ideal points have the
// group exactly in any orientation, and this one moves none by 1e-9 Å.
const settled = 1e-13

// settle improves orientation and ideal points in turn.
func (p *placed) settle(c *cloud) {
	const rounds = 500 // a few suffice near the group; each wins the factor deviation/size
	turned := make([]mgl64.Vec3, len(c.at))
	p.ideal = make([]mgl64.Vec3, len(c.at))
	for range rounds {
		p.symmetrize(c, turned)
		var torque mgl64.Vec3
		var inertia mgl64.Mat3
		for k, q := range turned {
			torque = torque.Add(q.Cross(p.ideal[k]))
			inertia = addInertia(inertia, q)
		}
		turn, ok := rotationBy(inertia, torque)
		if !ok || equalTo(turn, mgl64.Ident3(), settled) {
			break
		}
		p.rotation = orthonormal(turn.Mul3(p.rotation))
	}
	p.symmetrize(c, turned)
	p.deviation = 0
	for k := range turned {
		p.deviation = math.Max(p.deviation, turned[k].Sub(p.ideal[k]).Len())
	}
}

// symmetrize averages the points over the group in the present orientation.
func (p *placed) symmetrize(c *cloud, turned []mgl64.Vec3) {
	for k, q := range c.at {
		turned[k] = p.rotation.Mul3x1(q)
		p.ideal[k] = mgl64.Vec3{}
	}
	for r, m := range p.matrices {
		for k, to := range p.permutations[r] {
			q := turned[to]
			p.ideal[k][0] += m[0]*q[0] + m[1]*q[1] + m[2]*q[2] // Mᵀ·q
			p.ideal[k][1] += m[3]*q[0] + m[4]*q[1] + m[5]*q[2]
			p.ideal[k][2] += m[6]*q[0] + m[7]*q[1] + m[8]*q[2]
		}
	}
	for k := range p.ideal {
		p.ideal[k] = p.ideal[k].Mul(1 / float64(len(p.matrices)))
	}
}

func equalTo(a, b mgl64.Mat3, limit float64) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > limit {
			return false
		}
	}
	return true
}

// orthonormal removes what rounding has spoilt of a rotation.
func orthonormal(m mgl64.Mat3) mgl64.Mat3 {
	x := m.Row(0).Normalize()
	y := m.Row(1)
	y = y.Sub(x.Mul(x.Dot(y))).Normalize()
	return mgl64.Mat3FromRows(x, y, x.Cross(y))
}

// A search looks for the largest group near a cloud. It remembers what it has
// placed, since many ways of growing a group lead through the same subgroups.
type search struct {
	cloud     *cloud
	tolerance float64
	seen      map[elementKey]*placed
}

// strongest finds the largest group, within tolerance, that the candidate
// elements generate. They are taken by rising mismatch, each if the group that
// it makes with those taken already is still near enough. If some had to be
// left out, each of these is tried as the first in its turn, and the largest
// group wins, the nearer one among equals.
func (c *cloud) strongest(list []*element, tolerance float64) *placed {
	s := search{c, tolerance, map[elementKey]*placed{}}
	best, left := s.greedy(nil, list)
	for i, e := range left {
		if i == mostRestarts {
			break
		}
		other, _ := s.greedy(e, left)
		if other == nil {
			continue
		}
		if h, g := len(other.matrices), len(best.matrices); h > g || h == g && other.deviation < best.deviation-1e-9 {
			best = other
		}
	}
	return best
}

// mostRestarts bounds the work on structures that are near to several groups
// at once; an octahedron distorted in two ways leaves out some thirty.
const mostRestarts = 48

// greedy returns the group and those elements left out that are near enough by
// themselves; nil if first alone makes no group within tolerance.
func (s *search) greedy(first *element, list []*element) (best *placed, left []*element) {
	var generators []*element
	known := map[elementKey]bool{}
	try := func(e *element) bool {
		group := s.cloud.generate(append(generators[:len(generators):len(generators)], e), 4*MaxFold)
		p := s.place(group)
		if p == nil {
			return false
		}
		best = p
		generators = append(generators, e)
		for _, g := range group {
			known[g.key()] = true
		}
		return true
	}
	if first == nil {
		first = s.cloud.generate(nil, 1)[0]
	}
	if !try(first) {
		return nil, nil
	}
	for _, e := range list {
		switch {
		case known[e.key()]:
		case e.mismatch > 3*s.tolerance:
			// An element of the group moves no point by more than twice the
			// deviation; the best matrix for all may do worse for one.
		case s.place(s.cloud.generate([]*element{e}, 4*MaxFold)) == nil:
			// not even the powers of it are near enough
		case !try(e):
			left = append(left, e)
		}
	}
	return best, left
}

// place fits a group and returns it if it is within tolerance, else nil.
func (s *search) place(group []*element) *placed {
	if group == nil {
		return nil
	}
	key := keyOf(group)
	if p, ok := s.seen[key]; ok {
		return p
	}
	p, ok := s.cloud.place(group)
	if !ok || p.deviation > s.tolerance {
		p = nil
	}
	s.seen[key] = p
	return p
}

// keyOf is the same for the same elements in any order.
func keyOf(group []*element) elementKey {
	var key elementKey
	for _, e := range group {
		k := e.key()
		key.hash += k.hash * k.hash
		key.improper = key.improper != k.improper
		if k.improper {
			key.hash += k.hash
		}
		if k.large {
			key.hash += 3 * k.hash
		}
	}
	return key
}
