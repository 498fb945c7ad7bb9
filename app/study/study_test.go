package study

import (
	"bytes"
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lobewright/app/study/record"
)

// full has no choice at its default.
var full = Study{
	Structure: "pasted", Coordinates: "1\nxenon\nXe 0 0 0\n", Core: "1-5", Ignore: "H", Tolerance: 0.05, As: "D4h:2", KeepAxes: true, Frame: "default", Z: "C4(z)", X: "2",
	Basis: []string{"Cl:sigma", "Cl:pi"}, Atoms: []int{2, 4},
	Projection: Projection{Function: 3, Irrep: "Eu", Copy: 2, Partner: 1, Subject: SubjectFunction, Element: [2]int{2, 1}, Character: true},
	Operation:  "C4^3(z)", Moment: 0.25, Angle: 60,
	Camera: Camera{true, 30, -20, [4]float64{0.5, 0.5, -0.5, 0.5}, 2, [2]float64{0.5, -1}, true},
	Turn:   []PlaneRotation{{1, 2, 45}}, Mixing: []PlaneRotation{{1, 3, -30}, {2, 1, 0.5}},
	Held:    Held{"x-on-atoms", "C2(z)", "1,2", "A1g", 1, 2},
	Central: 7, Subgroup: "C4v:2", Kept: "C4(x), σv(xy)",
	Views:     []View{{"from above", Camera{Set: true, Elevation: 90}}, {"default", Camera{}}},
	Look:      Look{"ink", "dark", "area", "polar", "hatching", true, true, true, true, true, true, true},
	Figure:    Figure{"levels", true, "de", "serif", 9, true, true, true, true, true, 85, 60, 600, true},
	Levels:    []Level{{"group", "Eg", 1, 25}},
	Animation: Animation{2, 25, 800, 600, true},
}

// full1 is what version 1 knew of it.
var full1 = Study{
	Structure: full.Structure, Coordinates: full.Coordinates, Core: full.Core, Ignore: full.Ignore, Tolerance: full.Tolerance,
	As: full.As, KeepAxes: true, Frame: full.Frame, Z: full.Z, X: full.X, Basis: full.Basis, Atoms: full.Atoms,
	Projection: full.Projection, Operation: full.Operation, Moment: full.Moment, Angle: full.Angle, Camera: full.Camera,
	Look:   Look{Style: "ink", Ground: "dark", Size: "area", NoLabels: true, NoAxes: true},
	Figure: Figure{Width: 85, Height: 60, Resolution: 600, NoCaption: true},
}

const fullText = `{
  "version": 4,
  "structure": "pasted",
  "coordinates": [
    "1",
    "xenon",
    "Xe 0 0 0",
    ""
  ],
  "core": "1-5",
  "ignore": "H",
  "tolerance": 0.05,
  "as": "D4h:2",
  "keepAxes": true,
  "frame": "default",
  "z": "C4(z)",
  "x": "2",
  "basis": ["Cl:sigma", "Cl:pi"],
  "atoms": [2, 4],
  "projection": {
    "function": 3,
    "irrep": "Eu",
    "copy": 2,
    "partner": 1,
    "subject": "function",
    "element": [2, 1],
    "character": true
  },
  "turn": [{
    "from": 1,
    "to": 2,
    "angle": 45
  }],
  "mixing": [{
    "from": 1,
    "to": 3,
    "angle": -30
  }, {
    "from": 2,
    "to": 1,
    "angle": 0.5
  }],
  "operation": "C4^3(z)",
  "moment": 0.25,
  "angle": 60,
  "held": {
    "frame": "x-on-atoms",
    "z": "C2(z)",
    "x": "1,2",
    "irrep": "A1g",
    "copy": 1,
    "partner": 2
  },
  "central": 7,
  "subgroup": "C4v:2",
  "kept": "C4(x), σv(xy)",
  "camera": {
    "set": true,
    "azimuth": 30,
    "elevation": -20,
    "rotation": [0.5, 0.5, -0.5, 0.5],
    "zoom": 2,
    "pan": [0.5, -1],
    "orthographic": true
  },
  "views": [{
    "name": "from above",
    "camera": {
      "set": true,
      "elevation": 90
    }
  }, {
    "name": "default"
  }],
  "look": {
    "style": "ink",
    "ground": "dark",
    "size": "area",
    "shape": "polar",
    "signs": "hatching",
    "nodes": true,
    "elements": true,
    "coloured": true,
    "displacements": true,
    "split": true,
    "noLabels": true,
    "noAxes": true
  },
  "figure": {
    "sheet": "levels",
    "slide": true,
    "language": "de",
    "font": "serif",
    "textSize": 9,
    "noLetters": true,
    "noLegend": true,
    "noCard": true,
    "noCoefficients": true,
    "noStudy": true,
    "width": 85,
    "height": 60,
    "resolution": 600,
    "noCaption": true
  },
  "levels": [{
    "side": "group",
    "irrep": "Eg",
    "copy": 1,
    "height": 25
  }],
  "animation": {
    "seconds": 2,
    "rate": 25,
    "width": 800,
    "height": 600,
    "once": true
  }
}
`

