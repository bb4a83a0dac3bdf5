package exposure

import (
	"fmt"
	"math"

	"evenfall/astro/photon"
	"evenfall/targets"
)

// Correction is by how much tonight differs from what is configured. The zero
// value is no correction.
type Correction struct {
	ZeroPointMag  float64 // added to the zero point: above 0, more light than configured
	ExtinctionMag float64 // added to the extinction, mag per airmass
}

// Logged is one logged measurement of a star of known brightness.
type Logged struct {
	Setting   Setting // as it was then: airmass, sky, seeing, the star's magnitude
	Frames    int
	EachS     float64
	CountsES  targets.Measure // electrons per second in the aperture, or
	SNR       targets.Measure // the S/N that was measured, of all frames
	Saturated bool
}

// Throughput is what two or more measurements tell of tonight: offered, never
// applied unasked.
type Throughput struct {
	Correction
	ZeroPointErr  float64 // one sigma of the mean, mag; from the scatter
	ExtinctionErr float64
	ExtinctionOK  bool // the airmasses lie far enough apart to tell extinction
	Used          int
	Words         []string
}

// apart is how far the airmasses must lie apart for the extinction. Common
// practice, no source.
const apart = 0.3

// Tonight works out the correction of zero point and extinction.
//
//	Δ = -2.5 log (expected / measured) = ΔZ - Δk X, over two or more airmasses
//
// Given:
//   - log: at least two measurements, none saturated; of the same mode.
//
// Returns:
//   - ΔZ and, where the airmasses differ by 0.3 or more, Δk; a [*Reason] where
//     fewer than two can be used.
//
// Notes:
//  1. With S/N alone the throughput is found that gives it: useless where
//     scintillation or the floor decide, and such entries are left out.
//
// Checked: TestThroughput.
func Tonight(log []Logged) (Throughput, error) {
	var t Throughput
	for range zeroRounds { // of S/N the sky's part depends on what is sought
		var xs, ds []float64
		for i := range log {
			if d, ok := log[i].difference(t.ZeroPointMag); ok {
				xs, ds = append(xs, float64(log[i].Setting.Airmass)), append(ds, d)
			}
		}
		if t = (Throughput{Used: len(xs)}); len(xs) < 2 {
			return t, fail(targets.CodeInstrument, "", "log two measurements of a standard with counts or S/N", "tonight's throughput wants two measurements, %d can be used", len(xs))
		}
		t.fit(xs, ds)
	}
	t.tell()
	return t, nil
}

// zeroRounds is how often the correction is worked out anew; it closes in by a
// factor of some ten each time.
const zeroRounds = 6

// fit lays a straight line through the differences by airmass.
func (t *Throughput) fit(xs, ds []float64) {
	n := float64(len(xs))
	mx, md := mean(xs), mean(ds)
	var sxx, sxd, lo, hi float64 = 0, 0, xs[0], xs[0]
	for i := range xs {
		sxx += (xs[i] - mx) * (xs[i] - mx)
		sxd += (xs[i] - mx) * (ds[i] - md)
		lo, hi = math.Min(lo, xs[i]), math.Max(hi, xs[i])
	}
	slope := 0.0
	if t.ExtinctionOK = hi-lo >= apart; t.ExtinctionOK {
		slope = sxd / sxx
	}
	rest := 0.0
	for i := range xs {
		e := ds[i] - md - slope*(xs[i]-mx)
		rest += e * e
	}
	free := n - 1
	if t.ExtinctionOK {
		free--
	}
	const least = 0.02 // what a single measurement is worth at best
	sigma := least
	if free > 0 {
		sigma = math.Max(least, math.Sqrt(rest/free))
	}
	t.ZeroPointMag, t.ZeroPointErr = md-slope*mx, sigma/math.Sqrt(n)
	if t.ExtinctionOK {
		t.ExtinctionMag, t.ExtinctionErr = -slope, sigma/math.Sqrt(sxx)
		t.ZeroPointErr = sigma * math.Sqrt(1/n+mx*mx/sxx)
	}
}

func (t *Throughput) tell() {
	say := func(format string, v ...any) { t.Words = append(t.Words, fmt.Sprintf(format, v...)) }
	say("tonight's zero point is %+.2f +- %.2f mag from the one configured, by %d measurements", t.ZeroPointMag, t.ZeroPointErr, t.Used)
	if t.ExtinctionOK {
		say("and the extinction %+.3f +- %.3f mag per airmass", t.ExtinctionMag, t.ExtinctionErr)
	} else {
		say("the airmasses lie too close together to tell the extinction")
	}
	say("not applied unless you say so")
}

func mean(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += x
	}
	return sum / float64(len(v))
}

// difference returns how much more light there was than expected, magnitudes.
//
// Given:
//   - zero: correction of the zero point so far, that the sky's light has too.
func (l *Logged) difference(zero float64) (float64, bool) {
	if l.Saturated || !(l.EachS > 0) || l.Frames < 1 {
		return 0, false
	}
	w := &work{s: l.Setting}
	w.s.Goal.SNR, w.s.Goal.ExposureS, w.s.Goal.DurationS, w.s.Goal.Frames = 0, l.EachS*float64(l.Frames), 0, l.Frames
	if w.s.Goal.Per == "frame" {
		w.s.Goal.Per = ""
	}
	if w.prepare() != nil {
		return 0, false
	}
	r := w.ratesAt(w.booked)
	if l.CountsES.Known && l.CountsES.Value > 0 {
		d := 2.5 * math.Log10(l.CountsES.Value/r.SourceES)
		return d, !math.IsNaN(d) && !math.IsInf(d, 0)
	}
	if !l.SNR.Known || !(l.SNR.Value > 0) {
		return 0, false
	}
	r.SkyES *= dim(-zero)
	e := photon.Exposure{Frames: l.Frames, EachS: l.EachS}
	b, err := photon.Noise(r, w.det, e)
	if err != nil || b.Scintillation+b.Floor > 0.5/(b.SNR()*b.SNR()) {
		return 0, false
	}
	d, err := photon.Fainter(r, w.det, e, l.SNR.Value)
	return -d, err == nil
}
