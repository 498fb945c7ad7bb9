//go:build unix

package session

import (
	"bufio"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"lobewright/app/files"
	"lobewright/app/study"
)

// savesVariable makes the test program save studies in this folder until it is
// killed.
const savesVariable = "LOBEWRIGHT_TEST_SAVES"

func TestMain(m *testing.M) {
	if folder := os.Getenv(savesVariable); folder != "" {
		saveForEver(folder)
	}
	if folder := os.Getenv(editsVariable); folder != "" {
		editForEver(folder)
	}
	os.Exit(m.Run())
}

// numbered is a study of some size, each different: its text says its number
// in every line.
func numbered(n int) study.Study {
	text := strings.Repeat(fmt.Sprintf("line of study %d\n", n), 200+n%300)
	s, err := study.Study{}.WithCoordinates("numbered", text)
	if err != nil {
		panic(err)
	}
	s.Projection.Function = n
	return s
}

// saveForEver saves studies as fast as it can, goes on where the last one
// ended, and says the number of each when it is on the disk.
func saveForEver(folder string) {
	s, notes := Open(Options{Folder: folder, Interval: time.Millisecond})
	if len(notes) > 0 {
		fmt.Println("note:", notes)
		os.Exit(1)
	}
	s.Settled()
	last, _ := s.Study()
	fmt.Println(last.Projection.Function)
	for n := last.Projection.Function + 1; ; n++ {
		s.Keep(numbered(n))
		if n%3 == 0 {
			time.Sleep(1500 * time.Microsecond) // let the background save
		}
		if err := s.SaveNow(); err != nil {
			fmt.Println("error:", err)
			os.Exit(1)
		}
		if n%50 == 0 {
			if err := s.AddRecent(fmt.Sprintf("/%d.xyz", n)); err != nil {
				fmt.Println("error:", err)
				os.Exit(1)
			}
		}
		fmt.Println(n)
	}
}

// TestKillsAtAnyMomentLeaveAWholeStudy kills saving processes again and again
// and holds that the file is whole each time, that it is the study of one
// moment, and none from before the last that was said to be saved.
func TestKillsAtAnyMomentLeaveAWholeStudy(t *testing.T) {
	const folders = 4
	kills := killsWanted(t) / folders
	for f := range folders {
		t.Run(strconv.Itoa(f+1), func(t *testing.T) {
			t.Parallel()
			random := rand.New(rand.NewPCG(1, uint64(f)))
			folder := t.TempDir()
			said, saves := 0, 0
			for range kills {
				found := killOnce(t, folder, said, time.Duration(random.Int64N(int64(30*time.Millisecond))))
				saves += found - said
				said = found
			}
			s := start(t, folder)
			if st, _ := s.Study(); st.Projection.Function != said || s.Slot() != 1 {
				t.Errorf("study %d in slot %d is found", st.Projection.Function, s.Slot())
			}
			for _, name := range fileNames(t, folder) {
				if strings.HasSuffix(name, files.PartEnding) && !strings.HasPrefix(name, ".settings") {
					t.Errorf("%s is left", name)
				}
			}
			t.Logf("%d kills among %d saves", kills, saves)
		})
	}
}

// killsVariable is how many kills a whole test has; without it a few do.
const killsVariable = "LOBEWRIGHT_TEST_KILLS"

func killsWanted(t *testing.T) int {
	if n, err := strconv.Atoi(os.Getenv(killsVariable)); err == nil {
		return n
	}
	if testing.Short() {
		return 8
	}
	return 40
}

// editsVariable makes the test program edit studies in this folder, as a person
// does, until it is killed.
const editsVariable = "LOBEWRIGHT_TEST_EDITS"

