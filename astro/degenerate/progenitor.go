package degenerate

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/cite"
)

// Relation ties the mass that a star was born with to that of its white dwarf.
type Relation struct {
	Name   string
	Source cite.Ref
	pieces []piece
}

// piece is Mf = slope Mi + zero from lo to hi, solar masses.
type piece struct{ slope, zero, lo, hi float64 }

// CummingsMIST is the relation to use where nothing else is said.
//
//	Mf = 0.080 Mi + 0.489 (0.83-2.85);  0.187 Mi + 0.184 (2.85-3.60);  0.107 Mi + 0.471 (3.60-7.20)
//
// Source: [cite.CummingsEtAl2018]; agrees in three printings.
//
// Checked: TestRelations.
func CummingsMIST() Relation {
	return Relation{"Cummings et al. 2018, MIST", cite.CummingsEtAl2018, []piece{
		{0.080, 0.489, 0.83, 2.85}, {0.187, 0.184, 2.85, 3.60}, {0.107, 0.471, 3.60, 7.20}}}
}

// CummingsPARSEC is the same from other tracks.
//
//	Mf = 0.0873 Mi + 0.476 (0.87-2.80);  0.181 Mi + 0.210 (2.80-3.65);  0.0835 Mi + 0.565 (3.65-8.20)
//
// Source: [cite.CummingsEtAl2018]; agrees in three printings.
//
// Checked: TestRelations.
func CummingsPARSEC() Relation {
	return Relation{"Cummings et al. 2018, PARSEC", cite.CummingsEtAl2018, []piece{
		{0.0873, 0.476, 0.87, 2.80}, {0.181, 0.210, 2.80, 3.65}, {0.0835, 0.565, 3.65, 8.20}}}
}

// Kalirai is the straight line of an older work, slope +-0.007, zero +-0.025.
//
//	Mf = 0.109 Mi + 0.394     1.1-6.5
//
// Source: [cite.KaliraiEtAl2008]; agrees in two printings.
//
// Checked: TestRelations.
func Kalirai() Relation {
	return Relation{"Kalirai et al. 2008", cite.KaliraiEtAl2008, []piece{{0.109, 0.394, 1.1, 6.5}}}
}

// RelationScatter is how far single white dwarfs lie from the relation, one
// sigma, solar masses.
//
// Source: [cite.CummingsEtAl2018].
const RelationScatter = 0.06

// leastSingle is the least mass that a single star leaves within 12 Gyr.
const leastSingle = 0.55

// Range returns the initial masses for which a relation was made.
func (r Relation) Range() (loMsun, hiMsun float64) {
	if len(r.pieces) == 0 {
		return math.NaN(), math.NaN()
	}
	return r.pieces[0].lo, r.pieces[len(r.pieces)-1].hi
}

// Final returns the mass of the white dwarf that a star leaves, solar masses;
// [ErrRelation] outside the range.
//
// Checked: TestRelations.
func (r Relation) Final(initialMsun float64) (float64, error) {
	for _, p := range r.pieces {
		if initialMsun >= p.lo && initialMsun <= p.hi {
			return p.slope*initialMsun + p.zero, nil
		}
	}
	return math.NaN(), ErrRelation
}

// Initial returns the mass that a white dwarf's star was born with, solar
// masses, as one figure for computing with; never show it without the interval
// of [Relation.Progenitor].
//
// Notes:
//  1. Where pieces do not meet to the last digit, the end of the piece below.
//
// Checked: TestRelations.
func (r Relation) Initial(finalMsun float64) (float64, error) {
	for k, p := range r.pieces {
		lo, hi := p.slope*p.lo+p.zero, p.slope*p.hi+p.zero
		switch {
		case k == 0 && finalMsun < lo:
			return math.NaN(), ErrRelation
		case finalMsun <= hi:
			return math.Max(p.lo, (finalMsun-p.zero)/p.slope), nil
		}
	}
	return math.NaN(), ErrRelation
}

