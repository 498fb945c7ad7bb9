package sheet

import (
	"image/color"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/render"
)

const (
	mmPerPoint  = 25.4 / 72
	lineSpacing = 1.36 // from base line to base line, of the size
	ascent      = 0.98 // from the top of a line to its base line, of the size
)

// A style is how a text is set.
type style struct {
	size  float64 // pt
	color color.NRGBA
	bold  bool
}

func (s style) line() float64 { return s.size * mmPerPoint * lineSpacing }

// A typesetter sets texts in one family.
type typesetter struct{ fonts *render.Fonts }

func (t typesetter) width(text notation.Text, s style) float64 {
	w, _, _ := t.fonts.Measure(runsOfText(text, s), s.size)
	return w
}

func runsOfText(text notation.Text, s style) []render.Run {
	runs := picture.Runs(text)
	if s.bold {
		for i := range runs {
			runs[i].Bold = true
		}
	}
	return runs
}

// line is one line of type.
func (t typesetter) line(text notation.Text, s style) block {
	if len(text) == 0 {
		return block{}
	}
	return block{
		items: []Item{Text{X: 0, Y: ascent * s.size * mmPerPoint, Runs: runsOfText(text, s), Size: s.size, Color: s.color}},
		w:     t.width(text, s), h: s.line(),
	}
}

// paragraph is a text broken into lines no wider than width, as far as its
// words allow.
func (t typesetter) paragraph(text notation.Text, s style, width float64) block {
	var b block
	for _, line := range t.broken(text, s, width) {
		b.put(t.line(line, s), 0, b.h)
	}
	return b
}

// broken breaks a text at its blanks, within brackets only where nothing else
// helps.
func (t typesetter) broken(text notation.Text, s style, width float64) []notation.Text {
	if len(text) == 0 {
		return nil
	}
	var pieces []notation.Text
	for _, word := range words(text, true) {
		if t.width(trimRight(word), s) <= width {
			pieces = append(pieces, word)
			continue
		}
		for _, part := range words(word, false) {
			pieces = append(pieces, t.torn(part, s, width)...)
		}
	}
	var lines []notation.Text
	var line notation.Text
	for _, piece := range pieces {
		longer := line.Then(piece)
		if len(line) > 0 && t.width(trimRight(longer), s) > width {
			lines = append(lines, trimRight(line))
			longer = trimLeft(piece)
		}
		line = longer
	}
	return append(lines, trimRight(line))
}

// torn cuts a word that is wider than a line between its letters.
func (t typesetter) torn(word notation.Text, s style, width float64) []notation.Text {
	if t.width(trimRight(word), s) <= width {
		return []notation.Text{word}
	}
	var out []notation.Text
	var now notation.Text
	for _, r := range word {
		for _, letter := range r.Text {
			longer := now.Then(notation.Text{{Text: string(letter), Italic: r.Italic, Place: r.Place}})
			if len(now) > 0 && t.width(trimRight(longer), s) > width {
				out = append(out, now)
				longer = notation.Text{{Text: string(letter), Italic: r.Italic, Place: r.Place}}
			}
			now = longer
		}
	}
	return append(out, now)
}

// tears tells whether a word of a text is wider than a line.
func (t typesetter) tears(text notation.Text, s style, width float64) bool {
	for _, word := range words(text, false) {
		if t.width(trimRight(word), s) > width {
			return true
		}
	}
	return false
}

// widest is the width of the widest line.
func (t typesetter) widest(lines []notation.Text, s style) float64 {
	w := 0.0
	for _, l := range lines {
		w = max(w, t.width(l, s))
	}
	return w
}

// words cuts a text behind its blanks, with whole set not within brackets. A
// sign stays with the word behind it: "+ φ2" is one.
func words(t notation.Text, whole bool) []notation.Text {
	var out []notation.Text
	open, ended := 0, true
	for _, r := range t {
		for _, part := range strings.SplitAfter(r.Text, " ") {
			if part == "" {
				continue
			}
			piece := notation.Text{{Text: part, Italic: r.Italic, Place: r.Place}}
			if ended {
				out = append(out, piece)
			} else {
				out[len(out)-1] = out[len(out)-1].Then(piece)
			}
			open += strings.Count(part, "(") - strings.Count(part, ")")
			sign := strings.TrimSpace(part)
			ended = (open <= 0 || !whole) && strings.HasSuffix(part, " ") && sign != "+" && sign != "−" && sign != "="
		}
	}
	return out
}

func trimLeft(t notation.Text) notation.Text {
	out := append(notation.Text(nil), t...)
	if len(out) > 0 {
		out[0].Text = strings.TrimLeft(out[0].Text, " ")
	}
	return out
}

func trimRight(t notation.Text) notation.Text {
	out := append(notation.Text(nil), t...)
	if n := len(out); n > 0 {
		out[n-1].Text = strings.TrimRight(out[n-1].Text, " ")
	}
	return out
}
