package frame

import (
	"math"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/timescale"
)

// when turns the two parts of a Julian date in UTC into an instant.
func when(t testing.TB, day, frac float64) astro.Instant {
	t.Helper()
	// day ends in .5 (0h); counted from 2000-01-01 0h so that nothing is rounded
	whole := math.Floor(day - 2451544.5)
	rest := day - 2451544.5 - whole + frac
	utc := time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC).AddDate(0, 0, int(whole)).
		Add(time.Duration(math.Round(rest * 86400e9)))
	at, err := timescale.At(utc)
	if err != nil {
		t.Fatal(err)
	}
	return at
}

func siteOf(r check.Row) astro.Site {
	return astro.Site{Lat: astro.Deg(r.Float("lat")), Lon: astro.Deg(r.Float("lon")), HeightM: r.Float("h_m")}
}

func starOf(r check.Row) Star {
	return NewStar(Catalogue{
		RA: astro.Deg(r.Float("ra")), Dec: astro.Deg(r.Float("dec")), EpochJyr: r.Float("epoch"),
		PMRA: astro.Arcsec(r.Float("pmra") / 1000), PMDec: astro.Arcsec(r.Float("pmdec") / 1000),
		Parallax: astro.Arcsec(r.Float("plx") / 1000), RVKms: r.Float("rv"),
	})
}

// The sky against ERFA: 0.02 arcsec further than 5 degrees from the Sun, as
// angles between directions, so that poles and zeniths count like the rest.
const skyTolerance = 0.02

func TestStarsAgainstERFA(t *testing.T) {
	for _, name := range []string{"testdata/astro/stars.csv", "testdata/astro/stars_wide.csv"} {
		worst := map[string]float64{}
		for _, r := range check.Table(t, name).Rows() {
			if r.Float("sun_sep_deg") < 5 {
				continue
			}
			f := At(siteOf(r), when(t, r.Float("jd_day"), r.Float("jd_frac")))
			s := starOf(r)
			p := f.Horizontal(&s)
			off := func(what string, lon, lat, wantLon, wantLat astro.Angle) {
				d := astro.Separation(astro.Direction(lon, lat), astro.Direction(wantLon, wantLat)).Arcsec()
				worst[what] = math.Max(worst[what], d)
				check.Near(t, d, 0, skyTolerance, "%s of %s, arcsec", what, r.Where())
			}
			dir := func(lon, lat string) (a, b astro.Angle) { return astro.Deg(r.Float(lon)), astro.Deg(r.Float(lat)) }
			az, alt := dir("az", "alt")
			off("az, alt", p.Az, p.Alt, az, alt)
			ra, dec := dir("ra_app", "dec_app")
			off("apparent place", p.RA, p.Dec, ra, dec)
			checkAngles(t, r, p)
		}
		t.Logf("%s: worst, arcsec: %v", name, worst)
	}
}

// checkAngles compares hour angle and parallactic angle where they are defined.
func checkAngles(t *testing.T, r check.Row, p Place) {
	ha := p.HourAngle.Minus(astro.Deg(r.Float("ha"))).Signed().Arcsec() * p.Dec.Cos()
	check.Near(t, ha, 0, skyTolerance, "hour angle of %s, arcsec on the sky", r.Where())
	if zd := 90 - math.Abs(p.Alt.Deg()); zd > 0.1 && math.Abs(p.Dec.Deg()) < 89.9 {
		q := p.Parallact.Minus(astro.Deg(r.Float("q"))).Signed().Arcsec()
		tol := skyTolerance/p.Alt.Cos() + skyTolerance/p.Dec.Cos()
		check.Near(t, q, 0, tol, "parallactic angle of %s, arcsec", r.Where())
	}
}

func TestPrecession(t *testing.T) {
	for _, r := range check.Table(t, "testdata/astro/precession.csv").Rows() {
		days := r.Float("jd_tt") - 2451545
		p := precessionOf(days / 36525)
		for column, got := range map[string]astro.Angle{
			"gamb": p.gamma, "phib": p.phi, "psib": p.psi, "epsa": p.obliquity,
		} {
			check.Near(t, got.Arcsec(), r.Float(column+"_arcsec"), 1e-8, "%s of %s", column, r.Where())
		}
	}
}

func TestZenithAndPole(t *testing.T) {
	at := when(t, 2461376.5, 0.3)
	for _, lat := range []float64{-90, -29.26, 0, 45, 89.999999, 90} {
		f := At(astro.Site{Lat: astro.Deg(lat), Lon: astro.Deg(-70)}, at)
		p := f.Look(f.Up)
		check.Near(t, p.Alt.Deg(), 90, 1e-6, "altitude of the zenith at latitude %g", lat)
		for _, v := range []float64{p.Az.Deg(), p.HourAngle.Deg(), p.Parallact.Deg(), p.RisingRate} {
			if math.IsNaN(v) {
				t.Errorf("latitude %g: NaN in the place of the zenith %+v", lat, p)
			}
		}
		pole := f.Look(f.ToDate.ApplyT(astro.Vec{Z: 1}))
		check.Near(t, pole.Alt.Deg(), lat, 1e-9, "altitude of the pole of date")
	}
}

// The horizon's axes stand at right angles: east, north, up is a right-handed
// set.
func TestAxes(t *testing.T) {
	f := At(astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400}, when(t, 2461376.5, 0.6))
	for _, pair := range [][2]astro.Vec{{f.North, f.East}, {f.North, f.Up}, {f.East, f.Up}} {
		check.Near(t, pair[0].Dot(pair[1]), 0, 1e-14, "axes at right angles")
	}
	check.Near(t, f.East.Cross(f.North).Minus(f.Up).Norm(), 0, 1e-14, "east x north = up")
	if r := f.Observer.Norm() * auM; r < 6.35e6 || r > 6.39e6 {
		t.Errorf("observer %g m from the Earth's centre", r)
	}
}

func TestRisingRate(t *testing.T) {
	site := astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400}
	at := when(t, 2461376.5, 0.25)
	for _, ra := range []float64{10, 100, 190, 280} {
		s := NewStar(Catalogue{RA: astro.Deg(ra), Dec: astro.Deg(-40), EpochJyr: 2000})
		a, b := At(site, at), At(site, at.Add(36*time.Second))
		pa, pb := a.Horizontal(&s), b.Horizontal(&s)
		mean := (pa.RisingRate + pb.RisingRate) / 2
		check.Near(t, mean, pb.Alt.Minus(pa.Alt).Deg()*100, 1e-3, "rate of altitude at RA %g, deg/h", ra)
	}
}
