package exposure

import (
	"fmt"
	"math"

	"evenfall/astro/photon"
)

// tell says in sentences what the numbers mean.
func (w *work) tell(a *Answer, unguarded bool) {
	say := func(format string, v ...any) { a.Words = append(a.Words, fmt.Sprintf(format, v...)) }
	band := w.bandName()
	if w.s.Source.Measured {
		say("for the %s %.2f measured at the telescope, not the forecast", band, w.booked.Mags())
	}
	switch {
	case a.PReached.Known && !a.UpToS.Known && w.s.Goal.SNR > 0:
		say("at the faint end, %s %.1f, S/N %g cannot be reached", band, w.faint.Mags(), w.s.Goal.SNR)
	case a.UpToS.Known && a.UpToS.Value > 1.1*a.BookedS:
		say("could need up to %s, at %s %.1f", seconds(a.UpToS.Value), band, w.faint.Mags())
	}
	if a.PReached.Known && a.PReached.Value < 0.995 {
		say("S/N %g in this time with a probability of %.2f", w.s.Goal.SNR, a.PReached.Value)
	}
	if a.SaturatesAt.Known {
		switch own := w.got.EachS > photon.LongestS(w.ratesAt(w.booked), w.det)*(1+1e-9); {
		case own:
			say("saturates: frames of %s do at %s < %.1f", seconds(a.EachS), band, a.SaturatesAt.Value)
		case unguarded || w.bright.Mags() < a.SaturatesAt.Value:
			say("may saturate: at its bright end, %s %.1f, frames of %s do (%s < %.1f)", band, w.bright.Mags(), seconds(a.EachS), band, a.SaturatesAt.Value)
		case w.bright.Mags() < a.SaturatesAt.Value+2:
			say("saturates at %s < %.1f", band, a.SaturatesAt.Value)
		}
	}
	for _, c := range []struct {
		light string
		times float64
	}{{"moonlight", a.MoonTimes.Value}, {"twilight", a.TwilightTimes.Value}} {
		if c.times >= 1.05 {
			say("%s costs %.1f times dark time", c.light, c.times)
		}
	}
	if w.sky.Partial {
		say("Moon and twilight are not modelled in %s: the sky may be brighter", band)
	}
	if l := limitWords[a.LimitedBy]; l != "" {
		say("%s", l)
	}
	w.tellFrames(a, say)
	if w.point && w.s.Source.Nebula != nil {
		say("taken as a point: smaller than two widths of an image, or of no listed size")
	}
	if n := w.s.Source.Nebula; w.slit && n != nil && !w.point {
		if l := w.s.Instrument.SlitLengthArcsec; l > 0 && n.DiamArcsec >= 0.8*l {
			a.SkyS = a.BookedS
			say("the object fills the slit: as much time again on the sky beside it, %s", seconds(a.SkyS))
		}
	}
	if a.Advice != nil {
		a.Words = append(a.Words, a.Advice.Words...)
	}
}

// limitWords say what keeps the measurement from being better.
var limitWords = map[photon.Limit]string{
	photon.LimitPhotons:       "limited by its own photons",
	photon.LimitSky:           "limited by the sky",
	photon.LimitReadNoise:     "limited by read noise: longer frames would help",
	photon.LimitDark:          "limited by dark current: a colder detector would help",
	photon.LimitScintillation: "limited by scintillation: only time or a larger telescope helps",
}

// tellFrames says what is to be said of the frames.
func (w *work) tellFrames(a *Answer, say func(string, ...any)) {
	i := w.s.Instrument
	if e := i.ShutterErrorS; e > 0 && a.EachS < photon.ShutterS(0, e)*(1-1e-9) {
		say("the shutter's error of %s is %.1f per cent of a frame", seconds(e), 100*e/a.EachS)
	}
	if a.LimitedBy == photon.LimitScintillation && !w.series && a.Frames < photon.BrightFrames {
		say("take %d frames or more: scintillation averages out", photon.BrightFrames)
	}
	if !w.series && a.Frames > 3 && a.ClockS > 2*a.BookedS {
		say("%s by the clock: the detector is read for longer than it is exposed", seconds(a.ClockS))
		if a.Advice == nil && a.EachS < 10 {
			if a.Advice = w.advice(); a.Advice != nil {
				a.Advice.Words = a.Advice.Words[:min(len(a.Advice.Words), 4)]
			}
		}
	}
}

// Advice is what can be done about a star that is too bright.
type Advice struct {
	WantedS       float64 // frame that shutter and seeing want
	LongestS      float64 // frame that saturates
	MaskM         float64 // aperture left by a mask
	DefocusArcsec float64 // diameter of the image out of focus
	DefocusPixels float64 // summed then
	Neutral       float64 // factor of a grey filter
	Density       float64
	Frames        int
	Words         []string
}

// advice tells what to do about what saturates; nil where a frame of the wanted
// length does not.
//
// Notes:
//  1. In the order of what costs least: the shortest exposure that the shutter
//     does well; a redder or narrower filter or a mask; defocus; a grey filter;
//     a smaller telescope (common practice, no source).
func (w *work) advice() *Advice {
	i := w.s.Instrument
	wanted := photon.ShutterS(i.ShutterMinS, i.ShutterErrorS)
	if i.ShutterErrorS > 0 {
		wanted = math.Max(wanted, photon.IrisEvenS)
	}
	return w.advise(wanted)
}

func (w *work) advise(wantedS float64) *Advice {
	r := w.ratesAt(w.booked)
	r.PeakES = math.Max(r.PeakES, w.guard)
	longest := photon.LongestS(r, w.det)
	if !(longest < wantedS) || !(longest > 0) {
		return nil
	}
	a := &Advice{WantedS: wantedS, LongestS: longest, Frames: photon.BrightFrames}
	a.Neutral, a.Density = photon.NeutralFilter(wantedS, longest)
	a.MaskM = w.s.Instrument.ApertureM / math.Sqrt(a.Neutral)
	say := func(format string, v ...any) { a.Words = append(a.Words, fmt.Sprintf(format, v...)) }
	if longest >= w.det.ShutterMinS {
		say("too bright for frames of %s: the longest is %s", seconds(wantedS), seconds(longest))
	} else {
		say("too bright: frames may last %s, the shortest is %s", seconds(longest), seconds(w.det.ShutterMinS))
	}
	if w.slit {
		say("a mask that leaves %.2f m of aperture, or a grey filter of density %.2f", a.MaskM, a.Density)
		return a
	}
	say("a narrower or redder filter, or a mask that leaves %.2f m of aperture", a.MaskM)
	if w.point {
		total := w.rates.SourceES / w.pointShare()
		total *= math.Max(1, w.guard/math.Max(w.rates.PeakES, 1e-300))
		if d, px, err := photon.Defocus(w.det, total, wantedS, w.pixel); err == nil {
			a.DefocusArcsec, a.DefocusPixels = d, px
			say("or out of focus to %.1f arcsec, if no star is nearer than %.0f arcsec", d, d/0.3)
		}
	}
	say("or a grey filter of density %.2f", a.Density)
	say("or a smaller telescope; %d frames or more, and a comparison star that survives the same frame", a.Frames)
	return a
}

// Advise tells what can be done about a star that is too bright for frames of a
// wanted length.
//
// Returns:
//   - nil where such a frame does not saturate; the reason where nothing can be
//     worked out.
//
// Checked: TestAdvice.
func Advise(s Setting, wantedS float64) (*Advice, error) {
	w := &work{s: s}
	if err := w.prepare(); err != nil {
		return nil, err
	}
	return w.advise(wantedS), nil
}
