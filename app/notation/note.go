package notation

import (
	"fmt"
	"slices"
	"strings"

	"lobewright/orbitals"
)

// Note is the sentence for a remark on a basis. choices are the selections as
// they were written; names are those of all atoms ("Cl2").
func Note(n orbitals.Note, b *orbitals.Basis, choices, names []string) string {
	choice := ""
	if n.Choice < len(choices) {
		choice = choices[n.Choice] + ": "
	}
	switch n.Key {
	case orbitals.NoteCompleted:
		var functions []string
		for _, i := range n.Functions {
			f := b.Functions[i]
			functions = append(functions, f.Name+" on "+names[f.Site])
		}
		return choice + "completed with " + enumerate(functions) + ", into which operations carry the chosen functions"
	case orbitals.NoteContained:
		var functions []string
		for k, name := range n.Names {
			functions = append(functions, name+" on "+names[n.Atoms[k]])
		}
		return choice + "left out " + enumerate(functions) + ", contained in functions chosen before"
	case orbitals.NoteSpectators:
		return choice + "left out " + enumerate(atomNames(n.Atoms, names)) + ", spectators that operations carry to no atom"
	case orbitals.NoteCentreCarried:
		return choice + "on " + enumerate(atomNames(n.Atoms, names)) + " the functions point to an image of the chosen centre"
	}
	return choice + string(n.Key)
}

func atomNames(atoms []int, names []string) []string {
	out := make([]string, len(atoms))
	for i, a := range atoms {
		out[i] = names[a]
	}
	return out
}

// mostNamed is how many things a sentence names before it counts the rest.
const mostNamed = 8

// enumerate joins a few names and counts the others.
func enumerate(list []string) string {
	list = slices.Clone(list)
	if n := len(list); n > mostNamed+1 {
		list = append(list[:mostNamed:mostNamed], fmt.Sprintf("%d more", n-mostNamed))
	}
	if n := len(list); n > 1 {
		return strings.Join(list[:n-1], ", ") + " and " + list[n-1]
	}
	return strings.Join(list, "")
}
