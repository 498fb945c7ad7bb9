package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
	"lobewright/render"
)

// Displacements are drawn from the surface of an atom at its ideal place toward
// where it is in the input.
const (
	leastDisplaced = 5e-4 // Å, of the longest: less is nothing to show
	arrowLength    = 0.7  // Å, of the longest at the least: shorter is not seen
	arrowRadius    = 0.06 // Å, more than of a bond, along which many arrows lie
	arrowHead      = 0.22
	arrowHeadWide  = 0.13
	leastArrow     = 0.06 // Å, of any arrow: the smaller ones are left out
)

// displacementFactors are the factors by which arrows are drawn longer than the
// displacements are: numbers that can be read in a caption.
var displacementFactors = []float64{1, 2, 5, 10, 20, 50, 100, 200, 500, 1000}

// DisplacementScale tells by which factor the arrows of displacements are drawn
// longer than these are, and how long the longest displacement is, in Å. The
// factor is 0 where nothing is displaced.
func DisplacementScale(g *work.Group) (factor, longest float64) {
	for _, d := range g.Displacements() {
		longest = max(longest, d.Len())
	}
	if longest < leastDisplaced {
		return 0, longest
	}
	for _, f := range displacementFactors {
		factor = f
		if f*longest >= arrowLength {
			break
		}
	}
	return factor, longest
}

// rimOf is how far from an atom's centre, in a direction, the atom and the lobes
// on it end.
func (s *stage) rimOf(atom ball, way mgl64.Vec3) float64 {
	rim := atom.radius
	for _, l := range s.lobes {
		to := l.centre.Sub(atom.centre)
		along := to.Dot(way)
		aside := to.Sub(way.Mul(along)).Len()
		// Only lobes that reach the atom are on it.
		if to.Len() <= 1.5*l.radius+atom.radius && aside < l.radius {
			rim = max(rim, along+math.Sqrt(l.radius*l.radius-aside*aside))
		}
	}
	return rim
}

// addDisplacements draws the way of each core atom from its ideal place to that
// of the input, longer by the factor of DisplacementScale, outside of the atom
// and of the lobes on it. It needs the balls of both.
func (s *stage) addDisplacements(g *work.Group) {
	factor, _ := DisplacementScale(g)
	if factor == 0 {
		return
	}
	m := matt(paint(s.palette.Accent))
	for k, d := range g.Displacements() {
		length := factor * d.Len()
		if length < leastArrow {
			continue
		}
		way := d.Normalize()
		atom := s.atoms[g.Core[k]]
		rim := s.rimOf(atom, way)
		from := atom.centre.Add(way.Mul(0.9 * rim))
		to := atom.centre.Add(way.Mul(rim + length))
		head := math.Min(arrowHead, 0.6*length)
		s.scene.Add(render.Arrow{From: from, To: to, Radius: arrowRadius, HeadLength: head, HeadRadius: arrowHeadWide * head / arrowHead}, m)
		s.elements = append(s.elements, ball{to, rimRoom})
	}
}
