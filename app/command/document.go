package command

// The documents are what the commands print with --json. Everything counts
// from 1; vectors, matrices and functions are in the working frame.

type groupDocument struct {
	Structure  structureDocument   `json:"structure"`
	PointGroup string              `json:"pointGroup"`
	Order      int                 `json:"order"`
	Deviation  float64             `json:"deviation"`
	Tolerance  float64             `json:"tolerance"`
	Doubtful   bool                `json:"doubtful"`
	Frame      frameDocument       `json:"frame"`
	Operations []operationDocument `json:"operations"`
	Classes    []classDocument     `json:"classes"`
	Irreps     []irrepDocument     `json:"irreps"`
}

type structureDocument struct {
	Title string         `json:"title"`
	Atoms []atomDocument `json:"atoms"`
	Core  []int          `json:"core"`
}

type atomDocument struct {
	Element  string     `json:"element"`
	Position [3]float64 `json:"position"`
}

type frameDocument struct {
	Origin     [3]float64    `json:"origin"`
	Rotation   [3][3]float64 `json:"rotation"`
	Name       string        `json:"name"`
	Convention string        `json:"convention"`
	Source     string        `json:"source"`
	Ties       []string      `json:"ties"`
}

type operationDocument struct {
	Name        string        `json:"name"`
	Class       int           `json:"class"`
	Axis        *[3]float64   `json:"axis,omitempty"` // none for E and i
	Matrix      [3][3]float64 `json:"matrix"`
	Permutation []int         `json:"permutation"`
}

type classDocument struct {
	Name string `json:"name"`
	Size int    `json:"size"`
}

type irrepDocument struct {
	Label       string        `json:"label"`
	Dimension   int           `json:"dimension"`
	ComplexPair bool          `json:"complexPair"`
	Characters  []float64     `json:"characters"`
	Matrices    [][][]float64 `json:"matrices"`
	Functions   [][]string    `json:"functions"`
}

type projectDocument struct {
	groupDocument
	Basis         []functionDocument     `json:"basis"`
	Characters    []float64              `json:"characters"`
	Content       []contentDocument      `json:"content"`
	GroupOrbitals []groupOrbitalDocument `json:"groupOrbitals"`
}

type functionDocument struct {
	Atom      int         `json:"atom"`
	Function  string      `json:"function"`
	Direction *[3]float64 `json:"direction,omitempty"` // only for sigma, pi1 and pi2
	Orbit     int         `json:"orbit"`
}

type contentDocument struct {
	Irrep  string `json:"irrep"`
	Copies int    `json:"copies"`
}

type groupOrbitalDocument struct {
	Irrep        string    `json:"irrep"`
	Copy         int       `json:"copy"`
	Partner      int       `json:"partner"`
	Coefficients []float64 `json:"coefficients"`
	ClosedForm   string    `json:"closedForm"`
}

type ledgerDocument struct {
	Function int         `json:"function"`
	Irrep    string      `json:"irrep"`
	Element  [2]int      `json:"element"`
	Rows     []ledgerRow `json:"rows"`
	Norm     float64     `json:"norm"`
}

type ledgerRow struct {
	Operation string    `json:"operation"`
	Image     [][2]any  `json:"image"` // function (integer), coefficient
	Weight    float64   `json:"weight"`
	Sum       []float64 `json:"sum"`
}
