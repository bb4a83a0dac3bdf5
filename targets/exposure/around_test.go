package exposure

import (
	"math"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/timescale"
	"evenfall/targets"
)

func at(t testing.TB, text string) astro.Instant {
	t.Helper()
	when, err := time.Parse(time.RFC3339, text)
	if err != nil {
		t.Fatal(err)
	}
	i, err := timescale.At(when)
	if err != nil {
		t.Fatal(err)
	}
	return i
}

// TestParallactic: ERFA hd2pa and hd2ae for latitude 29, declination 20, hour
// angle -15 degrees: -53.6436 and an altitude of 73.675 degrees.
func TestParallactic(t *testing.T) {
	p := Pointing{astro.Deg(29), astro.Deg(20), astro.Deg(-15)}
	z, q := p.At(0)
	check.Near(t, q.Deg(), -53.6436, 5e-5, "parallactic angle")
	check.Near(t, 90-z.Deg(), 73.675, 5e-4, "altitude")
	// its rate, 23.4626 arcsec a second of time with the sign turned
	_, q0 := p.At(-5)
	_, q1 := p.At(5)
	check.Near(t, (q1.Deg()-q0.Deg())*360, 23.4626, 0.001, "rate, arcsec/s")
}

// TestPlanSlit: through an hour at two airmasses.
func TestPlanSlit(t *testing.T) {
	s := set(t, spec25(), "low", 15, 2, 0.13, 21.6, 1)
	s.Pointing = &Pointing{astro.Deg(-29), astro.Deg(-10), astro.Hours(4.05)}
	z, q := s.Pointing.At(0)
	s.Airmass = astro.Airmass(1 / z.Cos())
	s.Goal = Goal{ExposureS: 3600, Frames: 3, SlitArcsec: 1.2}
	a := solved(t, s)
	check.Near(t, a.SlitPA.Value, half(q.Deg()), 1e-9, "slit at the parallactic angle")
	p, err := PlanSlit(s, a)
	if err != nil {
		t.Fatal(err)
	}
	// 350 against 550 nm at sec z 2, 600 mm: 2.08 + 0.33 in Filippenko 1982; here
	// 340 nm, 567 mm, and half an hour lower
	if !p.Matters || !(p.ShiftArcsec > 2.3 && p.ShiftArcsec < 3.6) || p.ShiftNm != 340 {
		t.Errorf("%+v", p)
	}
	if !(p.Loss >= p.LossParallactic-1e-9) || p.Loss > 0.2 || !(p.HoldsS > 600) {
		t.Errorf("%+v", p)
	}
	s.Goal.PA = "10"
	b := solved(t, s)
	across, err := PlanSlit(s, b)
	if err != nil || !(across.Loss > 0.3) || across.LossParallactic > 0.2 || !across.ResetAfterS.Known || across.ResetAfterS.Value != 0 {
		t.Errorf("%+v %v", across, err)
	}
	if b.SlitPA.Value != 10 || !(b.SNR <= a.SNR) {
		t.Errorf("S/N %v set across, %v along", b.SNR, a.SNR)
	}
	s.Goal.AtNm = 350
	c := solved(t, s)
	s.Goal.PA = ""
	if d := solved(t, s); !(d.SNR > 1.2*c.SNR) {
		t.Errorf("S/N at 350 nm %v along, %v across", d.SNR, c.SNR)
	}
	s.Airmass = 1.05
	if p, err := PlanSlit(s, solved(t, s)); err != nil || p.Matters {
		t.Errorf("near the zenith: %+v %v", p, err)
	}
}

