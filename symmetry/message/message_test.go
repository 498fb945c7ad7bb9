package message

import (
	"errors"
	"fmt"
	"io/fs"
	"testing"
)

var german = &Language{
	Forms: map[string]string{
		"%s has no irrep %q":        "eine irreduzible Darstellung %[2]q hat %[1]s nicht",
		"%s: %w":                    "%s: %v",
		"the least is %.2f Å":       "das Wenigste ist %.2f Å",
		"at most %s atoms":          "höchstens %s Atome",
		"nothing":                   "nichts",
		"it %w":                     "es %w",
		"a %s":                      "ein %s",
		"100 %% of it":              "100 %% davon",
		"in two":                    "in zwei",
		"file does not exist":       "die Datei gibt es nicht",
		"between %g and %5.1f|%-4s": "von %[1]g bis %5.1[2]f|%-4[3]s",
	},
	Point: ",", Thousands: ".",
}

func TestALanguageSaysEveryPart(t *testing.T) {
	for _, c := range []struct {
		text          Text
		english, want string
	}{
		{Words("%s has no irrep %q", "D4h", "E3"), `D4h has no irrep "E3"`, `eine irreduzible Darstellung "E3" hat D4h nicht`},
		{Words("the least is %.2f Å", 0.5), "the least is 0.50 Å", "das Wenigste ist 0,50 Å"},
		{Words("at most %s atoms", Count(20000)), "at most 20,000 atoms", "höchstens 20.000 Atome"},
		{Words("a %s", Words("nothing")), "a nothing", "ein nichts"},
		{Words("100 %% of it"), "100 % of it", "100 % davon"},
		{Words("no form %d %g", 3, 0.5), "no form 3 0.5", "no form 3 0,5"},
		{Join([]Text{Words("nothing"), Words("in two")}, ", "), "nothing, in two", "nichts, in zwei"},
		{Text{}, "", ""},
	} {
		if got := c.text.String(); got != c.english {
			t.Errorf("%q, want %q", got, c.english)
		}
		if got := c.text.In(nil); got != c.english {
			t.Errorf("%q, want %q", got, c.english)
		}
		if got := c.text.In(german); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}

func TestWidthsAndFlagsOfNumbersStay(t *testing.T) {
	got := Words("between %g and %5.1f|%-4s", -1e-7, 2.25, "x").In(german)
	if want := "von -1e-07 bis   2,2|x   "; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestAnErrorWrapsAndIsSaidWhole(t *testing.T) {
	inner := Errorf("%s has no irrep %q", "Oh", "B1")
	outer := Errorf("%s: %w", "z", inner)
	if !errors.Is(outer, inner) {
		t.Error("the inner error is lost")
	}
	if got := outer.Error(); got != `z: Oh has no irrep "B1"` {
		t.Error(got)
	}
	if got := In(outer, german); got != `z: eine irreduzible Darstellung "B1" hat Oh nicht` {
		t.Error(got)
	}
	if got := In(outer, nil); got != outer.Error() {
		t.Error(got)
	}
	system := Errorf("it %w", fs.ErrNotExist)
	if got := In(system, german); got != "es die Datei gibt es nicht" || !errors.Is(system, fs.ErrNotExist) {
		t.Error(got)
	}
	if got := In(fmt.Errorf("100 %% foreign"), german); got != "100 % foreign" {
		t.Error(got)
	}
	var e *Error
	if !errors.As(fmt.Errorf("around it: %w", inner), &e) || e.In(german) == e.Error() {
		t.Error("the text within is not found")
	}
}

func TestCountsAreGrouped(t *testing.T) {
	for n, want := range map[Count]string{0: "0", 999: "999", 1000: "1,000", 1234567: "1,234,567"} {
		if got := n.String(); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}
