package command

import (
	"bytes"
	"context"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"
)

func TestEachStructureHasAFileOfItsOwn(t *testing.T) {
	jobs, err := jobsOf([]string{"a/b.xyz", "demo:cage", "ideal:OC-6,Co,N,1.96", "-"}, "out/{name}.png")
	want := []job{{"a/b.xyz", "out/b.png"}, {"demo:cage", "out/cage.png"}, {"ideal:OC-6,Co,N,1.96", "out/OC-6,Co,N,1.96.png"}, {"-", "out/input.png"}}
	if err != nil || !slices.Equal(jobs, want) {
		t.Errorf("%v %v", jobs, err)
	}
	if jobs, err := jobsOf([]string{"x.xyz"}, "y.png"); err != nil || jobs[0].output != "y.png" {
		t.Errorf("%v %v", jobs, err)
	}
	for _, bad := range [][2]string{{"a.xyz b.xyz", "o.png"}, {"a/x.xyz b/x.xyz", "{name}.png"}} {
		if _, err := jobsOf(strings.Fields(bad[0]), bad[1]); !isUsage(err) {
			t.Errorf("%v: %v", bad, err)
		}
	}
}

func TestOneThatFailsDoesNotHoldUpTheOthers(t *testing.T) {
	var out bytes.Buffer
	p := &program{Streams: Streams{Err: &out}}
	var mu sync.Mutex
	var made []string
	err := p.each(context.Background(), []string{"a", "b", "c", "d"}, "{name}.png", 2, func(_ context.Context, p *program, j job) error {
		p.note("seen")
		switch j.structure {
		case "b":
			return errors.New("b: line 3: no number")
		case "c":
			panic("oh")
		}
		mu.Lock()
		defer mu.Unlock()
		made = append(made, j.output)
		return nil
	})
	slices.Sort(made)
	if !slices.Equal(made, []string{"a.png", "d.png"}) || err == nil || err.Error() != "2 of 4 structures failed; finished: 2" {
		t.Errorf("%v %v", made, err)
	}
	for _, line := range []string{"b: line 3: no number\n", "c: internal error: oh\n", "a: note: seen\n"} {
		if strings.Count(out.String(), line) != 1 {
			t.Errorf("%q is missing:\n%s", line, out.String())
		}
	}
}

func TestSeveralStructuresAreWorkedAtTogether(t *testing.T) {
	p := &program{Streams: Streams{Err: &bytes.Buffer{}}}
	meet := make(chan struct{})
	err := p.each(context.Background(), []string{"a", "b"}, "{name}", 2, func(context.Context, *program, job) error {
		select {
		case meet <- struct{}{}:
		case <-meet:
		case <-time.After(10 * time.Second):
			return errors.New("alone")
		}
		return nil
	})
	if err != nil {
		t.Error(err)
	}
}

func TestAnInterruptionEndsTheBatch(t *testing.T) {
	var out bytes.Buffer
	p := &program{Streams: Streams{Err: &out}}
	ctx, stop := context.WithCancel(context.Background())
	made := 0
	err := p.each(ctx, []string{"a", "b", "c"}, "{name}", 1, func(context.Context, *program, job) error {
		made++
		stop()
		return nil
	})
	if made != 1 || !errors.Is(err, context.Canceled) || out.String() != "finished: 1 of 3\n" {
		t.Errorf("%d %v %q", made, err, out.String())
	}
}

func TestAListNamesStructuresFromItsOwnFolder(t *testing.T) {
	folder := t.TempDir()
	list := filepath.Join(folder, "list.txt")
	if err := os.WriteFile(list, []byte("# ours\n\na.xyz\ndemo:cage\n  b.xyz  \n/c.xyz"), 0o600); err != nil {
		t.Fatal(err)
	}
	got, err := listed([]string{"first"}, list)
	want := []string{"first", filepath.Join(folder, "a.xyz"), "demo:cage", filepath.Join(folder, "b.xyz"), "/c.xyz"}
	if err != nil || !slices.Equal(got, want) {
		t.Errorf("%v %v", got, err)
	}
	if _, err := listed(nil, filepath.Join(folder, "none")); err == nil || !strings.HasSuffix(err.Error(), "none: no such file or directory") {
		t.Error(err)
	}
	if err := os.WriteFile(list, []byte("# none\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := listed(nil, list); err == nil {
		t.Error("an empty list is taken")
	}
}
