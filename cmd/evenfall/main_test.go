package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"
	"unicode"

	"evenfall/astro/check"
	"evenfall/astro/clock"
	"evenfall/targets"
	"evenfall/targets/moment"
)

var fixed = clock.Fixed{At: time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC)}

// fieldModels are made once for all calls; those of other populations anew.
var fieldModels = sync.OnceValue(moment.NewModels)

func sharedModels(p targets.Population) moment.Models {
	if p == targets.PopulationField {
		return fieldModels()
	}
	return moment.NewModelsFor(p)
}

// result is what a call printed and how it ended.
type result struct {
	out, err string
	code     int
}

// call runs the program in this process.
func call(stdin string, args ...string) result {
	var out, err bytes.Buffer
	w := world{in: strings.NewReader(stdin), out: &out, err: &err, clock: fixed, models: sharedModels}
	code := execute(w, args)
	return result{out.String(), err.String(), code}
}

var site = []string{"--lat", "-29.26", "--lon", "-70.73", "--elev", "2400"}

func at(args ...string) []string {
	return append(append([]string{}, args...), append(site, "--at", "2026-12-02T04:00:00Z")...)
}

// The examples of the README print what it says they print.
func TestReadmeExamples(t *testing.T) {
	data, err := os.ReadFile(filepath.Join(check.Root(t), "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	parts := strings.Split(string(data), "<!-- example -->\n```sh\n")
	if len(parts) < 4 {
		t.Fatalf("%d examples", len(parts)-1)
	}
	t.Chdir(check.Root(t))
	for _, p := range parts[1:] {
		command, rest, ok := strings.Cut(p, "\n```\n```\n")
		want, _, ok2 := strings.Cut(rest, "```")
		if !ok || !ok2 {
			t.Fatalf("an example without its output: %.60q", p)
		}
		args := words(command)
		if args[0] != "evenfall" {
			t.Fatalf("example %q", command)
		}
		got := call("", args[1:]...)
		if got.out != want || got.code != 0 {
			t.Errorf("%s\nexit %d %s\n--- prints\n%s--- README has\n%s", command, got.code, got.err, got.out, want)
		}
	}
}

// words splits a command at blanks outside quotes.
func words(s string) []string {
	var out []string
	quoted := false
	for _, f := range strings.FieldsFunc(s, func(r rune) bool {
		if r == '"' {
			quoted = !quoted
		}
		return unicode.IsSpace(r) && !quoted
	}) {
		out = append(out, strings.Trim(f, `"`))
	}
	return out
}

// decode reads JSON into maps.
func decode(t *testing.T, text string) map[string]any {
	t.Helper()
	var v map[string]any
	if err := json.Unmarshal([]byte(text), &v); err != nil {
		t.Fatalf("%v in %.300s", err, text)
	}
	return v
}

func has(t *testing.T, where string, m map[string]any, keys string) {
	t.Helper()
	for _, k := range strings.Fields(keys) {
		if _, ok := m[k]; !ok {
			t.Errorf("%s lacks %s", where, k)
		}
	}
}

// Every key that the contract names for list and show is there, of the 256.
func TestListJSON(t *testing.T) {
	r := call("", at("list", "--format", "json")...)
	if r.code != 0 || r.err != "" {
		t.Fatalf("exit %d: %s", r.code, r.err)
	}
	v := decode(t, r.out)
	has(t, "list", v, "site at_utc at_jd lst_h sun moon targets")
	has(t, "site", v["site"].(map[string]any), "name lat_deg lon_deg elev_m")
	has(t, "moon", v["moon"].(map[string]any), "az_deg alt_deg distance_km illuminated phase_angle_deg")
	list := v["targets"].([]any)
	if len(list) != 256 {
		t.Fatalf("%d targets", len(list))
	}
	for place, e := range list {
		x := e.(map[string]any)
		name := fmt.Sprint(x["name"])
		has(t, name, x, "id name kind ra_deg dec_deg apparent_ra_deg apparent_dec_deg az_deg alt_deg alt_refracted_deg ha_h parallactic_deg airmass "+
			"moon_sep_deg sun_sep_deg rv_correction_kms bjd_tdb stage expect can should blocked_by rank unconfirmed")
		has(t, name, x["expect"].(map[string]any), "mag lo hi level basis")
		sum := 0.0
		for _, p := range x["stage"].(map[string]any)["p"].(map[string]any) {
			sum += p.(float64)
		}
		check.Near(t, sum, 1, 1e-9, "stage probabilities of %s", name)
		blocked := len(x["blocked_by"].([]any)) > 0
		if blocked != (x["rank"] == nil) || !blocked && x["rank"].(float64) != float64(place+1) {
			t.Errorf("%s at place %d: rank %v, blocked %v", name, place, x["rank"], blocked)
		}
	}
}

func TestShow(t *testing.T) {
	r := call("", at("show", "r_lep", "--format", "json")...)
	v := decode(t, r.out)
	has(t, "show", v, "name derived steps listed handover stage expect")
	for _, s := range v["steps"].([]any) {
		has(t, "step", s.(map[string]any), "what formula inputs result source")
	}
	list := decode(t, call("", at("list", "--format", "json")...).out)["targets"].([]any)
	for _, e := range list {
		if x := e.(map[string]any); x["id"] == "r-lep" {
			for _, k := range []string{"alt_deg", "az_deg", "bjd_tdb", "best_utc", "rank", "moon_sep_deg"} {
				if fmt.Sprint(x[k]) != fmt.Sprint(v[k]) {
					t.Errorf("%s: list has %v, show %v", k, x[k], v[k])
				}
			}
		}
	}
	text := call("", at("show", "R Lep")...)
	for _, want := range []string{"hour angle", "unconfirmed", "workings", "source:", "what it is: TPAGB", "expected brightness", "not for the telescope"} {
		if !strings.Contains(text.out, want) {
			t.Errorf("show lacks %q", want)
		}
	}
	if r := call("", at("show", "40 Eri B", "--handover")...); strings.Count(r.out, "\n") > 4 || !strings.Contains(r.out, "ICRS") {
		t.Errorf("hand-over lines:\n%s", r.out)
	}
}

func TestAlmanacJSON(t *testing.T) {
	r := call("", "almanac", "--lat", "69", "--lon", "19", "--night", "2026-06-20", "--until", "2026-06-21", "--format", "json")
	v := decode(t, r.out)
	nights := v["nights"].([]any)
	if len(nights) != 2 {
		t.Fatalf("%d nights", len(nights))
	}
	n := nights[0].(map[string]any)
	has(t, "night", n, "night sunset_utc sunrise_utc civil nautical astronomical sun sun_lowest_deg sun_highest_deg moon illuminated_at_midnight dark_hours_h night_hours_h")
	if n["sun"] != "never_sets" || n["sunset_utc"] != nil || n["civil"].(map[string]any)["dusk_utc"] != nil || n["dark_hours_h"].(float64) != 0 {
		t.Errorf("midnight Sun: %v", n)
	}
	has(t, "moon", n["moon"].(map[string]any), "rise_utc set_utc")
}

func TestExitStatus(t *testing.T) {
	dir := t.TempDir()
	bad := filepath.Join(dir, "bad.csv")
	if err := os.WriteFile(bad, []byte("name,ra_deg,dec_deg,V\nR Lep,74.9,-14.8,8\nX,10,95,9\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		args      []string
		code      int
		err, out_ string
	}{
		{at("list", "--targets", bad), 1, "bad.csv:3:6: dec \"95\": beyond the pole", "R Lep"},
		{at("list", "--targets", "nowhere.csv"), 2, "no such file", ""},
		{[]string{"list", "--lat", "10"}, 2, "needs both --lat and --lon", ""},
		{[]string{"list", "--lat", "95", "--lon", "0"}, 2, "beyond the pole", ""},
		{[]string{"list", "--lat", "1", "--lon", "0", "--at", "tonight"}, 2, "not a time", ""},
		{[]string{"list", "--lat", "1", "--lon", "0", "--at", "1700-01-01T00:00:00Z"}, 2, "1860 to 2150", ""},
		{at("list", "--level", "80"), 2, "between 0 and 1", ""},
		{at("list", "--band", "Q"), 2, "not a band", ""},
		{at("list", "--format", "xml"), 2, "use one of text, json, csv", ""},
		{at("list", "--sort", "colour"), 2, "use one of", ""},
		{at("list", "extra"), 2, "takes no \"extra\"", ""},
		{at("show", "R Lepp"), 2, "did you mean \"R Lep\"", ""},
		{[]string{"lst"}, 2, "did you mean list", ""},
		{[]string{"list", "--wrong"}, 2, "unknown flag", ""},
		{[]string{"new"}, 2, "wants the name of the folder", ""},
		{[]string{"new", dir}, 2, "nothing was written", ""},
		{[]string{"new", filepath.Join(bad, "x")}, 3, "", ""},
		{[]string{"check", "--run", dir}, 2, "has no run.toml", ""},
		{[]string{"almanac", "--lat", "1", "--lon", "0", "--night", "2026-12-05", "--until", "2026-12-01"}, 2, "comes before", ""},
		{[]string{"version"}, 0, "", "built-in stars: 256"},
		{[]string{"--help"}, 0, "", "Caution"},
		{[]string{"completion", "bash"}, 0, "", "evenfall"},
	} {
		r := call("", c.args...)
		if r.code != c.code || !strings.Contains(r.err, c.err) || !strings.Contains(r.out, c.out_) {
			t.Errorf("%v: exit %d, want %d\nstderr %s\nstdout %.200s", c.args, r.code, c.code, r.err, r.out)
		}
		if c.code == 2 && r.out != "" {
			t.Errorf("%v: a usage error prints on standard output: %.200s", c.args, r.out)
		}
	}
}

func TestListFromStandardInput(t *testing.T) {
	r := call("name,ra_deg,dec_deg,V\nalpha\x1b[2J,60,-30,9\nbeta,61,-31,10\n", at("list", "--targets", "-", "--format", "csv")...)
	if r.code != 0 || strings.Count(r.out, "\n") != 3 || strings.Contains(r.out, "\x1b") {
		t.Errorf("exit %d %s\n%q", r.code, r.err, r.out)
	}
}

func TestListSorted(t *testing.T) {
	up := call("", at("list", "--sort", "alt", "--format", "csv")...)
	down := call("", at("list", "--sort", "-alt", "--format", "csv")...)
	a, b := strings.Split(strings.TrimSpace(up.out), "\n"), strings.Split(strings.TrimSpace(down.out), "\n")
	if a[1] != b[len(b)-1] || a[len(a)-1] != b[1] {
		t.Errorf("-alt is not alt reversed:\n%s\n%s", a[1], b[len(b)-1])
	}
}

// Text never runs wider than the terminal.
func TestWidth(t *testing.T) {
	for _, width := range []int{80, 120, 200} {
		var out bytes.Buffer
		w := world{in: strings.NewReader(""), out: &out, err: &bytes.Buffer{}, clock: fixed, width: width, models: sharedModels}
		if code := execute(w, at("list")); code != 0 {
			t.Fatalf("exit %d", code)
		}
		for _, line := range strings.Split(out.String(), "\n") {
			if n := len([]rune(line)); n > width {
				t.Errorf("width %d: %d characters in %q", width, n, line)
			}
		}
	}
}

func TestNewCheckReadList(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	if r := call("", "new", dir, "--site", "La Silla"); r.code != 0 {
		t.Fatalf("new: exit %d %s", r.code, r.err)
	}
	if r := call("", "check", "--run", dir); r.code != 0 || !strings.Contains(r.out, "0 errors, 0 warnings") {
		t.Errorf("check: exit %d\n%s%s", r.code, r.out, r.err)
	}
	if r := call("", "list", "--run", dir); r.code != 0 || !strings.Contains(r.out, "La Silla") || strings.Contains(r.out, "DEMO") {
		t.Errorf("list: exit %d\n%s%s", r.code, r.out, r.err)
	}
	list := filepath.Join(dir, "targets", "example.csv")
	r := call("", "read", list)
	if r.code != 0 || !strings.HasPrefix(r.out, "id,name,kind,ra_deg,dec_deg") {
		t.Errorf("read: exit %d\n%.200s%s", r.code, r.out, r.err)
	}
	again := call(r.out, "read", "-")
	if again.out != r.out {
		t.Error("reading what read printed gives something else")
	}
	if r := call("a,b,c\nx,10,20\n", "read", "-", "--column", "ra_deg=b", "--column", "dec_deg=c", "--column", "name=a"); r.code != 0 || !strings.Contains(r.out, "x,10,20") {
		t.Errorf("read with columns: exit %d %s%s", r.code, r.out, r.err)
	}
	if err := os.WriteFile(filepath.Join(dir, "requests.csv"), []byte("request,target,snr\na,R Lep,-4\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	if r := call("", "check", "--run", dir); r.code != 1 || !strings.Contains(r.out, "requests.csv:2:9: snr \"-4\"") {
		t.Errorf("check of a bad run: exit %d\n%s", r.code, r.out)
	}
}

func TestDemonstrationSaysSo(t *testing.T) {
	t.Chdir(t.TempDir())
	for _, args := range [][]string{{}, {"list"}, {"almanac"}, {"show", "R Lep"}} {
		r := call("", args...)
		if r.code != 0 || !strings.Contains(r.out, "DEMONSTRATION") || !strings.Contains(r.err, "invented") {
			t.Errorf("%v: exit %d\n%s\n%.300s", args, r.code, r.err, r.out)
		}
	}
	if v := decode(t, call("", "list", "--format", "json").out); v["demonstration"] != true {
		t.Error("the JSON of the demonstration does not say so")
	}
	if r := call("", "check"); r.code != 0 {
		t.Errorf("check of the demonstration: exit %d\n%s", r.code, r.out)
	}
}
