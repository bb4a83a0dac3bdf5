package light

import (
	"fmt"
	"math"
	"regexp"
	"strings"
	"sync"

	"evenfall/astro"
	"evenfall/astro/bands"
	"evenfall/astro/cite"
	"evenfall/targets"
	"evenfall/targets/light/wander"
)

// longPeriod is a Mira, a semiregular or a slow irregular variable, forecast by
// the filter of package wander; where that has no period, by what is left.
type longPeriod struct {
	t        *targets.Target
	readings []reading
	steady   *steady
	elements wander.Elements // PeriodD is 0 where none is listed
	home     targets.Band    // answered in where none is asked
	small    bool            // unlike the stars that the averages are of: it varies less, or is a supergiant

	mu   sync.Mutex
	fits map[fitKey]*fitted
}

// fitKey is what a filter was made for: a band, and so many readings.
type fitKey struct {
	band targets.Band
	n    int
}

// fitted is a filter with what it rests on.
type fitted struct {
	filter *wander.Filter // nil: none can be made
	why    string         // there is none
	found  *wander.Period // from magnitudes; nil: listed
	used   []int          // places of the readings taken in, of its own band
	others int            // readings of other bands that taught the phase
	since  astro.Instant  // date of the first reading used
	last   float64        // JD UTC of the last one; 0: none
	maxima train
}

const (
	// Semiregulars that vary by less, in mag from brightest to faintest, are
	// smaller than the averages' stars; so many magnitudes teach them, and
	// supergiants. A choice.
	smallRange, smallNeeds = 1.6, 10
	// Periods found from magnitudes: so small a chance of noise is trusted, and
	// this is the least error, of the period.
	trustedFalseAlarm, leastPeriodErr = 1e-6, 0.02
	// The filter's own limits.
	shortestLPV, longestLPV = 10.0, 3000.0
	// A forecast holds for a thousandth of the period, within these days.
	tickPerPeriod, shortestTick, longestTick = 1e-3, 0.02, 1.0
	mostFits                                 = 64
	memoryCycles, memoryCount                = 3.0, 100 // as wander.Fit
	calibratedFrom                           = 3
)

var carbonStar = regexp.MustCompile(`^(C|N|R)\d*[-,:e\d]|^(C|N|R)$|^C-[RNJH]`)

func newLongPeriod(t *targets.Target, list []reading, s *steady) model {
	l := &longPeriod{t: t, readings: list, steady: s, home: bandOf(t.Var.MagBand), fits: map[fitKey]*fitted{}}
	v := &t.Var
	e := wander.Elements{Class: wander.Semiregular, Band: targets.Band(v.MagBand), NoMax: !usable(v.MagMax), NoMin: !usable(v.MagMin), MinIsLimit: v.MagMinIsLimit}
	if miraVariable.MatchString(v.Type) || v.Type == "" && t.Kind == targets.LPV {
		e.Class = wander.Mira
	}
	if visualNames[e.Band] {
		e.Band = "V"
	}
	if !e.NoMax {
		e.MagMax = v.MagMax.Value
	}
	if !e.NoMin {
		e.MagMin = v.MagMin.Value
	}
	if p := v.PeriodD; usable(p) && p.Value >= shortestLPV && p.Value <= longestLPV {
		e.PeriodD = p.Value
		if p.Err > 0 && p.Err < p.Value && !p.Assumed {
			e.PeriodErrD = p.Err
		}
		if m := v.EpochMaxJD; usable(m) && m.Value > 0 && m.Value < 1e7 {
			e.EpochMaxJD, e.HasEpoch = m.Value, true
		}
	}
	e.Carbon = carbonStar.MatchString(t.Physics.SpType)
	if r := v.RiseFraction; usable(r) && r.Value > 0.05 && r.Value < 0.95 {
		e.RiseFraction = r.Value
	}
	if m := t.Mags["V"]; e.NoMax && usable(m) {
		e.LevelMag, e.HasLevel = m.Value, true
	}
	if l.home == wander.BandPhotographic {
		l.home = "V"
	}
	l.small = e.Class == wander.Semiregular && !e.NoMax && !e.NoMin && !e.MinIsLimit && e.MagMin-e.MagMax < smallRange && e.Band != wander.BandPhotographic
	l.small = l.small || strings.HasPrefix(v.Type, "SRC") || strings.HasPrefix(v.Type, "LC")
	l.elements = e
	return l
}

func (l *longPeriod) tick() float64 {
	return math.Min(math.Max(l.elements.PeriodD*tickPerPeriod, shortestTick), longestTick)
}

