package builtin_test

import (
	"encoding/csv"
	"io/fs"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
	"time"
	_ "time/tzdata"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/run"
	"evenfall/targets/table"
)

// The demonstration is without fault, has some of everything, and says
// everywhere what it is.
func TestDemo(t *testing.T) {
	r, problems := run.Open(builtin.Demo(), "demonstration")
	if len(problems) != 0 {
		t.Error(table.Lines(problems))
	}
	if len(r.Requests) < 20 || len(r.Magnitudes) == 0 || len(r.Config.Instruments) != 3 || len(r.Config.Nights) < 3 {
		t.Errorf("%d requests, %d magnitudes, %d instruments, %d nights", len(r.Requests), len(r.Magnitudes), len(r.Config.Instruments), len(r.Config.Nights))
	}
	kinds := map[targets.Kind]int{}
	for _, x := range r.Targets {
		kinds[x.Kind]++
	}
	for _, k := range []targets.Kind{targets.Giant, targets.LPV, targets.PostAGB, targets.PN, targets.WD, targets.Interacting} {
		if kinds[k] == 0 {
			t.Errorf("no target of kind %s", k)
		}
	}
	if !strings.Contains(r.Config.Title, "DEMONSTRATION") || !strings.Contains(r.Config.Site.Name, "invented") {
		t.Errorf("title %q, site %q", r.Config.Title, r.Config.Site.Name)
	}
	err := fs.WalkDir(builtin.Demo(), ".", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := fs.ReadFile(builtin.Demo(), path)
		if err == nil && !strings.Contains(string(data[:min(len(data), 200)]), "DEMONSTRATION") {
			t.Errorf("%s does not say that it is a demonstration", path)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range r.Magnitudes {
		if !strings.Contains(m.Source, "invented") {
			t.Errorf("magnitude of %s: source %q", m.Target, m.Source)
		}
	}
}

func TestSites(t *testing.T) {
	sites := builtin.Sites()
	if len(sites) < 30 || len(sites) > 50 {
		t.Errorf("%d sites", len(sites))
	}
	for _, s := range sites {
		if _, err := time.LoadLocation(s.Zone); err != nil || s.Zone == "" || s.Source == "" || math.Abs(s.LatDeg) > 90 || math.Abs(s.LonDeg) > 180 {
			t.Errorf("%+v: %v", s, err)
		}
	}
	for name, want := range map[string]string{"paranal": "Paranal", "LA SILLA": "La Silla", "ctio": "Cerro Tololo", "orm": "La Palma", "mauna_kea": "Mauna Kea"} {
		if s, err := builtin.FindSite(name); err != nil || s.Name != want {
			t.Errorf("%q finds %q, %v", name, s.Name, err)
		}
	}
	if _, err := builtin.FindSite("Paranel"); err == nil || !strings.Contains(err.Error(), `did you mean "Paranal"`) {
		t.Errorf("a slip: %v", err)
	}
}

// The coordinates are those of the site table of astropy-data: 0.001 degree,
// 100 m, the rounding of ours and the extent of an observatory.
func TestSitesAgainstAstropy(t *testing.T) {
	f, err := os.Open(check.Shared(t, "data/sites_astropy.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range builtin.Sites() {
		best := math.Inf(1)
		for _, row := range rows[1:] {
			lat, lon, elev := number(t, row[2]), number(t, row[3]), number(t, row[4])
			dLon := math.Mod(lon-s.LonDeg+540, 360) - 180
			if math.Abs(elev-s.ElevM) < 100 {
				best = math.Min(best, math.Hypot(lat-s.LatDeg, dLon))
			}
		}
		check.Near(t, best, 0, 0.001, "distance of %s from the nearest site of the table, deg", s.Name)
	}
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}
