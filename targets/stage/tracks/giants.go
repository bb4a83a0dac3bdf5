package tracks

import "math"

// Constants of the core masses and of the luminosity at the base of the giant
// branch.
//
// Source: [cite.HurleyPolsTout2000], equations 10 and 44.
const (
	coreMass1 = 9.20925e-5
	coreMass2 = 5.402216
	baseExp2  = 9.301992
	baseExp3  = 4.637345
)

// Energy per mass of shell burning, Msun/Lsun/Myr.
//
// Source: [cite.HurleyPolsTout2000], equations 68 and 71.
const (
	heliumRate = 7.66e-5
	bothRate   = 1.27e-5
)

// baseGiant is the luminosity at the base of the giant branch.
func (f *Formulas) baseGiant(m float64) float64 {
	a := &f.a
	return (a[27]*pow(m, a[31]) + a[28]*pow(m, baseExp2)) / (a[29] + a[30]*pow(m, baseExp3) + pow(m, a[32]))
}

// relation is luminosity against the mass of the core of a giant:
//
//	L = min(B Mc^q, D Mc^p)
type relation struct {
	p, q, b, d float64
	knee, lum  float64 // core mass and luminosity where the two laws meet
}

// relation returns the relation for a clock mass.
//
// Source: [cite.HurleyPolsTout2000], equations 37 and 38, section 5.2; the
// paper was not at hand.
func (f *Formulas) relation(m float64) relation {
	d0 := 5.37 + 0.135*f.lz
	high := func(m float64) float64 { return math.Max(-1, math.Max(0.975*d0-0.18*m, 0.5*d0-0.06*m)) }
	r := relation{p: 6, q: 3, b: math.Max(3e4, 500+1.75e4*pow(m, 0.6))}
	logD := d0
	switch {
	case m >= 2.5:
		r.p, r.q, logD = 5, 2, high(m)
	case m > f.mHeF:
		x := (m - f.mHeF) / (2.5 - f.mHeF)
		r.p, r.q, logD = 6-x, 3-x, d0+x*(high(2.5)-d0)
	}
	r.d = pow10(logD)
	r.knee = pow(r.b/r.d, 1/(r.p-r.q))
	r.lum = r.d * pow(r.knee, r.p)
	return r
}

// core returns the core mass of a luminosity.
func (r *relation) core(lum float64) float64 {
	if lum <= r.lum {
		return pow(lum/r.d, 1/r.p)
	}
	return pow(lum/r.b, 1/r.q)
}

// luminosity returns the luminosity of a core mass.
func (r *relation) luminosity(core float64) float64 {
	return math.Min(r.b*pow(core, r.q), r.d*pow(core, r.p))
}

// clock is shell burning at a rate, in Msun/Lsun/Myr, that grows the core.
type clock struct {
	relation
	rate     float64
	end1     float64 // ages at which either law would run away, Myr
	end2     float64
	crossing float64 // age at the knee
}

// clock starts a clock at an age in Myr and a luminosity.
//
// Source: [cite.HurleyPolsTout2000], equations 34 to 42; the paper was not at
// hand.
func (r relation) clock(rate, age, lum float64) clock {
	c := clock{relation: r, rate: rate}
	p, q := r.p, r.q
	if lum <= r.lum {
		c.end1 = age + pow(r.d/lum, (p-1)/p)/((p-1)*rate*r.d)
		c.crossing = c.end1 - (c.end1-age)*pow(lum/r.lum, (p-1)/p)
		c.end2 = c.crossing + pow(r.b/r.lum, (q-1)/q)/((q-1)*rate*r.b)
		return c
	}
	c.end1, c.crossing = math.Inf(-1), math.Inf(-1)
	c.end2 = age + pow(r.b/lum, (q-1)/q)/((q-1)*rate*r.b)
	return c
}

// core returns the core mass at an age.
func (c *clock) coreAt(age float64) float64 {
	if age <= c.crossing {
		return pow((c.p-1)*c.rate*c.d*(c.end1-age), 1/(1-c.p))
	}
	return pow(math.Max((c.q-1)*c.rate*c.b*(c.end2-age), 1e-12), 1/(1-c.q))
}

// age returns the age at a core mass.
func (c *clock) age(core float64) float64 {
	if core <= c.knee && !math.IsInf(c.crossing, -1) {
		return c.end1 - pow(core, 1-c.p)/((c.p-1)*c.rate*c.d)
	}
	return c.end2 - pow(core, 1-c.q)/((c.q-1)*c.rate*c.b)
}

// hydrogenRate is the energy per mass of the hydrogen shell on the giant
// branch, Msun/Lsun/Myr.
func hydrogenRate(m float64) float64 {
	return pow10(math.Max(-4.8, math.Min(-5.7+0.8*m, -4.1+0.14*m)))
}

