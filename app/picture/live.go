package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/render"
	"lobewright/symmetry/message"
)

// Shown is what a live picture shows. It is a plain value; what it points to
// is only read.
type Shown struct {
	// Group is the structure in its frame; nil shows nothing.
	Group *work.Group
	// Basis, if not nil, marks the atoms that carry functions and gives the
	// Coefficients their meaning, one a function. Without a coefficient other
	// than 0 no lobes are drawn.
	Basis        *work.Basis
	Coefficients []float64
	// Before, if not nil, are the coefficients of what was shown before, and
	// Fade, from 0 to 1, how far the one has become the other. A lobe whose
	// sign changes fades through grey.
	Before []float64
	Fade   float64
	// Full, if not 0, is the coefficient that gets a lobe of full length, so
	// that pictures of different sums have one scale. Otherwise the largest of
	// each does.
	Full float64
	// Traveller, if not nil, are coefficients of what the Operation carries
	// instead: it is drawn like a ghost, in the size of a function by itself,
	// and the lobes stay where they are.
	Traveller []float64
	// Operation, if not nil, shows its symmetry elements, and Moment, from 0
	// to 1, how far it has carried the lobes; after 0 their start stays as a
	// ghost.
	Operation *work.Operation
	Moment    float64
	// Marked are atoms that are chosen, from 0.
	Marked []int
	// Held, if not nil, shows the axes of a second frame too.
	Held *work.Exchange
	// Notes are lines in the upper left corner.
	Notes []notation.Text
	// Nameless says, below them, for how many symmetry elements there is no room
	// for a name: a form with one %d; empty if that is not said.
	Nameless string
	// Nodes are nodal planes to be drawn.
	Nodes []work.NodalPlane
	Look  study.Look
	// Palette, if not nil, takes the place of the one that Look asks for.
	Palette *assets.Palette
}

// Live makes the scenes of a picture that moves. It keeps the places of labels
// from frame to frame, and serves one goroutine at a time.
type Live struct {
	labels map[int]labelOffset
	// elementNames are where the names of symmetry elements stand; nameless is how
	// many are left out.
	elementNames map[string]nameSpot
	nameless     int

	group  *work.Group
	room   room
	steady bool // labels stay where they stand
	balls  basisBalls
}

// labelOffset is where a label stands beside its atom's disc: a direction and
// how far from the rim.
type labelOffset struct{ angle, ring float64 }

// A Frame is a scene ready to be drawn or picked from.
type Frame struct {
	Scene         render.Scene
	Camera        render.Camera
	Look          render.Look
	Quality       render.Quality
	Width, Height int
}

// ghostOpacity is the opacity of the start while an operation plays.
const ghostOpacity = 0.25

// ghostSize keeps a ghost within the lobe that has come to lie over it: two
// surfaces in one place would be drawn in patches.
const ghostSize = 0.97

// Frame makes the scene of a moment for a picture of a size in pixels with a
// number of pixels an inch. A quick frame has coarser lobes and fewer samples,
// and leaves the labels where they stood.
func (l *Live) Frame(shown Shown, orbit Orbit, width, height int, dpi float64, quick bool) (*Frame, error) {
	fonts, err := fonts()
	if err != nil {
		return nil, message.Errorf("the built-in typefaces cannot be read: %w", err)
	}
	palette := paletteOf(shown.Look)
	if shown.Palette != nil {
		palette = *shown.Palette
	}
	s := &stage{palette: palette, look: shown.Look}
	s.scene.Fonts = fonts
	if shown.Group == nil {
		orbit = NewOrbit(0.4, 0.3)
	}
	f := &Frame{
		Camera: orbit.Camera(width, height), Look: lookOf(shown.Look, palette),
		Quality: render.Quality{Samples: 8, DPI: dpi}, Width: width, Height: height,
	}
	if quick {
		f.Quality.Samples = 2
	}
	if shown.Group != nil {
		if l.group != shown.Group {
			l.group, l.labels, l.elementNames = shown.Group, nil, nil
		}
		l.fill(s, shown, f.Camera.Eye.Sub(f.Camera.Target), quick)
		spaceHatching(s.scene.Shapes, 25.4/dpi/orbit.PerPixel(width, height))
		s.liveTriad(f, shown.Held)
		s.liveNotes(f, shown.Notes)
		if !shown.Look.NoLabels {
			l.addLabels(s, shown, f, quick || l.steady, fonts)
		}
		if shown.Look.Elements {
			l.addElementNames(s, shown.Group, f, fonts, shown.Nameless, len(shown.Notes), quick || l.steady)
		}
	}
	f.Scene = s.scene
	return f, nil
}

