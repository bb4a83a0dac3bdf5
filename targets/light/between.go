package light

import (
	"fmt"
	"math"

	"evenfall/targets"
)

// between is a variable of no predictable kind: anywhere in its range, but for
// a while near its last magnitude.
type between struct {
	relaxing
}

func newBetween(t *targets.Target, list []reading, s *steady) *between {
	return &between{relaxing{t: t, readings: list, steady: s}}
}

func (b *between) tick() float64 {
	if len(b.readings) == 0 {
		return forever
	}
	return 0
}

func (b *between) at(q query) Forecast {
	own, v := bandOf(b.t.Var.MagBand), &b.t.Var
	if band := b.band(q, own); band != own {
		return b.elsewhere(q, band, v.MagMax.Value, v.MagMin.Value)
	}
	f := Forecast{Band: own, Basis: fmt.Sprintf("variable of type %s: anywhere between its extremes", v.Type)}
	m, words := b.carry(q, own, spread(v.MagMax.Value, v.MagMin.Value), nil)
	f.Basis += words
	f.fill(m, q.level)
	f.Steps = []Step{{"expected brightness", "uniform between the extremes", fmt.Sprintf("%.2f to %.2f", v.MagMax.Value, v.MagMin.Value),
		f.result(), "the list"}}
	if words != "" {
		f.Steps[0].Formula += "; from the last magnitude towards that, k = exp(-t/tau)"
		f.Steps[0].Inputs += words
		f.Steps[0].Source += "; tau a choice"
	}
	return f
}

// single says of a catalogue magnitude that it is one of many.
func single(f Forecast) Forecast {
	if f.Known {
		f.Basis = "single catalogue magnitude of a variable star: " + f.Basis
	}
	return f
}

// Curve returns how far along from maximum (0) to minimum (1) a pulsating star
// is at a phase.
//
//	x = phase/(1-f) on the fall, (1-phase)/f on the rise;  w = (1 - cos(pi x)) / 2
//
// Given:
//   - phase: cycles after maximum, 0 to 1.
//   - rise: f, rise time over period, above 0 and below 1.
//
// Source: common practice, no source.
//
// Checked: TestCurve, 0.001 mag.
func Curve(phase, rise float64) float64 {
	x := (1 - phase) / rise
	if phase < 1-rise {
		x = phase / (1 - rise)
	}
	return (1 - math.Cos(math.Pi*x)) / 2
}

const (
	// usualRise is the rise time over the period where the list has none, and
	// curveSD how far such a curve is off, mag. Common practice, no source.
	usualRise, curveSD = 0.45, 0.15
	phaseSteps         = 48
)

// riseOf returns the rise time as a fraction of the period.
//
// Source: common practice, no source, where the list has none.
func riseOf(t *targets.Target) float64 {
	if r := t.Var.RiseFraction; usable(r) && r.Value > 0.05 && r.Value < 0.95 {
		return r.Value
	}
	switch p := t.Var.PeriodD; {
	case !usable(p) || p.Value < 300:
		return usualRise
	case p.Value < 400:
		return 0.42
	}
	return 0.38
}

// pulsing is a star that pulsates by the clock, as RR Lyrae stars do.
type pulsing struct {
	t        *targets.Target
	timed    *timed
	steady   *steady
	readings []reading
}

func (p *pulsing) tick() float64 { return 0 }

func (p *pulsing) judge(n int) []verdict {
	out := make([]verdict, n)
	for i := range out {
		out[i].why = "the phase comes from the elements; single magnitudes of so short a period do not date it"
	}
	return out
}

func (p *pulsing) at(q query) Forecast {
	own := bandOf(p.t.Var.MagBand)
	if q.band != "" && q.band != own {
		return single(p.steady.at(q))
	}
	cycle, phase, sigma, err := p.timed.clock.PhaseAt(q.t)
	if err != nil || !(sigma < expiredCycles) {
		f := newBetween(p.t, nil, p.steady).at(query{q.t, own, q.level, 0})
		f.Basis = fmt.Sprintf("pulsating variable of type %s: anywhere between its extremes; elements expired", p.t.Var.Type)
		if err == nil {
			f.Basis += fmt.Sprintf(", %.0f cycles old and uncertain by %.2g of a period", math.Abs(cycle), sigma)
		}
		if clockWalk(p.t.Var.Type) > 0 {
			f.Basis += " (wander of its cycles " + fromMemory + ")"
		}
		f.Basis += ": phase unknown"
		f.Phase = &Phase{Value: math.NaN(), Sigma: math.NaN(), Status: PhaseUnknown}
		return f
	}
	rise := riseOf(p.t)
	max, min := p.t.Var.MagMax.Value, p.t.Var.MagMin.Value
	var m mixture
	sum := 0.0
	for i := range phaseSteps {
		z := 6 * (float64(i)/(phaseSteps-1) - 0.5)
		at := phase + z*sigma
		w := math.Exp(-z * z / 2)
		m = append(m, part{w, max + (min-max)*Curve(at-math.Floor(at), rise), curveSD})
		sum += w
	}
	for i := range m {
		m[i].p /= sum
	}
	f := Forecast{Band: own, Phase: &Phase{phase, sigma, PhaseKnown}, Rising: -1,
		Basis: fmt.Sprintf("phase %.2f +- %.2g by the elements, curve between the extremes", phase, sigma)}
	if phase > 1-rise {
		f.Rising = 1
	}
	f.fill(m, q.level)
	f.Steps = []Step{{"expected brightness", "mmax + (mmin - mmax) (1 - cos(pi x))/2, over the error of the phase; 0.15 mag added",
		fmt.Sprintf("phase %.3f, rise %.2f of the period, %.2f to %.2f", phase, rise, max, min), f.result(), "common practice, no source"}}
	return f
}
