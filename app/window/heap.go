//go:build cgo && !nowindow

package window

import (
	"os"
	"runtime/debug"
	"runtime/metrics"
	"time"
)

// Memory that Go may hold before it looks for what is no longer used: enough
// for the usual structures, and for the large ones so much more than what is in
// use that looking never becomes the main work. Without a limit it would hold
// twice what was ever in use at once.
const (
	usualHeap = 100 << 20
	roomHeap  = 20 << 20
	// garbage is how much of what is in use may come to it unused, in percent:
	// a picture in motion makes little.
	garbage = 60
)

// limitHeap keeps the memory that Go holds near what is in use, until done is
// closed. A person's own settings come first.
func limitHeap(done <-chan struct{}) {
	if os.Getenv("GOMEMLIMIT") != "" || os.Getenv("GOGC") != "" {
		return
	}
	live := []metrics.Sample{{Name: "/gc/heap/live:bytes"}}
	debug.SetGCPercent(garbage)
	debug.SetMemoryLimit(usualHeap)
	go func() {
		const often, seldom = time.Second, 15
		tick := time.NewTicker(often)
		defer tick.Stop()
		for n := 1; ; n++ {
			select {
			case <-done:
				return
			case <-tick.C:
			}
			if n%seldom == 0 {
				trimC()
			}
			metrics.Read(live)
			if live[0].Value.Kind() == metrics.KindUint64 {
				debug.SetMemoryLimit(heapLimit(int64(live[0].Value.Uint64())))
			}
		}
	}()
}

// heapLimit is how much memory may be held where so much is in use.
func heapLimit(live int64) int64 { return max(usualHeap, live+live/4+roomHeap) }
