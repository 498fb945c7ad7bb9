package structure

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// checkValues reads a file of testdata/structures.
func checkValues(t *testing.T, name string, into any) {
	t.Helper()
	text, err := os.ReadFile(filepath.Join("..", "..", "testdata", "structures", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(text, into); err != nil {
		t.Fatal(err)
	}
}

// The source is named in the file: B. Cordero and others, Dalton Trans. 2008, 2832.
func TestRadiiAreThePublishedOnes(t *testing.T) {
	var file struct{ Radii map[string]float64 }
	checkValues(t, "covalent_radii.json", &file)
	if len(file.Radii) != 96 || len(radii) != 96 {
		t.Fatalf("%d radii in the file, %d in the table, want 96", len(file.Radii), len(radii))
	}
	for symbol, want := range file.Radii {
		e, ok := ElementOf(symbol)
		if !ok || e.Radius() != want {
			t.Errorf("%s: %v, %v Å, want %v Å", symbol, ok, e.Radius(), want)
		}
	}
}

func TestElementsCountByAtomicNumber(t *testing.T) {
	for symbol, z := range map[string]Element{"H": 1, "C": 6, "Cl": 17, "Fe": 26, "Xe": 54, "La": 57, "Lu": 71, "Pt": 78, "U": 92, "Og": 118} {
		if z.Symbol() != symbol {
			t.Errorf("element %d is %s, want %s", z, z.Symbol(), symbol)
		}
	}
	if len(symbols) != int(MaxElement) || len(bySymbol) != int(MaxElement) {
		t.Errorf("%d symbols, %d of them different, want %d", len(symbols), len(bySymbol), MaxElement)
	}
}

func TestSymbolsAreReadInAnyCase(t *testing.T) {
	for e := Element(1); e <= MaxElement; e++ {
		for _, s := range []string{e.Symbol(), strings.ToLower(e.Symbol()), strings.ToUpper(e.Symbol())} {
			if got, ok := ElementOf(s); !ok || got != e {
				t.Errorf("%q is read as %v", s, got)
			}
		}
	}
	for _, s := range []string{"", "X", "Xx", "J", "Q", "D", "C1", " C", "ſ", "\u212a"} { // the last is the kelvin sign
		if e, ok := ElementOf(s); ok {
			t.Errorf("%q is read as %v", s, e)
		}
	}
}

func TestNoElementHasNoSymbolAndNoRadius(t *testing.T) {
	for _, e := range []Element{0, MaxElement + 1, 255} {
		if e.Symbol() != "?" || e.Radius() != 0 || e.Valid() {
			t.Errorf("element %d: %s, %v Å", uint8(e), e, e.Radius())
		}
	}
	if r := MaxElement.Radius(); r != 1.69 {
		t.Errorf("oganesson gets %v Å, want curium's 1.69", r)
	}
}

// Worked by hand after E. A. Hill, J. Am. Chem. Soc. 22, 478 (1900).
func TestFormulaStandsInHillsOrder(t *testing.T) {
	for text, want := range map[string]string{
		"3\n\nO 0 0 0\nH 1 0 0\nH 0 1 0\n":                     "H2O",
		"4\n\nCl 0 0 0\nH 1 0 0\nC 0 1 0\nBr 0 0 1\n":          "CHBrCl",
		"5\n\nN 0 0 0\nCo 1 0 0\nN 0 1 0\nCl 0 0 1\nN 0 0 2\n": "ClCoN3",
		"3\n\nO 0 0 0\nC 1 0 0\nO 2 0 0\n":                     "CO2",
	} {
		if m, _ := read(t, text); m.Formula() != want {
			t.Errorf("formula %s, want %s", m.Formula(), want)
		}
	}
}
