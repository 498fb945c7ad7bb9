//go:build cgo && !nowindow

package window

import (
	"sync/atomic"
	"testing"
	"time"

	"lobewright/app/picture"
)

// Whatever comes between, the last request is drawn, in full.
func TestTheLastRequestIsAlwaysDrawn(t *testing.T) {
	var ready atomic.Int64
	f := newFrames(func() { ready.Add(1) }, func(fault any) { t.Error(fault) })
	defer f.close()
	// Frames must take long enough for a late word to find them begun, and
	// the drawing goroutine must often stand idle, so that it begins at once.
	const rounds, side = 120, 300
	for n := range rounds {
		last := side + n%7
		for k := range n % 3 {
			f.ask(request{width: side - 1 - k, height: side, dpi: 96, moving: (n+k)%3 == 0})
		}
		f.ask(request{width: last, height: side, dpi: 96, sight: picture.NewOrbit(0.1, 0.2), moving: n%8 == 0})
		limit := time.Now().Add(3 * time.Second)
		for {
			if d := f.take(); d != nil && d.full && d.image.Rect.Dx() == last {
				break
			}
			if time.Now().After(limit) {
				t.Fatalf("request %d was not drawn", n)
			}
			time.Sleep(50 * time.Microsecond)
		}
	}
}

// A request gives up the frame before it, and then only can be begun: if it
// could begin first, it might be given up itself.
func TestARequestCannotBeginBeforeTheFrameBeforeIsGivenUp(t *testing.T) {
	f := &frames{want: make(chan request, 1)} // nobody draws
	given := make(chan bool, 1)
	f.cancel = func() { given <- len(f.want) == 0 }
	f.ask(request{width: 2, height: 2})
	if before := <-given; !before {
		t.Error("the request could be begun before the frame before it was given up")
	}
	if len(f.want) != 1 {
		t.Error("the request is lost")
	}
}
