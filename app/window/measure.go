//go:build cgo && !nowindow

package window

import (
	"fmt"
	"io"
	"os"
	"runtime"
	"slices"
	"time"

	"fyne.io/fyne/v2"
)

// What is measured and printed where the variable LOBEWRIGHT_MEASURE is set.

// measureSpots has panes print where their spots are, for whoever moves the
// mouse by program.
var measureSpots bool

// measured are figures of speed. A nil one measures nothing.
type measured struct {
	out  io.Writer
	pace pace
	// The basis that was chosen last, and when, until its small pictures stand
	// there.
	basis   []string
	since   time.Time
	waiting bool
}

// chosen begins to measure with a new basis.
func (m *measured) chosen(basis []string) {
	if m != nil && !slices.Equal(basis, m.basis) {
		m.basis, m.since, m.waiting = slices.Clone(basis), time.Now(), len(basis) > 0
	}
}

// pictures ends that: all small pictures in sight are drawn.
func (m *measured) pictures(basis []string) {
	if m != nil && m.waiting && slices.Equal(basis, m.basis) {
		m.waiting = false
		fmt.Fprintf(m.out, "small pictures of %q after %d ms\n", basis, time.Since(m.since).Milliseconds())
	}
}

// frame counts a frame on the screen.
func (m *measured) frame(playing bool) {
	if m == nil {
		return
	}
	m.pace.frame(m.out, time.Now(), playing)
}

// A pace is how steadily frames come while something plays.
type pace struct {
	began, last time.Time
	frames      int // after the first
	longest     time.Duration
	running     bool
}

// frame counts a frame, and writes what has been played, where that is over or
// has lasted for a second.
func (p *pace) frame(out io.Writer, now time.Time, playing bool) {
	if p.running {
		p.frames++
		p.longest = max(p.longest, now.Sub(p.last))
		p.last = now
		if played := now.Sub(p.began); (!playing || played >= time.Second) && p.frames > 1 {
			fmt.Fprintf(out, "played for %d ms: %.1f frames a second, %d ms for the slowest\n", played.Milliseconds(), float64(p.frames)/played.Seconds(), p.longest.Milliseconds())
			*p = pace{began: now, last: now, running: playing}
		}
	}
	if playing && !p.running {
		*p = pace{began: now, last: now, running: true}
	}
	p.running = playing
}

// measure prints every second where things are and how many frames were drawn and
// shown if there were some, and after a few seconds at rest what memory is in use.
func (u *ui) measure(done <-chan struct{}) {
	tick := time.NewTicker(time.Second)
	defer tick.Stop()
	last, lastShown := int64(0), 0
	const rest = 3 // seconds
	still := 0
	for {
		select {
		case <-done:
			return
		case <-tick.C:
		}
		drawn := u.view.frames.count.Load()
		if still++; drawn != last {
			still = 0
		}
		came := drawn - last
		fyne.Do(func() {
			shown := u.view.shownCount
			for name, o := range map[string]fyne.CanvasObject{"view": u.view, "scrub": u.scrub, "angle": u.angle, "typed": u.basis} {
				at := fyne.CurrentApp().Driver().AbsolutePositionForObject(o)
				fmt.Fprintf(os.Stderr, "spot\t%s\t%.0f\t%.0f\n", name, at.X+o.Size().Width/2, at.Y+o.Size().Height/2)
			}
			if came > 1 {
				fmt.Fprintf(os.Stderr, "frames in a second: %d drawn, %d shown\n", came, shown-lastShown)
			}
			lastShown = shown
		})
		last = drawn
		if still == rest {
			fmt.Fprintln(os.Stderr, memoryAtRest())
		}
	}
}

// memoryPrefix begins what memoryAtRest tells.
const memoryPrefix = "memory\t"

// memoryAtRest tells how much memory is in use when all that is not has been
// found, and how many goroutines there are.
func memoryAtRest() string {
	var m runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&m)
	return fmt.Sprintf(memoryPrefix+"%d\t%d", m.HeapAlloc, runtime.NumGoroutine())
}
