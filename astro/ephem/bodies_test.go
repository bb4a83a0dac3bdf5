package ephem

import (
	"math"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
)

// when turns the two parts of a Julian date in UTC into an instant.
func when(t testing.TB, day, frac float64) astro.Instant {
	t.Helper()
	whole := math.Floor(day - 2451544.5)
	rest := day - 2451544.5 - whole + frac
	utc := time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC).AddDate(0, 0, int(whole)).Add(time.Duration(math.Round(rest * 86400e9)))
	at, err := timescale.At(utc)
	if err != nil {
		t.Fatal(err)
	}
	return at
}

func direction(r check.Row, lon, lat string) astro.Vec {
	return astro.Direction(astro.Deg(r.Float(lon)), astro.Deg(r.Float(lat)))
}

// Sun and Moon from the Earth's centre against DE405, along the ICRS axes, so
// that no nutation enters: Sun 1 arcsec within 2010-2053 and 36 outside, Moon
// 15 arcsec and 15 km.
func TestSunMoonGeocentric(t *testing.T) {
	worst := map[string]float64{}
	for _, r := range check.Table(t, "testdata/astro/sunmoon.csv").Rows() {
		f := frame.At(astro.Site{}, when(t, r.Float("jd_day"), r.Float("jd_frac")))
		sun, moon := Sun(&f), Moon(&f)
		inside := r.String("inside") == "1"
		tol := 36.0
		if inside {
			tol = 1
		}
		d := astro.Separation(sun.geocentricU, direction(r, "sun_ra", "sun_dec")).Arcsec()
		worst["Sun inside "+r.String("inside")] = math.Max(worst["Sun inside "+r.String("inside")], d)
		check.Near(t, d, 0, tol, "Sun of %s, arcsec", r.Where())
		if sun.Coarse == inside {
			t.Errorf("%s: coarse is %v", r.Where(), sun.Coarse)
		}
		d = astro.Separation(moon.geocentricU, direction(r, "moon_ra", "moon_dec")).Arcsec()
		worst["Moon"] = math.Max(worst["Moon"], d)
		check.Near(t, d, 0, 15, "Moon of %s, arcsec", r.Where())
		check.Near(t, moon.Geocentric.Norm(), r.Float("moon_km"), 25, "distance of the Moon of %s, km", r.Where())
	}
	t.Logf("worst, arcsec: %v", worst)
}

// From the site: Moon 15 arcsec, illuminated fraction 0.001, Sun 1 arcsec.
func TestMoonTopocentric(t *testing.T) {
	worst := map[string]float64{}
	for _, r := range check.Table(t, "testdata/astro/moon_topo.csv").Rows() {
		site := astro.Site{Lat: astro.Deg(r.Float("lat")), Lon: astro.Deg(r.Float("lon")), HeightM: r.Float("h_m")}
		f := frame.At(site, when(t, r.Float("jd_day"), r.Float("jd_frac")))
		sun, moon := Sun(&f), Moon(&f)
		for _, c := range []struct {
			name string
			b    Body
			tol  float64
		}{{"moon", moon, 15}, {"sun", sun, 1}} {
			d := astro.Separation(astro.Direction(c.b.Place.Az, c.b.Place.Alt), direction(r, c.name+"_az", c.name+"_alt")).Arcsec()
			worst[c.name] = math.Max(worst[c.name], d)
			check.Near(t, d, 0, c.tol, "%s of %s, arcsec", c.name, r.Where())
		}
		check.Near(t, moon.DistanceKm, r.Float("moon_km"), 25, "distance of %s, km", r.Where())
		p := MoonPhase(moon, sun)
		worst["illuminated"] = math.Max(worst["illuminated"], math.Abs(p.Illuminated-r.Float("illum")))
		check.Near(t, p.Illuminated, r.Float("illum"), 0.001, "illuminated fraction of %s", r.Where())
		check.Near(t, p.Angle.Deg(), r.Float("phase_deg"), 0.02, "phase angle of %s, deg", r.Where())
	}
	t.Logf("worst: %v", worst)
}