// fill adds everything but type; toward points to the viewer.
func (l *Live) fill(s *stage, shown Shown, toward mgl64.Vec3, quick bool) {
	g := shown.Group
	if shown.Basis != nil {
		s.carries = carriers(shown.Basis)
	}
	s.addMolecule(g)
	for _, i := range shown.Marked {
		if i >= 0 && i < len(s.atoms) {
			m := matt(paint(s.palette.Accent))
			m.ID = i + 1
			s.scene.Shapes[i].Material = m
		}
	}
	if shown.Look.Displacements {
		defer func() { s.addDisplacements(g) }() // when the lobes are there
	}
	if shown.Look.Elements {
		l.addElements(s, shown)
	}
	if shown.Operation != nil {
		s.addMotion(*shown.Operation, l.roomOf(s, shown), toward)
	}
	if len(shown.Nodes) > 0 {
		r := l.roomOf(s, shown)
		from := len(s.scene.Shapes)
		s.addNodes(shown.Nodes, r.centre, nodeReach(r.radius))
		if shown.Operation != nil && shown.Moment > 0 && shown.Traveller == nil {
			// They go with the lobes whose nodes they are.
			at := render.Linear(shown.Operation.At(shown.Moment))
			for i := range s.scene.Shapes[from:] {
				s.scene.Shapes[from+i].Transform = &at
			}
		}
	}
	if shown.Basis == nil || len(shown.Coefficients) == 0 {
		return
	}
	detail := fine
	if quick || len(shown.Basis.Functions) > maxFine {
		detail = coarse
	}
	parts := l.parts(s, shown)
	at := mgl64.Ident3()
	if len(shown.Traveller) == len(shown.Coefficients) && shown.Operation != nil {
		l.addParts(s, g, parts, at, 1, detail)
		carried := Shown{Group: g, Basis: shown.Basis, Coefficients: shown.Traveller}
		l.addParts(s, g, l.parts(s, carried), shown.Operation.At(shown.Moment), ghostOpacity, coarse)
		return
	}
	if shown.Operation != nil && shown.Moment > 0 {
		ghosts := parts
		if shown.Moment == 1 {
			ghosts = uncovered(g, parts, shown.Operation.At(1))
		}
		l.addParts(s, g, ghosts, at, ghostOpacity, coarse)
		at = shown.Operation.At(shown.Moment)
	}
	l.addParts(s, g, parts, at, 1, detail)
}

// A room is a ball that holds everything that can be shown of a structure and
// of the lobes of a basis.
type room struct {
	group  *work.Group
	basis  *work.Basis
	centre mgl64.Vec3
	radius float64
}

// roomOf keeps the room of the last structure and basis: finding it takes
// longer than drawing a small scene.
func (l *Live) roomOf(s *stage, shown Shown) room {
	if l.room.group != shown.Group || l.room.basis != shown.Basis {
		balls := s.atoms
		if shown.Basis != nil {
			balls = append(append([]ball(nil), balls...), s.roomOf(shown.Basis)...)
		}
		l.room = room{group: shown.Group, basis: shown.Basis}
		l.room.centre, l.room.radius = enclosing(balls)
	}
	return l.room
}

// liveTriad draws the axes in the lower left corner.
func (s *stage) liveTriad(f *Frame, held *work.Exchange) {
	if s.look.NoAxes {
		return
	}
	const usual, widest = 9.0, 6.0 // mm
	short := float64(min(f.Width, f.Height)) * 25.4 / f.Quality.DPI
	// The triad as a whole, which is twice as wide as an axis is long, takes 12 %
	// of the short side, though no less than can be read where there is room.
	length, inset := math.Max(0.06*short, math.Min(usual, 0.12*short)), math.Min(widest, 0.06*short)
	ink := flat(s.palette.Ink)
	place := render.Place{OffsetX: length + inset, OffsetY: length + inset, Unit: length, Turn: true}
	for _, mark := range triadMarks(held) {
		for _, g := range mark.triadShapes(length, axisWidth, liveLabel) {
			at := place
			s.scene.Shapes = append(s.scene.Shapes, render.Shape{Geometry: mark.besideTip(g, f.Camera, s.scene.Fonts), Material: ink, Place: &at})
		}
	}
	side := 2 * (length*triadLetter + inset) * f.Quality.DPI / 25.4
	s.corner = rectangle{left: 0, right: side, top: float64(f.Height) - side, bottom: float64(f.Height)}
}

// Places of the lines in the upper left corner, mm.
const (
	noteInset = 4.0
	noteLine  = 5.0
)

// NotesBand is the height in pixels that lines in the upper left corner take
// from a picture with a number of pixels an inch.
func NotesBand(lines int, dpi float64) float64 {
	if lines == 0 {
		return 0
	}
	return (noteInset + noteLine*float64(lines)) * dpi / 25.4
}

// liveNotes writes lines into the upper left corner.
func (s *stage) liveNotes(f *Frame, notes []notation.Text) {
	for i, note := range notes {
		s.liveNote(i, note)
	}
}

// liveNote writes one line; lines count from 0.
func (s *stage) liveNote(line int, note notation.Text) {
	s.scene.Shapes = append(s.scene.Shapes, render.Shape{
		Geometry: render.Text{
			Runs: runs(note), Size: liveLabel, AlignX: -1, AlignY: 1, Fixed: true, Through: true,
			Halo: haloWidth, HaloColor: paint(s.palette.Ground),
		},
		Material: flat(s.palette.Quiet),
		Place:    &render.Place{Y: 1, OffsetX: noteInset, OffsetY: -noteInset - noteLine*float64(line), Unit: 1},
	})
}

// Fonts are the built-in typefaces. The error is a fault of the program.
func Fonts() (*render.Fonts, error) { return fonts() }

// Prepare makes what the first picture needs and takes time: typefaces and
// the most common lobes. Without it the first picture makes them.
func Prepare() {
	_, _ = fonts()
	pLobes[formOf(contoured, coarse)]()
	pLobes[formOf(contoured, fine)]()
}
