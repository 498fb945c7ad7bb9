package command

import (
	"context"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
	"lobewright/orbitals"
)

func (p *program) matchCommand() *cobra.Command {
	var s study.Study
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "match STRUCTURE --on ATOMS:FUNCTIONS",
		Short: "Match group orbitals with the functions of the central atom, partner by partner",
		Long: `Tell which s, p, d and f functions of the central atom go with which group
orbitals: those that transform exactly alike, partner by partner, with the sign
with which the two face each other in phase. Then the reverse: which group
orbitals find none (non-bonding by symmetry), and which functions of the atom.

The central atom is one that no operation moves; of several the one with the
most bonds, unless --central chooses.
` + structureHelp + selectionHelp,
		Example: `  lobewright match ideal:OC-6,Co,N --on N:sigma
  lobewright match demo:square-plane --on Cl:sigma,pi
  lobewright match complex.xyz --on Cl:pi --central 1 --json`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			if err := checkBasis(cmd, &s, true); err != nil {
				return err
			}
			if cmd.Flags().Changed("central") && s.Central < 1 {
				return usagef("--central: atoms count from 1")
			}
			m, err := p.match(cmd.Context(), s)
			if err != nil {
				return err
			}
			if asJSON {
				return p.print(describeMatch(m))
			}
			return p.write(matchText(m))
		},
	}
	groupFlags(cmd.Flags(), &s)
	basisFlag(cmd.Flags(), &s)
	cmd.Flags().IntVar(&s.Central, "central", 0, "number of the `ATOM` whose functions are matched (default: the atom that no operation moves)")
	jsonFlag(cmd.Flags(), &asJSON)
	return cmd
}

// match computes a match and passes on all remarks. Where there is no central
// atom the error says why.
func (p *program) match(ctx context.Context, s study.Study) (*work.Match, error) {
	if _, err := p.orbitals(ctx, s); err != nil {
		return nil, err
	}
	m, err := p.work.Match(ctx, s)
	if err == nil {
		err = m.None
	}
	return m, err
}

// matchText lays out a match.
func matchText(m *work.Match) string {
	o := m.Orbitals
	var b strings.Builder
	b.WriteString(titleText(o.Group))
	b.WriteString("\nContent\n  " + notation.Content(labels(o), o.Content) + "\n")
	atom := o.AtomNames()[m.Central]
	b.WriteString("\nGroup orbitals and functions of " + atom + "\n" + table.Match(m).Text())
	b.WriteString("\nFunctions of " + atom + " without a group orbital\n")
	if len(m.Lone) == 0 {
		b.WriteString("  none\n")
	} else {
		b.WriteString(table.Lone(m).Text())
	}
	return b.String()
}

// A matchDocument is a projectDocument with the central atom beside it.
type matchDocument struct {
	projectDocument
	Central        centralDocument `json:"central"`
	Matches        []pairDocument  `json:"matches"`
	NonBonding     []copyDocument  `json:"nonBonding"`
	WithoutPartner []copyDocument  `json:"withoutGroupOrbital"`
}

type centralDocument struct {
	Atom      int                       `json:"atom"`
	Functions []centralFunctionDocument `json:"functions"`
	Orbitals  []groupOrbitalDocument    `json:"orbitals"`
}

type centralFunctionDocument struct {
	Function string `json:"function"`
	Shell    int    `json:"shell"` // principal quantum number
}

type copyDocument struct {
	Irrep string `json:"irrep"`
	Copy  int    `json:"copy"`
}

// A pairDocument pairs partner k of the one copy with partner k of the other.
type pairDocument struct {
	Irrep       string `json:"irrep"`
	Copy        int    `json:"copy"`
	CentralCopy int    `json:"centralCopy"`
	Phase       int    `json:"phase"`
}

func describeMatch(m *work.Match) matchDocument {
	f := m.Functions
	d := matchDocument{
		projectDocument: describeOrbitals(m.Orbitals),
		Central:         centralDocument{Atom: m.Central + 1, Functions: []centralFunctionDocument{}, Orbitals: []groupOrbitalDocument{}},
		Matches:         []pairDocument{}, NonBonding: []copyDocument{}, WithoutPartner: []copyDocument{},
	}
	for _, function := range f.Functions {
		d.Central.Functions = append(d.Central.Functions, centralFunctionDocument{function.Name, f.Group.Sites.Elements[m.Central].Valence(function.Shell)})
	}
	for _, g := range f.Projection.Orbitals {
		form, _ := orbitals.FindClosedForm(g.Coefficients)
		d.Central.Orbitals = append(d.Central.Orbitals, groupOrbitalDocument{
			Irrep: f.Irreps[g.Irrep].Label, Copy: g.Copy + 1, Partner: g.Partner + 1,
			Coefficients: plains(g.Coefficients), ClosedForm: form.String(),
		})
	}
	for _, p := range m.Pairs {
		label := m.Orbitals.Irreps[p.Irrep].Label
		for _, c := range p.Central {
			d.Matches = append(d.Matches, pairDocument{label, p.Copy + 1, c.Copy + 1, c.Phase})
		}
		if len(p.Central) == 0 && !p.Own {
			d.NonBonding = append(d.NonBonding, copyDocument{label, p.Copy + 1})
		}
	}
	for _, c := range m.Lone {
		d.WithoutPartner = append(d.WithoutPartner, copyDocument{f.Irreps[c.Irrep].Label, c.Copy + 1})
	}
	return d
}