const fullText1 = `{
  "version": 1,
  "structure": "pasted",
  "coordinates": [
    "1",
    "xenon",
    "Xe 0 0 0",
    ""
  ],
  "core": "1-5",
  "ignore": "H",
  "tolerance": 0.05,
  "as": "D4h:2",
  "keepAxes": true,
  "frame": "default",
  "z": "C4(z)",
  "x": "2",
  "basis": ["Cl:sigma", "Cl:pi"],
  "atoms": [2, 4],
  "projection": {
    "function": 3,
    "irrep": "Eu",
    "copy": 2,
    "partner": 1,
    "subject": "function",
    "element": [2, 1],
    "character": true
  },
  "operation": "C4^3(z)",
  "moment": 0.25,
  "angle": 60,
  "camera": {
    "set": true,
    "azimuth": 30,
    "elevation": -20,
    "rotation": [0.5, 0.5, -0.5, 0.5],
    "zoom": 2,
    "pan": [0.5, -1],
    "orthographic": true
  },
  "look": {
    "style": "ink",
    "ground": "dark",
    "size": "area",
    "noLabels": true,
    "noAxes": true
  },
  "figure": {
    "width": 85,
    "height": 60,
    "resolution": 600,
    "noCaption": true
  }
}
`

func TestTheFileHoldsEveryChoice(t *testing.T) {
	got, err := Encode(full)
	if err != nil || string(got) != fullText {
		t.Fatalf("%v\n%s", err, got)
	}
	back, err := Decode(got, "f")
	if err != nil || !reflect.DeepEqual(back, full) {
		t.Errorf("%v: %#v", err, back)
	}
	eachField(reflect.ValueOf(full), "", func(name string, v reflect.Value) {
		if v.IsZero() {
			t.Errorf("the test leaves %s at its default", name)
		}
	})
}

// eachField visits the plain fields of a struct and of those within.
func eachField(v reflect.Value, name string, visit func(string, reflect.Value)) {
	for i := range v.NumField() {
		f, inner := v.Field(i), name+v.Type().Field(i).Name
		if f.Kind() == reflect.Struct {
			eachField(f, inner+".", visit)
		} else {
			visit(inner, f)
		}
	}
}

// TestFileOfVersion1IsRead holds the text itself: whatever the file becomes,
// this one must be read.
func TestFileOfVersion1IsRead(t *testing.T) {
	s, err := Decode([]byte(fullText1), "f")
	if err != nil || !s.Equal(full1) {
		t.Errorf("%v: %#v", err, s)
	}
}

// Version 2 knew everything but the language of figures.
func TestFileOfVersion2IsRead(t *testing.T) {
	text := strings.Replace(version3(), `"version": 3`, `"version": 2`, 1)
	text = strings.Replace(text, "    \"language\": \"de\",\n", "", 1)
	want := full
	want.Figure.Language, want.Kept = "", ""
	s, err := Decode([]byte(text), "f")
	if err != nil || !s.Equal(want) {
		t.Errorf("%v: %#v", err, s)
	}
}

