package command

import (
	"bytes"
	"context"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "rewrite the expected outputs in testdata/commands")

// A session is a text of command lines and what each prints: "$ lobewright …"
// and then the output, messages included. A line "…" in the expected output
// stands for any lines. The last line "[exit N]" tells an exit status but 0.
type step struct {
	line string // without "$ "
	want []string
}

func parseSession(text string) []step {
	var steps []step
	for _, line := range strings.Split(strings.TrimRight(text, "\n"), "\n") {
		if command, ok := strings.CutPrefix(line, "$ "); ok {
			steps = append(steps, step{line: command})
		} else if len(steps) > 0 {
			last := &steps[len(steps)-1]
			last.want = append(last.want, line)
		}
	}
	return steps
}

// play executes a command line in the current folder and returns its output.
// Of the shell it knows quotes, "< file" and "> file".
func play(t *testing.T, line string) string {
	t.Helper()
	words, in, out := shellWords(t, line)
	if len(words) == 0 || words[0] != "lobewright" {
		t.Fatalf("%q does not begin with lobewright", line)
	}
	input := []byte{}
	if in != "" {
		var err error
		if input, err = os.ReadFile(in); err != nil {
			t.Fatal(err)
		}
	}
	var printed, messages bytes.Buffer
	stdout := &printed
	if out != "" {
		stdout = new(bytes.Buffer)
	}
	status := Run(context.Background(), words[1:], Streams{In: bytes.NewReader(input), Out: stdout, Err: &messages}, "test")
	if out != "" {
		if err := os.WriteFile(out, stdout.Bytes(), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	text := messages.String() + printed.String()
	if status != 0 {
		text += "[exit " + string(rune('0'+status)) + "]\n"
	}
	return text
}

// shellWords cuts a command line like a shell.
func shellWords(t *testing.T, line string) (words []string, in, out string) {
	t.Helper()
	var all []string
	word, started, quote := "", false, rune(0)
	for _, r := range line {
		switch {
		case quote != 0 && r == quote:
			quote = 0
		case quote == 0 && (r == '\'' || r == '"'):
			quote, started = r, true
		case quote == 0 && r == ' ':
			if started {
				all = append(all, word)
			}
			word, started = "", false
		default:
			word, started = word+string(r), true
		}
	}
	if quote != 0 {
		t.Fatalf("%q: a quote is open", line)
	}
	if started {
		all = append(all, word)
	}
	for i := 0; i < len(all); i++ {
		switch all[i] {
		case "<":
			i++
			in = all[i]
		case ">":
			i++
			out = all[i]
		default:
			words = append(words, all[i])
		}
	}
	return words, in, out
}

// matches compares lines with an expectation in which "…" stands for any.
func matches(got, want []string) bool {
	if len(want) == 0 {
		return len(got) == 0
	}
	if strings.TrimSpace(want[0]) == "…" {
		for i := 0; i <= len(got); i++ {
			if matches(got[i:], want[1:]) {
				return true
			}
		}
		return false
	}
	return len(got) > 0 && got[0] == want[0] && matches(got[1:], want[1:])
}

func lines(text string) []string {
	if text == "" {
		return nil
	}
	return strings.Split(strings.TrimRight(text, "\n"), "\n")
}

func TestCommandsPrintWhatTheyPrinted(t *testing.T) {
	files, err := filepath.Glob("../../testdata/commands/*.txt")
	if err != nil || len(files) == 0 {
		t.Fatalf("no sessions in testdata/commands (%v)", err)
	}
	for _, file := range files {
		t.Run(strings.TrimSuffix(filepath.Base(file), ".txt"), func(t *testing.T) {
			text, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			file, err = filepath.Abs(file)
			if err != nil {
				t.Fatal(err)
			}
			t.Chdir(t.TempDir())
			var now strings.Builder
			for _, s := range parseSession(string(text)) {
				got := play(t, s.line)
				now.WriteString("$ " + s.line + "\n" + got)
				if !*update && strings.Join(s.want, "\n") != strings.TrimRight(got, "\n") {
					t.Errorf("%s\nprints\n%s\ninstead of\n%s", s.line, got, strings.Join(s.want, "\n"))
				}
			}
			if *update {
				if err := os.WriteFile(file, []byte(now.String()), 0o666); err != nil {
					t.Fatal(err)
				}
			}
		})
	}
}

// TestEveryCommandInTheReadmeDoesWhatItSays runs the sessions in the README
// from its files, both marked in the first line of their code blocks.
func TestEveryCommandInTheReadmeDoesWhatItSays(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	commands := 0
	for i, block := range strings.Split(string(readme), "```") {
		if i%2 == 0 {
			continue // between code blocks
		}
		kind, text, _ := strings.Cut(block, "\n")
		if name, ok := strings.CutPrefix(kind, "text "); ok {
			if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
				t.Fatal(err)
			}
		}
		if kind != "console" {
			if strings.Contains(text, "lobewright group") || strings.Contains(text, "lobewright project") {
				t.Errorf("the block %q is not marked as console and so not tried", text)
			}
			continue
		}
		for _, s := range parseSession(text) {
			commands++
			if got := play(t, s.line); !matches(lines(got), s.want) {
				t.Errorf("%s\nprints\n%s\ninstead of\n%s", s.line, got, strings.Join(s.want, "\n"))
			}
		}
	}
	if commands < 8 {
		t.Errorf("only %d commands were found in the README", commands)
	}
}
