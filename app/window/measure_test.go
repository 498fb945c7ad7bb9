//go:build cgo && !nowindow

package window

import (
	"strings"
	"testing"
	"time"
)

func TestThePaceIsThatOfWhatPlays(t *testing.T) {
	var p pace
	now := time.Unix(0, 0)
	after := func(d time.Duration, playing bool) string {
		now = now.Add(d)
		var said strings.Builder
		p.frame(&said, now, playing)
		return said.String()
	}
	if line := after(0, false) + after(time.Second, false) + after(time.Minute, true); line != "" {
		t.Errorf("before anything has played: %q", line)
	}
	for i := range 30 {
		d := 20 * time.Millisecond
		if i == 7 {
			d = 70 * time.Millisecond
		}
		if line := after(d, true); line != "" {
			t.Fatalf("within a second: %q", line)
		}
	}
	line := after(20*time.Millisecond, false)
	if want := "played for 670 ms: 46.3 frames a second, 70 ms for the slowest\n"; line != want {
		t.Errorf("it says %q, not %q", line, want)
	}
	if line := after(time.Hour, false) + after(time.Hour, true) + after(20*time.Millisecond, true); line != "" {
		t.Errorf("rests count: %q", line)
	}
	for range 48 {
		after(20*time.Millisecond, true)
	}
	if line := after(20*time.Millisecond, true); !strings.Contains(line, "50.0 frames a second, 20 ms") {
		t.Errorf("after a second of playing: %q", line)
	}
}

func TestSmallPicturesAreTimedFromTheChoiceOfTheBasis(t *testing.T) {
	var said strings.Builder
	m := &measured{out: &said}
	m.chosen(nil)
	m.pictures(nil)
	m.chosen([]string{"C:s"})
	m.pictures(nil) // those of the basis before
	if said.Len() > 0 {
		t.Errorf("too early: %q", &said)
	}
	m.pictures([]string{"C:s"})
	m.pictures([]string{"C:s"})
	if n := strings.Count(said.String(), "small pictures of"); n != 1 {
		t.Errorf("it is told %d times: %q", n, &said)
	}
	(*measured)(nil).chosen([]string{"C:s"}) // measures nothing
}
