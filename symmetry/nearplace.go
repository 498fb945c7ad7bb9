package symmetry

import (
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// best gives an element the matrix, of the turn that it has, about the axis
// about which its cyclic group fits the points best. Σ_k Σ_i Q_k(i)·M^k·Q_i is
// u·A·u + b·u for the axis u, which has one largest value on the unit sphere
// (M. Pinsky and others, J. Comput. Chem. 29, 2712 (2008), find it so; citation
// from memory).
func (c *cloud) best(e *element) {
	turn, order := e.turn()
	a := mat.NewSymDense(3, nil)
	var b mgl64.Vec3
	image := make([]int32, len(e.permutation))
	for i := range image {
		image[i] = int32(i)
	}
	improper := false
	for k := 1; k < order; k++ {
		improper = improper != e.improper
		along := 1.0 // what becomes of the part of a point along the axis
		if improper {
			along = -1
		}
		sin, cos := math.Sincos(float64(k) * turn)
		for i, j := range image {
			image[i] = e.permutation[j]
			p, q := c.at[i], c.at[image[i]]
			for r := range 3 {
				for s := r; s < 3; s++ {
					a.SetSym(r, s, a.At(r, s)+(along-cos)*(p[r]*q[s]+p[s]*q[r])/2)
				}
			}
			b = b.Add(p.Cross(q).Mul(sin))
		}
	}
	axis, other := highest(a, b)
	e.free = other != (mgl64.Vec3{})
	about := func(axis mgl64.Vec3) mgl64.Mat3 {
		m := mgl64.QuatRotate(turn, axis).Mat4().Mat3()
		if e.improper {
			m = reflectionIn(axis).Mul3(m)
		}
		return m
	}
	if axis == (mgl64.Vec3{}) {
		return // the inversion, or a set of which any axis is as good
	}
	if other != (mgl64.Vec3{}) {
		axis = c.gentlest(e, axis, other, about)
	}
	e.matrix = about(axis)
}

// gentlest is, of the axes in the plane of two, that about which the farthest
// point of an element moves least.
func (c *cloud) gentlest(e *element, u, v mgl64.Vec3, about func(mgl64.Vec3) mgl64.Mat3) mgl64.Vec3 {
	axis := func(angle float64) mgl64.Vec3 { return u.Mul(math.Cos(angle)).Add(v.Mul(math.Sin(angle))) }
	farthest := func(angle float64) (far float64) {
		m := about(axis(angle))
		for i, p := range c.at {
			far = math.Max(far, m.Mul3x1(p).Sub(c.at[e.permutation[i]]).Len())
		}
		return far
	}
	best := 0.0
	for step := math.Pi / 36; step > 1e-9; step /= 4 {
		middle := best
		steps := 4
		if step > 0.08 {
			steps = 36
		}
		for k := -steps; k <= steps; k++ {
			if angle := middle + float64(k)*step; farthest(angle) < farthest(best)-1e-12 {
				best = angle
			}
		}
	}
	return axis(best)
}

// turn is the angle of an element, as its matrix has it, and its order.
func (e *element) turn() (angle float64, order int) {
	order = e.order()
	cos := e.matrix.Trace() - 1
	if e.improper {
		cos += 2
	}
	n := math.Round(math.Acos(max(-1, min(1, cos/2))) / (2 * math.Pi) * float64(order))
	return 2 * math.Pi * n / float64(order), order
}

// highest is the unit vector with the largest u·A·u + b·u. Where all in the plane
// of two have it, these are returned; zero where all vectors have it.
func highest(a *mat.SymDense, b mgl64.Vec3) (u, other mgl64.Vec3) {
	var eigen mat.EigenSym
	if !eigen.Factorize(a, true) {
		return u, other
	}
	values := eigen.Values(nil)
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	size := math.Abs(values[0]) + math.Abs(values[2]) + b.Len()
	var axes [3]mgl64.Vec3
	var parts mgl64.Vec3
	for i := range axes {
		axes[i] = mgl64.Vec3{vectors.At(0, i), vectors.At(1, i), vectors.At(2, i)}
		parts[i] = axes[i].Dot(b)
	}
	if b.Len() <= 1e-9*size {
		switch {
		case values[2]-values[0] <= 1e-9*size:
			return u, other
		case values[2]-values[1] <= 1e-9*size:
			return axes[2], axes[1]
		}
		return axes[2], other
	}
	// u = ½·(λ − A)⁻¹·b of length 1 with λ above all values of A.
	length := func(lambda float64) (sum float64) {
		for i, p := range parts {
			sum += math.Pow(p/2/(lambda-values[i]), 2)
		}
		return sum
	}
	low, high := values[2], values[2]+b.Len()/2
	for range 200 {
		if middle := (low + high) / 2; length(middle) > 1 {
			low = middle
		} else {
			high = middle
		}
	}
	for i, p := range parts {
		if d := high - values[i]; d > 1e-12*size {
			u = u.Add(axes[i].Mul(p / 2 / d))
		}
	}
	if short := 1 - u.Dot(u); short > 1e-9 { // b is square to the highest axis
		u = u.Add(axes[2].Mul(math.Sqrt(short)))
	}
	return u.Normalize(), other
}

// farOff (Å) is the deviation above which the matrices of the elements of a
// group, each the best for itself, may go together badly.
const farOff = 0.1

// placeFar is place for elements that may go together badly: standard frames are
// proposed by different ones of them, and the best fit of those is taken in
// which the permutations multiply like the matrices. (Near by, and in groups of
// many elements, the first will do.)
func (c *cloud) placeFar(group []*element) (*placed, bool) {
	var best *placed
	least := math.Inf(1)
	tried := map[elementKey]bool{}
	order := append([]*element(nil), group...)
	for range max(1, len(group)-1) {
		p, ok := c.place(order)
		if ok {
			k := p.assigned()
			if !tried[k] && p.multiplies() {
				if sum := p.misfit(c); sum < least-1e-9 {
					best, least = p, sum
				}
				if p.deviation < farOff || len(group) > 2*MaxNearFold {
					break
				}
			}
			tried[k] = true
		}
		if len(order) > 2 { // E stays in front
			order = append(append(order[:1:1], order[2:]...), order[1])
		}
	}
	if best == nil {
		best = c.placeByProducts(group)
	}
	return best, best != nil
}

// mostByProducts bounds the order of a group that is placed by its products
// alone.
const mostByProducts = 12

// placeByProducts finds the standard group, and which of its operations each
// element is, from the products of the permutations alone: an element that fits
// equally well about many axes tells nothing by its own matrix. Of all ways, the
// best fit is taken; nil if there is none.
func (c *cloud) placeByProducts(group []*element) *placed {
	n := len(group)
	if n < 3 || n > mostByProducts {
		return nil
	}
	place := map[elementKey]int{}
	for i, e := range group {
		if e.order() == n {
			return nil // a cyclic group has the best matrix of this
		}
		place[e.key()] = i
	}
	table := make([][]int, n)
	for i, e := range group {
		table[i] = make([]int, n)
		for j, f := range group {
			k, ok := place[e.times(f).key()]
			if !ok {
				return nil
			}
			table[i][j] = k
		}
	}
	var best *placed
	least := math.Inf(1)
	for _, k := range kindsOf(n) {
		matrices := k.elements()
		for _, images := range isomorphisms(matrices, group, table) {
			for _, start := range starts() {
				p := &placed{kind: k, matrices: matrices, rotation: start, permutations: make([][]int32, n)}
				for r, i := range images {
					p.permutations[r] = group[i].permutation
				}
				p.settle(c)
				if sum := p.misfit(c); sum < least-1e-9 {
					best, least = p, sum
				}
			}
		}
	}
	return best
}

// kindsOf lists the groups of an order up to mostByProducts.
func kindsOf(order int) []kind {
	var out []kind
	if order == 12 {
		out = append(out, kind{family: tetrahedralProper})
	}
	for _, f := range []family{cyclic, cyclicHorizontal, improperCyclic} {
		for n := 1; n <= order; n++ {
			if k := (kind{f, n}); len(k.elements()) == order {
				out = append(out, k)
			}
		}
	}
	for _, f := range []family{pyramidal, dihedral, prismatic, antiprismatic} {
		for n := 2; n <= order; n++ {
			if k := (kind{f, n}); len(k.elements()) == order {
				out = append(out, k)
			}
		}
	}
	return out
}

// starts are some rotations, spread over all.
func starts() []mgl64.Mat3 {
	var out []mgl64.Mat3
	for i := range 6 {
		out = append(out, mgl64.QuatRotate(0.5+float64(i), spiral(i, 6)).Mat4().Mat3())
	}
	return out
}

// isomorphisms lists the ways in which elements multiply as matrices do: for
// each matrix the element.
func isomorphisms(matrices []mgl64.Mat3, group []*element, table [][]int) [][]int {
	n := len(matrices)
	product := make([][]int, n)
	for a, m := range matrices {
		product[a] = make([]int, n)
		for b, q := range matrices {
			product[a][b] = slices.IndexFunc(matrices, func(x mgl64.Mat3) bool { return equalTo(x, m.Mul3(q), 1e-6) })
		}
	}
	// Generators, each outside the group of those before it.
	var generators []int
	closed := []int{0}
	for a := range matrices {
		if slices.Contains(closed, a) {
			continue
		}
		generators = append(generators, a)
		closed = []int{0}
		for i := 0; i < len(closed); i++ {
			for _, g := range generators {
				if p := product[g][closed[i]]; !slices.Contains(closed, p) {
					closed = append(closed, p)
				}
			}
		}
	}
	var out [][]int
	chosen := make([]int, len(generators))
	var choose func(at int)
	choose = func(at int) {
		if at == len(generators) {
			if images := extend(generators, chosen, product, table); images != nil {
				out = append(out, images)
			}
			return
		}
		for i, e := range group {
			if i > 0 && e.improper == (matrices[generators[at]].Det() < 0) {
				chosen[at] = i
				choose(at + 1)
			}
		}
	}
	choose(0)
	return out
}

// extend carries the images of generators on to all products; nil if these do
// not multiply alike.
func extend(generators, chosen []int, product, table [][]int) []int {
	n := len(product)
	images := make([]int, n)
	for i := range images {
		images[i] = -1
	}
	images[0] = 0
	for list := []int{0}; len(list) > 0; list = list[1:] {
		for k, g := range generators {
			p, q := product[g][list[0]], table[chosen[k]][images[list[0]]]
			switch images[p] {
			case -1:
				images[p] = q
				list = append(list, p)
			case q:
			default:
				return nil
			}
		}
	}
	taken := make([]bool, n)
	for _, i := range images {
		if taken[i] {
			return nil
		}
		taken[i] = true
	}
	return images
}

// assigned is equal for equal assignments of the permutations.
func (p *placed) assigned() elementKey {
	h := uint64(14695981039346656037) // FNV-1a
	for _, list := range p.permutations {
		for _, i := range list {
			h = (h ^ uint64(i)) * 1099511628211
		}
	}
	return elementKey{hash: h}
}

// multiplies tells whether the permutations multiply like the matrices.
func (p *placed) multiplies() bool {
	for a, m := range p.matrices {
		for b, n := range p.matrices {
			c := slices.IndexFunc(p.matrices, func(q mgl64.Mat3) bool { return equalTo(q, m.Mul3(n), 1e-6) })
			for i, j := range p.permutations[b] {
				if p.permutations[a][j] != p.permutations[c][i] {
					return false
				}
			}
		}
	}
	return true
}

// misfit is Σ|Q−P|².
func (p *placed) misfit(c *cloud) (sum float64) {
	for k, q := range c.at {
		d := p.rotation.Mul3x1(q).Sub(p.ideal[k])
		sum += d.Dot(d)
	}
	return sum
}
