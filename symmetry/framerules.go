package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// A criterion prefers the frames in which it scores highest; scores that
// differ by less than limit count as equal.
type criterion struct {
	score func(p []mgl64.Vec3) []float64
	limit float64
}

// criteria lists what decides between frames that are not equivalent, in the
// order in which the rules ask.
func (f *framing) criteria() []criterion {
	var list []criterion
	count := func(score func(p []mgl64.Vec3) float64) {
		list = append(list, criterion{func(p []mgl64.Vec3) []float64 { return []float64{score(p)} }, 0.5})
	}
	rectangular := f.kind.n == 2 && (f.kind.family == dihedral || f.kind.family == prismatic)
	if rectangular {
		if f.planar() {
			count(func(p []mgl64.Vec3) float64 { return f.atoms(p, func(v mgl64.Vec3) bool { return f.near(v[0]) }) })
		}
		count(func(p []mgl64.Vec3) float64 { return f.atoms(p, f.onZ) })
		count(func(p []mgl64.Vec3) float64 { return f.bonds(p, f.onZ) })
		count(func(p []mgl64.Vec3) float64 { return f.midpoints(p, f.onZ) })
		list = append(list, criterion{func(p []mgl64.Vec3) []float64 {
			extent := 0.0
			for _, v := range p {
				extent = math.Max(extent, math.Abs(v[2]))
			}
			return []float64{extent}
		}, f.tolerance})
	}
	list = append(list, f.moment(2, 1), f.moment(2, 3))
	onXZ := func(v mgl64.Vec3) bool { return f.near(v[1]) && !f.onZ(v) }
	switch f.kind.family {
	case dihedral, prismatic, antiprismatic:
		count(func(p []mgl64.Vec3) float64 { return f.atoms(p, f.onX) })
		count(func(p []mgl64.Vec3) float64 { return f.atoms(p, onXZ) })
		count(func(p []mgl64.Vec3) float64 { return f.bonds(p, f.onX) })
		count(func(p []mgl64.Vec3) float64 { return f.midpoints(p, f.onX) })
	case pyramidal:
		plane := onXZ
		if f.kind.n == 2 {
			plane = func(v mgl64.Vec3) bool { return f.near(v[0]) && !f.onZ(v) }
		}
		count(func(p []mgl64.Vec3) float64 { return f.atoms(p, plane) })
		count(func(p []mgl64.Vec3) float64 { return f.bonds(p, plane) })
		count(func(p []mgl64.Vec3) float64 { return f.midpoints(p, plane) })
	case tetrahedralProper, tetrahedral, pyritohedral:
		diagonal := func(v mgl64.Vec3) bool {
			return v[0] > f.tolerance && f.near(v[0]-v[1]) && f.near(v[1]-v[2])
		}
		list = append(list, f.firstOrbits(diagonal), f.product())
		return list
	}
	return append(list,
		f.firstOrbits(func(v mgl64.Vec3) bool { return f.onX(v) && v[0] > 0 }),
		f.firstOrbits(func(v mgl64.Vec3) bool { return onXZ(v) && v[0] > 0 }),
		f.moment(0, 1), f.moment(0, 3), f.moment(1, 1), f.moment(1, 3))
}

func (f *framing) near(x float64) bool   { return math.Abs(x) <= f.tolerance }
func (f *framing) onZ(v mgl64.Vec3) bool { return math.Hypot(v[0], v[1]) <= f.tolerance }
func (f *framing) onX(v mgl64.Vec3) bool {
	return math.Hypot(v[1], v[2]) <= f.tolerance && !f.near(v[0])
}
func (f *framing) planarIn(axis int) bool {
	for _, v := range f.points {
		if !f.near(v[axis]) {
			return false
		}
	}
	return true
}

// planar tells whether all points lie in one plane of the axes in hand.
func (f *framing) planar() bool { return f.planarIn(0) || f.planarIn(1) || f.planarIn(2) }

