package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// XInputLabels is the key of Rule.X in FrameFile where D2, D2h or C2v lie along
// the axes of the input and are labelled by them.
const XInputLabels = "input-axes-label"

// inputFrame is the rule of FrameFile with the turn from the default frame to
// the axes of the input.
//
// Positions have errors, and the axes of the least-squares ideal points are off
// those of the input by as much even where they are meant to lie along them.
// Where the ideal points can be laid along them within the tolerance, they are;
// else no axis would be named by its letter, and no p function would belong to
// one irrep.
func (f *Fit) inputFrame() (Rule, mgl64.Mat3) {
	rule := Rule{FrameFile, ZInput, XInput, []string{SourceOwn}}
	total := f.least.rotation.Transpose()
	if along, ok := f.alongInput(total); ok {
		total = along
	}
	if k := f.Setting.kind; k.rectangular() && k.standardIn(total) {
		rule.X = XInputLabels
	}
	return rule, total
}

// rectangular tells whether the labels of the group depend on which of its axes
// is called x, y or z.
func (k kind) rectangular() bool {
	return k.n == 2 && (k.family == dihedral || k.family == prismatic || k.family == pyramidal)
}

// alongInput looks for a frame along the axes of the input near the given turn.
func (f *Fit) alongInput(total mgl64.Mat3) (mgl64.Mat3, bool) {
	fits := func(w mgl64.Mat3) bool {
		angle := math.Acos(mgl64.Clamp((w.Mul3(total.Transpose()).Trace()-1)/2, -1, 1))
		if angle > lineTolerance {
			return false
		}
		deviation, _ := f.deviationIn(w)
		return deviation <= math.Max(f.Tolerance, f.least.deviation)
	}
	k := f.Setting.kind
	if k.infinite() {
		z := total.Col(2)[2]
		w := mgl64.Diag3(mgl64.Vec3{1, math.Copysign(1, z), math.Copysign(1, z)})
		deviation, _ := f.deviationIn(w)
		return w, math.Abs(z) > math.Cos(lineTolerance) && deviation <= math.Max(f.Tolerance, f.least.deviation)
	}
	free := k.family == cyclic || k.family == cyclicHorizontal || k.family == improperCyclic
	if !free && k.n != 1 {
		settings := append([]Frame{{Turn: mgl64.Ident3()}}, k.rules(Rule{})...)
		for _, cube := range (kind{family: octahedralProper}).elements() {
			for _, s := range settings {
				if w := cube.Mul3(s.Turn); fits(w) {
					return cleanMatrix(orthonormal(w)), true
				}
			}
		}
	}
	hasAxis := k.n > 1 || k.family == cyclicHorizontal
	if z := total.Col(2); k.axial() && hasAxis {
		for i, x := range z {
			target := mgl64.Vec3{}
			target[i] = math.Copysign(1, x)
			if math.Abs(x) < math.Cos(lineTolerance) {
				continue
			}
			if w := orthonormal(mgl64.QuatBetweenVectors(z, target).Mat4().Mat3().Mul3(total)); fits(w) {
				return cleanMatrix(w), true
			}
		}
	}
	return total, false
}

// deviationIn is the farthest distance of an input point from its ideal place,
// and its index, if w takes the default frame to the axes of the input.
func (f *Fit) deviationIn(w mgl64.Mat3) (deviation float64, worst int) {
	turn := w.Mul3(f.fromDefault.Transpose())
	for k, q := range f.input {
		if d := q.Sub(f.Origin).Sub(turn.Mul3x1(f.Ideal[k])).Len(); d > deviation+1e-12 {
			deviation, worst = d, k
		}
	}
	return deviation, worst
}

// leastSquares is a Fit in its default frame, before the ideal points are laid
// along the axes of the input.
type leastSquares struct {
	rotation  mgl64.Mat3 // from the axes of the input
	deviation float64
	worst     int
}

// keep notes the points and the least-squares fit to them.
func (f *Fit) keep(c *cloud) {
	f.least = leastSquares{f.Rotation, f.Deviation, f.Worst}
	f.input = make([]mgl64.Vec3, len(c.at))
	for k, q := range c.at {
		f.input[k] = q.Add(c.centre)
	}
}

// placeInInput sets how the input goes over into the frame, and how far the
// ideal points then lie from it.
func (f *Fit) placeInInput() {
	f.Rotation = orthonormal(f.fromDefault.Mul3(f.least.rotation))
	f.Deviation, f.Worst = f.least.deviation, f.least.worst
	if f.Rule.Name != FrameFile {
		return
	}
	moved := !equalTo(f.Rotation, mgl64.Ident3(), 1e-12)
	f.Rotation = mgl64.Ident3()
	if moved {
		f.Deviation, f.Worst = f.deviationIn(f.fromDefault)
	}
}

// keepsLabels tells whether every irrep has its name again after a turn of the
// group away from its standard axes.
func (k kind) keepsLabels(w mgl64.Mat3) bool {
	if !k.standardIn(w) {
		return true
	}
	s := newSetting(k)
	for i, j := range ExchangeNames(s, s, w).Irreps {
		if i != j {
			return false
		}
	}
	return true
}
