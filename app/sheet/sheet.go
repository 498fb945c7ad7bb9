// Package sheet lays panels, texts and lines out on a page by rule: the
// figures of the program.
//
// A Sheet is a plain value that follows from a study and its results: the same
// input gives the same sheet, and Paint the same pixels. Whoever writes a file
// format goes through its items in their order, later ones over earlier ones.
//
// All lengths are in millimetres, counted from the upper left corner to the
// right and downward; sizes of type are in points. Colours are sRGB.
package sheet

import (
	"image/color"

	"lobewright/app/picture"
	"lobewright/render"
)

// A Sheet is a figure laid out.
type Sheet struct {
	Width, Height float64
	// Ground is the colour of the page; with an alpha of 0 there is none.
	Ground color.NRGBA
	// Font is the family of all texts, "sans" or "serif".
	Font string
	// Title says in plain characters what the sheet shows, for readers that
	// cannot see it.
	Title string
	Items []Item
	// Notes say what had to be left out, one sentence each.
	Notes []string
}

// Fonts are the typefaces of the sheet. The error is a fault of the program.
func (s *Sheet) Fonts() (*render.Fonts, error) { return picture.FontsOf(s.Font) }

// An Item is a *Panel, Text, Line, Polygon or Disc.
type Item interface{ isItem() }

// A Rect is a rectangle with its upper left corner at X and Y.
type Rect struct{ X, Y, W, H float64 }

// A Panel is a picture of bodies without type: labels, axes and captions are
// items of their own that follow it.
type Panel struct {
	Rect
	// Name says in plain characters what is shown.
	Name   string
	Scene  render.Scene
	Camera render.Camera
	Look   render.Look
}

// A Text is one line of type.
type Text struct {
	// X and Y are the left end of the base line.
	X, Y  float64
	Runs  []render.Run
	Size  float64 // pt
	Color color.NRGBA
	// Halo is the width of a rim in HaloColor around the signs; 0 is none.
	Halo      float64
	HaloColor color.NRGBA
}

// A Line is a polyline with round ends and corners.
type Line struct {
	Points [][2]float64
	Closed bool
	Width  float64
	// Dash lists the lengths of strokes and gaps by turns; empty is a full
	// line. The ends of strokes are flat then.
	Dash  []float64
	Color color.NRGBA
}

// A Polygon is a filled area without holes.
type Polygon struct {
	Points [][2]float64
	Color  color.NRGBA
}

// A Disc is a filled circle with an edge, whose middle lies on the circle; an
// EdgeWidth of 0 is none.
type Disc struct {
	X, Y, Radius float64
	Color        color.NRGBA
	Edge         color.NRGBA
	EdgeWidth    float64
}

func (*Panel) isItem()  {}
func (Text) isItem()    {}
func (Line) isItem()    {}
func (Polygon) isItem() {}
func (Disc) isItem()    {}

// Box is the room that an item takes: of a text its width and its reach above
// and below the base line, without halo.
func Box(item Item, fonts *render.Fonts) Rect {
	switch item := item.(type) {
	case *Panel:
		return item.Rect
	case Text:
		w, up, down := fonts.Measure(item.Runs, item.Size)
		return Rect{item.X, item.Y - up, w, up + down}
	case Line:
		return around(item.Points, item.Width/2)
	case Polygon:
		return around(item.Points, 0)
	case Disc:
		r := item.Radius + item.EdgeWidth/2
		return Rect{item.X - r, item.Y - r, 2 * r, 2 * r}
	}
	return Rect{}
}

// around is the smallest rectangle that holds points and a margin.
func around(points [][2]float64, margin float64) Rect {
	if len(points) == 0 {
		return Rect{}
	}
	low, high := points[0], points[0]
	for _, p := range points {
		for i := range p {
			low[i], high[i] = min(low[i], p[i]), max(high[i], p[i])
		}
	}
	return Rect{low[0] - margin, low[1] - margin, high[0] - low[0] + 2*margin, high[1] - low[1] + 2*margin}
}
