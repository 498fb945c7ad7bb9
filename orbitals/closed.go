package orbitals

import (
	"fmt"
	"math"
	"strings"
)

// A ClosedForm is a combination of functions in exact numbers: the sum of its
// terms, divided by √(A + B√5). The zero ClosedForm stands for none.
type ClosedForm struct {
	Terms []ClosedTerm
	A, B  int
}

// A ClosedTerm is a function with an exact coefficient.
type ClosedTerm struct {
	Function int // index in the basis
	Negative bool
	Factor   Exact
}

// An Exact is the positive number
//
//	(A + B√5) · √(M + L√5) · cos(2πK/N)
//
// with K/N in lowest terms, 0/1 where there is no cosine. Where L is 0, M is
// free of squares. The golden ratio is (1 + √5)/2.
type Exact struct {
	A, B int
	M, L int
	K, N int
}

// Value returns the number.
func (e Exact) Value() float64 {
	return quadratic(e.A, e.B) * math.Sqrt(quadratic(e.M, e.L)) * math.Cos(2*math.Pi*float64(e.K)/float64(e.N))
}

// whole is the number a√m.
func whole(a, m int) Exact { return Exact{A: a, M: m, N: 1} }

func quadratic(a, b int) float64 { return float64(a) + float64(b)*math.Sqrt(5) }

// Values returns the coefficients of n functions.
func (c ClosedForm) Values(n int) []float64 {
	out := make([]float64, n)
	for _, t := range c.Terms {
		v := t.Factor.Value() / math.Sqrt(quadratic(c.A, c.B))
		if t.Negative {
			v = -v
		}
		out[t.Function] = v
	}
	return out
}

// String writes the form in plain characters, functions counted from 1:
// "(2φ1 − φ2 − φ3)/√6". It is empty where there is none.
func (c ClosedForm) String() string {
	if len(c.Terms) == 0 {
		return ""
	}
	var b strings.Builder
	divisor := rootText(c.A, c.B)
	if divisor != "" && len(c.Terms) > 1 {
		b.WriteByte('(')
	}
	for i, t := range c.Terms {
		switch {
		case i == 0 && t.Negative:
			b.WriteString("−")
		case i > 0 && t.Negative:
			b.WriteString(" − ")
		case i > 0:
			b.WriteString(" + ")
		}
		fmt.Fprintf(&b, "%sφ%d", t.Factor, t.Function+1)
	}
	if divisor == "" {
		return b.String()
	}
	if len(c.Terms) > 1 {
		b.WriteByte(')')
	}
	return b.String() + "/" + divisor
}

// rootText writes √(a + b√5); it is empty for 1.
func rootText(a, b int) string {
	if b != 0 {
		return "√(" + quadraticText(a, b) + ")"
	}
	if root := isqrt(a); root*root == a {
		if root == 1 {
			return ""
		}
		return fmt.Sprint(root)
	}
	return fmt.Sprintf("√%d", a)
}

// quadraticText writes a + b√5, with b ≠ 0 and a positive part first.
func quadraticText(a, b int) string {
	root := "√5"
	if b != 1 && b != -1 {
		root = fmt.Sprintf("%d√5", max(b, -b))
	}
	switch {
	case a == 0:
		return root
	case b < 0:
		return fmt.Sprintf("%d − %s", a, root)
	case a < 0:
		return fmt.Sprintf("%s − %d", root, -a)
	default:
		return fmt.Sprintf("%d + %s", a, root)
	}
}

// String writes the number as a factor: nothing for 1, brackets around sums.
func (e Exact) String() string {
	var b strings.Builder
	switch {
	case e.A != 0 && e.B != 0:
		b.WriteString("(" + quadraticText(e.A, e.B) + ")")
	case e.B != 0:
		b.WriteString(quadraticText(0, e.B))
	case e.A != 1:
		fmt.Fprint(&b, e.A)
	}
	switch {
	case e.L != 0:
		b.WriteString("√(" + quadraticText(e.M, e.L) + ")")
	case e.M != 1:
		fmt.Fprintf(&b, "√%d", e.M)
	}
	if e.K != 0 {
		b.WriteString("cos(" + angleText(e.K, e.N) + ")")
	}
	return b.String()
}

// angleText writes 2πk/n.
func angleText(k, n int) string {
	k *= 2
	g := gcd(k, n)
	k, n = k/g, n/g
	text := "π"
	if k != 1 {
		text = fmt.Sprintf("%dπ", k)
	}
	if n != 1 {
		text += fmt.Sprintf("/%d", n)
	}
	return text
}

func gcd(a, b int) int {
	for b != 0 {
		a, b = b, a%b
	}
	return max(a, -a)
}

// isqrt is the whole part of the root of n ≥ 0.
func isqrt(n int) int {
	r := int(math.Sqrt(float64(n)))
	for r*r > n {
		r--
	}
	for (r+1)*(r+1) <= n {
		r++
	}
	return r
}
