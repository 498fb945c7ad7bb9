// Package work computes what follows from a study: structure, group, basis,
// group orbitals, ledger, and what single operations make of them. Each stage
// is kept under the part of the study that it reads, so that a change of the
// camera computes nothing and a change of the basis finds no group anew.
//
// Both faces of the program use this package: the commands call a Work and
// wait, the window has a Service, which works in the background.
package work

import (
	"context"
	"strconv"
	"sync"
	"sync/atomic"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/orbitals/structure"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// Work computes results and keeps the last one of every stage. It may be used
// by several goroutines; they wait for each other, stage by stage. Results are
// shared and must not be changed.
type Work struct {
	inputs structure.Inputs

	reading atomic.Int64 // counts how often the structure at hand was read anew

	// searching holds one: whoever searches for a ladder. The others wait there
	// for what is found, and nobody waits with mu held.
	searching chan struct{}

	mu              sync.Mutex
	reopened        stage[structureKey, *Structure]
	structures      stage[structureKey, *Structure]
	ladders         stage[ladderInputs, *Ladder]
	groups          stage[groupInputs, *Group]
	bases           stage[basisInputs, *Basis]
	representations stage[*Basis, *orbitals.Representation]
	projections     stage[*Basis, *Orbitals]
	turned          stage[turnedInputs, *Orbitals]
	matches         stage[matchInputs, *Match]
	ledgers         stage[ledgerInputs, *Ledger]
	plays           stage[playInputs, *Play]
}

// New returns a Work that reads structures from inputs and the file system.
func New(inputs structure.Inputs) *Work {
	return &Work{inputs: inputs, searching: make(chan struct{}, 1)}
}

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
	// As is the group that the structure is taken for, if one was chosen: "D4h".
	As string
	// Linear is C∞v or D∞h where the structure is taken for a finite subgroup of
	// that, all atoms on one line.
	Linear string

	// base is the fit before the study's axes were laid: their names and
	// directions are read in its frame.
	base *symmetry.Fit
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
	// Plain are the same before partners were turned and copies mixed; nil if
	// these are so.
	Plain *Orbitals
}

// A Ledger is one projection, operation by operation.
type Ledger struct {
	*Basis
	*orbitals.Ledger
	Irrep symmetry.Irrep
	// Partners are those of the irrep, from 0, in which the function has a
	// part. It has none in the irrep if there are none.
	Partners []int
}

// Structure reads the structure of a study. The error is a *Problem around a
// *structure.Error, or that of ctx. Nobody else waits while a file is read.
func (w *Work) Structure(ctx context.Context, s study.Study) (*Structure, error) {
	key := w.keyOfStructure(s)
	if read := w.knownStructure(key); read != nil {
		return read, nil
	}
	read, err := open(ctx, s, w.inputs)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.structures.get(key, func() (*Structure, error) { return read, nil })
}

// knownStructure is a structure that was read before, or nil.
func (w *Work) knownStructure(key structureKey) *Structure {
	w.mu.Lock()
	defer w.mu.Unlock()
	read, _ := w.structures.get(key, func() (*Structure, error) {
		if w.reopened.known && w.reopened.key == key {
			return w.reopened.value, nil
		}
		return nil, errUnknown
	})
	return read
}

var errUnknown = message.Errorf("not known")

// Group finds the point group of a study's core and its frame.
func (w *Work) Group(ctx context.Context, s study.Study) (*Group, error) {
	read, err := w.Structure(ctx, s)
	if err != nil {
		return nil, err
	}
	ladder, err := w.ladderFor(ctx, read, s, nil)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.groupOf(ctx, read, ladder, s)
}

// The inputs of a stage are the very results that it goes out from, and the
// choices that it reads. So all results of one study belong together, whatever
// was computed and forgotten between.
type groupInputs struct {
	*Structure
	core, ignore, as, frame, z, x string
	keepAxes                      bool
	tolerance                     float64
}

