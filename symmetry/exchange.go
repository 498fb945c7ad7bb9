package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// An Exchange tells what everything in one frame is called in another.
type Exchange struct {
	// Operations[r] and Irreps[i] are indices in the other setting.
	Operations, Irreps []int
	// Partners has one d×d orthogonal matrix an irrep: column k is partner k
	// here as a combination of the partners there.
	Partners []*mat.Dense
}

// ExchangeNames compares two settings of one group; turn takes places in the
// frame of here to places in that of there. It looks at the groups alone: an
// operation here is the one there with the turned matrix, an irrep the one with
// the same characters of these operations, and the partners go over by the
// matrix that commutes with all of them (Schur). The sign of that matrix is
// the one by which the functions printed beside the irreps go over; irreps
// without such functions take the sign that makes its largest entry positive.
// It panics if there is not here turned.
func ExchangeNames(here, there *Setting, turn mgl64.Mat3) *Exchange {
	e := &Exchange{Operations: make([]int, here.Order()), Irreps: make([]int, len(here.Irreps))}
	for r, o := range here.Operations {
		m := turn.Mul3(o.Matrix).Mul3(turn.Transpose())
		e.Operations[r] = there.find(func(q Operation) bool { return equalTo(q.Matrix, m, 1e-6) })
		if e.Operations[r] < 0 {
			panic("symmetry: two settings of " + here.Symbol + " that do not match")
		}
	}
	for i := range here.Irreps {
		e.Irreps[i] = -1
		for j := range there.Irreps {
			if e.sameCharacters(here, there, i, j) {
				e.Irreps[i] = j
			}
		}
		if e.Irreps[i] < 0 {
			panic("symmetry: irreps of " + here.Symbol + " that do not match")
		}
		e.Partners = append(e.Partners, e.partners(&here.Irreps[i], &there.Irreps[e.Irreps[i]], turn))
	}
	return e
}

func (e *Exchange) sameCharacters(here, there *Setting, i, j int) bool {
	for r, o := range here.Operations {
		x := here.Irreps[i].Characters[o.Class]
		y := there.Irreps[j].Characters[there.Operations[e.Operations[r]].Class]
		if math.Abs(x-y) > 1e-6 {
			return false
		}
	}
	return true
}

// partners is the matrix T with T·D_here(R) = D_there(R)·T: the average of
// D_there(R)·X·D_here(R)ᵀ for an X with which it does not vanish.
func (e *Exchange) partners(here, there *Irrep, turn mgl64.Mat3) *mat.Dense {
	d := here.Dimension
	var t *mat.Dense
	for seed := 0; seed < d*d && t == nil; seed++ {
		x := mat.NewDense(d, d, nil)
		x.Set(seed/d, seed%d, 1)
		sum := mat.NewDense(d, d, nil)
		for r := range here.Matrices {
			var left, term mat.Dense
			left.Mul(there.Matrices[e.Operations[r]], x)
			term.Mul(&left, here.Matrices[r].T())
			sum.Add(sum, &term)
		}
		if norm := mat.Norm(sum, 2); norm > 1e-6*float64(len(here.Matrices)) {
			sum.Scale(math.Sqrt(float64(d))/norm, sum)
			t = sum
		}
	}
	share := functionShare(here, there, turn)
	switch {
	case d == 1 && here.totallySymmetric():
		t.Set(0, 0, 1) // what every operation leaves has no sign of its own
	case here.ComplexPair && share != nil:
		t = alignPair(t, here, share)
	case share != nil:
		dot := 0.0
		for l := range d {
			dot += t.At(l, 0) * share[l]
		}
		if dot < 0 {
			t.Scale(-1, t)
		}
	default:
		if largest(mat.NewVecDense(d*d, append([]float64(nil), t.RawMatrix().Data...))) < 0 {
			t.Scale(-1, t)
		}
	}
	t.Apply(func(_, _ int, v float64) float64 { return tidyZero(tidy(v)) }, t)
	return t
}

func (ir *Irrep) totallySymmetric() bool {
	for _, x := range ir.Characters {
		if x != 1 {
			return false
		}
	}
	return true
}

// functionShare writes the first function of partner 1 that both frames know,
// turned, as a combination of the partners' functions there; nil if there is
// none.
func functionShare(here, there *Irrep, turn mgl64.Mat3) []float64 {
	for _, f := range here.sets {
		image := f.tensors[0]
		for degree := len(image); degree > 1; degree /= 3 {
			image = rotateLast(image, turn)
		}
		var best []float64
		most := 1e-6
		for _, g := range there.sets {
			if g.family != f.family {
				continue
			}
			share := make([]float64, len(g.tensors))
			total := 0.0
			for l, tensor := range g.tensors {
				dot, norm, own := 0.0, 0.0, 0.0
				for i, v := range tensor {
					dot += v * image[i]
					norm += v * v
					own += image[i] * image[i]
				}
				share[l] = dot / math.Sqrt(norm*own)
				total += share[l] * share[l]
			}
			if total > most {
				best, most = share, total
			}
		}
		if best != nil {
			return best
		}
	}
	return nil
}

// alignPair chooses among the matrices t·(α + βJ), which all commute for a
// complex pair, the one that takes partner 1 to the given share.
func alignPair(t *mat.Dense, here *Irrep, share []float64) *mat.Dense {
	j := mat.NewDense(2, 2, []float64{0, -1, 1, 0})
	var tj mat.Dense
	tj.Mul(t, j)
	norm := math.Hypot(share[0], share[1])
	// First columns: α·t + β·tj = share.
	a, b := t.At(0, 0), t.At(1, 0)
	c, d := tj.At(0, 0), tj.At(1, 0)
	det := a*d - b*c
	alpha := (share[0]*d - share[1]*c) / det / norm
	beta := (a*share[1] - b*share[0]) / det / norm
	out := mat.NewDense(2, 2, nil)
	out.Scale(alpha, t)
	tj.Scale(beta, &tj)
	out.Add(out, &tj)
	return out
}

// ByPowers tells, irrep by irrep, whose characters are those of this one for
// the k-th powers of the operations: the name that it has where the k-th power
// of every rotation is taken for the rotation itself. k must be prime to the
// order of every operation; else it panics.
func (s *Setting) ByPowers(k int) []int {
	powers := make([]int, len(s.Classes)) // class → that of the powers
	for c, class := range s.Classes {
		p := 0
		for range k {
			p = s.Product(class.Members[0], p)
		}
		powers[c] = s.Operations[p].Class
	}
	out := make([]int, len(s.Irreps))
	for i, ir := range s.Irreps {
		out[i] = -1
		for j, other := range s.Irreps {
			same := ir.Dimension == other.Dimension
			for c := range s.Classes {
				same = same && math.Abs(other.Characters[c]-ir.Characters[powers[c]]) < 1e-6
			}
			if same {
				out[i] = j
			}
		}
		if out[i] < 0 {
			panic("symmetry: powers that are no relabelling of " + s.Symbol)
		}
	}
	return out
}
