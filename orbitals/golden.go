package orbitals

import (
	"math"
	"slices"
	"unicode/utf8"
)

// A golden is x + yτ with the golden ratio τ = (1 + √5)/2, τ² = τ + 1. These
// numbers have a Euclidean algorithm (with the norm as measure); their units
// are ±τ^k.
type golden struct{ x, y int }

var tau = (1 + math.Sqrt(5)) / 2

func (a golden) value() float64 { return float64(a.x) + float64(a.y)*tau }

func (a golden) plus(b golden) golden { return golden{a.x + b.x, a.y + b.y} }

func (a golden) times(b golden) golden {
	return golden{a.x*b.x + a.y*b.y, a.x*b.y + a.y*b.x + a.y*b.y}
}

func (a golden) scaled(n int) golden { return golden{a.x * n, a.y * n} }

// conjugate takes √5 to −√5.
func (a golden) conjugate() golden { return golden{a.x + a.y, -a.y} }

func (a golden) norm() int { return a.x*a.x + a.x*a.y - a.y*a.y }

// over is the quotient, rounded.
func (a golden) over(b golden) golden {
	n := float64(b.norm())
	p := a.times(b.conjugate())
	return golden{int(math.Round(float64(p.x) / n)), int(math.Round(float64(p.y) / n))}
}

// goldenGCD is a common divisor of largest norm, up to a unit.
func goldenGCD(a, b golden) golden {
	for b != (golden{}) {
		q := a.over(b).times(b)
		a, b = b, golden{a.x - q.x, a.y - q.y}
	}
	return a
}

// A goldenRoot is the number·√m.
type goldenRoot struct {
	golden
	m int
}

// rootsBeside are the roots that stand beside √5 in icosahedral groups.
var rootsBeside = []int{1, 2, 3, 6}

// asGolden finds factors (x + yτ)√m; the ratios of the values then are such
// numbers over whole ones.
func (d *distinctValues) asGolden() (factors []Exact, a, b int, ok bool) {
	ratios, ok := d.goldenRatios(rootsBeside, 1)
	if !ok {
		return nil, 0, 0, false
	}
	best := math.MaxInt
	for _, m := range rootsBeside {
		if !slices.ContainsFunc(ratios, func(r goldenRoot) bool { return r.m == m }) {
			continue // √m would only come to all numbers
		}
		numbers := make([]goldenRoot, len(ratios))
		var common golden
		for j, r := range ratios {
			outside, inside := squarePart(r.m * m)
			numbers[j] = goldenRoot{r.scaled(outside), inside}
			common = goldenGCD(common, numbers[j].golden)
		}
		for _, unit := range units {
			f, p, q, ok := d.inRootFive(numbers, common, unit)
			if !ok {
				continue
			}
			if length := textLength(f, p, q); length < best {
				best, factors, a, b = length, f, p, q
			}
		}
	}
	return factors, a, b, factors != nil
}

// units are τ^k for small k, and these times √5: factors that can be common to
// all numbers and to the divisor without making them longer, or shorter.
var units = func() []golden {
	powers := []golden{{1, 0}, {0, 1}, {-1, 1}, {1, 1}, {2, -1}, {1, 2}, {-3, 2}, {2, 3}, {5, -3}}
	for _, p := range powers[:9] {
		powers = append(powers, p.times(golden{-1, 2}))
	}
	return powers
}()

// textLength is how long the factors and the divisor are to read.
func textLength(factors []Exact, a, b int) int {
	n := utf8.RuneCountInString(rootText(a, b))
	for _, f := range factors {
		n += utf8.RuneCountInString(f.String())
	}
	return n
}

// goldenRatios writes the values' ratios to the largest, raised to a power, as
// (x + yτ)√m over a common whole number, which is left out.
func (d *distinctValues) goldenRatios(roots []int, power float64) ([]goldenRoot, bool) {
	ratios := make([]goldenRoot, len(d.values))
	dens, common := make([]int, len(d.values)), 1
	for j, v := range d.values {
		var ok bool
		if ratios[j], dens[j], ok = goldenRatio(math.Pow(v/d.values[0], power), roots); !ok {
			return nil, false
		}
		if common = common / gcd(common, dens[j]) * dens[j]; common > maxDivisor {
			return nil, false
		}
	}
	for j := range ratios {
		ratios[j].golden = ratios[j].scaled(common / dens[j])
	}
	return ratios, true
}

