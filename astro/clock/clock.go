// Package clock says what time it is now, and nothing else does: the rest of
// the program is handed a Clock or an instant, so that tests stand still and a
// night can be played ahead of time.
package clock

import (
	"fmt"
	"time"
)

// Clock tells the time.
type Clock interface{ Now() time.Time }

// System is the computer's own clock, in UTC.
type System struct{}

// Now returns the present time.
func (System) Now() time.Time { return time.Now().UTC() }

// Fixed is a clock that stands still.
type Fixed struct{ At time.Time }

// Now returns the time the clock stands at.
func (f Fixed) Now() time.Time { return f.At.UTC() }

// Shifted runs with another clock, ahead of it by By (behind where negative).
type Shifted struct {
	Of Clock
	By time.Duration
}

// Now returns the shifted time.
func (s Shifted) Now() time.Time { return s.Of.Now().Add(s.By) }

// DisciplineWords says in words whether the clock is kept right.
func DisciplineWords(ok bool, withinS float64) string {
	switch {
	case !ok:
		return "clock not checked"
	case withinS < 0.1:
		return fmt.Sprintf("clock disciplined, within %.0f ms", 1000*withinS)
	}
	return fmt.Sprintf("clock disciplined, within %.1f s", withinS)
}
