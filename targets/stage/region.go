package stage

import (
	"math"

	"evenfall/astro/numeric"
	"evenfall/targets"
)

// region is where the stars of a stage stand that the grid of tracks does not
// hold: even in log Teff between two temperatures, around a level of log L that
// may slope, with a spread.
type region struct {
	stage        targets.Stage
	cool, hot    float64 // log10 K
	level, slope float64 // log10 Lsun at the cool end; dex per dex of temperature
	spread       float64 // dex
	number       float64 // in space, for each star of the red clump
}

// regions lists them.
//
// Source: numbers and levels common practice, no source, but for the horizontal
// branch ([cite.MuravevaEtAl2018]) and the hot subdwarfs ([cite.GeierEtAl2019]).
var regions = []region{
	{targets.MS, 4.15, 4.60, 3.4, 4.0, 0.40, 0.01},  // above the grid's masses
	{targets.HB, 3.76, 4.00, 1.66, 0, 0.12, 0.012},  // RR Lyrae gap and beside it
	{targets.HB, 4.00, 4.30, 1.62, -0.6, 0.15, .01}, // blue
	{targets.SDB, 4.30, 4.78, 1.30, 0.2, 0.30, 0.005},
	{targets.PAGB, 3.68, 4.48, 3.55, 0, 0.30, 2e-5},
	{targets.CSPN, 4.48, 5.30, 3.0, 0, 0.70, 1e-5},
	{targets.RSG, 3.53, 3.60, 4.85, 0, 0.35, 1e-4},
	{targets.RSG, 3.60, 4.80, 4.90, 0.4, 0.50, 1e-4}, // on its way across
	{targets.Dwarf, 3.55, 5.00, -4.60, 4, 0.25, 60},
	{targets.ACC, 3.60, 4.70, -1.5, 1.5, 1.2, 0.01},
	{targets.TPAGB, 3.35, 3.50, 3.65, 0, 0.35, 0.003}, // cooler than the tracks get
}

// density returns how many stars of the region stand at a place, per square
// dex, over all that are in it, as the place is known: to within its errors.
func (r *region) density(logT, logTErr, logL, logLErr float64) float64 {
	sd := math.Hypot(r.spread, math.Hypot(logLErr, r.slope*logTErr))
	d := (logL - r.level - r.slope*(math.Min(math.Max(logT, r.cool), r.hot)-r.cool)) / sd
	e := math.Hypot(logTErr, 0.01)
	within := numeric.NormalCDF((r.hot-logT)/e) - numeric.NormalCDF((r.cool-logT)/e)
	return numeric.NormalDensity(d) / sd * within / (r.hot - r.cool)
}
