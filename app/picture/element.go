package picture

import (
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/render"
	"lobewright/symmetry"
)

// addElement draws the symmetry element of an operation: an axis for a
// rotation, a plane for a reflection, both for an improper rotation, the
// centre for the inversion. An empty name draws nothing.
func (s *stage) addElement(g *work.Group, name string) error {
	if name == "" {
		return nil
	}
	op, err := operationNamed(g.Fit.Setting, name)
	if err != nil {
		return err
	}
	// Axes and planes stick out beyond everything by a quarter.
	_, reach := enclosing(append([]ball{{}}, append(s.atoms, s.lobes...)...))
	reach *= 1.1
	turns := op.Turn.Num != 0
	inverts := turns && op.Turn.Improper && 2*op.Turn.Num == op.Turn.Den
	switch {
	case inverts:
		s.addCentre()
	case op.Axis.Len() == 0: // E has no element
	default:
		if turns {
			s.addAxis(op.Axis, reach)
		}
		if op.Turn.Improper {
			s.addPlane(op, reach)
		}
	}
	return nil
}

func (s *stage) elementMaterial(opacity float64) render.Material {
	return render.Material{Color: paint(s.palette.Element), Opacity: opacity, Flat: true, NoOutline: true}
}

func (s *stage) addCentre() {
	const radius = 0.09 // Å
	s.scene.Add(render.Sphere{Radius: radius}, render.Solid(paint(s.palette.Element)))
	s.elements = append(s.elements, ball{radius: radius})
}

func (s *stage) addAxis(axis mgl64.Vec3, reach float64) {
	const radius = 0.02 // Å
	tip := axis.Mul(reach)
	s.scene.Add(render.Cylinder{A: tip.Mul(-1), B: tip, Radius: radius}, s.elementMaterial(1))
	s.elements = append(s.elements, ball{tip, radius}, ball{tip.Mul(-1), radius})
}

// addPlane is a translucent disc with a full edge.
func (s *stage) addPlane(op symmetry.Operation, reach float64) {
	s.scene.Add(render.Disc{Normal: op.Axis, Radius: reach}, s.elementMaterial(assets.PlaneOpacity))
	u, v := across(op.Axis)
	const corners = 96
	rim := make([]mgl64.Vec3, corners)
	for k := range rim {
		cos, sin := cosSin(k, corners)
		rim[k] = u.Mul(reach * cos).Add(v.Mul(reach * sin))
		s.elements = append(s.elements, ball{rim[k], 0.01})
	}
	const edge = 0.25 // mm
	s.scene.Add(render.Line{Points: rim, Closed: true, Width: edge}, s.elementMaterial(1))
}
