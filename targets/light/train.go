package light

import (
	"math"
	"sync"

	"evenfall/astro"
	"evenfall/astro/timescale"
)

// train is the row of maxima of a long-period variable: one date and the time
// between two, from one filter at one reference instant, so that every question
// with the same magnitudes is answered by the same row.
type train struct {
	once        sync.Once
	jd, periodD float64
	ok          bool
}

// train returns the maxima that the first n readings date; nil: they date none.
//
// Notes:
//  1. The reference is the newest reading that teaches, or without one the
//     maximum by the elements before the instant asked for.
//  2. The time between maxima is that by which the filter puts the second from
//     the first, where that is within a fifth of the listed period.
func (l *longPeriod) train(n int, jd float64) *train {
	fit := l.fit(l.home, n)
	if fit.filter == nil {
		return nil
	}
	if len(fit.used)+fit.others == 0 {
		x := &train{}
		l.lay(x, fit, jd)
		return x
	}
	fit.maxima.once.Do(func() { l.lay(&fit.maxima, fit, jd) })
	return &fit.maxima
}

// lay works a train out.
func (l *longPeriod) lay(x *train, fit *fitted, jd float64) {
	p, reference := l.elements.PeriodD, jd
	if fit.found != nil {
		p = fit.found.Days
	}
	if fit.last > 0 {
		reference = fit.last
	} else if l.elements.HasEpoch {
		reference = l.elements.EpochMaxJD + p*math.Floor((jd-l.elements.EpochMaxJD)/p)
	}
	w, err := fit.filter.At(reference)
	if err != nil || fit.blind(&w) || math.IsNaN(w.MaximumJD) {
		return
	}
	x.jd, x.periodD, x.ok = w.MaximumJD, p, true
	if next, err := fit.filter.At(x.jd + p/2); err == nil && math.Abs(next.MaximumJD-x.jd-p) < p/5 {
		x.periodD = next.MaximumJD - x.jd
	}
}

// after returns the first maximum of a train after a date.
func (x *train) after(jd float64) float64 {
	k := math.Floor((jd-x.jd)/x.periodD) + 1
	return x.jd + k*x.periodD
}

// nextMaximum asks the filter of a long-period variable; nil: there is none.
func (s *State) nextMaximum(t, asOf astro.Instant) *maximum {
	l, ok := s.model.(*longPeriod)
	if !ok {
		return nil
	}
	f := s.forecast(query{t, l.home, DefaultLevel, s.until(asOf)})
	if f.maximum == nil {
		return nil
	}
	m := *f.maximum
	if m.row != nil {
		m.jd = m.row.after(t.JDUTC()) // the forecast's own instant is rounded
	}
	return &m
}

// wandering lists maxima and minima of a long-period variable, as the
// magnitudes up to asOf date them.
func (s *State) wandering(site astro.Site, asOf, from, until astro.Instant) []Event {
	var out []Event
	add := func(kind string, jd, sigma float64, m *maximum) {
		for _, ev := range s.dated(&site, kind, jd, sigma, m) {
			if !ev.At.Before(from) && !until.Before(ev.At) {
				out = append(out, ev)
			}
		}
	}
	rising := riseOf(&s.t)
	for t := from; ; {
		m := s.nextMaximum(t, asOf)
		if m == nil {
			return out
		}
		add(kindMinimum, m.jd-rising*m.periodD, math.Hypot(m.sigmaD, minimumScatter*m.periodD), m)
		at, err := timescale.FromJD(m.jd, "JD_UTC")
		if err != nil || until.Before(at) && m.jd-rising*m.periodD > until.JDUTC() {
			return out
		}
		add(kindMaximum, m.jd, m.sigmaD, m)
		next := at.Add(days(m.periodD / 2))
		if !next.After(t) || until.Before(at) {
			return out
		}
		t = next
	}
}
