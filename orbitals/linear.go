package orbitals

import (
	"cmp"
	"math"
	"slices"

	"lobewright/symmetry"
)

// Project makes the group orbitals of the basis.
//
// In a finite group they are those that Project makes of its Representation. In
// C∞v, D∞h and Kh, where no sum over operations can be written down, they
// follow from the angular momentum of each function: about the axis, z, the
// functions cos Λφ and sin Λφ are partners 1 and 2 of Σ+, Π, Δ, Φ (Σ has one
// partner); in D∞h the functions of two atoms that the inversion exchanges
// join to g and u. For a single atom each shell is an irrep, with the functions
// of FunctionNames as partners.
func (b *Basis) Project() (*Projection, error) {
	if !b.Sites.Setting.Infinite() {
		r, err := b.Representation()
		if err != nil {
			return nil, err
		}
		return Project(r)
	}
	return b.projectInfinite()
}

// An angular is a copy in an infinite group before it is numbered.
type angular struct {
	irrep    symmetry.Irrep
	partners [][]float64
	orbit    int
}

func (b *Basis) projectInfinite() (*Projection, error) {
	byOrbit := make([][]int, 0)
	for i, f := range b.Functions {
		if f.Orbit == len(byOrbit) {
			byOrbit = append(byOrbit, nil)
		}
		byOrbit[f.Orbit] = append(byOrbit[f.Orbit], i)
	}
	var found []angular
	for _, members := range byOrbit {
		copies, err := b.angularCopies(members)
		if err != nil {
			return nil, err
		}
		found = append(found, copies...)
	}
	slices.SortStableFunc(found, func(x, y angular) int {
		return cmp.Or(
			cmp.Compare(parityRank(x.irrep, b.Sites.Setting.Symbol), parityRank(y.irrep, b.Sites.Setting.Symbol)),
			cmp.Compare(x.irrep.Lambda, y.irrep.Lambda),
		)
	})
	p := &Projection{}
	for _, c := range found {
		a := len(p.Irreps) - 1
		if a < 0 || p.Irreps[a].Label != c.irrep.Label {
			p.Irreps = append(p.Irreps, c.irrep)
			p.Content = append(p.Content, 0)
			a++
		}
		for k, coefficients := range c.partners {
			p.Orbitals = append(p.Orbitals, GroupOrbital{
				Irrep: a, Copy: p.Content[a], Partner: k, Orbit: c.orbit, Coefficients: coefficients,
			})
		}
		p.Content[a]++
	}
	return p, nil
}

// parityRank puts g before u in D∞h; in Kh the shell alone counts.
func parityRank(irrep symmetry.Irrep, symbol string) int {
	if symbol == "D∞h" && irrep.Gerade < 0 {
		return 1
	}
	return 0
}

// angularCopies makes the copies of one orbit of functions: one, or the g and
// the u one of two atoms.
func (b *Basis) angularCopies(members []int) ([]angular, error) {
	first := b.Functions[members[0]]
	setting := b.Sites.Setting
	l, m := first.Shell, 0
	if setting.Symbol != "Kh" {
		m = b.angularMomentum(members[0])
	}
	// The inversion carries a function of shell l to (−1)^l times the same
	// function on the opposite atom.
	own := 1 - 2*(l%2)
	parities := []int{0}
	paired := false
	if setting.Symbol != "C∞v" {
		parities = []int{own}
		if paired = b.Sites.opposite(first.Site) != first.Site; paired {
			parities = []int{1, -1}
		}
	}
	var out []angular
	for _, parity := range parities {
		momentum, mirror := m, 0
		switch {
		case setting.Symbol == "Kh":
			momentum = l
		case m == 0:
			mirror = 1 // cos 0φ is even under every plane through the axis
		}
		irrep, err := symmetry.InfiniteIrrep(setting.Symbol, momentum, parity, mirror)
		if err != nil {
			return nil, err
		}
		c := angular{irrep: irrep, orbit: first.Orbit}
		for k := range irrep.Dimension {
			partner := make([]float64, len(b.Functions))
			for _, i := range members {
				f := b.Functions[i]
				index := partnerIndex(l, m, k)
				if setting.Symbol == "Kh" {
					index = k
				}
				coefficient := f.Vector[index]
				if paired {
					coefficient *= math.Sqrt2 / 2
					if f.Site != first.Site {
						coefficient *= float64(parity * own)
					}
				}
				partner[i] = coefficient
			}
			clean(partner)
			c.partners = append(c.partners, partner)
		}
		fixSign(c.partners)
		out = append(out, c)
	}
	return out, nil
}

// angularMomentum returns |m| of a function that has one; all functions of a
// basis in C∞v and D∞h have, since their directions are z, or x and y.
func (b *Basis) angularMomentum(i int) int {
	f := b.Functions[i]
	for k, v := range f.Vector {
		if math.Abs(v) > same {
			return max(orders[f.Shell][k], -orders[f.Shell][k])
		}
	}
	return 0
}

// partnerIndex is the index in shell l of the function cos mφ (k = 0) or sin
// mφ (k = 1).
func partnerIndex(l, m, k int) int {
	if k == 1 {
		m = -m
	}
	return slices.Index(orders[l], m)
}
