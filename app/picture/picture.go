// Package picture makes scenes of results: the molecule with its axes, group
// orbitals, symmetry elements; and from where they are seen.
//
// Bodies are quiet and lobes are the subject. The scene is in the working
// frame, in ångström; what stands on the paper is in millimetres. A Maker makes
// the Bodies of figures, a Live the pictures that move.
package picture

import (
	"context"
	"fmt"
	"image"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/render"
)

// A Picture is a scene with all that drawing it needs.
type Picture struct {
	Scene  render.Scene
	Camera render.Camera
	Look   render.Look
	// Width and Height are in pixels, Resolution in pixels per inch.
	Width, Height int
	Resolution    float64
}

// samples a pixel: enough that the edges of figures look even in print.
const samples = 8

// Draw draws p. The same picture gives the same pixels on any number of
// processors.
func (p *Picture) Draw(ctx context.Context) (*image.RGBA, error) {
	img := image.NewRGBA(image.Rect(0, 0, p.Width, p.Height))
	quality := render.Quality{Samples: samples, DPI: p.Resolution}
	return img, render.Draw(ctx, img, &p.Scene, p.Camera, p.Look, quality, render.Band{})
}

func newStage(s study.Study) *stage {
	return &stage{palette: paletteOf(s.Look), look: s.Look}
}

// carriers marks the atoms that carry functions of a basis.
func carriers(b *work.Basis) []bool {
	out := make([]bool, len(b.Group.Sites.Positions))
	for _, f := range b.Functions {
		out[f.Site] = true
	}
	return out
}

// roomOf is the room that lobes of any group orbital of a basis can take. The
// view and the scale follow from it, so that all of them, partners above all,
// are seen from one place and at one size.
func (s *stage) roomOf(b *work.Basis) []ball { return s.roomFor(b, 1) }

// reachOf is roomOf with balls that hold the tips of the lobes.
func (s *stage) reachOf(b *work.Basis) []ball {
	beyond := 1.25 // a lobe reaches to 1, its ball to 0.93
	if s.look.Shape == square {
		beyond = 1.45
	}
	return s.roomFor(b, beyond)
}

func (s *stage) roomFor(b *work.Basis, beyond float64) []ball {
	unit := lobeUnit(b.Group, s.carries)
	var room []ball
	found := map[string][]ball{} // searching takes time, and atoms have like functions
	for _, f := range b.Functions {
		at := b.Group.Sites.Positions[f.Site]
		if f.Shell == 0 {
			room = append(room, ball{at, unit / 2})
			continue
		}
		key := fmt.Sprint(f.Shell, f.Vector)
		balls, ok := found[key]
		if !ok {
			balls = lobeBalls(f.Value, f.Shell, s.look.Shape)
			found[key] = balls
		}
		for _, l := range balls {
			room = append(room, ball{at.Add(l.centre.Mul(unit)), beyond * l.radius * unit})
		}
	}
	return room
}
