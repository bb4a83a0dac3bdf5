package light

import (
	"fmt"
	"math"

	"evenfall/astro/numeric"
	"evenfall/targets"
)

// fromMemory marks what was compared with no publication.
const fromMemory = "from memory, not checked against a publication"

// state is a condition that a star may be in, with its brightness.
type state struct {
	name    string
	p       float64 // of all time
	mag, sd float64
	dwell   float64 // how long it stays, days on average; 0: not known, a magnitude is soon forgotten
	fixed   float64 // how long what interrupts it lasts, days; 0: any time
	walks   float64 // the brightness in it wanders from the last magnitude, mag per root of a day; 0: no
}

// soonD is for how long a magnitude of a state of unknown length counts, days.
// A choice.
const soonD = 1.0

// leaves returns the probability that the state is not the same some days on.
//
//	1 - exp(-dt/dwell), until dt reaches what interrupts it; from there towards
//	1 - p, the share of all other states; exponentially where nothing is fixed
//
// Source: for dwarf novae, with dwell = Tn - D: common practice, no source.
//
// Checked: TestHazards.
func (s *state) leaves(dt float64) float64 {
	limit := 1 - s.p
	dwell := s.dwell
	if dwell <= 0 {
		dwell = soonD
	}
	switch {
	case limit <= 0 || dt <= 0:
		return 0
	case s.fixed > 0 && dt <= s.fixed:
		return -math.Expm1(-dt / dwell)
	case s.fixed > 0:
		return limit + (-math.Expm1(-s.fixed/dwell)-limit)*math.Exp(-(dt-s.fixed)/s.fixed)
	}
	return -limit * math.Expm1(-dt/(limit*dwell))
}

// relax carries the probabilities of states some days on: what leaves one goes
// to the others in proportion to their shares of all time.
func relax(list []state, p []float64, dt float64) []float64 {
	out := make([]float64, len(p))
	for j := range list {
		gone := p[j] * list[j].leaves(dt)
		out[j] += p[j] - gone
		for k := range list {
			if k != j && gone > 0 {
				out[k] += gone * list[k].p / (1 - list[j].p)
			}
		}
	}
	return out
}

// drift carries the brightness of a state that wanders some days on, from the
// last magnitude back to what is usual.
//
//	variance grows as walks^2 dt and saturates at the usual one
//
// Source: for declines of R CrB stars 0.15 mag per root of a day: common
// practice, no source; that it saturates is a choice.
func (s *state) drift(usual *state, dt float64) {
	if s.walks <= 0 || dt <= 0 {
		return
	}
	k := math.Exp(-dt * s.walks * s.walks / (2 * usual.sd * usual.sd))
	s.mag = usual.mag + (s.mag-usual.mag)*k
	s.sd = math.Sqrt(s.sd*s.sd*k*k + usual.sd*usual.sd*(1-k*k))
}

// states is a star that is in one of several conditions: never their average.
type states struct {
	t        *targets.Target
	readings []reading
	steady   *steady
	band     targets.Band
	list     []state
	alert    func(q query, list []state) ([]state, string) // what depends on the date
	how      string
	source   string
	eclipse  *timed // nil: none
	faint    float64
}

func (s *states) tick() float64 { return 0 }

// belief is what magnitudes taught of the states.
type belief struct {
	list []state // p and brightness as they are now
	last int     // the newest reading used; -1: none
	p    []float64
	used []int
	near part // about the last magnitude, where no state foresaw it
}

// believe runs through the readings in order of time.
//
//	p_i <- p_i L_i / sum;  L_i = 0.98 N(mag_i, sd_i^2 + e^2) + 0.02 N(mag_i, sd_i^2 + e^2 + 1.5^2)
//
// Notes:
//  1. Magnitudes taken within an eclipse teach nothing of the states.
//  2. Each state learns its own brightness from the magnitudes, as probable as
//     it is; and a magnitude that no state foresaw stands for itself a while.
//
// Source: Bayes' theorem; the second component as for long-period variables.
//
// Checked: TestStatesLearn, TestLevels, TestNearTheLast.
func (s *states) believe(n int, jd float64) belief {
	b := belief{list: append([]state(nil), s.list...), last: -1}
	for _, i := range in(s.readings, n, s.band) {
		if !s.eclipsed(&s.readings[i]) {
			b.used = append(b.used, i)
		}
	}
	now := math.NaN()
	for _, i := range b.used {
		r := &s.readings[i]
		if b.last >= 0 {
			b.pass(s.list, r.jd-now)
		}
		now = r.jd
		sum, narrow := 0.0, 0.0
		for k := range b.list {
			all, own := likelihood(r, b.list[k].mag, b.list[k].sd)
			narrow += b.list[k].p * own
			b.list[k].p *= all
			sum += b.list[k].p
		}
		b.p = append(b.p, b.weigh(r, sum, narrow))
		for k := range b.list {
			st := &b.list[k]
			st.p /= sum
			switch {
			case r.Limit:
			case st.walks <= 0:
				all, own := likelihood(r, st.mag, st.sd)
				st.take(&s.list[k], r.Mag, r.sigma(), st.p*own/all)
			case st.p > 0.5:
				st.mag, st.sd = r.Mag, r.sigma()
			}
		}
		b.last = i
	}
	if b.last >= 0 {
		b.pass(s.list, jd-now)
	}
	return b
}

