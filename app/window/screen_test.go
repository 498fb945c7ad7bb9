//go:build cgo && !nowindow

package window

import (
	"bufio"
	"fmt"
	"io"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"

	"lobewright/app/study"
)

// The tests of this file run the program on a display in memory and move its
// mouse and keys. What it does is read from the study that it saves.

// A screen is a display in memory.
type screen struct {
	t    *testing.T
	name string
}

// newScreen starts a display. Where there is none the test is skipped, unless
// LOBEWRIGHT_NEEDS_DISPLAY is set.
func newScreen(t *testing.T, width, height int) *screen {
	t.Helper()
	return newScreenWith(t, "-screen", "0", fmt.Sprintf("%dx%dx24", width, height))
}

func newScreenWith(t *testing.T, options ...string) *screen {
	t.Helper()
	for _, tool := range []string{"Xvfb", "xdotool"} {
		if _, err := exec.LookPath(tool); err != nil {
			if os.Getenv("LOBEWRIGHT_NEEDS_DISPLAY") != "" {
				t.Fatalf("%s is missing; on Debian it is in the package of this name", tool)
			}
			t.Skipf("%s is missing, so the real window is not tested", tool)
		}
	}
	read, write, err := os.Pipe()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command("Xvfb", append([]string{"-displayfd", "3", "-nolisten", "tcp", "-noreset"}, options...)...)
	cmd.ExtraFiles = []*os.File{write}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		_ = cmd.Process.Kill()
		_ = cmd.Wait()
	})
	write.Close()
	number, err := bufio.NewReader(read).ReadString('\n')
	if err != nil {
		t.Fatalf("Xvfb names no display: %v", err)
	}
	return &screen{t, ":" + strings.TrimSpace(number)}
}

// do moves mouse and keys.
func (s *screen) do(args ...any) {
	s.t.Helper()
	words := make([]string, len(args))
	for i, a := range args {
		words[i] = fmt.Sprint(a)
	}
	cmd := exec.Command("xdotool", words...)
	cmd.Env = append(os.Environ(), "DISPLAY="+s.name)
	if out, err := cmd.CombinedOutput(); err != nil {
		s.t.Fatalf("xdotool %q: %v: %s", words, err, out)
	}
}

// A running program with its window.
type running struct {
	*screen
	cmd    *exec.Cmd
	config string

	mu    sync.Mutex
	spots map[string][2]int
	said  strings.Builder
	done  chan struct{}
	drawn bool
}

// program builds the program once.
var program = sync.OnceValues(func() (string, error) {
	dir, err := os.MkdirTemp("", "lobewright-test")
	if err != nil {
		return "", err
	}
	path := filepath.Join(dir, "lobewright")
	out, err := exec.Command("go", "build", "-buildvcs=false", "-o", path, "lobewright/app").CombinedOutput()
	if err != nil {
		return "", fmt.Errorf("%w: %s", err, out)
	}
	return path, nil
})

func TestMain(m *testing.M) {
	for _, v := range os.Environ() {
		if name, _, _ := strings.Cut(v, "="); strings.HasPrefix(name, "FYNE_") {
			os.Unsetenv(name)
		}
	}
	status := m.Run()
	if path, err := program(); err == nil && filepath.Base(path) == "lobewright" {
		os.RemoveAll(filepath.Dir(path))
	}
	os.Exit(status)
}

// run starts the program and waits for its first picture.
func (s *screen) run(config string, args ...string) *running {
	s.t.Helper()
	path, err := program()
	if err != nil {
		s.t.Fatal(err)
	}
	r := &running{screen: s, config: config, spots: map[string][2]int{}, done: make(chan struct{})}
	r.cmd = exec.Command(path, args...)
	r.cmd.Env = append(os.Environ(), "DISPLAY="+s.name, "LOBEWRIGHT_CONFIG="+config, "LOBEWRIGHT_MEASURE=1")
	r.cmd.Dir = s.t.TempDir()
	out, err := r.cmd.StderrPipe()
	if err != nil {
		s.t.Fatal(err)
	}
	if err := r.cmd.Start(); err != nil {
		s.t.Fatal(err)
	}
	go r.listen(out)
	s.t.Cleanup(func() {
		_ = r.cmd.Process.Kill()
		<-r.done
		_ = r.cmd.Wait()
	})
	r.until("the first picture", func() bool { return r.drawn })
	return r
}

