//go:build unix

package main

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"net"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/creack/pty"

	"evenfall/astro/clock"
	"evenfall/targets/logbook"
	"evenfall/targets/store"
)

// runFolder makes a run folder.
func runFolder(t *testing.T) string {
	t.Helper()
	dir := filepath.Join(t.TempDir(), "run")
	if status, out, err := called(t, "new", dir); status != exitDone {
		t.Fatal(out, err)
	}
	return dir
}

// called runs one call and returns its exit status, output and errors.
func called(t *testing.T, args ...string) (int, string, string) {
	t.Helper()
	var out, errs bytes.Buffer
	w := world{in: strings.NewReader(""), out: &out, err: &errs, clock: clock.Fixed{At: time.Date(2026, 12, 2, 7, 0, 0, 0, time.UTC)}, models: sharedModels}
	status := execute(w, args)
	return status, out.String(), errs.String()
}

func entries(t *testing.T, dir string, more ...string) []jsonEntry {
	t.Helper()
	status, out, errs := called(t, append([]string{"log", "--run", dir, "--format", "json"}, more...)...)
	var got jsonLog
	if err := json.Unmarshal([]byte(out), &got); status != exitDone || err != nil {
		t.Fatal(status, err, out, errs)
	}
	return got.Entries
}

// What log add is given comes back from log --format json, exactly.
func TestLogRoundTrip(t *testing.T) {
	dir := runFolder(t)
	for i, c := range []struct {
		args string
		want jsonEntry
	}{
		{"--target|R Lep|--start|2026-12-02T04:10:00.25Z|--end|2026-12-02T04:16:00Z|--frames|3|--each|90.5|--files|obs0042..obs0044|--band|V|--snr|55.5|--seeing|1.25|--grade|good|--note|a \"note\", with ü",
			jsonEntry{Type: "science", Target: "R Lep", Start: "2026-12-02T04:10:00.25Z", End: "2026-12-02T04:16:00Z", Mid: "2026-12-02T04:13:00.125Z", Frames: 3, EachS: ref(90.5), FileFirst: "obs0042", FileLast: "obs0044",
				Band: "V", SNR: ref(55.5), Seeing: ref(1.25), Grade: "good", Note: "a \"note\", with ü"}},
		{"--request|r-lep-v|--start|2026-12-02T05:00:00Z|--end|2026-12-02T05:10:00Z|--measured|8.1|--clock-offset|-0.4|--observer|observer 2",
			jsonEntry{Type: "science", Request: "r-lep-v", Target: "R Lep", Start: "2026-12-02T05:00:00Z", End: "2026-12-02T05:10:00Z", Mid: "2026-12-02T05:05:00Z", Measured: ref(8.1), ClockOffset: ref(-0.4), Observer: "observer 2"}},
		{"--type|flat|--start|2026-12-01T23:40:00Z|--frames|11|--slit|1.2|--pa|90|--extinction|0.3|--reason|other",
			jsonEntry{Type: "flat", Start: "2026-12-01T23:40:00Z", Mid: "2026-12-01T23:40:00Z", Frames: 11, Slit: ref(1.2), PA: ref(90), Extinction: ref(0.3), Reason: "other"}},
	} {
		status, out, errs := called(t, append([]string{"log", "add", "--run", dir}, strings.Split(c.args, "|")...)...)
		id, err := strconv.ParseInt(strings.TrimSuffix(out, "\n"), 10, 64)
		if status != exitDone || err != nil || id != int64(i+1) {
			t.Fatalf("%s: status %d, %q, %s", c.args, status, out, errs)
		}
		var got *jsonEntry
		for _, e := range entries(t, dir) {
			if e.ID == id {
				got = &e
			}
		}
		if got == nil {
			t.Fatalf("entry %d is not in the log", id)
		}
		if got.Target != "" && (got.AirmassMid == nil || got.MidBJD == nil || got.MoonSep == nil) {
			t.Errorf("what follows from time and target is not filled: %+v", got)
		}
		want := c.want
		want.ID, want.Entered = id, "2026-12-02T07:00:00Z"
		got.AirmassStart, got.AirmassMid, got.AirmassEnd, got.MidBJD, got.MoonAlt, got.MoonSep, got.MoonLit, got.Expect = nil, nil, nil, nil, nil, nil, nil, nil
		if c.want.Request != "" { // filled from requests.csv
			want.Programme, want.Instrument, want.Mode, want.Band = got.Programme, got.Instrument, got.Mode, got.Band
		}
		if !reflect.DeepEqual(*got, want) {
			t.Errorf("%s\ngot  %+v\nwant %+v", c.args, *got, want)
		}
	}
	if _, out, _ := called(t, "log", "--run", dir); !strings.Contains(out, "2 of 1 visits") || !strings.Contains(out, "obs0042..obs0044") {
		t.Errorf("as text:\n%s", out)
	}
	if _, out, _ := called(t, "log", "--run", dir, "--format", "csv"); strings.Count(out, "\n") != 4 {
		t.Errorf("as CSV:\n%s", out)
	}
	if n := len(entries(t, dir, "--night", "2026-12-01")); n != 3 {
		t.Errorf("%d entries in the night", n)
	}
	if n := len(entries(t, dir, "--night", "2026-12-03")); n != 0 {
		t.Errorf("%d entries in another night", n)
	}
}

