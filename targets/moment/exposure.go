package moment

import (
	"errors"
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/instrument"
	"evenfall/targets/light"
)

// assumedSeeing is the seeing where nothing is said of it, arcsec. Common
// practice, no source.
const assumedSeeing = 1.0

// seeing is that of the conditions, else of the run.
func (n *Night) seeing() float64 {
	switch {
	case n.Conditions.Seeing.Known:
		return n.Conditions.Seeing.Value
	case n.Seeing > 0:
		return n.Seeing
	}
	return assumedSeeing
}

// sky returns the sky at a node; nil: none.
func (n *Night) sky(k *node) *skyglow.Sky {
	n.skies.once.Do(func() {
		n.skies.at = make([]*skyglow.Sky, len(n.nodes))
		for i := range n.nodes {
			d := &n.nodes[i]
			n.skies.at[i] = makeSky(n.Sky, d.sun, d.moon)
		}
	})
	return n.skies.at[k.index]
}

// skyBand is the band that the sky is told in: the one asked, else that of the
// mode.
func (w *Want) skyBand() targets.Band {
	if w.Band != "" || w.Mode == nil || w.slit() {
		return w.Band
	}
	return w.Mode.Band
}

func (w *Want) slit() bool { return w.Instrument != nil && w.Instrument.Kind == instrument.Slit }

// forecast is the brightness that an exposure is worked out from: in the band
// of the mode, else in the best known one; for a slit in the line wanted, else in
// the best known band.
func (w *Want) forecast(p *Prepared, at astro.Instant) light.Forecast {
	band := targets.Band("")
	switch {
	case w.Mode == nil:
	case w.slit() && p.Target.Kind == targets.PN:
		band = targets.Band(w.Goal.Line)
	case !w.slit():
		band = w.Mode.Band
	}
	f := p.Light.At(at, light.Ask{Band: band, Level: w.Level})
	if !f.Known && band != "" {
		f = p.Light.At(at, light.Ask{Level: w.Level})
	}
	return f
}

// whole is the whole distribution of a forecast.
type whole struct{ f light.Forecast }

func (d whole) Quantile(p float64) astro.Mag {
	if m, ok := d.f.Quantile(p); ok {
		return m
	}
	return astro.Mags(math.NaN())
}

func (d whole) CDF(m astro.Mag) float64 {
	if p, ok := d.f.CDF(m); ok {
		return p
	}
	return math.NaN()
}

// spreadOf is how bright a target may be: by the distribution of its forecast,
// else by the ends of its interval.
func spreadOf(f light.Forecast) exposure.Brightness {
	if _, ok := f.Quantile(0.5); ok {
		return whole{f}
	}
	return exposure.FromForecast(f)
}

// goal is what is wanted of one target.
func (w *Want) goal(p *Prepared) exposure.Goal {
	g := *w.Goal
	if g.CycleS == 0 {
		g.CycleS = exposure.CycleOf(&p.Target)
	}
	if g.Level == 0 {
		g.Level = w.Level
	}
	return g
}

// with is the want with a slit, where none is wanted of its own.
func (w Want) with(slitArcsec float64) Want {
	if w.Goal == nil || w.Goal.SlitArcsec > 0 || !(slitArcsec > 0) {
		return w
	}
	g := *w.Goal
	g.SlitArcsec = slitArcsec
	w.Goal = &g
	return w
}

// setting is an exposure to be worked out under a sky.
func (w *Want) setting(n *Night, p *Prepared, at astro.Instant, place *frame.Place, x astro.Airmass, sky *skyglow.Sky) exposure.Setting {
	f := w.forecast(p, at)
	set := exposure.Setting{Instrument: w.Instrument, Mode: w.Mode, Goal: w.goal(p),
		Source:  exposure.SourceOf(&p.Target, f.Band, spreadOf(f), p.Colours),
		Airmass: x, SeeingArcsec: n.seeing(), HeightM: n.Site.HeightM,
		Pointing: &exposure.Pointing{Lat: n.Site.Lat, Dec: place.Dec, HourAngle: place.HourAngle},
		Vapour:   photon.VapourOf(n.Site.Air)}
	if n.Sky != nil {
		set.Extinction = n.Sky.Extinction()
	}
	if sky != nil {
		dir := skyglow.Direction{Dir: place.Dir, Alt: place.Alt}
		set.Sky = func(b skyglow.Band) (skyglow.Brightness, error) { return sky.At(dir, b) }
	}
	if e := n.Conditions.Extinction; e.Known && e.Value > 0 { // thin cloud takes light whatever the airmass
		set.Correction.ZeroPointMag = -e.Value
	}
	return set
}

