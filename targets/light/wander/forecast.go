package wander

import (
	"errors"
	"fmt"
	"math"

	"evenfall/targets"
)

// ErrDate: the date asked is not a number or absurd.
var ErrDate = errors.New("date is not a number or absurd; give a Julian date")

// Forecast is the brightness expected on a date, and where in its cycle the
// star is. Ask it for quantiles: its mean means little, it may have two humps.
type Forecast struct {
	JD     float64
	N      int // magnitudes used in this band, limits among them
	NOther int // magnitudes in other bands that taught phase and period
	// AgeLastD is how old the newest magnitude is, days; negative before it, NaN
	// without one.
	AgeLastD         float64
	CyclesSinceEpoch float64 // since the catalogue's maximum; NaN without one
	Calibrated       bool    // the band's averages are known, or three magnitudes in it

	R           float64 // length of the phase's resultant, 0 to 1
	PhaseStatus string  // known, uncertain, unknown: [Status] of R
	Phase       float64 // cycles after maximum, 0 to 1; the circular mean
	PhaseSigma  float64 // cycles, circular standard deviation

	RisingP float64 // probability that it is brightening
	Rising  int     // +1 brightening, -1 fading, both with 80 %; 0 not known

	MaximumJD     float64 // next maximum; worth little unless the phase is known
	MaximumSigmaD float64 // days

	mix mixture
}

const (
	// surelyRising is the probability that makes Rising more than 0. A choice.
	surelyRising = 0.8
	// calibratedFrom is the number of magnitudes that calibrate a band. A choice.
	calibratedFrom = 3
	leastWeight    = 1e-9 // of a component that is worth its time
)

// At returns the brightness expected on a date.
//
//	per node: mean h.x, variance h'Ch + q^2 sd^2 (1-k^2) h^2 + jitter^2, the drifts decayed by k
//
// Given:
//   - jd: the date, in the scale of the magnitudes. Before the newest magnitude
//     the answer is what the state then says of it; no smoothing is done.
//
// Returns:
//   - the forecast, of the brightness itself. For a measurement to come see
//     [Forecast.Measured].
//   - [ErrDate].
//
// Notes:
//  1. More than a cycle after the last magnitude the phase spreads by 0.015
//     cycle per root of a cycle.
//  2. Without magnitudes the catalogue's epoch is carried to each date anew.
//  3. A change of the period over decades is not in the model.
//  4. On 39 Miras with 30 recent magnitudes the median was off by 0.46 mag rms
//     10 to 200 days ahead, and 80 % intervals held 80 %; with none, 1.4 mag.
//  5. Semiregulars, photographic extremes and carbon stars rest on 20 to 57, 57
//     and 8 stars that were not scored apart.
//
// Source: this project's measurement on ASAS-3, [cite.Pojmanski2002].
//
// Checked: TestForecastFigures, to 0.01 mag; TestScores, on measured stars.
func (f *Filter) At(jd float64) (Forecast, error) {
	if !(math.Abs(jd) < largestJD) {
		return Forecast{}, fmt.Errorf("JD %v: %w", jd, ErrDate)
	}
	s := f.spread(jd)
	out := Forecast{JD: jd, N: len(f.used), NOther: f.other, AgeLastD: jd - f.lastJD, CyclesSinceEpoch: f.m.cyclesAt(jd),
		Calibrated: f.m.calibrated || len(f.used) >= calibratedFrom}
	out.mix = s.mix.joined()
	out.R = math.Hypot(s.sumC, s.sumS)
	out.PhaseStatus = Status(out.R)
	out.Phase = math.Atan2(s.sumS, s.sumC) / (2 * math.Pi)
	out.Phase -= math.Floor(out.Phase)
	out.PhaseSigma = math.Sqrt(math.Max(0, -2*math.Log(math.Min(math.Max(out.R, 1e-9), 1)))) / (2 * math.Pi)
	out.RisingP = math.Min(s.rising, 1)
	switch {
	case out.RisingP >= surelyRising:
		out.Rising = 1
	case out.RisingP <= 1-surelyRising:
		out.Rising = -1
	}
	out.MaximumJD, out.MaximumSigmaD = s.maximum(out.Phase, f.m.periodD)
	out.MaximumJD += jd
	return out, nil
}

