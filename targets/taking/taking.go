// Package taking says in lines how a target is taken: how long to expose and
// why, how to set the slit, how to find it, which standard goes with it, when
// flats can be taken. It joins a moment with exposure and finding for every view
// alike; it knows no clock, no file and no screen.
package taking

import (
	"fmt"
	"math"
	"strings"
	"time"

	"evenfall/astro/photon"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/instrument"
	"evenfall/targets/moment"
)

// Line is one statement.
type Line struct {
	Text string
	Warn bool
}

// lines collects statements.
type lines []Line

func (l *lines) say(format string, a ...any) { *l = append(*l, Line{Text: fmt.Sprintf(format, a...)}) }
func (l *lines) warn(format string, a ...any) {
	*l = append(*l, Line{Text: fmt.Sprintf(format, a...), Warn: true})
}

// Seconds writes a time as a plan has it: 0.3 s, 45 s, 12.5 min, 2.1 h.
//
// Checked: TestSeconds.
func Seconds(s float64) string {
	switch {
	case !(s >= 0) || math.IsInf(s, 0):
		return "?"
	case s >= 5400:
		return fmt.Sprintf("%.1f h", s/3600)
	case s >= 600:
		return fmt.Sprintf("%.0f min", s/60)
	case s >= 100:
		return fmt.Sprintf("%.0f s", s)
	case s >= 9.95:
		return strings.TrimSuffix(fmt.Sprintf("%.1f", s), ".0") + " s"
	}
	return fmt.Sprintf("%.2g s", s)
}

// Frames writes frames times seconds: 12 x 30 s.
func Frames(a *exposure.Answer) string {
	return fmt.Sprintf("%d x %s", a.Frames, Seconds(a.EachS))
}

// limits say in two words what keeps a measurement from being better.
var limits = map[photon.Limit]string{
	photon.LimitPhotons: "photons", photon.LimitSky: "sky", photon.LimitReadNoise: "read noise", photon.LimitDark: "dark current",
	photon.LimitScintillation: "scintillation", photon.LimitSaturation: "saturation",
}

// Short is the exposure in clauses, what matters first; nil where none is
// wanted.
//
// Checked: TestShort.
func Short(m *moment.Moment) []string {
	switch {
	case !m.ExposureOK && m.ExposureWhy == "":
		return nil
	case !m.ExposureOK:
		return []string{"No exposure: " + m.ExposureWhy}
	}
	a := &m.Exposure
	out := []string{fmt.Sprintf("Expose %s in %s", Frames(a), a.Mode)}
	if a.SNR > 0 {
		out[0] += fmt.Sprintf(", S/N %.0f", a.SNR)
	}
	if a.UpToS.Known && a.UpToS.Value > 1.1*a.BookedS {
		out = append(out, "up to "+Seconds(a.UpToS.Value))
	}
	if a.PReached.Known && a.PReached.Value < 0.995 {
		out = append(out, fmt.Sprintf("reached with p %.2f", a.PReached.Value))
	}
	for _, c := range []struct {
		what  string
		times float64
	}{{"moonlight", a.MoonTimes.Value}, {"twilight", a.TwilightTimes.Value}} {
		if c.times >= 1.05 {
			out = append(out, fmt.Sprintf("%s costs %.1fx", c.what, c.times))
		}
	}
	if l := limits[a.LimitedBy]; l != "" {
		out = append(out, "limit "+l)
	}
	if a.SaturatesAt.Known && a.Bright.Mags() < a.SaturatesAt.Value+2 {
		out = append(out, fmt.Sprintf("saturates at %.1f", a.SaturatesAt.Value))
	}
	return out
}

// AtBest adds to the best moment what the exposure takes then by the clock; ""
// where airmass decided.
func AtBest(m *moment.Moment) string {
	if m.Course.BestS <= 0 {
		return ""
	}
	return ", the least exposure: " + Seconds(m.Course.BestS) + " by the clock"
}

