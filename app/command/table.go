package command

import (
	"context"
	"fmt"
	"io"
	"path/filepath"
	"slices"
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

// A tableOrder says how tables are written.
type tableOrder struct {
	format table.Format
	texts  assets.Texts
	force  bool
}

func (p *program) tableCommand() *cobra.Command {
	var s study.Study
	var several many
	var of []string
	var format, language, output string
	var force bool
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
		Args: several.args,
		RunE: func(cmd *cobra.Command, args []string) error {
			if output == "" && (len(args) > 1 || several.list != "") {
				return usagef("several structures need files to be written to: give -o with %s in the name", namePlace)
			}
			order := tableOrder{texts: assets.TextsIn(assets.Language(language)), format: table.Format(format), force: force}
			if err := order.settleFormat(cmd, output); err != nil {
				return err
			}
			return p.eachStudy(cmd, args, &several, &s, output,
				func(s *study.Study, _ string) error { return checkTables(cmd, s, of) },
				func(ctx context.Context, p *program, s study.Study, output string) error {
					return p.tables(ctx, s, of, order, output)
				})
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &s)
	basisFlag(flags, &s)
	flags.StringSliceVar(&of, "of", nil, "`TABLE` to write: "+strings.Join(names, ", ")+" (default characters, or orbitals with --on)")
	flags.Var(oneOf{&format, formatNames()}, "format", "`FORMAT` in the place of the one that the ending of the file tells: text, csv, markdown or latex")
	flags.Var(oneOf{&language, []string{string(assets.English), string(assets.German)}}, "language", "`LANGUAGE` of heads and titles, en or de")
	flags.IntVar(&s.Projection.Function, "function", 0, "number `N` of the function of the basis, for a ledger")
	flags.StringVar(&s.Projection.Irrep, "irrep", "", "`LABEL` of the irrep, for a ledger")
	flags.Var(elementFlag{&s.Projection.Element}, "element", "matrix element `K,L` that weighs the operations of a ledger (default 1,1)")
	flags.BoolVar(&s.Projection.Character, "character", false, "weigh a ledger with the character in the place of a matrix element")
	flags.StringVarP(&output, "output", "o", "", "`FILE` to write, ending in .txt, .csv, .md or .tex (default: print)")
	flags.BoolVar(&force, "force", false, "overwrite an existing file")
	several.flags(flags)
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

// settleFormat chooses the format by the ending of the file unless a flag does.
func (o *tableOrder) settleFormat(cmd *cobra.Command, output string) error {
	if output == "" || cmd.Flags().Changed("format") {
		return nil
	}
	byEnding, known := tableEndings[strings.ToLower(filepath.Ext(output))]
	if !known {
		return usagef("-o %s: the name must end in .txt, .csv, .md or .tex, or --format must tell the format", output)
	}
	o.format = byEnding
	return nil
}

// chosen are the tables that are asked for, or those that suit a study.
func chosen(s study.Study, of []string) ([]tableKind, error) {
	if len(of) == 0 {
		of = []string{"characters"}
		if len(s.Basis) > 0 {
			of = []string{"orbitals"}
		}
	}
	var kinds []tableKind
	for _, name := range of {
		i := slices.IndexFunc(tableKinds(), func(k tableKind) bool { return k.name == strings.TrimSpace(name) })
		if i < 0 {
			var names []string
			for _, k := range tableKinds() {
				names = append(names, k.name)
			}
			return nil, usagef("--of %s: there is no such table; there are %s", name, strings.Join(names, ", "))
		}
		kinds = append(kinds, tableKinds()[i])
	}
	return kinds, nil
}

// checkTables tells what of the choices is missing or wrong before anything is
// computed.
func checkTables(cmd *cobra.Command, s *study.Study, of []string) error {
	kinds, err := chosen(*s, of)
	if err != nil {
		return err
	}
	for _, k := range kinds {
		switch {
		case k.ledger:
			err = checkLedger(cmd, s)
		case k.basis && len(s.Basis) == 0:
			err = usagef("--of %s needs functions: give --on ATOMS:FUNCTIONS, such as --on Cl:sigma", k.name)
		default:
			err = checkBasis(cmd, s, false)
		}
		if err != nil {
			return err
		}
	}
	return nil
}

// tables makes the tables of one structure.
func (p *program) tables(ctx context.Context, s study.Study, of []string, o tableOrder, output string) error {
	kinds, err := chosen(s, of)
	if err != nil {
		return err
	}
	if o.format == table.FormatCSV && len(kinds) > 1 {
		return usagef("--of: a CSV file holds one table, and %d are asked for", len(kinds))
	}
	if output != "" {
		if err := export.CheckTarget(output, o.force); err != nil {
			return err
		}
	}
	var parts []string
	for _, k := range kinds {
		grid, err := p.grid(ctx, s, k, o.texts.Say)
		if err != nil {
			return err
		}
		parts = append(parts, grid.As(o.format))
	}
	text := strings.Join(parts, "\n")
	if output == "" {
		return p.write(text)
	}
	return export.WriteFile(output, o.force, func(w io.Writer) error {
		_, err := io.WriteString(w, text)
		return err
	})
}

// grid makes one table.
func (p *program) grid(ctx context.Context, s study.Study, k tableKind, say table.Say) (table.Grid, error) {
	if k.finite {
		g, err := p.work.Group(ctx, s)
		if err != nil {
			return table.Grid{}, err
		}
		if symbol := g.Fit.Setting.Symbol; g.Fit.Setting.Infinite() {
			return table.Grid{}, fmt.Errorf("--of %s: %s has infinitely many operations; content, orbitals and coefficients can be had, and the others of a finite group: %s", k.name, symbol, finiteInstead(symbol))
		}
	}
	return k.make(ctx, p, s, say)
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