// version3 is the text of full as version 3 had it, which did not know which one of
// several like subgroups is meant.
func version3() string {
	text := strings.Replace(fullText, `"version": 4`, `"version": 3`, 1)
	return strings.Replace(text, "  \"kept\": \"C4(x), σv(xy)\",\n", "", 1)
}

func TestFileOfVersion3IsRead(t *testing.T) {
	want := full
	want.Kept = ""
	if s, err := Decode([]byte(version3()), "f"); err != nil || !s.Equal(want) {
		t.Errorf("%v: %#v", err, s)
	}
}

func TestEveryChoiceCountsForEquality(t *testing.T) {
	if !full.Equal(full) || !(Study{Basis: []string{}}).Equal(Study{}) {
		t.Error("a study differs from itself")
	}
	changed := full
	eachField(reflect.ValueOf(&changed).Elem(), "", func(name string, v reflect.Value) {
		before := reflect.ValueOf(v.Interface())
		v.SetZero()
		if changed.Equal(full) || full.Equal(changed) {
			t.Errorf("%s does not count", name)
		}
		v.Set(before)
	})
	if !changed.Equal(full) {
		t.Error("the test has left a change")
	}
}

func TestValuesOutOfRangeAreRefusedByTheirKey(t *testing.T) {
	for key, change := range map[string]func(*Study){
		"structure":             func(s *Study) { s.Structure = "a\nb" },
		"coordinates":           func(s *Study) { s.Coordinates = strings.Repeat("\n", maxLines) },
		"core":                  func(s *Study) { s.Core = strings.Repeat("1,", 1<<18) },
		"ignore":                func(s *Study) { s.Ignore = "\xff" },
		"tolerance":             func(s *Study) { s.Tolerance = -1 },
		"as":                    func(s *Study) { s.As = "\x00" },
		"frame":                 func(s *Study) { s.Frame = "\x00" },
		"z":                     func(s *Study) { s.Z = "\x00" },
		"x":                     func(s *Study) { s.X = "\x00" },
		"basis":                 func(s *Study) { s.Basis = make([]string, 300) },
		"basis[2]":              func(s *Study) { s.Basis = []string{"a", "\r"} },
		"atoms[2]":              func(s *Study) { s.Atoms = []int{3, 3} },
		"atoms[1]":              func(s *Study) { s.Atoms = []int{0} },
		"projection.function":   func(s *Study) { s.Projection.Function = -1 },
		"projection.irrep":      func(s *Study) { s.Projection.Irrep = strings.Repeat("E", 999) },
		"projection.copy":       func(s *Study) { s.Projection.Copy = 1 << 30 },
		"projection.partner":    func(s *Study) { s.Projection.Partner = -7 },
		"projection.subject":    func(s *Study) { s.Projection.Subject = "lobe" },
		"projection.element[2]": func(s *Study) { s.Projection.Element = [2]int{1, -1} },
		"operation":             func(s *Study) { s.Operation = "\u0085" },
		"moment":                func(s *Study) { s.Moment = 1.5 },
		"angle":                 func(s *Study) { s.Angle = math.NaN() },
		"camera.azimuth":        func(s *Study) { s.Camera.Azimuth = math.Inf(1) },
		"camera.elevation":      func(s *Study) { s.Camera.Elevation = 91 },
		"camera.rotation":       func(s *Study) { s.Camera.Rotation = [4]float64{1, 1, 0, 0} },
		"camera.zoom":           func(s *Study) { s.Camera.Zoom = 1e9 },
		"camera.pan[1]":         func(s *Study) { s.Camera.Pan[0] = 1e9 },
		"look.style":            func(s *Study) { s.Look.Style = "gaudy" },
		"look.ground":           func(s *Study) { s.Look.Ground = "sky" },
		"look.size":             func(s *Study) { s.Look.Size = "mass" },
		"look.shape":            func(s *Study) { s.Look.Shape = "cube" },
		"look.signs":            func(s *Study) { s.Look.Signs = "bells" },
		"turn[1]":               func(s *Study) { s.Turn = []PlaneRotation{{1, 1, 3}} },
		"turn[1].angle":         func(s *Study) { s.Turn = []PlaneRotation{{1, 2, 361}} },
		"mixing":                func(s *Study) { s.Mixing = make([]PlaneRotation, 99) },
		"mixing[2]":             func(s *Study) { s.Mixing = []PlaneRotation{{1, 2, 3}, {}} },
		"held.frame":            func(s *Study) { s.Held.Frame = "\x00" },
		"held.partner":          func(s *Study) { s.Held.Partner = -1 },
		"central":               func(s *Study) { s.Central = -1 },
		"subgroup":              func(s *Study) { s.Subgroup = "\x00" },
		"kept":                  func(s *Study) { s.Kept = strings.Repeat("E,", 200) },
		"views[1].name":         func(s *Study) { s.Views = []View{{}} },
		"views[1].camera.zoom":  func(s *Study) { s.Views = []View{{"v", Camera{Zoom: 1e9}}} },
		"figure.sheet":          func(s *Study) { s.Figure.Sheet = "bed" },
		"figure.font":           func(s *Study) { s.Figure.Font = "comic" },
		"levels[1].side":        func(s *Study) { s.Levels = []Level{{Side: "left"}} },
		"levels[1].height":      func(s *Study) { s.Levels = []Level{{Height: 101}} },
		"animation.rate":        func(s *Study) { s.Animation.Rate = 1e4 },
		"animation.width":       func(s *Study) { s.Animation.Width = 1 << 20 },
		"figure.language":       func(s *Study) { s.Figure.Language = "la" },
		"figure.width":          func(s *Study) { s.Figure.Width = -1 },
		"figure.height":         func(s *Study) { s.Figure.Height = 1e9 },
		"figure.resolution":     func(s *Study) { s.Figure.Resolution = math.NaN() },
	} {
		s := full
		change(&s)
		var e *record.Error
		if err := s.Check(); !errors.As(err, &e) || e.Key != key {
			t.Errorf("%s: %v", key, err)
		}
		if _, err := Encode(s); err == nil {
			t.Errorf("%s: a study that cannot be read is written", key)
		}
	}
	if err := full.Check(); err != nil {
		t.Error(err)
	}
}

