package export

import (
	"cmp"
	"image"
	"math"
	"slices"
)

// A palette is up to 255 colours that serve all pictures of a film, and how
// pixels are written with them. Between two colours a pixel takes the one or
// the other by a fixed pattern, so that slow changes of tone show no steps,
// what stands still looks the same in every picture, and a flat colour that is
// in the palette stays flat.
type palette struct {
	colours [][3]uint8
	points  []oklab
	// cells tells for each cell of the colour cube which of mixes it is, from
	// 1; 0 where that is not yet known.
	cells []int32
	mixes [][levels]uint8
}

// levels is how many places the pattern has.
const levels = 16

// pattern is the ordered pattern of B. E. Bayer (IEEE Int. Conf. on
// Communications 1973, 26-11; from memory).
var pattern = [4][4]uint8{{0, 8, 2, 10}, {12, 4, 14, 6}, {3, 11, 1, 9}, {15, 7, 13, 5}}

// An oklab is a colour in coordinates in which equal distances look about equal:
// lightness, green to red, blue to yellow (B. Ottosson, A perceptual color
// space for image processing, 2020; numbers from memory, held by a test).
type oklab [3]float32

func oklabOf(r, g, b uint8) oklab {
	lr, lg, lb := linear[r], linear[g], linear[b]
	l := math.Cbrt(0.4122214708*lr + 0.5363325363*lg + 0.0514459929*lb)
	m := math.Cbrt(0.2119034982*lr + 0.6806995451*lg + 0.1073969566*lb)
	s := math.Cbrt(0.0883024619*lr + 0.2817188376*lg + 0.6299787005*lb)
	return oklab{
		float32(0.2104542553*l + 0.7936177850*m - 0.0040720468*s),
		float32(1.9779984951*l - 2.4285922050*m + 0.4505937099*s),
		float32(0.0259040371*l + 0.7827717662*m - 0.8086757660*s),
	}
}

// srgb is the colour in bytes.
func (p oklab) srgb() [3]uint8 {
	cube := func(x float64) float64 { return x * x * x }
	lightness, a, b := float64(p[0]), float64(p[1]), float64(p[2])
	l := cube(lightness + 0.3963377774*a + 0.2158037573*b)
	m := cube(lightness - 0.1055613458*a - 0.0638541728*b)
	s := cube(lightness - 0.0894841775*a - 1.2914855480*b)
	encode := func(x float64) uint8 {
		if x <= 0.0031308 {
			x *= 12.92
		} else {
			x = 1.055*math.Pow(x, 1/2.4) - 0.055
		}
		return uint8(min(255, max(0, 255*x)) + 0.5)
	}
	return [3]uint8{
		encode(4.0767416621*l - 3.3077115913*m + 0.2309699292*s),
		encode(-1.2684380046*l + 2.6097574011*m - 0.3413193965*s),
		encode(-0.0041960863*l - 0.7034186147*m + 1.7076147010*s),
	}
}

// linear is the light of the 256 sRGB numbers (IEC 61966-2-1).
var linear = func() (t [256]float64) {
	for i := range t {
		v := float64(i) / 255
		if v <= 0.04045 {
			t[i] = v / 12.92
		} else {
			t[i] = math.Pow((v+0.055)/1.055, 2.4)
		}
	}
	return t
}()

func (p oklab) square(q oklab) float32 {
	a, b, c := p[0]-q[0], p[1]-q[1], p[2]-q[2]
	return a*a + b*b + c*c
}

// A cell of the colour cube is two steps wide, less than the eye tells apart.
const cellBits = 7

func cellOf(r, g, b uint8) int {
	const drop = 8 - cellBits
	return int(r>>drop)<<(2*cellBits) | int(g>>drop)<<cellBits | int(b>>drop)
}

func cellMiddle(cell int) oklab {
	const drop, mask = 8 - cellBits, 1<<cellBits - 1
	byteOf := func(v int) uint8 { return uint8(v<<drop | 1<<drop>>1) }
	return oklabOf(byteOf(cell>>(2*cellBits)&mask), byteOf(cell>>cellBits&mask), byteOf(cell&mask))
}

// A census counts the colours of pictures.
type census struct {
	cells []uint32
	// flats counts pixels in runs of one colour, by colour.
	flats map[[3]uint8]int
	total int
}

