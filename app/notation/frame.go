package notation

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/assets"
	"lobewright/symmetry"
)

// Convention says in words where x, y and z point and by which rule, in
// English. names are those of the points of the fit ("Cl2"); with them it also
// says toward which atoms the axes point.
func Convention(fit *symmetry.Fit, names []string) string {
	return ConventionIn(english(), fit, names)
}

// ConventionIn is Convention in the language of the texts.
func ConventionIn(t assets.Texts, fit *symmetry.Fit, names []string) string {
	z, x := conventionClauses(t, fit, names)
	return joinClauses(z, x)
}

func conventionClauses(t assets.Texts, fit *symmetry.Fit, names []string) (z, x string) {
	z, x = axisRules(t, fit, true)
	z += toward(t, fit, names, 2)
	if x != "" {
		x += toward(t, fit, names, 0)
	}
	return z, x
}

// ConventionTexts are the clauses of ConventionIn, set; asides tells whether
// remarks in brackets, on how a rule settles ties, are among them.
func ConventionTexts(t assets.Texts, fit *symmetry.Fit, names []string, asides bool) []Text {
	marked := make([]string, len(names))
	for i, name := range names {
		marked[i] = atomMark + name
	}
	var out []Text
	z, x := conventionClauses(t, fit, marked)
	for _, clause := range strings.Split(joinClauses(z, x), "; ") {
		if !asides {
			clause = bracketed.ReplaceAllString(clause, "")
		}
		if clause != "" {
			out = append(out, Sentence(clause))
		}
	}
	return out
}

// bracketed are remarks in brackets; those of the names of operations follow no
// blank.
var bracketed = regexp.MustCompile(` \([^()]*\)`)

// ShortConvention is Convention without what settles rare cases and without
// atoms, for captions.
func ShortConvention(fit *symmetry.Fit) string { return ShortConventionIn(english(), fit) }

// ShortConventionIn is ShortConvention in the language of the texts.
func ShortConventionIn(t assets.Texts, fit *symmetry.Fit) string {
	return joinClauses(axisRules(t, fit, false))
}

// english are the texts that the commands speak.
func english() assets.Texts { return assets.TextsIn(assets.English) }

func joinClauses(z, x string) string {
	if x == "" {
		return z
	}
	return z + "; " + x
}

