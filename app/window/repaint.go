//go:build cgo && !nowindow

package window

import (
	"context"
	"hash/maphash"
	"image"
	"image/draw"
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// A painting remembers what stands in each tile of an image that a board was
// painted on, so that the next board is painted only where it differs: a
// pane that is asked to show what it shows already costs next to nothing, and
// the ledger's two columns that change cost two columns.
type painting struct {
	sums   []uint64 // of the tiles, by rows
	width  int      // of the image in pixels
	height int
	scale  float64
	images []boardImage // that were painted: no other image can be where they are
}

// tileSide is the side of a tile in pixels.
const tileSide = 32

// tileSeed makes sums of this run of the program.
var tileSeed = maphash.MakeSeed()

// paint paints the board on an image of which everything outside of the tiles
// that differ is there already.
func (p *painting) paint(b *board, r *render.Renderer, dst *image.RGBA, scale float64) error {
	w, h := dst.Rect.Dx(), dst.Rect.Dy()
	sums := b.tileSums(w, h, scale)
	var dirty []image.Rectangle
	if p.width == w && p.height == h && p.scale == scale {
		dirty = differing(p.sums, sums, w, h)
	} else {
		dirty = []image.Rectangle{dst.Rect}
	}
	*p = painting{sums: sums, width: w, height: h, scale: scale, images: b.images}
	for _, at := range dirty {
		if err := b.paintPart(r, dst, at, scale); err != nil {
			p.sums = nil
			p.width = 0
			return err
		}
	}
	return nil
}

// differing are the rectangles of an image that hold all tiles whose sums
// differ: stripes across its longer side.
func differing(before, after []uint64, w, h int) []image.Rectangle {
	columns, rows := tilesAlong(w), tilesAlong(h)
	lengthwise := columns >= rows
	stripes, across := columns, rows
	if !lengthwise {
		stripes, across = rows, columns
	}
	var out []image.Rectangle
	var open bool
	for i := range stripes {
		first, last := across, -1
		for j := range across {
			tile := j*columns + i
			if !lengthwise {
				tile = i*columns + j
			}
			if before[tile] != after[tile] {
				first, last = min(first, j), j
			}
		}
		if last < 0 {
			open = false
			continue
		}
		at := image.Rect(i, first, i+1, last+1)
		if !lengthwise {
			at = image.Rect(first, i, last+1, i+1)
		}
		if open {
			out[len(out)-1] = out[len(out)-1].Union(at)
		} else {
			out = append(out, at)
		}
		open = true
	}
	whole := image.Rect(0, 0, w, h)
	for i, r := range out {
		out[i] = image.Rect(r.Min.X*tileSide, r.Min.Y*tileSide, r.Max.X*tileSide, r.Max.Y*tileSide).Intersect(whole)
	}
	return out
}

func tilesAlong(length int) int { return (length + tileSide - 1) / tileSide }

// tileSums are, for each tile, a sum of everything that reaches into it, in
// its order.
func (b *board) tileSums(w, h int, scale float64) []uint64 {
	columns, rows := tilesAlong(w), tilesAlong(h)
	sums := make([]uint64, columns*rows)
	g := b.palette.Panel
	ground := uint64(g.R)<<16 | uint64(g.G)<<8 | uint64(g.B)
	for i := range sums {
		sums[i] = ground
	}
	var hash maphash.Hash
	hash.SetSeed(tileSeed)
	add := func(at box) {
		sum := hash.Sum64()
		hash.Reset()
		r := at.pixels(scale)
		for y := max(0, r.Min.Y/tileSide); y < min(rows, r.Max.Y/tileSide+1); y++ {
			for x := max(0, r.Min.X/tileSide); x < min(columns, r.Max.X/tileSide+1); x++ {
				t := &sums[y*columns+x]
				*t = (*t<<7 | *t>>57) * 0x9E3779B97F4A7C15 // the order counts
				*t ^= sum
			}
		}
	}
	for i, s := range b.scene.Shapes {
		hashShape(&hash, s)
		add(b.boxes[i])
	}
	for _, i := range b.images {
		maphash.WriteComparable(&hash, i)
		add(i.box(scale))
	}
	return sums
}

// hashShape writes all that tells flat shapes of a board apart.
func hashShape(hash *maphash.Hash, s render.Shape) {
	maphash.WriteComparable(hash, s.Material)
	switch g := s.Geometry.(type) {
	case render.Polygon:
		for _, p := range g.Points {
			maphash.WriteComparable(hash, p)
		}
	case render.Text:
		for _, r := range g.Runs {
			maphash.WriteComparable(hash, r)
		}
		g.Runs = nil
		maphash.WriteComparable(hash, [5]float64{g.At[0], g.At[1], g.Size, g.AlignX, g.AlignY})
	}
}

// A box is a rectangle of a board, in the toolkit's units.
type box struct{ left, top, right, bottom float64 }

// pixels are all pixels that a box may touch.
func (b box) pixels(scale float64) image.Rectangle {
	const rim = 1 // of pixels that are covered in part
	return image.Rect(int(math.Floor(b.left*scale))-rim, int(math.Floor(b.top*scale))-rim, int(math.Ceil(b.right*scale))+rim, int(math.Ceil(b.bottom*scale))+rim)
}

// paintPart paints what of the board lies in a part of an image.
func (b *board) paintPart(r *render.Renderer, dst *image.RGBA, at image.Rectangle, scale float64) error {
	part := render.Scene{Fonts: b.scene.Fonts, Shapes: make([]render.Shape, 0, len(b.scene.Shapes))}
	for i, s := range b.scene.Shapes {
		if b.boxes[i].pixels(scale).Overlaps(at) {
			part.Shapes = append(part.Shapes, s)
		}
	}
	within := dst.SubImage(at).(*image.RGBA)
	ground := b.palette.Panel
	camera := render.Camera{Eye: mgl64.Vec3{0, 0, 1}, Up: mgl64.Vec3{0, 1, 0}, Height: 1}
	look := render.PlainLook(render.Color{R: ground.R, G: ground.G, B: ground.B})
	quality := render.Quality{Samples: 4, DPI: boardDPI * scale, Workers: 1}
	whole := render.Band{Width: dst.Rect.Dx(), Height: dst.Rect.Dy()}
	if err := r.Draw(context.Background(), within, &part, camera, look, quality, whole); err != nil {
		return err
	}
	for _, i := range b.images {
		draw.Draw(within, i.img.Bounds().Add(i.corner(scale)), i.img, image.Point{}, draw.Src)
	}
	return nil
}