// pass lets time go by.
func (b *belief) pass(usual []state, dt float64) {
	p := make([]float64, len(b.list))
	for k := range b.list {
		p[k] = b.list[k].p
	}
	for k, x := range relax(usual, p, dt) {
		b.list[k].p = x
		if usual[k].walks > 0 {
			b.list[k].drift(&usual[k], dt)
		} else {
			b.list[k].settle(&usual[k], dt)
		}
	}
	if dt > 0 {
		b.near.p *= math.Exp(-dt / nearTau(usual))
	}
}

// eclipsed tells whether a reading was taken within an eclipse, by elements
// that still say when those are.
func (s *states) eclipsed(r *reading) bool {
	if s.eclipse == nil || !(s.eclipse.halfMin > 0) {
		return false
	}
	_, phase, sigma, err := s.eclipse.clock.PhaseAt(r.at)
	half := s.eclipse.halfMin / 1440 / s.eclipse.clock.Ephemeris.Elements().Period.Value
	return err == nil && sigma < expiredCycles/3 && math.Abs(phase-math.Round(phase)) < half
}

func (s *states) judge(n int) []verdict {
	out := make([]verdict, n)
	for i := range out {
		out[i] = otherBand(s.band)
		if r := &s.readings[i]; r.band == s.band {
			out[i].why = "taken within an eclipse: it says nothing of the star's state"
		}
	}
	b := s.believe(n, math.NaN())
	for k, i := range b.used {
		out[i] = verdict{used: true, p: b.p[k]}
	}
	return out
}

func (s *states) at(q query) Forecast {
	if q.band != "" && q.band != s.band {
		f := s.steady.at(q)
		if f.Known {
			f.Basis = "single catalogue magnitude of a star with several states: " + f.Basis
			return f
		}
		return unknown(q.band, fmt.Sprintf("extremes are listed in %s; no relation from there to %s", s.band, q.band))
	}
	b := s.believe(q.n, q.t.JDUTC())
	list, words := b.list, ""
	if b.last >= 0 {
		words = s.latest(&b, q)
	}
	if s.alert != nil {
		var said string
		list, said = s.alert(q, list)
		words += said
	}
	list = b.nearLast(list)
	if s.eclipse != nil && s.eclipse.halfMin > 0 {
		var said string
		list, said = s.eclipse.overlay(q.t, list, s.faint)
		words += said
	}
	f := Forecast{Band: s.band, Basis: s.how + words}
	var m mixture
	best := 0
	for i, st := range list {
		m = append(m, part{st.p, st.mag, st.sd})
		if st.p > list[best].p {
			best = i
		}
		one := Forecast{}
		one.fill(mixture{{1, st.mag, st.sd}}, q.level)
		f.States = append(f.States, StateForecast{st.name, st.p, one.Mag, one.Lo, one.Hi})
	}
	f.bounds(m, q.level)
	f.Mag = f.States[best].Mag
	f.Steps = []Step{{"expected brightness", "states with probabilities, by Bayes from the latest magnitudes; median of the likeliest, interval of all together",
		s.how + words, fmt.Sprintf("%s: %s", f.States[best].Name, f.result()), s.source}}
	return f
}

// latest says what the newest magnitude made of the states.
func (s *states) latest(b *belief, q query) string {
	best, list := 0, b.nearLast(b.list)
	for k := range list {
		if list[k].p > list[best].p {
			best = k
		}
	}
	r := &s.readings[b.last]
	sign := ""
	if r.Limit {
		sign = "fainter than "
	}
	return fmt.Sprintf("; last measured %s%.1f, %.3g d ago: %s %.0f %%", sign, r.Mag, math.Max(0, q.t.JDUTC()-r.jd), list[best].name, 100*list[best].p)
}

// hazardSigma is the spread of the time between eruptions, of its logarithm.
// Common practice, no source.
const hazardSigma = 0.3

// Hazard returns the rate at which a recurrent nova erupts again.
//
//	h(t) = pdf(z) / (t sigma (1 - Phi(z))),  z = ln(t/R)/sigma, sigma = 0.3
//
// Given:
//   - sinceYr: years since the last eruption.
//   - recurYr: R, the usual time between them, years.
//
// Returns:
//   - per year; 0 for what is not positive.
//
// Source: common practice, no source.
//
// Checked: TestRecurrentNovae.
func Hazard(sinceYr, recurYr float64) float64 {
	if !(sinceYr > 0 && recurYr > 0) || math.IsInf(sinceYr+recurYr, 0) {
		return 0
	}
	z := math.Log(sinceYr/recurYr) / hazardSigma
	left := numeric.NormalCDF(-z)
	if left < 1e-12 { // far beyond: the tail's own ratio
		return z / (sinceYr * hazardSigma)
	}
	return normal(z, 1) / (sinceYr * hazardSigma * left)
}
