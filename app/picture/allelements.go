package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/render"
)

// All symmetry elements at once: thin lines and bare rims, so that lobes are
// seen through them.
const (
	thinAxis    = 0.3 // mm
	principal   = 0.6 // mm, of axes of order 3 and more
	thinRim     = 0.2 // mm
	fewPlanes   = 3   // more planes than this have no face, only their rims
	facePart    = 0.5 // of the opacity of a single plane
	namesBeyond = 1.06
)

// A namedElement is where the name of a symmetry element can stand: at one of
// several points, the first one best.
type namedElement struct {
	work.Element
	name   notation.Text
	points []mgl64.Vec3
}

// addElements draws all symmetry elements of the group, as far as everything
// that can be shown reaches.
func (l *Live) addElements(s *stage, shown Shown) {
	room := l.roomOf(s, shown)
	s.allElements(shown.Group, room.centre, overhang*room.radius+minOverhang)
}

// allElements draws the symmetry elements of a group about a middle, and notes
// where their names can stand.
func (s *stage) allElements(g *work.Group, centre mgl64.Vec3, reach float64) {
	elements := g.Elements()
	planes := 0
	for _, e := range elements {
		if e.Kind == work.ElementPlane {
			planes++
		}
	}
	line := s.elementMaterial(1)
	for _, e := range elements {
		along := e.Direction.Mul(e.Direction.Dot(centre))
		switch e.Kind {
		case work.ElementCentre:
			s.addCentre()
			s.name(e, mgl64.Vec3{0.18, 0.18, -0.18}, mgl64.Vec3{-0.18, -0.18, -0.18})
		case work.ElementAxis:
			width := thinAxis
			if e.Order == 0 || e.Order > 2 {
				width = principal
			}
			from, to := along.Sub(e.Direction.Mul(reach)), along.Add(e.Direction.Mul(reach))
			s.scene.Add(render.Line{Points: []mgl64.Vec3{from, to}, Width: width}, line)
			s.elements = append(s.elements, ball{from, rimRoom}, ball{to, rimRoom})
			s.name(e, along.Add(e.Direction.Mul(namesBeyond*reach)), along.Sub(e.Direction.Mul(namesBeyond*reach)))
		case work.ElementPlane:
			middle := centre.Sub(along)
			if planes <= fewPlanes {
				s.scene.Add(render.Disc{Center: middle, Normal: e.Direction, Radius: reach}, s.elementMaterial(facePart*s.palette.Plane))
			}
			u, v := across(e.Direction)
			const corners = 72
			rim := make([]mgl64.Vec3, corners)
			for k := range rim {
				sin, cos := math.Sincos(2 * math.Pi * float64(k) / corners)
				rim[k] = middle.Add(u.Mul(reach * cos)).Add(v.Mul(reach * sin))
				if k%4 == 0 {
					s.elements = append(s.elements, ball{rim[k], rimRoom})
				}
			}
			s.scene.Add(render.Line{Points: rim, Closed: true, Width: thinRim}, line)
			var places []mgl64.Vec3
			for k := 4; k < corners; k += 9 {
				places = append(places, middle.Add(rim[k].Sub(middle).Mul(1.02)))
			}
			s.name(e, places...)
		}
	}
}

func (s *stage) name(e work.Element, points ...mgl64.Vec3) {
	s.named = append(s.named, namedElement{e, notation.Operation(e.Name), points})
}

// belongs tells whether an element is one of some operations.
func (n namedElement) belongs(operations []work.Operation) bool {
	for _, o := range operations {
		along := math.Abs(o.Axis.Dot(n.Direction)) > 1-1e-6
		if n.Kind == work.ElementCentre && o.HasCentre() ||
			n.Kind == work.ElementAxis && o.HasAxis() && along ||
			n.Kind == work.ElementPlane && o.HasPlane() && along {
			return true
		}
	}
	return false
}

// elementSize is the size of the names of elements, in points.
const elementSize = 8.5
