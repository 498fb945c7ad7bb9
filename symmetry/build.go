package symmetry

import (
	"fmt"
	"math"
	"sort"
	"sync"

	"github.com/go-gl/mathgl/mgl64"
)

// New makes the Setting of a point group in its standard axes from its
// Schoenflies symbol in plain characters ("C2v", "D4h", "S6", "Td", "C∞v").
// It returns an error that lists the symbols known if symbol is none of them.
func New(symbol string) (*Setting, error) {
	k, err := parseSymbol(symbol)
	if err != nil {
		return nil, err
	}
	return newSetting(k), nil
}

// settings keeps the groups that were built, up to n = MaxNearFold: a ladder names
// some of them a hundred times. Settings are never changed, so all share them.
var settings sync.Map // kind → *Setting

// newSetting is the group in its standard axes.
func newSetting(k kind) *Setting {
	if s, ok := settings.Load(k); ok {
		return s.(*Setting)
	}
	s := buildSetting(k)
	if k.n <= MaxNearFold {
		settings.Store(k, s)
	}
	return s
}

func buildSetting(k kind) *Setting {
	s := &Setting{Symbol: k.symbol(), kind: k, turn: mgl64.Ident3()}
	if k.infinite() {
		return s
	}
	matrices := k.elements()
	table := multiply(matrices)
	ops := make([]Operation, len(matrices))
	for i, m := range matrices {
		axis, turn := describe(m, elementOrder(table, i))
		ops[i] = Operation{Matrix: m, Axis: axis, Turn: turn}
		if k.polar3() && turn.Den == 3 || k.polar3() && turn.Den == 6 {
			ops[i].orient(axis.X()*axis.Y()*axis.Z() < 0)
		}
	}
	prefixes := make([]string, len(ops))
	for i, o := range ops {
		prefixes[i] = k.prefix(o)
	}
	nameOperations(k, ops, prefixes)
	order, classOf := arrange(k, ops, table)
	s.Operations = make([]Operation, len(ops))
	for to, from := range order {
		s.Operations[to] = ops[from]
		s.Operations[to].Class = classOf[from]
	}
	s.product = rearrange(table, order)
	s.inverse = inverses(s.product)
	s.Classes = nameClasses(k, s.Operations)
	s.Irreps = irreps(k, s)
	return s
}

// polar3 tells whether C3 and C3² are in different classes of a polyhedral
// group, so that the senses of its threefold axes must be kept alike.
func (k kind) polar3() bool {
	return k.family == tetrahedralProper || k.family == pyritohedral
}

// multiply makes the product table: entry [a][b] is the index of a·b. The
// image of one vector in general position tells the operations apart.
func multiply(ops []mgl64.Mat3) [][]int32 {
	probe := mgl64.Vec3{0.5403023, 0.8414709, 0.2738}
	weight := mgl64.Vec3{0.6180339, 0.3302775, 0.7137}
	images := make([]mgl64.Vec3, len(ops))
	keys := make([]float64, len(ops))
	sorted := make([]int, len(ops))
	for i, m := range ops {
		images[i] = m.Mul3x1(probe)
		keys[i] = images[i].Dot(weight)
		sorted[i] = i
	}
	sort.Slice(sorted, func(a, b int) bool { return keys[sorted[a]] < keys[sorted[b]] })
	find := func(v mgl64.Vec3) int32 {
		key := v.Dot(weight) - sameMatrix
		at := sort.Search(len(sorted), func(i int) bool { return keys[sorted[i]] >= key })
		for ; at < len(sorted) && keys[sorted[at]] < key+2*sameMatrix; at++ {
			if d := images[sorted[at]].Sub(v); d.Dot(d) < 1e-16 {
				return int32(sorted[at])
			}
		}
		panic("symmetry: operations of a point group that do not close")
	}
	table := make([][]int32, len(ops))
	cells := make([]int32, len(ops)*len(ops))
	for a, m := range ops {
		table[a], cells = cells[:len(ops)], cells[len(ops):]
		for b := range ops {
			table[a][b] = find(m.Mul3x1(images[b]))
		}
	}
	return table
}

// elementOrder is the smallest power of operation a that is E (index 0).
func elementOrder(table [][]int32, a int) int {
	n := 1
	for p := a; p != 0; p = int(table[a][p]) {
		n++
	}
	return n
}

func inverses(table [][]int32) []int {
	inv := make([]int, len(table))
	for a, row := range table {
		for b, p := range row {
			if p == 0 {
				inv[a] = b
			}
		}
	}
	return inv
}

