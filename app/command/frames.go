package command

import (
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
)

func (p *program) framesCommand() *cobra.Command {
	var s study.Study
	var asJSON bool
	var translate, from string
	cmd := &cobra.Command{
		Use:   "frames STRUCTURE",
		Short: "List the rules for the axes, and what everything is called by each",
		Long: `List every choice of x, y and z that a rule in use gives for a molecule, with its
source, and what each irrep and operation in the frame in force is called there.
The name of a rule is what --frame takes in all commands. Conventions that
differ in names alone are listed too.

With --translate, labels found elsewhere are written as they are here. --from
says by which they were given:
  a rule           plane-xz: levels get the names that they have in the frame
                   in force
  a relabelling    "F for T", as frames lists them
  a subgroup       D2h: the labels, those of one set of degenerate levels, are
                   lifted to the full group, as far as they decide it
` + structureHelp,
		Example: `  lobewright frames water.xyz
  lobewright frames complex.xyz --frame x-between --json
  lobewright frames water.xyz --translate "2 a1, 1 b1, 1 b2" --from plane-xz
  lobewright frames ideal:OC-6 --translate "b1u, b2u, b3u" --from D2h`,
		Args: oneStructure,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := p.open(cmd, &s, args[0]); err != nil {
				return err
			}
			if err := checkFrame(&s); err != nil {
				return err
			}
			if (translate == "") != (from == "") {
				return usagef("--translate and --from belong together: the labels, and by which rule they were given")
			}
			g, err := p.group(cmd.Context(), s)
			if err != nil {
				return err
			}
			var t *translation
			if translate != "" {
				if t, err = translated(g, translate, from); err != nil {
					return err
				}
			}
			switch {
			case asJSON:
				return p.print(describeFrames(g, t))
			case t != nil:
				return p.write(t.text(g))
			}
			return p.write(framesText(g))
		},
	}
	groupFlags(cmd.Flags(), &s)
	jsonFlag(cmd.Flags(), &asJSON)
	cmd.Flags().StringVar(&translate, "translate", "", "`LABELS` to translate, with commas between them, such as \"2 a1, 1 b1\"")
	cmd.Flags().StringVar(&from, "from", "", "`RULE`, relabelling or subgroup by which these labels were given")
	return cmd
}

// framesText lays out the rules and the names by each.
func framesText(g *work.Group) string {
	var b strings.Builder
	b.WriteString(titleText(g))
	exchanges := g.Exchanges()
	b.WriteString("\nFrames, the one in force first\n" + table.Rules(exchanges, g.CoreNames()).Text())
	if g.Fit.Setting.Infinite() {
		b.WriteString("\nz lies along the molecule and x is free: irreps have the same names in any frame.\n")
		return b.String()
	}
	b.WriteString("\nRotations from the input (rows x, y, z)\n" + table.Rotations(exchanges).Text())
	if len(exchanges) > 1 {
		b.WriteString("\nIrreps\n" + table.IrrepNames(exchanges).Text())
		b.WriteString("\nOperations\n" + table.OperationNames(exchanges).Text())
		partners := table.Partners(exchanges)
		if len(partners.Rows) > 0 {
			b.WriteString("\nPartners here as combinations of the partners there, where they are not the same\n" + partners.Text())
		}
	}
	if list := work.Relabellings(g.Fit.Setting); len(list) > 0 {
		b.WriteString("\nConventions that differ in names alone\n" + table.Relabellings(list).Text())
	}
	return b.String()
}

type framesDocument struct {
	PointGroup   string                `json:"pointGroup"`
	Frames       []exchangeDocument    `json:"frames"`
	Relabellings []relabellingDocument `json:"relabellings"`
	Translation  *translationDocument  `json:"translation,omitempty"`
}

type exchangeDocument struct {
	Name       string             `json:"name"`
	Rule       string             `json:"rule"`
	Source     string             `json:"source"`
	Rotation   [3][3]float64      `json:"rotation"`
	Irreps     []renamingDocument `json:"irreps"`
	Operations []renamingDocument `json:"operations"`
	Partners   []partnersDocument `json:"partners"`
}

type renamingDocument struct {
	Here  string `json:"here"`
	There string `json:"there"`
}

type partnersDocument struct {
	Irrep  string      `json:"irrep"`
	Matrix [][]float64 `json:"matrix"`
}

type relabellingDocument struct {
	Name    string             `json:"name"`
	Source  string             `json:"source"`
	Irreps  []renamingDocument `json:"irreps"`
	Classes []renamingDocument `json:"classes"`
}

func describeFrames(g *work.Group, t *translation) framesDocument {
	d := framesDocument{PointGroup: g.Fit.Setting.Symbol, Frames: []exchangeDocument{}, Relabellings: []relabellingDocument{}}
	for _, e := range g.Exchanges() {
		d.Frames = append(d.Frames, describeExchange(g, e))
	}
	for _, r := range work.Relabellings(g.Fit.Setting) {
		d.Relabellings = append(d.Relabellings, relabellingDocument{r.Name, r.Source, renamings(r.Irreps), renamings(r.Classes)})
	}
	if t != nil {
		d.Translation = t.document()
	}
	return d
}

func renamings(list []work.Renaming) []renamingDocument {
	out := []renamingDocument{}
	for _, r := range list {
		out = append(out, renamingDocument(r))
	}
	return out
}

func describeExchange(g *work.Group, e work.Exchange) exchangeDocument {
	d := exchangeDocument{
		Name: e.Frame.Rule.Name, Rule: notation.Convention(e.Fit, g.CoreNames()), Source: notation.Source(e.Frame.Rule),
		Rotation: rows(e.Fit.Rotation), Irreps: []renamingDocument{}, Operations: []renamingDocument{}, Partners: []partnersDocument{},
	}
	if e.Names == nil {
		return d
	}
	here, there := g.Fit.Setting, e.Fit.Setting
	for i, ir := range here.Irreps {
		d.Irreps = append(d.Irreps, renamingDocument{ir.Label, there.Irreps[e.Names.Irreps[i]].Label})
		d.Partners = append(d.Partners, partnersDocument{ir.Label, denseRows(e.Names.Partners[i])})
	}
	for r, o := range here.Operations {
		d.Operations = append(d.Operations, renamingDocument{o.Name, there.Operations[e.Names.Operations[r]].Name})
	}
	return d
}