// TestMatch: the brightest that does not saturate at the target's airmass; the
// one that serves most.
func TestMatch(t *testing.T) {
	now := at(t, "2026-12-02T03:00:00Z")
	rising := func(x0, perHour float64) func(astro.Instant) (float64, bool) {
		return func(i astro.Instant) (float64, bool) {
			x := x0 + perHour*i.Sub(now).Hours()
			return x, x >= 1 && x < 3
		}
	}
	ok := &Answer{BookedS: 10}
	hot := &Answer{BookedS: 10, Mag: astro.Mags(3), SaturatesAt: targets.Known(5)}
	from := []Candidate{
		{"faint", astro.Mags(13), rising(1.2, 0), ok},
		{"bright", astro.Mags(11), rising(1.6, -0.5), ok},
		{"too bright", astro.Mags(3), rising(1.2, 0), hot},
		{"down", astro.Mags(5), rising(9, 0), ok},
	}
	n := Need{Name: "target", At: now, Airmass: 1.2}
	m, err := Match(n, from)
	if err != nil || m.Name != "bright" || !m.Good {
		t.Fatalf("%+v %v", m, err)
	}
	// 0.1 above the target's airmass is reached 36 minutes on, in steps of 5
	check.Near(t, m.At.Sub(now).Minutes(), 40, 0.01, "minutes after")
	n.Airmass = 2.5
	if m, err = Match(n, from); err != nil || m.Good || m.Name != "bright" || m.Airmass < 2 {
		t.Errorf("%+v %v", m, err)
	}
	if _, err = Match(n, from[3:]); err == nil {
		t.Error("a standard below the horizon")
	}
	needs := []Need{{Name: "a", At: now, Airmass: 1.2}, {Name: "b", At: now.Add(3 * time.Hour), Airmass: 1.25}, {Name: "c", At: now, Airmass: 2.5}}
	s := Serving(needs, from)
	if len(s) != 2 || s[0].Name != "faint" || len(s[0].Serves) != 2 || s[1].Name != "bright" {
		t.Errorf("%+v", s)
	}
}

func TestIsStandard(t *testing.T) {
	wd := targets.Target{Kind: targets.WD, Notes: "WD 0148+467; spectrophotometric standard; rv"}
	tell := targets.Target{Kind: targets.Standard, Notes: "telluric, B9"}
	plain := targets.Target{Kind: targets.Standard}
	for _, c := range []struct {
		t    *targets.Target
		sort string
		want bool
	}{{&wd, "flux", true}, {&wd, "", true}, {&wd, "telluric", false}, {&tell, "telluric", true}, {&tell, "flux", false}, {&plain, "velocity", true},
		{&targets.Target{Kind: targets.WD}, "flux", false}} {
		if IsStandard(c.t, c.sort) != c.want {
			t.Errorf("%+v as %q", c.t.Notes, c.sort)
		}
	}
}

// dusk is a twilight in which the Sun sinks, or rises, 13 degrees an hour.
func dusk(t testing.TB, evening bool) FlatAsk {
	zero := at(t, "2026-12-01T23:30:00Z") // Sun at 0
	sign := -13.0
	if !evening {
		sign = 13
	}
	return FlatAsk{Instrument: img15(), Evening: evening,
		SunAlt: func(i astro.Instant) astro.Angle { return astro.Deg(sign * i.Sub(zero).Hours()) },
		When: func(a astro.Angle) (astro.Instant, bool) {
			return zero.Add(time.Duration(a.Deg() / sign * 3600e9)), true
		}}
}

// TestFlats: the order is reversed in the morning, exposures grow in the evening
// and shrink in the morning, and all lie between the shortest and the longest.
func TestFlats(t *testing.T) {
	var order [2][]string
	for k, evening := range []bool{true, false} {
		flats, err := Flats(dusk(t, evening))
		if err != nil {
			t.Fatal(err)
		}
		var end astro.Instant
		for _, f := range flats {
			t.Logf("%v %s from %s, Sun %.1f, %.3g s %v", evening, f.Mode, f.From.UTC().Format("15:04:05"), f.SunAlt.Deg(), f.EachS, f.Skipped)
			if len(f.EachS) == 0 {
				if len(f.Skipped) == 0 {
					t.Errorf("%s: nothing, without a reason", f.Mode)
				}
				continue
			}
			order[k] = append(order[k], f.Mode)
			if f.From.Before(end) {
				t.Errorf("%s begins before the one before it ends", f.Mode)
			}
			end = f.From
			for i, v := range f.EachS {
				if v < 1*(1-1e-6) || v > flatLongestS*(1+1e-6) {
					t.Errorf("%s: %v s", f.Mode, v)
				}
				if i > 0 && (v > f.EachS[i-1]) != evening {
					t.Errorf("%s: %v s after %v", f.Mode, v, f.EachS[i-1])
				}
				if i == 0 {
					end = end.Add(time.Duration(v * 1e9))
				}
			}
		}
	}
	if len(order[0]) < 4 || order[0][0] == order[1][0] {
		t.Errorf("%v", order)
	}
	ask := dusk(t, true)
	ask.Instrument.LinearE, ask.Instrument.GainEADU = 0, 0
	if f, err := Flats(ask); err != nil || len(f[0].Skipped) == 0 {
		t.Errorf("no limit of the detector: %+v %v", f, err)
	}
	if _, err := Flats(FlatAsk{}); err == nil {
		t.Error("flats of nothing")
	}
	ask = dusk(t, false)
	ask.When = func(astro.Angle) (astro.Instant, bool) { return at(t, "2026-12-01T12:00:00Z"), true }
	ask.SunAlt = func(astro.Instant) astro.Angle { return astro.Deg(-40) } // it never rises
	if _, err := Flats(ask); err != nil {
		t.Error(err)
	}
}

