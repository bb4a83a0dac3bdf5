package wander

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"evenfall/astro/check"
	"evenfall/astro/numeric"
)

// A sine of 217 d sampled for three years by the season is found.
func TestFindPeriod(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	var obs []Obs
	for jd := 0.0; jd < 1100; jd += 4 + 10*r.Float64() {
		if math.Mod(jd, 365) < 240 {
			obs = append(obs, Obs{JD: jd, Mag: 10 + 1.5*math.Cos(2*math.Pi*jd/217) + 0.2*r.NormFloat64(), Err: 0.2})
		}
	}
	obs = append(obs, Obs{JD: 500, Mag: 3, Limit: true})
	p, err := FindPeriod(obs)
	must(t, err)
	check.Near(t, p.Days, 217, 4*p.SigmaD, "period")
	check.Near(t, p.AmplitudeMag, 1.5, 0.1, "half amplitude")
	if p.SigmaD > 2 || p.FalseAlarm > 1e-9 {
		t.Errorf("%+v", p)
	}
	for name, bad := range map[string][]Obs{"none": nil, "nine": obs[:9], "limits": {{JD: 1, Mag: 9, Limit: true}}} {
		if _, err := FindPeriod(bad); !errors.Is(err, ErrFewObs) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := FindPeriod(append(obs, Obs{JD: math.NaN()})); !errors.Is(err, ErrObs) {
		t.Errorf("no date: %v", err)
	}
}

// The periods of the open stars of ASAS-3, from their whole records, are those
// of the catalogue; catalogue periods themselves are good to 0.01 to 0.04. With
// the newest 60 only, and no elements, forecasts still work.
func TestPeriodsOfStars(t *testing.T) {
	if testing.Short() {
		t.Skip("measured stars take long under the race detector")
	}
	right, n := 0, 0
	var misses []float64
	for _, s := range measuredStars(t, "mira_asas_open") {
		p, err := FindPeriod(s.thin)
		must(t, err)
		n++
		if math.Abs(math.Log(p.Days/s.e.PeriodD)) < 0.04 {
			right++
		}
		t.Logf("%s: %.1f +- %.1f d, listed %.1f, false alarm %.1g", s.name, p.Days, p.SigmaD, s.e.PeriodD, p.FalseAlarm)
		k := len(s.thin) * 3 / 4
		goal, ok := near(s.all, s.thin[k-1].JD+30, 8)
		known := s.thin[max(0, k-60):k]
		if p, err = FindPeriod(known); err != nil || !ok {
			continue
		}
		f, err := Fit(Elements{PeriodD: p.Days, PeriodErrD: math.Max(p.SigmaD, 0.02*p.Days), NoMax: true, NoMin: true}, BandV, known, 0)
		must(t, err)
		misses = append(misses, math.Abs(at(t, f, goal.JD).Median()-goal.Mag))
	}
	if right < n-1 {
		t.Errorf("%d of %d periods found", right, n)
	}
	q, err := numeric.Quantiles(misses, 0.5)
	must(t, err)
	t.Logf("%d forecasts 30 d ahead without elements: median error %.2f mag", len(misses), q[0])
	if q[0] > 0.6 {
		t.Errorf("median error without elements %.2f mag", q[0])
	}
}
