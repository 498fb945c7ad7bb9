package orbitals

import (
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// linear is F–Xe–F along z, or a diatomic, or a single atom.
func linear(t testing.TB, group string) *Sites {
	s := &Sites{
		Setting:   setting(t, group),
		Positions: []mgl64.Vec3{{}, {0, 0, 1.9}, {0, 0, -1.9}},
		Elements:  []structure.Element{xenon, fluorine, fluorine},
		Links:     [][2]int{{0, 1}, {0, 2}},
	}
	switch group {
	case "C∞v":
		s.Positions, s.Elements, s.Links = s.Positions[:2], s.Elements[:2], s.Links[:1]
	case "Kh":
		s.Positions, s.Elements, s.Links = s.Positions[:1], s.Elements[:1], nil
	}
	return s
}

func TestLinearMoleculeHasAllGroupOrbitals(t *testing.T) {
	for _, c := range []struct {
		group   string
		choices []string
		want    map[string]int
	}{
		{"D∞h", []string{"F:s,p", "Xe:s,p,d,f"}, map[string]int{
			"Σg+": 2 + 2, "Σu+": 2 + 2, "Πg": 1 + 1, "Πu": 1 + 2, "Δg": 1, "Δu": 1, "Φu": 1}},
		{"D∞h", []string{"F:d,f"}, map[string]int{
			"Σg+": 2, "Σu+": 2, "Πg": 2, "Πu": 2, "Δg": 2, "Δu": 2, "Φg": 1, "Φu": 1}},
		{"C∞v", []string{"all:s,p", "Xe:d"}, map[string]int{"Σ+": 5, "Π": 3, "Δ": 1}},
		{"Kh", []string{"Xe:s,p,d,f"}, map[string]int{"Sg": 1, "Pu": 1, "Dg": 1, "Fu": 1}},
		{"Kh", []string{"Xe:dxy"}, map[string]int{"Dg": 1}},
	} {
		b := basis(t, linear(t, c.group), c.choices...)
		p := project(t, b)
		if got := contentOf(p); !maps.Equal(got, c.want) {
			t.Errorf("%s %v: %v, want %v", c.group, c.choices, got, c.want)
		}
		if len(p.Orbitals) != len(b.Functions) {
			t.Errorf("%s %v: %d group orbitals of %d functions", c.group, c.choices, len(p.Orbitals), len(b.Functions))
		}
		for i, g := range p.Orbitals {
			for j, h := range p.Orbitals[:i+1] {
				want := 0.0
				if i == j {
					want = 1
				}
				if math.Abs(dot(g.Coefficients, h.Coefficients)-want) > 1e-14 {
					t.Errorf("%s: group orbitals %d and %d are not orthonormal", c.group, i+1, j+1)
				}
			}
			if g.Partner == 0 {
				checkSign(t, p.Irreps[g.Irrep].Label, g.Coefficients)
			}
		}
		checkAngular(t, b, p)
	}
}

// checkAngular holds that the partners transform as cos Λφ and sin Λφ, Σ+
// staying under σv(xz), with the parity of the label; in Kh with the rotations
// of the shell.
func checkAngular(t *testing.T, b *Basis, p *Projection) {
	t.Helper()
	symbol := b.Sites.Setting.Symbol
	for i := 0; i < len(p.Orbitals); {
		irrep := p.Irreps[p.Orbitals[i].Irrep]
		partners := p.Orbitals[i : i+irrep.Dimension]
		i += irrep.Dimension
		for _, c := range b.Sites.generators() {
			for k, partner := range partners {
				image := apply(b, c, partner.Coefficients)
				for f := range image {
					want := 0.0
					for l := range partners {
						want += angularMatrix(t, symbol, irrep, c, l, k) * partners[l].Coefficients[f]
					}
					if math.Abs(image[f]-want) > 1e-13 {
						t.Fatalf("%s: %s carries partner %d of %s elsewhere", symbol, c.name, k+1, irrep.Label)
					}
				}
			}
		}
	}
}

// apply carries a combination of the functions of a basis.
func apply(b *Basis, c *carrier, coefficients []float64) []float64 {
	out := make([]float64, len(coefficients))
	for i, x := range coefficients {
		image := c.carry(b.Functions[i], nil)
		for j, g := range b.Functions {
			if g.Site == c.to(b.Functions[i].Site) && g.Shell == b.Functions[i].Shell {
				out[j] += x * dot(g.Vector, image)
			}
		}
	}
	return out
}

// angularMatrix is the element [l][k] of the matrix of an operation.
func angularMatrix(t *testing.T, symbol string, irrep symmetry.Irrep, c *carrier, l, k int) float64 {
	if symbol == "Kh" {
		return c.rotation(irrep.Lambda).At(l, k)
	}
	angle := float64(irrep.Lambda)
	switch c.name {
	case "C∞(z)": // by one radian
		if irrep.Dimension == 1 {
			return 1
		}
		return [2][2]float64{{math.Cos(angle), -math.Sin(angle)}, {math.Sin(angle), math.Cos(angle)}}[l][k]
	case "σv(xz)":
		if l != k {
			return 0
		}
		return 1 - 2*float64(k)
	case "i":
		if l != k {
			return 0
		}
		return float64(irrep.Gerade)
	}
	t.Fatal("unknown operation ", c.name)
	return 0
}

func TestLinearLabelsAndCoefficients(t *testing.T) {
	p := project(t, basis(t, linear(t, "D∞h"), "F:sigma,pi"))
	var labels []string
	for _, irrep := range p.Irreps {
		labels = append(labels, irrep.Label)
	}
	if want := []string{"Σg+", "Πg", "Σu+", "Πu"}; !slices.Equal(labels, want) {
		t.Errorf("irreps %v, want %v", labels, want)
	}
	h := math.Sqrt2 / 2
	// Functions: sigma and sigma facing the centre, then pi1 = x and
	// pi2 = y on both atoms. x transforms as Πu, so x + x is Πu.
	for label, want := range map[string][][]float64{
		"Σg+": {{h, h, 0, 0, 0, 0}},
		"Σu+": {{h, -h, 0, 0, 0, 0}},
		"Πu":  {{0, 0, h, 0, h, 0}, {0, 0, 0, h, 0, h}},
		"Πg":  {{0, 0, h, 0, -h, 0}, {0, 0, 0, h, 0, -h}},
	} {
		for k, got := range partnersOf(t, p, label, 0) {
			for i := range got {
				if math.Abs(got[i]-want[k][i]) > 1e-15 {
					t.Errorf("%s, partner %d: %v, want %v", label, k+1, got, want[k])
				}
			}
		}
	}
}

func TestLinearChoicesAreCompleted(t *testing.T) {
	for _, c := range []struct{ group, choice, want string }{
		{"D∞h", "2:s", "2s 3s"},
		{"D∞h", "Xe:px", "1px 1py"},
		{"D∞h", "3:dxz", "2dxz 2dyz 3dxz 3dyz"},
		{"D∞h", "Xe:dz2,pz", "1dz2 1pz"},
		{"D∞h", "F:pi1", "2pi1 2pi2 3pi1 3pi2"},
		{"C∞v", "2:fx(x2-3y2)", "2fx(x2-3y2) 2fy(3x2-y2)"},
		{"C∞v", "all:sigma", "1sigma 2sigma"},
		{"Kh", "Xe:pz", "1px 1py 1pz"},
	} {
		if got := listed(basis(t, linear(t, c.group), c.choice)); got != c.want {
			t.Errorf("%s %s: %s, want %s", c.group, c.choice, got, c.want)
		}
	}
	if _, err := NewBasis(linear(t, "Kh"), parse(t, "Xe:sigma")...); err == nil || !strings.Contains(err.Error(), "centre") {
		t.Errorf("sigma on a single atom: %v", err)
	}
}

func TestInfiniteGroupsHaveNoRepresentation(t *testing.T) {
	b := basis(t, linear(t, "D∞h"), "F:s")
	if _, err := b.Representation(); err == nil || !strings.Contains(err.Error(), "infinitely") {
		t.Errorf("D∞h: %v", err)
	}
	if _, err := NewRepresentation(setting(t, "C∞v"), nil, nil); err == nil {
		t.Error("C∞v has a representation")
	}
}
