package command

import (
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/symmetry"
)

// A level is a label with the number that stands before it, as calculations
// print them: "2 a1".
type level struct {
	number string // digits or empty
	label  string // as typed, but in plain characters
}

func (l level) String() string {
	if l.number == "" {
		return l.label
	}
	return l.number + " " + l.label
}

func levelsText(list []level) string {
	parts := make([]string, len(list))
	for i, l := range list {
		parts[i] = l.String()
	}
	return strings.Join(parts, ", ")
}

// parseLevels reads labels with commas or plus signs between them.
func parseLevels(text string) ([]level, error) {
	var out []level
	for _, part := range strings.FieldsFunc(text, func(r rune) bool { return r == ',' || r == ';' }) {
		// A plus sign parts labels, but in Σ+ it belongs to one.
		for _, piece := range strings.Split(part, " + ") {
			piece = strings.TrimSpace(piece)
			digits := piece[:len(piece)-len(strings.TrimLeft(piece, "0123456789"))]
			label := notation.PlainLabel(strings.TrimSpace(piece[len(digits):]))
			if label == "" {
				return nil, usagef("--translate: %q holds no label", piece)
			}
			if strings.ContainsAny(label, " \t") {
				return nil, usagef("--translate: %q: commas are needed between labels, such as \"2 a1, 1 b1\"", piece)
			}
			out = append(out, level{digits, label})
		}
	}
	if len(out) == 0 {
		return nil, usagef("--translate: no labels are given")
	}
	return out, nil
}

// sameLabel compares labels of irreps, with capital letters or without.
func sameLabel(a, b string) bool {
	return notation.Orbital(a) == notation.Orbital(b)
}

// asTyped gives a label the letter case of another.
func asTyped(label, typed string) string {
	if first, _ := utf8.DecodeRuneInString(typed); unicode.IsLower(first) {
		return notation.Orbital(label)
	}
	return label
}

// A translation is labels given by another rule, as they are called here.
type translation struct {
	from        string
	given, here []level
	rule        string // of from, in words
	lifts       []*work.Lift
}

// translated reads labels and whose they are.
func translated(g *work.Group, text, from string) (*translation, error) {
	given, err := parseLevels(text)
	if err != nil {
		return nil, err
	}
	t := &translation{from: from, given: given}
	setting := g.Fit.Setting
	if setting.Infinite() {
		return t, t.liftLinear(setting.Symbol)
	}
	var names []string
	for _, e := range g.Exchanges() {
		names = append(names, e.Frame.Rule.Name)
		if e.Frame.Rule.Name == from {
			t.rule = notation.ShortConvention(e.Fit)
			back := make([]work.Renaming, len(setting.Irreps))
			for i, ir := range setting.Irreps {
				back[i] = work.Renaming{Here: ir.Label, There: e.Fit.Setting.Irreps[e.Names.Irreps[i]].Label}
			}
			return t, t.rename(back, setting.Symbol)
		}
	}
	for _, r := range work.Relabellings(setting) {
		names = append(names, fmt.Sprintf("%q", r.Name))
		if r.Name == from {
			return t, t.rename(r.Irreps, setting.Symbol)
		}
	}
	if _, err := symmetry.New(from); err != nil {
		return nil, fmt.Errorf("--from %s: neither a rule nor a subgroup of %s; rules are %s", from, setting.Symbol, strings.Join(names, ", "))
	}
	return t, t.lift(setting)
}

func (t *translation) rename(list []work.Renaming, symbol string) error {
	for _, l := range t.given {
		found := false
		var labels, order []string
		for _, r := range list {
			labels = append(labels, r.There)
			order = append(order, r.Here)
			if sameLabel(r.There, l.label) && !found {
				t.here = append(t.here, level{l.number, asTyped(r.Here, l.label)})
				found = true
			}
		}
		if !found {
			if sameSet(labels, order) {
				labels = order // as they stand in the group's table
			}
			return fmt.Errorf("%s has no irrep %q by %s: it has %s", symbol, l.label, t.from, strings.Join(labels, " "))
		}
	}
	return nil
}

// sameSet tells whether two lists hold the same labels, in any order.
func sameSet(a, b []string) bool {
	return slices.Equal(slices.Sorted(slices.Values(a)), slices.Sorted(slices.Values(b)))
}

// lift looks for the irreps of the full group in every embedding of a subgroup.
func (t *translation) lift(setting *symmetry.Setting) error {
	descents, err := setting.Descents(t.from)
	if err != nil {
		return err
	}
	copies, err := t.copies(descents[0].Subgroup)
	for _, d := range descents {
		if err == nil {
			t.lifts = append(t.lifts, work.LiftContent(d, copies))
		}
	}
	return err
}

// liftLinear does the same for a linear molecule.
func (t *translation) liftLinear(symbol string) error {
	d, err := symmetry.DescendLinear(symbol, t.from, mostLambda)
	if err != nil {
		if _, unknown := symmetry.New(t.from); unknown != nil {
			return fmt.Errorf("--from %s: labels of %s are the same in every frame; only those of a subgroup, such as D2h, are translated", t.from, symbol)
		}
		return err
	}
	copies, err := t.copies(d.Subgroup)
	if err == nil {
		t.lifts = []*work.Lift{work.LiftLinear(d, copies)}
	}
	return err
}

