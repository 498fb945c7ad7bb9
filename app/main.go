// Lobewright takes the coordinates of a molecule to the group orbitals of its
// ligands, in one stated frame of axes, and to figures of them.
package main

import (
	"context"
	"errors"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"

	"lobewright/app/command"
	"lobewright/app/window"
	_ "lobewright/app/window/language" // before anything that speaks
)

// version is set by the build (-ldflags "-X main.version=…").
var version string

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	streams := command.Streams{In: os.Stdin, Out: os.Stdout, Err: os.Stderr, Window: openWindow}
	status := command.Run(ctx, os.Args[1:], streams, versionText())
	stop()
	os.Exit(status)
}

// openWindow opens the window. Whether there is a display is asked only now:
// other commands need none.
func openWindow(ctx context.Context, structure string) error {
	err := window.Run(ctx, window.Options{Structure: structure, Version: versionText()})
	if errors.Is(err, window.ErrMissing) || errors.Is(err, window.ErrNoDisplay) {
		return command.NoWindow{Reason: err}
	}
	return err
}

// versionText is the version of the build, or the revision that it was made
// from.
func versionText() string {
	if version != "" {
		return version
	}
	text := "devel"
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, s := range info.Settings {
			if s.Key == "vcs.revision" && len(s.Value) >= 12 {
				text += " " + s.Value[:12]
			}
		}
	}
	return text
}
