//go:build cgo && !nowindow

package window

import (
	"image"
	"image/color"
	"math"
	"sync/atomic"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/picture"
	"lobewright/app/work"
	"lobewright/render"
)

// A viewport is the picture in the middle. It turns raw events of the mouse
// into what a hand means: the toolkit's own drags lack the right button, and
// its double taps delay every tap.
type viewport struct {
	widget.BaseWidget
	raster *canvas.Raster
	ring   *ring // around the picture while it has the focus
	accent func() color.Color
	frames *frames
	guard  func(func())
	post   func(func())
	zoom   func() float64 // of all sizes, by preference

	// What the picture shows; the owner sets them and calls ask.
	shown  picture.Shown
	beside []picture.Shown // further pictures under the same camera
	sight  picture.Orbit

	width, height int // of the picture in pixels
	picker        render.Renderer
	picked        *work.Basis // that was last picked from
	posted        atomic.Bool
	painted       func() // called once, when the toolkit first asks for the picture
	first         func() // called once, with the first picture of a structure
	fresh         func() // called with every new picture
	shownCount    int

	button        desktop.MouseButton // that is down; 0 none
	pressed, last fyne.Position
	moved         bool
	modifier      fyne.KeyModifier
	lastClick     time.Time
	lastClickAt   fyne.Position
	hover         string
	turnBy        func(dx, dy float64) // pixels of the picture
	panBy         func(dx, dy float64)
	zoomAt        func(factor, x, y float64)
	begin, end    func(pan bool) // of a gesture by hand
	click         func(p picture.Picked, ok bool, add bool)
	fit           func()
	key           func(*fyne.KeyEvent) bool
	typed         func(rune) bool
	menu          func(at fyne.Position)
	onHint        func(text string, at fyne.Position)
	hintFor       func(p picture.Picked) string
	lastHover     time.Time
}

func newViewport(u *ui) *viewport {
	v := &viewport{guard: u.guard, post: u.post, zoom: u.zoom, onHint: u.hint}
	v.raster = canvas.NewRaster(v.generate)
	v.ring = newRing()
	v.accent = func() color.Color { return u.palette().Accent }
	v.frames = newFrames(v.ready, u.failedAside)
	v.ExtendBaseWidget(v)
	return v
}

// CreateRenderer implements fyne.Widget.
func (v *viewport) CreateRenderer() fyne.WidgetRenderer {
	return widget.NewSimpleRenderer(&fyne.Container{Layout: stacked{}, Objects: []fyne.CanvasObject{v.raster, v.ring.Container}})
}

// stacked gives every object the whole size, however small.
type stacked struct{}

func (stacked) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Resize(size)
		o.Move(fyne.Position{})
	}
}

func (stacked) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(120, 90) }

// ready is called on the drawing goroutine. At most one refresh is waiting.
func (v *viewport) ready() {
	if v.posted.CompareAndSwap(false, true) {
		v.post(func() {
			v.posted.Store(false)
			v.raster.Refresh()
		})
	}
}

// ask has the picture drawn anew.
func (v *viewport) ask(moving bool) {
	if v.width < 2 || v.height < 2 {
		return
	}
	v.frames.ask(request{shown: v.shown, beside: v.beside, sight: v.sight, width: v.width, height: v.height, dpi: v.dpi(), moving: moving})
}

// dpi gives millimetres and points of the picture their size: 96 an inch at a
// scale of 1, magnified like all type, though not so that labels would crowd a
// small picture.
func (v *viewport) dpi() float64 {
	const roomy = 240 // units that a picture wants at a zoom of 1
	cell := cellsOf(1+len(v.beside), v.width, v.height)[0]
	side := float64(min(cell.Dx(), cell.Dy())) / v.scale()
	z := v.zoom()
	return 96 * v.scale() * max(min(z, side/roomy), min(z, 1))
}

// scale is the number of pixels a unit of the toolkit.
func (v *viewport) scale() float64 {
	if w := v.Size().Width; w > 0 && v.width > 0 {
		return float64(v.width) / float64(w)
	}
	return 1
}

