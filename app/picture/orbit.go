package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/render"
)

// An Orbit is from where a live picture is seen, free of the size of the
// picture. Its orientation is a quaternion, so that no direction is special.
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

// NewOrbit sees the origin from a direction given in radians: azimuth from +x toward +y, elevation from the xy plane toward +z.
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
	tall := float64(height) * o.PerPixel(width, height) // Å
	if o.Parallel {
		c.Height = tall
	} else {
		c.FovY = 2 * math.Atan(tall/(2*o.Distance))
	}
	return c
}

// PerPixel is the length of a pixel at Target, in Å.
func (o Orbit) PerPixel(width, height int) float64 {
	return o.Span / float64(max(1, min(width, height)))
}

// Below is the orbit moved and scaled so that what filled a picture of a size
// fills what is left of it below a band at the top; all in pixels.
func (o Orbit) Below(band float64, width, height int) Orbit {
	side := float64(min(width, height))
	left := math.Min(float64(width), float64(height)-band)
	if band <= 0 || left < side/4 {
		return o
	}
	o.Span *= math.Max(1, side/left)
	o.Target = o.Target.Add(o.Rows().Row(1).Mul(band / 2 * o.PerPixel(width, height)))
	return o
}

// Rows are the directions right, up and back of the picture, as of
// render.Camera.Rotation.
func (o Orbit) Rows() mgl64.Mat3 { return o.Turn.Mat4().Mat3() }

// Seen is the orbit with what a person chose of the camera: the rest stays as
// the program chose it.
func (o Orbit) Seen(c study.Camera) Orbit {
	if rows, chosen := c.View(); chosen {
		o.Turn = mgl64.Mat4ToQuat(rows.Mat4()).Normalize()
	}
	rows := o.Rows()
	o.Target = o.Target.Sub(rows.Row(0).Mul(c.Pan[0])).Sub(rows.Row(1).Mul(c.Pan[1]))
	o.Span /= c.TheZoom()
	o.Parallel = c.Orthographic
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

// Fitted is the orbit moved and scaled so that everything that can be shown
// of a structure, and of the lobes of a basis (which may be nil), fills the
// picture.
func (o Orbit) Fitted(g *work.Group, basis *work.Basis) Orbit {
	s := &stage{palette: assets.Light()}
	if basis != nil {
		s.carries = carriers(basis)
	}
	s.addMolecule(g)
	room := s.atoms
	if basis != nil {
		room = append(room, s.roomOf(basis)...)
	}
	centre, radius := enclosing(room)
	o.Target, o.Span, o.Distance = centre, 2*(overhang*radius+minOverhang)*1.12, distanceInRadii*radius
	return o
}

// BestOrbit sees a structure, and the lobes of a basis (which may be nil),
// from where they cover each other least.
func BestOrbit(g *work.Group, basis *work.Basis) Orbit {
	s := &stage{palette: assets.Light()}
	var room []ball
	if basis != nil {
		s.carries = carriers(basis)
		room = s.roomOf(basis)
	}
	s.addMolecule(g)
	v := bestView(room, s.atoms)
	return NewOrbit(v.azimuth, v.elevation).Fitted(g, basis)
}
