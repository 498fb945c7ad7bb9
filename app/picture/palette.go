package picture

import (
	"image/color"
	"sync"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/render"
)

// fonts parses the typefaces once, and only if a picture is made.
var fonts = sync.OnceValues(func() (*render.Fonts, error) {
	return render.ParseFonts(assets.Font(assets.Regular), assets.Font(assets.Oblique),
		assets.Font(assets.Bold), assets.Font(assets.BoldOblique))
})

var serifs = sync.OnceValues(func() (*render.Fonts, error) {
	return render.ParseFonts(assets.Serif(assets.Regular), assets.Serif(assets.Oblique),
		assets.Serif(assets.Bold), assets.Serif(assets.BoldOblique))
})

// FontsOf are the built-in typefaces of a family: "serif", else sans. The error
// is a fault of the program.
func FontsOf(family string) (*render.Fonts, error) {
	if family == "serif" {
		return serifs()
	}
	return fonts()
}

// paletteOf chooses the colours for a ground.
func paletteOf(look study.Look) assets.Palette {
	switch look.Ground {
	case "dark":
		return assets.Dark()
	case "white", "transparent":
		p := assets.Light()
		p.Ground = color.NRGBA{255, 255, 255, 255}
		return p
	}
	return assets.Light()
}

// lookOf sets the renderer's look.
func lookOf(look study.Look, palette assets.Palette) render.Look {
	l := render.LitLook(paint(palette.Ground))
	if look.Style == "ink" {
		l = render.InkLook(paint(palette.Ground), paint(palette.Ink))
		l.OutlineWidth *= palette.Outline
	}
	if look.Ground == "transparent" {
		l.GroundOpacity = 0
	}
	return l
}

func paint(c color.NRGBA) render.Color { return render.Color{R: c.R, G: c.G, B: c.B} }

// mixed is a with a share of b.
func mixed(a, b color.NRGBA, share float64) render.Color {
	mix := func(x, y uint8) uint8 { return uint8(float64(x)*(1-share) + float64(y)*share + 0.5) }
	return render.Color{R: mix(a.R, b.R), G: mix(a.G, b.G), B: mix(a.B, b.B)}
}

// matt is a surface without highlight, for what is not the subject.
func matt(c render.Color) render.Material { return render.Material{Color: c, Opacity: 1} }

// flat is a colour without light, for type, lines and signs.
func flat(c color.NRGBA) render.Material {
	return render.Material{Color: paint(c), Opacity: 1, Flat: true, NoOutline: true}
}

// OnLobe is the colour in which the sign of a lobe is printed on it.
func OnLobe(p assets.Palette, sign int) color.NRGBA {
	if sign > 0 {
		return color.NRGBA{255, 255, 255, 255}
	}
	return assets.Light().Ink
}
