//go:build cgo && !nowindow

package window

import (
	"encoding/binary"
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"lobewright/assets"
)

// Heights of a line for the toolkit, as shares of the size of type. The
// toolkit rounds the height of a text to the nearest pixel but the baseline's
// place up, so that with the typeface's own 0.928 and 0.236 the lowest row of
// p, g and y, and all of an underscore, are cut off. These are whole pixels at
// textSize.
const (
	lineAbove = 12.0 / textSize
	lineBelow = 4.0 / textSize
)

var typefaces = map[assets.Style]fyne.Resource{
	assets.Regular:     fyne.NewStaticResource("regular.ttf", withLine(assets.Font(assets.Regular))),
	assets.Bold:        fyne.NewStaticResource("bold.ttf", withLine(assets.Font(assets.Bold))),
	assets.Oblique:     fyne.NewStaticResource("oblique.ttf", withLine(assets.Font(assets.Oblique))),
	assets.BoldOblique: fyne.NewStaticResource("bold-oblique.ttf", withLine(assets.Font(assets.BoldOblique))),
}

// withLine is a TrueType file with the heights of a line, in its table hhea
// (OpenType specification 1.9), replaced by lineAbove and lineBelow.
func withLine(font []byte) []byte {
	const firstTable, tableSize = 12, 16
	table := func(tag string) []byte {
		for i := range int(binary.BigEndian.Uint16(font[4:])) {
			if entry := font[firstTable+i*tableSize:]; string(entry[:4]) == tag {
				return font[binary.BigEndian.Uint32(entry[8:]):]
			}
		}
		return nil
	}
	font = slices.Clone(font)
	unitsPerEm := float64(binary.BigEndian.Uint16(table("head")[18:]))
	hhea := table("hhea")
	binary.BigEndian.PutUint16(hhea[4:], uint16(int16(lineAbove*unitsPerEm)))
	binary.BigEndian.PutUint16(hhea[6:], uint16(-int16(lineBelow*unitsPerEm)))
	return font
}

// fewerTypefaces has the toolkit do without its own typefaces and its pictographs,
// which it would read anew for every style: the program's hold all that it
// writes, and what else a file's title may hold is looked for in those of the
// system.
func fewerTypefaces() {
	small := theme.DefaultSymbolFont()
	for _, r := range []fyne.Resource{
		theme.DefaultEmojiFont(), theme.DefaultTextFont(), theme.DefaultTextBoldFont(), theme.DefaultTextItalicFont(),
		theme.DefaultTextBoldItalicFont(), theme.DefaultTextMonospaceFont(),
	} {
		if r, ok := r.(*fyne.StaticResource); ok {
			r.StaticContent = small.Content()
		}
	}
}
