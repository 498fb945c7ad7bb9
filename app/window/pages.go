//go:build cgo && !nowindow

package window

import (
	"fmt"
	"strconv"

	"fyne.io/fyne/v2"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
)

// A page takes the place of the left pane while something about frames is
// chosen, or a figure is set. The picture, or the figure, stays beside it and
// follows.
type page int

// The pages.
const (
	noPage page = iota
	axesPage
	ladderPage
	secondPage
	subgroupsPage
	sheetPage
	filmPage
)

// pages are the pages with what they remember beside the study.
// They belong to the toolkit's goroutine.
type pages struct {
	u      *ui
	pane   *pane
	open   page
	scroll map[page]float64

	search *work.Search
	nearby *work.Nearby // never nil
	opened map[string]bool

	axesProblem string // why the axes that were asked for are not taken
	axesTried   study.Study

	second    secondFrame
	subgroups subgroups
	preview   *preview
	writing   writing
	wanted    *wantedGroup // a subgroup that is to be used as soon as the ladder is known
}

// pageWidth is wider than the pane that the pages replace: they hold tables.
const pageWidth = 356

func (u *ui) newPages() {
	p := &u.pages
	p.u, p.nearby, p.opened, p.scroll = u, &work.Nearby{}, map[string]bool{}, map[page]float64{}
	p.pane = newPane(u.drawPage, u)
	p.pane.least = fyne.NewSize(pageWidth, 100)
	p.pane.onKey = func(e *fyne.KeyEvent) bool {
		if e.Name != fyne.KeyEscape {
			return false
		}
		p.turnTo(noPage)
		return true
	}
	p.pane.Hide()
	p.preview = newPreview(u)
	p.search = work.NewSearch(u.work, u.post, func(n *work.Nearby) { u.guard(func() { p.found(n) }) })
}

// turnTo opens a page, or closes the one that is open.
func (p *pages) turnTo(to page) {
	p.scroll[p.open] = p.pane.scroll
	if to != p.open && !p.writing.running {
		p.writing.said = ""
	}
	p.u.hints.show("", fyne.Position{})
	p.open = to
	p.pane.scroll, p.pane.mark, p.pane.hover = p.scroll[to], "", ""
	if p.u.atoms.pane.Visible() {
		p.u.atoms.close()
	}
	if to == noPage {
		p.pane.Hide()
		p.u.given.Show()
	} else {
		p.u.given.Hide()
		p.pane.Show()
	}
	p.preview.show(to == sheetPage)
	p.changed()
	p.u.win.Content().Refresh()
	p.u.show(false)
	p.u.refreshPanes()
	if to == noPage {
		p.u.win.Canvas().Focus(p.u.given)
	} else {
		p.u.win.Canvas().Focus(p.pane)
	}
}

// changed follows a change of the study.
func (p *pages) changed() {
	s := p.u.now()
	if p.axesProblem != "" && !sameAxes(s, p.axesTried) {
		p.axesProblem = ""
	}
	if (s.Structure != "" || s.Coordinates != "") && (p.open == ladderPage || p.wanted != nil) {
		p.search.Want(s)
	}
	if p.open == subgroupsPage {
		p.subgroups.want(p.u)
	}
}

func sameAxes(s, t study.Study) bool {
	return s.Structure == t.Structure && s.Coordinates == t.Coordinates && s.As == t.As && s.Frame == t.Frame && s.Z == t.Z && s.X == t.X
}

// show adds to the picture what the study asks for of frames.
func (p *pages) show(shown *picture.Shown) {
	s := p.u.now()
	if shown.Group == nil {
		return
	}
	if e, _ := p.second.of(shown.Group, s.Held); e != nil {
		shown.Held = e
	}
	shown.Nameless = say("frames.nameless")
	if s.Look.Displacements {
		shown.Notes = append(shown.Notes, displacementNote(shown.Group))
	}
}

// command opens a page, or closes it where it is open.
func (p *pages) command(key string, to page, letter fyne.KeyName) *command {
	return (&command{key: key, do: func() {
		if p.open == to {
			p.turnTo(noPage)
		} else {
			p.turnTo(to)
		}
	}, on: func() bool { return p.open == to }}).withKey(letter, control)
}

// frameCommands are the commands about frames.
func (u *ui) frameCommands() []*command {
	p := &u.pages
	look := func(key string, of func(*study.Look) *bool) *command {
		return &command{key: key, do: func() {
			s := u.now()
			*of(&s.Look) = !*of(&s.Look)
			u.do(study.StepLook, s)
		}, on: func() bool { s := u.now(); return *of(&s.Look) }}
	}
	return []*command{
		p.command("frames.menuAxes", axesPage, fyne.Key1),
		p.command("frames.menuLadder", ladderPage, fyne.Key2),
		p.command("frames.menuSecond", secondPage, fyne.Key3),
		p.command("frames.menuSubgroups", subgroupsPage, fyne.Key4),
		rule,
		look("frames.menuElements", func(l *study.Look) *bool { return &l.Elements }),
		look("frames.menuDisplacements", func(l *study.Look) *bool { return &l.Displacements }),
	}
}

// drawPage draws the page that is open.
func (u *ui) drawPage(b *board) {
	d := &pageDrawing{givenDrawing{ui: u, board: b, y: pad - u.pages.pane.scroll, width: b.width - 2*pad}}
	d.styles(b)
	switch u.pages.open {
	case axesPage:
		d.title(say("frames.axesTitle"))
		d.axes()
	case ladderPage:
		d.title(say("frames.ladderTitle"))
		d.ladder()
	case secondPage:
		d.title(say("frames.secondTitle"))
		d.secondFrame()
	case subgroupsPage:
		d.title(say("frames.subgroupsTitle"))
		d.allSubgroups()
	case sheetPage:
		d.title(say("figure.sheetTitle"))
		d.sheetSettings()
	case filmPage:
		d.title(say("figure.filmTitle"))
		d.filmSettings()
	}
	u.pages.pane.extent = d.y + pad + u.pages.pane.scroll
}

