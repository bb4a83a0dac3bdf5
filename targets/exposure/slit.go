package exposure

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/astro/photon"
	"evenfall/targets"
)

// Pointing is where the telescope looks, and so how the sky turns there.
type Pointing struct{ Lat, Dec, HourAngle astro.Angle }

// siderealRate is how fast the hour angle grows, radians per second.
const siderealRate = 2 * math.Pi / 86164.0905

// At returns zenith distance and parallactic angle some seconds on.
//
//	q = atan2(sin H, tan φ cos δ - sin δ cos H)
//	cos z = sin φ sin δ + cos φ cos δ cos H
//
// Returns:
//   - z without refraction, 0 to 180 degrees; q from north through east, west of
//     the meridian positive.
//
// Source: [cite.UrbanSeidelmann2013].
//
// Checked: TestParallactic.
func (p Pointing) At(afterS float64) (zenith, parallactic astro.Angle) {
	h := p.HourAngle.Rad() + siderealRate*afterS
	sf, cf := p.Lat.Sin(), p.Lat.Cos()
	sd, cd := p.Dec.Sin(), p.Dec.Cos()
	q := math.Atan2(math.Sin(h)*cf, sf*cd-sd*cf*math.Cos(h))
	return astro.Rad(math.Acos(math.Max(-1, math.Min(1, sf*sd+cf*cd*math.Cos(h))))), astro.Rad(q)
}

// parsePA reads the position angle of a request: degrees with fixed true.
func parsePA(text string) (deg float64, fixed bool, err error) {
	switch t := strings.ToLower(strings.TrimSpace(text)); t {
	case "", "parallactic", "any":
		return 0, false, nil
	default:
		v, err := strconv.ParseFloat(t, 64)
		if err != nil || !(math.Abs(v) <= 3600) {
			return 0, false, fail(targets.CodeInstrument, "position_angle", "write parallactic, any, or degrees from north through east", "position angle %q cannot be read", text)
		}
		return v, true, nil
	}
}

// half brings an angle to 0 to 180 degrees, as a slit has no ends.
func half(deg float64) float64 {
	deg = math.Mod(deg, 180)
	if deg < 0 {
		deg += 180
	}
	return deg
}

// positionAngle says how the slit is to stand; fixed: other than parallactic.
func (w *work) positionAngle() (targets.Measure, bool, error) {
	deg, fixed, err := parsePA(w.s.Goal.PA)
	if err != nil {
		return targets.Measure{}, false, err
	}
	if fixed {
		return targets.Known(half(deg)), true, nil
	}
	if w.s.Pointing == nil || strings.EqualFold(strings.TrimSpace(w.s.Goal.PA), "any") {
		return targets.Measure{}, false, nil
	}
	_, q := w.s.Pointing.At(0)
	return targets.Known(half(q.Deg())), false, nil
}

// SlitPlan is how to set the slit for an exposure, and what it costs otherwise.
type SlitPlan struct {
	PA                   float64 // degrees, as it is set, 0 to 180
	Parallactic, QuitsAt float64 // parallactic angle at the beginning and the end, degrees
	Matters              bool    // the angle is worth a thought
	ShiftArcsec          float64 // greatest differential refraction over the range
	ShiftNm              float64 // and where
	Loss, LossAtNm       float64 // greatest loss in the slit as it is set, at the worse end of the exposure
	LossParallactic      float64 // the same if set at the parallactic angle of the middle
	HoldsS               float64 // how long one setting at the parallactic angle holds; at most 6 h
	ResetAfterS          targets.Measure
	Words                []string
}

// holdLongestS is up to when a setting of the slit is followed.
const holdLongestS = 6 * 3600

