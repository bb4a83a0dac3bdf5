package tracks

import "math"

// ZAMS returns luminosity and radius, solar, of a star that has just begun to
// burn hydrogen.
//
//	L = (α M^5.5 + β M^11) / (γ + M³ + δ M⁵ + ε M⁷ + ζ M⁸ + η M^9.5)
//	R = (θ M^2.5 + ι M^6.5 + κ M^11 + λ M^19 + μ M^19.5)
//	    / (ν + ξ M² + ο M^8.5 + M^18.5 + π M^19.5)
//
// Given:
//   - mass: 0.1 to 50 solar masses; the numbers mean nothing outside.
//
// Source: [cite.ToutEtAl1996], equations 1 and 2; the paper was not at hand.
//
// Checked: TestAuthorsProgram, TestReference.
func (f *Formulas) ZAMS(mass float64) (lum, radius float64) {
	l, r, m := &f.lum, &f.rad, mass
	s := math.Sqrt(m)
	m2 := m * m
	m4 := m2 * m2
	m8 := m4 * m4
	m18 := m8 * m8 * m2
	lum = (l[0]*m4*m*s + l[1]*m8*m2*m) / (l[2] + m2*m + l[3]*m4*m + l[4]*m4*m2*m + l[5]*m8 + l[6]*m8*m*s)
	radius = (r[0]*m2*s + r[1]*m4*m2*s + r[2]*m8*m2*m + r[3]*m18*m + r[4]*m18*m*s) /
		(r[5] + r[6]*m2 + r[7]*m8*s + m18*s + r[8]*m18*m*s)
	return lum, radius
}

// GiantBaseTime returns the age at the base of the giant branch, Myr, or at
// helium ignition for stars too massive for one.
//
//	t = (a1 + a2 M⁴ + a3 M^5.5 + M⁷) / (a4 M² + a5 M⁷)
//
// Source: [cite.HurleyPolsTout2000], equation 4; the paper was not at hand.
//
// Checked: TestReference.
func (f *Formulas) GiantBaseTime(mass float64) float64 {
	a, m2 := &f.a, mass*mass
	m4 := m2 * m2
	m7 := m4 * m2 * mass
	return (a[1] + a[2]*m4 + a[3]*m4*mass*math.Sqrt(mass) + m7) / (a[4]*m2 + a[5]*m7)
}

// MainSequenceTime returns the age at the end of the main sequence, Myr.
//
// Source: [cite.HurleyPolsTout2000], equations 5 to 7; the paper was not at
// hand.
//
// Checked: TestReference, TestAuthorsProgram.
func (f *Formulas) MainSequenceTime(mass float64) float64 {
	x := math.Max(0.95, math.Min(0.95-0.03*(f.lz+0.30103), 0.99))
	return math.Max(f.hookShare(mass), x) * f.GiantBaseTime(mass)
}

// hookShare is μ, the age at the hook over that at the base of the giant
// branch.
func (f *Formulas) hookShare(m float64) float64 {
	a := &f.a
	return math.Max(0.5, 1-0.01*math.Max(a[6]/pow(m, a[7]), a[8]+a[9]/pow(m, a[10])))
}

// turnoffLum is the luminosity at the end of the main sequence.
func (f *Formulas) turnoffLum(m float64) float64 {
	a, m3 := &f.a, m*m*m
	return (a[11]*m3 + a[12]*m3*m + a[13]*pow(m, a[16]+1.8)) / (a[14] + a[15]*m3*m*m + pow(m, a[16]))
}

// turnoffRadius is the radius at the end of the main sequence.
func (f *Formulas) turnoffRadius(m float64) float64 {
	a := &f.a
	cool := func(m float64) float64 { return (a[18] + a[19]*pow(m, a[21])) / (a[20] + pow(m, a[22])) }
	hot := func(m float64) float64 {
		return (-8.672073e-2*m*m*m + a[23]*pow(m, a[26]) + a[24]*pow(m, a[26]+1.5)) / (a[25] + m*m*m*m*m)
	}
	var r float64
	switch end := a[17] + 0.1; {
	case m <= a[17]:
		r = cool(m)
	case m >= end:
		r = hot(m)
	default:
		r = line(m, a[17], cool(a[17]), end, hot(end))
	}
	if m < 0.5 {
		_, zams := f.ZAMS(m)
		r = math.Max(r, 1.5*zams)
	}
	return r
}

