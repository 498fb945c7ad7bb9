package work

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"sync"
	"testing"
	"time"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// wholeStudy asks for every stage.
var wholeStudy = study.Study{
	Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Operation: "C4(z)",
	Projection: study.Projection{Function: 1, Irrep: "Eu", Partner: 2},
}

func TestEveryResultIsDelivered(t *testing.T) {
	f := newFace(t, assets.Demos())
	f.Request(wholeStudy)
	s := f.settled()
	if s.has() != [stages]bool{true, true, true, true, true, true, true, true} || s.AnyStale() || len(s.Problems) > 0 || !s.Study.Equal(wholeStudy) {
		t.Fatalf("%+v", s)
	}
	if s.Group.Fit.Setting.Symbol != "D4h" || s.Orbitals.Irreps[s.Orbital.Irrep].Label != "Eu" || s.Orbital.Partner != 1 || len(s.Ledger.Rows) != 16 || s.Play.Operation.Name != "C4(z)" {
		t.Error("the results are not those of the study")
	}
	if s.Play.Orbital != s.Orbital {
		t.Error("another orbital is played than is chosen")
	}
}

func TestWhatChangesNothingDeliversNothing(t *testing.T) {
	f := newFace(t, assets.Demos())
	f.Request(wholeStudy)
	first := f.settled()
	turned := wholeStudy
	turned.Camera.Rotation, turned.Camera.Zoom, turned.Look.Style, turned.Moment = [4]float64{1, 0, 0, 0}, 2, "ink", 0.7
	turned.Atoms, turned.Figure.Width, turned.Angle = []int{1}, 100, 30
	f.Request(turned)
	f.quiet(50 * time.Millisecond)
	next := turned
	next.Projection.Partner = 1
	f.Request(next)
	s := f.settled()
	if s.Orbitals != first.Orbitals || s.Group != first.Group || s.Ledger != first.Ledger || s.Orbital == first.Orbital || !s.Study.Equal(next) {
		t.Error("another partner changes more than the orbital")
	}
}

func TestWhatIsNotAskedForAnyMoreGoes(t *testing.T) {
	f := newFace(t, assets.Demos())
	f.Request(wholeStudy)
	f.settled()
	less := wholeStudy
	less.Basis = nil
	f.Request(less)
	if s := f.settled(); s.has() != [stages]bool{true, true, false, false, false, false, true} || s.AnyStale() || len(s.Problems) > 0 || s.Play.Subject != study.NoSubject {
		t.Errorf("%+v", s)
	}
	f.Request(study.Study{})
	if s := f.settled(); s.Results != (Results{}) || len(s.Problems) > 0 {
		t.Errorf("%+v", s)
	}
}

func TestLinearMoleculesHaveNoLedgerAndNoProblem(t *testing.T) {
	f := newFace(t, assets.Demos())
	f.Request(study.Study{Structure: "demo:rod", Basis: []string{"C:p"}, Operation: "C(φ)", Angle: 90, Projection: study.Projection{Function: 1, Irrep: "Πu"}})
	s := f.settled()
	if s.has() != [stages]bool{true, true, true, true, true, false, true, true} || len(s.Problems) > 0 || s.AnyStale() {
		t.Fatalf("%+v", s)
	}
	turned := s.Study
	turned.Angle = 180
	f.Request(turned)
	if next := f.settled(); next.Play == s.Play || next.Orbitals != s.Orbitals {
		t.Error("another angle changes another thing than the play")
	}
}

// TestTheOldStaysUntilTheNewIsThere holds that the old results stay, marked,
// while a new structure is waited for, and that the wait is told.
func TestTheOldStaysUntilTheNewIsThere(t *testing.T) {
	g := newGate()
	f := newFace(t, g)
	f.Request(wholeStudy)
	old := f.settled()
	open := g.shut("cage")
	f.Request(study.Study{Structure: "demo:cage", Basis: []string{"C:s"}})
	s := f.run("progress", func(s *State) bool { return s.Progress != nil })
	if s.Group != old.Group || s.Basis != old.Basis || s.Orbitals != old.Orbitals || !s.Stale(StageStructure) || !s.Stale(StageGroup) || !s.Stale(StageOrbitals) {
		t.Errorf("the old results are not there or not marked: %+v", s)
	}
	// The new study asks for no operation and no irrep.
	if s.Play != nil || s.Orbital != nil || s.Ledger != nil {
		t.Error("what is not asked for stays")
	}
	if *s.Progress != (Progress{StageStructure, 0, 5, 0}) || s.Progress.Fraction() != 0 {
		t.Errorf("progress %+v", *s.Progress)
	}
	open()
	s = f.settled()
	if s.Group.Fit.Setting.Symbol != "Ih" || s.AnyStale() || s.Orbitals == nil {
		t.Errorf("%+v", s)
	}
	if old.Group.Fit.Setting.Symbol != "D4h" || old.AnyStale() {
		t.Error("a state was changed after it was delivered")
	}
}