// editForEver edits as hands do, step by step and with undo, and leaves the
// saving to the background. It says the number of each edit once it is done.
func editForEver(folder string) {
	s, notes := Open(Options{Folder: folder, Interval: 20 * time.Millisecond})
	if len(notes) > 0 {
		fmt.Println("note:", notes)
		os.Exit(1)
	}
	s.Settled()
	last, _ := s.Study()
	h := study.NewHistory(last)
	fmt.Println(last.Projection.Function)
	for n := last.Projection.Function + 1; ; n++ {
		switch {
		case n%17 == 0: // a gesture of many small moves
			h.Begin(study.StepOrbit)
			for range 20 {
				h.Set(numbered(n))
				s.Keep(h.Now())
			}
			h.Commit()
		case n%11 == 0: // there and back and there again
			h.Do(study.StepAtomTable, numbered(n))
			h.Undo()
			s.Keep(h.Now())
			h.Redo()
		default:
			h.Do(study.StepAtomTable, numbered(n))
		}
		s.Keep(h.Now())
		fmt.Println(n)
		time.Sleep(time.Millisecond)
	}
}

// TestKillsWhileEditingLoseNoMoreThanASecond kills editing processes: the study
// that is found is whole, and was at hand no longer than a second ago.
func TestKillsWhileEditingLoseNoMoreThanASecond(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 4))
	folder := t.TempDir()
	for range killsWanted(t) / 2 {
		n, times := killedIn(t, editsVariable, folder, time.Duration(random.Int64N(int64(300*time.Millisecond))))
		data, err := os.ReadFile(filepath.Join(folder, "work-1.lobewright"))
		if os.IsNotExist(err) && n < 40 {
			continue // killed before anything was due to be saved
		}
		if err != nil {
			t.Fatal(err)
		}
		st, err := study.Decode(data, "killed")
		if err != nil {
			t.Fatal(err)
		}
		found := st.Projection.Function
		if found > n+1 || !st.Equal(numbered(found)) {
			t.Fatalf("study %d is found after edit %d", found, n)
		}
		if next, known := times[found+1]; known {
			if age := times[n].Sub(next); age > time.Second {
				t.Errorf("edit %d is found, %v before the last one", found, age)
			}
		}
	}
}

// killOnce returns the number of the study that a killed process leaves; said
// is that of the one before.
func killOnce(t *testing.T, folder string, said int, after time.Duration) int {
	t.Helper()
	n := killed(t, folder, after)
	if n < said {
		t.Fatalf("it goes on with study %d after %d", n, said)
	}
	data, err := os.ReadFile(filepath.Join(folder, "work-1.lobewright"))
	if os.IsNotExist(err) && n == 0 {
		return 0
	}
	if err != nil {
		t.Fatal(err)
	}
	st, err := study.Decode(data, "killed")
	if err != nil {
		t.Fatal(err)
	}
	// One more may have been saved than was said.
	found := st.Projection.Function
	if found < n || found > n+1 || !st.Equal(numbered(found)) {
		t.Fatalf("study %d is found after %d was saved", found, n)
	}
	return found
}

// killed runs a saving process, kills it a while after it has begun to save,
// and returns the last number that it said.
func killed(t *testing.T, folder string, after time.Duration) int {
	t.Helper()
	last, _ := killedIn(t, savesVariable, folder, after)
	return last
}

// killedIn is killed for what a variable says; times are when the numbers were
// heard.
func killedIn(t *testing.T, variable, folder string, after time.Duration) (last int, times map[int]time.Time) {
	t.Helper()
	times = map[int]time.Time{}
	child := exec.Command(os.Args[0])
	child.Env = append(os.Environ(), variable+"="+folder)
	out, err := child.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := child.Start(); err != nil {
		t.Fatal(err)
	}
	lines := bufio.NewScanner(out)
	last = -1
	for lines.Scan() {
		n, err := strconv.Atoi(lines.Text())
		if err != nil {
			t.Error(lines.Text())
			break
		}
		if last < 0 {
			time.AfterFunc(after, func() { child.Process.Kill() })
		}
		last, times[n] = n, time.Now()
	}
	child.Wait()
	return last, times
}
