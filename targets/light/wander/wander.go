// Package wander forecasts the brightness of Miras and semiregular variables,
// stars that keep a period but wander about it. It holds a grid over phase,
// period and restlessness; in each node a linear model of the light curve with
// three kinds of drift is kept exactly up to date by every magnitude, and the
// answer is the mixture of all nodes. With no magnitudes it is what catalogue
// elements are worth after so many cycles. The package rejects no magnitude,
// averages no bands, gives no single number without its distribution, and
// knows neither files nor clocks.
//
// Source: a mixture of Kalman filters, [cite.ChenLiu2000], each as
// [cite.Kalman1960]; drifts as [cite.UhlenbeckOrnstein1930]. The averages and
// drifts are this project's measurement on light curves of
// [cite.Pojmanski2002] matched to elements of [cite.SamusEtAl2017].
package wander

import (
	"errors"
	"fmt"
	"math"

	"evenfall/targets"
)

// What can go wrong. Callers compare with errors.Is.
var (
	// ErrPeriod: no period, or one outside 10 to 3000 days.
	ErrPeriod = errors.New("no period from 10 to 3000 days; give one, or find one from the magnitudes")
	// ErrLevel: neither a usable maximum nor a level to start from.
	ErrLevel = errors.New("no magnitude at maximum and no mean level; give one of them")
	// ErrElements: an element is not a number or absurd.
	ErrElements = errors.New("elements are not numbers or absurd; correct them or leave them out")
	// ErrObs: a magnitude, its date or its error is not a number or absurd.
	ErrObs = errors.New("date, magnitude or error is not a number or absurd; leave it out")
	// ErrOrder: a magnitude is older than one already used.
	ErrOrder = errors.New("older than a magnitude already used; sort by date")
	// ErrGrid: the reference date or the span of the grid is not a number.
	ErrGrid = errors.New("reference date or span is not a number; give days")
)

// Class is the kind of long-period variable.
type Class int

// The classes that have averages of their own.
const (
	Mira        Class = iota
	Semiregular       // SR, SRA, SRB
)

// Catalogue systems and bands that the averages know.
const (
	BandV            targets.Band = "V"
	BandVisual       targets.Band = "vis"
	BandPhotographic targets.Band = "p"
)

// Elements is what a catalogue says of a star.
type Elements struct {
	Class      Class
	PeriodD    float64 // days, 10 to 3000
	PeriodErrD float64 // one sigma, added to what catalogue periods are worth; 0: a catalogue's
	EpochMaxJD float64 // Julian date of a maximum, in the scale of the magnitudes
	HasEpoch   bool

	MagMax, MagMin float64      // brightest and faintest listed
	Band           targets.Band // of MagMax and MagMin; "" and "v" count as V
	NoMax, NoMin   bool         // not listed
	MinIsLimit     bool         // MagMin is "fainter than"

	Carbon       bool    // spectrum C, N or R
	RiseFraction float64 // rise time over period, 0 to 1; 0: not known
	LevelMag     float64 // mean magnitude, used where NoMax
	HasLevel     bool
}

// Obs is one measured brightness in the filter's band.
type Obs struct {
	JD     float64
	Mag    float64
	Err    float64 // one sigma, mag; 0: not given
	Limit  bool    // fainter than Mag, not seen
	Visual bool    // an estimate by eye, or a mean of such
}

// The error that a magnitude is taken to have.
const (
	leastErr      = 0.05 // mag, however small the error quoted
	visualErr     = 0.15 // of one estimate by eye
	visualMeanErr = 0.12 // of a mean of several
)

// sigma is the error that enters the update.
func (o Obs) sigma() float64 {
	switch {
	case o.Visual && o.Err == 0:
		return visualErr
	case o.Visual:
		return math.Max(o.Err, visualMeanErr)
	}
	return math.Max(o.Err, leastErr)
}

const (
	largestMag = 50.0 // anything beyond is a slip
	largestJD  = 1e8
)

func (o Obs) check() error {
	// written so that what is not a number fails
	if !(math.Abs(o.JD) < largestJD && math.Abs(o.Mag) < largestMag && o.Err >= 0 && o.Err < largestMag) {
		return fmt.Errorf("magnitude %v of JD %v, error %v: %w", o.Mag, o.JD, o.Err, ErrObs)
	}
	return nil
}

// Grid says what dates a filter is to serve.
type Grid struct {
	TrefJD float64 // where nodes are phases: the last magnitude, or the forecast where there is none
	SpanD  float64 // from the first magnitude to the last; the longer, the finer the periods
}

// Judged is a magnitude with the verdict on it.
type Judged struct {
	Obs
	// NarrowP is the probability that the magnitude belongs to the star's
	// expected brightness and not to the wide component that outliers fall to.
	NarrowP float64
}

// outlierBelow is the NarrowP under which a magnitude is flagged.
const outlierBelow = 0.1

// Outlier tells whether the magnitude was taken by the wide component: NarrowP
// below 0.1. It still counted, little.
func (j Judged) Outlier() bool { return j.NarrowP < outlierBelow }

