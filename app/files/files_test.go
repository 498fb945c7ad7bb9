package files

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func text(s string) func(io.Writer) error {
	return func(w io.Writer) error {
		_, err := io.WriteString(w, s)
		return err
	}
}

// entries are the names in a folder, hidden ones included.
func entries(t *testing.T, folder string) string {
	t.Helper()
	list, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range list {
		names = append(names, e.Name())
	}
	return strings.Join(names, " ")
}

func TestAnExistingFileIsOverwrittenOnlyWithForce(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "a.png")
	if err := Write(path, Options{}, text("first")); err != nil {
		t.Fatal(err)
	}
	err := Write(path, Options{}, text("second"))
	if err == nil || !strings.Contains(err.Error(), "--force") {
		t.Errorf("second write without force: error %v", err)
	}
	if got, _ := os.ReadFile(path); string(got) != "first" {
		t.Errorf("the file now holds %q", got)
	}
	if err := Write(path, Options{Force: true}, text("third")); err != nil {
		t.Fatal(err)
	}
	if got, _ := os.ReadFile(path); string(got) != "third" {
		t.Errorf("after force the file holds %q", got)
	}
	if got := entries(t, folder); got != "a.png" {
		t.Errorf("the folder holds %s", got)
	}
}

func TestAFailedWriteChangesNothing(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "a.png")
	if err := Write(path, Options{}, text("old")); err != nil {
		t.Fatal(err)
	}
	broken := func(w io.Writer) error {
		io.WriteString(w, strings.Repeat("half ", 10000))
		return errors.New("the picture cannot be drawn")
	}
	if err := Write(path, Options{Force: true}, broken); err == nil {
		t.Error("no error from a failing writer")
	}
	if got, _ := os.ReadFile(path); string(got) != "old" {
		t.Errorf("the file now holds %.20q", got)
	}
	if got := entries(t, folder); got != "a.png" {
		t.Errorf("the folder holds %s", got)
	}
}

func TestAFileMadeInTheMeantimeIsKept(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a.png")
	slow := func(w io.Writer) error { return os.WriteFile(path, []byte("theirs"), 0o666) }
	if err := Write(path, Options{}, slow); err == nil || !strings.Contains(err.Error(), "--force") {
		t.Errorf("error %v", err)
	}
	if got, _ := os.ReadFile(path); string(got) != "theirs" {
		t.Errorf("the file holds %q", got)
	}
}

func TestPlacesThatCannotBeWrittenAreNamedInOneLine(t *testing.T) {
	folder := t.TempDir()
	file := filepath.Join(folder, "file")
	if err := os.WriteFile(file, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	for _, path := range []string{folder, filepath.Join(folder, "no", "a.png"), filepath.Join(file, "a.png"), os.DevNull} {
		err := Write(path, Options{Force: true}, text("x"))
		if err == nil {
			t.Errorf("%s: no error", path)
			continue
		}
		if s := err.Error(); !strings.Contains(s, path) || strings.Contains(s, ".part") || strings.Contains(s, "\n") {
			t.Errorf("%s: %s", path, s)
		}
	}
}

func TestALinkIsFollowedAndKept(t *testing.T) {
	folder := t.TempDir()
	real, link := filepath.Join(folder, "real"), filepath.Join(folder, "link")
	if err := os.WriteFile(real, nil, 0o640); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink("real", link); err != nil {
		t.Skip(err)
	}
	if err := Write(link, Options{Force: true}, text("new")); err != nil {
		t.Fatal(err)
	}
	info, err := os.Lstat(real)
	if err != nil || info.Mode().Perm() != 0o640 {
		t.Errorf("mode %v, error %v", info.Mode(), err)
	}
	if got, _ := os.ReadFile(real); string(got) != "new" {
		t.Errorf("the file behind the link holds %q", got)
	}
	if info, _ := os.Lstat(link); info.Mode().Type() != os.ModeSymlink {
		t.Error("the link is gone")
	}
}

func TestFilesThatBelongTogetherAreWrittenAllOrNone(t *testing.T) {
	folder := t.TempDir()
	paths := []string{filepath.Join(folder, "1.png"), filepath.Join(folder, "2.png"), filepath.Join(folder, "3.png")}
	failing := func(i int, w io.Writer) error {
		if i == 2 {
			return errors.New("the third picture cannot be drawn")
		}
		return text("half")(w)
	}
	if err := WriteAll(paths, Options{}, failing); err == nil {
		t.Error("no error from a failing writer")
	}
	if got := entries(t, folder); got != "" {
		t.Errorf("the folder holds %s", got)
	}
	// Somebody takes the last name in the meantime.
	taken := func(i int, w io.Writer) error {
		if i == 2 {
			return os.WriteFile(paths[2], []byte("theirs"), 0o666)
		}
		return text("ours")(w)
	}
	if err := WriteAll(paths, Options{}, taken); err == nil || !strings.Contains(err.Error(), "--force") {
		t.Errorf("error %v", err)
	}
	if got := entries(t, folder); got != "3.png" {
		t.Errorf("the folder holds %s", got)
	}
	if err := WriteAll(paths, Options{Force: true}, func(_ int, w io.Writer) error { return text("new")(w) }); err != nil {
		t.Fatal(err)
	}
	if got, _ := os.ReadFile(paths[2]); string(got) != "new" || entries(t, folder) != "1.png 2.png 3.png" {
		t.Errorf("%q, the folder holds %s", got, entries(t, folder))
	}
}

func TestALinkToNothingIsTold(t *testing.T) {
	link := filepath.Join(t.TempDir(), "link")
	if err := os.Symlink("nowhere", link); err != nil {
		t.Skip(err)
	}
	if err := Write(link, Options{Force: true}, text("x")); err == nil || !strings.Contains(err.Error(), "link to nowhere") {
		t.Error(err)
	}
}

func TestWhatKilledWritersHaveLeftIsRemoved(t *testing.T) {
	folder := t.TempDir()
	for _, name := range []string{".a.png.0123456789ab.part", ".a.png.other.part", ".b.png.0123456789ab.part", "a.png"} {
		if err := os.WriteFile(filepath.Join(folder, name), nil, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	RemoveParts(filepath.Join(folder, "a.png"))
	if got := entries(t, folder); got != ".a.png.other.part .b.png.0123456789ab.part a.png" {
		t.Errorf("the folder holds %s", got)
	}
}