// PlanSlit says how the slit is to be set through an exposure.
//
// Given:
//   - s: of a slit spectrograph, with its pointing.
//   - a: its answer, for the slit and the time.
//
// Returns:
//   - the plan; a [*Reason] where the pointing or the slit is not known.
//
// Notes:
//  1. It is time to set the slit anew when light at the worse end of the range
//     falls further than 0.2 of its width from its middle; at less than 1.1
//     airmasses, or with a corrector, the angle does not matter (common
//     practice, no source).
//
// Source: [cite.Filippenko1982].
//
// Checked: TestPlanSlit.
func PlanSlit(s Setting, a Answer) (SlitPlan, error) {
	w := a.work
	if a.Err != nil || w == nil || !w.slit || s.Pointing == nil {
		return SlitPlan{}, fail(targets.CodeInstrument, "", "", "no slit to be set")
	}
	whole := math.Max(0, a.ClockS)
	p := SlitPlan{}
	z0, q0 := s.Pointing.At(0)
	zm, qm := s.Pointing.At(whole / 2)
	z1, q1 := s.Pointing.At(whole)
	p.Parallactic, p.QuitsAt, p.PA = q0.Deg(), q1.Deg(), half(qm.Deg())
	if deg, fixed, err := parsePA(s.Goal.PA); err == nil && fixed {
		p.PA = half(deg)
	}
	p.Matters = photon.AngleMatters(s.Airmass, s.Corrector)
	wanted := w.wantedRange()
	spread := photon.Spread{Guided: astro.Nm(guideNm), Zenith: zm, Air: s.vapour(), Image: w.image, SlitArcsec: w.slitArcsec}
	shift, err := spread.LargestShift(wanted)
	if err != nil {
		return p, &Reason{Code: targets.CodeInstrument, What: err.Error(), of: err}
	}
	p.ShiftArcsec = shift.Arcsec()
	for _, at := range wanted {
		if v, err := photon.DifferentialRefraction(at, spread.Guided, zm, spread.Air); err == nil && v == shift {
			p.ShiftNm = at.Nm()
		}
	}
	for _, end := range []struct{ z, q astro.Angle }{{z0, q0}, {zm, qm}, {z1, q1}} {
		spread.Zenith = end.z
		if loss, at, err := spread.Worst(wanted, astro.Deg(p.PA).Minus(end.q)); err == nil && loss > p.Loss {
			p.Loss, p.LossAtNm = loss, at.Nm()
		}
		if loss, _, err := spread.Worst(wanted, qm.Minus(end.q)); err == nil {
			p.LossParallactic = math.Max(p.LossParallactic, loss)
		}
	}
	// the shift goes with tan z, so one value serves for all times
	perTan := math.Abs(shift.Rad()) / math.Max(zm.Sin()/zm.Cos(), 1e-9)
	off := func(at float64, pa astro.Angle) float64 {
		z, q := s.Pointing.At(at)
		return perTan * math.Abs(z.Sin()/z.Cos()*pa.Minus(q).Sin()) * 206264.806 / w.slitArcsec
	}
	p.holds(off, s.Pointing, whole)
	p.tell(s.Goal.PA)
	return p, nil
}

// offShare is how far from the middle of the slit light may fall, as a share of
// its width. Common practice, no source.
const offShare = 0.2

// holds finds how long a setting holds, and when the one made stops doing so.
func (p *SlitPlan) holds(off func(atS float64, pa astro.Angle) float64, at *Pointing, whole float64) {
	good := func(t float64) bool {
		_, q := at.At(t / 2)
		return off(0, q) <= offShare && off(t, q) <= offShare
	}
	const step = 120.0
	for p.HoldsS < holdLongestS && good(p.HoldsS+step) {
		p.HoldsS += step
	}
	pa := astro.Deg(p.PA)
	for t := 0.0; t <= math.Min(whole, holdLongestS); t += step {
		if off(t, pa) > offShare {
			p.ResetAfterS = targets.Known(t)
			return
		}
	}
}

// tell says it in sentences.
func (p *SlitPlan) tell(asked string) {
	say := func(format string, v ...any) { p.Words = append(p.Words, fmt.Sprintf(format, v...)) }
	if !p.Matters {
		say("any angle of the slit will do: so high, or with a corrector, differential refraction does not count")
		return
	}
	say("parallactic angle %.0f to %.0f deg through the exposure; slit at %.0f", half(p.Parallactic), half(p.QuitsAt), p.PA)
	say("differential refraction %.1f arcsec at %.0f nm", math.Abs(p.ShiftArcsec), p.ShiftNm)
	if p.Loss > 0.02 {
		say("%.0f per cent of the light is lost at %.0f nm as it is set", 100*p.Loss, p.LossAtNm)
	}
	if p.Loss > p.LossParallactic+0.02 {
		say("set at the parallactic angle %.0f per cent", 100*p.LossParallactic)
	}
	if p.ResetAfterS.Known && p.HoldsS > 0 && (asked == "" || asked == "parallactic") {
		say("set it anew every %s", (time.Duration(p.HoldsS) * time.Second).Round(time.Minute))
	}
}

// wantedRange is the wavelengths that a spectrum is taken for: the ends of its
// range and its middle, as far as the formulas go.
func (w *work) wantedRange() []astro.Wavelength {
	lo, hi := w.s.Mode.RangeNm[0], w.s.Mode.RangeNm[1]
	if !(hi > lo) || w.s.Goal.AtNm > 0 && w.s.Goal.Line != "" {
		return []astro.Wavelength{w.at}
	}
	lo = math.Max(lo, 300)
	return []astro.Wavelength{astro.Nm(lo), astro.Nm((lo + hi) / 2), astro.Nm(hi), w.at}
}
