package export

import (
	"bytes"
	"context"
	"encoding/xml"
	"errors"
	"image/color"
	"image/png"
	"io"
	"strings"
	"testing"

	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"

	"lobewright/app/sheet"
	"lobewright/assets"
	"lobewright/render"
)

// someSheet has one item of every kind.
func someSheet() *sheet.Sheet {
	white, black, red := color.NRGBA{255, 255, 255, 255}, color.NRGBA{0, 0, 0, 255}, color.NRGBA{255, 0, 0, 128}
	ball := &sheet.Panel{Rect: sheet.Rect{X: 10, Y: 5, W: 20, H: 20}, Name: "a ball", Look: render.LitLook(render.Color{R: 255, G: 255, B: 255}),
		Camera: render.Camera{Eye: render.Vec3{0, 0, 10}, Up: render.Vec3{0, 1, 0}, Height: 4}}
	ball.Scene.Add(render.Sphere{Radius: 1}, render.Solid(render.Color{R: 0, G: 90, B: 200}))
	return &sheet.Sheet{Width: 60, Height: 40, Ground: white, Title: "a <sheet> & more → φ", Items: []sheet.Item{
		ball,
		sheet.Line{Points: [][2]float64{{35, 5}, {55, 5}}, Width: 1, Color: black},
		sheet.Line{Points: [][2]float64{{35, 8}, {55, 8}, {55, 9}}, Width: 0.5, Dash: []float64{4, 4}, Color: black},
		sheet.Line{Points: [][2]float64{{2, 2}, {4, 2}, {4, 4}}, Closed: true, Width: 0.3, Color: red},
		sheet.Polygon{Points: [][2]float64{{35, 12}, {45, 12}, {45, 22}}, Color: red},
		sheet.Disc{X: 50, Y: 18, Radius: 3, Color: red, Edge: black, EdgeWidth: 0.5},
		sheet.Text{X: 5, Y: 35, Runs: []render.Run{{Text: "a"}, {Text: "1g", Script: render.Sub}, {Text: " ½ √3 φ′", Italic: true}, {Text: " é", Bold: true}},
			Size: 12, Color: black, Halo: 0.5, HaloColor: white},
	}}
}

func sheetFile(t testing.TB, s *sheet.Sheet, ending string, study []byte) []byte {
	t.Helper()
	var out bytes.Buffer
	if err := WriteSheet(context.Background(), &out, s, "a"+ending, 100, study); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

func TestAnSVGIsWellFormedAndHasEveryItem(t *testing.T) {
	_, data := someStudy(t)
	d := xml.NewDecoder(bytes.NewReader(sheetFile(t, someSheet(), ".svg", data)))
	counts, title := map[string]int{}, ""
	for {
		token, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Fatal(err)
		}
		if e, ok := token.(xml.StartElement); ok {
			counts[e.Name.Local]++
			if e.Name.Local == "title" && title == "" {
				text, _ := d.Token()
				title = string(text.(xml.CharData))
			}
		}
	}
	// Three lines, a polygon, a text with its halo.
	if counts["image"] != 1 || counts["path"] != 6 || counts["circle"] != 1 || counts["study"] != 1 || counts["rect"] != 1 {
		t.Errorf("%v", counts)
	}
	if title != someSheet().Title {
		t.Errorf("the title is %q", title)
	}
}

func TestASheetWithoutGroundIsTransparent(t *testing.T) {
	s := someSheet()
	s.Ground = color.NRGBA{}
	s.Items[0].(*sheet.Panel).Look.GroundOpacity = 0
	img, err := png.Decode(bytes.NewReader(sheetFile(t, s, ".png", nil)))
	if err != nil {
		t.Fatal(err)
	}
	if _, _, _, a := img.At(1, 1).RGBA(); a != 0 {
		t.Errorf("the corner has the opacity %d", a)
	}
	if _, _, _, a := img.At(79, 59).RGBA(); a != 0xffff {
		t.Errorf("the ball has the opacity %d", a)
	}
	if pdf := sheetFile(t, s, ".pdf", nil); !bytes.Contains(pdf, []byte("/SMask")) {
		t.Error("the PDF's picture has no opacity")
	}
	if svg := string(sheetFile(t, s, ".svg", nil)); strings.Contains(svg, "<rect") {
		t.Error("the SVG has a ground")
	}
}

