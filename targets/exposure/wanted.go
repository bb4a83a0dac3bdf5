package exposure

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro"
	"evenfall/astro/numeric"
	"evenfall/astro/photon"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// perNames are the words of snr_per.
var perNames = map[string]photon.Per{"total": photon.PerTotal, "frame": photon.PerFrame, "pixel": photon.PerPixel, "element": photon.PerElement}

// perName is the word that holds.
func (w *work) perName() string {
	if w.ask.Per == photon.PerTotal && w.slit && !w.line {
		return "element"
	}
	for name, p := range perNames {
		if p == w.ask.Per {
			return name
		}
	}
	return w.s.Goal.Per
}

// wanted turns the goal into what is asked of the formulas.
func (w *work) wanted() error {
	g := &w.s.Goal
	w.series = g.DurationS > 0 || g.Per == "frame"
	per, ok := perNames[g.Per]
	switch {
	case g.Per == "" && w.series:
		per = photon.PerFrame
	case g.Per == "" && w.slit:
		per = photon.PerElement
	case g.Per == "":
	case !ok:
		return fail(targets.CodeInstrument, "snr_per", "write pixel, element, frame or total", "snr_per %q means nothing", g.Per)
	}
	if per == photon.PerElement && !w.slit {
		per = photon.PerTotal
	}
	if per == photon.PerPixel && !w.slit {
		return fail(targets.CodeInstrument, "snr_per", "write total or frame", "S/N per pixel is meant of spectra")
	}
	if w.line && (per == photon.PerPixel || per == photon.PerElement) {
		per = photon.PerTotal // the whole line is summed
	}
	for _, v := range []struct {
		key string
		v   float64
	}{{"snr", g.SNR}, {"exposure_s", g.ExposureS}, {"duration_min", g.DurationS}} {
		if !(v.v >= 0) || math.IsInf(v.v, 0) {
			return fail(targets.CodeInstrument, v.key, "write a number above 0", "%s is %v", v.key, v.v)
		}
	}
	w.ask = photon.Ask{SNR: g.SNR, Per: per, TotalS: g.ExposureS, Frames: max(0, g.Frames)}
	if err := w.noiseOfLight(); err != nil {
		return err
	}
	if per == photon.PerFrame && g.ExposureS > 0 {
		w.ask.TotalS = g.ExposureS * float64(max(1, g.Frames))
	}
	if g.DurationS > 0 {
		return w.cadence()
	}
	return nil
}

// noiseOfLight adds scintillation and the floor of the calibration.
func (w *work) noiseOfLight() error {
	if w.slit {
		if w.s.Floor.Known {
			w.rates.Floor = w.s.Floor.Value
		}
		return nil
	}
	w.rates.Floor = photon.FloorImaging
	if w.point {
		sigma, short, err := photon.Scintillation(w.s.Instrument.ApertureM, w.s.Airmass, w.s.HeightM, w.s.Turbulence)
		if err != nil {
			return &Reason{Code: targets.CodeInstrument, What: err.Error(), of: err}
		}
		w.rates.Scint1, w.rates.ScintCapS = sigma, short
		if w.series {
			w.rates.Scint1, w.rates.Floor = photon.Differential(sigma, w.s.Goal.Comparisons), photon.FloorSeries
		}
	}
	if w.s.Floor.Known {
		w.rates.Floor = w.s.Floor.Value
	}
	return nil
}

