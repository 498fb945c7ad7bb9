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
	for n := range 60 {
		last := 20 + n%7
		for k := range 1 + n%4 {
			f.ask(request{width: 10 + k, height: 10, dpi: 96, moving: (n+k)%3 == 0})
		}
		f.ask(request{width: last, height: 10, dpi: 96, sight: picture.NewOrbit(0.1, 0.2), moving: n%2 == 0})
		limit := time.Now().Add(5 * time.Second)
		for {
			if d := f.take(); d != nil && d.full && d.image.Rect.Dx() == last {
				break
			}
			if time.Now().After(limit) {
				t.Fatalf("request %d was not drawn", n)
			}
			time.Sleep(200 * time.Microsecond)
		}
	}
}
