package command

import (
	"context"
	"errors"
	"os"
	"strings"

	"github.com/spf13/cobra"
)

func (p *program) windowCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "window [STRUCTURE]",
		Short: "Open the window",
		Long: `window opens the window with a structure, or with what was open last. It does
what lobewright does without a command, but where there is no display it says
so and writes no figures.
` + structureHelp,
		Example: "  lobewright window\n  lobewright window complex.xyz",
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 1 {
				return oneStructure(cmd, args)
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return p.window(cmd.Context(), args) },
	}
}

// window opens the window with the structure of a command line, if there is
// one.
func (p *program) window(ctx context.Context, args []string) error {
	if p.Window == nil {
		return NoWindow{errors.New("this build has none")}
	}
	structure := ""
	if len(args) > 0 {
		structure = args[0]
	}
	return p.Window(ctx, structure)
}

// mayBeStructure takes no argument, or one that reads like a STRUCTURE: any
// other word is a command that does not exist.
func mayBeStructure(cmd *cobra.Command, args []string) error {
	if len(args) == 1 && readsLikeStructure(args[0]) {
		return nil
	}
	return noArguments(cmd, args)
}

func readsLikeStructure(arg string) bool {
	if strings.HasPrefix(arg, "demo:") || strings.HasPrefix(arg, "ideal:") || strings.ContainsAny(arg, `/\`) || strings.HasSuffix(arg, ".xyz") || isFigure(arg) {
		return true
	}
	info, err := os.Stat(arg)
	return err == nil && !info.IsDir()
}
