package astro

import (
	"math"
	"time"
)

// j2000Unix is 2000-01-01 12:00:00 as a count of seconds since 1970 that
// leaves out leap seconds, the way time.Time counts.
const j2000Unix = 946728000

// Instant is a moment, known in UTC, UT1 and TT at once so that the scales
// cannot be mixed up. Made by package timescale and nowhere else.
type Instant struct {
	utc       time.Time
	midnight  time.Time // a 0h UTC to count from
	day0      float64   // days since JD 2451545.0 at that midnight; ends in .5
	taiMinus  float64   // TAI - UTC, s
	ut1Minus  float64   // UT1 - UTC, s
	predicted bool
}

// ttMinusTAI in seconds; exact by definition of TT.
const ttMinusTAI = 32.184

// Offsets is how the time scales differ at a moment, seconds.
type Offsets struct {
	TAIMinusUTC float64
	UT1MinusUTC float64
	Predicted   bool // later than what is announced: a leap second may yet come
}

// InstantOn is the door that package timescale uses: the civil time, and the
// Julian date of 0h UTC of its day.
func InstantOn(utc time.Time, jdMidnight float64, o Offsets) Instant {
	utc = utc.UTC()
	return Instant{utc: utc, midnight: utc.Truncate(24 * time.Hour), day0: jdMidnight - 2451545,
		taiMinus: o.TAIMinusUTC, ut1Minus: o.UT1MinusUTC, predicted: o.Predicted}
}

// InstantFrom makes an instant for tests that need no calendar; programs ask
// package timescale.
func InstantFrom(utc time.Time, taiMinusUTC, ut1MinusUTC float64, predicted bool) Instant {
	midnight := utc.UTC().Truncate(24 * time.Hour)
	jd := 2451545 + float64(midnight.Unix()-j2000Unix)/86400
	return InstantOn(utc, jd, Offsets{taiMinusUTC, ut1MinusUTC, predicted})
}

// UTC returns the moment as civil time.
func (t Instant) UTC() time.Time { return t.utc }

// Predicted tells whether UTC at that date may still change by leap seconds
// not yet announced.
func (t Instant) Predicted() bool { return t.predicted }

// IsZero tells whether the instant was never set.
func (t Instant) IsZero() bool { return t.utc.IsZero() }

// daysUTC returns days of 86400 s since 2000-01-01 12:00 UTC.
func (t Instant) daysUTC() float64 {
	return t.day0 + float64(t.utc.Sub(t.midnight))/86400e9
}

// DaysTT returns days since J2000.0 (JD 2451545.0) in terrestrial time, to
// better than a microsecond over a century.
func (t Instant) DaysTT() float64 {
	return t.daysUTC() + (t.taiMinus+ttMinusTAI)/86400
}

// DaysUT1 returns days since JD 2451545.0 in UT1, the Earth's rotation.
func (t Instant) DaysUT1() float64 { return t.daysUTC() + t.ut1Minus/86400 }

// CenturiesTT returns Julian centuries since J2000.0 in terrestrial time.
func (t Instant) CenturiesTT() float64 { return t.DaysTT() / 36525 }

// YearsTT returns the Julian year, e.g. 2026.92, in terrestrial time.
func (t Instant) YearsTT() float64 { return 2000 + t.DaysTT()/365.25 }

// JDUTC returns the Julian date in UTC, day; the float resolves 40 microseconds.
func (t Instant) JDUTC() float64 { return 2451545 + t.daysUTC() }

// JDTT returns the Julian date in TT, day; the float resolves 40 microseconds.
func (t Instant) JDTT() float64 { return 2451545 + t.DaysTT() }

// TTMinusUTC returns TT - UTC.
func (t Instant) TTMinusUTC() time.Duration {
	return time.Duration(math.Round((t.taiMinus + ttMinusTAI) * 1e9))
}

// UT1MinusUTC returns UT1 - UTC, seconds, as the user gave it (0 by default).
func (t Instant) UT1MinusUTC() float64 { return t.ut1Minus }

// Add returns the instant d later, with the same offsets between the scales:
// right within a night; across a leap second ask package timescale anew.
func (t Instant) Add(d time.Duration) Instant {
	t.utc = t.utc.Add(d)
	return t
}

// Sub returns t - u.
func (t Instant) Sub(u Instant) time.Duration { return t.utc.Sub(u.utc) }

// Before tells whether t comes before u.
func (t Instant) Before(u Instant) bool { return t.utc.Before(u.utc) }

// After tells whether t comes after u.
func (t Instant) After(u Instant) bool { return t.utc.After(u.utc) }

// Span is a stretch of time from From until Until, half open.
type Span struct{ From, Until Instant }

// Contains tells whether t lies in the span.
func (s Span) Contains(t Instant) bool { return !t.Before(s.From) && t.Before(s.Until) }

// Length returns the duration.
func (s Span) Length() time.Duration { return s.Until.Sub(s.From) }

// Middle returns the instant half way.
func (s Span) Middle() Instant { return s.From.Add(s.Length() / 2) }

// Intersect returns the times that lie in both lists. Both must be sorted and
// free of overlap, and so is the answer.
func Intersect(a, b []Span) []Span {
	var out []Span
	for i, j := 0, 0; i < len(a) && j < len(b); {
		from, until := a[i].From, a[i].Until
		if b[j].From.After(from) {
			from = b[j].From
		}
		if b[j].Until.Before(until) {
			until = b[j].Until
		}
		if from.Before(until) {
			out = append(out, Span{from, until})
		}
		if a[i].Until.Before(b[j].Until) {
			i++
		} else {
			j++
		}
	}
	return out
}

// Total returns the summed length of spans.
func Total(spans []Span) time.Duration {
	var d time.Duration
	for _, s := range spans {
		d += s.Length()
	}
	return d
}
