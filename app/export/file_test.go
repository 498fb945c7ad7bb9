package export

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
	if err := WriteFile(path, false, text("first")); err != nil {
		t.Fatal(err)
	}
	err := WriteFile(path, false, text("second"))
	if err == nil || !strings.Contains(err.Error(), "--force") {
		t.Errorf("second write without force: error %v", err)
	}
	if got, _ := os.ReadFile(path); string(got) != "first" {
		t.Errorf("the file now holds %q", got)
	}
	if err := WriteFile(path, true, text("third")); err != nil {
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
	if err := WriteFile(path, false, text("old")); err != nil {
		t.Fatal(err)
	}
	broken := func(w io.Writer) error {
		io.WriteString(w, strings.Repeat("half ", 10000))
		return errors.New("the picture cannot be drawn")
	}
	if err := WriteFile(path, true, broken); err == nil {
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
	if err := WriteFile(path, false, slow); err == nil || !strings.Contains(err.Error(), "--force") {
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
		err := WriteFile(path, true, text("x"))
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
	if err := WriteFile(link, true, text("new")); err != nil {
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