func TestTheNewestWins(t *testing.T) {
	g := newGate()
	f := newFace(t, g)
	open := g.shut("cage")
	f.Request(study.Study{Structure: "demo:cage"})
	<-g.reached
	for _, name := range []string{"furan", "trimer", "crown", "water"} {
		f.Request(study.Study{Structure: "demo:" + name})
	}
	s := f.run("water", func(s *State) bool {
		return s.Progress == nil && s.Study.Structure == "demo:water" && s.Group != nil && !s.AnyStale()
	})
	open()
	f.quiet(100 * time.Millisecond)
	if s.Group.Fit.Setting.Symbol != "C2v" {
		t.Errorf("%s", s.Group.Fit.Setting.Symbol)
	}
	for _, s := range f.states {
		if s.Structure != nil && s.Structure.Molecule.Formula() == "C60" {
			t.Error("what nobody waits for any more is delivered")
		}
	}
}

func TestCancellingKeepsWhatIsThere(t *testing.T) {
	g := newGate()
	f := newFace(t, g)
	f.Request(wholeStudy)
	old := f.settled()
	f.Cancel() // nothing is going on
	f.quiet(20 * time.Millisecond)
	open := g.shut("cage")
	other := study.Study{Structure: "demo:cage", Basis: []string{"C:s"}}
	f.Request(other)
	f.run("progress", func(s *State) bool { return s.Progress != nil })
	f.Cancel()
	s := f.run("the end", func(s *State) bool { return s.Cancelled })
	if s.Progress != nil || s.Group != old.Group || s.Orbitals != old.Orbitals || !s.Stale(StageGroup) || len(s.Problems) > 0 {
		t.Errorf("%+v", s)
	}
	f.quiet(150 * time.Millisecond)
	open()
	f.quiet(50 * time.Millisecond)
	f.Request(other)
	if s := f.settled(); s.Cancelled || s.AnyStale() || s.Group.Fit.Setting.Symbol != "Ih" {
		t.Errorf("started again: %+v", s)
	}
}

