package command

import (
	"context"
	"fmt"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/export"
	"lobewright/app/picture"
	"lobewright/app/study"
)

func (p *program) animationCommand() *cobra.Command {
	var s study.Study
	var several many
	var output string
	var force bool
	cmd := &cobra.Command{
		Use:   "animation STRUCTURE… --on ATOMS:FUNCTIONS --operation NAME -o FILE.gif",
		Short: "Write an operation, played on a function or a group orbital, as a moving picture",
		Long: `Write an operation as a moving picture: it carries the chosen function, or with
--irrep a group orbital, and what was at the start stays as a ghost. An improper
rotation turns first and is then reflected. Several structures need ` + namePlace + ` in the
name of FILE.

The ending of FILE chooses the format
  .gif         plays everywhere; 255 colours chosen for these pictures
  .apng        all colours, for browsers and slides
  .mp4         a film, written by the program ffmpeg where it is installed
  .png         one numbered file for each picture: FILE-01.png, FILE-02.png …
  .glb         a body in space that moves and can be turned (glTF 2.0)
` + structureHelp + selectionHelp,
		Example: `  lobewright animation complex.xyz --on Cl:sigma --operation "C4(z)" -o c4.gif
  lobewright animation complex.xyz --on Cl:sigma --function 2 --operation "σh" --look ink -o mirror.apng
  lobewright animation complex.xyz --on Cl:sigma --irrep Eu --partner 2 --operation "S4(z)" --size 1280x720 -o s4.mp4
  lobewright animation complex.xyz --on Cl:sigma --operation "C4(z)" --seconds 2.4 --once -o c4.glb
  lobewright animation c4.gif --operation i -o i.gif`,
		Args: several.args,
		RunE: func(cmd *cobra.Command, args []string) error {
			return p.eachStudy(cmd, args, &several, &s, output,
				func(s *study.Study, output string) error { return checkAnimation(cmd, s, output) },
				func(ctx context.Context, p *program, s study.Study, output string) error {
					return p.animation(ctx, s, output, force)
				})
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &s)
	basisFlag(flags, &s)
	flags.StringVar(&s.Operation, "operation", "", "`NAME` of the operation, as the command group lists them")
	flags.Float64Var(&s.Angle, "angle", 0, "φ in `DEGREES`, for operations such as C(φ) of linear molecules")
	flags.IntVar(&s.Projection.Function, "function", 0, "number `N` of the function of the basis that is carried (default 1)")
	flags.StringVar(&s.Projection.Irrep, "irrep", "", "`LABEL` of the irrep of the group orbital that is carried")
	flags.IntVar(&s.Projection.Copy, "copy", 1, "which `N` of several copies of the irrep")
	flags.IntVar(&s.Projection.Partner, "partner", 1, "which `N` of the partners of a degenerate irrep")
	flags.StringVarP(&output, "output", "o", "", "`FILE` to write; its ending chooses the format")
	flags.BoolVar(&force, "force", false, "overwrite an existing file")
	flags.Float64Var(&s.Animation.Seconds, "seconds", 0, "how long the operation takes, in `SECONDS` (default: 1.2, or 1.85 in two steps)")
	flags.Var(&positive{&s.Animation.Rate, picture.DefaultMovieRate}, "rate", "`PICTURES` in a second")
	flags.Var(pixelsFlag{&s.Animation}, "size", "`WIDTHxHEIGHT` in pixels")
	flags.BoolVar(&s.Animation.Once, "once", false, "play once instead of again and again")
	flags.Var(oneOf{&s.Look.Style, []string{"lit", "ink"}}, "look", "`LOOK` of the bodies, lit (soft light) or ink (flat tones with outlines)")
	flags.Var(oneOf{&s.Look.Ground, []string{"paper", "white", "dark", "transparent"}}, "ground", "`GROUND` of the picture, paper, white, dark or transparent")
	flags.Var(viewFlag{&s.Camera}, "view", "see from `AZIMUTH,ELEVATION` in degrees, counted from x to y and up to z")
	flags.BoolVar(&s.Camera.Orthographic, "orthographic", false, "draw without perspective")
	flags.BoolVar(&s.Look.NoLabels, "no-labels", false, "leave out the atoms' labels")
	flags.BoolVar(&s.Look.NoAxes, "no-axes", false, "leave out the axes in the corner")
	flags.Var(oneOf{&s.Figure.Language, []string{"en", "de"}}, "language", "`LANGUAGE` of the words in the figure, en or de")
	flags.BoolVar(&s.Figure.NoCaption, "no-caption", false, "leave out the caption")
	noStudyFlag(flags, &s)
	several.flags(flags)
	return cmd
}

// movingFormats are the endings of moving pictures.
var movingFormats = []string{".gif", ".apng", ".mp4", ".png", ".glb"}

func checkAnimation(cmd *cobra.Command, s *study.Study, output string) error {
	if err := checkBasis(cmd, s, true); err != nil {
		return err
	}
	// Whether the function or the group orbital is meant follows from the flags.
	switch flags := cmd.Flags(); {
	case flags.Changed("function") && flags.Changed("irrep"):
		return usagef("--function and --irrep exclude each other: one of them is carried")
	case flags.Changed("function"):
		s.Projection.Irrep, s.Projection.Subject = "", study.SubjectFunction
	case flags.Changed("irrep"):
		s.Projection.Subject = study.SubjectOrbital
	}
	if s.Projection.Irrep == "" && s.Projection.Function == 0 {
		s.Projection.Function = 1
	}
	format := strings.ToLower(filepath.Ext(output))
	known := false
	for _, f := range movingFormats {
		known = known || f == format
	}
	a := s.Animation
	switch {
	case s.Operation == "":
		return usagef("no operation is chosen: give --operation NAME, such as --operation \"C4(z)\"; group lists them")
	case output == "":
		return usagef("no file to write: give -o FILE.gif")
	case !known:
		return usagef("-o %s: the name must end in %s", output, wordError{movingFormats}.list())
	case s.Projection.Function < 0 || cmd.Flags().Changed("function") && s.Projection.Function < 1:
		return usagef("--function: functions count from 1")
	case s.Projection.Copy < 1:
		return usagef("--copy: copies count from 1")
	case s.Projection.Partner < 1:
		return usagef("--partner: partners count from 1")
	case !(s.Angle >= 0 && s.Angle <= 360):
		return usagef("--angle: must be from 0 to 360 degrees")
	case cmd.Flags().Changed("seconds") && !(a.Seconds >= 0.1 && a.Seconds <= 60):
		return usagef("--seconds: must be from 0.1 to 60")
	case a.Rate != 0 && !(a.Rate >= 1 && a.Rate <= 60):
		return usagef("--rate: must be from 1 to 60 pictures a second")
	}
	if format == ".gif" {
		if err := export.CheckGIF(a.Rate); err != nil {
			return usageError{err}
		}
	}
	return nil
}

// animation writes an operation as a moving picture.
func (p *program) animation(ctx context.Context, s study.Study, output string, force bool) error {
	if err := p.prepare(ctx, s); err != nil {
		return err
	}
	play, err := p.work.Play(ctx, s)
	if err != nil {
		return err
	}
	if play.Operation.Family && s.Angle == 0 {
		return usagef("%s needs an angle: give --angle DEGREES", play.Operation.Name)
	}
	p.noteStructure(play.Group)
	movie, err := picture.NewMovie(play, s)
	if err != nil {
		return err
	}
	return export.WriteMovie(ctx, output, force, movie, export.FilmOf(movie), s, func(s study.Study) ([]byte, error) { return p.carried(ctx, s) })
}

// pixelsFlag is a size WIDTHxHEIGHT in pixels.
type pixelsFlag struct{ animation *study.Animation }

const errNoPixels flagError = "must be two whole numbers with an x between them, such as 800x600"

func (f pixelsFlag) Set(text string) error {
	var w, h int
	var rest string
	if n, _ := fmt.Sscanf(strings.ReplaceAll(strings.ToLower(text), "×", "x"), "%dx%d%s", &w, &h, &rest); n != 2 || w < 1 || h < 1 {
		return errNoPixels
	}
	const most = 4096
	if w > most || h > most {
		return flagError(fmt.Sprintf("must have up to %d pixels each way", most))
	}
	f.animation.Width, f.animation.Height = w, h
	return nil
}

func (f pixelsFlag) String() string {
	if f.animation == nil {
		return ""
	}
	w, h := f.animation.Width, f.animation.Height
	if w == 0 || h == 0 {
		w, h = picture.DefaultMovieWidth, picture.DefaultMovieHeight
	}
	return fmt.Sprintf("%dx%d", w, h)
}

func (f pixelsFlag) Type() string { return "WIDTHxHEIGHT" }
