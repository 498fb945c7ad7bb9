package orbitals

import (
	"math"
	"slices"
)

// closedTolerance bounds the difference between a coefficient and its closed
// form. Coefficients are good to some 1e-15; what agrees to 1e-12 with numbers
// as small as those below does not do so by accident.
const closedTolerance = 1e-12

// The largest numbers that a closed form may hold. They are as large as group
// orbitals of up to 120 functions need, and leave random numbers without form.
const (
	maxDivisor  = 5000 // the number under the common root
	maxRadicand = 400  // one under the root of a factor
	maxFactor   = 60   // whole numbers in sums with √5
	maxCircle   = 96   // n of 2πk/n
)

// FindClosedForm looks for a closed form of normalized coefficients: roots of
// rational numbers, numbers with √5 (the golden ratio), or cosines of 2πk/n
// over a common root. It is good to 1e-12; false means that none was found.
func FindClosedForm(coefficients []float64) (ClosedForm, bool) {
	d := distinct(coefficients)
	if len(d.values) == 0 {
		return ClosedForm{}, false
	}
	for _, find := range []func(*distinctValues) ([]Exact, int, int, bool){
		(*distinctValues).asRoots, (*distinctValues).asGolden, (*distinctValues).asCosines, (*distinctValues).asGoldenRoots,
	} {
		factors, a, b, ok := find(&d)
		if !ok {
			continue
		}
		form := ClosedForm{A: a, B: b}
		for i, c := range coefficients {
			if n := d.index[i]; n >= 0 {
				form.Terms = append(form.Terms, ClosedTerm{Function: i, Negative: c < 0, Factor: factors[n]})
			}
		}
		if form.equals(coefficients) {
			return form, true
		}
	}
	return ClosedForm{}, false
}

func (c ClosedForm) equals(coefficients []float64) bool {
	for i, v := range c.Values(len(coefficients)) {
		if math.Abs(v-coefficients[i]) > closedTolerance {
			return false
		}
	}
	return true
}

// distinctValues are the different absolute values among coefficients.
type distinctValues struct {
	values []float64 // falling
	counts []int     // how often each occurs
	index  []int     // for each coefficient the index of its value, −1 for 0
}

func distinct(coefficients []float64) distinctValues {
	d := distinctValues{index: make([]int, len(coefficients))}
	all := make([]float64, 0, len(coefficients))
	for _, c := range coefficients {
		if math.Abs(c) > closedTolerance {
			all = append(all, math.Abs(c))
		}
	}
	slices.Sort(all)
	slices.Reverse(all)
	const apart = 1e-11
	for _, v := range all {
		if n := len(d.values); n == 0 || d.values[n-1]-v > apart {
			d.values = append(d.values, v)
			d.counts = append(d.counts, 0)
		}
		d.counts[len(d.counts)-1]++
	}
	for i, c := range coefficients {
		d.index[i] = -1
		for n, v := range d.values {
			if math.Abs(math.Abs(c)-v) <= apart {
				d.index[i] = n
			}
		}
	}
	return d
}

// asRoots finds factors √n_j with whole n_j: the squares of the values then
// have rational ratios.
func (d *distinctValues) asRoots() (factors []Exact, a, b int, ok bool) {
	nums, dens, common := make([]int, len(d.values)), make([]int, len(d.values)), 1
	for j, v := range d.values {
		ratio := v / d.values[0]
		num, den, ok := rational(ratio*ratio, maxDivisor)
		if !ok {
			return nil, 0, 0, false
		}
		nums[j], dens[j] = num, den
		if common = common / gcd(common, den) * den; common > maxDivisor {
			return nil, 0, 0, false
		}
	}
	divisor, share := 0, 0
	for j := range nums {
		nums[j] *= common / dens[j]
		share = gcd(share, nums[j])
	}
	for j := range nums {
		nums[j] /= share
		divisor += nums[j] * d.counts[j]
		outside, inside := squarePart(nums[j])
		if inside > maxRadicand {
			return nil, 0, 0, false
		}
		factors = append(factors, whole(outside, inside))
	}
	return factors, divisor, 0, divisor <= maxDivisor
}

// rational returns num/den = x ≥ 0 in lowest terms by continued fractions, if
// there is one with den up to limit.
func rational(x float64, limit int) (num, den int, ok bool) {
	p0, q0, p1, q1 := 0, 1, 1, 0
	for rest := x; ; {
		whole := math.Floor(rest)
		if whole > 1e6 {
			return 0, 0, false
		}
		n := int(whole)
		p0, q0, p1, q1 = p1, q1, n*p1+p0, n*q1+q0
		if q1 > limit {
			return 0, 0, false
		}
		if math.Abs(x-float64(p1)/float64(q1)) < closedTolerance {
			return p1, q1, true
		}
		if rest -= whole; rest < 1e-9 {
			return 0, 0, false
		}
		rest = 1 / rest
	}
}

// squarePart splits n into outside²·inside, inside free of squares.
func squarePart(n int) (outside, inside int) {
	outside, inside = 1, n
	for f := 2; f*f <= inside; f++ {
		for inside%(f*f) == 0 {
			inside /= f * f
			outside *= f
		}
	}
	return outside, inside
}

// asCosines finds factors 2cos(2πk/n) under a whole divisor.
func (d *distinctValues) asCosines() (factors []Exact, a, b int, ok bool) {
	largest := 4 / (d.values[0] * d.values[0]) // 2cos is at most 2
	for divisor := 1; divisor <= maxDivisor && float64(divisor) <= largest+1e-6; divisor++ {
		factors = factors[:0]
		for _, v := range d.values {
			factor, ok := cosine(v * math.Sqrt(float64(divisor)) / 2)
			if !ok {
				break
			}
			factors = append(factors, factor)
		}
		if len(factors) < len(d.values) || !commonCircle(factors) {
			continue
		}
		if divisor%4 == 0 && allEven(factors) {
			divisor /= 4
			for j := range factors {
				factors[j].A /= 2
			}
		}
		return factors, divisor, 0, true
	}
	return nil, 0, 0, false
}

// cosine writes 2t as 2cos(2πk/n), or simpler where it is whole or a root.
func cosine(t float64) (Exact, bool) {
	if math.Abs(t-1) < closedTolerance { // where the angle would be inexact
		return whole(2, 1), true
	}
	if t > 1 {
		return Exact{}, false
	}
	k, n, ok := rational(math.Acos(t)/(2*math.Pi), maxCircle)
	if !ok || math.Abs(math.Cos(2*math.Pi*float64(k)/float64(n))-t) > closedTolerance {
		return Exact{}, false
	}
	switch n {
	case 6:
		return whole(1, 1), true
	case 8:
		return whole(1, 2), true
	case 12:
		return whole(1, 3), true
	}
	return Exact{A: 2, M: 1, K: k, N: n}, true
}

// commonCircle tells whether the angles are multiples of one fraction of a
// circle, as on a ring.
func commonCircle(factors []Exact) bool {
	common := 1
	for _, f := range factors {
		if common = common / gcd(common, f.N) * f.N; common > maxCircle {
			return false
		}
	}
	return true
}

func allEven(factors []Exact) bool {
	for _, f := range factors {
		if f.A%2 != 0 {
			return false
		}
	}
	return true
}
