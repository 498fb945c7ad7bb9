package work

import (
	"context"
	"errors"
	"slices"
	"sync"
	"time"

	"lobewright/app/study"
)

// A Search looks, beside a Service, for the groups that a structure nearly has
// and how it is distorted from each: that takes up to seconds, and nothing else
// waits for it. It works in the background and delivers on the interface's
// thread. One structure is sought at a time; the newest wins.
type Search struct {
	work    *Work
	deliver func(*Nearby)
	news    notice

	closing context.Context
	close   context.CancelFunc
	running sync.WaitGroup

	mu     sync.Mutex
	wanted any // key of what is sought or was found; nil at first
	number int // counts the searches, so that late news of one is known
	stop   context.CancelFunc
	state  Nearby
}

// Nearby is how far a search has come. It is never changed after it was
// delivered.
type Nearby struct {
	// Study is what the search was asked for.
	Study study.Study
	// Ladder is nil until it is found.
	Ladder *Ladder
	// Shares has the distortion from each group of the Ladder, in its order:
	// first those of the nearest embeddings. nil where it is not known yet; no
	// distortion is of no length.
	Shares [][]Share
	// Running says that the ladder, or the distortion from the nearest
	// embeddings, is being sought, and Share how much of that is done, from 0
	// to 1.
	Running bool
	Share   float64
	// Cancelled says that the search was stopped.
	Cancelled bool
	// Problem says why there is no ladder.
	Problem *Problem
}

// NewSearch starts nothing yet. post and deliver are as for NewService.
func NewSearch(w *Work, post func(func()), deliver func(*Nearby)) *Search {
	v := &Search{work: w, deliver: deliver}
	v.news.post, v.news.run = post, v.hand
	v.closing, v.close = context.WithCancel(context.Background())
	return v
}

// Want asks for the ladder of a study's core. It returns at once, and does
// nothing if that was asked for last; a search that was stopped stays so.
func (v *Search) Want(s study.Study) {
	type key struct {
		structureKey
		core, ignore string
	}
	wanted := key{v.work.keyOfStructure(s), s.Core, s.Ignore}
	v.mu.Lock()
	same := v.wanted == wanted
	v.wanted = wanted
	v.mu.Unlock()
	if !same {
		v.Again(s)
	}
}

// Again starts a search even if it was stopped or in vain before.
func (v *Search) Again(s study.Study) {
	v.mu.Lock()
	if v.closing.Err() != nil {
		v.mu.Unlock()
		return
	}
	v.interrupt()
	ctx, stop := context.WithCancel(v.closing)
	v.stop, v.state = stop, Nearby{Study: s, Running: true}
	number := v.number
	v.running.Add(1)
	v.mu.Unlock()
	v.news.now()
	go func() {
		defer v.running.Done()
		defer stop()
		v.seek(ctx, number, s)
	}()
}

// interrupt stops the search at hand. The lock is held.
func (v *Search) interrupt() {
	if v.stop != nil {
		v.stop()
		v.stop = nil
	}
	v.number++
}

// Cancel stops the search at hand; what was found stays.
func (v *Search) Cancel() {
	v.mu.Lock()
	if !v.state.Running {
		v.mu.Unlock()
		return
	}
	v.interrupt()
	v.state.Running, v.state.Cancelled = false, true
	v.mu.Unlock()
	v.news.now()
}

// Close stops everything and waits until it has stopped. Nothing is delivered
// afterwards.
func (v *Search) Close() {
	v.close()
	v.mu.Lock()
	v.interrupt()
	v.mu.Unlock()
	v.running.Wait()
}

// often is how often news of a search is worth telling.
const often = 60 * time.Millisecond

// ladderShare is the share of a search that finding the ladder stands for;
// resolving the distortions is the rest.
const ladderShare = 0.9

// seek finds the ladder, then resolves distortions one by one.
func (v *Search) seek(ctx context.Context, number int, s study.Study) {
	defer func() {
		if fault := recover(); fault != nil {
			v.tell(number, true, func(n *Nearby) { n.Running, n.Problem = false, caught(StageGroup, fault) })
		}
	}()
	ladder, err := v.work.Ladder(ctx, s, func(share float64) {
		v.tell(number, false, func(n *Nearby) { n.Share = ladderShare * share })
	})
	if ctx.Err() != nil {
		return
	}
	if err != nil {
		var p *Problem
		if !errors.As(err, &p) {
			p = &Problem{Stage: StageGroup, Concern: ConcernStructure, Err: err}
		}
		v.tell(number, true, func(n *Nearby) { n.Running, n.Problem = false, p })
		return
	}
	v.tell(number, true, func(n *Nearby) {
		n.Ladder, n.Shares, n.Share = ladder, make([][]Share, len(ladder.Groups)), ladderShare
	})
	order := ladder.byEmbedding()
	first := 0
	for _, i := range order {
		if ladder.Groups[i].Embedding == 1 {
			first++
		}
	}
	for done, i := range order {
		shares, err := ladder.Distortion(ladder.Groups[i])
		if ctx.Err() != nil {
			return
		}
		if err != nil || shares == nil {
			shares = []Share{}
		}
		v.tell(number, done == first-1 || done == len(order)-1, func(n *Nearby) {
			n.Shares = slices.Clone(n.Shares)
			n.Shares[i] = shares
			n.Share = min(1, ladderShare+(1-ladderShare)*float64(done+1)/float64(max(first, 1)))
			n.Running = done < first-1
		})
	}
}

// byEmbedding are the groups of a ladder, the nearest of each symbol first.
func (l *Ladder) byEmbedding() []int {
	order := make([]int, len(l.Groups))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return l.Groups[a].Embedding - l.Groups[b].Embedding })
	return order
}

// tell changes the state of a search and publishes it; small news only when
// some time has passed since the last.
func (v *Search) tell(number int, now bool, change func(*Nearby)) {
	v.mu.Lock()
	if number != v.number || v.stop == nil {
		v.mu.Unlock()
		return
	}
	change(&v.state)
	v.mu.Unlock()
	if now {
		v.news.now()
	} else {
		v.news.soon(often, func() bool { return v.closing.Err() != nil })
	}
}

// hand delivers the state as it is now.
func (v *Search) hand() {
	v.mu.Lock()
	state := v.state
	closed := v.closing.Err() != nil
	v.mu.Unlock()
	if !closed {
		v.deliver(&state)
	}
}