// hookDepth is ΔL above the mass a33.
func (f *Formulas) hookDepth(m float64) float64 {
	a := &f.a
	return math.Min(a[34]/pow(m, a[35]), a[36]/pow(m, a[37]))
}

// deltaLum is the depth of the hook in log L.
func (f *Formulas) deltaLum(m float64) float64 {
	switch {
	case m <= f.hook:
		return 0
	case m >= f.a[33]:
		return f.hookDepth(m)
	}
	return f.hookLum * pow((m-f.hook)/(f.a[33]-f.hook), 0.4)
}

// hookRadius is ΔR above 2 solar masses.
func (f *Formulas) hookRadius(m float64) float64 {
	a := &f.a
	return (a[38]+a[39]*m*m*m*math.Sqrt(m))/(a[40]*m*m*m+pow(m, a[41])) - 1
}

// deltaRadius is the depth of the hook in log R.
func (f *Formulas) deltaRadius(m float64) float64 {
	a := &f.a
	switch {
	case m <= f.hook:
		return 0
	case m <= a[42]:
		return a[43] * math.Sqrt((m-f.hook)/(a[42]-f.hook))
	case m < 2:
		return a[43] + (f.hookRad-a[43])*pow((m-a[42])/(2-a[42]), a[44])
	}
	return f.hookRadius(m)
}

func (f *Formulas) lumAlpha(m float64) float64 {
	a := &f.a
	high := func(m float64) float64 { return (a[45] + a[46]*pow(m, a[48])) / (pow(m, 0.4) + a[47]*pow(m, 1.9)) }
	switch {
	case m <= 0.5:
		return a[49]
	case m <= 0.7:
		return line(m, 0.5, a[49], 0.7, 0.3)
	case m <= a[52]:
		return line(m, 0.7, 0.3, a[52], a[50])
	case m <= a[53]:
		return line(m, a[52], a[50], a[53], a[51])
	case m < 2:
		return line(m, a[53], a[51], 2, high(2))
	}
	return high(m)
}

func (f *Formulas) lumBeta(m float64) float64 {
	a := &f.a
	low := func(m float64) float64 { return math.Max(0, a[54]-a[55]*pow(m, a[56])) }
	if m <= a[57] {
		return low(m)
	}
	return math.Max(0, low(a[57])*(1-10*(m-a[57])))
}

func (f *Formulas) radiusAlpha(m float64) float64 {
	a := &f.a
	return a[58] * pow(m, a[60]) / (a[59] + pow(m, a[61]))
}

func (f *Formulas) radiusAlphaAll(m float64) float64 {
	a := &f.a
	switch {
	case m <= 0.5:
		return a[62]
	case m <= 0.65:
		return line(m, 0.5, a[62], 0.65, a[63])
	case m <= a[68]:
		return line(m, 0.65, a[63], a[68], a[64])
	case m <= a[66]:
		return line(m, a[68], a[64], a[66], f.radiusAlpha(a[66]))
	case m <= a[67]:
		return f.radiusAlpha(m)
	}
	return f.radiusAlpha(a[67]) + a[65]*(m-a[67])
}

func (f *Formulas) radiusBeta(m float64) float64 {
	a := &f.a
	high := func(m float64) float64 { return a[69] * m * m * m * math.Sqrt(m) / (a[70] + pow(m, a[71])) }
	switch {
	case m <= 1:
		return 0.06
	case m <= a[74]:
		// The printed denominator a74 - 1.06 leaves a step; a74 - 1 does not.
		return line(m, 1, 1.06, a[74], a[72]) - 1
	case m <= 2:
		return line(m, a[74], a[72], 2, high(2)) - 1
	case m <= 16:
		return high(m) - 1
	}
	return high(16) + a[73]*(m-16) - 1
}

