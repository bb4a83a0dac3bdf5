package light

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/targets"
)

// recurrent is what is known of a recurrent nova.
type recurrent struct {
	peak, quiet float64 // V
	last        float64 // year of the last eruption
	recurYr     float64 // usual time between eruptions, years
}

// recurrents is the list, by folded name. Times between eruptions are from a
// single copy of the table.
//
// Source: [cite.Schaefer2010].
var recurrents = map[string]recurrent{
	targets.Key("T Pyx"):     {6.4, 15.5, 2011.3, 19},
	targets.Key("IM Nor"):    {8.5, 18.3, 2002.0, 82},
	targets.Key("CI Aql"):    {9.0, 16.7, 2000.3, 24},
	targets.Key("U Sco"):     {7.5, 17.6, 2022.4, 10.3},
	targets.Key("RS Oph"):    {4.8, 11, 2021.6, 14.7},
	targets.Key("V3890 Sgr"): {8.1, 15.5, 2019.7, 25},
	targets.Key("V745 Sco"):  {9.4, 18.6, 2014.1, 21},
	targets.Key("V394 CrA"):  {7.2, 18.4, 1987.6, 30},
	targets.Key("V2487 Oph"): {9.5, 17.7, 1998.5, 18},
	targets.Key("T CrB"):     {2.5, 9.8, 1946.1, 80},
}

const (
	// overdueNight is the probability of an eruption per night of a nova near
	// the end of a long recurrence. Common practice, no source.
	overdueNight     = 1e-3
	overdueFrom      = 0.95 // of the recurrence
	overdueRecurYr   = 60.0 // only of those that keep so long a time
	eruptionD        = 30.0 // an eruption stays bright, days; from memory
	quietSD, peakSD  = 0.5, 0.7
	recurrentQuietSD = 0.4
)

// newRecurrent prepares a recurrent nova: quiescence is the value, an eruption
// an alert.
func newRecurrent(t *targets.Target, r recurrent, list []reading, steady *steady) model {
	s := &states{t: t, readings: list, steady: steady, band: "V", faint: r.quiet,
		source: cite.Schaefer2010.String() + "; recurrence from a single copy; its spread common practice, no source",
		how:    fmt.Sprintf("recurrent nova, last in %.0f, about every %.3g years; quiescent %.1f, peak %.1f in V", math.Floor(r.last), r.recurYr, r.quiet, r.peak)}
	s.list = []state{{name: "quiescence", p: 1 - eruptionD/(r.recurYr*365.25), mag: r.quiet, sd: recurrentQuietSD, dwell: r.recurYr * 365.25},
		{name: "eruption", p: eruptionD / (r.recurYr * 365.25), mag: r.peak + 1, sd: 1, dwell: eruptionD}}
	s.alert = func(q query, list []state) ([]state, string) {
		since := q.t.YearsTT() - r.last
		night := Hazard(since, r.recurYr) / 365.25
		words := ""
		if r.recurYr >= overdueRecurYr && since > overdueFrom*r.recurYr {
			night = math.Max(night, overdueNight)
			words = "; overdue"
		}
		words += fmt.Sprintf("; eruption %.1g per night", night)
		if len(in(s.readings, q.n, s.band)) > 0 {
			return list, words // magnitudes say more than years
		}
		list = append([]state(nil), list...)
		list[0].p, list[1].p = 1-night, night
		return list, words
	}
	return s
}

// NovaT3 returns the days in which a nova falls by three magnitudes from the
// days in which it falls by two.
//
//	t3 = 2.78 t2^0.877
//
// Source: a fit to Galactic novae of 2026, arXiv:2603.09177.
//
// Checked: TestBinaryFigures.
func NovaT3(t2 float64) float64 { return 2.78 * math.Pow(t2, 0.877) }

// NovaMV returns how bright a nova is at maximum.
//
//	M_V = -7.92 - 0.81 atan((1.32 - log t2) / 0.23)     t2: days to fall by 2 mag
//
// Returns:
//   - magnitudes, with a scatter of 0.6 to 0.8; too bright by far for faint
//     fast novae.
//
// Source: [cite.DellaValleLivio1995].
//
// Checked: TestBinaryFigures.
func NovaMV(t2 float64) float64 { return -7.92 - 0.81*math.Atan((1.32-math.Log10(t2))/0.23) }

// NovaDecline returns how much fainter than at maximum a nova is.
//
//	to t3: linear in log t through (1 d, 0), (t2, 2), (t3, 3);
//	then 4.375 log(t/t3) more until 6 mag down, then 8.75 per decade
//
// Given:
//   - days: since maximum; under a day counts as one.
//   - t2, t3: days to fall by 2 and by 3 mag, 1 < t2 < t3.
//
// Returns:
//   - mag; where quiescence ends it the caller says. NaN for what cannot be.
//
// Notes:
//  1. A tenth to a fifth of novae dip by 3 to 8 mag more for dust at 1.5 to 4
//     t3 (from memory, not checked against a publication).
//
// Source: [cite.HachisuKato2006].
//
// Checked: TestBinaryFigures.
func NovaDecline(days, t2, t3 float64) float64 {
	if !(t2 > 1 && t3 > t2) || math.IsNaN(days) || math.IsInf(t3, 0) {
		return math.NaN()
	}
	t := math.Log10(math.Max(days, 1))
	l2, l3 := math.Log10(t2), math.Log10(t3)
	const steepFrom, slope = 6.0, 4.375
	l6 := l3 + (steepFrom-3)/slope
	switch {
	case t <= l2:
		return 2 * t / l2
	case t <= l3:
		return 2 + (t-l2)/(l3-l2)
	case t <= l6:
		return 3 + slope*(t-l3)
	}
	return steepFrom + 2*slope*(t-l6)
}

