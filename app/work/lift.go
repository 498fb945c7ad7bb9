package work

import (
	"math"

	"lobewright/symmetry"
)

// A Lift is a representation of a subgroup as it may come about from the full
// group.
type Lift struct {
	// Descent is nil for a linear molecule.
	Descent *symmetry.Descent
	// Ways are the contents in the full group that go over into the given one;
	// none if there is none.
	Ways [][]symmetry.Content
	// Telling are the classes of the full group in which the characters of the
	// ways differ.
	Telling []string
	// More says that there are more ways than are listed, or that there were
	// too many to try.
	More bool

	irreps []symmetry.Irrep // of the full group
	tried  int
}

// mostWays bounds the list of a Lift; a set of levels that has so many is no
// single degenerate set.
const mostWays = 12

// mostTried bounds the search, which grows with the copies of every irrep.
const mostTried = 1_000_000

// LiftContent finds the contents in the full group that hold so many copies of
// the subgroup's irreps.
func LiftContent(d *symmetry.Descent, copies []int) *Lift {
	l := &Lift{Descent: d, irreps: d.Group.Irreps}
	l.lift(d.Subgroup, d.Correlation, copies)
	l.tell()
	return l
}

// LiftLinear is LiftContent for a linear group, with the irreps that the descent
// follows.
func LiftLinear(d *symmetry.LinearDescent, copies []int) *Lift {
	l := &Lift{irreps: d.Irreps}
	l.lift(d.Subgroup, d.Correlation, copies)
	return l
}

func (l *Lift) lift(subgroup *symmetry.Setting, correlation [][]symmetry.Content, copies []int) {
	place := map[string]int{}
	for i, ir := range subgroup.Irreps {
		place[ir.Label] = i
	}
	rows := make([][]int, len(correlation)) // what an irrep of the group takes
	for i, content := range correlation {
		rows[i] = make([]int, len(copies))
		for _, c := range content {
			rows[i][place[c.Irrep.Label]] = c.Copies
		}
	}
	l.search(rows, append([]int(nil), copies...), make([]int, len(rows)), 0)
}

// search tries the irreps of the full group one after the other, most copies
// first.
func (l *Lift) search(rows [][]int, left, taken []int, at int) {
	if l.tried++; l.tried > mostTried {
		l.More = true
	}
	if l.More {
		return
	}
	if at == len(rows) {
		for _, n := range left {
			if n != 0 {
				return
			}
		}
		if len(l.Ways) == mostWays {
			l.More = true
			return
		}
		var way []symmetry.Content
		for i, n := range taken {
			if n > 0 {
				way = append(way, symmetry.Content{Irrep: l.irreps[i], Copies: n})
			}
		}
		l.Ways = append(l.Ways, way)
		return
	}
	most := math.MaxInt
	for i, n := range rows[at] {
		if n > 0 {
			most = min(most, left[i]/n)
		}
	}
	for n := most; n >= 0; n-- {
		for i, m := range rows[at] {
			left[i] -= n * m
		}
		taken[at] = n
		l.search(rows, left, taken, at+1)
		taken[at] = 0
		for i, m := range rows[at] {
			left[i] += n * m
		}
	}
}

// tell lists the classes that would tell the ways apart.
func (l *Lift) tell() {
	if len(l.Ways) < 2 {
		return
	}
	for c, class := range l.Descent.Group.Classes {
		character := func(way []symmetry.Content) float64 {
			sum := 0.0
			for _, p := range way {
				sum += float64(p.Copies) * p.Irrep.Characters[c]
			}
			return sum
		}
		for _, way := range l.Ways[1:] {
			if math.Abs(character(way)-character(l.Ways[0])) > 1e-6 {
				l.Telling = append(l.Telling, class.Name)
				break
			}
		}
	}
}
