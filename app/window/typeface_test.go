//go:build cgo && !nowindow

package window

import (
	"math"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
)

// The toolkit's picture of a text has room for descenders and underscores,
// which reach 0.236 of the size below the baseline, at every size of type.
func TestTheToolkitCutsNoDescenders(t *testing.T) {
	const deepest = 0.236
	app := test.NewTempApp(t)
	app.Settings().SetTheme(look{})
	for _, s := range []float64{textSize, secondSize, headSize, groupSize} {
		for _, zoom := range []float64{1, 1.25, 1.5, 2} {
			for _, scale := range []float64{1, 1.5, 2} {
				for _, style := range []fyne.TextStyle{{}, {Bold: true}, {Italic: true}} {
					size, above := app.Driver().RenderedTextSize("fac_pyg", float32(s*zoom), style, nil)
					// As the toolkit rounds: the height to the nearest pixel, the baseline up.
					below := math.Round(float64(size.Height)*scale) - math.Ceil(float64(above)*scale)
					if need := math.Floor(deepest * s * zoom * scale); below < need {
						t.Errorf("size %g at %g: %g pixels below the baseline are too few for %g", s*zoom, scale, below, need)
					}
				}
			}
		}
	}
}
