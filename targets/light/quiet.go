package light

import (
	"fmt"
	"math"
	"strings"

	"evenfall/targets"
	"evenfall/targets/light/wander"
)

// typicalDepth is how deep the eclipses of interacting binaries are and
// typicalDepthSD how much that spreads, mag, where nothing listed tells.
// Common practice, no source.
const typicalDepth, typicalDepthSD = 1.5, 1.0

// listedQuietSD is how far from quiescence a single listed magnitude of such a
// star is, mag. Common practice, no source.
const listedQuietSD = 0.5

// quietInside is by how much the classes put quiescence inside the faintest
// magnitude, mag: the middle of theirs.
const quietInside = 0.4

// outOfEclipse returns the faintest magnitude outside eclipse of a star whose
// faintest listed one is the middle of an eclipse.
//
// Returns:
//   - the level, its one sigma and words; ok false where the star is not known
//     to eclipse, and the faintest is what the classes take it for.
//
// Notes:
//  1. By the band itself where listed, else by G or BP as they are: between V, G
//     and BP of such blue stars lie some tenths, within the sigma.
//
// Source: depth common practice, no source.
//
// Checked: TestQuietOutOfEclipse.
func outOfEclipse(t *targets.Target, eclipse *timed, a, b float64) (mag, sd float64, words string, ok bool) {
	told := usable(t.Var.EclipseMin) && usable(t.Var.PeriodD)
	if !told && (eclipse == nil || !eclipsing.MatchString(t.Var.Type) && !strings.Contains(t.KindNote, "eclips")) {
		return b, 0, "", false
	}
	own := bandOf(t.Var.MagBand)
	order := []targets.Band{own, "V", "G", "BP"}
	if own == "B" || own == wander.BandPhotographic {
		order = []targets.Band{own, "B", "BP", "V", "G"}
	}
	for _, band := range order {
		if m := t.Mags[band]; usable(m) && m.Value > a && m.Value < b {
			return m.Value, listedQuietSD, fmt.Sprintf("; the faintest is mid-eclipse, quiescence as listed in %s, %.1f", band, m.Value), true
		}
	}
	mag = math.Max(b-typicalDepth, (a+b)/2)
	return mag, typicalDepthSD, fmt.Sprintf("; the faintest is mid-eclipse, quiescence taken %.1f mag brighter +- %.1f (common practice, no source)", b-mag, typicalDepthSD), true
}

// quieten puts the faint state of a class where the star is outside eclipse.
func quieten(list []state, mag, sd float64) {
	for k := range list {
		if list[k].name == "quiescence" || list[k].name == "low state" {
			list[k].mag, list[k].sd = mag, math.Max(list[k].sd, sd)
		}
	}
}

// eclipseOf returns how bright a star is in eclipse, by the faintest listed
// magnitude and what it is outside.
//
//	m = max(faintest, outside);  sd = min(0.5, depth/3), 0.03 at least
//
// Source: common practice, no source.
//
// Checked: TestQuietOutOfEclipse.
func eclipseOf(list []state, faint float64) (mag, sd float64) {
	best := 0
	for k := range list {
		if list[k].p > list[best].p {
			best = k
		}
	}
	out := list[best].mag
	mag = math.Max(faint, out)
	return mag, math.Max(math.Min(eclipseSD, (mag-out)/3), leastEclipseSD)
}

const leastEclipseSD = 0.03
