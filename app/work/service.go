package work

import (
	"context"
	"slices"
	"sync"
	"time"

	"lobewright/app/study"
)

// A Service works for an interface: it takes studies, computes what follows
// from them in the background, and delivers it on the interface's thread. The
// newest study wins. What is known of older ones stays until the new is there.
//
// A stage that has begun is finished and kept, even if nobody waits for it any
// more: stages are short, and a person who goes back finds it done. Only
// reading is left alone at once, since a file system may never answer.
type Service struct {
	work    *Work
	post    func(func())
	deliver func(*State)
	news    notice

	wake    chan struct{} // holds one: there may be something to do
	closing context.Context
	close   context.CancelFunc
	running sync.WaitGroup

	mu        sync.Mutex
	newest    study.Study
	asked     [stages]any        // the keys of newest
	pending   bool               // newest is to be worked at
	stop      context.CancelFunc // of the work at hand, or nil
	working   int                // counts the works, so that late news of one is known
	shown     chain
	problems  []*Problem
	progress  *Progress
	cancelled bool
	delivered *State
	trial     int // counts the calls of Try
}

// NewService starts a service. post has a function run on the interface's
// thread, later or at once; the service never has more than one State waiting
// there. deliver is called by functions that are posted, never elsewhere.
func NewService(w *Work, post func(func()), deliver func(*State)) *Service {
	v := &Service{work: w, post: post, deliver: deliver, wake: make(chan struct{}, 1), delivered: &State{}}
	v.news.post, v.news.run = post, v.hand
	v.closing, v.close = context.WithCancel(context.Background())
	v.running.Add(1)
	go v.serve()
	return v
}

// Request asks for what follows from a study. It returns at once. If nothing
// that is computed depends on what has changed, as with the camera, nothing is
// computed and nothing delivered.
func (v *Service) Request(s study.Study) {
	asked := v.work.keysOf(s)
	v.mu.Lock()
	defer v.mu.Unlock()
	v.newest = s
	if asked == v.asked && !v.cancelled {
		return
	}
	v.asked, v.pending, v.cancelled = asked, true, false
	v.interrupt()
	select {
	case v.wake <- struct{}{}:
	default:
	}
}

// interrupt stops the work at hand. The lock is held.
func (v *Service) interrupt() {
	if v.stop != nil {
		v.stop()
		v.stop = nil
	}
	v.working++ // what it still says is not heard
}

// Cancel stops the work at hand. What was known stays. The next Request starts
// it again, with the same study too.
func (v *Service) Cancel() {
	v.mu.Lock()
	if v.stop == nil && !v.pending {
		v.mu.Unlock()
		return
	}
	v.pending, v.cancelled, v.progress = false, true, nil
	v.interrupt()
	v.mu.Unlock()
	v.news.now()
}

// Close stops everything and waits until it has stopped; a stage that has begun
// is waited for. Nothing is delivered afterwards. It may be called on the
// interface's thread, provided that post does not wait for that thread.
func (v *Service) Close() {
	v.close()
	v.mu.Lock()
	v.pending = false
	v.interrupt()
	v.mu.Unlock()
	v.running.Wait()
}

// serve is the one goroutine that computes.
func (v *Service) serve() {
	defer v.running.Done()
	for {
		select {
		case <-v.closing.Done():
			return
		case <-v.wake:
			v.serveNewest()
		}
	}
}

// patience is how long work may take before the interface is told that it goes
// on. What is quicker needs no mark of being old and no progress bar.
const patience = 100 * time.Millisecond

func (v *Service) serveNewest() {
	v.mu.Lock()
	if !v.pending {
		v.mu.Unlock()
		return
	}
	v.pending = false
	ctx, stop := context.WithCancel(v.closing)
	defer stop()
	v.stop = stop
	v.working++
	number, s, asked := v.working, v.newest, v.asked
	v.mu.Unlock()

	a := &attempt{service: v, number: number, asked: asked}
	a.timer = time.AfterFunc(patience, a.lose)
	c, problems, done := v.work.advance(ctx, s, asked, a.begin)
	a.timer.Stop()

	v.mu.Lock()
	if !done || number != v.working {
		v.mu.Unlock()
		return
	}
	v.stop = nil
	v.shown, v.problems, v.progress = settle(v.shown, c, asked), problems, nil
	v.mu.Unlock()
	v.news.now()
}

// An attempt is one computation, which tells of itself once patience is lost.
type attempt struct {
	service *Service
	number  int
	asked   [stages]any
	timer   *time.Timer

	mu       sync.Mutex
	late     bool
	progress Progress
	known    chain
}

// begin is called before each stage.
func (a *attempt) begin(p Progress, known chain) {
	a.mu.Lock()
	a.progress, a.known = p, known
	late := a.late
	a.mu.Unlock()
	if late {
		a.tell()
	}
}

func (a *attempt) lose() {
	a.mu.Lock()
	a.late = true
	a.mu.Unlock()
	a.tell()
}

func (a *attempt) tell() {
	a.mu.Lock()
	progress, known := a.progress, a.known
	a.mu.Unlock()
	v := a.service
	v.mu.Lock()
	if a.number != v.working || v.stop == nil {
		v.mu.Unlock()
		return
	}
	v.shown, v.progress = settle(v.shown, known, a.asked), &progress
	v.problems = nil
	v.mu.Unlock()
	v.news.now()
}

// hand delivers the state as it is now, if it differs from the last.
func (v *Service) hand() {
	v.mu.Lock()
	if v.closing.Err() != nil {
		v.mu.Unlock()
		return
	}
	s := &State{
		Study: v.newest, Results: v.shown.Results, Problems: v.problems, Progress: v.progress, Cancelled: v.cancelled,
		stale: v.shown.stale(v.asked),
	}
	same := s.sameAs(v.delivered)
	v.delivered = s
	v.mu.Unlock()
	if !same {
		v.deliver(s)
	}
}

// sameAs tells whether two states differ in their studies at most.
func (s *State) sameAs(t *State) bool {
	return s.Results == t.Results && s.stale == t.stale && s.Cancelled == t.Cancelled &&
		s.Progress == t.Progress && slices.Equal(s.Problems, t.Problems)
}

// Try reads the structure of a study, anew if it is a file, without touching
// what is known of the study at hand. done is posted with the structure, or
// with a *Problem or the error of what is wrong with it; a later Try makes an
// earlier one silent. So a bad file leaves the work as it was, and a good one
// is requested without being read again.
func (v *Service) Try(s study.Study, done func(*Structure, error)) {
	v.mu.Lock()
	defer v.mu.Unlock()
	if v.closing.Err() != nil {
		return
	}
	v.trial++
	number := v.trial
	v.running.Add(1)
	go func() {
		defer v.running.Done()
		read, err := v.reopen(s)
		v.post(func() {
			v.mu.Lock()
			silent := number != v.trial || v.closing.Err() != nil
			v.mu.Unlock()
			if !silent {
				done(read, err)
			}
		})
	}()
}

// reopen turns a panic into a problem.
func (v *Service) reopen(s study.Study) (read *Structure, err error) {
	defer func() {
		if value := recover(); value != nil {
			read, err = nil, caught(StageStructure, value)
		}
	}()
	return v.work.Reopen(v.closing, s)
}
