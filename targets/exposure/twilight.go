package exposure

import (
	"fmt"
	"math"
	"slices"
	"time"

	"evenfall/astro"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// Flats: how full a pixel is meant to be, of its linear limit; the longest
// exposure; how many of a filter. Common practice, no source.
const (
	flatFill     = 0.5
	flatLongestS = 60.0
	flatCount    = 5
	flatSteps    = 2000 // of waiting 10 s for the sky, or of an exposure
)

// FlatAsk is what flats are planned from.
type FlatAsk struct {
	Instrument *instrument.Instrument
	Modes      []string // nil: all that twilight is known for
	Evening    bool
	Count      int // of each filter; 0: 5
	// SunAlt returns the Sun's airless altitude; When the instant in this
	// twilight at which the Sun passes an altitude.
	SunAlt func(astro.Instant) astro.Angle
	When   func(astro.Angle) (astro.Instant, bool)
}

// Flat is the flats of one filter.
type Flat struct {
	Mode     string
	From     astro.Instant
	SunAlt   astro.Angle // then
	EachS    []float64   // exposures one after another
	LevelE   float64
	Skipped  []string // why some are not taken
	Earliest astro.Angle
	Latest   astro.Angle // altitudes of the Sun between which an exposure fits
}

// Flats plans twilight flats: in the evening the filters that let least light
// through come first, while the sky is bright; in the morning the order is
// reversed. An exposure grows or shrinks with the sky, and none is taken whose
// shortest exposure would pass the linear limit.
//
//	t = N / (Z 10^(-0.4 μ) p²),  N half the linear limit
//
// Returns:
//   - one entry a filter in order of time; one without exposures says why.
//   - a [*Reason] where the instrument lacks something.
//
// Notes:
//  1. The zenith's twilight is taken, good to half a magnitude: look at the
//     first frame.
//
// Source: [cite.PatatEtAl2006].
//
// Checked: TestFlats.
func Flats(ask FlatAsk) ([]Flat, error) {
	i := ask.Instrument
	if i == nil || ask.SunAlt == nil || ask.When == nil {
		return nil, fail(targets.CodeInstrument, "", "", "no instrument, or no twilight")
	}
	if l := i.Lacks(); len(l) > 0 {
		return nil, lacking(l[0])
	}
	var jobs []flatJob
	for k := range i.Modes {
		m := &i.Modes[k]
		if ask.Modes != nil && !slices.Contains(ask.Modes, m.Name) || i.Kind == instrument.Slit {
			continue
		}
		jobs = append(jobs, newFlatJob(i, m))
	}
	slices.SortStableFunc(jobs, func(a, b flatJob) int {
		switch {
		case a.why != "" || b.why != "":
			return len(a.why) - len(b.why)
		case a.brightest == b.brightest:
			return 0
		case ask.Evening == (a.brightest.Deg() > b.brightest.Deg()):
			return -1
		}
		return 1
	})
	if ask.Count <= 0 {
		ask.Count = flatCount
	}
	var out []Flat
	var free astro.Instant
	for _, j := range jobs {
		f := Flat{Mode: j.mode.Name, LevelE: j.level, Earliest: j.brightest, Latest: j.darkest}
		if j.why != "" {
			f.Skipped = append(f.Skipped, j.why)
			out = append(out, f)
			continue
		}
		free = j.take(&f, ask, free)
		out = append(out, f)
	}
	return out, nil
}

// flatJob is one filter's flats.
type flatJob struct {
	inst               *instrument.Instrument
	mode               *instrument.Mode
	zeroES, level      float64
	band               skyglow.Band
	shortest           float64
	brightest, darkest astro.Angle // of the Sun
	why                string
}

func newFlatJob(i *instrument.Instrument, m *instrument.Mode) flatJob {
	w := &work{s: Setting{Instrument: i, Mode: m}}
	j := flatJob{inst: i, mode: m}
	for _, step := range []func() error{w.equipment, w.wavelength, w.zeroPoint} {
		if err := step(); err != nil {
			j.why = err.Error()
			return j
		}
	}
	band, err := w.skyBand()
	if err != nil {
		j.why = err.Error()
		return j
	}
	limit := w.det.LimitE()
	if math.IsInf(limit, 1) {
		j.why = "no limit of the detector is given: write linear_e"
		return j
	}
	j.zeroES, j.level, j.band = w.zeroES, flatFill*limit, band
	j.shortest = math.Max(photon.ShutterS(i.ShutterMinS, i.ShutterErrorS), 0.1)
	at := func(each float64) (astro.Angle, bool) {
		a, err := skyglow.TwilightSun(band, photon.FlatSky(j.zeroES, w.pixel, j.level, each))
		return a, err == nil
	}
	var ok1, ok2 bool
	j.brightest, ok1 = at(j.shortest)
	j.darkest, ok2 = at(flatLongestS)
	if !ok1 {
		j.brightest = astro.Deg(0) // never too bright once the Sun is down
	}
	if !ok2 || !j.darkest.Less(j.brightest) {
		j.why = "twilight is too faint for it, or not known in that band"
	}
	return j
}

// eachS is the exposure that fills a pixel to its level under a Sun.
func (j *flatJob) eachS(sun astro.Angle) (float64, bool) {
	mu, ok := skyglow.Twilight(j.band, sun)
	if !ok {
		return 0, false
	}
	return photon.FlatS(j.zeroES, j.inst.PixelArcsec, j.level, mu), true
}

// take goes through the exposures and returns when it is done.
func (j *flatJob) take(f *Flat, ask FlatAsk, free astro.Instant) astro.Instant {
	first := j.brightest
	if !ask.Evening {
		first = j.darkest
	}
	at, ok := ask.When(first)
	if !ok {
		f.Skipped = append(f.Skipped, "the Sun does not pass the altitude for it")
		return free
	}
	if !free.IsZero() {
		free = free.Add(time.Duration(j.mode.ChangeS * 1e9))
		if at.Before(free) {
			at = free
		}
	}
	f.From, f.SunAlt = at, ask.SunAlt(at)
	for range flatSteps {
		if len(f.EachS) >= ask.Count {
			break
		}
		each, ok := j.eachS(ask.SunAlt(at))
		switch {
		case !ok || each > flatLongestS*(1+1e-6):
			if ask.Evening {
				f.Skipped = append(f.Skipped, "too dark for more")
				return at
			}
			at = at.Add(10 * time.Second) // it gets brighter
			continue
		case each < j.shortest*(1-1e-6) && !ask.Evening:
			f.Skipped = append(f.Skipped, fmt.Sprintf("more would pass the linear limit: %s is the shortest exposure", seconds(j.shortest)))
			return at
		case each < j.shortest*(1-1e-6):
			at = at.Add(10 * time.Second) // it gets darker
			continue
		}
		f.EachS = append(f.EachS, each)
		at = at.Add(time.Duration((each + j.inst.DeadS) * 1e9))
	}
	return at
}

// SunLimit returns how low the Sun must be for a mode: its own limit, else by
// what it does.
//
// Returns:
//   - degrees: -9 for images of bright stars in R, I and the near infrared, -10
//     for standards, -12 for spectra and other images, -16 for faint images in
//     U, u and B; and why. Bright is V 10 (common practice, no source).
//
// Checked: TestSunLimit.
func SunLimit(i *instrument.Instrument, m *instrument.Mode, mag astro.Mag, standard bool) (astro.Angle, string) {
	const brightMag = 10
	bright := mag.Mags() < brightMag
	switch {
	case m.MaxSunAltitudeOK:
		return m.MaxSunAltitude, "max_sun_altitude_deg of the mode"
	case standard:
		return astro.Deg(-10), "standards"
	case i.Kind == instrument.Slit:
		return astro.Deg(-12), "spectra"
	case bright && slices.Contains([]targets.Band{"R", "I", "r", "i", "z", "J", "H", "K", "RP"}, m.Band):
		return astro.Deg(-9), "bright stars in the red"
	case !bright && slices.Contains([]targets.Band{"U", "u", "B"}, m.Band):
		return astro.Deg(-16), "faint stars in the blue"
	}
	return astro.Deg(-12), "images"
}

// BrightStart returns how high the Sun may stand for an exposure to take no
// more than some times what it takes in the dark: when bright giants can be
// started.
//
// Given:
//   - s: with a sky as dark as it will be in the night.
//   - times: above 1, e.g. 1.2.
//
// Returns:
//   - the Sun's altitude, -18 to 0 degrees; [*Reason] where it cannot be
//     exposed in the dark either, or its band has no twilight.
//
// Checked: TestBrightStart.
func BrightStart(s Setting, times float64) (astro.Angle, error) {
	w := &work{s: s}
	if err := w.prepare(); err != nil {
		return astro.Angle{}, err
	}
	band, err := w.skyBand()
	if err != nil {
		return astro.Angle{}, err
	}
	dark, _, err := w.solveAt(w.booked, w.ask)
	if err != nil {
		return astro.Angle{}, w.reason(err, &Answer{})
	}
	if _, ok := skyglow.Twilight(band, astro.Deg(-6)); !ok {
		return astro.Angle{}, fail(targets.CodeSky, "band", "", "twilight is not known in band %s", s.Mode.Band)
	}
	perSky := w.skyES / dim(w.sky.Total.MagArcsec2())
	good := func(down float64) bool {
		mu, ok := skyglow.Twilight(band, astro.Deg(-down))
		if !ok {
			return true
		}
		r := w.ratesAt(w.booked)
		r.SkyES += perSky * dim(mu.MagArcsec2())
		got, _, err := w.solve(r, w.ask)
		if err != nil || got.Saturated {
			return false
		}
		if w.ask.TotalS > 0 {
			return dark.SNR*dark.SNR <= times*got.SNR*got.SNR
		}
		return got.TotalS() <= times*dark.TotalS()
	}
	lo, hi := 0.0, 18.6
	if good(lo) {
		return astro.Deg(0), nil
	}
	if !good(hi) {
		return astro.Angle{}, fail(targets.CodeSaturates, "", "", "not to be had before the end of twilight")
	}
	for hi-lo > 0.01 {
		mid := (lo + hi) / 2
		if good(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return astro.Deg(-hi), nil
}
