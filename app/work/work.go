// Package work computes what follows from a study: structure, group, basis,
// group orbitals, ledger. Each stage is kept under the part of the study that
// it reads, so that a change of the camera computes nothing and a change of
// the basis finds no group anew.
//
// Both faces of the program, the commands and the window, use this package.
package work

import (
	"context"
	"errors"
	"strconv"
	"sync"
	"sync/atomic"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// Work computes results and keeps the last one of every stage. It may be used
// by several goroutines; they wait for each other. Results are shared and must
// not be changed.
type Work struct {
	inputs structure.Inputs

	reading atomic.Int64 // counts how often the structure at hand was read anew

	mu              sync.Mutex
	reopened        stage[structureKey, *Structure]
	structures      stage[structureKey, *Structure]
	groups          stage[groupKey, *Group]
	bases           stage[basisKey, *Basis]
	representations stage[basisKey, *orbitals.Representation]
	projections     stage[basisKey, *Orbitals]
	ledgers         stage[ledgerKey, *Ledger]
	plays           stage[playKey, *Play]
}

// New returns a Work that reads structures from inputs and the file system.
func New(inputs structure.Inputs) *Work { return &Work{inputs: inputs} }

// A Structure is a molecule as read.
type Structure struct {
	Molecule *structure.Molecule
	// Bonds are pairs of atoms, from 0.
	Bonds [][2]int
	// Notes are remarks of the reader.
	Notes []structure.Note
}

// A Group is the point group of a structure's core with the whole structure
// in the working frame.
type Group struct {
	*Structure
	// Core are the atoms that decide the group, from 0, rising.
	Core []int
	Fit  *symmetry.Fit
	// Sites holds every atom in the working frame, and where the operations
	// carry it.
	Sites *orbitals.Sites
}

// AtomNames are the names of all atoms: symbol and number, from 1 ("Cl2").
func (s *Structure) AtomNames() []string {
	names := make([]string, len(s.Molecule.Atoms))
	for i, a := range s.Molecule.Atoms {
		names[i] = a.Element.Symbol() + strconv.Itoa(i+1)
	}
	return names
}

// CoreNames are the names of the core atoms, in the order of the fit's points.
func (g *Group) CoreNames() []string {
	all := g.AtomNames()
	names := make([]string, len(g.Core))
	for k, i := range g.Core {
		names[k] = all[i]
	}
	return names
}

// A Basis is functions on the atoms of a Group.
type Basis struct {
	*Group
	*orbitals.Basis
}

// Orbitals are all group orbitals of a Basis.
type Orbitals struct {
	*Basis
	*orbitals.Projection
}

// A Ledger is one projection, operation by operation.
type Ledger struct {
	*Basis
	*orbitals.Ledger
	Irrep symmetry.Irrep
}

// Structure reads the structure of a study. The error is a *Problem around a
// *structure.Error, or that of ctx.
func (w *Work) Structure(ctx context.Context, s study.Study) (*Structure, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.structure(ctx, s)
}

func (w *Work) structure(ctx context.Context, s study.Study) (*Structure, error) {
	key := w.keyOfStructure(s)
	return w.structures.get(key, func() (*Structure, error) {
		if w.reopened.known && w.reopened.key == key {
			return w.reopened.value, nil
		}
		return open(ctx, s, w.inputs)
	})
}

// Group finds the point group of a study's core and its frame.
func (w *Work) Group(ctx context.Context, s study.Study) (*Group, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.group(ctx, s)
}

func (w *Work) group(ctx context.Context, s study.Study) (*Group, error) {
	return w.groups.get(w.keyOfGroup(s), func() (*Group, error) {
		read, err := w.structure(ctx, s)
		if err != nil {
			return nil, err
		}
		core, err := structure.Core(read.Molecule, s.Core, s.Ignore)
		if err != nil {
			return nil, blameCore(read.Molecule, s, err)
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		fit, err := detect(read, core, s)
		if err != nil {
			return nil, err
		}
		sites, err := orbitals.NewSites(fit, core, read.Molecule, read.Bonds)
		if err != nil {
			return nil, blame(StageGroup, ConcernStructure, err)
		}
		return &Group{Structure: read, Core: core, Fit: fit, Sites: sites}, nil
	})
}

// Basis puts the chosen functions on the atoms.
func (w *Work) Basis(ctx context.Context, s study.Study) (*Basis, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.basis(ctx, s)
}

func (w *Work) basis(ctx context.Context, s study.Study) (*Basis, error) {
	return w.bases.get(w.keyOfBasis(s), func() (*Basis, error) {
		choices := make([]orbitals.Choice, len(s.Basis))
		for i, text := range s.Basis {
			var err error
			if choices[i], err = orbitals.ParseChoice(text); err != nil {
				return nil, &Problem{Stage: StageBasis, Concern: ConcernBasis, Index: i, Err: err}
			}
		}
		if len(choices) == 0 {
			return nil, blame(StageBasis, ConcernBasis, errors.New("no functions are chosen"))
		}
		group, err := w.group(ctx, s)
		if err != nil {
			return nil, err
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		basis, err := orbitals.NewBasis(group.Sites, choices...)
		if err != nil {
			return nil, blameChoice(group.Sites, choices, err)
		}
		return &Basis{group, basis}, nil
	})
}

// representation is what the operations make of the basis; nil for an infinite
// group.
func (w *Work) representation(ctx context.Context, s study.Study) (*orbitals.Representation, error) {
	return w.representations.get(w.keyOfBasis(s), func() (*orbitals.Representation, error) {
		basis, err := w.basis(ctx, s)
		if err != nil || basis.Fit.Setting.Infinite() {
			return nil, err
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		representation, err := basis.Representation()
		return representation, blame(StageOrbitals, ConcernBasis, err)
	})
}

// Orbitals projects the basis onto every irrep.
func (w *Work) Orbitals(ctx context.Context, s study.Study) (*Orbitals, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.orbitals(ctx, s)
}

func (w *Work) orbitals(ctx context.Context, s study.Study) (*Orbitals, error) {
	return w.projections.get(w.keyOfBasis(s), func() (*Orbitals, error) {
		basis, err := w.basis(ctx, s)
		if err != nil {
			return nil, err
		}
		representation, err := w.representation(ctx, s)
		if err != nil {
			return nil, err
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		var projection *orbitals.Projection
		if representation == nil {
			projection, err = basis.Project()
		} else {
			projection, err = orbitals.Project(representation)
		}
		if err != nil {
			return nil, blame(StageOrbitals, ConcernBasis, err)
		}
		return &Orbitals{basis, projection}, nil
	})
}
