package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// inertia returns the principal moments, rising, and their unit axes, about the
// centre of the weights; the weight of a point is its kind, at least 1.
func (f *framing) inertia() (values [3]float64, axes [3]mgl64.Vec3) {
	var centre mgl64.Vec3
	total := 0.0
	weight := func(k int) float64 { return math.Max(1, float64(f.kinds[k])) }
	for k, v := range f.points {
		centre = centre.Add(v.Mul(weight(k)))
		total += weight(k)
	}
	centre = centre.Mul(1 / total)
	sym := mat.NewSymDense(3, nil)
	for k, v := range f.points {
		t := addInertia(mgl64.Mat3{}, v.Sub(centre))
		for r := 0; r < 3; r++ {
			for c := r; c < 3; c++ {
				sym.SetSym(r, c, sym.At(r, c)+weight(k)*t.At(r, c))
			}
		}
	}
	var e mat.EigenSym
	if !e.Factorize(sym, true) {
		panic("symmetry: a tensor of inertia without axes")
	}
	var vectors mat.Dense
	e.VectorsTo(&vectors)
	for i, v := range e.Values(nil) {
		values[i] = v
		axes[i] = mgl64.Vec3{vectors.At(0, i), vectors.At(1, i), vectors.At(2, i)}
	}
	return values, axes
}

// linear places a linear set: z along it, toward the larger Σ Z·z, then Σ Z·z³
// in C∞v; toward the point with the lowest number in D∞h.
func (f *framing) linear(fit *Fit, rotation mgl64.Mat3, centre mgl64.Vec3, central bool) {
	origin := mgl64.Vec3{}
	if !central {
		all := make([]int, len(f.points))
		for k := range all {
			all[k] = k
		}
		at, tie := f.mostLinked(all)
		origin = f.points[at]
		if tie {
			fit.Ties = append(fit.Ties, Tie{TieOrigin, SettledByNumber})
		}
		for k := range f.points {
			f.points[k] = f.points[k].Sub(origin)
		}
	}
	flip := mgl64.Diag3(mgl64.Vec3{1, -1, -1})
	turns := []mgl64.Mat3{mgl64.Ident3(), flip}
	f.proper = turns[:1]
	if central {
		f.proper = turns
	}
	f.group = append([]mgl64.Mat3{mgl64.Diag3(mgl64.Vec3{1, -1, 1})}, f.proper...)
	f.kind = kind{family: linearPolar}
	if !central {
		turns = f.keepBest(f.keepBest(turns, f.moment(2, 1)), f.moment(2, 3))
	}
	turn := f.byNumber(f.settle(turns, fit))
	fit.Rotation = turn.Mul3(rotation)
	fit.Origin = centre.Add(rotation.Transpose().Mul3x1(origin))
	fit.Ideal = make([]mgl64.Vec3, len(f.points))
	for k, v := range f.points {
		fit.Ideal[k] = clean(turn.Mul3x1(v))
	}
	fit.Rule = Rule{Name: "default", Z: ZMolecularAxis, X: XFree, Sources: []string{SourceCommon, SourceOwn}}
}

// rule tells which rules have put the axes.
func (f *framing) rule() Rule {
	k := f.kind
	r := Rule{Name: "default", Z: ZPrincipal, X: XFirstOrbit, Sources: []string{SourceDepartmentPage, SourceOwn}}
	planar := f.planar()
	switch k.family {
	case cyclic, improperCyclic:
		if k.n == 1 {
			r.Z, r.X, r.Sources = ZSmallestMoment, XLargestMoment, []string{SourceOwn}
		}
	case cyclicHorizontal:
		if k.n == 1 {
			r.Z, r.X = ZPlaneNormal, XSmallerMoment
			r.Sources = []string{SourceCommon, SourceOwn}
		} else if k.n == 2 {
			r.X = XSmallerMoment
		}
	case pyramidal:
		switch {
		case k.n == 2 && planar:
			r.X, r.Sources = XPlanarNormal, []string{SourceMulliken, SourceDepartmentPage}
		case k.n == 2:
			r.X = XYZMostAtoms
		default:
			r.X, r.Sources = XPlaneMostAtoms, []string{SourceDepartmentPage, SourceCommon}
		}
	case dihedral, prismatic, antiprismatic:
		r.X = XC2MostAtoms
		switch {
		case k.family == antiprismatic:
		case k.n == 2 && planar:
			r.Z, r.X, r.Sources = ZPlanarC2, XPlanarNormal, []string{SourceDepartmentPage}
		case k.n == 2:
			r.Z = ZMostAtoms
		case planar:
			r.Sources = []string{SourceDepartmentPage}
		}
	case tetrahedralProper, tetrahedral, pyritohedral:
		r.Z, r.X, r.Sources = ZCubic, XThreefold, []string{SourceCommon, SourceOwn}
	case octahedralProper, octahedral:
		r.Z, r.X, r.Sources = ZCubic, XEquivalent, []string{SourceCommon}
	default:
		r.Z, r.X, r.Sources = ZIcosahedral, XEquivalent, []string{SourceCommon}
	}
	return r
}