// TestProblemsAreTiedToWhatTheyAreAbout holds, for a mistake in each choice,
// what is blamed, that it is told once, and what stays: the old results of the
// stages that fail, marked, and no mark on the others.
func TestProblemsAreTiedToWhatTheyAreAbout(t *testing.T) {
	S, G, B, O, C, L, P, M := StageStructure, StageGroup, StageBasis, StageOrbitals, StageOrbital, StageLedger, StagePlay, StageMatch
	for _, c := range []struct {
		concern Concern
		change  func(*study.Study)
		stale   []Stage
	}{
		{ConcernStructure, func(s *study.Study) { s.Structure = "demo:nothing" }, []Stage{S, G, B, O, C, L, P, M}},
		{ConcernStructure, func(s *study.Study) { s.Coordinates = "2\nbroken\nH 0 0" }, []Stage{S, G, B, O, C, L, P, M}},
		{ConcernCore, func(s *study.Study) { s.Core = "Xx" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernCore, func(s *study.Study) { s.Core, s.Ignore = "9", "Cl" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernCore, func(s *study.Study) { s.Core, s.Ignore = "Cl", "Cl" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernIgnore, func(s *study.Study) { s.Ignore = "9" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernIgnore, func(s *study.Study) { s.Core, s.Ignore = "Cl", "9" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernIgnore, func(s *study.Study) { s.Ignore = "all" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernTolerance, func(s *study.Study) { s.Structure, s.Tolerance = "demo:water", 1 }, []Stage{G, B, O, C, L, P, M}},
		{ConcernTolerance, func(s *study.Study) { s.Tolerance = -1 }, []Stage{G, B, O, C, L, P, M}},
		{ConcernFrame, func(s *study.Study) { s.Frame = "crooked" }, []Stage{G, B, O, C, L, P, M}},
		{ConcernBasis, func(s *study.Study) { s.Basis = []string{"Cl:sigma", "Cl:g"} }, []Stage{B, O, C, L, M}},
		{ConcernFunction, func(s *study.Study) { s.Projection.Function = 5 }, []Stage{L}},
		{ConcernFunction, func(s *study.Study) { s.Projection = study.Projection{Function: 5} }, nil},
		{ConcernIrrep, func(s *study.Study) { s.Projection.Irrep = "A2u" }, []Stage{C}},
		{ConcernIrrep, func(s *study.Study) { s.Projection.Irrep = "T1" }, []Stage{C, L}},
		{ConcernCopy, func(s *study.Study) { s.Projection.Copy = 2 }, []Stage{C}},
		{ConcernPartner, func(s *study.Study) { s.Projection.Partner = 3 }, []Stage{C}},
		{ConcernElement, func(s *study.Study) { s.Projection.Element = [2]int{3, 1} }, []Stage{L}},
		{ConcernOperation, func(s *study.Study) { s.Operation = "C7(z)" }, []Stage{P}},
	} {
		t.Run(string(c.concern), func(t *testing.T) {
			f := newFace(t, assets.Demos())
			f.Request(wholeStudy)
			old := f.settled()
			wrong := wholeStudy
			c.change(&wrong)
			f.Request(wrong)
			s := f.settled()
			if len(s.Problems) != 1 || s.Problem(c.concern) == nil || strings.Contains(s.Problems[0].Error(), "\n") {
				t.Fatalf("problems %v", s.Problems)
			}
			if c.concern == ConcernBasis && s.Problems[0].Index != 1 {
				t.Errorf("selection %d is blamed", s.Problems[0].Index+1)
			}
			var want [stages]bool
			for _, stage := range c.stale {
				want[stage] = true
			}
			if s.stale != want {
				t.Errorf("stale %v, want %v", s.stale, want)
			}
			if want[G] && s.Group != old.Group || want[O] && s.Orbitals != old.Orbitals || want[C] && s.Orbital != old.Orbital || want[L] && s.Ledger != old.Ledger {
				t.Error("old results are lost")
			}
			if s.Play == nil {
				t.Error("the operation is not shown")
			}
			f.Request(wholeStudy)
			if s := f.settled(); len(s.Problems) > 0 || s.AnyStale() {
				t.Errorf("put right: %v", s.Problems)
			}
		})
	}
}

func TestAPanicIsAProblemAndTheServiceGoesOn(t *testing.T) {
	f := newFace(t, newGate())
	f.Request(wholeStudy)
	old := f.settled()
	f.Request(study.Study{Structure: "demo:panic"})
	s := f.settled()
	p := s.Problem(ConcernProgram)
	var fault *PanicError
	if p == nil || p.Error() != "internal error: it was told to" || !errors.As(p, &fault) || !bytes.Contains(fault.Stack, []byte("face_test.go")) || s.Group != old.Group {
		t.Errorf("%v", s.Problems)
	}
	f.Request(wholeStudy)
	if s := f.settled(); len(s.Problems) > 0 {
		t.Errorf("%v", s.Problems)
	}
	func() {
		defer func() {
			if value := recover(); fmt.Sprint(value) != "it was told to" {
				t.Errorf("the caller of the synchronous way sees %v", value)
			}
		}()
		New(structure.Inputs{Demo: newGate()}).Structure(context.Background(), study.Study{Structure: "demo:panic"})
	}()
}

func TestTryingAFileLeavesTheWorkAsItWas(t *testing.T) {
	f := newFace(t, newGate())
	f.Request(wholeStudy)
	old := f.settled()
	path := filepath.Join(t.TempDir(), "water.xyz")
	candidate := study.Study{Structure: path}
	var read *Structure
	var err error
	try := func(s study.Study) {
		t.Helper()
		done := false
		f.Try(s, func(r *Structure, e error) { read, err, done = r, e, true })
		for end := time.After(20 * time.Second); !done; {
			select {
			case g := <-f.posts:
				g()
			case <-end:
				t.Fatal("no answer")
			}
		}
	}
	var p *Problem
	if try(candidate); read != nil || !errors.As(err, &p) || p.Concern != ConcernStructure {
		t.Errorf("%v", err)
	}
	if try(study.Study{Structure: "demo:panic"}); !errors.As(err, &p) || p.Concern != ConcernProgram {
		t.Errorf("%v", err)
	}
	f.Request(wholeStudy)
	f.quiet(50 * time.Millisecond) // nothing has changed

	if err := os.WriteFile(path, []byte(waterFile), 0o666); err != nil {
		t.Fatal(err)
	}
	if try(candidate); err != nil {
		t.Fatal(err)
	}
	f.Request(candidate)
	s := f.settled()
	if s.Structure != read || s.Group == old.Group {
		t.Error("the file is read a second time")
	}
	// The file changes: only trying it again reads it anew.
	if err := os.WriteFile(path, []byte(strings.Replace(waterFile, "O 0", "S 0", 1)), 0o666); err != nil {
		t.Fatal(err)
	}
	f.Request(candidate)
	f.quiet(50 * time.Millisecond)
	if try(candidate); err != nil {
		t.Fatal(err)
	}
	f.Request(candidate)
	if next := f.settled(); next.Structure != read || next.Group == s.Group || next.Structure.Molecule.Formula() != "H2S" || next.AnyStale() {
		t.Errorf("%+v", next.Structure.Molecule)
	}
}

func TestALaterTrySilencesAnEarlierOne(t *testing.T) {
	g := newGate()
	f := newFace(t, g)
	open := g.shut("cage")
	answers := ""
	f.Try(study.Study{Structure: "demo:cage"}, func(*Structure, error) { answers += "first " })
	<-g.reached
	f.Try(study.Study{Structure: "demo:water"}, func(*Structure, error) { answers += "second " })
	(<-f.posts)()
	open()
	(<-f.posts)()
	if answers != "second " {
		t.Errorf("answers: %s", answers)
	}
}

// TestAFileThatHangsHoldsNothingElseUp: while one file does not answer, another
// one is opened.
func TestAFileThatHangsHoldsNothingElseUp(t *testing.T) {
	g := newGate()
	f := newFace(t, g)
	open := g.shut("cage")
	defer open()
	f.Request(study.Study{Structure: "demo:cage"})
	<-g.reached
	answered := false
	f.Try(study.Study{Structure: "demo:water"}, func(_ *Structure, err error) { answered = err == nil })
	for end := time.After(20 * time.Second); !answered; {
		select {
		case post := <-f.posts:
			post()
		case <-end:
			t.Fatal("no answer")
		}
	}
	f.Request(study.Study{Structure: "demo:water"})
	f.run("water", func(s *State) bool { return s.Group != nil && !s.AnyStale() })
}

// TestPastedCoordinatesAreReadFromTheStudy: the text is in the study, and
// messages name it.
func TestPastedCoordinatesAreReadFromTheStudy(t *testing.T) {
	f := newFace(t, assets.Demos())
	s, err := study.Study{}.WithCoordinates("pasted", waterFile)
	if err != nil {
		t.Fatal(err)
	}
	f.Request(s)
	if got := f.settled(); got.Group.Fit.Setting.Symbol != "C2v" {
		t.Errorf("%+v", got)
	}
	s, _ = s.WithCoordinates("pasted", "3\nwater\nO 0 0 x\n")
	f.Request(s)
	if p := f.settled().Problem(ConcernStructure); p == nil || !strings.HasPrefix(p.Error(), "pasted:3: ") {
		t.Errorf("%v", p)
	}
	nameless := study.Study{Coordinates: "3\n\nO 0 0 x\n"}
	f.Request(nameless)
	if p := f.settled().Problem(ConcernStructure); p == nil || !strings.HasPrefix(p.Error(), "coordinates:3: ") {
		t.Errorf("%v", p)
	}
}

func TestNothingIsLeftAfterClosing(t *testing.T) {
	before := runtime.NumGoroutine()
	g := newGate()
	open := g.shut("cage")
	var all []*face
	for i := range 10 {
		f := newFace(t, g)
		switch i % 3 {
		case 0:
			f.Request(study.Study{Structure: "demo:cage"}) // hangs
			<-g.reached
			f.Try(study.Study{Structure: "demo:cage"}, func(*Structure, error) { t.Error("an answer after closing") })
			<-g.reached
		case 1:
			f.Request(wholeStudy)
		}
		all = append(all, f)
	}
	for _, f := range all {
		done := make(chan struct{})
		go func() { f.Close(); close(done) }()
		select {
		case <-done:
		case <-time.After(10 * time.Second):
			t.Fatal("closing hangs")
		}
		seen := len(f.states)
		f.Request(wholeStudy)
		f.Try(wholeStudy, func(*Structure, error) { t.Error("an answer after closing") })
		f.Cancel()
		f.quiet(time.Millisecond)
		if len(f.states) != seen {
			t.Error("a state after closing")
		}
	}
	open() // what was left alone ends too
	for end := time.Now().Add(10 * time.Second); runtime.NumGoroutine() > before; time.Sleep(time.Millisecond) {
		if time.Now().After(end) {
			stacks := make([]byte, 1<<16)
			t.Fatalf("%d goroutines are left of %d\n%s", runtime.NumGoroutine(), before, stacks[:runtime.Stack(stacks, true)])
		}
	}
}

// TestManyRequestsEndWithTheLast throws studies at a service from several
// goroutines and holds that every state fits together, that there is never
// more than one post, and that the end is that of the last study.
func TestManyRequestsEndWithTheLast(t *testing.T) {
	f := newFace(t, assets.Demos())
	structures := []string{"demo:water", "demo:square-plane", "demo:furan", "demo:rod", "demo:nothing", "demo:tetrahedron", ""}
	bases := [][]string{nil, {"all:s"}, {"all:p"}, {"Cl:sigma"}, {"O:s,p"}, {"nonsense"}}
	irreps := []string{"", "A1", "Eu", "B2", "Πu", "T2"}
	operations := []string{"", "E", "C2(z)", "C4(z)", "C(φ)", "i"}
	random := func(r *rand.Rand) study.Study {
		return study.Study{
			Structure: structures[r.IntN(len(structures))], Basis: bases[r.IntN(len(bases))], Operation: operations[r.IntN(len(operations))],
			Tolerance: float64(r.IntN(3)) / 50, Angle: float64(r.IntN(4) * 45),
			Projection: study.Projection{Function: r.IntN(4), Irrep: irreps[r.IntN(len(irreps))], Copy: r.IntN(3), Partner: r.IntN(3)},
		}
	}
	var all sync.WaitGroup
	for g := range 3 {
		all.Go(func() {
			r := rand.New(rand.NewPCG(7, uint64(g)))
			for i := range 300 {
				f.Request(random(r))
				if i%20 == 0 {
					time.Sleep(time.Duration(r.IntN(3)) * time.Millisecond)
				}
				if i%67 == 0 {
					f.Cancel()
				}
			}
		})
	}
	finished := make(chan struct{})
	go func() {
		all.Wait()
		f.Request(study.Study{})
		f.Request(wholeStudy)
		close(finished)
	}()
	s := f.run("the last study", func(s *State) bool {
		return s.Study.Equal(wholeStudy) && s.Progress == nil && !s.AnyStale() && s.Play != nil
	})
	<-finished
	if len(s.Problems) > 0 || s.Ledger == nil || s.Orbital == nil || s.Play.Orbital != s.Orbital {
		t.Errorf("%+v", s)
	}
	if f.most > 1 {
		t.Errorf("%d posts at once", f.most)
	}
	t.Logf("%d states of 900 requests", len(f.states))
}

// TestAnInterfaceMayRunPostsAtOnce: a thread that runs what is posted before
// post returns, as a test of a window does.
func TestAnInterfaceMayRunPostsAtOnce(t *testing.T) {
	delivered := make(chan *State, 100)
	var v *Service
	v = NewService(demoWork(), func(g func()) { g() }, func(s *State) {
		if s.Structure != nil && s.Basis == nil {
			v.Request(wholeStudy) // from within a delivery
		}
		delivered <- s
	})
	defer v.Close()
	v.Request(study.Study{Structure: "demo:square-plane"})
	for end := time.After(20 * time.Second); ; {
		select {
		case s := <-delivered:
			if s.Play != nil && !s.AnyStale() {
				return
			}
		case <-end:
			t.Fatal("no results")
		}
	}
}

// BenchmarkChange is the time from a change of the study to its results on the
// interface's thread, for a small demonstration. "another structure" goes all
// the way from reading to the play.
func BenchmarkChange(b *testing.B) {
	partner, operation, function, basis, other := wholeStudy, wholeStudy, wholeStudy, wholeStudy, wholeStudy
	partner.Projection.Partner = 1
	operation.Operation = "S4^3(z)"
	function.Projection.Function = 2
	basis.Basis = []string{"Cl:sigma,pi", "Pt:d"}
	other.Structure = "demo:octahedron"
	for name, s := range map[string]study.Study{
		"partner": partner, "operation": operation, "function": function, "basis": basis, "another structure": other,
	} {
		b.Run(name, func(b *testing.B) {
			f := newFace(b, assets.Demos())
			f.Request(wholeStudy)
			f.settled()
			worst := time.Duration(0)
			studies := [2]study.Study{s, wholeStudy}
			for i := 0; b.Loop(); i++ {
				start := time.Now()
				f.Request(studies[i%2])
				f.settled()
				worst = max(worst, time.Since(start))
			}
			b.ReportMetric(float64(worst.Microseconds())/1000, "worst-ms")
		})
	}
}
