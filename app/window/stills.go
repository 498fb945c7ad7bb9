//go:build cgo && !nowindow

package window

import (
	"lobewright/app/notation"
	"lobewright/app/picture"
)

// stills are the start, the middle and the end of the operation at hand, side
// by side, as it is shown without motion; ok is false where it is not played.
// The middle of an improper rotation is the end of its turn.
func (u *ui) stills(alone picture.Shown) (first picture.Shown, beside []picture.Shown) {
	op, known := u.operation()
	_, growing := u.tally.column()
	if u.motion || !known || growing || u.now().Moment < 1 || len(alone.Coefficients) == 0 || op.Steps() == 0 {
		return alone, nil
	}
	middle := "ledger.stillMiddle"
	if op.Steps() == 2 {
		middle = "ledger.stillTurned"
	}
	for i, still := range []struct {
		key    string
		moment float64
	}{{"ledger.stillStart", 0}, {middle, 0.5}, {"ledger.stillEnd", 1}} {
		shown := alone
		shown.Before, shown.Fade, shown.Moment = nil, 0, still.moment
		shown.Notes = []notation.Text{notation.Words(say(still.key))}
		if i == 0 {
			first = shown
			continue
		}
		shown.Look.NoAxes = true // one triad is enough under one camera
		beside = append(beside, shown)
	}
	return first, beside
}
