package command

import (
	"context"
	"io"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"lobewright/app/export"
	"lobewright/app/files"
	"lobewright/app/sheet"
	"lobewright/app/study"
)

// sheetHelp explains the kinds of sheets.
const sheetHelp = `
A figure is a sheet of panels, all from one place and at one scale:
  one          one group orbital (--irrep, --copy, --partner)
  all          all group orbitals of the functions, a row an irrep; what there
               is with --on and without --irrep
  set          all partners of one irrep (--irrep, --copy)
  operations   a panel for each operation, by class, that shows where it carries
               a function (--function) or a group orbital (--irrep)
  molecule     the structure with its axes and a panel for each class of
               symmetry elements
  frames       the structure in two frames (the second by --second); a picture of
               one group orbital, or of the structure alone, shows both triads
  descent      what becomes of irreps and group orbitals in --subgroup
  levels       columns of levels for a sketch of interactions: group orbitals,
               and orbitals of a central atom (--central) that go with them
`

func (p *program) figureCommand() *cobra.Command {
	var s study.Study
	var several many
	var output string
	var force bool
	cmd := &cobra.Command{
		Use:   "figure STRUCTURE… [--on ATOMS:FUNCTIONS] [--sheet KIND] -o FILE.png",
		Short: "Draw a sheet of panels: group orbitals, operations, axes, frames, levels",
		Long: `Draw a figure for print or for a slide: with --on all group orbitals of the
functions, with --irrep one of them, without functions the molecule with its
axes. Several structures need ` + namePlace + ` in the name of FILE.

The ending of FILE chooses the format
  .png         a picture of --dpi dots per inch
  .svg         text and lines as vectors, bodies as pictures of --dpi
  .pdf         the same, with text that can be searched and copied
` + structureHelp + selectionHelp + sheetHelp,
		Example: `  lobewright figure complex.xyz -o complex.png
  lobewright figure complex.xyz --on Cl:sigma -o all.png
  lobewright figure complex.xyz --on Cl:sigma,pi --width 180 --dpi 600 -o page.pdf
  lobewright figure complex.xyz --on Cl:sigma --irrep Eu --copy 1 --partner 2 -o eu-2.png
  lobewright figure complex.xyz --on Cl:sigma --sheet set --irrep Eu --slide -o eu.png
  lobewright figure complex.xyz --on Cl:sigma --sheet operations --function 2 -o strip.png
  lobewright figure complex.xyz --sheet molecule --look ink --width 120 -o elements.svg
  lobewright figure complex.xyz --sheet frames --second x-between -o frames.png
  lobewright figure complex.xyz --on Cl:sigma --sheet descent --subgroup C2v -o descent.png
  lobewright figure complex.xyz --on Cl:sigma --sheet levels -o levels.png
  lobewright figure page.pdf --look ink -o page-ink.pdf`,
		Args: several.args,
		RunE: func(cmd *cobra.Command, args []string) error {
			return p.eachStudy(cmd, args, &several, &s, output,
				func(s *study.Study, output string) error { return checkFigure(cmd, s, output) },
				func(ctx context.Context, p *program, s study.Study, output string) error {
					return p.figure(ctx, s, output, force)
				})
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &s)
	basisFlag(flags, &s)
	several.flags(flags)
	shownFlags(flags, &s)
	flags.StringVarP(&output, "output", "o", "", "`FILE` to write; its ending chooses the format: .png, .svg or .pdf")
	flags.BoolVar(&force, "force", false, "overwrite an existing file")
	pageFlags(flags, &s)
	lookFlags(flags, &s)
	return cmd
}

// shownFlags say what a sheet shows.
func shownFlags(flags *pflag.FlagSet, s *study.Study) {
	flags.Var(oneOf{&s.Figure.Sheet, append([]string{""}, sheetKinds...)}, "sheet",
		"`KIND` of sheet: "+strings.Join(sheetKinds, ", ")+" (default: what suits the other flags)")
	flags.StringVar(&s.Projection.Irrep, "irrep", "", "`LABEL` of the irrep of the group orbital")
	flags.IntVar(&s.Projection.Copy, "copy", 1, "which `N` of several copies of the irrep")
	flags.IntVar(&s.Projection.Partner, "partner", 1, "which `N` of the partners of a degenerate irrep")
	flags.IntVar(&s.Projection.Function, "function", 0, "which `N` of the functions the operations carry (default 1)")
	flags.StringVar(&s.Operation, "operation", "", "`NAME` of an operation whose symmetry element is shown")
	flags.StringVar(&s.Held.Frame, "second", "", "`RULE` that puts the axes of a second frame, drawn beside the first or into the same picture")
	flags.StringVar(&s.Subgroup, "subgroup", "", "`GROUP` to descend to: C4v, or C4v:2 for the second way")
	flags.StringVar(&s.Kept, "keep", "", "`OPERATIONS` that the subgroup holds, such as \"C4(x)\", by their names in the group")
	flags.IntVar(&s.Central, "central", 0, "which `ATOM` is the central one (default: the one that all operations leave)")
}

var sheetKinds = []string{sheet.One, sheet.All, sheet.Set, sheet.Operations, sheet.Molecule, sheet.Frames, sheet.Descent, sheet.Levels}

// pageFlags say how large a sheet is and what stands on it.
func pageFlags(flags *pflag.FlagSet, s *study.Study) {
	f := &s.Figure
	flags.Var(&positive{&f.Width, study.DefaultWidth}, "width", "width in `MM`, such as 85, 120 or 180")
	flags.Float64Var(&f.Height, "height", 0, "height in `MM` (default: what suits the content)")
	flags.BoolVar(&f.Slide, "slide", false, "a page of 16:9 with text of 18 pt")
	flags.Var(&positive{&f.Resolution, study.DefaultResolution}, "dpi", "resolution in `DOTS` per inch")
	flags.Var(oneOf{&f.Language, []string{"en", "de"}}, "language", "`LANGUAGE` of the words in the figure, en or de")
	flags.Var(oneOf{&f.Font, []string{"sans", "serif"}}, "font", "`FAMILY` of the text, sans (DejaVu Sans) or serif (DejaVu Serif)")
	flags.Float64Var(&f.TextSize, "text", 0, "size of the text in `POINTS` (default 8, on a slide 18)")
	flags.BoolVar(&s.Look.Elements, "elements", false, "draw all symmetry elements with their names")
	flags.BoolVar(&s.Look.Displacements, "displacements", false, "draw arrows from the ideal places of the atoms to those of the input")
	flags.BoolVar(&f.NoLetters, "no-letters", false, "leave out the letters of the panels")
	flags.BoolVar(&f.NoLegend, "no-legend", false, "leave out the legend of signs and sizes")
	flags.BoolVar(&f.NoCard, "no-card", false, "leave out the axes with their rule and the atoms' names beside them")
	flags.BoolVar(&f.NoCoefficients, "no-coefficients", false, "leave out the closed forms")
	flags.BoolVar(&f.NoCaption, "no-caption", false, "leave out all captions")
	noStudyFlag(flags, s)
}

// lookFlags say how the bodies look and from where they are seen.
func lookFlags(flags *pflag.FlagSet, s *study.Study) {
	l := &s.Look
	flags.Var(oneOf{&l.Style, []string{"lit", "ink"}}, "look", "`LOOK` of the bodies, lit (soft light) or ink (flat tones with outlines)")
	flags.Var(oneOf{&l.Ground, []string{"paper", "white", "dark", "transparent"}}, "ground", "`GROUND` of the picture, paper, white, dark or transparent")
	flags.Var(oneOf{&l.Size, []string{"length", "area", "volume"}}, "size", "`MEASURE` of a lobe that goes with |c|, length, area or volume")
	flags.Var(oneOf{&l.Shape, []string{"contour", "polar", "square"}}, "shape", "`SHAPE` of a lobe: contour of the function, polar plot of |Y|, or of its square")
	flags.Var(oneOf{&l.Signs, []string{"tones", "hatching", "printed"}}, "signs", "what tells the `SIGN` of a lobe: tones alone, also hatching, or + and − printed")
	flags.Var(viewFlag{&s.Camera}, "view", "see from `AZIMUTH,ELEVATION` in degrees, counted from x to y and up to z")
	flags.BoolVar(&s.Camera.Orthographic, "orthographic", false, "draw without perspective")
	flags.BoolVar(&l.Nodes, "nodes", false, "draw the nodal planes that the group orbital has by symmetry")
	flags.BoolVar(&l.NoLabels, "no-labels", false, "leave out the atoms' labels")
	flags.BoolVar(&l.NoAxes, "no-axes", false, "leave out the axes")
}

func checkFigure(cmd *cobra.Command, s *study.Study, output string) error {
	if err := checkBasis(cmd, s, false); err != nil {
		return err
	}
	flags := cmd.Flags()
	projects := flags.Changed("irrep") || flags.Changed("copy") || flags.Changed("partner")
	kind := s.Figure.Sheet
	if s.Look.Signs == "tones" {
		s.Look.Signs = ""
	}
	switch {
	case output == "":
		return usagef("no file to write: give -o FILE.png")
	case !export.IsSheetFile(output):
		return usagef("-o %s: the name must end in %s", output, wordError{export.SheetEndings}.list())
	case flags.Changed("height") && !(s.Figure.Height > 0):
		return usagef("--height: must be a number greater than 0")
	case flags.Changed("text") && !(s.Figure.TextSize >= 4 && s.Figure.TextSize <= 72):
		return usagef("--text: must be a size from 4 to 72 points")
	case len(s.Basis) == 0 && projects:
		return usagef("--irrep, --copy and --partner choose a group orbital of functions: give --on ATOMS:FUNCTIONS too")
	case s.Projection.Copy < 1:
		return usagef("--copy: copies count from 1")
	case s.Projection.Partner < 1:
		return usagef("--partner: partners count from 1")
	case flags.Changed("function") && s.Projection.Function < 1:
		return usagef("--function: functions count from 1")
	case len(s.Basis) == 0 && (kind == sheet.One || kind == sheet.All || kind == sheet.Set || kind == sheet.Operations || kind == sheet.Levels):
		return usagef("--sheet %s shows functions: give --on ATOMS:FUNCTIONS too", kind)
	case (kind == sheet.One || kind == sheet.Set) && s.Projection.Irrep == "":
		return usagef("--sheet %s needs --irrep LABEL, such as --irrep Eu; project lists the group orbitals", kind)
	case len(s.Basis) > 0 && kind == "" && s.Projection.Irrep == "" && projects:
		return usagef("--copy and --partner need --irrep LABEL, such as --irrep Eu; project lists the group orbitals")
	case kind == sheet.Descent && s.Subgroup == "":
		return usagef("--sheet descent needs --subgroup GROUP, such as --subgroup C2v; descend lists them")
	case s.Kept != "" && s.Subgroup == "":
		return usagef("--keep tells which one --subgroup GROUP is; choose that too")
	case s.Held.Frame != "" && !sheet.HoldsSecond(*s):
		return usagef("--second: a second frame is shown by --sheet frames, by one group orbital (--irrep) and by the structure alone")
	case kind == sheet.Frames && s.Held.Frame == "":
		return usagef("--sheet frames needs --second RULE for the second frame; frames lists the rules")
	}
	return nil
}

// figure draws what a study shows into a file.
func (p *program) figure(ctx context.Context, s study.Study, output string, force bool) error {
	made, err := p.sheet(ctx, s)
	if err != nil {
		return err
	}
	if err := files.Check(output, force); err != nil {
		return err
	}
	carried, err := p.carried(ctx, s)
	if err != nil {
		return err
	}
	for _, n := range made.Notes {
		p.note("%s", n)
	}
	return files.Write(output, files.Options{Force: force}, func(w io.Writer) error {
		return export.WriteSheet(ctx, w, made, output, s.Figure.TheResolution(), carried)
	})
}

// sheet lays out what a study shows. What is wrong with structure or functions
// is told as the other commands do.
func (p *program) sheet(ctx context.Context, s study.Study) (*sheet.Sheet, error) {
	if len(s.Basis) == 0 {
		if _, err := p.group(ctx, s); err != nil {
			return nil, err
		}
	} else if _, err := p.orbitals(ctx, s); err != nil {
		return nil, err
	}
	return sheet.Make(ctx, p.work, s)
}
