package command

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"sync"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"lobewright/app/study"
	"lobewright/app/work"
)

// namePlace stands in the name of an output file for the name of the structure.
const namePlace = "{name}"

// A job makes one file of one structure.
type job struct {
	structure, output string
}

// jobsOf gives each structure its file. Several structures need a pattern that
// tells their files apart.
func jobsOf(structures []string, pattern string) ([]job, error) {
	if len(structures) > 1 && !strings.Contains(pattern, namePlace) {
		return nil, usagef("-o %s: %d structures need a name with %s in it, which stands for the name of each", pattern, len(structures), namePlace)
	}
	jobs := make([]job, len(structures))
	owner := map[string]string{}
	for i, s := range structures {
		output := strings.ReplaceAll(pattern, namePlace, nameOf(s))
		if other, taken := owner[output]; taken {
			return nil, usagef("%s and %s would both be written to %s", other, s, output)
		}
		owner[output] = s
		jobs[i] = job{s, output}
	}
	return jobs, nil
}

// nameOf is the name of a structure within the name of a file: that of its file
// without folder and ending, or what stands after the colon.
func nameOf(structure string) string {
	if _, name, found := strings.Cut(structure, ":"); found && (strings.HasPrefix(structure, "demo:") || strings.HasPrefix(structure, "ideal:")) {
		return strings.NewReplacer("/", "-", `\`, "-").Replace(name)
	}
	if structure == "-" {
		return "input"
	}
	base := filepath.Base(structure)
	return strings.TrimSuffix(base, filepath.Ext(base))
}

// many are the structures of a command that writes files, and how they are
// worked at.
type many struct {
	list    string
	workers int
}

func (m *many) flags(flags *pflag.FlagSet) {
	flags.StringVar(&m.list, "list", "", "`FILE` that names more structures, one a line")
	flags.IntVar(&m.workers, "jobs", 0, "how many structures to work at together, `N` (default: one for each core)")
}

// args is the rule for the arguments: at least one structure, or a list.
func (m *many) args(cmd *cobra.Command, args []string) error {
	if len(args) == 0 && m.list == "" {
		return oneStructure(cmd, args)
	}
	seen := 0
	for _, a := range args {
		if a == "-" {
			seen++
		}
	}
	if seen > 1 {
		return usagef("standard input (-) can be read once, and is given %d times", seen)
	}
	return nil
}

// eachStudy opens every structure with what the flags say, checks the choices
// and makes a file of them. bound is the study that the flags write to; check
// may settle what they leave open.
func (p *program) eachStudy(cmd *cobra.Command, args []string, m *many, bound *study.Study, output string,
	check func(s *study.Study, output string) error, do func(ctx context.Context, p *program, s study.Study, output string) error) error {
	structures, err := listed(args, m.list)
	if err != nil {
		return err
	}
	return p.each(cmd.Context(), structures, output, m.workers, func(ctx context.Context, p *program, j job) error {
		s, err := p.opened(cmd, bound, j.structure)
		if err != nil {
			return err
		}
		if err := check(&s, j.output); err != nil {
			return err
		}
		return do(ctx, p, s, j.output)
	})
}

// each does the same for one structure or for many. Of many, several are worked
// at together; one that fails does not hold up the others, a bar shows how far
// it has come where the error stream is a terminal, and at the end stands which
// failed and why.
func (p *program) each(ctx context.Context, structures []string, pattern string, workers int, do func(ctx context.Context, p *program, j job) error) error {
	jobs, err := jobsOf(structures, pattern)
	if err != nil {
		return err
	}
	if len(jobs) == 1 {
		return do(ctx, p, jobs[0])
	}
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	b := &batch{Streams: p.Streams, jobs: jobs, faults: make([]error, len(jobs)), begun: make([]bool, len(jobs)), bar: isTerminal(p.Err)}
	b.run(ctx, min(workers, len(jobs)), do)
	return b.account(ctx)
}

// A batch is many jobs on their way.
type batch struct {
	Streams
	jobs []job
	bar  bool // there is a bar

	mu     sync.Mutex
	next   int // the first job that nobody has taken
	done   int
	failed int
	begun  []bool
	faults []error
}

func (b *batch) run(ctx context.Context, workers int, do func(context.Context, *program, job) error) {
	var running sync.WaitGroup
	b.draw()
	for range workers {
		running.Go(func() {
			for {
				i := b.take(ctx)
				if i < 0 {
					return
				}
				b.finish(i, b.one(ctx, b.jobs[i], do))
			}
		})
	}
	running.Wait()
}

// take is the number of the next job, or −1.
func (b *batch) take(ctx context.Context) int {
	b.mu.Lock()
	defer b.mu.Unlock()
	if ctx.Err() != nil || b.next == len(b.jobs) {
		return -1
	}
	b.next++
	b.begun[b.next-1] = true
	return b.next - 1
}

// one does a job with results of its own. A fault of the program costs one
// structure and not all.
func (b *batch) one(ctx context.Context, j job, do func(context.Context, *program, job) error) (err error) {
	defer func() {
		if fault := recover(); fault != nil {
			err = fmt.Errorf("internal error: %v", fault)
		}
	}()
	streams := b.Streams
	streams.Err = &named{batch: b, name: j.structure}
	return do(ctx, &program{Streams: streams, work: work.New(inputs(b.In))}, j)
}

func (b *batch) finish(i int, err error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.done++
	if err != nil {
		b.failed++
		b.faults[i] = err
	}
	b.drawLocked()
}

// barWidth is the length of the bar in characters.
const barWidth = 30

func (b *batch) draw() {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.drawLocked()
}

func (b *batch) drawLocked() {
	if !b.bar {
		return
	}
	full := barWidth * b.done / len(b.jobs)
	text := fmt.Sprintf("\r%s%s %d of %d", strings.Repeat("█", full), strings.Repeat("░", barWidth-full), b.done, len(b.jobs))
	if b.failed > 0 {
		text += fmt.Sprintf(", %d failed", b.failed)
	}
	_, _ = io.WriteString(b.Err, text)
}

// wipe makes room for a line where the bar stands. The lock is held.
func (b *batch) wipe() {
	if b.bar {
		_, _ = io.WriteString(b.Err, "\r\x1b[K")
	}
}

// account says which jobs failed and why, in their order. The error counts
// them.
func (b *batch) account(ctx context.Context) error {
	b.wipe()
	good := b.done - b.failed
	if err := b.wrongForAll(); err != nil && ctx.Err() == nil {
		return err
	}
	for i, err := range b.faults {
		if err != nil && ctx.Err() == nil {
			fmt.Fprintf(b.Err, "%s: %s\n", oneLine(b.jobs[i].structure), oneLine(strings.TrimPrefix(err.Error(), b.jobs[i].structure+": ")))
		}
	}
	switch {
	case ctx.Err() != nil:
		fmt.Fprintf(b.Err, "finished: %d of %d\n", good, len(b.jobs))
		return ctx.Err()
	case b.failed > 0:
		return fmt.Errorf("%d of %d structures failed; finished: %d", b.failed, len(b.jobs), good)
	}
	fmt.Fprintf(b.Err, "all %d structures are finished\n", len(b.jobs))
	return nil
}

// wrongForAll is the fault of the command line that all jobs have in common, or
// nil.
func (b *batch) wrongForAll() error {
	first := b.faults[0]
	if first == nil || !isUsage(first) {
		return nil
	}
	for _, err := range b.faults {
		if err == nil || err.Error() != first.Error() {
			return nil
		}
	}
	return first
}

// named writes whole lines to the error stream, each with the name of a
// structure before it, and never into the bar.
type named struct {
	batch *batch
	name  string
	rest  []byte
}

// Write implements io.Writer.
func (n *named) Write(data []byte) (int, error) {
	n.batch.mu.Lock()
	defer n.batch.mu.Unlock()
	n.rest = append(n.rest, data...)
	for {
		line, rest, found := bytes.Cut(n.rest, []byte("\n"))
		if !found {
			return len(data), nil
		}
		n.batch.wipe()
		if _, err := fmt.Fprintf(n.batch.Err, "%s: %s\n", oneLine(n.name), line); err != nil {
			return 0, err
		}
		n.rest = rest
		n.batch.drawLocked()
	}
}

// opening holds that one structure at a time is opened: the flags of a command
// write to one study.
var opening sync.Mutex

// opened is the study of a structure, or of the figure that stands in its
// place, with what the flags say. bound is the study that the flags write to;
// it is left as it was.
func (p *program) opened(cmd *cobra.Command, bound *study.Study, structure string) (study.Study, error) {
	opening.Lock()
	defer opening.Unlock()
	before := *bound
	defer func() { *bound = before }()
	if err := p.open(cmd, bound, structure); err != nil {
		return study.Study{}, err
	}
	return *bound, nil
}

// isTerminal tells whether what is written is seen at once.
func isTerminal(w io.Writer) bool {
	file, ok := w.(*os.File)
	if !ok {
		return false
	}
	info, err := file.Stat()
	return err == nil && info.Mode()&os.ModeCharDevice != 0
}

// listed adds the structures of a list, a file with one a line; empty lines and
// those that begin with # say nothing. A path is counted from the folder of the
// list.
func listed(args []string, list string) ([]string, error) {
	if list == "" {
		return args, nil
	}
	data, err := os.ReadFile(list)
	if err != nil {
		var path *os.PathError
		if errors.As(err, &path) {
			err = path.Err
		}
		return nil, fmt.Errorf("--list %s: %w", list, err)
	}
	for line := range strings.Lines(string(data)) {
		line = strings.TrimSpace(line)
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		if !strings.HasPrefix(line, "demo:") && !strings.HasPrefix(line, "ideal:") && line != "-" && !filepath.IsAbs(line) {
			line = filepath.Join(filepath.Dir(list), line)
		}
		args = append(args, line)
	}
	if len(args) == 0 {
		return nil, fmt.Errorf("--list %s: there is no structure in it; each line names one", list)
	}
	return args, nil
}
