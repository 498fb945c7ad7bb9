package work

import (
	"context"
	"path/filepath"
	"strings"
	"unicode"

	"lobewright/app/study"
	"lobewright/orbitals/structure"
)

// Contained is the study with all inside that it needs, to be carried by a
// figure; see the function. The error is that of Structure, or that the
// coordinates are too long.
func (w *Work) Contained(ctx context.Context, s study.Study) (study.Study, error) {
	if isOwn(s) || s.Coordinates != "" {
		return Contained(s, nil)
	}
	read, err := w.Structure(ctx, s)
	if err != nil {
		return s, err
	}
	return Contained(s, read)
}

// Contained puts the structure that was read for a study into it: coordinates
// from a file or from standard input take the place of their path, of which
// only the file's name stays. What the program itself has, demonstrations and
// ideal polyhedra, is only named. The results are the same as before. The error
// says that the coordinates are too long.
func Contained(s study.Study, read *Structure) (study.Study, error) {
	switch {
	case isOwn(s):
		return s, nil
	case s.Coordinates == "":
		var text strings.Builder
		if err := structure.Write(&text, read.Molecule); err != nil {
			return s, err
		}
		s.Coordinates = text.String()
	}
	s.Structure = nameAlone(s.Structure)
	return s, s.Check()
}

// isOwn tells whether the program itself has the structure of a study.
func isOwn(s study.Study) bool {
	return s.Coordinates == "" && (strings.HasPrefix(s.Structure, "demo:") || strings.HasPrefix(s.Structure, "ideal:"))
}

// nameAlone is the name of a structure without the folders that lead to it.
func nameAlone(path string) string {
	if path == "-" {
		return "standard input"
	}
	if i := strings.LastIndexAny(path, `/\`); i >= 0 {
		path = path[i+1:]
	}
	path = strings.Map(func(r rune) rune {
		if unicode.IsControl(r) {
			return '_'
		}
		return r
	}, strings.ToValidUTF8(filepath.Base(path), "_"))
	if path == "-" || path == "" {
		return "coordinates"
	}
	return path
}
