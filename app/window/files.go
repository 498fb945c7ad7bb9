//go:build cgo && !nowindow

package window

import (
	"errors"
	"fmt"
	"image/color"
	"io"
	"os"
	"path/filepath"
	"strings"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/export"
	"lobewright/app/files"
	"lobewright/app/study"
	"lobewright/app/work"
)

// demoStudies say what a demonstration shows first.
var demoStudies = map[string]struct{ basis, operation string }{
	"square-plane": {"Cl:sigma", "C4(z)"}, "octahedron": {"C:sigma", ""}, "tetrahedron": {"Cl:sigma", ""}, "prism": {"S:sigma", ""},
	"bipyramid": {"F:sigma", ""}, "hexaaqua": {"O:sigma", ""}, "octacyanide": {"C:sigma", ""}, "sandwich-staggered": {"C:pz", ""},
	"sandwich-eclipsed": {"C:pz", ""}, "sandwich-eight": {"C:pz", ""}, "dimer": {"Re:d", ""}, "trimer": {"Re:d", ""}, "water": {"H:s", ""},
	"furan": {"C:pz,O:pz", ""}, "benzene": {"C:pz", ""}, "benzenetriol": {"C:pz", ""}, "silicic-acid": {"O:sigma", ""}, "crown": {"S:s", ""},
	"propadiene": {"H:s", ""}, "cage": {"C:s", ""}, "rod": {"N:p", ""}, "cyanide": {"N:p", ""}, "propeller": {"O:sigma", ""},
}

// demoStudy is the study of a demonstration. Other than for a person's own
// file, functions and an operation are chosen, so that there is something to
// play.
func demoStudy(from study.Study, name string) study.Study {
	s := from.Opened("demo:" + name)
	d := demoStudies[name]
	if d.basis != "" {
		s.Basis = strings.Split(d.basis, ",")
		s.Projection.Function, s.Projection.Subject = 1, study.SubjectFunction
	}
	s.Operation = d.operation
	return s
}

func (u *ui) openDemo(name string) {
	u.try(demoStudy(u.now(), name), nil)
}

// open reads a structure or a study. Only what can be read takes the place of
// the work; else a message stands where the path was typed, or on top of the
// left pane, and nothing changes.
func (u *ui) open(structure string, done func(error)) {
	if export.CarriesStudy(structure) && !strings.HasPrefix(structure, "demo:") && !strings.HasPrefix(structure, "ideal:") {
		u.openStudy(structure, done)
		return
	}
	if name, ok := strings.CutPrefix(structure, "demo:"); ok {
		u.try(demoStudy(u.now(), name), done)
		return
	}
	u.try(u.now().Opened(structure), done)
}

func (u *ui) try(s study.Study, done func(error)) {
	u.service.Try(s, func(_ *work.Structure, err error) {
		u.guard(func() {
			if err == nil {
				u.openProblem = ""
				u.studyFile = "" // whoever opened a study's own file says so after this
				u.do(study.StepOpen, s)
				if s.Coordinates == "" {
					_ = u.session.AddRecent(s.Structure)
					u.updateMenus()
				}
			}
			u.tell(err, done)
		})
	})
}

// tell hands an error to whoever asked, or shows it on the left.
func (u *ui) tell(err error, done func(error)) {
	if done != nil {
		done(err)
		return
	}
	if err != nil {
		u.openProblem = told(err)
		u.given.scrollTo(0)
		u.given.Update()
	}
}

// openStudy opens a study file, or the work that a figure shows.
func (u *ui) openStudy(path string, done func(error)) {
	if _, err := os.Stat(path); err != nil {
		u.tell(errors.New(say("errors.cannotOpen", path, told(files.Cause(err)))), done)
		return
	}
	s, err := export.StudyIn(path)
	if err != nil {
		u.tell(err, done)
		return
	}
	u.try(s, func(err error) {
		if err == nil && strings.HasSuffix(path, study.Extension) {
			u.keepFile(expanded(path), s)
			_ = u.session.AddRecent(expanded(path))
			u.updateMenus()
		}
		u.tell(err, done)
	})
}