func ref(v float64) *float64 { return &v }

// Amended and void entries stay in the history; closures, notes, conditions
// and magnitudes are written and have their effect.
func TestLogCommands(t *testing.T) {
	dir := runFolder(t)
	must := func(args ...string) string {
		t.Helper()
		status, out, errs := called(t, append(args, "--run", dir)...)
		if status != exitDone {
			t.Fatalf("%v: %d %s", args, status, errs)
		}
		return strings.TrimSpace(out)
	}
	one := must("log", "add", "--target", "R Lep", "--start", "2026-12-02T04:10:00Z", "--observer", "observer 1")
	two := must("log", "amend", one, "--frames", "4")
	must("log", "void", two, "--note", "wrong star")
	must("log", "note", "fog from the west")
	must("log", "closed", "--start", "2026-12-02T05:00:00Z", "--reason", "weather")
	must("log", "open", "--start", "2026-12-02T06:10:00Z")
	status, _, errs := called(t, "log", "conditions", "--run", dir, "--humidity", "0.9", "--seeing", "1.4")
	if status != exitDone || !strings.Contains(errs, "humidity 90 %") {
		t.Errorf("status %d, %q", status, errs)
	}
	must("log", "magnitude", "--target", "R Lep", "--band", "V", "--mag", "8.4", "--utc", "2026-12-01T05:00:00Z")
	now := entries(t, dir)
	if len(now) != 5 || len(entries(t, dir, "--history")) != 8 {
		t.Errorf("%d entries, %d in all", len(now), len(entries(t, dir, "--history")))
	}
	for _, e := range now {
		if e.Type == "closed" && e.End != "2026-12-02T06:10:00Z" {
			t.Errorf("closed until %q", e.End)
		}
		if e.Type == "science" && (!e.Void || e.Frames != 4 || e.Observer != "observer 1") {
			t.Errorf("%+v", e)
		}
	}
	if out := must("show", "R Lep", "--at", "2026-12-02T04:00:00Z"); !strings.Contains(out, "8.4") {
		t.Error("the magnitude entered is not heeded")
	}
	refusals(t, dir)
	// what was refused wrote nothing; what is void again counts again
	if n := len(entries(t, dir)); n != len(now) {
		t.Errorf("%d entries, were %d", n, len(now))
	}
	void := must("log", "void", must("log", "closed", "--start", "2026-12-02T03:00:00Z"))
	if _, out, _ := called(t, "list", "--run", dir, "--at", "2026-12-02T03:30:00Z"); strings.Contains(out, "closed") {
		t.Error("a closure that is void still closes")
	}
	must("log", "amend", void, "--grade", "good")
	if _, out, _ := called(t, "list", "--run", dir, "--at", "2026-12-02T03:30:00Z"); !strings.Contains(out, "closed") {
		t.Error("a closure that is void no longer does not close")
	}
	must("log", "open", "--start", "2026-12-02T03:10:00Z")
	unknown := must("log", "add", "--target", "Nova Z", "--ra", "10 23 45", "--dec=-47 12 33", "--start", "2026-12-02T04:10:00Z")
	must("log", "amend", unknown, "--grade", "good")
	if status, _, errs := called(t, "log", "add", "--lat", "1", "--lon", "1"); status != exitUsage || !strings.Contains(errs, "run folder") {
		t.Errorf("%d, %q", status, errs)
	}
	must("log", "add", "--target", "Nova X", "--ra", "10 23 45", "--dec=-47 12 33", "--start", "2026-12-02T04:10:00Z")
}

