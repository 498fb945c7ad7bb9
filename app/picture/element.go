package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// Axes and planes stick out beyond everything else.
const (
	overhang    = 1.05
	minOverhang = 0.25 // Å
	rimRoom     = 0.02 // Å, radius of the balls that stand for their ends
)

func (s *stage) elementMaterial(opacity float64) render.Material {
	return render.Material{Color: paint(s.palette.Element), Opacity: opacity, Flat: true, NoOutline: true}
}

func (s *stage) addCentre() {
	const radius = 0.09 // Å
	s.scene.Add(render.Sphere{Radius: radius}, render.Solid(paint(s.palette.Element)))
	s.elements = append(s.elements, ball{radius: radius})
}

// addAxis draws an axis through the origin, as far as reach on both sides of
// its middle.
func (s *stage) addAxis(axis, middle mgl64.Vec3, reach float64) {
	from, to := middle.Sub(axis.Mul(reach)), middle.Add(axis.Mul(reach))
	const width = 0.5 // mm
	s.scene.Add(render.Line{Points: []mgl64.Vec3{from, to}, Width: width * s.emphasis()}, s.elementMaterial(1))
	s.elements = append(s.elements, ball{from, rimRoom}, ball{to, rimRoom})
}

// addPlane draws a plane through the origin as a translucent disc with a full
// edge about its middle.
func (s *stage) addPlane(normal, middle mgl64.Vec3, reach float64) {
	s.scene.Add(render.Disc{Center: middle, Normal: normal, Radius: reach}, s.elementMaterial(s.palette.Plane))
	u, v := across(normal)
	const corners = 96
	rim := make([]mgl64.Vec3, corners)
	for k := range rim {
		sin, cos := math.Sincos(2 * math.Pi * float64(k) / corners)
		rim[k] = middle.Add(u.Mul(reach * cos)).Add(v.Mul(reach * sin))
		s.elements = append(s.elements, ball{rim[k], rimRoom})
	}
	const edge = 0.25 // mm
	s.scene.Add(render.Line{Points: rim, Closed: true, Width: edge * s.emphasis()}, s.elementMaterial(1))
}

// emphasis is how much thicker the elements of the chosen operation are drawn:
// among all symmetry elements they have to stand out.
func (s *stage) emphasis() float64 {
	if s.look.Elements {
		return 2
	}
	return 1
}
