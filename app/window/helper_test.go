//go:build cgo && !nowindow

package window

import (
	"strings"

	"lobewright/render"
)

// textOf is the characters of a text, empty for other shapes.
func textOf(g render.Geometry) string {
	t, ok := g.(render.Text)
	if !ok {
		return ""
	}
	var words strings.Builder
	for _, r := range t.Runs {
		words.WriteString(r.Text)
	}
	return words.String()
}

type placedText struct {
	words       string
	left, right float64
}

// textsOf are the texts of a board with where they begin and end.
func textsOf(b *board) []placedText {
	var out []placedText
	for _, s := range b.scene.Shapes {
		t, ok := s.Geometry.(render.Text)
		if !ok {
			continue
		}
		w, _, _ := b.scene.Fonts.Measure(t.Runs, t.Size)
		w /= unitMM
		left := t.At[0] - w*(1+t.AlignX)/2
		if t.AlignX == 0 {
			left = t.At[0] - w/2
		}
		if t.AlignX < 0 {
			left = t.At[0]
		}
		out = append(out, placedText{textOf(t), left, left + w})
	}
	return out
}
