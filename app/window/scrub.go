//go:build cgo && !nowindow

package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"
)

// A scrubBar is a slider whose drag is one gesture.
type scrubBar struct {
	widget.Slider
	change  func(float64)
	end     func()
	setting bool
	hint    string // key
	onHint  func(text string, at fyne.Position)
	help    func()
}

func newScrubBar(u *ui, most, step float64, hint string) *scrubBar {
	s := &scrubBar{hint: hint, onHint: u.hint, help: u.showHelp}
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

// MouseIn implements desktop.Hoverable.
func (s *scrubBar) MouseIn(e *desktop.MouseEvent) {
	s.Slider.MouseIn(e)
	s.onHint(say(s.hint), e.AbsolutePosition)
}

// MouseOut implements desktop.Hoverable.
func (s *scrubBar) MouseOut() {
	s.Slider.MouseOut()
	s.onHint("", fyne.Position{})
}

// TypedKey implements fyne.Focusable.
func (s *scrubBar) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyF1 {
		s.help()
		return
	}
	s.Slider.TypedKey(e)
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

// A track is a line behind a slider: the toolkit draws the part that lies
// before the thumb in the colour of grounds, too pale to see.
type track struct {
	line *canvas.Rectangle
}

// onTrack puts a slider on a track.
func (u *ui) onTrack(s *scrubBar) fyne.CanvasObject {
	t := track{canvas.NewRectangle(u.palette().Rule)}
	u.tracks = append(u.tracks, t)
	return container.NewStack(container.New(t, t.line), s)
}

// Layout implements fyne.Layout.
func (t track) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	const inset, thick = 16, 2
	t.line.Resize(fyne.NewSize(max(0, size.Width-2*inset), thick))
	t.line.Move(fyne.NewPos(inset, (size.Height-thick)/2))
}

// MinSize implements fyne.Layout.
func (t track) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.Size{} }
