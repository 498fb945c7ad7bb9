package picture

import (
	"fmt"
	"math"
	"strings"
	"time"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals"
	"lobewright/render"
	"lobewright/symmetry/message"
)

// A Movie is an operation that is played on a function or a group orbital, as a
// row of pictures. It serves one goroutine at a time.
type Movie struct {
	// Width and Height are in pixels, Resolution in pixels per inch.
	Width, Height int
	Resolution    float64
	// Stills are the pictures in their order.
	Stills []Still
	// Once says that the movie ends where others begin again.
	Once bool
	// Title says in plain characters what is played.
	Title string

	play    *work.Play
	shown   Shown
	orbit   Orbit
	caption []render.Run
	live    Live
}

// A Still is one picture of a movie: how far the operation has come, from 0 to
// 1, and how long this is shown.
type Still struct{ Moment, Seconds float64 }

// The defaults of a movie: a size that slides take and messages too, and a rate
// at which movements look even.
const (
	DefaultMovieWidth  = 800 // pixels
	DefaultMovieHeight = 600
	DefaultMovieRate   = 25 // pictures a second
)

// Rests before and after the movement, in seconds: one sees what goes on the
// way, and what it has become. They also keep a movie that begins again from
// flickering.
const (
	restBefore = 0.5
	restAfter  = 1.0
)

// movieOutline is the width of outlines in the ink look on the screen, in
// millimetres: 1.4 pixels at 96 an inch.
const movieOutline = 0.37

// NewMovie sets a movie of what was played. The error tells of a size that
// leaves no room.
func NewMovie(p *work.Play, s study.Study) (*Movie, error) {
	m := &Movie{Width: s.Animation.Width, Height: s.Animation.Height, Once: s.Animation.Once, play: p}
	switch {
	case m.Width == 0 && m.Height == 0:
		m.Width, m.Height = DefaultMovieWidth, DefaultMovieHeight
	case m.Width == 0:
		m.Width = m.Height * DefaultMovieWidth / DefaultMovieHeight
	case m.Height == 0:
		m.Height = m.Width * DefaultMovieHeight / DefaultMovieWidth
	}
	short := min(m.Width, m.Height)
	if short < leastMovie {
		return nil, message.Errorf("%d × %d pixels leave no room for a picture; each side must have %d", m.Width, m.Height, leastMovie)
	}
	// Type and lines grow with the picture; in small ones they stay legible.
	m.Resolution = max(72, 96*float64(short)/DefaultMovieHeight)
	m.Stills = stills(p.Operation, s.Animation)
	m.shown = Shown{Group: p.Group, Basis: p.Basis, Coefficients: p.Start, Operation: &p.Operation, Look: s.Look}
	m.orbit = BestOrbit(p.Group, p.Basis).Seen(s.Camera)
	m.Title = p.Group.Molecule.Title + ", " + notation.Operation(p.Operation.Name).String()
	if !s.Figure.NoCaption {
		if err := m.addCaption(assets.TextsIn(assets.Language(s.Figure.Language))); err != nil {
			return nil, err
		}
	}
	if c := s.Camera; c.TheZoom() == 1 && c.Pan == [2]float64{} {
		m.fit()
	}
	// Labels find their places at the start, and then stay.
	_, err := m.live.Frame(m.shown, m.orbit, m.Width, m.Height, m.Resolution, false)
	m.live.steady = true
	return m, err
}

// leastMovie is the least length of a side, in pixels.
const leastMovie = 64

// stills times the pictures: as many a second as are asked for, evenly over the
// movement. Pictures in which nothing moves are one that stays longer.
func stills(op work.Operation, a study.Animation) []Still {
	usual := Duration(op).Seconds()
	seconds, rate := a.Seconds, a.Rate
	if seconds == 0 {
		seconds = usual
	}
	if rate == 0 {
		rate = DefaultMovieRate
	}
	n := max(1, int(math.Round(seconds*rate)))
	out := []Still{{0, restBefore}}
	for k := 1; k <= n; k++ {
		moment := Moment(op, Duration(op)*time.Duration(k)/time.Duration(n))
		if op.Steps() == 0 {
			moment = 0
		}
		if last := &out[len(out)-1]; math.Abs(last.Moment-moment) < 1e-9 {
			last.Seconds += 1 / rate
			continue
		}
		out = append(out, Still{moment, 1 / rate})
	}
	out[len(out)-1].Seconds += restAfter
	return out
}

// addCaption sets what the operation does, and makes room for it below.
func (m *Movie) addCaption(texts assets.Texts) error {
	fonts, err := fonts()
	if err != nil {
		return message.Errorf("the built-in typefaces cannot be read: %w", err)
	}
	room := float64(m.Width)*25.4/m.Resolution - 2*movieMargin
	for _, t := range captionsOf(m.play, texts) {
		set := runs(t)
		if w, _, _ := fonts.Measure(set, movieCaption); w <= room {
			m.caption = set
			break
		}
	}
	return nil
}

