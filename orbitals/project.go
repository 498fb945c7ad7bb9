package orbitals

import (
	"cmp"
	"math"
	"slices"

	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// A GroupOrbital is a normalized combination of the functions of a basis that
// transforms as one partner of an irrep.
type GroupOrbital struct {
	Irrep         int // index in Projection.Irreps
	Copy, Partner int
	Orbit         int       // the orbit of functions on which the copy lives, −1 where copies are mixed
	Coefficients  []float64 // one a function
}

// A Projection holds the group orbitals of a basis: as many as functions,
// orthonormal, by irrep, copy and partner.
type Projection struct {
	// Irreps are those of the Setting, or, for an infinite group, those that
	// occur.
	Irreps []symmetry.Irrep
	// Characters of the basis, one a class; none for an infinite group.
	Characters []float64
	Content    []int // copies, one an irrep
	Orbitals   []GroupOrbital
}

// Project makes the group orbitals of a representation with the operators
//
//	P^α_kl = (d/h) Σ_R D^α(R)_kl R
//
// of E. P. Wigner (Gruppentheorie, 1931) and J. H. Van Vleck (J. Chem. Phys. 3,
// 803, 1935; both from memory). If a function v equals P_11 v, then v and the
// P_k1 v are the partners of one copy and go into each other with exactly the
// matrices of the irrep, since P_ij P_kl = δ_jk P_il.
//
// Each orbit of functions is projected by itself, so that no copy mixes orbits
// or kinds of functions. Where an orbit holds an irrep several times, the
// copies are told apart by these rules, which depend on the operations that
// leave the first site, not on distances or angles, so that they do not jump
// when the structure is deformed within its group:
//
//  1. The functions of the first site are resolved into species of the group
//     of these operations; each copy is made of one species.
//  2. Within a species the seeds P_1l f, f function by function and for each
//     l = 1 … d, are made orthonormal in this order (E. Schmidt's procedure).
//
// Copies stand in the order of the first function that they hold. The largest
// coefficient of partner 1 is positive; among equals, the first.
//
// A pair of complex conjugates needs more care, because over real functions
// everything that acts as a turn in the plane of the partners commutes with
// it: P_11 then is the projector on all partners of all copies and P_21 a
// quarter turn J, with J² = −1. A seed P_11 f is partner 1, and J of it
// partner 2; orthogonality is asked for over the complex numbers.
func Project(r *Representation) (*Projection, error) {
	p := &Projection{Irreps: r.setting.Irreps, Characters: r.Characters()}
	var err error
	if p.Content, err = content(r.setting, p.Characters); err != nil {
		return nil, err
	}
	blocks := r.blocks()
	for a, copies := range p.Content {
		var found []orbitalCopy
		for _, b := range blocks {
			if copies > 0 {
				found = append(found, b.project(a)...)
			}
		}
		if len(found) != copies {
			return nil, message.Errorf("the projection found %d copies of %s where the characters say %d", len(found), p.Irreps[a].Label, copies)
		}
		for c, f := range found {
			for k, coefficients := range f.partners {
				p.Orbitals = append(p.Orbitals, GroupOrbital{
					Irrep: a, Copy: c, Partner: k, Orbit: f.block.orbit,
					Coefficients: f.block.spread(coefficients, r.Size()),
				})
			}
		}
	}
	return p, nil
}

// A block is the part of a representation in one orbit of functions.
type block struct {
	setting *symmetry.Setting
	orbit   int
	members []int // functions, rising
	first   []int // places in members of the functions on the first site
	// images[f][r] holds the image of function first[f] under operation r,
	// with places in members for functions.
	images [][][]Term
	local  siteGroup
}

// An orbitalCopy holds the partners of a copy, with one coefficient a member
// of its block.
type orbitalCopy struct {
	block    *block
	partners [][]float64
}

// blocks splits the representation into its orbits.
func (r *Representation) blocks() []*block {
	var out []*block
	place := make([]int, r.Size())
	for i, n := range r.orbits {
		if n == len(out) {
			out = append(out, &block{setting: r.setting, orbit: n})
		}
		b := out[n]
		place[i] = len(b.members)
		if len(b.members) == 0 || r.sites[i] == r.sites[b.members[0]] {
			b.first = append(b.first, len(b.members))
		}
		b.members = append(b.members, i)
	}
	for _, b := range out {
		b.images = make([][][]Term, len(b.first))
		for f, at := range b.first {
			b.images[f] = make([][]Term, r.setting.Order())
			for op := range b.images[f] {
				image := r.Image(op, b.members[at])
				terms := make([]Term, len(image))
				for i, t := range image {
					terms[i] = Term{place[t.Function], t.Coefficient}
				}
				b.images[f][op] = terms
			}
		}
		b.local = newSiteGroup(b)
	}
	return out
}

// spread writes coefficients of the members among those of all n functions.
func (b *block) spread(coefficients []float64, n int) []float64 {
	out := make([]float64, n)
	for i, c := range coefficients {
		out[b.members[i]] = c
	}
	return out
}

// project returns the copies of an irrep in the block.
func (b *block) project(a int) []orbitalCopy {
	irrep := &b.setting.Irreps[a]
	seeds := b.local.seeds(irrep)
	if len(seeds) == 0 {
		return nil
	}
	projected := b.operators(irrep)
	d, rows := irrep.Dimension, seedRows(irrep)
	// A seed P_1l f has the squared length |H|/h·d times that of its vector.
	scale := math.Sqrt(float64(b.setting.Order()) / float64(d*len(b.local.operations)))
	var out []orbitalCopy
	for _, s := range seeds {
		c := orbitalCopy{block: b}
		for k := range d {
			partner := make([]float64, len(b.members))
			for i, t := range s {
				f, l := i/rows, i%rows
				add(partner, scale*real(t), projected[(f*d+k)*d+l])
				if im := scale * imag(t); im != 0 {
					// The quarter turn: J P_11 = P_21, J P_21 = −P_11.
					add(partner, im*float64(1-2*k), projected[(f*d+1-k)*d])
				}
			}
			clean(partner)
			c.partners = append(c.partners, partner)
		}
		fixSign(c.partners)
		out = append(out, c)
	}
	slices.SortStableFunc(out, func(c, d orbitalCopy) int { return cmp.Compare(c.firstHeld(), d.firstHeld()) })
	return out
}

// operators returns P_kl f for every function f of the first site at
// (f·d + k)·d + l.
func (b *block) operators(irrep *symmetry.Irrep) [][]float64 {
	d := irrep.Dimension
	factor := float64(d) / float64(b.setting.Order())
	out := make([][]float64, len(b.first)*d*d)
	all := make([]float64, len(out)*len(b.members))
	for i := range out {
		out[i] = all[i*len(b.members) : (i+1)*len(b.members)]
	}
	for f, images := range b.images {
		for op, image := range images {
			matrix := irrep.Matrices[op].RawMatrix()
			for k := range d {
				row := matrix.Data[k*matrix.Stride : k*matrix.Stride+d]
				for l, element := range row {
					if element == 0 {
						continue
					}
					sum := out[(f*d+k)*d+l]
					for _, t := range image {
						sum[t.Function] += factor * element * t.Coefficient
					}
				}
			}
		}
	}
	return out
}

func add(sum []float64, factor float64, v []float64) {
	if factor == 0 {
		return
	}
	for i, x := range v {
		sum[i] += factor * x
	}
}

// equal bounds the difference of coefficients that symmetry makes equal.
const equal = 1e-9

// fixSign makes the largest coefficient of partner 1 positive, and among
// equals the first.
func fixSign(partners [][]float64) {
	largest := 0.0
	for _, x := range partners[0] {
		if math.Abs(x) > math.Abs(largest)+equal {
			largest = x
		}
	}
	if largest > 0 {
		return
	}
	for _, partner := range partners {
		for i, x := range partner {
			if x != 0 {
				partner[i] = -x
			}
		}
	}
}

// firstHeld is the first function that has a coefficient in some partner.
func (c *orbitalCopy) firstHeld() int {
	for i := range c.block.members {
		for _, partner := range c.partners {
			if math.Abs(partner[i]) > equal {
				return i
			}
		}
	}
	return len(c.block.members)
}
