package picture

import (
	"sync"

	"lobewright/render"
)

// A meshPair are the lobes of both signs.
type meshPair struct{ plus, minus *render.Mesh }

// keptMeshes are the meshes of all pictures of the program, which ask for the
// same ones.
var keptMeshes = meshStore{most: 12 << 20}

// A meshStore keeps meshes by a key, those that were asked for last, in a
// bounded amount of memory. It serves many goroutines.
type meshStore struct {
	most int // bytes

	mu sync.Mutex
	// Meshes that are asked for become young. When the young ones fill half
	// of what there is, they take the place of the old ones, which go.
	young, old map[string]meshPair
	bytes      int // of the young ones
}

func (s *meshStore) get(key string) (meshPair, bool) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if pair, ok := s.young[key]; ok {
		return pair, true
	}
	pair, ok := s.old[key]
	if ok {
		s.add(key, pair)
	}
	return pair, ok
}

func (s *meshStore) put(key string, pair meshPair) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if _, ok := s.young[key]; !ok { // another goroutine may have made it too
		s.add(key, pair)
	}
}

func (s *meshStore) add(key string, pair meshPair) {
	size := bytesOf(pair.plus) + bytesOf(pair.minus)
	if s.young == nil || s.bytes+size > s.most/2 {
		s.old, s.young, s.bytes = s.young, make(map[string]meshPair), 0
	}
	s.young[key] = pair
	s.bytes += size
}

// bytesOf is about the memory that a mesh takes.
func bytesOf(m *render.Mesh) int {
	if m == nil {
		return 0
	}
	const corner = 4
	return corner * (3*len(m.Positions) + 3*len(m.Normals) + 2*len(m.Coords) + 3*len(m.Triangles))
}
