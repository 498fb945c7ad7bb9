//go:build cgo && !nowindow

package window

import (
	"lobewright/app/study"
	"lobewright/app/work"
)

// carried is the file of the study at hand for a figure to carry; nil if the
// study does not want that, or if it is too large, which spoils no figure.
func (u *ui) carried() []byte {
	return carriedOf(u.now(), u.state.Structure)
}

// carriedOf is the file of a study for a figure to carry; see ui.carried.
func carriedOf(s study.Study, structure *work.Structure) []byte {
	if s.Figure.NoStudy || structure == nil {
		return nil
	}
	contained, err := work.Contained(s, structure)
	if err != nil {
		return nil
	}
	data, err := study.Encode(contained)
	if err != nil {
		return nil
	}
	return data
}
