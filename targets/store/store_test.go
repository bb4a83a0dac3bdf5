package store

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"
)

var ctx = context.Background()

func fresh(t testing.TB) (*DB, string) {
	t.Helper()
	folder := filepath.Join(t.TempDir(), "odd 100% #1?")
	if err := os.Mkdir(folder, 0o755); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(folder, "run.db")
	d, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { d.Close() })
	return d, path
}

func insert(t testing.TB, d *DB, table string, r Row) int64 {
	t.Helper()
	var id int64
	err := d.Do(ctx, func(tx *Tx) (err error) {
		id, err = tx.Insert(table, r)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return id
}

// What was acknowledged is there after reopening, with durable settings.
func TestOpen(t *testing.T) {
	d, path := fresh(t)
	id := insert(t, d, Entries, Row{"type": "science", "target": "R Lep", "each_s": 90.5, "frames": int64(3)})
	for pragma, want := range map[string]string{"journal_mode": "delete", "synchronous": "2", "user_version": fmt.Sprint(Version)} {
		var got string
		if err := d.sql.QueryRow("PRAGMA " + pragma).Scan(&got); err != nil || got != want {
			t.Errorf("%s is %q, %v", pragma, got, err)
		}
	}
	if err := d.Close(); err != nil {
		t.Fatal(err)
	}
	e, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer e.Close()
	rows, err := e.Select(ctx, Entries, "id = ?", id)
	if err != nil || len(rows) != 1 || rows[0].Text("target") != "R Lep" || rows[0].Int("frames") != 3 {
		t.Errorf("%v, %v", rows, err)
	}
	if v, ok := rows[0].Real("each_s"); !ok || v != 90.5 {
		t.Errorf("each_s %v", v)
	}
	if err := e.Check(ctx); err != nil {
		t.Error(err)
	}
}

// Where the folder is the group's, run.db is too.
func TestGroup(t *testing.T) {
	for mode, want := range map[os.FileMode]os.FileMode{0o775: 0o020, 0o755: 0} {
		dir := t.TempDir()
		if err := os.Chmod(dir, mode); err != nil {
			t.Fatal(err)
		}
		d, err := Open(filepath.Join(dir, "run.db"))
		if err != nil {
			t.Fatal(err)
		}
		d.Close()
		info, err := os.Stat(filepath.Join(dir, "run.db"))
		if err != nil || info.Mode().Perm()&0o020 != want {
			t.Errorf("folder %v: file %v, %v", mode, info.Mode(), err)
		}
	}
}

// Ids are never used again, rows of the log never deleted, unknown columns
// and tables refused.
func TestRows(t *testing.T) {
	d, _ := fresh(t)
	first := insert(t, d, Marks, Row{"target": "a"})
	if err := d.Do(ctx, func(tx *Tx) error { return tx.Delete(Marks, "id = ?", first) }); err != nil {
		t.Fatal(err)
	}
	if second := insert(t, d, Marks, Row{"target": "b"}); second <= first {
		t.Errorf("id %d after %d", second, first)
	}
	func() {
		defer func() {
			if recover() == nil {
				t.Error("the log can be deleted from")
			}
		}()
		d.Do(ctx, func(tx *Tx) error { return tx.Delete(Entries, "1 = 1") })
	}()
	for _, f := range []func(*Tx) error{
		func(tx *Tx) error { _, err := tx.Insert(Entries, Row{"colour": "red"}); return err },
		func(tx *Tx) error { _, err := tx.Insert("wishes", Row{}); return err },
		func(tx *Tx) error { _, err := tx.Select("wishes", ""); return err },
	} {
		if d.Do(ctx, f) == nil {
			t.Error("an unknown table or column is taken")
		}
	}
	if err := d.Do(ctx, func(tx *Tx) error {
		if _, err := tx.Insert(Entries, Row{"note": "half"}); err != nil {
			return err
		}
		return errors.New("no")
	}); err == nil {
		t.Error("the error is lost")
	}
	if rows, err := d.Select(ctx, Entries, "note = 'half'"); err != nil || len(rows) != 0 {
		t.Errorf("half a transaction is there: %v, %v", rows, err)
	}
}

// Files of the schemas before are opened, brought up, and kept as copies.
func TestMigrate(t *testing.T) {
	root := filepath.Join("..", "..", "testdata", "old")
	files, err := filepath.Glob(filepath.Join(root, "run_schema*.db"))
	if err != nil || len(files) == 0 {
		t.Fatal("no old files: ", err)
	}
	for _, f := range files {
		bytes, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		path := filepath.Join(t.TempDir(), "run.db")
		if err := os.WriteFile(path, bytes, 0o644); err != nil {
			t.Fatal(err)
		}
		d, err := Open(path)
		if err != nil {
			t.Fatalf("%s: %v", f, err)
		}
		rows, err := d.Select(ctx, Entries, "")
		if err != nil || len(rows) != 2 || rows[0].Text("target") != "R Lep" || rows[1].Text("note") != "clouds from the west" {
			t.Errorf("%s: %v, %v", f, rows, err)
		}
		insert(t, d, Entries, Row{"key": "k"})
		d.Close()
		kept, err := os.ReadFile(path + ".schema1")
		if err != nil || string(kept) != string(bytes) {
			t.Errorf("%s: the copy differs or is missing: %v", f, err)
		}
	}
	// from a later program
	d, path := fresh(t)
	d.sql.Exec("PRAGMA user_version = 99")
	d.Close()
	if _, err := Open(path); !errors.Is(err, ErrNewer) {
		t.Errorf("of a later program: %v", err)
	}
	// no database at all
	path = filepath.Join(t.TempDir(), "run.db")
	os.WriteFile(path, []byte(strings.Repeat("this is no database, ", 100)), 0o644)
	if _, err := Open(path); !errors.Is(err, ErrCorrupt) {
		t.Errorf("no database: %v", err)
	}
}

func TestReadOnly(t *testing.T) {
	if os.Getuid() == 0 {
		t.Skip("root writes anywhere; the command's test mounts a read-only folder instead")
	}
	d, path := fresh(t)
	insert(t, d, Marks, Row{"target": "a"})
	d.Close()
	os.Chmod(path, 0o444)
	os.Chmod(filepath.Dir(path), 0o555)
	defer os.Chmod(filepath.Dir(path), 0o755)
	e, err := Open(path)
	if err != nil || !e.ReadOnly() {
		t.Fatal(err)
	}
	defer e.Close()
	if rows, err := e.Select(ctx, Marks, ""); err != nil || len(rows) != 1 {
		t.Errorf("%v, %v", rows, err)
	}
	if err := e.Do(ctx, func(*Tx) error { return nil }); !errors.Is(err, ErrReadOnly) {
		t.Errorf("writing: %v", err)
	}
}

// A failure at any write leaves the database as it was, and says so.
func TestFailures(t *testing.T) {
	d, _ := fresh(t)
	for n := range 20 {
		at, count := n, 0
		d.Fault(func() error {
			if count++; count == at%3+1 {
				return errors.New("this write fails")
			}
			return nil
		})
		before, _ := d.Select(ctx, Entries, "")
		acknowledged := 0
		for k := range 3 {
			if d.Do(ctx, func(tx *Tx) error { _, err := tx.Insert(Entries, Row{"note": fmt.Sprint(n, k)}); return err }) == nil {
				acknowledged++
			}
		}
		after, err := d.Select(ctx, Entries, "")
		if err != nil || len(after)-len(before) != acknowledged || acknowledged != 2 {
			t.Fatalf("%d acknowledged, %d there, %v", acknowledged, len(after)-len(before), err)
		}
	}
}

// Two writers at once, each with a connection of its own: all there, none
// twice, and each sees that the other wrote. EVENFALL_WRITES sets how many
// entries each writes (250).
func TestTwoWriters(t *testing.T) {
	a, path := fresh(t)
	b, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer b.Close()
	if changed, err := a.Changed(ctx); err != nil || !changed {
		t.Error("the first look sees no change", err)
	}
	each := 250
	if n, err := strconv.Atoi(os.Getenv("EVENFALL_WRITES")); err == nil {
		each = n
	}
	var wg sync.WaitGroup
	for w, d := range []*DB{a, b} {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for k := range each {
				if err := d.Do(ctx, func(tx *Tx) error {
					_, err := tx.Insert(Entries, Row{"note": fmt.Sprintf("%d/%d", w, k)})
					return err
				}); err != nil {
					t.Error(err)
				}
			}
		}()
	}
	wg.Wait()
	rows, err := a.Select(ctx, Entries, "")
	if err != nil || len(rows) != 2*each {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	seen := map[string]bool{}
	for _, r := range rows {
		if seen[r.Text("note")] {
			t.Errorf("%s twice", r.Text("note"))
		}
		seen[r.Text("note")] = true
	}
	if changed, err := a.Changed(ctx); err != nil || !changed {
		t.Error("what the other wrote is not noticed", err)
	}
	if changed, err := a.Changed(ctx); err != nil || changed {
		t.Error("a change is seen where there is none", err)
	}
}

// An export read into an empty database exports the same again, in both
// formats; a second import adds nothing; a contradiction is refused whole.
func TestExportImport(t *testing.T) {
	d, _ := fresh(t)
	insert(t, d, Entries, Row{"type": "note", "note": "a \"quoted\", line\nand another: ü 中", "each_s": 0.1, "frames": int64(7), "void": int64(0)})
	insert(t, d, Magnitudes, Row{"target": "R Lep", "jd": 2461377.123456789, "mag": 8.25})
	insert(t, d, Settings, Row{"name": "bell", "value": "off"})
	var one bytes.Buffer
	if err := d.ExportJSON(ctx, &one); err != nil {
		t.Fatal(err)
	}
	e, _ := fresh(t)
	for want := range 2 {
		n, err := e.ImportJSON(ctx, bytes.NewReader(one.Bytes()))
		if err != nil || n != 3*(1-want) {
			t.Errorf("import %d: %d rows, %v", want, n, err)
		}
	}
	var two bytes.Buffer
	if err := e.ExportJSON(ctx, &two); err != nil || two.String() != one.String() {
		t.Errorf("round trip: %v\n%s\n%s", err, one.String(), two.String())
	}
	f, _ := fresh(t)
	for _, table := range Names() {
		var csv, again bytes.Buffer
		if err := d.ExportCSV(ctx, table, &csv); err != nil {
			t.Fatal(err)
		}
		if _, err := f.ImportCSV(ctx, table, bytes.NewReader(csv.Bytes())); err != nil {
			t.Errorf("%s: %v", table, err)
		}
		if err := f.ExportCSV(ctx, table, &again); err != nil || again.String() != csv.String() {
			t.Errorf("%s: %v\n%s\n%s", table, err, csv.String(), again.String())
		}
	}
	changed := strings.Replace(one.String(), "R Lep", "R Leo", 1)
	if _, err := e.ImportJSON(ctx, strings.NewReader(changed)); err == nil || !strings.Contains(err.Error(), "R Leo") {
		t.Errorf("a contradiction: %v", err)
	}
	for _, bad := range []string{"", "[]", `{"tables": {"wishes": [{}]}}`, `{"tables": {"marks": [{"colour": "red"}]}}`, `{"tables": {"entries": [{"frames": "many"}]}}`, `{"schema": 99}`} {
		if _, err := e.ImportJSON(ctx, strings.NewReader(bad)); err == nil {
			t.Errorf("%q comes in", bad)
		}
	}
}

func TestNetworkKind(t *testing.T) {
	for kind, want := range map[int64]string{0x6969: "NFS", -0x10acb2be: "", 0xef53: "", 0xff534d42: "CIFS", -0x00acb2be: "CIFS"} {
		if got := networkKind("x", func(string) (int64, error) { return kind, nil }); got != want {
			t.Errorf("%#x is %q, wanted %q", kind, got, want)
		}
	}
	if got := networkKind("x", func(string) (int64, error) { return 0, errors.New("no") }); got != "" {
		t.Errorf("unknown is %q", got)
	}
	if got := NetworkKind(t.TempDir()); got != "" {
		t.Logf("the folder of the tests lies on %s", got)
	}
}

// BenchmarkTwoWriters reports the 99th percentile of an entry while another
// writes too, as a ratio to that of a plain write and sync in the same run.
func BenchmarkTwoWriters(b *testing.B) {
	a, path := fresh(b)
	other, err := Open(path)
	if err != nil {
		b.Fatal(err)
	}
	defer other.Close()
	stop := make(chan struct{})
	var wg sync.WaitGroup
	wg.Add(1)
	go func() {
		defer wg.Done()
		for {
			select {
			case <-stop:
				return
			default:
				other.Do(ctx, func(tx *Tx) error { _, err := tx.Insert(Entries, Row{"note": "other"}); return err })
			}
		}
	}()
	f, err := os.Create(filepath.Join(b.TempDir(), "plain"))
	if err != nil {
		b.Fatal(err)
	}
	defer f.Close()
	var entry, plain []time.Duration
	for range max(b.N, 500) {
		began := time.Now()
		insert(b, a, Entries, Row{"type": "science", "target": "R Lep", "each_s": 90.0})
		entry = append(entry, time.Since(began))
		began = time.Now()
		f.WriteString("science,R Lep,90\n")
		if err := f.Sync(); err != nil {
			b.Fatal(err)
		}
		plain = append(plain, time.Since(began))
	}
	close(stop)
	wg.Wait()
	slices.Sort(entry)
	slices.Sort(plain)
	p99 := func(l []time.Duration) float64 { return float64(l[len(l)*99/100].Microseconds()) }
	b.ReportMetric(p99(entry)/1000, "ms-p99")
	b.ReportMetric(p99(entry)/p99(plain), "times-plain-p99")
	b.ReportMetric(0, "ns/op")
}

// BenchmarkEntry writes entries as the log does; BenchmarkPlainSync appends
// and syncs a file, to compare with in the same run.
func BenchmarkEntry(b *testing.B) {
	d, _ := fresh(b)
	for b.Loop() {
		insert(b, d, Entries, Row{"type": "science", "target": "R Lep", "each_s": 90.0})
	}
}

func BenchmarkPlainSync(b *testing.B) {
	f, err := os.Create(filepath.Join(b.TempDir(), "plain"))
	if err != nil {
		b.Fatal(err)
	}
	defer f.Close()
	for b.Loop() {
		f.WriteString("science,R Lep,90\n")
		if err := f.Sync(); err != nil {
			b.Fatal(err)
		}
	}
}
