package orbitals

import (
	"strconv"
	"strings"
	"unicode/utf8"

	"lobewright/symmetry/message"
)

// The names of functions relative to a centre, beside those of the axes.
const (
	nameSigma = "sigma"
	namePi    = "pi"
	namePi1   = "pi1"
	namePi2   = "pi2"
	namePiIn  = "pi-in"
	namePiOut = "pi-out"
)

// A Choice says which functions on which atoms are projected. It is written
// ATOMS:FUNCTIONS, as in "F:sigma", "2-4,7:px,py" or "C:sigma@2-6,pz"; see
// ParseChoice.
type Choice struct {
	atoms string
	items []item
}

// An item is one of the functions of a Choice, with the atoms whose midpoint
// is its centre if the Choice names them.
type item struct {
	name   string
	centre string // "" for the default rule
}

// maxChoice is the greatest length in bytes of a choice; every one of 20,000
// atoms by its number takes about 120,000.
const maxChoice = 400_000

var choiceExample = message.Words("write ATOMS:FUNCTIONS, such as F:sigma or 2-4:px,py")

// ParseChoice reads a choice of functions: atoms, a colon, and functions with
// commas between them. Atoms are an element, atom numbers ("2-4,7"), all, or an
// orbit ("orbit:2"). A function is a shell (s p d f), one of its functions
// ("px"), or relative to a centre sigma, pi, pi1, pi2, pi-in or pi-out; these
// take the midpoint of other atoms as their centre with @ ("sigma@2-6").
//
// Only the form is checked here; what depends on the structure, such as the
// numbers of its atoms, is checked by NewBasis.
func ParseChoice(text string) (Choice, error) {
	if len(text) > maxChoice {
		return Choice{}, message.Errorf("a choice of %d characters is too long: the limit is %d", len(text), maxChoice)
	}
	text = strings.TrimSpace(text)
	orbit := ""
	rest := text
	if after, ok := strings.CutPrefix(text, "orbit:"); ok {
		orbit, rest = "orbit:", after
	}
	atoms, functions, ok := strings.Cut(rest, ":")
	atoms = strings.TrimSpace(atoms)
	switch {
	case text == "":
		return Choice{}, message.Errorf("a choice of functions is empty: %s", choiceExample)
	case !ok:
		return Choice{}, message.Errorf("%s names no functions: %s", quote(text), choiceExample)
	case atoms == "":
		return Choice{}, message.Errorf("%s names no atoms: %s", quote(text), choiceExample)
	}
	c := Choice{atoms: orbit + atoms}
	var err error
	c.items, err = parseItems(functions)
	return c, err
}

// SplitChoices takes several choices apart, none of which it checks. Between
// two stands a semicolon, or a comma: a part with a colon begins a new choice,
// together with the atoms right before it, as in "Cl:sigma, 2-4,7:px,py". After
// the centre of a choice only the part with the colon does, since other
// numbers belong to the centre: "C:sigma@2,3, 4:pz".
func SplitChoices(text string) []string {
	var all []string
	for whole := range strings.SplitSeq(text, ";") {
		var choice, atoms []string // atoms may belong to the next
		centre := false
		end := func() {
			if c := strings.TrimSpace(strings.Join(choice, ",")); c != "" {
				all = append(all, c)
			}
		}
		for part := range strings.SplitSeq(whole, ",") {
			bare := strings.TrimSpace(part)
			switch {
			case strings.Contains(part, ":"):
				end()
				choice, atoms = append(atoms, part), nil
				centre = strings.Contains(part, "@")
			case bare != "" && !centre && !('a' <= bare[0] && bare[0] <= 'z') || len(atoms) > 0:
				atoms = append(atoms, part) // no function begins so
			default:
				choice = append(choice, part)
				centre = strings.Contains(part, "@") || centre && startsWithDigit(bare)
			}
		}
		choice = append(choice, atoms...)
		end()
	}
	return all
}

// parseItems reads the functions of a choice. A part that starts with a digit
// goes on with the atoms of a centre, since no function starts with one.
func parseItems(text string) ([]item, error) {
	var items []item
	for part := range strings.SplitSeq(text, ",") {
		part = strings.TrimSpace(part)
		if last := len(items) - 1; last >= 0 && items[last].centre != "" && startsWithDigit(part) {
			items[last].centre += "," + part
			continue
		}
		name, centre, hasCentre := strings.Cut(part, "@")
		name, centre = strings.TrimSpace(name), strings.TrimSpace(centre)
		if err := checkName(name); err != nil {
			return nil, err
		}
		if hasCentre && !isRelative(name) {
			return nil, message.Errorf("%s has no centre: @ goes with sigma, pi, pi-in and pi-out", name)
		}
		if hasCentre && centre == "" {
			return nil, message.Errorf("%s@ names no atoms: the centre is the midpoint of atoms, such as %s@1 or %s@2-6", name, name, name)
		}
		items = append(items, item{name, centre})
	}
	return items, nil
}

func startsWithDigit(s string) bool { return s != "" && '0' <= s[0] && s[0] <= '9' }

// isRelative tells whether a function is named relative to a centre.
func isRelative(name string) bool {
	switch name {
	case nameSigma, namePi, namePi1, namePi2, namePiIn, namePiOut:
		return true
	}
	return false
}

// shellOf returns l for the letter of a shell.
func shellOf(name string) (int, bool) {
	if len(name) != 1 {
		return 0, false
	}
	l := strings.Index(shellLetters, name)
	return l, l >= 0
}

func checkName(name string) error {
	if _, _, ok := functionNamed(name); ok || isRelative(name) {
		return nil
	}
	if _, ok := shellOf(name); ok {
		return nil
	}
	if name == "" {
		return message.Errorf("a function is missing: choose a shell (s, p, d, f), one of its functions (px), sigma, pi, pi-in or pi-out")
	}
	if strings.Contains(name, ":") {
		return message.Errorf("%s is no function: put a semicolon between two choices, such as F:sigma; 2-4:px,py", quote(name))
	}
	if l, ok := shellOf(strings.ToLower(name[:1])); ok && l > 0 && !strings.HasPrefix(name, "pi") {
		return message.Errorf("%s is no function: those of the %s shell are %s", quote(name), functionNames[l][0][:1], strings.Join(functionNames[l], ", "))
	}
	return message.Errorf("%s is no function: choose a shell (s, p, d, f), one of its functions (px, dxz, fxyz …), sigma, pi, pi-in or pi-out", quote(name))
}

// String writes the choice as ParseChoice reads it.
func (c Choice) String() string {
	var b strings.Builder
	b.WriteString(c.atoms)
	for i, it := range c.items {
		if i == 0 {
			b.WriteByte(':')
		} else {
			b.WriteByte(',')
		}
		b.WriteString(it.String())
	}
	return b.String()
}

func (it item) String() string {
	if it.centre == "" {
		return it.name
	}
	return it.name + "@" + it.centre
}

// quote writes text that somebody typed, shortened.
func quote(text string) string {
	const most = 40
	if utf8.RuneCountInString(text) > most {
		text = string([]rune(text)[:most]) + "…"
	}
	return strconv.Quote(text)
}
