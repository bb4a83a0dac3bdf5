package light

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/targets"
)

// What catalogue extremes mean in V: the mean curve's maximum is this much
// fainter than the brightest, its minimum this much brighter than the faintest
// ever listed. Measured on ASAS-3 light curves of 149 Miras.
//
// Source: [cite.Pojmanski2002] for the light curves, [cite.SamusEtAl2017] for the
// extremes; the measurement is this project's.
const (
	maxIsFainter   = 0.77
	minIsBrighter  = 0.92
	scatterMaximum = 0.5 // of single maxima, mag
	scatterMinimum = 0.3
	leastScatter   = 0.05 // no curve is better than that
	// leastShare is how much of the listed range the mean curve keeps at least,
	// where the two shifts would eat it up: amplitudes under some 2.8 mag.
	leastShare = 0.4
)

// How the phase drifts away from catalogue elements over cycles, and how often
// it is lost at once. Maximum likelihood on 336 Miras of ASAS-3.
//
// Source: [cite.EddingtonPlakidis1929] for the growth with the square root of
// the cycles; the constants are this project's measurement.
const (
	phaseFirst  = 0.030  // cycle
	phaseWalk   = 0.012  // cycle per square root of a cycle
	phaseDrift  = 0.0048 // cycle per cycle
	phaseLost   = 0.29   // weight on any phase
	knownFrom   = 0.9    // resultant length above which a phase counts as known
	unknownFrom = 0.6    // below which it counts as unknown
)

// longPeriod is a Mira, a semiregular or a slow irregular variable.
type longPeriod struct {
	t              targets.Target
	band           targets.Band // that the curve is in
	bright, faint  float64      // of the mean curve
	sdMax, sdMin   float64      // scatter there
	periodD, epoch float64      // NaN: none
	rise           float64      // fraction of the period
	how            string
}

func newLongPeriod(t targets.Target) model {
	l := &longPeriod{t: t, band: bandOf(t.Var.MagBand), periodD: math.NaN(), epoch: math.NaN()}
	max, min := t.Var.MagMax, t.Var.MagMin
	switch {
	case usable(max) && usable(min) && min.Value > max.Value && !t.Var.MagMinIsLimit:
		l.fromExtremes(max.Value, min.Value)
	case usable(max):
		l.fromMaximum(max.Value)
	default:
		return newConstant(t)
	}
	if p := t.Var.PeriodD; usable(p) && p.Value > 0 {
		l.periodD = p.Value
		// the catalogue dates RV Tauri stars by their minima as often as not
		if e := t.Var.EpochMaxJD; usable(e) && !rvVariable.MatchString(t.Var.Type) {
			l.epoch = e.Value
		}
	}
	l.rise = riseOf(t)
	return l
}

// fromExtremes sets the mean curve from the catalogue's brightest and faintest.
func (l *longPeriod) fromExtremes(max, min float64) {
	share := math.Min(1, (1-leastShare)*(min-max)/(maxIsFainter+minIsBrighter))
	l.bright, l.faint = max+share*maxIsFainter, min-share*minIsBrighter
	l.sdMax, l.sdMin = math.Max(share*scatterMaximum, leastScatter), math.Max(share*scatterMinimum, leastScatter)
	l.how = fmt.Sprintf("mean curve from %.1f to %.1f in %s, from catalogue extremes %.1f to %.1f", l.bright, l.faint, l.band, max, min)
}

// fromMaximum sets the curve of a star whose faintest is not listed.
//
//	mean level = brightest + 2.79 (sd 0.91), half amplitude = 1.606 + 0.524 log10(P/280) (sd 0.59), in V
//
// Source: this project's measurement on 105 Miras of ASAS-3, [cite.Pojmanski2002].
func (l *longPeriod) fromMaximum(max float64) {
	level, sd := max+2.79, 0.91
	if l.band == "p" {
		level, sd = max+0.42, 1.08
		l.band = "V"
	}
	half := 1.606
	if p := l.t.Var.PeriodD; usable(p) && p.Value > 0 {
		half += 0.524 * math.Log10(p.Value/280)
	}
	half = math.Max(half, 0.4)
	l.bright, l.faint = level-half, level+half
	l.sdMax, l.sdMin = math.Hypot(sd, 0.59), math.Hypot(sd, 0.59)
	l.how = fmt.Sprintf("no faintest magnitude listed: mean curve from %.1f to %.1f in %s, as such stars have", l.bright, l.faint, l.band)
}

// riseOf returns the rise time as a fraction of the period.
//
// Source: common practice, no source, where the list has none.
func riseOf(t targets.Target) float64 {
	if r := t.Var.RiseFraction; usable(r) && r.Value > 0.05 && r.Value < 0.95 {
		return r.Value
	}
	switch p := t.Var.PeriodD; {
	case !usable(p) || p.Value < 300:
		return 0.45
	case p.Value < 400:
		return 0.42
	}
	return 0.38
}

// Curve returns how far along from maximum (0) to minimum (1) a long-period
// variable is at a phase.
//
//	x = phase/(1-f) on the fall, (1-phase)/f on the rise;  w = (1 - cos(pi x)) / 2
//
// Given:
//   - phase: cycles after maximum, 0 to 1.
//   - rise: f, rise time over period.
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

// PhaseError returns the standard deviation of a phase computed from catalogue
// elements, in cycles.
//
//	sd^2 = 0.030^2 + 0.012^2 N + (0.0048 N)^2
//
// Given:
//   - cycles: N, since the epoch, either way.
//
// Source: see the constants.
//
// Checked: TestPhaseError.
func PhaseError(cycles float64) float64 {
	n := math.Abs(cycles)
	return math.Sqrt(phaseFirst*phaseFirst + phaseWalk*phaseWalk*n + phaseDrift*phaseDrift*n*n)
}

