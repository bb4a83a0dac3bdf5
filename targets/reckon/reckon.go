// Package reckon works out what an entry of the log means in the sky: the
// airmass at its start, middle and end, the middle of its exposures in UTC and
// BJD_TDB, the Moon, and the brightness that was expected then. It writes
// nothing.
package reckon

import (
	"fmt"
	"time"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
)

// Sky is where an entry was made.
type Sky struct {
	Site  astro.Site
	Night func(astro.Date) (*moment.Night, error)
}

// Fill completes an entry with what follows from its times and its target.
//
// Given:
//   - e: with its start, and its end where it has one.
//   - p: its target as prepared; nil: none, then only the middle is filled.
//
// Returns:
//   - an error where a time is out of range; the entry is then as it was but
//     for its middle.
//
// Notes:
//  1. The middle is that of start and end: frames of equal length with equal
//     pauses have it in common.
//  2. The expected magnitude is the one in the entry's band, in the best known
//     band where it names none.
//
// Checked: TestFill: every figure is that of moment.Of.
func Fill(e *logbook.Entry, p *moment.Prepared, sky Sky) error {
	end := e.End
	if end.IsZero() {
		end = e.Start
	}
	e.Mid = e.Start.Add(end.Sub(e.Start) / 2)
	// what followed from other times or another target holds no more
	none := targets.Measure{}
	e.AirmassStart, e.AirmassMid, e.AirmEnd, e.MidBJD, e.MoonAltDeg, e.MoonSepDeg, e.MoonLit, e.ExpectMag = none, none, none, none, none, none, none, none
	if p == nil {
		return nil
	}
	at := func(t time.Time) (moment.Scene, moment.Moment, error) {
		i, err := timescale.AtDUT1(t, sky.Site.DUT1)
		if err != nil {
			return moment.Scene{}, moment.Moment{}, err
		}
		date, err := moment.DateOfTonight(sky.Site, i)
		if err != nil {
			return moment.Scene{}, moment.Moment{}, err
		}
		n, err := sky.Night(date)
		if err != nil {
			return moment.Scene{}, moment.Moment{}, err
		}
		s := moment.NewScene(n, i)
		// windows do not matter here, so no course is worked out
		return s, moment.Of(&s, p, &moment.Course{}, moment.Want{Band: e.Band}), nil
	}
	_, first, err := at(e.Start)
	if err != nil {
		return fmt.Errorf("start: %w", err)
	}
	scene, mid, err := at(e.Mid)
	if err != nil {
		return fmt.Errorf("middle: %w", err)
	}
	_, last, err := at(end)
	if err != nil {
		return fmt.Errorf("end: %w", err)
	}
	for _, x := range []struct {
		into *targets.Measure
		m    *moment.Moment
	}{{&e.AirmassStart, &first}, {&e.AirmassMid, &mid}, {&e.AirmEnd, &last}} {
		if x.m.AirOK {
			*x.into = targets.Known(float64(x.m.Airmass))
		}
	}
	e.MidBJD = targets.Known(mid.Barycentric.BJDTDB)
	e.MoonAltDeg = targets.Known(scene.Moon.Place.Alt.Deg())
	e.MoonSepDeg = targets.Known(mid.MoonSep.Deg())
	e.MoonLit = targets.Known(scene.Phase.Illuminated)
	if mid.Expect.Known && (e.Band == "" || mid.Expect.Band == e.Band) {
		e.ExpectMag = targets.Known(mid.Expect.Mag.Mags())
	}
	return nil
}