// rearrange writes the table for the operations in a new order; order[i] is
// the old index of the new operation i.
func rearrange(table [][]int32, order []int) [][]int32 {
	place := make([]int32, len(order))
	for to, from := range order {
		place[from] = int32(to)
	}
	out := make([][]int32, len(order))
	for a, from := range order {
		out[a] = make([]int32, len(order))
		for b, second := range order {
			out[a][b] = place[table[from][second]]
		}
	}
	return out
}

// describe finds the axis and the turn of an orthogonal matrix of which the
// given power, and no smaller one, is E. The axis points to positive z, else
// x, else y.
func describe(m mgl64.Mat3, order int) (axis mgl64.Vec3, turn Turn) {
	improper := m.Det() < 0
	proper := m
	if improper {
		proper = m.Mul(-1)
	}
	// −S, the proper part of an improper operation, turns by a half more
	// about the same axis.
	axis = rotationAxis(proper)
	if axis == (mgl64.Vec3{}) { // E or i
		if improper {
			return axis, Turn{1, 2, true}
		}
		return axis, Turn{0, 1, false}
	}
	cos := (proper.Trace() - 1) / 2
	sin := axis.Dot(mgl64.Vec3{
		proper.At(2, 1) - proper.At(1, 2), proper.At(0, 2) - proper.At(2, 0), proper.At(1, 0) - proper.At(0, 1),
	}) / 2
	den := 2 * order // also a denominator of the turn that is a half more
	num := int(math.Round(math.Atan2(sin, cos) / (2 * math.Pi) * float64(den)))
	if improper {
		num += den / 2
	}
	return axis, newTurn(num, den, improper)
}

// newTurn brings the fraction to lowest terms between 0 and 1.
func newTurn(num, den int, improper bool) Turn {
	num = ((num % den) + den) % den
	g := gcd(num, den)
	return Turn{num / g, den / g, improper}
}

func gcd(a, b int) int {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// rotationAxis returns the unit axis of a proper rotation, with positive z,
// else x, else y; zero for E.
func rotationAxis(m mgl64.Mat3) mgl64.Vec3 {
	a := mgl64.Vec3{m.At(2, 1) - m.At(1, 2), m.At(0, 2) - m.At(2, 0), m.At(1, 0) - m.At(0, 1)}
	if a.Len() < 1e-6 { // E, or a half turn: R + 1 = 2·axis·axisᵀ
		if m.Trace() > 2 {
			return mgl64.Vec3{}
		}
		sum := m.Add(mgl64.Ident3())
		for c := 0; c < 3; c++ {
			if col := sum.Col(c); col.Len() > a.Len() {
				a = col
			}
		}
	}
	a = a.Normalize()
	for i := range a {
		if math.Abs(a[i]) < 1e-12 {
			a[i] = 0
		} else if math.Abs(math.Abs(a[i])-1) < 1e-12 {
			a[i] = math.Copysign(1, a[i])
		}
	}
	if !positive(a) {
		a = a.Mul(-1)
	}
	for i := range a {
		a[i] += 0 // no negative zero
	}
	return a
}

// positive tells whether an axis points to positive z, else x, else y.
func positive(a mgl64.Vec3) bool {
	for _, i := range []int{2, 0, 1} {
		if math.Abs(a[i]) > 1e-9 {
			return a[i] > 0
		}
	}
	return true
}

// orient turns the axis of an operation round if asked to, and with it the
// sense in which its turn is counted.
func (o *Operation) orient(round bool) {
	if round {
		o.Axis = mgl64.Vec3{0 - o.Axis[0], 0 - o.Axis[1], 0 - o.Axis[2]}
		o.Turn = newTurn(-o.Turn.Num, o.Turn.Den, o.Turn.Improper)
	}
}

// power returns the symbol of the turn with the exponent by which it is named,
// in lowest terms: C3 of C6², S6^5 of i·C3.
func (t Turn) power() (letter byte, n, k int) {
	if !t.Improper {
		return 'C', t.Den, t.Num
	}
	k = t.Num
	if t.Den%2 == 1 && k%2 == 0 {
		k += t.Den // an even power of S with odd n would be proper
	}
	return 'S', t.Den, k
}

// baseSymbol is the symbol of the operation that the turn is a power of.
func (t Turn) baseSymbol() string {
	switch letter, n, _ := t.power(); {
	case !t.Improper && n == 1:
		return "E"
	case t.Improper && n == 1:
		return "σ"
	case t.Improper && n == 2:
		return "i"
	default:
		return fmt.Sprintf("%c%d", letter, n)
	}
}
