//go:build cgo && !nowindow

package window

import (
	"fmt"
	"image"
	"math"
	"os"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"lobewright/assets"
	"lobewright/render"
)

// A pane draws itself as one image and answers to spots on it: by the mouse,
// and by the keyboard with a mark that the arrow keys move from spot to spot.
// It scrolls when its content is larger than itself.
type pane struct {
	widget.BaseWidget
	content func(b *board) // draws the pane, shifted by its scroll
	palette func() assets.Palette
	zoom    func() float64 // of all sizes, by preference
	guard   func(func())   // runs what spots do

	// sideways panes scroll along x, others along y.
	sideways bool
	// inset is the width, in units, of what stays on the left when the rest
	// scrolls sideways.
	inset float64
	least fyne.Size

	raster   *canvas.Raster
	image    *image.RGBA
	painted  painting         // what stands on the image
	renderer *render.Renderer // all panes have one, since they are drawn one after the other
	stale    bool
	spots    []spot
	mark     string // name of the spot that the keyboard is on
	hover    string
	scroll   float64
	extent   float64 // of the content
	focused  bool
	dragging bool
	held     string // the spot that is dragged
	onHint   func(text string, at fyne.Position)

	// What a pane may do with keys beyond moving its mark; any may be nil. A
	// function that returns false leaves the key to the pane.
	onKey    func(*fyne.KeyEvent) bool
	onRune   func(rune) bool
	holdsTab func() bool // the Tab key is its own
	onLeave  func()      // the keyboard goes elsewhere
	onHelp   func()
}

func newPane(content func(b *board), u *ui) *pane {
	p := &pane{content: content, palette: u.palette, zoom: u.zoom, guard: u.guard, onHint: u.hint, onRune: u.typed, onHelp: u.showHelp, renderer: &u.panes}
	p.raster = canvas.NewRaster(p.generate)
	p.raster.ScaleMode = canvas.ImageScalePixels // pixel by pixel, which costs less
	p.ExtendBaseWidget(p)
	return p
}

// CreateRenderer implements fyne.Widget.
func (p *pane) CreateRenderer() fyne.WidgetRenderer { return widget.NewSimpleRenderer(p.raster) }

// MinSize implements fyne.CanvasObject. It does not grow with magnified type:
// where there is no room for that, the type is smaller.
func (p *pane) MinSize() fyne.Size { return p.sized(min(p.zoom(), 1)) }

// wanted is the least size at which the type is as large as it is wished.
func (p *pane) wanted() fyne.Size { return p.sized(p.zoom()) }

func (p *pane) sized(zoom float64) fyne.Size {
	z := float32(zoom)
	return fyne.NewSize(p.least.Width*z, p.least.Height*z)
}

// scale is how much everything on the pane is magnified: as it is wished, but no
// more than leaves room for its least content in the direction that does not
// scroll.
func (p *pane) scale() float64 {
	size, least := p.Size().Width, p.least.Width
	if p.sideways {
		size, least = p.Size().Height, p.least.Height
	}
	z := p.zoom()
	if size < 1 || least < 1 {
		return z
	}
	return max(min(z, float64(size/least)), min(z, 1))
}

// Update draws the pane anew.
func (p *pane) Update() {
	p.stale = true
	p.raster.Refresh()
}

// Refresh implements fyne.CanvasObject.
func (p *pane) Refresh() { p.Update() }

// Resize implements fyne.CanvasObject.
func (p *pane) Resize(s fyne.Size) {
	p.BaseWidget.Resize(s)
	p.Update()
}

func (p *pane) size() (width, height float64) {
	z := p.scale()
	return float64(p.Size().Width) / z, float64(p.Size().Height) / z
}

// lay has the content drawn on a board of the pane's size.
func (p *pane) lay() *board {
	w, h := p.size()
	b := newBoard(w, h, p.palette())
	p.content(b)
	p.spots = b.spots
	return b
}

func (p *pane) generate(w, h int) image.Image {
	if w < 1 || h < 1 || p.Size().Width < 1 {
		return image.NewRGBA(image.Rect(0, 0, 1, 1))
	}
	if !p.stale && p.image != nil && p.image.Rect.Dx() == w && p.image.Rect.Dy() == h {
		return p.image
	}
	if p.image == nil || p.image.Rect.Dx() != w || p.image.Rect.Dy() != h {
		p.image, p.painted = image.NewRGBA(image.Rect(0, 0, w, h)), painting{}
	}
	p.stale = false
	p.guard(func() {
		b := p.lay()
		if limit := max(0, p.extent-p.room(b)); p.scroll > limit {
			p.scroll = limit
			b = p.lay()
		}
		p.decorate(b)
		if measureSpots {
			p.printSpots()
		}
		_ = p.painted.paint(b, p.renderer, p.image, float64(w)/b.width)
	})
	return p.image
}