// Filter is a star made ready: elements and what the magnitudes taught. Reading
// from several goroutines at once is safe, updating is not.
type Filter struct {
	m       *model
	grid    Grid
	stepLnP float64
	nodes   []node
	lastJD  float64 // of the last magnitude in any band; NaN: none
	stateJD float64 // date of the nodes' states; NaN: stationary
	firstJD float64
	used    []Judged
	other   int // magnitudes in other bands that the phases come from
}

// New returns the filter of a star before any magnitude.
//
// Given:
//   - e: the elements.
//   - band: that of the magnitudes to come and the forecasts wanted. V and
//     visual share one model; for any other band level and amplitude get wide
//     priors and [Forecast.Calibrated] is false until three magnitudes are in.
//   - g: the dates to serve; [Fit] sets them from the magnitudes.
//
// Returns:
//   - the filter.
//   - [ErrPeriod], [ErrLevel], [ErrElements], [ErrGrid].
//
// Notes:
//  1. A catalogue minimum that is missing, a limit, or not fainter than the
//     maximum is left aside; level and amplitude are then those of such stars.
//  2. Averages for photographic extremes lead to V.
//
// Source: this project's measurement on ASAS-3, [cite.Pojmanski2002].
//
// Checked: TestPrior, TestForecastFigures, FuzzWander.
func New(e Elements, band targets.Band, g Grid) (*Filter, error) {
	m, err := newModel(e, band)
	if err != nil {
		return nil, err
	}
	return newFilter(m, g)
}

func newFilter(m *model, g Grid) (*Filter, error) {
	if !(math.Abs(g.TrefJD) < largestJD && g.SpanD >= 0 && g.SpanD < largestJD) {
		return nil, ErrGrid
	}
	f := &Filter{m: m, grid: g, lastJD: math.NaN(), stateJD: math.NaN(), firstJD: math.NaN()}
	f.build()
	return f, nil
}

// The magnitudes that a forecast rests on: those of so many cycles, or so many
// of the newest, whichever reaches further back. A choice; a hundred do little
// better than thirty.
const (
	memoryCycles = 3.0
	memoryCount  = 100
)

// recent returns the magnitudes to use.
func recent(obs []Obs, periodD float64) []Obs {
	if len(obs) <= memoryCount {
		return obs
	}
	from := obs[len(obs)-1].JD - memoryCycles*periodD
	k := len(obs) - memoryCount
	for k > 0 && obs[k-1].JD >= from {
		k--
	}
	return obs[k:]
}

// Fit returns the filter of a star with its magnitudes taken in.
//
// Given:
//   - e, band: as for [New].
//   - obs: in the band, oldest first; may be empty. Used are those of the last
//     three cycles or the newest 100, whichever are more.
//   - whenJD: the date of interest, used where there are no magnitudes.
//
// Returns:
//   - the filter, its grid set to the last magnitude and their span.
//   - errors of [New]; [ErrObs], [ErrOrder] naming the magnitude.
//
// Notes:
//  1. Elements without a maximum and a level take the median magnitude as level.
//
// Checked: TestForecastFigures, TestScores, FuzzWander.
func Fit(e Elements, band targets.Band, obs []Obs, whenJD float64) (*Filter, error) {
	for i, o := range obs {
		if err := o.check(); err != nil {
			return nil, err
		}
		if i > 0 && o.JD < obs[i-1].JD {
			return nil, fmt.Errorf("magnitude of JD %.4f after that of %.4f: %w", o.JD, obs[i-1].JD, ErrOrder)
		}
	}
	if level := medianMag(obs); e.NoMax && !e.HasLevel && !math.IsNaN(level) {
		e.LevelMag, e.HasLevel = level, true
	}
	m, err := newModel(e, band)
	if err != nil {
		return nil, err
	}
	g := Grid{TrefJD: whenJD}
	if obs = recent(obs, e.PeriodD); len(obs) > 0 {
		g.TrefJD = obs[len(obs)-1].JD
		g.SpanD = g.TrefJD - obs[0].JD
	}
	f, err := newFilter(m, g)
	if err != nil {
		return nil, err
	}
	for _, o := range obs {
		if err := f.Update(o); err != nil {
			return nil, err
		}
	}
	return f, nil
}

// Clone returns a filter that shares nothing that changes.
func (f *Filter) Clone() *Filter {
	c := *f
	c.nodes = append([]node(nil), f.nodes...)
	c.used = append([]Judged(nil), f.used...)
	return &c
}

// Used returns the magnitudes taken in, oldest first, each with its verdict.
func (f *Filter) Used() []Judged { return append([]Judged(nil), f.used...) }

// Outgrown tells whether the magnitudes taken in span so much more than the
// grid was made for that its periods are too coarse: then [Fit] anew.
func (f *Filter) Outgrown() bool {
	if math.IsNaN(f.lastJD) || math.IsNaN(f.firstJD) {
		return false
	}
	return periodStep((f.lastJD-f.firstJD)/f.m.periodD) < f.stepLnP/outgrownBy
}

// outgrownBy is how much coarser than asked the periods may get. A choice.
const outgrownBy = 1.5
