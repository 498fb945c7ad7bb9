package structure

import (
	"math"
	"math/rand/v2"
	"reflect"
	"strconv"
	"testing"
	"time"

	"github.com/go-gl/mathgl/mgl64"
)

func element(t *testing.T, symbol string) Element {
	t.Helper()
	e, ok := ElementOf(symbol)
	if !ok {
		t.Fatalf("no element %s", symbol)
	}
	return e
}

// The structures are those of testdata/structures/structures.json, which names their sources; which atoms are
// bonded in them is common knowledge.
func TestBondsAreThoseThatAChemistDraws(t *testing.T) {
	var file struct {
		Molecules []struct {
			Name  string
			Atoms []struct {
				Element  string
				Position mgl64.Vec3
			}
		}
	}
	checkValues(t, "structures.json", &file)
	bonds := map[string]int{
		"water": 2, "methane": 4, "sulfur hexafluoride": 6, "xenon tetrafluoride": 4, "iodine heptafluoride": 7,
		"carbon dioxide": 2, "ethene": 5, "propadiene (allene)": 6, "benzene": 12, "cyclopropane": 9,
		"ferrocene, staggered": 30, "dibenzenechromium": 36, "uranocene": 48,
		"nickel tetracarbonyl": 8, "octachlorodirhenate(2-)": 9, "dimanganese decacarbonyl": 21, "cyclooctasulfur": 8,
		"white phosphorus": 6, "cubane": 20, "buckminsterfullerene": 90, "dodecahedrane": 50,
		"hexaaquairon(2+), all water planes along the axes": 18, "hydrogen peroxide": 3, "nonahydridorhenate(2-)": 9,
		"tris(oxalato)chromate(3-)": 21,
		"bromochlorofluoromethane":  4, "sulfur tetrafluoride": 4,
	}
	met := 0
	for _, s := range file.Molecules {
		want, ok := bonds[s.Name]
		if !ok {
			continue
		}
		met++
		m := &Molecule{}
		for _, a := range s.Atoms {
			m.Atoms = append(m.Atoms, Atom{element(t, a.Element), a.Position})
		}
		if got := Bonds(m); len(got) != want {
			t.Errorf("%s: %d bonds, want %d: %v", s.Name, len(got), want, got)
		}
	}
	if met != len(bonds) {
		t.Errorf("met %d of %d structures", met, len(bonds))
	}
}

// C–I 2.14 Å, tetrahedral: I–I is 2.14·√(8/3) = 3.4946 Å, just beyond 1.25·2·1.39 = 3.475 Å.
func TestIodineAtomsOnOneCarbonAreNotBonded(t *testing.T) {
	m, err := Ideal("T-4,C,I,2.14")
	if err != nil {
		t.Fatal(err)
	}
	if want := [][2]int{{0, 1}, {0, 2}, {0, 3}, {0, 4}}; !reflect.DeepEqual(Bonds(m), want) {
		t.Errorf("bonds %v, want %v", Bonds(m), want)
	}
}

// Every pair is looked at; slow and obviously right.
func allPairs(m *Molecule) (out [][2]int) {
	for i, a := range m.Atoms {
		for j := i + 1; j < len(m.Atoms); j++ {
			b := m.Atoms[j]
			reach := BondFactor * (a.Element.Radius() + b.Element.Radius())
			if a.Position.Sub(b.Position).LenSqr() < reach*reach {
				out = append(out, [2]int{i, j})
			}
		}
	}
	return out
}

func randomMolecule(seed uint64, n int, edge float64) *Molecule {
	r := rand.New(rand.NewPCG(seed, 1))
	m := &Molecule{}
	for range n {
		m.Atoms = append(m.Atoms, Atom{Element(1 + r.IntN(118)), mgl64.Vec3{
			edge * (r.Float64() - 0.5), edge * (r.Float64() - 0.5), edge * (r.Float64() - 0.5)}})
	}
	return m
}

func TestTheGridMissesNoBond(t *testing.T) {
	for seed := range uint64(20) {
		m := randomMolecule(seed, 300, 20+10*float64(seed))
		if got, want := Bonds(m), allPairs(m); !reflect.DeepEqual(got, want) {
			t.Errorf("seed %d: %d bonds, want %d", seed, len(got), len(want))
		}
	}
}

func TestTwoAtomsOnOneSpotAreFoundWithoutAGrid(t *testing.T) {
	for seed := range uint64(20) {
		m := randomMolecule(seed, 2000, 4)
		first, second, ok := onOneSpot(m.Atoms, MinDistance)
		wantFirst, wantSecond, want := 0, 0, false
	search:
		for j := range m.Atoms {
			for i := range j {
				if m.Atoms[i].Position.Sub(m.Atoms[j].Position).Len() < MinDistance {
					wantFirst, wantSecond, want = i, j, true
					break search
				}
			}
		}
		if first != wantFirst || second != wantSecond || ok != want {
			t.Errorf("seed %d: %d, %d, %v, want %d, %d, %v", seed, first, second, ok, wantFirst, wantSecond, want)
		}
	}
}

func TestAHeapOfAtomsHasNoBondsAndTakesLittleTime(t *testing.T) {
	m := &Molecule{}
	for i := range MaxAtoms { // 0.11 Å apart: every atom reaches every other
		m.Atoms = append(m.Atoms, Atom{87, mgl64.Vec3{float64(i%28) * 0.11, float64(i/28%28) * 0.11, float64(i/784) * 0.11}})
	}
	start := time.Now()
	if got := Bonds(m); len(got) > 0 {
		t.Errorf("%d bonds", len(got))
	}
	if took := time.Since(start); took > 10*time.Second { // a tenth of a second does
		t.Errorf("took %v", took)
	}
}

func BenchmarkBonds(b *testing.B) {
	for _, n := range []int{100, 1000, 10000, MaxAtoms} {
		edge := int(math.Ceil(math.Cbrt(float64(n))))
		m := &Molecule{}
		for i := range n {
			m.Atoms = append(m.Atoms, Atom{79, mgl64.Vec3{
				2.88 * float64(i%edge), 2.88 * float64(i/edge%edge), 2.88 * float64(i/edge/edge)}})
		}
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			for b.Loop() {
				Bonds(m)
			}
		})
	}
}
