package command

import (
	"bytes"
	"encoding/json"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestLaidOutJSONHoldsTheSame(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		document := anyValue(4).Draw(t, "document")
		laidOut, err := encode(document)
		if err != nil {
			t.Fatal(err)
		}
		var compact, want bytes.Buffer
		if err := json.Compact(&compact, laidOut); err != nil {
			t.Fatalf("%v in %s", err, laidOut)
		}
		encoder := json.NewEncoder(&want)
		encoder.SetEscapeHTML(false)
		if err := encoder.Encode(document); err != nil {
			t.Fatal(err)
		}
		if compact.String() != strings.TrimSpace(want.String()) {
			t.Fatalf("%s\nis not\n%s", compact.String(), want.String())
		}
	})
}

func anyValue(depth int) *rapid.Generator[any] {
	leaves := []*rapid.Generator[any]{
		rapid.Float64Range(-1e9, 1e9).AsAny(), rapid.String().AsAny(), rapid.Bool().AsAny(), rapid.Just[any](nil),
	}
	if depth == 0 {
		return rapid.OneOf(leaves...)
	}
	deeper := rapid.Deferred(func() *rapid.Generator[any] { return anyValue(depth - 1) })
	return rapid.OneOf(append(leaves,
		rapid.SliceOfN(deeper, 0, 8).AsAny(),
		rapid.MapOfN(rapid.String(), deeper, 0, 5).AsAny())...)
}
