package session

import "os"

// A lock is a file that the system keeps other processes, and other sessions
// of this one, from locking. It is taken back when the process ends, however it
// ends.
type lock struct {
	file *os.File // nil where the file system has no locks
}

// held tells whether others are kept out.
func (l *lock) held() bool { return l != nil && l.file != nil }

// release gives the lock back. A nil lock has nothing to give.
func (l *lock) release() {
	if l.held() {
		l.file.Close()
		l.file = nil
	}
}
