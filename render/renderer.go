package render

import (
	"context"
	"image"
	"math"
	"runtime"
	"sync"
	"sync/atomic"
)

// Renderer draws frames one after the other and keeps its buffers, so that a
// steady sequence of frames makes no garbage. The zero Renderer is ready. It
// serves one goroutine at a time; use one Renderer for each.
type Renderer struct {
	frame   frame
	workers []*worker
	polys   polygons
	labels  labels

	ctx     context.Context
	next    atomic.Int64
	stopped atomic.Bool
	wait    sync.WaitGroup
	jobs    int
	job     func(w *worker, i int)
	run     []func()

	vertexJob, binJob, nearJob, tileJob func(w *worker, i int)
}

// frame is what all workers share while one picture is drawn.
type frame struct {
	dst     *image.RGBA
	rect    image.Rectangle // of dst in the whole picture
	w, h    int             // of the whole picture
	camera  Camera
	look    Look
	linear  bool
	pxPerMM float64
	lg      int // log2 of the samples a pixel
	sx      [16]float64
	middles [16][2]float32 // middleOf the masks of up to four samples

	projs    []projection
	parts    []part
	quadrics []quadric
	discs    []disc
	strokes  []stroke
	labels   []label
	dash     []float64
	nVert    int
	verts    []vert
	chunks   []chunk // pieces of vertex lists
	batches  []batch
	items    []item
	apron    int
	tiles    image.Rectangle // in tiles of the whole picture
	heads    []int32         // of the items of a tile, in listed
	listed   []int32

	ground [4]float32 // working colour and opacity of the ground
	light  light
	ink    ink
	shades shades
}

// vert is a vertex on the picture; n is not positive when it lies before the
// near limit or makes no sense. The normal is in camera space, in perspective
// times n, so that mixtures of vertices need no weighing.
type vert struct {
	x, y, n, _ float32
	nx, ny, nz float32
	_          float32
}

type chunk struct {
	part     int32
	from, to int32
	behind   bool // some of it is not in front of the near limit
}

// Draw does what the function Draw does, with the Renderer's buffers.
func (r *Renderer) Draw(ctx context.Context, dst *image.RGBA, scene *Scene, camera Camera, look Look, quality Quality, band Band) error {
	rect, err := checkDraw(dst, scene, camera, band)
	if err != nil {
		return err
	}
	if err := look.check(); err != nil {
		return err
	}
	if rect.Empty() {
		return ctx.Err()
	}
	w, h := band.Width, band.Height
	if w == 0 && h == 0 {
		w, h = rect.Dx(), rect.Dy()
	}
	r.frame.dst = dst
	r.begin(ctx, rect, w, h, camera, look, quality)
	r.frame.apron = r.frame.inkApron()
	r.build(scene)
	r.phase(r.frame.tiles.Dx()*r.frame.tiles.Dy(), r.tileJob)
	r.frame.dst, r.ctx = nil, nil
	return ctx.Err()
}

// Forget gives up the buffers, which are as large as the largest frame needed
// them. The next frame makes its own.
func (r *Renderer) Forget() { *r = Renderer{} }

// begin sets the frame's fixed values.
func (r *Renderer) begin(ctx context.Context, rect image.Rectangle, w, h int, camera Camera, look Look, quality Quality) {
	f := &r.frame
	r.ctx = ctx
	r.stopped.Store(false)
	f.rect, f.w, f.h, f.camera, f.look = rect, w, h, camera, look
	f.linear = look.Style != Plain
	dpi := quality.DPI
	if !(dpi > 0) || math.IsInf(dpi, 0) {
		dpi = 96
	}
	f.pxPerMM = dpi / 25.4
	f.lg = sampleShift(quality.Samples)
	copy(f.sx[:], samplePlaces[f.lg])
	for m := range f.middles {
		f.middles[m][0], f.middles[m][1] = f.middleOf(uint32(m))
	}
	n := quality.Workers
	if n <= 0 {
		n = runtime.GOMAXPROCS(0)
	}
	r.hire(min(n, 256))
	f.setLight()
	f.tiles = image.Rect(rect.Min.X/tileSide, rect.Min.Y/tileSide,
		(rect.Max.X+tileSide-1)/tileSide, (rect.Max.Y+tileSide-1)/tileSide)
}

// build makes the scene ready: parts, projected vertices, lists for tiles.
func (r *Renderer) build(scene *Scene) {
	r.polys.reset()
	r.prepare(scene)
	r.placeLabels(scene)
	r.frame.split()
	r.phase(len(r.frame.chunks), r.vertexJob)
	r.phase(len(r.frame.batches), r.binJob)
	if r.stopped.Load() {
		return // batches that were not binned are of an older frame
	}
	r.frame.list()
	r.shadesOf()
}

// hire makes the number of workers n and the functions that start them.
func (r *Renderer) hire(n int) {
	if r.vertexJob == nil {
		r.vertexJob, r.binJob, r.nearJob, r.tileJob = r.projectChunk, r.binBatch, r.neighbours, r.drawTile
	}
	for len(r.workers) < n {
		w := &worker{r: r}
		r.workers = append(r.workers, w)
		r.run = append(r.run, func() {
			w.work()
			r.wait.Done()
		})
	}
	r.workers = r.workers[:n]
	r.run = r.run[:n]
}

// phase does the jobs 0 to n-1, each by whichever worker is free. Every job
// writes places of its own, so the result does not depend on who does it.
func (r *Renderer) phase(n int, job func(w *worker, i int)) {
	if n == 0 || r.stopped.Load() {
		return
	}
	r.jobs, r.job = n, job
	r.next.Store(0)
	k := min(n, len(r.workers))
	r.wait.Add(k - 1)
	for i := 1; i < k; i++ {
		go r.run[i]()
	}
	r.workers[0].work()
	r.wait.Wait()
}

// worker is one goroutine's share of the work and its buffers.
type worker struct {
	r      *Renderer
	tile   tile
	bin    binScratch
	typist typist
	found  []int32 // balls
}

func (w *worker) work() {
	r := w.r
	for {
		i := int(r.next.Add(1)) - 1
		if i >= r.jobs {
			return
		}
		if i&7 == 0 && r.ctx.Err() != nil {
			r.stopped.Store(true)
		}
		if r.stopped.Load() {
			return
		}
		r.job(w, i)
	}
}

// grow returns a slice of length n, with its old memory where that suffices.
func grow[T any](s []T, n int) []T {
	if cap(s) < n {
		return make([]T, n, n+n/4)
	}
	return s[:n]
}
