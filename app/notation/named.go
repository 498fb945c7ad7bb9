package notation

import (
	"strconv"
	"strings"

	"lobewright/orbitals"
)

// Named writes a combination with the names of its functions in the place of
// φ1, φ2 …, in closed form where there is one: "5px", "(5px + 5py)/√2". set
// makes the text of a name.
func Named(coefficients []float64, names []string, set func(string) Text) Text {
	plain := ""
	if form, ok := orbitals.FindClosedForm(coefficients); ok {
		plain = form.String()
	} else {
		plain = strings.Join(Combination(Terms(coefficients), DecimalCoefficient), " ")
	}
	pieces := strings.Split(plain, "φ")
	t := Words(pieces[0])
	for i, piece := range pieces[1:] {
		number := leadingDigits(piece)
		n, err := strconv.Atoi(number)
		if err != nil || n < 1 || n > len(names) {
			return Words(plain)
		}
		// A number before a name that begins with one wants a gap.
		if before := pieces[i]; before != "" && !strings.HasSuffix(before, " ") && !strings.HasSuffix(before, "(") && !strings.HasSuffix(before, "−") {
			t = t.Then(Words(" "))
		}
		t = t.Then(set(names[n-1]), Words(piece[len(number):]))
	}
	return t
}

// Shell sets the name of a function with the number of its shell: "5px".
func Shell(name string) Text {
	number := leadingDigits(name)
	return Words(number).Then(Function(name[len(number):]))
}
