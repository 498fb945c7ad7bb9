package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// irreps builds every irreducible representation over the real numbers with
// its matrices. All of them are products of a small base representation with
// representations by signs: the base fixes the partners by named functions
// ((x, y), (x²−y², 2xy) …; cubic (z², x²−y²) and (x, y, z)), the signs give its
// companions. Candidates come in the order of preference of the functions and
// are kept when their characters are new, until Σ d² is the order.
func irreps(k kind, s *Setting) []Irrep {
	signs, bases := k.signs(s.Operations), k.bases(s)
	var kept []Irrep
	sum := 0
	for _, base := range bases {
		for _, sign := range signs[:base.companions(signs, k)] {
			if sum == s.Order() {
				break
			}
			ir := Irrep{Dimension: base.dimension, Matrices: product(sign, base.matrices), azimuthal: base.azimuthal}
			ir.Characters = characters(s, ir.Matrices)
			norm := 0.0
			for c, x := range ir.Characters {
				norm += x * x * float64(len(s.Classes[c].Members))
			}
			// Schur: Σ|χ|² is h for an irrep, 2h for a pair of conjugates.
			copies := int(math.Round(norm / float64(s.Order())))
			ir.ComplexPair = copies == 2
			if copies > 2 || copies == 2 && !base.mayPair || known(kept, ir) {
				continue
			}
			kept = append(kept, ir)
			sum += ir.Dimension * ir.Dimension / copies
		}
	}
	if sum != s.Order() {
		panic("symmetry: irreps of " + s.Symbol + " do not exhaust the group")
	}
	label(k, s, kept)
	families := functionFamilies(k, s.Operations, k.axial())
	for i := range kept {
		kept[i].Functions, kept[i].sets = functions(families, &kept[i])
	}
	return kept
}

// a base is a representation by real orthogonal matrices, one an operation.
type base struct {
	dimension int
	matrices  []*mat.Dense
	mayPair   bool // two conjugate one-dimensional ones may hide in it
	azimuthal int  // j of (cos jφ, sin jφ), else 0
}

// companions is how many of the signs a base is multiplied by. The azimuthal
// pairs of axial groups take z but not the alternating signs, which would only
// give (cos jφ, sin jφ) of another j in a less natural form.
func (b base) companions(signs [][]float64, k kind) int {
	if k.axial() && b.dimension == 2 {
		return 4
	}
	return len(signs)
}

func product(signs []float64, matrices []*mat.Dense) []*mat.Dense {
	out := make([]*mat.Dense, len(matrices))
	for i, m := range matrices {
		out[i] = new(mat.Dense)
		out[i].Scale(signs[i], m)
		raw := out[i].RawMatrix().Data
		for j := range raw {
			raw[j] += 0 // no negative zero
		}
	}
	return out
}

// characters takes the traces, and removes what rounding left of zeros and
// integers.
func characters(s *Setting, matrices []*mat.Dense) []float64 {
	out := make([]float64, len(s.Classes))
	for i, c := range s.Classes {
		x := mat.Trace(matrices[c.Members[0]])
		if r := math.Round(x); math.Abs(x-r) < 1e-12 {
			x = r + 0
		}
		out[i] = x
	}
	return out
}

func known(kept []Irrep, ir Irrep) bool {
next:
	for _, k := range kept {
		for c, x := range k.Characters {
			if math.Abs(x-ir.Characters[c]) > 1e-6 {
				continue next
			}
		}
		return true
	}
	return false
}

// signs returns the one-dimensional representations by signs from which the
// irreps are made; several may be equal.
func (k kind) signs(ops []Operation) [][]float64 {
	if k.axial() {
		return k.axialSigns(ops)
	}
	one, det, xyz, both := make([]float64, len(ops)), make([]float64, len(ops)), make([]float64, len(ops)), make([]float64, len(ops))
	for i, o := range ops {
		one[i], det[i] = 1, 1
		if o.Turn.Improper {
			det[i] = -1
		}
		// What becomes of xyz: in cubic groups each axis goes to ± an axis.
		xyz[i] = 1
		for c := 0; c < 3; c++ {
			col := o.Matrix.Col(c)
			xyz[i] *= col[0] + col[1] + col[2]
		}
		both[i] = det[i] * xyz[i]
	}
	if k.family == icosahedralProper || k.family == icosahedral {
		return [][]float64{one, det}
	}
	return [][]float64{one, det, xyz, both}
}