// copies counts the labels that are given, one number an irrep of their group.
func (t *translation) copies(sub *symmetry.Setting) ([]int, error) {
	copies := make([]int, len(sub.Irreps))
	for _, l := range t.given {
		n := 1
		if l.number != "" {
			if _, err := fmt.Sscan(l.number, &n); err != nil || n > 1000 {
				return nil, fmt.Errorf("--translate: %s copies are too many", l.number)
			}
		}
		ir, err := findIrrep(sub, l.label)
		if err != nil {
			return nil, err
		}
		for i := range sub.Irreps {
			if sub.Irreps[i].Label == ir.Label {
				copies[i] += n
			}
		}
	}
	return copies, nil
}

func (t *translation) text(g *work.Group) string {
	var b strings.Builder
	b.WriteString(titleText(g))
	if t.lifts == nil {
		rule := ""
		if t.rule != "" {
			rule = " (" + t.rule + ")"
		}
		fmt.Fprintf(&b, "\nBy %s%s\n  %s\n", t.from, rule, levelsText(t.given))
		fmt.Fprintf(&b, "Here, by %s (%s)\n  %s\n", g.Fit.Rule.Name, notation.ShortConvention(g.Fit), levelsText(t.here))
		return b.String()
	}
	for i, l := range t.lifts {
		where := ""
		if len(t.lifts) > 1 {
			where = fmt.Sprintf(", embedding %d of %d: %s", i+1, len(t.lifts), operationNames(l.Descent))
		}
		fmt.Fprintf(&b, "\n%s of %s%s\n", levelsText(t.given), t.from, where)
		b.WriteString("  " + liftSentence(l, g.Fit.Setting.Symbol, t.from) + "\n")
	}
	return b.String()
}

// liftSentence says what the labels can be in the full group, and why they
// cannot tell.
func liftSentence(l *work.Lift, symbol, from string) string {
	switch ways := waysText(l); {
	case len(ways) == 0 && l.More:
		return "there are too many ways to try; give the labels of one degenerate set alone"
	case len(ways) == 0:
		return "no set of irreps of " + symbol + " goes over into these"
	case len(ways) == 1:
		if l.Descent == nil {
			return ways[0] + " in " + symbol + ", and nothing else up to Φ"
		}
		return ways[0] + " in " + symbol + ", and nothing else"
	case l.More:
		return strings.Join(ways, ", ") + " … in " + symbol + ": there are more ways; give the labels of one degenerate set alone"
	default:
		last := len(ways) - 1
		if l.Descent == nil {
			return strings.Join(ways[:last], ", ") + " or " + ways[last] + " in " + symbol + ", up to Φ: " + from +
				" does not tell the angular momenta about the axis apart"
		}
		why := fmt.Sprintf("they go over into the same irreps of %s, since they differ only in the characters of %s, of which %s has none",
			from, strings.Join(l.Telling, ", "), from)
		return strings.Join(ways[:last], ", ") + " or " + ways[last] + " in " + symbol + ": " + why
	}
}

func waysText(l *work.Lift) []string {
	out := []string{}
	for _, way := range l.Ways {
		out = append(out, contentText(way))
	}
	return out
}

// contentText writes a content: "A1g + 2Eg".
func contentText(list []symmetry.Content) string {
	var parts []string
	for _, c := range list {
		n := ""
		if c.Copies > 1 {
			n = fmt.Sprint(c.Copies)
		}
		parts = append(parts, n+c.Irrep.Label)
	}
	if parts == nil {
		return "nothing"
	}
	return strings.Join(parts, " + ")
}

func operationNames(d *symmetry.Descent) string {
	names := make([]string, len(d.Operations))
	for i, o := range d.Operations {
		names[i] = d.Group.Operations[o].Name
	}
	return strings.Join(names, " ")
}

type translationDocument struct {
	From  string         `json:"from"`
	Given []string       `json:"given"`
	Here  []string       `json:"here"`
	Lifts []liftDocument `json:"lifts"`
}

type liftDocument struct {
	Operations []string            `json:"operations"`
	Ways       [][]contentDocument `json:"ways"`
	Telling    []string            `json:"telling"`
	Complete   bool                `json:"complete"`
}

func (t *translation) document() *translationDocument {
	d := &translationDocument{From: t.from, Given: []string{}, Here: []string{}, Lifts: []liftDocument{}}
	for _, l := range t.given {
		d.Given = append(d.Given, l.String())
	}
	for _, l := range t.here {
		d.Here = append(d.Here, l.String())
	}
	for _, l := range t.lifts {
		lift := liftDocument{Operations: []string{}, Ways: [][]contentDocument{}, Telling: append([]string{}, l.Telling...), Complete: !l.More}
		if l.Descent != nil {
			lift.Operations = strings.Fields(operationNames(l.Descent))
		}
		for _, way := range l.Ways {
			lift.Ways = append(lift.Ways, describeContent(way))
		}
		d.Lifts = append(d.Lifts, lift)
	}
	return d
}

func describeContent(list []symmetry.Content) []contentDocument {
	out := []contentDocument{}
	for _, c := range list {
		out = append(out, contentDocument{c.Irrep.Label, c.Copies})
	}
	return out
}
