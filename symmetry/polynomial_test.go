package symmetry

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

func itoa(n int) string { return strconv.Itoa(n) }

func atoi(s string) int {
	n, err := strconv.Atoi(s)
	if err != nil {
		panic(err)
	}
	return n
}

// valueOf evaluates a printed function ("-2xy", "√3(x2-y2)", "x(x2-3y2)",
// "Ry") at a place. A rotation has the value of its axial vector; that it is
// one is told beside. The parser knows nothing of the code that prints.
func valueOf(text string, r mgl64.Vec3) (value float64, axial bool) {
	p := &reader{text: []rune(text), at: r}
	v := p.sum()
	if p.pos != len(p.text) {
		panic(fmt.Sprintf("cannot read %q at %d", text, p.pos))
	}
	return v, strings.Contains(text, "R")
}

type reader struct {
	text []rune
	pos  int
	at   mgl64.Vec3
}

func (p *reader) peek() rune {
	if p.pos < len(p.text) {
		return p.text[p.pos]
	}
	return 0
}

func (p *reader) sum() float64 {
	total, sign := 0.0, 1.0
	for {
		if c := p.peek(); c == '-' || c == '+' {
			if c == '-' {
				sign = -sign
			}
			p.pos++
		}
		total += sign * p.product()
		sign = 1
		if c := p.peek(); c != '+' && c != '-' {
			return total
		}
	}
}

func (p *reader) product() float64 {
	v := 1.0
	if d := p.digits(); d != "" {
		v = float64(atoi(d))
		if p.peek() == '.' {
			p.pos++
			fraction := p.digits()
			v += float64(atoi(fraction)) / math.Pow(10, float64(len(fraction)))
		}
	}
	for {
		switch c := p.peek(); c {
		case '√':
			p.pos++
			v *= math.Sqrt(float64(atoi(p.digits())))
		case '(':
			p.pos++
			v *= p.sum()
			p.pos++
		case 'R':
			p.pos++
		case 'x', 'y', 'z':
			p.pos++
			e := 1
			if d := p.digits(); d != "" {
				e = atoi(d)
			}
			v *= math.Pow(p.at[strings.IndexRune("xyz", c)], float64(e))
		default:
			return v
		}
	}
}

func (p *reader) digits() string {
	from := p.pos
	for p.peek() >= '0' && p.peek() <= '9' {
		p.pos++
	}
	return string(p.text[from:p.pos])
}

// places are in general position, enough of them to tell cubic forms apart.
var places = func() []mgl64.Vec3 {
	var out []mgl64.Vec3
	for i := range 24 {
		f := float64(i)
		out = append(out, mgl64.Vec3{math.Sin(1 + 2.3*f), math.Cos(2 + 1.7*f), math.Sin(0.4 + 3.1*f)})
	}
	return out
}()

// spanned tells whether a function is a combination of others, by its values.
// The cubic functions of axial groups stand for more than their polynomial
// (z3 for z(2z2-3x2-3y2)), in the published list as in ours: by name.
func spanned(f string, others []string) bool {
	rows := len(places)
	var same []string
	_, axial := valueOf(f, places[0])
	for _, o := range others {
		if _, a := valueOf(o, places[0]); a == axial {
			same = append(same, o)
		}
	}
	if len(same) == 0 {
		return false
	}
	m, v := mat.NewDense(rows, len(same), nil), mat.NewVecDense(rows, nil)
	for r, at := range places {
		x, _ := valueOf(f, at)
		v.SetVec(r, x)
		for c, o := range same {
			x, _ := valueOf(o, at)
			m.Set(r, c, x)
		}
	}
	var svd mat.SVD
	svd.Factorize(m, mat.SVDThin)
	rank := svd.Rank(1e-10)
	if rank == 0 {
		return false
	}
	var x mat.VecDense
	svd.SolveVecTo(&x, v, rank)
	var rest mat.VecDense
	rest.MulVec(m, &x)
	rest.SubVec(&rest, v)
	return mat.Norm(&rest, 2) < 1e-9
}

func TestReaderOfFunctionsKnowsWhatItReads(t *testing.T) {
	at := mgl64.Vec3{2, 3, 5}
	for text, want := range map[string]float64{
		"x": 2, "-2xy": -12, "√3(x2-y2)": math.Sqrt(3) * -5, "2z2-x2-y2": 37, "x(x2-3y2)": 2 * (4 - 27), "Ry": 3, "2√3xz": 2 * math.Sqrt(3) * 10, "-y(3x2-y2)": -9,
	} {
		if got, _ := valueOf(text, at); math.Abs(got-want) > 1e-12 {
			t.Errorf("%s = %v, want %v", text, got, want)
		}
	}
	if spanned("x2", []string{"y2", "z2"}) || !spanned("x2", []string{"x2+y2", "y2"}) {
		t.Error("spans are not told apart")
	}
}
