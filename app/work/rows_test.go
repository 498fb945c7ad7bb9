package work

import (
	"reflect"
	"strings"
	"testing"

	"lobewright/assets"
	"lobewright/orbitals/structure"
)

func TestRowsReadBackAsTheSameMolecule(t *testing.T) {
	for _, d := range assets.DemoList() {
		m, _, err := structure.Open("demo:"+d.Name, structure.Inputs{Demo: assets.Demos()})
		if err != nil {
			t.Fatal(err)
		}
		text, ok := CoordinatesOf(m.Title, RowsOf(m))
		if !ok {
			t.Fatalf("%s: %v", d.Name, CheckRows(RowsOf(m)))
		}
		back, _, err := structure.Read(strings.NewReader(text), "rows")
		if err != nil || !reflect.DeepEqual(back, m) {
			t.Errorf("%s: %v %v", d.Name, back, err)
		}
	}
}

func TestEveryWrongCellIsFound(t *testing.T) {
	rows := []AtomRow{
		{"O", "0", "0", "0,117"}, {"h", " 0.757", "0", "−0.47"}, {"1", "-0.757", "0", "-4.7e-1"},
		{"Xx", "1", "1", "1"}, {"H", "", "1", "nan"}, {"H", "1e6", "1", "1"}, {"O", "0.05", "0", "0.117"}, {"H", "0x1", "2", "2"},
	}
	want := []CellFault{
		{Row: 3, Problem: CellElement},
		{Row: 4, Column: 1, Problem: CellNumber}, {Row: 4, Column: 3, Problem: CellNumber},
		{Row: 5, Column: 1, Problem: CellLarge},
		{Row: 6, Column: 1, Problem: CellNear, Other: 0},
		{Row: 7, Column: 1, Problem: CellNumber},
	}
	if got := CheckRows(rows); !reflect.DeepEqual(got, want) {
		t.Errorf("%+v", got)
	}
	if _, ok := CoordinatesOf("", rows); ok {
		t.Error("wrong rows were written")
	}
	if _, ok := CoordinatesOf("", rows[:3]); !ok {
		t.Error("right rows were refused")
	}
	if _, ok := CoordinatesOf("", nil); ok {
		t.Error("no rows were written")
	}
}

// What CheckRows lets through, the reader takes: anything that can be typed.
func FuzzRowsThatAreRightCanBeRead(f *testing.F) {
	f.Add("C", "0", "0", "1.5", "H", "1e-3", "2", "3")
	f.Add("6", "1,5", "−2", "+3", "cl", ".5", "5.", "1e4")
	f.Fuzz(func(t *testing.T, a, b, c, d, e, g, h, i string) {
		rows := []AtomRow{{a, b, c, d}, {e, g, h, i}}
		text, ok := CoordinatesOf("typed", rows)
		if !ok {
			return
		}
		if _, _, err := structure.Read(strings.NewReader(text), "typed"); err != nil {
			t.Errorf("%q: %v", rows, err)
		}
	})
}
