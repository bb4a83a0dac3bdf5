package kit

import (
	"evenfall/astro"
	"evenfall/targets/light"
	"evenfall/targets/moment"
)

// Lights is where the screens have forecasts over time, measured magnitudes
// and dated happenings from. It is asked by several goroutines.
type Lights interface {
	// Chart returns the forecast at each of several instants.
	Chart(p *moment.Prepared, at []astro.Instant, ask light.Ask) []light.Forecast
	// Past returns the measured magnitudes, oldest first.
	Past(p *moment.Prepared) []light.Seen
	// Events dates what a target does between two instants.
	Events(p *moment.Prepared, site astro.Site, asOf, from, until astro.Instant) []light.Event
	// Next dates the next happening of each kind.
	Next(p *moment.Prepared, from astro.Instant) []light.Event
}

// Forecast is what the targets' own forecasts say.
type Forecast struct{}

// Chart returns the forecast at each of several instants.
func (Forecast) Chart(p *moment.Prepared, at []astro.Instant, ask light.Ask) []light.Forecast {
	return p.Light.Chart(at, ask)
}

// Past returns the measured magnitudes.
func (Forecast) Past(p *moment.Prepared) []light.Seen { return p.Light.Past() }

// Events dates what a target does.
func (Forecast) Events(p *moment.Prepared, site astro.Site, asOf, from, until astro.Instant) []light.Event {
	return p.Light.EventsAsOf(site, asOf, from, until)
}

// Next dates the next happening of each kind.
func (Forecast) Next(p *moment.Prepared, from astro.Instant) []light.Event { return p.Light.Next(from) }

// LightsOf returns where a world has them from.
func LightsOf(w *World) Lights {
	if w.Lights == nil {
		return Forecast{}
	}
	return w.Lights
}
