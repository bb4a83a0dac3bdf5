package kit

import (
	"fmt"
	"math"
	"strconv"
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
)

// BlockedWord says why a target cannot be taken and when that ends.
func BlockedWord(m *moment.Moment) string {
	open := m.NextOpen()
	reason := FirstReason(m)
	if open == nil {
		if len(m.Course.Can) == 0 {
			return reason + "; not tonight"
		}
		return reason + "; no more tonight"
	}
	return reason + "; from " + Clock(*open)
}

// Clock writes hours and minutes of UTC, rounded.
func Clock(t astro.Instant) string { return t.UTC().Round(time.Minute).Format("15:04") }

var shortReasons = map[targets.Code]string{
	targets.CodeDaylight: "too bright", targets.CodeSun: "near the Sun", targets.CodeBelow: "below horizon",
	targets.CodeAltitude: "too low", targets.CodeHorizon: "behind the horizon", targets.CodeZenith: "near the zenith",
	targets.CodeHourAngle: "hour angle", targets.CodeDeclination: "declination", targets.CodeMoon: "near the Moon",
	targets.CodeWind: "wind", targets.CodeWindow: "not our hours", targets.CodeClosed: "closed",
	targets.CodeInstrument: "not mounted", targets.CodeCloud: "cloud", targets.CodeSeeing: "seeing", targets.CodeSky: "sky too bright",
	targets.CodeExtinction: "not clear", targets.CodeSaturates: "saturates", targets.CodeTooFaint: "too faint",
}

// FirstReason shortens the most telling block for a list.
func FirstReason(m *moment.Moment) string {
	for _, b := range m.BlockedBy {
		return ShortReason(b.Code)
	}
	return "blocked"
}

// ShortReason is a limit in a word or two.
func ShortReason(c targets.Code) string {
	if w, ok := shortReasons[c]; ok {
		return w
	}
	return string(c)
}

// StageWord is the judgement with its probability in per cent, 99 at most;
// two codes merged go without.
func StageWord(v *stage.Verdict) string {
	word := v.Best
	switch v.Best {
	case targets.Undecided:
		word = "undec"
	case targets.Merged:
		return v.Best
	case "":
		return ""
	}
	return fmt.Sprintf("%-5s %2.0f", word, math.Min(100*v.Sureness(), 99))
}

// QuantityWord is a quantity with its interval and unit, to as many places as
// the interval deserves.
func QuantityWord(q *stage.Quantity) string {
	known := !math.IsNaN(q.Lo) && !math.IsNaN(q.Hi)
	width := math.Abs(q.Value) / 30
	if known && q.Hi > q.Lo {
		width = q.Hi - q.Lo
	}
	places := 0
	if width > 0 && !math.IsInf(width, 0) {
		places = min(max(1-int(math.Floor(math.Log10(width))), 0), 6)
	}
	num := func(v float64) string {
		if a := math.Abs(v); a >= 1e6 || a > 0 && a < 1e-4 {
			return fmt.Sprintf("%.3g", v)
		}
		return fmt.Sprintf("%.*f", places, v)
	}
	s := num(q.Value)
	if known {
		s += "  " + num(q.Lo) + ".." + num(q.Hi)
	}
	if q.Unit != "" {
		s += " " + q.Unit
	}
	return s
}

// ExpectWord is the expected brightness: band, value, interval.
func ExpectWord(f *light.Forecast) string {
	switch {
	case f.SB != nil:
		return fmt.Sprintf("%-2s%5.1f %5.1f/sq\"", f.Band, f.Mag.Mags(), f.SB.Value.MagArcsec2())
	case !f.Known:
		return "not known"
	case f.Phase != nil && f.Phase.Status == light.PhaseUnknown:
		return fmt.Sprintf("%-2s  any %.1f..%.1f", f.Band, f.Lo.Mags(), f.Hi.Mags())
	}
	return fmt.Sprintf("%-2s%5.1f %.1f..%.1f", f.Band, f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags())
}

var shortestReasons = map[targets.Code]string{
	targets.CodeSun: "near Sun", targets.CodeBelow: "down", targets.CodeAltitude: "too low", targets.CodeHorizon: "horizon",
	targets.CodeZenith: "zenith", targets.CodeHourAngle: "HA limit", targets.CodeDeclination: "dec limit",
	targets.CodeMoon: "by Moon", targets.CodeWindow: "not ours",
}

// ReasonShort is a limit in at most ten columns.
func ReasonShort(c targets.Code) string {
	if w, ok := shortestReasons[c]; ok {
		return w
	}
	return ShortReason(c)
}

// BlockedShort is BlockedWord in twenty columns.
func BlockedShort(m *moment.Moment) string {
	reason := FirstReason(m)
	if len(m.BlockedBy) > 0 {
		if w, ok := shortestReasons[m.BlockedBy[0].Code]; ok {
			reason = w
		}
	}
	switch open := m.NextOpen(); {
	case open != nil:
		return reason + " till " + Clock(*open)
	case len(m.Course.Can) > 0:
		return reason + ", no more"
	case reason == "not mounted":
		return reason
	}
	return reason + " all night"
}

// BlockedEnd is when a block ends in ten columns.
func BlockedEnd(m *moment.Moment) string {
	switch open := m.NextOpen(); {
	case open != nil:
		return "till " + Clock(*open)
	case len(m.Course.Can) > 0:
		return "no more"
	}
	return "all night"
}

// Left writes a duration as hours and minutes.
func Left(d time.Duration) string {
	minutes := int(d.Round(time.Minute).Minutes())
	if minutes < 60 {
		return strconv.Itoa(minutes) + "m"
	}
	rest := strconv.Itoa(minutes % 60)
	if len(rest) < 2 {
		rest = "0" + rest
	}
	return strconv.Itoa(minutes/60) + "h" + rest
}

// Until writes how long it is until something: minutes under an hour, hours
// and minutes under two days, then days; "past" for what was.
func Until(d time.Duration) string {
	switch {
	case d < -30*time.Second:
		return "past"
	case d < 48*time.Hour:
		return Left(max(d, 0))
	}
	return strconv.Itoa(int(math.Round(d.Hours()/24))) + " d"
}

// Stamp writes a time as finely as it is known, by its sigma in seconds: the
// date alone, to the minute, or to the second.
func Stamp(t time.Time, sigmaS float64) string {
	switch {
	case !(sigmaS < 86400):
		return t.Format("2006-01-02")
	case sigmaS > 1800:
		return t.Round(time.Minute).Format("2006-01-02 15:04 UTC")
	}
	return t.Round(time.Second).Format("2006-01-02 15:04:05 UTC")
}

// Duration writes seconds in the unit that suits them.
func Duration(s float64) string {
	switch {
	case s < 300:
		return fmt.Sprintf("%.0f s", s)
	case s < 5400:
		return fmt.Sprintf("%.0f min", s/60)
	case s < 86400:
		return fmt.Sprintf("%.1f h", s/3600)
	}
	return fmt.Sprintf("%.0f d", s/86400)
}

// Sense is the sign of a direction of motion: + rising, - sinking.
func Sense(rising bool) string {
	if rising {
		return "+"
	}
	return "-"
}
