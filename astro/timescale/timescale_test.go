package timescale

import (
	"errors"
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/meeusfence"
)

// TAI - UTC by date, IERS Bulletin C.
func TestLeapSeconds(t *testing.T) {
	for _, c := range []struct {
		at   string
		want float64 // TT - UTC, s
	}{
		{"1972-01-01T00:00:00Z", 42.184}, {"1999-12-31T23:59:59Z", 64.184}, {"2005-12-31T23:59:59Z", 64.184},
		{"2006-01-01T00:00:00Z", 65.184}, {"2016-12-31T23:59:59Z", 68.184}, {"2017-01-01T00:00:00Z", 69.184},
		{"2026-12-01T00:00:00Z", 69.184},
	} {
		utc, err := time.Parse(time.RFC3339, c.at)
		if err != nil {
			t.Fatal(err)
		}
		at, err := At(utc)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, at.TTMinusUTC().Seconds(), c.want, 1e-9, "TT-UTC at %s", c.at)
	}
}

// TT - UT1 as printed in the Astronomical Almanac (section K), seconds.
func TestDeltaT(t *testing.T) {
	for year, want := range map[float64]float64{1900: -2.72, 1910: 10.46, 1920: 21.16, 1930: 24.02, 1940: 24.33, 1950: 29.15, 1960: 33.15, 1970: 40.18} {
		check.Near(t, DeltaT(year), want, 1, "TT-UT1 in %g", year)
	}
	// the pieces join
	for _, year := range []float64{1900, 1920, 1941, 1961} {
		check.Near(t, DeltaT(year-1e-9), DeltaT(year), 0.4, "join at %g", year)
	}
	check.Near(t, DeltaT(1972), 42.2, 0.3, "join with leap seconds in 1972")
}

// Julian dates of the almanacs: J2000.0, and Meeus, Astronomical Algorithms,
// example 7.a (1957 October 4.81 = JD 2436116.31).
func TestAtMatchesCalendar(t *testing.T) {
	at, err := At(time.Date(2000, 1, 1, 12, 0, 0, 0, time.UTC))
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, at.JDUTC(), 2451545, 0, "JD of J2000.0")
	sputnik := time.Date(1957, 10, 4, 0, 0, 0, 0, time.UTC).Add(time.Duration(0.81 * 86400e9))
	if at, err = At(sputnik); err != nil {
		t.Fatal(err)
	}
	check.Near(t, at.JDUTC(), 2436116.31, 1e-9, "JD of Meeus example 7.a")
	rapid.Check(t, func(r *rapid.T) {
		utc := time.Unix(rapid.Int64Range(-3e9, 5e9).Draw(r, "unix"), 0).UTC()
		at, err := At(utc)
		if err != nil {
			r.Skip("out of range")
		}
		jd := meeusfence.JDMidnight(astro.DateOf(utc))
		want := jd + float64(utc.Hour()*3600+utc.Minute()*60+utc.Second())/86400
		if math.Abs(at.JDUTC()-want) > 1e-9 {
			r.Fatalf("%v: JD %.9f, calendar %.9f", utc, at.JDUTC(), want)
		}
	})
}

func TestFromJDRoundTrip(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		jd := rapid.Float64Range(2400500, 2506000).Draw(r, "jd")
		at, err := FromJD(jd, "JD_UTC")
		if err != nil {
			r.Fatal(err)
		}
		if math.Abs(at.JDUTC()-jd) > 1e-9 {
			r.Fatalf("JD %.10f came back as %.10f", jd, at.JDUTC())
		}
		tt, err := FromJD(jd, "JD_TT")
		if err != nil {
			r.Fatal(err)
		}
		if math.Abs(tt.JDTT()-jd) > 1e-9+1.0/86400 { // a leap second may fall between
			r.Fatalf("JD_TT %.10f came back as %.10f", jd, tt.JDTT())
		}
	})
}

func TestRange(t *testing.T) {
	for _, y := range []int{1, 1859, 2150, 9999} {
		if _, err := At(time.Date(y, 6, 1, 0, 0, 0, 0, time.UTC)); !errors.Is(err, ErrRange) {
			t.Errorf("year %d: error %v, want ErrRange", y, err)
		}
	}
	if _, err := AtDUT1(time.Date(2026, 1, 1, 0, 0, 0, 0, time.UTC), 3); err == nil {
		t.Error("UT1-UTC of 3 s was accepted")
	}
	if _, err := FromJD(2451545, "HJD"); err == nil {
		t.Error("an HJD was taken for an instant")
	}
}
