package main

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// Exposures stand in list and show alike, as JSON, CSV and text, and where
// there are none it says why.
func TestExposures(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	if r := call("", "new", dir); r.code != 0 {
		t.Fatal(r.err)
	}
	when := []string{"--run", dir, "--at", "2026-12-02T04:00:00Z"}
	r := call("", append([]string{"list", "--targets", "builtin", "--format", "json"}, when...)...)
	var list jsonList
	if err := json.Unmarshal([]byte(r.out), &list); err != nil {
		t.Fatalf("%v %s", err, r.err)
	}
	done, why, name := 0, 0, ""
	for i := range list.Targets {
		e := &list.Targets[i]
		x := e.Exposure
		if x == nil {
			if e.ExposureWhy != "" {
				why++
			}
			continue
		}
		if done++; name == "" && e.Rank != nil {
			name = e.Name
		}
		if !(x.BookedS > 0) || x.Frames < 1 || math.Abs(x.BookedS-float64(x.Frames)*x.EachS) > 1e-4*x.BookedS || x.LimitedBy == "" || x.Mode == "" {
			t.Errorf("%s: %+v", e.Name, *x)
		}
		if x.PReached != nil && (*x.PReached < 0 || *x.PReached > 1) {
			t.Errorf("%s: p_reached %v", e.Name, *x.PReached)
		}
		if x.UpToS != nil && x.MedianS != nil && *x.UpToS < *x.MedianS*0.999 {
			t.Errorf("%s: up to %v, median %v", e.Name, *x.UpToS, *x.MedianS)
		}
		if e.SkyMag == nil {
			t.Errorf("%s has an exposure and no sky", e.Name)
		}
	}
	if done < 40 || why == 0 || name == "" {
		t.Fatalf("%d exposures, %d reasons", done, why)
	}
	r = call("", append([]string{"list", "--targets", "builtin", "--format", "csv"}, when...)...)
	rows, err := csv.NewReader(strings.NewReader(r.out)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	at, filled := slices.Index(rows[0], "booked_s"), 0
	for _, row := range rows[1:] {
		if row[at] != "" {
			filled++
		}
	}
	if filled != done {
		t.Errorf("%d exposures in CSV, %d in JSON", filled, done)
	}
	field := "name,ra_deg,dec_deg,V\nneighbour," // beside the target
	var show jsonShow
	r = call("", append([]string{"show", name, "--targets", "builtin", "--format", "json"}, when...)...)
	if err := json.Unmarshal([]byte(r.out), &show); err != nil || show.Exposure == nil {
		t.Fatalf("%v %s", err, r.err)
	}
	if !slices.ContainsFunc(show.Steps, func(s jsonStep) bool { return s.What == "signal to noise" }) {
		t.Error("no step leads to the S/N")
	}
	os.MkdirAll(filepath.Join(dir, "field"), 0o755)
	os.WriteFile(filepath.Join(dir, "field", "near.csv"), []byte(field+num(show.RA)+","+num(show.Dec+0.02)+",8.5\n"), 0o644)
	r = call("", append([]string{"show", name, "--targets", "builtin"}, when...)...)
	for _, part := range []string{"\nexposure\n", "\nfinding\n", "from neighbour", "S/N", "Sun below"} {
		if !strings.Contains(r.out, part) {
			t.Errorf("show %s does not say %q", name, part)
		}
	}
}