// axisRules says where z and x point. The rest of a rule, which decides only
// where its first part does not, is left out unless asked for.
func axisRules(t assets.Texts, fit *symmetry.Fit, whole bool) (z, x string) {
	rest := func(s string) string {
		if whole {
			return " (" + s + ")"
		}
		return ""
	}
	switch fit.Rule.Z {
	case symmetry.ZPrincipal:
		z = t.Say("axes.zAlong", axisName(fit.Setting)) + rest(t.Say("axes.highestOrder"))
	case symmetry.ZMostAtoms:
		z = t.Say("axes.zMostAtoms") + rest(t.Say("axes.thenBondsExtent"))
	case symmetry.ZPlanarC2:
		z = t.Say("axes.zPlanar") + rest(t.Say("axes.thenBondsExtent"))
	case symmetry.ZPlaneNormal:
		z = t.Say("axes.zPlaneNormal")
	case symmetry.ZSmallestMoment:
		z = t.Say("axes.zSmallestMoment")
	case symmetry.ZCubic:
		z = t.Say("axes.zCubic", cubicAxes(fit.Setting.Symbol))
	case symmetry.ZIcosahedral:
		z = t.Say("axes.zIcosahedral")
	case symmetry.ZMolecularAxis:
		z = t.Say("axes.zMolecular")
	case symmetry.ZInput:
		z = t.Say("axes.zInput")
	case symmetry.ZC3Axis:
		z = t.Say("axes.zC3")
	case symmetry.ZC2Axis:
		z = t.Say("axes.zC2") + rest(t.Say("axes.noPower"))
	case symmetry.ZC5Axis:
		z = t.Say("axes.zC5")
	case symmetry.ZExplicit:
		z = t.Say("axes.given")
		if name := axisName(fit.Setting); name != "C1" {
			z += rest(t.Say("axes.zAlong", name))
		}
	case symmetry.XPermuted:
		z = permutation(t, fit.Rule.Name)
	default:
		if group, held := strings.CutPrefix(fit.Rule.Z, "held:"); held {
			return t.Say("axes.held", group), ""
		}
		z = fit.Rule.Z
	}
	switch fit.Rule.X {
	case symmetry.XC2MostAtoms:
		x = alongC2(t, fit, rest)
	case symmetry.XPlaneMostAtoms:
		x = t.Say("axes.xzSigmaV") + rest(t.Say("axes.thenBonds"))
	case symmetry.XPlanarNormal:
		x = t.Say("axes.xPlanarNormal")
	case symmetry.XYZMostAtoms:
		x = t.Say("axes.yzMost") + rest(t.Say("axes.thenBonds"))
		if planesHoldAlike(fit) {
			x = t.Say("axes.xzHeavier") + rest(t.Say("axes.unlessBonds"))
		}
	case symmetry.XFirstOrbit:
		x = t.Say("axes.xzFirst")
	case symmetry.XSmallerMoment:
		x = t.Say("axes.xSmaller")
	case symmetry.XLargestMoment:
		x = t.Say("axes.xLargest")
	case symmetry.XThreefold:
		x = t.Say("axes.xThreefold")
	case symmetry.XFree:
		x = t.Say("axes.xFree")
	case symmetry.XBend:
		x = t.Say("axes.xBend")
	case symmetry.XPlaneXZ:
		x = t.Say("axes.xzMost") + rest(t.Say("axes.thenBonds"))
		if planesHoldAlike(fit) {
			x = t.Say("axes.yzHeavier") + rest(t.Say("axes.unlessBonds"))
		}
	case symmetry.XBetween:
		x = t.Say("axes.xBetween") + rest(betweenWhat(t, fit.Setting))
	case symmetry.XC2OnY:
		x = t.Say("axes.yC2")
	case symmetry.XSigmaYZ:
		x = t.Say("axes.yzSigma")
	case symmetry.XSigmaDXZ:
		x = t.Say("axes.xzSigmaD") + rest(t.Say("axes.c2Between"))
	case symmetry.XExchanged:
		x = t.Say("axes.xExchanged") + rest(t.Say("axes.turned90"))
	case symmetry.XC2Across:
		x = t.Say("axes.xC2Across")
	case symmetry.XHoldsC2:
		x = t.Say("axes.xzHolds")
	case symmetry.XOtherSetting:
		x = t.Say("axes.turned90") + rest(t.Say("axes.otherC5"))
	case symmetry.XInputLabels:
		x = t.Say("axes.inputLabels")
	case symmetry.XInput:
		if fit.Rule.Name == symmetry.FrameFile {
			x = t.Say("axes.labelsDefault")
		}
	case symmetry.XEquivalent, symmetry.XExplicit, symmetry.XPermuted, "":
	default:
		x = fit.Rule.X
	}
	return z, x
}

// planesHoldAlike tells whether xz and yz hold equally many atoms off z, so that
// their number decided nothing.
func planesHoldAlike(fit *symmetry.Fit) bool {
	counts := [2]int{}
	for _, p := range fit.Ideal {
		if isAlong(p, 2) || p.Len() < 1e-6 {
			continue
		}
		for axis := range counts {
			if isSquareTo(p, axis) {
				counts[axis]++
			}
		}
	}
	return counts[0] == counts[1]
}

// alongC2 says by what the C2 square to z that x lies along was chosen: by
// nothing where they are equivalent, and never by atoms that it does not hold.
func alongC2(t assets.Texts, fit *symmetry.Fit, rest func(string) string) string {
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
			return t.Say("axes.c2Most", name) + rest(t.Say("axes.c2MostThen"))
		}
		held = held || isSquareTo(p, 1) && math.Abs(p[0]) > offOrigin
	}
	switch {
	case len(classes) == 1:
		return t.Say("axes.c2Any", name) + rest(t.Say("axes.c2All", name))
	case held:
		return t.Say("axes.c2Plane", name) + rest(t.Say("axes.c2PlaneThen"))
	}
	return t.Say("axes.c2Any", name) + rest(t.Say("axes.c2None"))
}

// betweenWhat says which elements of an even group lie between the atoms.
func betweenWhat(t assets.Texts, s *symmetry.Setting) string {
	if strings.HasSuffix(s.Symbol, "v") {
		return t.Say("axes.betweenV")
	}
	return t.Say("axes.betweenH")
}

