//go:build cgo && !nowindow

package window

import (
	"context"

	"image"
	"image/color"
	"image/draw"
	"math"
	"strings"

	"fyne.io/fyne/v2"

	"lobewright/app/sheet"
	"lobewright/app/study"
)

// A preview shows the sheet of the study at hand in the place of the picture.
// It is made beside the toolkit's goroutine, to which its fields belong; what
// was asked for last wins, and until it is there the sheet before stays.
type preview struct {
	u    *ui
	pane *pane

	asked   previewKey
	running bool
	stop    context.CancelFunc
	done    chan struct{} // closed when the newest has ended

	made    *sheet.Sheet
	image   *image.RGBA
	problem string
}

// A previewKey is all that a preview depends on.
type previewKey struct {
	study         study.Study
	width, height int // room in pixels
	scale         float64
}

func newPreview(u *ui) *preview {
	p := &preview{u: u}
	p.pane = newPane(p.draw, u)
	p.pane.least = fyne.NewSize(120, 90)
	p.pane.onKey = func(e *fyne.KeyEvent) bool {
		if e.Name != fyne.KeyEscape {
			return false
		}
		u.pages.turnTo(noPage)
		return true
	}
	p.pane.Hide()
	return p
}

// show shows or hides the preview.
func (p *preview) show(on bool) {
	if on {
		p.pane.scroll = 0
		p.pane.Show()
		return
	}
	p.pane.Hide()
	p.drop()
}

// drop gives up what is being made.
func (p *preview) drop() {
	if p.stop != nil {
		p.stop()
		p.stop = nil
	}
	p.running, p.asked = false, previewKey{}
}

// close ends what runs.
func (p *preview) close() {
	p.drop()
	if p.done != nil {
		<-p.done
	}
}

// shownOn is the study without what a sheet does not depend on.
func shownOn(s study.Study) study.Study {
	s.Atoms, s.Views, s.Moment, s.Animation = nil, nil, 0, study.Animation{}
	s.Figure.NoStudy, s.Look.Split = false, false
	return s
}

// Heights, in units, above the page and of a line below it.
const (
	previewHead = 40.0
	previewLine = 18.0
)

// want has the sheet made for a room in units at a number of pixels a unit,
// unless it is being made or there already.
func (p *preview) want(width, height, scale float64) {
	key := previewKey{shownOn(inLanguage(p.u.now())), int((width - 2*pad) * scale), int((height - previewHead - pad) * scale), scale}
	if k := p.asked; k.width == key.width && k.height == key.height && k.scale == key.scale && k.study.Equal(key.study) {
		return
	}
	if key.width < 16 || key.height < 16 || p.u.closing {
		return
	}
	if p.stop != nil {
		p.stop()
	}
	ctx, stop := context.WithCancel(context.Background())
	before, done := p.done, make(chan struct{})
	p.asked, p.running, p.stop, p.done = key, true, stop, done
	go func() {
		defer close(done)
		if before != nil {
			<-before
		}
		made, img, err := p.make(ctx, key)
		if ctx.Err() != nil {
			return
		}
		p.u.post(func() { p.u.guard(func() { p.take(ctx, made, img, err) }) })
	}()
}

// take shows a sheet that was made, if it is still the one that is wanted.
func (p *preview) take(ctx context.Context, made *sheet.Sheet, img *image.RGBA, err error) {
	if ctx.Err() != nil || p.u.closing {
		return
	}
	p.running, p.made, p.image, p.problem = false, made, img, ""
	if err != nil {
		p.made, p.image, p.problem = nil, nil, told(err)
	}
	p.pane.Update()
	p.u.pages.pane.Update()
}

