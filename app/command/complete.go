package command

import (
	"context"
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// endings are those of the files that can be given as a STRUCTURE.
var endings = []string{"xyz"}

// completions teaches the shell what can stand where: demonstrations and files
// for a STRUCTURE, the words of a flag that has a few, and, once a structure is
// on the line, its own irreps, operations and rules for the axes.
func completions(root *cobra.Command, p *program) {
	for _, c := range append(root.Commands(), root) {
		if strings.Contains(c.Use, "STRUCTURE") {
			c.ValidArgsFunction = completeStructure
		}
		c.Flags().VisitAll(func(f *pflag.Flag) {
			complete := completionOf(f, p)
			if complete != nil {
				_ = c.RegisterFlagCompletionFunc(f.Name, complete) // fails only if done twice
			}
		})
	}
}

type completion = func(cmd *cobra.Command, args []string, begun string) ([]string, cobra.ShellCompDirective)

func completionOf(f *pflag.Flag, p *program) completion {
	if words, ok := f.Value.(oneOf); ok {
		return cobra.FixedCompletions(words.words, cobra.ShellCompDirectiveNoFileComp)
	}
	switch f.Name {
	case "irrep":
		return p.ofTheGroup(func(ctx context.Context, q *program, s study.Study) (names []string) {
			g, err := q.work.Group(ctx, s)
			if err != nil {
				return nil
			}
			for _, i := range g.Fit.Setting.Irreps {
				names = append(names, i.Label)
			}
			return names
		})
	case "operation":
		return p.ofTheGroup(func(ctx context.Context, q *program, s study.Study) (names []string) {
			g, err := q.work.Group(ctx, s)
			if err != nil {
				return nil
			}
			for _, o := range g.Fit.Setting.Operations {
				names = append(names, o.Name)
			}
			return names
		})
	case "frame":
		return p.ofTheGroup(func(ctx context.Context, q *program, s study.Study) (names []string) {
			s.Frame = ""
			g, err := q.work.Group(ctx, s)
			if err != nil {
				return nil
			}
			for _, f := range g.Fit.Frames() {
				names = append(names, f.Rule.Name)
			}
			return names
		})
	case "on":
		return p.ofTheGroup(func(ctx context.Context, q *program, s study.Study) (names []string) {
			read, err := q.work.Structure(ctx, s)
			if err != nil {
				return nil
			}
			for _, e := range elementsOf(read.Molecule) {
				for _, f := range []string{"s", "p", "d", "sigma", "pi"} {
					names = append(names, e+":"+f)
				}
			}
			return names
		})
	case "core", "ignore":
		return p.ofTheGroup(func(ctx context.Context, q *program, s study.Study) []string {
			read, err := q.work.Structure(ctx, s)
			if err != nil {
				return nil
			}
			return elementsOf(read.Molecule)
		})
	}
	return nil
}

// ofTheGroup asks for names about the structure that is on the line already.
func (p *program) ofTheGroup(names func(context.Context, *program, study.Study) []string) completion {
	return func(cmd *cobra.Command, args []string, begun string) ([]string, cobra.ShellCompDirective) {
		if len(args) == 0 || args[0] == "-" {
			return nil, cobra.ShellCompDirectiveNoFileComp
		}
		s := study.Study{Structure: args[0]}
		for name, value := range map[string]*string{"core": &s.Core, "ignore": &s.Ignore, "as": &s.As, "frame": &s.Frame, "z": &s.Z, "x": &s.X} {
			if f := cmd.Flags().Lookup(name); f != nil {
				*value = f.Value.String()
			}
		}
		ctx := cmd.Context()
		if ctx == nil {
			ctx = context.Background()
		}
		var out []string
		for _, name := range names(ctx, p, s) {
			if strings.HasPrefix(name, begun) {
				out = append(out, name)
			}
		}
		return out, cobra.ShellCompDirectiveNoFileComp
	}
}

func elementsOf(m *structure.Molecule) []string {
	var out []string
	for _, a := range m.Atoms {
		if symbol := a.Element.Symbol(); !slices.Contains(out, symbol) {
			out = append(out, symbol)
		}
	}
	return out
}

// completeStructure offers the demonstrations where one was begun, and else
// leaves the files to the shell.
func completeStructure(cmd *cobra.Command, _ []string, begun string) ([]string, cobra.ShellCompDirective) {
	if begun != "" && strings.HasPrefix(begun, "demo:"[:min(len(begun), 5)]) {
		var out []string
		for _, d := range assets.DemoList() {
			if name := "demo:" + d.Name; strings.HasPrefix(name, begun) {
				out = append(out, name+"\t"+d.Title)
			}
		}
		return out, cobra.ShellCompDirectiveNoFileComp
	}
	return endings, cobra.ShellCompDirectiveFilterFileExt
}
