package cite

import (
	"go/ast"
	"go/parser"
	"go/token"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestString(t *testing.T) {
	for _, c := range []struct {
		ref  Ref
		want string
	}{
		{KrisciunasSchaefer1991, "Krisciunas & Schaefer 1991, PASP 103, 1033"},
		{USNOAlmanac, "US Naval Observatory, Astronomical Applications Department, Washington"},
		{Ref{Authors: "A", Year: 1900}, "A 1900"},
		{Ref{Where: "DIO 12, 3"}, "DIO 12, 3"},
		{Ref{}, ""},
	} {
		if got := c.ref.String(); got != c.want {
			t.Errorf("String() = %q, want %q", got, c.want)
		}
	}
}

func TestFull(t *testing.T) {
	got := KastenYoung1989.Full()
	want := "Kasten & Young 1989, Appl. Opt. 28, 4735: Revised optical air mass tables and approximation formula, doi:10.1364/AO.28.004735"
	if got != want {
		t.Errorf("Full() = %q, want %q", got, want)
	}
	if !(Ref{}).IsZero() || KastenYoung1989.IsZero() {
		t.Error("IsZero tells works from nothing")
	}
}

// TestWorks reads this folder's own declarations: every work says who, where
// and what, on one line, and no work and no DOI stands twice.
func TestWorks(t *testing.T) {
	seen := map[string]string{}
	n := 0
	for name, fields := range works(t) {
		n++
		for _, f := range []string{"Authors", "Title", "Where"} {
			if fields[f] == "" {
				t.Errorf("%s: no %s", name, f)
			}
		}
		for f, v := range fields {
			if strings.ContainsAny(v, "\n\t") || v != strings.TrimSpace(v) {
				t.Errorf("%s: %s %q is not one clean line", name, f, v)
			}
		}
		if doi := fields["DOI"]; doi != "" && !strings.HasPrefix(doi, "10.") {
			t.Errorf("%s: DOI %q; write it from its 10. on", name, doi)
		}
		for _, key := range []string{fields["DOI"], fields["Authors"] + fields["Title"]} {
			if other, twice := seen[key]; twice && key != "" {
				t.Errorf("%s is %s again", name, other)
			}
			seen[key] = name
		}
	}
	if n < 30 {
		t.Errorf("only %d works were found", n)
	}
}

// works returns the fields of every exported work by its name.
func works(t *testing.T) map[string]map[string]string {
	t.Helper()
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]map[string]string{}
	for _, file := range files {
		src, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		tree, err := parser.ParseFile(token.NewFileSet(), file, src, 0)
		if err != nil {
			t.Fatal(err)
		}
		ast.Inspect(tree, func(n ast.Node) bool {
			v, ok := n.(*ast.ValueSpec)
			if !ok || len(v.Values) != 1 || !v.Names[0].IsExported() {
				return true
			}
			if lit, ok := v.Values[0].(*ast.CompositeLit); ok {
				out[v.Names[0].Name] = texts(lit)
			}
			return false
		})
	}
	return out
}

// texts returns the string fields of a composite literal.
func texts(lit *ast.CompositeLit) map[string]string {
	out := map[string]string{}
	for _, e := range lit.Elts {
		kv, ok := e.(*ast.KeyValueExpr)
		if !ok {
			continue
		}
		if s, ok := kv.Value.(*ast.BasicLit); ok {
			out[kv.Key.(*ast.Ident).Name] = strings.Trim(s.Value, "\"`")
		}
	}
	return out
}
