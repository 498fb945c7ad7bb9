package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// An angular function is the part of an orbital that depends on the direction
// (a unit vector) alone.
type angular func(mgl64.Vec3) float64

// A contour is the surface on which r^power · e^(−r) · |Y| has the value
// level; both factors are scaled to a maximum of 1. It is empty where |Y| is
// below level, has two sheets elsewhere, an inner one at the nucleus and an
// outer one, and these meet in a rim.
type contour struct {
	power, level float64
}

// contourOf is the contour that is drawn for a shell l: own choice. With the
// power n−1 of a Slater function a lobe is wider than long and neighbours
// merge. With a small power it tapers to the nucleus, as chemists draw it. The
// level of p is high, for slender lobes. Those of d and f are lower, since
// their smaller lobes (the ring of dz2 with 0.50 of the largest value, those
// of fz3 with 0.45) have to rise above it.
func contourOf(shell int) contour {
	switch shell {
	case 1:
		return contour{power: 0.16, level: 0.75}
	case 2:
		return contour{power: 0.16, level: 0.35}
	}
	return contour{power: 0.16, level: 0.30}
}

// radial is r^power · e^(−r), scaled to a maximum of 1 (at r = power).
func (c contour) radial(r float64) float64 {
	if r <= 0 {
		return 0
	}
	return math.Exp(c.power*math.Log(r/c.power) - r + c.power)
}

// reach is the distance of the farthest point of the contour from the
// nucleus: the outer solution of radial(r) = level.
func (c contour) reach() float64 {
	low, high := c.power, c.power+1
	for c.radial(high) > c.level {
		high *= 2
	}
	return root(low, high, func(r float64) float64 { return c.radial(r) - c.level })
}

// root finds a zero of f between a and b, where f has different signs, by
// regula falsi in the Illinois variant (M. Dowell, P. Jarratt, BIT 11, 168
// (1971); from memory): secants, with the weight of an end halved that stays.
func root(a, b float64, f func(float64) float64) float64 {
	const enough = 1e-12 // of a field whose maximum is about 1
	fa, fb := f(a), f(b)
	for range 60 {
		if fa == fb {
			break
		}
		c := (a*fb - b*fa) / (fb - fa)
		fc := f(c)
		if math.Abs(fc) < enough {
			return c
		}
		if (fc > 0) == (fb > 0) {
			b, fb = c, fc
			fa /= 2
		} else {
			// The new point is always b, the older one a.
			a, fa = b, fb
			b, fb = c, fc
		}
	}
	return (a + b) / 2
}

// field is positive within the lobes of one sign, negative outside, and zero
// on the contour. Its lengths are shares of the contour's reach.
type field struct {
	contour
	y    angular // scaled to a largest |Y| of 1
	sign float64
	unit float64 // the reach, in lengths of contour.radial
}

func newField(c contour, y angular, sign float64) field { return field{c, y, sign, c.reach()} }

func (f field) at(p mgl64.Vec3) float64 {
	r := p.Len()
	if r == 0 {
		return -f.level
	}
	return f.radial(r*f.unit)*f.sign*f.y(p.Mul(1/r)) - f.level
}

// outward is the unit normal of the contour at p, which points to smaller
// values of the field, by central differences.
func (f field) outward(p mgl64.Vec3) mgl64.Vec3 {
	// The step is a small part of the distance to the nucleus, so that both
	// ends lie in the lobe's own neighbourhood even at its tip.
	step := 1e-4 * p.Len()
	var gradient mgl64.Vec3
	for i := range gradient {
		var h mgl64.Vec3
		h[i] = step
		gradient[i] = f.at(p.Sub(h)) - f.at(p.Add(h))
	}
	if gradient.Len() == 0 {
		return p.Normalize()
	}
	return gradient.Normalize()
}
