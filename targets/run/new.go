package run

import (
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
)

//go:embed template
var template embed.FS

// Place is where a new run observes from.
type Place struct {
	Name           string
	LatDeg, LonDeg float64 // north and east positive
	ElevM          float64
	Zone           string // IANA name
}

// ErrExists says that a folder already holds a run or other files.
var ErrExists = errors.New("is not empty; nothing was written: choose a new name, or remove what is there")

// New makes a run folder with a commented run.toml, an example list and
// example requests. It writes over nothing.
//
// Given:
//   - dir: made if it is not there; an empty folder will do.
//   - p: the site; the zero value stands for one to be filled in.
//
// Checked: TestNewIsClean.
func New(dir string, p Place) error {
	if entries, err := os.ReadDir(dir); err == nil && len(entries) > 0 {
		return fmt.Errorf("%q %w", dir, ErrExists)
	} else if err != nil && !errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("looking into %q: %w", dir, err)
	}
	return fs.WalkDir(template, "template", func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		target := filepath.Join(dir, strings.TrimPrefix(path, "template"))
		if d.IsDir() {
			return os.MkdirAll(target, 0o775)
		}
		data, err := template.ReadFile(path)
		if err != nil {
			return err
		}
		if d.Name() == "run.toml" {
			data = []byte(fill(string(data), p))
		}
		return write(target, data)
	})
}

// write makes a file that must not be there yet.
func write(name string, data []byte) error {
	f, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o664)
	if err != nil {
		return err
	}
	if _, err := f.Write(data); err != nil {
		f.Close()
		return err
	}
	if err := f.Sync(); err != nil {
		f.Close()
		return err
	}
	return f.Close()
}

// fill puts the site into the template.
func fill(text string, p Place) string {
	title := "My run"
	if p.Name == "" {
		p = Place{Name: "my observatory", Zone: "UTC"}
	} else {
		title = "Run at " + p.Name
	}
	if p.Zone == "" {
		p.Zone = "UTC"
	}
	num := func(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }
	return strings.NewReplacer("@TITLE@", quoted(title), "@NAME@", quoted(p.Name), "@LAT@", num(p.LatDeg), "@LON@", num(p.LonDeg),
		"@ELEV@", num(p.ElevM), "@ZONE@", quoted(p.Zone)).Replace(text)
}

// quoted keeps a name from breaking out of its quotes.
func quoted(s string) string {
	return strings.NewReplacer(`\`, `\\`, `"`, `\"`).Replace(s)
}
