package meeusfence

import (
	"math"
	"testing"
	"time"

	"github.com/soniakeys/meeus/v3/angle"
	"github.com/soniakeys/meeus/v3/apparent"
	"github.com/soniakeys/meeus/v3/base"
	"github.com/soniakeys/meeus/v3/coord"
	"github.com/soniakeys/meeus/v3/deltat"
	"github.com/soniakeys/meeus/v3/globe"
	"github.com/soniakeys/meeus/v3/julian"
	"github.com/soniakeys/meeus/v3/moonposition"
	"github.com/soniakeys/meeus/v3/nutation"
	"github.com/soniakeys/meeus/v3/parallax"
	"github.com/soniakeys/meeus/v3/rise"
	"github.com/soniakeys/meeus/v3/semidiameter"
	"github.com/soniakeys/meeus/v3/sidereal"
	"github.com/soniakeys/unit"

	"evenfall/astro"
)

// Each test here reproduces one way in which version 3.0.1 of the library
// misleads, so that nobody takes the fence down believing it useless, and so
// that a later version which mends one is noticed.

func deg(v float64) unit.Angle { return unit.AngleFromDeg(v) }

// Longitudes are positive west and azimuths count from the south: a star
// rising due east comes out at azimuth 270 degrees.
func TestTrapSigns(t *testing.T) {
	// sidereal time 6 h at Greenwich; at 90 degrees east it is 12 h
	st := unit.TimeFromHour(6)
	star := coord.Equatorial{RA: unit.RAFromHour(18), Dec: 0} // hour angle -6 h there
	west := globe.Coord{Lat: deg(30), Lon: deg(-90)}
	var hz coord.Horizontal
	hz.EqToHz(&star, &west, st)
	if got := hz.Az.Mod1().Deg(); math.Abs(got-270) > 1e-6 {
		t.Errorf("a star rising due east has azimuth %.3f from the south, westward; want 270", got)
	}
	p := Plain{site: astro.Site{Lat: astro.Deg(30), Lon: astro.Deg(90)}, epoch: 2000, sidereal: st}
	az, alt := p.Horizontal(astro.Hours(18), astro.Deg(0))
	if math.Abs(az.Deg()-90) > 0.1 || math.Abs(alt.Deg()) > 0.1 {
		t.Errorf("fenced: azimuth %.3f altitude %.3f, want 90 and 0 within aberration and nutation", az.Deg(), alt.Deg())
	}
}

// Proper motion in right ascension is an hour angle without cos(dec).
func TestTrapProperMotion(t *testing.T) {
	from := coord.Equatorial{RA: unit.RAFromHour(5), Dec: deg(60)}
	var still, moved coord.Equatorial
	apparent.Position(&from, &still, 2000, 2000.0001, 0, 0)
	apparent.Position(&from, &moved, 2000, 2010.0001, unit.HourAngleFromSec(1), 0)
	var precessed coord.Equatorial
	apparent.Position(&from, &precessed, 2000, 2010.0001, 0, 0)
	shift := (moved.RA.Rad() - precessed.RA.Rad()) * 43200 / math.Pi
	if math.Abs(shift-10) > 0.1 {
		t.Errorf("1 s a year for 10 years moves RA by %.2f s; at declination 60 that is 75 arcsec on the sky", shift)
	}
}

// UT and TT are both plain numbers: one in place of the other turns the sky.
func TestTrapTimeScales(t *testing.T) {
	ut := julian.CalendarGregorianToJD(2026, 12, 2.2)
	mistake := (sidereal.Apparent(ut+69.184/86400) - sidereal.Apparent(ut)).Sec() * 15
	if math.Abs(mistake-1041) > 2 {
		t.Errorf("TT for UT costs %.0f arcsec of hour angle, expected 1041", mistake)
	}
}

// The Moon's semidiameter: an integer division of untyped constants.
func TestTrapSemidiameter(t *testing.T) {
	got := semidiameter.Moon.Sec()
	right := 358473400.0 / 149597870.7
	if got != 2 || math.Abs(1-got/right-0.165) > 0.005 {
		t.Errorf("semidiameter of the Moon at 1 AU: %g arcsec, right is %.4f", got, right)
	}
	if base.AU/2*2 != base.AU || base.AU%10 != 0 {
		t.Error("the AU is no longer a whole untyped number")
	}
}