func newCensus() *census {
	return &census{cells: make([]uint32, 1<<(3*cellBits)), flats: map[[3]uint8]int{}}
}

// add counts the opaque pixels of a picture.
func (c *census) add(img *image.RGBA) {
	const leastRun = 16 // pixels of one colour side by side
	for y := range img.Rect.Dy() {
		row := img.Pix[y*img.Stride:][:4*img.Rect.Dx()]
		run := 0
		for i := 0; i < len(row); i += 4 {
			if row[i+3] < opaqueFrom {
				run = 0
				continue
			}
			c.total++
			c.cells[cellOf(row[i], row[i+1], row[i+2])]++
			if i > 0 && *(*[4]byte)(row[i-4:]) == *(*[4]byte)(row[i:]) {
				run++
			} else {
				run = 0
			}
			if run >= leastRun {
				c.flats[[3]uint8{row[i], row[i+1], row[i+2]}]++
			}
		}
	}
}

// opaqueFrom is the opacity from which a pixel is there, where a format knows
// no others.
const opaqueFrom = 128

// palette chooses up to a number of colours: those of flat areas as they are,
// the others in the middles of groups of like colours (k-means, S. P. Lloyd,
// IEEE Trans. Inf. Theory 28, 129 (1982), begun from boxes that are cut where
// colours spread most, P. Heckbert, Comput. Graph. 16(3), 297 (1982)).
func (c *census) palette(most int) *palette {
	p := &palette{cells: make([]int32, 1<<(3*cellBits))}
	fixed := c.flatColours(most / 4)
	p.colours = append(p.colours, fixed...)
	var points []weighted
	for cell, n := range c.cells {
		if n > 0 {
			// Large areas count more, but small ones shall be even too.
			points = append(points, weighted{cellMiddle(cell), float32(math.Sqrt(float64(n)))})
		}
	}
	if len(points) == 0 {
		points = []weighted{{oklab{}, 1}}
	}
	centres := make([]oklab, 0, most)
	for _, f := range fixed {
		centres = append(centres, oklabOf(f[0], f[1], f[2]))
	}
	// What lies at a flat colour is served.
	const served = 0.004
	points = slices.DeleteFunc(points, func(q weighted) bool {
		return len(centres) > 0 && nearestTo(centres, q.oklab) < served*served
	})
	centres = append(centres, boxMeans(points, most-len(centres))...)
	lloyd(points, centres, len(fixed))
	for _, q := range centres[len(fixed):] {
		if rgb := q.srgb(); !slices.Contains(p.colours, rgb) {
			p.colours = append(p.colours, rgb)
		}
	}
	for _, rgb := range p.colours {
		p.points = append(p.points, oklabOf(rgb[0], rgb[1], rgb[2]))
	}
	return p
}

// flatColours are the colours of large flat areas, the largest first.
func (c *census) flatColours(most int) [][3]uint8 {
	const share = 5e-4 // of all pixels
	var out [][3]uint8
	for rgb, n := range c.flats {
		if float64(n) > share*float64(c.total) {
			out = append(out, rgb)
		}
	}
	slices.SortFunc(out, func(a, b [3]uint8) int {
		return cmp.Or(cmp.Compare(c.flats[b], c.flats[a]), slices.Compare(a[:], b[:]))
	})
	return out[:min(len(out), most)]
}

// A weighted is a colour with the weight that it has.
type weighted struct {
	oklab
	weight float32
}

func nearestTo(centres []oklab, p oklab) float32 {
	least := float32(math.Inf(1))
	for _, c := range centres {
		least = min(least, c.square(p))
	}
	return least
}

// A box is a group of colours; its spread is the weighted sum of squares about
// the mean along the coordinate where that is largest.
type box struct {
	points []weighted
	mean   oklab
	spread float64
	axis   int
}

func boxOf(points []weighted) box {
	var sum, squares [3]float64
	weight := 0.0
	for _, p := range points {
		w := float64(p.weight)
		weight += w
		for i, x := range p.oklab {
			sum[i] += w * float64(x)
			squares[i] += w * float64(x) * float64(x)
		}
	}
	b := box{points: points}
	for i := range sum {
		b.mean[i] = float32(sum[i] / weight)
		if s := squares[i] - sum[i]*sum[i]/weight; s > b.spread {
			b.spread, b.axis = s, i
		}
	}
	return b
}

