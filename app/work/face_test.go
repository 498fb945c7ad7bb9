package work

import (
	"io/fs"
	"strings"
	"sync"
	"testing"
	"time"

	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// A face stands for an interface: a thread that runs what is posted, and the
// states that were delivered on it.
type face struct {
	*Service
	t      testing.TB
	posts  chan func()
	states []*State

	mu      sync.Mutex
	waiting int // posted functions that have not run
	most    int
}

func newFace(t testing.TB, demos fs.FS) *face {
	f := &face{t: t, posts: make(chan func(), 10000)}
	f.Service = NewService(New(structure.Inputs{Demo: demos}), f.post, func(s *State) {
		holdTogether(t, s)
		f.states = append(f.states, s)
	})
	t.Cleanup(f.Close)
	return f
}

func (f *face) post(g func()) {
	f.mu.Lock()
	f.waiting++
	f.most = max(f.most, f.waiting)
	f.mu.Unlock()
	f.posts <- g
}

// run runs what is posted until done, which is looked at after each delivery.
func (f *face) run(what string, done func(*State) bool) *State {
	f.t.Helper()
	seen := len(f.states)
	timeout := time.After(90 * time.Second)
	for {
		select {
		case g := <-f.posts:
			f.mu.Lock()
			f.waiting--
			f.mu.Unlock()
			g()
		case <-timeout:
			f.t.Fatalf("waiting in vain for %s", what)
		}
		for ; seen < len(f.states); seen++ {
			if done(f.states[seen]) {
				return f.states[seen]
			}
		}
	}
}

// settled runs until the work on the newest study is done.
func (f *face) settled() *State {
	f.t.Helper()
	return f.run("results", func(s *State) bool { return s.Progress == nil && !s.Cancelled })
}

// quiet runs what is posted for a while and holds that nothing is delivered.
func (f *face) quiet(d time.Duration) {
	f.t.Helper()
	seen := len(f.states)
	for end := time.After(d); ; {
		select {
		case g := <-f.posts:
			g()
		case <-end:
			if len(f.states) != seen {
				f.t.Errorf("%d states are delivered without need", len(f.states)-seen)
			}
			return
		}
	}
}

// holdTogether holds what Results promise.
func holdTogether(t testing.TB, s *State) {
	t.Helper()
	r := s.Results
	fits := true
	fits = fits && (r.Basis == nil || r.Basis.Group == r.Group)
	fits = fits && (r.Orbitals == nil || r.Orbitals.Basis == r.Basis)
	fits = fits && (r.Ledger == nil || r.Ledger.Basis == r.Basis)
	fits = fits && (r.Play == nil || r.Play.Group == r.Group && (r.Play.Basis == nil || r.Play.Basis == r.Basis))
	if r.Orbital != nil {
		found := false
		for i := range r.Orbitals.Projection.Orbitals {
			found = found || r.Orbital == &r.Orbitals.Projection.Orbitals[i]
		}
		fits = fits && found
	}
	if !fits {
		t.Errorf("the results do not fit together: %+v", r)
	}
}

// A gate is a folder of demonstrations that are handed out only when the gate
// is opened for them.
type gate struct {
	fs.FS
	mu      sync.Mutex
	closed  map[string]chan struct{}
	reached chan string
}

func newGate() *gate {
	return &gate{FS: assets.Demos(), closed: make(map[string]chan struct{}), reached: make(chan string, 100)}
}

// shut closes the gate for a demonstration; the function opens it again.
func (g *gate) shut(name string) (open func()) {
	g.mu.Lock()
	defer g.mu.Unlock()
	c := make(chan struct{})
	g.closed[name] = c
	return func() {
		g.mu.Lock()
		delete(g.closed, name)
		g.mu.Unlock()
		close(c)
	}
}

func (g *gate) Open(path string) (fs.File, error) {
	name := strings.TrimSuffix(path, ".xyz")
	g.mu.Lock()
	c := g.closed[name]
	g.mu.Unlock()
	if c != nil {
		g.reached <- name
		<-c
	}
	if name == "panic" {
		panic("it was told to")
	}
	return g.FS.Open(path)
}
