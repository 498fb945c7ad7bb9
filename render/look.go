package render

import "github.com/go-gl/mathgl/mgl64"

// Color is a colour in sRGB bytes.
type Color struct{ R, G, B uint8 }

// RGB returns the colour written as 0xRRGGBB.
func RGB(hex uint32) Color {
	return Color{uint8(hex >> 16), uint8(hex >> 8), uint8(hex)}
}

// Material is the colour of a shape and what else its surface shows.
type Material struct {
	Color Color
	// Opacity from 0, which draws nothing, to 1. Every layer of a
	// translucent shape counts, front and back; a disc, polygon or line is
	// one layer.
	Opacity float64
	// Flat surfaces show their colour as it is, without light.
	Flat bool
	// Gloss scales the highlight of the lit look: 0 is matt, 1 the look's
	// own.
	Gloss float64
	// NoOutline leaves the shape without outline in the ink look.
	NoOutline bool
	// Hatch draws lines on the surface.
	Hatch Hatch
	// ID is what Pick reports; 0 cannot be picked.
	ID int
}

// Hatch is a set of lines that follow a surface coordinate: of a mesh, its
// Coords; of a sphere, latitude and longitude in radians; of a cylinder or
// cone, the length from its first end in units of the scene and the angle in
// radians; of a disc or polygon, its plane's two directions.
type Hatch struct {
	// Period is the distance of two lines in the surface coordinate; 0 is no
	// hatching.
	Period float64
	// Width of the lines in millimetres on the picture.
	Width float64
	Color Color
	// Second hatches along the second surface coordinate instead of the
	// first.
	Second bool
}

// Solid returns an opaque material with the look's own gloss.
func Solid(c Color) Material { return Material{Color: c, Opacity: 1, Gloss: 1} }

// Style is one of the ways to shade.
type Style int

// The styles.
const (
	// Plain is one light, fixed to the camera, with diffuse and specular
	// part; colours are taken and blended as plain numbers.
	Plain Style = iota
	// Lit is soft key and fill light, a soft highlight and a shade where
	// bodies come near each other.
	Lit
	// Ink is flat tones with outlines.
	Ink
)

// Look says how a scene is drawn. PlainLook, LitLook and InkLook fill it
// with what the styles need; fields may then be changed.
type Look struct {
	Style Style
	// Ground is the colour behind the scene and GroundOpacity its opacity: 0
	// leaves a transparent picture.
	Ground        Color
	GroundOpacity float64

	// Key and Fill point to the lights, x right, y up, z to the viewer.
	Key, Fill Vec3
	// Ambient, Diffuse and FillPart are shares of the colour, from all
	// sides, from the key light and from the fill light.
	Ambient, Diffuse, FillPart float64
	// Specular is the strength of the highlight and Shininess its exponent.
	Specular, Shininess float64
	// Shade is the most that near bodies take from the light, 0 to 1.
	Shade float64

	// Line is the colour of outlines and OutlineWidth their width in
	// millimetres.
	Line         Color
	OutlineWidth float64
	// Tones are the shares of the colour of the ink look, dark to light, and
	// ToneEdges the amounts of light at which they change (one less).
	// ToneSoft is the width of the change in millimetres.
	Tones     []float64
	ToneEdges []float64
	ToneSoft  float64
}

// PlainLook is the style Plain on a full ground: ambient 0.25, diffuse 0.75,
// specular 0.4 with exponent 48.
func PlainLook(ground Color) Look {
	return Look{
		Style: Plain, Ground: ground, GroundOpacity: 1,
		Key:     mgl64.Vec3{0.4, 0.5, 0.768115},
		Ambient: 0.25, Diffuse: 0.75, Specular: 0.4, Shininess: 48,
	}
}

// LitLook is the style Lit on a full ground.
func LitLook(ground Color) Look {
	return Look{
		Style: Lit, Ground: ground, GroundOpacity: 1,
		Key: mgl64.Vec3{-0.56, 0.64, 0.62}, Fill: mgl64.Vec3{0.6, -0.35, 0.55},
		Ambient: 0.34, Diffuse: 0.66, FillPart: 0.2,
		Specular: 0.16, Shininess: 22, Shade: 0.25,
	}
}

// InkLook is the style Ink on a full ground with outlines of the given
// colour, half a point wide, which is right for paper. On a screen, which is
// coarser, set OutlineWidth to about 1.4 pixels (0.37 mm at 96 pixels an
// inch).
func InkLook(ground, line Color) Look {
	return Look{
		Style: Ink, Ground: ground, GroundOpacity: 1,
		Key:  mgl64.Vec3{-0.56, 0.64, 0.62},
		Line: line, OutlineWidth: 0.5 * 25.4 / 72,
		Tones: []float64{0.72, 1}, ToneEdges: []float64{0.22}, ToneSoft: 0.12,
	}
}

// Quality says how finely a picture is drawn.
type Quality struct {
	// Samples a pixel: 1, 2, 4, 8 or 16; other numbers are rounded up, and 0
	// is 4. Only edges depend on it, so a picture refined from 1 to 16
	// samples stands still.
	Samples int
	// DPI is the number of pixels per inch of the picture, which gives
	// millimetres and points their meaning; 0 is 96.
	DPI float64
	// Workers is the number of goroutines; 0 is one for each processor. The
	// picture does not depend on it.
	Workers int
}