// giantRadius is the radius on the giant branch.
func (f *Formulas) giantRadius(m, lum float64) float64 {
	return f.giantRadiusLog(math.Log(m), math.Log(lum))
}

// giantRadiusLog is giantRadius by natural logarithms of its arguments.
func (f *Formulas) giantRadiusLog(lnM, lnL float64) float64 {
	if f.above != nil {
		return blend(f.below.giantRadiusLog(lnM, lnL), f.above.giantRadiusLog(lnM, lnL), f.mix)
	}
	b := &f.b
	a := math.Min(b[4]*math.Exp(-b[5]*lnM), b[6]*math.Exp(-b[7]*lnM))
	return a * (math.Exp(b[1]*lnL) + b[2]*math.Exp(b[3]*lnL))
}

// blend is between two radii, evenly in the logarithm.
func blend(a, b, share float64) float64 { return a * math.Exp(share*math.Log(b/a)) }

// agbRadius is the radius on the asymptotic giant branch.
func (f *Formulas) agbRadius(m, lum float64) float64 {
	return f.agbRadiusLog(m, math.Log(m), math.Log(lum))
}

func (f *Formulas) agbRadiusLog(m, lnM, lnL float64) float64 {
	if f.above != nil {
		return blend(f.below.agbRadiusLog(m, lnM, lnL), f.above.agbRadiusLog(m, lnM, lnL), f.mix)
	}
	b, low := &f.b, f.mHeF-0.2
	var a float64
	e := b[3]
	switch {
	case m >= f.mHeF:
		a, e = math.Min(b[51]*math.Exp(-b[52]*lnM), b[53]*math.Exp(-b[54]*lnM)), b[55]*b[3]
	case m <= low:
		a = b[56] + b[57]*m
	default:
		top := math.Min(b[51]*pow(f.mHeF, -b[52]), b[53]*pow(f.mHeF, -b[54]))
		x := (m - low) / 0.2
		a, e = b[56]+b[57]*low+x*(top-b[56]-b[57]*low), b[3]*(1+x*(b[55]-1))
	}
	return a * (math.Exp(b[1]*lnL) + b[2]*math.Exp(e*lnL))
}

// ignitionHot is the luminosity at helium ignition above the flash mass.
func (f *Formulas) ignitionHot(m float64) float64 {
	b := &f.b
	return (b[11] + b[12]*pow(m, 3.8)) / (b[13] + m*m)
}

// ignition is the luminosity at helium ignition; below the flash mass the tip
// of the giant branch.
func (f *Formulas) ignition(m float64) float64 {
	if m < f.mHeF {
		return f.b[9] * pow(m, f.b[10]) / (1 + f.alpha1*math.Exp(15*(m-f.mHeF)))
	}
	return f.ignitionHot(m)
}

func (f *Formulas) baseAGBHot(m float64) float64 {
	b := &f.b
	return (b[31] + b[32]*pow(m, b[33]+1.8)) / (b[34] + pow(m, b[33]))
}

// baseAGB is the luminosity at the base of the asymptotic giant branch.
func (f *Formulas) baseAGB(m float64) float64 {
	if m < f.mHeF {
		return f.b[29] * pow(m, f.b[30]) / (1 + f.alpha3*math.Exp(15*(m-f.mHeF)))
	}
	return f.baseAGBHot(m)
}

// baseAGBCore is the mass of the helium core there.
func (f *Formulas) baseAGBCore(m float64) float64 {
	return math.Sqrt(math.Sqrt(f.b[36]*pow(m, f.b[37]) + f.b[38]))
}

// baseGiantCore is the core mass at the base of the giant branch.
func (f *Formulas) baseGiantCore(m float64) float64 {
	if m < f.mHeF {
		r := f.relation(m)
		return r.core(f.baseGiant(m))
	}
	return math.Min(0.95*f.baseAGBCore(m), math.Sqrt(math.Sqrt(f.coreB+coreMass1*pow(m, coreMass2))))
}

// ignitionCore is the core mass at helium ignition.
func (f *Formulas) ignitionCore(m float64) float64 {
	if m < f.mHeF {
		r := f.relation(m)
		return r.core(f.ignition(m))
	}
	return math.Min(0.95*f.baseAGBCore(m), math.Sqrt(math.Sqrt(f.coreI+coreMass1*pow(m, coreMass2))))
}

// dredgeUpCore is the core mass at the first thermal pulse.
func dredgeUpCore(baseAGB float64) float64 {
	if baseAGB > 0.8 && baseAGB < 2.25 {
		return 0.44*baseAGB + 0.448
	}
	return baseAGB
}
