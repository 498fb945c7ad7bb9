package structure

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"runtime"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"github.com/go-gl/mathgl/mgl64"
)

func read(t *testing.T, text string) (*Molecule, []Note) {
	t.Helper()
	m, notes, err := Read(strings.NewReader(text), "test.xyz")
	if err != nil {
		t.Fatalf("%q: %v", text, err)
	}
	return m, notes
}

// water is what every variant in TestReadTakesListsAsTheyAreFound says.
var water = []Atom{
	{8, mgl64.Vec3{0, 0, 0.117}},
	{1, mgl64.Vec3{0, 0.757, -0.469}},
	{1, mgl64.Vec3{0, -0.757, -0.469}},
}

func TestReadTakesListsAsTheyAreFound(t *testing.T) {
	plain := "3\nwater\nO 0 0 0.117\nH 0 0.757 -0.469\nH 0 -0.757 -0.469\n"
	cases := map[string]string{
		"plain":             plain,
		"no last line end":  strings.TrimSuffix(plain, "\n"),
		"CR LF":             strings.ReplaceAll(plain, "\n", "\r\n"),
		"lone CR":           strings.ReplaceAll(plain, "\n", "\r"),
		"byte order mark":   "\ufeff" + plain,
		"mark and CR LF":    "\ufeff" + strings.ReplaceAll(plain, "\n", "\r\n"),
		"end mark":          plain + "\x1a",
		"blank lines after": plain + "\n \n\t\n",
		"blank line within": "3\nwater\nO 0 0 0.117\n\nH 0 0.757 -0.469\nH 0 -0.757 -0.469\n",
		"blank line before": "\n" + plain,
		"tabs":              strings.ReplaceAll(strings.ReplaceAll(plain, " ", "\t"), "\n", "\t\n"),
		"indented":          "   3  \n  water \n  O   0.000   0.000   0.117  \n  H  0 0.757 -0.469\n H 0. -.757 -0.469\n",
		"extra columns":     "3\nwater\nO 0 0 0.117 -0.8 x\nH 0 0.757 -0.469 0.4 1 2 3\nH 0 -0.757 -0.469 NaN\n",
		"symbols in lower":  "3\nwater\no 0 0 0.117\nh 0 0.757 -0.469\nh 0 -0.757 -0.469\n",
		"atomic numbers":    "3\nwater\n8 0 0 0.117\n1 0 0.757 -0.469\n01 0 -0.757 -0.469\n",
		"labels":            "3\nwater\nO1 0 0 0.117\nH2 0 0.757 -0.469\nH12 0 -0.757 -0.469\n",
		"deuterium":         "3\nwater\nO 0 0 0.117\nD 0 0.757 -0.469\nT 0 -0.757 -0.469\n",
		"D exponents":       "3\nwater\nO 0 0 1.17D-1\nH 0.0d0 7.57D-01 -4.69d-1\nH 0 -.757D+00 -469.E-3\n",
		"q exponents":       "3\nwater\nO 0 0 1.17q-1\nH 0 7.57Q-01 -4.69d-1\nH 0 -.757 -0.469\n",
		"typographic minus": "3\nwater\nO 0 0 0.117\nH 0 0.757 −0.469\nH 0 −0.757 −0.469\n",
		"words after count": "3 atoms\nwater\nO 0 0 0.117\nH 0 0.757 -0.469\nH 0 -0.757 -0.469\n",
		"several frames":    plain + plain + plain,
		"frames apart":      plain + "\n" + plain,
		"text after":        plain + "vibrations\n 1 2 3\n",
	}
	for name, text := range cases {
		t.Run(name, func(t *testing.T) {
			m, _ := read(t, text)
			if m.Title != "water" || !reflect.DeepEqual(m.Atoms, water) {
				t.Errorf("got %+v", m)
			}
		})
	}
}

