package render

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Each kernel of the assembly gives the bits of its plain twin, odd numbers
// included.

func oddFloat(rng *rand.Rand) float32 {
	switch rng.IntN(12) {
	case 0:
		return 0
	case 1:
		return float32(math.NaN())
	case 2:
		return float32(math.Inf(1 - 2*rng.IntN(2)))
	case 3:
		return 1
	case 4:
		return -rng.Float32()
	case 5:
		return rng.Float32() * 1e-4
	}
	return rng.Float32() * 1.2
}

func sameBits(a, b *[lanes]float32) bool {
	for i := range a {
		if math.Float32bits(a[i]) != math.Float32bits(b[i]) && !(a[i] != a[i] && b[i] != b[i]) {
			return false
		}
	}
	return true
}

func TestVectorStackEqualsPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	rng := rand.New(rand.NewPCG(11, 12))
	for range 3000 {
		strips := make([]strip, 1+rng.IntN(9))
		var pile []int32
		for k := range strips {
			s := &strips[k]
			s.part = int32(rng.IntN(4) - 1)
			for i := range lanes {
				s.n[i] = float32(rng.IntN(6)) / 8 // some equally near
				s.nx[i], s.ny[i] = rng.Float32()*0.2-0.1, rng.Float32()*0.2-0.1
				s.r[i], s.g[i], s.b[i] = oddFloat(rng), oddFloat(rng), oddFloat(rng)
				s.a[i] = float32(rng.IntN(3)) / 2
			}
			pile = append(pile, int32(k))
		}
		rng.Shuffle(len(pile), func(i, j int) { pile[i], pile[j] = pile[j], pile[i] })
		var a, b stack
		for i := range lanes {
			a.r[i], a.g[i], a.b[i], a.a[i] = oddFloat(rng), oddFloat(rng), rng.Float32(), rng.Float32()
		}
		b = a
		a.blend(strips, pile)
		b.buf = make([][lanes]float32, len(pile))
		b.plain(strips, pile)
		if a.crosses != b.crosses || !sameBits(&a.r, &b.r) || !sameBits(&a.g, &b.g) || !sameBits(&a.b, &b.b) || !sameBits(&a.a, &b.a) {
			t.Fatalf("%d strips: assembly %v %v %b, plain Go %v %v %b", len(pile), a.r, a.a, a.crosses, b.r, b.a, b.crosses)
		}
	}
}

func TestVectorNormalsEqualPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	rng := rand.New(rand.NewPCG(13, 14))
	for round := range 3000 {
		var k roundKernel
		for _, p := range []*float64{&k.c0, &k.c1, &k.c2, &k.b0, &k.b1, &k.k0, &k.k1, &k.sz} {
			*p = rng.NormFloat64()
		}
		k.first, k.sign, k.persp = math.Floor(100*rng.NormFloat64()), float64(1-2*rng.IntN(2)), int64(round&1)
		for c := range 3 {
			k.o0[c], k.o1[c], k.d0[c], k.d1[c] = rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()
		}
		for c := range k.m {
			k.m[c] = float32(rng.NormFloat64())
		}
		p := k
		normalEight(&k)
		p.plain()
		if !sameBits(&k.n, &p.n) || !sameBits(&k.nx, &p.nx) || !sameBits(&k.ny, &p.ny) || !sameBits(&k.nz, &p.nz) {
			t.Fatalf("assembly %v %v, plain Go %v %v", k.n, k.nx, p.n, p.nx)
		}
	}
}

func TestVectorScanEqualsPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	rng := rand.New(rand.NewPCG(15, 16))
	for range 3000 {
		var keys [4 * lanes]uint64
		for i := range keys {
			keys[i] = rng.Uint64()&^0xffffffff | uint64(rng.IntN(2))
		}
		var a, b scan
		scanFour(&a, &keys[0])
		b.plain(keys[:], 4)
		if !sameBits(&a.near, &b.near) || a.slot != b.slot || a.any != b.any || a.same != b.same {
			t.Fatalf("assembly %+v, plain Go %+v", a, b)
		}
	}
}

func TestVectorBytesEqualPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	rng := rand.New(rand.NewPCG(17, 18))
	for range 3000 {
		var c struct{ r, g, b [lanes]float32 }
		for i := range lanes {
			c.r[i], c.g[i], c.b[i] = oddFloat(rng), oddFloat(rng), oddFloat(rng)
		}
		for _, linear := range []bool{false, true} {
			var got [4 * lanes]uint8
			if linear {
				packLinear(&got[0], &c.r, &toSRGB[0])
			} else {
				packNumbers(&got[0], &c.r)
			}
			for i := range lanes {
				want := [4]uint8{encode(c.r[i], linear), encode(c.g[i], linear), encode(c.b[i], linear), 255}
				if [4]uint8(got[4*i:]) != want {
					t.Fatalf("linear %t, %g %g %g: assembly %v, plain Go %v", linear, c.r[i], c.g[i], c.b[i], got[4*i:4*i+4], want)
				}
			}
		}
	}
}

func TestVectorCellsEqualPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	rng := rand.New(rand.NewPCG(19, 20))
	var c cells
	c.ready(400)
	for range 3000 {
		for i := range c.slot {
			c.slot[i], c.part[i] = uint32(rng.IntN(4)), int32(rng.IntN(2))
			c.n[i], c.step[i] = rng.Float32(), rng.Float32()
			c.x[i], c.y[i], c.z[i] = oddFloat(rng), rng.Float32()-0.5, rng.Float32()
		}
		i, j := rng.IntN(390), rng.IntN(390)
		got := c.goOn(i, j)
		for k := range lanes {
			if want := c.goesOn(i+k, j+k); got>>k&1 != 0 != want {
				t.Fatalf("cells %d and %d: assembly %t, plain Go %t", i+k, j+k, !want, want)
			}
		}
	}
}
