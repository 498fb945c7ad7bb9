//go:build cgo && !nowindow

package window

import (
	"math"

	"fyne.io/fyne/v2"
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
)

// key serves the picture, and the window where nothing has the focus.
func (u *ui) key(e *fyne.KeyEvent) bool {
	shift := u.modifiers()&fyne.KeyModifierShift != 0
	turn := func(x, y float64) {
		const step = math.Pi / 36
		u.moveBy(study.StepOrbit, func(c study.Camera, rows mgl64.Mat3) study.Camera { return c.Orbited(rows, x*step, y*step) })
	}
	pan := func(x, y float64) {
		by := 24 * u.view.perPixel() * u.view.scale()
		u.moveBy(study.StepPan, func(c study.Camera, _ mgl64.Mat3) study.Camera { return c.Panned(x*by, y*by) })
	}
	move := turn
	if shift {
		move = pan
	}
	switch e.Name {
	case fyne.KeyLeft:
		move(-1, 0)
	case fyne.KeyRight:
		move(1, 0)
	case fyne.KeyUp:
		move(0, 1)
	case fyne.KeyDown:
		move(0, -1)
	case fyne.KeySpace:
		u.togglePlay()
	case fyne.KeyHome:
		u.jump(0)
	case fyne.KeyEnd:
		u.jump(1)
	case fyne.KeyPageUp:
		u.nextOrbital(-1)
	case fyne.KeyPageDown:
		u.nextOrbital(1)
	case fyne.KeyEscape:
		u.escape()
	case fyne.KeyF1:
		u.showHelp()
	default:
		return false
	}
	return true
}

// typed serves letters in the picture.
func (u *ui) typed(r rune) bool {
	switch r {
	case '+', '=':
		u.zoomBy(1.2)
	case '-', '−':
		u.zoomBy(1 / 1.2)
	case 'f', 'F', '0':
		u.fit()
	case 'x':
		u.along(mgl64.Vec3{1, 0, 0})
	case 'y':
		u.along(mgl64.Vec3{0, 1, 0})
	case 'z':
		u.along(mgl64.Vec3{0, 0, 1})
	case 'X':
		u.along(mgl64.Vec3{-1, 0, 0})
	case 'Y':
		u.along(mgl64.Vec3{0, -1, 0})
	case 'Z':
		u.along(mgl64.Vec3{0, 0, -1})
	case 'a':
		u.alongOperation()
	case 'o':
		u.tally.start()
	case '>':
		u.tally.faster(1)
	case '<':
		u.tally.faster(-1)
	case '.':
		u.nextOperation(1)
	case ',':
		u.nextOperation(-1)
	case 'p':
		u.toggleSplit()
	case 'k':
		u.toggleNodes()
	case 'h':
		u.holdOrbital()
	case ']':
		u.turnStep(1)
	case '[':
		u.turnStep(-1)
	case 'n':
		u.nextFunction(1)
	case 'N':
		u.nextFunction(-1)
	default:
		return false
	}
	return true
}

// escape gives up a gesture, closes what lies over the window, or stops what
// plays.
func (u *ui) escape() {
	switch {
	case u.win.Canvas().Overlays().Top() != nil:
		u.win.Canvas().Overlays().Top().Hide()
	case u.tally.ledger != nil:
		u.tally.stop()
	case u.player.playing:
		u.player.stop()
	case u.history.Open():
		u.history.Cancel()
		u.changed()
	case u.pages.open != noPage:
		u.pages.turnTo(noPage)
	}
}
