//go:build cgo && !nowindow

package window

import (
	"encoding/binary"
	"image"
	"image/color"
	"math"
	"strings"
	"sync"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/assets"
	"lobewright/render"
)

// A board is what a pane shows: texts, lines, fields and images with their
// places, and what answers to a click. Lengths are in the toolkit's units, x
// to the right and y down.
type board struct {
	width, height float64
	palette       assets.Palette

	scene  render.Scene
	boxes  []box // of the shapes of the scene: where they are at most
	images []boardImage
	spots  []spot
	bottom float64 // of everything drawn
}

type boardImage struct {
	x, y float64
	img  *image.RGBA
}

// corner is the pixel where an image begins.
func (i boardImage) corner(scale float64) image.Point {
	return image.Pt(int(i.x*scale+0.5), int(i.y*scale+0.5))
}

func (i boardImage) box(scale float64) box {
	return box{i.x, i.y, i.x + float64(i.img.Rect.Dx())/scale, i.y + float64(i.img.Rect.Dy())/scale}
}

// A spot is a rectangle that does something.
type spot struct {
	x, y, width, height float64
	// name tells spots apart when the pane is drawn anew.
	name string
	// from is where a spot begins to be seen that reaches under what does not
	// scroll.
	from float64
	// hint is shown while the pointer rests there.
	hint string
	do   func()
	// at is called in the place of do where the click matters: x and y are
	// counted from the corner of the spot. drag follows the pointer with the
	// button down, and release ends that.
	at      func(x, y float64)
	drag    func(x, y float64)
	release func()
	// step takes the keys left and right while the spot is marked.
	step func(by int)
}

func (s spot) holds(x, y float64) bool {
	return s.x <= x && x < s.x+s.width && s.y <= y && y < s.y+s.height
}

// The board's scene is set at 72 pixels an inch for a scale of 1, so that a
// point is a unit.
const (
	boardDPI = 72
	unitMM   = 25.4 / 72
)

func newBoard(width, height float64, palette assets.Palette) *board {
	b := &board{width: width, height: height, palette: palette}
	b.scene.Fonts, _ = picture.Fonts()
	return b
}

// place is the point of the scene for a place on the board.
func (b *board) place(x, y float64) mgl64.Vec3 { return mgl64.Vec3{x, b.height - y} }

func (b *board) add(g render.Geometry, c color.NRGBA, at box) {
	b.boxes = append(b.boxes, at)
	b.scene.Shapes = append(b.scene.Shapes, render.Shape{
		Geometry: g,
		Material: render.Material{Color: render.Color{R: c.R, G: c.G, B: c.B}, Opacity: float64(c.A) / 255, Flat: true, NoOutline: true},
		Place:    &render.Place{Unit: unitMM},
	})
}

func (b *board) seen(top, bottom float64) bool {
	b.bottom = max(b.bottom, bottom)
	return bottom >= 0 && top <= b.height
}

// A style is how a text is set.
type style struct {
	size  float64
	color color.NRGBA
	bold  bool
	align float64 // -1 left, 0 middle, 1 right
	// whole keeps what stands in more than one bracket on one line: for
	// formulas.
	whole bool
}

// text sets a line with its base at y and returns its width.
func (b *board) text(x, y float64, t notation.Text, s style) float64 {
	w := b.measure(t, s)
	if b.seen(y-s.size, y+0.3*s.size) {
		left := x - w*(1+s.align)/2
		at := box{left - 0.5*s.size, y - 1.5*s.size, left + w + 0.5*s.size, y + 0.8*s.size} // and what leans or hangs out
		b.add(render.Text{At: b.place(x, y), Runs: runsOf(t, s), Size: s.size, AlignX: s.align, AlignY: -1, Fixed: true, Through: true}, s.color, at)
	}
	return w
}

// measure is the width of a text.
func (b *board) measure(t notation.Text, s style) float64 {
	if b.scene.Fonts == nil || len(t) == 0 {
		return 0
	}
	return widths.of(t, s, func() float64 {
		w, _, _ := b.scene.Fonts.Measure(runsOf(t, s), s.size)
		return w / unitMM
	})
}

func runsOf(t notation.Text, s style) []render.Run {
	set := picture.Runs(t)
	for i := range set {
		set[i].Bold = s.bold
	}
	return set
}

// widths are those of texts that were measured before: setting them takes
// longer than laying out all the rest of a pane.
var widths widthCache

// A widthCache is safe for several goroutines.
type widthCache struct {
	mu    sync.Mutex
	known map[string]float64
	key   []byte
}

// mostWidths bounds what is kept.
const mostWidths = 5000

func (c *widthCache) of(t notation.Text, s style, measure func() float64) float64 {
	c.mu.Lock()
	defer c.mu.Unlock()
	c.key = binary.LittleEndian.AppendUint64(c.key[:0], math.Float64bits(s.size))
	c.key = append(c.key, truth(s.bold))
	for _, r := range t {
		c.key = binary.AppendUvarint(c.key, uint64(len(r.Text)))
		c.key = append(append(c.key, r.Text...), truth(r.Italic), byte(r.Place))
	}
	if w, ok := c.known[string(c.key)]; ok {
		return w
	}
	if c.known == nil || len(c.known) >= mostWidths {
		c.known = map[string]float64{}
	}
	w := measure()
	c.known[string(c.key)] = w
	return w
}

