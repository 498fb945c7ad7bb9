package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// IDs of what can be picked: atoms from 1, lobes by their atom, elements.
const (
	firstLobe = 1 << 24
	elementID = 1 << 25
)

func lobeID(site int) int { return firstLobe + site }

// A Picked is what lies under a place on the picture.
type Picked struct {
	// Atom is the atom, or the one that carries the lobe; −1 if neither is
	// there.
	Atom int
	// Lobe tells a lobe from an atom, and Direction is where it was met, seen
	// from its atom.
	Lobe      bool
	Direction mgl64.Vec3
	// Element is set on the symmetry element of the operation.
	Element bool
}

// Pick finds what is seen at a pixel, or within a few pixels of it; ok is
// false on empty ground.
func (f *Frame) Pick(r *render.Renderer, x, y int, slack int) (Picked, bool) {
	for ring := 0; ring <= slack; ring += max(1, slack/2) {
		for k := range 8 {
			sin, cos := math.Sincos(float64(k) * math.Pi / 4)
			px, py := x+int(math.Round(float64(ring)*cos)), y+int(math.Round(float64(ring)*sin))
			if hit, ok := r.Pick(&f.Scene, f.Camera, f.Quality, f.Width, f.Height, px, py); ok {
				return pickedOf(hit), true
			}
			if ring == 0 {
				break
			}
		}
	}
	return Picked{Atom: -1}, false
}

func pickedOf(hit render.Hit) Picked {
	switch {
	case hit.ID >= elementID:
		return Picked{Atom: -1, Element: true}
	case hit.ID >= firstLobe:
		return Picked{Atom: hit.ID - firstLobe, Lobe: true, Direction: hit.Point}
	}
	return Picked{Atom: hit.ID - 1}
}