func TestAHandWrittenFileIsToldWhereItIsWrong(t *testing.T) {
	for text, want := range map[string]string{
		strings.Replace(fullText, "0.25", "25", 1):               "f:44: moment: 25 is too large; the most is 1",
		strings.Replace(fullText, `"ink"`, `"gaudy"`, 1):         `f:76: look.style: "gaudy" is not known; there are lit, ink`,
		strings.Replace(fullText, `"zoom": 2`, `"zoom": [2]`, 1): "f:62: camera.zoom: a number is due, not a list",
		fullText[:300]: "f:19: the file is cut off here",
		strings.Replace(fullText, `"version": 4`, `"version": 5`, 1): "f:2: version: 5 is newer than this program, which reads up to version 4",
	} {
		s, err := Decode([]byte(text), "f")
		if err == nil || err.Error() != want {
			t.Errorf("got %v\nwant %s", err, want)
		}
		if !s.Equal(Study{}) {
			t.Error("half a study is returned")
		}
	}
}

func TestEveryTruncationIsRefused(t *testing.T) {
	text := strings.TrimRight(fullText, "\n")
	for n := range len(text) {
		if _, err := Decode([]byte(text[:n]), "f"); err == nil {
			t.Fatalf("%q is taken for a whole file", text[:n])
		}
	}
}

