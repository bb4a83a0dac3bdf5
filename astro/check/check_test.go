package check

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

const good = `# what: airmass by zenith distance
# source: Kasten & Young 1989,
#   Appl. Opt. 28, 4735
# columns: z[deg, from the zenith] x[1] note
# tolerance: 5e-4, half a unit of the last printed digit
z,x,note
60,1.9943,"printed, twice"
# a remark between rows
85, 10.306 ,
`

func TestParse(t *testing.T) {
	r, err := parse(strings.NewReader(good), "airmass.csv", layout{})
	if err != nil {
		t.Fatal(err)
	}
	if r.Len() != 2 || len(r.Rows()) != 2 {
		t.Fatalf("%d rows, want 2", r.Len())
	}
	if got := r.Head("source"); got != "Kasten & Young 1989, Appl. Opt. 28, 4735" {
		t.Errorf("a header line is continued: got %q", got)
	}
	second := r.Rows()[1]
	second.t = t
	if got := second.Float("x"); got != 10.306 {
		t.Errorf("x = %v", got)
	}
	if got := second.Where(); got != "airmass.csv:9" {
		t.Errorf("place = %q", got)
	}
	if !second.Empty("note") || second.String("z") != "85" || !r.Has("note") || r.Has("no") {
		t.Error("cells are found by the column's name")
	}
}

func TestRefusals(t *testing.T) {
	without := func(line string) string {
		var out []string
		for l := range strings.SplitSeq(good, "\n") {
			if !strings.HasPrefix(l, line) {
				out = append(out, l)
			}
		}
		return strings.Join(out, "\n")
	}
	for _, c := range []struct{ text, want string }{
		{without("# what"), "# what"},
		{without("# columns"), "# columns"},
		{without("# tolerance"), "# tolerance"},
		{strings.Replace(good, "# source: Kasten & Young 1989,\n#   Appl. Opt. 28, 4735\n", "", 1), "# source:` or `# made by"},
		{strings.Replace(good, "x[1]", "y[1]", 1), `column 2 as "y"`},
		{strings.Replace(good, "x[1] ", "", 1), "the header describes 2"},
		{strings.Replace(good, "z,x,note", "z,z,note", 1), "a name of its own"},
		{good[:strings.Index(good, "60,")], "no rows"},
		{good[:strings.Index(good, "z,x")], "no line of column names"},
		{"z,x\n1,2\n", "no header"},
		{"", "no header"},
		{good + "1,2\n", "wrong number of fields"},
	} {
		_, err := parse(strings.NewReader(c.text), "t.csv", layout{})
		if err == nil || !strings.Contains(err.Error(), c.want) || !strings.HasPrefix(err.Error(), "t.csv") {
			t.Errorf("error %v, want one in t.csv with %q", err, c.want)
		}
	}
}

func TestPlainComments(t *testing.T) {
	const text = "# Star reference table. Made with care: dUT1 = 0\na,b\n1,2\n"
	if _, err := parse(strings.NewReader(text), "t.csv", layout{}); err == nil {
		t.Error("free text passed for a header")
	}
	var l layout
	PlainComments(&l)
	r, err := parse(strings.NewReader(text), "t.csv", l)
	if err != nil || r.Len() != 1 {
		t.Errorf("plain comments: %v", err)
	}
	if _, err := parse(strings.NewReader("a,b\n1,2\n"), "t.csv", l); err == nil {
		t.Error("a table that says nothing passed")
	}
}

func TestMadeBy(t *testing.T) {
	text := strings.Replace(good, "# source", "# made by", 1)
	if _, err := parse(strings.NewReader(text), "t.csv", layout{}); err != nil {
		t.Error(err)
	}
}

// witness stands in for a test, and notes how it would have ended.
type witness struct {
	testing.TB
	failed, ended, skipped string
}

func (w *witness) Helper() {}
func (w *witness) Errorf(f string, a ...any) {
	w.failed += fmt.Sprintf(f, a...)
}
func (w *witness) Fatalf(f string, a ...any) {
	w.ended += fmt.Sprintf(f, a...)
	runtime.Goexit()
}
func (w *witness) Fatal(a ...any) {
	w.ended += fmt.Sprint(a...)
	runtime.Goexit()
}
func (w *witness) Skipf(f string, a ...any) {
	w.skipped += fmt.Sprintf(f, a...)
	runtime.Goexit()
}

// watch runs f as a test would be run.
func watch(f func(testing.TB)) *witness {
	w := &witness{}
	done := make(chan struct{})
	go func() {
		defer close(done)
		f(w)
	}()
	<-done
	return w
}

func TestNear(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		got, want, tol float64
		near           bool
	}{
		{1, 1, 0, true}, {1, 1.1, 0.2, true}, {1, 1.1, 0.05, false}, {-1, 1, 1, false},
		{nan, 1, 9, false}, {nan, nan, 9, false}, {1, nan, 9, false}, {1, 2, nan, false},
		{math.Inf(1), math.Inf(1), 0, true}, {math.Inf(1), math.Inf(-1), 9, false},
	} {
		w := watch(func(tb testing.TB) { Near(tb, c.got, c.want, c.tol, "case %d", 7) })
		if (w.failed == "") != c.near {
			t.Errorf("Near(%v, %v, %v): %q", c.got, c.want, c.tol, w.failed)
		}
		if !c.near && !strings.HasPrefix(w.failed, "case 7: got ") {
			t.Errorf("message %q does not begin with what was checked", w.failed)
		}
	}
}

func TestCellsEndTheTest(t *testing.T) {
	r, err := parse(strings.NewReader(good), "airmass.csv", layout{})
	if err != nil {
		t.Fatal(err)
	}
	for column, want := range map[string]string{"note": "airmass.csv:7: column note", "nothing": `no column "nothing"`} {
		w := watch(func(tb testing.TB) {
			row := r.Rows()[0]
			row.t = tb
			row.Float(column)
		})
		if !strings.Contains(w.ended, want) {
			t.Errorf("column %s: ended with %q, want %q", column, w.ended, want)
		}
	}
}

func TestTableFromDisk(t *testing.T) {
	path := filepath.Join(t.TempDir(), "t.csv")
	if err := os.WriteFile(path, []byte(good), 0o600); err != nil {
		t.Fatal(err)
	}
	if got := Table(t, path).Rows()[0].Float("z"); got != 60 {
		t.Errorf("z = %v", got)
	}
	w := watch(func(tb testing.TB) { Table(tb, "testdata/no/such.csv") })
	if !strings.Contains(w.ended, "testdata/no/such.csv") {
		t.Errorf("a missing table ended with %q", w.ended)
	}
}

func TestRoot(t *testing.T) {
	root := Root(t)
	text, err := os.ReadFile(filepath.Join(root, "go.mod"))
	if err != nil || !strings.HasPrefix(string(text), "module evenfall") {
		t.Errorf("%s is not the root: %v", root, err)
	}
	if _, err := rootAbove(string(filepath.Separator)); err == nil {
		t.Error("a folder without go.mod above it has a root")
	}
}

func TestShared(t *testing.T) {
	w := watch(func(tb testing.TB) { Shared(tb, "no/such.csv") })
	if !strings.Contains(w.skipped, "../shared/no/such.csv") {
		t.Errorf("an absent reference is skipped with words: %q", w.skipped)
	}
}
