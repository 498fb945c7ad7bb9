package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// covers finds the ways in which motions can carry the points of a cloud: every
// point has a place in an orbit of ideal places, none farther from it than is
// allowed and no two places much nearer than their points. A point that lies
// half-way between two images has both; so nothing depends on which is nearer.
type covers struct {
	cloud *cloud
	// allowed (Å, one a point) is how far it may lie from its ideal place,
	// share what remains at least of a distance. Both are wider than the limits
	// of the ladder, since a start is not yet the best motion.
	allowed []float64
	share   float64
	order   []int       // of the points: each the nearest to those before it
	apart   [][]float64 // distances between points
	around  [][]int32   // of each point, those whose places could come too near to its own
	most    int         // steps for one motion
	// margin (Å) is how much farther than the nearest point an image may lie.
	margin float64
	// beside has, for each point, those of its first shell, whose images must
	// be beside its own; empty where that is not asked.
	beside [][]int
	// choices, where there are any, are the images among which alone is chosen.
	choices [][]int32

	motion *motion
	image  []int32 // −1 for a point not yet in an orbit
	ideal  []mgl64.Vec3
	placed []int // the points in orbits, in the order in which they came
	steps  int
	found  func(m *motion, image []int32)
}

func newCovers(c *cloud, allowed []float64, share float64) *covers {
	n := len(c.at)
	s := &covers{cloud: c, allowed: allowed, share: share, margin: math.Inf(1), image: make([]int32, n), ideal: make([]mgl64.Vec3, n), most: 200 * n}
	s.apart = make([][]float64, n)
	for i := range s.apart {
		s.apart[i] = make([]float64, n)
		for j := range s.apart[i] {
			s.apart[i][j] = c.at[i].Sub(c.at[j]).Len()
		}
	}
	s.order = s.contiguous()
	s.around = make([][]int32, n)
	for i, row := range s.apart {
		for j, d := range row {
			// Places are no farther apart than d less what both may be off.
			if j != i && d-allowed[i]-allowed[j] < share*d {
				s.around[i] = append(s.around[i], int32(j))
			}
		}
	}
	return s
}

// another is one that tries on its own, beside s.
func (s *covers) another() *covers {
	o := *s
	o.image, o.ideal, o.placed = make([]int32, len(s.image)), make([]mgl64.Vec3, len(s.ideal)), nil
	return &o
}

// contiguous orders the points so that each is the nearest to those before it,
// from one of which few are alike: then a wrong image shows soon.
func (s *covers) contiguous() []int {
	c := s.cloud
	kinds := map[int]int{}
	for _, k := range c.kind {
		kinds[k]++
	}
	first := 0
	for i, k := range c.kind {
		if a, b := kinds[k], kinds[c.kind[first]]; a < b || a == b && c.radius[i] > c.radius[first] {
			first = i
		}
	}
	n := len(c.at)
	away := make([]float64, n)
	for i := range away {
		away[i] = math.Inf(1)
	}
	order := make([]int, 0, n)
	for next := first; next >= 0; {
		order = append(order, next)
		away[next] = -1
		last := next
		next = -1
		for i := range away {
			if away[i] < 0 {
				continue
			}
			away[i] = math.Min(away[i], s.apart[last][i])
			if next < 0 || away[i] < away[next] {
				next = i
			}
		}
	}
	return order
}

// try hands every way in which a motion can carry the points to found.
func (s *covers) try(m *motion, found func(m *motion, image []int32)) (complete bool) {
	s.motion, s.found, s.steps = m, found, 0
	s.placed = s.placed[:0]
	for i := range s.image {
		s.image[i] = -1
	}
	if !s.possible() {
		return true
	}
	s.next(0)
	return s.steps <= s.most
}

// possible tells whether every point has some image, and the points that are
// too many for general orbits can lie on special ones.
func (s *covers) possible() bool {
	c, m := s.cloud, s.motion
	count, special := map[int]int{}, map[int]int{}
	for _, i := range s.order {
		w := m.powers[1].Mul3x1(c.at[i])
		if c.nearest(w, c.kind[i], 2*s.allowed[i]) < 0 {
			return false
		}
		count[c.kind[i]]++
		if len(m.sites) > 1 && m.sites[1].project.Mul3x1(c.at[i]).Sub(c.at[i]).Len() <= s.allowed[i] {
			special[c.kind[i]]++
		}
	}
	for k, n := range count {
		if n%m.order > special[k] {
			return false
		}
	}
	return true
}

// next puts the first point that has no orbit yet into one, in every way.
func (s *covers) next(at int) {
	for at < len(s.order) && s.image[s.order[at]] >= 0 {
		at++
	}
	if at == len(s.order) {
		s.found(s.motion, s.image)
		return
	}
	i := s.order[at]
	for k := range s.motion.sites {
		o := orbit{site: &s.motion.sites[k], points: make([]int, 1, s.motion.sites[k].length), back: make([]mgl64.Vec3, 1, s.motion.sites[k].length)}
		o.points[0], o.back[0], o.sum = i, s.cloud.at[i], s.cloud.at[i]
		s.grow(&o, at)
	}
}