// aspect is a node's share in a forecast: weight, phase and days a cycle.
type aspect struct{ w, cycles, periodD float64 }

// spread is what all nodes say of a date.
type spread struct {
	mix        mixture
	aspects    []aspect
	sumC, sumS float64
	rising     float64
}

// spread runs over the nodes, and over the copies of each where the gap is long.
func (f *Filter) spread(jd float64) *spread {
	days, none := jd-f.grid.TrefJD, math.IsNaN(f.lastJD)
	var lnPhase [nPhase]float64
	if none {
		days, lnPhase = 0, f.m.epochLnDensity(jd)
	}
	k, driftVar := [nDrift]float64{1, 1, 1}, [nDrift]float64{}
	if !math.IsNaN(f.stateJD) {
		k, driftVar = f.m.decay(jd - f.stateJD)
	}
	shifts := f.gapShifts(jd)
	out := &spread{mix: make(mixture, 0, len(f.nodes)*len(shifts))}
	if len(f.nodes) == 0 {
		return out
	}
	out.aspects = make([]aspect, 0, cap(out.mix))
	total := 0.0
	for i := range f.nodes {
		n := &f.nodes[i]
		w := math.Exp(n.lnW)
		if none {
			// the epoch's phase at this date, not at the grid's
			w = math.Exp(n.lnPrior + lnPhase[n.phase] - f.nodes[0].lnPrior)
		}
		total += w
		for _, s := range shifts {
			if w*s.weight < leastWeight {
				continue
			}
			cycles := n.cycles(days) + s.cycles
			mean, variance, slope := n.predict(row(cycles), &k, &driftVar)
			sd := math.Sqrt(variance + f.m.jitter*f.m.jitter)
			out.mix = append(out.mix, part{w * s.weight, mean, sd})
			out.aspects = append(out.aspects, aspect{w * s.weight, cycles, 1 / n.perDay})
			if slope < 0 {
				out.rising += w * s.weight
			}
		}
	}
	out.rising /= total
	for i := range out.mix {
		out.mix[i].p /= total
		a := &out.aspects[i]
		a.w /= total
		sin, cos := math.Sincos(2 * math.Pi * (a.cycles - math.Floor(a.cycles)))
		out.sumC, out.sumS = out.sumC+a.w*cos, out.sumS+a.w*sin
	}
	return out
}

// predict returns the node's mean and variance of the brightness, and the
// slope of the light curve, mag per radian.
func (n *node) predict(h [nState]float64, k, driftVar *[nDrift]float64) (mean, variance, slope float64) {
	decayed := h
	qq := restless[n.q].q * restless[n.q].q
	for j := range nDrift {
		decayed[nFixed+j] *= k[j]
		variance += qq * driftVar[j] * h[nFixed+j] * h[nFixed+j]
	}
	s := 0.0
	for i := range nState {
		sum := 0.0
		for j := range i {
			sum += n.c[i][j] * decayed[j]
		}
		s += decayed[i] * (2*sum + n.c[i][i]*decayed[i])
		mean += decayed[i] * n.x[i]
	}
	variance += math.Max(s, 0)
	sin, cos, cos2, sin2, cos3, sin3 := h[7], -h[1], h[2], h[3], h[4], h[5]
	slope = n.x[1]*sin + 2*(n.x[3]*cos2-n.x[2]*sin2) + 3*(n.x[5]*cos3-n.x[4]*sin3) + n.x[7]*k[1]*cos
	return mean, variance, slope
}

// maximum returns the days to the next phase 0, and their standard deviation.
func (s *spread) maximum(phase, periodD float64) (days, sigma float64) {
	mean, square := 0.0, 0.0
	for _, a := range s.aspects {
		d := a.periodD * (1 - phase - wrap(a.cycles-phase))
		mean += a.w * d
		square += a.w * d * d
	}
	return mean, math.Hypot(math.Sqrt(math.Max(square-mean*mean, 0)), maximumScatter*periodD)
}

// Quantile returns the magnitude that the star is brighter than with
// probability p; not a number outside 0 to 1.
func (f Forecast) Quantile(p float64) float64 { return f.mix.quantile(p) }

// Median returns the magnitude that the star is as likely above as below.
func (f Forecast) Median() float64 { return f.mix.quantile(0.5) }

