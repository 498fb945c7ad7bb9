package work

import (
	"sync/atomic"
	"time"
)

// A notice has one function run on the interface's thread, and never has more
// than one run waiting there: whoever gives it while one waits is served by
// that.
type notice struct {
	post    func(func())
	run     func()
	waiting atomic.Bool
}

// now gives the notice.
func (n *notice) now() {
	if n.waiting.CompareAndSwap(false, true) {
		n.post(n.deliver)
	}
}

// soon gives the notice after a while, so that many small news are one; none
// that wait when closed says so are given.
func (n *notice) soon(after time.Duration, closed func() bool) {
	if !n.waiting.CompareAndSwap(false, true) {
		return
	}
	time.AfterFunc(after, func() {
		if !closed() {
			n.post(n.deliver)
		}
	})
}

// deliver runs on the interface's thread. What happens while the function runs
// is news again.
func (n *notice) deliver() {
	n.waiting.Store(false)
	n.run()
}
