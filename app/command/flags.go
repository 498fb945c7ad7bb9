package command

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"lobewright/app/study"
	"lobewright/orbitals"
)

// coreFlags choose the atoms that decide the group.
func coreFlags(flags *pflag.FlagSet, s *study.Study) {
	flags.StringVar(&s.Core, "core", "", "`ATOMS` that decide the group, such as Cu,O or 1-5 (default all)")
	flags.StringVar(&s.Ignore, "ignore", "", "`ATOMS` that do not decide the group, such as H")
}

// groupFlags are the flags that decide the group and its frame.
func groupFlags(flags *pflag.FlagSet, s *study.Study) {
	coreFlags(flags, s)
	flags.Var(&positive{&s.Tolerance, study.DefaultTolerance}, "tolerance", "how far an atom may lie from its ideal place, a `LENGTH` in Å")
	flags.StringVar(&s.As, "as", "", "take the structure for `GROUP`, one that it nearly has: D4h, or D4h:2 for the second as near lists them")
	flags.BoolVar(&s.KeepAxes, "keep-axes", false, "with --as: lay the axes as in the largest group near by that holds this one")
	flags.StringVar(&s.Frame, "frame", "", "`RULE` that puts the axes; the command frames lists those of a molecule (default \"default\")")
	flags.StringVar(&s.Z, "z", "", "lay z along `WHAT`: an operation, an atom (3), from atom to atom (3,5) or a vector of the input (0,1,1)")
	flags.StringVar(&s.X, "x", "", "lay x along `WHAT`, as for z")
}

// checkFrame refuses two ways to lay the axes at once.
func checkFrame(s *study.Study) error {
	if s.Frame != "" && (s.Z != "" || s.X != "") {
		return usagef("--frame and --z or --x exclude each other: a rule lays the axes, or you do")
	}
	switch {
	case s.KeepAxes && s.As == "":
		return usagef("--keep-axes needs --as GROUP, whose axes it lays as in a larger group")
	case s.KeepAxes && (s.Frame != "" || s.Z != "" || s.X != ""):
		return usagef("--keep-axes excludes --frame, --z and --x: the axes are kept, or laid anew")
	}
	return nil
}

// basisFlag is the selection of functions.
func basisFlag(flags *pflag.FlagSet, s *study.Study) {
	flags.StringArrayVar(&s.Basis, "on", nil, "functions to project, `ATOMS:FUNCTIONS`; may be repeated")
}

// jsonFlag asks for JSON in the place of text.
func jsonFlag(flags *pflag.FlagSet, wanted *bool) {
	flags.BoolVar(wanted, "json", false, "print one JSON object in the place of text")
}

// checkBasis refuses selections that cannot be read before anything is
// computed.
func checkBasis(cmd *cobra.Command, s *study.Study, required bool) error {
	if err := checkFrame(s); err != nil {
		return err
	}
	if required && len(s.Basis) == 0 {
		return usagef("no functions are chosen: give --on ATOMS:FUNCTIONS, such as --on Cl:sigma; see %q", cmd.CommandPath()+" --help")
	}
	var list []string
	for _, text := range s.Basis {
		choices := orbitals.SplitChoices(text)
		if len(choices) == 0 {
			choices = []string{text}
		}
		for _, choice := range choices {
			if _, err := orbitals.ParseChoice(choice); err != nil {
				return usagef("--on: %w", err)
			}
		}
		list = append(list, choices...)
	}
	s.Basis = list
	return nil
}

// positive is a flag for a finite number greater than zero. The number stays
// zero, which stands for the default, until it is set.
type positive struct {
	number   *float64
	standard float64
}

func (p *positive) Set(text string) error {
	x, err := strconv.ParseFloat(text, 64)
	if err != nil || !(x > 0) || math.IsInf(x, 0) {
		return errNotPositive
	}
	*p.number = x
	return nil
}

func (p *positive) String() string {
	if p.number == nil || *p.number == 0 {
		return strconv.FormatFloat(p.standard, 'g', -1, 64)
	}
	return strconv.FormatFloat(*p.number, 'g', -1, 64)
}

func (p *positive) Type() string { return "number" }

// pair reads two numbers with a comma between them.
func pair(text string) (first, second string, ok bool) {
	first, second, ok = strings.Cut(text, ",")
	return strings.TrimSpace(first), strings.TrimSpace(second), ok
}

// elementFlag is a matrix element "k,l", from 1.
type elementFlag struct{ element *[2]int }

func (e elementFlag) Set(text string) error {
	first, second, ok := pair(text)
	k, errK := strconv.Atoi(first)
	l, errL := strconv.Atoi(second)
	if !ok || errK != nil || errL != nil || k < 1 || l < 1 {
		return errNoElement
	}
	*e.element = [2]int{k, l}
	return nil
}

func (e elementFlag) String() string {
	if e.element == nil || *e.element == [2]int{} {
		return ""
	}
	return strconv.Itoa(e.element[0]) + "," + strconv.Itoa(e.element[1])
}

func (e elementFlag) Type() string { return "K,L" }

// viewFlag is a direction of view "azimuth,elevation" in degrees.
type viewFlag struct{ camera *study.Camera }

func (v viewFlag) Set(text string) error {
	first, second, ok := pair(text)
	azimuth, errA := strconv.ParseFloat(first, 64)
	elevation, errE := strconv.ParseFloat(second, 64)
	if !ok || errA != nil || errE != nil || !(math.Abs(azimuth) <= 360) || !(math.Abs(elevation) <= 90) {
		return errNoView
	}
	v.camera.Set, v.camera.Azimuth, v.camera.Elevation = true, azimuth, elevation
	return nil
}

func (v viewFlag) String() string {
	if v.camera == nil || !v.camera.Set {
		return ""
	}
	return strconv.FormatFloat(v.camera.Azimuth, 'g', -1, 64) + "," + strconv.FormatFloat(v.camera.Elevation, 'g', -1, 64)
}

func (v viewFlag) Type() string { return "AZIMUTH,ELEVATION" }

// oneOf is a flag with a few possible words, of which the first is the
// default.
type oneOf struct {
	word  *string
	words []string
}

func (o oneOf) Set(text string) error {
	for _, w := range o.words {
		if text == w {
			*o.word = w
			return nil
		}
	}
	return wordError{o.words}
}

func (o oneOf) String() string {
	if o.word == nil || *o.word == "" {
		if len(o.words) > 0 {
			return o.words[0]
		}
		return ""
	}
	return *o.word
}

func (o oneOf) Type() string { return "word" }

type wordError struct{ words []string }

func (w wordError) Error() string { return "must be " + w.list() }

func (w wordError) list() string {
	words := slices.DeleteFunc(slices.Clone(w.words), func(s string) bool { return s == "" })
	last := len(words) - 1
	return strings.Join(words[:last], ", ") + " or " + words[last]
}

type flagError string

func (f flagError) Error() string { return string(f) }

const (
	errNotPositive flagError = "must be a number greater than 0"
	errNoElement   flagError = "must be two numbers from 1 with a comma between them, such as 1,2"
	errNoView      flagError = "must be an azimuth and an elevation in degrees with a comma between them, such as 30,20"
)
