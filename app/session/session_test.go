package session

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"reflect"
	"runtime"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"lobewright/app/files"
	"lobewright/app/study"
)

// start opens a session in a folder and holds that there is nothing to remark.
func start(t *testing.T, folder string) *Session {
	t.Helper()
	s, notes := Open(Options{Folder: folder, Interval: 20 * time.Millisecond, Report: func(err error) { t.Error(err) }})
	if len(notes) > 0 {
		t.Errorf("notes: %v", notes)
	}
	t.Cleanup(func() { s.Close() })
	return s
}

func someStudy(moment float64) study.Study {
	return study.Study{Structure: "demo:cage", Basis: []string{"C:s"}, Operation: "C3(1)", Moment: moment}
}

func fileNames(t *testing.T, folder string) []string {
	t.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
	}
	return names
}

// crash ends a session as a kill would: the system takes the lock back, and
// nothing else happens.
func (s *Session) crash() {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.timer != nil {
		s.timer.Stop()
	}
	s.closed = true
	s.lock.release()
}

func TestAChangedStudyIsSavedSoonAndFoundAgain(t *testing.T) {
	folder := t.TempDir()
	s := start(t, folder)
	if _, found := s.Study(); found {
		t.Error("there is a study before the first")
	}
	s.Keep(someStudy(0.1))
	s.Keep(someStudy(0.2))
	waitFor(t, "the study to be saved", func() bool {
		data, err := os.ReadFile(filepath.Join(folder, "work-1.lobewright"))
		if err != nil {
			return false
		}
		saved, err := study.Decode(data, "saved")
		return err == nil && saved.Equal(someStudy(0.2))
	})
	s.crash()
	again := start(t, folder)
	if st, found := again.Study(); !found || !st.Equal(someStudy(0.2)) {
		t.Errorf("%v %+v", found, st)
	}
}

func waitFor(t *testing.T, what string, done func() bool) {
	t.Helper()
	for end := time.Now().Add(10 * time.Second); !done(); time.Sleep(2 * time.Millisecond) {
		if time.Now().After(end) {
			t.Fatalf("waiting in vain for %s", what)
		}
	}
}

func TestWhatDoesNotChangeIsNotWritten(t *testing.T) {
	folder := t.TempDir()
	s := start(t, folder)
	path := filepath.Join(folder, "work-1.lobewright")
	s.Keep(someStudy(0.1))
	if err := s.SaveNow(); err != nil {
		t.Fatal(err)
	}
	if err := os.Remove(path); err != nil {
		t.Fatal(err)
	}
	s.Keep(someStudy(0.1))
	if err := s.SaveNow(); err != nil {
		t.Fatal(err)
	}
	s.mu.Lock()
	waiting := s.timer != nil && s.unsaved()
	s.mu.Unlock()
	if _, err := os.Stat(path); waiting || !errors.Is(err, fs.ErrNotExist) {
		t.Error("the same study is written a second time")
	}
}

func TestSavingAtOnceAndAtTheEnd(t *testing.T) {
	folder := t.TempDir()
	s, _ := Open(Options{Folder: folder, Interval: time.Hour})
	s.Keep(someStudy(0.3))
	if err := s.SaveNow(); err != nil {
		t.Fatal(err)
	}
	s.crash()
	s, _ = Open(Options{Folder: folder, Interval: time.Hour})
	if st, _ := s.Study(); st.Moment != 0.3 {
		t.Errorf("saved at once: %v", st.Moment)
	}
	s.Keep(someStudy(0.4))
	if err := s.Close(); err != nil {
		t.Fatal(err)
	}
	s.Keep(someStudy(0.5))
	if err := errors.Join(s.SaveNow(), s.Close()); err != nil {
		t.Fatal(err)
	}
	s = start(t, folder)
	if st, _ := s.Study(); st.Moment != 0.4 {
		t.Errorf("saved at the end: %v", st.Moment)
	}
	want := []string{"work-1.lobewright", "work-1.lock", "work-1.running"}
	if got := fileNames(t, folder); !slices.Equal(got, want) {
		t.Errorf("the folder has %v", got)
	}
}

func TestTheFolderIsTheOneThatIsNamed(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "deep", "inside")
	t.Setenv(FolderVariable, folder)
	s, notes := Open(Options{})
	if len(notes) > 0 || s.Close() != nil {
		t.Error(notes)
	}
	if names := fileNames(t, folder); !slices.Contains(names, "work-1.lock") {
		t.Errorf("%v", names)
	}
	t.Setenv(FolderVariable, "")
	usual, err := folderOf("")
	base, _ := os.UserConfigDir()
	if err != nil || usual != filepath.Join(base, "lobewright") {
		t.Errorf("%v %v", usual, err)
	}
}

