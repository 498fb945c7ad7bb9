package command

import (
	"context"
	"io"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/export"
	"lobewright/app/picture"
	"lobewright/app/study"
)

func (p *program) figureCommand() *cobra.Command {
	var s study.Study
	var output string
	var force bool
	cmd := &cobra.Command{
		Use:   "figure STRUCTURE [--on ATOMS:FUNCTIONS --irrep LABEL] -o FILE.png",
		Short: "Draw the molecule with its axes, or one group orbital",
		Long: `Draw a picture as a PNG file: with --on and --irrep one group orbital, without
them the molecule with its axes. All group orbitals of one basis are seen from
the same place at the same scale.
` + structureHelp + selectionHelp,
		Example: `  lobewright figure complex.xyz -o complex.png
  lobewright figure complex.xyz --on Cl:sigma --irrep Eu --copy 1 --partner 2 -o eu-2.png
  lobewright figure complex.xyz --on Cl:sigma --irrep B1g --look ink --width 85 --dpi 600 -o b1g.png
  lobewright figure complex.xyz --operation "C2'(x)" -o axis.png`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			if err := checkFigure(cmd, &s, output); err != nil {
				return err
			}
			return p.figure(cmd.Context(), s, output, force)
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &s)
	basisFlag(flags, &s)
	flags.StringVar(&s.Projection.Irrep, "irrep", "", "`LABEL` of the irrep of the group orbital")
	flags.IntVar(&s.Projection.Copy, "copy", 1, "which `N` of several copies of the irrep")
	flags.IntVar(&s.Projection.Partner, "partner", 1, "which `N` of the partners of a degenerate irrep")
	flags.StringVar(&s.Operation, "operation", "", "`NAME` of an operation whose symmetry element is shown")
	flags.StringVarP(&output, "output", "o", "", "`FILE` to write; it must end in .png")
	flags.BoolVar(&force, "force", false, "overwrite an existing file")
	flags.Var(&positive{&s.Figure.Width, study.DefaultWidth}, "width", "width in `MM`")
	flags.Float64Var(&s.Figure.Height, "height", 0, "height in `MM` (default: what suits the content)")
	flags.Var(&positive{&s.Figure.Resolution, study.DefaultResolution}, "dpi", "resolution in `DOTS` per inch")
	flags.Var(oneOf{&s.Look.Style, []string{"lit", "ink"}}, "look", "`LOOK` of the bodies, lit (soft light) or ink (flat tones with outlines)")
	flags.Var(oneOf{&s.Look.Ground, []string{"paper", "white", "dark", "transparent"}}, "ground", "`GROUND` of the picture, paper, white, dark or transparent")
	flags.Var(oneOf{&s.Look.Size, []string{"length", "area", "volume"}}, "size", "`MEASURE` of a lobe that goes with |c|, length, area or volume")
	flags.Var(viewFlag{&s.Camera}, "view", "see from `AZIMUTH,ELEVATION` in degrees, counted from x to y and up to z")
	flags.BoolVar(&s.Camera.Orthographic, "orthographic", false, "draw without perspective")
	flags.BoolVar(&s.Look.NoLabels, "no-labels", false, "leave out the atoms' labels")
	flags.BoolVar(&s.Look.NoAxes, "no-axes", false, "leave out the axes in the corner")
	noStudyFlag(flags, &s)
	flags.BoolVar(&s.Figure.NoCaption, "no-caption", false, "leave out the caption")
	return cmd
}

func checkFigure(cmd *cobra.Command, s *study.Study, output string) error {
	if err := checkBasis(cmd, s, false); err != nil {
		return err
	}
	flags := cmd.Flags()
	projects := flags.Changed("irrep") || flags.Changed("copy") || flags.Changed("partner")
	switch {
	case output == "":
		return usagef("no file to write: give -o FILE.png")
	case !strings.EqualFold(filepath.Ext(output), ".png"):
		return usagef("-o %s: the name must end in .png, the one format there is", output)
	case flags.Changed("height") && !(s.Figure.Height > 0):
		return usagef("--height: must be a number greater than 0")
	case len(s.Basis) == 0 && projects:
		return usagef("--irrep, --copy and --partner choose a group orbital of functions: give --on ATOMS:FUNCTIONS too")
	case s.Projection.Copy < 1:
		return usagef("--copy: copies count from 1")
	case s.Projection.Partner < 1:
		return usagef("--partner: partners count from 1")
	case len(s.Basis) > 0 && s.Projection.Irrep == "":
		return usagef("--on needs --irrep LABEL, such as --irrep Eu; project lists the group orbitals")
	}
	return nil
}

// figure draws what a study shows into a file.
func (p *program) figure(ctx context.Context, s study.Study, output string, force bool) error {
	pic, err := p.picture(ctx, s)
	if err != nil {
		return err
	}
	if err := export.CheckTarget(output, force); err != nil {
		return err
	}
	carried, err := p.carried(ctx, s)
	if err != nil {
		return err
	}
	img, err := pic.Draw(ctx)
	if err != nil {
		return err
	}
	return export.WriteFile(output, force, func(w io.Writer) error {
		return export.EncodePNG(w, img, pic.Resolution, carried)
	})
}

// picture makes the scene that a study shows: a group orbital if one is
// chosen, else the molecule.
func (p *program) picture(ctx context.Context, s study.Study) (*picture.Picture, error) {
	if len(s.Basis) == 0 {
		g, err := p.group(ctx, s)
		if err != nil {
			return nil, err
		}
		return picture.Molecule(g, s)
	}
	o, err := p.orbitals(ctx, s)
	if err != nil {
		return nil, err
	}
	orbital, err := o.Orbital(s.Projection)
	if err != nil {
		return nil, err
	}
	return picture.Orbital(o, orbital, s)
}
