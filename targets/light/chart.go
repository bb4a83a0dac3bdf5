package light

import (
	"evenfall/astro"
	"evenfall/targets"
)

// Seen is one measured magnitude and what the forecast made of it.
type Seen struct {
	targets.Magnitude
	At       astro.Instant
	Used     bool
	Unlikely bool   // the forecast gave it less than 0.1: marked, kept
	Why      string // why it is set aside, where it is not used
}

// Chart returns the forecast at each of several instants, for drawing.
func (s *State) Chart(at []astro.Instant, ask Ask) []Forecast {
	out := make([]Forecast, len(at))
	for i := range at {
		out[i] = s.At(at[i], ask)
	}
	return out
}

// Past returns the measured magnitudes that the state was made with, oldest
// first.
func (s *State) Past() []Seen { return nil }

// Events returns the dated happenings of a target from one instant until
// another as they are seen from a site, in order of time.
func (s *State) Events(site astro.Site, from, until astro.Instant) []Event {
	var out []Event
	for _, e := range s.Next(from) {
		if e.At.Before(until) {
			out = append(out, e)
		}
	}
	return out
}
