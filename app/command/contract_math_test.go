package command

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"
)

func apply(m [][]float64, v []float64) []float64 {
	out := make([]float64, len(m))
	for i := range m {
		out[i] = dot(m[i], v)
	}
	return out
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i := range a {
		sum += a[i] * b[i]
	}
	return sum
}

func distance(a, b []float64) float64 {
	sum := 0.0
	for i := range a {
		sum += (a[i] - b[i]) * (a[i] - b[i])
	}
	return math.Sqrt(sum)
}

func multiply(a, b [][]float64) [][]float64 {
	out := make([][]float64, len(a))
	for i := range a {
		out[i] = make([]float64, len(b[0]))
		for j := range out[i] {
			for k := range b {
				out[i][j] += a[i][k] * b[k][j]
			}
		}
	}
	return out
}

func transposed(m [][]float64) [][]float64 {
	out := make([][]float64, len(m[0]))
	for i := range out {
		out[i] = make([]float64, len(m))
		for j := range m {
			out[i][j] = m[j][i]
		}
	}
	return out
}

func identity(n int) [][]float64 {
	out := make([][]float64, n)
	for i := range out {
		out[i] = make([]float64, n)
		out[i][i] = 1
	}
	return out
}

func farthest(a, b [][]float64) float64 {
	largest := 0.0
	for i := range a {
		for j := range a[i] {
			largest = max(largest, math.Abs(a[i][j]-b[i][j]))
		}
	}
	return largest
}

func trace(m [][]float64) float64 {
	sum := 0.0
	for i := range m {
		sum += m[i][i]
	}
	return sum
}

func determinant(m [][]float64) float64 {
	return m[0][0]*(m[1][1]*m[2][2]-m[1][2]*m[2][1]) - m[0][1]*(m[1][0]*m[2][2]-m[1][2]*m[2][0]) + m[0][2]*(m[1][0]*m[2][1]-m[1][1]*m[2][0])
}

// valueOf is the value of a normalized real function in a direction, up to the
// factor 1/√4π that all have in common. The factors are those of any textbook
// (from memory): √3 for p, √5, √15 for d, √7, √(21/2), √105, √(35/2) for f,
// with halves.
func valueOf(t *testing.T, f contractFunction, d []float64) float64 {
	t.Helper()
	if f.Direction != nil {
		return math.Sqrt(3) * dot(f.Direction, d)
	}
	x, y, z := d[0], d[1], d[2]
	switch f.Function {
	case "s", "sigma": // sigma without a direction is the s function of hydrogen
		return 1
	case "px":
		return math.Sqrt(3) * x
	case "py":
		return math.Sqrt(3) * y
	case "pz":
		return math.Sqrt(3) * z
	case "dz2":
		return math.Sqrt(5) / 2 * (3*z*z - 1)
	case "dxz":
		return math.Sqrt(15) * x * z
	case "dyz":
		return math.Sqrt(15) * y * z
	case "dx2-y2":
		return math.Sqrt(15) / 2 * (x*x - y*y)
	case "dxy":
		return math.Sqrt(15) * x * y
	case "fz3":
		return math.Sqrt(7) / 2 * (5*z*z*z - 3*z)
	case "fxz2":
		return math.Sqrt(10.5) / 2 * x * (5*z*z - 1)
	case "fyz2":
		return math.Sqrt(10.5) / 2 * y * (5*z*z - 1)
	case "fz(x2-y2)":
		return math.Sqrt(105) / 2 * z * (x*x - y*y)
	case "fxyz":
		return math.Sqrt(105) * x * y * z
	case "fx(x2-3y2)":
		return math.Sqrt(17.5) / 2 * x * (x*x - 3*y*y)
	case "fy(3x2-y2)":
		return math.Sqrt(17.5) / 2 * y * (3*x*x - y*y)
	}
	t.Fatalf("unknown function %q", f.Function)
	return 0
}

func shellOf(f contractFunction) int {
	if f.Direction != nil {
		return 1
	}
	return max(0, strings.Index("spdf", f.Function[:1]))
}

// checkFunctions samples the functions listed with each irrep: the j-th
// entries of all partners transform with exactly the matrices.
func checkFunctions(t *testing.T, g contractGroup) {
	t.Helper()
	point := []float64{0.31, -0.77, 0.52}
	spin := []float64{-0.23, 0.41, 0.68} // an axial vector, for Rx, Ry, Rz
	for _, irrep := range g.Irreps {
		for j := range irrep.Functions[0] {
			for r, op := range g.Operations {
				// (R f)(p) = f(R⁻¹ p); an axial vector turns with det(R)·R.
				back := apply(transposed(op.Matrix), point)
				backSpin := apply(transposed(op.Matrix), spin)
				for i := range backSpin {
					backSpin[i] *= determinant(op.Matrix)
				}
				for k := range irrep.Functions {
					off := polynomial(t, irrep.Functions[k][j], back, backSpin)
					for l := range irrep.Functions {
						off -= irrep.Matrices[r][l][k] * polynomial(t, irrep.Functions[l][j], point, spin)
					}
					if math.Abs(off) > transformationError {
						t.Errorf("%s: %q does not transform like partner %d under %s: off by %g", irrep.Label, irrep.Functions[k][j], k+1, op.Name, off)
					}
				}
			}
		}
	}
}

