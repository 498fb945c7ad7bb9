package notation

import (
	"math"
	"testing"
)

func TestExactNumbersAreRecognized(t *testing.T) {
	for want, x := range map[string]float64{
		"0": 0, "−1": -1, "12": 12, "1/2": 0.5, "−3/2": -1.5, "2/3": 2.0 / 3,
		"√3/2": math.Sqrt(3) / 2, "−√2": -math.Sqrt2, "√6/6": 1 / math.Sqrt(6), "2√2/3": 2 * math.Sqrt2 / 3,
		"(1 + √5)/2": math.Phi, "(1 − √5)/2": 1 - math.Phi, "(√5 − 1)/2": 2 * math.Cos(2*math.Pi/5), "−(1 + √5)/4": math.Cos(4 * math.Pi / 5),
		"2cos(2π/7)": 2 * math.Cos(2*math.Pi/7), "2cos(3π/8)": 2 * math.Cos(6*math.Pi/16), "cos(4π/9)": math.Cos(4 * math.Pi / 9),
	} {
		if got, ok := Exact(x); !ok || got != want {
			t.Errorf("%.15g is written %q, want %q", x, got, want)
		}
	}
	for _, x := range []float64{0.123456, math.Pi, 1e-6, math.NaN(), math.Inf(1), 0.70710} {
		if got, ok := Exact(x); ok {
			t.Errorf("%g is written %q", x, got)
		}
	}
}

func TestDecimalsHaveATrueMinusAndNoNegativeZero(t *testing.T) {
	for _, c := range []struct {
		x    float64
		want string
	}{{-0.00001, "0.0000"}, {math.Copysign(0, -1), "0.0000"}, {-1.5, "−1.5000"}, {2, "2.0000"}} {
		if got := Decimal(c.x, 4); got != c.want {
			t.Errorf("%g is written %s, want %s", c.x, got, c.want)
		}
	}
	if got := Vector([]float64{1, -0.5, math.Copysign(0, -1)}, 3); got != "(1, −0.500, 0)" {
		t.Errorf("vector %s", got)
	}
}
