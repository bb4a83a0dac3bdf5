package wander

import (
	"math"
	"testing"
)

// FuzzWander: whatever comes in, either an error or a distribution of numbers.
func FuzzWander(f *testing.F) {
	f.Add(280.0, 8.0, 14.0, 2451000.0, 2458000.0, 10.0, 7.0, 0.1, uint16(5), uint8(0))
	f.Add(10.0, -5.0, 45.0, 0.0, 9e7, 49.0, 1e6, 0.0, uint16(3), uint8(255))
	f.Add(3000.0, 8.0, 8.0, 2451000.0, -9e7, -49.0, 1e-9, 49.0, uint16(40), uint8(3))
	f.Add(math.NaN(), math.Inf(1), 14.0, 2451000.0, 2458000.0, 10.0, -1.0, 0.1, uint16(2), uint8(7))
	f.Fuzz(func(t *testing.T, period, max, min, epoch, jd, mag, step, err float64, n uint16, flags uint8) {
		on := func(bit int) bool { return flags>>bit&1 == 1 }
		e := Elements{PeriodD: period, MagMax: max, MagMin: min, EpochMaxJD: epoch, HasEpoch: on(0), NoMin: on(1), Carbon: on(2), NoMax: on(3), RiseFraction: err, PeriodErrD: err}
		if on(4) {
			e.Class, e.Band = Semiregular, BandPhotographic
		}
		var obs []Obs
		for i := range int(n % 50) {
			obs = append(obs, Obs{JD: jd + float64(i)*step, Mag: mag + float64(i%5)*err, Err: err, Limit: on(5) && i%3 == 0, Visual: on(6)})
		}
		filter, bad := Fit(e, BandV, obs, jd)
		if bad != nil {
			return
		}
		for _, when := range []float64{jd, jd + float64(n)*step, jd + 1e5} {
			fc, bad := filter.At(when)
			if bad != nil {
				continue
			}
			lo, hi := fc.Interval(0.8)
			if q := fc.Median(); !(lo <= q && q <= hi) || math.IsInf(hi-lo, 0) {
				t.Errorf("%v from %v to %v", q, lo, hi)
			}
			if !(fc.R >= 0 && fc.R <= 1+1e-9 && fc.RisingP >= 0 && fc.RisingP <= 1 && fc.Phase >= 0 && fc.Phase <= 1) || math.IsNaN(fc.PhaseSigma+fc.MaximumJD+fc.MaximumSigmaD) {
				t.Errorf("%+v", fc)
			}
			if fc.Words() == "" || fc.CDF(mag) < 0 || fc.CDF(mag) > 1 {
				t.Error(fc.Words(), fc.CDF(mag))
			}
		}
	})
}

// Thousands of magnitudes are thinned to those that count, or all taken in one
// by one, without losing the numbers.
func TestThousands(t *testing.T) {
	var obs []Obs
	for i := range 5000 {
		jd := float64(i)
		obs = append(obs, Obs{JD: jd, Mag: 11 - 2*math.Cos(2*math.Pi*jd/285) + 0.1*math.Sin(jd*jd), Err: 0.05})
	}
	f, err := Fit(mira, BandV, obs, 0)
	must(t, err)
	if len(f.Used()) != 841 {
		t.Errorf("%d used", len(f.Used()))
	}
	jd := obs[len(obs)-1].JD + 20
	if got, want := median(t, f, jd), 11-2*math.Cos(2*math.Pi*jd/285); math.Abs(got-want) > 0.3 {
		t.Errorf("median %.2f, true %.2f", got, want)
	}
	all, err := New(mira, BandV, Grid{TrefJD: jd, SpanD: 5000})
	must(t, err)
	for _, o := range obs {
		must(t, all.Update(o))
	}
	for i := range all.nodes {
		for j := range nState {
			if c := all.nodes[i].c[j][j]; !(c > 0) {
				t.Fatalf("variance %g of component %d", c, j)
			}
		}
	}
}

// A forecast with a hundred magnitudes: 20 ms are allowed, building included.
func BenchmarkForecast100(b *testing.B) { benchmarkForecast(b, 100) }
func BenchmarkForecast30(b *testing.B)  { benchmarkForecast(b, 30) }
func BenchmarkForecast3(b *testing.B)   { benchmarkForecast(b, 3) }
func BenchmarkForecast0(b *testing.B)   { benchmarkForecast(b, 0) }

func benchmarkForecast(b *testing.B, n int) {
	for b.Loop() {
		fc, err := sampleFilter(b, n).At(30)
		if err != nil {
			b.Fatal(err)
		}
		fc.Median()
		fc.Interval(0.8)
	}
}

// A chart of 80 dates from a filter made ready, medians and 80 % intervals.
func BenchmarkChart80After3(b *testing.B)   { benchmarkChart(b, 3, 0) }
func BenchmarkChart80After30(b *testing.B)  { benchmarkChart(b, 30, 0) }
func BenchmarkChart80After0(b *testing.B)   { benchmarkChart(b, 0, 0) }
func BenchmarkChart80LongGap1(b *testing.B) { benchmarkChart(b, 1, 1500) }

func benchmarkChart(b *testing.B, n int, from float64) {
	f := sampleFilter(b, n)
	for b.Loop() {
		for i := range 80 {
			fc, err := f.At(from + 2*float64(i))
			if err != nil {
				b.Fatal(err)
			}
			fc.Median()
			fc.Interval(0.8)
		}
	}
}

func BenchmarkClone(b *testing.B) {
	f := sampleFilter(b, 30)
	for b.Loop() {
		f.Clone()
	}
}
