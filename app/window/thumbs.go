//go:build cgo && !nowindow

package window

import (
	"context"
	"image"
	"math"
	"sync"

	"lobewright/app/picture"
	"lobewright/assets"
	"lobewright/render"
)

// thumbs draws the small pictures of group orbitals in the background, those
// first that are looked at. Its maps belong to the toolkit's goroutine.
type thumbs struct {
	u      *ui
	images map[thumbKey]*image.RGBA
	latest map[int]*image.RGBA // by group orbital: shown until the new one is drawn
	asked  map[thumbKey]bool
	want   chan thumbJob
	ctx    context.Context
	stop   context.CancelFunc
	done   sync.WaitGroup
	// missing is how many pictures that were asked for were not there, since
	// the owner set it to 0.
	missing int
	round   int // raised when other group orbitals take the place of these
}

// mostThumbs bounds the pictures that are kept: turning a set makes many.
const mostThumbs = 120

type thumbKey struct {
	orbital, pixels int
	coefficients    uint64
	palette         assets.Palette
	round           int
}

type thumbJob struct {
	key   thumbKey
	shown picture.Shown
	sight picture.Orbit
	scale float64
}

func newThumbs(u *ui) *thumbs {
	t := &thumbs{u: u, want: make(chan thumbJob, 64), latest: map[int]*image.RGBA{}}
	t.ctx, t.stop = context.WithCancel(context.Background())
	t.clear()
	t.done.Add(1)
	go t.work()
	return t
}

func (t *thumbs) clear() {
	t.images, t.asked = map[thumbKey]*image.RGBA{}, map[thumbKey]bool{}
}

// forget drops all pictures.
func (t *thumbs) forget() {
	t.round++
	t.clear()
	t.latest = map[int]*image.RGBA{}
}

func (t *thumbs) close() {
	t.stop()
	t.done.Wait()
}

// get is the picture of a group orbital with a side in units; nil if it is
// still to be drawn.
func (t *thumbs) get(orbital int, side float64) *image.RGBA {
	u := t.u
	scale := u.view.scale()
	if c := u.win.Canvas(); c != nil {
		scale = float64(c.Scale())
	}
	scale *= u.follows.scale()
	o := u.state.Orbitals
	key := thumbKey{orbital, int(math.Floor(side * scale)), fingerprint(o.Projection.Orbitals[orbital].Coefficients), u.palette(), t.round}
	if img := t.images[key]; img != nil {
		return img
	}
	t.missing++
	before := t.latest[orbital]
	if before != nil && before.Rect.Dx() != key.pixels {
		before = nil
	}
	if t.asked[key] || key.pixels < 4 {
		return before
	}
	palette := u.palette()
	l := u.now().Look
	l.NoLabels, l.NoAxes, l.Elements, l.Displacements = true, true, false, false
	job := thumbJob{key: key, scale: scale, shown: picture.Shown{
		Group: o.Group, Basis: o.Basis, Coefficients: o.Projection.Orbitals[orbital].Coefficients,
		Look: l, Palette: &palette,
	}, sight: u.sights.sight(u.now().Camera, o.Group, o.Basis, false)}
	// Small pictures are seen from the program's own place, whole.
	job.sight = u.sights.best
	select {
	case t.want <- job:
		t.asked[key] = true
	default: // it asks again when it is drawn again
	}
	return before
}

func (t *thumbs) work() {
	defer t.done.Done()
	defer func() {
		if fault := recover(); fault != nil {
			t.u.failedAside(fault)
		}
	}()
	var live picture.Live
	var renderer render.Renderer
	for {
		var job thumbJob
		if len(t.want) == 0 {
			renderer.Forget() // nothing may be wanted for long
		}
		select {
		case job = <-t.want:
		case <-t.ctx.Done():
			return
		}
		n := job.key.pixels
		f, err := live.Frame(job.shown, job.sight, n, n, 96*job.scale, true)
		if err != nil {
			continue
		}
		f.Quality.Workers = 1 // the picture in the middle comes first
		img := image.NewRGBA(image.Rect(0, 0, n, n))
		if renderer.Draw(t.ctx, img, &f.Scene, f.Camera, f.Look, f.Quality, render.Band{}) != nil {
			return
		}
		t.u.post(func() {
			if job.key.round == t.round {
				if len(t.images) >= mostThumbs {
					t.clear()
				}
				t.images[job.key], t.latest[job.key.orbital] = img, img
				t.u.follows.Update()
			}
		})
	}
}