// refusals are calls that are wrong usage, each with what is said of it.
func refusals(t *testing.T, dir string) {
	t.Helper()
	for args, want := range map[string]string{
		"log add --target Nonesuch --start 2026-12-02T04:10:00Z":                                "give --ra and --dec",
		"log add --target R_Lep":                                                                "needs the time",
		"log add --target R_Lep --start noon":                                                   "not a time",
		"log add --start 2026-12-02T04:10:00Z":                                                  "needs a target",
		"log add --request nonesuch --start 2026-12-02T04:10:00Z":                               "no such request",
		"log add --target R_Lep --start 2026-12-02T04:10:00Z --grade lovely":                    "use one of",
		"log add --target R_Lep --start 2026-12-02T04:10:00Z --files a..":                       "FIRST..LAST",
		"log add --target R_Lep --start 2026-12-02T04:10:00Z --instrument nothing":              "run.toml",
		"log add --target x --ra 99 --dec high --start 2026-12-02T04:10:00Z":                    "--ra",
		"log amend 999 --frames 2":                                                              "no such entry",
		"log void 1.9":                                                                          "not the number",
		"log amend 3abc":                                                                        "not the number",
		"log add --target R_Lep --start 2026-12-02T04:10:00Z --snr inf":                         "snr",
		"log add --target R_Lep --start 2026-12-02T04:10:00Z --seeing -3":                       "seeing",
		"log add --target R_Lep --start 2026-12-02T04:10:00Z --frames 99999999":                 "frames",
		"log add --request vw-hyi-v --target R_Lep --start 2026-12-02T04:10:00Z":                "wants",
		"log magnitude --target R_Lep --band V --mag 8 --jd NaN":                                "Julian",
		"log magnitude --target R_Lep --band V --mag 8 --jd 2461000 --utc 2026-12-02T04:10:00Z": "not both",
		"log magnitude --target R_Lep --band V --mag 81":                                        "outside -2 to 25",
		"log magnitude --target R_Lep --band V --mag 8 --utc 2027-12-02T04:10:00Z":              "in the future",
		"log closed --start 2026-12-02T04:10:00Z --end 2026-12-02T03:10:00Z":                    "--end comes before",
		"log void one":                 "not the number",
		"log conditions":               "say nothing",
		"log magnitude --target R_Lep": "--band and --mag",
		"export nonesuch":              "no table",
		"export --format csv":          "one table",
		"import nonesuch.json":         "no such file",
	} {
		status, _, errs := called(t, append(strings.Fields(args), "--run", dir)...)
		if status != exitUsage || !strings.Contains(errs, want) {
			t.Errorf("%s: status %d, %q", args, status, errs)
		}
	}
}

// An export comes into a new run folder and exports the same.
func TestExportImport(t *testing.T) {
	dir, other := runFolder(t), filepath.Join(t.TempDir(), "other")
	called(t, "new", other)
	called(t, "log", "add", "--run", dir, "--target", "R Lep", "--start", "2026-12-02T04:10:00Z")
	called(t, "log", "conditions", "--run", dir, "--seeing", "1.4")
	_, out, _ := called(t, "export", "--run", dir)
	file := filepath.Join(t.TempDir(), "run.json")
	if err := os.WriteFile(file, []byte(out), 0o644); err != nil {
		t.Fatal(err)
	}
	if status, _, errs := called(t, "import", file, "--run", other); status != exitDone || !strings.Contains(errs, "3 rows") {
		t.Errorf("%d, %s", status, errs)
	}
	if _, again, _ := called(t, "export", "--run", other); again != out {
		t.Errorf("%s\n%s", out, again)
	}
	for _, bad := range []string{"{}", `{"tables": {"entries": [{"start_utc": "yesterday"}]}}`} {
		os.WriteFile(file, []byte(bad), 0o644)
		if status, _, errs := called(t, "import", file, "--run", other); status != exitRefused || !strings.Contains(errs, "nothing was taken in") {
			t.Errorf("%s: %d, %s", bad, status, errs)
		}
	}
	os.WriteFile(file, []byte(strings.Replace(out, "R Lep", "R Leo", 1)), 0o644)
	if status, _, errs := called(t, "import", file, "--run", other); status != exitRefused || !strings.Contains(errs, "nothing was taken in") {
		t.Errorf("%d, %s", status, errs)
	}
}

