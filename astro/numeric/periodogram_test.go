package numeric

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"evenfall/astro/check"
)

// uneven returns readings at uneven times: a mean, a sine and noise.
func uneven(seed uint64, n int, freq, amplitude, noise float64) []Reading {
	r := rand.New(rand.NewPCG(seed, 1))
	out := make([]Reading, n)
	for i := range out {
		t := 500 * r.Float64()
		sigma := noise * (0.5 + r.Float64())
		out[i] = Reading{t, 11 + amplitude*math.Sin(2*math.Pi*freq*t+1) + sigma*r.NormFloat64(), sigma}
	}
	return out
}

// The power is what least squares with a constant, a sine and a cosine takes
// away from chi squared: an independent way to every value, and to the
// amplitude. Zechmeister & Kürster 2009 define it so.
func TestLombScargle(t *testing.T) {
	readings := uneven(7, 40, 0.01, 1, 0.5)
	p, err := LombScargle(readings, Frequencies{Lo: 0.001, Hi: 0.05, Oversample: 4})
	if err != nil {
		t.Fatal(err)
	}
	chi2 := func(freq float64) (float64, []float64) {
		var rows []Row
		for _, r := range readings {
			terms := []float64{1}
			if freq > 0 {
				s, c := math.Sincos(2 * math.Pi * freq * r.T)
				terms = []float64{1, c, s}
			}
			rows = append(rows, Row{terms, r.Value, r.Sigma})
		}
		fit, err := LeastSquares(rows)
		if err != nil {
			t.Fatal(err)
		}
		return fit.Chi2, fit.Coef
	}
	flat, _ := chi2(0)
	for i, f := range p.Freq {
		with, _ := chi2(f)
		check.Near(t, p.Power[i], (flat-with)/flat, 1e-9, "power at %g", f)
	}
	_, coef := chi2(p.Best)
	check.Near(t, p.Amplitude, math.Hypot(coef[1], coef[2]), 1e-9, "amplitude")
	check.Near(t, p.Best, 0.01, 4*p.BestSigma, "frequency")
	if p.FalseAlarm > 1e-6 || p.BestSigma > 2e-4 {
		t.Errorf("false alarm %g, error %g", p.FalseAlarm, p.BestSigma)
	}
}

// The error of the frequency is what the frequency scatters by: 200 series,
// whose standard deviation is known to 5 per cent; Montgomery & O'Donoghue 1999
// suppose even sampling, so 20 per cent are allowed.
func TestFrequencyError(t *testing.T) {
	sum, errs := 0.0, 0.0
	const n = 200
	for seed := range uint64(n) {
		p, err := LombScargle(uneven(seed, 60, 0.02, 1, 0.4), Frequencies{Lo: 0.015, Hi: 0.025})
		if err != nil {
			t.Fatal(err)
		}
		sum += (p.Best - 0.02) * (p.Best - 0.02)
		errs += p.BestSigma
	}
	check.Near(t, math.Sqrt(sum/n)/(errs/n), 1, 0.2, "scatter of the frequency over its error")
}

// Noise alone: peaks that should be as high in one series of twenty are so in
// no more, and the bound of Baluev 2008 is not far from the truth.
func TestFalseAlarm(t *testing.T) {
	const n = 600
	for _, level := range []float64{0.3, 0.05} {
		hits := 0
		for seed := range uint64(n) {
			p, err := LombScargle(uneven(1000+seed, 50, 0, 0, 1), Frequencies{Lo: 0.002, Hi: 0.1, Oversample: 6})
			if err != nil {
				t.Fatal(err)
			}
			if p.FalseAlarm < level {
				hits++
			}
		}
		rate := float64(hits) / n
		t.Logf("false alarm below %.2f in %.3f of the series", level, rate)
		sd := math.Sqrt(level * (1 - level) / n)
		if rate > level+3*sd || rate < 0.4*level {
			t.Errorf("false alarm below %g in %.3f of the series", level, rate)
		}
	}
}

func TestLombScargleFailures(t *testing.T) {
	good := uneven(1, 10, 0.01, 1, 0.1)
	with := func(r Reading) []Reading { return append([]Reading{r}, good...) }
	band := Frequencies{Lo: 0.001, Hi: 0.1}
	for name, c := range map[string]struct {
		readings []Reading
		band     Frequencies
		want     error
	}{
		"too few":      {good[:3], band, ErrData},
		"no error":     {with(Reading{1, 2, 0}), band, ErrData},
		"no number":    {with(Reading{math.NaN(), 2, 1}), band, ErrNotANumber},
		"infinite":     {with(Reading{1, math.Inf(1), 1}), band, ErrNotANumber},
		"one time":     {[]Reading{{1, 2, 1}, {1, 3, 1}, {1, 4, 1}, {1, 5, 1}}, band, ErrData},
		"all alike":    {[]Reading{{1, 2, 1}, {2, 2, 1}, {3, 2, 1}, {4, 2, 1}}, band, ErrSingular},
		"reversed":     {good, Frequencies{Lo: 0.1, Hi: 0.01}, ErrInterval},
		"from nothing": {good, Frequencies{Lo: 0, Hi: 0.01}, ErrInterval},
		"endless":      {good, Frequencies{Lo: 0.1, Hi: 1e9}, ErrInterval},
	} {
		if _, err := LombScargle(c.readings, c.band); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}

func FuzzLombScargle(f *testing.F) {
	f.Add(1.0, 2.0, 0.1, 0.01, 0.1, uint8(20))
	f.Add(1e300, -1e300, 1e-300, 1e-9, 1e9, uint8(5))
	f.Add(0.0, 0.0, 0.0, 0.0, 0.0, uint8(0))
	f.Fuzz(func(t *testing.T, scale, shift, sigma, lo, hi float64, n uint8) {
		var readings []Reading
		for i := range int(n) {
			readings = append(readings, Reading{scale * float64(i*i%17), shift * float64(i*7%13), sigma * float64(1+i%3)})
		}
		if (hi-lo)*math.Abs(scale) > 1e3 {
			return // as slow as asked for
		}
		p, err := LombScargle(readings, Frequencies{Lo: lo, Hi: hi})
		if err == nil && !(p.BestPower >= 0 && p.BestPower <= 1 && p.FalseAlarm >= 0 && p.FalseAlarm <= 1) {
			t.Errorf("%+v", p)
		}
	})
}

func BenchmarkLombScargle(b *testing.B) {
	readings := uneven(1, 100, 0.01, 1, 0.1)
	for b.Loop() {
		if _, err := LombScargle(readings, Frequencies{Lo: 0.001, Hi: 1.0 / 30}); err != nil {
			b.Fatal(err)
		}
	}
}
