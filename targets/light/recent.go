package light

import (
	"fmt"
	"math"

	"evenfall/targets"
)

// What a recent magnitude of a star without a forecast of its own counts for.
// All choices.
const (
	relaxPerPeriod = 0.25 // time constant over the period
	relaxD         = 30.0 // the same without a period, days
	recentSD       = 0.15 // beside the magnitude's own error, mag
	forgottenTaus  = 10   // time constants after which a magnitude counts for nothing
)

// relaxing is a star that goes from its last magnitudes back to its usual
// range.
type relaxing struct {
	t        *targets.Target
	readings []reading
	steady   *steady
}

// period is the time within which a magnitude is recent, days.
func (x *relaxing) period() float64 {
	if p := x.t.Var.PeriodD; usable(p) && p.Value > 0 {
		return p.Value
	}
	return relaxD / relaxPerPeriod
}

// measured returns the places of the magnitudes of a band that count, none of
// them a limit.
func (x *relaxing) measured(n int, band targets.Band) []int {
	var out []int
	for _, i := range in(x.readings, n, band) {
		if !x.readings[i].Limit {
			out = append(out, i)
		}
	}
	return out
}

// band returns the band to answer in where none is asked: home, but where it
// has no magnitude within a period and another has, that of the newest.
func (x *relaxing) band(q query, home targets.Band) targets.Band {
	if q.band != "" {
		return q.band
	}
	other := home
	for i := q.n - 1; i >= 0; i-- {
		r := &x.readings[i]
		switch {
		case r.why != "" || r.Limit:
		case math.Abs(q.t.JDUTC()-r.jd) > x.period():
			return other
		case r.band == home:
			return home
		case other == home:
			other = r.band
		}
	}
	return other
}

// carry takes a usual distribution from the last magnitudes on.
//
//	dx = -(x - mu) dt/tau + noise, of the variance S^2 of the usual in the end;
//	k = exp(-dt/tau): each mean k m + (1-k) mean_i, variance in all k^2 P + (1-k^2) S^2
//
// Given:
//   - then: the usual mean at the date of a reading, where it goes with the
//     phase; nil: as now.
//
// Returns:
//   - the distribution at the instant asked, and words; the usual one and none
//     where no magnitude teaches.
//
// Source: the process of Ornstein and Uhlenbeck; tau = P/4, or 30 d: a choice.
//
// Checked: TestRelaxing.
func (x *relaxing) carry(q query, band targets.Band, usual mixture, then func(jd float64) float64) (mixture, string) {
	list := x.measured(q.n, band)
	mu, means, all := moments(usual)
	if len(list) == 0 || !(all > 0) {
		return usual, ""
	}
	tau := relaxPerPeriod * x.period()
	if math.Abs(q.t.JDUTC()-x.readings[list[len(list)-1]].jd) > forgottenTaus*tau {
		return usual, ""
	}
	m, p, at := mu, all, x.readings[list[0]].jd
	for _, i := range list {
		r := &x.readings[i]
		if q.t.JDUTC()-r.jd > forgottenTaus*tau {
			continue
		}
		mag := r.Mag
		if then != nil {
			mag += mu - then(r.jd)
		}
		k := math.Exp(-math.Max(0, r.jd-at) / tau)
		m, p, at = mu+(m-mu)*k, p*k*k+all*(1-k*k), r.jd
		e := r.sigma()*r.sigma() + recentSD*recentSD
		gain := all / (all + e) // the newest counts as if alone where it is far from those before
		if d := mag - m; d*d < 9*(p+e) {
			gain = p / (p + e)
			m, p = m+gain*d, (1-gain)*p
		} else {
			m, p = mu+gain*(mag-mu), (1-gain)*all
		}
	}
	dt := math.Abs(q.t.JDUTC() - at)
	k := math.Exp(-dt / tau)
	out := make(mixture, len(usual))
	for i, c := range usual {
		v := k*k*p + (1-k*k)*c.sd*c.sd + 2*k*(1-k)*means
		out[i] = part{c.p, k*m + (1-k)*c.mean, math.Sqrt(v)}
	}
	last := &x.readings[list[len(list)-1]]
	return out, fmt.Sprintf("; %s %.2f measured %.3g d ago, forgotten with a time constant of %.3g d (a choice)", band, last.Mag, dt, tau)
}

// moments returns mean and variance of a mixture, and the variance of the
// means of its components alone.
func moments(m mixture) (mean, means, all float64) {
	for _, c := range m {
		mean += c.p * c.mean
	}
	for _, c := range m {
		means += c.p * (c.mean - mean) * (c.mean - mean)
		all += c.p * c.sd * c.sd
	}
	return mean, means, all + means
}

// elsewhere answers in another band than that of the extremes: where magnitudes
// were measured in it, about their level with the range of the home band; else
// as the catalogue has it.
func (x *relaxing) elsewhere(q query, band targets.Band, max, min float64) Forecast {
	q.band = band
	f := x.steady.at(q)
	if !f.Known || len(x.measured(q.n, band)) == 0 {
		return single(f)
	}
	half := (min - max) / 2
	usual, words := x.carry(q, band, spread(f.Mag.Mags()-half, f.Mag.Mags()+half), nil)
	f.fill(usual, q.level)
	f.Basis = fmt.Sprintf("range of %.1f mag, as between the extremes listed, about the level in %s: %s%s", min-max, band, f.Basis, words)
	f.Steps = append(f.Steps, Step{"expected brightness", "from the last magnitude to the usual range, k = exp(-t/tau)", f.Basis, f.result(), "a choice"})
	return f
}

// judge says which readings count.
func (x *relaxing) judge(n int) []verdict {
	out := make([]verdict, n)
	for i := range out {
		out[i] = verdict{used: !x.readings[i].Limit, p: 1, why: "a limit says nothing of a star that is anywhere in its range"}
	}
	return out
}
