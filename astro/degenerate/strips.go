package degenerate

import (
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/astro/numeric"
)

// Strip is a range of temperature and gravity in which stars pulsate.
type Strip struct {
	Name         string // "DAV", "DBV", "GW Vir", "ELMV", "sdBV p", "sdBV g"
	Words        string
	Needs        string  // the surface that it holds for
	RedK, BlueK  float64 // cool and hot edge at the star's gravity
	LoLogG       float64 // gravities for which the edges hold, of cm/s²
	HiLogG       float64
	ShortestS    float64 // periods, s
	LongestS     float64
	AmplitudeMma string // usual amplitudes, thousandths; empty where not known
	Source       string // of the limits, in words for the user
	FromMemory   bool   // the limits were compared with no publication
}

// Names of the strips.
const (
	StripDAV   = "DAV"
	StripDBV   = "DBV"
	StripGWVir = "GW Vir"
	StripELMV  = "ELMV"
	StripSdBp  = "sdBV p"
	StripSdBg  = "sdBV g"
)

// ZZCetiEdges returns the edges of the strip of pulsating hydrogen white dwarfs.
//
//	blue: T = (log g - 0.52431) / 5.96923e-4 K     red: T = (log g + 0.53039) / 8.06630e-4 K
//
// Given:
//   - logG: 7.5 to 8.75, of cm/s², from models of convection in three
//     dimensions.
//
// Returns:
//   - the hot and the cool edge, K, and whether logG is in range.
//
// Notes:
//  1. Coefficients from memory, not checked against a publication. One-
//     dimensional scales put the edges elsewhere: 10 850 to 11 800 K was found
//     in one survey. Do not mix scales.
//
// Source: [cite.TremblayEtAl2015].
//
// Checked: TestZZCetiEdges.
func ZZCetiEdges(logG float64) (blueK, redK float64, ok bool) {
	if !finite(logG) {
		return math.NaN(), math.NaN(), false
	}
	return (logG - 0.52431) / 5.96923e-4, (logG + 0.53039) / 8.06630e-4, logG >= 7.5 && logG <= 8.75
}

// Strips lists every strip with its edges at a gravity.
//
// Given:
//   - logG: of cm/s²; only the edges of the DAV depend on it.
//
// Notes:
//  1. The DBV limits are for pure helium; hydrogen too little to be seen moves
//     them to 21 800 to 24 700 K. Models in three dimensions do not change them,
//     [cite.CukanovaiteEtAl2018].
//
// Source: [cite.TremblayEtAl2015], [cite.BeauchampEtAl1999]; the other limits
// from memory, not checked against a publication, and marked so.
//
// Checked: TestStrips.
func Strips(logG float64) []Strip {
	blue, red, _ := ZZCetiEdges(logG)
	memory := func(work string) string {
		if work == "" {
			return FromMemory
		}
		return work + "; " + FromMemory
	}
	return []Strip{
		{StripDAV, "pulsating hydrogen white dwarf, ZZ Ceti star", "hydrogen", red, blue, 7.5, 8.75, 70, 1400, "1-300",
			memory(cite.TremblayEtAl2015.String()), true},
		{StripDBV, "pulsating helium white dwarf, V777 Her star", "helium", 22400, 27800, 7.5, 8.75, 200, 1000, "",
			cite.BeauchampEtAl1999.String(), false},
		{StripGWVir, "pulsating hot pre-white dwarf, GW Vir star", "no hydrogen", 75000, 170000, 5.5, 8, 300, 5000, "", memory(""), true},
		{StripELMV, "pulsating white dwarf of extremely low mass", "hydrogen", 7800, 10000, 5, 6.6, 1200, 6200, "", memory(""), true},
		{StripSdBp, "hot subdwarf pulsating in pressure modes", "subdwarf", 28000, 36000, 5.2, 6.2, 80, 600, "", memory(""), true},
		{StripSdBg, "hot subdwarf pulsating in gravity modes", "subdwarf", 22000, 30000, 5.2, 6.2, 2000, 14000, "", memory(""), true},
	}
}