func (v *viewport) generate(w, h int) image.Image {
	if v.painted != nil {
		f := v.painted
		v.painted = nil
		f()
	}
	if w != v.width || h != v.height {
		v.width, v.height = w, h
		v.ask(true) // quick first
	}
	before := v.frames.shown
	d := v.frames.take()
	if d != before && v.fresh != nil {
		v.fresh()
	}
	if d == nil {
		return image.NewRGBA(image.Rect(0, 0, 1, 1))
	}
	v.shownCount++
	// Pixel by pixel, which costs less, unless a quick picture has fewer.
	v.raster.ScaleMode = canvas.ImageScalePixels
	if d.image.Rect.Dx() != w || d.image.Rect.Dy() != h {
		v.raster.ScaleMode = canvas.ImageScaleSmooth
	}
	if v.first != nil && d.structure {
		f := v.first
		v.first = nil
		f()
	}
	return d.image
}

// pixels is a place of the widget in pixels of the picture.
func (v *viewport) pixels(at fyne.Position) (x, y float64) {
	s := v.scale()
	return float64(at.X) * s, float64(at.Y) * s
}

// pick finds what is seen at a place of the widget, in the frame on screen.
func (v *viewport) pick(at fyne.Position, slack float64) (picture.Picked, bool) {
	d := v.frames.shown
	if d == nil || v.Size().Width < 1 {
		return picture.Picked{Atom: -1}, false
	}
	if v.picked != v.shown.Basis {
		v.picked = v.shown.Basis
		v.picker.Forget() // the buffers were those of another scene
	}
	s := float64(d.image.Rect.Dx()) / float64(v.Size().Width)
	x, y := int(float64(at.X)*s), int(float64(at.Y)*s)
	for _, c := range d.cells {
		if (image.Point{X: x, Y: y}).In(c.at) {
			return c.frame.Pick(&v.picker, x-c.at.Min.X, y-c.at.Min.Y, int(math.Ceil(slack*s)))
		}
	}
	return picture.Picked{Atom: -1}, false
}

// Distances in units, times.
const (
	dragStart   = 3.0 // less than this is a click
	pickSlack   = 4.0
	doubleClick = 350 * time.Millisecond
)

// MouseDown implements desktop.Mouseable.
func (v *viewport) MouseDown(e *desktop.MouseEvent) {
	if c := fyne.CurrentApp().Driver().CanvasForObject(v); c != nil {
		c.Focus(v)
	}
	if v.button != 0 {
		return // a second button does not take over
	}
	v.button, v.pressed, v.last, v.moved, v.modifier = e.Button, e.Position, e.Position, false, e.Modifier
	v.onHint("", fyne.Position{})
}

// MouseUp implements desktop.Mouseable.
func (v *viewport) MouseUp(e *desktop.MouseEvent) {
	if e.Button != v.button {
		return
	}
	button, moved := v.button, v.moved
	v.button, v.moved = 0, false
	v.guard(func() {
		switch {
		case moved:
			v.end(v.pans(button))
		case button == desktop.MouseButtonPrimary:
			v.clicked(e.Position)
		case button == desktop.MouseButtonSecondary && v.menu != nil:
			v.menu(e.AbsolutePosition)
		}
	})
}

func (v *viewport) clicked(at fyne.Position) {
	now := time.Now()
	double := now.Sub(v.lastClick) < doubleClick && distance(at, v.lastClickAt) < dragStart
	v.lastClick, v.lastClickAt = now, at
	p, ok := v.pick(at, pickSlack)
	if double && !ok {
		v.lastClick = time.Time{}
		v.fit()
		return
	}
	v.click(p, ok, v.modifier&(fyne.KeyModifierShift|fyne.KeyModifierControl) != 0)
}

func distance(a, b fyne.Position) float64 {
	return math.Hypot(float64(a.X-b.X), float64(a.Y-b.Y))
}

