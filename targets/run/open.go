package run

import (
	"fmt"
	"io/fs"
	"path"
	"sort"
	"strings"

	"evenfall/targets"
	"evenfall/targets/table"
)

// Run is a run folder that was read.
type Run struct {
	Config     *Config // nil where run.toml gives no position
	Targets    []targets.Target
	Requests   []targets.Request
	Magnitudes []targets.Magnitude
}

// Open reads a run folder.
//
// Given:
//   - fsys: the folder; name: how it is called in messages, "" or "." for the
//     working directory.
//
// Returns:
//   - what could be read, and every problem. What one file gets wrong costs
//     nothing of another.
//
// Checked: TestOpenBad, TestNewIsClean.
func Open(fsys fs.FS, name string) (*Run, []*table.Error) {
	f := &folder{fsys: fsys, prefix: strings.TrimSuffix(name, "/") + "/"}
	if name == "" || name == "." {
		f.prefix = ""
	}
	r := &Run{}
	if data, ok := f.read("run.toml", true); ok {
		c, problems := ParseConfig(data, f.prefix+"run.toml")
		r.Config = c
		f.problems = append(f.problems, problems...)
	}
	f.lists(r)
	if data, ok := f.read("requests.csv", false); ok {
		list, problems := table.ReadRequests(strings.NewReader(string(data)), f.prefix+"requests.csv")
		r.Requests = list
		f.problems = append(f.problems, problems...)
	}
	for _, file := range f.dir("magnitudes") {
		if data, ok := f.read(file, true); ok {
			list, problems := table.ReadMagnitudes(strings.NewReader(string(data)), f.prefix+file)
			r.Magnitudes = append(r.Magnitudes, list...)
			f.problems = append(f.problems, problems...)
		}
	}
	f.crossCheck(r)
	return r, f.problems
}

// Field reads the neighbours of targets, lists in the folder field: stars to
// offset from and to compare with.
//
// Returns:
//   - what could be read, and every problem; nothing where there is no such
//     folder.
//
// Checked: TestField.
func Field(fsys fs.FS, name string) ([]targets.Target, []*table.Error) {
	f := &folder{fsys: fsys, prefix: strings.TrimSuffix(name, "/") + "/"}
	if name == "" || name == "." {
		f.prefix = ""
	}
	var out []targets.Target
	for _, file := range f.dir("field") {
		if data, ok := f.read(file, true); ok {
			list, problems := table.Read(strings.NewReader(string(data)), f.prefix+file)
			out = append(out, list...)
			f.problems = append(f.problems, problems...)
		}
	}
	return out, f.problems
}

// folder is a run folder being read.
type folder struct {
	fsys     fs.FS
	prefix   string
	problems []*table.Error
}

func (f *folder) problem(at targets.Where, field, value, what, fix string, warning bool) {
	f.problems = append(f.problems, &table.Error{At: at, Field: field, Value: table.Clean(value), Problem: what, Fix: fix, Warning: warning})
}

func (f *folder) file(name string) targets.Where { return targets.Where{File: f.prefix + name} }

// read returns the content of a file; a missing one is a problem if it must be
// there.
func (f *folder) read(name string, must bool) ([]byte, bool) {
	data, err := fs.ReadFile(f.fsys, name)
	if err == nil {
		return data, true
	}
	if _, missing := fs.Stat(f.fsys, name); missing != nil && !must {
		return nil, false
	}
	f.problem(f.file(name), "", "", "cannot be read: "+err.Error(), "check that it is there and readable", false)
	return nil, false
}

// dir lists the files of a folder below the run's, in order of name; hidden
// ones and folders are passed over.
func (f *folder) dir(name string) []string {
	entries, err := fs.ReadDir(f.fsys, name)
	if err != nil {
		return nil
	}
	var files []string
	for _, e := range entries {
		if !e.IsDir() && !strings.HasPrefix(e.Name(), ".") && !strings.HasSuffix(e.Name(), "~") {
			files = append(files, path.Join(name, e.Name()))
		}
	}
	sort.Strings(files)
	return files
}

// lists reads the lists of targets.
func (f *folder) lists(r *Run) {
	files := f.dir("targets")
	for _, file := range files {
		if !strings.EqualFold(path.Ext(file), ".csv") {
			f.problem(f.file(file), "", "", "this format is not read yet", "save it as CSV", true)
			continue
		}
		if data, ok := f.read(file, true); ok {
			list, problems := table.Read(strings.NewReader(string(data)), f.prefix+file)
			r.Targets = append(r.Targets, list...)
			f.problems = append(f.problems, problems...)
		}
	}
	if len(files) == 0 {
		f.problem(f.file("targets"), "", "", "no list of targets", "put a CSV file with name, ra_deg, dec_deg in the folder targets", false)
	}
}

// crossCheck reports what does not fit together between the files.
func (f *folder) crossCheck(r *Run) {
	f.sharedNames(r)
	seen := map[string]targets.Where{}
	for i := range r.Requests {
		q := &r.Requests[i]
		if first, twice := seen[targets.Key(q.ID)]; twice {
			f.problem(q.At, "request", q.ID, "also at "+first.String(), "give each request a name of its own", false)
		}
		seen[targets.Key(q.ID)] = q.At
		if _, err := table.Match(r.Targets, q.Target); err != nil {
			f.problem(q.At, "target", q.Target, err.Error(), "name a target of the lists, by id or name", false)
		}
		if r.Config != nil {
			f.equipment(r.Config, q)
		}
	}
	for i := range r.Magnitudes {
		m := &r.Magnitudes[i]
		if _, err := table.Match(r.Targets, m.Target); err != nil {
			f.problem(m.At, "target", m.Target, err.Error(), "name a target of the lists, by id or name", true)
		}
	}
}

// sharedNames warns of names and ids that two lists share; within one list
// its reader has said so.
func (f *folder) sharedNames(r *Run) {
	for what, of := range map[string]func(*targets.Target) string{
		"id":   func(t *targets.Target) string { return t.ID },
		"name": func(t *targets.Target) string { return t.Name },
	} {
		first := map[string]targets.Where{}
		for i := range r.Targets {
			t := &r.Targets[i]
			key := targets.Key(of(t))
			if at, ok := first[key]; ok && key != "" && at.File != t.At.File {
				f.problem(t.At, what, of(t), "also at "+at.String(), "give each target a "+what+" of its own", true)
			} else if !ok {
				first[key] = t.At
			}
		}
	}
}

// equipment reports a request for an instrument, mode or band that is not
// there.
func (f *folder) equipment(c *Config, q *targets.Request) {
	if q.Instrument == "" {
		return
	}
	i, ok := c.Instrument(q.Instrument)
	if !ok {
		f.problem(q.At, "instrument", q.Instrument, "no such instrument", "use one of "+c.instrumentNames(), false)
		return
	}
	if _, ok := i.Mode(q.Mode); q.Mode != "" && !ok {
		f.problem(q.At, "mode", q.Mode, fmt.Sprintf("instrument %q has modes %s", i.Name, modeNames(i)), "use one of these or add a mode", false)
	}
	if q.Band == "" || len(i.Modes) == 0 {
		return
	}
	for k := range i.Modes {
		if m := &i.Modes[k]; m.Band == q.Band || m.Band == "" {
			return
		}
	}
	f.problem(q.At, "band", string(q.Band), fmt.Sprintf("instrument %q has modes %s", i.Name, modeNames(i)), "use one of these or add a mode", false)
}
