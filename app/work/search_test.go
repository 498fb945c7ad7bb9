package work

import (
	"context"
	"math"
	"strings"
	"testing"
	"time"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// distorted is an octahedron, drawn out along z and skewed a little.
const distorted = `7

Cu 0 0 0
O 2.00 0.02 0
O -2.00 -0.02 0
O 0 2.00 0
O 0 -2.00 0
O 0 0 2.30
O 0 0 -2.30
`

func distortedStudy() study.Study {
	return study.Study{Structure: "drawn out.xyz", Coordinates: distorted}
}

// A seeker is a search with the thread that its news come on.
type seeker struct {
	*Search
	t     testing.TB
	posts chan func()
	news  *Nearby
	all   []float64
}

func newSeeker(t testing.TB, w *Work) *seeker {
	s := &seeker{t: t, posts: make(chan func(), 10000), news: &Nearby{}}
	s.Search = NewSearch(w, func(f func()) { s.posts <- f }, func(n *Nearby) { s.news, s.all = n, append(s.all, n.Share) })
	t.Cleanup(s.Close)
	return s
}

func (s *seeker) until(what string, holds func(*Nearby) bool) *Nearby {
	s.t.Helper()
	limit := time.After(20 * time.Second)
	for !holds(s.news) {
		select {
		case f := <-s.posts:
			f()
		case <-limit:
			s.t.Fatalf("waiting in vain for %s", what)
		}
	}
	return s.news
}

func TestASearchFindsTheLadderAndEveryDistortion(t *testing.T) {
	w := demoWork()
	s := newSeeker(t, w)
	s.Want(distortedStudy())
	found := s.until("the ladder", func(n *Nearby) bool {
		if n.Ladder == nil || n.Running {
			return false
		}
		for _, shares := range n.Shares {
			if shares == nil {
				return false
			}
		}
		return true
	})
	want, err := w.Ladder(context.Background(), distortedStudy(), nil)
	if err != nil || found.Ladder != want {
		t.Fatalf("the search has found %v, and the ladder is %v (%v)", found.Ladder, want, err)
	}
	for i, n := range found.Ladder.Groups {
		sum, moved := 0.0, 0.0
		for _, d := range found.Ladder.Displacements(n) {
			moved += d.Dot(d)
		}
		for _, share := range found.Shares[i] {
			sum += share.Amount * share.Amount
		}
		if math.Abs(sum-moved) > 1e-9 {
			t.Errorf("%s:%d: the squares of the shares add up to %v, those of the displacement to %v", n.Fit.Setting.Symbol, n.Embedding, sum, moved)
		}
	}
	for i := 1; i < len(s.all); i++ {
		if s.all[i] < s.all[i-1] {
			t.Errorf("the search went back from %v to %v", s.all[i-1], s.all[i])
		}
	}
}

func TestASearchThatWasStoppedStaysSoUntilItIsAskedAgain(t *testing.T) {
	s := newSeeker(t, demoWork())
	s.Want(study.Study{Structure: "demo:cage"})
	s.Cancel()
	s.until("the end", func(n *Nearby) bool { return n.Cancelled })
	s.Want(study.Study{Structure: "demo:cage", Operation: "i"})
	if s.news.Running {
		t.Error("the same structure started a search that was stopped")
	}
	s.Want(distortedStudy())
	s.until("another structure", func(n *Nearby) bool { return n.Ladder != nil })
	s.Want(study.Study{Structure: "demo:nothing of the kind"})
	s.until("a problem", func(n *Nearby) bool { return n.Problem != nil && n.Ladder == nil })
	s.Again(distortedStudy())
	s.until("the ladder again", func(n *Nearby) bool { return n.Ladder != nil && n.Problem == nil })
}

func TestNobodyWaitsForASearchButThoseWhoWantItsLadder(t *testing.T) {
	w := New(structure.Inputs{Demo: assets.Demos()})
	ctx := context.Background()
	s := distortedStudy()
	s.Basis = []string{"O:sigma"}
	asked := false
	_, err := w.Ladder(ctx, s, func(float64) {
		if asked {
			return
		}
		asked = true
		done := make(chan error)
		go func() {
			_, err := w.Orbitals(ctx, s)
			done <- err
		}()
		select {
		case err := <-done:
			if err != nil {
				t.Error(err)
			}
		case <-time.After(10 * time.Second):
			t.Error("the group orbitals wait for the search")
		}
	})
	if err != nil || !asked {
		t.Fatalf("the search was not watched: %v", err)
	}
}

func TestWhatIsNoGroupIsToldBeforeTheSearch(t *testing.T) {
	s := study.Study{Structure: "demo:cage", As: "D4x"}
	began := time.Now()
	if _, err := demoWork().Group(context.Background(), s); err == nil || !strings.Contains(err.Error(), "D4x") {
		t.Errorf("D4x was taken, or refused by %v", err)
	}
	if took := time.Since(began); took > 5*time.Second {
		t.Errorf("that took %v", took)
	}
}

func TestAServiceTellsHowFarASearchForItsGroupHasCome(t *testing.T) {
	f := newFace(t, assets.Demos())
	f.Request(study.Study{Structure: "demo:cage", As: "D5d"})
	st := f.run("D5d", func(s *State) bool { return s.Group != nil })
	if got := st.Group.Fit.Setting.Symbol; got != "D5d" {
		t.Errorf("the group is %s", got)
	}
	between := false
	for _, s := range f.states {
		between = between || s.Progress != nil && s.Progress.Stage == StageGroup && s.Progress.Share > 0
	}
	if !between {
		t.Error("of the search nothing was told but its end")
	}
}
