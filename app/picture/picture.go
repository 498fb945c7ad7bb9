// Package picture makes scenes of results: the molecule with its axes, group
// orbitals, symmetry elements, and the caption below them.
//
// Bodies are quiet and lobes are the subject. The scene is in the working
// frame, in ångström; what stands on the paper (caption, triad of axes) is in
// millimetres.
package picture

import (
	"context"
	"errors"
	"fmt"
	"image"
	"math"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/render"
	"lobewright/symmetry"
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

// Molecule shows the structure in its frame, with the symmetry element of an
// operation if the study chooses one.
func Molecule(g *work.Group, s study.Study) (*Picture, error) {
	st := newStage(s)
	st.addMolecule(g)
	lines := moleculeCaption(g, s)
	return st.finish(g, s, st.atoms, lines)
}

// Orbital shows one group orbital on the structure.
func Orbital(o *work.Orbitals, orbital *orbitals.GroupOrbital, s study.Study) (*Picture, error) {
	st := newStage(s)
	st.carries = carriers(o.Basis)
	st.addMolecule(o.Group)
	st.addCombination(o.Group, mixtures(o.Basis, orbital.Coefficients))
	return st.finish(o.Group, s, st.roomOf(o.Basis), orbitalCaption(o, orbital, s))
}

func newStage(s study.Study) *stage {
	return &stage{palette: paletteOf(s.Look), look: s.Look, narrow: isNarrow(s)}
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
func (s *stage) roomOf(b *work.Basis) []ball {
	unit := lobeUnit(b.Group, s.carries)
	var room []ball
	for _, f := range b.Functions {
		at := b.Group.Sites.Positions[f.Site]
		if f.Shell == 0 {
			room = append(room, ball{at, unit / 2})
			continue
		}
		for _, l := range lobeBalls(f.Value, f.Shell) {
			room = append(room, ball{at.Add(l.centre.Mul(unit)), l.radius * unit})
		}
	}
	return room
}

// Margins of the picture in millimetres: room for the labels at the rim.
const (
	sideMargin = 4.5
	topMargin  = 4.0
)

// finish chooses view and scale and sets everything that stands on the paper.
// room are the balls that the view has to show besides the atoms.
func (s *stage) finish(g *work.Group, st study.Study, room []ball, caption caption) (*Picture, error) {
	fonts, err := fonts()
	if err != nil {
		return nil, fmt.Errorf("the built-in typefaces cannot be read: %w", err)
	}
	s.scene.Fonts = fonts
	if err := s.addElement(g, st.Operation); err != nil {
		return nil, err
	}
	if st.Figure.NoCaption {
		caption = nil
	}
	width := st.Figure.TheWidth()
	set := caption.set(width-2*captionMargin, fonts)
	v := viewOf(st.Camera, room, s.atoms)
	balls := append(append(append([]ball(nil), s.atoms...), room...), s.elements...)
	height := st.Figure.Height
	if height == 0 {
		height = suitingHeight(v, balls, width, st.Camera.Orthographic) + set.height
	}
	switch {
	case height >= set.height+minBody:
	case st.Figure.Height == 0:
		return nil, fmt.Errorf("a width of %.4g mm is too narrow for a picture; give at least %.0f mm", width, math.Ceil(minBody/leastHeight))
	default:
		return nil, fmt.Errorf("a height of %.4g mm leaves no room for the picture above its caption; give at least %.0f mm, or leave the caption out",
			height, math.Ceil(set.height+minBody))
	}
	scr, err := newScreen(width, height, set.height, st.Figure.TheResolution())
	if err != nil {
		return nil, err
	}
	camera := cameraFor(v, balls, scr, st.Camera.Orthographic)
	if !st.Look.NoAxes {
		camera = s.addTriad(v, balls, scr, camera, st.Camera.Orthographic, fonts)
	}
	if !st.Look.NoLabels {
		s.addLabels(g, camera, scr, fonts)
	}
	s.addCaption(set)
	return &Picture{
		Scene: s.scene, Camera: camera, Look: lookOf(st.Look, s.palette),
		Width: scr.width, Height: scr.height, Resolution: st.Figure.TheResolution(),
	}, nil
}

// minBody is the least height in millimetres that the bodies need.
const minBody = 12

// leastHeight is the least height of the bodies' part of a picture, in widths.
const leastHeight = 0.45

// newScreen is the picture in pixels, less the caption at the bottom.
func newScreen(width, height, captionHeight, dpi float64) (screen, error) {
	perMM := dpi / 25.4
	s := screen{width: int(math.Round(width * perMM)), height: int(math.Round(height * perMM)), pixelsPerMM: perMM}
	if s.width > render.MaxSide || s.height > render.MaxSide {
		return s, fmt.Errorf("%g mm × %.4g mm at %g dots per inch are %d × %d pixels; each side may have %d",
			width, height, dpi, s.width, s.height, render.MaxSide)
	}
	// Small pictures cannot spare whole margins.
	side := min(sideMargin, width/10) * perMM
	s.left, s.right = side, float64(s.width)-side
	s.top = min(topMargin, (height-captionHeight)/10) * perMM
	s.bottom = float64(s.height) - max(captionHeight, topMargin)*perMM
	if captionHeight > 0 {
		s.bottom -= 2 * perMM
	}
	if s.right-s.left < 1 || s.bottom-s.top < 1 {
		return s, errors.New("the picture is too small to draw")
	}
	return s, nil
}

// suitingHeight is the height of the bodies' part that leaves the least empty
// ground, within limits that look well.
func suitingHeight(v view, balls []ball, width float64, orthographic bool) float64 {
	high := screen{width: int(100 * width), height: int(200 * width), pixelsPerMM: 100}
	high.left, high.right = 100*sideMargin, 100*(width-sideMargin)
	high.bottom = float64(high.height)
	b := newSight(cameraFor(v, balls, high, orthographic), high).bounds(balls)
	body := (b.bottom-b.top)/high.pixelsPerMM + 2*topMargin
	return min(max(body, leastHeight*width), 1.05*width)
}

// operationNamed finds an operation by its name.
func operationNamed(s *symmetry.Setting, name string) (symmetry.Operation, error) {
	for _, op := range s.Operations {
		if op.Name == name || notation.Operation(op.Name).String() == name {
			return op, nil
		}
	}
	return symmetry.Operation{}, fmt.Errorf("%s has no operation %q; the command group lists them", s.Symbol, name)
}
