package wander

import "math"

// The words for how well a phase is known.
const (
	PhaseKnown     = "known"
	PhaseUncertain = "uncertain"
	PhaseUnknown   = "unknown"
)

const (
	// knownFrom and unknownBelow bound the words by the length of the resultant:
	// below the second a forecast was no better than a constant.
	knownFrom, unknownBelow = 0.9, 0.6
	// maximumScatter is how far true maxima lie from phase 0, cycle; the middle
	// of the 0.03 to 0.05 measured.
	maximumScatter = 0.04
	gapCopies      = 9
	gapReach       = 2.4 // standard deviations, of the outermost copies
	gapFrom        = 1.0 // cycles since the last magnitude
)

// Status puts the length of a phase's resultant into a word.
//
//	R < 0.6 unknown, R <= 0.9 uncertain, above known
//
// Given:
//   - r: R, 0 (any phase) to 1 (one phase); not a number counts as 0.
//
// Notes:
//  1. On 94 Miras with R below 0.6 the central value was off by 1.3 mag rms, no
//     better than a constant; from 0.6 to 0.9 by 0.65 to 0.91; above 0.95 by 0.43.
//
// Source: this project's measurement on ASAS-3, [cite.Pojmanski2002].
//
// Checked: TestStatus.
func Status(r float64) string {
	switch {
	case r > knownFrom:
		return PhaseKnown
	case r >= unknownBelow:
		return PhaseUncertain
	}
	return PhaseUnknown
}

// EpochSigma returns the standard deviation of a phase computed from catalogue
// elements, where it is not lost altogether.
//
//	sd^2 = 0.030^2 + 0.012^2 N + (0.0048 N)^2     cycles
//
// Given:
//   - cycles: N, since the epoch, either way.
//
// Returns:
//   - sd in cycles; besides, 29 per cent of such phases are worth nothing.
//
// Notes:
//  1. The error of the period, not the random walk, dominates after ten cycles.
//
// Source: [cite.EddingtonPlakidis1929] for the growth; the constants are this
// project's maximum likelihood on 336 Miras of ASAS-3, [cite.Pojmanski2002].
//
// Checked: TestEpochSigma; TestEpochResiduals, against what such stars did.
func EpochSigma(cycles float64) float64 {
	p := func(name string) float64 { return average("Mira", "catalogue_phase", name) }
	n := math.Abs(cycles)
	first, walk, drift := p("s0"), p("e_per_cycle"), p("sP_over_P")
	return math.Sqrt(first*first + walk*walk*n + drift*drift*n*n)
}

// cyclesAt returns the cycles since the catalogue's epoch; NaN without one.
func (m *model) cyclesAt(jd float64) float64 {
	if !m.elements.HasEpoch {
		return math.NaN()
	}
	return (jd - m.elements.EpochMaxJD) / m.periodD
}

// epochLnDensity returns the log density of the phase at a date, as the
// catalogue's epoch has it, at the grid's phases.
//
//	p(phi) = 0.71 wrappedNormal(phi - frac N; sd(N)) + 0.29
func (m *model) epochLnDensity(jd float64) [nPhase]float64 {
	var out [nPhase]float64
	cycles := m.cyclesAt(jd)
	sd := EpochSigma(cycles)
	// From half a cycle on a wrapped normal is flat to 2 per cent.
	if !(sd < 0.6) {
		return out
	}
	lost := average("Mira", "catalogue_phase", "uniform_fraction")
	centre := cycles - math.Floor(cycles)
	for i := range out {
		sum := 0.0
		for turn := -4.0; turn <= 4; turn++ {
			z := (gridPhase(i) - centre + turn) / sd
			sum += math.Exp(-z * z / 2)
		}
		out[i] = math.Log((1-lost)*sum/(sd*math.Sqrt(2*math.Pi)) + lost)
	}
	return out
}

// gridPhase is the phase of a node, cycles.
func gridPhase(i int) float64 { return (float64(i) + 0.5) / nPhase }

// shift is a displacement of the phase, with its weight.
type shift struct{ cycles, weight float64 }

// gapShifts returns how the phase spreads in a long gap without magnitudes.
//
//	gap of G > 1 cycles: sd = 0.015 sqrt(G) cycle, nine copies at -2.4 to 2.4 sd
//
// Source: this project's measurement; 0.015 was chosen on the very runs that
// bear it out, so it is a little flattered.
//
// Checked: TestGapShifts.
func (f *Filter) gapShifts(jd float64) []shift {
	gap := math.Abs(jd-f.lastJD) / f.m.periodD
	if !(gap > gapFrom) {
		return []shift{{0, 1}}
	}
	sd := average("Mira", "gap_phase_spread", "sd per sqrt(cycle)") * math.Sqrt(gap)
	out := make([]shift, gapCopies)
	sum := 0.0
	for i := range out {
		z := gapReach * (2*float64(i)/(gapCopies-1) - 1)
		out[i] = shift{z * sd, math.Exp(-z * z / 2)}
		sum += out[i].weight
	}
	for i := range out {
		out[i].weight /= sum
	}
	return out
}

// wrap brings a phase difference to -0.5 to 0.5 cycles.
func wrap(cycles float64) float64 { return cycles - math.Round(cycles) }