// openCoordinates takes pasted text.
func (u *ui) openCoordinates(text string) {
	if strings.TrimSpace(text) == "" {
		u.tell(errors.New(say("errors.emptyClipboard")), nil)
		return
	}
	if path := strings.TrimSpace(text); !strings.Contains(path, "\n") && len(path) < 1000 {
		// A path that was copied in a file manager.
		u.open(expanded(strings.TrimPrefix(path, "file://")), nil)
		return
	}
	s, err := u.now().WithCoordinates(say("files.pasted"), text)
	if err != nil {
		u.tell(err, nil)
		return
	}
	u.try(s, nil)
}

func (u *ui) paste() { u.openCoordinates(u.app.Clipboard().Content()) }

// dropped opens the first file of a drop.
func (u *ui) dropped(_ fyne.Position, files []fyne.URI) {
	if len(files) > 0 {
		u.guard(func() { u.open(files[0].Path(), nil) })
	}
}

func (u *ui) folder() string {
	if s := u.now().Structure; filepath.IsAbs(s) {
		return filepath.Dir(s) + "/"
	}
	if here, err := os.Getwd(); err == nil && here != "/" {
		return here + "/"
	}
	return "~/"
}

func (u *ui) askOpen() {
	u.askPath(say("files.open"), say("files.openText"), u.folder(),
		func(path string, done func(error)) {
			if info, err := os.Stat(path); err == nil && info.IsDir() {
				done(errors.New(say("errors.isFolder", path)))
				return
			}
			u.open(path, done)
		})
}

// save saves the study to its own file without a question, or asks for one.
func (u *ui) save() {
	if !u.hasFile() {
		u.askSave()
		return
	}
	if c := u.changedFile; c != nil && c.path == u.studyFile && !c.gone {
		u.askReplace(u.studyFile, u.saveOver) // another program has written it
		return
	}
	u.saveOver()
}

// saveOver writes over the study's own file.
func (u *ui) saveOver() {
	if err := u.writeStudy(u.studyFile, true); err != nil {
		u.notice = say("errors.aboutSaving", told(err))
		u.given.Update()
		return
	}
	u.remark(say("files.saved", filepath.Base(u.studyFile)))
}

// writeStudy writes the study at hand, over a file that is there only if told.
func (u *ui) writeStudy(path string, force bool) error {
	s := u.now()
	err := export.WriteFile(path, force, func(w io.Writer) error {
		text, err := study.Encode(s)
		if err == nil {
			_, err = w.Write(text)
		}
		return err
	})
	if err == nil {
		u.keepFile(path, s)
		u.watchFiles()
		u.watch.accept(path)
		u.changedFile = nil
		_ = u.session.AddRecent(path)
		u.updateMenus()
	}
	return err
}

// remark shows a few words at the foot of the picture for a while.
func (u *ui) remark(text string) {
	at := u.app.Driver().AbsolutePositionForObject(u.view)
	size := u.view.Size()
	u.hints.show(text, fyne.NewPos(at.X+20, at.Y+size.Height-80))
	const long = 4 * time.Second
	time.AfterFunc(long, func() {
		u.post(func() {
			if u.hints.text.Text == text && !u.closing {
				u.hints.show("", fyne.Position{})
			}
		})
	})
}

// askSave asks for the file of the study. Its own file is written over without
// a question.
func (u *ui) askSave() {
	now := u.folder() + "study" + study.Extension
	if u.hasFile() {
		now = u.studyFile
	}
	u.askNewPath(say("files.saveStudy"), say("files.saveStudyText"), now,
		func(path string, done func(error)) {
			if !strings.HasSuffix(path, study.Extension) {
				path += study.Extension
			}
			save := func(force bool, done func(error)) { done(u.writeStudy(path, force)) }
			if u.hasFile() && path == u.studyFile {
				save(true, done)
				return
			}
			u.replacing(path, save, done)
		})
}

// keepFile remembers the file that a study was read from or saved to.
func (u *ui) keepFile(path string, s study.Study) {
	u.studyFile, u.studyOf = path, s.Structure
}

