package work

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/orbitals/structure"
	"lobewright/symmetry/message"
)

// A Stage is a step on the way from a study to its results.
type Stage int

// The stages, in their order.
const (
	StageStructure Stage = iota // reading the structure
	StageGroup                  // finding its group and frame
	StageBasis                  // putting functions on the atoms
	StageOrbitals               // projecting them onto every irrep
	StageOrbital                // choosing a group orbital
	StageLedger                 // projecting one function, operation by operation
	StagePlay                   // what an operation makes of what is chosen
	StageMatch                  // pairing group orbitals with functions of the central atom

	stages = iota
)

// String is the key of the stage.
func (s Stage) String() string {
	return [stages]string{"structure", "group", "basis", "orbitals", "orbital", "ledger", "play", "match"}[s]
}

// A Concern is the key of the choice that a problem is about.
type Concern string

// The concerns.
const (
	ConcernStructure Concern = "structure"
	ConcernCore      Concern = "core"
	ConcernIgnore    Concern = "ignore"
	ConcernTolerance Concern = "tolerance"
	ConcernAs        Concern = "as"
	ConcernFrame     Concern = "frame"
	ConcernZ         Concern = "z"
	ConcernX         Concern = "x"
	ConcernBasis     Concern = "basis"
	ConcernFunction  Concern = "function"
	ConcernIrrep     Concern = "irrep"
	ConcernCopy      Concern = "copy"
	ConcernPartner   Concern = "partner"
	ConcernElement   Concern = "element"
	ConcernOperation Concern = "operation"
	ConcernCentral   Concern = "central"
	// ConcernProgram is a fault of this program; Err wraps a *PanicError.
	ConcernProgram Concern = "program"
)

// A Problem is an error of a stage together with the choice that it is about.
// It wraps the error and says the same.
type Problem struct {
	Stage   Stage
	Concern Concern
	// Index is that of the selection of the basis, from 0; else 0.
	Index int
	Err   error
}

// Error is the line of the error within.
func (p *Problem) Error() string { return p.Err.Error() }

// In is Error in a language.
func (p *Problem) In(l *message.Language) string { return message.In(p.Err, l) }

// Unwrap returns the error within.
func (p *Problem) Unwrap() error { return p.Err }

// A PanicError is a panic that was caught.
type PanicError struct {
	Value any
	Stack []byte
}

// Error is what the panic said, without the stack.
func (p *PanicError) Error() string { return fmt.Sprint(p.Value) }

// caught makes a problem of a panic.
func caught(stage Stage, value any) *Problem {
	fault, ok := value.(*PanicError) // caught once before, in the goroutine where it was
	if !ok {
		fault = &PanicError{value, debug.Stack()}
	}
	return &Problem{Stage: stage, Concern: ConcernProgram, Err: message.Errorf("internal error: %w", fault)}
}

// blame ties an error to what it is about, unless that is done, or the
// computation was only cancelled.
func blame(stage Stage, concern Concern, err error) error {
	var problem *Problem
	if err == nil || errors.As(err, &problem) || cancelled(err) {
		return err
	}
	return &Problem{Stage: stage, Concern: concern, Err: err}
}

func cancelled(err error) bool {
	return errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded)
}

// blameCore tells which of the two choices of atoms is to blame.
func blameCore(m *structure.Molecule, s study.Study, err error) error {
	concern := ConcernIgnore
	var e *structure.Error
	switch {
	case s.Core == "":
	case s.Ignore == "" || errors.As(err, &e) && e.Problem == structure.NoCore:
		concern = ConcernCore
	default:
		if _, wrong := structure.ParseAtoms(s.Core, m, nil); wrong != nil {
			concern = ConcernCore
		}
	}
	return blame(StageGroup, concern, err)
}

// blameChoice ties an error of a basis to the first of its choices that cannot
// be served.
func blameChoice(sites *orbitals.Sites, choices []orbitals.Choice, err error) error {
	index := len(choices) - 1
	for n := 1; n < len(choices); n++ {
		if _, wrong := orbitals.NewBasis(sites, choices[:n]...); wrong != nil {
			index = n - 1
			break
		}
	}
	return &Problem{Stage: StageBasis, Concern: ConcernBasis, Index: index, Err: err}
}
