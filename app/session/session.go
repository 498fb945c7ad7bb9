// Package session keeps what must outlive the program: the study at hand,
// saved every few seconds and found again after a crash or a kill, the files
// opened lately, and the preferences. All of it stands in the program's own
// folder under the user's configuration folder:
//
//	work-1.lobewright   the study of the first instance of the program, a study file like any other
//	work-1.running      there while that instance runs; see Settled
//	work-1.lock         locked while it runs
//	work-2.…            the same of a second instance, and so on
//	settings.json       recent files and preferences of all instances
//	settings.lock       locked while these are changed
//
// Every file is written beside the old one, flushed to the disk and renamed, so
// that there is always a whole one. Instances that run at once never write the
// same study: each has a slot of its own for as long as it runs, held by a lock
// that the system takes back however the program ends. Settings are read,
// changed and written under a lock; of two changes to the same preference the
// later wins. On a file system without locks the later writer wins everywhere,
// still with whole files.
//
// A file that cannot be read, because it is damaged or of a newer version, is
// renamed and left for the user; the program starts without it.
package session

import (
	"errors"

	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"time"

	"lobewright/app/study"
	"lobewright/symmetry/message"
)

// FolderVariable is the environment variable that names another folder than
// the usual one.
const FolderVariable = "LOBEWRIGHT_CONFIG"

// DefaultInterval is how long a change may wait for being saved.
const DefaultInterval = 2 * time.Second

// Options are what a session can be told.
type Options struct {
	// Folder is the session's folder; empty stands for the one that
	// FolderVariable names, or else lobewright in the user's configuration
	// folder.
	Folder string
	// Interval is the longest that a change waits for being saved; zero stands
	// for DefaultInterval.
	Interval time.Duration
	// Report is told, on any goroutine, that saving in the background failed:
	// once until it works again. It may be nil.
	Report func(error)
}

// A Note is something that the user ought to know about a start, in one line.
type Note struct {
	Text message.Text
	// Kept is the path to which a file that cannot be read was renamed, or "".
	Kept string
}

// In is the text in a language, nil for English, on one line whatever the name
// of a file contains.
func (n Note) In(l *message.Language) string { return oneLine(n.Text.In(l)) }

// A Session is one running instance of the program. Its methods may be called
// by several goroutines. Without a folder to write to it keeps everything in
// memory.
type Session struct {
	options  Options
	folder   string // "" without one
	slot     int
	lock     *lock
	restored study.Study
	found    bool

	mu       sync.Mutex
	now      study.Study
	kept     bool // there is a study to save
	saved    study.Study
	onDisk   bool // saved is
	timer    *time.Timer
	closed   bool
	reported string
	settings settings

	writing sync.Mutex // held while the study is written
}

// Open starts a session. It always succeeds; what is remarkable about it is in
// the notes.
func Open(o Options) (*Session, []Note) {
	if o.Interval <= 0 {
		o.Interval = DefaultInterval
	}
	s := &Session{options: o}
	folder, err := folderOf(o.Folder)
	if err == nil {
		err = os.MkdirAll(folder, 0o700)
	}
	if err == nil {
		s.slot, s.lock, err = takeSlot(folder)
	}
	if err != nil {
		return s, []Note{{Text: message.Words("nothing can be saved: %v", err)}}
	}
	s.folder = folder
	notes := s.restore()
	return s, append(notes, s.loadSettings()...)
}

func folderOf(folder string) (string, error) {
	if folder == "" {
		folder = os.Getenv(FolderVariable)
	}
	if folder != "" {
		return filepath.Abs(folder)
	}
	base, err := os.UserConfigDir()
	if err != nil {
		return "", err
	}
	return filepath.Join(base, "lobewright"), nil
}

// Slot is the number of this instance among those that run, from 1; 0 if
// nothing can be saved.
func (s *Session) Slot() int { return s.slot }

// Study is the study that the last instance in this slot left, and whether it
// left one.
func (s *Session) Study() (study.Study, bool) { return s.restored, s.found }

// Keep has a study saved within the interval. It is meant for every change and
// costs next to nothing.
func (s *Session) Keep(st study.Study) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.now, s.kept = st, true
	if s.timer == nil && s.unsaved() {
		s.timer = time.AfterFunc(s.options.Interval, s.saveInBackground)
	}
}

// unsaved tells whether there is something to write. The lock is held.
func (s *Session) unsaved() bool {
	return s.kept && !s.closed && s.folder != "" && !(s.onDisk && s.saved.Equal(s.now))
}

func (s *Session) saveInBackground() {
	s.mu.Lock()
	s.timer = nil
	s.mu.Unlock()
	err := s.save()
	s.mu.Lock()
	text := ""
	if err != nil {
		text = err.Error()
	}
	tell := text != "" && text != s.reported && s.options.Report != nil
	s.reported = text
	s.mu.Unlock()
	if tell {
		s.options.Report(err)
	}
}

