//go:build cgo && !nowindow

package window

import (
	"crypto/sha256"
	"io"
	"os"
	"path/filepath"
	"sync"
	"time"

	"lobewright/app/study"
)

// A fileWatch notices when files that are open change on the disk. It looks at
// them from its own goroutine, since a file system may not answer.
type fileWatch struct {
	tell func(path string, gone bool) // on the goroutine of the watch
	wake chan struct{}
	stop chan struct{}
	done chan struct{}

	mu    sync.Mutex
	paths map[string]*seenFile // nil: not looked at yet
}

// A seenFile is what a file was when it was last looked at.
type seenFile struct {
	modified time.Time
	size     int64
	sum      [sha256.Size]byte
	gone     bool
}

// lookInterval is how often open files are looked at.
const lookInterval = 2 * time.Second

func newFileWatch(interval time.Duration, tell func(path string, gone bool)) *fileWatch {
	w := &fileWatch{tell: tell, wake: make(chan struct{}, 1), stop: make(chan struct{}), done: make(chan struct{}), paths: map[string]*seenFile{}}
	go func() {
		defer close(w.done)
		t := time.NewTicker(interval)
		defer t.Stop()
		for {
			select {
			case <-w.stop:
				return
			case <-w.wake:
			case <-t.C:
			}
			w.look()
		}
	}()
	return w
}

// close ends the watch. A look that has begun is not waited for.
func (w *fileWatch) close() { close(w.stop) }

// set says which files are open; those that were watched before go on.
func (w *fileWatch) set(paths ...string) {
	w.mu.Lock()
	next := map[string]*seenFile{}
	fresh := len(paths) != len(w.paths)
	for _, p := range paths {
		seen, known := w.paths[p]
		next[p] = seen
		fresh = fresh || !known
	}
	w.paths = next
	w.mu.Unlock()
	if fresh {
		w.nudge()
	}
}

// accept takes a file as it is now: the program itself read or wrote it.
func (w *fileWatch) accept(path string) {
	w.mu.Lock()
	if _, known := w.paths[path]; known {
		w.paths[path] = nil
	}
	w.mu.Unlock()
	w.nudge()
}

func (w *fileWatch) nudge() {
	select {
	case w.wake <- struct{}{}:
	default:
	}
}

// look compares every file with what it was.
func (w *fileWatch) look() {
	w.mu.Lock()
	before := map[string]*seenFile{}
	for p, s := range w.paths {
		before[p] = s
	}
	w.mu.Unlock()
	for path, seen := range before {
		now := lookAt(path, seen)
		w.mu.Lock()
		current, known := w.paths[path]
		same := known && current == seen // nobody accepted another one meanwhile
		if same {
			w.paths[path] = now
		}
		w.mu.Unlock()
		if same && seen != nil && (now.gone != seen.gone || now.sum != seen.sum) {
			w.tell(path, now.gone)
		}
	}
}

// lookAt reads a file only if its time or size is another than before.
func lookAt(path string, before *seenFile) *seenFile {
	info, err := os.Stat(path)
	if err != nil || !info.Mode().IsRegular() {
		gone := &seenFile{gone: true}
		if before != nil {
			gone.sum = before.sum // if it comes back the same, nothing has happened
		}
		return gone
	}
	now := &seenFile{modified: info.ModTime(), size: info.Size()}
	if before != nil && !before.gone && before.modified.Equal(now.modified) && before.size == now.size {
		now.sum = before.sum
		return now
	}
	f, err := os.Open(path)
	if err != nil {
		return &seenFile{gone: true}
	}
	defer f.Close()
	h := sha256.New()
	const most = 64 << 20 // what is larger is no structure that this program reads
	_, _ = io.Copy(h, io.LimitReader(f, most))
	h.Sum(now.sum[:0])
	return now
}

// A changedFile is a file that was changed by another program and not read
// again yet.
type changedFile struct {
	path string
	gone bool
}

// watchFiles watches what is open now.
func (u *ui) watchFiles() {
	var paths []string
	s := u.now()
	if s.Coordinates == "" && filepath.IsAbs(s.Structure) {
		paths = append(paths, s.Structure)
	}
	if u.hasFile() && (len(paths) == 0 || paths[0] != u.studyFile) {
		paths = append(paths, u.studyFile)
	}
	u.watch.set(paths...)
	if c := u.changedFile; c != nil && (len(paths) == 0 || c.path != paths[0] && c.path != paths[len(paths)-1]) {
		u.changedFile = nil // it is open no more
	}
}

// fileChanged is told by the watch.
func (u *ui) fileChanged(path string, gone bool) {
	u.post(func() {
		if u.closing {
			return
		}
		u.changedFile = &changedFile{path, gone}
		u.given.scrollTo(0)
		u.given.Update()
	})
}

// readAgain reads a changed file: a structure in the place of the old one, with
// all choices kept; a study as one step that can be undone. If it cannot be
// read, nothing changes.
func (u *ui) readAgain() {
	c := u.changedFile
	if c == nil {
		return
	}
	u.changedFile = nil
	if c.path == u.studyFile {
		u.openStudy(c.path, nil)
		return
	}
	s := u.now()
	u.try(s, func(err error) {
		if err == nil {
			u.do(study.StepOpen, s)
			u.service.Request(s)
			u.remark(say("files.readAgain", filepath.Base(c.path)))
		}
		u.tell(err, nil)
	})
}

// drawChanged shows that a file has changed, with what can be done.
func (d *givenDrawing) drawChanged() {
	c := d.changedFile
	if c == nil {
		return
	}
	name := filepath.Base(c.path)
	text := say("files.changed", name)
	if c.gone {
		text = say("files.gone", name)
	}
	d.words(text, d.accent)
	x := float64(pad)
	offer := func(key, label, hint string, do func()) {
		w := d.board.measure(words(label), d.quiet) + 14
		drawChip(d.board, x, d.y, w, words(label), secondSize, chip{name: key, hint: hint, do: do})
		x += w + 4
	}
	if !c.gone {
		offer("changed read", say("files.readIt"), say("files.readItHint"), d.readAgain)
	}
	offer("changed keep", say("files.keepIt"), say("files.keepItHint"), func() {
		d.changedFile = nil
		d.ui.given.Update()
	})
	d.y += chipHeight + 10
}