// permutation says, of a rule for D2 or D2h, which axes of the default rule
// become x, y and z.
func permutation(t assets.Texts, name string) string {
	axes := strings.TrimPrefix(name, "axes-")
	if len(axes) != 3 {
		return name
	}
	return t.Say("axes.permuted", axes[0], axes[1], axes[2])
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
func toward(t assets.Texts, fit *symmetry.Fit, names []string, axis int) string {
	letter := "xyz"[axis : axis+1]
	for i, p := range fit.Ideal {
		if i < len(names) && isAlong(p, axis) && p[axis] > offOrigin {
			return t.Say("axes.toward", letter, names[i])
		}
	}
	if fit.Setting.Infinite() || len(names) < len(fit.Ideal) || turnsRound(fit.Setting, axis) {
		return ""
	}
	if axis == 2 {
		if side := sideOf(t, fit, names); side != "" {
			return t.Say("axes.onSide", side)
		}
		return ""
	}
	return inPlane(t, fit, names)
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
func sideOf(t assets.Texts, fit *symmetry.Fit, names []string) string {
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
	return listed(t, set)
}

// inPlane names the atoms in xz off the z axis, and those at +x.
func inPlane(t assets.Texts, fit *symmetry.Fit, names []string) string {
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
		return t.Say(onePlural(len(plus), "axes.onePlus", "axes.morePlus"), listed(t, plus))
	case len(minus) > 0:
		return t.Say(onePlural(len(minus), "axes.oneMinus", "axes.moreMinus"), listed(t, minus))
	}
	return ""
}

// onePlural chooses between the keys for one thing and for several.
func onePlural(n int, one, more string) string {
	if n == 1 {
		return one
	}
	return more
}

// listed joins names: "Cl3, Cl5 and Cl7", "C1, C2, C3 …".
func listed(t assets.Texts, names []string) string {
	if n := len(names); n > mostInSet {
		return strings.Join(names[:mostInSet-1], ", ") + " …"
	} else if n > 1 {
		return t.Say("axes.and", strings.Join(names[:n-1], ", "), names[n-1])
	}
	return names[0]
}

// Source says who published a rule, or that it is common practice or an own
// choice, in English.
func Source(rule symmetry.Rule) string { return SourceIn(english(), rule) }

// SourceIn is Source in the language of the texts.
func SourceIn(t assets.Texts, rule symmetry.Rule) string {
	var parts []string
	add := func(text string) {
		if !slices.Contains(parts, text) {
			parts = append(parts, text)
		}
	}
	for _, key := range rule.Sources {
		switch key {
		case symmetry.SourceMulliken:
			add(t.Say("axes.mulliken"))
		case symmetry.SourceCommon, symmetry.SourceDepartmentPage:
			// What a department teaches on its page is common practice; a
			// page is nothing that a reader could look up years later.
			add(t.Say("axes.common"))
		case symmetry.SourceOwn:
			add(t.Say("axes.own"))
		default:
			add(key)
		}
	}
	return strings.Join(parts, "; ")
}

// Ties says what the rule left open and how it was settled, a sentence each,
// in English.
func Ties(ties []symmetry.Tie) []string { return TiesIn(english(), ties) }

// TiesIn is Ties in the language of the texts.
func TiesIn(t assets.Texts, ties []symmetry.Tie) []string {
	var out []string
	for _, tie := range ties {
		out = append(out, tieOpen(t, tie.What)+": "+tieSettled(t, tie.Settled))
	}
	return out
}

func tieOpen(t assets.Texts, what string) string {
	switch what {
	case symmetry.TieOrigin:
		return t.Say("axes.tieOrigin")
	case symmetry.TieZAxis:
		return t.Say("axes.tieZ")
	case symmetry.TieZSense:
		return t.Say("axes.tieZSense")
	case symmetry.TieXAxis:
		return t.Say("axes.tieX")
	case symmetry.TieXSense:
		return t.Say("axes.tieXSense")
	}
	return what
}

func tieSettled(t assets.Texts, how string) string {
	switch how {
	case symmetry.SettledByCoordinates:
		return t.Say("axes.byCoordinates")
	case symmetry.SettledByNumber:
		return t.Say("axes.byNumber")
	}
	return how
}
