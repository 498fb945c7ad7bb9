package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
	"lobewright/render"
)

// addMotion draws the symmetry elements of an operation, and the sense of its
// turn.
func (s *stage) addMotion(op work.Operation, room room, toward mgl64.Vec3) {
	first := len(s.scene.Shapes)
	centre, reach := room.centre, overhang*room.radius+minOverhang
	along := op.Axis.Mul(op.Axis.Dot(centre))
	if op.HasCentre() {
		s.addCentre()
	}
	if op.HasAxis() {
		s.addAxis(op.Axis, along, reach)
		s.addSense(op, along, reach, toward)
	}
	if op.HasPlane() {
		s.addPlane(op.Axis, centre.Sub(along), reach)
	}
	for i := first; i < len(s.scene.Shapes); i++ {
		if _, plane := s.scene.Shapes[i].Geometry.(render.Disc); !plane {
			// One sees and picks through a plane.
			s.scene.Shapes[i].Material.ID = elementID
		}
	}
}

// addSense draws an arrow around the positive end of an axis, as far as the
// turn goes, with its tip where it ends. Its middle is on the viewer's side.
func (s *stage) addSense(op work.Operation, along mgl64.Vec3, reach float64, toward mgl64.Vec3) {
	// Shares of reach: the radius of the arc, the length and the radius of the tip.
	const share, tipLength, tipRadius = 0.2, 0.07, 0.025
	u, v := senseAxes(op.Axis, toward)
	radius := share * reach
	middle := along.Add(op.Axis.Mul(0.9 * reach))
	angle := math.Copysign(min(math.Abs(op.Angle), 1.9*math.Pi), op.Angle)
	at := func(a float64) mgl64.Vec3 {
		sin, cos := math.Sincos(a - angle/2)
		return middle.Add(u.Mul(radius * cos)).Add(v.Mul(radius * sin))
	}
	bow := angle - math.Copysign(min(tipLength/share, 0.4*math.Abs(angle)), angle)
	points := make([]mgl64.Vec3, 33)
	for k := range points {
		points[k] = at(bow * float64(k) / float64(len(points)-1))
	}
	s.scene.Add(render.Line{Points: points, Width: 0.5}, s.elementMaterial(1))
	for k := 0; k <= 4; k++ {
		s.arrow = append(s.arrow, ball{at(angle * float64(k) / 4), tipRadius * reach})
	}
	s.scene.Add(render.Cone{Base: at(bow), Apex: at(angle), Radius: tipRadius * reach}, s.elementMaterial(1))
}

// senseAxes are two directions across an axis, turned about it in the positive
// sense from the first to the second. The first points to the viewer as far as
// it can; seen along the axis every one is as good.
func senseAxes(axis, toward mgl64.Vec3) (u, v mgl64.Vec3) {
	const alongAxis = 1e-3
	across1, across2 := across(axis)
	if l := toward.Len(); l > 0 {
		if side := toward.Sub(axis.Mul(axis.Dot(toward))); side.Len() > alongAxis*l {
			u = side.Normalize()
			return u, axis.Cross(u)
		}
	}
	return across1, across2
}
