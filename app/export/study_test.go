package export

import (
	"bytes"
	"context"
	"encoding/binary"
	"errors"
	"fmt"
	"image"
	"strings"
	"testing"

	"github.com/qmuntal/gltf"

	"lobewright/app/study"
)

// someStudy has text of all kinds in it.
func someStudy(t testing.TB) (study.Study, []byte) {
	t.Helper()
	s, err := study.Study{}.WithCoordinates("wäter ]]> & <b>.xyz", "3\nφ₁ → 水 \U0001F4A7 --> ]]> \\u0041\nO 0 0 0.1\nH 0 .7 -.4\nH 0 -.7 -.4\n")
	if err != nil {
		t.Fatal(err)
	}
	s.Basis, s.Operation = []string{"H:s", "O:p"}, "C2(z)"
	data, err := study.Encode(s)
	if err != nil {
		t.Fatal(err)
	}
	return s, data
}

// carrying are small files of all formats with a study in them, or with none
// where the study is empty.
func carrying(t testing.TB, data []byte) map[string][]byte {
	t.Helper()
	ctx := context.Background()
	out := map[string][]byte{}
	encode := func(name string, write func(b *bytes.Buffer) error) {
		var b bytes.Buffer
		if err := write(&b); err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		out[name] = b.Bytes()
	}
	img := image.NewRGBA(image.Rect(0, 0, 3, 2))
	encode("a.png", func(b *bytes.Buffer) error { return EncodePNG(b, img, 300, data) })
	encode("a.apng", func(b *bytes.Buffer) error { return ball(9, 6, 2, true).EncodeAPNG(ctx, b, data) })
	encode("a.gif", func(b *bytes.Buffer) error { return ball(9, 6, 2, true).EncodeGIF(ctx, b, data) })
	encode("a.glb", func(b *bytes.Buffer) error {
		d := gltf.NewDocument()
		setExtras(d, data)
		return gltf.NewEncoder(b).Encode(d)
	})
	for _, name := range SheetEndings[1:] {
		encode("a"+name, func(b *bytes.Buffer) error { return WriteSheet(ctx, b, someSheet(), name, 72, data) })
	}
	encode("a.mp4", func(b *bytes.Buffer) error {
		b.Write([]byte{0, 0, 0, 16, 'f', 't', 'y', 'p', 'i', 's', 'o', 'm', 0, 0, 0, 0})
		b.Write([]byte{0, 0, 0, 1, 'm', 'd', 'a', 't', 0, 0, 0, 0, 0, 0, 0, 17, 7})
		if len(data) > 0 {
			b.Write(uuidBox(data))
		}
		b.Write([]byte{0, 0, 0, 0, 'f', 'r', 'e', 'e', 1, 2, 3})
		return nil
	})
	return out
}

func read(data []byte, name string) (study.Study, error) {
	return ReadStudy(bytes.NewReader(data), int64(len(data)), name)
}

func TestEveryFormatCarriesTheStudy(t *testing.T) {
	want, data := someStudy(t)
	for name, file := range carrying(t, data) {
		s, err := read(file, name)
		if err != nil {
			t.Errorf("%s: %v", name, err)
		} else if !s.Equal(want) {
			t.Errorf("%s: %+v", name, s)
		}
		// The format is told by its content, whatever the name says.
		if s, err := read(file, "renamed"); err != nil || !s.Equal(want) {
			t.Errorf("%s, renamed: %v", name, err)
		}
		if !CarriesStudy("folder/" + strings.ToUpper(name)) {
			t.Errorf("%s is not taken for a figure", name)
		}
	}
}

func TestFiguresWithoutAStudySaySo(t *testing.T) {
	for name, file := range carrying(t, nil) {
		if _, err := read(file, name); !errors.Is(err, ErrNoStudy) || !strings.HasPrefix(err.Error(), name) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := read([]byte("3\nwater\nO 0 0 0\n"), "a.xyz"); err == nil || errors.Is(err, ErrNoStudy) {
		t.Error(err)
	}
}

func TestNewerStudiesAreRefusedInOneClearLine(t *testing.T) {
	newer := fmt.Appendf(nil, "{\n  \"version\": %d,\n  \"structure\": \"demo:water\"\n}\n", study.Version+1)
	for name, file := range carrying(t, newer) {
		_, err := read(file, name)
		if err == nil || !strings.Contains(err.Error(), "the study in "+name) ||
			!strings.Contains(err.Error(), "is newer than this program") || strings.Contains(err.Error(), "\n") {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestDamagedFiguresDoNoHarm cuts, changes and swells files of all formats.
func TestDamagedFiguresDoNoHarm(t *testing.T) {
	_, data := someStudy(t)
	for name, file := range carrying(t, data) {
		// Every place of a short file, and about a thousand of a longer one.
		for n := 0; n < len(file); n += 1 + len(file)/1000 {
			check(t, name, file[:n])
			changed := bytes.Clone(file)
			changed[n] ^= 0xff
			check(t, name, changed)
		}
	}
}

// check reads a hostile file: it must end, and say in one line what is wrong.
func check(t *testing.T, name string, file []byte) {
	t.Helper()
	s, err := read(file, name)
	if err == nil {
		if err := s.Check(); err != nil {
			t.Errorf("%s: a study is read that is out of range: %v", name, err)
		}
		return
	}
	if text := err.Error(); text == "" || strings.ContainsAny(text, "\n\r") {
		t.Errorf("%s: %q", name, text)
	}
}

func TestStudiesThatSwellAreRefused(t *testing.T) {
	defer func(most int) { maxStudy = most }(maxStudy)
	maxStudy = 1 << 16
	huge := append(append([]byte(`"`), bytes.Repeat([]byte("a"), maxStudy+2)...), '"')
	for name, file := range carrying(t, huge) {
		_, err := read(file, name)
		if err == nil || strings.Contains(err.Error(), "\n") || len(err.Error()) > 200 {
			t.Errorf("%s: %.300v", name, err)
		}
	}
	deep := append(append([]byte(`{"version": 1, "structure": `), bytes.Repeat([]byte("["), 5000)...), bytes.Repeat([]byte("]"), 5000)...)
	for name, file := range carrying(t, append(deep, '}')) {
		check(t, name, file)
	}
}

func TestLengthsThatLieAreRefused(t *testing.T) {
	png := []byte(pngSignature)
	png = binary.BigEndian.AppendUint32(png, 0xffffffff)
	png = append(png, "iTXtlobewright study\x00"...)
	check(t, "a.png", png)
	mp4 := []byte{0, 0, 0, 1, 'f', 't', 'y', 'p', 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff}
	check(t, "a.mp4", mp4)
	glb := append([]byte("glTF\x02\x00\x00\x00\xff\xff\xff\xff\xff\xff\xff\x7fJSON"), "{}"...)
	check(t, "a.glb", glb)
	if _, err := read(glb, "a.glb"); err == nil || errors.Is(err, ErrNoStudy) {
		t.Error(err)
	}
}

func FuzzStudyIn(f *testing.F) {
	_, data := someStudy(f)
	for _, file := range carrying(f, data) {
		f.Add(file)
	}
	f.Add([]byte(`<svg xmlns="http://www.w3.org/2000/svg"><metadata><study xmlns="urn:x-lobewright:study">{"version": 1}</study></metadata></svg>`))
	f.Add([]byte("%PDF-1.7\n1 0 obj <</Type /EmbeddedFile /Subtype /application#2Fx-lobewright /Length 14>> stream\n{\"version\": 1}\nendstream"))
	f.Fuzz(func(t *testing.T, file []byte) { check(t, "a", file) })
}
