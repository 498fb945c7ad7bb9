//go:build unix

package main_test

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// The README shows this script whole.
func TestTheScriptOfThePaperMakesAllItsFigures(t *testing.T) {
	script, err := os.ReadFile("../testdata/paper/figures.sh")
	if err != nil {
		t.Fatal(err)
	}
	readme, err := os.ReadFile("../README.md")
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(readme), "```sh\n"+string(script)+"```\n") {
		t.Error("the README shows another script than testdata/paper/figures.sh")
	}
	folder := t.TempDir()
	if err := os.CopyFS(folder, os.DirFS("../testdata/paper")); err != nil {
		t.Fatal(err)
	}
	program := buildProgram(t)
	run := exec.Command("sh", "figures.sh")
	run.Dir = folder
	run.Env = append(os.Environ(), "PATH="+filepath.Dir(program)+string(os.PathListSeparator)+os.Getenv("PATH"))
	if out, err := run.CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	for name, start := range map[string]string{
		"figure-1-bipyramid.png": "\x89PNG", "figure-1-trans.png": "\x89PNG", "figure-1-ring.png": "\x89PNG",
		"figure-2.pdf": "%PDF-", "figure-3.svg": "<?xml", "figure-3-wide.pdf": "%PDF-", "figure-4.pdf": "%PDF-",
		"animation-1.gif": "GIF89a", "table-bipyramid.tex": "% ", "table-trans.tex": "% ", "table-ring.tex": "% ",
		"coefficients.csv": "group orbital",
	} {
		data, err := os.ReadFile(filepath.Join(folder, "paper", name))
		if err != nil {
			t.Error(err)
		} else if !strings.HasPrefix(string(data), start) {
			t.Errorf("%s begins with %.10q", name, data)
		}
	}
}