func (p *pane) printSpots() {
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(p)
	z := p.scale()
	for _, s := range p.spots {
		fmt.Fprintf(os.Stderr, "spot\t%s\t%.0f\t%.0f\n", s.name, float64(at.X)+z*(s.x+s.width/2), float64(at.Y)+z*(s.y+s.height/2))
	}
}

// room is how much of the content is seen at once.
func (p *pane) room(b *board) float64 {
	if p.sideways {
		return b.width
	}
	return b.height
}

// decorate marks the spot under the pointer and that of the keyboard, and
// draws the scroll bar.
func (p *pane) decorate(b *board) {
	for _, s := range b.spots {
		if s.name == p.hover && s.do != nil {
			b.fillFrom(s.from, s.x, s.y, s.width, s.height, faint(b.palette.Ink, 0x12))
		}
		if s.name == p.mark && p.focused {
			b.frameFrom(s.from, s.x-1, s.y-1, s.width+2, s.height+2, 2, b.palette.Accent)
		}
	}
	if p.focused && p.mark == "" {
		b.frame(0, 0, b.width, b.height, 2, b.palette.Accent)
	}
	room := p.room(b)
	if p.extent <= room {
		return
	}
	const thick, inset = 4, 2
	length := max(24, room*room/p.extent)
	at := (room - length) * p.scroll / (p.extent - room)
	if p.sideways {
		b.fill(at, b.height-thick-inset, length, thick, faint(b.palette.Ink, 0x70))
	} else {
		b.fill(b.width-thick-inset, at, thick, length, faint(b.palette.Ink, 0x70))
	}
}

// fresh lays the pane anew if what it shows has changed since it was drawn, so
// that nobody clicks on what is no longer there.
func (p *pane) fresh() {
	if p.stale && p.Size().Width > 0 {
		p.lay()
	}
}

func (p *pane) spotAt(at fyne.Position) (spot, bool) {
	p.fresh()
	z := p.scale()
	x, y := float64(at.X)/z, float64(at.Y)/z
	for i := len(p.spots) - 1; i >= 0; i-- {
		if p.spots[i].holds(x, y) {
			return p.spots[i], true
		}
	}
	return spot{}, false
}

func (p *pane) spotNamed(name string) (spot, bool) {
	p.fresh()
	for _, s := range p.spots {
		if s.name == name {
			return s, true
		}
	}
	return spot{}, false
}

// Tapped implements fyne.Tappable.
func (p *pane) Tapped(e *fyne.PointEvent) {
	p.focus()
	if s, ok := p.spotAt(e.Position); ok && s.do != nil {
		p.mark = s.name
		if s.at != nil {
			z := p.scale()
			p.guard(func() { s.at(float64(e.Position.X)/z-s.x, float64(e.Position.Y)/z-s.y) })
		} else {
			p.guard(s.do)
		}
		p.Update()
	}
}

func (p *pane) focus() {
	if c := fyne.CurrentApp().Driver().CanvasForObject(p); c != nil {
		c.Focus(p)
	}
}

// Scrolled implements fyne.Scrollable.
func (p *pane) Scrolled(e *fyne.ScrollEvent) {
	d := float64(e.Scrolled.DY)
	if d == 0 {
		d = float64(e.Scrolled.DX)
	}
	p.scrollTo(p.scroll - 2*d)
}

// Dragged implements fyne.Draggable.
func (p *pane) Dragged(e *fyne.DragEvent) {
	if !p.dragging {
		p.dragging = true
		if s, ok := p.spotAt(e.Position.Subtract(e.Dragged)); ok && s.drag != nil {
			p.held, p.mark = s.name, s.name
		}
	}
	if p.held != "" {
		if s, ok := p.spotNamed(p.held); ok && s.drag != nil {
			z := p.scale()
			p.guard(func() { s.drag(float64(e.Position.X)/z-s.x, float64(e.Position.Y)/z-s.y) })
		}
		return
	}
	if p.sideways {
		p.scrollTo(p.scroll - float64(e.Dragged.DX)/p.scale())
	} else {
		p.scrollTo(p.scroll - float64(e.Dragged.DY)/p.scale())
	}
}

// DragEnd implements fyne.Draggable.
func (p *pane) DragEnd() {
	name := p.held
	p.dragging, p.held = false, ""
	if s, ok := p.spotNamed(name); name != "" && ok && s.release != nil {
		p.guard(s.release)
		p.Update()
	}
}

func (p *pane) scrollTo(to float64) {
	w, h := p.size()
	room := h
	if p.sideways {
		room = w
	}
	to = min(max(0, to), max(0, p.extent-room))
	if to != p.scroll {
		p.scroll = to
		if p.hover != "" {
			p.MouseOut() // what the hint was about is elsewhere now
		}
		p.Update()
	}
}