// atoms counts the points that lie somewhere.
func (f *framing) atoms(p []mgl64.Vec3, there func(mgl64.Vec3) bool) float64 {
	n := 0.0
	for _, v := range p {
		if there(v) {
			n++
		}
	}
	return n
}

// bonds counts the links both ends of which lie somewhere.
func (f *framing) bonds(p []mgl64.Vec3, there func(mgl64.Vec3) bool) float64 {
	n := 0.0
	for _, l := range f.links {
		if there(p[l[0]]) && there(p[l[1]]) {
			n++
		}
	}
	return n
}

// midpoints counts the links whose middle lies somewhere: those that an axis
// crosses.
func (f *framing) midpoints(p []mgl64.Vec3, there func(mgl64.Vec3) bool) float64 {
	n := 0.0
	for _, l := range f.links {
		if there(p[l[0]].Add(p[l[1]]).Mul(0.5)) {
			n++
		}
	}
	return n
}

// moment is Σ Z·x^power along an axis: its sign gives the axis a sense. What a
// displacement of one atom by the tolerance can change counts as nothing.
func (f *framing) moment(axis, power int) criterion {
	heaviest, far := 0.0, 1.0
	for k, v := range f.points {
		heaviest = math.Max(heaviest, float64(f.kinds[k]))
		far = math.Max(far, v.Len())
	}
	return criterion{func(p []mgl64.Vec3) []float64 {
		sum := 0.0
		for k, v := range p {
			sum += float64(f.kinds[k]) * math.Pow(v[axis], float64(power))
		}
		return []float64{sum}
	}, f.tolerance * heaviest * float64(power) * math.Pow(far, float64(power-1))}
}

// product is Σ Z·xyz, the moment that tells the two ways apart in which a
// tetrahedral group can lie on its axes.
func (f *framing) product() criterion {
	c := f.moment(0, 3)
	return criterion{func(p []mgl64.Vec3) []float64 {
		sum := 0.0
		for k, v := range p {
			sum += float64(f.kinds[k]) * v[0] * v[1] * v[2]
		}
		return []float64{sum}
	}, c.limit}
}

// firstOrbits counts, place by place in the order of the orbits, the points
// that lie somewhere: the first orbit that differs decides.
func (f *framing) firstOrbits(there func(mgl64.Vec3) bool) criterion {
	return criterion{func(p []mgl64.Vec3) []float64 {
		counts := make([]float64, f.tied[len(f.tied)-1]+1)
		for i, orbit := range f.orbits {
			for _, k := range orbit {
				if there(p[k]) {
					counts[f.tied[i]]++
				}
			}
		}
		return counts
	}, 0.5}
}

// turns lists the rotations, from the axes in hand, to all frames in which the
// group is written alike and of which the rules may choose one.
func (f *framing) turns() []mgl64.Mat3 {
	k := f.kind
	switch k.family {
	case tetrahedralProper, tetrahedral, pyritohedral:
		return kind{family: octahedralProper}.elements()
	case octahedralProper, octahedral, icosahedralProper, icosahedral:
		return f.proper
	case dihedral, prismatic:
		if k.n == 2 {
			return kind{family: octahedralProper}.elements()
		}
		return kind{dihedral, 2 * k.n}.elements()
	case pyramidal, antiprismatic:
		return kind{dihedral, 2 * k.n}.elements()
	}
	switch {
	case k.family != cyclicHorizontal && k.n == 1: // C1, Ci
		return f.momentAxes(mgl64.Vec3{})
	case k.family == cyclicHorizontal && k.n <= 2: // Cs, C2h
		return f.momentAxes(mgl64.Vec3{0, 0, 1})
	}
	return f.towardFirstOrbit(mgl64.Ident3())
}

