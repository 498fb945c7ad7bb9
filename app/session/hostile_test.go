package session

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// hostile are files that no start may fail on, with what is said about them.
var hostile = map[string]struct{ text, want string }{
	"empty":     {"", "the file is empty"},
	"zeros":     {strings.Repeat("\x00", 4096), "this is not JSON"},
	"truncated": {"{\n  \"version\": 1,\n  \"structure\": \"demo:ca", ":3: the file is cut off here"},
	"newer":     {"{\n  \"version\": 99,\n  \"anything\": {}\n}\n", ":2: version: 99 is newer than this program"},
	"type":      {"{\n  \"version\": 1,\n  \"moment\": \"soon\"\n}\n", ":3: moment: a number is due"},
	"range":     {"{\n  \"version\": 1,\n  \"moment\": 7\n}\n", ":3: moment: 7 is too large"},
	"unknown":   {"{\n  \"version\": 1,\n  \"momemt\": 0.5\n}\n", ":3: momemt: there is no such key"},
	"list":      {"[]", ":1: the file holds a list"},
	"deep":      {strings.Repeat(`{"a":`, 100000), "exceeded max depth"},
	"oversized": {`{"version": 1, "core": "` + strings.Repeat("x", 17<<20) + `"}`, "is larger than"},
	"latin":     {"{\"version\": 1, \"core\": \"\xe4\"}", "is not UTF-8"},
}

func TestBadStudiesAreKeptAsideAndTheProgramStarts(t *testing.T) {
	for name, bad := range hostile {
		t.Run(name, func(t *testing.T) {
			folder := t.TempDir()
			path := filepath.Join(folder, "work-1.lobewright")
			if err := os.WriteFile(path, []byte(bad.text), 0o600); err != nil {
				t.Fatal(err)
			}
			s, notes := Open(Options{Folder: folder})
			if len(notes) != 1 || !strings.Contains(notes[0].In(nil), bad.want) || strings.ContainsAny(notes[0].In(nil), "\n\r") ||
				!strings.HasPrefix(notes[0].In(nil), "work-1.lobewright") || !strings.HasSuffix(notes[0].In(nil), "; the file is kept as work-1.unread-1.lobewright") {
				t.Fatalf("notes %v", notes)
			}
			if kept, err := os.ReadFile(notes[0].Kept); err != nil || string(kept) != bad.text {
				t.Error("the bad file is not kept as it was")
			}
			if _, found := s.Study(); found {
				t.Error("something is restored")
			}
			s.Keep(someStudy(0.1))
			if err := s.Close(); err != nil {
				t.Fatal(err)
			}
			again := start(t, folder)
			if st, _ := again.Study(); !st.Equal(someStudy(0.1)) {
				t.Error("work does not go on")
			}
		})
	}
}

func TestBadSettingsAreKeptAsideAndTheProgramStarts(t *testing.T) {
	for name, text := range map[string]string{
		"empty": "", "truncated": "{\"version\": 1, \"rec", "newer": "{\"version\": 2}", "type": "{\"version\": 1, \"recent\": {}}",
		"scale": "{\"version\": 1, \"preferences\": {\"scale\": 1e9}}", "theme": "{\"version\": 1, \"preferences\": {\"theme\": \"pink\"}}",
		"size": "{\"version\": 1, \"preferences\": {\"width\": -5}}", "recent": "{\"version\": 1, \"recent\": [\"a\\nb\"]}",
		"oversized": "{\"version\": 1, \"recent\": [\"" + strings.Repeat("x", 2<<20) + "\"]}",
	} {
		t.Run(name, func(t *testing.T) {
			folder := t.TempDir()
			if err := os.WriteFile(filepath.Join(folder, "settings.json"), []byte(text), 0o600); err != nil {
				t.Fatal(err)
			}
			s, notes := Open(Options{Folder: folder})
			defer s.Close()
			if len(notes) != 1 || !strings.HasPrefix(notes[0].In(nil), "settings.json:") || filepath.Base(notes[0].Kept) != "settings.unread-1.json" {
				t.Fatalf("notes %v", notes)
			}
			if s.Preferences() != (Preferences{}) || len(s.Recent()) != 0 {
				t.Error("something of it is in force")
			}
			if err := s.SetPreferences(Preferences{Theme: ThemeDark}); err != nil {
				t.Fatal(err)
			}
			if again := start(t, folder); again.Preferences().Theme != ThemeDark {
				t.Error("work does not go on")
			}
		})
	}
}

func TestWhatIsNoFileDoesNotHoldTheStartUp(t *testing.T) {
	folder := t.TempDir()
	for _, name := range []string{"work-1.lobewright", "settings.json"} {
		if err := os.MkdirAll(filepath.Join(folder, name, "inner"), 0o700); err != nil {
			t.Fatal(err)
		}
	}
	s, notes := Open(Options{Folder: folder})
	if len(notes) != 2 || !strings.Contains(notes[0].In(nil), "no ordinary file") || !strings.Contains(notes[1].In(nil), "no ordinary file") {
		t.Errorf("%v", notes)
	}
	s.Keep(someStudy(0.1))
	if err := errors.Join(s.SaveNow(), s.SetPreferences(Preferences{Scale: 2}), s.Close()); err != nil {
		t.Error(err)
	}
}

func TestManyBadFilesTakeBoundedRoom(t *testing.T) {
	folder := t.TempDir()
	for i := range mostAside + 5 {
		if err := os.WriteFile(filepath.Join(folder, "work-1.lobewright"), fmt.Appendf(nil, "bad %d", i), 0o600); err != nil {
			t.Fatal(err)
		}
		s, notes := Open(Options{Folder: folder})
		if len(notes) != 1 || notes[0].Kept == "" {
			t.Fatal(notes)
		}
		s.Close()
	}
	kept, _ := filepath.Glob(filepath.Join(folder, "*.unread-*"))
	if len(kept) != mostAside {
		t.Errorf("%d files", len(kept))
	}
}
