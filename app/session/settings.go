package session

import (
	"errors"
	"io/fs"
	"math"
	"path/filepath"
	"slices"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"lobewright/app/study/record"
)

// Preferences are how a person wants the program to be.
type Preferences struct {
	Theme Theme `record:"theme"`
	// Scale magnifies type and controls; zero stands for 1.
	Scale float64 `record:"scale"`
	// NoMotion shows stills in the place of animations.
	NoMotion bool `record:"noMotion"`
	// Width and Height are those of the window; zero stands for the default.
	Width  float64 `record:"width"`
	Height float64 `record:"height"`
	// Language is that of the window: en, de; empty as the system has it.
	Language string `record:"language"`
	// Shown tells that the steps of the first start were gone through or sent
	// away, and do not come back by themselves.
	Shown bool `record:"shown"`
}

// A Theme is a choice of colours for the window.
type Theme string

// The themes.
const (
	ThemeSystem   Theme = "" // as the desktop has it
	ThemeLight    Theme = "light"
	ThemeDark     Theme = "dark"
	ThemeContrast Theme = "contrast" // high contrast
)

// TheScale is the scale in force.
func (p Preferences) TheScale() float64 {
	if p.Scale == 0 {
		return 1
	}
	return p.Scale
}

// Limits of settings.
const (
	// MaxRecent is how many recent files are kept.
	MaxRecent = 12
	// MinScale and MaxScale bound the scale: below nothing can be read, above
	// nothing fits.
	MinScale, MaxScale = 0.5, 4

	maxSide = 100_000 // of the window
	maxPath = 4096    // bytes
)

// settings are what all instances share.
type settings struct {
	Recent      []string    `record:"recent"`
	Preferences Preferences `record:"preferences"`
}

var settingsForm = record.Form{Version: 1, MaxBytes: 1 << 20}

// Check tells what is out of range.
func (s settings) Check() error {
	p := s.Preferences
	switch p.Theme {
	case ThemeSystem, ThemeLight, ThemeDark, ThemeContrast:
	default:
		return record.Wrong("preferences.theme", "%.40q is not known; there are light, dark, contrast", string(p.Theme))
	}
	switch p.Language {
	case "", "en", "de":
	default:
		return record.Wrong("preferences.language", "%.40q is not known; there are en, de", p.Language)
	}
	if p.Scale != 0 && !(p.Scale >= MinScale && p.Scale <= MaxScale) {
		return record.Wrong("preferences.scale", "%g is out of range; it goes from %g to %g", p.Scale, float64(MinScale), float64(MaxScale))
	}
	for key, x := range map[string]float64{"preferences.width": p.Width, "preferences.height": p.Height} {
		if math.IsNaN(x) || x < 0 || x > maxSide {
			return record.Wrong(key, "%g is out of range", x)
		}
	}
	for _, path := range s.Recent {
		if len(path) > maxPath || !utf8.ValidString(path) || strings.ContainsFunc(path, unicode.IsControl) {
			return record.Wrong("recent", "%.40q is no name of a structure", path)
		}
	}
	return nil
}

func (s *Session) settingsPath() string { return filepath.Join(s.folder, "settings.json") }

// readSettings reads what is on the disk; nothing there is no error.
func (s *Session) readSettings() (settings, error) {
	f, err := openRegular(s.settingsPath())
	if errors.Is(err, fs.ErrNotExist) {
		return settings{}, nil
	}
	if err != nil {
		return settings{}, err
	}
	defer f.Close()
	var out settings
	if err := settingsForm.Read(f, filepath.Base(s.settingsPath()), &out); err != nil {
		return settings{}, err
	}
	out.Recent = out.Recent[:min(len(out.Recent), MaxRecent)]
	return out, nil
}

// loadSettings reads the settings at the start.
func (s *Session) loadSettings() []Note {
	read, err := s.readSettings()
	if err != nil {
		return []Note{putAside(s.settingsPath(), err)}
	}
	s.settings = read
	return nil
}

// change changes the settings, those on the disk included, which another
// instance may have changed since.
func (s *Session) change(f func(*settings)) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.folder == "" || s.closed {
		f(&s.settings)
		return nil
	}
	l := waitLock(filepath.Join(s.folder, "settings.lock"))
	defer l.release()
	if read, err := s.readSettings(); err == nil {
		s.settings = read
	} // else what this instance knows replaces what cannot be read
	next := settings{slices.Clone(s.settings.Recent), s.settings.Preferences}
	f(&next)
	data, err := settingsForm.Encode(next)
	if err != nil {
		return err
	}
	s.settings = next
	return write(s.settingsPath(), data)
}

// waitLock waits a while for a lock. If another instance hangs, it is better to
// go on without than to hang too.
func waitLock(path string) *lock {
	for until := time.Now().Add(2 * time.Second); ; time.Sleep(2 * time.Millisecond) {
		l, err := tryLock(path)
		if l != nil || err != nil || time.Now().After(until) {
			return l
		}
	}
}

// Preferences are those in force.
func (s *Session) Preferences() Preferences {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.settings.Preferences
}

// SetPreferences saves preferences before it returns. What is out of range is
// refused; if only the writing fails they are in force all the same.
func (s *Session) SetPreferences(p Preferences) error {
	if err := (settings{Preferences: p}).Check(); err != nil {
		return err
	}
	return s.change(func(t *settings) { t.Preferences = p })
}

// Recent lists the structures that were opened lately, by any instance as far
// as this one knows, the newest first.
func (s *Session) Recent() []string {
	s.mu.Lock()
	defer s.mu.Unlock()
	return slices.Clone(s.settings.Recent)
}

// AddRecent puts a structure first in the list, as a study names it; the path
// of a file should be absolute.
func (s *Session) AddRecent(structure string) error {
	if err := (settings{Recent: []string{structure}}).Check(); err != nil {
		return err
	}
	return s.change(func(t *settings) {
		t.Recent = slices.DeleteFunc(t.Recent, func(r string) bool { return r == structure })
		t.Recent = slices.Insert(t.Recent, 0, structure)
		t.Recent = t.Recent[:min(len(t.Recent), MaxRecent)]
	})
}

// ForgetRecent takes a structure off the list, as when its file is gone.
func (s *Session) ForgetRecent(structure string) error {
	return s.change(func(t *settings) {
		t.Recent = slices.DeleteFunc(t.Recent, func(r string) bool { return r == structure })
	})
}