func TestReadSaysWhatItPassedOver(t *testing.T) {
	one := "1\nx\nAr 0 0 0\n"
	cases := []struct {
		text, note string
		key        Problem
	}{
		{one, "", ""},
		{one + one, "test.xyz:4: further frames follow; the first one was taken", FirstFrame},
		{one + "charges\n", "test.xyz:4: what follows the last atom was not read", TextLeft},
		{one + "\x00\x00", "test.xyz:3: what follows the last atom was not read", TextLeft},
		{"1\nx\nAr7 0 0 0\n", "test.xyz:3: labels such as Ar7 were read as elements", LabelsRead},
		{"1\nx\nAr" + strings.Repeat("7", 1000) + " 0 0 0\n", "test.xyz:3: labels such as Ar" + strings.Repeat("7", 58) + " … were read as elements", LabelsRead},
		{"1\nx\nD 0 0 0\n", "test.xyz:3: D was read as hydrogen", IsotopesRead},
		{"1\n\xc5\nAr 0 0 0\n", "test.xyz:2: the title is not UTF-8; it was read as Latin-1", TitleDecoded},
	}
	for _, c := range cases {
		_, notes := read(t, c.text)
		switch {
		case c.note == "" && len(notes) == 0:
		case len(notes) != 1 || notes[0].String() != c.note || notes[0].Problem != c.key:
			t.Errorf("%q: notes %q, want %q", c.text, notes, c.note)
		}
	}
}

func TestTitleIsTheFilesOwnOrItsName(t *testing.T) {
	cases := map[string]string{
		"1\n a  title \nAr 0 0 0\n":         "a  title",
		"1\n\nAr 0 0 0\n":                   "test.xyz",
		"1\n \t \nAr 0 0 0\n":               "test.xyz",
		"1\n2.3 \xc5\nAr 0 0 0\n":           "2.3 Å",
		"1\nπ-stack\u2028x\nAr 0 0 0\n":     "π-stack x",
		"1\nright\u202eleft\tx\nAr 0 0 0\n": "right left x",
	}
	for text, want := range cases {
		if m, _ := read(t, text); m.Title != want {
			t.Errorf("%q: title %q, want %q", text, m.Title, want)
		}
	}
	m, _, err := Read(strings.NewReader("1\n\nAr 0 0 0\n"), "some/folder/argon.xyz")
	if err != nil || m.Title != "argon.xyz" {
		t.Errorf("title %q, error %v, want argon.xyz", m.Title, err)
	}
}

