package work

import (
	"math"
	"strings"

	"lobewright/orbitals"
	"lobewright/symmetry"
)

// mostLambda is how far the irreps of a linear group are followed: Φ.
const mostLambda = 3

// LinearNames are the irreps of the linear group, where the structure is taken for
// a finite subgroup of it (Linear), that go over into an irrep of the subgroup, by
// index. Where all functions lie on the axis only those are taken that occur in
// its group orbitals: functions with |m| = Λ make up the irreps of Λ, with m = 0
// Σ+ and no Σ−, and what the inversion makes of them tells g from u.
func (o *Orbitals) LinearNames(irrep int) []string {
	d, err := symmetry.DescendLinear(o.Linear, o.Fit.Setting.Symbol, mostLambda)
	if err != nil {
		return nil
	}
	occurs, onAxis := o.linearParts(irrep)
	var out, all []string
	for k, content := range d.Correlation {
		for _, c := range content {
			if c.Irrep.Label != o.Irreps[irrep].Label {
				continue
			}
			label := d.Irreps[k].Label
			all = append(all, label)
			if occurs[partOf(label)] && !strings.HasSuffix(label, "-") {
				out = append(out, label)
			}
		}
	}
	if !onAxis || len(out) == 0 {
		return all
	}
	return out
}

// A linearPart is what functions on the axis have of one Λ and one parity: +1 for
// g, −1 for u, 0 without a centre.
type linearPart struct{ lambda, parity int }

func partOf(label string) linearPart {
	var p linearPart
	for lambda, letter := range []string{"Σ", "Π", "Δ", "Φ"} {
		if strings.HasPrefix(label, letter) {
			p.lambda = lambda
		}
	}
	switch {
	case strings.Contains(label, "g"):
		p.parity = 1
	case strings.Contains(label, "u"):
		p.parity = -1
	}
	return p
}

// linearParts tells which parts the group orbitals of an irrep have, and whether
// all functions of the basis lie on the axis.
func (o *Orbitals) linearParts(irrep int) (occurs map[linearPart]bool, onAxis bool) {
	const onSpot, some = 1e-4, 1e-6 // Å, of a coefficient
	at := o.Group.Sites.Positions
	for _, f := range o.Functions {
		if math.Hypot(at[f.Site][0], at[f.Site][1]) > onSpot {
			return nil, false
		}
	}
	opposite := func(site int) int {
		for k, p := range at {
			if p.Add(at[site]).Len() < onSpot {
				return k
			}
		}
		return -1
	}
	type place struct{ site, shell, index int }
	occurs = map[linearPart]bool{}
	for _, partner := range o.of(irrep) {
		for _, orbital := range partner {
			values := map[place]float64{}
			for i, c := range orbital.Coefficients {
				f := o.Functions[i]
				for k, v := range f.Vector {
					values[place{f.Site, f.Shell, k}] += c * v
				}
			}
			for p, v := range values {
				lambda := orbitals.Order(p.shell, p.index)
				lambda = max(lambda, -lambda)
				if o.Linear != "D∞h" {
					occurs[linearPart{lambda, 0}] = occurs[linearPart{lambda, 0}] || math.Abs(v) > some
					continue
				}
				// The inversion carries the function of an odd shell into minus
				// that on the other side.
				image := values[place{opposite(p.site), p.shell, p.index}]
				if p.shell%2 != 0 {
					image = -image
				}
				for _, parity := range []int{1, -1} {
					part := linearPart{lambda, parity}
					occurs[part] = occurs[part] || math.Abs(v+float64(parity)*image) > some
				}
			}
		}
	}
	return occurs, true
}
