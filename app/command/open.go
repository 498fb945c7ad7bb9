package command

import (
	"context"
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"lobewright/app/export"
	"lobewright/app/study"
)

// isFigure tells whether an argument is a file with a study in it: a figure of
// this program or a study's own file.
func isFigure(arg string) bool {
	return export.CarriesStudy(arg) && !strings.HasPrefix(arg, "demo:") && !strings.HasPrefix(arg, "ideal:")
}

// open puts the STRUCTURE of a command line into its study. A figure brings
// the whole study that it was made from; flags that were given count above it.
//
// For that, the flags of a study are set again from their own texts: a flag's
// Set must take what its String gives.
func (p *program) open(cmd *cobra.Command, s *study.Study, arg string) error {
	if !isFigure(arg) {
		s.Structure = arg
		return nil
	}
	base, err := export.StudyIn(arg)
	if err != nil {
		return err
	}
	given := func(name string) bool { return cmd.Flags().Changed(name) }
	if given("on") {
		base.Basis, base.Projection, base.Turn, base.Mixing, base.Levels = nil, study.Projection{}, nil, nil, nil
	}
	if given("frame") {
		base.Z, base.X = "", ""
	}
	if given("z") || given("x") {
		base.Frame = ""
	}
	if given("as") {
		base.KeepAxes = false
	}
	if given("view") {
		base.Camera = study.Camera{Orthographic: base.Camera.Orthographic}
	}
	if given("element") {
		base.Projection.Character = false
	}
	if given("character") {
		base.Projection.Element = [2]int{}
	}
	base.Projection.Copy, base.Projection.Partner = max(1, base.Projection.Copy), max(1, base.Projection.Partner)
	texts := givenTexts(cmd.Flags())
	*s = base
	for _, t := range texts {
		if err := t.set(); err != nil {
			return err // the text was taken before
		}
	}
	return nil
}

// A givenText is a flag with the texts that were given for it.
type givenText struct {
	flag *pflag.Flag
	text string
	list []string // of a flag that may be repeated
}

func givenTexts(flags *pflag.FlagSet) []givenText {
	var out []givenText
	flags.Visit(func(f *pflag.Flag) {
		t := givenText{flag: f, text: f.Value.String()}
		if list, ok := f.Value.(pflag.SliceValue); ok {
			t.list = slices.Clone(list.GetSlice())
		}
		out = append(out, t)
	})
	return out
}

func (t givenText) set() error {
	if list, ok := t.flag.Value.(pflag.SliceValue); ok {
		return list.Replace(t.list)
	}
	return t.flag.Value.Set(t.text)
}

// carried is the file of a study for a figure to carry; nil if the study does
// not want that.
func (p *program) carried(ctx context.Context, s study.Study) ([]byte, error) {
	if s.Figure.NoStudy {
		return nil, nil
	}
	contained, err := p.work.Contained(ctx, s)
	if err != nil {
		return nil, err
	}
	return study.Encode(contained)
}

// noStudyFlag keeps the study out of a figure.
func noStudyFlag(flags *pflag.FlagSet, s *study.Study) {
	flags.BoolVar(&s.Figure.NoStudy, "no-study", false, "do not put the study into the file, from which the work can be opened again")
}
