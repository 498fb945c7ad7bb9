//go:build cgo && !nowindow

package window

import (
	"sync/atomic"
	"time"

	"fyne.io/fyne/v2/theme"

	"lobewright/app/picture"
	"lobewright/app/study"
)

// A player moves the moment of the operation at hand. Whether it runs is no
// part of the study.
type player struct {
	u       *ui
	playing bool
	began   time.Time
	clock   *clock
	shown   bool // the button shows a pause
	said    time.Time
}

func newPlayer(u *ui) *player { return &player{u: u} }

// start plays from the moment of the study, or from the start if that is the
// end. The whole is one step.
func (p *player) start() {
	u := p.u
	op, ok := u.operation()
	if !ok {
		return
	}
	p.stop()
	s := u.now()
	if !u.motion {
		// All at once, as stills; once more, back to the start.
		if s.Moment >= 1 {
			s.Moment = 0
		} else {
			s.Moment = 1
		}
		u.history.Do(study.StepPlay, s)
		u.changed()
		return
	}
	if s.Moment >= 1 {
		s.Moment = 0
	}
	u.history.Begin(study.StepPlay)
	u.history.Set(s)
	p.playing = true
	p.began = time.Now().Add(-picture.Elapsed(op, s.Moment))
	p.clock = startClock(u.post, func() { u.guard(p.tick) })
	p.label()
}

func (p *player) tick() {
	u := p.u
	if !p.playing {
		return
	}
	op, ok := u.operation()
	if !ok {
		p.stop()
		return
	}
	s := u.now()
	s.Moment = picture.Moment(op, time.Since(p.began))
	if !u.history.Open() {
		u.history.Begin(study.StepPlay) // a gesture by hand came between
	}
	u.history.Set(s)
	if s.Moment >= 1 {
		p.stop()
		return
	}
	u.show(true)
	// Nobody reads faster, and every pane that is drawn costs frames.
	const often = 100 * time.Millisecond
	if now := time.Now(); now.Sub(p.said) > often {
		p.said = now
		u.said.Update()
	}
}

// stop ends the playing where it is.
func (p *player) stop() {
	p.u.tally.drop()
	if !p.playing {
		return
	}
	p.playing = false
	p.clock.stop()
	p.u.history.Commit()
	p.label()
	p.u.changed()
}

// label makes the button show what it does.
func (p *player) label() {
	playing := p.playing || p.u.tally.playing
	if p.u.play == nil || p.shown == playing {
		return
	}
	p.shown = playing
	icon := theme.MediaPlayIcon()
	if playing {
		icon = theme.MediaPauseIcon()
	}
	p.u.play.SetIcon(icon)
}

func (u *ui) togglePlay() {
	if u.tally.ledger != nil && !u.tally.done {
		u.tally.toggle()
		return
	}
	if u.player.playing {
		u.player.stop()
	} else {
		u.player.start()
	}
}

// jump goes to the start or the end.
func (u *ui) jump(moment float64) {
	s := u.now()
	s.Moment = moment
	u.do(study.StepScrub, s)
}

// A clock calls a function on the toolkit's goroutine about 60 times a
// second, and never queues more than one call.
type clock struct {
	done    chan struct{}
	pending atomic.Bool
}

func startClock(post func(func()), tick func()) *clock {
	c := &clock{done: make(chan struct{})}
	go func() {
		t := time.NewTicker(time.Second / 120)
		defer t.Stop()
		for {
			select {
			case <-c.done:
				return
			case <-t.C:
				if c.pending.CompareAndSwap(false, true) {
					post(func() {
						c.pending.Store(false)
						select {
						case <-c.done:
						default:
							tick()
						}
					})
				}
			}
		}
	}()
	return c
}

func (c *clock) stop() { close(c.done) }

// A glide moves the camera to where it was told to go.
type glide struct {
	from  picture.Orbit
	began time.Time
	clock *clock
}

const glideTime = 350 * time.Millisecond

// glideFrom lets the picture move on from where it is to what the study says.
func (u *ui) glideFrom(from picture.Orbit) {
	if !u.motion {
		return
	}
	if u.glide != nil {
		u.glide.clock.stop()
	}
	g := &glide{from: from, began: time.Now()}
	u.glide = g
	g.clock = startClock(u.post, func() {
		u.guard(func() {
			if u.glide == g && time.Since(g.began) >= glideTime {
				u.glide = nil
				g.clock.stop()
			}
			u.show(u.glide != nil)
		})
	})
}

func (g *glide) at(to picture.Orbit) picture.Orbit {
	return g.from.Between(to, picture.Eased(float64(time.Since(g.began))/float64(glideTime)))
}

// A fading leads from the lobes that were shown to others on the same basis.
type fading struct {
	before []float64
	began  time.Time
	clock  *clock
}

const fadeTime = 300 * time.Millisecond

// fade begins a fading from what is shown now.
func (u *ui) fade() {
	shown := u.view.shown
	if len(u.view.beside) > 0 {
		return // partners side by side do not take each other's place
	}
	if !u.motion || len(shown.Coefficients) == 0 || shown.Moment > 0 {
		return
	}
	if u.fading != nil {
		u.fading.clock.stop()
	}
	f := &fading{before: shown.Coefficients, began: time.Now()}
	u.fading = f
	f.clock = startClock(u.post, func() {
		u.guard(func() {
			if u.fading == f && time.Since(f.began) >= fadeTime {
				u.fading = nil
				f.clock.stop()
			}
			u.show(u.fading != nil)
		})
	})
}

// apply sets the fading in what is shown; a nil fading does nothing.
func (f *fading) apply(u *ui, shown *picture.Shown) {
	if f == nil || len(f.before) != len(shown.Coefficients) {
		return
	}
	shown.Before = f.before
	shown.Fade = picture.Eased(float64(time.Since(f.began)) / float64(fadeTime))
}
