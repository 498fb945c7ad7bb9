//go:build cgo && !nowindow

package window

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"log"
	"os"
	"strings"
	"sync"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/app"

	"lobewright/app/picture"
	"lobewright/app/session"
	"lobewright/app/study"
	_ "lobewright/app/window/language"     // before the toolkit
	_ "lobewright/app/window/toolkitcache" // before the toolkit
	"lobewright/assets"
)

// name is what the window system knows the program by.
const name = "lobewright"

// Run opens the window and returns when it is closed. It must be called on
// the main goroutine. The error, one line, says why there is no window.
func Run(ctx context.Context, o Options) (err error) {
	release, err := display()
	if err != nil {
		return err
	}
	said := &toolkitLog{}
	log.SetFlags(0)
	log.SetOutput(said)
	defer func() {
		if fault := recover(); fault != nil {
			trace()
			// The toolkit panics where it finds no display.
			err = fmt.Errorf("the window cannot be opened: %s", oneLine(fmt.Sprint(fault)))
			if reason := said.reason(); reason != "" {
				err = errors.New("the window cannot be opened: " + reason)
			}
		}
	}()
	began := processStart()
	measure := os.Getenv("LOBEWRIGHT_MEASURE") != ""
	mark := func(what string) {
		if measure {
			fmt.Fprintf(os.Stderr, "%5d ms  %s\n", time.Since(began).Milliseconds(), what)
		}
	}
	mark("the program runs")
	go picture.Prepare() // while the toolkit opens the window
	ended := make(chan struct{})
	defer close(ended)
	limitHeap(ended)
	fewerTypefaces()
	app.SetMetadata(fyne.AppMetadata{
		ID: "org.lobewright.window", Name: "Lobewright", Version: o.Version,
		// Every call from another goroutine goes through fyne.Do; without
		// this the toolkit looks up goroutines through stack traces.
		Migrations: map[string]bool{"fyneDo": true},
	})
	a := app.New()
	a.SetIcon(fyne.NewStaticResource("lobewright.png", assets.Icon()))
	kept, notes := session.Open(session.Options{Interval: time.Second})
	win := a.NewWindow(name)
	release()
	if reason := said.reason(); reason != "" {
		_ = kept.Close()
		return errors.New("the window cannot be opened: " + reason)
	}
	mark("the toolkit has a window")
	speak(languageOf(kept.Preferences()))
	speakToolkit()
	u := newUI(a, win, kept, o.Version, fyne.Do)
	mark("the panes are made")
	for _, n := range notes {
		u.notice = n.In(tongue())
	}
	p := kept.Preferences()
	size := fyne.NewSize(1280, 800)
	if p.Width >= 640 && p.Height >= 480 {
		size = fyne.NewSize(float32(p.Width), float32(p.Height))
	}
	win.Resize(size)
	win.SetTitle("Lobewright")
	win.SetMaster()
	win.SetPadded(false)
	win.SetOnDropped(u.dropped)
	win.SetCloseIntercept(u.quit)
	a.Lifecycle().SetOnStopped(u.close)
	u.begin(o.Structure)

	// Without OpenGL the toolkit goes on and shows nothing.
	painted := make(chan struct{})
	u.view.painted = func() { close(painted) }
	u.view.first = func() { mark("first picture") }
	u.mark = mark
	if measure {
		measureSpots = true
		u.measured = &measured{out: os.Stderr}
		u.view.fresh = func() { u.measured.frame(u.player.playing || u.tally.playing) }
		go u.measure(ended)
	}
	var failure error
	var once sync.Once
	go func() {
		const patience = 10 * time.Second
		deadline := time.After(patience)
		poll := time.NewTicker(200 * time.Millisecond)
		defer poll.Stop()
		for {
			reason := ""
			select {
			case <-painted:
				return
			case <-ctx.Done():
				fyne.Do(u.quit)
				return
			case <-deadline:
				reason = "nothing was drawn within 10 s; is there OpenGL?"
			case <-poll.C:
				reason = said.reason()
			}
			if reason != "" {
				once.Do(func() { failure = errors.New("the window cannot be opened: " + reason) })
				fyne.Do(a.Quit)
				return
			}
		}
	}()
	go func() {
		select {
		case <-painted:
			<-ctx.Done()
			fyne.Do(u.quit)
		case <-ctx.Done():
		}
	}()
	win.ShowAndRun()
	u.close()
	return failure
}

// begin shows the structure of the command line, or what the last session
// left, or the demonstration.
func (u *ui) begin(structure string) {
	restored, ok := u.session.Study()
	if structure == "" {
		if ok && (restored.Structure != "" || restored.Coordinates != "") {
			u.start(restored)
		} else {
			u.start(demoStudy(study.Study{}, firstDemo))
			if !u.session.Preferences().Shown {
				u.steps.begin()
			}
		}
		return
	}
	u.start(study.Study{})
	if !strings.HasPrefix(structure, "demo:") && !strings.HasPrefix(structure, "ideal:") {
		structure = expanded(structure)
	}
	u.open(structure, nil)
}

// A toolkitLog keeps what the toolkit logs from standard error.
type toolkitLog struct {
	mu   sync.Mutex
	text bytes.Buffer
}

// Write implements io.Writer.
func (l *toolkitLog) Write(p []byte) (int, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	const most = 1 << 16
	if l.text.Len() < most {
		l.text.Write(p)
	}
	if os.Getenv("LOBEWRIGHT_MEASURE") != "" {
		os.Stderr.Write(p)
	}
	return len(p), nil
}

// reason is why the toolkit could not open a window; empty if it could.
func (l *toolkitLog) reason() string {
	l.mu.Lock()
	defer l.mu.Unlock()
	text := l.text.String()
	for _, sign := range []string{"window creation error", "GLX extension not found", "Failed to open display", "DISPLAY environment variable is missing", "failed to initialise GLFW"} {
		if strings.Contains(text, sign) {
			if strings.Contains(text, "GLX") {
				return "the display has no OpenGL"
			}
			return sign
		}
	}
	return ""
}

func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }
