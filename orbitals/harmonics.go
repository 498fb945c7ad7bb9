package orbitals

import (
	"fmt"
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// MaxShell is the largest l of a shell with named functions: f.
const MaxShell = 3

// shellLetters[l] is the letter of shell l.
const shellLetters = "spdf"

// functionNames[l] lists the real functions of shell l.
var functionNames = [MaxShell + 1][]string{
	{"s"},
	{"px", "py", "pz"},
	{"dz2", "dxz", "dyz", "dx2-y2", "dxy"},
	{"fz3", "fxz2", "fyz2", "fz(x2-y2)", "fxyz", "fx(x2-3y2)", "fy(3x2-y2)"},
}

// orders[l][i] is m of function i of shell l: cosine functions have m > 0,
// sine functions m < 0.
var orders = [MaxShell + 1][]int{
	{0},
	{1, -1, 0},
	{0, 1, -1, 2, -2},
	{0, 1, -1, 2, -2, 3, -3},
}

// FunctionNames returns the names of the real functions of shell l, 0 to
// MaxShell, in the order in which every vector and matrix of this package
// has them. The slice is the caller's.
func FunctionNames(l int) []string {
	return append([]string(nil), functionNames[l]...)
}

// functionNamed returns shell and index of a function by its name.
func functionNamed(name string) (l, index int, ok bool) {
	for l, names := range functionNames {
		for i, n := range names {
			if n == name {
				return l, i, true
			}
		}
	}
	return 0, 0, false
}

// The factors that normalize the polynomials on the unit sphere.
var (
	factorS   = math.Sqrt(1 / (4 * math.Pi))
	factorP   = math.Sqrt(3 / (4 * math.Pi))
	factorD0  = math.Sqrt(5 / (16 * math.Pi))
	factorD   = math.Sqrt(15 / (4 * math.Pi))
	factorD2  = math.Sqrt(15 / (16 * math.Pi))
	factorF0  = math.Sqrt(7 / (16 * math.Pi))
	factorF1  = math.Sqrt(21 / (32 * math.Pi))
	factorF2  = math.Sqrt(105 / (16 * math.Pi))
	factorFxy = math.Sqrt(105 / (4 * math.Pi))
	factorF3  = math.Sqrt(35 / (32 * math.Pi))
)

// Harmonics returns the values of the real functions of shell l, 0 to
// MaxShell, in a direction of any length but zero. Each is normalized on the
// unit sphere; order as in FunctionNames.
func Harmonics(l int, direction mgl64.Vec3) []float64 {
	r := direction.Normalize()
	x, y, z := r[0], r[1], r[2]
	switch l {
	case 0:
		return []float64{factorS}
	case 1:
		return []float64{factorP * x, factorP * y, factorP * z}
	case 2:
		return []float64{
			factorD0 * (2*z*z - x*x - y*y),
			factorD * x * z,
			factorD * y * z,
			factorD2 * (x*x - y*y),
			factorD * x * y,
		}
	case 3:
		return []float64{
			factorF0 * z * (2*z*z - 3*x*x - 3*y*y),
			factorF1 * x * (4*z*z - x*x - y*y),
			factorF1 * y * (4*z*z - x*x - y*y),
			factorF2 * z * (x*x - y*y),
			factorFxy * x * y * z,
			factorF3 * x * (x*x - 3*y*y),
			factorF3 * y * (3*x*x - y*y),
		}
	}
	panic(fmt.Sprintf("orbitals: shell %d has no named functions", l))
}

// AzimuthalParts are the parts that a function has of cos mφ and of sin mφ
// about z, for m > 0; both are 0 where its shell has none.
func AzimuthalParts(f Function, m int) (cosine, sine float64) {
	if m < 1 || m > f.Shell {
		return 0, 0
	}
	return f.Vector[partnerIndex(f.Shell, m, 0)], f.Vector[partnerIndex(f.Shell, m, 1)]
}

// Order is m of a function of shell l, by its index in FunctionNames: positive
// for cos mφ, negative for sin |m|φ.
func Order(l, index int) int { return orders[l][index] }
