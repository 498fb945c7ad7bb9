package notation

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry"
)

// Convention says in words where x, y and z point and by which rule. names
// are those of the points of the fit ("Cl2"); with them it also says toward
// which atoms the axes point.
func Convention(fit *symmetry.Fit, names []string) string {
	z, x := axisRules(fit, true)
	z += toward(fit, names, 2)
	if x != "" {
		x += toward(fit, names, 0)
	}
	return joinClauses(z, x)
}

// ShortConvention is Convention without what settles rare cases and without
// atoms, for captions.
func ShortConvention(fit *symmetry.Fit) string {
	return joinClauses(axisRules(fit, false))
}

func joinClauses(z, x string) string {
	if x == "" {
		return z
	}
	return z + "; " + x
}

// axisRules says where z and x point. The rest of a rule, which decides only
// where its first part does not, is left out unless asked for.
func axisRules(fit *symmetry.Fit, whole bool) (z, x string) {
	rest := func(s string) string {
		if whole {
			return " (" + s + ")"
		}
		return ""
	}
	switch fit.Rule.Z {
	case symmetry.ZPrincipal:
		z = "z along " + axisName(fit.Setting) + rest("the axis of the highest order")
	case symmetry.ZMostAtoms:
		z = "z along the C2 through most atoms" + rest("then most bonds, then the larger extent")
	case symmetry.ZPlanarC2:
		z = "z along the C2 in the molecular plane through most atoms" + rest("then most bonds, then the larger extent")
	case symmetry.ZPlaneNormal:
		z = "z square to the mirror plane"
	case symmetry.ZSmallestMoment:
		z = "z along the axis of the smallest principal moment of inertia"
	case symmetry.ZCubic:
		z = "x, y and z along the three " + cubicAxes(fit.Setting.Symbol) + " axes"
	case symmetry.ZIcosahedral:
		z = "x, y and z along three C2 axes, C5 axes along (0, ±1, ±(1 + √5)/2) and cyclic permutations"
	case symmetry.ZMolecularAxis:
		z = "z along the molecular axis"
	case symmetry.ZInput:
		z = "x, y and z as in the input"
	case symmetry.ZC3Axis:
		z = "z along a C3"
	case symmetry.ZC2Axis:
		z = "z along a C2" + rest("one that is no power of a C4")
	case symmetry.ZC5Axis:
		z = "z along a C5"
	case symmetry.ZExplicit:
		z = "z and x as given"
		if name := axisName(fit.Setting); name != "C1" {
			z += rest("z along " + name)
		}
	case symmetry.XPermuted:
		z = permutation(fit.Rule.Name)
	default:
		if group, held := strings.CutPrefix(fit.Rule.Z, "held:"); held {
			return "z and x as near as can be to those of " + group + ", which holds this group", ""
		}
		z = fit.Rule.Z
	}
	switch fit.Rule.X {
	case symmetry.XC2MostAtoms:
		x = alongC2(fit, rest)
	case symmetry.XPlaneMostAtoms:
		x = "xz is the σv plane with most atoms" + rest("then most bonds")
	case symmetry.XPlanarNormal:
		x = "x square to the molecular plane"
	case symmetry.XYZMostAtoms:
		x = "yz is the plane with most atoms" + rest("then most bonds")
	case symmetry.XFirstOrbit:
		x = "xz holds the first atom of the largest set of equivalent atoms off the axis"
	case symmetry.XSmallerMoment:
		x = "x along the axis of the smaller moment of inertia in the plane"
	case symmetry.XLargestMoment:
		x = "x along the axis of the largest principal moment of inertia"
	case symmetry.XThreefold:
		x = "an atom of the first set on threefold axes lies along (1, 1, 1)"
	case symmetry.XFree:
		x = "x in any direction square to it"
	case symmetry.XPlaneXZ:
		x = "xz is the plane with most atoms" + rest("then most bonds")
	case symmetry.XBetween:
		x = "x between the atoms" + rest(betweenWhat(fit.Setting))
	case symmetry.XC2OnY:
		x = "y along the C2 that the default rule puts on x"
	case symmetry.XSigmaYZ:
		x = "yz is the σv plane that the default rule puts in xz"
	case symmetry.XSigmaDXZ:
		x = "xz is a σd plane" + rest("the C2′ lie between the planes")
	case symmetry.XExchanged:
		x = "x and y exchanged" + rest("turned by 90° about z from the default")
	case symmetry.XC2Across:
		x = "x along a C2 square to it"
	case symmetry.XHoldsC2:
		x = "xz holds the axis that the default rule puts on z"
	case symmetry.XOtherSetting:
		x = "turned by 90° about z from the default" + rest("C5 axes along (±(1 + √5)/2, 0, ±1) and cyclic permutations")
	case symmetry.XInputLabels:
		x = "the axes of the group lie along them and the irreps are labelled by them"
	case symmetry.XInput:
		if fit.Rule.Name == symmetry.FrameFile {
			x = "the irreps are labelled as by the default rule"
		}
	case symmetry.XEquivalent, symmetry.XExplicit, symmetry.XPermuted, "":
	default:
		x = fit.Rule.X
	}
	return z, x
}

