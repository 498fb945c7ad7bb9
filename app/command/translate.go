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
	lifts       []*lift
}

// A lift is what the labels become in the full group in one way in which their
// group lies in it.
type lift struct {
	*work.Lift
	embedding, of int  // 0 for a linear molecule
	turned        bool // in other axes than those in which the embedding is told
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

// lift looks for the irreps of the full group in every embedding of a subgroup
// and, since nobody knows how its axes were laid there, in all of its frames in
// which these get other labels.
func (t *translation) lift(setting *symmetry.Setting) error {
	descents, err := setting.Descents(t.from)
	if err != nil {
		return err
	}
	copies, err := t.copies(descents[0].Subgroup)
	if err != nil {
		return err
	}
	for i, d := range descents {
		list, err := d.Renamings()
		if err != nil {
			return err
		}
		var known []string
		for n, r := range list {
			l := &lift{work.LiftContent(r, copies), i + 1, len(descents), n > 0}
			result := strings.Join(waysText(l.Lift), " or ")
			if !slices.Contains(known, result) && (n == 0 || len(l.Ways) > 0 || l.More) {
				known = append(known, result)
				t.lifts = append(t.lifts, l)
			}
		}
	}
	return nil
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
		t.lifts = []*lift{{Lift: work.LiftLinear(d, copies)}}
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
	fmt.Fprintf(&b, "\n%s of %s\n", levelsText(t.given), t.from)
	for _, l := range t.lifts {
		if len(t.lifts) > 1 {
			b.WriteString("  " + l.where() + "\n  ")
		}
		b.WriteString("  " + liftSentence(l.Lift, g.Fit.Setting.Symbol, t.from) + "\n")
	}
	if verdict := t.verdict(g.Fit.Setting.Symbol); verdict != "" {
		b.WriteString("\n" + verdict + "\n")
	}
	return b.String()
}

// where says how the subgroup lies in the group and, if other axes of it are
// meant, what its operations are called there.
func (l *lift) where() string {
	d := l.Descent
	names := make([]string, len(d.Operations))
	for i, o := range d.Operations {
		names[i] = d.Group.Operations[o].Name
		if there := d.Subgroup.Operations[d.Images[i]].Name; there != names[i] {
			names[i] += "→" + there
		}
	}
	text := fmt.Sprintf("embedding %d of %d: %s", l.embedding, l.of, strings.Join(names, " "))
	if l.turned {
		text = "the same with other axes: " + strings.Join(names, " ")
	}
	return text
}

// verdict says whether the answer is the same however the subgroup lies in the
// group; empty where there is one way, or no answer.
func (t *translation) verdict(symbol string) string {
	var results, told []string
	for _, l := range t.lifts {
		if l.More {
			return ""
		}
		text := strings.Join(waysText(l.Lift), " or ")
		if text == "" {
			continue
		}
		if !slices.Contains(results, text) {
			results = append(results, text)
		}
		told = append(told, fmt.Sprintf("%s by embedding %d", text, l.embedding))
	}
	switch {
	case len(t.lifts) < 2 || len(results) == 0:
		return ""
	case len(results) == 1:
		return fmt.Sprintf("If these labels come from %s at all, they are %s there.", symbol, results[0])
	}
	return fmt.Sprintf("The embeddings disagree: %s. How %s lies in %s decides.", strings.Join(told, ", "), t.from, symbol)
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
	Embedding  int                 `json:"embedding"` // 0 for a linear molecule
	Operations []string            `json:"operations"`
	Names      []string            `json:"names"` // of the operations, in the subgroup
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
		lift := liftDocument{Embedding: l.embedding, Operations: []string{}, Names: []string{}, Ways: [][]contentDocument{}, Telling: append([]string{}, l.Telling...), Complete: !l.More}
		if l.Descent != nil {
			lift.Operations = strings.Fields(operationNames(l.Descent))
			for _, i := range l.Descent.Images {
				lift.Names = append(lift.Names, l.Descent.Subgroup.Operations[i].Name)
			}
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
