package sheet

import (
	"image/color"
	"math"
)

// arrow is a line with a head.
func arrow(from, to [2]float64, width, head float64, dashed bool, c color.NRGBA) []Item {
	dx, dy := to[0]-from[0], to[1]-from[1]
	l := math.Hypot(dx, dy)
	if l == 0 {
		return nil
	}
	dx, dy = dx/l, dy/l
	back := [2]float64{to[0] - dx*head, to[1] - dy*head}
	half := 0.34 * head
	shaft := Line{Points: [][2]float64{from, {to[0] - dx*head*0.8, to[1] - dy*head*0.8}}, Width: width, Color: c}
	if dashed {
		shaft.Dash = []float64{4 * width, 2.5 * width}
	}
	return []Item{
		shaft,
		Polygon{Points: [][2]float64{to, {back[0] - dy*half, back[1] + dx*half}, {back[0] + dy*half, back[1] - dx*half}}, Color: c},
	}
}
