package symmetry

import (
	"math"
	"sort"

	"github.com/go-gl/mathgl/mgl64"
)

// A cloud is a set of points about their centroid, prepared for asking which
// of them lies near a place.
type cloud struct {
	at     []mgl64.Vec3 // centred, Å, in the input's axes
	kind   []int
	radius []float64
	centre mgl64.Vec3
	cell   float64
	// The points lie in cells of a grid, in rows along z: those of cell
	// (x, y, z) are member[first[n]:first[n+1]] with n counted from low.
	low, size [3]int
	first     []int32
	member    []int32
}

// cellSize (Å) is a little more than a bond, so that a cell holds a few atoms
// and a search within tenths of an ångström seldom needs a second one.
const cellSize = 1.6

// mostCells bounds the memory of the grid of a set that is spread out: its
// cells are made larger.
const mostCells = 1 << 20

func newCloud(points []Point) *cloud {
	c := &cloud{cell: cellSize}
	for _, p := range points {
		c.centre = c.centre.Add(p.Position)
	}
	c.centre = c.centre.Mul(1 / float64(len(points)))
	for _, p := range points {
		v := p.Position.Sub(c.centre)
		c.at = append(c.at, v)
		c.kind = append(c.kind, p.Kind)
		c.radius = append(c.radius, v.Len())
	}
	for !c.measure() {
		c.cell *= 2
	}
	c.fill()
	return c
}

// measure lays the grid; false if it would have too many cells.
func (c *cloud) measure() bool {
	cells := 1
	for k := range 3 {
		low, high := c.index(c.at[0][k]), c.index(c.at[0][k])
		for _, v := range c.at {
			low, high = min(low, c.index(v[k])), max(high, c.index(v[k]))
		}
		c.low[k], c.size[k] = low, high-low+1
		if cells *= c.size[k]; cells > mostCells {
			return false
		}
	}
	c.first = make([]int32, cells+1)
	return true
}

// fill sorts the points into their cells, in their own order.
func (c *cloud) fill() {
	place := make([]int, len(c.at))
	for i, v := range c.at {
		n := 0
		for k := range 3 {
			n = n*c.size[k] + c.index(v[k]) - c.low[k]
		}
		place[i] = n
		c.first[n+1]++
	}
	for n := 1; n < len(c.first); n++ {
		c.first[n] += c.first[n-1]
	}
	c.member = make([]int32, len(c.at))
	next := append([]int32(nil), c.first...)
	for i, n := range place {
		c.member[next[n]] = int32(i)
		next[n]++
	}
}

func (c *cloud) index(x float64) int { return int(math.Floor(x / c.cell)) }

// cellsAround are the cells that a ball meets, from the first to the last in each
// direction.
func (c *cloud) cellsAround(v mgl64.Vec3, reach float64) (low, high [3]int) {
	for k := range low {
		low[k] = max(c.index(v[k]-reach)-c.low[k], 0)
		high[k] = min(c.index(v[k]+reach)-c.low[k], c.size[k]-1)
	}
	return low, high
}

// visit calls f for every point in the cells that a ball meets.
func (c *cloud) visit(v mgl64.Vec3, reach float64, f func(i int)) {
	low, high := c.cellsAround(v, reach)
	if low[2] > high[2] {
		return
	}
	for x := low[0]; x <= high[0]; x++ {
		for y := low[1]; y <= high[1]; y++ {
			row := (x*c.size[1] + y) * c.size[2]
			for _, i := range c.member[c.first[row+low[2]]:c.first[row+high[2]+1]] {
				f(int(i))
			}
		}
	}
}

// nearest returns the point of a kind that lies nearest to v, within reach; −1
// if there is none.
func (c *cloud) nearest(v mgl64.Vec3, kind int, reach float64) int {
	best, limit := int32(-1), reach*reach
	low, high := c.cellsAround(v, reach)
	if low[2] > high[2] {
		return -1
	}
	for x := low[0]; x <= high[0]; x++ {
		for y := low[1]; y <= high[1]; y++ {
			row := (x*c.size[1] + y) * c.size[2]
			for _, i := range c.member[c.first[row+low[2]]:c.first[row+high[2]+1]] {
				at := &c.at[i]
				a, b, d := at[0]-v[0], at[1]-v[1], at[2]-v[2]
				if sq := a*a + b*b + d*d; sq <= limit && c.kind[i] == kind {
					best, limit = i, sq
				}
			}
		}
	}
	return int(best)
}

// closestLike returns the shortest distance between two points of one kind,
// and which they are; at most limit, with −1 for the points.
func (c *cloud) closestLike(limit float64) (d float64, a, b int) {
	d, a, b = limit, -1, -1
	for i := range c.at {
		c.visit(c.at[i], d, func(j int) {
			if j > i && c.kind[j] == c.kind[i] {
				if sep := c.at[i].Sub(c.at[j]).Len(); sep < d {
					d, a, b = sep, i, j
				}
			}
		})
	}
	return d, a, b
}

// farthest is the largest distance of a point from the centre.
func (c *cloud) farthest() float64 {
	far := 0.0
	for _, r := range c.radius {
		far = math.Max(far, r)
	}
	return far
}

// alike counts, for every point, the points of its kind at its distance from
// the centre, give or take width; like lists them for one.
func (c *cloud) alike(width float64) (count []int, like func(i int) []int) {
	order := make([]int, len(c.at))
	for i := range order {
		order[i] = i
	}
	sort.Slice(order, func(a, b int) bool {
		i, j := order[a], order[b]
		if c.kind[i] != c.kind[j] {
			return c.kind[i] < c.kind[j]
		}
		if c.radius[i] != c.radius[j] {
			return c.radius[i] < c.radius[j]
		}
		return i < j
	})
	low, high := make([]int, len(order)), make([]int, len(order))
	count = make([]int, len(order))
	l, h := 0, 0
	for at, i := range order {
		for c.kind[order[l]] != c.kind[i] || c.radius[order[l]] < c.radius[i]-width {
			l++
		}
		h = max(h, at)
		for h+1 < len(order) && c.kind[order[h+1]] == c.kind[i] && c.radius[order[h+1]] <= c.radius[i]+width {
			h++
		}
		low[i], high[i] = l, h
		count[i] = h - l + 1
	}
	return count, func(i int) []int { return order[low[i] : high[i]+1] }
}

// line returns the direction through the centre along which the points lie, if
// all of them are within tolerance of it.
func (c *cloud) line(tolerance float64) (mgl64.Vec3, bool) {
	far := 0
	for i, r := range c.radius {
		if r > c.radius[far] {
			far = i
		}
	}
	if c.radius[far] == 0 {
		return mgl64.Vec3{0, 0, 1}, true
	}
	axis := c.at[far].Normalize()
	// Least squares: the direction of the largest spread, by power iteration
	// from a direction that is already near to it.
	for range 50 {
		var next mgl64.Vec3
		for _, v := range c.at {
			next = next.Add(v.Mul(v.Dot(axis)))
		}
		axis = next.Normalize()
	}
	for _, v := range c.at {
		if v.Sub(axis.Mul(v.Dot(axis))).Len() > tolerance {
			return axis, false
		}
	}
	return axis, true
}