func (v *viewport) pans(button desktop.MouseButton) bool {
	return button != desktop.MouseButtonPrimary || v.modifier&fyne.KeyModifierShift != 0
}

// drag follows the pointer while a button is down.
func (v *viewport) drag(at fyne.Position) {
	if v.button == 0 {
		return
	}
	if !v.moved {
		if distance(at, v.pressed) < dragStart {
			return
		}
		v.moved = true
		v.begin(v.pans(v.button))
	}
	s := v.scale()
	dx, dy := float64(at.X-v.last.X)*s, float64(at.Y-v.last.Y)*s
	v.last = at
	if v.pans(v.button) {
		v.panBy(dx, dy)
	} else {
		v.turnBy(dx, dy)
	}
}

// Dragged implements fyne.Draggable. It follows the pointer outside of the
// picture too.
func (v *viewport) Dragged(e *fyne.DragEvent) { v.guard(func() { v.drag(e.Position) }) }

// DragEnd implements fyne.Draggable.
func (v *viewport) DragEnd() {
	if v.button != 0 && v.moved {
		// The button was released outside of the picture.
		button := v.button
		v.button, v.moved = 0, false
		v.guard(func() { v.end(v.pans(button)) })
	}
}

// MouseIn implements desktop.Hoverable.
func (v *viewport) MouseIn(*desktop.MouseEvent) {}

// MouseMoved implements desktop.Hoverable. Movements with the right button
// down come here and not to Dragged.
func (v *viewport) MouseMoved(e *desktop.MouseEvent) {
	if v.button != 0 && e.Button == v.button {
		v.guard(func() { v.drag(e.Position) })
		return
	}
	if v.button != 0 && e.Button == 0 {
		v.DragEnd() // released outside of the window
		v.button = 0
	}
	const often = 40 * time.Millisecond // picking costs a few milliseconds
	if now := time.Now(); now.Sub(v.lastHover) > often {
		v.lastHover = now
		p, ok := v.pick(e.Position, 0)
		text := ""
		if ok {
			text = v.hintFor(p)
		}
		if text != v.hover {
			v.hover = text
			v.onHint(text, e.AbsolutePosition)
		}
	}
}

// MouseOut implements desktop.Hoverable.
func (v *viewport) MouseOut() {
	v.hover = ""
	v.onHint("", fyne.Position{})
}

// Scrolled implements fyne.Scrollable.
func (v *viewport) Scrolled(e *fyne.ScrollEvent) {
	const perUnit = 0.006 // a notch of 25 units is 16 %
	d := e.Scrolled.DY
	if d == 0 {
		d = e.Scrolled.DX
	}
	x, y := v.pixels(e.Position)
	v.guard(func() { v.zoomAt(math.Exp(perUnit*float64(d)), x, y) })
}

// Cursor implements desktop.Cursorable.
func (v *viewport) Cursor() desktop.Cursor {
	if v.hover != "" && v.button == 0 {
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}

// FocusGained implements fyne.Focusable.
func (v *viewport) FocusGained() {
	v.ring.Show()
	v.ring.paint(v.accent())
	v.raster.Refresh() // the toolkit draws nothing anew for what is shown or hidden
}

// FocusLost implements fyne.Focusable.
func (v *viewport) FocusLost() {
	v.ring.Hide()
	v.raster.Refresh()
}

// TypedKey implements fyne.Focusable.
func (v *viewport) TypedKey(e *fyne.KeyEvent) { v.guard(func() { v.key(e) }) }

// TypedRune implements fyne.Focusable.
func (v *viewport) TypedRune(r rune) { v.guard(func() { v.typed(r) }) }

var (
	_ desktop.Mouseable  = (*viewport)(nil)
	_ desktop.Hoverable  = (*viewport)(nil)
	_ desktop.Cursorable = (*viewport)(nil)
	_ fyne.Draggable     = (*viewport)(nil)
	_ fyne.Scrollable    = (*viewport)(nil)
	_ fyne.Focusable     = (*viewport)(nil)
)
