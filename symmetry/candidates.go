package symmetry

import (
	"math"
	"sort"

	"github.com/go-gl/mathgl/mgl64"
)

// An element is an operation found in a cloud: what it does to the points, and
// the orthogonal matrix (about the centre, in the input's axes) that does this
// best. Permutation and sense together tell elements apart: in a planar set
// the plane itself moves no point.
type element struct {
	permutation []int32
	improper    bool
	matrix      mgl64.Mat3
	mismatch    float64 // Å, the farthest that an image lies from its point
	free        bool    // other axes would do as well; set by best
}

// key is equal for equal elements. Points near one line can be carried alike by
// a rotation about it and by one across it, or by a plane and by the
// inversion; so the key tells large turns from small ones where the points go
// back at the second time. Elsewhere they tell the turn, and a product of
// matrices that go together badly would not.
func (e *element) key() elementKey {
	h := uint64(14695981039346656037) // FNV-1a
	back := true
	for i, p := range e.permutation {
		h = (h ^ uint64(p)) * 1099511628211
		back = back && e.permutation[p] == int32(i)
	}
	cos := e.matrix.Trace() - 1
	if e.improper {
		cos += 2
	}
	return elementKey{h, e.improper, back && cos/2 < largeTurn}
}

// largeTurn is a cosine that no turn of a group with n up to MaxNearFold comes
// near to: C3 has −0.5, the fourth power of C11 −0.65.
const largeTurn = -0.58

type elementKey struct {
	hash            uint64
	improper, large bool
}

// candidates finds every orthogonal matrix that carries each point of the
// cloud to within reach of a point of its kind. Two points that are not on one
// line with the centre fix a proper and an improper matrix by their images, so
// the pair with the fewest possible images is tried with all of them (in the
// manner of J. Wolter, T. Woo, R. Volz, The Visual Computer 1, 37 (1985), who
// order points in shells; citation from memory). It stops, with false, when
// there are more than a group of the allowed orders can have.
func (c *cloud) candidates(reach, spacing float64) ([]*element, bool) {
	a, b, alike := c.references(reach)
	if a < 0 {
		return nil, true
	}
	near := c.byDistance(a)
	from, _ := triad(c.at[a], c.at[b])
	separation := c.at[a].Sub(c.at[b]).Len()
	found := map[elementKey]bool{}
	var list []*element
	for _, ia := range alike(a) {
		for _, ib := range c.partners(ia, b, separation, reach, alike(b)) {
			to, ok := triad(c.at[ia], c.at[ib])
			if !ok {
				continue
			}
			for _, improper := range []bool{false, true} {
				target := to
				if improper {
					target.SetCol(2, to.Col(2).Mul(-1))
				}
				e := c.grow(target.Mul3(from.Transpose()), near, reach, spacing)
				if e == nil {
					continue
				}
				e.improper = improper
				if k := e.key(); !found[k] {
					found[k] = true
					list = append(list, e)
				}
				if len(list) > 4*MaxFold {
					return nil, false
				}
			}
		}
	}
	sort.SliceStable(list, func(i, j int) bool { return list[i].mismatch < list[j].mismatch })
	return list, true
}

// manyAlike is the number of points alike above which the images of the second
// reference are sought near those of the first, not in the whole list.
const manyAlike = 48

// references chooses the two points whose images are tried: few others are
// like them, and they lie well off the centre and off one line with it.
func (c *cloud) references(reach float64) (a, b int, alike func(int) []int) {
	count, alike := c.alike(reach)
	far := c.farthest()
	least := math.Min(math.Max(0.2*far, 4*reach), 0.99*far)
	better := func(i, j int) bool {
		return j < 0 || count[i] < count[j] || count[i] == count[j] && c.radius[i] > c.radius[j]
	}
	a, b = -1, -1
	for i, r := range c.radius {
		if r >= least && better(i, a) {
			a = i
		}
	}
	if a < 0 {
		return a, b, alike
	}
	sine := func(i int) float64 {
		if c.radius[i] == 0 {
			return 0
		}
		return c.at[a].Cross(c.at[i]).Len() / (c.radius[a] * c.radius[i])
	}
	for _, enough := range []float64{0.3, 0.1} {
		for i := range c.at {
			if sine(i) > enough && c.radius[i]*sine(i) > reach && better(i, b) {
				b = i
			}
		}
		if b >= 0 {
			break
		}
	}
	if b < 0 { // a small set, or one near a line: the point farthest from it
		for i := range c.at {
			if sine(i) > 0 && (b < 0 || c.radius[i]*sine(i) > c.radius[b]*sine(b)) {
				b = i
			}
		}
	}
	if b >= 0 && count[b] > manyAlike {
		best := math.Inf(1)
		for i := range c.at {
			if d := c.at[i].Sub(c.at[a]).Len(); sine(i) > 0.05 && c.radius[i]*sine(i) > 4*reach && d < best {
				b, best = i, d
			}
		}
	}
	if b < 0 {
		a = -1
	}
	return a, b, alike
}

