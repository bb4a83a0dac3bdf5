package photon

import "math"

// Fainter returns how much fainter the source may be for an exposure to reach a
// wanted signal to noise: the depth.
//
//	n² t² [1 - Q² (σ1²/t + ε²)] - Q² n t/W - Q² q [s t + d t + K N²]/W = 0, for n
//
// Given:
//   - snr: Q, above 0; of the element, as [Noise] has it.
//
// Returns:
//   - magnitudes fainter than the source of the rates; below 0 where it does
//     not reach Q. [ErrFloor] where scintillation and floor alone forbid it.
//
// Source: [cite.MerlineHowell1995], solved for the source.
//
// Checked: TestDepth: [Noise] of the fainter source gives Q.
func Fainter(r Rates, d Detector, e Exposure, snr float64) (float64, error) {
	if _, err := Noise(r, d, e); err != nil {
		return math.NaN(), err
	}
	if err := first(positive("the wanted S/N", snr), within("the wanted S/N", snr, 0, 1e9)); err != nil {
		return math.NaN(), err
	}
	t, q2, w := e.TotalS(), snr*snr, r.element()
	a := 1 - q2*(r.Scint1*r.Scint1/r.scintTime(t)+r.Floor*r.Floor)
	if !(a > 0) {
		return math.NaN(), ErrFloor
	}
	back := r.crowd() * (t*(r.SkyES+d.DarkES) + float64(e.Frames)*d.read2())
	counts := root(a, q2/w, q2*back/w)
	return -2.5 * math.Log10(counts/(r.SourceES*t)), nil
}

// Saturates returns how much fainter than the source a star saturates in a
// frame: its brightest pixel reaches 0.8 of the limit.
//
//	n f = 0.8 L/t - s - d
//
// Given:
//   - eachS: t, the frame.
//
// Returns:
//   - magnitudes fainter than the source, below 0 for a brighter star: the
//     saturation magnitude is the source's plus that.
//   - false, with not a number, where no limit is given, and where the sky alone
//     fills the frame, so that every star saturates.
//
// Checked: TestSaturates.
func Saturates(r Rates, d Detector, eachS float64) (float64, bool) {
	if r.valid() != nil || d.valid() != nil || !(eachS > 0) || !(r.PeakES > 0) || math.IsInf(d.LimitE(), 0) {
		return math.NaN(), false
	}
	room := fillShare*d.LimitE()/eachS - r.SkyES - d.DarkES
	if !(room > 0) {
		return math.NaN(), false
	}
	return -2.5 * math.Log10(room/r.PeakES), true
}

// Defocus returns the diameter of a defocused image in which a star does not
// saturate.
//
//	φ = 2 p √(n t / (0.8 L π))                           arcsec
//
// Given:
//   - totalES: the star's electrons per second, all of them.
//   - eachS: the frame, s.
//   - pixelArcsec: p.
//
// Returns:
//   - the diameter, and the pixels to sum, 1.5 π φ²/(4 p²). Keep the diameter
//     below 0.3 of the distance to the next star (common practice, no source).
//
// Source: geometry, a disc of even light.
//
// Checked: TestExamples.
func Defocus(d Detector, totalES, eachS, pixelArcsec float64) (arcsec, pixels float64, err error) {
	if err := first(d.valid(), positive("the star in e/s", totalES), positive("the frame in s", eachS), positive("the pixel in arcsec", pixelArcsec),
		positive("the detector's limit in e", d.LimitE())); err != nil {
		return math.NaN(), math.NaN(), err
	}
	arcsec = 2 * pixelArcsec * math.Sqrt(totalES*eachS/(fillShare*d.LimitE()*math.Pi))
	return arcsec, 1.5 * math.Pi * arcsec * arcsec / (4 * pixelArcsec * pixelArcsec), nil
}

// NeutralFilter returns how much a grey filter must take for a frame.
//
//	factor = t / t_sat,  density = log10(factor)
//
// Given:
//   - wantedS: the frame wanted; longestS: [LongestS].
//
// Returns:
//   - the factor and the filter's density; 1 and 0 where none is needed.
//
// Checked: TestExamples.
func NeutralFilter(wantedS, longestS float64) (factor, density float64) {
	if !(wantedS > longestS) || !(longestS > 0) {
		return 1, 0
	}
	return wantedS / longestS, math.Log10(wantedS / longestS)
}

// Shutters, seconds: the error of a shutter is kept below 1 per cent of the
// frame; iris shutters light the field evenly from about 1 s on. Bright stars
// want 10 frames against scintillation. Common practice, no source.
const (
	shutterShare = 100
	IrisEvenS    = 1.0
	BrightFrames = 10
)

// ShutterS returns the shortest frame for a shutter, 100 times its error and
// never below its shortest.
func ShutterS(shortestS, errorS float64) float64 { return math.Max(shortestS, shutterShare*errorS) }

// Cosmic rays on a thin detector at 2 to 4 km, per cm² and minute, and pixels
// that each spoils; thick ones have more. Common practice, no source.
const (
	cosmicPerCm2Min = 2
	cosmicPixels    = 7
)

// CosmicShare returns the share of pixels that cosmic rays hit in a frame; keep
// it below 0.005 (common practice, no source).
//
// Given:
//   - eachS: the frame; pixelMicron: a pixel's side, micrometres.
func CosmicShare(eachS, pixelMicron float64) float64 {
	side := pixelMicron * 1e-4
	return cosmicPerCm2Min * eachS / 60 * cosmicPixels * side * side
}
