package wander

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"sort"
	"testing"

	"evenfall/astro/numeric"
)

// The full set of dates takes minutes: EVENFALL_SCORES=full.
func fullScores() bool { return os.Getenv("EVENFALL_SCORES") == "full" }

var (
	scoreCounts   = []int{0, 1, 3, 10, 30, 100}
	scoreHorizons = []float64{10, 30, 60, 100, 200}
)

const (
	leastRecord = 30 // magnitudes before a date that is scored
	fewCuts     = 6  // dates a star
	manyCuts    = 40
)

// outcome is one forecast against what was measured.
type outcome struct {
	star, n                    int
	horizon                    float64
	err, width                 float64
	in50, in80, in95           bool
	score, climate, r          float64
	midErr                     float64
	harmonic, harmonicSearched float64 // scores of three harmonics; NaN but with 30
}

// cuts returns the indices of last magnitudes, the same for every count.
func cuts(s *measuredStar) []int {
	want := fewCuts
	if fullScores() {
		want = manyCuts
	}
	last := sort.Search(len(s.thin), func(i int) bool { return s.thin[i].JD > s.thin[len(s.thin)-1].JD-30 })
	room := last - leastRecord
	if room <= 0 {
		return nil
	}
	want = min(want, room)
	var out []int
	for i := range want {
		out = append(out, leastRecord-1+(2*i+1)*room/(2*want))
	}
	return out
}

// scoreStar forecasts a star's own later magnitudes from its earlier ones.
func scoreStar(t testing.TB, id int, s *measuredStar, add func(outcome)) {
	climate := map[float64]float64{}
	for _, k := range cuts(s) {
		last := s.thin[k]
		var goals []Obs
		var ahead []float64
		for _, h := range scoreHorizons {
			if o, ok := near(s.all, last.JD+h, math.Min(5, h/4)); ok {
				goals, ahead = append(goals, o), append(ahead, h)
			}
		}
		if len(goals) == 0 {
			continue
		}
		for _, n := range scoreCounts {
			if n > k+1 {
				continue
			}
			known := s.thin[k+1-n : k+1]
			f, err := Fit(s.e, BandV, known, last.JD)
			if err != nil {
				t.Fatal(err)
			}
			for i, goal := range goals {
				if _, ok := climate[goal.JD]; !ok {
					climate[goal.JD] = crpsSample(s.thin, goal.Mag)
				}
				o := judge(t, f, goal)
				o.star, o.n, o.horizon, o.climate = id, n, ahead[i], climate[goal.JD]
				o.midErr = goal.Mag - (s.e.MagMax+s.e.MagMin)/2
				if n == 30 {
					o.harmonic = harmonicScore(known, goal, s.e.PeriodD, 0)
					o.harmonicSearched = harmonicScore(known, goal, s.e.PeriodD, 20)
				}
				add(o)
			}
		}
	}
}

// judge compares one forecast with the measurement.
func judge(t testing.TB, f *Filter, goal Obs) outcome {
	fc, err := f.At(goal.JD)
	if err != nil {
		t.Fatal(err)
	}
	fc = fc.Measured(goal.sigma())
	p := fc.CDF(goal.Mag)
	lo, hi := fc.Interval(0.8)
	return outcome{err: goal.Mag - fc.Median(), width: hi - lo, in50: math.Abs(p-0.5) <= 0.25, in80: math.Abs(p-0.5) <= 0.4,
		in95: math.Abs(p-0.5) <= 0.475, score: crps(fc, goal.Mag), r: fc.R, harmonic: math.NaN(), harmonicSearched: math.NaN()}
}

