package moment

import (
	"errors"
	"slices"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/light"
	"evenfall/targets/stage"
)

// Moment is everything known of one target at one instant: a plain value that
// shares no memory with what it was made from but for the judgement's maps,
// which nobody changes.
type Moment struct {
	At       astro.Instant
	RA, Dec  astro.Angle // ICRS, brought to the instant by the listed motion
	Place    frame.Place // the sky, airless
	Apparent astro.Angle // refracted altitude; equal to the airless one below -1 degree
	Airmass  astro.Airmass
	AirOK    bool // Airmass is given: above the horizon

	MoonSep, SunSep astro.Angle
	Rising          bool // altitude increases
	Barycentric     frame.Barycentric

	Stage  stage.Verdict
	Expect light.Forecast
	Sky    SkyNow // behind the target, in the band wanted, else that of the mode
	// Exposure is what is booked in the mode wanted; ExposureOK: there is one.
	// ExposureWhy says why there is none, "" where none is wanted.
	Exposure    exposure.Answer
	ExposureOK  bool
	ExposureWhy string

	Course    Course
	Window    astro.Span // the window spoken of, see Course.Window
	WindowOK  bool
	EndsBy    targets.Code
	InCan     bool
	InShould  bool
	Left      time.Duration // until the window that holds the instant ends; 0 outside
	BlockedBy []Block
	Rank      int // 1 is first, 0 blocked; set by Rank
	Weight    float64

	Why []string // what could not be known, and why
}

// Block is one reason why a target cannot be taken at an instant.
type Block struct {
	Code  targets.Code
	Words string
	Until *astro.Instant // nil: not again this night
}

// Of returns everything the program knows about one target at one instant.
//
// It is the only function that joins position, air, brightness and stage.
// Screens, plans, exports and the log all call it, so two views of one target
// at one instant cannot disagree.
//
// Given:
//   - s: what all targets share at that instant, from [NewScene].
//   - p, c: the target as prepared, and its course tonight, for the same want.
//   - w: band, level, instrument and mode that brightness and limits are for.
//
// Returns:
//   - a complete value, safe to keep and to pass between goroutines. It does
//     not fail: what cannot be known is absent, and Moment.Why says why.
//
// Notes:
//  1. Same arguments, same answer: no clock, file, random number or package
//     variable is read.
//
// Checked: TestOfAgreesWithParts, TestOfMissingData, TestExposureAgrees, BenchmarkOf.
func Of(s *Scene, p *Prepared, c *Course, w Want) Moment {
	m := Moment{At: s.Instant, Course: *c, Stage: p.Verdict, Weight: w.Weight}
	m.Place = s.Frame.Horizontal(&p.Star)
	m.RA, m.Dec = m.Place.ICRS.LonLat()
	m.Rising = m.Place.RisingRate > 0
	m.Apparent = air.Refract(m.Place.Alt, s.Night.Site.Air)
	if x, err := air.Mass(m.Apparent); err == nil {
		m.Airmass, m.AirOK = x, true
	} else if !errors.Is(err, air.ErrBelowHorizon) {
		m.Why = append(m.Why, "airmass: "+err.Error())
	}
	m.MoonSep = astro.Separation(m.Place.Dir, s.Moon.Dir)
	m.SunSep = astro.Separation(m.Place.Dir, s.Sun.Dir)
	m.Barycentric = s.Frame.Barycentre(&p.Star)
	if m.Barycentric.Coarse {
		m.Why = append(m.Why, "date outside 2010 to 2053: barycentric times to 0.1 s, Sun to 36 arcsec")
	}
	m.Sky = s.SkyAt(&m.Place, w.skyBand())
	m.Expect = p.Light.At(s.Instant, light.Ask{Band: w.Band, Level: w.Level})
	m.expose(s, p, w)
	m.windows(s, c)
	m.Why = append(m.Why, missing(s, p)...)
	return m
}

// steady are the limits that hold or do not, wherever the star is.
var steady = []targets.Code{targets.CodeDaylight, targets.CodeInstrument, targets.CodeClosed}

// windows fills what follows from the course and the instant.
func (m *Moment) windows(s *Scene, c *Course) {
	at := s.Instant
	window, should, ok := c.Window(at)
	m.Window, m.WindowOK = window, ok
	if ok {
		m.EndsBy = c.endedBy(window, should)
	}
	_, m.InCan = within(c.Can, at)
	_, m.InShould = within(c.Should, at)
	if ok && window.Contains(at) {
		m.Left = window.Until.Sub(at)
	}
	if m.InCan {
		return
	}
	for _, l := range c.limits {
		if _, kept := within(l.kept, at); kept {
			continue
		}
		// in the forenoon the night to come has not begun: what its limits do
		// is not known yet, but for those that do not move
		if !s.Night.Span.Contains(at) && !slices.Contains(steady, l.code) {
			continue
		}
		b := Block{Code: l.code, Until: l.nextKept(at)}
		b.Words = words(s, m, b)
		m.BlockedBy = append(m.BlockedBy, b)
	}
}

// missing lists what is not known of a target and what that costs.
func missing(s *Scene, p *Prepared) []string {
	var why []string
	if d := p.Drift.words(p.Target.Place.EpochJyr, s.Instant); d != "" {
		why = append(why, d)
	} else if p.Drift.MotionMissing {
		why = append(why, "no proper motion listed: the position is that of its epoch")
	}
	if !p.Target.Place.EpochGiven {
		why = append(why, "no epoch listed: 2000.0 assumed")
	}
	if v := p.Target.Place.Plx; v.Known && v.Value < 0 {
		why = append(why, "negative parallax: no parallax applied")
	}
	if s.Instant.Predicted() {
		why = append(why, "leap seconds at that date are not announced yet")
	}
	return append(why, p.Verdict.Missing...)
}

// NextOpen returns when a blocked target can next be taken this night; nil:
// it can now, or not again.
func (m *Moment) NextOpen() *astro.Instant {
	if m.InCan {
		return nil
	}
	if s, ok := pick(m.Course.Can, m.At); ok {
		return &s.From
	}
	return nil
}
