package work

import (
	"context"
	"runtime/debug"
	"strings"

	"lobewright/app/study"
	"lobewright/orbitals/structure"
)

// open reads the structure of a study. Reading may hang, on a file system that
// does not answer; a cancelled ctx then leaves it alone.
func open(ctx context.Context, s study.Study, inputs structure.Inputs) (*Structure, error) {
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	type result struct {
		*Structure
		err   error
		panic *PanicError
	}
	read := make(chan result, 1)
	go func() {
		var r result
		defer func() {
			if value := recover(); value != nil {
				r.panic = &PanicError{value, debug.Stack()}
			}
			read <- r
		}()
		r.Structure, r.err = readNow(s, inputs)
	}()
	select {
	case <-ctx.Done():
		return nil, ctx.Err()
	case r := <-read:
		if r.panic != nil {
			panic(r.panic)
		}
		return r.Structure, blame(StageStructure, ConcernStructure, r.err)
	}
}

func readNow(s study.Study, inputs structure.Inputs) (*Structure, error) {
	var m *structure.Molecule
	var notes []structure.Note
	var err error
	if s.Coordinates == "" {
		m, notes, err = structure.Open(s.Structure, inputs)
	} else {
		m, notes, err = structure.Read(strings.NewReader(s.Coordinates), nameOfText(s))
	}
	if err != nil {
		return nil, err
	}
	return &Structure{Molecule: m, Bonds: structure.Bonds(m), Notes: notes}, nil
}

// nameOfText is what messages call coordinates that came without a file.
func nameOfText(s study.Study) string {
	if s.Structure == "" {
		return "coordinates"
	}
	return s.Structure
}

// Reopen reads the structure of a study anew, whatever is kept of it. If it can
// be read, later stages of this study go out from what was read now; else
// nothing changes.
func (w *Work) Reopen(ctx context.Context, s study.Study) (*Structure, error) {
	// Others need not wait for a slow file.
	read, err := open(ctx, s, w.inputs)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	if key := w.keyOfStructure(s); w.structures.known && w.structures.key == key {
		w.reading.Add(1)
	}
	w.reopened = stage[structureKey, *Structure]{w.keyOfStructure(s), read, true}
	return read, nil
}