// cadence chooses the frames of a continuous series where neither S/N nor
// exposure is wanted: as long as the cycle may be, at least four times the dead
// time, so that the shutter is open for 80 per cent, and not saturated.
func (w *work) cadence() error {
	g := &w.s.Goal
	cycle := g.CycleS
	if !(cycle > 0) {
		cycle = photon.FlickeringS
	}
	each := g.ExposureS
	if !(each > 0) && !(g.SNR > 0) {
		each = math.Max(cycle-w.det.DeadS, w.det.DeadS*photon.LeastDuty/(1-photon.LeastDuty))
		r := w.rates
		r.PeakES = math.Max(w.guard, r.PeakES+w.otherPeak)
		each = math.Min(each, photon.LongestS(r, w.det))
		if w.det.MaxFrameS > 0 {
			each = math.Min(each, w.det.MaxFrameS)
		}
		each = math.Max(each, math.Max(w.det.ShutterMinS, 1e-3))
	}
	if !(each > 0) { // by S/N of a frame
		got, _, err := w.solve(w.ratesAt(w.booked), photon.Ask{SNR: g.SNR, Per: photon.PerFrame, Frames: 1})
		if err != nil {
			return w.reason(err, &Answer{})
		}
		each = got.EachS
	}
	frames := math.Floor(g.DurationS / (each + w.det.DeadS))
	const most = 10_000_000
	w.ask.Frames = int(math.Max(1, math.Min(most, frames)))
	w.ask.TotalS, w.ask.Per = each*float64(w.ask.Frames), photon.PerFrame
	if step := each + w.det.DeadS; step > cycle*(1+1e-9) {
		w.words = append(w.words, fmt.Sprintf("one frame every %s: slower than the %s wanted", seconds(step), seconds(cycle)))
	}
	if duty := each / (each + w.det.DeadS); duty < photon.LeastDuty-1e-9 {
		w.words = append(w.words, fmt.Sprintf("the shutter is open for %.0f per cent of the time only", 100*duty))
	}
	return nil
}

// ratesAt returns what falls on the detector at a magnitude.
func (w *work) ratesAt(m astro.Mag) photon.Rates {
	r := w.rates
	if d := m.Minus(w.booked); d != 0 {
		f := dim(d)
		r.SourceES *= f
		r.PeakES *= f
	}
	r.PeakES += w.otherPeak
	return r
}

// solveAt solves at a magnitude, guarded by the bright end where that can be
// done.
func (w *work) solveAt(m astro.Mag, ask photon.Ask) (got photon.Answer, unguarded bool, err error) {
	return w.solve(w.ratesAt(m), ask)
}

func (w *work) solve(r photon.Rates, ask photon.Ask) (got photon.Answer, unguarded bool, err error) {
	own := r.PeakES
	r.PeakES = math.Max(own, w.guard)
	got, err = photon.Solve(r, w.det, ask)
	if errors.Is(err, photon.ErrSaturates) && w.guard > own {
		r.PeakES = own
		got, err = photon.Solve(r, w.det, ask)
		return got, true, err
	}
	return got, false, err
}

// ringNodes integrates a companion's light over the aperture.
var ringNodes = numeric.NewGauss(12)

// neighbour adds the light of a close companion: to the sky of the pixels
// summed, and to the brightest pixel.
//
//	light in a circle of radius r, d away from the star: the rings about the
//	star, each by the share of it inside
func (w *work) neighbour() {
	c := w.s.Source.Companion
	if c == nil || !(c.SepArcsec > 0) || math.IsNaN(c.Mag.Mags()) || !w.point || w.line {
		return
	}
	own := w.rates.SourceES / w.pointShare()
	total := own * dim(c.Mag.Minus(w.booked))
	r, d := photon.DefaultAperture*w.image.FWHMArcsec, c.SepArcsec
	if w.slit {
		r = math.Min(w.slitArcsec/2, w.image.FWHMArcsec)
	}
	in := w.inCircle(r, d)
	w.rates.SkyES += total * in / w.rates.Pixels
	near := w.pixel / 2 * 1.1283791671 // the circle as large as a pixel
	w.otherPeak = total * w.inCircle(near, d)
	if d < 2*w.image.FWHMArcsec { // one blob: the brighter peak counts
		w.otherPeak = math.Max(w.otherPeak, total*w.image.Peak(w.pixel)-w.rates.PeakES)
	}
	share := total * in / (w.rates.SourceES + total*in)
	if share > 0.01 {
		w.words = append(w.words, fmt.Sprintf("in the glare of a star of %.1f, %.1f arcsec away: %.0f per cent of the light is its", c.Mag.Mags(), d, 100*share))
	}
}

// pointShare is the share of a star's light that is summed.
func (w *work) pointShare() float64 {
	if w.slit {
		return w.image.Slit(w.slitArcsec, w.offArcsec) * w.image.Slit(2*w.image.FWHMArcsec, 0)
	}
	return w.image.Within(photon.DefaultAperture * w.image.FWHMArcsec)
}