// A pageDrawing draws a page from above to below.
type pageDrawing struct{ givenDrawing }

// title is the head of a page with what closes it.
func (d *pageDrawing) title(text string) {
	const size = 24
	d.board.text(pad, d.y+groupSize, notation.Words(text), style{size: groupSize, color: d.board.palette.Ink, align: -1, bold: true})
	drawChip(d.board, pad+d.width-size, d.y-2, size, notation.Words("×"), textSize,
		chip{name: "close page", hint: say("frames.close"), do: func() { d.pages.turnTo(noPage) }})
	d.y += groupSize + 14
}

// row is lines of text that can be chosen together; write draws them.
func (d *pageDrawing) row(name, hint string, on bool, do func(), write func()) {
	const inset = 10
	top := d.y
	d.y += 4
	d.width -= inset
	shift := d.left
	d.left += inset
	write()
	d.left = shift
	d.width += inset
	d.y += 4
	if on {
		d.board.fill(pad+shift, top+2, 3, d.y-top-4, d.board.palette.Accent)
	}
	if do != nil {
		d.board.spot(spot{x: pad + shift - 4, y: top, width: d.width + 8, height: d.y - top, name: name, hint: hint, do: do})
	}
}

// choice is a chip in a row of chips that goes on below where it has no room.
func (d *pageDrawing) choice(x *float64, label notation.Text, c chip) {
	w := min(d.board.measure(label, d.quiet)+16, d.width)
	if *x+w > pad+d.width+0.5 {
		*x = pad
		d.y += chipHeight + 4
	}
	drawChip(d.board, *x, d.y, w, label, secondSize, c)
	*x += w + 4
}

// endChoices goes on below a row of chips.
func (d *pageDrawing) endChoices() { d.y += chipHeight + 6 }

// check is a box with a text that can be switched.
func (d *pageDrawing) check(name, text, hint string, on bool, do func()) {
	const box = 14
	p := d.board.palette
	top := d.y
	d.board.frame(pad, d.y+2, box, box, 1, p.Rule)
	if on {
		d.board.fill(pad+3, d.y+5, box-6, box-6, p.Accent)
	}
	d.y = d.board.paragraph(pad+box+8, d.y+textSize, d.width-box-8, notation.Words(text), d.plain) - textSize + 4
	d.board.spot(spot{x: pad - 4, y: top - 3, width: d.width + 8, height: d.y - top + 2, name: name, hint: hint, do: do})
	d.y += 2
}

// searching shows how far the search for the ladder has come; true if there is
// no ladder yet.
func (d *pageDrawing) searching() bool {
	n := d.pages.nearby
	again := func(text string) {
		d.words(text, d.quiet)
		x := float64(pad)
		d.choice(&x, notation.Words(say("frames.searchAgain")), chip{name: "search again", do: func() { d.pages.search.Again(d.now()) }})
		d.endChoices()
	}
	switch {
	case n.Problem != nil:
		d.words(told(n.Problem), d.accent)
		again("")
	case n.Running:
		d.y += 2
		d.bar(n.Share)
		d.words(say("frames.searching"), d.quiet)
		d.board.spot(spot{x: pad - 4, y: d.y - 32, width: d.width + 8, height: 34, name: "stop search", do: d.pages.search.Cancel})
		d.y += 6
	case n.Cancelled && n.Ladder == nil:
		again(say("frames.searchStopped"))
	}
	return n.Ladder == nil
}

// bar shows a share of work.
func (d *pageDrawing) bar(share float64) {
	d.board.fill(pad, d.y, d.width, 4, faint(d.board.palette.Ink, 0x20))
	d.board.fill(pad, d.y, d.width*min(1, share), 4, d.board.palette.Accent)
	d.y += 8
}

// found takes news of the search.
func (p *pages) found(n *work.Nearby) {
	before := p.nearby
	p.nearby = n
	if n.Ladder != nil && before.Ladder != n.Ladder {
		p.opened = map[string]bool{}
	}
	switch {
	case n.Ladder != nil && p.wanted != nil:
		p.takeWanted()
	case n.Problem != nil || n.Cancelled:
		p.wanted = nil
	}
	p.pane.Update()
}

// withGroup is the study with another group, or another way to see the
// structure: what was chosen among operations and group orbitals means nothing
// there, nor do axes that were laid by its elements.
func withGroup(s study.Study, as string) study.Study {
	s.As = as
	s.Z, s.X = "", ""
	s.Held = study.Held{}
	s.Subgroup, s.Kept = "", ""
	return withoutNames(s)
}

// withoutNames is the study without what is chosen by names that belong to a
// frame.
func withoutNames(s study.Study) study.Study {
	s.Operation, s.Moment, s.Kept = "", 0, ""
	s.Turn, s.Mixing = nil, nil
	s.Held.Irrep, s.Held.Copy, s.Held.Partner = "", 0, 0
	s.Projection.Irrep, s.Projection.Copy, s.Projection.Partner = "", 0, 0
	s.Projection.Element, s.Projection.Character = [2]int{}, false
	if s.Projection.Function > 0 {
		s.Projection.Subject = study.SubjectFunction
	}
	return s
}

func itoa(n int) string { return strconv.Itoa(n) }

// A faultError is a fault of this program that was caught.
type faultError struct{ fault any }

// Error implements error.
func (f faultError) Error() string { return say("errors.faultHere", fmt.Sprint(f.fault)) }