// An axialAction is what an operation of an axial group does: to the azimuth,
// φ → φ + a/steps or φ → a/steps − φ (in circles), and to z.
type axialAction struct {
	a       int
	reverse bool
	z       float64
}

// azimuthSteps is the number of steps of the circle in which all turns and all
// doubled azimuths of flips and planes are whole.
func (k kind) azimuthSteps() int { return 2 * k.n }

func (k kind) actions(ops []Operation) []axialAction {
	out := make([]axialAction, len(ops))
	for i, o := range ops {
		m := o.Matrix
		steps := float64(k.azimuthSteps())
		a := int(math.Round(math.Atan2(m.At(1, 0), m.At(0, 0)) / (2 * math.Pi) * steps))
		out[i] = axialAction{a, m.At(0, 0)*m.At(1, 1)-m.At(0, 1)*m.At(1, 0) < 0, m.At(2, 2)}
	}
	return out
}

// axialSigns: 1, the sense of azimuth (as Rz), z, both, and each of them times
// cos mφ where m makes its sign alternate from turn to turn.
func (k kind) axialSigns(ops []Operation) [][]float64 {
	acts := k.actions(ops)
	steps := k.azimuthSteps()
	m := 0 // none
	if k.evenImproper() {
		m = k.n
	} else if k.n%2 == 0 {
		m = k.n / 2
	}
	var out [][]float64
	for _, alternate := range []int{0, m} {
		for _, mask := range []int{0, 1, 2, 3} {
			signs := make([]float64, len(ops))
			for i, act := range acts {
				signs[i] = cosTurn(alternate*act.a, steps)
				if mask&1 != 0 && act.reverse {
					signs[i] *= -1
				}
				if mask&2 != 0 {
					signs[i] *= act.z
				}
			}
			out = append(out, signs)
		}
		if m == 0 {
			break
		}
	}
	return out
}

// bases returns the base representations in order of preference.
func (k kind) bases(s *Setting) []base {
	ops := s.Operations
	trivial := func(Operation) *mat.Dense { return mat.NewDense(1, 1, []float64{1}) }
	if !k.axial() {
		out := []base{{1, each(ops, trivial), false, 0}}
		if k.family == icosahedral || k.family == icosahedralProper {
			return append(out, icosahedralBases(s)...)
		}
		return append(out,
			base{2, each(ops, func(o Operation) *mat.Dense { return quadratics(o.Matrix, 2) }), true, 0},
			base{3, each(ops, vector), false, 0})
	}
	out := []base{{1, each(ops, trivial), false, 0}}
	acts := k.actions(ops)
	for j := 1; j <= k.n; j++ {
		// (cos jφ, sin jφ); for the groups with mirrors or flips a pair of
		// them with 2jφ a whole number of turns falls into two irreps.
		b := base{2, make([]*mat.Dense, len(ops)), true, j}
		turns := false
		for i, act := range acts {
			c, sn := cosTurn(j*act.a, k.azimuthSteps()), sinTurn(j*act.a, k.azimuthSteps())
			if act.reverse {
				b.matrices[i] = mat.NewDense(2, 2, []float64{c, sn, sn, -c})
			} else {
				b.matrices[i] = mat.NewDense(2, 2, []float64{c, -sn, sn, c})
				turns = turns || math.Abs(sn) > 1e-6
			}
		}
		if turns {
			out = append(out, b)
		}
	}
	return out
}

func each(ops []Operation, f func(Operation) *mat.Dense) []*mat.Dense {
	out := make([]*mat.Dense, len(ops))
	for i, o := range ops {
		out[i] = f(o)
	}
	return out
}

// vector is the representation on (x, y, z).
func vector(o Operation) *mat.Dense {
	d := mat.NewDense(3, 3, nil)
	for r := 0; r < 3; r++ {
		for c := 0; c < 3; c++ {
			d.Set(r, c, o.Matrix.At(r, c))
		}
	}
	return d
}

