//go:build cgo && !nowindow

package window

import (
	"image/color"
	"math"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"lobewright/app/session"
)

// contrastOf is the contrast ratio of WCAG 2.2 (W3C Recommendation, 2023) of a colour, which may be see-through, on an
// opaque ground.
func contrastOf(c, ground color.Color) float64 {
	f, g := color.NRGBAModel.Convert(c).(color.NRGBA), color.NRGBAModel.Convert(ground).(color.NRGBA)
	luminance := func(shares [3]float64) float64 {
		for i, x := range shares {
			if x <= 0.04045 {
				shares[i] = x / 12.92
			} else {
				shares[i] = math.Pow((x+0.055)/1.055, 2.4)
			}
		}
		return 0.2126*shares[0] + 0.7152*shares[1] + 0.0722*shares[2]
	}
	over := func(x, y uint8) float64 { return (float64(x)*float64(f.A) + float64(y)*(255-float64(f.A))) / 255 / 255 }
	a := luminance([3]float64{over(f.R, g.R), over(f.G, g.G), over(f.B, g.B)}) + 0.05
	b := luminance([3]float64{float64(g.R) / 255, float64(g.G) / 255, float64(g.B) / 255}) + 0.05
	return max(a, b) / min(a, b)
}

// flatOf is a colour of a theme as it looks on its panel.
func flatOf(l look, name fyne.ThemeColorName) color.Color {
	c := color.NRGBAModel.Convert(l.Color(name, theme.VariantLight)).(color.NRGBA)
	p := l.palette().Panel
	share := float64(c.A) / 255
	return between(p, color.NRGBA{c.R, c.G, c.B, 0xFF}, share)
}

// WCAG 2.2: text 4.5 (1.4.3), controls 3 (1.4.11); in high contrast text 7 (1.4.6). All that the toolkit draws is in
// these colours.
func TestEveryThemeKeepsTheContrastThatPeopleNeed(t *testing.T) {
	for _, l := range []look{
		{chosen: session.ThemeLight}, {chosen: session.ThemeDark}, {chosen: session.ThemeContrast}, {chosen: session.ThemeContrast, dark: true},
		{chosen: session.ThemeSystem}, {chosen: session.ThemeSystem, dark: true},
	} {
		text := 4.5
		if l.chosen == session.ThemeContrast {
			text = 7
		}
		for _, c := range []struct {
			front, back fyne.ThemeColorName
			least       float64
		}{
			{theme.ColorNameForeground, theme.ColorNameBackground, text}, {theme.ColorNameForeground, theme.ColorNameMenuBackground, text},
			{theme.ColorNameForeground, theme.ColorNameOverlayBackground, text}, {theme.ColorNameForeground, theme.ColorNameInputBackground, text},
			{theme.ColorNameForeground, theme.ColorNameButton, text}, {theme.ColorNameForeground, theme.ColorNameHover, text},
			{theme.ColorNameForeground, theme.ColorNamePressed, 4.5}, {theme.ColorNameForeground, theme.ColorNameSelection, 4.5},
			{theme.ColorNamePlaceHolder, theme.ColorNameInputBackground, text}, {theme.ColorNamePlaceHolder, theme.ColorNameBackground, text},
			{theme.ColorNameForegroundOnPrimary, theme.ColorNamePrimary, 4.5}, {theme.ColorNameError, theme.ColorNameBackground, 4.5},
			{theme.ColorNameInputBorder, theme.ColorNameBackground, 3}, {theme.ColorNamePrimary, theme.ColorNameBackground, 3},
			{theme.ColorNameScrollBar, theme.ColorNameBackground, 3}, {theme.ColorNameSeparator, theme.ColorNameBackground, 3},
		} {
			if got := contrastOf(l.Color(c.front, theme.VariantLight), flatOf(l, c.back)); got < c.least {
				t.Errorf("%+v: %s on %s has %.2f, not %.1f", l, c.front, c.back, got, c.least)
			}
		}
	}
}
