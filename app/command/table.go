package command

import (
	"context"
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/export"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/assets"
)

// A tableKind is a table that can be asked for.
type tableKind struct {
	name  string
	about string
	// basis says that it needs functions, ledger that it needs one of them and
	// an irrep too.
	basis, ledger bool
	// finite says that only a finite group has it.
	finite bool
	make   func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error)
}

func tableKinds() []tableKind {
	return []tableKind{
		{name: "characters", about: "the character table, with the functions that transform alike", finite: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				g, err := p.group(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.CharactersGrid(g.Fit.Setting, say), nil
			}},
		{name: "operations", about: "every operation: its class, its axis, where it carries the atoms", finite: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				g, err := p.group(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.OperationsGrid(g, say), nil
			}},
		{name: "matrices", about: "the matrices of all irreps", finite: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				g, err := p.group(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.MatricesGrid(g.Fit.Setting, say), nil
			}},
		{name: "frames", about: "what irreps and operations are called by each rule for the axes", finite: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				g, err := p.group(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.FramesGrid(g.Exchanges(), say), nil
			}},
		{name: "content", about: "how many copies of each irrep the functions hold", basis: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				o, err := p.orbitals(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.ContentGrid(o, say), nil
			}},
		{name: "orbitals", about: "the group orbitals as combinations in closed form", basis: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				o, err := p.orbitals(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.OrbitalsGrid(o, say), nil
			}},
		{name: "coefficients", about: "their coefficients, a column for each function", basis: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				o, err := p.orbitals(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.CoefficientsGrid(o, say), nil
			}},
		{name: "ledger", about: "the projection of one function, operation by operation", basis: true, ledger: true, finite: true,
			make: func(ctx context.Context, p *program, s study.Study, say table.Say) (table.Grid, error) {
				if err := p.prepare(ctx, s); err != nil {
					return table.Grid{}, err
				}
				l, err := p.work.Ledger(ctx, s)
				if err != nil {
					return table.Grid{}, err
				}
				return table.LedgerGrid(l, say), nil
			}},
	}
}

// A tableOrder is what a command line asks for.
type tableOrder struct {
	study  study.Study
	kinds  []tableKind
	format table.Format
	texts  assets.Texts
	force  bool
}

