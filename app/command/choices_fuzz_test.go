package command

import (
	"bytes"
	"context"
	"strings"
	"testing"
)

// FuzzChoicesOfFramesAndGroups: whatever stands for an axis, a label, a rule or a
// group is served, or refused in one line.
func FuzzChoicesOfFramesAndGroups(f *testing.F) {
	for _, seed := range [][2]string{
		{"C3(1)", "2"}, {"0,1,1", "1,0"}, {"3,5", "C4(z)"}, {"1e308,1,1", "nan,0,0"}, {"", "x"}, {"-1", "99999999999999999999"},
		{"2 a1, b1", "D2h"}, {"t1u + t2u", "F for T"}, {",", "z-c3"}, {"9999eg", "D4h"}, {"σg+", "D∞h"}, {"D4h:2", "Oh:0"}, {"C4(z)", "C2v"}, {"1-3", "S4"},
	} {
		f.Add(seed[0], seed[1])
	}
	f.Fuzz(func(t *testing.T, a, b string) {
		for _, args := range [][]string{
			{"group", "ideal:OC-6", "--z=" + a, "--x=" + b},
			{"frames", "ideal:OC-6", "--translate=" + a, "--from=" + b},
			{"frames", "ideal:SP-4", "--frame=" + a},
			{"descend", "ideal:SP-4", "--to=" + b, "--keep=" + a},
			{"descend", "ideal:SP-4", "--fix=" + a},
			{"descend", "--in=D4h", "--to=" + b},
			{"multiply", "--in=Oh", "--", a, b},
			{"multiply", "--in=D∞h", "--", a, b},
			{"idealize", "ideal:TP-3", "--as=" + a},
		} {
			var out, messages bytes.Buffer
			status := Run(context.Background(), args, Streams{In: strings.NewReader(""), Out: &out, Err: &messages}, "test")
			text := messages.String()
			if status != done && (strings.Count(text, "\n") != 1 || out.Len() > 0 || strings.Contains(text, "internal error")) {
				t.Errorf("%q: status %d, output %q, messages %q", args, status, out.String(), text)
			}
		}
	})
}
