//go:build cgo && !nowindow

package window

import (
	"os"
	"path/filepath"
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/export"
	"lobewright/app/study"
)

// askPath asks for the path of a file that is there, from the folders below or
// typed; files that were opened lately stand first.
func (u *ui) askPath(title, text, now string, answer func(path string, done func(error))) {
	u.askAnyPath(title, text, now, false, answer)
}

// askNewPath asks for the path of a file that is to be written.
func (u *ui) askNewPath(title, text, now string, answer func(path string, done func(error))) {
	u.askAnyPath(title, text, now, true, answer)
}

// askAnyPath asks for a path, with completion by Tab and with the folders and
// files below it, which the arrow keys or the mouse choose.
func (u *ui) askAnyPath(title, text, now string, fresh bool, answer func(path string, done func(error))) {
	list := newChooser(u)
	remark := widget.NewLabel("")
	remark.Truncation = fyne.TextTruncateEllipsis
	remark.Importance = widget.LowImportance
	q := u.askLater(title, text, now, func(text string, done func(error)) {
		if list.at >= 0 {
			list.take()
			return
		}
		answer(expanded(strings.TrimSpace(text)), done)
	}, container.New(high{u, 200}, list.list), remark)
	goTo := func(path string) {
		q.entry.SetText(path)
		q.entry.CursorColumn = len([]rune(path))
		q.entry.Refresh()
		u.win.Canvas().Focus(q.entry)
	}
	take := func(path string) func() {
		return func() {
			list.at = -1
			goTo(path)
			if !fresh {
				answer(expanded(path), q.answered)
			}
		}
	}
	show := func(typed string) {
		folder, _ := filepath.Split(typed)
		var rows []choiceRow
		if folder == typed && !fresh {
			for _, r := range u.session.Recent() {
				if filepath.IsAbs(r) {
					rows = append(rows, choiceRow{name: filepath.Base(r), beside: say("files.recent", filepath.Dir(r)), do: take(r)})
				}
				const most = 5
				if len(rows) == most {
					break
				}
			}
		}
		if up := parent(folder); folder == typed && up != "" {
			rows = append(rows, choiceRow{name: "..", beside: up, do: func() { goTo(up) }})
		}
		for _, name := range entries(typed, fresh) {
			path := folder + name
			if strings.HasSuffix(name, "/") {
				rows = append(rows, choiceRow{name: name, beside: say("files.folder"), do: func() { goTo(path) }})
			} else {
				rows = append(rows, choiceRow{name: name, do: take(path)})
			}
		}
		list.show(rows, -1)
		remark.SetText(pathRemark(typed, fresh))
	}
	q.entry.OnChanged = func(s string) { u.guard(func() { show(s) }) }
	q.entry.move = list.move
	q.entry.tab = func() {
		u.guard(func() {
			if longer := completed(q.entry.Text); longer != q.entry.Text {
				goTo(longer)
			}
		})
	}
	show(now)
	q.fitted()
}

// pathRemark says what a typed path is.
func pathRemark(typed string, fresh bool) string {
	path := expanded(strings.TrimSpace(typed))
	info, err := os.Stat(path)
	switch {
	case path == "" || strings.HasPrefix(path, "demo:") || strings.HasPrefix(path, "ideal:"):
		return ""
	case err == nil && info.IsDir():
		return ""
	case err == nil && fresh:
		return say("files.there")
	case fresh:
		if in, err := os.Stat(filepath.Dir(path)); err != nil || !in.IsDir() {
			return say("files.noFolder")
		}
		return say("files.newFile")
	case err != nil && len(completions(typed)) == 0:
		return say("files.noFile")
	}
	return ""
}

// parent is the folder above one that is typed with a slash at its end; empty
// at the top.
func parent(folder string) string {
	if folder == "" {
		return ""
	}
	full := expanded(folder)
	up := filepath.Dir(strings.TrimSuffix(full, "/"))
	if up == full || full == "/" {
		return ""
	}
	return strings.TrimSuffix(up, "/") + "/"
}

// entries are the completions that are folders, structures or studies. Figures,
// which may carry a study, are shown once their name is begun, since there are
// folders with hundreds; where a file is to be written, only folders and files
// of the same kind as the name typed help.
func entries(typed string, fresh bool) []string {
	_, begun := filepath.Split(typed)
	if fresh {
		typed, begun = strings.TrimSuffix(typed, begun), ""
	}
	return slices.DeleteFunc(completions(typed), func(name string) bool {
		switch strings.ToLower(filepath.Ext(name)) {
		case "":
			return !strings.HasSuffix(name, "/") && begun == ""
		case ".xyz", ".txt", study.Extension:
			return false
		}
		return !strings.HasSuffix(name, "/") && !(begun != "" && export.CarriesStudy(name))
	})
}

// expanded replaces a leading ~ by the home folder and makes a path absolute;
// names such as "demo:water" stay.
func expanded(path string) string {
	if path == "" || strings.HasPrefix(path, "demo:") || strings.HasPrefix(path, "ideal:") {
		return path
	}
	if home, err := os.UserHomeDir(); err == nil && (path == "~" || strings.HasPrefix(path, "~/")) {
		path = filepath.Join(home, path[1:])
	}
	if absolute, err := filepath.Abs(path); err == nil {
		return absolute
	}
	return path
}

// completions are the entries of a folder that go on from what is typed;
// folders end in a slash and come first.
func completions(typed string) []string {
	folder, begin := filepath.Split(typed)
	in := expanded(folder)
	if folder == "" {
		in = "."
	}
	entries, err := os.ReadDir(in)
	if err != nil {
		return nil
	}
	var folders, files []string
	for _, e := range entries {
		name := e.Name()
		if !strings.HasPrefix(name, begin) || strings.HasPrefix(name, ".") && !strings.HasPrefix(begin, ".") {
			continue
		}
		isFolder := e.IsDir()
		if e.Type()&os.ModeSymlink != 0 {
			info, err := os.Stat(filepath.Join(in, name))
			isFolder = err == nil && info.IsDir()
		}
		if isFolder {
			folders = append(folders, name+"/")
		} else {
			files = append(files, name)
		}
	}
	return append(folders, files...)
}

// completed is what is typed, with what all completions go on with.
func completed(typed string) string {
	names := completions(typed)
	if len(names) == 0 {
		return typed
	}
	common := names[0]
	for _, n := range names[1:] {
		for !strings.HasPrefix(n, common) {
			common = common[:len(common)-1]
		}
	}
	folder, _ := filepath.Split(typed)
	return folder + common
}