// SettingAt is what an exposure of a target is worked out from at the instant
// of a scene, for all that exposure and finding have to say beyond the answer.
//
// Notes:
//  1. A slit that is not wanted by its width is the one that suits the image at
//     the least airmass of the night, all night long: moments can be compared.
//
// Returns:
//   - false where no exposure is wanted, or the target is below the horizon.
//
// Checked: TestExposureAgrees.
func SettingAt(s *Scene, p *Prepared, m *Moment, w Want) (exposure.Setting, bool) {
	if w.Goal == nil || !m.AirOK {
		return exposure.Setting{}, false
	}
	w = w.with(m.Course.slit)
	return w.setting(s.Night, p, s.Instant, &m.Place, m.Airmass, s.Sky), true
}

// expose fills in the exposure.
func (m *Moment) expose(s *Scene, p *Prepared, w Want) {
	if w.Goal == nil {
		return
	}
	set, ok := SettingAt(s, p, m, w)
	if !ok {
		m.ExposureWhy = "below the horizon: no exposure"
		return
	}
	m.Exposure = exposure.Solve(set)
	if m.ExposureOK = m.Exposure.Err == nil; !m.ExposureOK {
		m.ExposureWhy = m.Exposure.Err.Error()
	}
}

// exposureWords says why nothing can be exposed.
func (m *Moment) exposureWords(code targets.Code) string {
	var r *exposure.Reason
	if errors.As(m.Exposure.Err, &r) && r.Code == code {
		return m.ExposureWhy
	}
	if code == targets.CodeSaturates {
		return "saturates even in the shortest exposure"
	}
	return "too faint for what is wanted"
}

// words gives the brightness of the sky in a sentence.
func (s *SkyNow) words() string {
	if !s.Known {
		return "not known"
	}
	return fmt.Sprintf("%.1f in %s", s.Total.MagArcsec2(), s.Band)
}

// hazy tells whether a request's limits on extinction are passed.
func hazy(c *targets.Conditions, q *targets.Request) bool {
	cloud := c.Extinction.Known && c.Extinction.Value > 0
	return q.Photometric && (c.Hazy || cloud) || q.MaxExtinctionMag.Known && cloud && c.Extinction.Value > q.MaxExtinctionMag.Value
}

func hazeWords(n *Night, q *targets.Request) string {
	e := n.Conditions.Extinction
	switch {
	case q.MaxExtinctionMag.Known && e.Known && e.Value > q.MaxExtinctionMag.Value:
		return fmt.Sprintf("cloud takes %.2f mag, the request allows %.2f", e.Value, q.MaxExtinctionMag.Value)
	case e.Known && e.Value > 0:
		return fmt.Sprintf("cloud takes %.2f mag, the request wants a photometric sky", e.Value)
	}
	return "not photometric, as the request wants it"
}

// asked returns the limits that the request sets to sky and air.
func (t *tracker) asked(w Want) []limit {
	q := w.Request
	if q == nil {
		return nil
	}
	var out []limit
	if q.MaxSeeingArcsec.Known && t.night.seeing() > q.MaxSeeingArcsec.Value {
		out = append(out, limit{targets.CodeSeeing, nil})
	}
	if hazy(&t.night.Conditions, q) {
		out = append(out, limit{targets.CodeExtinction, nil})
	}
	if q.SkyAtLeast.Known {
		if b, ok := skyglow.BandOf(string(skyName(w.skyBand()))); ok {
			out = append(out, limit{targets.CodeSky, t.times(rule{targets.CodeSky, func(k look) float64 {
				return t.darker(k, b, q.SkyAtLeast.Value)
			}})})
		}
	}
	return out
}

// darker is by how much the sky behind the star is darker than wanted, mag;
// below the horizon it forbids nothing.
func (t *tracker) darker(k look, b skyglow.Band, wanted float64) float64 {
	const daylight = -5
	if k.place.Alt.Deg() < 0 {
		return 1
	}
	if k.sun().Place.Alt.Deg() > 0 {
		return daylight
	}
	sky := t.skyOf(&k)
	if sky == nil {
		return 1
	}
	bright, err := sky.At(skyglow.Direction{Dir: k.place.Dir, Alt: k.place.Alt}, b)
	if err != nil {
		return daylight
	}
	return math.Max(daylight, bright.Total.MagArcsec2()-wanted)
}

// skyOf is the sky of a look.
func (t *tracker) skyOf(k *look) *skyglow.Sky {
	if k.node != nil {
		return t.night.sky(k.node)
	}
	return makeSky(t.night.Sky, k.sun(), k.moon())
}