// fit returns the filter of a band that the first n readings taught.
func (l *longPeriod) fit(band targets.Band, n int) *fitted {
	l.mu.Lock()
	defer l.mu.Unlock()
	key := fitKey{band, n}
	if f, ok := l.fits[key]; ok {
		return f
	}
	if len(l.fits) >= mostFits {
		clear(l.fits)
	}
	f := l.make(band, n)
	l.fits[key] = f
	return f
}

func (l *longPeriod) make(band targets.Band, n int) *fitted {
	f := &fitted{}
	own := in(l.readings, n, band)
	teacher := l.teacher(band, n, len(own))
	e := l.elements
	if e.PeriodD == 0 {
		main := own
		if teacher != "" {
			main = in(l.readings, n, teacher)
		}
		if f.found = findPeriod(l.obs(main)); f.found == nil {
			f.why = "no period listed, and none found in " + counted(len(main), "magnitude")
			return f
		}
		e.PeriodD, e.PeriodErrD, e.HasEpoch = f.found.Days, math.Max(f.found.SigmaD, leastPeriodErr*f.found.Days), false
	}
	if l.small && f.found == nil && len(own) < smallNeeds {
		f.why = fmt.Sprintf("not like the semiregular giants whose averages are known; %d magnitudes would teach it", smallNeeds)
		return f
	}
	if err := l.chain(f, e, band, teacher, own, n); err != nil {
		f.filter, f.why = nil, err.Error()
	}
	return f
}

// teacher returns the other band whose magnitudes teach the phase first: the
// richest, where it holds more than the band itself. "": none.
func (l *longPeriod) teacher(band targets.Band, n, own int) targets.Band {
	count, best := map[targets.Band]int{}, targets.Band("")
	for i := range l.readings[:n] {
		if r := &l.readings[i]; r.why == "" && r.band != band {
			count[r.band]++
			if c := count[r.band]; c > own && (best == "" || c > count[best]) {
				best = r.band
			}
		}
	}
	return best
}

// chain makes the filter: in its own band, or in another first.
func (l *longPeriod) chain(f *fitted, e wander.Elements, band, teacher targets.Band, own []int, n int) (err error) {
	first, list := band, own
	if teacher != "" {
		first, list = teacher, in(l.readings, n, teacher)
	}
	when := 2451545.0 // of no matter where there is no magnitude
	if f.filter, err = l.start(e, first, list, when); err != nil {
		return err
	}
	f.note(l, first == band, list)
	if teacher == "" {
		return nil
	}
	level, err := l.levelIn(band, own)
	if err != nil {
		return err
	}
	if f.filter, err = f.filter.InBand(band, level); err != nil {
		return err
	}
	own = recent(l.readings, own, e.PeriodD)
	for _, o := range l.obs(own) {
		if err := f.filter.Update(o); err != nil {
			return err
		}
	}
	f.note(l, true, own)
	return nil
}

// start returns the filter of a band alone. Bands other than the catalogue's
// start from a wide prior.
func (l *longPeriod) start(e wander.Elements, band targets.Band, list []int, when float64) (*wander.Filter, error) {
	if band == l.home {
		return wander.Fit(e, band, l.obs(list), when)
	}
	level, err := l.levelIn(band, list)
	if err != nil {
		return nil, err
	}
	g := wander.Grid{TrefJD: when}
	if list = recent(l.readings, list, e.PeriodD); len(list) > 0 {
		g.TrefJD = l.readings[list[len(list)-1]].jd
		g.SpanD = g.TrefJD - l.readings[list[0]].jd
	}
	base, err := wander.New(e, l.home, g)
	if err != nil {
		return nil, err
	}
	f, err := base.InBand(band, level)
	if err != nil {
		return nil, err
	}
	for _, o := range l.obs(list) {
		if err := f.Update(o); err != nil {
			return nil, err
		}
	}
	return f, nil
}

// note writes down which readings a filter took in.
func (f *fitted) note(l *longPeriod, own bool, list []int) {
	taken := f.filter.Used()
	list = list[max(0, len(list)-len(taken)):]
	if own {
		f.used = list
	} else {
		f.others = len(list)
	}
	if len(list) > 0 && (f.since.IsZero() || l.readings[list[0]].at.Before(f.since)) {
		f.since = l.readings[list[0]].at
	}
	if len(list) > 0 {
		f.last = math.Max(f.last, l.readings[list[len(list)-1]].jd)
	}
}

// recent returns the readings of the last three cycles, or the newest 100.
func recent(all []reading, list []int, periodD float64) []int {
	k := max(0, len(list)-memoryCount)
	for k > 0 && all[list[k-1]].jd >= all[list[len(list)-1]].jd-memoryCycles*periodD {
		k--
	}
	return list[k:]
}

