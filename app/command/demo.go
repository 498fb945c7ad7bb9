package command

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/assets"
)

func (p *program) demoCommand() *cobra.Command {
	return &cobra.Command{
		Use:     "demo",
		Short:   "List the embedded demonstration structures",
		Example: "  lobewright demo\n  lobewright group demo:NAME",
		Args:    noArguments,
		RunE: func(cmd *cobra.Command, _ []string) error {
			t := table.Table{Head: []string{"STRUCTURE", "group", "formula", ""}}
			for _, d := range assets.DemoList() {
				g, err := p.work.Group(cmd.Context(), study.Study{Structure: "demo:" + d.Name})
				if err != nil {
					return err
				}
				t.Add("demo:"+d.Name, g.Fit.Setting.Symbol, g.Molecule.Formula(), d.Title)
			}
			return p.write(t.Text())
		},
	}
}

// showcaseFolder is where the figures of the demonstrations go.
const showcaseFolder = "out"

// A showpiece is a figure of a demonstration.
type showpiece struct {
	file string
	study.Study
}

// showcase writes figures of the demonstrations and prints their paths, and
// why there is no window instead.
func (p *program) showcase(ctx context.Context, why error) error {
	if err := os.MkdirAll(showcaseFolder, 0o777); err != nil {
		return fmt.Errorf("cannot make the folder %s: %w", showcaseFolder, err)
	}
	pieces := showpieces()
	err := p.write(fmt.Sprintf("No window can be opened here (%s); %d figures of the demonstrations are written into the folder %s:\n",
		oneLine(why.Error()), len(pieces), showcaseFolder))
	for _, piece := range pieces {
		if err != nil {
			return err
		}
		path := filepath.Join(showcaseFolder, piece.file+".png")
		// These names are the program's own, so an older figure may go.
		if err := p.figure(ctx, piece.Study, path, true); err != nil {
			return fmt.Errorf("%s: %w", piece.file, err)
		}
		err = p.write(path + "\n")
	}
	return err
}

func orbitalPiece(structure, basis, irrep string, number, partner int) showpiece {
	file := strings.NewReplacer("'", "-prime", ":", "-", "+", "-plus").Replace(
		fmt.Sprintf("%s-%s-%d", strings.TrimPrefix(structure, "demo:"), strings.ToLower(irrep), partner))
	return showpiece{file, study.Study{
		Structure: structure, Basis: []string{basis},
		Projection: study.Projection{Irrep: irrep, Copy: number, Partner: partner},
	}}
}