// nova is a nova in its decline: how fast it falls is open, and the magnitudes
// tell.
type nova struct {
	t           *targets.Target
	readings    []reading
	steady      *steady
	epochJD     float64
	peak, quiet float64
	ln          [novaNodes]float64 // log10 t3
}

const (
	novaNodes          = 25
	freshYears         = 30.0     // a nova older than that has long come to rest
	earlyD             = 10.0     // from maximum, days
	earlySD, laterSD   = 0.7, 1.0 // of the decline; half for one nova's own magnitudes. Common practice, no source
	fastest, slowestT3 = 4.0, 400.0
)

// newNova prepares a nova whose maximum is dated and not long ago; nil: it is
// none such.
func newNova(t *targets.Target, list []reading, steady *steady, a, b float64) model {
	e := t.Var.EpochMaxJD
	if !oldNova.MatchString(t.Var.Type) || usable(t.Var.PeriodD) && t.Var.PeriodD.Value > 10 || !usable(e) || e.Value < 2440000 || e.Value > 2500000 {
		return nil
	}
	n := &nova{t: t, readings: list, steady: steady, epochJD: e.Value, peak: a, quiet: b}
	lo, hi := fastest, slowestT3
	switch t.Var.Type[:min(2, len(t.Var.Type))] {
	case "NA":
		hi = 100
	case "NB":
		lo = 100
	}
	for i := range n.ln {
		n.ln[i] = math.Log10(lo) + (math.Log10(hi)-math.Log10(lo))*float64(i)/(novaNodes-1)
	}
	return n
}

func (n *nova) tick() float64 { return 0 }

// expected is the magnitude on a date for one speed.
func (n *nova) expected(i int, jd float64) (mag, sd float64) {
	t3 := math.Pow(10, n.ln[i])
	t2 := math.Max(math.Pow(t3/2.78, 1/0.877), 1.01)
	since := jd - n.epochJD
	sd = laterSD
	if since < earlyD {
		sd = earlySD
	}
	m := n.peak + NovaDecline(since, t2, math.Max(t3, 1.2*t2))
	if m >= n.quiet {
		return n.quiet, quietSD
	}
	return m, sd
}

// learn weighs the speeds by the magnitudes.
func (n *nova) learn(k int) (w [novaNodes]float64, used []int, p []float64) {
	for i := range w {
		w[i] = 1.0 / novaNodes
	}
	for _, j := range in(n.readings, k, bandOf(n.t.Var.MagBand)) {
		r := &n.readings[j]
		if r.jd < n.epochJD {
			continue
		}
		sum, own := 0.0, 0.0
		for i := range w {
			mag, sd := n.expected(i, r.jd)
			all, narrow := likelihood(r, mag, sd)
			own += w[i] * narrow
			w[i] *= all
			sum += w[i]
		}
		for i := range w {
			w[i] /= sum
		}
		used, p = append(used, j), append(p, own/sum)
	}
	return w, used, p
}

func (n *nova) judge(k int) []verdict {
	out := make([]verdict, k)
	band := bandOf(n.t.Var.MagBand)
	for i := range out {
		out[i] = otherBand(band)
		if n.readings[i].band == band {
			out[i].why = "before the nova's maximum"
		}
	}
	_, used, p := n.learn(k)
	for i, j := range used {
		out[j] = verdict{used: true, p: p[i]}
	}
	return out
}

func (n *nova) at(q query) Forecast {
	band := bandOf(n.t.Var.MagBand)
	jd := q.t.JDUTC()
	since := jd - n.epochJD
	if q.band != "" && q.band != band {
		return unknown(q.band, fmt.Sprintf("a nova in decline is forecast in %s alone: emission lines can shift every relation by a magnitude or more", band))
	}
	w, used, _ := n.learn(q.n)
	var falling, rest mixture
	p := 0.0
	for i := range w {
		mag, sd := n.expected(i, jd)
		if mag >= n.quiet || since < 0 || since > freshYears*365.25 {
			rest = append(rest, part{w[i], n.quiet, quietSD})
			continue
		}
		falling = append(falling, part{w[i], mag, sd})
		p += w[i]
	}
	f := Forecast{Band: band, Rising: -1, Basis: fmt.Sprintf("nova, maximum %.1f in %s %.0f d ago, quiescence %.1f; %s of the decline used",
		n.peak, band, since, n.quiet, counted(len(used), "magnitude"))}
	f.fill(append(append(mixture{}, falling...), rest...), q.level)
	f.state("decline", p, falling, q.level)
	f.state("quiescence", 1-p, rest, q.level)
	for _, s := range f.States {
		if s.P > 0.5 {
			f.Mag = s.Mag
		}
	}
	f.Steps = []Step{{"expected brightness", "log t through (t2, +2), (t3, +3), then 4.375 and 8.75 per decade, over speeds weighed by the magnitudes",
		f.Basis, f.result(), cite.HachisuKato2006.String() + "; dips for dust, in a tenth to a fifth, not foreseen (" + fromMemory + ")"}}
	return f
}

// state adds a state of some components, their weights summing to p.
func (f *Forecast) state(name string, p float64, m mixture, level float64) {
	if len(m) == 0 || p < 1e-9 {
		return
	}
	own := make(mixture, len(m))
	for i, c := range m {
		own[i] = part{c.p / p, c.mean, c.sd}
	}
	one := Forecast{}
	one.fill(own, level)
	f.States = append(f.States, StateForecast{name, p, one.Mag, one.Lo, one.Hi})
}
