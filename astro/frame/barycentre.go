package frame

import (
	"evenfall/astro/timescale"
)

// Barycentric is what turns an observation into the barycentre's terms.
type Barycentric struct {
	RVCorrectionKms float64 // added to the observed velocity: barycentric one
	BJDTDB          float64 // day; the float resolves 40 microseconds
	HJDUTC          float64 // day
	LightTimeS      float64 // BJD_TDB - JD_TDB, seconds
	HelioS          float64 // HJD - JD, seconds
	Coarse          bool    // outside 2010-2053: see EarthAt
}

// Barycentre returns the corrections for a star.
//
//	RV = c (v . n)     v: Earth and site;  BJD_TDB = JD_TDB + (r . n)/c
//
// Notes:
//  1. First order in v/c, as common practice has it: the terms of second order
//     and the Sun's potential, some metres per second and nearly the same for
//     all stars, are not in it.
//  2. The star is taken as infinitely far: curvature costs below 1 ms beyond
//     10 pc.
//  3. 2010-2053 within 2 ms and 0.3 m/s of ERFA epv00; outside within 0.1 s
//     and 1 m/s.
//
// Source: [cite.EastmanEtAl2010]; [cite.WrightEastman2014] for what first
// order leaves out.
//
// Checked: TestBarycentre, against testdata/astro/velocity.csv.
func (f *Frame) Barycentre(s *Star) Barycentric {
	n := s.Direction(f.Instant)
	v := f.Earth.Velocity.Plus(f.Turning)
	light := f.Earth.Bary.Plus(f.Observer).Dot(n) * auLightS
	helio := f.Earth.Helio.Plus(f.Observer).Dot(n) * auLightS
	tdb := f.Instant.DaysTT() + timescale.TDBMinusTT(f.Instant)/86400
	return Barycentric{
		RVCorrectionKms: v.Dot(n) * lightMS / 1000,
		BJDTDB:          2451545 + (tdb + light/86400),
		HJDUTC:          f.Instant.JDUTC() + helio/86400,
		LightTimeS:      light,
		HelioS:          helio,
		Coarse:          f.Earth.Fallback,
	}
}
