//go:build cgo && !nowindow

package window

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"time"

	"lobewright/app/export"
	"lobewright/app/picture"
	"lobewright/app/table"
)

// imageTool is the program that takes a PNG on its standard input and keeps it
// on the clipboard; nil if none is installed. The toolkit's own clipboard takes
// text alone.
func imageTool(getenv func(string) string, find func(string) (string, error)) []string {
	var tools [][]string
	if getenv("WAYLAND_DISPLAY") != "" {
		tools = append(tools, []string{"wl-copy", "--type", "image/png"})
	}
	if getenv("DISPLAY") != "" {
		tools = append(tools, []string{"xclip", "-selection", "clipboard", "-t", "image/png"})
	}
	for _, t := range tools {
		if path, err := find(t[0]); err == nil {
			return append([]string{path}, t[1:]...)
		}
	}
	return nil
}

// copyPicture puts the picture on the clipboard, or in a file whose path it
// says and copies. It is drawn and handed over in the background.
func (u *ui) copyPicture() {
	r := request{shown: u.view.shown, sight: u.view.sight, width: 2 * u.view.width, height: 2 * u.view.height, dpi: 2 * u.view.dpi()}
	tool := imageTool(os.Getenv, exec.LookPath)
	go func() {
		path, err := copyImage(r, tool, pictureFolder())
		u.post(func() {
			u.guard(func() {
				switch {
				case err != nil:
					u.notice = say("errors.aboutCopying", told(err))
					u.given.Update()
				case path != "":
					u.app.Clipboard().SetContent(path)
					u.remark(say("files.pictureIn", path))
				default:
					u.remark(say("files.pictureCopied"))
				}
			})
		})
	}()
}

// copyImage draws a picture and gives it to a tool; without one, or if that
// fails, it saves it in a folder and returns the path.
func copyImage(r request, tool []string, folder string) (path string, err error) {
	defer func() {
		if fault := recover(); fault != nil {
			err = errors.New(say("errors.faultHere", fmt.Sprint(fault)))
		}
	}()
	var png bytes.Buffer
	if err := drawPNG(&png, r, nil); err != nil {
		return "", err
	}
	if len(tool) > 0 {
		const patience = 5 * time.Second
		ctx, cancel := context.WithTimeout(context.Background(), patience)
		defer cancel()
		c := exec.CommandContext(ctx, tool[0], tool[1:]...)
		c.Stdin = bytes.NewReader(png.Bytes())
		if c.Run() == nil {
			return "", nil
		}
	}
	for n := 1; n < 1000; n++ {
		name := "lobewright.png"
		if n > 1 {
			name = "lobewright-" + strconv.Itoa(n) + ".png"
		}
		path = filepath.Join(folder, name)
		err = export.WriteFile(path, false, func(w io.Writer) error { _, err := w.Write(png.Bytes()); return err })
		if !errors.Is(err, export.ErrExists) {
			break
		}
	}
	return path, err
}

// drawPNG draws what a request asks for; carried is the study that goes with
// it, or nil.
func drawPNG(w io.Writer, r request, carried []byte) error {
	var live picture.Live
	f, err := live.Frame(r.shown, r.sight, r.width, r.height, r.dpi, false)
	if err != nil {
		return err
	}
	p := picture.Picture{Scene: f.Scene, Camera: f.Camera, Look: f.Look, Width: r.width, Height: r.height, Resolution: r.dpi}
	img, err := p.Draw(context.Background())
	if err != nil {
		return err
	}
	return export.EncodePNG(w, img, r.dpi, carried)
}

// pictureFolder is where a person looks for pictures.
func pictureFolder() string {
	home, err := os.UserHomeDir()
	if err != nil {
		return os.TempDir()
	}
	pictures := filepath.Join(home, "Pictures")
	if info, err := os.Stat(pictures); err == nil && info.IsDir() {
		return pictures
	}
	return home
}

// A copyTable is a table that can be copied: its name and how it is made of
// what is known; ok is false where it is not there.
type copyTable struct {
	key  string
	make func() (g table.Grid, ok bool)
}

// tables are those of the results at hand.
func (u *ui) tables() []copyTable {
	group := func(make func() table.Grid) func() (table.Grid, bool) {
		return func() (table.Grid, bool) {
			if u.state.Group == nil || u.state.Group.Fit.Setting.Infinite() {
				return table.Grid{}, false
			}
			return make(), true
		}
	}
	content := func(make func() table.Grid) func() (table.Grid, bool) {
		return func() (table.Grid, bool) {
			if u.state.Orbitals == nil || len(u.now().Basis) == 0 {
				return table.Grid{}, false
			}
			return make(), true
		}
	}
	return []copyTable{
		{"menu.tableOperations", group(func() table.Grid { return table.OperationsGrid(u.state.Group, say) })},
		{"menu.tableCharacters", group(func() table.Grid { return table.CharactersGrid(u.state.Group.Fit.Setting, say) })},
		{"menu.tableMatrices", group(func() table.Grid { return table.MatricesGrid(u.state.Group.Fit.Setting, say) })},
		{"menu.tableContent", content(func() table.Grid { return table.ContentGrid(u.state.Orbitals, say) })},
		{"menu.tableOrbitals", content(func() table.Grid { return table.OrbitalsGrid(u.state.Orbitals, say) })},
		{"menu.tableCoefficients", content(func() table.Grid { return table.CoefficientsGrid(u.state.Orbitals, say) })},
		{"ledger.theTable", u.ledgerTable},
	}
}

// formatTexts are the keys of the formats.
var formatTexts = map[table.Format]string{
	table.FormatText: "menu.formatText", table.FormatCSV: "menu.formatCSV", table.FormatMarkdown: "menu.formatMarkdown", table.FormatLaTeX: "menu.formatLaTeX",
}

// copyCommands copy each table in each format.
func (u *ui) copyCommands() []*command {
	var out []*command
	for _, t := range u.tables() {
		c := &command{key: t.key}
		for _, f := range table.Formats() {
			c.menu = append(c.menu, &command{key: formatTexts[f],
				can: func() bool { return u.state.Group != nil },
				do: func() {
					g, ok := t.make()
					if !ok {
						u.remark(say("files.noTable"))
						return
					}
					u.app.Clipboard().SetContent(g.As(f))
					u.remark(say("files.tableCopied", say(t.key), say(formatTexts[f])))
				}})
		}
		out = append(out, c)
	}
	return out
}
