package command

import (
	"io"
	"math"

	"github.com/spf13/cobra"

	"lobewright/app/export"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals/structure"
)

func (p *program) idealizeCommand() *cobra.Command {
	var s study.Study
	var output string
	var inputAxes, force bool
	cmd := &cobra.Command{
		Use:   "idealize STRUCTURE [--as GROUP] [-o FILE]",
		Short: "Write the nearest structure that has a point group exactly",
		Long: `Write the nearest structure that has a point group exactly: the group that the
structure has within the tolerance, or one that it nearly has (--as; near lists
them). Atoms stand in the working frame, or with --input-axes in the axes and at
the place of the input. The core stands at its ideal places; spectators keep
theirs.
` + structureHelp,
		Example: `  lobewright idealize complex.xyz -o ideal.xyz
  lobewright idealize complex.xyz --as D4h -o d4h.xyz
  lobewright idealize complex.xyz --as D4h --input-axes > d4h.xyz`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			if err := checkFrame(&s); err != nil {
				return err
			}
			g, err := p.group(cmd.Context(), s)
			if err != nil {
				return err
			}
			write := func(w io.Writer) error { return structure.Write(w, idealized(g, inputAxes)) }
			if output == "" {
				return write(p.Out)
			}
			if err := export.CheckTarget(output, force); err != nil {
				return err
			}
			return export.WriteFile(output, force, write)
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &s)
	flags.BoolVar(&inputAxes, "input-axes", false, "write the atoms in the axes of the input")
	flags.StringVarP(&output, "output", "o", "", "`FILE` to write (default standard output)")
	flags.BoolVar(&force, "force", false, "overwrite an existing file")
	return cmd
}

// idealized is the structure with its core at the ideal places.
func idealized(g *work.Group, inputAxes bool) *structure.Molecule {
	m := &structure.Molecule{Title: g.Molecule.Title + ", ideal " + g.Fit.Setting.Symbol}
	back := g.Fit.Rotation.Transpose()
	for i, v := range g.Sites.Positions {
		if inputAxes {
			v = back.Mul3x1(v).Add(g.Fit.Origin)
		}
		for k := range v {
			v[k] = math.Round(v[k]*writtenParts)/writtenParts + 0 // no −0
		}
		m.Atoms = append(m.Atoms, structure.Atom{Element: g.Molecule.Atoms[i].Element, Position: v})
	}
	return m
}

// writtenParts (1/Å) is the last place of the coordinates that are written: the
// group is exact to 1e-8 Å.
const writtenParts = 1e8