func (f *Formulas) radiusGamma(m float64) float64 {
	a := &f.a
	low := func(m float64) float64 { return a[76] + a[77]*pow(math.Max(math.Abs(m-a[78]), 1e-12), a[79]) }
	if m > a[75]+0.1 {
		return 0
	}
	one := math.Max(0, low(1))
	switch {
	case m <= 1:
		return math.Max(0, low(m))
	case m <= a[75]:
		return math.Max(0, one+(a[80]-one)*pow((m-1)/(a[75]-1), a[81]))
	}
	top := one
	if a[75] > 1 {
		top = a[80]
	}
	return math.Max(0, top*(1-10*(m-a[75])))
}

// sequence is what the main sequence of one mass needs, worked out once.
type sequence struct {
	end, hook                          float64 // ages, Myr
	lum, radius                        float64 // log10 at age zero
	aL, bL, cL, dL, aR, bR, gR, cR, dR float64
	eta                                float64
	least                              float64 // radius of a degenerate star, log10
}

func (f *Formulas) sequence(m float64) sequence {
	l0, r0 := f.ZAMS(m)
	s := sequence{end: f.MainSequenceTime(m), hook: f.hookShare(m) * f.GiantBaseTime(m),
		lum: math.Log10(l0), radius: math.Log10(r0),
		aL: f.lumAlpha(m), bL: f.lumBeta(m), dL: f.deltaLum(m),
		aR: f.radiusAlphaAll(m), bR: f.radiusBeta(m), gR: f.radiusGamma(m), dR: f.deltaRadius(m),
		eta: 10, least: math.Inf(-1)}
	s.cL = math.Log10(f.turnoffLum(m)) - s.lum - s.aL - s.bL
	s.cR = math.Log10(f.turnoffRadius(m)) - s.radius - s.aR - s.bR - s.gR
	if f.z <= 0.0009 {
		s.eta = clamp(10+100*(m-1), 10, 20)
	}
	if m < f.hook-0.3 {
		s.least = math.Log10(0.0258*pow(1.76-3*f.z, 5./3)) - math.Log10(m)/3
	}
	return s
}

// at returns log10 of luminosity and radius at an age in Myr.
func (s *sequence) at(age float64) (logL, logR float64) {
	tau := age / s.end
	t1 := math.Min(1, age/s.hook)
	t2 := clamp((age-0.99*s.hook)/(0.01*s.hook), 0, 1)
	tau2 := tau * tau
	tau8 := tau2 * tau2 * tau2 * tau2
	tau10 := tau8 * tau2
	tauEta := tau10
	if s.eta != 10 && tau > 0 {
		tauEta = pow(tau, s.eta)
	}
	tau40 := tau8 * tau8 * tau8 * tau8 * tau8
	logL = s.lum + s.aL*tau + s.bL*tauEta + s.cL*tau2 - s.dL*(t1*t1-t2*t2)
	logR = s.radius + s.aR*tau + s.bR*tau10 + s.gR*tau40 + s.cR*tau2*tau - s.dR*(t1*t1*t1-t2*t2*t2)
	return logL, math.Max(logR, s.least)
}

// MainSequence returns luminosity and radius, solar, of a main-sequence star.
//
//	log L/L0 = αL τ + βL τ^η + (log L_T/L0 - αL - βL) τ² - ΔL (τ1² - τ2²)
//	log R/R0 = αR τ + βR τ^10 + γ τ^40 + (log R_T/R0 - αR - βR - γ) τ³ - ΔR (τ1³ - τ2³)
//
// Given:
//   - mass: 0.1 to 50 solar masses.
//   - ageMyr: 0 to [Formulas.MainSequenceTime]; clamped to that.
//
// Returns:
//   - [ErrMass] outside the range or where the age is not a number.
//
// Source: [cite.HurleyPolsTout2000], equations 8 to 24; the paper was not at
// hand.
//
// Checked: TestReference, TestSun, TestContinuity.
func (f *Formulas) MainSequence(mass, ageMyr float64) (lum, radius float64, err error) {
	if !(mass >= LeastMass && mass <= MostMass) || math.IsNaN(ageMyr) {
		return 0, 0, ErrMass
	}
	s := f.sequence(mass)
	l, r := s.at(clamp(ageMyr, 0, s.end))
	return pow10(l), pow10(r), nil
}