// make sets and paints a sheet as large as it fits its room. A very tall one
// is scrolled: it would be too small to be read.
func (p *preview) make(ctx context.Context, key previewKey) (made *sheet.Sheet, img *image.RGBA, err error) {
	defer func() {
		if fault := recover(); fault != nil {
			made, img, err = nil, nil, faultError{fault}
		}
	}()
	made, err = sheet.Make(ctx, p.u.work, key.study)
	if err != nil {
		return nil, nil, err
	}
	lines := 0
	for _, n := range made.Notes {
		const sign = 6.2 // units a sign takes, about
		lines += 1 + int(sign*float64(len(n))*key.scale/float64(key.width))
	}
	height := float64(key.height)
	if lines > 0 {
		height = max(height-(float64(lines)*previewLine+pad)*key.scale, 0.4*height)
	}
	const inch, narrowest = 25.4, 0.4 // narrowest: of the room's width
	wide := float64(key.width) / made.Width
	dpi := max(min(wide, height/made.Height), narrowest*wide) * inch
	img, err = made.Paint(ctx, dpi)
	if err != nil {
		return nil, nil, err
	}
	if made.Ground.A != 255 {
		img = onSquares(img)
	}
	return made, img, nil
}

// onSquares lays a picture on the pattern of squares that stands for nothing,
// as is common practice.
func onSquares(img *image.RGBA) *image.RGBA {
	const side = 8
	out := image.NewRGBA(img.Rect)
	for y := range out.Rect.Dy() {
		for x := range out.Rect.Dx() {
			tone := uint8(0xff)
			if (x/side+y/side)%2 == 1 {
				tone = 0xe4
			}
			out.SetRGBA(x, y, color.RGBA{tone, tone, tone, 0xff})
		}
	}
	draw.Draw(out, out.Rect, img, img.Rect.Min, draw.Over)
	return out
}

// draw draws the pane.
func (p *preview) draw(b *board) {
	scale := p.pane.scale()
	if c := p.u.win.Canvas(); c != nil {
		scale *= float64(c.Scale())
	}
	p.want(b.width, b.height, scale)
	quiet := style{size: secondSize, color: b.palette.Quiet, align: -1}
	accent := style{size: secondSize, color: b.palette.Accent, align: -1}
	top := -p.pane.scroll
	text, s := "", quiet
	switch {
	case p.running && p.made == nil:
		text = say("figure.making")
	case p.running:
		text, s = say("figure.makingAnew"), accent
	case p.problem != "":
		text = say("figure.problem", p.problem)
		if why, _ := p.u.lacking(); why != "" {
			text = why
		}
		y := b.paragraph(pad, top+pad+textSize, b.width-2*pad, words(text), accent)
		p.pane.extent = y - top
		return
	case p.made != nil:
		text = p.sizes(false)
		if b.measure(words(text), s) > b.width-2*pad {
			text = p.sizes(true)
		}
	}
	base := top + pad + textSize
	if paper, pixels, two := strings.Cut(text, "; "); two && b.measure(words(text), s) > b.width-2*pad {
		const upper = 14.0 // the first of two lines above the page
		b.text(pad, top+upper, words(paper), s)
		text, base = pixels, top+upper+1.4*secondSize
	}
	b.text(pad, base, words(b.clipped(text, b.width-2*pad, s)), s)
	if p.image == nil {
		p.pane.extent = 0
		return
	}
	w, h := float64(p.image.Rect.Dx())/scale, float64(p.image.Rect.Dy())/scale
	x := max(pad, (b.width-w)/2)
	edge, thick := b.palette.Rule, 1.0
	if p.running {
		edge, thick = b.palette.Accent, 3
	}
	b.frame(x-thick-1, top+previewHead-thick-1, w+2*thick+2, h+2*thick+2, thick, edge)
	b.image(x, top+previewHead, p.image)
	y := top + previewHead + h
	if len(p.made.Notes) > 0 {
		y += previewLine
	}
	for _, n := range p.made.Notes {
		y = b.paragraph(pad, y, b.width-2*pad, words(n), quiet)
	}
	p.pane.extent = y - top
}

// sizes says how large the sheet is on paper and as a picture, in full or in
// short.
func (p *preview) sizes(short bool) string {
	dpi := p.u.now().Figure.TheResolution()
	w, h, err := p.made.Pixels(dpi)
	if err != nil {
		return told(err)
	}
	tenth := func(x float64) string { return plainText(math.Round(10*x) / 10) }
	if short {
		return say("figure.sizesShort", tenth(p.made.Width), tenth(p.made.Height), w, h)
	}
	return say("figure.sizes", tenth(p.made.Width), tenth(p.made.Height), w, h, tenth(dpi))
}
