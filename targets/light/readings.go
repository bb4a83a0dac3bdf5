package light

import (
	"fmt"
	"math"
	"sort"

	"evenfall/astro"
	"evenfall/astro/bands"
	"evenfall/astro/elements"
	"evenfall/targets"
)

// reading is a measured magnitude made ready: its date in UTC, its band by one
// name, and why it is set aside where it is.
type reading struct {
	targets.Magnitude
	at     astro.Instant
	jd     float64 // JD UTC
	band   targets.Band
	visual bool
	more   float64 // error that a photographic magnitude taken for B has beside its own, mag
	why    string  // set aside; "": not
}

// The magnitudes that a star may have; anything beyond is a slip.
const brightest, faintest = -2.0, 25.0

// The errors that a magnitude is taken to have.
const (
	visualErr = 0.15 // of an estimate by eye whose error is not given
	leastErr  = 0.05
	worstErr  = 5.0 // an error beyond is none
	sameDateD = 1e-5
)

// photographicErr is what a photographic magnitude taken for B may be off by
// beside its own error, mag. A choice.
const photographicErr = 0.3

// photographicNames are those of magnitudes on blue plates.
var photographicNames = map[targets.Band]bool{"p": true, "pg": true, "pg.": true, "photographic": true}

// visual estimates and V share one model.
var visualNames = map[targets.Band]bool{"v": true, "vis": true, "vis.": true, "Vis": true, "Vis.": true, "visual": true, "Visual": true}

// sigma is the error that counts.
func (r *reading) sigma() float64 {
	if r.visual {
		return math.Max(r.Err, visualErr)
	}
	return math.Hypot(math.Max(r.Err, leastErr), r.more)
}

// readingsOf looks magnitudes over.
//
// Returns:
//   - all of them, oldest first; why names the fault of those set aside: no
//     date, outside -2 to 25, an unknown band, the same as another.
//
// Notes:
//  1. Dates are carried to JD UTC by their time scale; without one they are
//     JD UTC. The light-time is that to the Earth's centre.
//  2. An error that is none is taken as not given.
//  3. A photographic magnitude counts as one in B, with 0.3 mag more of error,
//     where the list has the extremes in B or photographic; interacting
//     binaries with photographic extremes are forecast in that band itself.
func readingsOf(t *targets.Target, mags []targets.Magnitude) []reading {
	if len(mags) == 0 {
		return nil
	}
	sight := elements.Sight{Star: starOf(t)}
	home := bandOf(t.Var.MagBand)
	// states keep photographic extremes as they are, and their magnitudes with them
	asBlue := home == "B" || home == "p" && t.Kind != targets.Interacting
	out := make([]reading, len(mags))
	for i, m := range mags {
		out[i] = read(&sight, m)
		if r := &out[i]; r.band == "p" && asBlue {
			r.band, r.more = "B", photographicErr
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return before(out[i].jd, out[j].jd) })
	for i := range out {
		for k := i - 1; k >= 0 && out[i].why == "" && out[i].jd-out[k].jd < sameDateD; k-- {
			if o := &out[k]; o.why == "" && o.band == out[i].band && o.Mag == out[i].Mag && o.Limit == out[i].Limit {
				out[i].why = "given twice: the same date, band and magnitude"
			}
		}
	}
	return out
}

// before orders dates; what is no number comes first.
func before(a, b float64) bool { return a < b || math.IsNaN(a) && !math.IsNaN(b) }

func read(sight *elements.Sight, m targets.Magnitude) reading {
	r := reading{Magnitude: m, band: m.Band, jd: math.NaN()}
	if !(r.Err > 0 && r.Err < worstErr) {
		r.Err = 0
	}
	if visualNames[m.Band] {
		r.band, r.visual = "V", true
	}
	if photographicNames[m.Band] {
		r.band = "p"
	}
	scale := elements.JDUTC
	if m.TimeScale != "" {
		var err error
		if scale, err = elements.ParseScale(m.TimeScale); err != nil {
			r.why = err.Error()
			return r
		}
	}
	at, err := sight.Instant(m.JD, scale)
	if err != nil {
		r.why = fmt.Sprintf("%g is no date of 1860 to 2150 in %s", m.JD, scale)
		return r
	}
	r.at, r.jd = at, at.JDUTC()
	_, known := bands.Of(bands.Band(r.band))
	switch {
	case !(m.Mag >= brightest && m.Mag <= faintest):
		r.why = fmt.Sprintf("magnitude %.4g lies outside %g to %g", m.Mag, brightest, faintest)
	case !known && r.band != "p":
		r.why = fmt.Sprintf("band %.20q is not known", string(m.Band))
	}
	return r
}

// verdict is what a forecast made of a reading.
type verdict struct {
	used bool
	p    float64 // that it is no outlier
	why  string  // not used
}

// in returns the places of the good readings of a band among the first n.
func in(list []reading, n int, band targets.Band) []int {
	var out []int
	for i := range list[:n] {
		if list[i].why == "" && list[i].band == band {
			out = append(out, i)
		}
	}
	return out
}

// otherBand is the verdict on a reading that a forecast in a band passes over.
func otherBand(band targets.Band) verdict {
	return verdict{why: fmt.Sprintf("the forecast is in %s, and magnitudes of different bands are never mixed", band)}
}