func (r *running) listen(out io.Reader) {
	defer close(r.done)
	lines := bufio.NewScanner(out)
	for lines.Scan() {
		r.mu.Lock()
		if f := strings.Split(lines.Text(), "\t"); len(f) == 4 && f[0] == "spot" {
			x, _ := strconv.Atoi(f[2])
			y, _ := strconv.Atoi(f[3])
			r.spots[f[1]] = [2]int{x, y}
		} else {
			fmt.Fprintln(&r.said, lines.Text())
			r.drawn = r.drawn || strings.Contains(lines.Text(), "first picture")
		}
		r.mu.Unlock()
	}
}

// until waits for something that is read under the lock.
func (r *running) until(what string, holds func() bool) {
	r.t.Helper()
	for range 1200 {
		r.mu.Lock()
		ok := holds()
		r.mu.Unlock()
		if ok {
			return
		}
		time.Sleep(25 * time.Millisecond)
	}
	r.mu.Lock()
	defer r.mu.Unlock()
	r.t.Fatalf("%s: it did not come within 30 s; the program said\n%s", what, r.said.String())
}

// click clicks a spot as soon as it is there.
func (r *running) click(name string) {
	r.t.Helper()
	var at [2]int
	r.until("the spot "+name, func() bool { p, ok := r.spots[name]; at = p; return ok })
	r.do("mousemove", at[0], at[1], "click", 1)
}

// saved waits until the saved study is as it should be.
func (r *running) saved(what string, holds func(study.Study) bool) study.Study {
	r.t.Helper()
	var s study.Study
	for range 1200 {
		files, _ := filepath.Glob(filepath.Join(r.config, "*"+study.Extension))
		if len(files) > 0 {
			if text, err := os.ReadFile(files[0]); err == nil {
				if s, err = study.Decode(text, files[0]); err == nil && holds(s) {
					return s
				}
			}
		}
		time.Sleep(25 * time.Millisecond)
	}
	r.mu.Lock()
	defer r.mu.Unlock()
	r.t.Fatalf("%s: the saved study is %+v\nthe program said\n%s", what, s, r.said.String())
	return s
}

func TestARealHandWorksInARealWindow(t *testing.T) {
	if testing.Short() {
		t.Skip("it takes ten seconds")
	}
	s := newScreen(t, 1400, 900)
	config, dir := t.TempDir(), t.TempDir()
	file := filepath.Join(dir, "palladium.xyz")
	const text = "5\na square plane\nPd 0 0 0\nCl 2.3 0 0\nCl -2.3 0 0\nCl 0 2.3 0\nCl 0 -2.3 0\n"
	if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	r := s.run(config)
	r.saved("the demonstration", func(s study.Study) bool { return s.Structure == "demo:"+firstDemo })

	// A file is opened by a path that is typed; a wrong one first.
	r.do("key", "ctrl+o")
	time.Sleep(500 * time.Millisecond)
	r.do("type", file+"z\n")
	time.Sleep(500 * time.Millisecond)
	r.do("key", "BackSpace", "Return")
	r.saved("the file", func(s study.Study) bool { return s.Structure == file })

	r.click("basis Cl:sigma")
	r.saved("the basis", func(s study.Study) bool { return len(s.Basis) == 1 && s.Basis[0] == "Cl:sigma" })
	// The functions stand below what is seen of the pane.
	r.mu.Lock()
	above := r.spots["basis Cl:sigma"]
	r.mu.Unlock()
	r.do("mousemove", above[0], above[1], "click", "--repeat", 8, 5)
	time.Sleep(500 * time.Millisecond)
	r.click("function 2")
	r.saved("the function", func(s study.Study) bool { return s.Projection.Function == 2 })
	r.click("operation C4(z)")
	r.saved("the operation at its end", func(s study.Study) bool { return s.Operation == "C4(z)" && s.Moment == 1 })

	r.click("scrub") // its middle
	half := r.saved("the middle of the operation", func(s study.Study) bool { return s.Moment > 0.3 && s.Moment < 0.7 })

	// The last irrep stands below what is seen of the pane.
	r.mu.Lock()
	above = r.spots[orbitalName(0, 0, 0)]
	r.mu.Unlock()
	r.do("mousemove", above[0], above[1], "click", "--repeat", 8, 5)
	time.Sleep(500 * time.Millisecond)
	r.click(orbitalName(9, 0, 1)) // Eu is the last irrep of D4h
	r.saved("the partner", func(s study.Study) bool { return s.Projection.Irrep == "Eu" && s.Projection.Partner == 2 })
	r.do("key", "ctrl+z")
	r.saved("what was before", func(s study.Study) bool { return s.Projection == half.Projection && s.Moment == half.Moment })
	r.do("key", "ctrl+y")
	want := r.saved("the partner again", func(s study.Study) bool { return s.Projection.Partner == 2 })

	// A turn by hand, then the program is killed.
	r.mu.Lock()
	at := r.spots["view"]
	r.mu.Unlock()
	r.do("mousemove", at[0], at[1]-150, "mousedown", 1)
	for range 12 {
		r.do("mousemove_relative", 6, 2)
	}
	r.do("mouseup", 1)
	turned := r.saved("the turn", func(s study.Study) bool { return s.Camera != want.Camera })
	if err := r.cmd.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	<-r.done

	again := s.run(config)
	again.until("the group orbitals", func() bool { _, ok := again.spots[orbitalName(9, 0, 1)]; return ok })
	// A step from what was found again: the partner before this one.
	again.do("mousemove", at[0], at[1]-150)
	again.do("key", "Page_Up")
	found := again.saved("the work after the kill", func(s study.Study) bool { return s.Projection.Partner == 1 })
	if found.Structure != file || found.Projection.Irrep != "Eu" || found.Camera != turned.Camera || found.Operation != "C4(z)" {
		t.Errorf("left was %+v\nfound is %+v", turned, found)
	}
	again.do("key", "ctrl+q")
	again.do("key", "alt")
	if strings.Contains(again.said.String(), "fault") {
		t.Error(again.said.String())
	}
}

