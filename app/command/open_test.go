package command

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lobewright/app/export"
	"lobewright/app/study"
)

// command runs a command line and returns what it prints; a failure ends the
// test.
func command(t *testing.T, args ...string) string {
	t.Helper()
	out, status := tryCommand(args...)
	if status != 0 {
		t.Fatalf("%q: exit %d: %s", args, status, out)
	}
	return out
}

func tryCommand(args ...string) (string, int) {
	var out bytes.Buffer
	status := Run(context.Background(), args, Streams{In: strings.NewReader(""), Out: &out, Err: &out}, "test")
	return out.String(), status
}

const waterFile = "3\nwater\nO 0 0 0.1173\nH 0 0.7572 -0.4692\nH 0 -0.7572 -0.4692\n"

// inFolder makes a folder with a file of coordinates the current one, whose
// path would tell a user's name.
func inFolder(t *testing.T) (file string) {
	t.Helper()
	folder := filepath.Join(t.TempDir(), "home", "somebody")
	if err := os.MkdirAll(folder, 0o777); err != nil {
		t.Fatal(err)
	}
	t.Chdir(folder)
	file = filepath.Join(folder, "water.xyz")
	if err := os.WriteFile(file, []byte(waterFile), 0o666); err != nil {
		t.Fatal(err)
	}
	return file
}

// TestAFigureIsMadeAnewFromItselfWithTheSameBytes goes from each format to each.
func TestAFigureIsMadeAnewFromItselfWithTheSameBytes(t *testing.T) {
	file := inFolder(t)
	endings := export.SheetEndings
	for _, e := range endings {
		command(t, "figure", file, "--on", "H:s", "--irrep", "B2", "--look", "ink", "--view", "30,20", "--dpi", "60", "-o", "old"+e)
	}
	if err := os.Remove(file); err != nil {
		t.Fatal(err)
	}
	for _, from := range endings {
		s, err := export.StudyIn("old" + from)
		if err != nil {
			t.Fatal(err)
		}
		encoded, err := study.Encode(s)
		if err != nil || bytes.Contains(encoded, []byte("somebody")) || s.Structure != "water.xyz" || s.Coordinates == "" {
			t.Errorf("%s: %v: %s", from, err, encoded)
		}
		for _, to := range endings {
			command(t, "figure", "old"+from, "--force", "-o", "new"+to)
			before, _ := os.ReadFile("old" + to)
			after, _ := os.ReadFile("new" + to)
			if len(before) == 0 || !bytes.Equal(before, after) {
				t.Errorf("%s made from %s has %d bytes and is not the one with %d", to, from, len(after), len(before))
			}
			if bytes.Contains(before, []byte("somebody")) {
				t.Errorf("%s tells a path", to)
			}
		}
	}
}

func TestFlagsCountAboveTheStudyOfAFigure(t *testing.T) {
	file := inFolder(t)
	command(t, "figure", file, "--on", "H:s", "--irrep", "B1", "--frame", "plane-xz", "--dpi", "50", "-o", "old.png")
	command(t, "figure", "old.png", "--irrep", "A1", "--frame", "default", "--width", "50", "-o", "new.png")
	s, err := export.StudyIn("new.png")
	if err != nil {
		t.Fatal(err)
	}
	if s.Projection.Irrep != "A1" || s.Frame != "default" || s.Figure.Width != 50 || s.Figure.Resolution != 50 || len(s.Basis) != 1 {
		t.Errorf("%+v", s)
	}
	command(t, "figure", "old.png", "--on", "O:p", "--irrep", "B1", "--x", "2,3", "-o", "other.png")
	if s, err = export.StudyIn("other.png"); err != nil || len(s.Basis) != 1 || s.Basis[0] != "O:p" || s.Frame != "" || s.X != "2,3" {
		t.Errorf("%v: %+v", err, s)
	}
}

func TestEveryCommandTakesAFigureInPlaceOfAStructure(t *testing.T) {
	file := inFolder(t)
	command(t, "figure", file, "--on", "H:s", "--irrep", "B2", "--dpi", "50", "-o", "old.png")
	for _, args := range [][]string{
		{"group"}, {"frames"}, {"near"}, {"project"}, {"ledger", "--function", "1"}, {"descend", "--to", "C2"}, {"idealize"},
	} {
		withFile := append([]string{args[0], file}, args[1:]...)
		switch args[0] {
		case "project":
			withFile = append(withFile, "--on", "H:s")
		case "ledger":
			withFile = append(withFile, "--on", "H:s", "--irrep", "B2")
		}
		want, got := command(t, withFile...), command(t, append([]string{args[0], "old.png"}, args[1:]...)...)
		if got != want {
			t.Errorf("%q prints\n%s\ninstead of\n%s", args, got, want)
		}
	}
}

func TestAFigureCanBeMadeWithoutItsStudy(t *testing.T) {
	file := inFolder(t)
	command(t, "figure", file, "--no-study", "--dpi", "50", "-o", "bare.png")
	out, status := tryCommand("group", "bare.png")
	if want := "lobewright: bare.png carries no study; figures of this program do, unless they were made with --no-study\n"; status != 1 || out != want {
		t.Errorf("exit %d: %s", status, out)
	}
}

func TestAStudyFileStandsForItsStructure(t *testing.T) {
	file := inFolder(t)
	data, err := study.Encode(study.Study{Structure: file, Basis: []string{"H:s"}})
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile("work.lobewright", data, 0o666); err != nil {
		t.Fatal(err)
	}
	if got, want := command(t, "project", "work.lobewright"), command(t, "project", file, "--on", "H:s"); got != want {
		t.Errorf("it prints\n%s", got)
	}
}

// The language of a figure is kept in it, and the words are those of the
// language.
func TestAFigureSpeaksTheLanguageThatItKeeps(t *testing.T) {
	file := inFolder(t)
	command(t, "figure", file, "--on", "H:s", "--irrep", "B2", "--language", "de", "-o", "old.svg")
	if err := os.Remove(file); err != nil {
		t.Fatal(err)
	}
	command(t, "figure", "old.svg", "-o", "new.svg")
	command(t, "figure", "old.svg", "--language", "en", "-o", "english.svg")
	for name, language := range map[string]string{"old.svg": "de", "new.svg": "de", "english.svg": "en"} {
		data, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		german, english := strings.Contains(string(data), "Gruppenorbital b2"), strings.Contains(string(data), "group orbital b2")
		if german != (language == "de") || english != (language == "en") {
			t.Errorf("%s: German %v, English %v", name, german, english)
		}
	}
	if out, status := tryCommand("figure", "demo:water", "--language", "la", "-o", "x.svg"); status != 2 || !strings.Contains(out, "must be en or de") {
		t.Errorf("%d: %s", status, out)
	}
}
