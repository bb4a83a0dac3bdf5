package main

import (
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// layers is the architecture: which folders there may be, and what each may
// import of this module. A new folder is a row here first. Tests may import
// what they like.
var layers = map[string][]string{
	"astro":                {},
	"astro/cite":           {},
	"astro/numeric":        {"astro/cite"},
	"astro/timescale":      {"astro", "astro/cite", "astro/meeusfence"},
	"astro/meeusfence":     {"astro", "astro/cite"},
	"astro/frame":          {"astro", "astro/cite", "astro/numeric", "astro/timescale", "astro/meeusfence"},
	"astro/ephem":          {"astro", "astro/cite", "astro/frame", "astro/numeric", "astro/timescale", "astro/meeusfence"},
	"astro/air":            {"astro", "astro/cite", "astro/numeric", "astro/meeusfence"},
	"astro/skyglow":        {"astro", "astro/cite", "astro/air"},
	"astro/photon":         {"astro", "astro/cite", "astro/numeric"},
	"astro/stellar":        {"astro", "astro/cite", "astro/numeric"},
	"astro/nebular":        {"astro", "astro/cite", "astro/numeric"},
	"astro/degenerate":     {"astro", "astro/cite", "astro/numeric"},
	"astro/clock":          {},
	"astro/check":          {},
	"targets":              {"astro"},
	"targets/table":        {"targets", "astro"},
	"targets/instrument":   {"targets", "astro"},
	"targets/stage":        {"targets", "targets/stage/tracks", "astro/..."},
	"targets/light":        {"targets", "targets/stage", "targets/light/wander", "astro/..."},
	"targets/exposure":     {"targets", "targets/instrument", "targets/light", "astro/..."},
	"targets/sweep":        {"targets", "astro/..."},
	"targets/stage/tracks": {"targets", "astro/..."},
	"astro/bands":          {"astro", "astro/cite", "astro/numeric"},
	"astro/elements":       {"astro", "astro/cite", "astro/numeric", "astro/timescale", "astro/frame"},
	"targets/moment": {"targets", "targets/stage", "targets/light", "targets/instrument", "targets/exposure", "targets/sweep",
		"astro/..."},
	"targets/run":     {"targets", "targets/table", "targets/instrument", "astro", "astro/timescale"},
	"targets/builtin": {"targets", "targets/table"},
	"targets/roster":  {"targets", "targets/moment", "targets/sweep", "targets/light", "targets/stage", "astro/..."},
	"targets/taking":  {"targets", "targets/exposure", "targets/finding", "targets/instrument", "targets/moment", "astro/..."},
	"targets/finding": {"targets", "targets/exposure", "astro/..."},
	"targets/store":   {},
	"targets/logbook": {"targets", "targets/store", "targets/table"},
	"targets/reckon":  {"targets", "targets/logbook", "targets/moment", "astro", "astro/timescale"},
	"targets/plan":    {"targets/...", "astro/..."},
	"targets/report":  {"targets/...", "astro/..."},
	"tui":             {"tui/...", "targets/...", "astro/..."},
	"tui/early":       {},
	"tui/kit":         {"targets/...", "astro/..."},
	"tui/term":        {},
	"tui/next":        {"tui/kit", "targets/...", "astro/..."},
	"tui/diagram":     {"tui/kit", "targets/...", "astro/..."},
	"tui/dome":        {"tui/kit", "targets/...", "astro/..."},
	"tui/finder":      {"tui/kit", "targets/...", "astro/..."},
	"tui/events":      {"tui/kit", "targets/...", "astro/..."},
	"tui/star":        {"tui/kit", "targets/...", "astro/..."},
	"tui/entry":       {"tui/kit", "targets/...", "astro/..."},
	"tui/plain":       {"tui/kit", "targets/...", "astro/..."},
	"tui/help":        {"tui/kit", "targets/...", "astro/..."},
	"tui/log":         {"tui/kit", "targets/...", "astro/..."},
	"tui/weather":     {"tui/kit", "targets/...", "astro/..."},
	"tui/check":       {"tui/desk", "tui/kit", "targets/...", "astro/..."},
	"tui/desk":        {"tui/kit", "tui/next", "tui/star", "tui/diagram", "tui/dome", "tui/finder", "tui/events", "tui/entry", "tui/plain", "tui/help", "tui/log", "tui/weather", "targets/...", "astro/..."},
	"cmd/evenfall":    {"tui/...", "targets/...", "astro/..."},

	"targets/light/wander": {"targets", "astro/..."},
	"targets/plan/order":   {},
}

// fences confine what touches the world, and what must stay behind a door.
var fences = []struct {
	path  *regexp.Regexp
	where []string
}{
	{regexp.MustCompile(`^os(/|$)`), []string{"cmd/evenfall", "targets/run", "targets/store", "astro/clock", "tui", "tui/term", "astro/check"}},
	{regexp.MustCompile(`^net(/|$)`), nil},
	{regexp.MustCompile(`^math/rand`), nil},
	{regexp.MustCompile(`^github\.com/soniakeys/`), []string{"astro/meeusfence"}},
	{regexp.MustCompile(`^github\.com/charmbracelet/bubbletea`), []string{"tui", "tui/early"}},
	{regexp.MustCompile(`^github\.com/charmbracelet/lipgloss`), []string{"tui/early", "tui/kit"}},
	{regexp.MustCompile(`^github\.com/(charmbracelet/x/ansi|muesli/termenv)`), []string{"tui/kit", "tui/check"}},
	{regexp.MustCompile(`^github\.com/charmbracelet/x/vt`), []string{"tui/check"}},
	{regexp.MustCompile(`^golang\.org/x/sys/`), []string{"tui/term", "targets/store", "astro/clock"}},
	{regexp.MustCompile(`^(modernc\.org/|database/sql)`), []string{"targets/store"}},
	{regexp.MustCompile(`^github\.com/aymanbagabas/`), []string{"tui/term"}},
	{regexp.MustCompile(`^github\.com/charmbracelet/x/term`), []string{"cmd/evenfall", "tui/term"}},
	{regexp.MustCompile(`^github\.com/spf13/`), []string{"cmd/evenfall"}},
	{regexp.MustCompile(`^github\.com/pelletier/`), []string{"targets/run"}},
	{regexp.MustCompile(`^(github\.com/creack/|pgregory\.net/)`), nil},
}

const (
	longestFunction = 80
	longestFile     = 400
)

// allowed tells whether a package may import another of this module.
func allowed(from, to string) bool {
	for _, rule := range layers[from] {
		if tree, ok := strings.CutSuffix(rule, "/..."); rule == to || ok && (to == tree || strings.HasPrefix(to, tree+"/")) {
			return true
		}
	}
	return false
}

// breach is one broken rule.
type breach struct{ at, rule string }

// survey reads every Go file below a root and lists what breaks the rules.
func survey(root string) ([]breach, error) {
	s := &surveyor{fset: token.NewFileSet(), cited: map[string]string{}, works: map[string]string{},
		named: map[string]string{}, tests: map[string]bool{}}
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && strings.HasPrefix(d.Name(), ".") && path != root {
			return filepath.SkipDir
		}
		if !strings.HasSuffix(path, ".go") {
			return nil
		}
		rel, err := filepath.Rel(root, path)
		if err != nil {
			return err
		}
		return s.file(path, filepath.ToSlash(rel))
	})
	s.citations()
	return s.found, err
}

