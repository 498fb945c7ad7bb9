//go:build unix

package files

import (
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// fullVariable makes the test program write a large file into this folder
// under a limit on the size of files, which stands for a disk that is full.
const fullVariable = "LOBEWRIGHT_TEST_FULL"

func TestMain(m *testing.M) {
	if path := os.Getenv(fullVariable); path != "" {
		limit := syscall.Rlimit{Cur: 1 << 16, Max: 1 << 16}
		if err := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &limit); err != nil {
			fmt.Print("no limit: ", err)
			os.Exit(0)
		}
		err := Write(path, Options{Force: true}, func(w io.Writer) error {
			_, err := io.Copy(w, io.LimitReader(zeros{}, 1<<20))
			return err
		})
		fmt.Print(err)
		os.Exit(0)
	}
	os.Exit(m.Run())
}

type zeros struct{}

func (zeros) Read(p []byte) (int, error) { clear(p); return len(p), nil }

func TestWhereThereIsNoRoomEverythingStaysAsItWas(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "a.png")
	for _, before := range []string{"", "old"} {
		if before != "" {
			if err := os.WriteFile(path, []byte(before), 0o666); err != nil {
				t.Fatal(err)
			}
		}
		child := exec.Command(os.Args[0])
		child.Env = append(os.Environ(), fullVariable+"="+path)
		out, err := child.CombinedOutput()
		if err != nil || strings.HasPrefix(string(out), "no limit") {
			t.Fatalf("%v: %s", err, out)
		}
		if want := "cannot write " + path + ": file too large"; string(out) != want {
			t.Errorf("it says %q, want %q", out, want)
		}
		got, _ := os.ReadFile(path)
		if string(got) != before {
			t.Errorf("the file holds %.20q", got)
		}
		if names := entries(t, folder); names != strings.Repeat("a.png", min(1, len(before))) {
			t.Errorf("the folder holds %s", names)
		}
	}
}
