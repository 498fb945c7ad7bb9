package work

import (
	"fmt"
	"slices"
	"strings"

	"lobewright/symmetry"
)

// Descents lists the ways in which subgroups of a symbol lie in a finite group,
// one a conjugacy class, those whose frame turns least first. With kept
// operations, by index, only subgroups that hold all of them are taken.
func Descents(s *symmetry.Setting, to string, keep []int) ([]*symmetry.Descent, error) {
	all, err := s.Descents(to)
	if err != nil || len(keep) == 0 {
		return all, err
	}
	var out []*symmetry.Descent
	for _, d := range all {
		best, err := holding(s, d, keep)
		if err != nil {
			return nil, err
		}
		if best != nil {
			out = append(out, best)
		}
	}
	if out == nil {
		return nil, fmt.Errorf("no subgroup %s of %s holds %s", all[0].Subgroup.Symbol, s.Symbol, operationList(s, keep))
	}
	return out, nil
}

// holding is, of the subgroups that the group carries one into, the one that
// holds the kept operations and whose frame turns least; nil if none holds
// them.
func holding(s *symmetry.Setting, d *symmetry.Descent, keep []int) (*symmetry.Descent, error) {
	holds := func(set []int) bool {
		return !slices.ContainsFunc(keep, func(k int) bool { return !slices.Contains(set, k) })
	}
	if holds(d.Operations) {
		return d, nil
	}
	var best *symmetry.Descent
	seen := map[string]bool{}
	for x := range s.Operations {
		var set []int
		for _, a := range d.Operations {
			set = append(set, s.Product(s.Product(x, a), s.Inverse(x)))
		}
		slices.Sort(set)
		key := fmt.Sprint(set)
		if seen[key] || !holds(set) {
			continue
		}
		seen[key] = true
		other, err := s.Descend(set)
		if err != nil {
			return nil, err
		}
		if best == nil || other.Rotation.Trace() > best.Rotation.Trace()+1e-9 {
			best = other
		}
	}
	return best, nil
}

// Generated is the smallest subgroup that holds some operations, by rising
// index.
func Generated(s *symmetry.Setting, generators []int) []int {
	set := []int{0}
	for i := 0; i < len(set); i++ {
		for _, g := range generators {
			if p := s.Product(g, set[i]); !slices.Contains(set, p) {
				set = append(set, p)
			}
		}
	}
	slices.Sort(set)
	return set
}

// Leaving lists the operations that leave all of some atoms in place: the site
// symmetry of one atom.
func (g *Group) Leaving(atoms []int) []int {
	var out []int
	for r, p := range g.Sites.Permutations {
		if !slices.ContainsFunc(atoms, func(a int) bool { return p[a] != a }) {
			out = append(out, r)
		}
	}
	return out
}

func operationList(s *symmetry.Setting, operations []int) string {
	names := make([]string, len(operations))
	for i, o := range operations {
		names[i] = s.Operations[o].Name
	}
	return strings.Join(names, ", ")
}