func TestSunLimit(t *testing.T) {
	i, s := img15(), spec25()
	mode := func(name string) func() float64 {
		m, _ := i.Mode(name)
		return func() float64 { a, _ := SunLimit(i, m, astro.Mags(5), false); return a.Deg() }
	}
	check.Near(t, mode("I")(), -9, 1e-9, "bright in I")
	check.Near(t, mode("V")(), -12, 1e-9, "bright in V")
	a, _ := SunLimit(i, &i.Modes[0], astro.Mags(18), false)
	check.Near(t, a.Deg(), -16, 1e-9, "faint in U")
	a, _ = SunLimit(s, &s.Modes[0], astro.Mags(18), false)
	check.Near(t, a.Deg(), -12, 1e-9, "spectra")
	a, _ = SunLimit(s, &s.Modes[0], astro.Mags(11), true)
	check.Near(t, a.Deg(), -10, 1e-9, "standards")
	s.Modes[0].MaxSunAltitudeOK, s.Modes[0].MaxSunAltitude = true, astro.Deg(-7)
	a, _ = SunLimit(s, &s.Modes[0], astro.Mags(11), true)
	check.Near(t, a.Deg(), -7, 1e-9, "its own")
}

// TestBrightStart: a bright giant can start with the Sun higher than a faint
// star.
func TestBrightStart(t *testing.T) {
	s := set(t, img15(), "V", 8, 1.2, 0.13, 21.6, 1.1)
	s.Goal = Goal{SNR: 100, Frames: 1}
	bright, err := BrightStart(s, 1.2)
	if err != nil {
		t.Fatal(err)
	}
	s.Source.Light = Steady(astro.Mags(18))
	faint, err := BrightStart(s, 1.2)
	if err != nil || !(faint.Deg() < bright.Deg()-3) || bright.Deg() > 0 || faint.Deg() < -18.6 {
		t.Errorf("Sun at %v and %v, %v", bright, faint, err)
	}
	t.Logf("V 8 from %.1f, V 18 from %.1f deg", bright.Deg(), faint.Deg())
}

// TestThroughput: a zero point 0.3 mag down and 0.1 mag more extinction are
// found from counts and from S/N.
func TestThroughput(t *testing.T) {
	log := func(x float64, bySNR bool) Logged {
		s := set(t, img15(), "V", 16, x, 0.13, 20, 1.1)
		s.Turbulence = 0.01
		l := Logged{Setting: s, Frames: 1, EachS: 30}
		s.Correction = Correction{ZeroPointMag: -0.3, ExtinctionMag: 0.1}
		s.Goal = Goal{ExposureS: 30, Frames: 1}
		a := solved(t, s)
		if bySNR {
			l.SNR = targets.Known(a.SNR)
		} else {
			l.CountsES = targets.Known(a.work.rates.SourceES)
		}
		return l
	}
	got, err := Tonight([]Logged{log(1.1, false), log(2.0, false), {Saturated: true}})
	if err != nil || !got.ExtinctionOK || got.Used != 2 {
		t.Fatal(got, err)
	}
	check.Near(t, got.ZeroPointMag, -0.3, 1e-6, "zero point from counts")
	check.Near(t, got.ExtinctionMag, 0.1, 1e-6, "extinction from counts")
	got, err = Tonight([]Logged{log(1.1, true), log(2.0, true), log(1.5, true)})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, got.ZeroPointMag, -0.3, 1e-3, "zero point from S/N")
	check.Near(t, got.ExtinctionMag, 0.1, 1e-3, "extinction from S/N")
	got, err = Tonight([]Logged{log(1.1, false), log(1.2, false)})
	if err != nil || got.ExtinctionOK || got.ExtinctionMag != 0 || !(math.Abs(got.ZeroPointMag+0.415) < 0.01) {
		t.Errorf("at one airmass: %+v %v", got, err)
	}
	if _, err := Tonight([]Logged{log(1.1, false)}); err == nil {
		t.Error("one measurement")
	}
}