// A star at the zenith: asin of a number above 1 at one latitude in ten.
func TestTrapZenithNaN(t *testing.T) {
	bad := 0
	for i := range 900 {
		lat := deg(float64(i) / 10)
		if _, h := coord.EqToHz(0, lat, lat, 0, 0); math.IsNaN(h.Rad()) {
			bad++
		}
	}
	if bad < 20 {
		t.Errorf("the zenith is NaN at %d of 900 latitudes, expected many", bad)
	}
}

// Position angles come out with the sign of the difference reversed.
func TestTrapRelativePosition(t *testing.T) {
	// the second body stands due east of the first: position angle 90
	got := angle.RelativePosition(deg(10), deg(0), deg(11), deg(0)).Deg()
	if math.Abs(got-90) > 0.1 {
		return // as documented: of the first with respect to the second is 270
	}
	t.Logf("position angle of a body to the east: %.1f", got)
	if west := angle.RelativePosition(deg(11), deg(0), deg(10), deg(0)).Deg(); math.Abs(west+90) > 0.1 {
		t.Errorf("position angle of a body to the west: %.1f", west)
	}
}

// Small separations across right ascension 0h come out as a full turn.
func TestTrapSeparation(t *testing.T) {
	got := angle.Sep(deg(359.9999), deg(10), deg(0.0001), deg(10)).Deg()
	if got < 100 {
		t.Errorf("separation across 0h is %.4f deg; the library used to give about 355", got)
	}
	a, b := astro.Direction(astro.Deg(359.9999), astro.Deg(10)), astro.Direction(astro.Deg(0.0001), astro.Deg(10))
	if right := astro.Separation(a, b).Deg(); math.Abs(right-0.0002*math.Cos(10*math.Pi/180)) > 1e-9 {
		t.Errorf("our own separation: %.7f deg", right)
	}
}

// "Sidereal time at 0h" adds the fraction of the day.
func TestTrapApparent0UT(t *testing.T) {
	jd := julian.CalendarGregorianToJD(2026, 12, 2)
	if d := (sidereal.Apparent0UT(jd+0.25) - sidereal.Apparent0UT(jd)).Hour(); math.Abs(math.Abs(d)-6.016) > 0.01 {
		t.Errorf("0h sidereal time of the same day differs by %.3f h, expected 6.016", d)
	}
}

// Topocentric wants universal time though its argument is called jde, and
// astronomical units where the Moon comes in kilometres.
func TestTrapTopocentric(t *testing.T) {
	jd := julian.CalendarGregorianToJD(2026, 12, 2.2)
	l, b, km := moonposition.Position(jd + 69.184/86400)
	ecl := coord.Ecliptic{Lon: l, Lat: b}
	var eq coord.Equatorial
	eq.EclToEq(&ecl, coord.NewObliquity(nutation.MeanObliquity(jd)))
	s, c := globe.Earth76.ParallaxConstants(deg(20), 0)
	ra1, _ := parallax.Topocentric(eq.RA, eq.Dec, km/base.AU, s, c, deg(70), jd)
	ra2, _ := parallax.Topocentric(eq.RA, eq.Dec, km/base.AU, s, c, deg(70), jd+69.184/86400)
	if d := math.Abs(ra1.Rad()-ra2.Rad()) * 206265; d < 1 || d > 25 {
		t.Errorf("TT for UT moves the Moon by %.1f arcsec, up to 19 expected", d)
	}
	far, _ := parallax.Topocentric(eq.RA, eq.Dec, km, s, c, deg(70), jd)
	if d := math.Abs(far.Rad()-eq.RA.Rad()) * 206265; d > 0.01 {
		t.Errorf("kilometres for astronomical units: parallax of %.4f arcsec is left", d)
	}
}

// The Moon's longitude is that of the mean equinox: nutation, up to 17
// arcsec, is not in it. Meeus' own example 47.a: longitude 133.162655 before
// and 133.167265 after nutation.
func TestTrapMoonNutation(t *testing.T) {
	jde := julian.CalendarGregorianToJD(1992, 4, 12)
	l, _, km := moonposition.Position(jde)
	if math.Abs(l.Deg()-133.162655) > 1e-6 || math.Abs(km-368409.7) > 0.1 {
		t.Errorf("longitude %.6f distance %.1f, Meeus prints 133.162655 and 368409.7", l.Deg(), km)
	}
	dpsi, _ := nutation.Nutation(jde)
	if math.Abs((l+dpsi).Deg()-133.167265) > 2e-6 {
		t.Errorf("with nutation %.6f, Meeus prints 133.167265", (l + dpsi).Deg())
	}
}

