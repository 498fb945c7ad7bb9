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

// FontLicence returns the licence of the typeface, which must go where the typeface goes.
func FontLicence() string { return fontLicence }