type surveyor struct {
	fset  *token.FileSet
	found []breach
	cited map[string]string // name: where first
	works map[string]string
	named map[string]string // tests that docstrings name
	tests map[string]bool
}

func (s *surveyor) report(pos token.Pos, rel, format string, a ...any) {
	p := s.fset.Position(pos)
	s.found = append(s.found, breach{fmt.Sprintf("%s:%d:%d", rel, p.Line, p.Column), fmt.Sprintf(format, a...)})
}

var citation = regexp.MustCompile(`\bcite\.([A-Z]\w+)`)

func (s *surveyor) file(path, rel string) error {
	src, err := os.ReadFile(path)
	if err != nil {
		return err
	}
	f, err := parser.ParseFile(s.fset, path, src, parser.ParseComments)
	if err != nil {
		return err
	}
	dir := rel[:max(strings.LastIndex(rel, "/"), 0)]
	test := strings.HasSuffix(rel, "_test.go")
	if _, ok := layers[dir]; !ok {
		s.report(f.Package, rel, "folder %q is not in the table of the architecture", dir)
	}
	if n := strings.Count(string(src), "\n"); n > longestFile && !test {
		s.report(f.Package, rel, "file of %d lines, at most %d", n, longestFile)
	}
	if !test {
		s.imports(f, dir, rel)
		s.clocks(f, dir, rel)
	}
	for _, m := range citation.FindAllStringSubmatch(string(src), -1) {
		if _, ok := s.cited[m[1]]; !ok && m[1] != "Name" && m[1] != "Ref" {
			s.cited[m[1]] = rel
		}
	}
	for _, block := range checked.FindAllString(string(src), -1) {
		for _, name := range testName.FindAllString(block, -1) {
			s.named[name] = rel
		}
	}
	for _, d := range f.Decls {
		s.decl(d, dir, rel)
	}
	return nil
}

