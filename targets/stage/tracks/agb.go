package tracks

import "math"

// agb climbs the asymptotic giant branch and goes on to the white dwarf.
func (w *walk) agb(clock float64) {
	f := w.f
	helium := f.baseAGBCore(clock)
	pulse := dredgeUpCore(helium)
	collapse := math.Max(chandrasekhar, 0.773*helium-0.35)
	w.end = after(helium)
	whole := w.early(clock, helium, math.Min(pulse, collapse))
	if !whole && bareEnd(helium) < collapse {
		w.leave(w.m)
		return
	}
	if !whole || pulse >= collapse {
		w.end, w.burned = EndExplosion, w.age
		return
	}
	w.pulsing(clock, pulse, collapse)
}

// windAGB is the larger of the two winds, Msun/Myr.
func (w *walk) windAGB(lum, radius float64) float64 {
	return 1e6 * math.Max(reimers(w.eta, lum, radius, w.m), superwind(lum, radius, w.m))
}

// early goes to the first thermal pulse; false where the wind took the
// envelope before it.
func (w *walk) early(clock, helium, end float64) bool {
	f := w.f
	lum := f.baseAGB(clock)
	rel := f.relation(clock)
	core := rel.core(lum)
	w.begin(PhaseEAGB)
	if end <= core {
		w.put(PhaseEAGB, helium, lum, f.agbRadius(w.m, lum))
		return true
	}
	c := rel.clock(heliumRate, w.age, lum)
	bare := bareRelation(helium)
	n := 80 * w.fine
	radius := f.agbRadius(w.m, lum)
	wind := w.windAGB(lum, radius)
	for i := 0; ; i++ {
		x := core + (end-core)*float64(i)/float64(n)
		l, r := lum, radius
		if (w.m-helium)/w.m < 0.2 {
			bareL := bare.luminosity(x)
			l, r = thin(w.m, helium, lum, radius, bareL, bareGiantRadius(helium, bareL))
		}
		w.put(PhaseEAGB, helium, l, r)
		w.note()
		if i == n {
			return true
		}
		next := core + (end-core)*float64(i+1)/float64(n)
		lum = rel.luminosity(next)
		dt := math.Max(c.age(next)-w.age, 0)
		before := w.m
		w.m = math.Max(before-wind*dt, helium)
		ahead := w.windAGB(lum, f.agbRadius(w.m, lum))
		lost := (wind + ahead) / 2 * dt
		if before-lost <= helium {
			w.age += dt * (before - helium) / lost
			w.m = helium
			return false
		}
		w.m = before - lost
		w.age += dt
		radius = f.agbRadius(w.m, lum)
		wind = w.windAGB(lum, radius)
	}
}

// note keeps where the star is last seen on the asymptotic giant branch.
func (w *walk) note() {
	p := &w.points[len(w.points)-1]
	w.lastL, w.lastT = p.LogL, p.LogT
}

// Steps of the thermally pulsing branch: at most so much of the envelope goes
// and the core grows, and so much envelope is left at the end.
const (
	envelopeStep = 0.06
	coreStep     = 0.002 // Msun
	envelopeEnd  = 1e-4  // Msun
	off          = 0.05  // dex in temperature that a thin envelope has left the branch by
	mostSteps    = 20000
)

