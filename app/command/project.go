package command

import (
	"context"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
)

func (p *program) projectCommand() *cobra.Command {
	var s study.Study
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "project STRUCTURE --on ATOMS:FUNCTIONS",
		Short: "Project functions on atoms onto the irreps: all group orbitals with all partners",
		Long: `Project functions on atoms onto every irrep of the point group. The result is
the characters and the content of the representation, and all group orbitals:
every copy with all its partners, which go into each other with exactly the
matrices of the irrep.
` + structureHelp + selectionHelp,
		Example: `  lobewright project ideal:SP-4,Pd,Cl,2.31 --on Cl:sigma
  lobewright project ideal:OC-6 --on 2-7:sigma --on 2-7:pi
  lobewright project ring.xyz --on C:pz --json`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			if err := checkBasis(cmd, &s, true); err != nil {
				return err
			}
			o, err := p.orbitals(cmd.Context(), s)
			if err != nil {
				return err
			}
			if asJSON {
				return p.print(describeOrbitals(o))
			}
			return p.write(projectText(o))
		},
	}
	groupFlags(cmd.Flags(), &s)
	basisFlag(cmd.Flags(), &s)
	jsonFlag(cmd.Flags(), &asJSON)
	return cmd
}

// orbitals computes the group orbitals and passes on all remarks.
func (p *program) orbitals(ctx context.Context, s study.Study) (*work.Orbitals, error) {
	if err := p.prepare(ctx, s); err != nil {
		return nil, err
	}
	o, err := p.work.Orbitals(ctx, s)
	if err != nil {
		return nil, err
	}
	p.noteStructure(o.Group)
	p.noteBasis(o.Basis, s)
	return o, nil
}

func (p *program) noteBasis(b *work.Basis, s study.Study) {
	for _, n := range b.Basis.Notes {
		p.note("%s", notation.Note(n, b.Basis, s.Basis, b.AtomNames()))
	}
}

// projectText lays out a basis and its group orbitals.
func projectText(o *work.Orbitals) string {
	var b strings.Builder
	b.WriteString(headText(o.Group))
	b.WriteString("\nBasis\n" + table.Basis(o.Basis).Text())
	if !o.Fit.Setting.Infinite() {
		b.WriteString("\nCharacters of the basis\n" + table.Representation(o).Text())
	}
	b.WriteString("\nContent\n  " + notation.Content(labels(o), o.Content) + "\n")
	if o.Linear != "" {
		fmt.Fprintf(&b, "\nNames in %s, up to Φ\n%s", o.Linear, table.LinearNames(o).Text())
	}
	b.WriteString("\nGroup orbitals\n" + table.Orbitals(o).Text())
	return b.String()
}

func labels(o *work.Orbitals) []string {
	out := make([]string, len(o.Irreps))
	for i, irrep := range o.Irreps {
		out[i] = irrep.Label
	}
	return out
}