// The library's Earth of 1976 is not WGS84: 3 m of radius.
func TestTrapEllipsoid(t *testing.T) {
	if d := (globe.Earth76.A() - 6378.137) * 1000; math.Abs(d-3) > 0.01 {
		t.Errorf("equatorial radius differs from WGS84 by %.2f m, expected 3", d)
	}
}

// A time sent through the library comes back early.
func TestTrapJDToTime(t *testing.T) {
	early := 0
	for i := range 2000 {
		utc := time.Date(2026, 12, 2, 0, 0, 0, 0, time.UTC).Add(time.Duration(i) * 43 * time.Second)
		if d := julian.JDToTime(julian.TimeToJD(utc)).Sub(utc); d < 0 {
			early++
			if d < -60*time.Microsecond {
				t.Errorf("%v comes back %v early", utc, -d)
			}
		}
	}
	if early < 200 {
		t.Errorf("%d of 2000 times come back early, expected many", early)
	}
}

// Delta T: the table ends in 2010 and goes on silently; TT-UT is 69.184 s.
func TestTrapDeltaT(t *testing.T) {
	jd := julian.CalendarGregorianToJD(2026, 7, 1)
	if got := deltat.PolyAfter2000(2026.5).Sec(); math.Abs(got-103.6) > 1 {
		t.Errorf("polynomial after 2000 gives %.1f s for 2026, used to be 103.6", got)
	}
	defer func() { _ = recover() }() // past its table it may also panic
	if got := deltat.Interp10A(jd).Sec(); math.Abs(got-69.2) < 0.5 {
		t.Errorf("the table gives %.1f s for 2026: right by chance", got)
	}
}

// Rise, transit and set interpolate right ascensions without unwrapping them:
// a body passing 0h that day is hours off.
func TestTrapRise(t *testing.T) {
	p := globe.Coord{Lat: deg(40), Lon: deg(0)}
	ra := func(h float64) unit.RA { return unit.RAFromHour(h) }
	dec := []unit.Angle{0, 0, 0}
	h0 := deg(-0.5667)
	_, wrapped, _, err := rise.Times(p, 69, h0, unit.TimeFromHour(12), []unit.RA{ra(23.2), ra(0.0), ra(0.8)}, dec)
	if err != nil {
		t.Fatal(err)
	}
	// the same sky turned by half a turn, where nothing wraps
	_, plain, _, err := rise.Times(p, 69, h0, unit.TimeFromHour(0), []unit.RA{ra(11.2), ra(12.0), ra(12.8)}, dec)
	if err != nil {
		t.Fatal(err)
	}
	if off := math.Abs((wrapped - plain).Hour()); off < 1 {
		t.Errorf("a body passing 0h transits only %.2f h off; expected hours", off)
	}
}

// The Earth's velocity taken from the library in two directions is the one it
// uses in every other direction.
func TestEarthVelocityIsTheLibrarys(t *testing.T) {
	at := astro.InstantFrom(time.Date(2028, 11, 13, 4, 34, 0, 0, time.UTC), 37, 0, false)
	v := EarthVelocity(at)
	for _, ra := range []float64{20, 41, 133, 250} {
		for _, dec := range []float64{-50, 0, 49} {
			dra, ddec := apparent.AberrationRonVondrak(unit.RA(ra*math.Pi/180), deg(dec), at.JDTT())
			sa, ca := math.Sincos(ra * math.Pi / 180)
			sd, cd := math.Sincos(dec * math.Pi / 180)
			east := (v.Y*ca - v.X*sa) / cd
			north := -(v.X*ca+v.Y*sa)*sd + v.Z*cd
			if math.Abs(east-dra.Rad()) > 1e-15 || math.Abs(north-ddec.Rad()) > 1e-15 {
				t.Errorf("RA %g Dec %g: (%g, %g), library (%g, %g)", ra, dec, east, north, dra.Rad(), ddec.Rad())
			}
		}
	}
}