// levelIn returns a mean magnitude to start from in a band that the averages
// are not of: as listed, as measured, or carried from the catalogue's.
func (l *longPeriod) levelIn(band targets.Band, own []int) (float64, error) {
	if band == l.home {
		return math.NaN(), nil
	}
	if m := l.t.Mags[band]; usable(m) {
		return m.Value, nil
	}
	sum, count := 0.0, 0
	for _, i := range own {
		if !l.readings[i].Limit {
			sum, count = sum+l.readings[i].Mag, count+1
		}
	}
	if count > 0 {
		return sum / float64(count), nil
	}
	known := map[bands.Band]bands.Measure{}
	for b, m := range l.steady.known {
		known[b] = m
	}
	if v := &l.t.Var; usable(v.MagMax) && usable(v.MagMin) {
		known[bands.Band(l.home)] = bands.Measure{Mag: (v.MagMax.Value + v.MagMin.Value) / 2, Err: 0.5}
	}
	c, err := bands.Carry(known, bands.Band(band), l.steady.hints)
	if err != nil {
		return 0, err
	}
	return c.Mag, nil
}

func (l *longPeriod) obs(list []int) []wander.Obs {
	out := make([]wander.Obs, len(list))
	for k, i := range list {
		r := &l.readings[i]
		out[k] = wander.Obs{JD: r.jd, Mag: r.Mag, Err: math.Hypot(r.Err, r.more), Limit: r.Limit, Visual: r.visual}
	}
	return out
}

// findPeriod returns a period that can be trusted; nil: there is none.
func findPeriod(obs []wander.Obs) *wander.Period {
	p, err := wander.FindPeriod(obs)
	if err != nil || !(p.FalseAlarm < trustedFalseAlarm) || !(p.Days >= shortestLPV && p.Days <= longestLPV) {
		return nil
	}
	return &p
}

// maximum is when a long-period variable is next brightest.
type maximum struct {
	jd, sigmaD float64
	periodD    float64
	status     string // of the phase
	row        *train // that it is of
}

func (l *longPeriod) at(q query) Forecast {
	band := q.band
	if band == "" || visualNames[band] {
		band = l.home
	}
	if q.band == "" && l.fit(l.home, q.n).filter == nil {
		band = (&relaxing{t: l.t, readings: l.readings, steady: l.steady}).band(q, l.home)
	}
	if infrared[band] && len(in(l.readings, q.n, band)) < calibratedFrom {
		return l.inInfrared(q, band)
	}
	fit := l.fit(band, q.n)
	if fit.filter == nil {
		return l.without(q, band, fit)
	}
	w, err := fit.filter.At(q.t.JDUTC())
	if err != nil {
		return unknown(band, err.Error())
	}
	f := Forecast{Band: band, Phase: &Phase{w.Phase, w.PhaseSigma, w.PhaseStatus}, Rising: w.Rising}
	period := l.elements.PeriodD
	if fit.found != nil {
		period = fit.found.Days
	}
	if fit.blind(&w) {
		f.Phase.Value, f.Phase.Sigma = math.NaN(), math.NaN()
	} else {
		f.maximum = &maximum{w.MaximumJD, w.MaximumSigmaD, period, w.PhaseStatus, nil}
		if row := l.train(q.n, q.t.JDUTC()); row != nil && row.ok {
			f.maximum.jd, f.maximum.periodD, f.maximum.row = row.after(q.t.JDUTC()), row.periodD, row
		}
	}
	f.fill(w, q.level)
	f.Basis = l.words(q, fit, &w, f.maximum)
	f.Steps = l.steps(fit, &w, &f, period)
	return f
}

// blind tells whether nothing at all says what the phase is.
func (f *fitted) blind(w *wander.Forecast) bool {
	return w.N+w.NOther == 0 && math.IsNaN(w.CyclesSinceEpoch)
}

func (l *longPeriod) judge(n int) []verdict {
	out := make([]verdict, n)
	for i := range out {
		r := &l.readings[i]
		if r.why != "" {
			continue
		}
		fit := l.fit(r.band, n)
		out[i].why = fit.why
		if fit.filter == nil {
			if l.ranges() && !r.Limit {
				out[i] = verdict{used: true, p: 1}
			}
			continue
		}
		out[i].why = fmt.Sprintf("older than the last %g cycles and the newest %d magnitudes", memoryCycles, memoryCount)
		for k, j := range fit.filter.Used() {
			if fit.used[k] == i {
				out[i] = verdict{used: true, p: j.NarrowP}
			}
		}
	}
	return out
}

// filterSource names the works behind the filter.
var filterSource = cite.ChenLiu2000.String() + "; measured on light curves of " + cite.Pojmanski2002.String()
