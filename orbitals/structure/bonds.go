package structure

import (
	"cmp"
	"math"
	"slices"
)

const (
	// BondFactor: two atoms count as bonded if they are nearer than BondFactor times the sum of their covalent
	// radii. Common practice is 1.25 to 1.3. The lower end is used because of iodine: in tetraiodomethane
	// (C–I 2.14 Å, from memory) two iodine atoms are 3.49 Å apart, which 1.3 would call a bond (3.61 Å) and
	// 1.25 does not (3.475 Å); and 1.25 still takes in the long bonds of a copper(II) octahedron (Cu–O up to
	// 2.475 Å).
	BondFactor = 1.25
	// maxNeighbours is the greatest number of bonds of an atom. The centre of a 60-atom cage may touch all of
	// it; more than a hundred is no chemistry but atoms heaped up, and would cost memory without end.
	maxNeighbours = 100
)

// Bonds lists the pairs of atoms that count as bonded, each with the lower index first, in rising order. The rule
// is d < BondFactor · (r₁ + r₂) with the radii of Element.Radius; see BondFactor. An atom with more than a
// hundred neighbours gets no bonds.
func Bonds(m *Molecule) [][2]int {
	longest := 0.0
	for _, a := range m.Atoms {
		longest = max(longest, 2*BondFactor*a.Element.Radius())
	}
	if longest == 0 {
		return nil
	}
	bonded := func(i, j int) bool {
		reach := BondFactor * (m.Atoms[i].Element.Radius() + m.Atoms[j].Element.Radius())
		return m.Atoms[i].Position.Sub(m.Atoms[j].Position).LenSqr() < reach*reach
	}
	all := make([]int, len(m.Atoms))
	for i := range all {
		all[i] = i
	}
	g := newGrid(m.Atoms, all, longest)
	sparse := slices.DeleteFunc(all, func(i int) bool { return g.crowded(m.Atoms[i], i, bonded) })
	var out [][2]int
	newGrid(m.Atoms, sparse, longest).pairs(func(i, j int) {
		if bonded(i, j) {
			out = append(out, [2]int{min(i, j), max(i, j)})
		}
	})
	slices.SortFunc(out, func(a, b [2]int) int {
		return cmp.Or(cmp.Compare(a[0], b[0]), cmp.Compare(a[1], b[1]))
	})
	return out
}

// onOneSpot finds two atoms nearer than limit (Å): the first atom that has such a neighbour before it, as second,
// and the first of those neighbours. It stops there, so that heaps of atoms cost nothing.
func onOneSpot(atoms []Atom, limit float64) (first, second int, ok bool) {
	cells := make(map[cell][]int, len(atoms))
	for j, a := range atoms {
		c := cellOf(a, limit)
		first = j
		for x := -1; x <= 1; x++ {
			for y := -1; y <= 1; y++ {
				for z := -1; z <= 1; z++ {
					for _, i := range cells[cell{c[0] + x, c[1] + y, c[2] + z}] {
						if atoms[i].Position.Sub(a.Position).LenSqr() < limit*limit {
							first = min(first, i)
						}
					}
				}
			}
		}
		if first < j {
			return first, j, true
		}
		cells[c] = append(cells[c], j)
	}
	return 0, 0, false
}

// A grid sorts atoms into cubes, so that near pairs are found without looking at all pairs.
type grid struct {
	cells map[cell][]int
	size  float64 // Å, the edge of a cube
	order []cell  // in the order in which the atoms filled them
}

type cell [3]int

// cellOf returns the cube with edges of the given size (Å) in which an atom lies.
func cellOf(a Atom, size float64) (c cell) {
	for k, x := range a.Position {
		c[k] = int(math.Floor(x / size))
	}
	return c
}

// newGrid sorts the chosen atoms into cubes with edges of the given size (Å).
func newGrid(atoms []Atom, chosen []int, size float64) *grid {
	g := &grid{cells: make(map[cell][]int), size: size}
	for _, i := range chosen {
		c := cellOf(atoms[i], size)
		if _, ok := g.cells[c]; !ok {
			g.order = append(g.order, c)
		}
		g.cells[c] = append(g.cells[c], i)
	}
	return g
}

// crowded tells whether atom i has more than maxNeighbours; it stops counting there.
func (g *grid) crowded(a Atom, i int, bonded func(i, j int) bool) bool {
	n := 0
	c := cellOf(a, g.size)
	for x := -1; x <= 1; x++ {
		for y := -1; y <= 1; y++ {
			for z := -1; z <= 1; z++ {
				for _, j := range g.cells[cell{c[0] + x, c[1] + y, c[2] + z}] {
					if i != j && bonded(i, j) {
						if n++; n > maxNeighbours {
							return true
						}
					}
				}
			}
		}
	}
	return false
}

// half are the neighbours of a cell on one side, so that no pair of cells is met twice.
var half = func() (out []cell) {
	for x := -1; x <= 1; x++ {
		for y := -1; y <= 1; y++ {
			for z := -1; z <= 1; z++ {
				if x > 0 || x == 0 && (y > 0 || y == 0 && z > 0) {
					out = append(out, cell{x, y, z})
				}
			}
		}
	}
	return out
}()

// pairs calls f once for every pair of atoms in the same or in neighbouring cells.
func (g *grid) pairs(f func(i, j int)) {
	for _, c := range g.order {
		own := g.cells[c]
		for n, i := range own {
			for _, j := range own[n+1:] {
				f(i, j)
			}
		}
		for _, d := range half {
			for _, j := range g.cells[cell{c[0] + d[0], c[1] + d[1], c[2] + d[2]}] {
				for _, i := range own {
					f(i, j)
				}
			}
		}
	}
}
