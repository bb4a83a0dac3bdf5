package exposure

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/nebular"
	"evenfall/astro/photon"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// lineZero turns the flux of a line into a magnitude: m = -2.5 log F - 13.74,
// F in erg/s/cm2.
//
// Source: [cite.Jacoby1989], as the forecasts have it.
const lineZero = -13.74

// FluxOf returns the flux of a line whose magnitude a forecast gives.
//
//	F = 10^(-0.4 (m + 13.74))                            erg s^-1 cm^-2
//
// Source: [cite.Jacoby1989].
//
// Checked: TestNebulaWhole.
func FluxOf(m astro.Mag) float64 { return math.Pow(10, -0.4*(m.Mags()-lineZero)) }

// greyNm is how far a star of unknown colour is taken to be as bright in AB.
// Common practice, no source.
const greyNm = 150.0

// brightness takes the percentiles of the source's brightness.
func (w *work) brightness() error {
	src, g := &w.s.Source, &w.s.Goal
	if src.Light == nil {
		return fail(notKnown, "", "list a magnitude, or type the one measured at acquisition", "no brightness is known")
	}
	p, level := g.Percentile, g.Level
	if !(p > 0 && p < 1) {
		p = defaultPercentile
	}
	if !(level > 0 && level < 1) {
		level = defaultLevel
	}
	w.booked, w.median = src.Light.Quantile(p), src.Light.Quantile(0.5)
	if src.Band == "p" || src.Band == "pg" {
		src.Band = "B"
		w.words = append(w.words, "photographic magnitudes are taken for B")
		if w.band == "p" || w.band == "pg" {
			w.band = "B"
		}
	}
	w.bright, w.faint = src.Light.Quantile((1-level)/2), src.Light.Quantile((1+level)/2)
	if m := w.booked.Mags() + w.median.Mags() + w.bright.Mags() + w.faint.Mags(); math.IsNaN(m) || math.IsInf(m, 0) {
		return fail(notKnown, "", "list a magnitude, or type the one measured at acquisition", "no brightness is known in %s", bandWords(src.Band))
	}
	if _, line := instrument.Line(src.Band); line != w.line {
		if line {
			return fail(targets.CodeInstrument, "mode", "take a mode in that line, or a slit", "only its flux in %s is known, not its light in %s", src.Band, w.bandName())
		}
		return fail(targets.CodeInstrument, "mode", "take a broad band, or list the flux of the line", "no flux is known in %s", w.bandName())
	}
	if w.line {
		return w.otherLine()
	}
	return w.colours()
}

// otherLine carries the flux from one hydrogen line to the other.
//
//	log F(Hα)/F(Hβ) = log 2.86 - c f(Hα)
//
// Source: [cite.OsterbrockFerland2006], case B; [cite.CardelliEtAl1989] for f.
//
// Checked: TestOtherLine.
func (w *work) otherLine() error {
	src := &w.s.Source
	if src.Band == w.band {
		return nil
	}
	caseB, c := 2.86, 0.0
	if src.Nebula != nil && src.Nebula.CHb > 0 {
		c = src.Nebula.CHb
	}
	ratio := math.Log10(caseB) - c*nebular.Ha.F()
	switch {
	case src.Band == "Hb" && w.band == "Ha":
		w.colour = -2.5 * ratio
	case src.Band == "Ha" && w.band == "Hb":
		w.colour = 2.5 * ratio
	default:
		return fail(targets.CodeInstrument, "mode", "list the flux of that line", "the flux in %s is known, the mode is in %s", src.Band, w.band)
	}
	w.words = append(w.words, fmt.Sprintf("the flux in %s follows from %s by case B and c(Hb) %.2f, without [N II]", w.band, src.Band, c))
	return nil
}

func bandWords(b targets.Band) string {
	if b == "" {
		return "any band"
	}
	return string(b)
}

// bandName names what is measured, for a sentence.
func (w *work) bandName() string {
	if w.slit && !w.line {
		return fmt.Sprintf("%s", bandWords(w.s.Source.Band))
	}
	return string(w.band)
}