func TestAStoppedSheetIsNotWritten(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	full := errors.New("no room")
	for _, ending := range SheetEndings {
		if err := WriteSheet(ctx, io.Discard, someSheet(), ending, 100, nil); !errors.Is(err, context.Canceled) {
			t.Errorf("%s: %v", ending, err)
		}
		if err := WriteSheet(context.Background(), failing{full}, someSheet(), ending, 100, nil); !errors.Is(err, full) {
			t.Errorf("%s: %v", ending, err)
		}
	}
	if err := WriteSheet(context.Background(), io.Discard, someSheet(), ".bmp", 100, nil); err == nil {
		t.Error("no error for another format")
	}
}

// TestASubsetOfATypefaceHasItsSigns reads a subset with a reader of its own
// makers; é is put together from two others.
func TestASubsetOfATypefaceHasItsSigns(t *testing.T) {
	for _, data := range [][]byte{assets.Font(assets.Regular), assets.Serif(assets.BoldOblique)} {
		whole, err := sfnt.Parse(data)
		if err != nil {
			t.Fatal(err)
		}
		var b sfnt.Buffer
		var signs []int
		for _, r := range "aφ√é½" {
			g, err := whole.GlyphIndex(&b, r)
			if err != nil || g == 0 {
				t.Fatalf("%q: %v", r, err)
			}
			signs = append(signs, int(g))
		}
		small, _ := subset(data, signs)
		if len(small) > len(data)/3 {
			t.Errorf("%d bytes of %d stay", len(small), len(data))
		}
		if total := sum(small); total != 0xb1b0afba {
			t.Errorf("the sum of the font is %x", total)
		}
		font2, err := sfnt.Parse(withNames(small, data))
		if err != nil {
			t.Fatal(err)
		}
		upm := fixed.Int26_6(whole.UnitsPerEm()) << 6
		for _, g := range signs {
			want, err := whole.LoadGlyph(&b, sfnt.GlyphIndex(g), upm, nil)
			if err != nil {
				t.Fatal(err)
			}
			want = append(sfnt.Segments(nil), want...)
			got, err := font2.LoadGlyph(&b, sfnt.GlyphIndex(g), upm, nil)
			if err != nil {
				t.Fatal(err)
			}
			if len(got) != len(want) || len(got) == 0 {
				t.Fatalf("sign %d has %d pieces instead of %d", g, len(got), len(want))
			}
			for i := range got {
				if got[i] != want[i] {
					t.Errorf("sign %d, piece %d: %v instead of %v", g, i, got[i], want[i])
				}
			}
			a, _ := whole.GlyphAdvance(&b, sfnt.GlyphIndex(g), upm, font.HintingNone)
			c, _ := font2.GlyphAdvance(&b, sfnt.GlyphIndex(g), upm, font.HintingNone)
			if a != c {
				t.Errorf("sign %d is %v wide instead of %v", g, c, a)
			}
		}
	}
}

// withNames adds the tables that a PDF does without and the reader wants.
func withNames(small, whole []byte) []byte {
	tables := map[string][]byte{}
	for _, font := range [][]byte{whole, small} {
		n := int(font[4])<<8 | int(font[5])
		for i := range n {
			e := font[12+16*i:]
			at := func(k int) int { return int(e[k])<<24 | int(e[k+1])<<16 | int(e[k+2])<<8 | int(e[k+3]) }
			switch name := string(e[:4]); name {
			case "GPOS", "GSUB", "GDEF", "kern":
			default:
				tables[name] = font[at(8) : at(8)+at(12)]
			}
		}
	}
	return joined(tables)
}
