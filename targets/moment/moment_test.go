package moment

import (
	"math"
	"slices"
	"sync"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/check"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/astro/meeusfence"
	"evenfall/targets"
	"evenfall/targets/light"
)

// sharedModels are made once for all tests of the package.
var sharedModels = sync.OnceValue(NewModels)

// Every field of a moment is what its own package says.
func TestOfAgreesWithParts(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	at := testInstant(t, "2026-12-02T04:00:00Z")
	s := NewScene(n, at)
	f := frame.At(testSite, at)
	sun, moon := ephem.Sun(&f), ephem.Moon(&f)
	for i := range stars {
		p := &stars[i]
		c := Tonight(n, p, Want{})
		m := Of(&s, p, &c, Want{Band: "V", Level: 0.5})
		place := f.Horizontal(&p.Star)
		if m.Place != place {
			t.Errorf("%s: place %+v, frame says %+v", p.Target.Name, m.Place, place)
		}
		check.Near(t, m.Apparent.Deg(), air.Refract(place.Alt, testSite.Air).Deg(), 0, "refracted altitude of %s", p.Target.Name)
		if x, err := air.Mass(m.Apparent); (err == nil) != m.AirOK || (err == nil && x != m.Airmass) {
			t.Errorf("%s: airmass %v %v, air says %v %v", p.Target.Name, m.Airmass, m.AirOK, x, err)
		}
		check.Near(t, m.MoonSep.Deg(), astro.Separation(place.Dir, moon.Dir).Deg(), 0, "distance from the Moon")
		check.Near(t, m.SunSep.Deg(), astro.Separation(place.Dir, sun.Dir).Deg(), 0, "distance from the Sun")
		if m.Barycentric != f.Barycentre(&p.Star) {
			t.Errorf("%s: barycentric corrections differ", p.Target.Name)
		}
		want := p.Light.At(at, light.Ask{Band: "V", Level: 0.5})
		if m.Expect.Mag != want.Mag || m.Expect.Basis != want.Basis {
			t.Errorf("%s: brightness differs", p.Target.Name)
		}
		if (len(m.BlockedBy) == 0) != m.InCan {
			t.Errorf("%s: inside can %v with %d reasons against", p.Target.Name, m.InCan, len(m.BlockedBy))
		}
	}
}

// The built-in list by the ephemeris library alone, space motion and parallax
// given alike to both: 1.5 arcsec, further than 5 degrees from a pole. The
// library's own error is below 0.9, its missing diurnal aberration 0.33.
func TestBuiltinAgainstPlain(t *testing.T) {
	const tolerance = 1.5
	worst := 0.0
	stars := testStars(t)
	for _, utc := range []string{"2022-03-01T02:00:00Z", "2026-12-02T04:00:00Z", "2031-06-15T11:00:00Z", "2044-09-09T20:00:00Z"} {
		at := testInstant(t, utc)
		f := frame.At(testSite, at)
		plain := meeusfence.NewPlain(testSite, at)
		for i := range stars {
			p := &stars[i]
			if math.Abs(p.Target.Place.Dec.Deg()) > 85 {
				continue
			}
			got := f.Horizontal(&p.Star)
			plx := math.Max(p.Target.Place.Plx.Value, 0) / 1000 / 206264.806
			geocentric := got.ICRS.Minus(f.Earth.Bary.Times(plx)).Unit()
			ra, dec := geocentric.LonLat()
			az, alt := plain.Horizontal(ra, dec)
			d := astro.Separation(astro.Direction(az, alt), astro.Direction(got.Az, got.Alt)).Arcsec()
			worst = math.Max(worst, d)
			check.Near(t, d, 0, tolerance, "%s at %s, arcsec", p.Target.Name, utc)
		}
	}
	t.Logf("greatest difference %.2f arcsec", worst)
}

// What is missing is absent and says why; nothing is NaN.
func TestOfMissingData(t *testing.T) {
	n := testNight(t, targets.DefaultLimits())
	bare := targets.Target{Name: "bare", Kind: targets.WD, Place: targets.Place{RA: astro.Deg(80), Dec: astro.Deg(-40), EpochJyr: 2000}}
	p := Prepare(bare, nil, sharedModels())
	c := Tonight(n, &p, Want{})
	s := NewScene(n, testInstant(t, "2026-12-02T04:00:00Z"))
	m := Of(&s, &p, &c, Want{})
	if m.Expect.Known || m.Expect.Basis == "" {
		t.Errorf("brightness of a target without magnitudes: %+v", m.Expect)
	}
	if len(m.Why) < 3 {
		t.Errorf("only %v says what is missing", m.Why)
	}
	drift := p.Drift.Uncertainty(2000, s.Instant).Arcsec()
	check.Near(t, drift, 0.25*26.92, 0.05, "drift of a white dwarf without motion, arcsec")
	for _, v := range []float64{m.Place.Az.Deg(), m.Apparent.Deg(), m.MoonSep.Deg(), m.Barycentric.BJDTDB, m.Place.Parallact.Deg()} {
		if math.IsNaN(v) {
			t.Errorf("NaN in %+v", m.Place)
		}
	}
}

