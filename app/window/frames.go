//go:build cgo && !nowindow

package window

import (
	"context"
	"image"
	"sync"
	"sync/atomic"
	"time"

	"lobewright/app/picture"
)

// A request asks for one frame of the picture.
type request struct {
	shown picture.Shown
	// beside are further pictures under the same camera.
	beside        []picture.Shown
	sight         picture.Orbit
	width, height int
	dpi           float64
	// moving asks for a quick frame now and a full one at rest.
	moving bool
}

// A drawn frame is an image with the scene that it was drawn from.
type drawn struct {
	cells []drawnCell
	image *image.RGBA
	full  bool
	// structure tells that it is not the mere ground.
	structure bool
}

// frames draws pictures in the background. The newest request wins; images go
// round between the goroutine that draws and the one that shows.
type frames struct {
	want   chan request
	free   chan *drawn
	ready  atomic.Pointer[drawn]
	taken  chan struct{} // holds one: the frame that was ready has been taken
	shown  *drawn        // the toolkit's goroutine only
	notify func()        // a frame is ready
	failed func(any)
	ctx    context.Context
	stop   context.CancelFunc
	done   sync.WaitGroup
	count  atomic.Int64  // frames drawn
	took   time.Duration // for the last frame; the drawing goroutine only

	mu     sync.Mutex
	cancel context.CancelFunc // of a full frame that is being drawn
}

// Times of the drawing.
const (
	// settle is how long nothing moves before a full frame is drawn.
	settle = 60 * time.Millisecond
	// slow is a quick frame that takes too long to turn smoothly: from then on
	// quick frames have half the resolution; fast brings the whole back.
	slow, fast = 24 * time.Millisecond, 6 * time.Millisecond
	// idle is how long nothing is drawn before the buffers are given up.
	idle = 2 * time.Second
)

func newFrames(notify func(), failed func(any)) *frames {
	f := &frames{want: make(chan request, 1), free: make(chan *drawn, 3), taken: make(chan struct{}, 1), notify: notify, failed: failed}
	f.ctx, f.stop = context.WithCancel(context.Background())
	for range cap(f.free) {
		f.free <- nil
	}
	f.done.Add(1)
	go f.work()
	return f
}

// ask takes the place of a request that nobody has begun yet. The toolkit's
// goroutine only.
func (f *frames) ask(r request) {
	// A full frame that is being drawn is given up, before the request can
	// begin: afterwards it might be this one.
	f.mu.Lock()
	if f.cancel != nil {
		f.cancel()
	}
	f.mu.Unlock()
	select {
	case <-f.want:
	default:
	}
	f.want <- r
}

// take returns the newest frame, which stays the caller's until the next call;
// nil before the first. The toolkit's goroutine only.
func (f *frames) take() *drawn {
	if d := f.ready.Swap(nil); d != nil {
		select {
		case f.taken <- struct{}{}:
		default:
		}
		if f.shown != nil {
			f.free <- f.shown
		}
		f.shown = d
	}
	return f.shown
}

func (f *frames) close() {
	f.stop()
	f.done.Wait()
}

// work draws until close.
func (f *frames) work() {
	defer f.done.Done()
	defer func() {
		if fault := recover(); fault != nil {
			f.failed(fault)
		}
	}()
	var (
		drawer drawer
		half   bool
		next   *request
	)
	for {
		var r request
		if next != nil {
			r, next = *next, nil
		} else {
			select {
			case r = <-f.want:
			case <-time.After(idle):
				drawer.renderer.Forget()
				select {
				case r = <-f.want:
				case <-f.ctx.Done():
					return
				}
			case <-f.ctx.Done():
				return
			}
		}
		if r.moving {
			q := r
			if half {
				q.width, q.height, q.dpi = (r.width+1)/2, (r.height+1)/2, r.dpi/2
			}
			if !f.draw(f.ctx, &drawer, q, true) {
				return
			}
			switch {
			case !half && f.took > slow:
				half = true
			case half && f.took < fast:
				half = false
			}
			select {
			case n := <-f.want:
				next = &n
				continue
			case <-time.After(settle):
			case <-f.ctx.Done():
				return
			}
		}
		ctx, cancel := context.WithCancel(f.ctx)
		f.mu.Lock()
		f.cancel = cancel
		f.mu.Unlock()
		if len(f.want) > 0 {
			cancel()
		}
		ok := f.draw(ctx, &drawer, r, false)
		f.mu.Lock()
		f.cancel = nil
		f.mu.Unlock()
		cancel()
		if !ok {
			return
		}
	}
}

// waitTaken waits until the frame before is on its way to the screen: the next
// one is drawn meanwhile, but no third, which would be drawn for nothing. It
// does not wait for long, since a hidden window takes none.
func (f *frames) waitTaken() {
	if f.ready.Load() == nil {
		return
	}
	const patience = 40 * time.Millisecond
	select {
	case <-f.taken:
	case <-time.After(patience):
	case <-f.ctx.Done():
	}
}

// draw draws a frame and hands it over; false after close.
func (f *frames) draw(ctx context.Context, w *drawer, r request, quick bool) bool {
	began := time.Now()
	var d *drawn
	select {
	case d = <-f.free:
	case <-f.ctx.Done():
		return false
	}
	if d == nil || d.image.Rect.Dx() != r.width || d.image.Rect.Dy() != r.height {
		d = &drawn{image: image.NewRGBA(image.Rect(0, 0, r.width, r.height))}
	}
	d.full, d.structure = !quick, r.shown.Group != nil
	if err := w.draw(ctx, d, r, quick); err != nil {
		f.free <- d
		return f.ctx.Err() == nil
	}
	f.count.Add(1)
	f.took = time.Since(began)
	f.waitTaken()
	select {
	case <-f.taken: // it told of an older frame
	default:
	}
	if old := f.ready.Swap(d); old != nil {
		f.free <- old
	}
	f.notify()
	return true
}