var (
	checked  = regexp.MustCompile(`// Checked:[^\n]*(\n//[^\n]*\w[^\n]*)*`)
	testName = regexp.MustCompile(`\b(Test|Fuzz|Benchmark)[A-Z]\w+`)
)

func (s *surveyor) imports(f *ast.File, dir, rel string) {
	for _, i := range f.Imports {
		path, err := strconv.Unquote(i.Path.Value)
		if err != nil {
			continue
		}
		if to, ours := strings.CutPrefix(path, "evenfall/"); ours && !allowed(dir, to) {
			s.report(i.Pos(), rel, "%s may not import %s", dir, to)
		}
		for _, fence := range fences {
			if fence.path.MatchString(path) && !slices.Contains(fence.where, dir) {
				s.report(i.Pos(), rel, "%s does not belong in %s", path, dir)
			}
		}
	}
}

// clocks looks for the time of day and for instants made by hand.
func (s *surveyor) clocks(f *ast.File, dir, rel string) {
	ast.Inspect(f, func(n ast.Node) bool {
		sel, ok := n.(*ast.SelectorExpr)
		if !ok {
			return true
		}
		pkg, ok := sel.X.(*ast.Ident)
		if !ok {
			return true
		}
		switch name := pkg.Name + "." + sel.Sel.Name; name {
		case "time.Now", "time.Since", "time.Until":
			if dir != "astro/clock" {
				s.report(sel.Pos(), rel, "%s outside astro/clock", name)
			}
		case "astro.InstantFrom", "astro.InstantOn":
			if dir != "astro/timescale" {
				s.report(sel.Pos(), rel, "%s outside astro/timescale", name)
			}
		}
		return true
	})
}

func (s *surveyor) decl(d ast.Decl, dir, rel string) {
	switch d := d.(type) {
	case *ast.FuncDecl:
		if testName.MatchString(d.Name.Name) {
			s.tests[d.Name.Name] = true
		}
		from, to := s.fset.Position(d.Pos()).Line, s.fset.Position(d.End()).Line
		if to-from+1 > longestFunction {
			s.report(d.Pos(), rel, "function %s of %d lines, at most %d", d.Name.Name, to-from+1, longestFunction)
		}
	case *ast.GenDecl:
		if dir != "astro/cite" || d.Tok != token.VAR {
			return
		}
		for _, spec := range d.Specs {
			for _, n := range spec.(*ast.ValueSpec).Names {
				if n.IsExported() {
					s.works[n.Name] = rel
				}
			}
		}
	}
}

