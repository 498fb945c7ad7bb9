package orbitals

import (
	"maps"
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// Sites are the atoms of a structure as the operations of a group see them.
type Sites struct {
	Setting *symmetry.Setting
	// Positions holds every atom, in the working frame (Å); those of the
	// core stand at their ideal places.
	Positions []mgl64.Vec3
	Elements  []structure.Element
	// Links are the bonds; the rule for the centre of sigma and pi reads them.
	Links [][2]int
	// Core is false for a spectator. Nil means that all atoms are core.
	Core []bool
	// Permutations[r][k] is the atom to which operation r carries atom k, −1
	// for a spectator without image. It is empty for an infinite group.
	Permutations [][]int
}

// NewSites carries a structure, given in the axes of the input, to the working
// frame of a fit. core lists the atoms among which the group was found, in the
// order of fit.Ideal; they are moved to their ideal places. The others are
// spectators: they turn with the frame, and an operation has an image for one
// of them if it brings it within fit.Tolerance of another of the same element.
func NewSites(fit *symmetry.Fit, core []int, m *structure.Molecule, links [][2]int) (*Sites, error) {
	if len(core) != len(fit.Ideal) {
		return nil, message.Errorf("the group was found among %d atoms, but the core has %d", len(fit.Ideal), len(core))
	}
	n := len(m.Atoms)
	s := &Sites{
		Setting:   fit.Setting,
		Positions: make([]mgl64.Vec3, n),
		Elements:  make([]structure.Element, n),
		Links:     links,
		Core:      make([]bool, n),
	}
	for k, a := range m.Atoms {
		s.Elements[k] = a.Element
		s.Positions[k] = fit.Rotation.Mul3x1(a.Position.Sub(fit.Origin))
	}
	for i, k := range core {
		s.Core[k] = true
		s.Positions[k] = fit.Ideal[i]
	}
	spectators := newNeighbourhood(s)
	for r, images := range fit.Permutations {
		permutation := make([]int, n)
		for k := range permutation {
			permutation[k] = -1
		}
		for i, k := range core {
			permutation[k] = core[images[i]]
		}
		spectators.permute(permutation, fit.Setting.Operations[r].Matrix, fit.Tolerance)
		s.Permutations = append(s.Permutations, permutation)
	}
	return s, nil
}

// core tells whether atom k is of the core.
func (s *Sites) core(k int) bool { return s.Core == nil || s.Core[k] }

// hasImages tells whether every operation has an image for atom k and the
// images follow each other as the operations do. For core atoms that is
// certain; a spectator that is nearly in place may fail.
func (s *Sites) hasImages(k int) bool {
	if s.core(k) {
		return true
	}
	if s.Setting.Infinite() {
		return false
	}
	for _, p := range s.Permutations {
		if p[k] < 0 {
			return false
		}
	}
	for a, pa := range s.Permutations {
		for b, pb := range s.Permutations {
			if pa[pb[k]] != s.Permutations[s.Setting.Product(a, b)][k] {
				return false
			}
		}
	}
	return true
}

// Orbits returns the sets of atoms that the operations carry into each other,
// in the order of their lowest atoms. Spectators without images are in none.
func (s *Sites) Orbits() [][]int {
	var out [][]int
	done := make([]bool, len(s.Positions))
	for k := range s.Positions {
		if done[k] || !s.hasImages(k) {
			continue
		}
		orbit := s.orbitOf(k)
		for _, j := range orbit {
			done[j] = true
		}
		out = append(out, orbit)
	}
	return out
}

// orbitOf returns the images of atom k, rising. It must have images.
func (s *Sites) orbitOf(k int) []int {
	in := map[int]bool{k: true}
	for _, p := range s.Permutations {
		in[p[k]] = true
	}
	if s.Setting.Infinite() {
		in[s.opposite(k)] = true
	}
	return slices.Sorted(maps.Keys(in))
}

// onSpot (Å) is the distance within which an ideal position counts as another
// one. Ideal positions agree with each other to rounding, and atoms are far
// apart beside it.
const onSpot = 1e-4

// opposite returns the atom to which the inversion of D∞h or Kh carries atom
// k of the core, and k itself in C∞v.
func (s *Sites) opposite(k int) int {
	if s.Setting.Symbol == "C∞v" {
		return k
	}
	for j, p := range s.Positions {
		if s.core(j) && s.Elements[j] == s.Elements[k] && p.Add(s.Positions[k]).Len() < onSpot {
			return j
		}
	}
	return k
}

// A neighbourhood finds spectators by place: cells of a cubic grid, each with
// the spectators in it.
type neighbourhood struct {
	sites *Sites
	cells map[[3]int][]int
}

// cellSize (Å) is small enough that a cell holds an atom or two, and large
// beside a tolerance, so that few cells are looked at.
const cellSize = 1.0

func newNeighbourhood(s *Sites) *neighbourhood {
	n := &neighbourhood{sites: s, cells: make(map[[3]int][]int)}
	for k, p := range s.Positions {
		if !s.core(k) {
			c := cellOf(p)
			n.cells[c] = append(n.cells[c], k)
		}
	}
	return n
}

func cellOf(p mgl64.Vec3) [3]int {
	return [3]int{
		int(math.Floor(p[0] / cellSize)),
		int(math.Floor(p[1] / cellSize)),
		int(math.Floor(p[2] / cellSize)),
	}
}

// nearest returns the spectator of an element that is nearest to p and not
// farther than tolerance, or −1.
func (n *neighbourhood) nearest(p mgl64.Vec3, element structure.Element, tolerance float64) int {
	reach := mgl64.Vec3{tolerance, tolerance, tolerance}
	low, high := cellOf(p.Sub(reach)), cellOf(p.Add(reach))
	best, distance := -1, tolerance
	for x := low[0]; x <= high[0]; x++ {
		for y := low[1]; y <= high[1]; y++ {
			for z := low[2]; z <= high[2]; z++ {
				for _, k := range n.cells[[3]int{x, y, z}] {
					d := n.sites.Positions[k].Sub(p).Len()
					if n.sites.Elements[k] == element && d <= distance {
						best, distance = k, d
					}
				}
			}
		}
	}
	return best
}

// permute enters the images of the spectators under an operation; two with
// the same image have none.
func (n *neighbourhood) permute(permutation []int, operation mgl64.Mat3, tolerance float64) {
	if len(n.cells) == 0 {
		return
	}
	from := make(map[int]int)
	for k, p := range n.sites.Positions {
		if n.sites.core(k) {
			continue
		}
		j := n.nearest(operation.Mul3x1(p), n.sites.Elements[k], tolerance)
		if j < 0 {
			continue
		}
		if other, taken := from[j]; taken {
			permutation[other] = -1
			continue
		}
		from[j] = k
		permutation[k] = j
	}
}
