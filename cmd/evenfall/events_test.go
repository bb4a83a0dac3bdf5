package main

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// The JSON of events holds what scripts rely on, in order of time, within the
// nights asked for, at the site.
func TestEventsJSON(t *testing.T) {
	got := call("", append([]string{"events", "--night", "2026-12-01", "--until", "2026-12-04", "--format", "json"}, site...)...)
	if got.code != 0 {
		t.Fatalf("exit %d, %s", got.code, got.err)
	}
	v := decode(t, got.out)
	has(t, "events", v, "site night until events")
	list := v["events"].([]any)
	if len(list) < 10 {
		t.Fatalf("%d events", len(list))
	}
	last, can := "", 0
	for _, x := range list {
		e := x.(map[string]any)
		has(t, "an event", e, "target kind at_utc at_bjd_tdb sigma_s start_utc end_utc alt_deg airmass can status")
		at := e["at_utc"].(string)
		if at < last || at < "2026-12-01T16:42" || at >= "2026-12-05T16:43" {
			t.Errorf("%s after %s", at, last)
		}
		last = at
		if e["airmass"] == nil && e["alt_deg"].(float64) > 1 || e["airmass"] != nil && e["alt_deg"].(float64) < -1 {
			t.Errorf("airmass %v at altitude %v", e["airmass"], e["alt_deg"])
		}
		if e["can"].(bool) {
			can++
			if e["alt_deg"].(float64) < 19 {
				t.Errorf("%v can be observed at %v deg", e["target"], e["alt_deg"])
			}
		}
		if s := e["status"]; s != "good" && s != "assumed" && s != "expired" {
			t.Errorf("status %v", s)
		}
	}
	if can == 0 {
		t.Error("nothing can be observed")
	}
}

// Where a target stands at an event is what list says of that instant.
func TestEventsAgreeWithList(t *testing.T) {
	got := call("", at("events", "V471 Tau", "--format", "json")...)
	e := decode(t, got.out)["events"].([]any)[0].(map[string]any)
	when, err := time.Parse(time.RFC3339, e["at_utc"].(string))
	if err != nil {
		t.Fatal(err)
	}
	shown := call("", append([]string{"show", "V471 Tau", "--format", "json", "--at", when.Format("2006-01-02T15:04:05.000Z")}, site...)...)
	s := decode(t, shown.out)
	if d := s["alt_deg"].(float64) - e["alt_deg"].(float64); d > 2e-5 || d < -2e-5 {
		t.Errorf("altitude %v, show says %v", e["alt_deg"], s["alt_deg"])
	}
	if d := s["bjd_tdb"].(float64) - e["at_bjd_tdb"].(float64); d > 1e-6 || d < -1e-6 {
		t.Errorf("BJD_TDB %v, show says %v", e["at_bjd_tdb"], s["bjd_tdb"])
	}
	has(t, "an event of show", s["events"].([]any)[0].(map[string]any), "kind at_utc at_bjd_tdb sigma_s status")
}

func TestEventsFormats(t *testing.T) {
	got := call("", at("events", "v471_tau", "NN Ser", "--format", "csv")...)
	rows, err := csv.NewReader(strings.NewReader(got.out)).ReadAll()
	if err != nil || len(rows) < 3 || rows[0][2] != "at_utc" {
		t.Errorf("%v, %v", rows, err)
	}
	got = call("", at("events", "V471 Tau", "--format", "md", "--zone", "America/Santiago")...)
	if !strings.Contains(got.out, "| V471 Tau | eclipse |") || !strings.Contains(got.out, "America/Santiago") {
		t.Errorf("%s", got.out)
	}
	got = call("", at("events", "--zone", "America/Santiago")...)
	for _, line := range strings.Split(got.out, "\n") {
		if len(line) > 106 {
			t.Errorf("a line of %d columns: %q", len(line), line)
		}
	}
	for args, says := range map[string]string{
		"events nonesuch":                              "no target",
		"events --format xml":                          "use one of",
		"events --until 2026-12-04":                    "give both",
		"list --night 2026-12-01 --until 2026-12-04":   "almanac and events",
		"events --night 2026-12-01 --until 2036-12-04": "fewer at a time",
	} {
		got := call("", append(strings.Fields(args), site...)...)
		if got.code != 2 || !strings.Contains(got.err, says) {
			t.Errorf("%s: exit %d, %s", args, got.code, got.err)
		}
	}
}

// Magnitudes that cannot be believed are reported and set aside, the others
// are used.
func TestMagnitudesSetAside(t *testing.T) {
	file := filepath.Join(t.TempDir(), "mags.csv")
	text := "target,utc,band,mag\nR Lep,2026-11-20T03:00:00Z,V,8.4\nR Lep,2027-11-20T03:00:00Z,V,8.5\nR Lep,2026-11-21T03:00:00Z,V,26\nR Lep,2026-11-22T03:00:00Z,Q,8\nr_lep,2026-11-20T03:00:00Z,V,8.4\nnobody,2026-11-20T03:00:00Z,V,8.4\n"
	if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	got := call("", at("show", "R Lep", "--magnitudes", file)...)
	for _, says := range []string{"mags.csv:3", "in the future", "mags.csv:4", "outside -2 to 25", "mags.csv:5", "not known", "mags.csv:6", "the same as", "mags.csv:7"} {
		if !strings.Contains(got.err, says) {
			t.Errorf("no %q in %s", says, got.err)
		}
	}
	if got.code != 0 || strings.Contains(got.err, "mags.csv:2:") {
		t.Errorf("exit %d, %s", got.code, got.err)
	}
}
