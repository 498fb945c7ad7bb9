package symmetry

import (
	"fmt"
	"math"
	"sort"
	"strings"
)

// printedClasses is the order of the classes in the usual printed tables of
// the cubic and icosahedral groups, which no simple rule gives. The names are
// those of classDescriptor. (F. A. Cotton, Chemical Applications of Group
// Theory, appendix; from memory.)
var printedClasses = map[family][]string{
	tetrahedralProper: {"E", "C3", "C3^2", "C2"},
	tetrahedral:       {"E", "C3", "C2", "S4", "σd"},
	pyritohedral:      {"E", "C3", "C3^2", "C2", "i", "S6", "S6^5", "σh"},
	octahedralProper:  {"E", "C4", "C4^2", "C3", "C2"},
	octahedral:        {"E", "C3", "C2", "C4", "C4^2", "i", "S4", "S6", "σh", "σd"},
	icosahedralProper: {"E", "C5", "C5^2", "C3", "C2"},
	icosahedral:       {"E", "C5", "C5^2", "C3", "C2", "i", "S10", "S10^3", "S6", "σ"},
}

// classDescriptor tells a class by its member of the lowest power; the
// squares of the C4 of O and Oh are told from their other C2.
func (k kind) classDescriptor(members []Operation) string {
	least := members[0]
	for _, o := range members {
		if _, _, p := o.Turn.power(); p < powerOf(least) {
			least = o
		}
	}
	name := untagged(least.Name)
	if name == "C2" && (k.family == octahedral || k.family == octahedralProper) && axisLetter(least.Axis) != 0 {
		return "C4^2"
	}
	return name
}

func powerOf(o Operation) int {
	_, _, p := o.Turn.power()
	return p
}

// A rank sorts operations as the printed tables sort their classes: E, the
// turns about z by angle, C2′, C2″, σv, σd, and after i or σh the same list
// again, each multiplied by it.
type rank struct {
	block, group int
	fraction     float64
	azimuth      float64
}

func (r rank) less(q rank) bool {
	switch {
	case r.block != q.block:
		return r.block < q.block
	case r.group != q.group:
		return r.group < q.group
	case math.Abs(r.fraction-q.fraction) > 1e-9:
		return r.fraction < q.fraction
	}
	return r.azimuth < q.azimuth-directionStep
}

// arrange returns the operations in printed order (the old index of each new
// one) and, for each old index, the number of its class.
func arrange(k kind, ops []Operation, table [][]int32) (order, classOf []int) {
	classes := conjugacyClasses(table)
	ranks := k.ranks(ops, table)
	for _, c := range classes {
		sort.SliceStable(c, func(a, b int) bool { return k.before(ops[c[a]], ops[c[b]]) })
	}
	printed := map[int]int{}
	if list := printedClasses[k.family]; list != nil {
		for _, c := range classes {
			d := k.classDescriptor(pick(ops, c))
			for i, name := range list {
				if name == d {
					printed[c[0]] = i
				}
			}
		}
	}
	sort.SliceStable(classes, func(a, b int) bool {
		p, q := printed[classes[a][0]], printed[classes[b][0]]
		if p != q {
			return p < q
		}
		return first(ranks, classes[a]).less(first(ranks, classes[b]))
	})
	classOf = make([]int, len(ops))
	for i, c := range classes {
		order = append(order, c...)
		for _, o := range c {
			classOf[o] = i
		}
	}
	return order, classOf
}

// before sorts the members of a class: by power, then by direction.
func (k kind) before(p, q Operation) bool {
	if powerOf(p) != powerOf(q) {
		return powerOf(p) < powerOf(q)
	}
	return k.direction(p).less(k.direction(q))
}

// first is the lowest rank in a class.
func first(ranks []rank, members []int) rank {
	low := ranks[members[0]]
	for _, m := range members[1:] {
		if ranks[m].less(low) {
			low = ranks[m]
		}
	}
	return low
}

func pick(ops []Operation, which []int) []Operation {
	out := make([]Operation, len(which))
	for i, w := range which {
		out[i] = ops[w]
	}
	return out
}

// conjugacyClasses collects the sets x⁻¹·a·x, E's first.
func conjugacyClasses(table [][]int32) [][]int {
	inv := inverses(table)
	done := make([]bool, len(table))
	var classes [][]int
	for a := range table {
		if done[a] {
			continue
		}
		var c []int
		for x := range table {
			b := int(table[inv[x]][table[a][x]])
			if !done[b] {
				done[b] = true
				c = append(c, b)
			}
		}
		sort.Ints(c)
		classes = append(classes, c)
	}
	return classes
}

// ranks gives each operation its place in the printed order.
func (k kind) ranks(ops []Operation, table [][]int32) []rank {
	divider := k.divider(ops)
	out := make([]rank, len(ops))
	for i, o := range ops {
		if o.Turn.Improper && divider >= 0 {
			out[i] = k.rank(ops[table[divider][i]])
			out[i].block = 1
		} else {
			out[i] = k.rank(o)
		}
	}
	return out
}

// divider is the index of i, else of σh, whichever splits the printed list
// into two like halves; −1 if neither does.
func (k kind) divider(ops []Operation) int {
	for i, o := range ops {
		if o.Turn == (Turn{1, 2, true}) {
			return i
		}
	}
	for i, o := range ops {
		if k.axial() && o.Name == "σh" {
			return i
		}
	}
	return -1
}

func (k kind) rank(o Operation) rank {
	r := rank{fraction: float64(o.Turn.Num) / float64(o.Turn.Den), azimuth: k.direction(o).azimuth}
	switch prefix := untagged(o.Name); {
	case o.Name == "E":
	case !k.axial() || axisLetter(o.Axis) == 'z' && prefix != "σ":
		r.group = 1
	case prefix == "C2" && k.n == 2:
		r.group, r.azimuth = 2, -r.azimuth // C2(y) before C2(x)
	case prefix == "C2" || prefix == "C2'":
		r.group = 2
	case prefix == "C2''":
		r.group = 3
	case prefix == "σv":
		r.group = 4
	default:
		r.group = 5
	}
	return r
}

// nameClasses counts and names the classes of operations in printed order.
// Classes of one member that only their bracket tells apart keep it.
func nameClasses(k kind, ops []Operation) []Class {
	var classes []Class
	for i, o := range ops {
		if o.Class == len(classes) {
			classes = append(classes, Class{})
		}
		classes[o.Class].Members = append(classes[o.Class].Members, i)
	}
	alike := map[string]int{}
	for i := range classes {
		c := &classes[i]
		c.Name = k.classDescriptor(pick(ops, c.Members))
		if len(c.Members) == 1 {
			alike[strings.TrimRight(c.Name, "'")]++
		}
	}
	for i := range classes {
		c := &classes[i]
		n := len(c.Members)
		switch {
		case c.Name == "C4^2" && !k.axial():
			c.Name = "C2(=C4^2)"
		case n == 1 && alike[strings.TrimRight(c.Name, "'")] > 1:
			c.Name = ops[c.Members[0]].Name
		}
		if n > 1 {
			c.Name = fmt.Sprintf("%d%s", n, c.Name)
		}
	}
	return classes
}