func TestOversizedFilesAreRefusedUnread(t *testing.T) {
	_, err := Read(&endless{}, "f")
	if err == nil || err.Error() != "f: the file is larger than 16777216 bytes" {
		t.Error(err)
	}
}

// endless is a file without an end.
type endless struct{}

func (*endless) Read(p []byte) (int, error) {
	for i := range p {
		p[i] = ' '
	}
	return len(p), nil
}

func TestPastedCoordinatesComeBack(t *testing.T) {
	for _, text := range []string{"1\n\nXe 0 0 0", "1\r\nt\r\nXe\t0 0 0\r\n", "", "\n", "\x00\u2028<>&\\\"", strings.Repeat("\x01", MaxCoordinates)} {
		s, err := full.WithCoordinates("pasted", text)
		if err != nil {
			t.Fatal(err)
		}
		data, err := Encode(s)
		if err != nil {
			t.Fatal(err)
		}
		if back, err := Decode(data, "f"); err != nil || back.Coordinates != text {
			t.Errorf("%.40q: %v", text, err)
		}
	}
	s, err := full.WithCoordinates("pasted", "1\nl\xe4nge\nXe 0 0 0")
	if err != nil || s.Coordinates != "1\nl\uFFFDnge\nXe 0 0 0" {
		t.Errorf("%v: %q", err, s.Coordinates)
	}
	for _, text := range []string{strings.Repeat("x", MaxCoordinates+1), strings.Repeat("\n", maxLines)} {
		if s, err := full.WithCoordinates("pasted", text); err == nil || !s.Equal(full) {
			t.Errorf("%v", err)
		}
	}
}

func TestAnotherStructureForgetsWhatWasAboutTheOldOne(t *testing.T) {
	want := Study{Structure: "demo:cage", Camera: Camera{Orthographic: true}, Look: full.Look, Figure: full.Figure, Animation: full.Animation}
	if got := full.Opened("demo:cage"); !reflect.DeepEqual(got, want) {
		t.Errorf("%#v", got)
	}
}

func TestSubjectIsWhatIsChosen(t *testing.T) {
	for p, want := range map[Projection]Subject{
		{}:                                      NoSubject,
		{Function: 1}:                           SubjectFunction,
		{Irrep: "Eu"}:                           SubjectOrbital,
		{Function: 1, Irrep: "Eu"}:              SubjectOrbital,
		{Subject: SubjectFunction}:              NoSubject,
		{Subject: SubjectOrbital}:               NoSubject,
		{Function: 1, Subject: SubjectOrbital}:  SubjectFunction,
		{Irrep: "Eu", Subject: SubjectFunction}: SubjectOrbital,
		{Function: 1, Irrep: "Eu", Subject: SubjectFunction}: SubjectFunction,
		{Function: 1, Irrep: "Eu", Subject: SubjectOrbital}:  SubjectOrbital,
	} {
		if got := p.TheSubject(); got != want {
			t.Errorf("%+v: %q, want %q", p, got, want)
		}
	}
}

