package photon

import (
	"errors"
	"math"
)

// Detector is what counts the electrons.
type Detector struct {
	ReadNoiseE   float64 // per pixel and frame
	DarkES       float64 // per pixel and second
	GainEADU     float64 // electrons per unit of the converter; 0: no noise and no limit from it
	LinearE      float64 // electrons up to which a pixel is linear; 0: not given
	FullWellE    float64 // electrons a pixel holds; 0: not given
	BiasADU      float64
	ADCMaxADU    float64 // largest number that the converter gives; 0: not given
	DeadS        float64 // lost after each frame
	ShutterMinS  float64 // shortest exposure
	ShutterStepS float64 // exposures are multiples of it; 0: any
	MaxFrameS    float64 // longest frame; 0: 1200 (common practice, no source)
}

// defaultMaxFrameS is the longest frame, for cosmic rays and guiding. Common
// practice, no source.
const defaultMaxFrameS = 1200

// valid refuses a detector that cannot be.
func (d Detector) valid() error {
	const most = 1e12
	return first(within("the read noise in e", d.ReadNoiseE, 0, most), within("the dark current in e/s", d.DarkES, 0, most),
		within("the gain in e/ADU", d.GainEADU, 0, most), within("the linear limit in e", d.LinearE, 0, most),
		within("the full well in e", d.FullWellE, 0, most), within("the bias in ADU", d.BiasADU, 0, most),
		within("the converter's largest number", d.ADCMaxADU, 0, most), within("the dead time in s", d.DeadS, 0, 1e6),
		within("the shortest exposure in s", d.ShutterMinS, 0, 1e5), within("the shutter's step in s", d.ShutterStepS, 0, 1e5),
		within("the longest frame in s", d.MaxFrameS, 0, 1e6))
}

// LimitE returns how many electrons of signal a pixel may hold.
//
//	L = min(linear limit, full well, (converter's largest - bias) G)
//
// Returns:
//   - +Inf where nothing of it is given.
func (d Detector) LimitE() float64 {
	l := math.Inf(1)
	for _, v := range []float64{d.LinearE, d.FullWellE, (d.ADCMaxADU - d.BiasADU) * d.GainEADU} {
		if v > 0 {
			l = math.Min(l, v)
		}
	}
	return l
}

// digitisation is the scatter of a number that is rounded, 1/√12 as printed in
// [cite.MerlineHowell1995].
const digitisation = 0.289

// read2 is the variance of one pixel's reading, e².
func (d Detector) read2() float64 {
	g := d.GainEADU * digitisation
	return d.ReadNoiseE*d.ReadNoiseE + g*g
}

// maxFrame is the longest frame that is taken.
func (d Detector) maxFrame() float64 {
	if d.MaxFrameS > 0 {
		return d.MaxFrameS
	}
	return defaultMaxFrameS
}

// Rates is what falls on the detector, electrons per second. The makers
// [Point.Rates], [Extended.Rates], [LineImage.Rates], [SlitPoint.Rates] and
// [SlitLine.Rates] fill it in.
type Rates struct {
	SourceES   float64 // in the aperture, or in one pixel along the dispersion
	SkyES      float64 // on one pixel; the light of neighbours may be added
	Pixels     float64 // summed
	BackPixels float64 // that the background was measured on; 0: it is known exactly
	PeakES     float64 // of the source on its brightest pixel; neighbours may be added
	Element    float64 // pixels of a resolution element of a spectrum; 0: 1
	Scint1     float64 // scintillation in 1 s, fraction of the light
	ScintCapS  float64 // below this time it grows no more; see [Scintillation]
	Floor      float64 // of flat field and calibration, fraction of the light
}

// Floors of the calibration. Common practice, no source.
const (
	FloorImaging = 0.002
	FloorSeries  = 0.0003
)

// backPixels is how many times more pixels the background is measured on than
// the source, where nothing else is said. Common practice, no source.
const backPixels = 10

// ErrNoSource says that there is nothing to measure.
var ErrNoSource = errors.New("the source gives no electrons")

// valid refuses rates that cannot be; a source of none is one.
func (r Rates) valid() error {
	const most = 1e30
	return first(within("the source in e/s", r.SourceES, 0, most), within("the sky in e/s", r.SkyES, 0, most),
		within("pixels", r.Pixels, 1e-12, most), within("pixels of background", r.BackPixels, 0, most),
		within("the brightest pixel in e/s", r.PeakES, 0, most), within("pixels of an element", r.Element, 0, 1e9),
		within("scintillation", r.Scint1, 0, 1e6), within("its shortest time in s", r.ScintCapS, 0, 1e6), within("the floor", r.Floor, 0, 1e3))
}

