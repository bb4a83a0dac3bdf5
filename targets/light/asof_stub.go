package light

import "evenfall/astro"

func (s *State) EventsAsOf(site astro.Site, asOf, from, until astro.Instant) []Event {
	return s.Events(site, from, until)
}
