package picture

import (
	"context"
	"image"
	"math"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

func movieOf(t *testing.T, s study.Study) (*Movie, *work.Play) {
	t.Helper()
	p, err := work.New(structure.Inputs{Demo: assets.Demos()}).Play(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	m, err := NewMovie(p, s)
	if err != nil {
		t.Fatal(err)
	}
	return m, p
}

func functionOn(structure, basis, operation string) study.Study {
	return study.Study{Structure: structure, Basis: []string{basis}, Operation: operation, Projection: study.Projection{Function: 1}}
}

func TestStillsFollowTheWindowsPace(t *testing.T) {
	for _, c := range []struct {
		operation string
		seconds   float64
		steps     int
	}{{"C4(z)", 1.2, 1}, {"S4(z)", 1.85, 2}, {"E", 0.8, 0}} {
		m, p := movieOf(t, functionOn("demo:square-plane", "Cl:sigma", c.operation))
		total := 0.0
		for k, s := range m.Stills {
			total += s.Seconds
			if k > 0 && s.Moment <= m.Stills[k-1].Moment {
				t.Errorf("%s: moment %d is %g after %g", c.operation, k, s.Moment, m.Stills[k-1].Moment)
			}
		}
		if want := c.seconds + restBefore + restAfter; math.Abs(total-want) > 0.021 {
			t.Errorf("%s takes %g s instead of %g", c.operation, total, want)
		}
		if p.Operation.Steps() != c.steps {
			t.Errorf("%s has %d steps", c.operation, p.Operation.Steps())
		}
		if last := m.Stills[len(m.Stills)-1].Moment; c.steps > 0 && last != 1 || m.Stills[0].Moment != 0 {
			t.Errorf("%s goes from %g to %g", c.operation, m.Stills[0].Moment, last)
		}
	}
	s := functionOn("demo:square-plane", "Cl:sigma", "C4(z)")
	s.Animation = study.Animation{Seconds: 2.4, Rate: 25}
	if m, _ := movieOf(t, s); len(m.Stills) != 61 || m.Width != DefaultMovieWidth || m.Height != DefaultMovieHeight {
		t.Errorf("%d pictures of %d × %d", len(m.Stills), m.Width, m.Height)
	}
}

func TestCaptionsSayWhatAnOperationDoes(t *testing.T) {
	orbital := study.Study{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Operation: "C4(z)", Projection: study.Projection{Irrep: "Eu", Partner: 1}}
	single := orbital
	single.Projection = study.Projection{Irrep: "B1g"}
	linear := functionOn("demo:rod", "N:p", "C(φ)")
	linear.Angle = 30
	for want, s := range map[string]study.Study{
		"C₄(z):  φ1 (σ on Cl2) → φ2 (σ on Cl3)": functionOn("demo:square-plane", "Cl:sigma", "C4(z)"),
		"i:  φ1 (pz on C2) → −φ8 (pz on C9)":    functionOn("demo:sandwich-staggered", "C:pz", "i"),
		"C₄(z):  eu(1) → eu(2)":                 orbital,
		"C₄(z):  b1g → −b1g":                    single,
	} {
		_, p := movieOf(t, s)
		var all []string
		for _, text := range captionsOf(p, assets.TextsIn(assets.English)) {
			all = append(all, text.String())
		}
		if plain(all[0]) != plain(want) {
			t.Errorf("%q, want %q", all, want)
		}
	}
	_, p := movieOf(t, linear)
	if first := captionsOf(p, assets.TextsIn(assets.English))[0].String(); !strings.Contains(first, "30") {
		t.Error(first)
	}
	_, p = movieOf(t, functionOn("demo:square-plane", "Cl:sigma", "C4(z)"))
	if got, want := captionsOf(p, assets.TextsIn(assets.German))[0].String(), "C₄(z):  φ1 (σ an Cl2) → φ2 (σ an Cl3)"; plain(got) != plain(want) {
		t.Errorf("%q, want %q", got, want)
	}
}

// plain takes lowered figures for figures.
func plain(s string) string {
	return strings.Map(func(r rune) rune {
		if r >= '₀' && r <= '₉' {
			return r - '₀' + '0'
		}
		return r
	}, s)
}

// pictureOf draws a still.
func pictureOf(t *testing.T, m *Movie, k int) *image.RGBA {
	t.Helper()
	f, err := m.Frame(k)
	if err != nil {
		t.Fatal(err)
	}
	img := image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
	f.Quality.Samples = 2
	if err := render.Draw(context.Background(), img, &f.Scene, f.Camera, f.Look, f.Quality, render.Band{}); err != nil {
		t.Fatal(err)
	}
	return img
}

// TestNothingFlashes holds the rule of WCAG 2.2 (success criterion 2.3.1): not
// more than three flashes in a second, where a flash is a pair of opposing
// changes of lightness of a tenth in a quarter of the picture. Hardly a tenth of
// the picture changes here from one still to the next, and the jump at the end
// comes after at least a second and a half.
func TestNothingFlashes(t *testing.T) {
	for _, look := range []study.Look{{}, {Style: "ink", Ground: "dark"}} {
		s := functionOn("demo:square-plane", "Cl:sigma", "S4(z)")
		s.Look = look
		s.Animation = study.Animation{Width: 160, Height: 120, Rate: 10}
		m, _ := movieOf(t, s)
		total := 0.0
		var before *image.RGBA
		for k := range m.Stills {
			total += m.Stills[k].Seconds
			now := pictureOf(t, m, k)
			if before != nil {
				changed := 0
				for i := 0; i < len(now.Pix); i += 4 {
					if d := lightness(now.Pix[i:]) - lightness(before.Pix[i:]); math.Abs(d) > 0.1 {
						changed++
					}
				}
				if share := float64(changed) / float64(len(now.Pix)/4); share > 0.15 {
					t.Errorf("%v: %.0f %% of the picture change their lightness with still %d", look, 100*share, k)
				}
			}
			before = now
		}
		if total < 1.5 {
			t.Errorf("the movie begins again after %g s", total)
		}
	}
}

func lightness(p []uint8) float64 {
	return (0.2126*float64(p[0]) + 0.7152*float64(p[1]) + 0.0722*float64(p[2])) / 255
}

// TestNothingIsCutOffInAMovie: the rim of every still is empty ground.
func TestNothingIsCutOffInAMovie(t *testing.T) {
	for _, s := range []study.Study{
		functionOn("demo:octahedron", "C:pi", "S4(z)"), functionOn("demo:water", "H:s", "C2(z)"),
		functionOn("demo:sandwich-staggered", "C:pz", "i"), functionOn("demo:dimer", "Re:d", "C4(z)"),
	} {
		for _, size := range [][2]int{{200, 150}, {150, 200}, {300, 100}} {
			s.Animation = study.Animation{Width: size[0], Height: size[1], Rate: 2}
			m, _ := movieOf(t, s)
			for k := range m.Stills {
				img := pictureOf(t, m, k)
				ground := img.RGBAAt(0, 0)
				for x := range size[0] {
					for y := range size[1] {
						if (x == 0 || y == 0 || x == size[0]-1 || y == size[1]-1) && img.RGBAAt(x, y) != ground {
							t.Fatalf("%s, %v, still %d: there is something at %d, %d", s.Structure, size, k, x, y)
						}
					}
				}
			}
		}
	}
}

func TestAMovieThatIsTooSmallIsRefused(t *testing.T) {
	s := functionOn("demo:water", "H:s", "C2(z)")
	p, err := work.New(structure.Inputs{Demo: assets.Demos()}).Play(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	s.Animation.Width = 20
	if _, err := NewMovie(p, s); err == nil || !strings.Contains(err.Error(), "20 × 15 pixels") {
		t.Error(err)
	}
}

func TestAPartnerOfALinearMoleculeHasACaption(t *testing.T) {
	w := work.New(structure.Inputs{Demo: assets.Demos()})
	for _, operation := range []string{"C(φ)", "σv(φ)"} {
		s := study.Study{Structure: "demo:cyanide", Basis: []string{"N:p"}, Operation: operation, Angle: 90,
			Projection: study.Projection{Irrep: "Π", Copy: 1, Partner: 1, Subject: study.SubjectOrbital}}
		p, err := w.Play(context.Background(), s)
		if err != nil {
			t.Fatal(err)
		}
		if text := orbitalBecomes(p).String(); !strings.HasPrefix(text, "π(1) → ") {
			t.Errorf("%s: %s", operation, text)
		}
	}
}