// boxMeans cuts the colours into boxes, always the one with the largest spread
// at its mean, and returns the means.
func boxMeans(points []weighted, most int) []oklab {
	if len(points) == 0 || most < 1 {
		return nil
	}
	boxes := []box{boxOf(slices.Clone(points))}
	for len(boxes) < most {
		widest := 0
		for i, b := range boxes {
			if b.spread > boxes[widest].spread {
				widest = i
			}
		}
		b := boxes[widest]
		cut := 0
		for i, p := range b.points {
			if p.oklab[b.axis] < b.mean[b.axis] {
				b.points[i], b.points[cut] = b.points[cut], b.points[i]
				cut++
			}
		}
		if cut == 0 || cut == len(b.points) {
			break
		}
		boxes[widest] = boxOf(b.points[:cut])
		boxes = append(boxes, boxOf(b.points[cut:]))
	}
	out := make([]oklab, len(boxes))
	for i, b := range boxes {
		out[i] = b.mean
	}
	return out
}

// lloyd moves every centre but the first ones to the middle of the colours that
// are nearest to it, a few times.
func lloyd(points []weighted, centres []oklab, fixed int) {
	const rounds = 5
	for range rounds {
		sums := make([][4]float64, len(centres))
		for _, p := range points {
			s := &sums[nearestIndex(centres, p.oklab)]
			w := float64(p.weight)
			for i, x := range p.oklab {
				s[i] += w * float64(x)
			}
			s[3] += w
		}
		for k := fixed; k < len(centres); k++ {
			if w := sums[k][3]; w > 0 {
				centres[k] = oklab{float32(sums[k][0] / w), float32(sums[k][1] / w), float32(sums[k][2] / w)}
			}
		}
	}
}

func nearestIndex(centres []oklab, p oklab) int {
	best, least := 0, float32(math.Inf(1))
	for k, c := range centres {
		if d := c.square(p); d < least {
			best, least = k, d
		}
	}
	return best
}

// index writes a picture with the palette; transparent is the index of pixels
// that are not there.
func (p *palette) index(dst []uint8, img *image.RGBA, transparent uint8) {
	w := img.Rect.Dx()
	for y := range img.Rect.Dy() {
		row, out := img.Pix[y*img.Stride:][:4*w], dst[y*w:][:w]
		thresholds := pattern[y&3]
		for x := range out {
			i := 4 * x
			if row[i+3] < opaqueFrom {
				out[x] = transparent
				continue
			}
			cell := cellOf(row[i], row[i+1], row[i+2])
			mix := p.cells[cell]
			if mix == 0 {
				mix = p.learn(cell)
			}
			out[x] = p.mixes[mix-1][thresholds[x&3]]
		}
	}
}

// learn finds the mix of colours for a cell: each place of the pattern takes
// the colour that best makes up for the error so far (after T. Knoll, US Patent
// 6,606,166, 2003, expired). They are sorted by lightness, so that cells side by
// side differ in few places.
func (p *palette) learn(cell int) int32 {
	const (
		few  = 12    // colours that are tried
		flat = 0.004 // so near a colour is taken as it is
	)
	want := cellMiddle(cell)
	near := make([]int, len(p.points))
	for i := range near {
		near[i] = i
	}
	slices.SortFunc(near, func(a, b int) int {
		return cmp.Or(cmp.Compare(p.points[a].square(want), p.points[b].square(want)), cmp.Compare(a, b))
	})
	near = near[:min(few, len(near))]
	var mix [levels]uint8
	var owed oklab
	for k := range mix {
		goal := want
		for i := range goal {
			goal[i] += owed[i]
		}
		best, least := near[0], float32(math.Inf(1))
		for _, c := range near {
			if d := p.points[c].square(goal); d < least {
				best, least = c, d
			}
		}
		if p.points[near[0]].square(want) < flat*flat {
			best = near[0]
		}
		mix[k] = uint8(best)
		for i := range owed {
			owed[i] += want[i] - p.points[best][i]
		}
	}
	slices.SortFunc(mix[:], func(a, b uint8) int {
		return cmp.Or(cmp.Compare(p.points[a][0], p.points[b][0]), cmp.Compare(a, b))
	})
	p.mixes = append(p.mixes, mix)
	p.cells[cell] = int32(len(p.mixes))
	return p.cells[cell]
}