// crowd is q = n (1 + n/nB), the pixels that add their noise.
func (r Rates) crowd() float64 {
	if r.BackPixels > 0 {
		return r.Pixels * (1 + r.Pixels/r.BackPixels)
	}
	return r.Pixels
}

// element is the number of pixels of an element, at least 1.
func (r Rates) element() float64 { return math.Max(1, r.Element) }

// scintTime is the time that scintillation is divided by.
func (r Rates) scintTime(totalS float64) float64 { return math.Max(totalS, r.ScintCapS) }

// Exposure is a set of equal frames.
type Exposure struct {
	Frames int
	EachS  float64
}

// TotalS returns the seconds of open shutter.
func (e Exposure) TotalS() float64 { return float64(e.Frames) * e.EachS }

// ClockS returns the seconds by the clock, dead time after each frame included.
func (e Exposure) ClockS(d Detector) float64 { return float64(e.Frames) * (e.EachS + d.DeadS) }

// Budget is where the noise comes from: parts of 1/(S/N)², which add up.
type Budget struct{ Photons, Sky, Dark, ReadNoise, Scintillation, Floor float64 }

// SNR returns the signal to noise that the parts leave; +Inf without noise.
func (b Budget) SNR() float64 {
	return 1 / math.Sqrt(b.Photons+b.Sky+b.Dark+b.ReadNoise+b.Scintillation+b.Floor)
}

// SigmaMag returns the error of the magnitude, 1.0857/(S/N).
func (b Budget) SigmaMag() float64 { return 2.5 / math.Ln10 / b.SNR() }

// Limit is what keeps a measurement from being better.
type Limit string

// The limits, in the words of the JSON output.
const (
	LimitPhotons       Limit = "photons"
	LimitSky           Limit = "sky"
	LimitReadNoise     Limit = "read_noise"
	LimitDark          Limit = "dark"
	LimitScintillation Limit = "scintillation"
	LimitSaturation    Limit = "saturation"
)

// Limit returns the largest part that more light would make smaller; the floor
// of the calibration is none.
func (b Budget) Limit() Limit {
	best, most := LimitPhotons, b.Photons
	for _, c := range []struct {
		l Limit
		v float64
	}{{LimitSky, b.Sky}, {LimitReadNoise, b.ReadNoise}, {LimitDark, b.Dark}, {LimitScintillation, b.Scintillation}} {
		if c.v > most {
			best, most = c.l, c.v
		}
	}
	return best
}

// Noise returns the noise of an exposure, part by part.
//
//	1/(S/N)² = [n t + q (s t + d t + K (N_R² + (0.289 G)²))] / [W (n t)²] + σ1²/t + ε²
//	q = n_p (1 + n_p/n_B)
//
// with n the source, s the sky and d the dark current of a pixel, e/s; n_p
// pixels summed, n_B of background; N_R read noise, G gain; K frames, t their
// total time; W pixels of an element, whose photons add up while scintillation
// is common to them.
//
// Given:
//   - e: at least one frame, of more than 0 s.
//
// Returns:
//   - the parts; an error for what is not in its range.
//
// Notes:
//  1. At a fixed number of frames more time never lowers S/N; across a change
//     of their number it can.
//  2. Scintillation is that of the total time, so frames shorter than its
//     shortest time are not taken to be independent.
//
// Source: [cite.MerlineHowell1995], the form from memory, as commonly printed;
// checked against the example of [cite.Howell2006].
//
// Checked: TestHowell, S/N 342; TestExamples.
func Noise(r Rates, d Detector, e Exposure) (Budget, error) {
	if err := first(r.valid(), d.valid(), positive("the exposure in s", e.EachS), within("frames", float64(e.Frames), 1, mostFrames)); err != nil {
		return Budget{}, err
	}
	if !(r.SourceES > 0) {
		return Budget{}, ErrNoSource
	}
	return noise(r, d, e), nil
}

func noise(r Rates, d Detector, e Exposure) Budget {
	t := e.TotalS()
	signal := r.SourceES * t
	per := 1 / (r.element() * signal * signal)
	q := r.crowd()
	return Budget{
		Photons:       signal * per,
		Sky:           q * r.SkyES * t * per,
		Dark:          q * d.DarkES * t * per,
		ReadNoise:     q * float64(e.Frames) * d.read2() * per,
		Scintillation: r.Scint1 * r.Scint1 / r.scintTime(t),
		Floor:         r.Floor * r.Floor,
	}
}
