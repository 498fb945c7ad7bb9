package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/render"
)

// An axisEnd is where the letter of an axis stands.
type axisEnd struct {
	ball
	letter notation.Text
	dashed bool
}

// AddAxes draws arrows along x, y and z from the origin, beyond the atoms and what
// lies on them, with letters at their ends.
func (b *Body) AddAxes(letters [3]notation.Text) {
	for i, l := range letters {
		var e mgl64.Vec3
		e[i] = 1
		b.addAxis(triadMark{direction: e, letters: l})
	}
}

// AddTriads draws the axes like AddAxes, and dashed those of a second frame, with
// an index 2; an axis of both bears both names.
func (b *Body) AddTriads(second *work.Exchange) {
	for _, m := range triadMarks(second) {
		b.addAxis(m)
	}
}

func (b *Body) addAxis(m triadMark) {
	const beyond, least = 1.22, 0.6 // of the atoms' reach; Å
	const seen, leastSeen = 0.3, 0.4
	reach := 0.0
	for _, a := range b.stage.atoms {
		reach = max(reach, a.centre.Len())
	}
	usual := max(least, beyond*reach)
	// Of an arrow through a body more than its head has to be seen.
	length := max(usual, b.leaves(m.direction)+max(leastSeen, seen*reach))
	const radius, head, wide = 0.022, 0.1, 0.03 // of the usual length
	const dashedWidth = 0.35                    // mm
	tip := m.direction.Mul(length)
	ink := flat(b.stage.palette.Ink)
	if m.dashed {
		b.stage.scene.Add(render.Line{Points: []mgl64.Vec3{{}, tip.Sub(m.direction.Mul(head / 2 * usual))}, Width: dashedWidth, Dash: dash}, ink)
		b.stage.scene.Add(render.Cone{Base: tip.Sub(m.direction.Mul(head * usual)), Apex: tip, Radius: wide * usual}, ink)
	} else {
		b.stage.scene.Add(render.Arrow{To: tip, Radius: radius * usual / 2, HeadLength: head * usual, HeadRadius: wide * usual}, ink)
	}
	end := ball{tip, 0.02 * usual}
	b.stage.elements = append(b.stage.elements, end)
	b.axes = append(b.axes, axisEnd{end, m.letters, m.dashed})
}

// leaves is how far from the origin a ray in a direction comes out of the last atom
// or lobe that it goes through.
func (b *Body) leaves(direction mgl64.Vec3) float64 {
	last := 0.0
	for _, bodies := range [][]ball{b.stage.atoms, b.reach} {
		for _, o := range bodies {
			along := o.centre.Dot(direction)
			aside := o.centre.Sub(direction.Mul(along)).LenSqr()
			if half := o.radius*o.radius - aside; half > 0 {
				last = max(last, along+math.Sqrt(half))
			}
		}
	}
	return last
}

// An AxisLine is the arrow of an axis on a panel, from the origin to its tip, in
// millimetres from the upper left corner; Dash as it is drawn.
type AxisLine struct {
	From, To [2]float64
	Dash     []float64
}

// AxisLines are the axes of a body on a panel: to be drawn lightly over what covers
// them.
func (b *Body) AxisLines(v Viewpoint, p Panel) []AxisLine {
	var out []AxisLine
	from := v.on(p, ball{})
	for _, a := range b.axes {
		to := v.on(p, a.ball)
		l := AxisLine{From: [2]float64{from.x, from.y}, To: [2]float64{to.x, to.y}}
		if a.dashed {
			l.Dash = dash
		}
		out = append(out, l)
	}
	return out
}

// Reserve has a view of the body leave room for another one, which is seen from
// the same place in other axes; turn takes its directions to those here.
func (b *Body) Reserve(other *Body, turn mgl64.Mat3) {
	for _, o := range other.must() {
		b.stage.elements = append(b.stage.elements, ball{turn.Mul3x1(o.centre), o.radius})
	}
}
