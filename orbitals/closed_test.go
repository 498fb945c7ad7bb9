package orbitals

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strconv"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// A closedReader evaluates the printed text of a closed form, so that the text
// is judged and not the structure that it was made from. It knows sums,
// juxtaposed factors, √, cos(…π/…), brackets and one division at the end.
type closedReader struct {
	text []rune
	at   int
}

func (r *closedReader) peek() rune {
	for r.at < len(r.text) && r.text[r.at] == ' ' {
		r.at++
	}
	if r.at == len(r.text) {
		return 0
	}
	return r.text[r.at]
}

func (r *closedReader) accept(c rune) bool {
	if r.peek() == c {
		r.at++
		return true
	}
	return false
}

func (r *closedReader) expect(c rune) {
	if !r.accept(c) {
		panic(fmt.Sprintf("%q is missing at %q", c, string(r.text[r.at:])))
	}
}

func (r *closedReader) integer() (int, bool) {
	start := r.at
	for r.at < len(r.text) && '0' <= r.text[r.at] && r.text[r.at] <= '9' {
		r.at++
	}
	n, err := strconv.Atoi(string(r.text[start:r.at]))
	return n, err == nil
}

// number is a sum of products without functions.
func (r *closedReader) number() float64 {
	sum, sign := 0.0, 1.0
	if r.accept('−') {
		sign = -1
	}
	for {
		sum += sign * r.product()
		switch {
		case r.accept('+'):
			sign = 1
		case r.accept('−'):
			sign = -1
		default:
			return sum
		}
		r.peek()
	}
}

// product multiplies factors until something else comes; none make 1.
func (r *closedReader) product() float64 {
	product := 1.0
	for {
		c := r.peek()
		switch {
		case '0' <= c && c <= '9':
			n, _ := r.integer()
			product *= float64(n)
		case c == '√':
			r.at++
			if r.accept('(') {
				product *= math.Sqrt(r.number())
				r.expect(')')
			} else {
				n, ok := r.integer()
				if !ok {
					panic("√ of nothing")
				}
				product *= math.Sqrt(float64(n))
			}
		case c == '(':
			r.at++
			product *= r.number()
			r.expect(')')
		case c == 'c':
			product *= r.cosine()
		default:
			return product
		}
	}
}

func (r *closedReader) cosine() float64 {
	for _, c := range "cos(" {
		r.expect(c)
	}
	times, ok := r.integer()
	if !ok {
		times = 1
	}
	r.expect('π')
	over := 1
	if r.accept('/') {
		over, _ = r.integer()
	}
	r.expect(')')
	return math.Cos(math.Pi * float64(times) / float64(over))
}

// combination is a sum of products with a function each.
func (r *closedReader) combination(into []float64) {
	sign := 1.0
	if r.accept('−') {
		sign = -1
	}
	for {
		factor := sign * r.product()
		r.expect('φ')
		n, ok := r.integer()
		if !ok || n < 1 || n > len(into) || into[n-1] != 0 {
			panic("a function is wrong")
		}
		into[n-1] = factor
		switch {
		case r.accept('+'):
			sign = 1
		case r.accept('−'):
			sign = -1
		default:
			return
		}
		r.peek()
	}
}

// evaluateClosed returns the coefficients that the text of a closed form means.
func evaluateClosed(text string, n int) (coefficients []float64, err error) {
	defer func() {
		if e := recover(); e != nil {
			err = fmt.Errorf("%q: %v", text, e)
		}
	}()
	r := &closedReader{text: []rune(text)}
	coefficients = make([]float64, n)
	// A bracket that opens the text and closes right before the division is
	// around everything; else it is around the first factor.
	end := matching(r.text)
	whole := end > 0 && r.text[0] == '(' && end+1 < len(r.text) && r.text[end+1] == '/'
	if whole {
		r.expect('(')
	}
	r.combination(coefficients)
	if whole {
		r.expect(')')
	}
	if r.accept('/') {
		divisor := r.product()
		for i := range coefficients {
			coefficients[i] /= divisor
		}
	}
	if r.peek() != 0 {
		return nil, fmt.Errorf("%q: left over %q", text, string(r.text[r.at:]))
	}
	return coefficients, nil
}

// matching is the place of the bracket that closes the first one.
func matching(text []rune) int {
	depth := 0
	for i, c := range text {
		switch c {
		case '(':
			depth++
		case ')':
			if depth--; depth == 0 {
				return i
			}
		}
	}
	return -1
}

// checkClosed holds that the text of a closed form means the coefficients, and
// returns it.
func checkClosed(t testing.TB, coefficients []float64) string {
	t.Helper()
	form, ok := FindClosedForm(coefficients)
	if !ok {
		if form.String() != "" {
			t.Errorf("%q is no empty form", form)
		}
		return ""
	}
	text := form.String()
	got, err := evaluateClosed(text, len(coefficients))
	if err != nil {
		t.Fatal(err)
	}
	for i, c := range coefficients {
		if math.Abs(got[i]-c) > 1e-12 {
			t.Fatalf("%s: coefficient %d is %.16g, not %.16g", text, i+1, got[i], c)
		}
	}
	return text
}

