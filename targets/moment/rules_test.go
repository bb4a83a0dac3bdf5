package moment

import (
	"math"
	"sort"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// In daylight and near the Sun nothing is ranked, and the reason is given.
func TestRefusedNearSunAndInDaylight(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	for _, utc := range []string{"2026-12-01T18:00:00Z", "2026-12-02T00:10:00Z", "2026-12-02T04:00:00Z", "2026-12-02T12:00:00Z"} {
		s := NewScene(n, testInstant(t, utc))
		list := make([]Moment, len(stars))
		for i := range stars {
			c := Tonight(n, &stars[i], Want{})
			list[i] = Of(&s, &stars[i], &c, Want{})
		}
		Rank(list)
		day := s.Sun.Place.Alt.Deg() > -12
		for i := range list {
			m := &list[i]
			nearSun := m.SunSep.Deg() < 45
			if (day || nearSun) && (m.Rank != 0 || !blockedFor(m, day, nearSun)) {
				t.Errorf("%s at %s: %.1f deg from the Sun, Sun at %.1f deg, rank %d, reasons %v",
					stars[i].Target.Name, utc, m.SunSep.Deg(), s.Sun.Place.Alt.Deg(), m.Rank, m.BlockedBy)
			}
			if day && len(m.BlockedBy) > 0 && m.BlockedBy[0].Code == targets.CodeDaylight && !strings.Contains(m.BlockedBy[0].Words, "Sun is at") {
				t.Errorf("%s: words %q", stars[i].Target.Name, m.BlockedBy[0].Words)
			}
		}
	}
}

func blockedFor(m *Moment, day, nearSun bool) bool {
	found := map[targets.Code]bool{}
	for _, b := range m.BlockedBy {
		found[b.Code] = true
	}
	return (!day || found[targets.CodeDaylight]) && (!nearSun || found[targets.CodeSun])
}

// Ranks are 1, 2, 3 ... over what can be taken; wished-for before possible,
// and among those the sooner end first.
func TestRank(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	s := NewScene(n, testInstant(t, "2026-12-02T04:00:00Z"))
	list := make([]Moment, len(stars))
	for i := range stars {
		c := Tonight(n, &stars[i], Want{})
		list[i] = Of(&s, &stars[i], &c, Want{Weight: 1})
	}
	order := Rank(list)
	wished, lastEnd := true, int64(0)
	for place, i := range order {
		m := &list[i]
		if m.InCan != (m.Rank == place+1) {
			t.Fatalf("place %d has rank %d, can %v", place, m.Rank, m.InCan)
		}
		if !m.InCan {
			continue
		}
		if m.InShould && !wished {
			t.Errorf("place %d is wished for and stands after one that is not", place)
		}
		if wished != m.InShould {
			wished, lastEnd = false, 0
		}
		if e := m.ends(); e < lastEnd {
			t.Errorf("place %d ends before the one above", place)
		} else {
			lastEnd = e
		}
	}
}

// The instrument's own limits and the mode's Sun altitude hold where there is
// one.
func TestHorizonAt(t *testing.T) {
	corners := sortedHorizon([]targets.HorizonPoint{{Azimuth: astro.Deg(350), Altitude: astro.Deg(10)}, {Azimuth: astro.Deg(10), Altitude: astro.Deg(20)}, {Azimuth: astro.Deg(90), Altitude: astro.Deg(0)}})
	for az, want := range map[float64]float64{350: 10, 0: 15, 5: 17.5, 10: 20, 50: 10, 90: 0, 220: 5} {
		check.Near(t, horizonAt(corners, astro.Deg(az)).Deg(), want, 1e-9, "horizon at azimuth %g", az)
	}
	rapid.Check(t, func(r *rapid.T) {
		az := rapid.Float64Range(-720, 720).Draw(r, "az")
		if h := horizonAt(corners, astro.Deg(az)).Deg(); h < 0 || h > 20 {
			r.Fatalf("horizon %g at azimuth %g", h, az)
		}
	})
}

func TestDateOfTonight(t *testing.T) {
	for utc, want := range map[string]string{
		"2026-12-01T20:00:00Z": "2026-12-01", // afternoon there
		"2026-12-02T04:00:00Z": "2026-12-01", // night
		"2026-12-02T09:00:00Z": "2026-12-01", // dawn
		"2026-12-02T12:00:00Z": "2026-12-02", // morning: the night to come
		"2026-12-02T16:30:00Z": "2026-12-02", // just before noon
	} {
		d, err := DateOfTonight(testSite, testInstant(t, utc))
		if err != nil {
			t.Fatal(err)
		}
		if d.String() != want {
			t.Errorf("at %s tonight is %s, want %s", utc, d, want)
		}
	}
}

func TestHandOver(t *testing.T) {
	n := testNight(t, targets.DefaultLimits())
	s := NewScene(n, testInstant(t, "2026-12-02T04:00:00Z"))
	for _, p := range testStars(t) {
		if p.Target.ID != "40-eri-b" && p.Target.ID != "gd-50" {
			continue
		}
		c := Tonight(n, &p, Want{})
		m := Of(&s, &p, &c, Want{})
		applied := HandOver{}.Lines(&p.Target, &m, p.Drift)
		catalogue := HandOver{Motion: MotionCatalogue, Format: Degrees, Separator: " | "}.Lines(&p.Target, &m, p.Drift)
		if !strings.Contains(applied[0], "ICRS") || !strings.Contains(applied[0], "pmra 0 mas/yr") || !strings.Contains(applied[0], "epoch J2026.9") {
			t.Errorf("applied: %q", applied[0])
		}
		if !strings.Contains(catalogue[0], " | ICRS | epoch J2000.0000 | ") {
			t.Errorf("catalogue: %q", catalogue[0])
		}
		if p.Target.ID == "40-eri-b" {
			// 26.9 years at -2236 and -3339 mas/yr from 04 15 21.796 -07 39 29.20
			if !strings.Contains(applied[0], "04 15 17.7") || !strings.Contains(applied[0], "-07 40 59.") || len(applied) < 3 {
				t.Errorf("40 Eri B is handed over as %q", applied)
			}
		}
	}
}

func TestSteps(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	s := NewScene(n, testInstant(t, "2026-12-02T04:00:00Z"))
	models := sharedModels()
	for i := range stars {
		c := Tonight(n, &stars[i], Want{})
		m := Of(&s, &stars[i], &c, Want{})
		study := stars[i].Study(models)
		for _, st := range Steps(&s, &stars[i], &m, &study) {
			if st.What == "" || st.Formula == "" || st.Inputs == "" || st.Result == "" || st.Source == "" {
				t.Errorf("%s: a step lacks a part: %+v", stars[i].Target.Name, st)
			}
		}
	}
}

// Polar day: no darkness, nothing is ranked, nothing fails.
func TestPolarDay(t *testing.T) {
	site := astro.Site{Lat: astro.Deg(78), Lon: astro.Deg(15), Air: astro.DefaultWeather(0)}
	n, err := NewNight(site, astro.Date{Year: 2026, Month: 6, Day: 20}, targets.DefaultLimits(), targets.Conditions{})
	if err != nil {
		t.Fatal(err)
	}
	p := testStars(t)[0]
	c := Tonight(n, &p, Want{})
	s := NewScene(n, n.DefaultMoment())
	m := Of(&s, &p, &c, Want{})
	if len(c.Can) != 0 || c.Best != nil || m.InCan || m.BlockedBy[0].Until != nil {
		t.Errorf("polar day: %+v", m.BlockedBy)
	}
	if got := s.Instant.Sub(n.Midnight); got > time.Minute || got < -time.Minute {
		t.Errorf("without darkness the moment is %v from midnight", got)
	}
}

// What such white dwarfs move is the median of those that list it.
func TestTypicalMotion(t *testing.T) {
	var motions []float64
	for _, p := range testStars(t) {
		if pl := p.Target.Place; p.Target.Kind == targets.WD && p.Target.MotionKnown() {
			motions = append(motions, math.Hypot(pl.PMRA.Value, pl.PMDec.Value)/1000)
		}
	}
	sort.Float64s(motions)
	check.Near(t, motions[len(motions)/2], typicalMotionWD.Arcsec(), 0.03, "median motion of %d white dwarfs, arcsec a year", len(motions))
}

// An instrument's own limits and a mode's Sun altitude take the place of the
// site's; one that is not mounted closes the night.
func TestInstrumentLimits(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	p := &stars[0]
	for k := range stars {
		if stars[k].Target.ID == "tau4-eri" { // culminates in the middle of the night
			p = &stars[k]
		}
	}
	i := instrument.Instrument{Name: "a", Limits: targets.DefaultLimits()}
	i.Limits.HourAngleH = [2]float64{-1, 1}
	m := instrument.Mode{Name: "flat", MaxSunAltitude: astro.Deg(-3), MaxSunAltitudeOK: true}
	c := Tonight(n, p, Want{Instrument: &i, Mode: &m})
	length := astro.Total(c.Can).Hours()
	check.Near(t, length, 2*0.99727, 0.01, "hours within an hour angle of 1 h")
	if c := Tonight(n, p, Want{Instrument: &i, NotMounted: "a"}); len(c.Can) != 0 {
		t.Error("an instrument that is not mounted is used")
	}
	i.Limits = targets.DefaultLimits()
	p = &stars[0] // bet Hyi, high already at dusk
	with, without := Tonight(n, p, Want{Instrument: &i, Mode: &m}), Tonight(n, p, Want{})
	if !with.Can[0].From.Before(without.Can[0].From) {
		t.Errorf("a mode for a brighter sky begins at %v, without it at %v", with.Can[0].From.UTC(), without.Can[0].From.UTC())
	}
}

// A sector of cloud closes the stars in it, across north too; one without
// width closes none.
func TestCloudSector(t *testing.T) {
	for _, c := range []struct {
		from, to, az float64
		in           bool
	}{{270, 330, 300, true}, {270, 330, 200, false}, {330, 30, 5, true}, {330, 30, 100, false}, {10, 10, 10, false}} {
		k := targets.Conditions{CloudFrom: targets.Known(c.from), CloudTo: targets.Known(c.to)}
		middle, half, ok := CloudSector(&k)
		in := ok && math.Abs(astro.Deg(c.az).Minus(middle).Signed().Deg()) < half
		if in != c.in {
			t.Errorf("%v", c)
		}
	}
	n, err := NewNight(testSite, astro.Date{Year: 2026, Month: 12, Day: 1}, targets.DefaultLimits(), targets.Conditions{CloudFrom: targets.Known(0), CloudTo: targets.Known(359.9)})
	if err != nil {
		t.Fatal(err)
	}
	blocked := 0
	for _, p := range testStars(t)[:20] {
		c := Tonight(n, &p, Want{})
		s := NewScene(n, testInstant(t, "2026-12-02T04:00:00Z"))
		m := Of(&s, &p, &c, Want{})
		for _, b := range m.BlockedBy {
			if b.Code == targets.CodeCloud && b.Words != "" {
				blocked++
			}
		}
	}
	if blocked != 20 {
		t.Errorf("%d of 20 stars are behind cloud all around", blocked)
	}
}

// In the forenoon before a night only what holds all day is given as a reason.
func TestForenoon(t *testing.T) {
	n := testNight(t, targets.DefaultLimits())
	s := NewScene(n, testInstant(t, "2026-12-01T14:17:00Z"))
	for _, p := range testStars(t)[:40] {
		c := Tonight(n, &p, Want{NotMounted: "imager"})
		m := Of(&s, &p, &c, Want{})
		if m.InCan || len(m.BlockedBy) != 2 || m.BlockedBy[0].Code != targets.CodeDaylight || m.BlockedBy[1].Code != targets.CodeInstrument {
			t.Errorf("%s: %+v", p.Target.Name, m.BlockedBy)
		}
	}
}