// citations compares what is cited with what astro/cite lists, and the tests
// that docstrings name with those there are.
func (s *surveyor) citations() {
	for name, where := range s.cited {
		if _, ok := s.works[name]; !ok {
			s.found = append(s.found, breach{where, "cite." + name + " is not in astro/cite"})
		}
	}
	for name, where := range s.named {
		if !s.tests[name] {
			s.found = append(s.found, breach{where, "a docstring names the test " + name + ", which is not there"})
		}
	}
	for name, where := range s.works {
		if _, ok := s.cited[name]; !ok {
			s.found = append(s.found, breach{where, "cite." + name + " is cited nowhere"})
		}
	}
}

func TestArchitecture(t *testing.T) {
	found, err := survey("../..")
	if err != nil {
		t.Fatal(err)
	}
	for _, b := range found {
		t.Errorf("%s: %s", b.at, b.rule)
	}
}

// The top level is fixed.
func TestTopLevel(t *testing.T) {
	want := []string{".ci", ".git", ".gitignore", "DEVELOPERS.md", "LICENSE", "README.md", "astro", "cmd", "go.mod", "go.sum", "targets", "testdata", "tui"}
	entries, err := os.ReadDir("../..")
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if !slices.Contains(want, e.Name()) && e.Name() != "evenfall" {
			t.Errorf("%s at the top level", e.Name())
		}
	}
	mod, err := os.ReadFile("../../go.mod")
	if err != nil {
		t.Fatal(err)
	}
	for _, exact := range []string{"github.com/soniakeys/meeus/v3 v3.0.1", "github.com/charmbracelet/bubbletea v1.3.10", "github.com/charmbracelet/lipgloss v1.1.0", "module evenfall\n"} {
		if !strings.Contains(string(mod), exact) {
			t.Errorf("go.mod lacks %q", exact)
		}
	}
}

// Each rule catches a deliberate breach.
func TestArchitectureCatches(t *testing.T) {
	long := "func long() {\n" + strings.Repeat("\t_ = 0\n", 90) + "}\n"
	for rule, file := range map[string][2]string{
		"may not import":          {"astro/a.go", "package astro\nimport _ \"evenfall/targets\"\n"},
		"does not belong":         {"targets/light/a.go", "package light\nimport _ \"os\"\n"},
		"soniakeys":               {"targets/a.go", "package targets\nimport _ \"github.com/soniakeys/meeus/v3/solar\"\n"},
		"not in the table":        {"astro/util/a.go", "package util\n"},
		"outside astro/clock":     {"targets/a.go", "package targets\nimport \"time\"\nvar T = time.Now()\n"},
		"outside astro/timescale": {"targets/a.go", "package targets\nvar T = astro.InstantFrom\n"},
		"is not in astro/cite":    {"astro/a.go", "package astro\n// Source: [cite" + ".Nobody1900].\n"},
		"which is not there":      {"astro/a.go", "package astro\n// Checked: Te" + "stNothingAtAll.\n"},
		"is cited nowhere":        {"astro/cite/a.go", "package cite\nvar Somebody1901 = 1\n"},
		"lines, at most 80":       {"astro/a.go", "package astro\n" + long},
		"lines, at most 400":      {"astro/a.go", "package astro\n" + strings.Repeat("// more\n", 410)},
	} {
		root := t.TempDir()
		path := filepath.Join(root, filepath.FromSlash(file[0]))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(file[1]), 0o644); err != nil {
			t.Fatal(err)
		}
		found, err := survey(root)
		if err != nil {
			t.Fatal(err)
		}
		if !slices.ContainsFunc(found, func(b breach) bool { return strings.Contains(b.rule, rule) && strings.Contains(b.at, file[0]) }) {
			t.Errorf("a breach of %q was not caught: %v", rule, found)
		}
	}
}
