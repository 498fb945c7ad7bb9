package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/render"
)

// sameAxis is the cosine from which two axes are drawn as one.
const sameAxis = 1 - 1e-4

// triadMark is one axis of the triads: where it points, and how it is called.
type triadMark struct {
	direction mgl64.Vec3
	letters   notation.Text
	dashed    bool
}

// triadMarks are the axes of the frame in force and those of a second one, if
// there is one. Where an axis of the second lies on one of the first, that one
// bears both names.
func triadMarks(held *work.Exchange) []triadMark {
	var out []triadMark
	for i, letter := range axisLetters("") {
		var e mgl64.Vec3
		e[i] = 1
		out = append(out, triadMark{direction: e, letters: letter})
	}
	if held == nil {
		return out
	}
next:
	for i, letter := range axisLetters("2") {
		v := held.Frame.Turn.Row(i)
		for k := range out {
			if out[k].direction.Dot(v) > sameAxis {
				out[k].letters = out[k].letters.Then(notation.Words(", "), letter)
				continue next
			}
		}
		out = append(out, triadMark{v, letter, true})
	}
	return out
}

// dash (mm) is how the axes of the second frame are drawn.
var dash = []float64{1.1, 0.8}

// triadShapes draws an axis of a length in millimetres on a triad.
func (m triadMark) triadShapes(length, width, size float64) []render.Geometry {
	var out []render.Geometry
	const head, wide = 0.2, 0.06
	if m.dashed {
		out = append(out,
			render.Line{Points: []mgl64.Vec3{{}, m.direction.Mul(1 - head/2)}, Width: width, Dash: dash},
			render.Cone{Base: m.direction.Mul(1 - head), Apex: m.direction, Radius: wide})
	} else {
		out = append(out, render.Arrow{To: m.direction, Radius: width / 2 / length, HeadLength: head, HeadRadius: wide})
	}
	return append(out, render.Text{At: m.direction.Mul(triadLetter), Runs: runs(m.letters), Size: size, Fixed: true, Through: true})
}

// besideTip moves letters with an index, which are wide, off the tip of their
// arrow as the camera sees it.
func (m triadMark) besideTip(g render.Geometry, c render.Camera, fonts *render.Fonts) render.Geometry {
	text, ok := g.(render.Text)
	const foreshortened = 0.15
	seen := c.Rotation().Mul3x1(m.direction)
	flat := math.Hypot(seen[0], seen[1])
	if !ok || len(m.letters) < 2 || flat < foreshortened || fonts == nil {
		return g
	}
	x, y := seen[0]/flat, seen[1]/flat
	width, ascent, descent := fonts.Measure(text.Runs, text.Size)
	const gap = 0.8 // mm
	r := min(width/2/max(math.Abs(x), 1e-3), (ascent+descent)/2/max(math.Abs(y), 1e-3)) + gap
	text.At, text.OffsetX, text.OffsetY = m.direction, r*x, r*y
	return text
}

// axisLetters are x, y and z with an index, which is empty for the frame in
// force. It is a number and no prime: primes belong to irreps.
func axisLetters(index string) [3]notation.Text {
	var out [3]notation.Text
	for i, letter := range []string{"x", "y", "z"} {
		out[i] = notation.Text{{Text: letter, Italic: true}}
		if index != "" {
			out[i] = append(out[i], notation.Text{{Text: index, Place: notation.Sub}}...)
		}
	}
	return out
}
