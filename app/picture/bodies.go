package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

// Sizes of bodies. They belong to the look of the program, see the palette.
const (
	atomShare     = 0.32 // radius of an atom, of its covalent radius
	carrierShare  = 0.16 // the same for atoms with lobes, whose tips it would hide
	bondThickness = 0.09 // Å
	lobeShare     = 0.45 // length of the longest lobe, of the nearest distance between carriers
	mostShare     = 0.9  // the same at the most, of the distance to the next atom of any kind
)

// A ball is a round part of the scene: an atom, or about as much room as a
// lobe takes. Views and labels are chosen by balls.
type ball struct {
	centre mgl64.Vec3
	radius float64 // Å
}

// A stage is a scene while it is built.
type stage struct {
	scene   render.Scene
	palette assets.Palette
	look    study.Look
	// atoms are the balls of all atoms; lobes those of what is drawn on them.
	// elements those at the rim of symmetry elements.
	atoms, lobes, elements []ball
	// arrow are balls along the arrow that shows the sense of a turn.
	arrow []ball
	// corner is where the triad stands on the picture, in pixels.
	corner rectangle
	// carries marks the atoms with functions; nil without a basis.
	carries []bool
	// named are the symmetry elements whose names are written.
	named []namedElement
	// written are where the names of atoms stand on a live picture, in pixels.
	written []rectangle
}

// addMolecule draws the atoms and bonds of a structure.
func (s *stage) addMolecule(g *work.Group) {
	core := make([]bool, len(g.Molecule.Atoms))
	for _, i := range g.Core {
		core[i] = true
	}
	// The core stands out from the ground more than the spectators do; both
	// are quiet.
	coreTone, otherTone := 0.45, 0.75
	if s.look.Ground == "dark" {
		coreTone, otherTone = 0.15, 0.6
	}
	tone := func(i int) float64 {
		if core[i] {
			return coreTone
		}
		return otherTone
	}
	for i, p := range g.Sites.Positions {
		share := atomShare
		if s.carries != nil && s.carries[i] {
			share = carrierShare
		}
		radius := share * g.Molecule.Atoms[i].Element.Radius()
		s.atoms = append(s.atoms, ball{p, radius})
		m := matt(mixed(s.palette.Quiet, s.palette.Ground, tone(i)))
		if s.look.Coloured {
			m = matt(s.atomColour(g.Molecule.Atoms[i].Element, core[i]))
		}
		m.ID = i + 1
		s.scene.Add(render.Sphere{Center: p, Radius: radius}, m)
	}
	for _, b := range g.Bonds {
		m := matt(mixed(s.palette.Quiet, s.palette.Ground, max(tone(b[0]), tone(b[1]))+0.1))
		s.scene.Add(render.Cylinder{A: g.Sites.Positions[b[0]], B: g.Sites.Positions[b[1]], Radius: bondThickness / 2}, m)
	}
}

// atomColour is the colour of an element; spectators are paler.
func (s *stage) atomColour(e structure.Element, core bool) render.Color {
	share := 0.0
	if !core {
		share = 0.55
	}
	return mixed(s.palette.Atom(e.Place()), s.palette.Ground, share)
}

// lobeUnit is the length of the longest lobe: a share of the nearest distance
// between two atoms that carry functions, so that lobes side by side do not run
// into each other, but not more than reaches the next atom of any kind. With a
// single carrier the next atom takes the place of the next carrier, and without
// another atom the atom's own size.
func lobeUnit(g *work.Group, carries []bool) float64 {
	nearest, next := math.Inf(1), math.Inf(1)
	for i, p := range g.Sites.Positions {
		if !carries[i] {
			continue
		}
		for j, q := range g.Sites.Positions {
			if i == j {
				continue
			}
			d := p.Sub(q).Len()
			next = min(next, d)
			if carries[j] {
				nearest = min(nearest, d)
			}
		}
	}
	switch {
	case !math.IsInf(nearest, 1):
		return min(lobeShare*nearest, mostShare*next)
	case !math.IsInf(next, 1):
		return lobeShare * next
	}
	return lobeShare * 2 * largestRadius(g.Molecule)
}

func largestRadius(m *structure.Molecule) float64 {
	largest := 0.0
	for _, a := range m.Atoms {
		largest = max(largest, a.Element.Radius())
	}
	return largest
}