// Windows against a search every 20 s that knows nothing of roots, with every
// kind of limit in play.
func TestWindowsDense(t *testing.T) {
	limits := targets.DefaultLimits()
	limits.Horizon = []targets.HorizonPoint{{Azimuth: astro.Deg(0), Altitude: astro.Deg(10)}, {Azimuth: astro.Deg(100), Altitude: astro.Deg(35)},
		{Azimuth: astro.Deg(200), Altitude: astro.Deg(5)}}
	limits.Moon = astro.Deg(40)
	limits.MaxAltitude = astro.Deg(80)
	n, stars := testNight(t, limits), testStars(t)
	step := 7
	if testing.Short() {
		step = 41
	}
	compared := 0
	for i := 0; i < len(stars); i += step {
		p := &stars[i]
		c := Tonight(n, p, Want{})
		for at := n.Span.From; at.Before(n.Span.Until); at = at.Add(20 * time.Second * time.Duration(step)) {
			_, inside := within(c.Can, at)
			if near(c.Can, at) {
				continue // within a second of an edge either answer is right
			}
			compared++
			if want := allowed(n, p, at); inside != want {
				t.Fatalf("%s at %v: inside can %v, limits one by one say %v", p.Target.Name, at.UTC(), inside, want)
			}
		}
	}
	t.Logf("%d instants compared", compared)
}

func near(spans []astro.Span, at astro.Instant) bool {
	return slices.ContainsFunc(spans, func(s astro.Span) bool {
		return s.From.Sub(at).Abs() < time.Second || s.Until.Sub(at).Abs() < time.Second
	})
}

// allowed asks each limit in turn, the plain way.
func allowed(n *Night, p *Prepared, at astro.Instant) bool {
	l := n.Limits
	f := frame.At(n.Site, at)
	place := f.Horizontal(&p.Star)
	sun, moon := ephem.Sun(&f), ephem.Moon(&f)
	apparent := air.Refract(place.Alt, n.Site.Air)
	ha := place.HourAngle.Hours()
	moonFar := astro.Separation(place.Dir, moon.Dir).Deg() >= l.Moon.Deg() || moon.Place.Alt.Deg() <= -2
	return sun.Place.Alt.Deg() <= -12 && apparent.Deg() >= l.MinAltitude.Deg() && apparent.Deg() <= l.MaxAltitude.Deg() &&
		apparent.Deg() >= horizonAt(sortedHorizon(l.Horizon), place.Az).Deg() && ha >= l.HourAngleH[0] && ha <= l.HourAngleH[1] &&
		astro.Separation(place.Dir, sun.Dir).Deg() >= l.Sun.Deg() && moonFar
}

// Best is the least airmass of the window: no sample of it is better.
func TestBest(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	for i := 0; i < len(stars); i += 5 {
		p := &stars[i]
		c := Tonight(n, p, Want{})
		windows := c.Should
		if len(windows) == 0 {
			windows = c.Can
		}
		if (c.Best != nil) != (len(windows) > 0) {
			t.Fatalf("%s: best %v with %d windows", p.Target.Name, c.Best, len(windows))
		}
		for _, w := range windows {
			if got, _ := within(windows, *c.Best); got.From == w.From && !w.Contains(*c.Best) {
				t.Errorf("%s: best outside the window", p.Target.Name)
			}
			for at := w.From; at.Before(w.Until); at = at.Add(5 * time.Minute) {
				f := frame.At(n.Site, at)
				place := f.Horizontal(&p.Star)
				if alt := air.Refract(place.Alt, n.Site.Air); alt.Deg() > c.BestAltitude.Deg()+1e-5 {
					t.Errorf("%s: altitude %.5f at %v beats best %.5f", p.Target.Name, alt.Deg(), at.UTC(), c.BestAltitude.Deg())
				}
			}
		}
	}
}

// The curve's points are where Of has the star.
func TestCurve(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	for i := 0; i < len(stars); i += 51 {
		span := astro.Span{From: n.Midnight.Add(-3 * time.Hour), Until: n.Midnight.Add(173 * time.Minute)}
		points := Curve(n, &stars[i], &Course{}, Want{}, span)
		if last := points[len(points)-1].At; last.Sub(span.Until) != 0 {
			t.Errorf("%s: ends at %v", stars[i].Target.Name, last.UTC())
		}
		course := Tonight(n, &stars[i], Want{})
		for _, p := range points {
			s := NewScene(n, p.At)
			m := Of(&s, &stars[i], &course, Want{})
			check.Near(t, p.Altitude.Deg(), m.Apparent.Deg(), 1e-9, "altitude of %s", stars[i].Target.Name)
			if p.AirOK != m.AirOK || p.Airmass != m.Airmass {
				t.Errorf("airmass of %s: %v, %v", stars[i].Target.Name, p.Airmass, m.Airmass)
			}
		}
	}
}