// Sizes of a movie's caption and margins: type in points, lengths in
// millimetres.
const (
	movieCaption = 12.0
	captionBase  = 5.0
	captionBand  = 11.0
	movieMargin  = 6.0
)

// fit moves and scales the view so that everything that is shown at any moment
// fills the picture beside caption and triad.
func (m *Movie) fit() {
	s := &stage{palette: paletteOf(m.shown.Look), look: m.shown.Look}
	s.carries = carriers(m.shown.Basis)
	s.addMolecule(m.shown.Group)
	room := m.live.roomOf(s, m.shown)
	s.addMotion(m.play.Operation, room, mgl64.Vec3{})
	balls := append(append(s.roomOf(m.shown.Basis), s.atoms...), s.elements...)
	perMM := m.Resolution / 25.4
	scr := screen{width: m.Width, height: m.Height, pixelsPerMM: perMM}
	scr.left, scr.top = movieMargin*perMM, movieMargin*perMM
	scr.right, scr.bottom = float64(m.Width)-scr.left, float64(m.Height)-scr.top
	if m.caption != nil {
		scr.bottom = float64(m.Height) - captionBand*perMM
	}
	whole := m.fitted(balls, scr)
	m.orbit = whole
	if m.shown.Look.NoAxes {
		return
	}
	side := triadSide * perMM
	seen := newSight(whole.Camera(m.Width, m.Height), scr)
	corner := rectangle{0, side, float64(m.Height) - side, float64(m.Height)}
	for _, b := range balls {
		if d := seen.disc(b); corner.distance(d.x, d.y) < d.radius {
			beside, above := scr, scr
			beside.left, above.bottom = max(scr.left, side), min(scr.bottom, float64(m.Height)-side)
			m.orbit = m.fitted(balls, beside)
			if higher := m.fitted(balls, above); higher.Span < m.orbit.Span {
				m.orbit = higher
			}
			return
		}
	}
}

// triadSide is the room that the axes take in their corner, in millimetres.
const triadSide = 28

// fitted is the view in which balls fill the rectangle of a screen.
func (m *Movie) fitted(balls []ball, scr screen) Orbit {
	o := m.orbit
	o.Span = 2 * enclosingRadius(balls)
	up, right := o.Rows().Row(1), o.Rows().Row(0)
	for range 6 {
		b := newSight(o.Camera(m.Width, m.Height), scr).bounds(balls)
		o.Span *= max((b.right-b.left)/(scr.right-scr.left), (b.bottom-b.top)/(scr.bottom-scr.top))
		o.Span = max(o.Span, float64(min(m.Width, m.Height))/(largestMovieScale*scr.pixelsPerMM))
		b = newSight(o.Camera(m.Width, m.Height), scr).bounds(balls)
		per := o.PerPixel(m.Width, m.Height)
		o.Target = o.Target.Add(right.Mul(per * (b.left + b.right - scr.left - scr.right) / 2))
		o.Target = o.Target.Sub(up.Mul(per * (b.top + b.bottom - scr.top - scr.bottom) / 2))
	}
	return o
}

// largestMovieScale is how many millimetres an ångström may take.
const largestMovieScale = 32

func enclosingRadius(balls []ball) float64 {
	_, radius := enclosing(balls)
	return radius
}

// captionsOf are texts for what an operation does, from the longest to the
// shortest: "C₄(z):  φ₁ (σ on Cl2) → φ₂ (σ on Cl3)", "C₄(z)".
func captionsOf(p *work.Play, texts assets.Texts) []notation.Text {
	name := notation.Operation(p.Operation.Name)
	if p.Operation.Family {
		degrees := notation.Short(mgl64.RadToDeg(p.Operation.Angle), 1)
		if p.Operation.Angle != 0 {
			name = name.Then(notation.Words(", "), notation.Text{{Text: "φ", Italic: true}}, notation.Words(" = "+degrees+"°"))
		}
	}
	var out []notation.Text
	colon := notation.Words(":  ")
	switch {
	case p.Orbital != nil:
		out = append(out, name.Then(colon, orbitalBecomes(p)))
	case p.Function >= 0:
		start := []orbitals.Term{{Function: p.Function, Coefficient: 1}}
		out = append(out,
			name.Then(colon, functionsText(p, start, texts), arrow, functionsText(p, p.Terms, texts)),
			name.Then(colon, functionsText(p, start, nil), arrow, functionsText(p, p.Terms, nil)))
	}
	return append(out, name)
}

var arrow = notation.Words(" → ")

// functionsText sets a sum of functions of the basis; with texts a single
// function is named with its atom.
func functionsText(p *work.Play, terms []orbitals.Term, texts assets.Texts) notation.Text {
	t := sumText(terms, p.Operation.Family, notation.PhiText)
	if texts != nil && len(terms) == 1 && math.Abs(math.Abs(terms[0].Coefficient)-1) < 1e-9 {
		f := p.Basis.Functions[terms[0].Function]
		t = t.Then(notation.Words(" ("), notation.Fill(texts.Say("captions.onAtoms", p.Group.AtomNames()[f.Site]), notation.Function(f.Name)), notation.Words(")"))
	}
	return t
}