// Interval returns the bright and the faint end of the central interval of a
// probability, e.g. 0.8; not numbers outside 0 to 1.
func (f Forecast) Interval(level float64) (lo, hi float64) {
	return f.mix.quantile((1 - level) / 2), f.mix.quantile((1 + level) / 2)
}

// CDF returns the probability that the star is brighter than a magnitude.
func (f Forecast) CDF(mag float64) float64 {
	if math.IsNaN(mag) {
		return mag
	}
	return math.Min(f.mix.cdf(mag), 1)
}

// Density returns the probability per magnitude at a magnitude.
func (f Forecast) Density(mag float64) float64 { return f.mix.density(mag) }

// TwoHumped tells whether the distribution has two humps: mostly because one
// magnitude in mid-branch leaves open whether the star was rising or fading.
func (f Forecast) TwoHumped() bool { return f.mix.twoHumped() }

// Measured returns the forecast of a measurement with an error: the
// distribution of what would be read, not of the brightness itself.
//
// Given:
//   - err: one sigma, mag; not above 0: none.
//
// Checked: TestMeasured.
func (f Forecast) Measured(err float64) Forecast {
	if !(err > 0) || math.IsInf(err, 0) {
		return f
	}
	mix := make(mixture, len(f.mix))
	for i, c := range f.mix {
		mix[i] = part{c.p, c.mean, math.Hypot(c.sd, err)}
	}
	f.mix = mix
	return f
}

// Words says what an observer must know beside the interval.
//
// Returns:
//   - phrases joined by semicolons: how well the phase is known, what it rests
//     on, what would help. The words of the phase are those of PhaseStatus.
//
// Checked: TestWords.
func (f Forecast) Words() string {
	s := "phase " + f.PhaseStatus
	if f.PhaseStatus == PhaseUnknown {
		s += ", the range only"
	}
	age := fmt.Sprintf("%.0f d old", f.AgeLastD)
	switch {
	case f.AgeLastD <= -1:
		age = fmt.Sprintf("%.0f d after this date", -f.AgeLastD)
	case f.AgeLastD < 0:
		age = "less than a day after this date"
	case f.AgeLastD < 1:
		age = "less than a day old"
	}
	switch {
	case f.N+f.NOther == 0:
		s += "; no magnitudes used"
	case f.N+f.NOther == 1:
		s += "; 1 magnitude used, " + age
	default:
		s += fmt.Sprintf("; %d magnitudes used, the last %s", f.N+f.NOther, age)
	}
	if !math.IsNaN(f.CyclesSinceEpoch) {
		s += fmt.Sprintf("; %.1f cycles since the catalogue's maximum", f.CyclesSinceEpoch)
	}
	if f.N > 0 && f.TwoHumped() {
		s += "; rising or falling not known; one more magnitude a week or two apart decides"
	}
	if !f.Calibrated {
		s += "; band not calibrated"
	}
	return s
}

// InBand returns a filter for another band that keeps what this one's
// magnitudes taught of phase, period and restlessness, and starts level and
// shape of the curve anew with wide priors.
//
// Given:
//   - band: for V and visual the filter's copy is returned.
//   - levelMag: mean magnitude to start from; NaN takes the level in V.
//
// Returns:
//   - the filter; its magnitudes may be older than those of this one.
//   - [ErrElements] for an absurd level.
//
// Notes:
//  1. Magnitudes of different bands are never averaged; a colour is not assumed.
//  2. Standard deviations 1.5 of the level and 0.6 of the amplitude: a choice.
//
// Checked: TestInBand.
func (f *Filter) InBand(band targets.Band, levelMag float64) (*Filter, error) {
	if sharesV(band) && f.m.calibrated {
		return f.Clone(), nil
	}
	if !math.IsNaN(levelMag) && !(math.Abs(levelMag) < largestMag) {
		return nil, ErrElements
	}
	m, err := newModel(f.m.elements, band)
	if err != nil {
		return nil, err
	}
	if !math.IsNaN(levelMag) {
		m.mean[0] = levelMag
	}
	out := f.Clone()
	out.m, out.used, out.other = m, nil, f.other+len(f.used)
	out.stateJD = math.NaN()
	for i := range out.nodes {
		m.start(&out.nodes[i])
	}
	return out, nil
}