// Brief is frames times seconds and the mode alone; "" without an exposure.
func Brief(m *moment.Moment) string {
	if !m.ExposureOK {
		return ""
	}
	return Frames(&m.Exposure) + " in " + m.Exposure.Mode
}

// Exposure says how long to expose and how to set the slit.
//
// Returns:
//   - nil where no exposure is wanted.
//
// Checked: TestLines.
func Exposure(s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want) []Line {
	if w.Goal == nil {
		return nil
	}
	var l lines
	a := &m.Exposure
	if !m.ExposureOK {
		l.warn("none: %s", m.ExposureWhy)
		if a.Advice != nil {
			for _, words := range a.Advice.Words {
				l.say("%s", words)
			}
		}
		return l
	}
	name := a.Mode
	if w.Instrument != nil {
		name = w.Instrument.Name + " " + name
	}
	l.say("%s: %s, open %s, by the clock %s", name, Frames(a), Seconds(a.BookedS), Seconds(a.ClockS))
	if a.SNR > 0 {
		at := ""
		if a.AtNm > 0 {
			at = fmt.Sprintf(" at %.0f nm", a.AtNm)
		}
		l.say("S/N %.0f per %s%s, sky %.1f mag per square arcsec, seeing %.1f arcsec", a.SNR, a.Per, at, a.Sky.Total.MagArcsec2(), seeing(s, p, m, w))
	}
	for _, words := range a.Words {
		if strings.HasPrefix(words, "saturates:") || strings.HasPrefix(words, "may saturate") {
			l.warn("%s", words)
		} else {
			l.say("%s", words)
		}
	}
	slit(&l, s, p, m, w)
	twilight(&l, s, p, m, w)
	return l
}

// startTimes is how many times its dark time an exposure may take at which a
// bright star is begun in twilight. Common practice, no source.
const startTimes = 1.2

// twilight says how low the Sun must be, and for what is bright how soon it can
// be begun.
func twilight(l *lines, s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want) {
	alt, why := exposure.SunLimit(w.Instrument, w.Mode, m.Exposure.Mag, p.Target.Kind == targets.Standard)
	l.say("Sun below %.0f deg: %s", alt.Deg(), why)
	set, ok := moment.SettingAt(s, p, m, w)
	if !ok || s.Sun.Place.Alt.Deg() > -18 {
		return
	}
	if from, err := exposure.BrightStart(set, startTimes); err == nil && from.Deg() > alt.Deg() {
		if at, ok := sunAt(s.Night, from, true); ok {
			l.say("bright enough to begin with the Sun at %.1f deg, %s UTC: %.1f times its dark time there", from.Deg(), at.UTC().Format("15:04"), startTimes)
		}
	}
}

func seeing(s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want) float64 {
	set, _ := moment.SettingAt(s, p, m, w)
	return set.SeeingArcsec
}

// slit says how to set the slit, and when anew.
func slit(l *lines, s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want) {
	if w.Instrument == nil || w.Instrument.Kind != instrument.Slit {
		return
	}
	set, ok := moment.SettingAt(s, p, m, w)
	if !ok {
		return
	}
	plan, err := exposure.PlanSlit(set, m.Exposure)
	if err != nil {
		return
	}
	l.say("slit %.1f arcsec at position angle %.0f deg (parallactic %.0f at the beginning, %.0f at the end)", m.Exposure.SlitArcsec, plan.PA,
		half(plan.Parallactic), half(plan.QuitsAt))
	for _, words := range plan.Words {
		l.say("%s", words)
	}
	if plan.ResetAfterS.Known {
		at := m.At.Add(time.Duration(plan.ResetAfterS.Value * float64(time.Second)))
		l.say("set the slit anew after %s, at %s UTC", Seconds(plan.ResetAfterS.Value), at.UTC().Format("15:04"))
	}
}

// half brings a position angle of a slit to 0 to 180.
func half(deg float64) float64 {
	deg = math.Mod(deg, 180)
	if deg < 0 {
		deg += 180
	}
	return deg
}
