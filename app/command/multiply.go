package command

import (
	"fmt"
	"slices"
	"strings"
	"unicode/utf8"

	"github.com/spf13/cobra"

	"lobewright/app/notation"
	"lobewright/symmetry"
)

func (p *program) multiplyCommand() *cobra.Command {
	var in string
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "multiply LABEL LABEL … --in GROUP",
		Short: "Multiply irreps; of two equal ones also the symmetric and the antisymmetric square",
		Long: `Multiply irreps of a point group and resolve the product into irreps. Of two
equal factors the symmetric and the antisymmetric part are told too.

Labels are written as the command group prints them; small letters will do
(eg, t1u, a1'). GROUP is a Schoenflies symbol: D4h, Oh, Ih, C∞v or Cinfv, D∞h or
Dinfh, and Kh for a single atom (Sg, Pu, Dg). In linear groups S, P, D and F may
stand for Σ, Π, Δ and Φ.`,
		Example: `  lobewright multiply Eg T1u --in Oh
  lobewright multiply t2g t2g --in Oh --json
  lobewright multiply Πu Πu --in D∞h
  lobewright multiply Pu Dg --in Kh`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) < 2 {
				return usagef("multiply takes two irreps or more and %d are given; see %q", len(args), cmd.CommandPath()+" --help")
			}
			return nil
		},
		RunE: func(_ *cobra.Command, args []string) error {
			if in == "" {
				return usagef("no group is chosen: give --in GROUP, such as --in Oh")
			}
			product, err := multiplied(in, args)
			if err != nil {
				return err
			}
			if asJSON {
				return p.print(product.document())
			}
			return p.write(product.text())
		},
	}
	cmd.Flags().StringVar(&in, "in", "", "the `GROUP` that the irreps are of")
	jsonFlag(cmd.Flags(), &asJSON)
	return cmd
}

// A product is a direct product of irreps.
type product struct {
	group                             string
	factors                           []string
	content, symmetric, antisymmetric []symmetry.Content
	square                            bool
}

// mostFactors bounds a product; with more the numbers of copies grow beyond
// what anybody reads.
const mostFactors = 12

func multiplied(in string, labels []string) (*product, error) {
	setting, err := symmetry.New(in)
	if err != nil {
		return nil, err
	}
	if len(labels) > mostFactors {
		return nil, fmt.Errorf("%d factors are too many; the most is %d", len(labels), mostFactors)
	}
	out := &product{group: setting.Symbol}
	if setting.Infinite() {
		return out, out.infinite(labels)
	}
	for _, typed := range labels {
		ir, err := findIrrep(setting, typed)
		if err != nil {
			return nil, err
		}
		out.factors = append(out.factors, ir.Label)
	}
	if out.content, err = setting.Multiply(out.factors...); err != nil {
		return nil, err
	}
	if out.square = len(labels) == 2 && out.factors[0] == out.factors[1]; out.square {
		out.symmetric, out.antisymmetric, err = setting.Squares(out.factors[0])
	}
	return out, err
}

// findIrrep finds an irrep of a finite group by its label as a person types it.
func findIrrep(setting *symmetry.Setting, typed string) (*symmetry.Irrep, error) {
	label := notation.PlainLabel(typed)
	for i := range setting.Irreps {
		if sameLabel(setting.Irreps[i].Label, label) {
			return &setting.Irreps[i], nil
		}
	}
	return setting.Irrep(typed) // for its error
}

// infinite multiplies irreps of C∞v, D∞h or Kh, one after the other.
func (m *product) infinite(labels []string) error {
	for i, typed := range labels {
		ir, err := infiniteIrrep(m.group, typed)
		if err != nil {
			return err
		}
		m.factors = append(m.factors, ir.Label)
		if i == 0 {
			m.content = []symmetry.Content{{Irrep: ir, Copies: 1}}
			continue
		}
		var next []symmetry.Content
		for _, c := range m.content {
			content, symmetric, antisymmetric, err := symmetry.MultiplyInfinite(m.group, c.Irrep, ir)
			if err != nil {
				return err
			}
			if i == 1 {
				m.symmetric, m.antisymmetric = symmetric, antisymmetric
			}
			for _, part := range content {
				part.Copies *= c.Copies
				next = added(next, part)
			}
		}
		m.content = next
	}
	m.square = len(labels) == 2 && m.factors[0] == m.factors[1]
	slices.SortStableFunc(m.content, func(a, b symmetry.Content) int { return a.Irrep.Lambda - b.Irrep.Lambda })
	return nil
}

// added adds copies of an irrep to a content.
func added(list []symmetry.Content, part symmetry.Content) []symmetry.Content {
	for i := range list {
		if list[i].Irrep.Label == part.Irrep.Label {
			list[i].Copies += part.Copies
			return list
		}
	}
	return append(list, part)
}

var linearLetters = map[string]string{"S": "Σ", "P": "Π", "D": "Δ", "F": "Φ", "s": "Σ", "p": "Π", "d": "Δ", "f": "Φ"}

// infiniteIrrep reads a label of an infinite group; the first letter may be
// small, and Latin in a linear group.
func infiniteIrrep(symbol, typed string) (symmetry.Irrep, error) {
	label := notation.PlainLabel(typed)
	_, length := utf8.DecodeRuneInString(label)
	first, rest := label[:length], label[length:]
	if greek, ok := linearLetters[first]; ok && symbol != "Kh" {
		first = greek
	}
	label = strings.ToUpper(first) + rest
	ir, err := symmetry.InfiniteIrrepByLabel(symbol, label)
	if err != nil {
		_, err = symmetry.InfiniteIrrepByLabel(symbol, typed) // names it as typed
	}
	return ir, err
}

func (m *product) text() string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s in %s\n  %s\n", strings.Join(m.factors, " × "), m.group, contentText(m.content))
	if m.square {
		fmt.Fprintf(&b, "symmetric\n  %s\nantisymmetric\n  %s\n", contentText(m.symmetric), contentText(m.antisymmetric))
	}
	return b.String()
}

type productDocument struct {
	Group         string             `json:"group"`
	Factors       []string           `json:"factors"`
	Content       []contentDocument  `json:"content"`
	Symmetric     *[]contentDocument `json:"symmetric,omitempty"` // only for two equal factors
	Antisymmetric *[]contentDocument `json:"antisymmetric,omitempty"`
}

func (m *product) document() productDocument {
	d := productDocument{Group: m.group, Factors: m.factors, Content: describeContent(m.content)}
	if m.square {
		symmetric, antisymmetric := describeContent(m.symmetric), describeContent(m.antisymmetric)
		d.Symmetric, d.Antisymmetric = &symmetric, &antisymmetric
	}
	return d
}
