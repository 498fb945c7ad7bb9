package symmetry

import "context"

// mostGroups bounds the list; a structure of a few atoms that is near to many
// groups has some hundreds.
const mostGroups = 3000

// groups lists all groups that the operations generate within the limit: from
// each of them one more operation is taken, and again.
func (l *ladder) groups(ctx context.Context, progress func(float64)) ([]*placed, error) {
	var list [][]*element
	var within []opSet // the generators in each group
	known := map[elementKey]bool{}
	add := func(group []*element) {
		k := keyOf(group)
		if known[k] || len(list) >= mostGroups || l.place(group) == nil {
			return
		}
		known[k] = true
		list = append(list, group)
		within = append(within, l.among(group))
	}
	add(l.cloud.generate(nil, 1)) // every structure has the trivial group
	clash := make([]opSet, len(l.generators))
	for i := range clash {
		clash[i] = newOpSet(len(l.generators))
		clash[i].add(i)
	}
	var largest []opSet
	for at := 0; at < len(list); at++ {
		group, has := list[at], within[at]
		members := has.members()
		open := newOpSet(len(l.generators))
		for i := range l.generators {
			open.add(i)
		}
		for _, i := range members {
			open.remove(clash[i])
		}
		for _, big := range largest {
			if big.holds(has) {
				open.remove(big) // with these they make subgroups of that
			}
		}
		for _, i := range open.members() {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			if !open.has(i) {
				continue
			}
			larger := l.generate(append(group[:len(group):len(group)], l.generators[i]))
			if l.place(larger) == nil {
				if len(members) == 1 { // these two never go together
					clash[i].add(members[0])
					clash[members[0]].add(i)
				}
				continue
			}
			if err := l.subgroups(ctx, larger, add); err != nil {
				return nil, err
			}
			largest = append(largest, l.among(larger))
			open.remove(largest[len(largest)-1])
		}
		progress(float64(at+1) / float64(len(list)))
	}
	var out []*placed
	for _, group := range list {
		if p := l.place(group); p.deviation <= l.limit && l.keepsApart(p, leastShare) {
			out = append(out, p)
		}
	}
	return out, nil
}

// among is the set of the generators that a group holds.
func (l *ladder) among(group []*element) opSet {
	keys := map[elementKey]bool{}
	for _, e := range group {
		keys[e.key()] = true
	}
	out := newOpSet(len(l.generators))
	for i, e := range l.generators {
		if keys[e.key()] {
			out.add(i)
		}
	}
	return out
}

// generate closes a set of elements; nil if that leads to more than any group
// of the ladder has, or to an operation that is not near.
func (l *ladder) generate(generators []*element) []*element {
	var group []*element
	known := map[elementKey]bool{}
	add := func(e *element) bool {
		if k := e.key(); !known[k] {
			known[k] = true
			if !l.near(e) {
				return false
			}
			group = append(group, l.fitted(k, e))
		}
		return true
	}
	for _, g := range generators {
		if !add(g) {
			return nil
		}
	}
	for i := 0; i < len(group); i++ {
		for _, g := range generators {
			if !add(g.times(group[i])) || len(group) > MaxSubgroupOrder {
				return nil
			}
		}
	}
	return group
}

// fitted is an element with the matrix that is the best for it, not a product of
// others; but where any axis of a plane would do, that of the product does best.
func (l *ladder) fitted(k elementKey, e *element) *element {
	best := l.pool[k]
	if best == nil {
		best = l.others[k]
	}
	if best == nil {
		best = &element{permutation: e.permutation, improper: e.improper, matrix: e.matrix}
		l.cloud.best(best)
		l.others[k] = best
	}
	if best.free {
		return e
	}
	return best
}

// near tells whether the parts of an element whose orders are powers of primes
// are all in the pool.
func (l *ladder) near(e *element) bool {
	order := e.order()
	if order == 1 {
		return true
	}
	if order > 4*MaxNearFold {
		return false
	}
	for p, rest := 2, order; rest > 1; p++ {
		power := 1
		for rest%p == 0 {
			rest /= p
			power *= p
		}
		if power == 1 {
			continue
		}
		part := e
		for range order/power - 1 {
			part = e.times(part)
		}
		// The search among few points has found all there are.
		if l.pool[part.key()] == nil && (len(l.cloud.at) <= smallCloud || !l.admit(part)) {
			return false
		}
	}
	return true
}

// subgroups hands every subgroup of a group of elements to a function, by the
// group's own product table.
func (l *ladder) subgroups(ctx context.Context, group []*element, add func([]*element)) error {
	place := map[elementKey]int{}
	for i, e := range group {
		place[e.key()] = i
	}
	s := &Setting{Operations: make([]Operation, len(group)), product: make([][]int32, len(group))}
	for i, e := range group {
		s.product[i] = make([]int32, len(group))
		for j, f := range group {
			s.product[i][j] = int32(place[e.times(f).key()])
		}
	}
	s.inverse = inverses(s.product)
	classes, err := s.subgroups()
	if err != nil {
		return err
	}
	for _, class := range classes {
		for _, set := range s.conjugates(class) {
			if err := ctx.Err(); err != nil {
				return err
			}
			var members []*element
			for _, i := range set.members() {
				members = append(members, group[i])
			}
			add(members)
		}
	}
	return nil
}
