package command

import (
	"context"
	"fmt"
	"io"
	"os"
	"runtime"
	"slices"
	"strings"
	"sync"
	"time"

	"github.com/spf13/cobra"

	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
	"lobewright/symmetry"
)

func (p *program) nearCommand() *cobra.Command {
	var s study.Study
	var asJSON, all bool
	cmd := &cobra.Command{
		Use:   "near STRUCTURE",
		Short: "List the point groups that a structure nearly has, and how it is distorted from each",
		Long: `List the point groups that a structure has when no atom moves by more than 1 Å,
and the ways in which each lies in it, by rising deviation. For each it tells how
far an atom moves, the continuous symmetry measure (0 to 100), and the
displacement from the ideal structure resolved by irrep, copy and partner, by the
same projection that makes group orbitals. The squares of these amounts add up
to that of the whole displacement.

Any of them is taken by --as in the other commands: --as D4h, or --as D4h:2 for
the second. idealize writes the ideal structure.
` + structureHelp,
		Example: `  lobewright near complex.xyz
  lobewright near complex.xyz --core Cu,O --json
  lobewright project complex.xyz --as D4h:2 --on O:sigma`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			l, err := p.ladder(cmd.Context(), s)
			if err != nil {
				return err
			}
			for _, n := range l.Notes {
				p.note("%s", n)
			}
			if asJSON {
				return p.printLadder(cmd.Context(), l)
			}
			text, err := ladderText(cmd.Context(), l, all)
			if err != nil {
				return err
			}
			return p.write(text)
		},
	}
	coreFlags(cmd.Flags(), &s)
	jsonFlag(cmd.Flags(), &asJSON)
	cmd.Flags().BoolVar(&all, "all", false, "list every embedding, and the subgroups of the group that the structure has")
	return cmd
}

// ladder finds the groups that a structure nearly has, with a bar on a
// terminal.
func (p *program) ladder(ctx context.Context, s study.Study) (*work.Ladder, error) {
	b := newBar(p.Err, "groups that the structure nearly has")
	l, err := p.work.Ladder(ctx, s, b.show)
	b.clear()
	return l, err
}

// prepare searches for the groups that the structure nearly has, if one of them
// is chosen: that takes a while, and others use what it finds.
func (p *program) prepare(ctx context.Context, s study.Study) error {
	if s.As == "" {
		return nil
	}
	_, err := p.ladder(ctx, s)
	return err
}

// distortions resolves the displacement from each of the groups.
func distortions(ctx context.Context, l *work.Ladder, wanted func(i int) bool) ([][]work.Share, error) {
	out := make([][]work.Share, len(l.Groups))
	errs := make([]error, len(l.Groups))
	next := make(chan int)
	var done sync.WaitGroup
	for range runtime.GOMAXPROCS(0) {
		done.Add(1)
		go func() {
			defer done.Done()
			for i := range next {
				if errs[i] = ctx.Err(); errs[i] == nil {
					out[i], errs[i] = l.Distortion(l.Groups[i])
				}
			}
		}()
	}
	for i := range l.Groups {
		if wanted(i) {
			next <- i
		}
	}
	close(next)
	done.Wait()
	for _, err := range errs {
		if err != nil {
			return nil, err
		}
	}
	return out, nil
}

func ladderText(ctx context.Context, l *work.Ladder, all bool) (string, error) {
	var b strings.Builder
	fmt.Fprintf(&b, "%s  (%s, %s)\n", l.Molecule.Title, l.Molecule.Formula(), count(len(l.Molecule.Atoms), "atom"))
	if n := len(l.Core); n < len(l.Molecule.Atoms) {
		fmt.Fprintf(&b, "Core         %s (%s)\n", numbers(fromOne(l.Core)), count(n, "atom"))
	}
	largest, below := l.Within()
	var folded []string // the subgroups of what it has
	for i, n := range l.Groups {
		if symbol := n.Fit.Setting.Symbol; below[i] && n.Whole == nil && !slices.Contains(folded, symbol) {
			folded = append(folded, symbol)
		}
	}
	shown := map[string]bool{}
	lines := make([]bool, len(l.Groups))
	for i, n := range l.Groups {
		symbol := n.Fit.Setting.Symbol
		lines[i] = all || !below[i] && !shown[symbol] && (n.Whole == nil || work.Usual(n))
		shown[symbol] = shown[symbol] || lines[i]
	}
	show := func(i int) bool { return lines[i] }
	shares, err := distortions(ctx, l, show)
	if err != nil {
		return "", err
	}
	b.WriteString("\nGroups within 1 Å\n" + table.Ladder(l, shares, show).Text())
	if folded != nil && !all {
		fmt.Fprintf(&b, "\nWith %s it has the subgroups %s (--all lists them).\n", l.Groups[largest].Fit.Setting.Symbol, strings.Join(folded, " "))
	}
	b.WriteString(lineNote(l, all))
	if len(l.Core) > symmetry.FullyTried {
		fmt.Fprintf(&b, "\nOf more than %d atoms only operations are sought that leave neighbours neighbours, each atom\ncarried no more than %g Å farther than to the nearest of its kind.\n", symmetry.FullyTried, symmetry.NearestImage)
	}
	return b.String(), nil
}

