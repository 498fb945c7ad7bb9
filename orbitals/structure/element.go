package structure

import "strings"

// An Element is an atomic number, from 1 (hydrogen) to MaxElement. The zero Element is no element.
type Element uint8

// MaxElement is the heaviest element that has a symbol, oganesson.
const MaxElement Element = 118

// symbols in the order of atomic numbers, from hydrogen.
var symbols = strings.Fields(`
H He
Li Be B C N O F Ne
Na Mg Al Si P S Cl Ar
K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr
Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe
Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn
Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og`)

// radii are the covalent radii in Å from hydrogen to curium of B. Cordero, V. Gómez, A. E. Platero-Prats,
// M. Revés, J. Echeverría, E. Cremades, F. Barragán, S. Alvarez, Dalton Trans. 2008, 2832. Carbon is the sp3
// value, Mn, Fe and Co are the low-spin ones. Bismuth to curium are from memory.
var radii = [...]float64{
	0.31, 0.28,
	1.28, 0.96, 0.84, 0.76, 0.71, 0.66, 0.57, 0.58,
	1.66, 1.41, 1.21, 1.11, 1.07, 1.05, 1.02, 1.06,
	2.03, 1.76, 1.70, 1.60, 1.53, 1.39, 1.39, 1.32, 1.26, 1.24, 1.32, 1.22, 1.22, 1.20, 1.19, 1.20, 1.20, 1.16,
	2.20, 1.95, 1.90, 1.75, 1.64, 1.54, 1.47, 1.46, 1.42, 1.39, 1.45, 1.44, 1.42, 1.39, 1.39, 1.38, 1.39, 1.40,
	2.44, 2.15, 2.07, 2.04, 2.03, 2.01, 1.99, 1.98, 1.98, 1.96, 1.94, 1.92, 1.92, 1.89, 1.90, 1.87, 1.87,
	1.75, 1.70, 1.62, 1.51, 1.44, 1.41, 1.36, 1.36, 1.32, 1.45, 1.46, 1.48, 1.40, 1.50, 1.50,
	2.60, 2.21, 2.15, 2.06, 2.00, 1.96, 1.90, 1.87, 1.80, 1.69,
}

// bySymbol finds an element by its symbol in lower case. It is filled once and only read afterwards.
var bySymbol = func() map[string]Element {
	m := make(map[string]Element, len(symbols))
	for i, s := range symbols {
		m[strings.ToLower(s)] = Element(i + 1)
	}
	return m
}()

// ElementOf returns the element with the given symbol, in any case ("Cl", "CL", "cl"), and whether there is one.
func ElementOf(symbol string) (Element, bool) {
	if len(symbol) > 2 { // some letters beyond ASCII have a lower case within it: the kelvin sign
		return 0, false
	}
	e, ok := bySymbol[strings.ToLower(symbol)]
	return e, ok
}

// Valid tells whether e is an atomic number from 1 to MaxElement.
func (e Element) Valid() bool { return 1 <= e && e <= MaxElement }

// Symbol returns the symbol, "Cl" for 17, and "?" for what is no element.
func (e Element) Symbol() string {
	if !e.Valid() {
		return "?"
	}
	return symbols[e-1]
}

// String returns the symbol.
func (e Element) String() string { return e.Symbol() }

// Radius returns the covalent radius in Å (B. Cordero and others, Dalton Trans. 2008, 2832). The table ends with
// curium; the heavier elements get curium's value (own choice: they form no molecules whose bonds are measured).
func (e Element) Radius() float64 {
	switch {
	case !e.Valid():
		return 0
	case int(e) > len(radii):
		return radii[len(radii)-1]
	}
	return radii[e-1]
}

// Period is the row of the periodic table, from 1; 0 for what is no element.
func (e Element) Period() int {
	if !e.Valid() {
		return 0
	}
	period := 1
	for _, last := range periodEnds {
		if int(e) > last {
			period++
		}
	}
	return period
}

// periodEnds are the atomic numbers of the noble gases.
var periodEnds = [...]int{2, 10, 18, 36, 54, 86, 118}

// Valence is the principal quantum number of the shell l of an element that takes
// part in bonds, as common practice has it: n for s and p in period n; n − 1
// for d and n − 2 for f, but n and n − 1 in the groups from boron to neon, whose
// inner d shell is filled; never less than l + 1.
func (e Element) Valence(l int) int {
	n := e.Period()
	inner := max(0, l-1)
	if end := periodEnds[max(n, 1)-1]; n > 1 && int(e) > end-6 && inner > 0 {
		inner--
	}
	return max(l+1, n-inner)
}
