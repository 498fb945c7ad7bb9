//go:build cgo && !nowindow

package window

import (
	"slices"

	"lobewright/app/notation"
	"lobewright/app/picture"
)

// mostStills is how many group orbitals side by side are each shown as stills;
// of more, the end has to do.
const mostStills = 3

// stills are the start, the middle and the end of the operation at hand, side
// by side for each of the pictures, as it is shown without motion; the pictures
// themselves where it is not played. The middle of an improper rotation is the
// end of its turn.
func (u *ui) stills(pictures []picture.Shown) []picture.Shown {
	op, known := u.operation()
	_, growing := u.tally.column()
	if u.motion || !known || growing || u.now().Moment < 1 || len(pictures[0].Coefficients) == 0 || op.Steps() == 0 ||
		len(pictures) > mostStills {
		return pictures
	}
	middle := "ledger.stillMiddle"
	if op.Steps() == 2 {
		middle = "ledger.stillTurned"
	}
	var out []picture.Shown
	for _, alone := range pictures {
		for _, still := range []struct {
			key    string
			moment float64
		}{{"ledger.stillStart", 0}, {middle, 0.5}, {"ledger.stillEnd", 1}} {
			shown := alone
			shown.Before, shown.Fade, shown.Moment = nil, 0, still.moment
			shown.Notes = []notation.Text{notation.Words(say(still.key))}
			if len(pictures) > 1 {
				shown.Notes = append(slices.Clip(alone.Notes[:1]), shown.Notes...)
			}
			if len(out) > 0 {
				shown.Look.NoAxes = true // one triad is enough under one camera
			}
			out = append(out, shown)
		}
	}
	return out
}