// alongC2 says by what the C2 square to z that x lies along was chosen: by
// nothing where they are equivalent, and never by atoms that it does not hold.
func alongC2(fit *symmetry.Fit, rest func(string) string) string {
	name, classes := "C2", map[int]bool{}
	for _, op := range fit.Setting.Operations {
		if op.Turn.Improper || op.Turn.Den != 2 || !isSquareTo(op.Axis, 2) {
			continue
		}
		classes[op.Class] = true
		if isAlong(op.Axis, 0) {
			outer, _, _ := strings.Cut(op.Name, "(")
			name = strings.ReplaceAll(outer, "'", "′")
		}
	}
	held := false
	for _, p := range fit.Ideal {
		if isAlong(p, 0) && math.Abs(p[0]) > offOrigin {
			return "x along the " + name + " through most atoms" + rest("then the one whose vertical planes hold most atoms, then most bonds")
		}
		held = held || isSquareTo(p, 1) && math.Abs(p[0]) > offOrigin
	}
	switch {
	case len(classes) == 1:
		return "x along a " + name + rest("all "+name+" are equivalent")
	case held:
		return "x along the " + name + " whose vertical plane holds most atoms" + rest("no atom lies on it, most bonds decide next")
	}
	return "x along a " + name + rest("no atom lies on it or in its vertical plane, most bonds decide")
}

// betweenWhat says which elements of an even group lie between the atoms.
func betweenWhat(s *symmetry.Setting) string {
	if strings.HasSuffix(s.Symbol, "v") {
		return "xz is the σ plane that the default rule calls σd"
	}
	return "along the C2 that the default rule calls C2″"
}

// permutation says, of a rule for D2 or D2h, which axes of the default rule
// become x, y and z.
func permutation(name string) string {
	axes := strings.TrimPrefix(name, "axes-")
	if len(axes) != 3 {
		return name
	}
	return fmt.Sprintf("x, y and z are the %c, %c and %c of the default rule", axes[0], axes[1], axes[2])
}

// axisName names the axis along z: "C4", or "S4" where an improper rotation
// of twice an even order makes it the principal one (S4, D2d, S8 …).
func axisName(s *symmetry.Setting) string {
	proper, improper := 1, 1
	for _, op := range s.Operations {
		if op.Turn.Num != 1 || !isAlong(op.Axis, 2) {
			continue
		}
		if op.Turn.Improper {
			improper = max(improper, op.Turn.Den)
		} else {
			proper = max(proper, op.Turn.Den)
		}
	}
	if proper%2 == 0 && improper == 2*proper {
		return fmt.Sprintf("S%d", improper)
	}
	return fmt.Sprintf("C%d", proper)
}

func cubicAxes(symbol string) string {
	switch symbol {
	case "Td":
		return "S4"
	case "T", "Th":
		return "C2"
	}
	return "C4"
}

// isAlong tells whether v has no part square to an axis of the frame; places
// and axes of operations are exact but for rounding.
func isAlong(v mgl64.Vec3, axis int) bool {
	const rounding = 1e-6
	for i, x := range v {
		if i != axis && (x > rounding || x < -rounding) {
			return false
		}
	}
	return true
}

// isSquareTo tells whether a vector other than zero has no part along an axis
// of the frame.
func isSquareTo(v mgl64.Vec3, axis int) bool {
	return v.Len() > 1e-6 && math.Abs(v[axis]) < 1e-6
}

// offOrigin is how far from the origin (Å) a place has a direction.
const offOrigin = 1e-3

