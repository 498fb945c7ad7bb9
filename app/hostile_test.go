//go:build unix

package main_test

import (
	"bytes"
	"errors"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"runtime"
	"strings"
	"syscall"
	"testing"
	"time"
	"unicode/utf8"
)

const (
	// hostileTime is how long a refusal may take; a few hundredths of a second do, on a machine that is not busy.
	hostileTime = 10 * time.Second
	// hostileMemory (bytes) is how much memory a refusal may take: far less than the 100 MB of the largest input.
	hostileMemory = 80 << 20
)

// buildProgram builds the program as it is built here, with the window where there is a C compiler: the toolkit must
// not speak either. It returns the path.
func buildProgram(t *testing.T) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "lobewright")
	build := exec.Command("go", "build", "-buildvcs=false", "-o", path, ".")
	if out, err := build.CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	return path
}

// refuses runs the program and checks that it says one line on standard error, nothing on standard output, and ends
// with the given status, soon and in little memory. It returns the line.
func refuses(t *testing.T, program string, stdin io.Reader, status int, args ...string) string {
	t.Helper()
	var stdout, stderr bytes.Buffer
	cmd := exec.Command(program, args...)
	cmd.Stdin, cmd.Stdout, cmd.Stderr = stdin, &stdout, &stderr
	cmd.Dir = t.TempDir()
	cmd.Env = []string{"LANG=C.UTF-8", "PATH=" + os.Getenv("PATH")} // a locale that some toolkits remark on
	start := time.Now()
	err := cmd.Run()
	took := time.Since(start)
	var exit *exec.ExitError
	if !errors.As(err, &exit) || exit.ExitCode() != status {
		t.Errorf("%q ended with %v, want status %d; standard error %.300q", args, err, status, stderr.String())
	}
	if stdout.Len() > 0 {
		t.Errorf("%q wrote %.300q on standard output", args, stdout.String())
	}
	line, more, whole := strings.Cut(stderr.String(), "\n")
	if !whole || more != "" || line == "" || len(line) > 1500 || !utf8.ValidString(line) || strings.ContainsAny(line, "\r\t\x1b\x00") {
		t.Errorf("%q wrote %.600q on standard error, want one clear line", args, stderr.String())
	}
	if took > hostileTime {
		t.Errorf("%q took %v", args, took)
	}
	if usage, ok := cmd.ProcessState.SysUsage().(*syscall.Rusage); ok && runtime.GOOS == "linux" {
		if used := usage.Maxrss << 10; used > hostileMemory {
			t.Errorf("%q used %d MB", args, used>>20)
		}
	}
	if left, err := os.ReadDir(cmd.Dir); err != nil || len(left) > 0 {
		t.Errorf("%q left %v behind, %v", args, left, err)
	}
	return line
}

// hostileFiles are inputs that cannot be served, and what the message must say after the file's name.
var hostileFiles = []struct {
	name string
	text func() io.Reader
	want string
}{
	{"empty", of(""), `:1: the file is empty`},
	{"blank", of("\n\n\n"), `:1: the file is empty`},
	{"cut-short", of("3\nx\nO 0 0 0\nH 0 0 1\n"), `:4: the file ends after 2 of the 3 atoms that line 1 counts`},
	{"cut-in-a-line", of("2\nx\nO 0 0 0\nH 0 0."), `:4: expected atom 2 of 2, found "H 0 0."`},
	{"count-too-low", of("1\nx\nO 0 0 0\nH 0 0 1\n"), `:4: another atom follows the 1 that line 1 counts`},
	{"no-count", of("O 0 0 0\nH 0 0 1\n"), `:1: expected the number of atoms, found "O 0 0 0"`},
	{"nan", of("2\nx\nO 0 0 0\nH 0 nan 1\n"), `:4: y of atom 2 is "nan"`},
	{"infinite", of("1\nx\nO 0 0 1e999\n"), `:3: z of atom 1 is "1e999"`},
	{"huge-number", of("1\nx\nO 1e308 0 0\n"), `:3: x of atom 1 is 1e308 Å`},
	{"one-spot", of("3\nx\nO 0 0 0\nH 0 0 1\nH 0 0 1\n"), `:5: atom 3 lies on the spot of atom 2 of line 4`},
	{"unknown-element", of("1\nx\nXx 0 0 0\n"), `:3: unknown element "Xx"`},
	{"million-atoms", repeated("1000000\nx\n", "C 0.0 0.0 0.0\n", 14<<20), `:1: 1000000 atoms are too many; a structure may have up to 20,000`},
	{"million-atoms-one-counted", repeated("1\nx\n", "C 0.0 0.0 0.0\n", 14<<20), `:4: another atom follows`},
	{"all-on-one-spot", repeated("20000\nx\n", "C 0.0 0.0 0.0\n", 20000*14), `:4: atom 2 lies on the spot of atom 1`},
	{"binary", of("\x7fELF\x02\x01\x01\x00\x00\x00"), `:1: the file is binary, not text`},
	{"picture", of("\x89PNG\r\n\x1a\n\x00\x00\x00\rIHDR"), `:1: the file is binary, not text`},
	{"utf-16", of("\xff\xfe1\x00\n\x00x\x00\n\x00C\x00"), `:1: the file is UTF-16 text`},
	{"long-line", repeated("", "C", 100<<20), `:1: the line is longer than 65,536 bytes`},
	{"long-title", repeated("1\n", "x", 100<<20), `:2: the line is longer than 65,536 bytes`},
	{"long-word", repeated("1\nx\n", "Q", 60000), `:3: expected atom 1 of 1, found "QQQ`},
	{"escapes", of("1\nx\n\x1b[31mO 0 0 0\n"), `:3: the file is binary, not text`},
}

