package command

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
)

func (p *program) ledgerCommand() *cobra.Command {
	var s study.Study
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "ledger STRUCTURE --on ATOMS:FUNCTIONS --function N --irrep LABEL",
		Short: "Project one function, operation by operation",
		Long: `Project one function of a basis onto one irrep, operation by operation: what
the function becomes, the weight of the operation, and the sum so far. The
weight is a matrix element of the irrep (--element K,L; 1,1 unless set) or its
character (--character). The sum is Σ D(R)_KL · R φ over the operations R.
` + structureHelp + selectionHelp,
		Example: `  lobewright ledger ideal:SP-4,Pd,Cl,2.31 --on Cl:sigma --function 1 --irrep Eu
  lobewright ledger ring.xyz --on C:pz --function 1 --irrep "E1''" --element 2,1
  lobewright ledger ring.xyz --on C:pz --function 1 --irrep "E1''" --character --json`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			if err := checkLedger(cmd, &s); err != nil {
				return err
			}
			if err := p.prepare(cmd.Context(), s); err != nil {
				return err
			}
			l, err := p.work.Ledger(cmd.Context(), s)
			if err != nil {
				return err
			}
			p.noteStructure(l.Group)
			p.noteBasis(l.Basis, s)
			if asJSON {
				return p.print(describeLedger(l))
			}
			return p.write(ledgerText(l))
		},
	}
	groupFlags(cmd.Flags(), &s)
	basisFlag(cmd.Flags(), &s)
	projection := &s.Projection
	cmd.Flags().IntVar(&projection.Function, "function", 0, "number `N` of the function of the basis to project")
	cmd.Flags().StringVar(&projection.Irrep, "irrep", "", "`LABEL` of the irrep to project onto")
	cmd.Flags().Var(elementFlag{&projection.Element}, "element", "matrix element `K,L` that weighs the operations (default 1,1)")
	cmd.Flags().BoolVar(&projection.Character, "character", false, "weigh with the character in the place of a matrix element")
	jsonFlag(cmd.Flags(), &asJSON)
	return cmd
}

func checkLedger(cmd *cobra.Command, s *study.Study) error {
	if err := checkBasis(cmd, s, true); err != nil {
		return err
	}
	projection := s.Projection
	switch {
	case projection.Function == 0 && !cmd.Flags().Changed("function"):
		return usagef("no function is chosen: give --function N, counted as project lists them")
	case projection.Function < 1:
		return usagef("--function: functions count from 1")
	case projection.Irrep == "":
		return usagef("no irrep is chosen: give --irrep LABEL, such as --irrep Eu")
	case projection.Character && projection.Element != [2]int{}:
		return usagef("--element and --character exclude each other")
	}
	return nil
}

// ledgerText lays out one projection.
func ledgerText(l *work.Ledger) string {
	var b strings.Builder
	b.WriteString(titleText(l.Group))
	b.WriteString("\nBasis\n" + table.Basis(l.Basis).Text())
	f := l.Functions[l.Ledger.Function]
	weight := "the character"
	if !l.ByCharacter() {
		weight = fmt.Sprintf("the matrix element %d,%d", l.Element[0]+1, l.Element[1]+1)
	}
	fmt.Fprintf(&b, "\nProjection of %s (%s) onto %s, weighed with %s\n",
		notation.Phi(l.Ledger.Function), table.FunctionName(l.Basis, f), l.Irrep.Label, weight)
	b.WriteString(table.Ledger(l).Text())
	if l.Norm > 0 {
		fmt.Fprintf(&b, "\nNorm of the sum: %s\n", normText(l.Norm))
	} else {
		b.WriteString("\n" + zeroText(l) + "\n")
	}
	return b.String()
}

// zeroText says what a sum of zero means: the element K,L leaves only what the
// function has of partner L.
func zeroText(l *work.Ledger) string {
	const none = "The sum is zero: the function has no part in this irrep."
	if len(l.Partners) == 0 || l.ByCharacter() {
		return none
	}
	other := l.Partners[0] + 1
	return fmt.Sprintf("The sum is zero: with the element %d,%d the function has no part in partner %d of this irrep. It has one in partner %d: try --element %d,%d.",
		l.Element[0]+1, l.Element[1]+1, l.Element[1]+1, other, other, other)
}

// normText writes a norm in closed form too, where it has one.
func normText(norm float64) string {
	decimal := notation.Short(norm, 6)
	if exact, ok := notation.Exact(norm); ok && exact != decimal {
		return exact + " = " + decimal
	}
	return decimal
}