// lineNote says which groups are not listed since they leave all atoms on the line
// on which a linear group has them.
func lineNote(l *work.Ladder, all bool) string {
	if l.Linear() != nil {
		return "\nA linear molecule can be taken for any finite group with the same z (--as C2v); descend --to\ntells what its irreps become there.\n"
	}
	if all {
		return ""
	}
	for _, n := range l.Groups {
		if n.Fit.Setting.Infinite() && n.Whole == nil && len(l.Core) > 1 {
			return fmt.Sprintf("\nThe linear structure of %s has its finite subgroups with the same z, too, up to n = %d (--all\nlists them, and --as takes them).\n",
				n.Fit.Setting.Symbol, symmetry.MaxNearFold)
		}
	}
	return ""
}

type ladderDocument struct {
	Groups []nearDocument `json:"groups"`
}

type nearDocument struct {
	PointGroup string          `json:"pointGroup"`
	Embedding  int             `json:"embedding"`
	Axis       [3]float64      `json:"axis"`
	Deviation  float64         `json:"deviation"`
	Measure    float64         `json:"measure"`
	Distortion []shareDocument `json:"distortion"`
}

type shareDocument struct {
	Irrep   string  `json:"irrep"`
	Copy    int     `json:"copy"`
	Partner int     `json:"partner"`
	Amount  float64 `json:"amount"`
}

func (p *program) printLadder(ctx context.Context, l *work.Ladder) error {
	shares, err := distortions(ctx, l, func(int) bool { return true })
	if err != nil {
		return err
	}
	d := ladderDocument{Groups: []nearDocument{}}
	for i, n := range l.Groups {
		near := nearDocument{
			PointGroup: n.Fit.Setting.Symbol, Embedding: n.Embedding, Axis: vector(n.Axis),
			Deviation: plain(n.Fit.Deviation), Measure: plain(n.Measure), Distortion: []shareDocument{},
		}
		for _, s := range shares[i] {
			near.Distortion = append(near.Distortion, shareDocument{s.Irrep, s.Copy + 1, s.Partner + 1, plain(s.Amount)})
		}
		d.Groups = append(d.Groups, near)
	}
	return p.print(d)
}

// A bar shows on a terminal how far a search has come; elsewhere it shows
// nothing.
type bar struct {
	out   io.Writer
	what  string
	since time.Time
	shown int // percent, −1 for nothing
}

// barDelay is how long a search may take without a bar.
const barDelay = 300 * time.Millisecond

func newBar(out io.Writer, what string) *bar {
	b := &bar{what: what, since: time.Now(), shown: -1}
	if f, ok := out.(*os.File); ok {
		if info, err := f.Stat(); err == nil && info.Mode()&os.ModeCharDevice != 0 {
			b.out = out
		}
	}
	return b
}

func (b *bar) show(share float64) {
	const width = 30
	percent := int(100 * share)
	if b.out == nil || percent == b.shown || time.Since(b.since) < barDelay {
		return
	}
	b.shown = percent
	full := percent * width / 100
	fmt.Fprintf(b.out, "\r%s [%s%s] %3d %% (Ctrl-C stops)", b.what, strings.Repeat("=", full), strings.Repeat(" ", width-full), percent)
}

func (b *bar) clear() {
	if b.shown >= 0 {
		fmt.Fprint(b.out, "\r\x1b[K")
	}
}