// hasFile tells whether studyFile belongs to the study at hand, which an undo
// may have changed for one of another structure.
func (u *ui) hasFile() bool {
	s := u.now()
	return u.studyFile != "" && u.studyOf == s.Structure
}

// askPicture saves what is shown, at twice the resolution of the screen.
func (u *ui) askPicture() {
	u.askNewPath(say("files.savePicture"), say("files.savePictureText"), u.folder()+"picture.png",
		func(path string, done func(error)) {
			if !strings.HasSuffix(strings.ToLower(path), ".png") {
				path += ".png"
			}
			r := request{shown: u.view.shown, sight: u.view.sight, width: 2 * u.view.width, height: 2 * u.view.height, dpi: 2 * u.view.dpi()}
			carried := u.carried()
			u.replacing(path, func(force bool, done func(error)) {
				go func() {
					err := savePicture(path, force, r, carried)
					u.post(func() { u.guard(func() { done(err) }) })
				}()
			}, done)
		})
}

// replacing saves a file; where one is there already, only after a question.
// Without the person's consent nothing is done, and done is not called.
func (u *ui) replacing(path string, save func(force bool, done func(error)), done func(error)) {
	save(false, func(err error) {
		if errors.Is(err, export.ErrExists) {
			u.askReplace(path, func() { save(true, done) })
			return
		}
		done(err)
	})
}

func savePicture(path string, force bool, r request, carried []byte) (err error) {
	defer func() {
		if fault := recover(); fault != nil {
			err = errors.New(say("errors.faultHere", fmt.Sprint(fault)))
		}
	}()
	if err := export.CheckTarget(path, force); err != nil {
		return err
	}
	return export.WriteFile(path, force, func(w io.Writer) error { return drawPNG(w, r, carried) })
}

// keysText is what Help shows: what to do, and what comes of it, as keys of
// texts. An entry without meaning is a heading.
var keysText = [][2]string{
	{"help.keysPicture"},
	{"help.keysTurn", "help.keysTurnDoes"},
	{"help.keysMove", "help.keysMoveDoes"},
	{"help.keysZoom", "help.keysZoomDoes"},
	{"help.keysFit", "help.keysFitDoes"},
	{"help.keysAlong", "help.keysAlongDoes"},
	{"help.keysAlongOperation", "help.keysAlongOperationDoes"},
	{"help.keysClick", "help.keysClickDoes"},
	{"help.keysClickMore", "help.keysClickMoreDoes"},
	{"help.keysOperation"},
	{"help.keysPlay", "help.keysPlayDoes"},
	{"help.keysEnds", "help.keysEndsDoes"},
	{"help.keysNextOperation", "help.keysNextOperationDoes"},
	{"help.keysNextFunction", "help.keysNextFunctionDoes"},
	{"help.keysNextOrbital", "help.keysNextOrbitalDoes"},
	{"help.keysOneByOne", "help.keysOneByOneDoes"},
	{"help.keysPartners", "help.keysPartnersDoes"},
	{"help.keysTurnSet", "help.keysTurnSetDoes"},
	{"help.keysEverywhere"},
	{"help.keysTab", "help.keysTabDoes"},
	{"help.keysOpen", "help.keysOpenDoes"},
	{"help.keysSave", "help.keysSaveDoes"},
	{"help.keysUndo", "help.keysUndoDoes"},
	{"help.keysPages", "help.keysPagesDoes"},
	{"help.keysFind", "help.keysFindDoes"},
	{"help.keysMenu", "help.keysMenuDoes"},
	{"help.keysEscape", "help.keysEscapeDoes"},
}

func (u *ui) showKeys() {
	u.showSheet(say("menu.keys"), keysTable(u))
}

