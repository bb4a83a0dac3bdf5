package degenerate

import (
	"fmt"
	"math"

	"evenfall/astro"
)

// MergerTime returns how long gravitational waves take to merge two stars on a
// circle.
//
//	t = (5/256) c⁵ a⁴ / [G³ m1 m2 (m1 + m2)]     a³ = G (m1 + m2) P² / 4π²
//	  = 9.83e6 yr P(h)^(8/3) (m1 + m2)^(1/3) / (m1 m2)     solar masses
//
// Given:
//   - periodH: orbital period, hours.
//   - m1, m2: solar masses.
//
// Returns:
//   - years from now; not a number for what is not positive.
//
// Notes:
//  1. A circle; an eccentric orbit merges sooner.
//
// Source: [cite.Peters1964]; the constant follows from [cite.TiesingaEtAl2021]
// and [cite.IAU2015B3].
//
// Checked: TestMergerTime.
func MergerTime(periodH, m1, m2 float64) (years float64) {
	if !positive(periodH, m1, m2) {
		return math.NaN()
	}
	p := periodH * secondsInHour
	gm := sunGM * (m1 + m2)
	a := math.Cbrt(gm * p * p / (4 * math.Pi * math.Pi))
	c5 := math.Pow(lightMs, 5)
	return 5.0 / 256 * c5 * a * a * a * a / (sunGM * m1 * sunGM * m2 * gm) / yearS
}

// Of a supernova of type Ia by two white dwarfs.
const (
	iaMass       = 1.4    // solar masses together
	iaYr         = 13.6e9 // years left to merge
	iaSingleMass = 1.2    // of one that accretes
)

// Judgement says whether a star may end as a supernova of type Ia.
type Judgement struct {
	Candidate bool           // by the middle values
	MassMsun  astro.Interval // together, or of the one that accretes
	MergerYr  astro.Interval // not valid without a second star
	Words     string         // always "candidate" or "not a candidate", with the mass interval
}

// DoubleDegenerate judges two white dwarfs in a close orbit.
//
//	candidate: m1 + m2 > 1.4 and merger within 13.6 Gyr
//
// Given:
//   - m1, m2: solar masses, intervals of one sigma; a companion of which only
//     the least mass is known should have that as Lo.
//   - periodH: hours.
//
// Returns:
//   - the judgement; [ErrNotANumber].
//
// Notes:
//  1. Nobody has seen one of them explode: it is a candidate and nothing more,
//     with the interval of its mass.
//
// Source: the merger [cite.Peters1964]; the rule is common practice, no source.
//
// Checked: TestIaCandidates.
func DoubleDegenerate(m1, m2 astro.Interval, periodH float64) (Judgement, error) {
	if !m1.Valid() || !m2.Valid() || !positive(m1.Lo, m2.Lo, periodH) || !finite(m1.Hi, m2.Hi) {
		return Judgement{}, ErrNotANumber
	}
	mid := m1.Mid + m2.Mid
	j := Judgement{MassMsun: span(
		mid-math.Hypot(m1.Mid-m1.Lo, m2.Mid-m2.Lo), mid, mid+math.Hypot(m1.Hi-m1.Mid, m2.Hi-m2.Mid))}
	// Heavier stars merge sooner.
	j.MergerYr = span(MergerTime(periodH, m1.Hi, m2.Hi), MergerTime(periodH, m1.Mid, m2.Mid), MergerTime(periodH, m1.Lo, m2.Lo))
	j.Candidate = mid > iaMass && j.MergerYr.Mid < iaYr
	j.Words = fmt.Sprintf("%s: %s together, merger in %.2g yr (%.2g to %.2g)", candidate(j.Candidate),
		massWords(j.MassMsun, iaMass), j.MergerYr.Mid, j.MergerYr.Lo, j.MergerYr.Hi)
	return j, nil
}

// SingleDegenerate judges a white dwarf that takes matter from a star, as in
// recurrent novae.
//
//	candidate: M > 1.2
//
// Given:
//   - mass: solar masses, an interval of one sigma.
//
// Returns:
//   - the judgement, without a time; [ErrNotANumber].
//
// Source: common practice, no source.
//
// Checked: TestIaCandidates.
func SingleDegenerate(mass astro.Interval) (Judgement, error) {
	if !mass.Valid() || !positive(mass.Lo) || !finite(mass.Hi) {
		return Judgement{}, ErrNotANumber
	}
	j := Judgement{MassMsun: mass, Candidate: mass.Mid > iaSingleMass}
	j.Words = fmt.Sprintf("%s: accreting white dwarf of %s", candidate(j.Candidate), massWords(mass, iaSingleMass))
	return j, nil
}

func candidate(yes bool) string {
	if yes {
		return "type Ia candidate"
	}
	return "not a type Ia candidate"
}

// massWords writes a mass interval, and says so where it straddles the limit.
func massWords(m astro.Interval, limit float64) string {
	text := fmt.Sprintf("%.2f solar masses (%.2f to %.2f)", m.Mid, m.Lo, m.Hi)
	if m.Lo < limit && m.Hi > limit {
		text += fmt.Sprintf(", the limit of %.1f lies within the interval", limit)
	}
	return text
}

// LobeDensity returns the mean density of a star that just fills its Roche lobe.
//
//	ρ = 107 P(h)^-2 g/cm³
//
// Given:
//   - periodH: orbital period, hours.
//
// Returns:
//   - g/cm³; not a number for what is not positive.
//
// Notes:
//  1. Roche geometry for a donor lighter than its companion. The constant is
//     from memory, not checked against a publication.
//
// Checked: TestLobe.
func LobeDensity(periodH float64) (gCm3 float64) {
	if !positive(periodH) {
		return math.NaN()
	}
	return 107 / (periodH * periodH)
}

// LobePeriod returns the orbital period at which a star fills its Roche lobe.
//
//	P(h) = 8.75 √(R³/M)     solar units
//
// Given:
//   - radiusRsun, massMsun: of the donor.
//
// Returns:
//   - hours; not a number for what is not positive.
//
// Notes:
//  1. As [LobeDensity]: from memory, not checked against a publication.
//
// Checked: TestLobe.
func LobePeriod(radiusRsun, massMsun float64) (periodH float64) {
	if !positive(radiusRsun, massMsun) {
		return math.NaN()
	}
	return 8.75 * math.Sqrt(radiusRsun*radiusRsun*radiusRsun/massMsun)
}