// writer runs the built program's log add again and again until it is killed,
// and gathers the numbers that were acknowledged.
type writer struct {
	mu    sync.Mutex
	acked map[int64]string
}

func (x *writer) run(ctx context.Context, bin, dir, name string, n int) {
	for i := range n {
		note := fmt.Sprintf("%s %d", name, i)
		cmd := exec.CommandContext(ctx, bin, "log", "note", note, "--run", dir)
		out, err := cmd.Output()
		// what was printed before the kill counts: the number is only printed
		// once the entry is on the disk
		if id, bad := strconv.ParseInt(strings.TrimSpace(string(out)), 10, 64); bad == nil {
			x.mu.Lock()
			x.acked[id] = note
			x.mu.Unlock()
		}
		if err != nil && ctx.Err() != nil {
			return
		}
	}
}

func (x *writer) verify(t *testing.T, dir string) {
	t.Helper()
	db, err := store.Open(filepath.Join(dir, "run.db"))
	if err != nil {
		t.Fatalf("unreadable: %v", err)
	}
	defer db.Close()
	if err := db.Check(context.Background()); err != nil {
		t.Fatalf("unsound: %v", err)
	}
	rows, err := db.Select(context.Background(), store.Entries, "")
	if err != nil {
		t.Fatal(err)
	}
	there := map[int64]string{}
	for _, r := range rows {
		there[r.Int("id")] = r.Text("note")
	}
	lost := 0
	for id, note := range x.acked {
		if there[id] != note {
			lost++
		}
	}
	if lost > 0 {
		t.Errorf("%d of %d acknowledged entries are lost", lost, len(x.acked))
	}
	t.Logf("%d acknowledged, %d there", len(x.acked), len(rows))
}

// Killed at random moments while it writes, the program loses no entry that
// it acknowledged, and the database stays sound. EVENFALL_KILLS sets how often
// (50).
func TestKill(t *testing.T) {
	bin, dir := built(t), runFolder(t)
	kills := 50
	if n, err := strconv.Atoi(os.Getenv("EVENFALL_KILLS")); err == nil {
		kills = n
	}
	x := &writer{acked: map[int64]string{}}
	for k := range kills {
		ctx, cancel := context.WithTimeout(context.Background(), time.Duration(20+(k*37)%180)*time.Millisecond)
		x.run(ctx, bin, dir, fmt.Sprint("kill ", k), 1000)
		cancel()
		if k%10 == 9 {
			x.verify(t, dir)
		}
	}
	x.verify(t, dir)
	if len(x.acked) == 0 {
		t.Error("nothing was ever acknowledged")
	}
}

// Two writers at once, processes of their own: all there, none twice.
func TestTwoProcesses(t *testing.T) {
	bin, dir := built(t), runFolder(t)
	x := &writer{acked: map[int64]string{}}
	var wg sync.WaitGroup
	const each = 40
	for _, name := range []string{"observer 1", "observer 2"} {
		wg.Add(1)
		go func() {
			defer wg.Done()
			x.run(context.Background(), bin, dir, name, each)
		}()
	}
	wg.Wait()
	if len(x.acked) != 2*each {
		t.Errorf("%d acknowledged of %d", len(x.acked), 2*each)
	}
	x.verify(t, dir)
}