// Events at random in a real window, more of them if the variable says so: the
// program goes on, says nothing of a fault, answers at the end, and holds no more
// memory than is its due. That is taken from the kernel's account.
func TestRandomEventsDoNoHarmToARealWindow(t *testing.T) {
	if testing.Short() {
		t.Skip("it takes half a minute")
	}
	events := eventsWanted(500)
	s := newScreen(t, 1280, 800)
	r := s.run(t.TempDir())
	r.saved("the demonstration", func(s study.Study) bool { return s.Structure == "demo:"+firstDemo })
	heapBefore, goroutinesBefore := r.memory(0)
	random := rand.New(rand.NewPCG(5, 6))
	keys := []string{"Left", "Right", "Up", "Down", "space", "Home", "End", "Return", "Tab", "Escape", "Page_Up", "Page_Down", "F1", "x", "y", "z", "f", "a", "n",
		"period", "comma", "plus", "minus", "ctrl+z", "ctrl+y", "ctrl+t", "ctrl+f", "ctrl+b", "ctrl+p", "1", "5", "C", "Escape", "Escape"}
	for n := 0; n < events; {
		var command []any // many to a call, which costs more than the events
		for range 50 {
			switch random.IntN(4) {
			case 0:
				command = append(command, "mousemove", strconv.Itoa(random.IntN(1280)), strconv.Itoa(40+random.IntN(760)))
			case 1:
				command = append(command, "click", strconv.Itoa([]int{1, 1, 1, 3, 4, 5}[random.IntN(6)]))
			case 2:
				command = append(command, "key", keys[random.IntN(len(keys))])
			case 3:
				command = append(command, "mousedown", "1", "mousemove_relative", "--", strconv.Itoa(random.IntN(41)-20), strconv.Itoa(random.IntN(41)-20), "mouseup", "1")
			}
			n++
		}
		s.do(command...)
		select {
		case <-r.done:
			r.mu.Lock()
			defer r.mu.Unlock()
			t.Fatalf("after %d events the program has ended: %s", n, r.said.String())
		default:
		}
	}
	time.Sleep(2 * time.Second)
	r.mu.Lock()
	said := r.said.String()
	r.mu.Unlock()
	if strings.Contains(said, "fault") {
		t.Error(said)
	}
	status, err := os.ReadFile("/proc/" + strconv.Itoa(r.cmd.Process.Pid) + "/status")
	if err != nil {
		t.Skip("there is no account of the program's memory")
	}
	resident := kilobytesOf(string(status), "VmRSS:") / 1024
	t.Logf("after %d events the program holds %d MB, at most it held %d MB", events, resident, kilobytesOf(string(status), "VmHWM:")/1024)
	if resident > 300 {
		t.Errorf("after %d events the program holds %d MB", events, resident)
	}

	// What was opened is closed, and the memory looked at when all is at rest.
	seen := r.memories()
	r.do("mousemove", 640, 300, "key", "--repeat", 4, "Escape")
	heap, goroutines := r.memory(seen)
	t.Logf("in use are %d MB, at first there were %d; there are %d goroutines, at first %d", heap>>20, heapBefore>>20, goroutines, goroutinesBefore)
	const cached = 45 << 20 // meshes, small pictures and typefaces are kept, within bounds
	if heap > heapBefore+cached {
		t.Errorf("after %d events %d MB are in use, at first there were %d", events, heap>>20, heapBefore>>20)
	}
	if goroutines > goroutinesBefore+3 {
		t.Errorf("after %d events there are %d goroutines, at first there were %d", events, goroutines, goroutinesBefore)
	}
}

