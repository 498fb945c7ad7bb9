package notation

import "lobewright/orbitals"

// ClosedForm sets a combination in closed form.
func ClosedForm(f orbitals.ClosedForm) Text { return Words(f.String()) }
