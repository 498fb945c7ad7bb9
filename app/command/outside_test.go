package command

import (
	"bytes"
	"image"
	"image/png"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// Files are given to general readers of other makers. Where one is not
// installed its test is skipped, unless this variable is set.
const needsReaders = "LOBEWRIGHT_NEEDS_READERS"

// reader runs a program of another maker and returns what it prints on both
// streams; that it ends badly fails the test.
func reader(t *testing.T, name string, args ...string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err != nil {
		if os.Getenv(needsReaders) != "" {
			t.Fatalf("%s is not installed", name)
		}
		t.Skipf("%s is not installed", name)
	}
	out, err := exec.Command(path, args...).CombinedOutput()
	if err != nil {
		t.Fatalf("%s %q: %v\n%s", name, args, err, out)
	}
	return string(out)
}

// validateGLB has the validator of the format's own makers look at a file; it
// is a package for node, which "make test" installs into .tools.
func validateGLB(t *testing.T, modules, file string) {
	t.Helper()
	if _, err := os.Stat(filepath.Join(modules, "gltf-validator")); err != nil {
		t.Skip("gltf-validator is not installed: make test does it, where there is npm")
	}
	const script = `require(process.argv[1]).validateBytes(new Uint8Array(require("fs").readFileSync(process.argv[2])))
.then(r => { const i = r.issues; console.log(i.numErrors, i.numWarnings, i.numInfos, i.numHints, JSON.stringify(i.messages.slice(0, 5))) })`
	if got := reader(t, "node", "-e", script, filepath.Join(modules, "gltf-validator"), file); !strings.HasPrefix(got, "0 0 0 0 ") {
		t.Errorf("%s: errors, warnings, infos, hints: %s", file, got)
	}
}

// tools is the folder of node's packages, seen from here before a test changes
// the folder.
func tools(t *testing.T) string {
	t.Helper()
	path, err := filepath.Abs("../../.tools/node_modules")
	if err != nil {
		t.Fatal(err)
	}
	return path
}

func TestMovingPicturesAreReadByOtherPrograms(t *testing.T) {
	modules := tools(t)
	t.Chdir(t.TempDir())
	make := func(file string, more ...string) string {
		command(t, append([]string{"animation", "demo:square-plane", "--on", "Cl:sigma", "--operation", "S4(z)", "--rate", "10", "--size", "201x151", "-o", file}, more...)...)
		return file
	}
	const pictures = "19" // 1.85 s, with a rest between two steps
	t.Run("GIF", func(t *testing.T) {
		out := reader(t, "identify", make("a.gif"))
		if lines := strings.Count(out, "\n"); strings.Count(out, "GIF") < 19 || lines != 19 {
			t.Errorf("%d pictures:\n%s", lines, out)
		}
		if out := reader(t, "ffprobe", "-v", "error", "-count_frames", "-show_entries", "stream=codec_name,width,height,nb_read_frames", "-of", "csv=p=0", "a.gif"); out != "gif,201,151,"+pictures+"\n" {
			t.Errorf("ffprobe: %s", out)
		}
		reader(t, "identify", make("transparent.gif", "--ground", "transparent", "--once"))
	})
	t.Run("APNG", func(t *testing.T) {
		if out := reader(t, "ffprobe", "-v", "error", "-count_frames", "-show_entries", "stream=codec_name,width,height,nb_read_frames", "-of", "csv=p=0", make("a.apng")); out != "apng,201,151,"+pictures+"\n" {
			t.Errorf("ffprobe: %s", out)
		}
		for _, file := range []string{"a.apng", make("transparent.apng", "--ground", "transparent")} {
			if err := os.Rename(file, file+".png"); err != nil {
				t.Fatal(err)
			}
			if out := reader(t, "pngcheck", "-q", file+".png"); strings.Contains(out, "ERROR") {
				t.Error(out)
			}
		}
	})
	t.Run("MP4", func(t *testing.T) {
		if _, err := exec.LookPath("ffmpeg"); err != nil {
			out, status := tryCommand("animation", "demo:water", "--on", "H:s", "--operation", "C2(z)", "-o", "a.mp4")
			if status != 1 || !strings.Contains(out, "ffmpeg, which is not installed here") {
				t.Errorf("exit %d: %s", status, out)
			}
		}
		reader(t, "ffmpeg", "-version")
		if out := reader(t, "ffprobe", "-v", "error", "-show_entries", "stream=codec_name,width,height,pix_fmt,nb_frames", "-of", "csv=p=0", make("a.mp4")); out != "h264,200,150,yuv420p,34\n" {
			t.Errorf("ffprobe: %s", out)
		}
	})
	t.Run("numbered PNG", func(t *testing.T) {
		make("a.png")
		files, err := filepath.Glob("a-*.png")
		if err != nil || len(files) != 19 || files[0] != "a-01.png" || files[18] != "a-19.png" {
			t.Errorf("%v: %s", err, files)
		}
		if out := reader(t, "pngcheck", append([]string{"-q"}, files...)...); strings.Contains(out, "ERROR") {
			t.Error(out)
		}
	})
	t.Run("GLB", func(t *testing.T) {
		make("a.glb")
		command(t, "animation", "demo:dimer", "--on", "Re:d", "--irrep", "A2u", "--operation", "i", "-o", "i.glb")
		command(t, "animation", "demo:water", "--on", "H:s", "--operation", "E", "-o", "e.glb")
		for _, file := range []string{"a.glb", "i.glb", "e.glb"} {
			validateGLB(t, modules, file)
		}
	})
}

func TestSheetsAreReadByOtherPrograms(t *testing.T) {
	t.Chdir(t.TempDir())
	make := func(file string, more ...string) string {
		command(t, append([]string{"figure", "demo:square-plane", "--on", "Cl:sigma", "--dpi", "150", "--width", "120", "-o", file}, more...)...)
		return file
	}
	t.Run("PNG", func(t *testing.T) {
		if out := reader(t, "identify", "-units", "PixelsPerInch", "-format", "%wx? %x %[colorspace]", make("a.png")); !strings.HasPrefix(out, "709x? 150.0") || !strings.HasSuffix(out, " sRGB") {
			t.Error(out)
		}
		if out := reader(t, "pngcheck", "-q", "a.png", make("transparent.png", "--ground", "transparent", "--look", "ink")); strings.Contains(out, "ERROR") {
			t.Error(out)
		}
	})
	t.Run("PDF", func(t *testing.T) {
		make("a.pdf")
		fonts := strings.Split(strings.TrimSpace(reader(t, "pdffonts", "a.pdf")), "\n")
		for _, line := range fonts[2:] {
			if !strings.Contains(line, "DejaVuSans") || !strings.Contains(line, "yes yes yes") { // embedded, a subset, with Unicode
				t.Error(line)
			}
		}
		if len(fonts) < 4 {
			t.Errorf("fonts: %q", fonts)
		}
		if out := reader(t, "pdftotext", "-layout", "a.pdf", "-"); !strings.Contains(out, "b1g") || !strings.Contains(out, "(φ1 − φ3)/√2") {
			t.Errorf("text: %s", out)
		}
		if out := reader(t, "pdfinfo", "a.pdf"); strings.Contains(out, "CreationDate") || !strings.Contains(out, "Page size:       340.157 x") {
			t.Error(out)
		}
		reader(t, "pdfdetach", "-save", "1", "-o", "study.lobewright", "a.pdf")
		if got, want := command(t, "project", "study.lobewright"), command(t, "project", "a.pdf"); got != want {
			t.Errorf("the attached study gives\n%s", got)
		}
		if out := reader(t, "pdftoppm", "-r", "150", "-png", "-singlefile", "a.pdf", "from-pdf"); out != "" {
			t.Errorf("pdftoppm says %s", out)
		}
		alike(t, make("b.png"), "from-pdf.png")
	})
	t.Run("SVG", func(t *testing.T) {
		if out := reader(t, "rsvg-convert", "-d", "150", "-p", "150", "-o", "from-svg.png", make("a.svg")); out != "" {
			t.Errorf("rsvg-convert says %s", out)
		}
		alike(t, make("c.png"), "from-svg.png")
	})
}

// alike compares two pictures of a sheet: another program sets edges a little
// otherwise, but bodies and type lie in the same places.
func alike(t *testing.T, ours, theirs string) {
	t.Helper()
	var pictures [2]image.Image
	for i, file := range []string{ours, theirs} {
		f, err := os.Open(file)
		if err != nil {
			t.Fatal(err)
		}
		pictures[i], err = png.Decode(f)
		f.Close()
		if err != nil {
			t.Fatal(err)
		}
	}
	a, b := pictures[0].Bounds(), pictures[1].Bounds()
	if d := a.Dx() - b.Dx(); d < -1 || d > 1 {
		t.Errorf("%v and %v", a, b)
	}
	// Tones in squares of 8 pixels.
	const side = 8
	mean := func(p image.Image, x, y int) (out [3]float64) {
		for d := range side * side {
			r, g, b, _ := p.At(x+d%side, y+d/side).RGBA()
			for i, v := range []uint32{r, g, b} {
				out[i] += float64(v>>8) / side / side
			}
		}
		return out
	}
	worst, off, all := 0.0, 0, 0
	for y := 0; y+side < min(a.Dy(), b.Dy()); y += side {
		for x := 0; x+side < min(a.Dx(), b.Dx()); x += side {
			m, n := mean(pictures[0], x, y), mean(pictures[1], x, y)
			d := 0.0
			for i := range m {
				d = max(d, math.Abs(m[i]-n[i]))
			}
			worst = max(worst, d)
			if all++; d > 12 {
				off++
			}
		}
	}
	if worst > 60 || off > all/25 {
		t.Errorf("%s: %d of %d squares differ, by up to %.0f of 255", theirs, off, all, worst)
	}
}

// TestEveryMovingPictureIsMadeAnewFromEveryOther: any format carries the whole
// study, so that from any of them any other comes out with the same bytes.
func TestEveryMovingPictureIsMadeAnewFromEveryOther(t *testing.T) {
	file := inFolder(t)
	endings := []string{".gif", ".apng", ".glb"}
	if _, err := exec.LookPath("ffmpeg"); err == nil {
		endings = append(endings, ".mp4")
	}
	for _, e := range endings {
		command(t, "animation", file, "--on", "H:s", "--operation", "C2(z)", "--look", "ink", "--rate", "8", "--size", "160x120", "--once", "-o", "old"+e)
	}
	if err := os.Remove(file); err != nil {
		t.Fatal(err)
	}
	for i, from := range endings {
		to := endings[(i+1)%len(endings)]
		command(t, "animation", "old"+from, "-o", "new"+to)
		before, _ := os.ReadFile("old" + to)
		after, _ := os.ReadFile("new" + to)
		if len(before) == 0 || !bytes.Equal(before, after) {
			t.Errorf("%s made from %s has %d bytes and is not the one with %d", to, from, len(after), len(before))
		}
		if bytes.Contains(before, []byte("somebody")) {
			t.Errorf("%s tells a path", to)
		}
	}
}

func TestAnAnimationThatCannotBeWrittenChangesNothing(t *testing.T) {
	t.Chdir(t.TempDir())
	args := []string{"animation", "demo:water", "--on", "H:s", "--operation", "C2(z)", "--rate", "2", "--size", "80x64", "-o"}
	if err := os.WriteFile("a-3.png", []byte("theirs"), 0o666); err != nil {
		t.Fatal(err)
	}
	out, status := tryCommand(append(args, "a.png")...)
	if status != 1 || out != "lobewright: a-3.png exists already; --force overwrites it\n" {
		t.Errorf("exit %d: %s", status, out)
	}
	if names, _ := filepath.Glob("*"); len(names) != 1 {
		t.Errorf("the folder holds %s", names)
	}
	command(t, append(args, "a.png", "--force")...)
	if names, _ := filepath.Glob("*"); len(names) != 3 {
		t.Errorf("the folder holds %s", names)
	}
}
