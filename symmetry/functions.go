package symmetry

import (
	"fmt"
	"math"
	"sort"
	"strconv"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// A polynomial is homogeneous in x, y and z: coefficients by exponents.
type polynomial map[[3]int]float64

// A named polynomial is printed by its name.
type named struct {
	name string
	form polynomial
}

var (
	linears = []named{
		{"x", polynomial{{1, 0, 0}: 1}}, {"y", polynomial{{0, 1, 0}: 1}}, {"z", polynomial{{0, 0, 1}: 1}},
	}
	squares = []named{
		{"z2", polynomial{{0, 0, 2}: 1}}, {"x2", polynomial{{2, 0, 0}: 1}}, {"y2", polynomial{{0, 2, 0}: 1}},
		{"xy", polynomial{{1, 1, 0}: 1}}, {"xz", polynomial{{1, 0, 1}: 1}}, {"yz", polynomial{{0, 1, 1}: 1}},
	}
	// The seven names of the f functions; in axial groups the polynomials
	// written here transform as the harmonics do.
	axialCubes = []named{
		{"z3", polynomial{{0, 0, 3}: 1}},
		{"xz2", polynomial{{1, 0, 2}: 1}}, {"yz2", polynomial{{0, 1, 2}: 1}},
		{"z(x2-y2)", polynomial{{2, 0, 1}: 1, {0, 2, 1}: -1}}, {"xyz", polynomial{{1, 1, 1}: 1}},
		{"x(x2-3y2)", polynomial{{3, 0, 0}: 1, {1, 2, 0}: -3}}, {"y(3x2-y2)", polynomial{{2, 1, 0}: 3, {0, 3, 0}: -1}},
	}
	cubicCubes = []named{
		{"xyz", polynomial{{1, 1, 1}: 1}},
		{"x(2x2-3y2-3z2)", polynomial{{3, 0, 0}: 2, {1, 2, 0}: -3, {1, 0, 2}: -3}},
		{"y(2y2-3x2-3z2)", polynomial{{0, 3, 0}: 2, {2, 1, 0}: -3, {0, 1, 2}: -3}},
		{"z(2z2-3x2-3y2)", polynomial{{0, 0, 3}: 2, {2, 0, 1}: -3, {0, 2, 1}: -3}},
		{"x(y2-z2)", polynomial{{1, 2, 0}: 1, {1, 0, 2}: -1}},
		{"y(z2-x2)", polynomial{{0, 1, 2}: 1, {2, 1, 0}: -1}},
		{"z(x2-y2)", polynomial{{2, 0, 1}: 1, {0, 2, 1}: -1}},
	}
	rotations = []named{
		{"Rx", polynomial{{1, 0, 0}: 1}}, {"Ry", polynomial{{0, 1, 0}: 1}}, {"Rz", polynomial{{0, 0, 1}: 1}},
	}
)

// A functionFamily is a list of functions that the operations carry into each
// other's span, with their images under every operation of one group.
type functionFamily struct {
	list []named
	// forms has a column a function, in monomials; images[r] the same for
	// what operation r makes of them.
	forms  *mat.Dense
	images []*mat.Dense
}

// functionFamilies prepares rotations and polynomials up to the third degree
// for a group. upright: every operation keeps z or turns it round, so that the
// plain polynomials of axialCubes will do. Cubic functions of the icosahedral
// groups have coefficients in φ and no common names; they are left out.
func functionFamilies(k kind, ops []Operation, upright bool) []functionFamily {
	out := []functionFamily{
		newFunctionFamily(linears, ops, false), newFunctionFamily(rotations, ops, true), newFunctionFamily(squares, ops, false),
	}
	switch {
	case upright:
		out = append(out, newFunctionFamily(axialCubes, ops, false))
	case k.family != icosahedral && k.family != icosahedralProper:
		out = append(out, newFunctionFamily(cubicCubes, ops, false))
	}
	return out
}

func newFunctionFamily(list []named, ops []Operation, axialVectors bool) functionFamily {
	f := functionFamily{list: list, images: make([]*mat.Dense, len(ops))}
	f.forms = imagesOf(list, mgl64.Ident3())
	for r, o := range ops {
		m := o.Matrix
		if axialVectors && o.Turn.Improper {
			m = m.Mul(-1)
		}
		f.images[r] = imagesOf(list, m)
	}
	return f
}

// imagesOf has a column a function: r ↦ f(m⁻¹·r), in all products of as many
// coordinates as its degree. Products that differ in order are kept apart, and
// hold like shares, so that each factor is replaced by itself.
func imagesOf(list []named, m mgl64.Mat3) *mat.Dense {
	degree := 0
	for e := range list[0].form {
		degree = e[0] + e[1] + e[2]
	}
	rows := 1
	for i := 0; i < degree; i++ {
		rows *= 3
	}
	d := mat.NewDense(rows, len(list), nil)
	raw := d.RawMatrix()
	for c, f := range list {
		tensor := f.form.tensor(degree)
		for i := 0; i < degree; i++ {
			tensor = rotateLast(tensor, m)
		}
		for r, v := range tensor {
			raw.Data[r*raw.Stride+c] = v
		}
	}
	return d
}

// tensor writes a form as Σ t_ijk x_i x_j x_k with t symmetric.
func (f polynomial) tensor(degree int) []float64 {
	rows := 1
	for i := 0; i < degree; i++ {
		rows *= 3
	}
	t := make([]float64, rows)
	for at := range t {
		var e [3]int
		for i, rest := 0, at; i < degree; i, rest = i+1, rest/3 {
			e[rest%3]++
		}
		if c := f[e]; c != 0 {
			t[at] = c / float64(arrangements(e))
		}
	}
	return t
}

// arrangements is the number of orders in which the factors can stand.
func arrangements(e [3]int) int {
	factorial := []int{1, 1, 2, 6}
	return factorial[e[0]+e[1]+e[2]] / (factorial[e[0]] * factorial[e[1]] * factorial[e[2]])
}

// rotateLast replaces the last index of the tensor by its image and moves it
// to the front, so that as many calls as there are indices rotate them all.
func rotateLast(t []float64, m mgl64.Mat3) []float64 {
	out := make([]float64, len(t))
	rest := len(t) / 3
	for at := 0; at < rest; at++ {
		for j := 0; j < 3; j++ {
			out[j*rest+at] = m.At(j, 0)*t[3*at] + m.At(j, 1)*t[3*at+1] + m.At(j, 2)*t[3*at+2]
		}
	}
	return out
}

// functions lists what transforms like each partner of an irrep. Each set is
// found by the projections P_k1 = (d/h) Σ_R D_k1(R)·R of one seed, so that its
// members transform with exactly the irrep's matrices.
func functions(families []functionFamily, ir *Irrep) ([][]string, []functionSet) {
	out := make([][]string, ir.Dimension)
	for i := range out {
		out[i] = []string{}
	}
	var all []functionSet
	for place, family := range families {
		for _, set := range family.sets(ir) {
			for i, v := range set {
				out[i] = append(out[i], combination(family.list, v))
			}
			all = append(all, functionSet{place, family.tensors(set)})
		}
	}
	return out, all
}

// A functionSet is one function a partner, as tensors; family tells polar
// vectors, rotations, quadratic and cubic functions apart.
type functionSet struct {
	family  int
	tensors [][]float64
}

func (f functionFamily) tensors(set []*mat.VecDense) [][]float64 {
	out := make([][]float64, len(set))
	for i, v := range set {
		var t mat.VecDense
		t.MulVec(f.forms, v)
		out[i] = t.RawVector().Data
	}
	return out
}

// sets projects every function of the list in turn and keeps what is new, as
// coefficients of the list, partner by partner.
func (f functionFamily) sets(ir *Irrep) [][]*mat.VecDense {
	rows, n := f.forms.Dims()
	// Everything below is in coefficients of the list again.
	var toList mat.Dense
	if err := toList.Solve(f.forms, identity(rows)); err != nil {
		panic("symmetry: named functions that depend on each other")
	}
	partners := make([]*mat.Dense, ir.Dimension) // a column a seed
	for p := range partners {
		sum := mat.NewDense(rows, n, nil)
		raw := sum.RawMatrix().Data
		for r, image := range f.images {
			w := ir.Matrices[r].At(p, 0) * float64(ir.Dimension) / float64(len(f.images))
			if w == 0 {
				continue
			}
			for i, v := range image.RawMatrix().Data {
				raw[i] += w * v
			}
		}
		partners[p] = new(mat.Dense)
		partners[p].Mul(&toList, sum)
	}
	var kept []*mat.VecDense
	var sets [][]*mat.VecDense
	for seed := 0; seed < n; seed++ {
		if dependent(kept, partners[0].ColView(seed)) {
			continue
		}
		scale := 1 / unit(partners, seed)
		if partners[0].At(seed, seed) < 0 {
			scale = -scale
		}
		set := make([]*mat.VecDense, ir.Dimension)
		for p := range partners {
			v := mat.NewVecDense(n, nil)
			v.ScaleVec(scale, partners[p].ColView(seed))
			set[p] = v
			if ir.ComplexPair || p == 0 {
				kept = append(kept, v)
			}
		}
		sets = append(sets, set)
	}
	return sets
}

func identity(n int) *mat.Dense {
	d := mat.NewDense(n, n, nil)
	for i := 0; i < n; i++ {
		d.Set(i, i, 1)
	}
	return d
}

// negligible is what rounding leaves of a coefficient that is zero; those that
// are not are of the order of one.
const negligible = 1e-9

// dependent tells whether v is zero or a combination of the kept vectors.
func dependent(kept []*mat.VecDense, v mat.Vector) bool {
	rest := mat.VecDenseCopyOf(v)
	var basis []*mat.VecDense
	remove := func(u *mat.VecDense) {
		for _, b := range basis {
			u.AddScaledVec(u, -mat.Dot(b, u), b)
		}
	}
	for _, k := range kept {
		u := mat.VecDenseCopyOf(k)
		remove(u)
		if norm := mat.Norm(u, 2); norm > negligible {
			u.ScaleVec(1/norm, u)
			basis = append(basis, u)
		}
	}
	remove(rest)
	return mat.Norm(rest, 2) < negligible
}

// mostUnder bounds the square of the number that the least coefficient of a set
// becomes; harmonics in the axes of regular polyhedra need no more.
const mostUnder = 400

// unit is the size that is made 1 among the coefficients that the partners made
// from a seed have: the one by which all become square roots of integers, the
// least of them as small as can be; else the largest coefficient, and the
// others become decimals.
func unit(partners []*mat.Dense, seed int) float64 {
	least, largest := math.Inf(1), 0.0
	var sizes []float64
	for _, p := range partners {
		for i, rows := 0, p.RawMatrix().Rows; i < rows; i++ {
			if a := math.Abs(p.At(i, seed)); a > negligible {
				least, largest = math.Min(least, a), math.Max(largest, a)
				sizes = append(sizes, a)
			}
		}
	}
next:
	for under := 1; under <= mostUnder; under++ {
		u := least / math.Sqrt(float64(under))
		for _, a := range sizes {
			if multiple(a/u) == "" {
				continue next
			}
		}
		return u
	}
	return largest
}

// combination prints a combination of named functions: 2z2-x2-y2, √3(x2-y2).
func combination(list []named, v *mat.VecDense) string {
	type term struct {
		c    float64
		name string
	}
	var terms []term
	for _, i := range printOrder(list) {
		if c := v.AtVec(i); math.Abs(c) > negligible {
			terms = append(terms, term{c, list[i].name})
		}
	}
	if len(list) != len(linears) {
		// The term that gives a function its name comes first: 2z2-x2-y2. Sums
		// of x, y and z keep their order.
		sort.SliceStable(terms, func(a, b int) bool { return math.Abs(terms[a].c) > math.Abs(terms[b].c)+negligible })
	}
	// None begins with a minus that need not: z2-y2, y-x.
	if len(terms) > 0 && terms[0].c < 0 {
		sort.SliceStable(terms, func(a, b int) bool { return terms[a].c > 0 && terms[b].c < 0 })
	}
	common := math.Inf(1)
	for _, t := range terms {
		common = math.Min(common, math.Abs(t.c))
	}
	for _, t := range terms {
		if multiple(t.c/common) == "" {
			common = 1 // no common factor: each term has its own number
		}
	}
	var b strings.Builder
	for i, t := range terms {
		c := t.c / common
		switch {
		case c < 0:
			b.WriteByte('-')
		case i > 0:
			b.WriteByte('+')
		}
		switch a := math.Abs(c); {
		case multiple(a) == "":
			b.WriteString(strconv.FormatFloat(a, 'f', -1, 64))
		case multiple(a) != "1":
			b.WriteString(multiple(a))
		}
		b.WriteString(t.name)
	}
	factor := multiple(common)
	switch {
	case factor == "":
		factor = strconv.FormatFloat(common, 'f', -1, 64)
	case factor == "1":
		factor = ""
	}
	switch {
	case factor == "":
		return b.String()
	case len(terms) > 1:
		return factor + "(" + b.String() + ")"
	case terms[0].c < 0:
		return "-" + factor + b.String()[1:]
	}
	return factor + b.String()
}

// printOrder lists x before y before z.
func printOrder(list []named) []int {
	if len(list) == len(squares) && list[0].name == "z2" {
		return []int{1, 2, 0, 3, 4, 5}
	}
	order := make([]int, len(list))
	for i := range order {
		order[i] = i
	}
	return order
}

// multiple writes a number whose square is an integer: "1", "2", "√3", "2√3";
// "" for any other.
func multiple(v float64) string {
	square := int(math.Round(v * v))
	if square == 0 || math.Abs(v*v-float64(square)) > 1e-8 {
		return ""
	}
	whole := 1
	for f := 2; f*f <= square; f++ {
		for square%(f*f) == 0 {
			square /= f * f
			whole *= f
		}
	}
	switch {
	case square == 1:
		return strconv.Itoa(whole)
	case whole == 1:
		return fmt.Sprintf("√%d", square)
	}
	return fmt.Sprintf("%d√%d", whole, square)
}
