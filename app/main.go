// Lobewright takes the coordinates of a molecule to the group orbitals of its
// ligands, in one stated frame of axes, and to figures of them.
package main

import (
	"context"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"

	"lobewright/app/command"
)

// version is set by the build (-ldflags "-X main.version=…").
var version string

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	status := command.Run(ctx, os.Args[1:], command.Streams{In: os.Stdin, Out: os.Stdout, Err: os.Stderr}, versionText())
	stop()
	os.Exit(status)
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
