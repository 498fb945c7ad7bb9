package render

import (
	"math/rand/v2"
	"slices"
	"testing"
)

// The tree finds every ball that is felt, and in a large scene few others.
func TestShadeTreeFindsAllThatIsFelt(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	for _, n := range []int{0, 1, 8, 9, 300, 5000} {
		balls := make([]ball, n)
		for i := range balls {
			balls[i] = ball{x: 40 * rng.Float32(), y: 40 * rng.Float32(), z: 40 * rng.Float32(), r: 0.1 + rng.Float32(), weight: rng.Float32()}
			if i%50 == 0 {
				balls[i].r *= 9
			}
		}
		var tree shadeTree
		tree.build(balls)
		for range 50 {
			c := ball{x: 40 * rng.Float32(), y: 40 * rng.Float32(), z: 40 * rng.Float32(), r: rng.Float32()}
			found := tree.around(0, c.center(), 1.06*c.r, nil)
			slices.Sort(found)
			for k := range balls {
				b := &balls[k]
				felt := distance(&c, b) < 1.05*c.r+b.reach()
				if _, ok := slices.BinarySearch(found, int32(k)); felt && !ok {
					t.Fatalf("%d balls: ball %d is felt and not found", n, k)
				}
			}
			if n == 5000 && len(found) > n/3 {
				t.Errorf("%d of %d balls found", len(found), n)
			}
		}
	}
}