func (p *program) tableCommand() *cobra.Command {
	var o tableOrder
	var of []string
	var format, language, output, list string
	var workers int
	var names, about []string
	for _, k := range tableKinds() {
		names = append(names, k.name)
		about = append(about, fmt.Sprintf("  %-12s %s", k.name, k.about))
	}
	cmd := &cobra.Command{
		Use:   "table STRUCTURE… [--of TABLE] [--on ATOMS:FUNCTIONS] [-o FILE]",
		Short: "Write operations, characters, contents, coefficients or a ledger as text, CSV, Markdown or LaTeX",
		Long: `Write tables for papers and for other programs. The ending of FILE chooses the
format: .txt, .csv, .md or .tex; without -o the table is printed. CSV holds one
table, with all digits of each number. Several structures need ` + namePlace + ` in the name
of FILE.

TABLE is one of these, or several with commas between them:
` + strings.Join(about, "\n") + `
` + structureHelp + selectionHelp,
		Example: `  lobewright table complex.xyz
  lobewright table complex.xyz --on Cl:sigma --of orbitals -o orbitals.tex
  lobewright table complex.xyz --on Cl:sigma --of coefficients -o coefficients.csv
  lobewright table ring.xyz --on C:pz --of ledger --function 1 --irrep "E1''" --format markdown
  lobewright table *.xyz --of characters,operations -o 'tables/{name}.tex'`,
		Args: func(cmd *cobra.Command, args []string) error {
			if list != "" {
				return nil
			}
			return severalStructures(cmd, args)
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			structures, err := listed(args, list)
			if err != nil {
				return err
			}
			if len(of) == 0 {
				of = []string{"characters"}
				if len(o.study.Basis) > 0 {
					of = []string{"orbitals"}
				}
			}
			if err := o.check(cmd, of, format, output); err != nil {
				return err
			}
			o.texts = assets.TextsIn(assets.Language(language))
			if output == "" && len(structures) > 1 {
				return usagef("%d structures need files to be written to: give -o with %s in the name", len(structures), namePlace)
			}
			return p.each(cmd.Context(), structures, output, workers, func(ctx context.Context, p *program, j job) error {
				return p.table(ctx, cmd, &o, j)
			})
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &o.study)
	basisFlag(flags, &o.study)
	flags.StringSliceVar(&of, "of", nil, "`TABLE` to write: "+strings.Join(names, ", ")+" (default characters, or orbitals with --on)")
	flags.Var(oneOf{&format, formatNames()}, "format", "`FORMAT` in the place of the one that the ending of the file tells: text, csv, markdown or latex")
	flags.Var(oneOf{&language, []string{string(assets.English), string(assets.German)}}, "language", "`LANGUAGE` of heads and titles, en or de")
	flags.IntVar(&o.study.Projection.Function, "function", 0, "number `N` of the function of the basis, for a ledger")
	flags.StringVar(&o.study.Projection.Irrep, "irrep", "", "`LABEL` of the irrep, for a ledger")
	flags.Var(elementFlag{&o.study.Projection.Element}, "element", "matrix element `K,L` that weighs the operations of a ledger (default 1,1)")
	flags.BoolVar(&o.study.Projection.Character, "character", false, "weigh a ledger with the character in the place of a matrix element")
	flags.StringVarP(&output, "output", "o", "", "`FILE` to write, ending in .txt, .csv, .md or .tex (default: print)")
	flags.BoolVar(&o.force, "force", false, "overwrite an existing file")
	flags.StringVar(&list, "list", "", "`FILE` that names more structures, one a line")
	jobsFlag(flags, &workers)
	_ = cmd.RegisterFlagCompletionFunc("of", cobra.FixedCompletions(names, cobra.ShellCompDirectiveNoFileComp))
	return cmd
}

func formatNames() (names []string) {
	for _, f := range table.Formats() {
		names = append(names, string(f))
	}
	return names
}

// tableEndings tell the format of a file by its ending.
var tableEndings = map[string]table.Format{".txt": table.FormatText, ".csv": table.FormatCSV, ".md": table.FormatMarkdown, ".tex": table.FormatLaTeX}

// check reads what of the order is words, before anything is computed.
func (o *tableOrder) check(cmd *cobra.Command, of []string, format, output string) error {
	if err := checkBasis(cmd, &o.study, false); err != nil {
		return err
	}
	kinds := tableKinds()
	for _, name := range of {
		found := false
		for _, k := range kinds {
			if k.name != strings.TrimSpace(name) {
				continue
			}
			found = true
			o.kinds = append(o.kinds, k)
			if k.ledger {
				if err := checkLedger(cmd, &o.study); err != nil {
					return err
				}
			}
		}
		if !found {
			var names []string
			for _, k := range kinds {
				names = append(names, k.name)
			}
			return usagef("--of %s: there is no such table; there are %s", name, strings.Join(names, ", "))
		}
	}
	o.format = table.Format(format)
	if output != "" && !cmd.Flags().Changed("format") {
		ending := strings.ToLower(filepath.Ext(output))
		byEnding, known := tableEndings[ending]
		if !known {
			return usagef("-o %s: the name must end in .txt, .csv, .md or .tex, or --format must tell the format", output)
		}
		o.format = byEnding
	}
	if o.format == table.FormatCSV && len(o.kinds) > 1 {
		return usagef("--of: a CSV file holds one table, and %d are asked for", len(o.kinds))
	}
	return nil
}

// table makes the tables of one structure.
func (p *program) table(ctx context.Context, cmd *cobra.Command, o *tableOrder, j job) error {
	s, err := p.opened(cmd, &o.study, j.structure)
	if err != nil {
		return err
	}
	if j.output != "" {
		if err := export.CheckTarget(j.output, o.force); err != nil {
			return err
		}
	}
	var parts []string
	for _, k := range o.kinds {
		if k.basis && len(s.Basis) == 0 {
			return usagef("--of %s needs functions: give --on ATOMS:FUNCTIONS, such as --on Cl:sigma", k.name)
		}
		if k.finite {
			g, err := p.group(ctx, s)
			if err != nil {
				return err
			}
			if g.Fit.Setting.Infinite() {
				return fmt.Errorf("--of %s: %s has infinitely many operations; content, orbitals and coefficients can be had, and the others of a finite group: %s", k.name, g.Fit.Setting.Symbol, finiteInstead(g.Fit.Setting.Symbol))
			}
		}
		grid, err := k.make(ctx, p, s, o.texts.Say)
		if err != nil {
			return err
		}
		parts = append(parts, grid.As(o.format))
	}
	text := strings.Join(parts, "\n")
	if j.output == "" {
		return p.write(text)
	}
	return export.WriteFile(j.output, o.force, func(w io.Writer) error {
		_, err := io.WriteString(w, text)
		return err
	})
}

// finiteInstead is what to write to have a finite group in the place of an
// infinite one.
func finiteInstead(symbol string) string {
	switch symbol {
	case "C∞v":
		return "--as C4v"
	case "D∞h":
		return "--as D4h"
	}
	return "--as Oh"
}
