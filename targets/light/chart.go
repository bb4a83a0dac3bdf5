package light

import (
	"evenfall/astro"
	"evenfall/targets"
)

// Seen is one measured magnitude and what the forecast made of it.
type Seen struct {
	targets.Magnitude
	At       astro.Instant // zero where its date is none
	Used     bool
	Unlikely bool   // the forecast gave it less than 0.1: marked, kept
	Why      string // why it is set aside, where it is not used
}

// Chart returns the forecast at each of several instants, for drawing.
//
// Notes:
//  1. Each instant is taught by the magnitudes up to itself, a filter for each
//     of them; with ask.AsOf by those up to that instant, one filter for all.
func (s *State) Chart(at []astro.Instant, ask Ask) []Forecast {
	out := make([]Forecast, len(at))
	for i := range at {
		out[i] = s.At(at[i], ask)
	}
	return out
}

// Past returns the measured magnitudes that the state was made with, oldest
// first, those without a date before all.
//
// Returns:
//   - every magnitude: those used, marked where the forecast took them for
//     outliers, and those set aside with the reason: no date, outside -2 to 25,
//     an unknown band, given twice, too old, of no use to the kind of star.
//
// Checked: TestPast.
func (s *State) Past() []Seen { return s.past(len(s.readings)) }

// PastAt returns the same as they stood at an instant: later ones are set
// aside.
//
// Checked: TestPast.
func (s *State) PastAt(t astro.Instant) []Seen { return s.past(s.until(t)) }

func (s *State) past(n int) []Seen {
	verdicts := s.model.judge(n)
	out := make([]Seen, len(s.readings))
	for i := range s.readings {
		r := &s.readings[i]
		out[i] = Seen{Magnitude: r.Magnitude, At: r.at, Why: r.why}
		switch {
		case r.why != "":
		case i >= n:
			out[i].Why = "later than the instant asked for"
		case verdicts[i].used:
			out[i].Used, out[i].Unlikely = true, verdicts[i].p < unlikelyP
		default:
			out[i].Why = verdicts[i].why
		}
	}
	return out
}
