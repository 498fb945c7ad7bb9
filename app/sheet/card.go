package sheet

import (
	"math"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/work"
)

// A card says what holds for all panels of a sheet: the axes with their rule,
// where the atoms are, which functions there are, and what lobes mean.
type card struct {
	group *work.Group
	// key, if not nil, is the structure with the names of its atoms, at the
	// scale of the panels.
	key *picture.Body
	// lines are texts of their own: title, basis, content.
	lines []cardLine
	// lobes explains signs and sizes.
	lobes bool
	// bare has no triad and no rule, where each panel has its own.
	bare bool
}

type cardLine struct {
	text  notation.Text
	style style
}

func (c card) wanted() bool { return c.group != nil }

// A placedCard is a card with its sizes.
type placedCard struct {
	w, h        float64
	key         picture.Panel
	text, triad block
	// stacked has the text below key and triad; beside them otherwise.
	stacked bool
	// torn says that a word is wider than its column, keyless that the key is.
	torn, keyless bool
}

const (
	keySide  = 5.5 // mm around the bodies of the key, for names
	innerGap = 3.0 // mm between the parts of a card
	readable = 15  // width of a column that can be read, in sizes of its text
)

// placeCard decides the sizes of a card in a width, below the panels or beside
// them.
func (m *maker) placeCard(c card, p plan, width float64, beside bool) placedCard {
	var out placedCard
	if !c.wanted() || m.cardless {
		return out
	}
	if !m.figure.NoCard && !m.study.Look.NoAxes && !c.bare {
		out.triad = m.triad(p.grid.view.Axes(), plainLetters, max(4.2, min(1.1*m.size, 0.09*m.width)), false)
	}
	if c.key != nil && !m.figure.NoCard && !m.study.Look.NoLabels {
		side := min(keySide*max(1, m.size/textSize), 0.13*width)
		out.key = picture.Panel{
			Width: p.grid.view.Width*p.scale + 2*side, Height: p.grid.view.Height*p.scale + 1.5*side, Scale: p.scale,
		}
		if out.key.Width > width {
			out.key, out.keyless = picture.Panel{}, true
		}
	}
	left := 0.0
	for _, w := range []float64{out.key.Width, out.triad.w} {
		if w > 0 {
			left += w + innerGap
		}
	}
	if left-innerGap > width {
		out.key, left, out.keyless = picture.Panel{}, out.triad.w+innerGap, true
	}
	textWidth := width - left
	if out.stacked = textWidth < readable*m.size*mmPerPoint && (out.key.Width > 0 || beside && left > 0); out.stacked {
		textWidth = width
	}
	out.text, out.torn = m.keptText(c, textWidth)
	pictures := max(0, left-innerGap)
	high := max(out.key.Height, out.triad.h)
	switch {
	case out.text.h == 0:
		out.w, out.h = pictures, high
	case pictures == 0:
		out.w, out.h = out.text.w, out.text.h
	case out.stacked:
		out.w, out.h = max(pictures, out.text.w), high+innerGap/2+out.text.h
	default:
		out.w, out.h = left+out.text.w, max(high, out.text.h)
	}
	return out
}

// keptText keeps what cardText makes: the same widths are tried again and
// again. A maker has one card.
func (m *maker) keptText(c card, width float64) (block, bool) {
	kept, known := m.cards[width]
	if !known {
		kept.block, kept.torn = m.cardText(c, width)
		if m.cards == nil {
			m.cards = map[float64]cardTexts{}
		}
		m.cards[width] = kept
	}
	return kept.block, kept.torn
}

type cardTexts struct {
	block block
	torn  bool
}

// drawCard makes the block of a card.
func (m *maker) drawCard(c card, at placedCard, p plan) (block, error) {
	var out block
	if at.h == 0 {
		return out, nil
	}
	high := at.h
	if at.stacked {
		high = max(at.key.Height, at.triad.h)
	}
	x := 0.0
	if at.stacked {
		x = max(0, (at.w-at.key.Width-at.triad.w-innerGap)/2)
	}
	if at.key.Width > 0 {
		key, err := m.panel(c.key, p.grid.view, at.key, m.say("captions.atomsAndNames"), true)
		if err != nil {
			return out, err
		}
		out.put(key, x, (high-key.h)/2)
		x += key.w + innerGap
	}
	if at.triad.w > 0 {
		out.put(at.triad, x, (high-at.triad.h)/2)
		x += at.triad.w + innerGap
	}
	if at.stacked {
		out.put(at.text, max(0, (at.w-at.text.w)/2), at.h-at.text.h)
	} else {
		out.put(at.text, x, (high-at.text.h)/2)
	}
	out.grow(at.w, at.h)
	return out, nil
}

