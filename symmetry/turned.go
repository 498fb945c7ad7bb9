package symmetry

import (
	"math"
	"sort"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// Turned writes the group in other axes: w (a rotation) takes places in this
// frame to places in the other. Where the group then stands in its standard
// axes, labels and matrices are those of New, so that an irrep may change its
// name (B1 and B2, where x and y are exchanged). Else (C3 along z in a cubic
// group, a C2 along y in D3) the labels are those of the standard axes, the
// operations are named by where their axes lie, and the partners are adapted
// to the new axes: (x, y, z), (cos jφ, sin jφ) and the quadratics are those of
// the new frame. In axial groups whose axis is not along z they stay with the
// axes of the group.
func (s *Setting) Turned(w mgl64.Mat3) *Setting {
	total := orthonormal(w.Mul3(s.turn))
	if s.Infinite() || s.kind.standardIn(total) {
		return newSetting(s.kind)
	}
	return turnedSetting(s.kind, total)
}

// standardIn tells whether the turned group has the standard matrices again.
func (k kind) standardIn(w mgl64.Mat3) bool {
	standard := k.elements()
	for _, m := range standard {
		turned := w.Mul3(m).Mul3(w.Transpose())
		found := false
		for _, q := range standard {
			found = found || equalTo(turned, q, 1e-9)
		}
		if !found {
			return false
		}
	}
	return true
}

func turnedSetting(k kind, w mgl64.Mat3) *Setting {
	standard := newSetting(k)
	if k.axial() && !positive(w.Col(2)) {
		// The positive end of the group's axis is then that of z turned; the
		// half turn about x keeps the group and its labels.
		w = w.Mul3(mgl64.Diag3(mgl64.Vec3{1, -1, -1}))
	}
	ops := make([]Operation, standard.Order())
	prefixes := make([]string, len(ops))
	for i, o := range standard.Operations {
		prefixes[i] = k.prefix(o)
		o.Matrix = cleanMatrix(w.Mul3(o.Matrix).Mul3(w.Transpose()))
		o.Axis = unitAxis(w.Mul3x1(o.Axis))
		keepsSense := k.polar3() && o.Turn.Den%3 == 0
		o.orient(!keepsSense && o.Axis != (mgl64.Vec3{}) && !positive(o.Axis))
		ops[i] = o
	}
	nameOperations(k, ops, prefixes)
	order := make([]int, 0, len(ops))
	for _, c := range standard.Classes {
		members := append([]int(nil), c.Members...)
		sort.SliceStable(members, func(a, b int) bool { return k.before(ops[members[a]], ops[members[b]]) })
		order = append(order, members...)
	}
	s := &Setting{Symbol: standard.Symbol, kind: k, turn: w, product: rearrange(standard.product, order)}
	s.inverse = inverses(s.product)
	for _, from := range order {
		s.Operations = append(s.Operations, ops[from])
	}
	at := 0
	for _, c := range standard.Classes {
		class := Class{Name: c.Name}
		for range c.Members {
			class.Members = append(class.Members, at)
			at++
		}
		if len(c.Members) == 1 && strings.Contains(c.Name, "(") {
			class.Name = s.Operations[class.Members[0]].Name
		}
		s.Classes = append(s.Classes, class)
	}
	s.Irreps = turnedIrreps(standard, s, order, w)
	return s
}

// cleanMatrix removes what rounding leaves of zeros and ones.
func cleanMatrix(m mgl64.Mat3) mgl64.Mat3 {
	for i := range m {
		if r := math.Round(m[i]); math.Abs(m[i]-r) < 1e-14 {
			m[i] = r + 0
		}
	}
	return m
}

// unitAxis removes rounding errors of an axis along x, y or z.
func unitAxis(a mgl64.Vec3) mgl64.Vec3 {
	for i := range a {
		if r := math.Round(a[i]); math.Abs(a[i]-r) < 1e-12 {
			a[i] = r + 0
		}
	}
	return a
}

// turnedIrreps carries the irreps over; order[i] is the index in standard of
// operation i.
func turnedIrreps(standard, s *Setting, order []int, w mgl64.Mat3) []Irrep {
	upright := s.kind.axial() && math.Abs(w.At(2, 2)) > 1-1e-9
	families := functionFamilies(s.kind, s.Operations, upright)
	out := make([]Irrep, len(standard.Irreps))
	for i, ir := range standard.Irreps {
		basis := partnersIn(s, &ir, order, w, upright)
		matrices := make([]*mat.Dense, len(order))
		for r, from := range order {
			var half mat.Dense
			half.Mul(basis, ir.Matrices[from])
			matrices[r] = new(mat.Dense)
			matrices[r].Mul(&half, basis.T())
			matrices[r].Apply(func(_, _ int, v float64) float64 { return tidy(v) }, matrices[r])
		}
		ir.Matrices = matrices
		ir.Functions, ir.sets = functions(families, &ir)
		out[i] = ir
	}
	return out
}

// partnersIn gives the new partners: row k is new partner k in the standard
// ones.
func partnersIn(s *Setting, ir *Irrep, order []int, w mgl64.Mat3, upright bool) *mat.Dense {
	switch k := s.kind; {
	case upright && ir.Dimension == 2:
		// cos j(φ+α) and sin j(φ+α), where α turns x to its new place.
		alpha := float64(ir.azimuthal) * math.Atan2(w.At(1, 0), w.At(0, 0))
		c, sn := math.Cos(alpha), math.Sin(alpha)
		return mat.NewDense(2, 2, []float64{c, -sn, sn, c})
	case k.axial() || ir.Dimension == 1:
		return identity(ir.Dimension)
	case ir.Dimension == 5:
		return quadratics(w, 5)
	case ir.Dimension == 3 && (!k.icosahedral() || ir.Label[1] == '1'):
		return vector(Operation{Matrix: w})
	case ir.Dimension == 2 && !ir.ComplexPair:
		return s.pairIn(ir, order)
	}
	return identity(ir.Dimension)
}

// pairIn adapts the E of a cubic group: the first operation about z, else
// about x, that acts as a reflection has partner 1 as its +1 and partner 2 as
// its −1; a C3(z) turns 1 toward 2.
func (s *Setting) pairIn(ir *Irrep, order []int) *mat.Dense {
	at := -1
	for _, letter := range []byte("zxy") {
		for r, o := range s.Operations {
			m := ir.Matrices[order[r]]
			if at < 0 && !o.Turn.Improper && axisLetter(o.Axis) == letter && math.Abs(mat.Trace(m)) < 1e-9 {
				at = r
			}
		}
	}
	if at < 0 {
		return identity(2)
	}
	m := ir.Matrices[order[at]]
	// A reflection: (cos 2α, sin 2α; sin 2α, −cos 2α), with +1 along α.
	alpha := math.Atan2(m.At(1, 0), m.At(0, 0)) / 2
	c, sn := math.Cos(alpha), math.Sin(alpha)
	basis := mat.NewDense(2, 2, []float64{c, sn, -sn, c})
	if r := s.find(func(o Operation) bool { return o.Turn == Turn{1, 3, false} && axisLetter(o.Axis) == 'z' }); r >= 0 {
		var half, turned mat.Dense
		half.Mul(basis, ir.Matrices[order[r]])
		turned.Mul(&half, basis.T())
		if turned.At(1, 0) < 0 {
			basis.Set(1, 0, -basis.At(1, 0))
			basis.Set(1, 1, -basis.At(1, 1))
		}
	}
	return basis
}
