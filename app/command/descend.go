package command

import (
	"context"
	"fmt"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
	"github.com/spf13/cobra"
	"gonum.org/v1/gonum/mat"

	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// A descentChoice is what a person says of the subgroup.
type descentChoice struct {
	in, to, fix string
	keep        []string
}

func (p *program) descendCommand() *cobra.Command {
	var s study.Study
	var choice descentChoice
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "descend STRUCTURE|--in GROUP [--to GROUP | --keep OPERATION | --fix ATOMS]",
		Short: "Follow irreps and partners into a subgroup, or list the subgroups",
		Long: `Follow the irreps of a group into a subgroup: the ways in which it lies in the
group, what each irrep becomes, the rotation between the two frames, and how
partners go over. Labels follow the axes of the group as far as they can; what
the subgroup has to turn is told. The group is that of a structure, or any
(--in).

The subgroup is chosen by its symbol (--to; C2v:2 is the second of the ways in
which a C2v lies in the group), by operations that are kept
(--keep: the smallest group that holds them, or with --to those that do), or by
atoms that stay in place (--fix: the site symmetry of an atom). Without a choice
all subgroups are listed, one of each class of conjugate ones.

A linear group descends into the groups with the same z: C∞v into Cn and Cnv,
D∞h into every Cn, Cnv, Cnh, Dn, Dnh, Dnd and S2n. The x of the partners lies
along the C2 or the plane on x.
` + structureHelp,
		Example: `  lobewright descend complex.xyz
  lobewright descend complex.xyz --to C2v
  lobewright descend --in Oh --to D4h
  lobewright descend --in Oh --to C2v:2
  lobewright descend --in Oh --keep "C4(z)"
  lobewright descend complex.xyz --fix 3 --json
  lobewright descend --in D∞h --to D2h`,
		Args: func(cmd *cobra.Command, args []string) error {
			if (choice.in != "") == (len(args) == 0) && len(args) < 2 {
				return nil
			}
			return usagef("descend takes one STRUCTURE or --in GROUP; see %q", cmd.CommandPath()+" --help")
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := choice.check(&s); err != nil {
				return err
			}
			if len(args) == 1 {
				if err := p.open(cmd, &s, args[0]); err != nil {
					return err
				}
			}
			list, err := p.descend(cmd.Context(), s, choice)
			if err != nil {
				return err
			}
			if asJSON {
				return p.print(list.document())
			}
			return p.write(list.text())
		},
	}
	flags := cmd.Flags()
	groupFlags(flags, &s)
	jsonFlag(flags, &asJSON)
	flags.StringVar(&choice.in, "in", "", "the `GROUP` to go out from, in the place of a structure")
	flags.StringVar(&choice.to, "to", "", "the `GROUP` to descend to: C2v, or C2v:2 for the second of the ways that are listed")
	flags.StringArrayVar(&choice.keep, "keep", nil, "an `OPERATION` that is kept, by its name in the group; may be repeated")
	flags.StringVar(&choice.fix, "fix", "", "`ATOMS` that stay in place, such as 3 or 3,5")
	return cmd
}

func (c descentChoice) check(s *study.Study) error {
	if err := checkFrame(s); err != nil {
		return err
	}
	switch {
	case c.fix != "" && (c.to != "" || len(c.keep) > 0):
		return usagef("--fix decides the subgroup; leave --to and --keep out")
	case c.fix != "" && c.in != "":
		return usagef("--fix chooses atoms of a structure, and --in gives none")
	case c.in != "" && (s.Frame != "" || s.Z != "" || s.X != "" || s.As != "" || s.Core != "" || s.Ignore != ""):
		return usagef("--frame, --z, --x, --as, --core and --ignore choose things of a structure, and --in gives none")
	}
	return nil
}

// A descentList is what descend has found.
type descentList struct {
	head     string // structure and group
	group    *symmetry.Setting
	subgroup string
	found    []*symmetry.Descent
	linear   *symmetry.LinearDescent
	// embedding counts the only one of found, from 1, of embeddings; 0 where all
	// are listed.
	embedding, embeddings int
}

