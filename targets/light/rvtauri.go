package light

import (
	"fmt"
	"math"

	"evenfall/targets"
)

// rvTauri is a star whose deep and shallow minima alternate.
type rvTauri struct {
	t          *targets.Target
	readings   []reading
	timed      *timed // by minima; nil: none
	steady     *steady
	band       targets.Band
	max, min   float64
	halfPeriod float64 // days; NaN: none
}

const (
	// rvSD is how far such a star is from what its last minima make expected,
	// mag; and so many minima count. Common practice, no source.
	rvSD, rvMinima = 0.4, 3
	// rvShallow is how deep the shallow minima are, of the deep ones; waveSD what
	// the slow wave of the RVB adds, mag. From memory.
	rvShallow, waveSD = 0.6, 0.3
	// rvMinimumBrighter is how much brighter than the faintest listed a usual
	// minimum is, mag. A choice.
	rvMinimumBrighter = 0.3
)

func newRV(t *targets.Target, list []reading, timed []timed, s *steady) model {
	v := &t.Var
	if !usable(v.MagMax) || !usable(v.MagMin) || v.MagMin.Value < v.MagMax.Value {
		return s
	}
	r := &rvTauri{t: t, readings: list, timed: clockOf(timed, kindMinimum), steady: s, band: bandOf(v.MagBand), max: v.MagMax.Value, min: v.MagMin.Value, halfPeriod: math.NaN()}
	if p := v.PeriodD; usable(p) && p.Value > 1 && p.Value < 1000 {
		r.halfPeriod = p.Value / 2
	}
	return r
}

func (r *rvTauri) tick() float64 { return shortestTick }

// minima returns the places of the last minima among the magnitudes: the
// faintest of each stretch of half the time between minima, fainter than
// magnitudes on both sides.
func (r *rvTauri) minima(n int) []int {
	list := in(r.readings, n, r.band)
	var out []int
	if math.IsNaN(r.halfPeriod) {
		return nil
	}
	reach := r.halfPeriod / 2
	for _, i := range list {
		x := &r.readings[i]
		before, after, faintest := false, false, !x.Limit
		for _, j := range list {
			y := &r.readings[j]
			if j == i || math.Abs(y.jd-x.jd) > reach {
				continue
			}
			faintest = faintest && (y.Mag < x.Mag || y.Mag == x.Mag && j > i)
			before, after = before || y.jd < x.jd, after || y.jd > x.jd
		}
		if faintest && before && after {
			out = append(out, i)
		}
	}
	return out[max(0, len(out)-rvMinima):]
}

func (r *rvTauri) judge(n int) []verdict {
	out := make([]verdict, n)
	for i := range out {
		out[i].why = "a limit says nothing of a star that is anywhere in its range"
		if !r.readings[i].Limit {
			out[i] = verdict{used: true, p: 1}
		}
	}
	return out
}

// depth is how far down the star is at a phase, 0 at maximum, 1 at the deep
// minimum at phase 0; the shallow one is at 0.5.
func depth(phase, shallow float64) float64 {
	d := (1 + math.Cos(4*math.Pi*phase)) / 2
	if p := phase - math.Floor(phase); p > 0.25 && p < 0.75 {
		d *= shallow
	}
	return d
}

func (r *rvTauri) at(q query) Forecast {
	near := &relaxing{t: r.t, readings: r.readings, steady: r.steady}
	if band := near.band(q, r.band); band != r.band {
		return near.elsewhere(q, band, r.max, r.min)
	}
	deep, shallow, sd, said := r.min-rvMinimumBrighter, rvShallow, rvSD, fmt.Sprintf("minima as listed, %.1f", r.min)
	if list := r.minima(q.n); len(list) > 0 {
		sum := 0.0
		for _, i := range list {
			sum += r.readings[i].Mag
		}
		deep = sum / float64(len(list))
		said = fmt.Sprintf("mean of the last %s measured, %.2f", counted(len(list), "minimum"), deep)
		if len(list) > 1 {
			said = fmt.Sprintf("mean of the last %d minima measured, %.2f", len(list), deep)
		}
		shallow = 1 // their mean stands for deep and shallow alike
	}
	if r.t.Var.Type == "RVB" {
		sd = math.Hypot(sd, waveSD)
	}
	f := Forecast{Band: r.band, Phase: &Phase{Value: math.NaN(), Sigma: math.NaN(), Status: PhaseUnknown}}
	usual := func(q query, f *Forecast) (m mixture, words string) {
		weight, words := r.weights(q, f)
		for i, w := range weight {
			m = append(m, part{w, r.max + (deep-r.max)*depth((float64(i)+0.5)/phaseSteps, shallow), sd})
		}
		return m, words
	}
	m, words := usual(q, &f)
	then := func(jd float64) float64 {
		at := query{t: q.t.Add(days(jd - q.t.JDUTC()))}
		past, _ := usual(at, &Forecast{Phase: &Phase{}})
		mean, _, _ := moments(past)
		return mean
	}
	m, last := near.carry(q, r.band, m, then)
	f.Basis = fmt.Sprintf("RV Tauri star, maximum %.1f; %s; scatter %.1f mag; %s", r.max, said, sd, words) + last
	f.fill(m, q.level)
	f.Steps = []Step{{"expected brightness", "two unequal minima a cycle, over the distribution of the phase; sigma 0.4 mag", f.Basis, f.result(),
		"common practice, no source; depth of the shallow minima " + fromMemory}}
	return f
}

// weights returns how probable each phase of the double period is.
func (r *rvTauri) weights(q query, f *Forecast) (w [phaseSteps]float64, words string) {
	for i := range w {
		w[i] = 1.0 / phaseSteps
	}
	if r.timed == nil {
		return w, "no epoch of minimum listed: phase unknown"
	}
	cycle, phase, sigma, err := r.timed.clock.PhaseAt(q.t)
	if err != nil || !(sigma < expiredCycles) || r.timed.clock.Ephemeris.Lost(cycle) {
		return w, fmt.Sprintf("elements %.0f cycles old: phase lost", math.Abs(cycle))
	}
	sum := 0.0
	for i := range w {
		d := (float64(i)+0.5)/phaseSteps - phase
		d -= math.Round(d)
		w[i] = math.Exp(-d * d / (2 * sigma * sigma))
		sum += w[i]
	}
	for i := range w {
		w[i] /= sum
	}
	// phases of a forecast count from maximum, a quarter of a cycle on
	from := phase - 0.25
	*f.Phase = Phase{from - math.Floor(from), sigma, PhaseUncertain}
	return w, fmt.Sprintf("%.2f of a cycle after the deep minimum, +- %.2f", phase, sigma)
}
