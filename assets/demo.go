package assets

import (
	"embed"
	"io/fs"
	"strings"
)

//go:embed demo/*.xyz
var demo embed.FS

// Demos returns the demonstration structures as files NAME.xyz: plain coordinate lists in Å, in no particular
// orientation.
func Demos() fs.FS {
	sub, err := fs.Sub(demo, "demo")
	if err != nil { // only for a malformed path
		panic(err)
	}
	return sub
}

// A Demo names one of the demonstration structures.
type Demo struct {
	// Name is what is written after "demo:".
	Name string
	// Title is the second line of the file.
	Title string
}

// DemoList lists the demonstration structures by name.
func DemoList() []Demo {
	entries, err := fs.ReadDir(Demos(), ".")
	if err != nil { // the folder is built in
		panic(err)
	}
	var out []Demo
	for _, e := range entries {
		text, err := fs.ReadFile(Demos(), e.Name())
		if err != nil {
			panic(err)
		}
		lines := strings.SplitN(string(text), "\n", 3)
		out = append(out, Demo{Name: strings.TrimSuffix(e.Name(), ".xyz"), Title: lines[1]})
	}
	return out
}
