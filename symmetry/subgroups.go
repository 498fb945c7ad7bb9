package symmetry

import (
	"encoding/binary"
	"math/bits"
	"sort"

	"lobewright/symmetry/message"
)

// An opSet is a set of operations of a Setting, a bit for each index.
type opSet []uint64

func newOpSet(order int) opSet { return make(opSet, (order+63)/64) }

func (o opSet) has(i int) bool { return o[i/64]>>(i%64)&1 == 1 }
func (o opSet) add(i int)      { o[i/64] |= 1 << (i % 64) }

// holds tells whether every operation of another set is in this one.
func (o opSet) holds(other opSet) bool {
	for w := range o {
		if other[w]&^o[w] != 0 {
			return false
		}
	}
	return true
}

// remove takes out the operations of another set.
func (o opSet) remove(other opSet) {
	for w := range o {
		o[w] &^= other[w]
	}
}

func (o opSet) size() int {
	n := 0
	for _, w := range o {
		n += bits.OnesCount64(w)
	}
	return n
}

func (o opSet) key() string {
	b := make([]byte, 0, 8*len(o))
	for _, w := range o {
		b = binary.LittleEndian.AppendUint64(b, w)
	}
	return string(b)
}

func (o opSet) members() []int {
	var out []int
	for i, w := range o {
		for ; w != 0; w &= w - 1 {
			out = append(out, 64*i+bits.TrailingZeros64(w))
		}
	}
	return out
}

// generated is the smallest subgroup that holds the given operations.
func (s *Setting) generated(generators ...int) opSet {
	set := newOpSet(s.Order())
	set.add(0)
	list := []int{0}
	for i := 0; i < len(list); i++ {
		for _, g := range generators {
			if p := s.Product(g, list[i]); !set.has(p) {
				set.add(p)
				list = append(list, p)
			}
		}
	}
	return set
}

// conjugate is x·set·x⁻¹.
func (s *Setting) conjugate(set opSet, x int) opSet {
	out := newOpSet(s.Order())
	for _, a := range set.members() {
		out.add(s.Product(s.Product(x, a), s.Inverse(x)))
	}
	return out
}

// conjugates lists the sets that the group carries a subgroup into.
func (s *Setting) conjugates(set opSet) []opSet {
	seen := map[string]bool{}
	var out []opSet
	for x := range s.Operations {
		c := s.conjugate(set, x)
		if k := c.key(); !seen[k] {
			seen[k] = true
			out = append(out, c)
		}
	}
	return out
}

// MaxSubgroupOrder bounds the order of a group all of whose subgroups are
// listed: the number of subgroups of Dnh grows with the divisors of n, and
// that of C2 × C2 × … inside it.
const MaxSubgroupOrder = 120

// Subgroups lists all subgroups of a finite group up to conjugacy, each by the
// rising indices of its operations, the largest first and the group itself in
// front; each conjugacy class is represented by the member whose operations
// come first. It grows them from the trivial one by one operation at a time.
func (s *Setting) Subgroups() ([][]int, error) {
	sets, err := s.subgroups()
	out := make([][]int, len(sets))
	for i, c := range sets {
		out[i] = c.members()
	}
	return out, err
}

func (s *Setting) subgroups() ([]opSet, error) {
	if s.Infinite() || s.Order() > MaxSubgroupOrder {
		return nil, message.Errorf("the subgroups of %s are not listed: only finite groups of at most %d operations are searched", s.Symbol, MaxSubgroupOrder)
	}
	known := map[string]bool{}
	trivial := s.generated()
	classes := []opSet{trivial}
	known[trivial.key()] = true
	for i := 0; i < len(classes); i++ {
		for a := range s.Operations {
			if classes[i].has(a) {
				continue
			}
			set := s.generated(append(classes[i].members(), a)...)
			if known[set.key()] {
				continue
			}
			first := set
			for _, c := range s.conjugates(set) {
				known[c.key()] = true
				if earlier(c, first) {
					first = c
				}
			}
			classes = append(classes, first)
		}
	}
	sort.SliceStable(classes, func(a, b int) bool {
		if m, n := classes[a].size(), classes[b].size(); m != n {
			return m > n
		}
		return earlier(classes[a], classes[b])
	})
	return classes, nil
}

// earlier tells whether the operations of a come before those of b, at the
// first difference.
func earlier(a, b opSet) bool {
	for w := range a {
		if a[w] != b[w] {
			return bits.TrailingZeros64(a[w]&^b[w]) < bits.TrailingZeros64(b[w]&^a[w])
		}
	}
	return false
}