// keysTable has two columns.
func keysTable(u *ui) fyne.CanvasObject {
	p, zoom := u.palette(), float32(u.zoom())
	room := u.win.Canvas().Size()
	gap := 2 * pad * zoom
	table := container.New(twoColumns{gap: gap})
	first := float32(0)
	for _, row := range keysText {
		if row[1] != "" {
			first = max(first, fyne.MeasureText(say(row[0]), textSize*zoom, fyne.TextStyle{}).Width)
		}
	}
	const edges = 64 // of the sheet, and its scroll bar
	room1 := (sheetWidth(u) - gap - edges) / 2
	first = min(first, room1)
	room2 := 2*room1 - first
	cell := func(words string, c color.Color, style fyne.TextStyle) {
		t := canvas.NewText(words, c)
		t.TextSize, t.TextStyle = textSize*zoom, style
		table.Add(t)
	}
	for _, row := range keysText {
		if row[1] == "" {
			cell(say(row[0]), p.Ink, fyne.TextStyle{Bold: true})
			cell("", p.Ink, fyne.TextStyle{})
			continue
		}
		keys, does := wrapPlain(say(row[0]), first, textSize*zoom), wrapPlain(say(row[1]), room2, textSize*zoom)
		for i := range max(len(keys), len(does)) {
			cell(line(keys, i), p.Ink, fyne.TextStyle{})
			cell(line(does, i), p.Quiet, fyne.TextStyle{})
		}
	}
	scroll := container.NewVScroll(container.NewPadded(table))
	least := table.MinSize()
	scroll.SetMinSize(fyne.NewSize(0, min(least.Height+2*pad, room.Height-170*zoom)))
	return scroll
}

// line is one of several lines, or nothing behind the last.
func line(lines []string, i int) string {
	if i < len(lines) {
		return lines[i]
	}
	return ""
}

// twoColumns lays objects in rows of two, as close as lines of a text.
type twoColumns struct{ gap float32 }

// sizes are the width of the first column, that of both, and a row's height.
func (c twoColumns) sizes(objects []fyne.CanvasObject) (first, both, row float32) {
	second := float32(0)
	for i, o := range objects {
		m := o.MinSize()
		if i%2 == 0 {
			first = max(first, m.Width)
		} else {
			second = max(second, m.Width)
		}
		row = max(row, m.Height)
	}
	const lead = 1.18
	return first, first + c.gap + second, lead * row
}

// Layout implements fyne.Layout.
func (c twoColumns) Layout(objects []fyne.CanvasObject, _ fyne.Size) {
	first, _, row := c.sizes(objects)
	for i, o := range objects {
		o.Resize(o.MinSize())
		o.Move(fyne.NewPos(float32(i%2)*(first+c.gap), float32(i/2)*row))
	}
}

// MinSize implements fyne.Layout.
func (c twoColumns) MinSize(objects []fyne.CanvasObject) fyne.Size {
	_, both, row := c.sizes(objects)
	return fyne.NewSize(both, row*float32((len(objects)+1)/2))
}

func (u *ui) about() {
	u.showText("Lobewright "+u.version, say("help.about"))
}

func (u *ui) showText(title, text string) {
	body := widget.NewLabel(text)
	body.Wrapping = fyne.TextWrapWord
	u.showSheet(title, body)
}

// sheetWidth is that of a sheet with something to read.
func sheetWidth(u *ui) float32 { return min(720*float32(u.zoom()), u.win.Canvas().Size().Width-40) }

// showSheet shows something to read until it is closed.
func (u *ui) showSheet(title string, body fyne.CanvasObject) {
	var popup *widget.PopUp
	u.afterSheet = nil
	hide := func() {
		popup.Hide()
		if u.afterSheet == nil {
			u.afterSheet = u.view
		}
		u.win.Canvas().Focus(u.afterSheet)
	}
	done := newSheetButton(say("help.close"), hide, hide)
	popup = widget.NewModalPopUp(container.NewPadded(container.NewVBox(
		widget.NewLabelWithStyle(title, fyne.TextAlignLeading, fyne.TextStyle{Bold: true}), body,
		container.NewBorder(nil, nil, nil, done))), u.win.Canvas())
	popup.Show()
	width := sheetWidth(u)
	popup.Resize(fyne.NewSize(width, popup.MinSize().Height))
	popup.Resize(fyne.NewSize(width, popup.MinSize().Height)) // the text has been wrapped
	u.win.Canvas().Focus(done)
}
