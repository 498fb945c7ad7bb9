package work

import (
	"fmt"
	"slices"
	"strings"

	"lobewright/symmetry"
	"lobewright/symmetry/message"
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
		return nil, message.Errorf("no subgroup %s of %s holds %s", all[0].Subgroup.Symbol, s.Symbol, operationList(s, keep))
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

// Conjugate is, of the subgroups that the group carries into that of a descent, the
// one that holds some operations, "C4(x), σh(xy)" as Study.Kept has them; the
// descent itself if there are none. The error says which operations there are, or
// that no such subgroup holds them.
func (g *Group) Conjugate(d *symmetry.Descent, kept string) (*symmetry.Descent, error) {
	var keep []int
	for _, name := range strings.FieldsFunc(kept, func(r rune) bool { return r == ',' }) {
		o, err := g.Operation(strings.TrimSpace(name), 0)
		if err != nil {
			return nil, err
		}
		keep = append(keep, o.Index)
	}
	if len(keep) == 0 {
		return d, nil
	}
	s := g.Fit.Setting
	found, err := holding(s, d, keep)
	if err == nil && found == nil {
		err = message.Errorf("no subgroup %s of %s holds %s", d.Subgroup.Symbol, s.Symbol, operationList(s, keep))
	}
	return found, err
}

// Kept names operations that generate the subgroup of a descent, as Study.Kept has
// them.
func Kept(d *symmetry.Descent) string {
	var generators []int
	for _, o := range d.Operations {
		if !slices.Contains(Generated(d.Group, generators), o) {
			generators = append(generators, o)
		}
	}
	return operationList(d.Group, generators)
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

// An Embedded is one way in which a subgroup lies in a group.
type Embedded struct {
	*symmetry.Descent
	// Embedding counts, from 1, the ways in which subgroups of this symbol lie
	// in the group, as Descents lists them; Of is how many there are.
	Embedding, Of int
}

// Name is what Study.Subgroup takes: "C4v", or "C4v:2".
func (e Embedded) Name() string {
	if e.Embedding == 1 {
		return e.Subgroup.Symbol
	}
	return fmt.Sprintf("%s:%d", e.Subgroup.Symbol, e.Embedding)
}

// Subgroups lists the subgroups of a finite group, one a conjugacy class and
// without the group itself, by falling order. It takes up to a third of a second for the largest groups.
func Subgroups(s *symmetry.Setting) ([]Embedded, error) {
	classes, err := s.Subgroups()
	if err != nil {
		return nil, err
	}
	var symbols []string
	order := map[string]int{}
	for _, set := range classes {
		d, err := s.Descend(set)
		if err != nil {
			return nil, err
		}
		if symbol := d.Subgroup.Symbol; order[symbol] == 0 && len(set) < s.Order() {
			order[symbol] = len(set)
			symbols = append(symbols, symbol)
		}
	}
	slices.SortStableFunc(symbols, func(a, b string) int { return order[b] - order[a] })
	var out []Embedded
	for _, symbol := range symbols {
		list, err := s.Descents(symbol)
		if err != nil {
			return nil, err
		}
		for i, d := range list {
			out = append(out, Embedded{d, i + 1, len(list)})
		}
	}
	return out, nil
}

// Holding narrows a list of subgroups to those that hold some operations, each
// in the conjugate that does.
func Holding(s *symmetry.Setting, list []Embedded, keep []int) ([]Embedded, error) {
	if len(keep) == 0 {
		return list, nil
	}
	var out []Embedded
	for _, e := range list {
		d, err := holding(s, e.Descent, keep)
		if err != nil {
			return nil, err
		}
		if d != nil {
			out = append(out, Embedded{d, e.Embedding, e.Of})
		}
	}
	return out, nil
}

// FindSubgroup returns the group of a ladder that is a subgroup of g, or one that
// g's operations carry it into, which is no other to the eye: its operations
// carry the core atoms by the same permutations, and are improper where these
// are. It is nil if there is none.
func (l *Ladder) FindSubgroup(g *Group, d *symmetry.Descent) *symmetry.Nearness {
	setting := g.Fit.Setting
	for x := range setting.Operations {
		var operations []int
		for _, o := range d.Operations {
			operations = append(operations, setting.Product(setting.Product(x, o), setting.Inverse(x)))
		}
		for _, n := range l.Groups {
			if n.Fit.Setting.Symbol == d.Subgroup.Symbol && n.Fit.Setting.Order() == len(operations) && carriesAlike(n.Fit, g.Fit, operations) {
				return n
			}
		}
	}
	return nil
}

// carriesAlike tells whether each of some operations of one fit carries the
// points as an operation of another does.
func carriesAlike(n, fit *symmetry.Fit, operations []int) bool {
	for _, o := range operations {
		found := false
		for r, q := range n.Permutations {
			found = found || n.Setting.Operations[r].Turn.Improper == fit.Setting.Operations[o].Turn.Improper && slices.Equal(fit.Permutations[o], q)
		}
		if !found {
			return false
		}
	}
	return true
}
