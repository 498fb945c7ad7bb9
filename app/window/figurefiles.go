//go:build cgo && !nowindow

package window

import (
	"context"
	"errors"
	"image"
	"io"
	"path/filepath"
	"slices"
	"strings"
	"sync/atomic"
	"time"

	"fyne.io/fyne/v2"

	"lobewright/app/export"
	"lobewright/app/picture"
	"lobewright/app/sheet"
	"lobewright/app/study"
	"lobewright/app/work"
)

// A writing is a figure or an animation on its way to a file, beside the
// toolkit's goroutine, to which its fields belong.
type writing struct {
	running bool
	name    string // of the file
	share   float64
	stop    context.CancelFunc
	done    chan struct{}
	said    string // what came of the last one
	failed  bool
}

// close ends what is being written, and leaves no part of a file.
func (w *writing) close() {
	if w.running {
		w.stop()
		<-w.done
	}
}

// filmEndings are those of files that an animation can be written to.
var filmEndings = []string{".gif", ".apng", ".mp4", ".png", ".glb"}

// sheetCommands are the commands of sheets and animations.
func (u *ui) sheetCommands() []*command {
	p := &u.pages
	there := func() bool { return u.state.Group != nil }
	return []*command{
		p.command("figure.menuSheet", sheetPage, fyne.Key5),
		{key: "figure.menuSaveSheet", do: u.askSheetFile, can: there},
		p.command("figure.menuFilm", filmPage, fyne.Key6),
		{key: "figure.menuSaveFilm", do: u.askFilmFile, can: func() bool { return there() && u.noFilm() == "" }},
	}
}

// cancelWriting names the spot that stops what is being written.
const cancelWriting = "cancel writing"

// handOver marks what has taken the place of the button that saves or cancels,
// where the keyboard was on that.
func (p *pages) handOver(name string) {
	if slices.Contains([]string{"save sheet", "save film", cancelWriting}, p.pane.mark) {
		p.pane.mark = name
	}
	p.pane.Update()
}

// saveRow is the button that saves, or how far it has come.
func (d *pageDrawing) saveRow(name, hint string, ask func()) {
	w := &d.pages.writing
	x := float64(pad)
	if w.running {
		d.words(say("figure.writing", w.name), d.quiet)
		d.y += 2
		d.bar(w.share)
		d.option(&x, cancelWriting, say("figure.cancel"), say("figure.cancelHint"), false, func() { w.stop() })
		d.endChoices()
		return
	}
	d.option(&x, name, say("figure.save"), hint, true, ask)
	d.endChoices()
	if w.said != "" {
		s := d.quiet
		if w.failed {
			s = d.accent
		}
		d.words(w.said, s)
		d.y += 4
	}
}

// askSheetFile asks where the sheet is to be written.
func (u *ui) askSheetFile() {
	u.askFigureFile(say("figure.saveSheet"), say("figure.saveSheetText"), "sheet.pdf", export.SheetEndings,
		func(ctx context.Context, path string, force bool, s study.Study, structure *work.Structure, _ func(float64)) error {
			made, err := sheet.Make(ctx, u.work, s)
			if err != nil {
				return err
			}
			return export.WriteFile(path, force, func(w io.Writer) error {
				return export.WriteSheet(ctx, w, made, path, s.Figure.TheResolution(), carriedOf(s, structure))
			})
		})
}

// askFilmFile asks where the animation is to be written.
func (u *ui) askFilmFile() {
	if why := u.noFilm(); why != "" {
		u.pages.writing.said, u.pages.writing.failed = why, true
		u.pages.pane.Update()
		return
	}
	u.askFigureFile(say("figure.saveFilm"), say("figure.saveFilmText"), "operation.gif", filmEndings, u.writeFilm)
}

// A figureWriter writes a file of a study; share is told how far it has come.
type figureWriter func(ctx context.Context, path string, force bool, s study.Study, structure *work.Structure, share func(float64)) error

