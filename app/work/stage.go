package work

// A stage keeps its last result under what the result was computed from. A
// result is made anew only if that has changed; errors are not kept, since a
// missing file may appear and a cancelled computation may be wanted again.
type stage[K comparable, V any] struct {
	key   K
	value V
	known bool
}

func (s *stage[K, V]) get(key K, compute func() (V, error)) (V, error) {
	if s.known && s.key == key {
		return s.value, nil
	}
	value, err := compute()
	if err != nil {
		var none V
		return none, err
	}
	s.key, s.value, s.known = key, value, true
	return value, nil
}
