package render

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// Camera looks from Eye to Target. With FovY the picture is in perspective;
// with Height it is orthographic.
type Camera struct {
	Eye, Target, Up Vec3
	// FovY is the angle from the lower to the upper edge of the picture in
	// radians.
	FovY float64
	// Height, when it is not 0, makes the picture orthographic: it is the
	// distance from the lower to the upper edge in units of the scene. FovY
	// is then not read.
	Height float64
	// Near and Far bound what is drawn, as distances along the line of
	// sight. When both are 0 they are chosen wide around the target.
	Near, Far float64
}

// Orbit returns a perspective camera at a distance from target, elev above
// and azim around the y axis, measured from z to x; angles in radians.
func Orbit(target Vec3, dist, elev, azim, fovY float64) Camera {
	back := Vec3{math.Cos(elev) * math.Sin(azim), math.Sin(elev), math.Cos(elev) * math.Cos(azim)}
	return Camera{Eye: target.Add(back.Mul(dist)), Target: target, Up: Vec3{0, 1, 0}, FovY: fovY}
}

// Orthographic returns the camera without perspective that shows the plane
// through Target at the same size.
func (c Camera) Orthographic() Camera {
	if c.Height == 0 {
		c.Height = 2 * c.Eye.Sub(c.Target).Len() * math.Tan(c.FovY/2)
	}
	return c
}

// Rotation returns the rows right, up and back of the camera: it turns
// directions of the scene into directions of the picture (x right, y up, z
// to the viewer). A camera without a direction looks along -z.
func (c Camera) Rotation() mgl64.Mat3 {
	back := unit(c.Eye.Sub(c.Target), Vec3{0, 0, 1})
	right := c.Up.Cross(back)
	if !(right.Len() > 1e-9*c.Up.Len()) || !finite3(right) {
		other := Vec3{0, 1, 0}
		if math.Abs(back[1]) > 0.9 {
			other = Vec3{0, 0, -1}
		}
		right = other.Cross(back)
	}
	right = unit(right, Vec3{1, 0, 0})
	up := back.Cross(right)
	return mgl64.Mat3FromRows(right, up, back)
}

// Project returns the place on a picture of the given size in pixels (x to
// the right, y down) where a point of the scene is seen, and its distance
// along the line of sight. ok is false for a point that is not in front of
// the camera.
func (c Camera) Project(p Vec3, width, height int) (x, y, depth float64, ok bool) {
	q := c.Rotation().Mul3x1(p.Sub(c.Eye))
	w, h := float64(width), float64(height)
	depth = -q[2]
	s := h / c.Height
	if c.Height == 0 {
		if !(depth > 0) {
			return 0, 0, depth, false
		}
		s = h / (2 * math.Tan(c.FovY/2) * depth)
	}
	return w/2 + q[0]*s, h/2 - q[1]*s, depth, true
}

func unit(v, otherwise Vec3) Vec3 {
	l := v.Len()
	if !(l > 0) || math.IsInf(l, 0) {
		return otherwise
	}
	return v.Mul(1 / l)
}

func finite3(v Vec3) bool {
	s := v[0] + v[1] + v[2]
	return !math.IsNaN(s) && !math.IsInf(s, 0)
}