// steps of phase over which the mixture is summed.
const phaseSteps = 48

func (l *longPeriod) at(t astro.Instant, band targets.Band, level float64) Forecast {
	conv, ok := l.convert(band)
	if !ok {
		c := &constant{t: l.t}
		if f := c.at(t, band, level); f.Known {
			f.Basis = "single catalogue magnitude of a variable star, phase unknown: " + f.Basis
			return f
		}
		return unknown(band, fmt.Sprintf("extremes are listed in %s; no relation from there to %s", l.t.Var.MagBand, band))
	}
	phase, weight, cycles := l.phase(t)
	f := Forecast{Band: conv.band, Phase: phase, Basis: l.how + conv.note + l.phaseWords(phase, cycles)}
	var m mixture
	for i, w := range weight {
		y := Curve((float64(i)+0.5)/phaseSteps, l.rise)
		mean := conv.bright + (conv.faint-conv.bright)*y
		m = append(m, part{w, mean, conv.sdMax*(1-y) + conv.sdMin*y})
	}
	m.interval(&f, level)
	if phase.Status != PhaseUnknown {
		f.Rising = -1
		if phase.Value > 1-l.rise {
			f.Rising = 1
		}
	}
	f.Steps = []Step{{"expected brightness", "mean curve (1 - cos(pi x))/2 between maximum and minimum, over the distribution of the phase",
		fmt.Sprintf("%s; rise %.2f of the period", l.how, l.rise),
		fmt.Sprintf("%.2f, %.2f to %.2f", f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags()),
		"phase error as Eddington & Plakidis 1929, constants measured on ASAS-3 (Pojmanski 2002)"}}
	return f
}

// phase returns where the star is in its cycle, how the probability is spread
// over phases, and the cycles since the epoch.
func (l *longPeriod) phase(t astro.Instant) (*Phase, [phaseSteps]float64, float64) {
	var w [phaseSteps]float64
	for i := range w {
		w[i] = 1.0 / phaseSteps
	}
	if math.IsNaN(l.epoch) || math.IsNaN(l.periodD) {
		return &Phase{Value: math.NaN(), Sigma: math.NaN(), Status: PhaseUnknown}, w, math.NaN()
	}
	cycles := (t.JDUTC() - l.epoch) / l.periodD
	phi, sd := cycles-math.Floor(cycles), PhaseError(cycles)
	sum := 0.0
	for i := range w {
		w[i] = 0
		for turn := -3.0; turn <= 3; turn++ {
			d := ((float64(i)+0.5)/phaseSteps - phi + turn) / sd
			w[i] += math.Exp(-d * d / 2)
		}
		sum += w[i]
	}
	for i := range w {
		w[i] = (1-phaseLost)*w[i]/sum + phaseLost/phaseSteps
	}
	return &Phase{Value: phi, Sigma: sd, Status: statusOf(w)}, w, cycles
}

// statusOf judges a distribution of phase by the length of its resultant.
func statusOf(w [phaseSteps]float64) string {
	x, y := 0.0, 0.0
	for i, p := range w {
		s, c := math.Sincos(2 * math.Pi * (float64(i) + 0.5) / phaseSteps)
		x, y = x+p*c, y+p*s
	}
	switch r := math.Hypot(x, y); {
	case r < unknownFrom:
		return PhaseUnknown
	case r < knownFrom:
		return PhaseUncertain
	}
	return PhaseKnown
}

func (l *longPeriod) phaseWords(p *Phase, cycles float64) string {
	switch {
	case math.IsNaN(l.periodD):
		return "; no period listed: phase unknown"
	case math.IsNaN(l.epoch):
		return "; no epoch of maximum to go by: phase unknown"
	case p.Status == PhaseUnknown:
		return fmt.Sprintf("; elements %.0f cycles old: phase unknown", math.Abs(cycles))
	}
	return fmt.Sprintf("; phase %.2f +- %.2f from elements %.0f cycles old, wholly lost in 29 %% of such stars", p.Value, p.Sigma, math.Abs(cycles))
}

// curveIn is the mean curve in some band.
type curveIn struct {
	band                        targets.Band
	bright, faint, sdMax, sdMin float64
	note                        string
}

// convert returns the curve in a band; false: nothing leads there.
//
//	V from photographic extremes: level = mid - 1.746 - 0.131 (h - 3) + 0.007 lp, sd 0.93
//	half amplitude = 1.557 + 0.230 (h - 3) + 0.304 lp, sd 0.40     h: half range, lp = log10(P/280)
//
// Source: this project's measurement on 57 Miras of ASAS-3, [cite.Pojmanski2002].
func (l *longPeriod) convert(band targets.Band) (curveIn, bool) {
	own := curveIn{l.band, l.bright, l.faint, l.sdMax, l.sdMin, ""}
	if band == "" || band == l.band {
		return own, true
	}
	if band != "V" || l.t.Var.MagBand != "p" {
		return own, false
	}
	max, min := l.t.Var.MagMax.Value, l.t.Var.MagMin.Value
	h, mid, lp := (min-max)/2, (min+max)/2, 0.0
	if p := l.t.Var.PeriodD; usable(p) && p.Value > 0 {
		lp = math.Log10(p.Value / 280)
	}
	level := mid - 1.746 - 0.131*(h-3) + 0.007*lp
	half := math.Max(1.557+0.230*(h-3)+0.304*lp, 0.4)
	sd := math.Hypot(0.93, 0.40)
	return curveIn{"V", level - half, level + half, sd, sd, fmt.Sprintf("; carried to V: %.1f to %.1f", level-half, level+half)}, true
}
