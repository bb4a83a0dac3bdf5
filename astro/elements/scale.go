// Package elements is the clock of periodic stars: it turns an epoch and a
// period, in whatever time scale they were published, into dated events at a
// site, each with its uncertainty, and says where the elements are too old to
// date anything. It reads no list and knows no brightness; what phase zero is,
// the caller says.
package elements

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
)

// Scale is the time scale of an epoch.
type Scale string

// The scales: a date at the Earth, at the Sun (heliocentric) or at the
// barycentre of the solar system, in UTC, TT or TDB.
const (
	HJD    Scale = "HJD"     // heliocentric, UTC or TT not said
	HJDUTC Scale = "HJD_UTC" // heliocentric, UTC
	HJDTT  Scale = "HJD_TT"  // heliocentric, TT
	BJDTDB Scale = "BJD_TDB" // barycentric, TDB
	JDUTC  Scale = "JD_UTC"  // at the site, UTC; no light-time
)

// Scales lists the scales.
var Scales = []Scale{HJD, HJDUTC, HJDTT, BJDTDB, JDUTC}

// ErrScale is returned for a name that is no time scale.
var ErrScale = errors.New("no time scale; write HJD, HJD_UTC, HJD_TT, BJD_TDB or JD_UTC")

// ParseScale reads a time scale; case and blanks around it do not count. An
// empty name is HJD, the scale that catalogues use when they say nothing.
func ParseScale(s string) (Scale, error) {
	name := Scale(strings.ToUpper(strings.TrimSpace(s)))
	if name == "" {
		return HJD, nil
	}
	for _, known := range Scales {
		if name == known {
			return known, nil
		}
	}
	return "", fmt.Errorf("time scale %.40q: %w", s, ErrScale)
}

// unsaidS is one sigma of a heliocentric date whose own scale, UTC or TT, is
// not said: half the distance of the two, seconds.
const unsaidS = 35.0

// extraD returns what the scale itself adds to the uncertainty, days.
func (s Scale) extraD() float64 {
	if s == HJD {
		return unsaidS / 86400
	}
	return 0
}

// Light-time for one astronomical unit, days, and the Earth's figure and turn.
//
// Source: [cite.IAU2012B2]; [cite.WGS84]; [cite.IERS2010], eq. 5.14.
const (
	auDays    = 149597870700.0 / 299792458 / 86400
	auM       = 149597870700.0
	earthA    = 6378137.0
	earthF    = 1 / 298.257223563
	era0      = 0.7790572732640 // turns at J2000.0
	eraPerDay = 1.00273781191135448
)

// Sight is a star seen from a site: what turns its dates into times on the
// ground.
type Sight struct {
	Star frame.Star
	Site astro.Site
}

// observer returns the site from the Earth's centre along the ICRS axes, AU.
//
// Notes:
//  1. Precession and nutation are left out: 0.7 degrees by 2053, 0.3 ms of the
//     21 ms that the Earth's radius takes.
func (s *Sight) observer(t astro.Instant) astro.Vec {
	sf, cf := math.Sincos(s.Site.Lat.Rad())
	n := earthA / math.Sqrt(1-earthF*(2-earthF)*sf*sf)
	axis := (n + s.Site.HeightM) * cf
	polar := (n*(1-earthF)*(1-earthF) + s.Site.HeightM) * sf
	turn := 2*math.Pi*math.Mod(era0+eraPerDay*t.DaysUT1(), 1) + s.Site.Lon.Rad()
	st, ct := math.Sincos(turn)
	return astro.Vec{X: axis * ct, Y: axis * st, Z: polar}.Times(1 / auM)
}

// Date returns what a scale reads for the star at an instant at the site.
//
//	BJD_TDB = JD_TDB + (r . n)/c      r: site from the barycentre
//	HJD_TT  = JD_TT + (h . n)/c       h: site from the Sun; HJD_UTC likewise
//
// Given:
//   - t: the instant at the site.
//   - scale: one of [Scales]; HJD is read as HJD_UTC.
//
// Returns:
//   - day; the float resolves 40 microseconds. NaN for a scale that is none.
//
// Notes:
//  1. The light-time is right to 2 ms in 2010-2053 and 0.1 s outside. The star
//     counts as infinitely far; light bent at the Sun comes up to 0.1 ms late.
//  2. JD_UTC is the date at the site.
//
// Source: [cite.EastmanEtAl2010].
//
// Checked: TestScales, against testdata/astro/light_time.csv, 0.05 s.
func (s *Sight) Date(t astro.Instant, scale Scale) float64 {
	return 2451545 + s.days(t, scale)
}

// days returns the same in days since JD 2451545.0.
func (s *Sight) days(t astro.Instant, scale Scale) float64 {
	utc := t.JDUTC() - 2451545
	if scale == JDUTC {
		return utc
	}
	earth := frame.EarthAt(t)
	n, site := s.Star.Direction(t), s.observer(t)
	switch scale {
	case BJDTDB:
		return t.DaysTT() + timescale.TDBMinusTT(t)/86400 + earth.Bary.Plus(site).Dot(n)*auDays
	case HJDTT:
		return t.DaysTT() + earth.Helio.Plus(site).Dot(n)*auDays
	case HJD, HJDUTC:
		return utc + earth.Helio.Plus(site).Dot(n)*auDays
	}
	return math.NaN()
}

// Instant returns the instant at the site at which a scale reads a date: the
// inverse of [Sight.Date].
//
// Given:
//   - jd: day.
//
// Returns:
//   - the instant, to 50 microseconds.
//   - [timescale.ErrRange] outside 1860 to 2150, [ErrScale].
//
// Notes:
//  1. Solved by iteration: the light-time changes by 1e-4 of the time, so each
//     step gains four digits.
//
// Checked: TestScales, there and back to 1e-4 s.
func (s *Sight) Instant(jd float64, scale Scale) (astro.Instant, error) {
	start := "JD_UTC"
	if scale == BJDTDB || scale == HJDTT {
		start = "JD_TT"
	}
	at, err := timescale.FromJD(jd, start)
	if err != nil || scale == JDUTC {
		return at, err
	}
	return s.closeIn(at, jd, scale)
}

// closeEnough is the step, days, after which what is left is below 1e-10 d.
const closeEnough = 1e-6

// closeIn moves an instant to where the scale reads the date.
func (s *Sight) closeIn(at astro.Instant, jd float64, scale Scale) (astro.Instant, error) {
	for range 6 {
		off := (jd - 2451545) - s.days(at, scale)
		if math.IsNaN(off) {
			return astro.Instant{}, fmt.Errorf("time scale %.40q: %w", string(scale), ErrScale)
		}
		var err error
		if at, err = shift(at, off); err != nil {
			return astro.Instant{}, err
		}
		if math.Abs(off) < closeEnough {
			break
		}
	}
	return at, nil
}

// shift returns the instant a number of days later, with the leap seconds of
// its own date.
func shift(t astro.Instant, days float64) (astro.Instant, error) {
	return timescale.AtDUT1(t.UTC().Add(durationOf(days)), t.UT1MinusUTC())
}