func TestClosedFormsAreWrittenAsInTextbooks(t *testing.T) {
	sqrt := math.Sqrt
	cos := func(k, n float64) float64 { return math.Cos(2 * math.Pi * k / n) }
	for _, c := range []struct {
		want         string
		coefficients []float64
	}{
		{"φ2", []float64{0, 1, 0}},
		{"(φ1 − φ2)/√2", []float64{1 / sqrt(2), -1 / sqrt(2)}},
		{"(φ1 + φ2 + φ3 + φ4)/2", []float64{.5, .5, .5, .5}},
		{"(2φ1 − φ2 − φ3)/√6", []float64{2 / sqrt(6), -1 / sqrt(6), -1 / sqrt(6)}},
		{"(−φ1 − φ2 − φ3 − φ4 + 2φ5 + 2φ6)/√12", []float64{-1 / sqrt(12), -1 / sqrt(12), -1 / sqrt(12), -1 / sqrt(12), 2 / sqrt(12), 2 / sqrt(12)}},
		{"(√3φ1 − φ2)/2", []float64{sqrt(3) / 2, -.5}},
		{"(3φ1 + 4φ2)/5", []float64{.6, .8}},
		{"(φ1 + √2φ2)/√3", []float64{1 / sqrt(3), sqrt(2. / 3)}},
		// A five-ring, j = 1: √(2/5)·cos(2πk/5) and its sine.
		{"(4φ1 + (√5 − 1)φ2 − (1 + √5)φ3 − (1 + √5)φ4 + (√5 − 1)φ5)/√40",
			[]float64{sqrt(.4), sqrt(.4) * cos(1, 5), sqrt(.4) * cos(2, 5), sqrt(.4) * cos(2, 5), sqrt(.4) * cos(1, 5)}},
		{"((1 + √5)φ1 + 2φ2)/√(10 + 2√5)", []float64{tau / sqrt(tau+2), 1 / sqrt(tau+2)}},
		{"(√10φ1 + √(5 − √5)φ2 + √(5 + √5)φ3)/√20", []float64{sqrt(.5), sqrt((5 - sqrt(5)) / 20), sqrt((5 + sqrt(5)) / 20)}},
		// A seven-ring, j = 1.
		{"(2φ1 + 2cos(2π/7)φ2 − 2cos(3π/7)φ3 − 2cos(π/7)φ4 − 2cos(π/7)φ5 − 2cos(3π/7)φ6 + 2cos(2π/7)φ7)/√14",
			[]float64{sqrt(2. / 7), sqrt(2./7) * cos(1, 7), sqrt(2./7) * cos(2, 7), sqrt(2./7) * cos(3, 7), sqrt(2./7) * cos(4, 7), sqrt(2./7) * cos(5, 7), sqrt(2./7) * cos(6, 7)}},
		{"cos(π/8)φ1 + cos(3π/8)φ2", []float64{cos(1, 16), cos(3, 16)}},
		{"", []float64{1 / sqrt(1+math.Pi*math.Pi), math.Pi / sqrt(1+math.Pi*math.Pi)}},
		{"", nil},
		{"", []float64{0, 0}},
	} {
		if got := checkClosed(t, c.coefficients); got != c.want {
			t.Errorf("%v: %q, want %q", c.coefficients, got, c.want)
		}
	}
}

// Group orbitals of rings are cosines of multiples of 2πj/n (E. Hückel, Z.
// Phys. 70, 204 (1931)), so all of them have a closed form.
func TestRingsHaveClosedForms(t *testing.T) {
	for n := 3; n <= 24; n++ {
		var positions []mgl64.Vec3
		for k := range n {
			angle := 2 * math.Pi * float64(k) / float64(n)
			positions = append(positions, mgl64.Vec3{3 * math.Cos(angle), 3 * math.Sin(angle), 0})
		}
		p := project(t, basis(t, sitesAt(t, fmt.Sprintf("D%dh", n), carbon, positions), "C:pz"))
		for _, g := range p.Orbitals {
			if checkClosed(t, g.Coefficients) == "" {
				t.Errorf("ring of %d: %s, partner %d has no closed form: %v", n, p.Irreps[g.Irrep].Label, g.Partner+1, g.Coefficients)
			}
		}
	}
}

func TestClosedFormsOfTextbookSetsMeanTheCoefficients(t *testing.T) {
	var file contentFile
	readCheckValues(t, "content.json", &file)
	for _, c := range file.Cases {
		p := project(t, basis(t, sitesAt(t, c.Group, carbon, c.Positions), chosen(c.Functions)))
		none := 0
		for _, g := range p.Orbitals {
			if checkClosed(t, g.Coefficients) == "" {
				none++
			}
		}
		if none > 0 && len(c.Positions) < 60 {
			t.Errorf("%s, %s: %d of %d group orbitals have no closed form", c.Name, c.Functions, none, len(p.Orbitals))
		}
	}
}

func TestRandomCoefficientsHaveNoClosedForm(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for trial := range 3000 {
		c := make([]float64, 2+trial%7)
		square := 0.0
		for i := range c {
			c[i] = rng.NormFloat64()
			square += c[i] * c[i]
		}
		for i := range c {
			c[i] /= math.Sqrt(square)
		}
		if form, ok := FindClosedForm(c); ok {
			t.Errorf("%v by accident is %s", c, form)
		}
	}
}

func BenchmarkClosedFormsOfCage60(b *testing.B) {
	basis, err := NewBasis(cage60(b), parse(b, "all:s,p")...)
	if err != nil {
		b.Fatal(err)
	}
	p := project(b, basis)
	for b.Loop() {
		for _, g := range p.Orbitals {
			FindClosedForm(g.Coefficients)
		}
	}
}
