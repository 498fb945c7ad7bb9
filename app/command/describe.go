package command

import (
	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// plain makes a negative zero a zero; JSON would print its sign.
func plain(x float64) float64 {
	if x == 0 {
		return 0
	}
	return x
}

// plains copies numbers for a document. It is never nil: an empty list is
// printed as [].
func plains(in []float64) []float64 {
	out := make([]float64, len(in))
	for i, x := range in {
		out[i] = plain(x)
	}
	return out
}

func vector(v mgl64.Vec3) [3]float64 { return [3]float64{plain(v[0]), plain(v[1]), plain(v[2])} }

// unitVector is nil for the zero vector, which stands for none.
func unitVector(v mgl64.Vec3) *[3]float64 {
	if v.Len() == 0 {
		return nil
	}
	out := vector(v)
	return &out
}

// rows writes a matrix row by row; mgl64 stores columns.
func rows(m mgl64.Mat3) (out [3][3]float64) {
	for i := range out {
		out[i] = vector(m.Row(i))
	}
	return out
}

func denseRows(m *mat.Dense) [][]float64 {
	n, _ := m.Dims()
	out := make([][]float64, n)
	for i := range out {
		out[i] = plains(m.RawRowView(i))
	}
	return out
}

// fromOne turns indices into numbers as people count.
func fromOne(indices []int) []int {
	out := make([]int, len(indices))
	for i, k := range indices {
		out[i] = k + 1
	}
	return out
}

// describeGroup makes the document of a group. Irreps are the setting's, or
// for an infinite group those that occur.
func describeGroup(g *work.Group, irreps []symmetry.Irrep) groupDocument {
	setting := g.Fit.Setting
	d := groupDocument{
		Structure:  structureDocument{Title: g.Molecule.Title, Core: fromOne(g.Core), Atoms: []atomDocument{}},
		PointGroup: setting.Symbol,
		Order:      setting.Order(),
		Deviation:  plain(g.Fit.Deviation),
		Tolerance:  g.Fit.Tolerance,
		Doubtful:   g.Fit.Doubtful,
		Frame:      describeFrame(g),
		Operations: []operationDocument{},
		Classes:    []classDocument{},
		Irreps:     []irrepDocument{},
	}
	for i, p := range g.Sites.Positions {
		d.Structure.Atoms = append(d.Structure.Atoms, atomDocument{g.Sites.Elements[i].Symbol(), vector(p)})
	}
	for r, op := range setting.Operations {
		d.Operations = append(d.Operations, operationDocument{
			Name: op.Name, Class: op.Class + 1, Axis: unitVector(op.Axis),
			Matrix: rows(op.Matrix), Permutation: fromOne(g.Sites.Permutations[r]),
		})
	}
	for _, c := range setting.Classes {
		d.Classes = append(d.Classes, classDocument{c.Name, len(c.Members)})
	}
	for _, irrep := range irreps {
		d.Irreps = append(d.Irreps, describeIrrep(irrep))
	}
	return d
}

func describeFrame(g *work.Group) frameDocument {
	fit := g.Fit
	ties := notation.Ties(fit.Ties)
	if ties == nil {
		ties = []string{}
	}
	return frameDocument{
		Origin: vector(fit.Origin), Rotation: rows(fit.Rotation), Name: fit.Rule.Name,
		Convention: notation.Convention(fit, g.CoreNames()), Source: notation.Source(fit.Rule), Ties: ties,
	}
}

func describeIrrep(irrep symmetry.Irrep) irrepDocument {
	d := irrepDocument{
		Label: irrep.Label, Dimension: irrep.Dimension, ComplexPair: irrep.ComplexPair,
		Characters: plains(irrep.Characters), Matrices: [][][]float64{}, Functions: [][]string{},
	}
	for _, m := range irrep.Matrices {
		d.Matrices = append(d.Matrices, denseRows(m))
	}
	for k := range irrep.Dimension {
		list := []string{}
		if k < len(irrep.Functions) {
			list = append(list, irrep.Functions[k]...)
		}
		d.Functions = append(d.Functions, list)
	}
	return d
}

func describeOrbitals(o *work.Orbitals) projectDocument {
	d := projectDocument{
		groupDocument: describeGroup(o.Group, o.Irreps),
		Basis:         []functionDocument{},
		Characters:    plains(o.Projection.Characters),
		Content:       []contentDocument{},
		GroupOrbitals: []groupOrbitalDocument{},
	}
	for _, f := range o.Functions {
		d.Basis = append(d.Basis, functionDocument{f.Site + 1, f.Name, unitVector(f.Direction), f.Orbit + 1})
	}
	for i, copies := range o.Content {
		if copies > 0 {
			d.Content = append(d.Content, contentDocument{o.Irreps[i].Label, copies})
		}
	}
	for _, orbital := range o.Projection.Orbitals {
		form, _ := orbitals.FindClosedForm(orbital.Coefficients)
		d.GroupOrbitals = append(d.GroupOrbitals, groupOrbitalDocument{
			Irrep: o.Irreps[orbital.Irrep].Label, Copy: orbital.Copy + 1, Partner: orbital.Partner + 1,
			Coefficients: plains(orbital.Coefficients), ClosedForm: form.String(),
		})
	}
	return d
}

func describeLedger(l *work.Ledger) ledgerDocument {
	d := ledgerDocument{
		Function: l.Ledger.Function + 1, Irrep: l.Irrep.Label,
		Element: [2]int{l.Element[0] + 1, l.Element[1] + 1}, // the character, −1, becomes 0
		Rows:    []ledgerRow{}, Norm: plain(l.Norm),
	}
	for _, row := range l.Rows {
		image := [][2]any{}
		for _, t := range row.Image {
			image = append(image, [2]any{t.Function + 1, plain(t.Coefficient)})
		}
		d.Rows = append(d.Rows, ledgerRow{
			Operation: l.Fit.Setting.Operations[row.Operation].Name,
			Image:     image, Weight: plain(row.Weight), Sum: plains(row.Sum),
		})
	}
	return d
}