// Each bad input gives exactly this line.
func TestReadNamesWhatIsWrongAndWhere(t *testing.T) {
	cases := []struct{ name, text, want string }{
		{"empty", "", `test.xyz:1: the file is empty; expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
		{"blank", "\n \n", `test.xyz:1: the file is empty; expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
		{"no count", "O 0 0 0\n", `test.xyz:1: expected the number of atoms, found "O 0 0 0"; line 1 must hold the number of atoms, line 2 a title`},
		{"no count, atomic numbers", "8 0 0 0\n", `test.xyz:1: expected the number of atoms, found "8 0 0 0"; line 1 must hold the number of atoms, line 2 a title`},
		{"count zero", "0\n\n", `test.xyz:1: the number of atoms is 0, it must be from 1 to 20,000; line 1 must hold the number of atoms, line 2 a title`},
		{"letters after the number", "1\n\nH1a 0 0 0\n", `test.xyz:3: unknown element "H1a": letters after the number are not read; write H1 or H`},
		{"count negative", "-3\n\n", `test.xyz:1: the number of atoms is -3, it must be from 1 to 20,000; line 1 must hold the number of atoms, line 2 a title`},
		{"count broken", "3.5\n\n", `test.xyz:1: expected the number of atoms, found "3.5"; line 1 must hold the number of atoms, line 2 a title`},
		{"count large", "1000000\n\n", `test.xyz:1: 1000000 atoms are too many; a structure may have up to 20,000`},
		{"count beyond numbers", "99999999999999999999\n\n", `test.xyz:1: 99999999999999999999 atoms are too many; a structure may have up to 20,000`},
		{"count too high", "3\nx\nO 0 0 0\nH 0 0 1\n", `test.xyz:4: the file ends after 2 of the 3 atoms that line 1 counts; the count must equal the number of atom lines`},
		{"cut short in a line", "2\nx\nO 0 0 0\nH 0 0\n", `test.xyz:4: expected atom 2 of 2, found "H 0 0"; expected element x y z in Å, such as "O 0.0 0.0 0.117"`},
		{"only a count", "2", `test.xyz:1: the file ends after 0 of the 2 atoms that line 1 counts; the count must equal the number of atom lines`},
		{"count too low", "1\nx\nO 0 0 0\nH 0 0 1\n", `test.xyz:4: another atom follows the 1 that line 1 counts; the count must equal the number of atom lines`},
		{"unknown element", "1\nx\nXq 0 0 0\n", `test.xyz:3: unknown element "Xq"; write a symbol such as Fe, or an atomic number from 1 to 118`},
		{"element 0", "1\nx\n0 0 0 0\n", `test.xyz:3: unknown element "0"; write a symbol such as Fe, or an atomic number from 1 to 118`},
		{"element 119", "1\nx\n119 0 0 0\n", `test.xyz:3: unknown element "119"; write a symbol such as Fe, or an atomic number from 1 to 118`},
		{"NaN", "1\nx\nO 0 NaN 0\n", `test.xyz:3: y of atom 1 is "NaN"; expected a finite number`},
		{"infinity", "1\nx\nO 0 0 -Inf\n", `test.xyz:3: z of atom 1 is "-Inf"; expected a finite number`},
		{"1e308", "1\nx\nO 1e308 0 0\n", `test.xyz:3: x of atom 1 is 1e308 Å; coordinates are in Å and may reach 100,000`},
		{"1e309", "1\nx\nO 1e309 0 0\n", `test.xyz:3: x of atom 1 is "1e309"; expected a finite number`},
		{"decimal comma", "1\nx\nO 0,5 0 0\n", `test.xyz:3: x of atom 1 is "0,5"; write decimals with a point`},
		{"stars", "1\nx\nO 0 0 ******\n", `test.xyz:3: z of atom 1 is "******"; expected a number such as -1.234 or 1.2D-3`},
		{"hexadecimal", "1\nx\nO 0 0 0x1p-2\n", `test.xyz:3: z of atom 1 is "0x1p-2"; expected a number such as -1.234 or 1.2D-3`},
		{"columns run together", "1\nx\nO 0 0 1.0-2.0\n", `test.xyz:3: z of atom 1 is "1.0-2.0"; expected a number such as -1.234 or 1.2D-3`},
		{"one spot", "3\nx\nO 0 0 0\nC 1.2 0 0\nO 0 0 0\n", `test.xyz:5: atom 3 lies on the spot of atom 1 of line 3 (0 Å apart); no two atoms may be nearer than 0.1 Å`},
		{"nearly one spot", "2\nx\nO 0 0 0\nO 0 0 0.0999\n", `test.xyz:4: atom 2 lies on the spot of atom 1 of line 3 (0.1 Å apart); no two atoms may be nearer than 0.1 Å`},
		{"UTF-16, little end first", "\xff\xfe1\x00\n\x00", `test.xyz:1: the file is UTF-16 text; save it as UTF-8 or plain ASCII`},
		{"UTF-16, big end first", "\xfe\xff\x001\x00\n", `test.xyz:1: the file is UTF-16 text; save it as UTF-8 or plain ASCII`},
		{"UTF-16 without mark", "1\x00\n\x00x\x00\n\x00", `test.xyz:1: the file is UTF-16 text; save it as UTF-8 or plain ASCII`},
		{"binary", "\x7fELF\x02\x01\x01\x00", `test.xyz:1: the file is binary, not text (byte 0x7f); expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
		{"picture", "\x89PNG\r\n\x1a\n\x00\x00", `test.xyz:1: the file is binary, not text; expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
		{"binary later", "2\nx\nO 0 0 0\n\x00\x01", `test.xyz:4: the file is binary, not text (byte 0x00); expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
		{"escape sequence", "1\nx\nO\x1b[31m 0 0 0\n", `test.xyz:3: the file is binary, not text (byte 0x1b); expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
		{"long word", "1\nx\n" + strings.Repeat("O", 1000) + " 0 0 0\n", `test.xyz:3: unknown element "` + strings.Repeat("O", 40) + `" …; write a symbol such as Fe, or an atomic number from 1 to 118`},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			m, _, err := Read(strings.NewReader(c.text), "test.xyz")
			var e *Error
			if !errors.As(err, &e) {
				t.Fatalf("%+v, %v is no *Error", m, err)
			}
			if e.Error() != c.want {
				t.Errorf("\n got %s\nwant %s", e, c.want)
			}
		})
	}
}

// A source hands out the same bytes again and again, without holding them.
type source struct {
	head  string
	again string
	size  int // bytes in all
	given int
}

func (s *source) Read(p []byte) (int, error) {
	if s.given >= s.size {
		return 0, io.EOF
	}
	n := 0
	for n < len(p) && s.given < s.size {
		if s.given < len(s.head) {
			p[n] = s.head[s.given]
		} else {
			p[n] = s.again[(s.given-len(s.head))%len(s.again)]
		}
		n++
		s.given++
	}
	return n, nil
}

func TestHugeInputsAreRefusedAtOnceAndInLittleMemory(t *testing.T) {
	atoms := "20000\nx\n"
	cases := []struct {
		name string
		in   *source
		want string
	}{
		{"line of 100 MB", &source{again: "C", size: 100 << 20}, "test.xyz:1: the line is longer than 65,536 bytes; a line may take 65,536 bytes"},
		{"title of 100 MB", &source{head: "2\n", again: "C", size: 100 << 20}, "test.xyz:2: the line is longer than 65,536 bytes; a line may take 65,536 bytes"},
		{"a million atoms", &source{head: "1000000\nx\n", again: "C 0 0 0\n", size: 100 << 20}, "test.xyz:1: 1000000 atoms are too many; a structure may have up to 20,000"},
		{"a million atoms, few counted", &source{head: "1\nx\n", again: "C 0 0 0\n", size: 100 << 20}, "test.xyz:4: another atom follows the 1 that line 1 counts; the count must equal the number of atom lines"},
		{"blank lines", &source{again: "\n", size: 100 << 20}, "test.xyz:16777217: no end of the first frame within 16,777,216 bytes; the first frame may take 16,777,216 bytes"},
		{"all atoms on one spot", &source{head: atoms, again: "C 0 0 0\n", size: len(atoms) + 20000*8}, "test.xyz:4: atom 2 lies on the spot of atom 1 of line 3 (0 Å apart); no two atoms may be nearer than 0.1 Å"},
		{"zeros", &source{again: "\x00", size: 100 << 20}, `test.xyz:1: the file is binary, not text (byte 0x00); expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			var before, after runtime.MemStats
			runtime.ReadMemStats(&before)
			start := time.Now()
			_, _, err := Read(c.in, "test.xyz")
			took := time.Since(start)
			runtime.ReadMemStats(&after)
			if err == nil || err.Error() != c.want {
				t.Errorf("\n got %v\nwant %s", err, c.want)
			}
			if took > 10*time.Second { // a quarter of a second does, on a machine that is not busy
				t.Errorf("took %v", took)
			}
			if used := after.TotalAlloc - before.TotalAlloc; used > 16<<20 {
				t.Errorf("allocated %d bytes in all", used)
			}
		})
	}
}

type broken struct{}

func (broken) Read([]byte) (int, error) { return 0, fmt.Errorf("pulling: %w", errors.New("cable out")) }

func TestReadPassesOnWhatTheSystemSays(t *testing.T) {
	_, _, err := Read(broken{}, "test.xyz")
	if want := "test.xyz:1: reading broke off: cable out"; err == nil || err.Error() != want {
		t.Errorf("got %v, want %s", err, want)
	}
}

func TestMaximalStructureIsRead(t *testing.T) {
	m := &Molecule{Title: "cubic block"}
	for i := range MaxAtoms {
		m.Atoms = append(m.Atoms, Atom{79, mgl64.Vec3{float64(i%28) * 2.5, float64(i/28%28) * 2.5, float64(i/784) * 2.5}})
	}
	var text bytes.Buffer
	if err := Write(&text, m); err != nil {
		t.Fatal(err)
	}
	back, _ := read(t, text.String())
	if !reflect.DeepEqual(back, m) {
		t.Error("20,000 atoms do not come back as written")
	}
}

func TestWriteAndReadGiveTheSameMolecule(t *testing.T) {
	m := &Molecule{Title: "numbers that need all their digits", Atoms: []Atom{
		{1, mgl64.Vec3{1. / 3, -math.Pi, math.SmallestNonzeroFloat64}},
		{118, mgl64.Vec3{math.Nextafter(99999, 1e9), -1e5, math.Copysign(0, -1)}},
		{26, mgl64.Vec3{0.1 + 0.2, 1e-17, 12345.678901234567}},
	}}
	var text bytes.Buffer
	if err := Write(&text, m); err != nil {
		t.Fatal(err)
	}
	back, notes := read(t, text.String())
	if !reflect.DeepEqual(back, m) || math.Signbit(back.Atoms[1].Position[2]) != true || len(notes) > 0 {
		t.Errorf("wrote %+v, read %+v", m, back)
	}
}

func TestOpenFindsEveryKindOfStructure(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "argon.xyz")
	text := "1\nargon\nAr 0 0 0\n"
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	in := Inputs{Stdin: strings.NewReader(text), Demo: fstest.MapFS{"argon.xyz": {Data: []byte(text)}}}
	for _, spec := range []string{path, "-", "demo:argon"} {
		m, _, err := Open(spec, in)
		if err != nil || m.Title != "argon" || len(m.Atoms) != 1 {
			t.Errorf("%s: %+v, %v", spec, m, err)
		}
	}
	m, _, err := Open("ideal:OC-6,Co,N,1.96", in)
	if err != nil || m.Title != "ideal:OC-6,Co,N,1.96" || len(m.Atoms) != 7 {
		t.Errorf("%+v, %v", m, err)
	}
}

func TestOpenSaysWhatIsWrong(t *testing.T) {
	dir := t.TempDir()
	in := Inputs{Demo: fstest.MapFS{"argon.xyz": {}, "neon.xyz": {}}}
	cases := map[string]string{
		dir:              dir + ": this is a directory; name a file in it",
		dir + "/no.xyz":  dir + "/no.xyz: there is no such file",
		dir + "/a\nb":    dir + `/a\nb: there is no such file`,
		"":               "the name of the structure is empty; give a file, - for standard input, ideal:OC-6 or demo:NAME",
		"-":              "standard input: there is no standard input",
		"demo:xenon":     `there is no demonstration "xenon"; there are argon, neon`,
		"demo:../argon":  `there is no demonstration "../argon"; there are argon, neon`,
		"demo:":          `there is no demonstration ""; there are argon, neon`,
		"demo:argon":     `demo:argon:1: the file is empty; ` + wantFile.String(),
		"ideal:OC-6,,":   `ideal:OC-6,,: unknown element ""; write ideal:OC-6, or with elements and distance ideal:OC-6,Co,N,1.96`,
		"ideal:ring-2":   `ideal:ring-2: a ring has 3 to 100 atoms, not "2"; write ideal:ring-6, or with element and distance of neighbours ideal:ring-6,C,1.39`,
		"ideal:ring-6,9": `ideal:ring-6,9: unknown element "9"; write ideal:ring-6, or with element and distance of neighbours ideal:ring-6,C,1.39`,
	}
	for spec, want := range cases {
		_, _, err := Open(spec, in)
		if err == nil || err.Error() != want {
			t.Errorf("%q:\n got %v\nwant %s", spec, err, want)
		}
	}
	if _, _, err := Open(dir+"/no.xyz", in); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("%v does not wrap fs.ErrNotExist", err)
	}
}

func FuzzRead(f *testing.F) {
	for _, text := range []string{
		"3\nwater\nO 0 0 0.117\nH 0 0.757 -0.469\nH 0 -0.757 -0.469\n",
		"\ufeff2\r\n\r\n8\t0 1.0D-3 0\r\nH1 0 0 −0.96 x y\r\n2\r\n",
		"1\r\rAr 0 0 0\r", "1\n\xc5\nAr 1e308 0 0\n", "2\nx\nC 0 0 0\nC 0 0 0\n", "\xff\xfe1\x00", "-1", "\x00",
	} {
		f.Add([]byte(text))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		m, notes, err := Read(bytes.NewReader(text), "test.xyz")
		if err != nil {
			holdsOneLine(t, err.Error())
			var e *Error
			if !errors.As(err, &e) || e.Line < 1 || e.What.Empty() || e.Want.Empty() {
				t.Errorf("%#v lacks the line, what is wrong or what would be right", err)
			}
			return
		}
		for _, n := range notes {
			holdsOneLine(t, n.String())
		}
		if len(m.Atoms) < 1 || len(m.Atoms) > MaxAtoms {
			t.Errorf("%d atoms", len(m.Atoms))
		}
		var out bytes.Buffer
		if err := Write(&out, m); err != nil {
			t.Fatal(err)
		}
		back, notes, err := Read(&out, "test.xyz")
		if err != nil || len(notes) > 0 || !reflect.DeepEqual(back, m) {
			t.Errorf("read %+v, wrote and read %+v, %v, %v", m, back, notes, err)
		}
		Bonds(m)
	})
}

func holdsOneLine(t *testing.T, text string) {
	t.Helper()
	if text == "" || strings.ContainsAny(text, "\n\r\x00\x1b") || len(text) > 2000 {
		t.Errorf("%q is not one clear line", text)
	}
}

func BenchmarkRead(b *testing.B) {
	for _, n := range []int{4, 60, 1000, MaxAtoms} {
		m := &Molecule{Title: "block"}
		for i := range n {
			m.Atoms = append(m.Atoms, Atom{79, mgl64.Vec3{float64(i%28) * 2.5123, float64(i/28%28) * 2.5123, float64(i/784) * 2.5123}})
		}
		var text bytes.Buffer
		if err := Write(&text, m); err != nil {
			b.Fatal(err)
		}
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			b.SetBytes(int64(text.Len()))
			for b.Loop() {
				if _, _, err := Read(bytes.NewReader(text.Bytes()), "test.xyz"); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