// pulsing goes from the first thermal pulse to the end of the envelope.
func (w *walk) pulsing(clock, pulse, collapse float64) {
	f := w.f
	rel := f.relation(clock)
	lum := rel.luminosity(pulse)
	c := rel.clock(bothRate, w.age, lum)
	kept := 1 - math.Min(0.9, 0.3+0.001*clock*clock*clock*clock*clock)
	core, fine := pulse, float64(w.fine)
	radius := f.agbRadius(w.m, lum)
	wind := w.windAGB(lum, radius)
	w.begin(PhaseTPAGB)
	seen := true
	for i := 0; i < mostSteps && w.m-core > envelopeEnd; i++ {
		l, r := lum, radius
		if seen && (w.m-core)*clamp(math.Sqrt(7e4/lum), 1.2, 5) < w.m {
			bareL, bareR := f.dwarf(core, w.end.cooling(), 0)
			l, r = thin(w.m, core, lum, radius, bareL, 5*bareR)
		}
		logL, logR := math.Log10(l), math.Log10(r)
		seen = seen && (i == 0 || logTeff(logL, logR) < logTeff(math.Log10(lum), math.Log10(radius))+off)
		if seen {
			w.putLog(PhaseTPAGB, core, logL, logR)
			w.note()
		} else if w.m-core < 1e-3*wind {
			break // the rest takes less than a thousand years
		}
		dt := math.Min(envelopeStep*(w.m-core)/wind, coreStep/(bothRate*lum)) / fine
		before := w.m
		lum = rel.luminosity(c.coreAt(w.age + dt))
		w.m = before - wind*dt
		ahead := w.windAGB(lum, f.agbRadius(w.m, lum))
		w.m = math.Max(before-(wind+ahead)/2*dt, core)
		w.age += dt
		core = pulse + kept*(c.coreAt(w.age)-pulse)
		if core >= collapse {
			w.end, w.burned = EndExplosion, w.age
			w.put(PhaseTPAGB, core, lum, f.agbRadius(w.m, lum))
			return
		}
		radius = f.agbRadius(w.m, lum)
		wind = w.windAGB(lum, radius)
	}
	w.leave(math.Min(core, w.m))
}

// crossing returns how long a star takes from the asymptotic giant branch to
// 30 000 K, Myr.
//
// Source: [cite.MillerBertolami2016], from memory, not checked against the
// publication: 10 kyr at 0.53 solar masses, 3.5 at 0.57, 1 at 0.60, 0.3 at
// 0.70; beyond, straight on in the logarithm, between 0.03 and 30 kyr.
//
// Checked: TestCrossing.
func crossing(m float64) float64 {
	mass := [4]float64{0.53, 0.57, 0.60, 0.70}
	logKyr := [4]float64{1, 0.544068, 0, -0.522879}
	i := 0
	for i < 2 && m > mass[i+1] {
		i++
	}
	return 1e-3 * pow10(clamp(line(m, mass[i], logKyr[i], mass[i+1], logKyr[i+1]), -1.522879, 1.477121))
}

// nebulaMyr is how long a nebula is seen around the hot core.
//
// Source: [cite.JacobEtAl2013]: 21 +- 5 kyr; abstract.
const nebulaMyr = 0.021

// logIonises is log10 of the temperature from which a core makes a nebula
// shine, 30 000 K.
const logIonises = 4.477121254719663

// leave crosses from the asymptotic giant branch to the white dwarfs.
func (w *walk) leave(m float64) {
	w.m, w.final, w.burned = m, m, w.age
	lum, radius := w.f.dwarf(m, w.end.cooling(), 0)
	hot := logTeff(math.Log10(lum), math.Log10(radius))
	at := func(p Phase, logL, logT float64) {
		w.points = append(w.points, Point{w.age, p, m, m, logL, logT, (logL - 4*(logT-math.Log10(solarTeffK))) / 2})
	}
	t := crossing(m)
	w.begin(PhasePostAGB)
	at(PhasePostAGB, w.lastL, w.lastT)
	w.age += t
	at(PhasePostAGB, w.lastL, logIonises)
	w.begin(PhaseCentral)
	at(PhaseCentral, w.lastL, logIonises)
	w.age += math.Min(t, nebulaMyr/2)
	at(PhaseCentral, w.lastL, math.Max(hot, logIonises))
	w.age += nebulaMyr - math.Min(t, nebulaMyr/2)
	at(PhaseCentral, math.Log10(lum), hot)
	w.cool(m)
}

// coolMyr is how long white dwarfs are followed.
const coolMyr = 12000

// cool lets a white dwarf cool.
func (w *walk) cool(m float64) {
	w.m, w.final = m, m
	w.begin(PhaseWD)
	born := w.age
	n := 20 * w.fine
	for i := 0; i <= n; i++ {
		t := 0.1 * (pow(coolMyr/0.1+1, float64(i)/float64(n)) - 1)
		w.age = born + t
		l, r := w.f.dwarf(m, w.end.cooling(), t)
		w.put(PhaseWD, m, l, r)
	}
}
