package command

import (
	"bufio"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// manualCommand prints the manual page. It is made from the help of all
// commands, so it cannot say anything else than they do.
func (p *program) manualCommand() *cobra.Command {
	return &cobra.Command{
		Use:    "manual",
		Short:  "Print the manual page in the format of man",
		Hidden: true,
		Args:   noArguments,
		RunE: func(cmd *cobra.Command, _ []string) error {
			w := bufio.NewWriter(p.Out)
			writeManual(w, cmd.Root())
			return w.Flush()
		},
	}
}

// writeManual writes one page for a program and its commands, in roff with the
// macros of man(7).
func writeManual(w io.Writer, root *cobra.Command) {
	root.InitDefaultHelpFlag()
	root.InitDefaultVersionFlag()
	fmt.Fprintf(w, ".TH %s 1 \"\" \"%s %s\" \"User Commands\"\n", strings.ToUpper(root.Name()), roff(root.Name()), roff(root.Version))
	fmt.Fprintf(w, ".SH NAME\n%s \\- %s\n", roff(root.Name()), roff(lowerFirst(root.Short)))
	fmt.Fprintf(w, ".SH SYNOPSIS\n.B %s\n.br\n.B %s\n.I COMMAND\n.RI [ \"options and arguments\" ]\n", roff(root.UseLine()), roff(root.Name()))
	fmt.Fprint(w, ".SH DESCRIPTION\n")
	shared := sharedHelp()
	writeText(w, root.Long, shared)
	writeOptions(w, ".SS Options", root.NonInheritedFlags())
	writeExample(w, root)
	fmt.Fprint(w, ".SH COMMANDS\n")
	for _, c := range root.Commands() {
		if c.Hidden || c.Name() == "help" || c.Name() == "completion" {
			continue
		}
		c.InitDefaultHelpFlag()
		fmt.Fprintf(w, ".SS %s\n", roff(c.UseLine()))
		writeText(w, c.Long, shared)
		writeOptions(w, "", c.NonInheritedFlags())
		writeExample(w, c)
	}
	for _, s := range shared {
		fmt.Fprintf(w, ".SH %s\n", s.title)
		writeText(w, s.text, nil)
	}
	fmt.Fprint(w, ".SH EXIT STATUS\n.TP\n0\nwhat was asked for is done\n.TP\n1\nthe input could not be read, or does not have what is asked for; of several structures at least one failed\n.TP\n2\nthe command line is wrong\n")
}

// A section is help that several commands print; the manual has it once.
type section struct{ title, text string }

func sharedHelp() []section {
	return []section{{"STRUCTURES", structureHelp}, {"SELECTIONS OF FUNCTIONS", selectionHelp}}
}

// writeText writes help as it is broken into lines, since its tables are set
// with blanks; shared sections are only named.
func writeText(w io.Writer, text string, shared []section) {
	for _, s := range shared {
		text = strings.ReplaceAll(text, s.text, "\nSee "+s.title+" below.\n")
	}
	fmt.Fprint(w, ".nf\n")
	for line := range strings.Lines(strings.Trim(text, "\n") + "\n") {
		if line = strings.TrimRight(line, "\n"); line == "" {
			fmt.Fprint(w, ".sp\n")
			continue
		}
		fmt.Fprintf(w, "%s\n", roff(line))
	}
	fmt.Fprint(w, ".fi\n")
}

func writeOptions(w io.Writer, title string, flags *pflag.FlagSet) {
	if !flags.HasAvailableFlags() {
		return
	}
	if title != "" {
		fmt.Fprintln(w, title)
	}
	flags.VisitAll(func(f *pflag.Flag) {
		if f.Hidden {
			return
		}
		value, usage := pflag.UnquoteUsage(f)
		name := "\\-\\-" + roff(f.Name)
		if f.Shorthand != "" {
			name = "\\-" + roff(f.Shorthand) + ", " + name
		}
		fmt.Fprintf(w, ".TP\n\\fB%s\\fR", name)
		if value != "" {
			fmt.Fprintf(w, " \\fI%s\\fR", roff(value))
		}
		fmt.Fprintf(w, "\n%s", roff(usage))
		if d := f.DefValue; d != "" && d != "0" && d != "false" && d != "[]" && !strings.Contains(usage, "(default") {
			fmt.Fprintf(w, " (default %s)", roff(d))
		}
		fmt.Fprintln(w)
	})
}

func writeExample(w io.Writer, c *cobra.Command) {
	if c.Example == "" {
		return
	}
	fmt.Fprint(w, ".PP\nExamples:\n.PP\n.nf\n")
	for line := range strings.Lines(c.Example) {
		fmt.Fprintf(w, "%s\n", roff(strings.TrimRight(line, "\n")))
	}
	fmt.Fprint(w, ".fi\n")
}

// roff keeps a text from being read as a request or an escape.
func roff(s string) string {
	s = strings.NewReplacer(`\`, `\e`, "-", `\-`, "'", `\(aq`, "`", "\\(ga", "^", `\(ha`, "~", `\(ti`).Replace(s)
	if strings.HasPrefix(s, ".") {
		s = `\&` + s
	}
	return s
}

func lowerFirst(s string) string {
	if s == "" {
		return s
	}
	return strings.ToLower(s[:1]) + s[1:]
}
