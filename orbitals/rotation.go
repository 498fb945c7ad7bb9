package orbitals

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// Rotation returns what the orthogonal matrix r, proper or improper, makes of
// the functions of shell l, 0 to MaxShell: column k holds the image of
// function k, rows and columns in the order of FunctionNames.
func Rotation(l int, r mgl64.Mat3) *mat.Dense {
	byM := RotationByM(l, r)
	order := orders[l]
	d := mat.NewDense(len(order), len(order), nil)
	for i, m := range order {
		for k, n := range order {
			d.Set(i, k, byM.At(l+m, l+n))
		}
	}
	return d
}

// RotationByM returns what the orthogonal matrix r, proper or improper, makes
// of the real spherical harmonics of degree l ≥ 0: row and column l + m
// belong to order m = −l … l, cosine functions for positive and sine
// functions for negative m, and column l + m holds the image of function m.
//
// It climbs from degree to degree by the recursion of J. Ivanic and
// K. Ruedenberg, J. Phys. Chem. 100, 6342 (1996), with the corrections of
// J. Phys. Chem. A 102, 9099 (1998).
func RotationByM(l int, r mgl64.Mat3) *mat.Dense {
	if l == 0 {
		return mat.NewDense(1, 1, []float64{1})
	}
	first := firstDegree(r)
	d := first
	for degree := 2; degree <= l; degree++ {
		d = nextDegree(degree, first, d)
	}
	return d
}

// firstDegree writes r in the order (y, z, x), which is m = −1, 0, 1.
func firstDegree(r mgl64.Mat3) *mat.Dense {
	axis := [3]int{1, 2, 0}
	d := mat.NewDense(3, 3, nil)
	for i, a := range axis {
		for k, b := range axis {
			d.Set(i, k, r.At(a, b))
		}
	}
	return d
}

// nextDegree makes the matrix of degree l from those of degree 1 and l − 1.
// Letters as in the paper.
func nextDegree(l int, first, previous *mat.Dense) *mat.Dense {
	p := func(i, mu, n int) float64 {
		r := func(j int) float64 { return first.At(1+i, 1+j) }
		prev := func(k int) float64 { return previous.At(l-1+mu, l-1+k) }
		switch {
		case n == l:
			return r(1)*prev(l-1) - r(-1)*prev(1-l)
		case n == -l:
			return r(1)*prev(1-l) + r(-1)*prev(l-1)
		default:
			return r(0) * prev(n)
		}
	}
	d := mat.NewDense(2*l+1, 2*l+1, nil)
	for m := -l; m <= l; m++ {
		for n := -l; n <= l; n++ {
			u, v, w := recursionFactors(l, m, n)
			sum := 0.0
			if u != 0 {
				sum += u * p(0, m, n)
			}
			if v != 0 {
				sum += v * termV(p, m, n)
			}
			if w != 0 {
				sum += w * termW(p, m, n)
			}
			d.Set(l+m, l+n, sum)
		}
	}
	return d
}

// recursionFactors are u, v and w of table 1 of the paper. Where one is zero
// its term would reach outside the smaller matrix and must not be evaluated.
func recursionFactors(l, m, n int) (u, v, w float64) {
	abs := max(m, -m)
	den := float64((l + n) * (l - n))
	if n == l || n == -l {
		den = float64(2 * l * (2*l - 1))
	}
	u = math.Sqrt(float64((l+m)*(l-m)) / den)
	v = 0.5 * math.Sqrt(float64((l+abs-1)*(l+abs))/den)
	if m == 0 {
		return u, -v * math.Sqrt2, 0
	}
	return u, v, -0.5 * math.Sqrt(float64((l-abs-1)*(l-abs))/den)
}

func termV(p func(i, mu, n int) float64, m, n int) float64 {
	switch {
	case m == 0:
		return p(1, 1, n) + p(-1, -1, n)
	case m == 1:
		return p(1, 0, n) * math.Sqrt2
	case m > 0:
		return p(1, m-1, n) - p(-1, 1-m, n)
	case m == -1:
		return p(-1, 0, n) * math.Sqrt2
	default:
		return p(1, m+1, n) + p(-1, -m-1, n)
	}
}

func termW(p func(i, mu, n int) float64, m, n int) float64 {
	if m > 0 {
		return p(1, m+1, n) + p(-1, -m-1, n)
	}
	return p(1, m-1, n) - p(-1, 1-m, n)
}
