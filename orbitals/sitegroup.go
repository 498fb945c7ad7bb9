package orbitals

import (
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry"
)

// A siteGroup is the group H of the operations that leave the first site of a
// block, with what they make of the functions there.
type siteGroup struct {
	operations []int        // indices in the setting, rising
	matrices   []*mat.Dense // one an operation, among the functions of the site
	// species are projectors on the parts of the functions that are of one
	// species of H each (or two complex conjugate ones), the totally
	// symmetric one first.
	species []*mat.SymDense
}

func newSiteGroup(b *block) siteGroup {
	var g siteGroup
	m := len(b.first)
	at := make(map[int]int, m) // place of a member among the functions of the site
	for f, member := range b.first {
		at[member] = f
	}
	for op := range b.setting.Operations {
		if _, stays := at[b.images[0][op][0].Function]; !stays {
			continue
		}
		matrix := mat.NewDense(m, m, nil)
		for f := range b.first {
			for _, t := range b.images[f][op] {
				matrix.Set(at[t.Function], f, t.Coefficient)
			}
		}
		g.operations = append(g.operations, op)
		g.matrices = append(g.matrices, matrix)
	}
	g.species = g.findSpecies(b.setting, m)
	return g
}

// findSpecies returns the projectors on the species among m functions. They
// are the eigenspaces of a weighted sum of all class sums of H: a class sum
// commutes with the whole group, so it is a number within a species (I. Schur).
// Irrational weights keep the numbers of different species apart.
func (g *siteGroup) findSpecies(setting *symmetry.Setting, m int) []*mat.SymDense {
	if m == 1 || len(g.operations) == 1 {
		all := mat.NewSymDense(m, nil)
		for i := range m {
			all.SetSym(i, i, 1)
		}
		return []*mat.SymDense{all}
	}
	sum := mat.NewSymDense(m, nil)
	for i, w := range g.classWeights(setting) {
		for f := range m {
			for e := range f + 1 {
				// Inverses have equal weights, so the sum is symmetric.
				part := (g.matrices[i].At(f, e) + g.matrices[i].At(e, f)) / 2
				sum.SetSym(f, e, sum.At(f, e)+w*part)
			}
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(sum, true) {
		panic("orbitals: a symmetric matrix has no eigenvectors")
	}
	values := eigen.Values(nil)
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	var out []*mat.SymDense
	for i := m - 1; i >= 0; i-- {
		if i == m-1 || values[i+1]-values[i] > 1e-6*float64(len(g.operations)) {
			out = append(out, mat.NewSymDense(m, nil))
		}
		out[len(out)-1].SymRankOne(out[len(out)-1], 1, vectors.ColView(i))
	}
	return out
}

// classWeights returns for each operation of H a weight that operations
// conjugate to it or to its inverse share. All are positive, so that the sum
// is largest for the totally symmetric species.
func (g *siteGroup) classWeights(setting *symmetry.Setting) []float64 {
	const golden = 0.6180339887498949
	number := make(map[int]int) // by the lowest operation of the class
	out := make([]float64, len(g.operations))
	for i, op := range g.operations {
		lowest := op
		for _, s := range g.operations {
			conjugate := setting.Product(setting.Product(s, op), setting.Inverse(s))
			lowest = min(lowest, conjugate, setting.Inverse(conjugate))
		}
		n, ok := number[lowest]
		if !ok {
			n = len(number) + 1
			number[lowest] = n
		}
		out[i] = 1 + float64(n)*golden - math.Floor(float64(n)*golden)
	}
	return out
}

// seedRows is how many seeds P_1l f, l = 1 …, a function f gives: one a
// partner, or only the first for a pair of complex conjugates.
func seedRows(irrep *symmetry.Irrep) int {
	if irrep.ComplexPair {
		return 1
	}
	return irrep.Dimension
}

// independent bounds the squared length of what is left of a seed that depends
// on those before it. It is far above rounding; what is left of an independent
// one has the size of sines and cosines of the angles between the operations.
const independent = 1e-6

// seeds returns for each copy of an irrep the orthonormal combination of the
// seeds P_1l f, at index f·rows + l, species by species.
//
// The scalar products of seeds are known beforehand:
//
//	⟨P_1l f, P_1l′ f′⟩ = (d/h) Σ_{R in H} D(R)_ll′ ⟨f, R f′⟩,
//
// which is d|H|/h times a projector, that on the invariants of H among the
// products of partners and functions. So orthonormal vectors in the range of
// the projector give orthonormal partners. For a pair of complex conjugates
// the projector is Hermitian, with D_11 − i D_21 in the place of D_ll′.
func (g *siteGroup) seeds(irrep *symmetry.Irrep) [][]complex128 {
	rows := seedRows(irrep)
	m := g.matrices[0].RawMatrix().Rows
	invariants := g.invariants(irrep)
	var out [][]complex128
	for _, species := range g.species {
		start := len(out)
		for i := range m * rows {
			f, l := i/rows, i%rows
			v := make([]complex128, m*rows)
			for e := range m {
				if c := complex(species.At(e, f), 0); c != 0 {
					for j := range v {
						v[j] += c * invariants[j][e*rows+l]
					}
				}
			}
			for range 2 { // the second pass removes the rounding of the first
				for _, u := range out[start:] {
					overlap := hermitian(u, v)
					for j := range v {
						v[j] -= overlap * u[j]
					}
				}
			}
			if square := real(hermitian(v, v)); square > independent {
				for j := range v {
					v[j] /= complex(math.Sqrt(square), 0)
				}
				out = append(out, v)
			}
		}
	}
	return out
}

// invariants is the projector described at seeds, in rows.
func (g *siteGroup) invariants(irrep *symmetry.Irrep) [][]complex128 {
	rows := seedRows(irrep)
	m := g.matrices[0].RawMatrix().Rows
	out := make([][]complex128, m*rows)
	for i := range out {
		out[i] = make([]complex128, m*rows)
	}
	share := 1 / float64(len(g.operations))
	for n, op := range g.operations {
		d, s := irrep.Matrices[op], g.matrices[n]
		for i := range out {
			for j := range out[i] {
				element := complex(d.At(i%rows, j%rows), 0)
				if irrep.ComplexPair {
					element = complex(d.At(0, 0), -d.At(1, 0))
				}
				out[i][j] += element * complex(share*s.At(i/rows, j/rows), 0)
			}
		}
	}
	return out
}

// hermitian is the scalar product ⟨u, v⟩.
func hermitian(u, v []complex128) complex128 {
	var sum complex128
	for i, x := range u {
		sum += cmplx.Conj(x) * v[i]
	}
	return sum
}
