package study

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// A Camera says from where the picture is seen. The zero Camera leaves the
// choice to the program.
//
// The window holds the view as a Rotation, since angles about fixed axes get
// stuck when one looks along such an axis; people who type a view write two
// angles. The Rotation counts where there is one.
type Camera struct {
	// Azimuth is counted from +x toward +y, Elevation from the xy plane
	// toward +z, both in degrees. They count only if Set.
	Set       bool    `record:"set"`
	Azimuth   float64 `record:"azimuth"`
	Elevation float64 `record:"elevation"`
	// Rotation is the unit quaternion w, x, y, z that turns directions of the
	// working frame into those of the picture: x to the right, y up, z to the
	// eye. Four zeros stand for none.
	Rotation [4]float64 `record:"rotation"`
	// Zoom magnifies the picture; at 1 everything fits. Zero stands for 1.
	Zoom float64 `record:"zoom"`
	// Pan is how far the middle of the scene is moved to the right and up on
	// the picture, in Å.
	Pan [2]float64 `record:"pan"`
	// Orthographic turns the perspective off.
	Orthographic bool `record:"orthographic"`
}

// Limits of the camera: a hundredth of the picture still shows that there is
// something, and a hundred times the size is one atom.
const (
	MinZoom = 0.01
	MaxZoom = 100
	MaxPan  = 1e6 // Å
)

// TheZoom is the magnification in force.
func (c Camera) TheZoom() float64 {
	if c.Zoom == 0 {
		return 1
	}
	return c.Zoom
}

// View is the direction of sight as an orthogonal matrix with the rows right,
// up and back, in the working frame. chosen is false where the program is to
// choose the view.
func (c Camera) View() (rows mgl64.Mat3, chosen bool) {
	if c.Rotation != [4]float64{} {
		r := c.Rotation
		q := mgl64.Quat{W: r[0], V: mgl64.Vec3{r[1], r[2], r[3]}}
		return q.Normalize().Mat4().Mat3(), true
	}
	if !c.Set {
		return mgl64.Ident3(), false
	}
	sinA, cosA := math.Sincos(mgl64.DegToRad(c.Azimuth))
	sinE, cosE := math.Sincos(mgl64.DegToRad(c.Elevation))
	return facing(mgl64.Vec3{cosE * cosA, cosE * sinA, sinE}, mgl64.Vec3{0, 0, 1}), true
}

// WithView chooses a view, given as View gives it.
func (c Camera) WithView(rows mgl64.Mat3) Camera {
	q := mgl64.Mat4ToQuat(rows.Mat4()).Normalize()
	r := [4]float64{q.W, q.V[0], q.V[1], q.V[2]}
	// q and −q are the same rotation: the first number that counts is positive.
	sign := 1.0
	for i := len(r) - 1; i >= 0; i-- {
		if math.Abs(r[i]) > grain {
			sign = math.Copysign(1, r[i])
		}
	}
	for i := range r {
		r[i] = rounded(sign * r[i])
	}
	c.Rotation = r
	c.Set, c.Azimuth, c.Elevation = false, 0, 0
	return c
}

// grain is the fineness of what the hand does: numbers in the file stay short,
// and nobody can see a hundred-millionth of a turn.
const grain = 1e-8

func rounded(x float64) float64 {
	return math.Round(x/grain)/math.Round(1/grain) + 0
}

// Turned turns the scene by an angle (radians) about an axis given in the
// directions of the picture: right, up, toward the eye. from is the view
// before, chosen by the person or the program.
func (c Camera) Turned(from mgl64.Mat3, axis mgl64.Vec3, angle float64) Camera {
	if !(axis.Len() > 0) || angle == 0 {
		return c
	}
	turn := mgl64.HomogRotate3D(angle, axis.Normalize()).Mat3()
	return c.WithView(turn.Mul3(from))
}

// Orbited turns the scene as a hand on its front would: by an angle (radians)
// to the right and one upward. Every step turns about an axis in the plane of
// the picture, so there is no direction in which it gets stuck.
func (c Camera) Orbited(from mgl64.Mat3, right, up float64) Camera {
	return c.Turned(from, mgl64.Vec3{-up, right, 0}, math.Hypot(right, up))
}

// Along looks along an axis of the working frame, which then points to the
// eye. up is vertical in the picture as far as that is possible.
func (c Camera) Along(axis, up mgl64.Vec3) Camera {
	if !(axis.Len() > 0) {
		return c
	}
	return c.WithView(facing(axis.Normalize(), up))
}

// facing is the view with the eye at back, up being vertical as far as
// possible; where the two are parallel, y is, or x.
func facing(back, up mgl64.Vec3) mgl64.Mat3 {
	for _, v := range []mgl64.Vec3{up, {0, 1, 0}, {1, 0, 0}} {
		const nearlyParallel = 0.045 // radians, sin
		across := v.Sub(back.Mul(v.Dot(back)))
		if across.Len() > nearlyParallel*v.Len() {
			vertical := across.Normalize()
			return mgl64.Mat3FromRows(vertical.Cross(back), vertical, back)
		}
	}
	return mgl64.Ident3()
}

// ZoomedAt magnifies by a factor. at is the place of the pointer, counted from
// the middle of the picture to the right and up in Å, as things are measured
// before; what is seen there stays there.
func (c Camera) ZoomedAt(factor float64, at [2]float64) Camera {
	before := c.TheZoom()
	zoom := min(max(before*factor, MinZoom), MaxZoom)
	if !(zoom > 0) {
		return c
	}
	zoom = roundedTo(zoom, 6)
	for i := range c.Pan {
		c.Pan[i] = c.Pan[i] + at[i]*(before/zoom-1)
	}
	c.Zoom = zoom
	return c.Panned(0, 0)
}

// Panned moves the scene on the picture, in Å.
func (c Camera) Panned(right, up float64) Camera {
	for i, by := range [2]float64{right, up} {
		c.Pan[i] = math.Round(min(max(c.Pan[i]+by, -MaxPan), MaxPan)*1e6)/1e6 + 0
	}
	return c
}

// roundedTo keeps a number of significant digits.
func roundedTo(x float64, digits int) float64 {
	scale := math.Pow(10, float64(digits-1)-math.Floor(math.Log10(x)))
	return math.Round(x*scale) / scale
}

// Fitted shows everything; the view stays.
func (c Camera) Fitted() Camera {
	c.Zoom, c.Pan = 0, [2]float64{}
	return c
}