// harmonicScore is the score of three harmonics and a mean fitted by least
// squares to the same magnitudes, with their scatter about the fit; steps > 0
// also searches the period within 4.5 per cent.
func harmonicScore(known []Obs, goal Obs, periodD float64, steps int) float64 {
	terms := func(jd, p float64) []float64 {
		out := []float64{1}
		for k := 1.0; k <= 3; k++ {
			s, c := math.Sincos(2 * math.Pi * k * (jd - known[0].JD) / p)
			out = append(out, c, s)
		}
		return out
	}
	best, mean, sd := math.Inf(1), 0.0, 1.0
	for i := -steps; i <= steps; i++ {
		p := periodD
		if steps > 0 {
			p *= 1 + 0.045*float64(i)/float64(steps)
		}
		var rows []numeric.Row
		for _, o := range known {
			rows = append(rows, numeric.Row{Terms: terms(o.JD, p), Value: o.Mag, Sigma: 1})
		}
		fit, err := numeric.LeastSquares(rows)
		if err != nil || fit.Chi2 >= best {
			continue
		}
		best, mean, sd = fit.Chi2, 0, math.Sqrt(fit.Chi2/float64(fit.Free))
		for j, c := range terms(goal.JD, p) {
			mean += c * fit.Coef[j]
		}
	}
	return crpsNormal(mean, math.Hypot(sd, goal.sigma()), goal.Mag)
}

// tally sums outcomes up.
type tally []outcome

func (a tally) where(keep func(outcome) bool) tally {
	var out tally
	for _, o := range a {
		if keep(o) {
			out = append(out, o)
		}
	}
	return out
}

func (a tally) mean(of func(outcome) float64) float64 {
	sum := 0.0
	for _, o := range a {
		sum += of(o)
	}
	return sum / float64(len(a))
}

func (a tally) rms(of func(outcome) float64) float64 {
	return math.Sqrt(a.mean(func(o outcome) float64 { return of(o) * of(o) }))
}

func (a tally) holds(of func(outcome) bool) float64 {
	return 100 * a.mean(func(o outcome) float64 {
		if of(o) {
			return 1
		}
		return 0
	})
}

func (a tally) byStar() []tally {
	at := map[int]int{}
	var out []tally
	for _, o := range a {
		if _, ok := at[o.star]; !ok {
			at[o.star] = len(out)
			out = append(out, nil)
		}
		out[at[o.star]] = append(out[at[o.star]], o)
	}
	return out
}

func in80(o outcome) bool         { return o.in80 }
func theErr(o outcome) float64    { return o.err }
func midErr(o outcome) float64    { return o.midErr }
func score(o outcome) float64     { return o.score }
func climate(o outcome) float64   { return o.climate }
func harmonic(o outcome) float64  { return o.harmonic }
func harmonicS(o outcome) float64 { return o.harmonicSearched }

// bootstrap draws stars, not forecasts, anew: a star's forecasts hang together.
// It returns the 5 and 95 per cent points of the coverage.
func (a tally) bootstrap() (lo, hi float64) {
	stars := a.byStar()
	r := rand.New(rand.NewPCG(3, 14))
	var got []float64
	for range 500 {
		hit, n := 0.0, 0.0
		for range stars {
			s := stars[r.IntN(len(stars))]
			hit += s.holds(in80) * float64(len(s))
			n += float64(len(s))
		}
		got = append(got, hit/n)
	}
	q, err := numeric.Quantiles(got, 0.05, 0.95)
	if err != nil {
		return math.NaN(), math.NaN()
	}
	return q[0], q[1]
}

func (a tally) medianStarRMS() float64 {
	var each []float64
	for _, s := range a.byStar() {
		each = append(each, s.rms(theErr))
	}
	q, err := numeric.Quantiles(each, 0.5)
	if err != nil {
		return math.NaN()
	}
	return q[0]
}

// Forecasts 10 to 200 days after the last of so many magnitudes, five days
// apart or more, of Miras of ASAS-3. The bounds are what such forecasts reached
// on 94 other stars, with room for the few stars here.
func TestScores(t *testing.T) {
	if testing.Short() {
		t.Skip("measured stars take long under the race detector")
	}
	open := measuredStars(t, "mira_asas_open")
	var half []*measuredStar
	for _, s := range measuredStars(t, "mira_asas_more") {
		if aside(s.name) {
			half = append(half, s)
		}
	}
	var all tally
	for _, set := range []struct {
		name  string
		stars []*measuredStar
	}{{"the 12 open stars", open}, {fmt.Sprintf("%d more kept aside", len(half)), half}} {
		var got tally
		for i, s := range set.stars {
			scoreStar(t, len(all)*1000+i, s, func(o outcome) { got = append(got, o) })
		}
		report(t, set.name, got)
		bounds(t, set.name, got)
		all = append(all, got...)
	}
	report(t, "all", all)
	bounds(t, "all", all)
}