// A full disk, a limit on the size of files and a read-only folder are said
// in words, with exit status 3, and what was there is still there.
func TestDiskTrouble(t *testing.T) {
	bin := built(t)
	dir := runFolder(t)
	called(t, "log", "note", "before", "--run", dir)
	// no file may grow beyond what it is: as on a full disk
	cmd := exec.Command("sh", "-c", "ulimit -f 1; trap '' XFSZ; "+bin+" log note after --run '"+dir+"'")
	out, err := cmd.CombinedOutput()
	if code := cmd.ProcessState.ExitCode(); err == nil || code != exitFailure || !strings.Contains(string(out), "disk") {
		t.Errorf("a full disk: status %d, %.300s", code, out)
	}
	if n := len(entries(t, dir)); n != 1 {
		t.Errorf("%d entries after a full disk", n)
	}
	if os.Getuid() == 0 {
		if exec.Command("mount", "-t", "tmpfs", "-o", "size=1m", "tmpfs", dir+"/targets").Run() == nil {
			defer exec.Command("umount", dir+"/targets").Run()
			small := filepath.Join(dir, "targets", "small")
			called(t, "new", small)
			failed := false
			for i := 0; i < 400 && !failed; i++ {
				status, _, errs := called(t, "log", "note", strings.Repeat("y", 5000), "--run", small)
				if status != exitDone {
					failed = true
					if status != exitFailure || !strings.Contains(errs, "the disk is full") {
						t.Errorf("a full disk: status %d, %s", status, errs)
					}
				}
			}
			if !failed {
				t.Error("a disk of 1 MB took 2 MB")
			}
			called(t, "log", "--run", small)
			if exec.Command("mount", "-o", "remount,ro", dir+"/targets").Run() == nil {
				if status, _, errs := called(t, "log", "note", "z", "--run", small); status != exitFailure || !strings.Contains(errs, "cannot be written") {
					t.Errorf("read-only: status %d, %s", status, errs)
				}
				if status, out, errs := called(t, "log", "--run", small); status != exitDone || !strings.Contains(out, "yyyy") {
					t.Errorf("reading a read-only log: status %d, %s", status, errs)
				}
				exec.Command("mount", "-o", "remount,rw", dir+"/targets").Run()
			}
		} else {
			t.Log("no small disk could be mounted here")
		}
	}
}

// check names a network file system, an unsound run.db and takes that nobody
// ended.
func TestCheckStore(t *testing.T) {
	dir := runFolder(t)
	called(t, "log", "note", "x", "--run", dir)
	if _, out, _ := called(t, "check", "--run", dir); !strings.Contains(out, "sound, 1 row of the log") || strings.Contains(out, "lies on") {
		t.Errorf("%s", out)
	}
	networkKind = func(string) string { return "NFS" }
	defer func() { networkKind = store.NetworkKind }()
	if status, out, _ := called(t, "check", "--run", dir); status != exitDone || !strings.Contains(out, "lies on NFS; keep the run folder on a local disk") {
		t.Errorf("%d %s", status, out)
	}
	db, err := store.Open(filepath.Join(dir, "run.db"))
	if err != nil {
		t.Fatal(err)
	}
	b := logbook.Open(db, func() time.Time { return time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC) }, "observer 1")
	if _, err := b.Begin(context.Background(), logbook.Take{Target: "R Lep", Phase: logbook.Exposing, Done: -1}, false); err != nil {
		t.Fatal(err)
	}
	db.Close()
	if _, out, _ := called(t, "check", "--run", dir); !strings.Contains(out, "R Lep by observer 1") {
		t.Errorf("%s", out)
	}
	if err := os.WriteFile(filepath.Join(dir, "run.db"), []byte(strings.Repeat("no database ", 200)), 0o644); err != nil {
		t.Fatal(err)
	}
	for _, args := range []string{"check", "log", "list"} {
		if status, _, errs := called(t, args, "--run", dir); status != exitFailure || !strings.Contains(errs, "no sound database") {
			t.Errorf("%s: %d %s", args, status, errs)
		}
	}
}