func TestWithoutAFolderTheProgramRunsAllTheSame(t *testing.T) {
	blocked := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(blocked, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	s, notes := Open(Options{Folder: blocked})
	if len(notes) != 1 || !strings.HasPrefix(notes[0].In(nil), "nothing can be saved: ") || strings.Contains(notes[0].In(nil), "\n") {
		t.Errorf("%v", notes)
	}
	s.Keep(someStudy(0.1))
	s.Settled()
	if s.Slot() != 0 || s.SetPreferences(Preferences{Scale: 2}) != nil || s.AddRecent("demo:cage") != nil || s.SaveNow() != nil {
		t.Error("something is refused")
	}
	if s.Preferences().Scale != 2 || !slices.Equal(s.Recent(), []string{"demo:cage"}) {
		t.Error("memory does not keep it")
	}
	if err := s.Close(); err != nil {
		t.Error(err)
	}
}

// TestAStudyThatEndsTheProgramIsSuspected: twice the program ends before it has
// shown the study; the third start goes without it.
func TestAStudyThatEndsTheProgramIsSuspected(t *testing.T) {
	folder := t.TempDir()
	s := start(t, folder)
	s.Keep(someStudy(0.1))
	s.SaveNow()
	s.Settled()
	s.crash() // after it was shown: no suspicion
	for range mostDeaths {
		s = start(t, folder)
		if _, found := s.Study(); !found {
			t.Fatal("suspected too early")
		}
		s.crash()
	}
	s, notes := Open(Options{Folder: folder})
	if _, found := s.Study(); found || len(notes) != 1 || !strings.Contains(notes[0].In(nil), "ended 2 times") || notes[0].Kept == "" {
		t.Errorf("%v %v", found, notes)
	}
	s.Keep(someStudy(0.2))
	s.Close() // an orderly end is no death
	for range mostDeaths + 1 {
		s = start(t, folder)
		if st, _ := s.Study(); st.Moment != 0.2 {
			t.Error("the new study is not found")
		}
		s.Close()
	}
}

func TestInstancesThatRunAtOnceHaveTheirOwnStudies(t *testing.T) {
	folder := t.TempDir()
	first, second := start(t, folder), start(t, folder)
	if first.Slot() != 1 || second.Slot() != 2 {
		t.Fatalf("slots %d and %d", first.Slot(), second.Slot())
	}
	first.Keep(someStudy(0.1))
	second.Keep(someStudy(0.2))
	first.SaveNow()
	second.SaveNow()
	second.Settled()
	second.crash()
	// Slot 1 still runs; the work of the second is found.
	third := start(t, folder)
	if st, _ := third.Study(); third.Slot() != 2 || st.Moment != 0.2 {
		t.Errorf("slot %d, moment %v", third.Slot(), st.Moment)
	}
	third.crash()
	first.Close()
	// Both slots are free: what crashed comes first.
	fourth := start(t, folder)
	if fourth.Slot() != 2 {
		t.Errorf("slot %d", fourth.Slot())
	}
	fifth := start(t, folder)
	if st, _ := fifth.Study(); fifth.Slot() != 1 || st.Moment != 0.1 {
		t.Errorf("slot %d, moment %v", fifth.Slot(), st.Moment)
	}
}

func TestTooManyInstancesRunWithoutSaving(t *testing.T) {
	folder := t.TempDir()
	for i := range mostSlots {
		if s := start(t, folder); s.Slot() != i+1 {
			t.Fatalf("slot %d", s.Slot())
		}
	}
	s, notes := Open(Options{Folder: folder})
	if s.Slot() != 0 || len(notes) != 1 {
		t.Errorf("%v", notes)
	}
	s.Close()
}

func TestSettingsAreSharedByAllInstances(t *testing.T) {
	folder := t.TempDir()
	first, second := start(t, folder), start(t, folder)
	all := Preferences{Theme: ThemeContrast, Scale: 1.5, NoMotion: true, Width: 1280, Height: 800.5, Language: "de", Shown: true}
	if err := first.SetPreferences(all); err != nil {
		t.Fatal(err)
	}
	if err := second.AddRecent("/a.xyz"); err != nil {
		t.Fatal(err)
	}
	if got := start(t, folder); got.Preferences() != all || !slices.Equal(got.Recent(), []string{"/a.xyz"}) {
		t.Errorf("%+v %v", got.Preferences(), got.Recent())
	}
	if second.Preferences() != all {
		t.Error("an instance that writes does not see what another one wrote")
	}
	v := reflect.ValueOf(all)
	for i := range v.NumField() {
		if v.Field(i).IsZero() {
			t.Errorf("the test leaves %s out", v.Type().Field(i).Name)
		}
	}
}

func TestRecentFilesStandNewestFirstEachOnce(t *testing.T) {
	s := start(t, t.TempDir())
	for i := range MaxRecent + 3 {
		if err := s.AddRecent(fmt.Sprintf("/%d.xyz", i)); err != nil {
			t.Fatal(err)
		}
	}
	s.AddRecent("/10.xyz")
	s.ForgetRecent("/13.xyz")
	want := []string{"/10.xyz", "/14.xyz", "/12.xyz", "/11.xyz", "/9.xyz"}
	if got := s.Recent(); len(got) != MaxRecent-1 || !slices.Equal(got[:5], want) {
		t.Errorf("%v", got)
	}
	for _, bad := range []string{"a\nb", "\xff", strings.Repeat("x", 5000)} {
		if s.AddRecent(bad) == nil {
			t.Errorf("%.20q is taken", bad)
		}
	}
	if s.SetPreferences(Preferences{Scale: 99}) == nil || s.SetPreferences(Preferences{Theme: "pink"}) == nil || s.Preferences() != (Preferences{}) {
		t.Error("preferences out of range are taken")
	}
}

func TestChangesAtOnceAreNotLost(t *testing.T) {
	folder := t.TempDir()
	var all sync.WaitGroup
	for i := range MaxRecent {
		s := start(t, folder)
		all.Go(func() {
			if err := s.AddRecent(fmt.Sprintf("/%d.xyz", i)); err != nil {
				t.Error(err)
			}
		})
	}
	all.Wait()
	if got := start(t, folder).Recent(); len(got) != MaxRecent {
		t.Errorf("%v", got)
	}
}

func TestKeepingFromManyGoroutinesIsSafe(t *testing.T) {
	folder := t.TempDir()
	s := start(t, folder)
	var all sync.WaitGroup
	for g := range 4 {
		all.Go(func() {
			for i := range 50 {
				s.Keep(someStudy(float64(g*50+i) / 200))
				if i%10 == 0 {
					if err := s.SaveNow(); err != nil {
						t.Error(err)
					}
				}
				s.Preferences()
			}
		})
	}
	all.Wait()
	s.Keep(someStudy(1))
	s.Close()
	if st, _ := start(t, folder).Study(); st.Moment != 1 {
		t.Errorf("moment %v", st.Moment)
	}
}

func TestAFailureIsReportedOnceAndSavingGoesOn(t *testing.T) {
	folder := t.TempDir()
	var mu sync.Mutex
	var reports []string
	s, _ := Open(Options{Folder: folder, Interval: time.Millisecond, Report: func(err error) {
		mu.Lock()
		defer mu.Unlock()
		reports = append(reports, err.Error())
	}})
	count := func() int { mu.Lock(); defer mu.Unlock(); return len(reports) }
	// A folder in the place of the file: it cannot be replaced.
	path := filepath.Join(folder, "work-1.lobewright")
	if err := os.MkdirAll(filepath.Join(path, "inner"), 0o700); err != nil {
		t.Fatal(err)
	}
	for i := range 5 {
		s.Keep(someStudy(float64(i+1) / 10))
		waitFor(t, "a report", func() bool { return count() > 0 })
		time.Sleep(5 * time.Millisecond)
	}
	if count() != 1 || !strings.HasPrefix(reports[0], "the study cannot be saved: cannot write ") || strings.Contains(reports[0], ".part") {
		t.Errorf("%q", reports)
	}
	if err := s.SaveNow(); err == nil {
		t.Error("no error")
	}
	os.RemoveAll(path)
	if err := s.SaveNow(); err != nil {
		t.Error(err)
	}
	s.Keep(study.Study{Moment: 5}) // out of range: it could not be read again
	if err := s.SaveNow(); err == nil {
		t.Error("a study is saved that cannot be read")
	}
	s.Keep(someStudy(0.9))
	if err := s.Close(); err != nil {
		t.Error(err)
	}
	for _, name := range fileNames(t, folder) {
		if strings.HasSuffix(name, files.PartEnding) {
			t.Errorf("%s is left", name)
		}
	}
}

func TestNoGoroutineIsLeft(t *testing.T) {
	before := runtime.NumGoroutine()
	for range 20 {
		s, _ := Open(Options{Folder: t.TempDir(), Interval: time.Millisecond})
		s.Keep(someStudy(0.5))
		time.Sleep(time.Millisecond)
		s.Close()
	}
	waitFor(t, "goroutines to end", func() bool { return runtime.NumGoroutine() <= before })
}

func TestASymbolicLinkStaysOne(t *testing.T) {
	folder, elsewhere := t.TempDir(), t.TempDir()
	target := filepath.Join(elsewhere, "mine.json")
	if err := os.WriteFile(target, []byte("{\"version\": 1}"), 0o600); err != nil {
		t.Fatal(err)
	}
	link := filepath.Join(folder, "settings.json")
	if err := os.Symlink(target, link); err != nil {
		t.Skip(err)
	}
	if err := start(t, folder).SetPreferences(Preferences{Scale: 3}); err != nil {
		t.Fatal(err)
	}
	info, err := os.Lstat(link)
	data, _ := os.ReadFile(target)
	if err != nil || info.Mode()&fs.ModeSymlink == 0 || !strings.Contains(string(data), "\"scale\": 3") {
		t.Errorf("%v %s", info.Mode(), data)
	}
}
