package command

import (
	"bytes"
	"context"
	"slices"
	"strings"
	"testing"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

func runLine(args ...string) (status int, out, err string) {
	var o, e bytes.Buffer
	status = Run(context.Background(), args, Streams{In: strings.NewReader(""), Out: &o, Err: &e}, "test")
	return status, o.String(), e.String()
}

func TestTheManualHasEveryCommandAndEveryFlag(t *testing.T) {
	status, page, err := runLine("manual")
	if status != 0 || err != "" || !strings.HasPrefix(page, ".TH LOBEWRIGHT 1") {
		t.Fatalf("%d %s %.80s", status, err, page)
	}
	root := (&program{}).root("test")
	for _, c := range root.Commands() {
		if c.Hidden || c.Name() == "help" || c.Name() == "completion" {
			continue
		}
		c.InitDefaultHelpFlag()
		_, rest, found := strings.Cut(page, "\n.SS "+roff(c.UseLine())+"\n")
		if !found {
			t.Errorf("%s is missing", c.Name())
			continue
		}
		c.Flags().VisitAll(func(f *pflag.Flag) {
			if !strings.Contains(rest, `\-\-`+roff(f.Name)) {
				t.Errorf("%s: --%s is missing", c.Name(), f.Name)
			}
		})
	}
	for line := range strings.Lines(page) {
		if strings.HasPrefix(line, "'") {
			t.Errorf("%q would be read as a request", line)
		}
	}
}

func TestTheShellIsToldWhatCanStandWhere(t *testing.T) {
	for line, want := range map[string]string{
		"figure demo:cy":                                      "demo:cyanide",
		"group demo:square-plane --frame ":                    "x-between",
		"project demo:square-plane --on C":                    "Cl:sigma",
		"ledger demo:square-plane --irrep E":                  "Eu",
		"figure demo:square-plane --operation C4":             "C4^3(z)",
		"figure --look ":                                      "ink",
		"group demo:square-plane --core ":                     "Pt",
		"ledger demo:square-plane --frame x-between --irrep ": "B2g",
		"group ": "xyz",
	} {
		status, out, _ := runLine(append([]string{"__complete"}, strings.Split(line, " ")...)...)
		words := strings.FieldsFunc(out, func(r rune) bool { return r == '\n' || r == '\t' })
		if status != 0 || !slices.Contains(words, want) {
			t.Errorf("%s: %s is not offered but %q", line, want, out)
		}
	}
}

func TestEveryCommandForAStructureCompletesIt(t *testing.T) {
	root := (&program{}).root("test")
	for _, c := range append([]*cobra.Command{root}, root.Commands()...) {
		if strings.Contains(c.Use, "STRUCTURE") && c.ValidArgsFunction == nil {
			t.Errorf("%s does not", c.Name())
		}
	}
}
