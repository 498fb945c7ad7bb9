package picture

import (
	"strings"

	"lobewright/app/notation"
	"lobewright/render"
)

// Runs is a text as the renderer sets it.
func Runs(t notation.Text) []render.Run { return runs(t) }

// runs turns a Text into what the renderer sets.
func runs(t notation.Text) []render.Run {
	var out []render.Run
	for i, r := range t {
		if r.Place == notation.Sub {
			out = append(out, indexRuns(r)...)
			continue
		}
		run := render.Run{Text: r.Text, Italic: r.Italic, Script: render.Script(r.Place)}
		// The superscript of a label stands above its subscript.
		run.Stacked = r.Place == notation.Super && i > 0 && t[i-1].Place == notation.Sub
		out = append(out, run)
	}
	return out
}

// powers are the signs that a lowered index writes its powers with. Set as
// digits they are large enough to be read in print.
var powers = strings.NewReplacer("²", "2", "³", "3")

// indexRuns cuts a lowered index at its powers.
func indexRuns(r notation.Run) []render.Run {
	var out []render.Run
	for text := r.Text; text != ""; {
		n := strings.IndexAny(text, "²³")
		if n == 0 {
			out = append(out, render.Run{Text: powers.Replace(text[:len("²")]), Script: render.SubSuper})
			text = text[len("²"):]
			continue
		}
		if n < 0 {
			n = len(text)
		}
		out = append(out, render.Run{Text: text[:n], Italic: r.Italic, Script: render.Sub})
		text = text[n:]
	}
	return out
}