// The link drops while somebody types, again and again, over a real sshd: the
// draft is there, at most a second or so old, the log is whole, and no program
// is left. EVENFALL_DROPS sets how often (5).
func TestDroppedLink(t *testing.T) {
	bin, dir := built(t), runFolder(t)
	drops := 5
	if n, err := strconv.Atoi(os.Getenv("EVENFALL_DROPS")); err == nil {
		drops = n
	}
	link := sshd(t)
	notes := 0
	for k := range drops {
		s := &screen{t: t, ended: make(chan error, 1), cmd: link("cd '" + dir + "' && TERM=xterm-256color exec " + bin + " --observer 'observer 1'")}
		tty, err := pty.StartWithSize(s.cmd, &pty.Winsize{Rows: 24, Cols: 80})
		if err != nil {
			t.Fatal(err)
		}
		s.tty = tty
		go s.read()
		go func() { s.ended <- s.cmd.Wait() }()
		s.see("idle", 20*time.Second)
		if k > 0 {
			s.see("Nova", 10*time.Second) // what the drop before left, on the screen that was up
		}
		s.press("\x1b")
		time.Sleep(200 * time.Millisecond)
		s.press(fmt.Sprintf("oround %d\r", k))
		s.see("saved: note", 10*time.Second)
		notes++
		s.press("a")
		s.see("a new target", 10*time.Second)
		s.press("\x15") // a fresh name
		time.Sleep(100 * time.Millisecond)
		name := fmt.Sprintf("Nova %d", k)
		s.press(name)
		time.Sleep(time.Duration(1300+(k*173)%700) * time.Millisecond)
		s.press(" and more")
		s.cmd.Process.Kill() // the link drops
		<-s.ended
		tty.Close()
		waitGone(t, dir)
		db, err := store.Open(filepath.Join(dir, "run.db"))
		if err != nil {
			t.Fatal(err)
		}
		b := logbook.Open(db, time.Now, "")
		if err := db.Check(context.Background()); err != nil {
			t.Error(err)
		}
		list, err := b.Entries(context.Background(), time.Time{}, time.Time{})
		if err != nil || len(list) != notes {
			t.Errorf("drop %d: %d entries of %d, %v", k, len(list), notes, err)
		}
		drafts, err := db.Select(context.Background(), store.Drafts, "screen = ?", "new target")
		if err != nil || len(drafts) == 0 || !strings.Contains(drafts[len(drafts)-1].Text("detail"), name) {
			t.Errorf("drop %d: the draft is %v, %v", k, drafts, err)
		}
		db.Close()
	}
}

// waitGone waits until no program of the tests works in a folder.
func waitGone(t *testing.T, dir string) {
	t.Helper()
	for end := time.Now().Add(10 * time.Second); ; time.Sleep(50 * time.Millisecond) {
		alive := false
		links, _ := filepath.Glob("/proc/[0-9]*/cwd")
		for _, l := range links {
			if at, err := os.Readlink(l); err == nil && at == dir {
				alive = true
			}
		}
		if !alive {
			return
		}
		if time.Now().After(end) {
			t.Fatal("a program is left 10 s after its link dropped")
		}
	}
}

// sshd starts a private server on loopback and returns what makes a call over
// it.
func sshd(t *testing.T) func(command string) *exec.Cmd {
	t.Helper()
	if _, err := os.Stat("/usr/sbin/sshd"); err != nil {
		t.Skip("no sshd on this machine")
	}
	dir := t.TempDir()
	for _, k := range []string{"host", "key"} {
		if out, err := exec.Command("ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-f", filepath.Join(dir, k)).CombinedOutput(); err != nil {
			t.Skipf("no keys: %v %s", err, out)
		}
	}
	os.MkdirAll("/run/sshd", 0o755)
	listener, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	port := fmt.Sprint(listener.Addr().(*net.TCPAddr).Port)
	listener.Close()
	config := "Port " + port + "\nListenAddress 127.0.0.1\nHostKey " + dir + "/host\nAuthorizedKeysFile " + dir + "/key.pub\nStrictModes no\nUsePAM no\nPasswordAuthentication no\nPermitRootLogin prohibit-password\nPidFile none\n"
	if err := os.WriteFile(filepath.Join(dir, "config"), []byte(config), 0o600); err != nil {
		t.Fatal(err)
	}
	server := exec.Command("/usr/sbin/sshd", "-D", "-f", filepath.Join(dir, "config"), "-E", filepath.Join(dir, "log"))
	if err := server.Start(); err != nil {
		t.Skip("sshd does not start: ", err)
	}
	t.Cleanup(func() { server.Process.Kill(); server.Wait() })
	for range 100 {
		if c, err := net.Dial("tcp", "127.0.0.1:"+port); err == nil {
			c.Close()
			break
		}
		time.Sleep(50 * time.Millisecond)
	}
	return func(command string) *exec.Cmd {
		return exec.Command("ssh", "-tt", "-p", port, "-i", filepath.Join(dir, "key"), "-o", "IdentitiesOnly=yes", "-o", "StrictHostKeyChecking=no",
			"-o", "UserKnownHostsFile=/dev/null", "-o", "LogLevel=ERROR", "127.0.0.1", command)
	}
}
