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
// nucleus: the outer solution of radial(r) = level, by bisection.
func (c contour) reach() float64 {
	low, high := c.power, c.power+1
	for c.radial(high) > c.level {
		high *= 2
	}
	return bisect(low, high, func(r float64) float64 { return c.radial(r) - c.level })
}

// bisect finds a zero of f between a and b, where f has different signs.
func bisect(a, b float64, f func(float64) float64) float64 {
	rising := f(b) > f(a)
	// 50 halvings reach the spacing of float64 for intervals of order 1.
	for range 50 {
		middle := (a + b) / 2
		if (f(middle) > 0) == rising {
			b = middle
		} else {
			a = middle
		}
	}
	return (a + b) / 2
}

// field is positive within the lobes of one sign, negative outside, and zero
// on the contour. Its lengths are those of contour.radial.
type field struct {
	contour
	y    angular // scaled to a largest |Y| of 1
	sign float64
}

func (f field) at(p mgl64.Vec3) float64 {
	r := p.Len()
	if r == 0 {
		return -f.level
	}
	return f.radial(r)*f.sign*f.y(p.Mul(1/r)) - f.level
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
