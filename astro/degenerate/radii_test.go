package degenerate

import (
	"math"
	"testing"

	"evenfall/astro/numeric"
)

// The masses and radii of [cite.TremblayEtAl2017]. The radius comes from
// parallax, temperature and flux; the mass from that radius and the gravity of
// the spectrum, so both errors are tied: the residual from the model radius at
// that mass is written in the two independent errors, of the radius and of the
// gravity.
//
// The list gives no temperature. Its third radius is what models with the
// spectrum's temperature and gravity have; the gravity is that of mass and
// radius, so the temperature that makes our models agree with it can be found,
// and must exist.
func TestRadiiMeasured(t *testing.T) {
	m := models()
	total, agree := 0, 0
	type residual struct{ sigmas, observed float64 }
	for _, set := range []struct{ name, suffix string }{{"Hipparcos", "H"}, {"Gaia", "G"}} {
		var all []residual
		known := 0
		for _, r := range outside(t, "data/wd_mass_radius_tremblay2017.csv") {
			mass, eMass := value(t, r, "Mass"+set.suffix), value(t, r, "e_Mass"+set.suffix)
			radius, eRadius := value(t, r, "Rad"+set.suffix)/100, value(t, r, "e_Rad"+set.suffix)/100
			spectral, eSpectral := value(t, r, "RadMRR")/100, value(t, r, "e_RadMRR")/100
			if !positive(mass, radius, spectral) {
				continue
			}
			teff, ok := spectralTeff(m, logGravity(mass, radius), spectral)
			if ok {
				known++
			}
			model := func(x float64) (float64, bool) {
				v, err := m.At(teff, math.Min(1.3, math.Max(0.3, x)), Hydrogen)
				return v.RadiusRsun, err == nil
			}
			at, ok := model(mass)
			up, ok2 := model(mass + 0.01)
			down, ok3 := model(mass - 0.01)
			if !ok || !ok2 || !ok3 {
				continue
			}
			slope := (up - down) / 0.02
			// M = g R²: dM = M (2 dR/R + dg).
			eGravity := math.Sqrt(math.Max(0, eMass*eMass/(mass*mass)-4*eRadius*eRadius/(radius*radius)))
			byRadius := eRadius * (1 - 2*slope*mass/radius)
			byGravity := slope * mass * eGravity
			if x := (radius - at) / math.Hypot(byRadius, byGravity); math.Abs(x) > 2 {
				t.Logf("%s: %.3f solar masses, radius %.5f, model %.5f at %.0f K: %.1f sigma", r["Name"], mass, radius, at, teff, x)
			}
			all = append(all, residual{(radius - at) / math.Hypot(byRadius, byGravity),
				(radius - spectral) / math.Hypot(eRadius, eSpectral)})
		}
		within, published := 0, 0
		for _, x := range all {
			if math.Abs(x.sigmas) <= 2 {
				within++
			}
			if math.Abs(x.observed) <= 2 {
				published++
			}
		}
		t.Logf("%s: %d of %d radii within 2 sigma of the model of that mass; of the list's own model radius %d; temperature found for %d",
			set.name, within, len(all), published, known)
		total += len(all)
		agree += within
	}
	if float64(agree) < 0.9*float64(total) {
		t.Errorf("%d of %d radii within 2 sigma, 90 per cent wanted", agree, total)
	}
}

// spectralTeff returns the temperature at which the model of a gravity has a
// radius; where none has, the nearest of the ends.
func spectralTeff(m *Models, logG, radiusRsun float64) (float64, bool) {
	const cool, hot = 5500.0, 60000.0
	over := func(teff float64) float64 {
		v, err := m.FromGravity(teff, logG, Hydrogen)
		if err != nil {
			return math.NaN()
		}
		return v.RadiusRsun - radiusRsun
	}
	x, err := numeric.Root(over, cool, hot, 1)
	if err == nil {
		return x, true
	}
	if over(cool) > 0 {
		return cool, false
	}
	return hot, false
}
