package notation

import (
	"strings"

	"lobewright/assets"
	"lobewright/symmetry"
)

// RuleLabel is a short label, in the language of the texts, of a rule for the
// axes that commands know by a name; the name itself where there is none. Set it
// with Sentence.
func RuleLabel(t assets.Texts, name string) string {
	switch name {
	case symmetry.FrameDefault:
		return t.Say("axes.ruleDefault")
	case symmetry.FramePlaneXZ:
		return t.Say("axes.rulePlaneXZ")
	case symmetry.FrameBetween:
		return t.Say("axes.ruleBetween")
	case symmetry.FrameC2OnY:
		return t.Say("axes.ruleC2OnY")
	case symmetry.FrameSigmaYZ:
		return t.Say("axes.ruleSigmaYZ")
	case symmetry.FrameSigmaDXZ:
		return t.Say("axes.ruleSigmaDXZ")
	case symmetry.FrameXYExchanged:
		return t.Say("axes.ruleExchanged")
	case symmetry.FrameZC3:
		return t.Say("axes.ruleZC3")
	case symmetry.FrameZC2:
		return t.Say("axes.ruleZC2")
	case symmetry.FrameZC5:
		return t.Say("axes.ruleZC5")
	case symmetry.FrameOtherC2:
		return t.Say("axes.ruleOtherC2")
	case symmetry.FrameFile:
		return t.Say("axes.ruleFile")
	case symmetry.FrameExplicit:
		return t.Say("axes.ruleExplicit")
	case "held":
		return t.Say("axes.ruleHeld")
	}
	if axes, ok := strings.CutPrefix(name, "axes-"); ok && len(axes) == 3 {
		return t.Say("axes.rulePermuted", axes[0], axes[1], axes[2])
	}
	return name
}