// towardFirstOrbit turns each point of the first orbit off the z of the given
// axes to positive x in turn, either way up.
func (f *framing) towardFirstOrbit(axes mgl64.Mat3) []mgl64.Mat3 {
	var out []mgl64.Mat3
	place := -1
	for i, orbit := range f.orbits {
		if place >= 0 && f.tied[i] != place {
			break
		}
		for _, k := range orbit {
			v := axes.Mul3x1(f.points[k])
			if f.onZ(v) {
				continue
			}
			place = f.tied[i]
			x := mgl64.Vec3{v[0], v[1], 0}.Normalize()
			turn := mgl64.Mat3FromRows(x, mgl64.Vec3{-x[1], x[0], 0}, mgl64.Vec3{0, 0, 1}).Mul3(axes)
			out = append(out, turn, mgl64.Diag3(mgl64.Vec3{1, -1, -1}).Mul3(turn))
		}
	}
	return out
}

// equalMoments is the relative difference below which two principal moments
// give no axis: a turn by a degree changes an axis that is farther apart by
// less than this.
const equalMoments = 1e-3

// momentAxes returns frames on the principal axes of inertia (weights: the
// kinds, that is atomic numbers). With a given z (Cs, C2h) x is the axis of
// the smaller moment square to it; else z is that of the smallest moment and x
// that of the largest. Axes that equal moments leave open are laid by the
// first orbit.
func (f *framing) momentAxes(z mgl64.Vec3) []mgl64.Mat3 {
	values, axes := f.inertia()
	if z != (mgl64.Vec3{}) {
		var smaller, larger = -1, -1
		for i := range axes {
			if alongLine(axes[i], z) {
				continue
			}
			if smaller < 0 {
				smaller = i
			} else {
				larger = i
			}
		}
		if larger < 0 || equal(values[smaller], values[larger], values[2]) {
			return f.towardFirstOrbit(mgl64.Ident3())
		}
		return signed(axes[smaller], z)
	}
	low, high := equal(values[0], values[1], values[2]), equal(values[1], values[2], values[2])
	switch {
	case low && high: // a spherical top: z toward the first orbit as well
		var out []mgl64.Mat3
		for i, orbit := range f.orbits {
			if f.tied[i] != f.tied[0] {
				break
			}
			for _, k := range orbit {
				if v := f.points[k]; v.Len() > f.tolerance {
					x := perpendicular(v.Normalize())
					frame := mgl64.Mat3FromRows(x, v.Normalize().Cross(x), v.Normalize())
					out = append(out, f.towardFirstOrbit(frame)...)
				}
			}
		}
		if len(out) > 0 {
			return out
		}
		return signed(axes[2], axes[0])
	case low: // x is known, z goes toward an atom square to it
		var out []mgl64.Mat3
		cycle := mgl64.Mat3FromRows(mgl64.Vec3{0, 0, 1}, mgl64.Vec3{0, 1, 0}, mgl64.Vec3{-1, 0, 0})
		for _, t := range f.towardFirstOrbit(mgl64.Mat3FromRows(axes[0], axes[2].Cross(axes[0]), axes[2])) {
			out = append(out, cycle.Mul3(t))
		}
		return out
	case high:
		return f.towardFirstOrbit(mgl64.Mat3FromRows(axes[1], axes[0].Cross(axes[1]), axes[0]))
	}
	return signed(axes[2], axes[0])
}

func equal(a, b, scale float64) bool { return math.Abs(a-b) <= equalMoments*math.Max(scale, 1e-300) }

// signed returns the four right-handed frames on the lines x and z.
func signed(x, z mgl64.Vec3) []mgl64.Mat3 {
	x = x.Sub(z.Mul(z.Dot(x))).Normalize()
	m := mgl64.Mat3FromRows(x, z.Cross(x), z)
	var out []mgl64.Mat3
	for _, d := range []mgl64.Vec3{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}} {
		out = append(out, mgl64.Diag3(d).Mul3(m))
	}
	return out
}
