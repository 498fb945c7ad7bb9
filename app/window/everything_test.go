//go:build cgo && !nowindow

package window

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"lobewright/app/study"
	"lobewright/assets"
)

// Every item of every menu is in the list of commands, under its own name and
// place, and the other way round.
func TestTheListOfCommandsIsThatOfTheMenus(t *testing.T) {
	defer speak(assets.English)
	for _, l := range assets.Languages() {
		speak(l)
		b := newBench(t, t.TempDir())
		var menus []string
		var within func(place string, items []*fyne.MenuItem)
		within = func(place string, items []*fyne.MenuItem) {
			for _, i := range items {
				switch {
				case i.IsSeparator:
				case i.ChildMenu != nil:
					within(place+" › "+i.Label, i.ChildMenu.Items)
				default:
					menus = append(menus, place+" › "+i.Label)
				}
			}
		}
		for _, m := range b.win.MainMenu().Items {
			within(m.Label, m.Items)
		}
		var list []string
		for _, c := range b.everything() {
			list = append(list, c.place+" › "+c.menuLabel())
		}
		if !slices.Equal(menus, list) {
			t.Errorf("%s: the menus hold\n%s\nthe list holds\n%s", l, strings.Join(menus, "\n"), strings.Join(list, "\n"))
		}
		if len(list) < 50 {
			t.Errorf("there are %d commands", len(list))
		}
		b.shut()
		b.ui = nil
	}
}

// No two commands have the same keys.
func TestEveryShortcutMeansOneThing(t *testing.T) {
	b := newBench(t, t.TempDir())
	seen := map[string]string{}
	for _, c := range b.everything() {
		for _, k := range strings.Split(c.keysText(), ", ") {
			if k == "" {
				continue
			}
			if before := seen[k]; before != "" {
				t.Errorf("%s means %q and %q", k, before, c.name)
			}
			seen[k] = c.name
		}
	}
}

func TestACommandIsFoundAndDone(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	if got := found(b.everything(), "perspect"); len(got) != 1 || got[0].key != "menu.parallel" {
		t.Errorf("%d commands are found", len(got))
	}
	if got := found(b.everything(), "zz zz"); len(got) != 0 {
		t.Errorf("%d commands are found", len(got))
	}
	b.showEverything()
	entry := b.win.Canvas().Focused().(*answerEntry)
	entry.SetText("without persp")
	entry.OnSubmitted(entry.Text)
	if !b.now().Camera.Orthographic {
		t.Error("Return does not do the command")
	}
	if b.win.Canvas().Overlays().Top() != nil {
		t.Error("the list stays open")
	}
	// What cannot be done is shown and does nothing.
	b.start(study.Study{})
	b.showEverything()
	entry = b.win.Canvas().Focused().(*answerEntry)
	entry.SetText("redo")
	entry.OnSubmitted(entry.Text)
	if b.win.Canvas().Overlays().Top() == nil {
		t.Error("a command that cannot be done closed the list")
	}
	entry.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if b.win.Canvas().Overlays().Top() != nil {
		t.Error("Escape does not close the list")
	}
}

func TestFilesAreChosenFromTheListWithTheKeyboard(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	dir := t.TempDir()
	inner := filepath.Join(dir, "paper")
	if err := os.Mkdir(inner, 0o777); err != nil {
		t.Fatal(err)
	}
	const text = "3\nchosen\nO 0 0 0\nH 0 0.76 0.59\nH 0 -0.76 0.59\n"
	for n, data := range map[string]string{"a.xyz": text, "notes.pdf": "", "b.png": "", "log": ""} {
		if err := os.WriteFile(filepath.Join(inner, n), []byte(data), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	for i := range 40 {
		name := filepath.Join(dir, "z"+strings.Repeat("z", i)+".xyz")
		if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	if got := entries(dir+"/", false); len(got) != 41 || got[0] != "paper/" {
		t.Errorf("%d entries, %q first", len(got), got[0])
	}
	if got := entries(inner+"/", false); !slices.Equal(got, []string{"a.xyz"}) {
		t.Errorf("the folder shows %q", got)
	}
	if got := entries(inner+"/b", false); !slices.Equal(got, []string{"b.png"}) {
		t.Errorf("a figure whose name is begun: %q", got)
	}
	b.askOpen()
	entry := b.win.Canvas().Focused().(*answerEntry)
	entry.SetText(dir + "/")
	press := func(k fyne.KeyName) { entry.TypedKey(&fyne.KeyEvent{Name: k}) }
	press(fyne.KeyDown) // ..
	press(fyne.KeyDown) // paper/
	entry.OnSubmitted(entry.Text)
	if entry.Text != inner+"/" {
		t.Fatalf("the folder that was taken is %s", entry.Text)
	}
	press(fyne.KeyDown)
	press(fyne.KeyDown)
	entry.OnSubmitted(entry.Text)
	b.until("the structure", func() bool { return b.state.Group != nil && b.state.Group.Molecule.Title == "chosen" })
	if b.win.Canvas().Overlays().Top() != nil {
		t.Error("the sheet stays open")
	}
}

func TestAStudyIsSavedToItsOwnFileWithoutAQuestion(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	path := filepath.Join(t.TempDir(), "w"+study.Extension)
	if err := b.writeStudy(path, false); err != nil {
		t.Fatal(err)
	}
	b.setBasis([]string{"O:p"})
	b.save()
	if b.win.Canvas().Overlays().Top() != nil {
		t.Error("it asks")
	}
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if s, err := study.Read(f, path); err != nil || !slices.Equal(s.Basis, []string{"O:p"}) {
		t.Errorf("%v %v", s.Basis, err)
	}
	if got := b.session.Recent(); len(got) == 0 || got[0] != path {
		t.Errorf("recent: %q", got)
	}
}
