package frame

import (
	"math"

	"evenfall/astro"
)

// precession is the orientation of the mean equator and equinox of date in the
// ICRS, as the four Fukushima-Williams angles.
type precession struct{ gamma, phi, psi, obliquity astro.Angle }

// poly evaluates a polynomial whose coefficients are seconds of arc.
func poly(t float64, c ...float64) astro.Angle {
	s := 0.0
	for i := len(c) - 1; i >= 0; i-- {
		s = s*t + c[i]
	}
	return astro.Arcsec(s)
}

// precessionOf returns the angles of IAU 2006 precession with the frame bias
// in them.
//
// Given:
//   - t: Julian centuries TT since J2000.0, within a few centuries.
//
// Source: [cite.HiltonEtAl2006], [cite.WallaceCapitaine2006]; as adopted by
// the IAU in 2006. The angles are those of [cite.Williams1994] and
// [cite.Fukushima2003].
//
// Checked: TestPrecession, against testdata/astro/precession.csv, 1e-9 arcsec.
func precessionOf(t float64) precession {
	return precession{
		gamma:     poly(t, -0.052928, 10.556378, 0.4932044, -0.00031238, -0.000002788, 0.0000000260),
		phi:       poly(t, 84381.412819, -46.811016, 0.0511268, 0.00053289, -0.000000440, -0.0000000176),
		psi:       poly(t, -0.041775, 5038.481484, 1.5584175, -0.00018522, -0.000026452, -0.0000000148),
		obliquity: poly(t, 84381.406, -46.836769, -0.0001831, 0.00200340, -0.000000576, -0.0000000434),
	}
}

// matrix returns the rotation from the ICRS to the true equator and equinox of
// date for a nutation in longitude and obliquity; with zeros, to the mean.
//
//	R1(-eps - deps) R3(-psi - dpsi) R1(phi) R3(gamma)
func (p precession) matrix(dpsi, deps float64) astro.Mat {
	r := astro.Rotation(0, p.phi).Mul(astro.Rotation(2, p.gamma))
	r = astro.Rotation(2, p.psi.Plus(astro.Rad(dpsi)).Neg()).Mul(r)
	return astro.Rotation(0, p.obliquity.Plus(astro.Rad(deps)).Neg()).Mul(r)
}

// rotationAngle returns the Earth rotation angle.
//
//	2 pi (0.7790572732640 + 1.00273781191135448 Du)     Du: UT1 days since JD 2451545.0
//
// Source: [cite.IERS2010], eq. 5.15.
func rotationAngle(du float64) float64 {
	whole := math.Floor(du)
	turn := 0.7790572732640 + 0.00273781191135448*du + (du - whole)
	return 2 * math.Pi * (turn - math.Floor(turn))
}

// meanSidereal returns Greenwich mean sidereal time, radians.
//
//	ERA + 0.014506" + 4612.156534" t + ...
//
// Source: [cite.CapitaineWallaceChapront2003], as adopted with IAU 2006
// precession; [cite.IERS2010], eq. 5.32.
//
// Checked: TestSidereal, against testdata/astro/sidereal.csv, 1e-6 arcsec.
func meanSidereal(du, t float64) float64 {
	return rotationAngle(du) + poly(t, 0.014506, 4612.156534, 1.3915817, -0.00000044, -0.000029956, -0.0000000368).Rad()
}

// equationOfEquinoxes returns apparent less mean sidereal time, radians.
//
//	dpsi cos(eps) + 0.00264096" sin(Om) + 0.00006352" sin(2 Om) + 0.00001175" sin(2F - 2D + 3 Om) + ...
//
// Om is the longitude of the Moon's ascending node, F and D the arguments of
// Delaunay; smaller terms, below 0.00001 arcsec each, are left out.
//
// Source: [cite.IERS2010], table 5.2e.
func equationOfEquinoxes(t, dpsi float64, obliquity astro.Angle) float64 {
	om := poly(t, 450160.398036, -6962890.5431).Rad()
	f := poly(t, 335779.526232, 1739527262.8478).Rad()
	d := poly(t, 1072260.70369, 1602961601.2090).Rad()
	extra := 0.00264096*math.Sin(om) + 0.00006352*math.Sin(2*om) +
		0.00001175*math.Sin(2*f-2*d+3*om) + 0.00001121*math.Sin(2*f-2*d+om)
	return dpsi*obliquity.Cos() + extra*arcsecToRad
}