// askFigureFile asks for a name with one of some endings and has the file
// written, over one that is there only after a question.
func (u *ui) askFigureFile(title, text, name string, endings []string, write figureWriter) {
	if u.pages.writing.running {
		u.remark(say("figure.oneAtATime"))
		return
	}
	u.hints.show("", fyne.Position{})
	u.askNewPath(title, text, u.folder()+name, func(path string, done func(error)) {
		ending := strings.ToLower(filepath.Ext(path))
		if !slices.Contains(endings, ending) {
			done(errors.New(say("figure.endings", strings.Join(endings, " "))))
			return
		}
		// What can be told of the place is told beside it; the rest takes time,
		// and the window goes on.
		u.replacing(path, func(force bool, done func(error)) {
			if err := u.refused(path, ending, slices.Contains(endings, ".gif"), force); err != nil {
				done(err)
				return
			}
			done(nil)
			u.pages.refocus()
			u.startWriting(path, force, write)
		}, done)
	})
}

// refused tells beforehand why a file cannot be written. The pictures of a film
// have names of their own, which are known later.
func (u *ui) refused(path, ending string, film, force bool) error {
	switch {
	case film && ending == ".png":
		return nil
	case ending == ".mp4":
		if err := export.CheckMP4(); err != nil {
			return err
		}
	case ending == ".gif":
		if err := export.CheckGIF(u.now().Animation.Rate); err != nil {
			return err
		}
	}
	return export.CheckTarget(path, force)
}

// startWriting writes beside the toolkit.
func (u *ui) startWriting(path string, force bool, write figureWriter) {
	w := &u.pages.writing
	if w.running {
		return
	}
	s, structure := inLanguage(u.now()), u.state.Structure
	ctx, stop := context.WithCancel(context.Background())
	*w = writing{running: true, name: filepath.Base(path), stop: stop, done: make(chan struct{})}
	done := w.done
	last := time.Now()
	share := func(x float64) {
		const often = 100 * time.Millisecond
		if time.Since(last) < often || ctx.Err() != nil {
			return
		}
		last = time.Now()
		u.post(func() {
			if w.done == done {
				w.share = x
				u.pages.pane.Update()
			}
		})
	}
	go func() {
		defer close(done)
		err := func() (err error) {
			defer func() {
				if fault := recover(); fault != nil {
					err = faultError{fault}
				}
			}()
			return write(ctx, path, force, s, structure, share)
		}()
		u.post(func() { u.guard(func() { u.written(path, err, write) }) })
	}()
	u.pages.handOver(cancelWriting)
}

// written takes news of a file.
func (u *ui) written(path string, err error, write figureWriter) {
	w := &u.pages.writing
	w.stop()
	w.running = false
	switch {
	case u.closing:
	case errors.Is(err, context.Canceled):
		w.said = say("figure.cancelled", w.name)
	case errors.Is(err, export.ErrExists):
		u.askReplace(path, func() { u.startWriting(path, true, write) })
	case err != nil:
		w.said, w.failed = say("figure.notWritten", w.name, told(err)), true
	default:
		w.said = say("figure.written", w.name)
	}
	if u.pages.open == noPage && w.said != "" && !u.closing {
		u.remark(w.said)
	}
	save := "save sheet"
	if u.pages.open == filmPage {
		save = "save film"
	}
	u.pages.handOver(save)
}

// writeFilm writes an animation; it is a figureWriter.
func (u *ui) writeFilm(ctx context.Context, path string, force bool, s study.Study, structure *work.Structure, share func(float64)) error {
	if s.Projection.TheSubject() == study.NoSubject {
		s.Projection.Function = 1
	}
	play, err := u.work.Play(ctx, s)
	if err != nil {
		return err
	}
	movie, err := picture.NewMovie(play, s)
	if err != nil {
		return err
	}
	film := export.FilmOf(movie)
	n := len(film.Seconds)
	total := n
	if strings.EqualFold(filepath.Ext(path), ".gif") {
		const looks = 9 // at the colours, before
		total += min(looks, n)
	}
	var count atomic.Int64
	paint := film.Paint
	film.Paint = func(ctx context.Context, k int, dst *image.RGBA) error {
		err := paint(ctx, k, dst)
		share(float64(count.Add(1)) / float64(total))
		return err
	}
	return export.WriteMovie(ctx, path, force, movie, film, s, func(s study.Study) ([]byte, error) { return carriedOf(s, structure), nil })
}
