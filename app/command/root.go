package command

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

const structureHelp = `
STRUCTURE is
  a file       of coordinates: the count of atoms, a title, then a line
               "El x y z" in ångström for each atom
  -            the same on standard input
  ideal:…      an ideal polyhedron by its IUPAC symbol, with the elements and
               the distance if you like (ideal:OC-6  ideal:OC-6,Co,N,1.96), or
               a planar ring (ideal:ring-5,C)
  demo:NAME    an embedded demonstration; "lobewright demo" lists them
  a figure     that this program has made: the work that it shows, with all
               choices; flags that are given count above them
`

const selectionHelp = `
A selection of functions is ATOMS:FUNCTIONS
  ATOMS        an element (Cl), numbers (2-4,7), all, or an orbit (orbit:2)
  FUNCTIONS    with commas between them: shells s p d f; single functions
               s px py pz dz2 dxz dyz dx2-y2 dxy fz3 fxz2 fyz2 fz(x2-y2) fxyz
               fx(x2-3y2) fy(3x2-y2); and relative to a centre: sigma, a p
               function toward it (on hydrogen the s function), pi, the two
               square to it, pi-in and pi-out of a planar molecule. The centre
               is the atom bonded to, or what stands after @ (F:sigma@1,
               C:sigma@2-6 for the middle of these)
--on may be given more than once.
`

// root builds the tree of commands.
func (p *program) root(version string) *cobra.Command {
	root := &cobra.Command{
		Use:   "lobewright [STRUCTURE]",
		Short: "Point groups, group orbitals and figures of them, from coordinates",
		Long: `Lobewright takes the coordinates of a molecule to its point group in a stated
frame of axes, to the group orbitals of its ligands with all partners, and to
figures of them.

Without a command it opens the window. Where there is no display it writes
figures of the demonstrations into the folder out instead.`,
		Example: `  lobewright complex.xyz
  lobewright group complex.xyz
  lobewright frames complex.xyz
  lobewright project complex.xyz --on Cl:sigma
  lobewright figure complex.xyz --on Cl:sigma --irrep Eu -o eu.png`,
		Version: version,
		Args:    mayBeStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			err := p.window(cmd.Context(), args)
			var none NoWindow
			if len(args) == 0 && errors.As(err, &none) {
				return p.showcase(cmd.Context(), none.Reason)
			}
			return err
		},
		SilenceErrors: true,
		SilenceUsage:  true,
	}
	root.SetVersionTemplate("{{.Name}} {{.Version}}\n")
	root.SetIn(p.In)
	root.SetOut(p.Out)
	root.SetErr(p.Err)
	root.SetFlagErrorFunc(func(cmd *cobra.Command, err error) error {
		return usagef("%w; see %q", readable(err), cmd.CommandPath()+" --help")
	})
	root.AddCommand(p.groupCommand(), p.projectCommand(), p.matchCommand(), p.ledgerCommand(), p.tableCommand(), p.figureCommand(),
		p.animationCommand(),
		p.windowCommand(), p.demoCommand(), p.framesCommand(), p.multiplyCommand(), p.descendCommand(), p.nearCommand(), p.idealizeCommand(),
		p.manualCommand())
	completions(root, p)
	return root
}

// readable says what a flag takes where what was given for it cannot be read:
// the reader of flags names the function that failed instead.
func readable(err error) error {
	var invalid *pflag.InvalidValueError
	if !errors.As(err, &invalid) {
		return err
	}
	name := "--" + invalid.GetFlag().Name
	switch invalid.GetFlag().Value.Type() {
	case "bool":
		return fmt.Errorf("%s is there or not: write %s, or %s=false, not =%s", name, name, name, invalid.GetValue())
	case "int":
		return fmt.Errorf("%s takes a whole number, not %q", name, invalid.GetValue())
	case "float64":
		return fmt.Errorf("%s takes a number, not %q", name, invalid.GetValue())
	case "duration":
		return fmt.Errorf("%s takes a time such as 90s, not %q", name, invalid.GetValue())
	}
	return err
}