func truth(b bool) byte {
	if b {
		return 1
	}
	return 0
}

// paragraph sets a text in lines of a width, the first one with its base at
// y, and returns the base of the line that would follow.
func (b *board) paragraph(x, y, width float64, t notation.Text, s style) float64 {
	for _, line := range b.wrapped(t, width, s) {
		b.text(x, y, line, s)
		y += 1.4 * s.size
	}
	return y
}

// wrapped breaks a text at its blanks into lines of a width.
func (b *board) wrapped(t notation.Text, width float64, s style) []notation.Text {
	var lines []notation.Text
	var line, word notation.Text
	depth := 0
	end := func() {
		if len(line) > 0 && b.measure(line.Then(word), s) > width {
			lines = append(lines, line)
			line = nil
		}
		line = line.Then(word)
		word = nil
	}
	for _, r := range t {
		for _, part := range strings.SplitAfter(r.Text, " ") {
			if part == "" {
				continue
			}
			for _, piece := range b.fitting(part, width, s) {
				word = word.Then(notation.Text{{Text: piece, Italic: r.Italic, Place: r.Place}})
				depth += strings.Count(piece, "(") - strings.Count(piece, ")")
				if piece != part || strings.HasSuffix(piece, " ") && !(s.whole && depth > 1) {
					end()
				}
			}
		}
	}
	end()
	if len(line) > 0 {
		lines = append(lines, line)
	}
	return lines
}

// fitting cuts a word that is wider than a line, after a hyphen or a bracket
// where it has one.
func (b *board) fitting(word string, width float64, s style) []string {
	wide := func(w string) bool { return b.measure(notation.Words(w), s) > width }
	var out []string
	for wide(word) {
		runes := []rune(word)
		n := len(runes) - 1
		for n > 1 && wide(string(runes[:n])) {
			n--
		}
		for cut := n; cut > n/2; cut-- {
			if strings.ContainsRune("-)/", runes[cut-1]) {
				n = cut
				break
			}
		}
		out = append(out, string(runes[:n]))
		word = string(runes[n:])
	}
	return append(out, word)
}

// clipped is the longest beginning of a line that fits, with an ellipsis.
func (b *board) clipped(text string, width float64, s style) string {
	if b.measure(notation.Words(text), s) <= width {
		return text
	}
	runes := []rune(text)
	for n := len(runes) - 1; n > 0; n-- {
		short := strings.TrimRight(string(runes[:n]), " ") + "…"
		if b.measure(notation.Words(short), s) <= width {
			return short
		}
	}
	return "…"
}

func (b *board) fill(x, y, width, height float64, c color.NRGBA) {
	if b.seen(y, y+height) && width > 0 && height > 0 {
		b.add(render.Polygon{Points: []mgl64.Vec3{
			b.place(x, y), b.place(x, y+height), b.place(x+width, y+height), b.place(x+width, y),
		}}, c, box{x, y, x + width, y + height})
	}
}

// fillFrom fills what of a rectangle lies right of a place.
func (b *board) fillFrom(from, x, y, width, height float64, c color.NRGBA) {
	left := max(x, from)
	b.fill(left, y, x+width-left, height, c)
}

// frameFrom draws what of the outline of a rectangle lies right of a place.
func (b *board) frameFrom(from, x, y, width, height, thick float64, c color.NRGBA) {
	b.fillFrom(from, x, y, width, thick, c)
	b.fillFrom(from, x, y+height-thick, width, thick, c)
	b.fillFrom(from, x, y+thick, thick, height-2*thick, c)
	b.fillFrom(from, x+width-thick, y+thick, thick, height-2*thick, c)
}

// frame draws the outline of a rectangle, within it.
func (b *board) frame(x, y, width, height, thick float64, c color.NRGBA) {
	b.frameFrom(x, x, y, width, height, thick, c)
}

func (b *board) image(x, y float64, img *image.RGBA) {
	if img != nil {
		b.images = append(b.images, boardImage{x, y, img})
	}
}

func (b *board) spot(s spot) { b.spots = append(b.spots, s) }

// matrix sets a matrix, given by rows, in square brackets with its left upper
// corner at x and y, and returns the place right of it.
func (b *board) matrix(x, y float64, rows [][]float64, ink color.NRGBA) float64 {
	const row = 18.0
	plain := style{size: textSize, color: ink}
	wide := 24.0
	for _, r := range rows {
		for _, v := range r {
			wide = max(wide, b.measure(notation.Words(entry(v)), plain)+14)
		}
	}
	for i, r := range rows {
		for k, v := range r {
			b.text(x+6+(float64(k)+0.5)*wide, y+row*float64(i)+14, notation.Words(entry(v)), plain)
		}
	}
	tall := row*float64(len(rows)) + 4
	right := x + 12 + float64(len(rows))*wide
	for _, at := range []float64{x, right - 1} {
		b.fill(at, y, 1, tall, ink)
	}
	for _, at := range []float64{y, y + tall - 1} {
		b.fill(x, at, 4, 1, ink)
		b.fill(right-4, at, 4, 1, ink)
	}
	return right
}
