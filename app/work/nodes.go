package work

import (
	"math"
	"slices"
	"strconv"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals"
	"lobewright/symmetry"
)

// A NodalPlane is a plane through the origin on which a group orbital vanishes
// by symmetry: the reflection in it changes the sign of the orbital.
type NodalPlane struct {
	// Name is that of the reflection: "σv(xz)"; in a linear molecule "σh" or
	// "σv" with the angle of the plane counted from x: "σv(90°)".
	Name string
	// Normal is a unit vector in the working frame.
	Normal mgl64.Vec3
}

// NodalPlanes are all nodal planes that a group orbital has by symmetry, in the
// order of the operations. Other nodes, those between lobes of unequal size, are
// left to distances and energies. A single atom has none here.
func (o *Orbitals) NodalPlanes(orbital *orbitals.GroupOrbital) []NodalPlane {
	setting := o.Fit.Setting
	if setting.Infinite() {
		return o.linearNodes(orbital)
	}
	var out []NodalPlane
	for r, sign := range o.Symmetries(orbital) {
		if op := setting.Operations[r]; sign < 0 && isReflection(op) {
			out = append(out, NodalPlane{op.Name, op.Axis})
		}
	}
	return out
}

func isReflection(op symmetry.Operation) bool { return op.Turn.Improper && op.Turn.Num == 0 }

// linearNodes are the nodal planes in C∞v and D∞h. A partner is a multiple of
// cos(Λφ − θ), which is zero on Λ planes through z, and changes its sign under σh
// if its parity under the inversion is not that of Λ.
func (o *Orbitals) linearNodes(orbital *orbitals.GroupOrbital) []NodalPlane {
	irrep := o.Irreps[orbital.Irrep]
	if o.Fit.Setting.Symbol == "Kh" {
		return nil
	}
	var out []NodalPlane
	if l := irrep.Lambda; l > 0 {
		theta := o.azimuth(orbital, l)
		for k := range l {
			degrees := math.Mod(math.Mod((theta+90+180*float64(k))/float64(l), 180)+180, 180)
			if whole := math.Round(degrees); math.Abs(degrees-whole) < 1e-6 {
				degrees = math.Mod(whole, 180)
			}
			sin, cos := sincos(degrees)
			out = append(out, NodalPlane{"σv(" + shortDegrees(degrees) + ")", mgl64.Vec3{-sin, cos, 0}})
		}
		slices.SortFunc(out, func(a, b NodalPlane) int {
			return compareAngles(a.Normal, b.Normal)
		})
	}
	if odd := irrep.Lambda%2 != 0; irrep.Gerade != 0 && (irrep.Gerade < 0) != odd {
		out = append(out, NodalPlane{"σh", mgl64.Vec3{0, 0, 1}})
	}
	return out
}

// azimuth is θ (degrees) of a partner cos(Λφ − θ), from the functions of the
// shell that has the largest coefficient.
func (o *Orbitals) azimuth(orbital *orbitals.GroupOrbital, lambda int) float64 {
	largest := 0
	for i, c := range orbital.Coefficients {
		if math.Abs(c) > math.Abs(orbital.Coefficients[largest]) {
			largest = i
		}
	}
	first := o.Functions[largest]
	cosine, sine := 0.0, 0.0
	for i, c := range orbital.Coefficients {
		if f := o.Functions[i]; f.Site == first.Site && f.Shell == first.Shell {
			a, b := orbitals.AzimuthalParts(f, lambda)
			cosine, sine = cosine+c*a, sine+c*b
		}
	}
	return math.Atan2(sine, cosine) * 180 / math.Pi
}

// compareAngles orders vertical planes by their angle from x.
func compareAngles(a, b mgl64.Vec3) int {
	x, y := math.Atan2(-a[0], a[1]), math.Atan2(-b[0], b[1])
	switch {
	case x < y:
		return -1
	case x > y:
		return 1
	}
	return 0
}

// shortDegrees writes an angle with at most one decimal.
func shortDegrees(degrees float64) string {
	return strconv.FormatFloat(math.Round(10*degrees)/10, 'f', -1, 64) + "°"
}