func (p *program) descend(ctx context.Context, s study.Study, c descentChoice) (*descentList, error) {
	out := &descentList{}
	var g *work.Group
	var err error
	if c.in != "" {
		if out.group, err = symmetry.New(c.in); err != nil {
			return nil, err
		}
		out.head = fmt.Sprintf("Point group  %s\n", out.group.Symbol)
	} else {
		if g, err = p.group(ctx, s); err != nil {
			return nil, err
		}
		out.group, out.head = g.Fit.Setting, titleText(g)
	}
	if out.group.Infinite() {
		return out, out.descendLinear(c)
	}
	switch {
	case c.fix != "":
		err = out.fix(g, c.fix)
	case c.to != "" || len(c.keep) > 0:
		err = out.choose(c)
	default:
		err = out.all()
	}
	return out, err
}

// mostLambda is how far the irreps of a linear group are followed: Φ, or n where
// the subgroup tells more apart.
const mostLambda = 3

func (l *descentList) descendLinear(c descentChoice) error {
	if c.to == "" {
		return fmt.Errorf("%s has infinitely many subgroups; choose one by its symbol (--to C4v)", l.group.Symbol)
	}
	if len(c.keep) > 0 {
		return fmt.Errorf("the operations of %s cannot be listed; choose the subgroup by its symbol alone", l.group.Symbol)
	}
	symbol, n, err := work.ParseEmbedding(c.to)
	if err != nil {
		return err
	}
	if n > 1 {
		return noEmbedding(symbol, l.group.Symbol, 1, c.to)
	}
	sub, err := symmetry.New(symbol)
	if err != nil {
		return err
	}
	most := mostLambda
	for _, o := range sub.Operations {
		most = min(max(most, o.Turn.Den), 6)
	}
	l.linear, err = symmetry.DescendLinear(l.group.Symbol, symbol, most)
	if err == nil {
		l.subgroup = l.linear.Subgroup.Symbol
	}
	return err
}

func noEmbedding(symbol, group string, ways int, text string) error {
	if ways == 1 {
		return fmt.Errorf("%s lies in %s in one way; there is no %s", symbol, group, text)
	}
	return fmt.Errorf("%s lies in %s in %d ways that differ; %q is none of them", symbol, group, ways, text)
}

// choose finds the subgroup by its symbol, by operations, or by both.
func (l *descentList) choose(c descentChoice) error {
	var keep []int
	for _, name := range c.keep {
		group := work.Group{Fit: &symmetry.Fit{Setting: l.group}}
		o, err := group.Operation(name, 0)
		if err != nil {
			return err
		}
		keep = append(keep, o.Index)
	}
	if strings.Contains(c.to, ":") {
		return l.chooseEmbedding(c)
	}
	if c.to != "" {
		var err error
		l.found, err = work.Descents(l.group, c.to, keep)
		if err == nil {
			l.subgroup = l.found[0].Subgroup.Symbol
		}
		return err
	}
	return l.single(work.Generated(l.group, keep))
}

// chooseEmbedding finds the subgroup "C2v:2", in the conjugate that holds what is
// kept.
func (l *descentList) chooseEmbedding(c descentChoice) error {
	symbol, n, err := work.ParseEmbedding(c.to)
	if err != nil {
		return err
	}
	all, err := work.Descents(l.group, symbol, nil)
	if err != nil {
		return err
	}
	if n > len(all) {
		return noEmbedding(symbol, l.group.Symbol, len(all), c.to)
	}
	group := work.Group{Fit: &symmetry.Fit{Setting: l.group}}
	d, err := group.Conjugate(all[n-1], strings.Join(c.keep, ","))
	if err != nil {
		return err
	}
	l.found, l.subgroup, l.embedding, l.embeddings = []*symmetry.Descent{d}, symbol, n, len(all)
	return nil
}

func (l *descentList) fix(g *work.Group, text string) error {
	atoms, err := structure.ParseAtoms(text, g.Molecule, nil)
	if err != nil {
		return err
	}
	return l.single(g.Leaving(atoms))
}

func (l *descentList) single(operations []int) error {
	d, err := l.group.Descend(operations)
	if err != nil {
		return err
	}
	l.found, l.subgroup = []*symmetry.Descent{d}, d.Subgroup.Symbol
	return nil
}

// all lists one subgroup of each class of conjugate ones.
func (l *descentList) all() error {
	sets, err := l.group.Subgroups()
	if err != nil {
		return err
	}
	for _, set := range sets {
		d, err := l.group.Descend(set)
		if err != nil {
			return err
		}
		l.found = append(l.found, d)
	}
	return nil
}