// Chance returns the probability that a star's temperature lies in the strip.
//
// Given:
//   - teffK, errK: the temperature and one sigma; an error of 0 gives 0 or 1.
//   - logG: of cm/s².
//
// Returns:
//   - 0 to 1; 0 outside the strip's gravities, and for what is not a number.
//
// Notes:
//  1. Not every star in a strip varies to a given limit, and the surface must be
//     the one in Needs.
//
// Checked: TestStrips.
func (s Strip) Chance(teffK, errK, logG float64) float64 {
	if !positive(teffK) || !finite(errK, logG) || errK < 0 || logG < s.LoLogG || logG > s.HiLogG {
		return 0
	}
	if errK == 0 {
		if teffK >= s.RedK && teffK <= s.BlueK {
			return 1
		}
		return 0
	}
	return numeric.NormalCDF((s.BlueK-teffK)/errK) - numeric.NormalCDF((s.RedK-teffK)/errK)
}

// ZZCetiPeriod returns the mean period to expect of a ZZ Ceti star.
//
//	P = 200 s + 1000 s (T_blue - T) / (T_blue - T_red)
//
// Given:
//   - teffK, logG: within the strip of [ZZCetiEdges].
//
// Returns:
//   - s, with the scatter of 200 s as one sigma, never under 70 s; false
//     outside the strip.
//
// Notes:
//  1. The rule is common practice, without a source; that the mean period
//     changes by about 1300 s across the strip is published.
//
// Source: [cite.MukadamEtAl2006], abstract.
//
// Checked: TestZZCetiPeriod.
func ZZCetiPeriod(teffK, logG float64) (astro.Interval, bool) {
	blue, red, ok := ZZCetiEdges(logG)
	if !ok || !(teffK >= red && teffK <= blue) {
		return astro.Interval{}, false
	}
	const shortest, scatter = 70.0, 200.0
	p := 200 + 1000*(blue-teffK)/(blue-red)
	return span(math.Max(shortest, p-scatter), p, p+scatter), true
}

// LongestCadence returns the longest exposure with readout that follows a
// pulsation, an eighth of the period.
//
// Given:
//   - periodS: the shortest period expected, s.
//
// Returns:
//   - 0 for a period that is not positive.
//
// Source: common practice, no source.
//
// Checked: TestCadence.
func LongestCadence(periodS float64) time.Duration { return seconds(periodS / 8) }

// ShortestRun returns how long to stay on a pulsating star: three periods, and
// at least two hours to part beating modes.
//
// Given:
//   - periodS: the longest period expected, s.
//
// Source: common practice, no source.
//
// Checked: TestCadence.
func ShortestRun(periodS float64) time.Duration {
	return max(2*time.Hour, seconds(3*periodS))
}

// seconds makes a duration of what is positive and less than a year.
func seconds(s float64) time.Duration {
	if !(s > 0) || s > yearS {
		return 0
	}
	return time.Duration(s * float64(time.Second))
}

// AmplitudeKept returns which part of a pulsation's amplitude an exposure
// leaves.
//
//	sin(π x) / (π x)     x = exposure / period
//
// Given:
//   - exposureS, periodS: s, without the readout.
//
// Returns:
//   - 1 for no exposure, 0 at a whole period; not a number for a period that is
//     not positive or an exposure that is negative.
//
// Source: geometry: the mean of a sine over the exposure.
//
// Checked: TestCadence.
func AmplitudeKept(exposureS, periodS float64) float64 {
	x := exposureS / periodS
	switch {
	case !positive(periodS) || !(x >= 0):
		return math.NaN()
	case x == 0:
		return 1
	}
	return math.Sin(math.Pi*x) / (math.Pi * x)
}
