package moment

import (
	"fmt"

	"evenfall/astro/cite"
	"evenfall/targets/stage"
)

// Step is one figure with its working: what it is, the formula, what went in,
// what came out, and the published source.
type Step struct{ What, Formula, Inputs, Result, Source string }

// Steps returns the workings of a moment's figures, in the order in which one
// leads to the next; those of the study of what the target is come before its
// brightness, those of its exposure after it.
//
// Checked: TestSteps: each has all five parts, and the results are those of
// the moment.
func Steps(s *Scene, p *Prepared, m *Moment, st *stage.Study) []Step {
	pl := &p.Target.Place
	steps := []Step{
		{"position brought to the moment", "u + (T - T0) (mu + rv plx u), made a unit vector",
			fmt.Sprintf("RA %.7f Dec %+.7f deg at J%.4f, pm %s %s mas/yr, plx %s mas, rv %s km/s", pl.RA.Deg(), pl.Dec.Deg(),
				pl.EpochJyr, number(pl.PMRA.Known, pl.PMRA.Value), number(pl.PMDec.Known, pl.PMDec.Value),
				number(pl.Plx.Known, pl.Plx.Value), number(pl.RV.Known, pl.RV.Value)),
			fmt.Sprintf("ICRS RA %.7f Dec %+.7f deg", m.RA.Deg(), m.Dec.Deg()), cite.ESA1997.String()},
		{"apparent place", "parallax, light deflection, aberration; bias-precession-nutation matrix",
			fmt.Sprintf("TT JD %.6f, IAU 2006 precession, IAU 1980 nutation", m.At.JDTT()),
			fmt.Sprintf("RA %.7f Dec %+.7f deg, true equator and equinox of date, geocentric", m.Place.RA.Deg(), m.Place.Dec.Deg()),
			cite.WallaceCapitaine2006.String() + "; " + cite.RonVondrak1986.String()},
		{"local apparent sidereal time", "ERA(UT1) + GMST polynomial + equation of the equinoxes + longitude",
			fmt.Sprintf("UT1-UTC %+.3f s, longitude %+.5f deg east", m.At.UT1MinusUTC(), s.Night.Site.Lon.Signed().Deg()),
			s.Frame.LST.HMS(2), cite.CapitaineWallaceChapront2003.String()},
		{"altitude and azimuth without air", "atan2 of the direction along north, east and up",
			fmt.Sprintf("hour angle %+.5f h, latitude %+.5f deg", m.Place.HourAngle.Hours(), s.Night.Site.Lat.Deg()),
			fmt.Sprintf("altitude %.5f deg, azimuth %.5f deg", m.Place.Alt.Deg(), m.Place.Az.Deg()), cite.UrbanSeidelmann2013.String()},
		{"altitude as seen", "A tan z + B tan^3 z above 8 deg, Saemundsson scaled by pressure and temperature below 5, blended between",
			fmt.Sprintf("%.1f hPa, %.1f C, humidity %.2f", s.Night.Site.Air.PressureHPa, s.Night.Site.Air.TemperatureC, s.Night.Site.Air.Humidity),
			fmt.Sprintf("%.5f deg", m.Apparent.Deg()), cite.Stone1996.String() + "; " + cite.Saemundsson1986.String()},
	}
	if m.AirOK {
		steps = append(steps, Step{"airmass", "1 / [sin h + 0.50572 (h + 6.07995)^-1.6364], h in deg",
			fmt.Sprintf("h %.4f deg", m.Apparent.Deg()), fmt.Sprintf("%.4f", float64(m.Airmass)), cite.KastenYoung1989.String()})
	}
	steps = append(steps,
		Step{"parallactic angle", "atan2(sin H, tan lat cos dec - sin dec cos H)",
			fmt.Sprintf("H %+.5f h", m.Place.HourAngle.Hours()), fmt.Sprintf("%+.3f deg, west of the meridian positive", m.Place.Parallact.Deg()),
			cite.UrbanSeidelmann2013.String()},
		Step{"radial-velocity correction", "c (v . n), v of Earth and site; first order in v/c",
			"Earth series fitted to ERFA epv00, arguments of Simon et al. 1994", fmt.Sprintf("%+.4f km/s, added to the observed velocity", m.Barycentric.RVCorrectionKms),
			cite.WrightEastman2014.String()},
		Step{"barycentric date", "JD_TDB + (r . n)/c",
			fmt.Sprintf("JD_UTC %.6f, TT-UTC %.3f s, light-time %+.3f s", m.At.JDUTC(), m.At.TTMinusUTC().Seconds(), m.Barycentric.LightTimeS),
			fmt.Sprintf("BJD_TDB %.6f", m.Barycentric.BJDTDB), cite.EastmanEtAl2010.String()},
		Step{"distance from the Moon", "atan2(|a x b|, a . b) of the observed directions",
			fmt.Sprintf("topocentric Moon az %.2f alt %+.2f deg", s.Moon.Place.Az.Deg(), s.Moon.Place.Alt.Deg()),
			fmt.Sprintf("%.3f deg", m.MoonSep.Deg()), cite.Meeus1998.String()},
	)
	for _, x := range st.Steps {
		steps = append(steps, Step(x))
	}
	for _, x := range m.Expect.Steps {
		steps = append(steps, Step(x))
	}
	if m.ExposureOK {
		for _, x := range m.Exposure.Steps() {
			steps = append(steps, Step(x))
		}
	}
	return steps
}

func number(known bool, v float64) string {
	if !known {
		return "unknown"
	}
	return fmt.Sprintf("%g", v)
}