// orbitalBecomes sets a group orbital and its image: the label where there is
// one partner, else the partners by number.
func orbitalBecomes(p *work.Play) notation.Text {
	label := notation.OrbitalText(p.Irrep.Label)
	rows, _ := p.Matrix.Dims()
	partner := func(number string) notation.Text {
		if rows == 1 {
			return label
		}
		return label.Then(notation.Words("(" + number + ")"))
	}
	start := partner(fmt.Sprint(p.Orbital.Partner + 1))
	return start.Then(arrow, sumText(p.Partners, p.Operation.Family, partner))
}

// sumText sets a sum whose members are named by their number.
func sumText(terms []orbitals.Term, short bool, name func(number string) notation.Text) notation.Text {
	write := notation.ExactCoefficient
	if short {
		write = notation.DecimalCoefficient // for any angle there is some long cosine
	}
	var t notation.Text
	for i, part := range notation.Combination(terms, write) {
		if i > 0 {
			t = t.Then(notation.Words(" "))
		}
		before, number, named := strings.Cut(part, "φ")
		t = t.Then(notation.Words(notation.Minus(before)))
		if named {
			t = t.Then(name(number))
		}
	}
	return t
}

// Frame is the scene of a still, counted from 0.
func (m *Movie) Frame(k int) (*Frame, error) {
	shown := m.shown
	shown.Moment = m.Stills[k].Moment
	f, err := m.live.Frame(shown, m.orbit, m.Width, m.Height, m.Resolution, false)
	if err != nil {
		return nil, err
	}
	palette := paletteOf(shown.Look)
	if shown.Look.Style == "ink" {
		f.Look.OutlineWidth = movieOutline * palette.Outline
	}
	if m.caption != nil {
		f.Scene.Shapes = append(f.Scene.Shapes, render.Shape{
			Geometry: render.Text{Runs: m.caption, Size: movieCaption, AlignY: -1, Fixed: true, Through: true},
			Material: flat(palette.Ink),
			Place:    &render.Place{X: 0.5, OffsetY: captionBase},
		})
	}
	return f, nil
}

// Opaque tells whether no pixel of the movie is transparent.
func (m *Movie) Opaque() bool { return m.shown.Look.Ground != "transparent" }

// Bodies are the shapes of a movie taken apart, for formats that move them
// themselves. Type and what stands on the paper are left out.
type Bodies struct {
	// Fixed are atoms, bonds and symmetry elements; Moving the lobes where they
	// begin; Ghost what stays of them there.
	Fixed, Moving, Ghost []render.Shape
	// Steps are the movements, one after the other.
	Steps []Step
	// Orbit is from where the movie is seen, and Camera the same for its size.
	Orbit  Orbit
	Camera render.Camera
	// PerMM is the length of a millimetre on the picture, in Å.
	PerMM float64
}

// A Step is a movement about the origin: a turn by Angle (radians) about a unit
// Axis; the passage through the plane square to Axis; or, without an Axis, the
// passage through the centre.
type Step struct {
	Turn  bool
	Axis  mgl64.Vec3
	Angle float64
}

// Done is how far a step of several has come at a moment, from 0 to 1.
func (b *Bodies) Done(step int, moment float64) float64 {
	return min(1, max(0, moment*float64(len(b.Steps))-float64(step)))
}

// Bodies takes the movie apart.
func (m *Movie) Bodies() *Bodies {
	op := m.play.Operation
	b := &Bodies{Orbit: m.orbit, Camera: m.orbit.Camera(m.Width, m.Height)}
	b.PerMM = m.orbit.PerPixel(m.Width, m.Height) * m.Resolution / 25.4
	if op.HasAxis() {
		b.Steps = append(b.Steps, Step{Turn: true, Axis: op.Axis, Angle: op.Angle})
	}
	if op.HasPlane() || op.HasCentre() {
		b.Steps = append(b.Steps, Step{Axis: op.Axis})
	}
	shapes := func(fill func(s *stage)) []render.Shape {
		s := &stage{palette: paletteOf(m.shown.Look), look: m.shown.Look}
		if m.shown.Basis != nil {
			s.carries = carriers(m.shown.Basis)
		}
		fill(s)
		return s.scene.Shapes
	}
	still := m.shown
	still.Coefficients = nil
	b.Fixed = shapes(func(s *stage) { m.live.fill(s, still, b.Camera.Eye.Sub(b.Camera.Target), false) })
	if m.shown.Basis == nil {
		return b
	}
	lobes := func(opacity float64, d detail) []render.Shape {
		return shapes(func(s *stage) {
			m.live.addParts(s, m.shown.Group, m.live.parts(s, m.shown), mgl64.Ident3(), opacity, d)
		})
	}
	detail := fine
	if len(m.shown.Basis.Functions) > maxFine {
		detail = coarse
	}
	b.Moving = lobes(1, detail)
	if len(b.Steps) > 0 {
		b.Ghost = lobes(ghostOpacity, coarse)
	}
	return b
}
