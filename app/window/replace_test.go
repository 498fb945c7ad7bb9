//go:build cgo && !nowindow

package window

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// A file is replaced when the same answer is given twice, and only then.
func TestAFileIsReplacedAfterASecondYes(t *testing.T) {
	folder := t.TempDir()
	there, other := filepath.Join(folder, "a.png"), filepath.Join(folder, "b.png")
	for _, path := range []string{there, other} {
		if err := os.WriteFile(path, []byte("x"), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	asked := ""
	if force, err := replaces(filepath.Join(folder, "new.png"), &asked); force || err != nil {
		t.Errorf("a new name: %v, %v", force, err)
	}
	for _, path := range []string{there, other, there} {
		if force, err := replaces(path, &asked); force || err == nil || !strings.Contains(err.Error(), "replaces") {
			t.Errorf("the first answer: %v, %v", force, err)
		}
	}
	if force, err := replaces(there, &asked); !force || err != nil {
		t.Errorf("the second answer: %v, %v", force, err)
	}
}
