package reckon

import (
	"sync"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
)

// sharedModels are made once for all tests of the package.
var sharedModels = sync.OnceValue(moment.NewModels)

// Every figure is that of moment.Of at the instant it is for.
func TestFill(t *testing.T) {
	site := astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400, Air: astro.DefaultWeather(2400)}
	night := func(d astro.Date) (*moment.Night, error) {
		return moment.NewNight(site, d, targets.DefaultLimits(), targets.Conditions{})
	}
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	start := time.Date(2026, 12, 2, 3, 0, 0, 0, time.UTC)
	for i := 0; i < len(stars); i += 17 {
		p := moment.Prepare(stars[i], nil, sharedModels())
		e := logbook.Entry{Type: "science", Target: stars[i].Name, Start: start, End: start.Add(40 * time.Minute)}
		if err := Fill(&e, &p, Sky{site, night}); err != nil {
			t.Fatal(err)
		}
		n, err := night(astro.Date{Year: 2026, Month: 12, Day: 1})
		if err != nil {
			t.Fatal(err)
		}
		for k, got := range []targets.Measure{e.AirmassStart, e.AirmassMid, e.AirmEnd} {
			at, err := timescale.At(start.Add(time.Duration(20*k) * time.Minute))
			if err != nil {
				t.Fatal(err)
			}
			s := moment.NewScene(n, at)
			c := moment.Tonight(n, &p, moment.Want{})
			m := moment.Of(&s, &p, &c, moment.Want{})
			if got.Known != m.AirOK {
				t.Errorf("%s: airmass known %v, %v", e.Target, got.Known, m.AirOK)
			}
			if m.AirOK {
				check.Near(t, got.Value, float64(m.Airmass), 1e-12, "airmass of %s", e.Target)
			}
			if k == 1 {
				check.Near(t, e.MidBJD.Value, m.Barycentric.BJDTDB, 1e-9, "BJD")
				check.Near(t, e.MoonSepDeg.Value, m.MoonSep.Deg(), 1e-9, "Moon")
				if m.Expect.Known {
					check.Near(t, e.ExpectMag.Value, m.Expect.Mag.Mags(), 1e-12, "expected")
				}
			}
		}
		if !e.Mid.Equal(start.Add(20 * time.Minute)) {
			t.Errorf("middle %v", e.Mid)
		}
	}
	e := logbook.Entry{Type: "flat", Start: start, End: start.Add(time.Minute)}
	if err := Fill(&e, nil, Sky{site, night}); err != nil || e.AirmassMid.Known || !e.Mid.Equal(start.Add(30*time.Second)) {
		t.Errorf("without a target: %+v, %v", e, err)
	}
	e.Start = time.Date(1700, 1, 1, 0, 0, 0, 0, time.UTC)
	e.End = time.Time{}
	p := moment.Prepare(stars[0], nil, sharedModels())
	if err := Fill(&e, &p, Sky{site, night}); err == nil {
		t.Error("the year 1700 is reckoned with")
	}
}