// quadratics is the representation on the first n of the five functions
// 2z²−x²−y², √3(x²−y²), 2√3xy, 2√3xz, 2√3yz (all of one norm): the symmetric
// traceless matrices Q with r·Q·r, carried to M·Q·Mᵀ.
func quadratics(m mgl64.Mat3, n int) *mat.Dense {
	r3 := math.Sqrt(3)
	forms := []mgl64.Mat3{
		mgl64.Diag3(mgl64.Vec3{-1, -1, 2}),
		mgl64.Diag3(mgl64.Vec3{r3, -r3, 0}),
		{0, r3, 0, r3, 0, 0, 0, 0, 0},
		{0, 0, r3, 0, 0, 0, r3, 0, 0},
		{0, 0, 0, 0, 0, r3, 0, r3, 0},
	}[:n]
	d := mat.NewDense(n, n, nil)
	for c, q := range forms {
		image := m.Mul3(q).Mul3(m.Transpose())
		for r, p := range forms {
			sum := 0.0
			for i := range p {
				sum += p[i] * image[i]
			}
			d.Set(r, c, tidy(sum/6))
		}
	}
	return d
}

// tidy removes rounding errors next to the entries that matrices of cubic and
// icosahedral irreps often have.
func tidy(v float64) float64 {
	for _, e := range []float64{0, 0.25, 0.5, 0.75, 1, math.Sqrt(3) / 2, math.Sqrt(3) / 4} {
		if math.Abs(math.Abs(v)-e) < 1e-14 {
			return math.Copysign(e, v) + 0
		}
	}
	return v
}

// icosahedralBases returns T1, T2, G and H. T1 holds (x, y, z). T2 is its
// conjugate: √5 → −√5 in every entry, which interchanges φ and 1−φ. G is what
// T1 × T2 holds beside H, in partners adapted to the three C2 on the axes
// (like 1, x, y, z under them). H holds the five quadratics.
func icosahedralBases(s *Setting) []base {
	n := len(s.Operations)
	t1, t2 := make([]*mat.Dense, n), make([]*mat.Dense, n)
	proper := func(o Operation) mgl64.Mat3 {
		if o.Turn.Improper {
			return o.Matrix.Mul(-1)
		}
		return o.Matrix
	}
	five := make([]*mat.Dense, n)
	for i, o := range s.Operations {
		t1[i] = vector(o)
		if o.Turn.Improper {
			t1[i].Scale(-1, t1[i])
		}
		t2[i] = mat.NewDense(3, 3, nil)
		t2[i].Apply(func(_, _ int, v float64) float64 { return conjugate(v) }, t1[i])
		five[i] = quadratics(proper(o), 5)
	}
	return []base{{3, t1, false, 0}, {3, t2, false, 0}, {4, foursome(t1, t2, five), false, 0}, {5, five, false, 0}}
}

// conjugate changes the sign of √5 in an entry of the icosahedral matrices.
func conjugate(v float64) float64 {
	switch a := math.Abs(v); {
	case math.Abs(a-golden/2) < 1e-9:
		return -math.Copysign((golden-1)/2, v)
	case math.Abs(a-(golden-1)/2) < 1e-9:
		return -math.Copysign(golden/2, v)
	}
	return v
}

// foursome makes G from T1 × T2 = G + H by the projection with the character
// of H taken away: g0 = Σ xx′, g1, g2, g3 from yz′, zx′ and xy′, whose cyclic
// order keeps them alike under the C3 about (1,1,1).
func foursome(t1, t2, five []*mat.Dense) []*mat.Dense {
	n := len(t1)
	products := make([]*mat.Dense, n)
	project := mat.NewDense(9, 9, nil)
	for i := range t1 {
		products[i] = new(mat.Dense)
		products[i].Kronecker(t1[i], t2[i])
		g := mat.Trace(products[i]) - mat.Trace(five[i])
		var term mat.Dense
		term.Scale(4*g/float64(n), products[i])
		project.Add(project, &term)
	}
	partners := mat.NewDense(9, 4, nil)
	seeds := [][]int{{0, 4, 8}, {1*3 + 2}, {2*3 + 0}, {0*3 + 1}}
	for c, seed := range seeds {
		v := mat.NewVecDense(9, nil)
		for _, at := range seed {
			v.SetVec(at, 1)
		}
		var p mat.VecDense
		p.MulVec(project, v)
		p.ScaleVec(1/mat.Norm(&p, 2), &p)
		partners.SetCol(c, p.RawVector().Data)
	}
	out := make([]*mat.Dense, n)
	for i := range products {
		var right mat.Dense
		right.Mul(products[i], partners)
		out[i] = new(mat.Dense)
		out[i].Mul(partners.T(), &right)
		out[i].Apply(func(_, _ int, v float64) float64 { return tidy(v) }, out[i])
	}
	return out
}
