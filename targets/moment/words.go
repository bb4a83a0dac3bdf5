package moment

import (
	"fmt"
	"math"
	"time"

	"evenfall/astro"
	"evenfall/targets"
)

// words says in a sentence why a target cannot be taken, with the figure that
// decides and when it ends.
func words(s *Scene, m *Moment, b Block) string {
	l := &m.Course.Limits
	text := ""
	switch b.Code {
	case targets.CodeDaylight:
		text = fmt.Sprintf("the Sun is at %s", degrees(s.Sun.Place.Alt))
	case targets.CodeSun:
		text = fmt.Sprintf("only %s from the Sun, the limit is %s", degrees(m.SunSep), degrees(l.Sun))
	case targets.CodeBelow:
		text = "below the horizon"
	case targets.CodeAltitude:
		text = fmt.Sprintf("altitude %s, the limit is %s", degrees(m.Apparent), degrees(l.MinAltitude))
	case targets.CodeHorizon:
		text = fmt.Sprintf("behind the site's horizon, %s high at azimuth %s",
			degrees(horizonAt(sortedHorizon(l.Horizon), m.Place.Az)), degrees(m.Place.Az))
	case targets.CodeHourAngle:
		text = fmt.Sprintf("hour angle %+.1f h, the limits are %+.1f and %+.1f h",
			m.Place.HourAngle.Hours(), l.HourAngleH[0], l.HourAngleH[1])
	case targets.CodeDeclination:
		text = fmt.Sprintf("declination %s, the limits are %+.0f and %+.0f deg",
			degrees(m.Place.Dec), l.DeclinationDeg[0], l.DeclinationDeg[1])
	case targets.CodeZenith:
		text = fmt.Sprintf("too near the zenith: altitude %s, the limit is %s", degrees(m.Apparent), degrees(Top(l, s.Night.Site.Lat)))
	case targets.CodeMoon:
		text = fmt.Sprintf("only %s from the Moon, the limit is %s", degrees(m.MoonSep), degrees(l.Moon))
	case targets.CodeWind:
		text = "in the sector of the wind"
	case targets.CodeCloud:
		text = "in the sector of cloud"
	case targets.CodeWindow:
		text = "outside the hours allocated tonight"
	case targets.CodeInstrument:
		text = m.Course.NotMounted + " is not mounted tonight"
	case targets.CodeSeeing:
		text = fmt.Sprintf("seeing %.1f arcsec, the request wants %.1f", s.Night.seeing(), m.Course.asked.MaxSeeingArcsec.Value)
	case targets.CodeSky:
		text = fmt.Sprintf("the sky is %s, the request wants %.1f mag per square arcsec or darker", m.Sky.words(), m.Course.asked.SkyAtLeast.Value)
	case targets.CodeExtinction:
		text = hazeWords(s.Night, m.Course.asked)
	case targets.CodeSaturates, targets.CodeTooFaint:
		text = m.exposureWords(b.Code)
	case targets.CodeClosed:
		text = "the dome is closed"
	default:
		text = string(b.Code)
	}
	return text + ", " + untilWords(s.Instant, b.Until)
}

// degrees writes an angle for a sentence.
func degrees(a astro.Angle) string { return fmt.Sprintf("%.1f deg", math.Round(a.Deg()*10)/10) }

// untilWords writes when something ends.
func untilWords(at astro.Instant, then *astro.Instant) string {
	if then == nil {
		return "not again this night"
	}
	return "until " + then.UTC().Round(time.Minute).Format("15:04") + " UTC"
}