// inCircle returns the share of a star's light in a circle beside it.
//
// Given:
//   - radius: of the circle; away: of its middle from the star, above 0; arcsec.
//
// Source: geometry.
//
// Checked: TestCompanion, against a sum over a grid.
func (w *work) inCircle(radius, away float64) float64 {
	inside := 0.0
	lo := math.Abs(away - radius)
	if away < radius {
		inside = w.image.Within(radius - away)
	}
	// by the angle at which a ring cuts the circle, 0 at the far end
	f := func(u float64) float64 {
		rho := lo + (away+radius-lo)*(1-math.Cos(math.Pi*u))/2
		cos := (rho*rho + away*away - radius*radius) / (2 * rho * away)
		angle := math.Acos(math.Max(-1, math.Min(1, cos))) / math.Pi
		h := 1e-4 * radius
		dens := (w.image.Within(rho+h) - w.image.Within(math.Max(0, rho-h))) / (rho + h - math.Max(0, rho-h))
		return dens * angle * (away + radius - lo) * math.Pi / 2 * math.Sin(math.Pi*u)
	}
	v, err := ringNodes.Over(f, 0, 1)
	if err != nil || !(v >= 0) {
		return inside
	}
	return math.Min(1, inside+v)
}

// GoalOf reads what a request wants.
//
// Given:
//   - r: the request; kind of the instrument it is for.
//
// Returns:
//   - an error for a binning or a position angle that cannot be read.
//
// Checked: TestGoalOf.
func GoalOf(r *targets.Request, kind string) (Goal, error) {
	val := func(m targets.Measure) float64 {
		if !m.Known {
			return 0
		}
		return m.Value
	}
	g := Goal{SNR: val(r.SNR), Per: r.SNRPer, ExposureS: val(r.ExposureS), Frames: r.Frames, DurationS: 60 * val(r.DurationMin),
		AreaArcsec2: val(r.AreaArcsec2), AimArcsec: [2]float64{val(r.AimEArcsec), val(r.AimNArcsec)}, Line: r.Line, AtNm: val(r.AtNm),
		SlitArcsec: val(r.SlitArcsec), PA: r.PositionAngle}
	if kind != instrument.Slit && g.Per == "element" {
		g.Per = "total"
	}
	var err error
	if g.Binning, err = ParseBinning(r.Binning); err != nil {
		return g, err
	}
	if _, _, err = parsePA(r.PositionAngle); err != nil {
		return g, err
	}
	return g, nil
}

// CycleOf returns how long one frame to the next may take in a series of a
// target: a tenth of its pulsation; a fifth of the 20 s in which a white dwarf
// is eclipsed; 10 s for flickering; at most 10 minutes. Common practice, no
// source.
//
// Checked: TestGoalOf.
func CycleOf(t *targets.Target) float64 {
	const ingressS, longest = 20, 600
	switch v := &t.Var; {
	case v.EclipseMin.Known:
		return ingressS * photon.CyclePerIngress
	case v.PulsationS.Known && v.PulsationS.Value > 0:
		return math.Min(longest, v.PulsationS.Value*photon.CyclePerPulsation)
	}
	return photon.FlickeringS
}

// ParseBinning reads a binning: "", "2", "2x2", "1x2".
//
// Checked: TestGoalOf.
func ParseBinning(text string) ([2]int, error) {
	text = strings.ToLower(strings.TrimSpace(text))
	if text == "" {
		return [2]int{1, 1}, nil
	}
	a, b, two := strings.Cut(text, "x")
	x, err := strconv.Atoi(strings.TrimSpace(a))
	y := x
	if two && err == nil {
		y, err = strconv.Atoi(strings.TrimSpace(b))
	}
	if err != nil || x < 1 || y < 1 || x > 64 || y > 64 {
		return [2]int{1, 1}, fail(targets.CodeInstrument, "binning", `write "2x2" or "1x2": along the dispersion, along the slit`, "binning %q cannot be read", text)
	}
	return [2]int{x, y}, nil
}
