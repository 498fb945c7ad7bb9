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
	"strings"
	"sync"

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

	mu          sync.Mutex
	structures  stage[string, *Structure]
	groups      stage[groupKey, *Group]
	bases       stage[basisKey, *Basis]
	projections stage[basisKey, *Orbitals]
	ledgers     stage[ledgerKey, *Ledger]
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

type groupKey struct {
	structure, core, ignore, frame string
	tolerance                      float64
}

func keyOfGroup(s study.Study) groupKey {
	return groupKey{s.Structure, s.Core, s.Ignore, s.Frame, s.TheTolerance()}
}

type basisKey struct {
	groupKey
	basis string
}

func keyOfBasis(s study.Study) basisKey {
	// No selection contains a line feed.
	return basisKey{keyOfGroup(s), strings.Join(s.Basis, "\n")}
}

type ledgerKey struct {
	basisKey
	function int
	irrep    string
	element  [2]int
}

// Structure reads the structure of a study. The error is a *structure.Error
// or that of ctx.
func (w *Work) Structure(ctx context.Context, s study.Study) (*Structure, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.structure(ctx, s)
}

func (w *Work) structure(ctx context.Context, s study.Study) (*Structure, error) {
	return w.structures.get(s.Structure, func() (*Structure, error) {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		m, notes, err := structure.Open(s.Structure, w.inputs)
		if err != nil {
			return nil, err
		}
		return &Structure{Molecule: m, Bonds: structure.Bonds(m), Notes: notes}, nil
	})
}

// Group finds the point group of a study's core and its frame.
func (w *Work) Group(ctx context.Context, s study.Study) (*Group, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.group(ctx, s)
}

func (w *Work) group(ctx context.Context, s study.Study) (*Group, error) {
	return w.groups.get(keyOfGroup(s), func() (*Group, error) {
		read, err := w.structure(ctx, s)
		if err != nil {
			return nil, err
		}
		core, err := structure.Core(read.Molecule, s.Core, s.Ignore)
		if err != nil {
			return nil, err
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
			return nil, err
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
	return w.bases.get(keyOfBasis(s), func() (*Basis, error) {
		choices := make([]orbitals.Choice, len(s.Basis))
		for i, text := range s.Basis {
			var err error
			if choices[i], err = orbitals.ParseChoice(text); err != nil {
				return nil, err
			}
		}
		if len(choices) == 0 {
			return nil, errors.New("no functions are chosen")
		}
		group, err := w.group(ctx, s)
		if err != nil {
			return nil, err
		}
		basis, err := orbitals.NewBasis(group.Sites, choices...)
		if err != nil {
			return nil, err
		}
		return &Basis{group, basis}, nil
	})
}

// Orbitals projects the basis onto every irrep.
func (w *Work) Orbitals(ctx context.Context, s study.Study) (*Orbitals, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.projections.get(keyOfBasis(s), func() (*Orbitals, error) {
		basis, err := w.basis(ctx, s)
		if err != nil {
			return nil, err
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		projection, err := basis.Project()
		if err != nil {
			return nil, err
		}
		return &Orbitals{basis, projection}, nil
	})
}