func report(t *testing.T, name string, a tally) {
	for _, n := range scoreCounts {
		s := a.where(func(o outcome) bool { return o.n == n })
		if len(s) == 0 {
			continue
		}
		lo, hi := s.bootstrap()
		at30 := s.where(func(o outcome) bool { return o.horizon == 30 })
		t.Logf("%s, %3d magnitudes: %4d forecasts of %d stars; 80%% holds %.1f (%.0f..%.0f), 50%% %.0f, 95%% %.0f, width %.2f; rms %.2f, median star %.2f; score %.3f, own climate %.3f; at 30 d %.0f%% better",
			name, n, len(s), len(s.byStar()), s.holds(in80), lo, hi, s.holds(func(o outcome) bool { return o.in50 }),
			s.holds(func(o outcome) bool { return o.in95 }), s.mean(func(o outcome) float64 { return o.width }),
			s.rms(theErr), s.medianStarRMS(), s.mean(score), s.mean(climate), 100*(1-at30.mean(score)/at30.mean(climate)))
	}
	for _, r := range [][2]float64{{0, 0.6}, {0.6, 0.9}, {0.9, 1.01}} {
		s := a.where(func(o outcome) bool { return o.r >= r[0] && o.r < r[1] })
		t.Logf("%s, R %.1f to %.1f: %d forecasts, rms %.2f, 80%% holds %.1f", name, r[0], r[1], len(s), s.rms(theErr), s.holds(in80))
	}
}

func bounds(t *testing.T, name string, a tally) {
	with := func(n int) tally { return a.where(func(o outcome) bool { return o.n == n }) }
	pooled := a.where(func(o outcome) bool { return o.n <= 30 })
	if h := pooled.holds(in80); h < 74 || h > 90 {
		t.Errorf("%s: 80 %% intervals hold %.1f %% pooled, 74 to 90 wanted", name, h)
	}
	for _, n := range []int{0, 1, 3, 10, 30} {
		if h := with(n).holds(in80); h < 70 || h > 92 {
			t.Errorf("%s, %d magnitudes: 80 %% intervals hold %.1f %%, 70 to 92 wanted", name, n, h)
		}
	}
	if r := with(30).medianStarRMS(); r > 0.55 {
		t.Errorf("%s, 30 magnitudes: rms %.2f in the median star, 0.55 wanted", name, r)
	}
	for n, gain := range map[int]float64{1: 0.15, 3: 0.45, 30: 0.60} {
		s := with(n).where(func(o outcome) bool { return o.horizon == 30 })
		if g := 1 - s.mean(score)/s.mean(climate); g < gain {
			t.Errorf("%s, %d magnitudes, 30 d ahead: score %.0f %% better than the star's own climate, %.0f wanted", name, n, 100*g, 100*gain)
		}
	}
	thirty := with(30)
	fixed, searched := thirty.mean(harmonic), thirty.mean(harmonicS)
	t.Logf("%s, 30 magnitudes: score %.3f, three harmonics %.3f, with the period searched %.3f", name, thirty.mean(score), fixed, searched)
	if g := 1 - thirty.mean(score)/math.Min(fixed, searched); g < 0.30 {
		t.Errorf("%s: %.0f %% better than three harmonics, 30 wanted", name, 100*g)
	}
	none := with(0)
	t.Logf("%s, no magnitudes: rms %.3f, of the catalogue's mid-range %.3f", name, none.rms(theErr), none.rms(midErr))
	if q := none.rms(theErr) / none.rms(midErr); q > 1.05 {
		t.Errorf("%s: rms without magnitudes %.2f times that of the mid-range, 1.05 wanted", name, q)
	}
}