// JPL Horizons, geocentric illuminated percentage and phase angle of the Moon,
// 2018 September; five rows typed from ../shared/data/horizons_moon_illum_2018.csv
// (public domain). Seen from a site the fraction differs by up to 0.008.
func TestMoonHorizons(t *testing.T) {
	for utc, want := range map[string][2]float64{
		"2018-09-09T05:00:00Z": {0.49123, 171.9567}, "2018-09-12T05:00:00Z": {8.25400, 146.6122},
		"2018-09-14T05:00:00Z": {23.73030, 121.6978}, "2018-09-16T05:00:00Z": {42.71380, 98.3801}, "2018-09-18T05:00:00Z": {61.92161, 76.2047},
	} {
		tt, err := time.Parse(time.RFC3339, utc)
		if err != nil {
			t.Fatal(err)
		}
		at, err := timescale.At(tt)
		if err != nil {
			t.Fatal(err)
		}
		f := frame.At(astro.Site{}, at)
		sun, moon := Sun(&f), Moon(&f)
		moon.fromSite, sun.fromSite = moon.Geocentric, sun.Geocentric
		p := MoonPhase(moon, sun)
		check.Near(t, 100*p.Illuminated, want[0], 0.1, "illuminated percentage at %s", utc)
		check.Near(t, p.Angle.Deg(), want[1], 0.1, "phase angle at %s", utc)
	}
}

// USNO tables, printed to the minute: rise and set at Fredonia in 2023.
func TestNightAgainstUSNO(t *testing.T) {
	for _, name := range []string{"usno_sun", "usno_moon"} {
		table := check.Table(t, "testdata/astro/"+name+".csv")
		worst := 0.0
		for _, r := range table.Rows() {
			site := astro.Site{Lat: astro.Deg(r.Float("lat")), Lon: astro.Deg(r.Float("lon"))}
			want := parse(t, r.String("utc"))
			got := nearest(t, site, name == "usno_moon", r.String("event") == "rise", want)
			off := math.Abs(got.Sub(want).Seconds())
			worst = math.Max(worst, off)
			check.Near(t, off, 0, 35, "%s %s of %s, s", name, r.String("event"), r.Where())
		}
		t.Logf("%s: %d events, worst %.0f s of printed minutes", name, table.Len(), worst)
	}
}

func TestTwilightAgainstUSNO(t *testing.T) {
	for _, r := range check.Table(t, "testdata/astro/usno_twilight.csv").Rows() {
		site := astro.Site{Lat: astro.Deg(r.Float("lat")), Lon: astro.Deg(r.Float("lon"))}
		want := parse(t, r.String("utc"))
		n, err := NightOf(site, DateAt(site, want))
		if err != nil {
			t.Fatal(err)
		}
		got := map[string]*astro.Instant{
			"civil_dawn": n.Civil.Dawn, "civil_dusk": n.Civil.Dusk, "nautical_dawn": n.Nautical.Dawn,
			"nautical_dusk": n.Nautical.Dusk, "astronomical_dawn": n.Ast.Dawn, "astronomical_dusk": n.Ast.Dusk,
		}[r.String("event")]
		if got == nil {
			t.Errorf("%s: no %s", r.Where(), r.String("event"))
			continue
		}
		check.Near(t, got.UTC().Sub(want).Seconds(), 0, 45, "%s of %s, s", r.String("event"), r.Where())
	}
}

func parse(t *testing.T, s string) time.Time {
	t.Helper()
	utc, err := time.Parse(time.RFC3339, s)
	if err != nil {
		t.Fatal(err)
	}
	return utc
}

// nearest returns the event of one kind that is nearest to a time.
func nearest(t *testing.T, site astro.Site, moon, up bool, want time.Time) time.Time {
	t.Helper()
	var best time.Time
	for day := -1; day <= 1; day++ {
		n, err := NightOf(site, DateAt(site, want).Next(day))
		if err != nil {
			t.Fatal(err)
		}
		list := append([]astro.Instant(nil), n.Moonset...)
		switch {
		case moon && up:
			list = n.Moonrise
		case !moon && up:
			list = instants(n.Sunrise)
		case !moon:
			list = instants(n.Sunset)
		}
		for _, at := range list {
			if best.IsZero() || at.UTC().Sub(want).Abs() < best.Sub(want).Abs() {
				best = at.UTC()
			}
		}
	}
	return best
}

func instants(t *astro.Instant) []astro.Instant {
	if t == nil {
		return nil
	}
	return []astro.Instant{*t}
}
