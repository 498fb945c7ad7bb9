package assets

import _ "embed" // the typefaces

// A Style is one of the four styles of the typeface.
type Style int

// The styles. Regular is the zero value.
const (
	Regular Style = iota
	Bold
	Oblique // for operations, group symbols and axes
	BoldOblique
)

var (
	//go:embed fonts/DejaVuSans.ttf
	regular []byte
	//go:embed fonts/DejaVuSans-Bold.ttf
	bold []byte
	//go:embed fonts/DejaVuSans-Oblique.ttf
	oblique []byte
	//go:embed fonts/DejaVuSans-BoldOblique.ttf
	boldOblique []byte
	//go:embed fonts/DejaVuSerif.ttf
	serifRegular []byte
	//go:embed fonts/DejaVuSerif-Bold.ttf
	serifBold []byte
	//go:embed fonts/DejaVuSerif-Italic.ttf
	serifItalic []byte
	//go:embed fonts/DejaVuSerif-BoldItalic.ttf
	serifBoldItalic []byte
	//go:embed fonts/LICENCE.txt
	fontLicence string
)

// Font returns the TrueType file of DejaVu Sans 2.37 in a style; an unknown style is Regular. The typeface was
// taken whole because it has every sign that is printed here: Greek letters, primes, roots, a true minus,
// brackets, arrows. The same slice is returned each time and must not be changed.
func Font(s Style) []byte {
	switch s {
	case Bold:
		return bold
	case Oblique:
		return oblique
	case BoldOblique:
		return boldOblique
	}
	return regular
}

// Serif is Font for DejaVu Serif 2.37, from the same makers under the same licence, for figures in journals that set
// their text so.
func Serif(s Style) []byte {
	switch s {
	case Bold:
		return serifBold
	case Oblique:
		return serifItalic
	case BoldOblique:
		return serifBoldItalic
	}
	return serifRegular
}

// FontLicence returns the licence of the typefaces, which must go where they go.
func FontLicence() string { return fontLicence }
