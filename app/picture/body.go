package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/render"
)

// A Body is what one panel of a figure shows: bodies in the working frame,
// without type.
type Body struct {
	stage *stage
	group *work.Group
	// room are the balls that have to be seen besides the atoms: the lobes of
	// any group orbital of the basis, so that all of them are seen from one
	// place and at one size.
	room []ball
	// reach are balls that hold what room stands for whole.
	reach []ball
	signs []signMark
	// key names only atoms that carry functions.
	key  bool
	axes []axisEnd
	// chosen are the operations whose elements AddElements has drawn.
	chosen []work.Operation
}

// A signMark is a place in a lobe where its sign can be printed.
type signMark struct {
	ball
	sign float64
	id   int
}

// A Maker makes bodies. It keeps the meshes of lobes from one to the next and
// serves one goroutine at a time.
type Maker struct {
	live Live
}

// Molecule is the structure alone.
func (m *Maker) Molecule(g *work.Group, s study.Study) *Body {
	st := newStage(s)
	st.addMolecule(g)
	body := &Body{stage: st, group: g}
	body.addStudied()
	return body
}

// addStudied adds what the look asks for beside bodies: displacements and all
// symmetry elements.
func (b *Body) addStudied() {
	s := b.stage
	if s.look.Displacements {
		s.addDisplacements(b.group)
	}
	if s.look.Elements {
		centre, radius := enclosing(b.must())
		s.allElements(b.group, centre, overhang*radius+minOverhang)
	}
}

// Lobes is a combination of the functions of a basis on the structure.
func (m *Maker) Lobes(b *work.Basis, coefficients []float64, s study.Study) *Body {
	body := m.bare(b, s)
	m.add(body, b, coefficients, work.Operation{}, false)
	body.addStudied()
	return body
}

// Moved is a combination carried by an operation, with its start as a ghost.
// The operation's symmetry elements are not part of it.
func (m *Maker) Moved(b *work.Basis, coefficients []float64, op work.Operation, s study.Study) *Body {
	body := m.bare(b, s)
	m.add(body, b, coefficients, op, true)
	return body
}

// Carriers is the structure with the atoms that carry functions drawn as below
// lobes, and with the room that the lobes take.
//
// Only atoms with functions are named on it.
func (m *Maker) Carriers(b *work.Basis, s study.Study) *Body {
	body := m.bare(b, s)
	body.key = true
	return body
}

func (m *Maker) bare(b *work.Basis, s study.Study) *Body {
	st := newStage(s)
	st.carries = carriers(b)
	st.addMolecule(b.Group)
	kept := m.live.roomBalls(st, b)
	return &Body{stage: st, group: b.Group, room: kept.balls, reach: kept.reach}
}

// roomBalls keeps the balls of the last basis.
func (l *Live) roomBalls(s *stage, b *work.Basis) basisBalls {
	if l.balls.basis != b || l.balls.shape != s.look.Shape {
		l.balls = basisBalls{b, s.look.Shape, s.roomOf(b), s.reachOf(b)}
	}
	return l.balls
}

type basisBalls struct {
	basis *work.Basis
	shape string
	balls []ball
	reach []ball
}

func (m *Maker) add(body *Body, b *work.Basis, coefficients []float64, op work.Operation, moved bool) {
	detail := fine
	if len(b.Functions) > maxFine {
		detail = coarse
	}
	s := body.stage
	parts := m.live.parts(s, Shown{Group: b.Group, Basis: b, Coefficients: coefficients})
	by := mgl64.Ident3()
	if moved && op.Steps() > 0 {
		m.live.addParts(s, b.Group, uncovered(b.Group, parts, op.At(1)), by, ghostOpacity, coarse)
		by = op.At(1)
	}
	m.live.addParts(s, b.Group, parts, by, 1, detail)
	place := render.Linear(by)
	for _, p := range parts {
		at := b.Group.Sites.Positions[p.site]
		if p.length <= 0 || p.amplitude() == 0 {
			continue
		}
		if p.shell == 0 {
			body.signs = append(body.signs, signMark{ball{place.Apply(at), p.length / 2}, p.vector[0], lobeID(p.site)})
			continue
		}
		if s.look.Signs != "printed" {
			continue
		}
		y := p.angular()
		for _, l := range lobeBalls(y, p.shell, s.look.Shape) {
			mark := ball{place.Apply(at.Add(l.centre.Mul(p.length))), l.radius * p.length}
			body.signs = append(body.signs, signMark{mark, y(l.centre.Normalize()), lobeID(p.site)})
		}
	}
}

// AddElements draws the symmetry elements of operations, each once, as far as
// they reach beyond everything that the body shows. The sense of a rotation is
// drawn too if sense is set.
func (b *Body) AddElements(operations []work.Operation, v Viewpoint, sense bool) {
	centre, radius := enclosing(b.must())
	reach := overhang*radius + minOverhang
	s := b.stage
	b.chosen = append(b.chosen, operations...)
	var axes, planes []work.Operation
	has := func(list []work.Operation, o work.Operation) bool {
		for _, p := range list {
			if math.Abs(p.Axis.Dot(o.Axis)) > 1-1e-6 {
				return true
			}
		}
		return false
	}
	centred := false
	for _, o := range operations {
		if o.HasCentre() && !centred {
			centred = true
			s.addCentre()
		}
		along := o.Axis.Mul(o.Axis.Dot(centre))
		if o.HasPlane() && !has(planes, o) {
			planes = append(planes, o)
			s.addPlane(o.Axis, centre.Sub(along), reach)
		}
		if o.HasAxis() && !has(axes, o) {
			axes = append(axes, o)
			s.addAxis(o.Axis, along, reach)
			if sense {
				s.addSense(o, along, reach, v.rows.Row(2))
			}
		}
	}
}

// Look is how the body is drawn.
func (b *Body) Look() render.Look { return lookOf(b.stage.look, b.stage.palette) }

// Palette is the body's palette.
func (b *Body) Palette() assets.Palette { return b.stage.palette }

// Scene is the body for a scale in millimetres an ångström, which gives the
// hatching its distances.
func (b *Body) Scene(scale float64) render.Scene {
	scene := render.Scene{Shapes: append([]render.Shape(nil), b.stage.scene.Shapes...)}
	spaceHatching(scene.Shapes, scale)
	return scene
}

// must are all balls that have to be seen.
func (b *Body) must() []ball {
	return append(append(append([]ball(nil), b.stage.atoms...), b.reach...), b.stage.elements...)
}

// PaletteOf is the palette for a look.
func PaletteOf(look study.Look) assets.Palette { return paletteOf(look) }
