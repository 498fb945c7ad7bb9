package picture

import (
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/work"
)

// A Card tells in which frame a figure is: its triad, and the rule in words.
// Whoever lays out a figure chooses sizes and places.
type Card struct {
	// Title is the point group. Lines are sentences without a full stop: where
	// z points, where x points if the rule says it, and the source of the rule.
	Title notation.Text
	Lines []notation.Text
	// Axes are the unit vectors of x, y and z as the picture shows them: right,
	// up, and toward the viewer. An axis with a small third part lies in the
	// paper.
	Axes [3]mgl64.Vec3
	// Letters stand at the ends of the axes.
	Letters [3]notation.Text
	// Dashed tells that the triad is that of the second frame, whose axes are
	// drawn dashed.
	Dashed bool
}

// FrameCard is the card of the frame in force. rows are the directions right, up
// and back of the picture in the working frame, as of render.Camera.Rotation.
func FrameCard(g *work.Group, rows mgl64.Mat3) Card {
	c := Card{Title: notation.Group(g.Fit.Setting.Symbol), Letters: axisLetters("")}
	c.Lines = conventionLines(notation.Convention(g.Fit, g.CoreNames()), notation.Source(g.Fit.Rule))
	for i := range c.Axes {
		c.Axes[i] = rows.Col(i)
	}
	return c
}

// HeldCard is the card of a second frame, seen in a picture of the first.
func HeldCard(g *work.Group, held *work.Exchange, rows mgl64.Mat3) Card {
	c := Card{Title: notation.Group(held.Fit.Setting.Symbol), Letters: axisLetters("2"), Dashed: true}
	c.Lines = conventionLines(notation.Convention(held.Fit, g.CoreNames()), notation.Source(held.Frame.Rule))
	for i := range c.Axes {
		c.Axes[i] = rows.Mul3x1(held.Frame.Turn.Row(i))
	}
	return c
}

// conventionLines sets a convention in sentences, with the source of its rule.
func conventionLines(convention, source string) []notation.Text {
	var lines []notation.Text
	for _, clause := range strings.Split(convention, "; ") {
		if clause != "" {
			lines = append(lines, notation.Sentence(clause))
		}
	}
	if source != "" {
		lines = append(lines, notation.Words(source))
	}
	return lines
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
