package skyglow

import (
	"encoding/csv"
	"os"
	"slices"
	"strconv"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
)

// reading is one measurement of the zenith's brightness, and the model's.
type reading struct {
	sunDeg, moonDeg, lit float64
	measured, model      float64
}

// readings takes in a spring's measurements of the zenith at a site near the
// sea in Ireland, clouds and all, and works out the model's brightness: V
// extinction 0.20, dark value 21.56, the darkest tenth of the readings.
func readings(t *testing.T) []reading {
	path := check.Shared(t, "data/sqm_mitchelstown_2019.csv")
	place := astro.Site{Lat: astro.Deg(52.27), Lon: astro.Deg(-8.27), HeightM: 100}
	site, err := NewSite(Conditions{Air: AirAbove{Measured: map[string]float64{"V": 0.20}}, Dark: map[string]float64{"V": 21.56}})
	if err != nil {
		t.Fatal(err)
	}
	v := band(t, "V")
	var out []reading
	for _, row := range bareCSV(t, path) {
		utc, err := time.Parse("2006-01-02T15:04:05", row[0])
		if err != nil {
			t.Fatal(err)
		}
		at, err := timescale.At(utc)
		if err != nil {
			t.Fatal(err)
		}
		f := frame.At(place, at)
		sun, moon := ephem.Sun(&f), ephem.Moon(&f)
		r := reading{sunDeg: sun.Place.Alt.Deg(), moonDeg: moon.Place.Alt.Deg(), lit: ephem.MoonPhase(moon, sun).Illuminated, measured: number(t, row[2])}
		// The table's own altitudes tell whether the place is right.
		check.Near(t, r.sunDeg, number(t, row[3]), 0.1, "%s: the Sun's altitude", row[0])
		check.Near(t, r.moonDeg, number(t, row[4]), 0.3, "%s: the Moon's altitude", row[0])
		check.Near(t, r.lit, number(t, row[5]), 0.01, "%s: the Moon's illuminated fraction", row[0])
		if r.sunDeg > -4 {
			continue
		}
		sky, err := NewSky(Scene{Site: site, Sun: Direction{sun.Dir, sun.Place.Alt}, Moon: Direction{moon.Dir, moon.Place.Alt},
			MoonPhase: ephem.MoonPhase(moon, sun).Angle, MoonDistKm: moon.DistanceKm})
		if err != nil {
			t.Fatal(err)
		}
		b, err := sky.At(Direction{f.Up, astro.Deg(90)}, v)
		if err != nil {
			t.Fatal(err)
		}
		r.model = b.Total.MagArcsec2()
		out = append(out, r)
	}
	return out
}

// darkest returns measured minus modelled brightness where the darkest share of
// some readings ends, and their median.
func darkest(some []reading, share float64) (top, median float64) {
	slices.SortFunc(some, func(a, b reading) int {
		return cmpFloat(b.measured-b.model, a.measured-a.model)
	})
	k := int(share * float64(len(some)))
	return some[k].measured - some[k].model, some[len(some)/2].measured - some[len(some)/2].model
}

func cmpFloat(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// TestMeasuredSky: moonless twilight, medians in bins of 1 degree of the Sun
// from -5 to -12 within 0.25 mag and the darkest tenth from -12 to -18 within
// 0.2; with the Moon above 8 degrees the darkest fifth by illuminated fraction
// within 0.4. Cloud brightens the rest by up to 0.9.
func TestMeasuredSky(t *testing.T) {
	all := readings(t)
	pick := func(keep func(reading) bool) []reading {
		var out []reading
		for _, r := range all {
			if keep(r) {
				out = append(out, r)
			}
		}
		return out
	}
	for h := -5.0; h > -18; h-- {
		some := pick(func(r reading) bool { return r.moonDeg < 0 && r.sunDeg <= h && r.sunDeg > h-1 })
		if len(some) < 10 {
			t.Fatalf("only %d readings at %v", len(some), h)
		}
		top, median := darkest(some, 0.1)
		t.Logf("Sun %3.0f to %3.0f: %4d readings, median %+.2f, darkest tenth %+.2f", h, h-1, len(some), median, top)
		if h > -12 {
			check.Near(t, median, 0, 0.25, "median at the Sun %v", h)
		} else {
			check.Near(t, top, 0, 0.2, "darkest tenth at the Sun %v", h)
		}
	}
	for lit := 0.0; lit < 1; lit += 0.2 {
		some := pick(func(r reading) bool { return r.moonDeg > 8 && r.sunDeg < -12 && r.lit >= lit && r.lit < lit+0.2 })
		if len(some) < 10 {
			t.Logf("Moon lit %.1f: %d readings, too few", lit, len(some))
			continue
		}
		top, median := darkest(some, 0.2)
		t.Logf("Moon lit %.1f to %.1f: %4d readings, median %+.2f, darkest fifth %+.2f", lit, lit+0.2, len(some), median, top)
		check.Near(t, top, 0, 0.4, "darkest fifth with the Moon lit %.1f", lit)
	}
}

// bareCSV reads a table that has no header of `#` lines.
func bareCSV(t *testing.T, path string) [][]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil || len(rows) < 2 {
		t.Fatalf("%s: %d rows, %v", path, len(rows), err)
	}
	return rows[1:]
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}
