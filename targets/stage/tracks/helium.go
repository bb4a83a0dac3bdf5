package tracks

import "math"

// loopMinimum is the least luminosity while helium burns, above the flash mass.
func (f *Formulas) loopMinimum(m float64) float64 {
	b := &f.b
	c := b[17]/pow(f.mFGB, 0.1) + (b[16]*b[17]-b[14])/pow(f.mFGB, b[15]+0.1)
	return f.ignition(m) * (b[14] + c*pow(m, b[15]+0.1)) / (b[16] + pow(m, b[15]))
}

// loopRadius is the least radius of a blue loop, above the flash mass.
func (f *Formulas) loopRadius(m float64) float64 {
	b := &f.b
	return (b[24]*m + pow(b[25]*m, b[26])*pow(m, b[28])) / (b[27] + pow(m, b[28]))
}

// ignitionRadius is the radius at helium ignition.
func (f *Formulas) ignitionRadius(m float64) float64 {
	lum := f.ignition(m)
	giant := f.giantRadius(m, lum)
	if m < f.mFGB {
		return giant
	}
	least := math.Min(f.loopRadius(m), f.agbRadius(m, lum))
	if m >= math.Max(f.mFGB, 12) {
		return least
	}
	return least * pow(giant/least, math.Log(m/12)/math.Log(f.mFGB/12))
}

// loopShare is the share of core helium burning spent blue.
//
// Source: [cite.HurleyPolsTout2000], equation 58; the paper was not at hand.
func (f *Formulas) loopShare(m float64) float64 {
	b := &f.b
	if m < f.mHeF {
		return 1
	}
	if m <= f.mFGB {
		x := 1 - b[45]*pow(f.mHeF/f.mFGB, 0.414)
		y := math.Max(0, math.Log(m/f.mFGB)/math.Log(f.mHeF/f.mFGB))
		if y > 0 {
			y = pow(y, b[46])
		}
		return clamp(b[45]*pow(m/f.mFGB, 0.414)+x*y, 0, 1)
	}
	g := func(m float64) float64 {
		return pow(m, b[48]) * pow(math.Max(1e-12, 1-f.loopRadius(m)/f.agbRadius(m, f.ignition(m))), b[49])
	}
	return clamp((1-b[47])*g(m)/g(f.mFGB), 0, 1)
}

// envelope is u, how much envelope there is between a bare core and the flash
// mass.
func (f *Formulas) envelope(m, core float64) float64 {
	return math.Max(1e-12, (m-core)/(f.mHeF-core))
}

// zahbLum is the luminosity of a star below the flash mass that begins to burn
// helium.
func (f *Formulas) zahbLum(m, core float64) float64 {
	b, u, bare := &f.b, f.envelope(m, core), bareLum(core)
	alpha2 := (b[18] + bare - f.minHeF) / (f.minHeF - bare)
	return bare + (1+b[20])/(1+b[20]*pow(u, 1.647903))*b[18]*pow(u, b[19])/(1+alpha2*math.Exp(15*(m-f.mHeF)))
}

// zahbRadius is the radius there.
func (f *Formulas) zahbRadius(m, core float64) float64 {
	b, u := &f.b, f.envelope(m, core)
	x := (1 + b[21]) * pow(u, b[22]) / (1 + b[21]*pow(u, b[23]))
	return (1-x)*bareRadius(core) + x*f.giantRadius(m, f.zahbLum(m, core))
}

func (f *Formulas) heliumTimeHot(m float64) float64 {
	b, m5 := &f.b, m*m*m*m*m
	return f.GiantBaseTime(m) * (b[41]*pow(m, b[42]) + b[43]*m5) / (b[44] + m5)
}

// heliumTime is how long helium burns in the core, Myr.
//
// Source: [cite.HurleyPolsTout2000], equation 57; the paper was not at hand.
func (f *Formulas) heliumTime(m, core float64) float64 {
	b := &f.b
	if m >= f.mHeF {
		return f.heliumTimeHot(m)
	}
	rest := 0.0
	if u := 1 - f.envelope(m, core); u > 0 {
		rest = pow(u, b[40])
	}
	return (b[39] + (bareTime(core)-b[39])*rest) * (1 + f.alpha4*math.Exp(15*(m-f.mHeF)))
}

// burning is core helium burning of one clock mass.
type burning struct {
	f           *Formulas
	clock       float64 // M0
	core0, core float64 // core masses at begin and end
	from, to    float64 // begin and end of the blue phase, 0 to 1
	ignited     float64 // luminosities: at ignition,
	lum, end    float64 // at the begin of the blue phase, at the end of all
	zahb        bool    // below the flash mass
	fixed       float64 // radius at the begin of the blue phase, above mFGB
	loop        float64 // ratio of the least radius to that of a giant below mHeF
}

func (f *Formulas) burning(m0 float64) burning {
	b := burning{f: f, clock: m0, core0: f.ignitionCore(m0), core: f.baseAGBCore(m0),
		ignited: f.ignition(m0), end: f.baseAGB(m0), to: 1}
	switch {
	case m0 < f.mHeF:
		b.lum, b.zahb = f.zahbLum(m0, b.core0), true
		b.loop = pow(f.loopHeF, m0/f.mHeF)
	case m0 < f.mFGB:
		b.from, b.lum = 1-f.loopShare(m0), f.loopMinimum(m0)
	default:
		b.lum, b.fixed, b.to = b.ignited, f.ignitionRadius(m0), f.loopShare(m0)
	}
	return b
}

// radii returns R_x and R_m for a present mass.
func (b *burning) radii(m float64) (start, least float64) {
	f := b.f
	switch {
	case b.zahb:
		return f.zahbRadius(m, b.core0), f.giantRadius(m, b.lum) * b.loop
	case b.fixed == 0:
		return f.giantRadius(m, b.lum), f.loopRadius(m)
	}
	return b.fixed, f.loopRadius(b.clock)
}

// at returns luminosity, radius and core mass at a share of the whole duration,
// 0 to 1, for a present mass.
//
// Source: [cite.HurleyPolsTout2000], equations 60 to 67; the paper was not at
// hand.
func (b *burning) at(m, tau float64) (lum, radius, core float64) {
	f := b.f
	core = b.core0 + (b.core-b.core0)*tau
	if tau < b.from {
		x := (b.from - tau) / b.from
		lum = b.lum * pow(b.ignited/b.lum, x*x*x)
		return lum, f.giantRadius(m, lum), core
	}
	start, loop := b.radii(m)
	xi := clamp(loop/start, 0.4, 2.5)
	at := func(tau float64) float64 {
		if b.from >= 1 || tau >= 1 {
			return b.end
		}
		if tau <= b.from {
			return b.lum
		}
		return b.lum * pow(b.end/b.lum, pow((tau-b.from)/(1-b.from), xi))
	}
	lum = at(tau)
	if tau > b.to {
		return lum, f.agbRadius(m, lum), core
	}
	least := math.Min(loop, start)
	if b.to <= b.from {
		return lum, least, core
	}
	end := math.Max(least, f.agbRadius(m, at(b.to)))
	rho := (math.Cbrt(math.Log(end/least))*(tau-b.from) - math.Cbrt(math.Log(start/least))*(b.to-tau)) / (b.to - b.from)
	rho = math.Abs(rho)
	return lum, least * math.Exp(rho*rho*rho), core
}
