package symmetry

import (
	"math"
	"strings"

	"lobewright/symmetry/message"
)

// A Content tells how many copies of an irrep a representation holds.
type Content struct {
	Irrep  Irrep
	Copies int
}

// Irrep returns the irrep with a label, in plain characters. The error of an
// unknown label lists those that there are.
func (s *Setting) Irrep(label string) (*Irrep, error) {
	var labels []string
	for i := range s.Irreps {
		if s.Irreps[i].Label == label {
			return &s.Irreps[i], nil
		}
		labels = append(labels, s.Irreps[i].Label)
	}
	return nil, message.Errorf("%s has no irrep %q: it has %s", s.Symbol, label, strings.Join(labels, " "))
}

// Reduce splits a representation, given by one real character a class, into
// irreps: n = (1/h) Σ_R χ(R)·χ_irrep(R), half of it for a pair of complex
// conjugates, for which Σ χ² is 2h. It returns those with copies > 0 in the
// irreps' order, and an error if the characters are those of no representation.
func (s *Setting) Reduce(characters []float64) ([]Content, error) {
	if len(characters) != len(s.Classes) {
		return nil, message.Errorf("%d characters for the %d classes of %s", len(characters), len(s.Classes), s.Symbol)
	}
	var out []Content
	for _, ir := range s.Irreps {
		sum := 0.0
		for c, class := range s.Classes {
			sum += float64(len(class.Members)) * characters[c] * ir.Characters[c]
		}
		sum /= float64(s.Order())
		if ir.ComplexPair {
			sum /= 2
		}
		copies := math.Round(sum)
		if math.Abs(sum-copies) > 1e-6 || copies < 0 {
			return nil, message.Errorf("the characters are those of no representation of %s: %s would occur %.3f times", s.Symbol, ir.Label, sum)
		}
		if copies > 0 {
			out = append(out, Content{ir, int(copies)})
		}
	}
	return out, nil
}

// Multiply returns the content of the direct product of irreps of a finite
// group, given by their labels; for infinite groups see MultiplyInfinite.
func (s *Setting) Multiply(labels ...string) ([]Content, error) {
	characters := make([]float64, len(s.Classes))
	for c := range characters {
		characters[c] = 1
	}
	for _, label := range labels {
		ir, err := s.Irrep(label)
		if err != nil {
			return nil, err
		}
		for c := range characters {
			characters[c] *= ir.Characters[c]
		}
	}
	return s.Reduce(characters)
}

// Squares returns the contents of the symmetric and the antisymmetric square
// of an irrep of a finite group: χ±(R) = (χ(R)² ± χ(R²))/2.
func (s *Setting) Squares(label string) (symmetric, antisymmetric []Content, err error) {
	ir, err := s.Irrep(label)
	if err != nil {
		return nil, nil, err
	}
	plus, minus := make([]float64, len(s.Classes)), make([]float64, len(s.Classes))
	for c, class := range s.Classes {
		r := class.Members[0]
		square := ir.Characters[s.Operations[s.Product(r, r)].Class]
		plus[c] = (ir.Characters[c]*ir.Characters[c] + square) / 2
		minus[c] = (ir.Characters[c]*ir.Characters[c] - square) / 2
	}
	if symmetric, err = s.Reduce(plus); err != nil {
		return nil, nil, err
	}
	antisymmetric, err = s.Reduce(minus)
	return symmetric, antisymmetric, err
}

// InfiniteIrrepByLabel reads the label of an irrep of C∞v, D∞h or Kh: "Σg+",
// "Πu", "Δ", "Dg".
func InfiniteIrrepByLabel(symbol, label string) (Irrep, error) {
	for lambda := 0; lambda <= maxLambda; lambda++ {
		for _, gerade := range []int{1, -1, 0} {
			for _, mirror := range []int{1, -1, 0} {
				if ir, err := InfiniteIrrep(symbol, lambda, gerade, mirror); err == nil && ir.Label == label {
					return ir, nil
				}
			}
		}
	}
	examples := map[string]string{"C∞v": "Σ+ Σ- Π Δ Φ …", "D∞h": "Σg+ Σg- Πg Δg … Σu+ Σu- Πu Δu …", "Kh": "Sg Pg Dg … Su Pu Du …"}
	return Irrep{}, message.Errorf("%s has no irrep %q: it has %s", symbol, label, examples[symbol])
}

// MultiplyInfinite returns the content of the direct product of two irreps of
// C∞v, D∞h or Kh, and, where they are equal, of its symmetric and
// antisymmetric part (else nil). Angular momenta about the axis add up to
// |Λ±Λ′|, and Σ+ and Σ− arise together, Σ− in the antisymmetric square; those
// of Kh to |l−l′| … l+l′, alternately symmetric and antisymmetric from the top.
func MultiplyInfinite(symbol string, a, b Irrep) (content, symmetric, antisymmetric []Content, err error) {
	parity := a.Gerade * b.Gerade
	equal := a.Label == b.Label
	add := func(list *[]Content, lambda, mirror int) {
		var ir Irrep
		if ir, err = InfiniteIrrep(symbol, lambda, parity, mirror); err == nil {
			*list = append(*list, Content{ir, 1})
		}
	}
	both := func(lambda, mirror int, even bool) {
		add(&content, lambda, mirror)
		switch {
		case equal && even:
			add(&symmetric, lambda, mirror)
		case equal:
			add(&antisymmetric, lambda, mirror)
		}
	}
	low, high := a.Lambda-b.Lambda, a.Lambda+b.Lambda
	if low < 0 {
		low = -low
	}
	if high > maxLambda {
		return nil, nil, nil, message.Errorf("the product goes beyond angular momentum %d", maxLambda)
	}
	switch {
	case symbol == "Kh":
		for l := low; l <= high; l++ {
			both(l, 0, (high-l)%2 == 0)
		}
	case a.Lambda == 0 && b.Lambda == 0:
		both(0, a.Mirror*b.Mirror, true)
	case low == 0:
		both(0, 1, true)
		both(0, -1, false)
		both(high, 0, true)
	case a.Lambda == 0 || b.Lambda == 0:
		both(high, 0, true)
	default:
		both(low, 0, true)
		both(high, 0, true)
	}
	return content, symmetric, antisymmetric, err
}
