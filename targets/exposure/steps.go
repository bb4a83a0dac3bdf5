package exposure

import (
	"fmt"

	"evenfall/astro/cite"
	"evenfall/astro/photon"
	"evenfall/targets/instrument"
)

// Step is a figure with its working.
type Step struct{ What, Formula, Inputs, Result, Source string }

// Steps returns the working of an answer, in the order in which one figure
// leads to the next; none where there is no answer.
//
// Notes:
//  1. It is worked out when asked for, as it costs more than the answer.
//
// Checked: TestSteps.
func (a Answer) Steps() []Step {
	w := a.work
	if w == nil || a.Err != nil {
		return nil
	}
	i, m := w.s.Instrument, w.s.Mode
	t := &w.through
	steps := []Step{
		{"sky brightness", "airglow + zodiacal light + starlight + Moon + twilight + lamps, each through the air",
			fmt.Sprintf("%s, airmass %.3f", w.skyName(), float64(t.Airmass)), fmt.Sprintf("%.2f +- %.1f mag per square arcsec", t.Sky.MagArcsec2(), w.sky.Sigma),
			cite.BennEllison1998.String() + "; " + cite.LeinertEtAl1998.String() + "; " + cite.KrisciunasSchaefer1991.String() + "; " + cite.PatatEtAl2006.String()},
		{"extinction", "k: measured, else Rayleigh + ozone + aerosol", fmt.Sprintf("%.1f nm", w.at.Nm()),
			fmt.Sprintf("%.3f mag per airmass, %.3f mag in all", t.Extinction, t.Extinction*float64(t.Airmass)), cite.HayesLatham1975.String() + "; " + cite.BirdRiordan1984.String()},
		{"width of an image", "sqrt[(S X^0.6 (l/0.5)^-0.2)^2 + Q^2]",
			fmt.Sprintf("S %.2f arcsec at the zenith, X %.3f, l %.4f um, Q %.2f arcsec", w.s.SeeingArcsec, float64(t.Airmass), w.at.Micron(), i.ImageQualityArcsec),
			fmt.Sprintf("%.3f arcsec", w.image.FWHMArcsec), cite.Roddier1981.String() + ", from memory, not checked against a publication"},
		w.zeroStep(m),
		{"electrons per second", w.rateFormula(), fmt.Sprintf("%s %.2f, Z %.4g e/s", w.bandName(), w.booked.Mags()+w.colour, w.zeroES),
			fmt.Sprintf("%.4g e/s summed, sky %.4g e/s a pixel, %.1f pixels, %.4g e/s on the brightest", w.rates.SourceES, w.rates.SkyES, w.rates.Pixels, w.rates.PeakES+w.otherPeak),
			cite.MerlineHowell1995.String() + "; " + cite.Moffat1969.String()},
	}
	if w.rates.Scint1 > 0 {
		steps = append(steps, Step{"scintillation in 1 s", "sqrt[1e-5 C^2 D^(-4/3) X^3 exp(-2 H/8000)]",
			fmt.Sprintf("D %.2f m, H %.0f m", i.ApertureM, w.s.HeightM), fmt.Sprintf("%.3g of the light", w.rates.Scint1), cite.OsbornEtAl2015.String()})
	}
	b := w.got.Budget
	steps = append(steps,
		Step{"longest frame", "0.8 L / (n f + s + d)", fmt.Sprintf("L %.0f e, bright end %s %.2f", w.det.LimitE(), w.bandName(), w.bright.Mags()),
			seconds(w.longest()), "common practice, no source"},
		Step{"time", "t = [B + sqrt(B^2 + 4 A C)] / (2 A), in frames that neither saturate nor are too long",
			fmt.Sprintf("S/N %g per %s, %s %.2f, read noise %.2g e, dark %.2g e/s", w.s.Goal.SNR, a.Per, w.bandName(), w.booked.Mags(), w.det.ReadNoiseE, w.det.DarkES),
			fmt.Sprintf("%d x %s = %s", a.Frames, seconds(a.EachS), seconds(a.BookedS)), cite.MerlineHowell1995.String() + ", solved for time"},
		Step{"signal to noise", "1/(S/N)^2 = photons + sky + dark + read noise + scintillation + floor",
			fmt.Sprintf("%.3g + %.3g + %.3g + %.3g + %.3g + %.3g", b.Photons, b.Sky, b.Dark, b.ReadNoise, b.Scintillation, b.Floor),
			fmt.Sprintf("%.2f per %s, limited by %s", a.SNR, a.Per, a.LimitedBy), cite.MerlineHowell1995.String()})
	if a.PReached.Known && a.ReachesMag.Known {
		steps = append(steps, Step{"odds of reaching it", "probability of being brighter than the faintest magnitude that reaches S/N in the time booked",
			fmt.Sprintf("%s < %.2f", w.bandName(), a.ReachesMag.Value), fmt.Sprintf("%.3f", a.PReached.Value), "from the forecast's distribution"})
	}
	return steps
}

func (w *work) longest() float64 {
	r := w.ratesAt(w.booked)
	if w.guard > r.PeakES {
		r.PeakES = w.guard
	}
	return photon.LongestS(r, w.det)
}

func (w *work) skyName() string {
	if w.slit || w.line {
		return fmt.Sprintf("AB at %.1f nm", w.at.Nm())
	}
	return string(w.s.Mode.Band)
}

// zeroStep is how the zero point came about.
func (w *work) zeroStep(m *instrument.Mode) Step {
	s := Step{What: "zero point", Result: fmt.Sprintf("%.4g e/s at magnitude 0", w.zeroES), Source: "measured, run.toml"}
	if m.ZeroPointES.Known {
		s.Formula, s.Inputs = "as measured", "zero_point_e_s"
	} else {
		eta, _ := throughputAt(m, w.at.Nm())
		s.Formula = "N A eta, N photons of magnitude 0 above the air, A area, eta throughput"
		s.Inputs = fmt.Sprintf("N %.4g /s/cm2, D %.2f m, d %.2f m, eta %.3f", w.zero.Photons(), w.s.Instrument.ApertureM, w.s.Instrument.ObstructionM, eta)
		s.Source = cite.BessellEtAl1998.String() + "; " + cite.FukugitaEtAl1996.String() + "; " + cite.RielloEtAl2021.String()
	}
	if c := w.s.Correction.ZeroPointMag; c != 0 {
		s.Inputs += fmt.Sprintf(", tonight's correction %+.3f mag", c)
	}
	return s
}

func (w *work) rateFormula() string {
	switch {
	case w.point && w.slit:
		return "n = Z 10^(-0.4 (m + k X)) S(w) S(h), a pixel along the dispersion"
	case w.point:
		return "n = Z 10^(-0.4 (m + k X)) E(0.8 F)"
	case w.slit:
		return "n = F l/(hc) A eta 10^(-0.4 k X) w h"
	}
	return "n = F l/(hc) A eta 10^(-0.4 k X) over the area"
}
