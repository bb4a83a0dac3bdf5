// Package timescale makes instants: it knows the leap seconds and how
// terrestrial time, universal time and the Earth's rotation hang together. It
// reads no clock (see package clock) and no file.
package timescale

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/astro/meeusfence"
)

// ErrRange is returned for dates outside 1860 to 2150, where the Earth's
// rotation is not known well enough or is anyone's guess.
var ErrRange = errors.New("date outside 1860 to 2150; nothing is computed there")

// announcedUntil (from memory) is the end of the time for which Bulletin C of the IERS had
// spoken when this was written; later dates may still get leap seconds.
var announcedUntil = time.Date(2027, 6, 30, 0, 0, 0, 0, time.UTC)

// leap lists the leap seconds: from 0h UTC of the date, TAI - UTC in seconds.
//
// Source: [cite.IERSBulletinC].
var leap = []struct {
	from   string
	offset float64
}{
	{"1972-01-01", 10}, {"1972-07-01", 11}, {"1973-01-01", 12}, {"1974-01-01", 13},
	{"1975-01-01", 14}, {"1976-01-01", 15}, {"1977-01-01", 16}, {"1978-01-01", 17},
	{"1979-01-01", 18}, {"1980-01-01", 19}, {"1981-07-01", 20}, {"1982-07-01", 21},
	{"1983-07-01", 22}, {"1985-07-01", 23}, {"1988-01-01", 24}, {"1990-01-01", 25},
	{"1991-01-01", 26}, {"1992-07-01", 27}, {"1993-07-01", 28}, {"1994-07-01", 29},
	{"1996-01-01", 30}, {"1997-07-01", 31}, {"1999-01-01", 32}, {"2006-01-01", 33},
	{"2009-01-01", 34}, {"2012-07-01", 35}, {"2015-07-01", 36}, {"2017-01-01", 37},
}

var leapUnix = func() []int64 {
	out := make([]int64, len(leap))
	for i, l := range leap {
		t, err := time.Parse("2006-01-02", l.from)
		if err != nil {
			panic("timescale: bad date in the table of leap seconds: " + l.from)
		}
		out[i] = t.Unix()
	}
	return out
}()

// At makes the instant of a civil time with UT1 - UTC = 0.
//
// Returns:
//   - ErrRange outside 1860 to 2150.
//
// Notes:
//  1. |UT1 - UTC| may reach 0.9 s, which is 13.5 arcsec of hour angle: use
//     AtDUT1 where the value is known.
//  2. Before 1972 there were no leap seconds; UTC is taken for UT1 there, and
//     TT - UT1 from [DeltaT], right to a second or so.
//  3. Later than the last announcement the number of leap seconds of today is
//     kept, and Instant.Predicted says so.
//
// Checked: TestLeapSeconds, TestAtMatchesCalendar.
func At(utc time.Time) (astro.Instant, error) { return AtDUT1(utc, 0) }

// AtDUT1 makes the instant of a civil time with UT1 - UTC in seconds as the
// IERS gives it (Bulletin D).
func AtDUT1(utc time.Time, dut1 float64) (astro.Instant, error) {
	utc = utc.UTC()
	if y := utc.Year(); y < 1860 || y >= 2150 {
		return astro.Instant{}, fmt.Errorf("time %s: %w", utc.Format(time.RFC3339), ErrRange)
	}
	if math.IsNaN(dut1) || math.Abs(dut1) > 1 {
		return astro.Instant{}, fmt.Errorf("UT1-UTC %g s: never beyond 0.9 s; write seconds", dut1)
	}
	o := astro.Offsets{UT1MinusUTC: dut1, Predicted: utc.After(announcedUntil)}
	o.TAIMinusUTC = taiMinusUTC(utc)
	return astro.InstantOn(utc, meeusfence.JDMidnight(astro.DateOf(utc)), o), nil
}

// taiMinusUTC returns TAI - UTC in seconds.
func taiMinusUTC(utc time.Time) float64 {
	u := utc.Unix()
	for i := len(leapUnix) - 1; i >= 0; i-- {
		if u >= leapUnix[i] {
			return leap[i].offset
		}
	}
	const ttMinusTAI = 32.184
	year := float64(utc.Year()) + float64(utc.YearDay()-1)/365.25
	return DeltaT(year) - ttMinusTAI
}

// DeltaT returns TT - UT1 in the years before leap seconds.
//
// Given:
//   - year: decimal year, 1860 to 1986.
//
// Returns:
//   - seconds, right to about a second; a polynomial for each stretch.
//
// Source: [cite.EspenakMeeus2006]; coefficients from memory, they join at the
// ends of their stretches and at 1972 to 0.3 s.
//
// Checked: TestDeltaT, against the values printed for 1900 to 1970, to 1 s.
func DeltaT(year float64) float64 {
	poly := func(t float64, c ...float64) float64 {
		s := 0.0
		for i := len(c) - 1; i >= 0; i-- {
			s = s*t + c[i]
		}
		return s
	}
	switch {
	case year < 1900:
		return poly(year-1860, 7.62, 0.5737, -0.251754, 0.01680668, -0.0004473624, 1/233174.0)
	case year < 1920:
		return poly(year-1900, -2.79, 1.494119, -0.0598939, 0.0061966, -0.000197)
	case year < 1941:
		return poly(year-1920, 21.20, 0.84493, -0.076100, 0.0020936)
	case year < 1961:
		return poly(year-1950, 29.07, 0.407, -1/233.0, 1/2547.0)
	}
	return poly(year-1975, 45.45, 1.067, -1/260.0, -1/718.0)
}

// FromJD makes the instant of a Julian date.
//
// Given:
//   - jd: day.
//   - scale: JD_UTC, or TT (JD_TT); BJD and HJD are no instants until a
//     direction is known.
//
// Returns:
//   - the instant, to 40 microseconds, the float's own resolution.
func FromJD(jd float64, scale string) (astro.Instant, error) {
	if math.IsNaN(jd) || jd < 2400410 || jd > 2506331 {
		return astro.Instant{}, fmt.Errorf("JD %g: %w", jd, ErrRange)
	}
	days := jd - 2451545
	utc := time.Unix(946728000, 0).UTC().Add(time.Duration(math.Round(days*86400e3)) * time.Millisecond)
	frac := days*86400e3 - math.Round(days*86400e3)
	utc = utc.Add(time.Duration(frac * 1e6))
	t, err := At(utc)
	if err != nil {
		return t, err
	}
	switch strings.ToUpper(strings.TrimPrefix(scale, "JD_")) {
	case "UTC", "":
		return t, nil
	case "TT":
		return At(utc.Add(-t.TTMinusUTC()))
	}
	return astro.Instant{}, fmt.Errorf("time scale %q: an instant can be made from JD_UTC or JD_TT", scale)
}

// TDBMinusTT returns barycentric dynamical time less terrestrial time at the
// Earth's centre.
//
//	0.001657 sin(628.3076 T + 6.2401) + 0.000022 sin(575.3385 T + 4.2970)
//	+ 0.000014 sin(1256.6152 T + 6.1969)       T: Julian centuries since J2000.0
//
// Returns:
//   - seconds; the three largest terms, right to 30 microseconds between 1950 and 2100.
//
// Source: [cite.Kaplan2005], after [cite.FairheadBretagnon1990].
func TDBMinusTT(t astro.Instant) float64 {
	T := t.CenturiesTT()
	return 0.001657*math.Sin(628.3076*T+6.2401) +
		0.000022*math.Sin(575.3385*T+4.2970) +
		0.000014*math.Sin(1256.6152*T+6.1969)
}
