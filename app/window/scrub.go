//go:build cgo && !nowindow

package window

import (
	"fyne.io/fyne/v2/widget"
)

// A scrubBar is a slider whose drag is one gesture.
type scrubBar struct {
	widget.Slider
	change  func(float64)
	end     func()
	setting bool
}

func newScrubBar(u *ui, most, step float64) *scrubBar {
	s := &scrubBar{}
	s.Min, s.Max, s.Step = 0, most, step
	s.OnChanged = func(v float64) {
		if !s.setting {
			u.guard(func() { s.change(v) })
		}
	}
	s.OnChangeEnded = func(float64) {
		if !s.setting {
			u.guard(s.end)
		}
	}
	s.ExtendBaseWidget(s)
	return s
}

// set shows a value without telling of a change.
func (s *scrubBar) set(v float64) {
	if s.Value == v {
		return
	}
	s.setting = true
	s.SetValue(v)
	s.setting = false
}