// cardText sets the lines of a card; torn tells that a word did not fit.
func (m *maker) cardText(c card, width float64) (out block, torn bool) {
	put := func(t notation.Text, s style) {
		// A long name is set smaller before it is cut.
		for s.size > 0.9*m.size && m.tears(t, s, width) {
			s.size *= 0.93
		}
		torn = torn || m.tears(t, s, width)
		out.put(m.paragraph(t, s, width), 0, out.h)
	}
	if m.figure.NoCaption {
		return out, false
	}
	for _, line := range c.lines {
		put(line.text, line.style)
	}
	if c.lobes && !m.figure.NoLegend {
		torn = torn || m.tears(m.legendText(), m.quiet(), width)
		out.put(m.legend(width), 0, out.h)
	}
	if m.study.Look.Displacements && !m.figure.NoLegend {
		if note := m.displacementText(c.group); note != nil {
			put(note, m.quiet())
		}
	}
	if !m.figure.NoCard && !c.bare && m.width >= narrow {
		put(notation.Group(c.group.Fit.Setting.Symbol).Then(notation.Words(": "), notation.Sentence(notation.ShortConventionIn(m.texts, c.group.Fit))), m.quiet())
	}
	return out, torn
}

// legend explains the signs of lobes and what goes with their size.
func (m *maker) legend(width float64) block {
	s := m.quiet()
	signs := m.signs(s)
	var out block
	out.put(signs, 0, 0)
	text := m.broken(m.legendText(), s, width-signs.w)
	if len(text) > 1 || m.widest(text, s) > width-signs.w {
		out.put(m.paragraph(m.legendText(), s, width), 0, out.h)
		return out
	}
	out.put(m.line(text[0], s), signs.w, 0)
	return out
}

// signs are two lobes with their signs, on a line of type.
func (m *maker) signs(s style) block {
	em := s.size * mmPerPoint
	radius := 0.36 * em // half the height of a capital
	middle := ascent*em - radius
	var out block
	x := 0.0
	for i, sign := range []string{"+", "−"} {
		fill := m.palette.Plus
		if i > 0 {
			fill = m.palette.Minus
		}
		out.items = append(out.items, Disc{X: x + radius, Y: middle, Radius: radius, Color: fill, Edge: m.palette.Ink, EdgeWidth: 0.12})
		switch m.study.Look.Signs {
		case "hatching":
			if i > 0 {
				out.items = append(out.items, m.hatched(x+radius, middle, radius)...)
			}
		case "printed":
			mark := style{size: 0.8 * s.size, color: picture.OnLobe(m.palette, 1-2*i), bold: true}
			w := m.typesetter.width(notation.Words(sign), mark)
			out.items = append(out.items, Text{X: x + radius - w/2, Y: middle + 0.31*mark.size*mmPerPoint,
				Runs: runsOfText(notation.Words(sign), mark), Size: mark.size, Color: mark.color})
		}
		x += 2*radius + 0.25*em
		text := m.line(notation.Words(sign), s)
		out.put(text, x, 0)
		x += text.w + 0.7*em
	}
	out.grow(x, s.line())
	return out
}

// hatched are lines across a disc.
func (m *maker) hatched(x, y, radius float64) []Item {
	var out []Item
	for _, share := range []float64{-0.5, 0, 0.5} {
		half := radius * math.Sqrt(1-share*share)
		out = append(out, Line{Points: [][2]float64{{x - half, y + share*radius}, {x + half, y + share*radius}}, Width: 0.1, Color: m.palette.Ink})
	}
	return out
}

// displacementText says what the arrows on atoms mean; nil where there are none.
func (m *maker) displacementText(g *work.Group) notation.Text {
	factor, longest := picture.DisplacementScale(g)
	if factor == 0 {
		return nil
	}
	if factor == 1 {
		return notation.Words(m.say("captions.arrowsTrue", notation.Decimal(longest, 3)))
	}
	return notation.Words(m.say("captions.arrowsTimes", factor, notation.Decimal(longest, 3)))
}

// lobeSizes are the sentences for what goes with |c|, in full and short.
var lobeSizes = map[string][2]string{
	"length": {"captions.lobeLength", "captions.lobeLengthShort"},
	"area":   {"captions.lobeArea", "captions.lobeAreaShort"},
	"volume": {"captions.lobeVolume", "captions.lobeVolumeShort"},
}

// legendText says what the size and the shape of a lobe mean.
func (m *maker) legendText() notation.Text {
	size := m.study.Look.Size
	if size == "" {
		size = "length"
	}
	key := lobeSizes[size][0]
	if m.width < narrow {
		key = lobeSizes[size][1]
	}
	bar := notation.Words("|")
	t := notation.Fill(m.say(key), bar.Then(notation.Text{{Text: "c", Italic: true}}, bar))
	plotted := notation.Text{{Text: "Y", Italic: true}}
	switch m.study.Look.Shape {
	case "polar":
		return notation.Fill(m.say("captions.polarPlot"), t, bar.Then(plotted, bar))
	case "square":
		return notation.Fill(m.say("captions.polarPlot"), t, plotted.Then(notation.Text{{Text: "2", Place: notation.Super}}))
	}
	return t
}
