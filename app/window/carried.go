//go:build cgo && !nowindow

package window

import (
	"lobewright/app/study"
	"lobewright/app/work"
)

// carried is the file of the study at hand for a figure to carry; nil if the
// study does not want that, or if it is too large, which spoils no figure.
func (u *ui) carried() []byte {
	s := u.now()
	if s.Figure.NoStudy || u.state.Structure == nil {
		return nil
	}
	contained, err := work.Contained(s, u.state.Structure)
	if err != nil {
		return nil
	}
	data, err := study.Encode(contained)
	if err != nil {
		return nil
	}
	return data
}