// colours works out what must be added to the source's magnitude where it is
// measured in another band, or at another wavelength.
func (w *work) colours() error {
	src := &w.s.Source
	if !w.slit && src.Band == w.s.Mode.Band {
		return nil
	}
	from, ok := photon.ZeroPointOf(string(src.Band))
	if !ok {
		return fail(targets.CodeInstrument, "mode", "ask for the brightness in a band with a zero point", "a magnitude in %s cannot be carried to %.0f nm", bandWords(src.Band), w.at.Nm())
	}
	shape, known := shapeAt(src.Colours, src.Band, w.at.Nm())
	if !w.slit {
		near := math.Abs(w.at.Nm()-from.At.Nm()) <= greyNm
		if !known && !near {
			return fail(notKnown, "mode", "list a magnitude in "+string(w.s.Mode.Band), "the brightness in %s is known, the mode is in %s", src.Band, w.s.Mode.Band)
		}
		to, _ := photon.ZeroPointOf(string(w.s.Mode.Band))
		w.colour = from.ABMinusVega + shape - to.ABMinusVega
		how := "the colour"
		if !known {
			how = "no colour: equal in AB"
		}
		w.words = append(w.words, fmt.Sprintf("brightness in %s from that in %s, %s", w.s.Mode.Band, src.Band, how))
		return nil
	}
	w.colour = from.ABMinusVega + shape
	if far := math.Abs(w.at.Nm() - from.At.Nm()); !known && far > 30 {
		w.words = append(w.words, fmt.Sprintf("no colour listed: %.0f nm is taken to be as bright as %s in AB", w.at.Nm(), src.Band))
	}
	return nil
}

// shapeAt returns how much fainter in AB a star is at a wavelength than in a
// band, by straight lines between the listed magnitudes.
//
// Returns:
//   - 0 and false where the band itself is not listed, or nothing lies on the
//     other side of the wavelength.
func shapeAt(listed map[targets.Band]float64, band targets.Band, nm float64) (float64, bool) {
	own, ok := listed[band]
	z, ok2 := photon.ZeroPointOf(string(band))
	if !ok || !ok2 {
		return 0, false
	}
	base := own + z.ABMinusVega
	loNm, hiNm, lo, hi := math.Inf(-1), math.Inf(1), 0.0, 0.0
	for _, b := range targets.Bands {
		m, ok := listed[b]
		z, ok2 := photon.ZeroPointOf(string(b))
		if !ok || !ok2 || math.IsNaN(m) {
			continue
		}
		at := z.At.Nm()
		if at <= nm && at > loNm {
			loNm, lo = at, m+z.ABMinusVega
		}
		if at >= nm && at < hiNm {
			hiNm, hi = at, m+z.ABMinusVega
		}
	}
	switch {
	case loNm == hiNm:
		return lo - base, true
	case math.IsInf(loNm, 0) || math.IsInf(hiNm, 0):
		return 0, false
	}
	u := (nm - loNm) / (hiNm - loNm)
	return lo + u*(hi-lo) - base, true
}

// flux works out what falls on the detector at the magnitude booked.
func (w *work) flux() error {
	n := w.s.Source.Nebula
	w.point = n == nil
	if n != nil && !n.Surface {
		w.point = !(n.DiamArcsec > 0) || photon.Small(n.DiamArcsec, w.image)
	}
	var err error
	switch {
	case w.point && w.slit:
		err = w.slitPoint()
	case w.point:
		err = w.imagePoint()
	default:
		err = w.extended(n)
	}
	if err != nil {
		return &Reason{Code: targets.CodeTooFaint, What: err.Error(), of: err}
	}
	w.skyES = w.rates.SkyES
	w.neighbour()
	w.guard = w.rates.PeakES*dim(w.bright.Minus(w.booked)) + w.otherPeak
	return nil
}

// imagePoint is a star, or a nebula as small as one, on a detector.
func (w *work) imagePoint() (err error) {
	if w.line {
		w.rates, err = photon.LineImage{Zero: w.zero, ZeroES: w.zeroES, Line: w.at, Through: w.through, PixelArcsec: w.pixel}.
			LinePoint(FluxOf(w.booked.Fainter(w.colour)), w.image, 0)
		return err
	}
	w.rates, err = photon.Point{ZeroES: w.zeroES, Mag: w.booked.Fainter(w.colour), Through: w.through, Image: w.image, PixelArcsec: w.pixel}.Rates()
	return err
}

