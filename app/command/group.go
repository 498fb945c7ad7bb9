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

func (p *program) groupCommand() *cobra.Command {
	var s study.Study
	var asJSON, matrices bool
	cmd := &cobra.Command{
		Use:   "group STRUCTURE",
		Short: "Find the point group, its frame, operations, classes and irreps",
		Long: `Find the point group of a structure in a stated frame of axes, with every
operation, the classes, and the irreps with their characters and matrices.
` + structureHelp,
		Example: `  lobewright group ideal:OC-6,Co,N,1.96
  lobewright group complex.xyz --ignore H --tolerance 0.05
  lobewright group complex.xyz --json > complex.json`,
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
			if asJSON {
				return p.print(describeGroup(g, g.Fit.Setting.Irreps))
			}
			return p.write(groupText(g, matrices))
		},
	}
	groupFlags(cmd.Flags(), &s)
	jsonFlag(cmd.Flags(), &asJSON)
	cmd.Flags().BoolVar(&matrices, "matrices", false, "print the matrices of degenerate irreps too")
	return cmd
}

// group computes the group and passes on what the reader remarks.
func (p *program) group(ctx context.Context, s study.Study) (*work.Group, error) {
	if err := p.prepare(ctx, s); err != nil {
		return nil, err
	}
	g, err := p.work.Group(ctx, s)
	if err != nil {
		return nil, err
	}
	p.noteStructure(g)
	return g, nil
}

func (p *program) noteStructure(g *work.Group) {
	for _, n := range g.Notes {
		p.note("%s", n)
	}
}

// print writes a document to the output.
func (p *program) print(document any) error {
	data, err := encode(document)
	if err != nil {
		return err
	}
	return p.write(string(data))
}

func (p *program) write(text string) error {
	_, err := p.Out.Write([]byte(text))
	return err
}

const (
	maxAtomsShown        = 60 // in the table of atoms
	maxPermutationsShown = 16 // core atoms, in the table of operations
)

// groupText lays out all that is known of a group.
func groupText(g *work.Group, matrices bool) string {
	var b strings.Builder
	b.WriteString(headText(g))
	b.WriteString("\nAtoms in the working frame, at their ideal places (Å)\n" + table.Atoms(g, maxAtomsShown).Text())
	setting := g.Fit.Setting
	if setting.Infinite() {
		b.WriteString("\nThe group has infinitely many operations; project lists the irreps that occur.\n")
		return b.String()
	}
	b.WriteString("\nOperations\n" + operationsTable(g).Text())
	b.WriteString("\nCharacters\n" + table.Characters(setting).Text())
	if matrices {
		b.WriteString("\nMatrices (column k: what becomes of partner k)\n" + table.Matrices(setting).Text())
	}
	return b.String()
}

// operationsTable shows where the operations carry the core, if that is not
// too wide.
func operationsTable(g *work.Group) table.Table {
	if len(g.Core) <= maxPermutationsShown {
		return table.Operations(g.Fit.Setting, g.Sites.Permutations, g.Core)
	}
	t := table.Operations(g.Fit.Setting, nil, nil)
	t.Notes = append(t.Notes, fmt.Sprintf("(where the %d atoms go: --json)", len(g.Sites.Positions)))
	return t
}

// headText names structure, group and frame.
func headText(g *work.Group) string {
	var b strings.Builder
	fit := g.Fit
	b.WriteString(titleText(g))
	if n := len(g.Core); n < len(g.Molecule.Atoms) {
		fmt.Fprintf(&b, "Core         %s (%s)\n", numbers(fromOne(g.Core)), count(n, "atom"))
	}
	if far := notation.Decimal(fit.Deviation, 4); g.As != "" {
		fmt.Fprintf(&b, "Deviation    as %s, atoms moved by up to %s Å (atom %d)\n", g.As, far, g.Core[fit.Worst]+1)
	} else {
		fmt.Fprintf(&b, "Deviation    %s Å at the most (atom %d; tolerance %s Å)\n", far, g.Core[fit.Worst]+1, trimmed(fit.Tolerance))
	}
	if fit.Doubtful {
		b.WriteString("Doubtful     another group would be found within a factor of three of the tolerance\n")
	}
	for i, clause := range strings.Split(notation.Convention(fit, g.CoreNames()), "; ") {
		fmt.Fprintf(&b, "%-12s %s\n", []string{"Frame", ""}[min(i, 1)], clause)
	}
	fmt.Fprintf(&b, "             (%s; source: %s)\n", fit.Rule.Name, notation.Source(fit.Rule))
	for _, tie := range notation.Ties(fit.Ties) {
		fmt.Fprintf(&b, "Tie          %s\n", tie)
	}
	return b.String()
}

// titleText names structure and group.
func titleText(g *work.Group) string {
	setting := g.Fit.Setting
	order := ""
	if !setting.Infinite() {
		order = ", " + count(setting.Order(), "operation")
	}
	return fmt.Sprintf("%s  (%s, %s)\n\nPoint group  %s%s\n",
		g.Molecule.Title, g.Molecule.Formula(), count(len(g.Molecule.Atoms), "atom"), setting.Symbol, order)
}

func count(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

func trimmed(x float64) string { return fmt.Sprintf("%.4g", x) }

// numbers writes rising numbers with runs as ranges: 1-5,7.
func numbers(list []int) string {
	var parts []string
	for i := 0; i < len(list); {
		j := i
		for j+1 < len(list) && list[j+1] == list[j]+1 {
			j++
		}
		part := fmt.Sprint(list[i])
		if j > i {
			part += fmt.Sprintf("-%d", list[j])
		}
		parts = append(parts, part)
		i = j + 1
	}
	return strings.Join(parts, ",")
}
