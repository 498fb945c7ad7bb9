package symmetry

import "github.com/go-gl/mathgl/mgl64"

// LinearAs writes the fit of a linear molecule in a finite group with the same
// z, whose x is that of the fit. It returns the error of DescendLinear for a
// group that is none of these.
func (f *Fit) LinearAs(symbol string) (*Fit, error) {
	if _, err := DescendLinear(f.Setting.Symbol, symbol, 0); err != nil {
		return nil, err
	}
	k, err := parseSymbol(symbol)
	if err != nil {
		return nil, err
	}
	g := *f
	g.Setting = newSetting(k)
	g.Permutations = nil
	for _, o := range g.Setting.Operations {
		images := make([]int, len(f.Ideal))
		for i, v := range f.Ideal {
			images[i] = nearestTo(f.Ideal, o.Matrix.Mul3x1(v))
		}
		g.Permutations = append(g.Permutations, images)
	}
	return &g, nil
}

// nearestTo is the index of the point that is nearest to a place; ideal points
// lie there but for rounding.
func nearestTo(points []mgl64.Vec3, place mgl64.Vec3) int {
	best := 0
	for i, p := range points {
		if p.Sub(place).Len() < points[best].Sub(place).Len() {
			best = i
		}
	}
	return best
}
