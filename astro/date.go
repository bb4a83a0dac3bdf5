package astro

import (
	"fmt"
	"time"
)

// Date is a day of the Gregorian calendar, without time or zone; it names a
// night by its evening.
type Date struct {
	Year  int
	Month time.Month
	Day   int
}

// DateOf returns the calendar day of a time in the time's own zone.
func DateOf(t time.Time) Date {
	y, m, d := t.Date()
	return Date{y, m, d}
}

// ParseDate reads YYYY-MM-DD; a day that does not exist is an error.
func ParseDate(s string) (Date, error) {
	t, err := time.Parse("2006-01-02", s)
	if err != nil {
		return Date{}, fmt.Errorf("date %q: not a day of the calendar; write YYYY-MM-DD, e.g. 2026-12-01", s)
	}
	return DateOf(t), nil
}

// String writes YYYY-MM-DD.
func (d Date) String() string { return fmt.Sprintf("%04d-%02d-%02d", d.Year, d.Month, d.Day) }

// Midnight returns 0h UTC of the day.
func (d Date) Midnight() time.Time { return time.Date(d.Year, d.Month, d.Day, 0, 0, 0, 0, time.UTC) }

// Next returns the day n days later.
func (d Date) Next(n int) Date { return DateOf(d.Midnight().AddDate(0, 0, n)) }

// Before tells whether d comes before e.
func (d Date) Before(e Date) bool { return d.Midnight().Before(e.Midnight()) }
