//go:build cgo && !nowindow

package window

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"lobewright/app/session"
	"lobewright/assets"
)

// Sizes of type in the window, in the toolkit's units.
const (
	textSize   = 13
	secondSize = 11
	headSize   = 16 // groups and irreps
	groupSize  = 22 // the point group
)

// A look is the theme of the window: the palette and typefaces of the program.
// It does not follow the toolkit's own settings, so that it looks the same
// everywhere.
type look struct {
	chosen session.Theme
	dark   bool // what the system has, for session's default
	scale  float32
}

// isDark tells whether the ground is dark.
func (l look) isDark() bool {
	switch l.chosen {
	case session.ThemeLight, session.ThemeContrast:
		return false
	case session.ThemeDark:
		return true
	}
	return l.dark
}

func (l look) palette() assets.Palette {
	switch {
	case l.chosen == session.ThemeContrast && l.dark:
		return assets.HighContrastDark()
	case l.chosen == session.ThemeContrast:
		return assets.HighContrastLight()
	case l.isDark():
		return assets.Dark()
	}
	return assets.Light()
}

// Color implements fyne.Theme.
func (l look) Color(name fyne.ThemeColorName, _ fyne.ThemeVariant) color.Color {
	p := l.palette()
	switch name {
	case theme.ColorNameBackground, theme.ColorNameMenuBackground, theme.ColorNameOverlayBackground,
		theme.ColorNameHeaderBackground:
		return p.Panel
	case theme.ColorNameInputBackground:
		return faint(p.Ground, 0x80) // over the track of a slider
	case theme.ColorNameButton:
		return between(p.Panel, p.Ink, 0.06)
	case theme.ColorNameDisabledButton:
		return p.Panel
	case theme.ColorNameForeground:
		return p.Ink
	case theme.ColorNamePlaceHolder, theme.ColorNameDisabled:
		return p.Quiet
	case theme.ColorNameForegroundOnPrimary, theme.ColorNameForegroundOnError, theme.ColorNameForegroundOnWarning:
		return p.Ground
	case theme.ColorNamePrimary, theme.ColorNameHyperlink:
		return p.Accent
	case theme.ColorNameFocus:
		return faint(p.Accent, 0x70)
	case theme.ColorNameHover:
		return faint(p.Ink, 0x16)
	case theme.ColorNamePressed:
		return faint(p.Ink, 0x30)
	case theme.ColorNameSelection:
		return faint(p.Accent, 0x40)
	case theme.ColorNameInputBorder:
		return p.Rule
	case theme.ColorNameSeparator:
		return p.Rule
	case theme.ColorNameScrollBar:
		return faint(p.Ink, 0x90)
	case theme.ColorNameScrollBarBackground:
		return faint(p.Ink, 0x14)
	case theme.ColorNameShadow:
		return color.NRGBA{A: 0x28}
	case theme.ColorNameError, theme.ColorNameWarning:
		return p.Accent
	case theme.ColorNameSuccess:
		return p.Element
	}
	variant := theme.VariantLight
	if l.isDark() {
		variant = theme.VariantDark
	}
	return theme.DefaultTheme().Color(name, variant)
}

// Font implements fyne.Theme.
func (l look) Font(style fyne.TextStyle) fyne.Resource {
	switch {
	case style.Symbol:
		return theme.DefaultTheme().Font(style)
	case style.Bold && style.Italic:
		return typefaces[assets.BoldOblique]
	case style.Bold:
		return typefaces[assets.Bold]
	case style.Italic:
		return typefaces[assets.Oblique]
	}
	return typefaces[assets.Regular]
}

// Icon implements fyne.Theme.
func (l look) Icon(name fyne.ThemeIconName) fyne.Resource { return theme.DefaultTheme().Icon(name) }

// Size implements fyne.Theme.
func (l look) Size(name fyne.ThemeSizeName) float32 {
	factor := l.scale
	if factor == 0 {
		factor = 1
	}
	switch name {
	case theme.SizeNameText:
		return textSize * factor
	case theme.SizeNameCaptionText:
		return secondSize * factor
	case theme.SizeNameHeadingText:
		return groupSize * factor
	case theme.SizeNameSubHeadingText:
		return headSize * factor
	case theme.SizeNameInputRadius, theme.SizeNameSelectionRadius:
		return 2
	case theme.SizeNameScrollBarSmall:
		return 6
	case theme.SizeNameScrollBar:
		return 12
	}
	return theme.DefaultTheme().Size(name)
}

// between is a colour on the way from a to b.
func between(a, b color.NRGBA, share float64) color.NRGBA {
	mix := func(x, y uint8) uint8 { return uint8(float64(x)*(1-share) + float64(y)*share + 0.5) }
	return color.NRGBA{mix(a.R, b.R), mix(a.G, b.G), mix(a.B, b.B), 0xFF}
}

// faint is a colour with an opacity.
func faint(c color.NRGBA, opacity uint8) color.NRGBA {
	c.A = opacity
	return c
}
