package ephem

import (
	"fmt"
	"math"
	"math/rand"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/frame"
)

// dense finds crossings by looking every 20 s and halving: slow and obvious.
func dense(f func(astro.Instant) float64, span astro.Span) []Crossing {
	const every = 20 * time.Second
	var out []Crossing
	last := f(span.From)
	for t := span.From.Add(every); !t.After(span.Until); t = t.Add(every) {
		v := f(t)
		if (v < 0) != (last < 0) {
			lo, hi := t.Add(-every), t
			for range 20 {
				mid := lo.Add(hi.Sub(lo) / 2)
				if (f(mid) < 0) == (last < 0) {
					lo = mid
				} else {
					hi = mid
				}
			}
			out = append(out, Crossing{lo, v >= 0})
		}
		last = v
	}
	return out
}

// same demands the same events: none missed, none invented, each within 1 s.
// Two crossings less than 40 s apart, a graze between the samples of the dense
// search, may be missing there.
func same(t *testing.T, what string, got, want []Crossing, missedByDense int) {
	t.Helper()
	if len(got) != len(want) {
		if len(got)-len(want) == 2 && missedByDense > 0 {
			return
		}
		t.Errorf("%s: %d crossings, a dense search finds %d", what, len(got), len(want))
		return
	}
	for i := range got {
		if got[i].Up != want[i].Up || math.Abs(got[i].At.Sub(want[i].At).Seconds()) > 1 {
			t.Errorf("%s: crossing %d at %v up %v, dense search %v up %v", what, i,
				got[i].At.UTC(), got[i].Up, want[i].At.UTC(), want[i].Up)
		}
	}
}

// grazes counts neighbouring crossings that the dense search may step over.
func grazes(found []Crossing) int {
	n := 0
	for i := 1; i < len(found); i++ {
		if found[i].At.Sub(found[i-1].At) < 40*time.Second {
			n++
		}
	}
	return n
}

func TestCrossingsDense(t *testing.T) {
	r := rand.New(rand.NewSource(20261201))
	lats := []float64{-90, -80, -67, -66.2, -65.7, -48.6, -29.26, 0, 28.76, 42, 55, 60, 65.7, 66, 66.56, 67.4, 70, 78, 85, 89.9}
	nights := 8
	if testing.Short() {
		nights = 2
	}
	events := 0
	for _, lat := range lats {
		for range nights {
			site := astro.Site{Lat: astro.Deg(lat), Lon: astro.Deg(360*r.Float64() - 180), HeightM: 3000 * r.Float64()}
			date := astro.Date{Year: 2020, Month: 1, Day: 1}.Next(r.Intn(9000))
			events += compareNight(t, site, date)
		}
	}
	t.Logf("%d events compared", events)
}

// compareNight checks every altitude of Sun and Moon that a night holds.
func compareNight(t *testing.T, site astro.Site, date astro.Date) int {
	span, err := NoonToNoon(site, date)
	if err != nil {
		t.Fatal(err)
	}
	sun := remember(sunAltitude(site))
	moon := remember(func(at astro.Instant) float64 {
		f := frame.At(site, at)
		return MoonLimb(&f).Deg()
	})
	events := 0
	for what, g := range map[string]func(astro.Instant) float64{
		"sunset": func(at astro.Instant) float64 { return sun(at) - SunsetAltitude.Deg() },
		"-6":     func(at astro.Instant) float64 { return sun(at) + 6 },
		"-12":    func(at astro.Instant) float64 { return sun(at) + 12 },
		"-18":    func(at astro.Instant) float64 { return sun(at) + 18 },
		"moon":   moon,
	} {
		got, _ := Crossings(g, span, step)
		want := dense(g, span)
		same(t, fmt.Sprintf("%s at latitude %.2f longitude %.2f night of %s", what, site.Lat.Deg(), site.Lon.Deg(), date),
			got, want, grazes(got))
		events += len(want)
	}
	return events
}

// A function that dips below zero for a known stretch between two samples.
func TestHiddenPair(t *testing.T) {
	span, err := NoonToNoon(astro.Site{}, astro.Date{Year: 2026, Month: 12, Day: 1})
	if err != nil {
		t.Fatal(err)
	}
	for _, width := range []time.Duration{time.Second, 10 * time.Second, time.Minute, 20 * time.Minute} {
		centre := span.From.Add(9*time.Hour + 13*time.Minute)
		dip := func(at astro.Instant) float64 {
			x := at.Sub(centre).Hours()
			w := width.Hours() / 2
			return x*x - w*w
		}
		found, _ := Crossings(dip, span, step)
		if len(found) != 2 {
			t.Errorf("a dip of %v: %d crossings", width, len(found))
			continue
		}
		check.Near(t, found[1].At.Sub(found[0].At).Seconds(), width.Seconds(), 0.1, "width of a dip, s")
	}
}
