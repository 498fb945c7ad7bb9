//go:build cgo && !nowindow && linux

package window

/*
#include <stdlib.h>
#ifdef __GLIBC__
#include <malloc.h>
static void trim(void) { malloc_trim(0); }
#else
static void trim(void) {}
#endif
*/
import "C"

// trimC gives back to the system what the C library holds of memory that is free
// within its heap: the software OpenGL leaves much of it between textures.
func trimC() { C.trim() }