// partners lists the points that can be the image of b when a goes to ia.
func (c *cloud) partners(ia, b int, separation, reach float64, likeB []int) []int {
	var out []int
	test := func(i int) {
		if c.kind[i] == c.kind[b] && math.Abs(c.radius[i]-c.radius[b]) <= reach &&
			math.Abs(c.at[i].Sub(c.at[ia]).Len()-separation) <= 2*reach {
			out = append(out, i)
		}
	}
	if len(likeB) <= manyAlike {
		for _, i := range likeB {
			test(i)
		}
	} else {
		c.visit(c.at[ia], separation+2*reach, test)
		sort.Ints(out)
	}
	return out
}

// byDistance lists the points by their distance from one of them.
func (c *cloud) byDistance(a int) []int {
	order := make([]int, len(c.at))
	distance := make([]float64, len(c.at))
	for i := range order {
		order[i] = i
		distance[i] = c.at[i].Sub(c.at[a]).Len()
	}
	sort.Slice(order, func(i, j int) bool {
		if distance[order[i]] != distance[order[j]] {
			return distance[order[i]] < distance[order[j]]
		}
		return order[i] < order[j]
	})
	return order
}

// triad is the right-handed orthonormal frame on two directions, as columns.
func triad(a, b mgl64.Vec3) (mgl64.Mat3, bool) {
	normal := a.Cross(b)
	if normal.Len() < 1e-6 {
		return mgl64.Mat3{}, false
	}
	x, z := a.Normalize(), normal.Normalize()
	return mgl64.Mat3FromCols(x, z.Cross(x), z), true
}

// grow tries a matrix, first on the points near the reference and then on more
// and more of them, improving it each time by all that have found their
// images: the images of two points fix it only as well as these lie, and the
// error grows with distance. It returns nil as soon as a point has none.
func (c *cloud) grow(m mgl64.Mat3, near []int, reach, spacing float64) *element {
	n := len(near)
	image := make([]int32, n)
	done := 0
	wide := math.Min(spacing/2, 3*reach) // before the matrix is improved
	for size := 8; ; size *= 4 {
		size = min(size, n)
		for _, i := range near[done:size] {
			j := c.nearest(m.Mul3x1(c.at[i]), c.kind[i], wide)
			if j < 0 {
				return nil
			}
			image[i] = int32(j)
		}
		done = size
		m = c.improve(m, near[:done], image)
		if done == n {
			break
		}
	}
	mismatch := 0.0
	seen := make([]bool, n)
	for i, j := range image {
		mismatch = math.Max(mismatch, m.Mul3x1(c.at[i]).Sub(c.at[j]).Len())
		if seen[j] || mismatch > reach {
			return nil
		}
		seen[j] = true
	}
	return &element{permutation: image, matrix: m, mismatch: mismatch}
}

// improve turns an orthogonal matrix by the small rotation that brings the
// images of the points nearest, in the sense of least squares, to where they
// belong: ω = I⁻¹·Σ Mp × q, where I is the tensor of inertia of the images.
// Unlike a singular value decomposition it works for planar sets as it stands.
func (c *cloud) improve(m mgl64.Mat3, which []int, image []int32) mgl64.Mat3 {
	for range 3 {
		var torque mgl64.Vec3
		var inertia mgl64.Mat3
		for _, i := range which {
			p := m.Mul3x1(c.at[i])
			torque = torque.Add(p.Cross(c.at[image[i]]))
			inertia = addInertia(inertia, p)
		}
		turn, ok := rotationBy(inertia, torque)
		if !ok {
			return m
		}
		m = turn.Mul3(m)
		if equalTo(turn, mgl64.Ident3(), 1e-9) {
			break // the next would be the square of this
		}
	}
	return m
}

// addInertia adds |p|²·1 − p·pᵀ.
func addInertia(to mgl64.Mat3, p mgl64.Vec3) mgl64.Mat3 {
	sq := p.Dot(p)
	for r := 0; r < 3; r++ {
		for s := 0; s < 3; s++ {
			to[3*s+r] -= p[r] * p[s]
		}
		to[4*r] += sq
	}
	return to
}

// rotationBy is the rotation by the vector inertia⁻¹·torque; false where the
// points leave it open.
func rotationBy(inertia mgl64.Mat3, torque mgl64.Vec3) (mgl64.Mat3, bool) {
	if trace := inertia.Trace(); inertia.Det() < 1e-9*trace*trace*trace {
		return mgl64.Mat3{}, false
	}
	omega := inertia.Inv().Mul3x1(torque)
	angle := omega.Len()
	if angle < 1e-15 {
		return mgl64.Ident3(), true
	}
	return mgl64.HomogRotate3D(angle, omega.Mul(1/angle)).Mat3(), true
}
