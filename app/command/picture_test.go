package command

import (
	"image"
	"image/png"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// figures are drawn by a command line and compared with a picture that has
// been looked at. The first two are the README's.
var figures = []struct{ file, line string }{
	{"assets/readme/eu-1.png", "demo:square-plane --on Cl:sigma --irrep Eu --partner 1"},
	{"assets/readme/eu-2.png", "demo:square-plane --on Cl:sigma --irrep Eu --partner 2"},
	{"assets/readme/sheet.png", "demo:tetrahedron --on Cl:sigma,pi --width 180 --dpi 150"},
	{"testdata/pictures/operations.png", "demo:square-plane --on Cl:sigma --sheet operations --width 120 --dpi 80 --signs printed"},
	{"testdata/pictures/two-triads.png", "demo:water --second plane-xz --dpi 100"},
	{"testdata/pictures/frames.png", "demo:water --on H:s --irrep B2 --sheet frames --second plane-xz --dpi 100 --shape polar"},
	{"testdata/pictures/descent.png", "demo:tetrahedron --on Cl:sigma --sheet descent --subgroup C3v --dpi 100 --signs hatching"},
	{"testdata/pictures/levels.png", "demo:tetrahedron --on Cl:sigma --sheet levels --dpi 100 --look ink --font serif"},
	{"testdata/pictures/elements.png", "demo:water --sheet molecule --slide --dpi 50"},
	{"testdata/pictures/molecule.png", "demo:sandwich-staggered --width 50 --dpi 100"},
	{"testdata/pictures/s-dark.png", "demo:cage --on C:s --irrep T1u --width 50 --dpi 100 --ground dark"},
	{"testdata/pictures/pi-ink.png", "demo:octahedron --on C:pi --irrep T2g --width 50 --dpi 100 --look ink"},
	{"testdata/pictures/d.png", "demo:dimer --on Re:d --irrep A2u --width 50 --dpi 100 --ground white"},
	{"testdata/pictures/f-orthographic.png", "demo:octahedron --on Cr:f --irrep T2u --width 50 --dpi 100 --orthographic --view 30,25"},
	{"testdata/pictures/plane-bare.png", "demo:furan --operation σv'(yz) --width 50 --dpi 100 --no-caption --no-labels --no-axes --ground transparent"},
}

// Pictures are the same to the byte on one kind of machine. Elsewhere
// exponentials and sines end in other bits, which moves a few edges: one pixel
// in two hundred may differ by more than 16 of 255 levels, and the mean
// difference of a channel may be a fifth of a level.
const (
	clearlyOff    = 16
	mostClearly   = 0.005
	mostOnAverage = 0.2
)

func TestFiguresLookAsTheyLooked(t *testing.T) {
	top, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range figures {
		t.Run(filepath.Base(f.file), func(t *testing.T) {
			drawn := filepath.Join(t.TempDir(), "now.png")
			want := filepath.Join(top, f.file)
			if *update {
				drawn = want
			}
			args := append([]string{"figure"}, strings.Fields(f.line)...)
			if status, _, messages := run(t, append(args, "--force", "-o", drawn)...); status != 0 {
				t.Fatal(messages)
			}
			clearly, average := compare(t, readPNG(t, drawn), readPNG(t, want))
			if clearly > mostClearly || average > mostOnAverage {
				t.Errorf("%.2f %% of the pixels differ clearly, a channel by %.3f levels on average; if that is wanted, go test -update and look at it",
					100*clearly, average)
			}
		})
	}
}

func readPNG(t *testing.T, path string) image.Image {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	img, err := png.Decode(f)
	if err != nil {
		t.Fatal(err)
	}
	return img
}

// compare returns the share of pixels of which a channel differs by more than
// clearlyOff, and the mean difference of a channel.
func compare(t *testing.T, a, b image.Image) (clearly, average float64) {
	t.Helper()
	if a.Bounds() != b.Bounds() {
		t.Fatalf("the pictures are %v and %v", a.Bounds(), b.Bounds())
	}
	pixels := 0.0
	for y := a.Bounds().Min.Y; y < a.Bounds().Max.Y; y++ {
		for x := a.Bounds().Min.X; x < a.Bounds().Max.X; x++ {
			largest := 0.0
			r0, g0, b0, a0 := a.At(x, y).RGBA()
			r1, g1, b1, a1 := b.At(x, y).RGBA()
			for _, d := range []int{int(r0) - int(r1), int(g0) - int(g1), int(b0) - int(b1), int(a0) - int(a1)} {
				level := float64(max(d, -d)) / 257
				largest = max(largest, level)
				average += level
			}
			if largest > clearlyOff {
				clearly++
			}
			pixels++
		}
	}
	return clearly / pixels, average / pixels / 4
}

func TestAFigureIsOverwrittenOnlyWithForce(t *testing.T) {
	t.Chdir(t.TempDir())
	figure := []string{"figure", "demo:water", "-o", "a.png", "--dpi", "40"}
	if status, out, messages := run(t, figure...); status != 0 || out != "" || messages != "" {
		t.Fatalf("status %d, output %q, messages %q", status, out, messages)
	}
	before, err := os.ReadFile("a.png")
	if err != nil {
		t.Fatal(err)
	}
	if status, _, messages := run(t, append(figure, "--look", "ink")...); status != notServed || !strings.Contains(messages, "--force") {
		t.Errorf("status %d, messages %q", status, messages)
	}
	if now, _ := os.ReadFile("a.png"); string(now) != string(before) {
		t.Error("the file has changed")
	}
	if status, _, messages := run(t, append(figure, "--look", "ink", "--force")...); status != 0 {
		t.Error(messages)
	}
	if now, _ := os.ReadFile("a.png"); string(now) == string(before) {
		t.Error("the file has not changed")
	}
	if left, _ := filepath.Glob(".*"); len(left) > 0 {
		t.Errorf("left behind: %v", left)
	}
}

func TestWithoutACommandTheDemonstrationIsDrawn(t *testing.T) {
	t.Chdir(t.TempDir())
	// An older figure by the program's own name may be overwritten.
	older := filepath.Join(showcaseFolder, showpieces()[0].file+".png")
	if err := os.Mkdir(showcaseFolder, 0o777); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(older, []byte("older"), 0o666); err != nil {
		t.Fatal(err)
	}
	status, out, messages := run(t)
	if status != 0 || messages != "" {
		t.Fatalf("status %d: %s", status, messages)
	}
	printed := lines(out)[1:]
	if len(printed) < 10 || !slices.Contains(printed, older) {
		t.Errorf("figures %q", printed)
	}
	for _, path := range printed {
		if img := readPNG(t, path); img.Bounds().Dx() < 500 {
			t.Errorf("%s is %d pixels wide", path, img.Bounds().Dx())
		}
	}
}

func TestAPanicIsOneLine(t *testing.T) {
	var s Streams // nil streams make every command panic
	s.Err = &strings.Builder{}
	defer func() {
		if fault := recover(); fault != nil {
			t.Errorf("the panic came through: %v", fault)
		}
	}()
	status := Run(t.Context(), []string{"demo"}, s, "test")
	text := s.Err.(*strings.Builder).String()
	if status != notServed || !strings.HasPrefix(text, "lobewright: internal error: ") || strings.Count(text, "\n") != 1 {
		t.Errorf("status %d, text %q", status, text)
	}
}
