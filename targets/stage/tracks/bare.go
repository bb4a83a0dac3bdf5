package tracks

import "math"

// Stars without envelope: naked helium stars and white dwarfs, and how a thin
// envelope leads over to them.

// chandrasekhar is the mass at which a degenerate core gives way, solar masses.
//
// Source: [cite.HurleyPolsTout2000], section 6.
const chandrasekhar = 1.44

// bareLum is the luminosity of a helium star that has just begun to burn.
//
// Source: [cite.HurleyPolsTout2000], equation 77; the paper was not at hand.
func bareLum(m float64) float64 {
	return 15262 * pow(m, 10.25) / (pow(m, 9) + 29.54*pow(m, 7.5) + 31.18*pow(m, 6) + 0.0469)
}

// bareRadius is its radius.
//
// Source: [cite.HurleyPolsTout2000], equation 78; the paper was not at hand.
func bareRadius(m float64) float64 {
	return 0.2391 * pow(m, 4.6) / (m*m*m*m + 0.162*m*m*m + 0.0065)
}

// bareTime is how long it burns helium in the core, Myr.
//
// Source: [cite.HurleyPolsTout2000], equation 79; the paper was not at hand.
func bareTime(m float64) float64 {
	m4 := m * m * m * m
	return (0.4129 + 18.81*m4 + 1.853*m4*m*m) / pow(m, 6.5)
}

// bareAt returns luminosity and radius of a helium star at a share of that
// time, 0 to 1.
//
// Source: [cite.HurleyPolsTout2000], equations 80 and 81; the paper was not at
// hand.
func bareAt(m, tau float64) (lum, radius float64) {
	t3 := tau * tau * tau
	lum = bareLum(m) * (1 + 0.45*tau + math.Max(0, 0.85-0.08*m)*tau*tau)
	radius = bareRadius(m) * (1 + math.Max(0, 0.4-0.22*math.Log10(m))*(tau-t3*t3))
	return lum, radius
}

// bareRelation is luminosity against core mass of a helium giant.
//
// Source: [cite.HurleyPolsTout2000], equation 84; the paper was not at hand.
func bareRelation(m float64) relation {
	r := relation{p: 5, q: 3, b: 4.1e4, d: 5.5e4 / (1 + 0.4*m*m*m*m)}
	r.knee = math.Sqrt(r.b / r.d)
	r.lum = r.d * pow(r.knee, 5)
	return r
}

// bareGiantRadius is the radius of a helium giant.
//
// Source: [cite.HurleyPolsTout2000], equations 85 to 88; the paper was not at
// hand.
func bareGiantRadius(m, lum float64) float64 {
	end, _ := bareAt(m, 1)
	k := 500 * (2 + m*m*m*m*m) / (m * m * math.Sqrt(m))
	hot := bareRadius(m)*pow(lum/end, 0.2) + 0.02*(math.Exp(math.Min(lum/k, 50))-math.Exp(math.Min(end/k, 50)))
	return math.Max(math.Min(hot, 0.08*pow(lum, 0.75)), 0.5*bareRadius(m))
}

// bareEnd is the core mass at which a helium giant has burned out.
func bareEnd(m float64) float64 { return math.Min(m, 1.45*m-0.31) }

// Kinds of white dwarf by their cooling constants.
const (
	coolHe  = 4.
	coolCO  = 15.
	coolONe = 17.
)

// dwarf returns luminosity and radius of a white dwarf some Myr after it was
// born.
//
//	L = 635 M Z^0.4 / [A (t + 0.1)]^1.4
//	R = 0.0115 sqrt[(1.44/M)^(2/3) - (M/1.44)^(2/3)]
//
// Source: [cite.HurleyPolsTout2000], equations 90 and 91; the paper was not at
// hand.
func (f *Formulas) dwarf(m, cool, age float64) (lum, radius float64) {
	x := math.Cbrt(m / chandrasekhar)
	x *= x
	lum = 635 * m * pow(f.z, 0.4) / pow(cool*(age+0.1), 1.4)
	return lum, 0.0115 * math.Sqrt(math.Max(1.48e-6, 1/x-x))
}

// thin leads luminosity and radius over to those of the bare core where little
// envelope is left.
//
// Source: [cite.HurleyPolsTout2000], equations 97 to 105; the paper was not at
// hand.
func thin(m, core, lum, radius, bareL, bareR float64) (float64, float64) {
	q := (m - core) / m * clamp(math.Sqrt(7e4/lum), 1.2, 5)
	if q >= 1 {
		return lum, radius
	}
	if q <= 0 {
		return bareL, bareR
	}
	b, c := 0.002*math.Max(1, 2.5/m), 0.006*math.Max(1, 2.5/m)
	x := q / b
	x *= x * x
	s := (1 + b*b*b) * x / (1 + x)
	newL := bareL * pow(lum/bareL, s)
	if radius <= bareR {
		return newL, bareR
	}
	w := math.Log(radius / bareR)
	y := q / c
	y *= y * y
	r := (1 + c*c*c) * y / (1 + y) * pow(q, 0.1/w)
	return newL, bareR * math.Exp(w*r)
}

// reimers is the wind of cool giants, Msun/yr.
//
//	Mdot = 4e-13 η L R / M
//
// Source: [cite.Reimers1975]; the paper was not at hand.
func reimers(eta, lum, radius, m float64) float64 { return 4e-13 * eta * lum * radius / m }

// superwind is the wind of pulsating giants, Msun/yr.
//
//	log P = min(3.3, -2.07 - 0.9 log M + 1.94 log R)
//	log Mdot = -11.4 + 0.0125 [P - 100 max(M - 2.5, 0)], at most 1.36e-9 L
//
// Source: [cite.VassiliadisWood1993], as in [cite.HurleyPolsTout2000]; the
// papers were not at hand.
//
// Checked: TestSuperwind.
func superwind(lum, radius, m float64) float64 {
	period := pow10(math.Min(3.3, -2.07-0.9*math.Log10(m)+1.94*math.Log10(radius)))
	return math.Min(pow10(-11.4+0.0125*(period-100*math.Max(m-2.5, 0))), 1.36e-9*lum)
}
