package symmetry

import (
	"context"
	"math"
	"runtime"
	"slices"
	"sync"
)

// Starts lie so near together that the farthest point is off by no more than
// startError (Å) from one to the next, but for the bounds on their number.
const (
	startError = 0.35
	fewestAxes = 320
	mostAxes   = 1500
)

// smallCloud is the number of points up to which every image within reach is
// tried. In a larger set of points that lie close together a great many planes
// and axes carry every point to one that is not far, though to no purpose: there
// neighbours stay neighbours, and an image is hardly farther than the nearest.
const smallCloud = 24

// FullyTried is the number of points up to which Near tries every image within
// reach, and NearestImage (Å) how much farther than the nearest an image may lie
// in larger sets.
const (
	FullyTried   = smallCloud
	NearestImage = hardlyFarther
)

// hardlyFarther (Å) is the margin within which a point has either of two images,
// half-way between them but for noise and for the error of the start. With 0.6
// the search in 200 points takes five times as long, with the limit of the ladder
// far longer.
const hardlyFarther = 0.45

// search finds the operations that are powers of primes.
func (l *ladder) search(ctx context.Context, progress func(float64)) error {
	c := l.cloud
	// n directions on the half of the sphere leave gaps of some 1.6/√n.
	gap := 1.6 * c.farthest() / startError
	n := min(max(fewestAxes, int(gap*gap)), mostAxes)
	gap = 1.6 / math.Sqrt(float64(n))
	allowed := make([]float64, len(c.at))
	most := l.limit
	if len(c.at) <= smallCloud/2 {
		most *= widened // among few points that takes no time
	}
	for i, r := range c.radius {
		allowed[i] = most + min(gap*r, startError)
	}
	s := newCovers(c, allowed, leastStart)
	if len(c.at) > smallCloud {
		s.shells()
		s.margin = hardlyFarther
	}
	l.pool, l.others = map[elementKey]*element{}, map[elementKey]*element{}
	l.tried = map[elementKey]bool{}
	for k, t := range motionTypes {
		first := len(l.generators)
		told := func(share float64) { progress((float64(k) + share) / float64(len(motionTypes))) }
		found, err := s.everywhere(ctx, t, n, told)
		if err != nil {
			return err
		}
		for _, f := range found {
			l.meet(f.motion, f.image)
		}
		if found := l.generators[first:]; s.beside != nil && t.fold <= 2 && len(found) <= mostHalved {
			s.halfWay(t, found, l.meet)
		}
	}
	return nil
}

// A finding is a way in which a motion can carry the points.
type finding struct {
	motion *motion
	image  []int32
}

// everywhere tries a type of motion about n axes, on all cores, and lists what is
// found in the order of the axes, each way at least where it comes first: so
// nothing depends on which core tried what.
func (s *covers) everywhere(ctx context.Context, t motionType, n int, progress func(float64)) ([]finding, error) {
	if t.fold == 2 && t.improper {
		n = 1 // the inversion has no axis
	}
	found := make([][]finding, n)
	workers := min(runtime.GOMAXPROCS(0), n)
	var done sync.WaitGroup
	var telling sync.Mutex
	tried := 0
	for w := range workers {
		done.Add(1)
		go func() {
			defer done.Done()
			own := s.another()
			known := map[elementKey]bool{}
			for i := w; i < n && ctx.Err() == nil; i += workers {
				own.try(t.at(spiral(i, n)), func(m *motion, image []int32) {
					e := &element{permutation: image, improper: m.improper, matrix: m.powers[1]}
					if k := e.key(); !known[k] {
						known[k] = true
						found[i] = append(found[i], finding{m, slices.Clone(image)})
					}
				})
				telling.Lock()
				if tried++; tried%16 == 0 {
					progress(float64(tried) / float64(n))
				}
				telling.Unlock()
			}
		}()
	}
	done.Wait()
	return slices.Concat(found...), ctx.Err()
}

// mostHalved bounds the number of operations between which others are sought.
const mostHalved = 100

// halfWay seeks operations that go with some points as one of two operations
// found, and with the others as the other one: two parts of a molecule that are
// turned against each other have each its own.
func (s *covers) halfWay(t motionType, list []*element, found func(m *motion, image []int32)) {
	defer func() { s.choices = nil }()
	for i, a := range list {
		for _, b := range list[:i] {
			u, v := a.axis(), b.axis()
			if u.Dot(v) < 0 {
				v = v.Mul(-1)
			}
			s.choices = [][]int32{a.permutation, b.permutation}
			s.try(t.at(u.Add(v).Normalize()), found)
		}
	}
}

// meet takes an operation as a generator if its cyclic group is near.
func (l *ladder) meet(m *motion, image []int32) {
	e := &element{permutation: image, improper: m.improper, matrix: m.powers[1]}
	if l.tried[e.key()] {
		return
	}
	e.permutation = append([]int32(nil), image...)
	// One of a lower order is a simpler operation, and found as that.
	if l.admit(e) && e.order() == m.order {
		l.generators = append(l.generators, e)
	}
}

// admit takes an element and its powers into the pool if its cyclic group is
// near, and gives it the best matrix.
func (l *ladder) admit(e *element) bool {
	if k := e.key(); l.tried[k] {
		return l.pool[k] != nil
	} else {
		l.tried[k] = true
	}
	l.cloud.best(e)
	group := l.cloud.generate([]*element{e}, 2*MaxNearFold)
	if l.place(group) == nil {
		return false
	}
	for _, g := range group {
		k := g.key()
		l.tried[k] = true
		if l.pool[k] == nil {
			// Powers have the axis of the whole: half-way, the best of their own
			// may turn the other way round.
			g.free = e.free
			l.pool[k] = g
		}
	}
	return true
}
