package picture

import (
	"encoding/binary"
	"fmt"
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/render"
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
	// Operation, if not nil, shows its symmetry elements, and Moment, from 0
	// to 1, how far it has carried the lobes; after 0 their start stays as a
	// ghost.
	Operation *work.Operation
	Moment    float64
	// Marked are atoms that are chosen, from 0.
	Marked []int
	Look   study.Look
	// Palette, if not nil, takes the place of the one that Look asks for.
	Palette *assets.Palette
}

// Live makes the scenes of a picture that moves. It keeps meshes and the
// places of labels from frame to frame, and serves one goroutine at a time.
type Live struct {
	meshes map[string]meshPair
	labels map[int]labelOffset
	group  *work.Group
	room   room
}

type meshPair struct{ plus, minus *render.Mesh }

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
		return nil, fmt.Errorf("the built-in typefaces cannot be read: %w", err)
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
			l.group, l.labels = shown.Group, nil
		}
		l.fill(s, shown, f.Camera.Eye.Sub(f.Camera.Target), quick)
		s.liveTriad(f)
		if !shown.Look.NoLabels {
			l.addLabels(s, shown, f, quick, fonts)
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
	if shown.Operation != nil {
		s.addMotion(*shown.Operation, l.roomOf(s, shown), toward)
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
	if shown.Operation != nil && shown.Moment > 0 {
		l.addParts(s, g, parts, at, ghostOpacity, coarse)
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

// A part is what is drawn on one atom of one shell: a mixture, its size, and
// how far its sign is on the way to its opposite.
type part struct {
	mixture
	length float64
	flip   float64 // 0: the sign as it is, 1: the opposite
}

// parts are the lobes to draw with their lengths.
func (l *Live) parts(s *stage, shown Shown) []part {
	unit, size := lobeUnit(shown.Group, s.carries), sizing(s.look.Size)
	now := mixtures(shown.Basis, shown.Coefficients)
	share := func(ms []mixture) func(mixture) float64 {
		largest := 0.0
		for _, m := range ms {
			largest = max(largest, m.amplitude())
		}
		return func(m mixture) float64 {
			if largest == 0 {
				return 0
			}
			return size(m.amplitude() / largest)
		}
	}
	nowShare := share(now)
	out := make([]part, 0, len(now))
	if len(shown.Before) != len(shown.Coefficients) || shown.Fade >= 1 {
		for _, m := range now {
			out = append(out, part{m, unit * nowShare(m), 0})
		}
		return out
	}
	// Both lists have the same atoms and shells in the same order.
	before := mixtures(shown.Basis, shown.Before)
	beforeShare := share(before)
	for i, m := range now {
		was := before[i]
		p := part{m, unit * (beforeShare(was)*(1-shown.Fade) + nowShare(m)*shown.Fade), 0}
		cosine := overlap(was.vector, m.vector)
		switch {
		case nowShare(m) <= negligible:
			p.mixture = was
		case cosine < -0.99 && beforeShare(was) > negligible:
			// The same lobe with the other sign.
			p.mixture, p.flip = was, shown.Fade
		case cosine > -0.99 && beforeShare(was) > negligible:
			// Lobes of another direction turn into each other.
			p.vector = mixedVectors(was.vector, m.vector, shown.Fade)
		}
		out = append(out, p)
	}
	return out
}

// overlap is the cosine between two vectors, 0 if one of them is 0.
func overlap(a, b []float64) float64 {
	ab, aa, bb := 0.0, 0.0, 0.0
	for i := range a {
		ab, aa, bb = ab+a[i]*b[i], aa+a[i]*a[i], bb+b[i]*b[i]
	}
	if aa == 0 || bb == 0 {
		return 0
	}
	return ab / math.Sqrt(aa*bb)
}

// mixedVectors is a unit vector on the way between the directions of two
// others.
func mixedVectors(a, b []float64, share float64) []float64 {
	la, lb := math.Sqrt(squares(a)), math.Sqrt(squares(b))
	out := make([]float64, len(a))
	for i := range a {
		out[i] = a[i]/la*(1-share) + b[i]/lb*share
	}
	return out
}

func squares(a []float64) float64 {
	sum := 0.0
	for _, x := range a {
		sum += x * x
	}
	return sum
}

// addParts draws lobes after a linear map of the scene.
func (l *Live) addParts(s *stage, g *work.Group, parts []part, by mgl64.Mat3, opacity float64, detail detail) {
	unit := lobeUnit(g, s.carries)
	for _, p := range parts {
		if p.length <= negligible*unit || p.amplitude() == 0 {
			continue
		}
		place := render.Linear(by)
		at := g.Sites.Positions[p.site]
		id := lobeID(p.site)
		if opacity < 1 {
			id = 0
		}
		if p.shell == 0 {
			m := s.fadedLobe(p.vector[0], p.flip, opacity)
			m.ID = id
			radius := p.length / 2
			if opacity < 1 {
				radius *= ghostSize
			}
			s.scene.Add(render.Sphere{Center: at, Radius: radius}, m)
			s.scene.Shapes[len(s.scene.Shapes)-1].Transform = &place
			s.lobes = append(s.lobes, ball{place.Apply(at), p.length / 2})
			continue
		}
		plus, minus, turn := l.shapeOf(p.mixture, detail)
		length := p.length
		if opacity < 1 {
			length *= ghostSize
		}
		place = place.After(render.Affine{Linear: turn.Mul(length), Shift: at})
		for i, mesh := range []*render.Mesh{plus, minus} {
			if mesh == nil {
				continue
			}
			m := s.fadedLobe(1-2*float64(i), p.flip, opacity)
			m.ID = id
			s.scene.Add(mesh, m)
			s.scene.Shapes[len(s.scene.Shapes)-1].Transform = &place
		}
		if opacity == 1 {
			for _, b := range lobeBallsOf(p.mixture) {
				s.lobes = append(s.lobes, ball{render.Linear(by).Apply(at.Add(b.centre.Mul(p.length))), b.radius * p.length})
			}
		}
	}
}

// lobeBallsOf are lobeBalls without the search where the shell needs none.
func lobeBallsOf(m mixture) []ball {
	if m.shell == 1 {
		d := mgl64.Vec3{m.vector[0], m.vector[1], m.vector[2]}.Normalize()
		return []ball{{d.Mul(0.55), 0.38}, {d.Mul(-0.55), 0.38}}
	}
	return []ball{{radius: 0.8}}
}

// fadedLobe is the material of a lobe whose sign is on the way to its
// opposite, through the grey between both.
func (s *stage) fadedLobe(sign, flip, opacity float64) render.Material {
	m := s.lobeMaterial(sign)
	if flip > 0 {
		other := s.lobeMaterial(-sign).Color
		grey := paint(s.palette.Quiet)
		if flip < 0.5 {
			m.Color = blend(m.Color, grey, 2*flip)
		} else {
			m.Color = blend(grey, other, 2*flip-1)
		}
	}
	m.Opacity = opacity
	return m
}

func blend(a, b render.Color, share float64) render.Color {
	mix := func(x, y uint8) uint8 { return uint8(float64(x)*(1-share) + float64(y)*share + 0.5) }
	return render.Color{R: mix(a.R, b.R), G: mix(a.G, b.G), B: mix(a.B, b.B)}
}

// maxMeshes bounds the memory of meshes that are kept: about 100 KB each.
const maxMeshes = 300

// shapeOf is the function of this name with the meshes kept.
func (l *Live) shapeOf(m mixture, detail detail) (plus, minus *render.Mesh, turn mgl64.Mat3) {
	if m.shell == 1 {
		return shapeOf(m, detail)
	}
	key := meshKey(m, detail)
	pair, ok := l.meshes[key]
	if !ok {
		if len(l.meshes) >= maxMeshes || l.meshes == nil {
			l.meshes = make(map[string]meshPair)
		}
		pair.plus, pair.minus, _ = shapeOf(m, detail)
		l.meshes[key] = pair
	}
	return pair.plus, pair.minus, mgl64.Ident3()
}

// meshKey tells mixtures apart whose shapes differ to the eye.
func meshKey(m mixture, detail detail) string {
	key := []byte{byte(m.shell), byte(detail.halvings)}
	a := m.amplitude()
	for _, x := range m.vector {
		key = binary.AppendVarint(key, int64(math.Round(512*x/a)))
	}
	return string(key)
}

// addMotion draws the symmetry elements of an operation, and the sense of its
// turn.
func (s *stage) addMotion(op work.Operation, room room, toward mgl64.Vec3) {
	first := len(s.scene.Shapes)
	centre, reach := room.centre, overhang*room.radius+minOverhang
	along := op.Axis.Mul(op.Axis.Dot(centre))
	if op.HasCentre() {
		s.addCentre()
	}
	if op.HasAxis() {
		s.addAxis(op.Axis, along, reach)
		s.addSense(op, along, reach, toward)
	}
	if op.HasPlane() {
		s.addPlane(op.Axis, centre.Sub(along), reach)
	}
	for i := first; i < len(s.scene.Shapes); i++ {
		if _, plane := s.scene.Shapes[i].Geometry.(render.Disc); !plane {
			// One sees and picks through a plane.
			s.scene.Shapes[i].Material.ID = elementID
		}
	}
}

// addSense draws an arrow around the positive end of an axis, as far as the
// turn goes, with its tip where it ends. Its middle is on the viewer's side.
func (s *stage) addSense(op work.Operation, along mgl64.Vec3, reach float64, toward mgl64.Vec3) {
	// Shares of reach: the radius of the arc, the length and the radius of the tip.
	const share, tipLength, tipRadius = 0.2, 0.07, 0.025
	u, v := senseAxes(op.Axis, toward)
	radius := share * reach
	middle := along.Add(op.Axis.Mul(0.9 * reach))
	angle := math.Copysign(min(math.Abs(op.Angle), 1.9*math.Pi), op.Angle)
	at := func(a float64) mgl64.Vec3 {
		sin, cos := math.Sincos(a - angle/2)
		return middle.Add(u.Mul(radius * cos)).Add(v.Mul(radius * sin))
	}
	bow := angle - math.Copysign(min(tipLength/share, 0.4*math.Abs(angle)), angle)
	points := make([]mgl64.Vec3, 33)
	for k := range points {
		points[k] = at(bow * float64(k) / float64(len(points)-1))
	}
	s.scene.Add(render.Line{Points: points, Width: 0.5}, s.elementMaterial(1))
	s.scene.Add(render.Cone{Base: at(bow), Apex: at(angle), Radius: tipRadius * reach}, s.elementMaterial(1))
}

// senseAxes are two directions across an axis, turned about it in the positive
// sense from the first to the second. The first points to the viewer as far as
// it can; seen along the axis every one is as good.
func senseAxes(axis, toward mgl64.Vec3) (u, v mgl64.Vec3) {
	const alongAxis = 1e-3
	across1, across2 := across(axis)
	if l := toward.Len(); l > 0 {
		if side := toward.Sub(axis.Mul(axis.Dot(toward))); side.Len() > alongAxis*l {
			u = side.Normalize()
			return u, axis.Cross(u)
		}
	}
	return across1, across2
}

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

// liveTriad draws the axes in the lower left corner.
func (s *stage) liveTriad(f *Frame) {
	if s.look.NoAxes {
		return
	}
	const length, inset = 9.0, 6.0 // mm
	ink := flat(s.palette.Ink)
	place := render.Place{OffsetX: length + inset, OffsetY: length + inset, Unit: length, Turn: true}
	for i, letter := range []string{"x", "y", "z"} {
		var e mgl64.Vec3
		e[i] = 1
		for _, g := range []render.Geometry{
			render.Arrow{To: e, Radius: axisWidth / 2 / length, HeadLength: 0.2, HeadRadius: 0.06},
			render.Text{At: e.Mul(triadLetter), Runs: []render.Run{{Text: letter, Italic: true}}, Size: liveLabel, Fixed: true, Through: true},
		} {
			at := place
			s.scene.Shapes = append(s.scene.Shapes, render.Shape{Geometry: g, Material: ink, Place: &at})
		}
	}
	side := 2 * (length*triadLetter + inset) * f.Quality.DPI / 25.4
	s.corner = rectangle{left: 0, right: side, top: float64(f.Height) - side, bottom: float64(f.Height)}
}

// liveLabel is the size of labels on the screen, in points: 12 pixels at 96
// an inch.
const liveLabel = 9

// addLabels writes the atoms' names. Their places beside the atoms are kept
// while the picture moves; at rest a label moves only where that uncovers it.
func (l *Live) addLabels(s *stage, shown Shown, f *Frame, quick bool, fonts *render.Fonts) {
	perMM := f.Quality.DPI / 25.4
	scr := screen{width: f.Width, height: f.Height, right: float64(f.Width), bottom: float64(f.Height), pixelsPerMM: perMM}
	seen := newSight(f.Camera, scr)
	var obstacles []disc
	if !quick {
		for _, b := range append(append([]ball(nil), s.atoms...), s.lobes...) {
			obstacles = append(obstacles, seen.disc(b))
		}
		obstacles = append(obstacles, s.bondDiscs(shown.Group, seen)...)
	}
	if l.labels == nil {
		l.labels = map[int]labelOffset{}
	}
	taken := []rectangle{s.corner}
	names := shown.Group.AtomNames()
	for i, wanted := range s.labelled(shown.Group, s.carries) {
		if marked := slices.Contains(shown.Marked, i); !wanted && !marked {
			continue
		}
		atom, text := s.atoms[i], runs(notation.Words(names[i]))
		around := seen.disc(s.around(atom))
		if !(around.radius < 1e5) {
			continue // at or behind the eye
		}
		width, ascent, _ := fonts.Measure(text, liveLabel)
		place := l.labelPlace(i, around, width*perMM, ascent*perMM, obstacles, taken, scr, quick)
		taken = append(taken, place)
		colour := s.palette.Ink
		if slices.Contains(shown.Marked, i) {
			colour = s.palette.Accent
		}
		s.scene.Add(render.Text{
			At: atom.centre, Runs: text, Size: liveLabel,
			OffsetX: (place.left - around.x) / perMM, OffsetY: (around.y - place.bottom) / perMM,
			AlignX: -1, AlignY: -1,
			Halo: haloWidth, HaloColor: paint(s.palette.Ground), Through: true, Fixed: true,
		}, flat(colour))
	}
}

// labelPlace finds the rectangle of a label.
func (l *Live) labelPlace(atom int, around disc, width, height float64, obstacles []disc, taken []rectangle, scr screen, quick bool) rectangle {
	gap := labelGap * scr.pixelsPerMM
	rectangleAt := func(o labelOffset) rectangle {
		sin, cos := math.Sincos(o.angle)
		r := around.radius + gap*(1+2*o.ring)
		x := around.x + r*cos + width/2*(cos-1)
		y := around.y - r*sin - height/2*(sin-1)
		return rectangle{x, x + width, y - height, y}
	}
	old, known := l.labels[atom]
	if quick {
		if !known {
			old = labelOffset{angle: -math.Pi / 4}
		}
		return rectangleAt(old)
	}
	cost := func(o labelOffset) float64 {
		return labelPlace{rectangle: rectangleAt(o)}.covers(obstacles, taken, scr)
	}
	best, least := old, math.Inf(1)
	if known {
		const worthMoving = 0.5 // heights of the label that must be won
		least = cost(old) - worthMoving
	}
	for ring, further := range []float64{0, 1, 2, 3.5} {
		for k := range 16 {
			angle := math.Pi / 8 * float64((k+1)/2)
			if k%2 == 1 {
				angle = -angle
			}
			o := labelOffset{angle, further}
			if c := cost(o) + 0.25*float64(ring) + 0.01*float64(k); c < least {
				best, least = o, c
			}
		}
	}
	l.labels[atom] = best
	return rectangleAt(best)
}

// Fitted is the orbit moved and scaled so that everything that can be shown
// of a structure, and of the lobes of a basis (which may be nil), fills the
// picture.
func (o Orbit) Fitted(g *work.Group, basis *work.Basis) Orbit {
	s := &stage{palette: assets.Light()}
	if basis != nil {
		s.carries = carriers(basis)
	}
	s.addMolecule(g)
	room := s.atoms
	if basis != nil {
		room = append(room, s.roomOf(basis)...)
	}
	centre, radius := enclosing(room)
	o.Target, o.Span, o.Distance = centre, 2*(overhang*radius+minOverhang)*1.12, distanceInRadii*radius
	return o
}

// BestOrbit sees a structure, and the lobes of a basis (which may be nil),
// from where they cover each other least.
func BestOrbit(g *work.Group, basis *work.Basis) Orbit {
	s := &stage{palette: assets.Light()}
	var room []ball
	if basis != nil {
		s.carries = carriers(basis)
		room = s.roomOf(basis)
	}
	s.addMolecule(g)
	v := bestView(room, s.atoms)
	return NewOrbit(v.azimuth, v.elevation).Fitted(g, basis)
}

// Runs is a text as the renderer sets it.
func Runs(t notation.Text) []render.Run { return runs(t) }

// Fonts are the built-in typefaces. The error is a fault of the program.
func Fonts() (*render.Fonts, error) { return fonts() }

// Prepare makes what the first picture needs and takes time: typefaces and
// the most common lobes. Without it the first picture makes them.
func Prepare() {
	_, _ = fonts()
	pLobes[coarse]()
	pLobes[fine]()
}
