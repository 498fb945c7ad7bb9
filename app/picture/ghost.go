package picture

import (
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
)

// uncovered are the parts, left as ghosts where they were, that do not lie
// within one of the same shape after a finished operation: such a ghost cannot
// be seen, and where both surfaces come close, by the nucleus, they would be
// drawn in patches.
func uncovered(g *work.Group, parts []part, by mgl64.Mat3) []part {
	const closeTo = 0.02 // Å
	at := g.Sites.Positions
	on := map[int][]part{} // by site
	for _, p := range parts {
		on[p.site] = append(on[p.site], p)
	}
	come := map[int][]part{} // what has come to a site
	for to := range on {
		for from, list := range on {
			if by.Mul3x1(at[from]).Sub(at[to]).Len() < closeTo {
				come[to] = list
			}
		}
	}
	var out []part
	for _, ghost := range parts {
		if !slices.ContainsFunc(come[ghost.site], func(p part) bool { return covers(p, by, ghost) }) {
			out = append(out, ghost)
		}
	}
	return out
}

// covers tells whether a part that an operation has carried to the place of
// another, which has stayed, lies around it.
func covers(p part, by mgl64.Mat3, ghost part) bool {
	const alike = 0.02 // of the largest value
	if p.shell != ghost.shell || p.length < (1-1e-6)*ghost.length || p.amplitude() == 0 || ghost.amplitude() == 0 {
		return false
	}
	moved, stayed, back := p.angular(), ghost.angular(), by.Transpose()
	a, b := p.amplitude(), ghost.amplitude()
	for _, d := range probes {
		if math.Abs(math.Abs(moved(back.Mul3x1(d))/a)-math.Abs(stayed(d)/b)) > alike {
			return false
		}
	}
	return true
}

// probes are directions in general positions, more than a shell has functions.
var probes = func() []mgl64.Vec3 {
	const n, golden = 24, 2.399963 // the angle of a sunflower
	out := make([]mgl64.Vec3, n)
	for i := range out {
		z := 1 - 2*(float64(i)+0.37)/n
		r := math.Sqrt(1 - z*z)
		out[i] = mgl64.Vec3{r * math.Cos(golden*float64(i)), r * math.Sin(golden*float64(i)), z}
	}
	return out
}()
