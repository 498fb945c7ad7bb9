package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// An Orbit is a camera that is moved by hand around a scene. Its orientation
// is a quaternion, so that it turns freely in every direction. Places on the
// picture are in pixels, x to the right and y down.
type Orbit struct {
	// Turn takes directions of the scene to those of the picture: x right, y
	// up, z to the viewer.
	Turn mgl64.Quat
	// Target (Å) is seen in the middle of the picture.
	Target mgl64.Vec3
	// Span (Å) is the length that fills the picture's short side at Target.
	Span float64
	// Distance (Å) from Target to the eye.
	Distance float64
	// Parallel turns the perspective off.
	Parallel bool
}

// NewOrbit sees the balls that a Live picture holds from a direction given in
// radians: azimuth from +x toward +y, elevation from the xy plane toward +z.
func NewOrbit(azimuth, elevation float64) Orbit {
	v := view{azimuth, elevation}
	back, up := v.back(), v.up()
	m := mgl64.Mat3FromRows(up.Cross(back), up, back)
	return Orbit{Turn: mgl64.Mat4ToQuat(m.Mat4()).Normalize(), Span: 6, Distance: 20}
}

// Camera is the camera for a picture of a size in pixels.
func (o Orbit) Camera(width, height int) render.Camera {
	m := o.Turn.Mat4().Mat3()
	up, back := m.Row(1), m.Row(2)
	c := render.Camera{Eye: o.Target.Add(back.Mul(o.Distance)), Target: o.Target, Up: up}
	tall := float64(height) * o.perPixel(width, height) // Å
	if o.Parallel {
		c.Height = tall
	} else {
		c.FovY = 2 * math.Atan(tall/(2*o.Distance))
	}
	return c
}

// perPixel is the length of a pixel at Target, in Å.
func (o Orbit) perPixel(width, height int) float64 {
	return o.Span / float64(max(1, min(width, height)))
}

// Turned is the orbit after a drag of the pointer: the scene follows it like a
// ball under the hand (a trackball as in K. Shoemake, ARCBALL, Graphics
// Interface 1992, 151, but without its limits: a drag along a straight line
// turns on about one axis of the picture). A drag over the short side is half
// a turn.
func (o Orbit) Turned(dx, dy float64, width, height int) Orbit {
	way := math.Hypot(dx, dy)
	if way == 0 {
		return o
	}
	axis := mgl64.Vec3{dy / way, dx / way, 0}
	return o.TurnedBy(way/float64(max(1, min(width, height)))*math.Pi, axis)
}

// TurnedBy is the orbit after a turn of the scene by an angle in radians about
// an axis of the picture.
func (o Orbit) TurnedBy(angle float64, axis mgl64.Vec3) Orbit {
	o.Turn = mgl64.QuatRotate(angle, axis.Normalize()).Mul(o.Turn).Normalize()
	return o
}

// Moved is the orbit after the scene was moved along the picture.
func (o Orbit) Moved(dx, dy float64, width, height int) Orbit {
	m := o.Turn.Mat4().Mat3()
	by := m.Row(0).Mul(-dx).Add(m.Row(1).Mul(dy))
	o.Target = o.Target.Add(by.Mul(o.perPixel(width, height)))
	return o
}

// Limits of zooming: in lengths of the scene's own span.
const (
	nearestSpan  = 0.2 // Å
	farthestSpan = 500
)

// Zoomed is the orbit with everything factor times as large; what lies under
// the place (x, y), at the depth of Target, stays there.
func (o Orbit) Zoomed(factor, x, y float64, width, height int) Orbit {
	if !(factor > 0) || math.IsInf(factor, 0) {
		return o
	}
	span := min(max(o.Span/factor, nearestSpan), farthestSpan)
	factor = o.Span / span
	dx, dy := x-float64(width)/2, y-float64(height)/2
	o = o.Moved(-dx*(1-1/factor), -dy*(1-1/factor), width, height)
	o.Span = span
	return o
}

// Along is the orbit that looks along an axis toward the origin's side, from
// its positive end; up is vertical as far as possible.
func (o Orbit) Along(axis, up mgl64.Vec3) Orbit {
	back := axis.Normalize()
	right := up.Cross(back)
	if right.Len() < 1e-6 {
		right, _ = across(back)
	}
	right = right.Normalize()
	m := mgl64.Mat3FromRows(right, back.Cross(right), back)
	o.Turn = mgl64.Mat4ToQuat(m.Mat4()).Normalize()
	return o
}

// Between is the orbit on the way from o to another, along the shortest turn.
func (o Orbit) Between(to Orbit, share float64) Orbit {
	from := o.Turn
	if from.Dot(to.Turn) < 0 {
		from = from.Scale(-1)
	}
	to.Turn = mgl64.QuatSlerp(from, to.Turn, share).Normalize()
	to.Target = o.Target.Mul(1 - share).Add(to.Target.Mul(share))
	to.Span = o.Span * math.Pow(to.Span/o.Span, share)
	to.Distance = o.Distance * math.Pow(to.Distance/o.Distance, share)
	return to
}

// Angles are azimuth and elevation of the direction of sight in radians, as
// NewOrbit takes them.
func (o Orbit) Angles() (azimuth, elevation float64) {
	back := o.Turn.Mat4().Mat3().Row(2)
	return math.Atan2(back[1], back[0]), math.Asin(min(max(back[2], -1), 1))
}
