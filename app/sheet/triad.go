package sheet

import (
	"math"

	"lobewright/app/notation"
	"lobewright/render"
)

// plainLetters stand at the axes of the frame in force.
var plainLetters = [3]notation.Text{
	{{Text: "x", Italic: true}}, {{Text: "y", Italic: true}}, {{Text: "z", Italic: true}},
}

// triad is the axes x, y and z as they are seen: axes are their ends, to the
// right and down, for axes of length 1.
func (m *maker) triad(axes [3][2]float64, letters [3]notation.Text, length float64, dashed bool) block {
	s := m.text()
	line := max(0.3, length/30)
	var items []Item
	for i, end := range axes {
		tip := [2]float64{end[0] * length, end[1] * length}
		reach := math.Hypot(tip[0], tip[1])
		w := m.typesetter.width(letters[i], s)
		high := 0.52 * s.size * mmPerPoint // of a small letter
		// The axis may point to the viewer, or away.
		at := [2]float64{-w/2 - 0.7, high + 0.4}
		if reach > 0.12*length {
			beyond := (reach + 0.75*max(high, w) + 0.5) / reach
			at = [2]float64{tip[0] * beyond, tip[1] * beyond}
			items = append(items, arrow([2]float64{0, 0}, tip, line, min(0.26*length, 0.9*reach), dashed, m.palette.Ink)...)
		} else {
			items = append(items, Disc{Radius: 1.1 * line, Color: m.palette.Ink})
		}
		items = append(items, Text{X: at[0] - w/2, Y: at[1] + high/2, Runs: runsOfText(letters[i], s), Size: s.size, Color: s.color})
	}
	return cornered(items, m.fonts)
}

// cornered moves items so that their upper left corner is the origin.
func cornered(items []Item, fonts *render.Fonts) block {
	var out block
	if len(items) == 0 {
		return out
	}
	low, high := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, item := range items {
		r := Box(item, fonts)
		low = [2]float64{min(low[0], r.X), min(low[1], r.Y)}
		high = [2]float64{max(high[0], r.X+r.W), max(high[1], r.Y+r.H)}
	}
	out.put(block{items: items}, -low[0], -low[1])
	out.w, out.h = high[0]-low[0], high[1]-low[1]
	return out
}
