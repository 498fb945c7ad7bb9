package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry/message"
)

// MostShapePoints is the number of points up to which ShapeMeasure tries every
// assignment; larger sets are assigned from many starts.
const MostShapePoints = 8

// ShapeMeasure is the continuous shape measure of points against a reference
// of as many points of the same kinds, of any size, place and orientation, the
// mirror image included: S = 100·(1 − (Σσ)²/(ΣQ²·ΣP²)), σ the singular values
// of PᵀQ, least over all assignments of like points; 0 is the shape itself and
// 100 the largest possible (H. Zabrodsky, S. Peleg, D. Avnir, J. Am. Chem. Soc.
// 114, 7843 (1992), the scale to 100 from memory). Up to MostShapePoints the
// least is certain. It returns an error if the kinds differ or a set has no
// extent.
func ShapeMeasure(points, reference []Point) (float64, error) {
	if len(points) == 0 || len(points) != len(reference) {
		return 0, message.Errorf("%d points against a shape of %d", len(points), len(reference))
	}
	q, p := newCloud(points), newCloud(reference)
	spread := func(c *cloud) (sum float64) {
		for _, v := range c.at {
			sum += v.Dot(v)
		}
		return sum
	}
	qq, pp := spread(q), spread(p)
	if qq == 0 || pp == 0 {
		return 0, message.Errorf("a set of points in one place has no shape")
	}
	count := map[int]int{}
	for i := range points {
		count[points[i].Kind]++
		count[reference[i].Kind]--
	}
	for kind, n := range count {
		if n != 0 {
			return 0, message.Errorf("the shape has another number of points of kind %d", kind)
		}
	}
	s := shapeSearch{q: q, p: p, image: make([]int32, len(points)), taken: make([]bool, len(points))}
	if len(points) <= MostShapePoints {
		s.try(0)
	} else {
		s.improve()
	}
	return 100 * math.Max(0, 1-s.best*s.best/(qq*pp)), nil
}

// A shapeSearch looks for the assignment with the largest Σσ.
type shapeSearch struct {
	q, p  *cloud
	image []int32 // of the points of q among those of p
	taken []bool
	best  float64
}

// try assigns point i and those behind it in every way.
func (s *shapeSearch) try(i int) {
	if i == len(s.image) {
		if sum, _ := s.overlap(); sum > s.best {
			s.best = sum
		}
		return
	}
	for j := range s.taken {
		if !s.taken[j] && s.p.kind[j] == s.q.kind[i] {
			s.taken[j], s.image[i] = true, int32(j)
			s.try(i + 1)
			s.taken[j] = false
		}
	}
}

// overlap is Σσ for the present assignment, and the orthogonal matrix that
// turns q onto p.
func (s *shapeSearch) overlap() (float64, mgl64.Mat3) {
	m := mat.NewDense(3, 3, nil)
	for i, j := range s.image {
		for r := range 3 {
			for c := range 3 {
				m.Set(r, c, m.At(r, c)+s.p.at[j][r]*s.q.at[i][c])
			}
		}
	}
	var svd mat.SVD
	if !svd.Factorize(m, mat.SVDFull) {
		return 0, mgl64.Ident3()
	}
	var u, v, turn mat.Dense
	svd.UTo(&u)
	svd.VTo(&v)
	turn.Mul(&u, v.T())
	sum := 0.0
	for _, x := range svd.Values(nil) {
		sum += x
	}
	var out mgl64.Mat3
	for r := range 3 {
		for c := range 3 {
			out.Set(r, c, turn.At(r, c))
		}
	}
	return sum, out
}

// axesTried spreads over half of the sphere, some 8° apart.
const axesTried = 320

// improve assigns by the least sum of squares in many orientations, each
// improved until the assignment stays.
func (s *shapeSearch) improve() {
	scale := s.p.farthest() / s.q.farthest()
	for i := range axesTried {
		axis := spiral(i, axesTried)
		for n := range 12 {
			m := mgl64.QuatRotate(2*math.Pi*float64(n)/12, axis).Mat4().Mat3()
			if n%2 == 1 {
				m = m.Mul(-1)
			}
			last := -1.0
			for range 20 {
				s.assign(m.Mul(scale))
				sum, turn := s.overlap()
				if sum <= last+1e-12 {
					break
				}
				last, m = sum, turn
			}
			s.best = math.Max(s.best, last)
		}
	}
}

// assign gives every point of q the image of the least sum of squares.
func (s *shapeSearch) assign(m mgl64.Mat3) {
	n := len(s.image)
	cost := make([]float64, n*n)
	for i, v := range s.q.at {
		w := m.Mul3x1(v)
		for j, u := range s.p.at {
			cost[i*n+j] = neverAssigned
			if s.p.kind[j] == s.q.kind[i] {
				d := w.Sub(u)
				cost[i*n+j] = d.Dot(d)
			}
		}
	}
	leastCost(cost, s.image)
}