// anyStudy draws studies that are within the limits.
func anyStudy(t *rapid.T) Study {
	name := rapid.StringN(0, 12, 60).Filter(func(s string) bool { return (&checker{}).accepts(s) })
	from := func(words ...string) string { return rapid.SampledFrom(words).Draw(t, "word") }
	number := func(low, high float64) float64 { return rapid.Float64Range(low, high).Draw(t, "number") }
	count := rapid.IntRange(0, maxNumber)
	flag := rapid.Bool()
	s := Study{
		Structure: name.Draw(t, "structure"), Coordinates: rapid.String().Draw(t, "coordinates"),
		Core: name.Draw(t, "core"), Ignore: name.Draw(t, "ignore"), Tolerance: number(0, 1e3), As: name.Draw(t, "as"), KeepAxes: flag.Draw(t, "keepAxes"),
		Frame: name.Draw(t, "frame"), Z: name.Draw(t, "z"), X: name.Draw(t, "x"),
		Basis: rapid.SliceOfN(name, 0, 4).Draw(t, "basis"),
		Projection: Projection{
			count.Draw(t, "function"), name.Draw(t, "irrep"), count.Draw(t, "copy"), count.Draw(t, "partner"),
			Subject(from("", "function", "orbital")), [2]int{count.Draw(t, "k"), count.Draw(t, "l")}, flag.Draw(t, "character"),
		},
		Turn:    []PlaneRotation{{1 + count.Draw(t, "from")/2, maxNumber, number(-360, 360)}},
		Held:    Held{name.Draw(t, "held frame"), name.Draw(t, "held z"), name.Draw(t, "held x"), name.Draw(t, "held irrep"), count.Draw(t, "held copy"), count.Draw(t, "held partner")},
		Central: count.Draw(t, "central"), Subgroup: name.Draw(t, "subgroup"), Kept: name.Draw(t, "kept"),
		Levels:    []Level{{from("group", "central"), name.Draw(t, "level"), count.Draw(t, "level copy"), number(0, 100)}},
		Animation: Animation{number(0, 60), number(0, 60), rapid.IntRange(0, maxPixels).Draw(t, "width"), 7, flag.Draw(t, "once")},
		Operation: name.Draw(t, "operation"), Moment: number(0, 1), Angle: number(0, 360),
		Camera: Camera{
			Set: flag.Draw(t, "set"), Azimuth: number(-360, 360), Elevation: number(-90, 90),
			Zoom: number(MinZoom, MaxZoom), Pan: [2]float64{number(-10, 10), number(-10, 10)}, Orthographic: flag.Draw(t, "orthographic"),
		},
		Look: Look{
			Style: from("", "lit", "ink"), Ground: from("", "paper", "dark"), Size: from("", "length"), Shape: from("", "polar", "square"),
			Signs: from("", "printed"), Nodes: flag.Draw(t, "nodes"), Split: flag.Draw(t, "split"), NoLabels: flag.Draw(t, "labels"), NoAxes: flag.Draw(t, "axes"),
		},
		Figure: Figure{
			Sheet: from("", "all", "frames"), Slide: flag.Draw(t, "slide"), Font: from("", "serif"), TextSize: number(0, 100), NoCard: flag.Draw(t, "card"),
			Width: number(0, 300), Height: number(0, 300), Resolution: number(0, 1200), NoCaption: flag.Draw(t, "caption"),
		},
	}
	for a := range rapid.IntRange(0, 5).Draw(t, "atoms") {
		s.Atoms = append(s.Atoms, 2*a+1)
	}
	return s
}

func (c *checker) accepts(s string) bool { c.text("", s, 60); return c.err == nil }

func TestEveryStudyComesBackFromItsFile(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := anyStudy(t)
		data, err := Encode(s)
		if err != nil {
			t.Fatal(err)
		}
		back, err := Decode(data, "f")
		if err != nil || !back.Equal(s) {
			t.Fatalf("%v\n%s", err, data)
		}
		if again, err := Encode(back); err != nil || !bytes.Equal(again, data) {
			t.Fatalf("written again: %v\n%s", err, again)
		}
	})
}

// FuzzDecode holds that no file does harm, and that what is read is written so
// that it is read again.
func FuzzDecode(f *testing.F) {
	f.Add([]byte(fullText))
	f.Add([]byte(`{"version":1}`))
	f.Add([]byte(`{"version":2,"structure":[[[[[[[[[[`))
	f.Add([]byte("{\"version\":1,\"basis\":[\"\\ud800\"],\"camera\":{\"pan\":[-0,1e-400]}}"))
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := Decode(data, "f")
		if err != nil {
			if text := err.Error(); strings.ContainsAny(text, "\n\r") || !strings.HasPrefix(text, "f:") {
				t.Errorf("message %q", text)
			}
			return
		}
		out, err := Encode(s)
		if err != nil {
			t.Fatal(err)
		}
		back, err := Decode(out, "f")
		if err != nil || !back.Equal(s) {
			t.Fatalf("%v\n%s", err, out)
		}
	})
}