// An orbit is being grown, point by point.
type orbit struct {
	site   *site
	points []int
	back   []mgl64.Vec3 // each point carried back to the first
	sum    mgl64.Vec3   // of these
}

func (s *covers) grow(o *orbit, at int) {
	if s.steps++; s.steps > s.most {
		return
	}
	k := len(o.points)
	if k == o.site.length {
		s.close(o, at)
		return
	}
	c, m := s.cloud, s.motion
	mean := o.sum.Mul(1 / float64(k))
	s.images(o.points[k-1], m.powers[k].Mul3x1(mean), func(j int) {
		if s.image[j] >= 0 || !s.staysBeside(o.points[k-1], j) {
			return
		}
		back := m.inverse[k].Mul3x1(c.at[j])
		for l, b := range o.back {
			if o.points[l] == j || back.Sub(b).Len() > s.allowed[j]+s.allowed[o.points[l]] {
				return
			}
		}
		longer := *o
		longer.points = append(o.points, j)
		longer.back = append(o.back, back)
		longer.sum = o.sum.Add(back)
		s.grow(&longer, at)
	})
}

// reach (Å) is how far from a place an image of a point may lie.
func (s *covers) reach(place mgl64.Vec3, i int) float64 {
	most := 2 * s.allowed[i]
	if s.margin >= most {
		return most
	}
	c := s.cloud
	for _, near := range []float64{c.cell / 2, most} {
		if j := c.nearest(place, c.kind[i], near); j >= 0 {
			return min(most, c.at[j].Sub(place).Len()+s.margin)
		}
	}
	return 0
}

// images calls f for the points that can be the image of one which is carried
// to a place.
func (s *covers) images(i int, place mgl64.Vec3, f func(j int)) {
	if s.choices != nil {
		for n, list := range s.choices {
			if j := list[i]; n == 0 || j != s.choices[0][i] {
				f(int(j))
			}
		}
		return
	}
	c := s.cloud
	reach := s.reach(place, i)
	c.visit(place, reach, func(j int) {
		if c.kind[j] == c.kind[i] {
			if d := c.at[j].Sub(place); d.Dot(d) <= reach*reach {
				f(j)
			}
		}
	})
}

// A point is beside another, in its first shell, if it lies no more than
// shellWidth times as far as the nearest; its image may lie nearer to that of
// the other, or farther from it, by the factor shellStretch.
const (
	shellWidth   = 1.3
	shellStretch = 1.4
)

// shells asks that every point keep its first shell.
func (s *covers) shells() {
	s.beside = make([][]int, len(s.apart))
	for i, row := range s.apart {
		nearest := math.Inf(1)
		for j, d := range row {
			if j != i {
				nearest = math.Min(nearest, d)
			}
		}
		for j, d := range row {
			if j != i && d <= shellWidth*nearest {
				s.beside[i] = append(s.beside[i], j)
			}
		}
	}
}

// staysBeside tells whether the image j of a point lies beside those of its
// first shell, as far as these have some.
func (s *covers) staysBeside(i, j int) bool {
	if s.beside == nil {
		return true
	}
	for _, l := range s.beside[i] {
		if k := s.image[l]; k >= 0 {
			if before, after := s.apart[i][l], s.apart[j][k]; after > shellStretch*before || before > shellStretch*after {
				return false
			}
		}
	}
	return true
}

// close takes a full orbit, if its ideal places are near enough and far enough
// from each other and from those of the others, and goes on.
func (s *covers) close(o *orbit, at int) {
	c, m := s.cloud, s.motion
	ideal := o.site.project.Mul3x1(o.sum.Mul(1 / float64(len(o.points))))
	if o.site.length < m.order {
		last, back := o.points[len(o.points)-1], false
		s.images(last, m.powers[1].Mul3x1(c.at[last]), func(j int) { back = back || j == o.points[0] })
		if !back {
			return
		}
	}
	before := len(s.placed)
	ok := true
	for k, j := range o.points {
		place := m.powers[k].Mul3x1(ideal)
		if place.Sub(c.at[j]).Len() > s.allowed[j] || !s.keepsFrom(j, place) {
			ok = false
			break
		}
		s.image[j] = int32(o.points[(k+1)%len(o.points)])
		s.ideal[j] = place
		s.placed = append(s.placed, j)
	}
	for _, j := range s.placed[before:] {
		ok = ok && s.staysBeside(j, int(s.image[j]))
	}
	if ok {
		s.next(at + 1)
	}
	for _, j := range s.placed[before:] {
		s.image[j] = -1
	}
	s.placed = s.placed[:before]
}

// keepsFrom tells whether a place for a point is not too near to those taken.
func (s *covers) keepsFrom(j int, place mgl64.Vec3) bool {
	row := s.apart[j]
	for _, i := range s.around[j] {
		if s.image[i] < 0 {
			continue
		}
		d := place.Sub(s.ideal[i])
		if least := s.share * row[i]; d.Dot(d) < least*least {
			return false
		}
	}
	return true
}
