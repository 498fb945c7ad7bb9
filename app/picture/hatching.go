package picture

import (
	"math"

	"lobewright/render"
)

// Hatching of negative lobes: lines around the lobe at even distances from its
// atom.
const (
	hatchSpace    = 0.75 // mm, on paper
	hatchLine     = 0.16 // mm
	fewestHatches = 4    // lines on the longest way along a lobe
)

// spaceHatching sets the distances of the lines that hatched lobes have, for a
// scale in millimetres an ångström.
func spaceHatching(shapes []render.Shape, scale float64) {
	for i := range shapes {
		s := &shapes[i]
		if s.Material.Hatch.Width == 0 || !(scale > 0) {
			continue
		}
		size := 1.0 // Å, of one unit of the surface coordinate
		if s.Transform != nil {
			size = math.Cbrt(math.Abs(s.Transform.Linear.Det()))
		}
		length := 1.0
		if ball, ok := s.Geometry.(render.Sphere); ok {
			// The coordinate is an angle, from pole to pole.
			size, length = size*ball.Radius, math.Pi
		}
		if size > 0 {
			s.Material.Hatch.Period = min(hatchSpace/(scale*size), length/fewestHatches)
		}
	}
}