// Progenitor returns the mass that a white dwarf's star was born with.
//
// Given:
//   - finalMsun: mass of the white dwarf, 0.55 or more.
//   - errMsun: its error; the scatter of 0.06 is added to it.
//
// Returns:
//   - the interval of one sigma, solar masses; an end that passes the
//     relation's range stands at the end of the range, and notes say so.
//   - [ErrNoSingleStar] below 0.55, [ErrRelation] above the range,
//     [ErrNotANumber].
//
// Notes:
//  1. Below 2.85 the initial mass changes 12 times as fast as the final: 0.60
//     +- 0.03 is 1.4 +- 0.4 even without the scatter.
//
// Source: as the relation's.
//
// Checked: TestProgenitor.
func (r Relation) Progenitor(finalMsun, errMsun float64) (astro.Interval, []string, error) {
	if !finite(finalMsun, errMsun) || errMsun < 0 || len(r.pieces) == 0 {
		return astro.Interval{}, nil, ErrNotANumber
	}
	if finalMsun < leastSingle {
		return astro.Interval{}, nil, ErrNoSingleStar
	}
	lo, hi := r.Range()
	bottom, _ := r.Final(lo)
	if top, _ := r.Final(hi); finalMsun > top {
		return astro.Interval{}, nil, ErrRelation
	}
	var notes []string
	invert := func(final float64, end string) float64 {
		m, err := r.Initial(final)
		if err == nil {
			return m
		}
		at := hi
		if final < bottom {
			at = lo
		}
		notes = append(notes, fmt.Sprintf("the %s initial mass lies beyond the relation, which ends at %.2f", end, at))
		return at
	}
	sd := math.Hypot(errMsun, RelationScatter)
	out := span(invert(finalMsun-sd, "least"), invert(finalMsun, "likeliest"), invert(finalMsun+sd, "greatest"))
	return out, notes, nil
}

// oldest is what no age passes, years: the age of the Universe.
const oldestYr = 13.8e9

// TotalAge returns the age of a white dwarf since its star was born.
//
//	t = t(cooling) + lifetime(initial mass)
//
// Given:
//   - finalMsun, errMsun: as for [Relation.Progenitor].
//   - coolingYr: from a fit, a valid interval.
//   - lifetimeYr: from birth to the end of the giant branches by initial mass,
//     in years; asked only within the relation's range.
//
// Returns:
//   - the interval of one sigma, years; ends past 13.8 Gyr stand there, and
//     notes say so.
//   - errors as [Relation.Progenitor]; [ErrNotANumber] for a cooling age or a
//     lifetime that is not usable.
//
// Notes:
//  1. For 0.6 solar masses it is uncertain by a factor of 2 to 3. Never show the
//     middle alone.
//  2. The two parts are taken as independent.
//
// Source: as the relation's.
//
// Checked: TestTotalAge.
func (r Relation) TotalAge(finalMsun, errMsun float64, coolingYr astro.Interval, lifetimeYr func(massMsun float64) float64) (astro.Interval, []string, error) {
	born, notes, err := r.Progenitor(finalMsun, errMsun)
	if err != nil {
		return astro.Interval{}, nil, err
	}
	if !coolingYr.Valid() || coolingYr.Lo < 0 || math.IsInf(coolingYr.Hi, 0) || lifetimeYr == nil {
		return astro.Interval{}, nil, ErrNotANumber
	}
	short, middle, long := lifetimeYr(born.Hi), lifetimeYr(born.Mid), lifetimeYr(born.Lo)
	if !positive(short, middle, long) || short > middle || middle > long {
		return astro.Interval{}, nil, ErrNotANumber
	}
	mid := coolingYr.Mid + middle
	lo := mid - math.Hypot(middle-short, coolingYr.Mid-coolingYr.Lo)
	hi := mid + math.Hypot(long-middle, coolingYr.Hi-coolingYr.Mid)
	if hi > oldestYr {
		notes = append(notes, "the greatest age passes that of the Universe, 13.8 Gyr, and stands there")
	}
	return span(math.Min(lo, oldestYr), math.Min(mid, oldestYr), math.Min(hi, oldestYr)), notes, nil
}