// groupOf and its like are called with the lock held. ladder is that of
// ladderFor.
func (w *Work) groupOf(ctx context.Context, read *Structure, ladder *Ladder, s study.Study) (*Group, error) {
	inputs := groupInputs{read, s.Core, s.Ignore, s.As, s.Frame, s.Z, s.X, s.KeepAxes, s.TheTolerance()}
	return w.groups.get(inputs, func() (*Group, error) {
		core, err := coreOf(read, s)
		if err != nil {
			return nil, err
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		base, linear, err := fitOf(read, core, ladder, s)
		if err != nil {
			return nil, err
		}
		fit, err := inFrame(base, read, core, s)
		if err != nil {
			return nil, err
		}
		sites, err := orbitals.NewSites(fit, core, read.Molecule, read.Bonds)
		if err != nil {
			return nil, blame(StageGroup, ConcernStructure, err)
		}
		g := &Group{Structure: read, Core: core, Fit: fit, Sites: sites, base: base}
		if ladder != nil {
			g.As = fit.Setting.Symbol
		}
		if !fit.Setting.Infinite() {
			g.Linear = linear
		}
		return g, nil
	})
}

// coreOf chooses the atoms that decide the group.
func coreOf(read *Structure, s study.Study) ([]int, error) {
	core, err := structure.Core(read.Molecule, s.Core, s.Ignore)
	if err != nil {
		return nil, blameCore(read.Molecule, s, err)
	}
	return core, nil
}

// fitOf is the group in its default frame: the one that the core has within the
// tolerance, or the one of the ladder that is chosen; with the linear group that
// this is a subgroup of, if any.
func fitOf(read *Structure, core []int, ladder *Ladder, s study.Study) (*symmetry.Fit, string, error) {
	if ladder == nil {
		fit, err := detect(read, core, s)
		return fit, "", err
	}
	return ladder.choose(s)
}

// Basis puts the chosen functions on the atoms.
func (w *Work) Basis(ctx context.Context, s study.Study) (*Basis, error) {
	// What is written wrong is told before anything is read.
	if _, err := parseChoices(s.Basis); err != nil {
		return nil, err
	}
	group, err := w.Group(ctx, s)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.basisOf(ctx, group, s)
}

func parseChoices(texts []string) ([]orbitals.Choice, error) {
	choices := make([]orbitals.Choice, len(texts))
	for i, text := range texts {
		var err error
		if choices[i], err = orbitals.ParseChoice(text); err != nil {
			return nil, &Problem{Stage: StageBasis, Concern: ConcernBasis, Index: i, Err: err}
		}
	}
	if len(choices) == 0 {
		return nil, blame(StageBasis, ConcernBasis, message.Errorf("no functions are chosen"))
	}
	return choices, nil
}

type basisInputs struct {
	*Group
	basis string // joined
}

func (w *Work) basisOf(ctx context.Context, group *Group, s study.Study) (*Basis, error) {
	return w.bases.get(basisInputs{group, joinBasis(s)}, func() (*Basis, error) {
		choices, err := parseChoices(s.Basis)
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

// representationOf is what the operations make of a basis; nil for an infinite
// group.
func (w *Work) representationOf(ctx context.Context, basis *Basis) (*orbitals.Representation, error) {
	if basis.Fit.Setting.Infinite() {
		return nil, nil
	}
	return w.representations.get(basis, func() (*orbitals.Representation, error) {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		representation, err := basis.Representation()
		return representation, blame(StageOrbitals, ConcernBasis, err)
	})
}

// Orbitals projects the basis onto every irrep. Where the study turns partners
// or mixes copies of the chosen irrep, they are so, and so is everything that
// goes out from them.
func (w *Work) Orbitals(ctx context.Context, s study.Study) (*Orbitals, error) {
	basis, err := w.Basis(ctx, s)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	all, err := w.orbitalsOf(ctx, basis)
	if err != nil {
		return nil, err
	}
	return w.turnedOf(all, s)
}

func (w *Work) orbitalsOf(ctx context.Context, basis *Basis) (*Orbitals, error) {
	return w.projections.get(basis, func() (*Orbitals, error) {
		representation, err := w.representationOf(ctx, basis)
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
		return &Orbitals{Basis: basis, Projection: projection}, nil
	})
}