// save writes the study at hand if it differs from what is on the disk.
func (s *Session) save() error {
	s.writing.Lock()
	defer s.writing.Unlock()
	s.mu.Lock()
	st, due := s.now, s.unsaved()
	s.mu.Unlock()
	if !due {
		return nil
	}
	data, err := study.Encode(st)
	if err == nil {
		err = write(s.path("lobewright"), data)
	}
	if err != nil {
		return message.Errorf("the study cannot be saved: %w", err)
	}
	s.mu.Lock()
	s.saved, s.onDisk = st, true
	s.mu.Unlock()
	return nil
}

// SaveNow writes the study at hand before it returns, as is due when something
// has gone badly wrong.
func (s *Session) SaveNow() error { return s.save() }

// Close writes what is not yet written and ends the session. Afterwards nothing
// is written any more.
func (s *Session) Close() error {
	s.mu.Lock()
	if s.timer != nil {
		s.timer.Stop()
		s.timer = nil
	}
	s.mu.Unlock()
	err := s.save()
	s.writing.Lock()
	defer s.writing.Unlock()
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.closed || s.folder == "" {
		return err
	}
	s.closed = true
	os.Remove(s.path("running"))
	s.lock.release()
	return err
}

// path is the path of a file of this slot.
func (s *Session) path(extension string) string { return slotPath(s.folder, s.slot, extension) }

func slotPath(folder string, slot int, extension string) string {
	return filepath.Join(folder, "work-"+strconv.Itoa(slot)+"."+extension)
}

// mostSlots is how many instances can save at once.
const mostSlots = 64

// takeSlot locks a slot that no running instance has: the first one whose
// instance did not end well, so that its work is found again; else the first.
func takeSlot(folder string) (int, *lock, error) {
	var free, crashed *lock
	var freeSlot, crashedSlot int
	for slot := 1; slot <= mostSlots; slot++ {
		_, err := os.Lstat(slotPath(folder, slot, "running"))
		left := err == nil
		if free != nil && !left {
			continue
		}
		l, err := tryLock(slotPath(folder, slot, "lock"))
		if err != nil {
			if free != nil {
				free.release()
			}
			return 0, nil, err
		}
		switch {
		case l == nil: // it runs
		case left:
			crashed, crashedSlot = l, slot
		default:
			free, freeSlot = l, slot
		}
		if crashed != nil {
			break
		}
	}
	switch {
	case crashed != nil:
		if free != nil {
			free.release()
		}
		return crashedSlot, crashed, nil
	case free != nil:
		return freeSlot, free, nil
	}
	return 0, nil, message.Errorf("%d instances of the program run already", mostSlots)
}

// mostDeaths is how often the program may end before a restored study has been
// shown until the study is suspected.
const mostDeaths = 2

// restore takes the slot over and reads its study.
func (s *Session) restore() []Note {
	s.removeParts()
	deaths := s.deaths()
	var notes []Note
	if err := write(s.path("running"), []byte(strconv.Itoa(deaths+1)+"\n")); err != nil {
		notes = append(notes, Note{Text: message.Words("nothing can be saved: %v", err)})
	}
	return append(notes, s.restoreStudy(deaths)...)
}

func (s *Session) restoreStudy(deaths int) []Note {
	path := s.path("lobewright")
	if deaths >= mostDeaths {
		if _, err := os.Lstat(path); err != nil {
			return nil
		}
		return []Note{putAside(path, message.Errorf("%s: the program ended %d times before this study was shown", filepath.Base(path), deaths))}
	}
	f, err := openRegular(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	var st study.Study
	if err == nil {
		st, err = study.Read(f, filepath.Base(path))
		f.Close()
	}
	if err != nil {
		return []Note{putAside(path, err)}
	}
	s.restored, s.found = st, true
	s.now, s.kept, s.saved, s.onDisk = st, true, st, true
	return nil
}

// deaths is how often in a row instances in this slot ended without having
// shown what they restored. A file that is not readable counts as none.
func (s *Session) deaths() int {
	f, err := openRegular(s.path("running"))
	if err != nil {
		return 0
	}
	defer f.Close()
	var start [8]byte
	n, _ := f.Read(start[:])
	deaths, err := strconv.Atoi(strings.TrimSpace(string(start[:n])))
	if err != nil || deaths < 0 {
		return 0
	}
	return deaths
}

// Settled is to be called once the restored study is on the screen. A study
// before which the program ends twice is put aside at the next start, since it
// may be what ends the program.
func (s *Session) Settled() {
	s.mu.Lock()
	defer s.mu.Unlock()
	if !s.closed && s.folder != "" {
		// If this fails the study may be put aside without need, where it can
		// be found.
		_ = write(s.path("running"), []byte("0\n"))
	}
}
