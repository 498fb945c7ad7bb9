package notation

import (
	"slices"
	"strings"

	"lobewright/assets"
	"lobewright/orbitals"
)

// Note is the sentence for a remark on a basis, in English. choices are the
// selections as they were written; names are those of all atoms ("Cl2").
func Note(n orbitals.Note, b *orbitals.Basis, choices, names []string) string {
	return NoteIn(english(), n, b, choices, names)
}

// NoteIn is Note in the language of the texts.
func NoteIn(t assets.Texts, n orbitals.Note, b *orbitals.Basis, choices, names []string) string {
	choice := ""
	if n.Choice < len(choices) {
		choice = choices[n.Choice] + ": "
	}
	switch n.Key {
	case orbitals.NoteCompleted:
		var functions []string
		for _, i := range n.Functions {
			f := b.Functions[i]
			functions = append(functions, t.Say("notes.functionOn", f.Name, names[f.Site]))
		}
		return choice + t.Say("notes.completed", enumerate(t, functions))
	case orbitals.NoteContained:
		var functions []string
		for k, name := range n.Names {
			functions = append(functions, t.Say("notes.functionOn", name, names[n.Atoms[k]]))
		}
		return choice + t.Say("notes.contained", enumerate(t, functions))
	case orbitals.NoteSpectators:
		return choice + t.Say("notes.spectators", enumerate(t, atomNames(n.Atoms, names)))
	case orbitals.NoteCentreCarried:
		return choice + t.Say("notes.centreCarried", enumerate(t, atomNames(n.Atoms, names)))
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
func enumerate(t assets.Texts, list []string) string {
	list = slices.Clone(list)
	if n := len(list); n > mostNamed+1 {
		list = append(list[:mostNamed:mostNamed], t.Say("notes.more", n-mostNamed))
	}
	if n := len(list); n > 1 {
		return t.Say("axes.and", strings.Join(list[:n-1], ", "), list[n-1])
	}
	return strings.Join(list, "")
}
