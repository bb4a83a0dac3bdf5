package frame

import (
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/meeusfence"
)

func TestSidereal(t *testing.T) {
	for _, r := range check.Table(t, "testdata/astro/sidereal.csv").Rows() {
		at := when(t, r.Float("jd_day"), r.Float("jd_frac"))
		era := astro.Rad(rotationAngle(at.DaysUT1())).Minus(astro.Deg(r.Float("era"))).Signed().Arcsec()
		check.Near(t, era, 0, 1e-5, "Earth rotation angle of %s, arcsec", r.Where())
		gmst := astro.Rad(meanSidereal(at.DaysUT1(), at.CenturiesTT())).Minus(astro.Deg(r.Float("gmst"))).Signed().Arcsec()
		check.Near(t, gmst, 0, 1e-5, "mean sidereal time of %s, arcsec", r.Where())
		f := At(astro.Site{}, at)
		gast := f.GAST.Minus(astro.Deg(r.Float("gast"))).Signed().Arcsec()
		check.Near(t, gast, 0, 0.02, "apparent sidereal time of %s, arcsec", r.Where())
	}
}

// Radial-velocity correction and barycentric date: 0.3 m/s and 2 ms within
// 2010-2053, 1 m/s and 0.1 s by the coarse route outside.
func TestBarycentre(t *testing.T) {
	worst := map[string]float64{}
	for _, r := range check.Table(t, "testdata/astro/velocity.csv").Rows() {
		f := At(siteOf(r), when(t, r.Float("jd_day"), r.Float("jd_frac")))
		s := NewStar(Catalogue{RA: astro.Deg(r.Float("ra")), Dec: astro.Deg(r.Float("dec")), EpochJyr: 2000})
		b := f.Barycentre(&s)
		speed, light, inside := 0.3, 0.002, r.String("inside") == "1"
		if !inside {
			speed, light = 1, 0.1
		}
		if b.Coarse == inside {
			t.Errorf("%s: coarse is %v", r.Where(), b.Coarse)
		}
		note := func(what string, got, want, tol float64) {
			worst[what+" inside "+r.String("inside")] = math.Max(worst[what+" inside "+r.String("inside")], math.Abs(got-want))
			check.Near(t, got, want, tol, "%s of %s", what, r.Where())
		}
		note("radial velocity, m/s", b.RVCorrectionKms*1000, r.Float("rv_ms"), speed)
		note("light-time, s", b.LightTimeS, r.Float("light_s"), light)
		note("heliocentric light-time, s", b.HelioS, r.Float("helio_s"), light)
		if inside { // before leap seconds and after announced ones UTC itself differs
			seconds := (b.BJDTDB - f.Instant.JDUTC()) * 86400
			note("BJD_TDB - JD_UTC, s", seconds, r.Float("bjd_minus_utc_s"), light+1e-4)
		}
	}
	t.Logf("worst: %v", worst)
}

func TestEarthVelocity(t *testing.T) {
	worst := 0.0
	for _, r := range check.Table(t, "testdata/astro/velocity.csv").Rows() {
		at := when(t, r.Float("jd_day"), r.Float("jd_frac"))
		if r.String("inside") != "1" {
			continue
		}
		d := meeusfence.EarthVelocity(at).Minus(EarthAt(at).Velocity).Norm() * lightMS
		worst = math.Max(worst, d)
		check.Near(t, d, 0, 1.0, "Ron & Vondrak against the Earth series, m/s, %s", r.Where())
	}
	t.Logf("worst %.2f m/s", worst)
}
