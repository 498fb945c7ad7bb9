// Package export writes figures and moving pictures to files in the formats of
// the world, and finds in such files the study that they were made from.
package export

import (
	"io"

	"lobewright/app/files"
)

// ErrExists is wrapped by the error for a file that is there already.
var ErrExists = files.ErrExists

// WriteFile writes a file whole or not at all, see files.Write.
func WriteFile(path string, force bool, write func(io.Writer) error) error {
	return files.Write(path, files.Options{Force: force}, write)
}

// CheckTarget tells beforehand whether WriteFile would refuse a path, see
// files.Check.
func CheckTarget(path string, force bool) error { return files.Check(path, force) }