// show scrolls until a spot is seen whole.
func (p *pane) show(s spot) {
	w, h := p.size()
	const margin = 12
	if p.sideways {
		if s.x < p.inset+margin {
			p.scrollTo(p.scroll + s.x - margin - p.inset)
		} else if s.x+s.width > w-margin {
			p.scrollTo(p.scroll + s.x + s.width - w + margin)
		}
		return
	}
	if s.y < margin {
		p.scrollTo(p.scroll + s.y - margin)
	} else if s.y+s.height > h-margin {
		p.scrollTo(p.scroll + s.y + s.height - h + margin)
	}
}

// reveal scrolls to a spot by its name, as soon as the pane is drawn.
func (p *pane) reveal(name string) {
	if p.Size().Width < 1 {
		return
	}
	p.lay()
	if s, ok := p.spotNamed(name); ok {
		p.show(s)
	}
}

// MouseIn implements desktop.Hoverable.
func (p *pane) MouseIn(e *desktop.MouseEvent) { p.MouseMoved(e) }

// MouseMoved implements desktop.Hoverable.
func (p *pane) MouseMoved(e *desktop.MouseEvent) {
	s, _ := p.spotAt(e.Position)
	if s.name == p.hover {
		return
	}
	p.hover = s.name
	p.onHint(s.hint, e.AbsolutePosition)
	p.Update()
}

// MouseOut implements desktop.Hoverable.
func (p *pane) MouseOut() {
	p.hover = ""
	p.onHint("", fyne.Position{})
	p.Update()
}

// Cursor implements desktop.Cursorable.
func (p *pane) Cursor() desktop.Cursor {
	if s, ok := p.spotNamed(p.hover); ok && s.do != nil {
		return desktop.PointerCursor
	}
	return desktop.DefaultCursor
}

// FocusGained implements fyne.Focusable.
func (p *pane) FocusGained() {
	p.focused = true
	if _, ok := p.spotNamed(p.mark); !ok {
		p.mark = ""
		for _, s := range p.spots {
			if s.do != nil {
				p.mark = s.name
				break
			}
		}
	}
	p.Update()
}

// FocusLost implements fyne.Focusable.
func (p *pane) FocusLost() {
	p.focused = false
	if p.onLeave != nil {
		p.guard(p.onLeave)
	}
	p.Update()
}

// TypedRune implements fyne.Focusable.
func (p *pane) TypedRune(r rune) {
	if p.onRune != nil {
		p.guard(func() { p.onRune(r) })
	}
}

// AcceptsTab implements fyne.Tabbable.
func (p *pane) AcceptsTab() bool { return p.holdsTab != nil && p.holdsTab() }

// TypedKey implements fyne.Focusable.
func (p *pane) TypedKey(e *fyne.KeyEvent) {
	used := false
	if p.onKey != nil {
		p.guard(func() { used = p.onKey(e) })
	}
	if used {
		return
	}
	switch e.Name {
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		if s, ok := p.spotNamed(p.mark); ok && s.do != nil {
			p.guard(s.do)
			p.Update()
		}
	case fyne.KeyRight:
		p.sidestep(1)
	case fyne.KeyLeft:
		p.sidestep(-1)
	case fyne.KeyDown:
		p.move(0, 1)
	case fyne.KeyUp:
		p.move(0, -1)
	case fyne.KeyPageDown:
		p.scrollTo(p.scroll + 200)
	case fyne.KeyPageUp:
		p.scrollTo(p.scroll - 200)
	case fyne.KeyHome:
		p.scrollTo(0)
	case fyne.KeyEnd:
		p.scrollTo(math.Inf(1))
	case fyne.KeyF1:
		p.onHelp()
	}
}

// sidestep steps what is marked if it has steps, else moves the mark.
func (p *pane) sidestep(by int) {
	if s, ok := p.spotNamed(p.mark); ok && s.step != nil {
		p.guard(func() { s.step(by) })
		p.Update()
		return
	}
	p.move(float64(by), 0)
}

// move takes the keyboard's mark to the nearest spot in a direction.
func (p *pane) move(dx, dy float64) {
	from, ok := p.spotNamed(p.mark)
	best, least := spot{}, math.Inf(1)
	for _, s := range p.spots {
		if s.do == nil || s.name == p.mark {
			continue
		}
		if !ok {
			best = s
			break
		}
		// Along the direction from edge to edge, across it from middle to
		// middle.
		x, y := s.x+s.width/2-from.x-from.width/2, s.y+s.height/2-from.y-from.height/2
		along, across := x*dx+y*dy, math.Abs(x*dy)+math.Abs(y*dx)
		if along <= 1 || dx != 0 && across > (s.height+from.height)/2 {
			continue
		}
		if d := along + 3*across; d < least {
			best, least = s, d
		}
	}
	if best.name == "" {
		return
	}
	p.mark = best.name
	p.show(best)
	p.Update()
}

var (
	_ fyne.Tappable      = (*pane)(nil)
	_ fyne.Focusable     = (*pane)(nil)
	_ fyne.Scrollable    = (*pane)(nil)
	_ fyne.Draggable     = (*pane)(nil)
	_ desktop.Hoverable  = (*pane)(nil)
	_ desktop.Cursorable = (*pane)(nil)
)
