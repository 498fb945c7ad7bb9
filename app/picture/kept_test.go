package picture

import (
	"fmt"
	"testing"

	"lobewright/render"
)

func TestMeshesAreKeptWithinBounds(t *testing.T) {
	const size = 1000
	s := meshStore{most: 10 * size}
	mesh := func() meshPair { return meshPair{plus: &render.Mesh{Positions: make([][3]float32, size/12)}} }
	held := func() int {
		n := 0
		for _, m := range []map[string]meshPair{s.young, s.old} {
			for _, pair := range m {
				n += bytesOf(pair.plus)
			}
		}
		return n
	}
	often := mesh()
	s.put("often", often)
	for i := range 200 {
		s.put(fmt.Sprint(i), mesh())
		if got, ok := s.get("often"); !ok || got != often {
			t.Fatalf("what is asked for all the time has gone after %d others", i+1)
		}
		if held() > s.most {
			t.Fatalf("%d bytes are kept, %d are allowed", held(), s.most)
		}
	}
	if _, ok := s.get("0"); ok {
		t.Error("what nobody asks for stays")
	}
	if _, ok := s.get("199"); !ok {
		t.Error("the newest has gone")
	}
	// One that is larger than all that is allowed is kept alone, until the next.
	s.put("large", meshPair{minus: &render.Mesh{Positions: make([][3]float32, size)}})
	if _, ok := s.get("large"); !ok {
		t.Error("a large one is not kept at all")
	}
}
