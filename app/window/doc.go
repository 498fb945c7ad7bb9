// Package window is the window of the program. It is the only package that
// knows the toolkit, and the only one that needs a C compiler: built without
// cgo, or with the tag nowindow, Run only says that the window is missing.
//
// # Threads
//
// The toolkit's own goroutine holds the study, its history and every widget.
// Results come from work.Service, pictures from a goroutine that draws the
// newest request (see frames); both hand over by fyne.Do, and at most one
// call of each is waiting at any time.
//
// # Parts
//
// The panes left, right and below draw themselves as one image each, by the
// same rasterizer and in the same type as figures; see board and pane. The
// picture in the middle is a viewport. All that a person does goes through
// actions, whatever widget, menu or key it comes from.
package window