// goldenRatio writes r in (0, 1] as (x + yτ)√m/den.
func goldenRatio(r float64, roots []int) (goldenRoot, int, bool) {
	for _, m := range roots {
		q := r / math.Sqrt(float64(m))
		for den := 1; den <= maxFactor; den++ {
			span := den + 8
			rest := q*float64(den) + float64(span)*tau
			for y := -span; y <= span; y++ {
				x := math.Round(rest)
				if math.Abs(rest-x) < closedTolerance*float64(den) {
					return goldenRoot{golden{int(x), y}, m}, den, true
				}
				rest -= tau
			}
		}
	}
	return goldenRoot{}, 0, false
}

// inRootFive divides numbers by a common divisor, multiplies them by a unit,
// writes x + yτ as A + B√5, all doubled where they would be halves otherwise,
// and finds the divisor, which is the sum of squares.
func (d *distinctValues) inRootFive(numbers []goldenRoot, common, unit golden) (factors []Exact, a, b int, ok bool) {
	var sum golden
	share := 0
	for j, n := range numbers {
		g := n.over(common).times(unit)
		if g.value() < 0 {
			g = g.scaled(-1)
		}
		sum = sum.plus(g.times(g).scaled(n.m * d.counts[j]))
		f := Exact{A: 2*g.x + g.y, B: g.y, M: n.m, N: 1}
		factors = append(factors, f)
		share = gcd(gcd(share, f.A), f.B)
	}
	for j := range factors {
		factors[j].A /= share
		factors[j].B /= share
	}
	// The factors were doubled, so the divisor is fourfold.
	a, b = (4*sum.x+2*sum.y)/(share*share), 2*sum.y/(share*share)
	return factors, a, b, small(factors, a, b)
}

// small tells whether the numbers are small enough for agreement with them to
// mean something.
func small(factors []Exact, a, b int) bool {
	for _, f := range factors {
		if max(f.A, -f.A, f.B, -f.B) > maxFactor || max(f.M, -f.M, f.L, -f.L) > maxRadicand {
			return false
		}
	}
	return quadratic(a, b) > 0 && max(a, -a, b, -b) <= maxDivisor
}

// asGoldenRoots finds factors √(x + yτ), the squares of the values being in
// the ratio of such numbers.
func (d *distinctValues) asGoldenRoots() (factors []Exact, a, b int, ok bool) {
	squares, ok := d.goldenRatios([]int{1}, 2)
	if !ok {
		return nil, 0, 0, false
	}
	var common golden
	for _, s := range squares {
		common = goldenGCD(common, s.golden)
	}
	best := math.MaxInt
	for _, unit := range units {
		f, p, q, ok := d.underRoot(squares, common, unit)
		if !ok {
			continue
		}
		if length := textLength(f, p, q); length < best {
			best, factors, a, b = length, f, p, q
		}
	}
	return factors, a, b, factors != nil
}

// underRoot is to squares what inRootFive is to numbers.
func (d *distinctValues) underRoot(squares []goldenRoot, common, unit golden) (factors []Exact, a, b int, ok bool) {
	var sum golden
	share := 0
	for j, s := range squares {
		g := s.over(common).times(unit)
		if g.value() < 0 {
			g = g.scaled(-1)
		}
		sum = sum.plus(g.scaled(d.counts[j]))
		factors = append(factors, Exact{A: 1, M: 2*g.x + g.y, L: g.y, N: 1})
		share = gcd(gcd(share, factors[j].M), factors[j].L)
	}
	for j, f := range factors {
		f.M, f.L = f.M/share, f.L/share
		if f.L == 0 {
			f.A, f.M = squarePart(f.M)
		}
		factors[j] = f
	}
	a, b = (2*sum.x+sum.y)/share, sum.y/share
	return factors, a, b, small(factors, a, b)
}