// toward says where the positive half of an axis of the frame points: ", +z
// toward Cl2" if an atom lies on it. Else, where the group tells its two halves
// apart, it names the atoms on its side (z) or in the plane xz (x).
func toward(fit *symmetry.Fit, names []string, axis int) string {
	letter := "xyz"[axis : axis+1]
	for i, p := range fit.Ideal {
		if i < len(names) && isAlong(p, axis) && p[axis] > offOrigin {
			return fmt.Sprintf(", +%s toward %s", letter, names[i])
		}
	}
	if fit.Setting.Infinite() || len(names) < len(fit.Ideal) || turnsRound(fit.Setting, axis) {
		return ""
	}
	if axis == 2 {
		if side := sideOf(fit, names); side != "" {
			return ", +z on the side of " + side
		}
		return ""
	}
	return inPlane(fit, names)
}

// turnsRound tells whether an operation takes an axis of the frame into its
// opposite, so that nothing tells its two halves apart.
func turnsRound(s *symmetry.Setting, axis int) bool {
	for _, op := range s.Operations {
		if op.Matrix.At(axis, axis) < -1+1e-6 {
			return true
		}
	}
	return false
}

// mostInSet is how many atoms are named to tell the sense of an axis.
const mostInSet = 4

// sideOf names the set of equivalent atoms farthest to the side of +z.
func sideOf(fit *symmetry.Fit, names []string) string {
	best := -1
	for i, p := range fit.Ideal {
		if p[2] > offOrigin && (best < 0 || p[2] > fit.Ideal[best][2]+offOrigin) {
			best = i
		}
	}
	if best < 0 {
		return ""
	}
	var set []string
	for i := range fit.Ideal {
		if slices.ContainsFunc(fit.Permutations, func(p []int) bool { return p[best] == i }) {
			set = append(set, names[i])
		}
	}
	return listed(set)
}

// inPlane names the atoms in xz off the z axis, and those at +x.
func inPlane(fit *symmetry.Fit, names []string) string {
	var plus, minus []string
	for i, p := range fit.Ideal {
		switch {
		case math.Abs(p[1]) > offOrigin:
		case p[0] > offOrigin:
			plus = append(plus, names[i])
		case p[0] < -offOrigin:
			minus = append(minus, names[i])
		}
	}
	switch {
	case len(plus) > 0:
		return ", in xz at +x " + lie(len(plus)) + " " + listed(plus)
	case len(minus) > 0:
		return ", in xz at −x " + lie(len(minus)) + " " + listed(minus)
	}
	return ""
}

func lie(n int) string {
	if n == 1 {
		return "lies"
	}
	return "lie"
}

// listed joins names: "Cl3, Cl5 and Cl7", "C1, C2, C3 …".
func listed(names []string) string {
	if n := len(names); n > mostInSet {
		return strings.Join(names[:mostInSet-1], ", ") + " …"
	} else if n > 1 {
		return strings.Join(names[:n-1], ", ") + " and " + names[n-1]
	}
	return names[0]
}

// Source says who published a rule, or that it is common practice or an own
// choice.
func Source(rule symmetry.Rule) string {
	var parts []string
	add := func(text string) {
		if !slices.Contains(parts, text) {
			parts = append(parts, text)
		}
	}
	for _, key := range rule.Sources {
		switch key {
		case symmetry.SourceMulliken:
			add("R. S. Mulliken, J. Chem. Phys. 23, 1997 (1955), as quoted elsewhere")
		case symmetry.SourceCommon, symmetry.SourceDepartmentPage:
			// What a department teaches on its page is common practice; a
			// page is nothing that a reader could look up years later.
			add("common practice")
		case symmetry.SourceOwn:
			add("own choice")
		default:
			add(key)
		}
	}
	return strings.Join(parts, "; ")
}

// Ties says what the rule left open and how it was settled, a sentence each.
func Ties(ties []symmetry.Tie) []string {
	var out []string
	for _, t := range ties {
		out = append(out, tieOpen(t.What)+": "+tieSettled(t.Settled))
	}
	return out
}

func tieOpen(what string) string {
	switch what {
	case symmetry.TieOrigin:
		return "the rule leaves several origins"
	case symmetry.TieZAxis:
		return "the rule leaves several axes for z"
	case symmetry.TieZSense:
		return "the rule leaves open which way z points"
	case symmetry.TieXAxis:
		return "the rule leaves several directions for x"
	case symmetry.TieXSense:
		return "the rule leaves open which way x points"
	}
	return what
}

func tieSettled(how string) string {
	switch how {
	case symmetry.SettledByCoordinates:
		return "taken is the frame in which the sorted coordinates of the atoms are the larger"
	case symmetry.SettledByNumber:
		return "the atom with the lowest number decides"
	}
	return how
}