// kilobytesOf is a line of the kernel's account of a process.
func kilobytesOf(status, name string) int {
	for _, line := range strings.Split(status, "\n") {
		if rest, ok := strings.CutPrefix(line, name); ok {
			n, _ := strconv.Atoi(strings.Fields(rest)[0])
			return n
		}
	}
	return 0
}

// memories counts how often the program has told of its memory, which it does
// when it is at rest.
func (r *running) memories() int {
	r.mu.Lock()
	defer r.mu.Unlock()
	return strings.Count(r.said.String(), memoryPrefix)
}

// memory waits until the program has told of its memory more often than that: the
// bytes in use, and its goroutines.
func (r *running) memory(seen int) (bytes, goroutines int) {
	r.t.Helper()
	r.until("a word about memory", func() bool { return strings.Count(r.said.String(), memoryPrefix) > seen })
	r.mu.Lock()
	defer r.mu.Unlock()
	said := r.said.String()
	line, _, _ := strings.Cut(said[strings.LastIndex(said, memoryPrefix)+len(memoryPrefix):], "\n")
	if _, err := fmt.Sscan(line, &bytes, &goroutines); err != nil {
		r.t.Fatalf("the program says %q of its memory", line)
	}
	return bytes, goroutines
}

// Without a display there is one plain line and no trace.
func TestWithoutADisplayThereIsOneLine(t *testing.T) {
	path, err := program()
	if err != nil {
		t.Fatal(err)
	}
	for _, display := range []string{"", ":4711", "nonsense"} {
		cmd := exec.Command(path, "window")
		cmd.Env = []string{"HOME=" + t.TempDir(), "PATH=" + os.Getenv("PATH"), "LANG=C.UTF-8"}
		if display != "" {
			cmd.Env = append(cmd.Env, "DISPLAY="+display)
		}
		out, err := cmd.CombinedOutput()
		if status, ok := err.(*exec.ExitError); !ok || status.ExitCode() != 1 {
			t.Errorf("DISPLAY %q: %v", display, err)
		}
		if text := string(out); strings.Count(text, "\n") != 1 || !strings.HasPrefix(text, "lobewright: no window can be opened: no display: ") {
			t.Errorf("DISPLAY %q: it says\n%s", display, text)
		}
	}
}

// A display without OpenGL: one plain line too.
func TestWithoutOpenGLThereIsOneLine(t *testing.T) {
	if testing.Short() {
		t.Skip("it starts a display")
	}
	path, err := program()
	if err != nil {
		t.Fatal(err)
	}
	s := newScreenWith(t, "-extension", "GLX")
	cmd := exec.Command(path, "demo:water")
	cmd.Env = []string{"HOME=" + t.TempDir(), "PATH=" + os.Getenv("PATH"), "LANG=C.UTF-8", "DISPLAY=" + s.name}
	out, err := cmd.CombinedOutput()
	if status, ok := err.(*exec.ExitError); !ok || status.ExitCode() != 1 {
		t.Errorf("the status is %v", err)
	}
	if text := string(out); strings.Count(text, "\n") != 1 || !strings.Contains(text, "OpenGL") {
		t.Errorf("it says\n%s", text)
	}
}
