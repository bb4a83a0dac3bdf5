// Package exposure says how long to expose: for one target in one mode of an
// instrument at one moment, the time that is booked, in how many frames, what
// it may come to, the odds of reaching what is wanted, what saturates and what
// limits it; how to set the slit, which standard to take, when flats can be
// taken and bright stars begun, and what tonight's throughput is. It joins what
// is configured with what is forecast and with the formulas of photon; it knows
// no clock, no file and no screen, and applies no correction unasked.
package exposure

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// Goal is what is wanted of an exposure. A number that is 0 is not asked for.
type Goal struct {
	SNR         float64
	Per         string  // pixel, element, frame, total; "": total for images, element for slits
	ExposureS   float64 // of open shutter in all; of one frame where Per is frame or DurationS is given
	Frames      int
	DurationS   float64 // of a continuous series, by the clock
	CycleS      float64 // longest time from one frame to the next in a series; 0: 10, for flickering
	Comparisons int     // stars that a series is measured against
	AreaArcsec2 float64 // of an extended source, summed
	AimArcsec   [2]float64
	Line        string // of a nebula through a slit: Ha, Hb, O3
	AtNm        float64
	SlitArcsec  float64
	Binning     [2]int  // along the dispersion (or in x), along the slit (or in y); 0: 1
	PA          string  // of the slit: parallactic, any, or degrees; "": parallactic
	Percentile  float64 // of the brightness that the time is booked for; 0: 0.5
	Level       float64 // of the ends of the brightness; 0: 0.8
}

// Source is what shines.
type Source struct {
	Name      string
	Band      targets.Band // that Light is in; Ha, Hb, O3: the flux of a line as a magnitude
	Light     Brightness
	Measured  bool                     // Light was measured at the telescope
	Nebula    *Nebula                  // nil: a star
	Companion *Companion               // nil: none
	Colours   map[targets.Band]float64 // magnitudes of the catalogue, for the colour alone
}

// Nebula is the shape of an extended source.
type Nebula struct {
	DiamArcsec, Diam2Arcsec float64 // full axes; the minor 0: as the major
	CHb                     float64 // c(Hβ), dex; 0: none
	Surface                 bool    // Light is magnitudes per square arcsec, of the continuum
}

// Companion is a star so close that its light counts.
type Companion struct {
	Mag       astro.Mag // in the band of the source
	SepArcsec float64
}

// Setting is an exposure to be worked out: one target, mode and moment.
type Setting struct {
	Instrument    *instrument.Instrument
	Mode          *instrument.Mode
	Source        Source
	Goal          Goal
	Sky           func(skyglow.Band) (skyglow.Brightness, error) // in the target's direction
	Extinction    *skyglow.Extinction
	ExtinctionMag targets.Measure // measured tonight in this mode; takes precedence
	Airmass       astro.Airmass
	SeeingArcsec  float64 // at the zenith, 500 nm
	Monitor       bool    // the seeing is a monitor's
	HeightM       float64 // of the site
	Turbulence    float64 // of scintillation; 0: the median of sites
	Floor         targets.Measure
	Pointing      *Pointing // nil: the slit stands at the parallactic angle
	Vapour        photon.Vapour
	Corrector     bool       // of atmospheric dispersion
	Correction    Correction // of tonight's throughput, taken over by the observer
	MaxFrameS     float64    // longest frame; 0: 1200
}

// Answer is an exposure and what it gives.
type Answer struct {
	Mode    string
	Band    targets.Band // "" for a spectrum
	AtNm    float64      // of a spectrum; else of the band
	BookedS float64      // of open shutter, at the percentile of the brightness
	Frames  int
	EachS   float64
	ClockS  float64 // with the time lost after each frame
	MedianS targets.Measure
	UpToS   targets.Measure // at the faint end
	// PReached is the probability that the wanted S/N is reached in the time
	// booked; not Known where none is wanted.
	PReached    targets.Measure
	SaturatesAt targets.Measure // magnitude at which a frame of EachS saturates
	ReachesMag  targets.Measure // faintest magnitude for the S/N in the time booked
	LimitedBy   photon.Limit
	SNR         float64
	Per         string
	SlitArcsec  float64
	SlitPA      targets.Measure // degrees, of the slit, 0 to 180
	Standard    string          // filled in by who chose one: see [Match]
	Mag         astro.Mag       // that was booked for
	Bright      astro.Mag       // the ends of its brightness
	Faint       astro.Mag
	Sky         skyglow.Brightness
	// MoonTimes and TwilightTimes are how many times the dark sky's time the
	// exposure takes.
	MoonTimes, TwilightTimes targets.Measure
	SkyS                     float64 // of sky apart, where the object fills the slit; 0: none
	Advice                   *Advice // for what is too bright
	Words                    []string
	Err                      error // why there is none; a [*Reason]

	work *work
}

// Solve works out an exposure.
//
// Given:
//   - s: everything that it depends on; nothing else is read.
//
// Returns:
//   - the answer; Err says why where there is none, and the numbers are then 0
//     or not Known, save those that can be given.
//
// Notes:
//  1. The time booked is that of the percentile of the brightness, 0.5 where
//     none is asked; frames are kept short enough for the bright end of its
//     interval, or where even the shortest is too long for that, for the
//     percentile itself.
//  2. A time given in the goal is kept, and the S/N that it gives is the answer.
//  3. Scintillation and the floor of the calibration enter images of stars; of
//     extended sources the floor alone; of spectra neither, as both are common
//     to neighbouring wavelengths.
//
// Checked: TestMiraWhole, TestNebulaWhole, TestDwarfWhole, TestWorkedExamples,
// TestMonotone, FuzzSolve, BenchmarkSkyAndExposure.
func Solve(s Setting) Answer {
	w := &work{s: s}
	a := Answer{work: w, Per: s.Goal.Per}
	if s.Mode != nil {
		a.Mode = s.Mode.Name
	}
	if err := w.prepare(); err != nil {
		a.Err = err
		return a
	}
	a.Band, a.AtNm, a.Sky = w.band, w.at.Nm(), w.sky
	if w.slit {
		a.Band, a.SlitArcsec, a.SlitPA = "", w.slitArcsec, w.pa
	}
	a.Mag, a.Bright, a.Faint, a.Per = w.booked, w.bright, w.faint, w.perName()
	a.Words = append(a.Words, w.words...)
	w.answer(&a)
	return a
}

