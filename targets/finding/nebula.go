package finding

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/exposure"
)

// Aim is where to point at a nebula.
type Aim struct {
	Dir     astro.Vec
	RA, Dec astro.Angle // ICRS, on the night
	Inside  bool        // of the listed ellipse
	// Sky is the nearest place that is surely beside the object, from the central
	// star: along the minor axis, half as far again as the edge and 10 arcsec more.
	Sky   Offset
	Words []string
}

// skyBeyond is how far beyond the edge the sky is taken: times, and arcsec.
// Common practice, no source.
const (
	skyBeyond = 1.5
	skyMore   = 10.0
)

// AimAt returns the aim point of a request on a nebula and where to take the
// sky.
//
// Given:
//   - east, north: from the listed place (the central star), arcsec.
//
// Checked: TestAim.
func AimAt(t *targets.Target, at astro.Instant, eastArcsec, northArcsec float64) Aim {
	f := Tonight(t, at)
	place := astro.Direction(f.RA, f.Dec)
	a := Aim{Dir: At(f.Dir, eastArcsec, northArcsec), Inside: true}
	a.RA, a.Dec = At(place, eastArcsec, northArcsec).LonLat()
	major, minor, pa := ellipse(t)
	if major == 0 {
		a.Words = append(a.Words, "no size listed: take the sky well apart")
		return a
	}
	r := astro.Deg(pa)
	along := eastArcsec*r.Sin() + northArcsec*r.Cos()
	across := eastArcsec*r.Cos() - northArcsec*r.Sin()
	a.Inside = math.Pow(2*along/major, 2)+math.Pow(2*across/minor, 2) <= 1
	if !a.Inside {
		a.Words = append(a.Words, "the aim lies outside the listed ellipse")
	}
	far := skyBeyond*minor/2 + skyMore
	side := 1.0
	if across < 0 {
		side = -1 // on the side where one is
	}
	a.Sky = Between(place, At(place, side*far*r.Cos(), -side*far*r.Sin()))
	a.Words = append(a.Words, fmt.Sprintf("sky %.0f arcsec to the %s of the central star", far, Compass(a.Sky.PADeg)))
	return a
}

// ellipse returns the full axes of a nebula and the position angle of the
// major; 0 where no size is listed.
func ellipse(t *targets.Target) (major, minor, paDeg float64) {
	n := &t.Nebula
	if !n.DiamArcsec.Known || !(n.DiamArcsec.Value > 0) || math.IsInf(n.DiamArcsec.Value, 0) {
		return 0, 0, 0
	}
	major, minor = n.DiamArcsec.Value, n.DiamArcsec.Value
	if n.Diam2Arcsec.Known && n.Diam2Arcsec.Value > 0 && n.Diam2Arcsec.Value <= major {
		minor = n.Diam2Arcsec.Value
	}
	if n.PADeg.Known && !math.IsNaN(n.PADeg.Value) && !math.IsInf(n.PADeg.Value, 0) {
		paDeg = n.PADeg.Value
	}
	return major, minor, paDeg
}

// Axis compares a slit along the axis of a nebula with one at the parallactic
// angle.
type Axis struct {
	AxisDeg, ParallacticDeg float64 // 0 to 180
	ApartDeg                float64 // 0 to 90
	// LossAxis and LossParallactic are the greatest losses of a star's light over
	// the range; of the nebula's own none is lost, but each wavelength comes from
	// another place, ShiftArcsec across the slit.
	LossAxis, LossParallactic float64
	ShiftArcsec               float64
	Words                     string
}

// AlongAxis works out what laying the slit on an axis costs.
//
// Given:
//   - s: the setting, of a slit, with its pointing; its angle is not looked at.
//   - axisDeg: position angle of the axis.
//
// Returns:
//   - an error where the setting has no answer.
//
// Checked: TestAlongAxis.
func AlongAxis(s exposure.Setting, axisDeg float64) (Axis, error) {
	plan := func(pa string) (exposure.SlitPlan, error) {
		one := s
		one.Goal.PA = pa
		a := exposure.Solve(one)
		if a.Err != nil {
			return exposure.SlitPlan{}, a.Err
		}
		return exposure.PlanSlit(one, a)
	}
	on, err := plan(fmt.Sprintf("%.6f", axisDeg))
	if err != nil {
		return Axis{}, err
	}
	along, err := plan("parallactic")
	if err != nil {
		return Axis{}, err
	}
	x := Axis{AxisDeg: on.PA, ParallacticDeg: along.PA, LossAxis: on.Loss, LossParallactic: along.Loss}
	x.ApartDeg = math.Abs(x.AxisDeg - x.ParallacticDeg)
	if x.ApartDeg > 90 {
		x.ApartDeg = 180 - x.ApartDeg
	}
	x.ShiftArcsec = math.Abs(on.ShiftArcsec) * astro.Deg(x.ApartDeg).Sin()
	x.Words = fmt.Sprintf("axis at %.0f, parallactic angle %.0f deg: along the axis %.1f arcsec across the slit and %.0f per cent lost of a star, at the parallactic angle %.0f",
		x.AxisDeg, x.ParallacticDeg, x.ShiftArcsec, 100*x.LossAxis, 100*x.LossParallactic)
	return x, nil
}
