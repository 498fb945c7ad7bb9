// Package command is the command line: it turns arguments into a study, has
// its results computed, and prints them as text or JSON or writes a picture.
package command

import (
	"context"
	"errors"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"lobewright/app/work"
	"lobewright/orbitals/structure"
)

// Exit statuses.
const (
	done      = 0
	notServed = 1 // the input was understood and could not be served
	wrongLine = 2 // the command line was wrong
)

// Streams are where a command reads and writes.
type Streams struct {
	In       io.Reader
	Out, Err io.Writer
	// Window opens the window with a structure, or with what was open last if
	// that is empty, and returns when it is closed. The error is a NoWindow
	// where there is no display or no window was built in; nil stands for that
	// too.
	Window func(ctx context.Context, structure string) error
}

// NoWindow says why no window can be opened here, whatever the structure.
type NoWindow struct{ Reason error }

// Error implements error.
func (n NoWindow) Error() string { return "no window can be opened: " + n.Reason.Error() }

// Unwrap returns the reason.
func (n NoWindow) Unwrap() error { return n.Reason }

// A program is what all commands share in one run.
type program struct {
	Streams
	work *work.Work
}

// A usageError is a fault of the command line.
type usageError struct{ error }

func usagef(format string, args ...any) error { return usageError{fmt.Errorf(format, args...)} }

// Run executes one command line, without the program's own name, and returns
// the exit status. Whatever goes wrong is one line on the error stream.
func Run(ctx context.Context, args []string, streams Streams, version string) (status int) {
	defer func() {
		// A panic is a fault of this program; a trace would tell the reader
		// nothing that the first line does not.
		if fault := recover(); fault != nil {
			fmt.Fprintf(streams.Err, "lobewright: internal error: %s\n", oneLine(fmt.Sprint(fault)))
			status = notServed
		}
	}()
	p := &program{streams, work.New(inputs(streams.In))}
	root := p.root(version)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	if err == nil {
		return done
	}
	if ctx.Err() != nil {
		err = errors.New("interrupted")
	}
	fmt.Fprintf(streams.Err, "lobewright: %s\n", oneLine(err.Error()))
	if isUsage(err) {
		return wrongLine
	}
	return notServed
}

// isUsage tells a command line that is wrong in itself from one that asks for
// what the input does not have.
func isUsage(err error) bool {
	var usage usageError
	var choice *structure.Error
	return errors.As(err, &usage) || errors.As(err, &choice) && choice.Problem == structure.BadAtoms
}

// oneLine keeps a message on one line, whatever a file's name contains.
func oneLine(s string) string {
	return strings.Join(strings.FieldsFunc(s, func(r rune) bool { return r == '\n' || r == '\r' }), " ")
}

// note prints a remark on the error stream.
func (p *program) note(format string, args ...any) {
	fmt.Fprintf(p.Err, "note: %s\n", oneLine(fmt.Sprintf(format, args...)))
}

// oneStructure is the rule for the arguments of most commands.
func oneStructure(cmd *cobra.Command, args []string) error {
	if len(args) == 1 {
		return nil
	}
	return usagef("%s takes one STRUCTURE and %d are given; see %q", cmd.Name(), len(args), cmd.CommandPath()+" --help")
}

// noArguments is the rule for commands that take none.
func noArguments(cmd *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	if cmd.HasParent() {
		return usagef("%s takes no arguments; see %q", cmd.Name(), cmd.CommandPath()+" --help")
	}
	return usagef("there is no command %q; see %q", args[0], cmd.CommandPath()+" --help")
}