// Cost returns the time booked alone, for the many moments of a night; it takes
// a third of [Solve].
//
// Returns:
//   - seconds of open shutter and by the clock; a [*Reason] where there is no
//     exposure.
//
// Checked: TestCost: the same as that of [Solve].
func Cost(s Setting) (bookedS, clockS float64, err error) {
	w := &work{s: s}
	if err := w.prepare(); err != nil {
		return math.NaN(), math.NaN(), err
	}
	got, _, err := w.solveAt(w.booked, w.ask)
	if err != nil {
		return math.NaN(), math.NaN(), w.reason(err, &Answer{})
	}
	return got.TotalS(), got.ClockS(w.det), nil
}

// answer fills in the exposure.
func (w *work) answer(a *Answer) {
	got, unguarded, err := w.solveAt(w.booked, w.ask)
	if err != nil {
		a.Err = w.reason(err, a)
		a.Advice = w.advice()
		if a.Advice != nil {
			a.Words = append(a.Words, a.Advice.Words...)
		}
		return
	}
	w.got = got
	a.BookedS, a.Frames, a.EachS, a.ClockS = got.TotalS(), got.Frames, got.EachS, got.ClockS(w.det)
	a.SNR, a.LimitedBy = got.SNR, got.Limit
	own := w.ratesAt(w.booked)
	if d, ok := photon.Saturates(own, w.det, got.EachS); ok {
		a.SaturatesAt = targets.Known(w.booked.Mags() + d)
	}
	if got.Saturated && !(got.EachS > photon.LongestS(own, w.det)*(1+1e-9)) {
		unguarded = true // the median does not saturate, the bright end does
		a.LimitedBy = got.Budget.Limit()
	} else if got.Saturated {
		a.Advice = w.advice()
	}
	w.odds(a, own)
	w.times(a)
	w.tell(a, unguarded)
}

// odds works out the probability of reaching the S/N in the time booked.
func (w *work) odds(a *Answer, own photon.Rates) {
	q := w.s.Goal.SNR
	if !(q > 0) {
		return
	}
	e := w.got.Exposure
	switch w.ask.Per {
	case photon.PerFrame:
		e.Frames = 1
	case photon.PerPixel:
		own.Element = 1
	}
	d, err := photon.Fainter(own, w.det, e, q)
	if err != nil {
		a.PReached = targets.Known(0)
		return
	}
	if math.Abs(d) < 1e-9 {
		d = 0
	}
	a.ReachesMag = targets.Known(w.booked.Mags() + d)
	p := w.s.Source.Light.CDF(w.booked.Fainter(d))
	if d >= 0 && w.bright == w.faint {
		p = 1
	}
	if p >= 0 && p <= 1 {
		a.PReached = targets.Known(p)
	}
}

// times works out what the exposure would take at the median, at the faint end
// and under a dark sky.
func (w *work) times(a *Answer) {
	if !(w.s.Goal.SNR > 0) {
		w.darkTimes(a, w.ask)
		return
	}
	free := w.ask
	free.TotalS = 0
	if w.ask.Per == photon.PerFrame {
		free.Frames = 1
	}
	time := func(m astro.Mag) targets.Measure {
		got, _, err := w.solveAt(m, free)
		if err != nil {
			return targets.Measure{}
		}
		if w.ask.Per == photon.PerFrame {
			return targets.Known(got.EachS * float64(w.got.Frames))
		}
		return targets.Known(got.TotalS())
	}
	a.MedianS = targets.Known(a.BookedS)
	if w.median != w.booked || w.ask.TotalS > 0 {
		a.MedianS = time(w.median)
	}
	a.UpToS = a.MedianS
	if w.faint != w.median {
		a.UpToS = time(w.faint)
	}
	w.darkTimes(a, free)
}

// darkTimes compares with the same without Moon, and without twilight.
func (w *work) darkTimes(a *Answer, ask photon.Ask) {
	for _, c := range []struct {
		part skyglow.Part
		into *targets.Measure
	}{{skyglow.PartMoon, &a.MoonTimes}, {skyglow.PartTwilight, &a.TwilightTimes}} {
		if w.sky.Share(c.part) < 0.01 {
			continue
		}
		left, ok := w.sky.Without(c.part)
		if !ok {
			continue
		}
		r := w.ratesAt(w.booked)
		r.SkyES -= w.skyES * (1 - dim(left.MagArcsec2()-w.sky.Total.MagArcsec2()))
		if r.SkyES < 0 {
			continue
		}
		r.PeakES = math.Max(r.PeakES, w.guard)
		dark, _, err := w.solve(r, ask)
		now, _, err2 := w.solveAt(w.booked, ask)
		if err != nil || err2 != nil {
			continue
		}
		if ask.SNR > 0 && ask.TotalS == 0 {
			*c.into = targets.Known(now.TotalS() / dark.TotalS())
		} else {
			*c.into = targets.Known(dark.SNR * dark.SNR / (now.SNR * now.SNR))
		}
	}
}