func of(text string) func() io.Reader {
	return func() io.Reader { return strings.NewReader(text) }
}

// repeated is a text of size bytes: head, then part again and again.
func repeated(head, part string, size int) func() io.Reader {
	return func() io.Reader {
		block := strings.Repeat(part, 1+64<<10/len(part))
		readers := []io.Reader{strings.NewReader(head)}
		for n := 0; n < size; n += len(block) {
			readers = append(readers, strings.NewReader(block[:min(len(block), size-n)]))
		}
		return io.MultiReader(readers...)
	}
}

func TestHostileInputGivesOneClearLine(t *testing.T) {
	program := buildProgram(t)
	dir := t.TempDir()
	place := regexp.MustCompile(`:\d+: `)
	for _, f := range hostileFiles {
		t.Run(f.name, func(t *testing.T) {
			file := filepath.Join(dir, f.name+".xyz")
			out, err := os.Create(file)
			if err != nil {
				t.Fatal(err)
			}
			if _, err := io.Copy(out, f.text()); err != nil {
				t.Fatal(err)
			}
			if err := out.Close(); err != nil {
				t.Fatal(err)
			}
			defer os.Remove(file)
			for _, args := range [][]string{
				{"group", file}, {"group", file, "--json"}, {"project", file, "--on", "all:s"},
				{"ledger", file, "--on", "all:s", "--function", "1", "--irrep", "A"}, {"figure", file, "-o", "figure.png"},
			} {
				line := refuses(t, program, nil, 1, args...)
				if !strings.Contains(line, file+f.want) || !place.MatchString(line) {
					t.Errorf("%q says %s\nwant %s%s", args, line, file, f.want)
				}
			}
			line := refuses(t, program, f.text(), 1, "group", "-")
			if !strings.Contains(line, "standard input"+f.want) {
				t.Errorf("from standard input: %s\nwant standard input%s", line, f.want)
			}
		})
	}
}

func TestWhatIsNoStructureGivesOneClearLine(t *testing.T) {
	program := buildProgram(t)
	dir := t.TempDir()
	cases := []struct {
		args []string
		want string
	}{
		{[]string{"group", dir}, dir + ": this is a directory"},
		{[]string{"group", dir + "/none.xyz"}, dir + "/none.xyz: there is no such file"},
		{[]string{"group", dir + "/a\nb\x1b.xyz"}, dir + `/a\nb\x1b.xyz: there is no such file`},
		{[]string{"group", "/dev/zero"}, "/dev/zero:1: the file is binary"},
		{[]string{"group", "ideal:OC-7"}, `unknown polyhedral symbol "OC-7"; there are L-2 A-2`},
		{[]string{"group", "ideal:ring-1000000000"}, "a ring has 3 to 100 atoms"},
		{[]string{"group", "demo:none"}, `there is no demonstration "none"; there are benzene`},
		{[]string{"group", "ideal:OC-6", "--core", "8"}, "atom 8 does not exist; the structure's atoms are 1 to 7"},
		{[]string{"group", "ideal:OC-6", "--core", "Fe"}, "the structure has no Fe; its elements are N, Co"},
		{[]string{"group", "ideal:OC-6", "--ignore", "all"}, "no atom is left to decide the group"},
	}
	for _, c := range cases {
		if line := refuses(t, program, nil, 1, c.args...); !strings.Contains(line, c.want) {
			t.Errorf("%q says %s\nwant %s", c.args, line, c.want)
		}
	}
	// What no structure could make right is a wrong command line.
	if line := refuses(t, program, nil, 2, "group", "ideal:OC-6", "--core", "what?"); !strings.Contains(line, `"what?" is no choice of atoms`) {
		t.Errorf("says %s", line)
	}
}