// polynomial evaluates a function of an irrep. z3, xz2 and yz2 stand for the
// whole functions 5z³−3zr², x(5z²−r²) and y(5z²−r²), since the short names
// mean those; likewise z2 in one-dimensional lists is invariant by itself.
func polynomial(t *testing.T, text string, p, spin []float64) float64 {
	t.Helper()
	r2 := dot(p, p)
	switch text {
	case "z3":
		return p[2] * (5*p[2]*p[2] - 3*r2)
	case "xz2":
		return p[0] * (5*p[2]*p[2] - r2)
	case "yz2":
		return p[1] * (5*p[2]*p[2] - r2)
	}
	e := expression{t: t, text: []rune(text), variables: map[string]float64{
		"x": p[0], "y": p[1], "z": p[2], "Rx": spin[0], "Ry": spin[1], "Rz": spin[2],
	}, powers: true}
	return e.all()
}

// checkClosedForm evaluates a closed form and compares it with the
// coefficients.
func checkClosedForm(t *testing.T, o contractOrbital) {
	t.Helper()
	if o.ClosedForm == "" {
		return
	}
	for i, c := range o.Coefficients {
		variables := map[string]float64{"π": math.Pi}
		for k := range o.Coefficients {
			variables[fmt.Sprintf("φ%d", k+1)] = 0
		}
		variables[fmt.Sprintf("φ%d", i+1)] = 1
		e := expression{t: t, text: []rune(o.ClosedForm), variables: variables}
		if got := e.all(); math.Abs(got-c) > 1e-12 {
			t.Errorf("%s gives φ%d the coefficient %.15g, not %.15g", o.ClosedForm, i+1, got, c)
		}
	}
}

// An expression is evaluated by recursive descent: sums of products of
// factors, which may follow each other without a sign; √ binds the next
// factor. With powers a digit behind a variable or bracket raises it.
type expression struct {
	t         *testing.T
	text      []rune
	at        int
	variables map[string]float64
	powers    bool
}

func (e *expression) all() float64 {
	v := e.sum()
	if e.at != len(e.text) {
		e.t.Fatalf("%q cannot be read from %q on", string(e.text), string(e.text[e.at:]))
	}
	return v
}

func (e *expression) peek() rune {
	for e.at < len(e.text) && e.text[e.at] == ' ' {
		e.at++
	}
	if e.at == len(e.text) {
		return 0
	}
	return e.text[e.at]
}

func (e *expression) take(any string) bool {
	if r := e.peek(); r != 0 && strings.ContainsRune(any, r) {
		e.at++
		return true
	}
	return false
}

func (e *expression) sum() float64 {
	sign := 1.0
	if e.take("−-") {
		sign = -1
	}
	v := sign * e.product()
	for {
		switch {
		case e.take("+"):
			v += e.product()
		case e.take("−-"):
			v -= e.product()
		default:
			return v
		}
	}
}

func (e *expression) product() float64 {
	v := e.factor()
	for {
		switch r := e.peek(); {
		case e.take("/"):
			v /= e.factor()
		case r == 0 || strings.ContainsRune("+−-)", r):
			return v
		default:
			v *= e.factor()
		}
	}
}

func (e *expression) factor() float64 {
	var v float64
	switch r := e.peek(); {
	case e.take("√"):
		return math.Sqrt(e.factor())
	case e.take("("):
		v = e.sum()
		if !e.take(")") {
			e.t.Fatalf("%q: a bracket is open", string(e.text))
		}
	case r >= '0' && r <= '9':
		return e.number()
	case strings.HasPrefix(string(e.text[e.at:]), "cos"):
		e.at += len("cos")
		return math.Cos(e.factor())
	default:
		name := string(r)
		e.at++
		if name == "R" {
			name += string(e.text[e.at])
			e.at++
		}
		if name == "φ" {
			name += strconv.Itoa(int(e.number()))
		}
		value, known := e.variables[name]
		if !known {
			e.t.Fatalf("%q: what is %q?", string(e.text), name)
		}
		v = value
	}
	if r := e.peek(); e.powers && r >= '0' && r <= '9' {
		e.at++
		return math.Pow(v, float64(r-'0'))
	}
	return v
}

func (e *expression) number() float64 {
	e.peek()
	start := e.at
	for e.at < len(e.text) && (e.text[e.at] >= '0' && e.text[e.at] <= '9' || e.text[e.at] == '.') {
		e.at++
	}
	n, err := strconv.ParseFloat(string(e.text[start:e.at]), 64)
	if err != nil {
		e.t.Fatalf("%q: %v", string(e.text), err)
	}
	return n
}
