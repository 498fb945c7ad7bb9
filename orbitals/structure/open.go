package structure

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"strings"

	"lobewright/symmetry/message"
)

// Inputs are the places besides the file system from which Open reads. Either may be nil.
type Inputs struct {
	// Stdin is read where the structure is called "-".
	Stdin io.Reader
	// Demo holds a file NAME.xyz for each "demo:NAME".
	Demo fs.FS
}

// Open reads the structure that spec names:
//
//	water.xyz               a file, see Read
//	-                       standard input
//	ideal:OC-6,Co,N,1.96    an ideal polyhedron or ring, see Ideal
//	demo:NAME               an embedded demonstration
//
// A file whose own name begins with "ideal:" or "demo:" is written "./ideal:…". The error is an *Error.
func Open(spec string, in Inputs) (*Molecule, []Note, error) {
	if text, ok := strings.CutPrefix(spec, "ideal:"); ok {
		m, err := Ideal(text)
		return m, nil, err
	}
	if name, ok := strings.CutPrefix(spec, "demo:"); ok {
		return openDemo(name, in.Demo)
	}
	if spec == "-" {
		const name = "standard input"
		if in.Stdin == nil {
			return nil, nil, &Error{File: name, Problem: CannotOpen, What: message.Words("there is no standard input")}
		}
		return Read(in.Stdin, name)
	}
	return openFile(spec)
}

func openFile(path string) (*Molecule, []Note, error) {
	if path == "" {
		return nil, nil, &Error{Problem: CannotOpen, What: message.Words("the name of the structure is empty"),
			Want: message.Words("give a file, - for standard input, ideal:OC-6 or demo:NAME")}
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, nil, cannotOpen(path, err)
	}
	defer f.Close()
	if info, err := f.Stat(); err == nil && info.IsDir() {
		return nil, nil, &Error{File: path, Problem: IsDirectory, What: message.Words("this is a directory"),
			Want: message.Words("name a file in it")}
	}
	return Read(f, path)
}

func cannotOpen(path string, err error) *Error {
	e := &Error{File: path, Problem: CannotOpen, What: message.Words("cannot be opened: %s", systemError(err)), Err: err}
	if errors.Is(err, fs.ErrNotExist) {
		e.What = message.Words("there is no such file")
	}
	return e
}

func openDemo(name string, demos fs.FS) (*Molecule, []Note, error) {
	if demos == nil {
		return nil, nil, &Error{File: "demo:" + name, Problem: UnknownDemo, What: message.Words("no demonstrations are at hand")}
	}
	if !fs.ValidPath(name) || strings.Contains(name, "/") {
		return nil, nil, unknownDemo(name, demos)
	}
	f, err := demos.Open(name + ".xyz")
	if err != nil {
		return nil, nil, unknownDemo(name, demos)
	}
	defer f.Close()
	return Read(f, "demo:"+name)
}

func unknownDemo(name string, demos fs.FS) *Error {
	var names []string
	entries, _ := fs.ReadDir(demos, ".")
	for _, e := range entries {
		if n, ok := strings.CutSuffix(e.Name(), ".xyz"); ok {
			names = append(names, n)
		}
	}
	return &Error{Problem: UnknownDemo, What: message.Words("there is no demonstration %s", found(name)),
		Want: message.Words("there are %s", strings.Join(names, ", "))}
}