func (l *descentList) text() string {
	var b strings.Builder
	b.WriteString(l.head)
	switch {
	case l.linear != nil:
		fmt.Fprintf(&b, "\nInto %s, the same axes\n", l.subgroup)
		fmt.Fprintf(&b, "\nCorrelation\n%s", table.LinearCorrelation(l.group.Symbol, l.linear).Text())
	case l.subgroup == "":
		b.WriteString("\nSubgroups, one of each class of conjugate ones\n" + table.Subgroups(l.found).Text())
	default:
		for i, d := range l.found {
			where := ""
			if len(l.found) > 1 {
				where = fmt.Sprintf(", embedding %d of %d", i+1, len(l.found))
			}
			if l.embeddings > 1 {
				where = fmt.Sprintf(", embedding %d of %d", l.embedding, l.embeddings)
			}
			fmt.Fprintf(&b, "\nInto %s%s, keeping\n%s", l.subgroup, where, table.Kept(d).Text())
			if turned(d.Rotation) {
				b.WriteString("Its frame in that of the group (rows x, y, z)\n" + table.Rows(d.Rotation).Text())
			} else {
				b.WriteString("in the same axes\n")
			}
			b.WriteString("\nCorrelation\n" + table.Correlation(d).Text())
			if t := table.DescentPartners(d); len(t.Rows) > 0 {
				b.WriteString("\nPartners of the group as combinations of those of the subgroup, where they are not the same\n" + t.Text())
			}
		}
	}
	return b.String()
}

func turned(m mgl64.Mat3) bool { return m.Trace() < 3-1e-9 }

type descentDocument struct {
	PointGroup string              `json:"pointGroup"`
	Subgroup   string              `json:"subgroup"`
	Embeddings []embeddingDocument `json:"embeddings"`
}

// subgroupsDocument is printed where no subgroup is chosen.
type subgroupsDocument struct {
	PointGroup string             `json:"pointGroup"`
	Subgroups  []subgroupDocument `json:"subgroups"`
}

type subgroupDocument struct {
	Subgroup   string   `json:"subgroup"`
	Order      int      `json:"order"`
	Operations []string `json:"operations"`
}

type embeddingDocument struct {
	Operations  []string              `json:"operations"`
	Rotation    [3][3]float64         `json:"rotation"`
	Correlation []correlationDocument `json:"correlation"`
	Partners    []partnersDocument    `json:"partners"`
}

type correlationDocument struct {
	Irrep   string            `json:"irrep"`
	Content []contentDocument `json:"content"`
}

func (l *descentList) document() any {
	if l.linear == nil && l.subgroup == "" {
		d := subgroupsDocument{PointGroup: l.group.Symbol, Subgroups: []subgroupDocument{}}
		for _, f := range l.found {
			d.Subgroups = append(d.Subgroups, subgroupDocument{f.Subgroup.Symbol, len(f.Operations), strings.Fields(operationNames(f))})
		}
		return d
	}
	d := descentDocument{PointGroup: l.group.Symbol, Subgroup: l.subgroup, Embeddings: []embeddingDocument{}}
	if l.linear != nil {
		e := embeddingDocument{Operations: []string{}, Rotation: rows(mgl64.Ident3())}
		for _, o := range l.linear.Subgroup.Operations {
			e.Operations = append(e.Operations, o.Name)
		}
		e.correlate(l.linear.Irreps, l.linear.Correlation, l.linear.Partners)
		d.Embeddings = append(d.Embeddings, e)
	}
	for _, f := range l.found {
		e := embeddingDocument{Operations: strings.Fields(operationNames(f)), Rotation: rows(f.Rotation)}
		e.correlate(f.Group.Irreps, f.Correlation, f.Partners)
		d.Embeddings = append(d.Embeddings, e)
	}
	return d
}

func (e *embeddingDocument) correlate(irreps []symmetry.Irrep, contents [][]symmetry.Content, partners []*mat.Dense) {
	for i, ir := range irreps {
		e.Correlation = append(e.Correlation, correlationDocument{ir.Label, describeContent(contents[i])})
		e.Partners = append(e.Partners, partnersDocument{ir.Label, denseRows(partners[i])})
	}
}
