package light

import (
	"fmt"
	"math"

	"evenfall/targets"
)

// infrared bands, where Miras vary by a quarter of what they do in V.
var infrared = map[targets.Band]bool{"J": true, "H": true, "K": true, "W1": true, "W2": true}

// infraredRange is the most that they vary there, mag; from memory, not checked
// against a publication.
const infraredRange = 2.0

// ranges tells whether the star is one that has a range of its own to be in.
func (l *longPeriod) ranges() bool {
	v := &l.t.Var
	return usable(v.MagMax) && usable(v.MagMin) && v.MagMin.Value >= v.MagMax.Value
}

// without answers where the filter cannot.
func (l *longPeriod) without(q query, band targets.Band, fit *fitted) Forecast {
	v := &l.t.Var
	phase := &Phase{Value: math.NaN(), Sigma: math.NaN(), Status: PhaseUnknown}
	if l.ranges() {
		f := newBetween(l.t, l.readings, l.steady).at(query{q.t, band, q.level, q.n})
		f.Basis += "; " + fit.why
		f.Phase = phase
		return f
	}
	q.band = band
	f := l.steady.at(q)
	if v.Type != "" {
		f = single(f)
		f.Basis += "; " + fit.why
		f.Phase = phase
	}
	return f
}

// inInfrared answers in a band where the curve is another: the single magnitude
// listed, with all that such stars vary by around it.
func (l *longPeriod) inInfrared(q query, band targets.Band) Forecast {
	q.band = band
	f := l.steady.at(q)
	if !f.Known || l.t.Var.Type == "" {
		return f
	}
	f = single(f)
	mid := f.Mag.Mags()
	f.fill(spread(mid-infraredRange/2, mid+infraredRange/2), q.level)
	f.Phase = &Phase{Value: math.NaN(), Sigma: math.NaN(), Status: PhaseUnknown}
	f.Basis += fmt.Sprintf("; such stars vary by up to %.0f mag there (from memory, not checked against a publication); band not calibrated until %d magnitudes", infraredRange, calibratedFrom)
	f.Steps = append(f.Steps, Step{"expected brightness", "uniform about a single magnitude", fmt.Sprintf("%.2f +- %.1f", mid, infraredRange/2), f.result(),
		"from memory, not checked against a publication"})
	return f
}
