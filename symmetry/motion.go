package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// A motion is an orthogonal matrix of a finite order, about the centre of a
// cloud, with which the ways are sought in which it can carry the points.
type motion struct {
	order    int
	improper bool
	powers   []mgl64.Mat3 // M⁰ … of the order
	inverse  []mgl64.Mat3 // of these
	sites    []site       // those of general points first
}

// A site is a set of places that some power of a motion leaves: all of space,
// its axis, its plane, its centre. A point there takes length steps to come
// back.
type site struct {
	length  int
	project mgl64.Mat3 // onto the site
}

// A motionType is a turn of 2π/fold, with a reflection where it is improper.
type motionType struct {
	fold     int
	improper bool
}

// motionTypes are the turns whose orders are powers of primes, up to fold
// MaxNearFold of the axis: with their powers and products they generate every
// point group. S2 is the inversion and S1 a plane.
var motionTypes = []motionType{
	{2, false}, {3, false}, {4, false}, {5, false}, {7, false}, {8, false}, {9, false}, {11, false},
	{1, true}, {2, true}, {4, true}, {8, true}, {16, true},
}

// at is the motion of a type about an axis.
func (t motionType) at(axis mgl64.Vec3) *motion {
	m := mgl64.QuatRotate(2*math.Pi/float64(t.fold), axis).Mat4().Mat3()
	order := t.fold
	if t.improper {
		m = reflectionIn(axis).Mul3(m)
		order = max(2, t.fold)
	}
	out := &motion{order: order, improper: t.improper}
	power := mgl64.Ident3()
	for range order {
		out.powers = append(out.powers, power)
		out.inverse = append(out.inverse, power.Transpose())
		power = m.Mul3(power)
	}
	rank := map[int]int{}
	for length := 1; length <= order; length++ {
		if order%length != 0 {
			continue
		}
		s := out.fixed(length)
		rank[length] = int(math.Round(s.project.Trace()))
		occurs := true
		for l, r := range rank {
			// The same places would come back sooner.
			occurs = occurs && (l == length || length%l != 0 || r < rank[length])
		}
		if occurs {
			out.sites = append([]site{s}, out.sites...)
		}
	}
	return out
}

// fixed is the set that the power length of a motion leaves: the projection
// onto it is the mean of the powers of that power.
func (m *motion) fixed(length int) site {
	s := site{length: length}
	n := 0
	for k := 0; k < m.order; k += length {
		s.project = s.project.Add(m.powers[k])
		n++
	}
	s.project = s.project.Mul(1 / float64(n))
	return s
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