// slitPoint is a star in a slit, or the line of a nebula as small as one.
func (w *work) slitPoint() (err error) {
	if !w.line {
		w.rates, err = photon.SlitPoint{Slit: w.slitSetup, AB: w.booked.Fainter(w.colour), Image: w.image, OffArcsec: w.offArcsec}.Rates()
		if err == nil {
			w.rates.PeakES *= w.brightestInRange()
		}
		return err
	}
	const heights = 2 // the height of the extraction in widths of the image
	h := heights * w.image.FWHMArcsec
	through, along := w.image.Slit(w.slitArcsec, w.offArcsec), w.image.Slit(h, 0)
	mean := FluxOf(w.booked.Fainter(w.colour)) * through * along / (w.slitArcsec * h)
	if w.rates, err = (photon.SlitLine{Slit: w.slitSetup, Surface: mean, Height: h}).Rates(); err == nil {
		w.rates.PeakES *= w.image.Slit(w.pixel, 0) / along * h / w.pixel
	}
	return err
}

// rangeSteps is at how many wavelengths a spectrum is looked at for its
// brightest.
const rangeSteps = 8

// brightestInRange returns how many times more light the brightest pixel of the
// spectrum has than the one at the wavelength wanted.
func (w *work) brightestInRange() float64 {
	m, src := w.s.Mode, &w.s.Source
	lo, hi := m.RangeNm[0], m.RangeNm[1]
	here, ok := throughputAt(m, w.at.Nm())
	if !(hi > lo) || !ok || !(here > 0) || len(m.ThroughputAt) == 0 {
		return 1
	}
	own, _ := shapeAt(src.Colours, src.Band, w.at.Nm())
	most := 1.0
	for k := 0; k <= rangeSteps; k++ {
		nm := lo + (hi-lo)*float64(k)/rangeSteps
		t, ok := throughputAt(m, nm)
		if !ok {
			continue
		}
		shape, known := shapeAt(src.Colours, src.Band, nm)
		if !known {
			shape = own
		}
		kNm := w.s.Extinction.At(astro.Nm(nm)) - w.through.Extinction
		most = math.Max(most, t/here*w.at.Nm()/nm*dim(shape-own+kNm*float64(w.s.Airmass)))
	}
	return most
}

// extended is a source of even brightness.
func (w *work) extended(n *Nebula) (err error) {
	minor := n.Diam2Arcsec
	if !(minor > 0) {
		minor = n.DiamArcsec
	}
	size := math.Inf(1)
	if n.DiamArcsec > 0 {
		size = math.Pi / 4 * n.DiamArcsec * minor
	}
	w.area = w.s.Goal.AreaArcsec2
	if !(w.area > 0) {
		w.area = defaultArea
	}
	if w.area > size {
		w.area = size
		w.words = append(w.words, fmt.Sprintf("the object covers only %.0f square arcsec: these are summed", size))
	}
	line := 0.0
	if w.line {
		line = FluxOf(w.booked.Fainter(w.colour)) / size
	}
	surface := astro.MagArcsec2(w.booked.Mags() + w.colour)
	if !w.line && !n.Surface {
		surface = astro.MagArcsec2(w.booked.Mags() + w.colour + 2.5*math.Log10(size))
	}
	height := w.area / math.Max(w.slitArcsec, 1e-9)
	if l := w.s.Instrument.SlitLengthArcsec; w.slit && l > 0 && height > l {
		height = l
		w.words = append(w.words, fmt.Sprintf("the slit is %.0f arcsec long: so much is summed", l))
	}
	switch {
	case w.slit && w.line:
		w.rates, err = photon.SlitLine{Slit: w.slitSetup, Surface: line, Height: height}.Rates()
	case w.slit:
		w.rates, err = photon.SlitSurface{Slit: w.slitSetup, Surface: surface, Height: height}.Rates()
	case w.line:
		w.rates, err = photon.LineImage{Zero: w.zero, ZeroES: w.zeroES, Line: w.at, Surface: line, AreaArcsec2: w.area, Through: w.through, PixelArcsec: w.pixel}.Rates()
	default:
		w.rates, err = photon.Extended{ZeroES: w.zeroES, Surface: surface, AreaArcsec2: w.area, Through: w.through, PixelArcsec: w.pixel}.Rates()
	}
	if a := w.s.Goal.AimArcsec; n.DiamArcsec > 0 && math.Hypot(a[0], a[1]) > n.DiamArcsec/2 {
		w.words = append(w.words, "the aim lies outside the listed size: the mean surface brightness does not hold there")
	}
	return err
}
