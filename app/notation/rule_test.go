package notation

import (
	"testing"

	"lobewright/assets"
	"lobewright/symmetry"
)

// Every rule that a group offers has a label in every language, and no two of
// one group have the same.
func TestEveryRuleForTheAxesHasALabel(t *testing.T) {
	for _, l := range assets.Languages() {
		texts := assets.TextsIn(l)
		for _, symbol := range []string{"C2v", "C3v", "C4v", "D2", "D2h", "D2d", "D3", "D3d", "D4h", "T", "Td", "Oh", "Ih"} {
			g, err := symmetry.New(symbol)
			if err != nil {
				t.Fatal(err)
			}
			seen := map[string]string{}
			for _, f := range (&symmetry.Fit{Setting: g}).Frames() {
				name := f.Rule.Name
				if name == "" {
					continue // the one in force, of which a Fit without atoms knows nothing
				}
				label := RuleLabel(texts, name)
				if label == "" || label == name && (l != assets.English || name != symmetry.FrameDefault) {
					t.Errorf("%s: %s is called %q in %s", symbol, name, label, l)
				}
				if other, twice := seen[label]; twice {
					t.Errorf("%s: %s and %s are both %q in %s", symbol, name, other, label, l)
				}
				seen[label] = name
			}
			if len(seen) == 0 {
				t.Errorf("%s has no rules", symbol)
			}
		}
	}
	if got := RuleLabel(assets.TextsIn(assets.German), "another"); got != "another" {
		t.Errorf("a rule without a label is called %q", got)
	}
}
