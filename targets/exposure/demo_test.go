package exposure_test

import (
	"errors"
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/skyglow"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/exposure"
	"evenfall/targets/instrument"
	"evenfall/targets/light"
	"evenfall/targets/run"
	"evenfall/targets/stage"

	"time"
)

// TestDemonstration: every request of the demonstration, and the default request
// of every built-in target, has an exposure or a reason, and most have one.
func TestDemonstration(t *testing.T) {
	r, _ := run.Open(builtin.Demo(), "demonstration")
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	at, err := timescale.At(time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC))
	if err != nil {
		t.Fatal(err)
	}
	ext, err := skyglow.NewExtinction(skyglow.AirAbove{HeightM: 2400, Measured: r.Config.Sky.ExtinctionMag})
	if err != nil {
		t.Fatal(err)
	}
	models := stage.NewModels()
	done, why := 0, map[string]int{}
	one := func(target *targets.Target, q *targets.Request) {
		i, ok := r.Config.Instrument(q.Instrument)
		if !ok {
			return
		}
		m, ok := i.Mode(q.Mode)
		if !ok {
			m = &i.Modes[0]
		}
		g, err := exposure.GoalOf(q, i.Kind)
		if err != nil {
			t.Fatal(err)
		}
		band := m.Band
		if i.Kind == instrument.Slit {
			band = ""
		}
		state := light.NewState(*target, models.Judge(*target), nil)
		f := state.At(at, light.Ask{Band: band})
		if !f.Known {
			f = state.At(at, light.Ask{})
		}
		g.CycleS = exposure.CycleOf(target)
		s := exposure.Setting{Instrument: i, Mode: m, Goal: g, Source: exposure.SourceOf(target, f.Band, exposure.FromForecast(f), exposure.ColoursOf(target)), Extinction: ext, Airmass: 1.3,
			Sky: func(skyglow.Band) (skyglow.Brightness, error) {
				return skyglow.Brightness{Total: astro.MagArcsec2(21)}, nil
			}, SeeingArcsec: 1, HeightM: 2400, Pointing: &exposure.Pointing{Lat: r.Config.Site.Lat, Dec: target.Place.Dec, HourAngle: astro.Hours(1)}}
		a := exposure.Solve(s)
		var reason *exposure.Reason
		switch {
		case a.Err == nil && (!(a.BookedS > 0) || math.IsInf(a.BookedS, 0) || len(a.Steps()) < 8):
			t.Errorf("%s: %+v", target.Name, a)
		case a.Err == nil:
			done++
		case !errors.As(a.Err, &reason):
			t.Errorf("%s: %v", target.Name, a.Err)
		default:
			why[string(reason.Code)]++
			t.Logf("%s in %s: %v", target.Name, m.Name, reason)
		}
	}
	byName := map[string]*targets.Target{}
	for k := range stars {
		byName[targets.Key(stars[k].Name)], byName[targets.Key(stars[k].ID)] = &stars[k], &stars[k]
		if q, ok := r.Config.DefaultRequest(stars[k].Kind); ok {
			one(&stars[k], &q)
		}
	}
	for k := range r.Requests {
		if target := byName[targets.Key(r.Requests[k].Target)]; target != nil {
			one(target, &r.Requests[k])
		}
	}
	t.Logf("%d exposures, none: %v", done, why)
	if done < 180 {
		t.Errorf("only %d exposures: %v", done, why)
	}
}
