package structure

// Place is the period of an element in the periodic table, from 1, and its
// group, from 1 to 18; group 0 for the lanthanoids from lanthanum to ytterbium
// and the actinoids from actinium to nobelium (lutetium and lawrencium stand in
// group 3, as in the provisional report of IUPAC on the question, 2021). Zeros
// for no element.
func (e Element) Place() (period, group int) {
	if !e.Valid() {
		return 0, 0
	}
	starts := [...]int{1, 3, 11, 19, 37, 55, 87, int(MaxElement) + 1}
	for period = 1; int(e) >= starts[period]; period++ {
	}
	from := int(e) - starts[period-1] // in its period, from 0
	switch length := starts[period] - starts[period-1]; {
	case from < 2 && length > 2:
		return period, from + 1
	case length == 2: // hydrogen and helium
		return period, 1 + 17*from
	case length == 8:
		return period, from + 11
	case length == 18:
		return period, from + 1
	case from < 16:
		return period, 0
	default:
		return period, from - 13
	}
}
