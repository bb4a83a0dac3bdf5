package tracks

import "math"

// Point is a star at one age.
type Point struct {
	AgeMyr           float64
	Phase            Phase
	Mass, Core       float64 // present mass and mass of the core, Msun
	LogL, LogT, LogR float64 // log10 of Lsun, K, Rsun
}

// Start is the begin of a phase; core helium burning counts as one, under the
// name it begins with.
type Start struct {
	Phase        Phase
	AgeMyr, Mass float64 // Myr, Msun
}

// Track is the life of one star.
type Track struct {
	Mass, Z, Eta float64 // mass at birth, Msun; metals; wind factor
	Points       []Point // by age; the last is a cool white dwarf, or the explosion
	Starts       []Start // by age
	End          End
	FinalMass    float64 // Msun; 0 after an explosion
	// BurnedMyr is the age at which nuclear burning ends: where the post-AGB
	// begins, or the white dwarf where there is none, or the explosion.
	BurnedMyr float64
}

// Start returns where a phase begins; asked for any name of core helium
// burning, where that begins. ok is false where the star skips the phase.
func (t *Track) Start(p Phase) (s Start, ok bool) {
	for _, s := range t.Starts {
		if s.Phase.main() == p.main() {
			return s, true
		}
	}
	return Start{}, false
}

// Track follows a star from birth to a cool white dwarf.
//
//	wind after the main sequence: Mdot = 4e-13 η L R / M  Msun/yr
//	on the asymptotic giant branch the superwind where that is larger
//
// Given:
//   - mass: at birth, 0.1 to 50 solar masses.
//   - eta: η of the wind, 0 to 3; 0.2 to 0.5 are in use.
//
// Returns:
//   - [ErrMass], [ErrLoss].
//
// Notes:
//  1. Below 0.5 solar masses the formulas are beyond their fit after the main
//     sequence; no such star has left it yet. Above some 8 the winds of
//     massive stars are missing.
//  2. Post-AGB and central star are schematic: a straight line to 30 000 K at
//     constant luminosity in a time that depends on the final mass, then to
//     the hottest white dwarf in 21 000 years.
//
// Source: [cite.HurleyPolsTout2000]; [cite.Reimers1975];
// [cite.VassiliadisWood1993]; [cite.MillerBertolami2016], times from memory,
// not checked against the publication; [cite.JacobEtAl2013], abstract. The
// papers were not at hand.
//
// Checked: TestTracks, TestAuthorsTrack, TestFinalMasses, TestContinuity,
// TestTrackProperty, FuzzTrack.
func (f *Formulas) Track(mass, eta float64) (Track, error) {
	if !(mass >= LeastMass && mass <= MostMass) {
		return Track{}, ErrMass
	}
	if !(eta >= 0 && eta <= 3) {
		return Track{}, ErrLoss
	}
	w := walk{f: f, birth: mass, m: mass, eta: eta, fine: 3}
	w.live()
	return Track{Mass: mass, Z: f.z, Eta: eta, Points: w.points, Starts: w.starts, End: w.end,
		FinalMass: w.final, BurnedMyr: w.burned}, nil
}

// Lifetime returns the age at which a star has left the asymptotic giant
// branch, Myr: what to add to a white dwarf's cooling for its whole age.
//
// Given, Returns: as for [Formulas.Track].
//
// Checked: TestLifetime.
func (f *Formulas) Lifetime(mass, eta float64) (float64, error) {
	t, err := f.Track(mass, eta)
	return t.BurnedMyr, err
}

// walk is a star being followed.
type walk struct {
	f             *Formulas
	birth, m, age float64
	eta           float64
	fine          int     // multiplies the number of steps; 1 serves the grid
	until         float64 // age, Myr, beyond which no phase is begun; 0: none
	points        []Point
	starts        []Start
	end           End
	final, burned float64
	lastL, lastT  float64 // where the asymptotic giant branch was left
}

// begin notes that a phase begins.
func (w *walk) begin(p Phase) { w.starts = append(w.starts, Start{p, w.age, w.m}) }

// put adds a point from luminosity and radius.
func (w *walk) put(p Phase, core, lum, radius float64) {
	w.putLog(p, core, math.Log10(lum), math.Log10(radius))
}

func (w *walk) putLog(p Phase, core, logL, logR float64) {
	w.points = append(w.points, Point{w.age, p, w.m, math.Min(core, w.m), logL, logTeff(logL, logR), logR})
}

// live goes through all phases.
func (w *walk) live() {
	w.mainSequence()
	if w.old() || w.birth < w.f.mFGB && !w.redGiant() || w.old() {
		return
	}
	if clock, ok := w.coreHelium(); ok && !w.old() {
		w.agb(clock)
	}
}

// old tells whether nobody wants to know how the star goes on.
func (w *walk) old() bool { return w.until > 0 && w.age > w.until }

// mainSequence goes to the base of the giant branch, or to helium ignition.
func (w *walk) mainSequence() {
	f, m := w.f, w.birth
	s := f.sequence(m)
	w.begin(PhaseMS)
	n := 40 * w.fine
	for i := 0; i < n; i++ {
		w.age = s.end * float64(i) / float64(n)
		l, r := s.at(w.age)
		w.putLog(PhaseMS, 0, l, r)
	}
	for i := 0; i <= 10*w.fine && s.dL+s.dR > 0; i++ { // the hook is brief
		w.age = s.hook * (0.99 + 0.01*float64(i)/float64(10*w.fine))
		if w.age > w.points[len(w.points)-1].AgeMyr && w.age < s.end {
			l, r := s.at(w.age)
			w.putLog(PhaseMS, 0, l, r)
		}
	}
	w.age = s.end
	l, r := s.at(w.age)
	w.putLog(PhaseMS, 0, l, r)
	end, lum, core := f.GiantBaseTime(m), 0., 0.
	var radius float64
	if m < f.mFGB {
		lum, core = f.baseGiant(m), f.baseGiantCore(m)
		radius = f.giantRadius(m, lum)
	} else {
		lum, core = f.ignition(m), f.ignitionCore(m)
		radius = f.ignitionRadius(m)
	}
	m5 := pow(m, 5.25)
	share := (1.586 + m5) / (2.434 + 1.02*m5)
	endL, endR := math.Log10(lum), math.Log10(radius)
	w.begin(PhaseGap)
	n = 1
	if w.fine > 1 {
		n = 24
	}
	for i := 0; i <= n; i++ {
		x := float64(i) / float64(n)
		w.age = s.end + (end-s.end)*x
		w.putLog(PhaseGap, core*((1-x)*share+x), l+(endL-l)*x, r+(endR-r)*x)
	}
}

// redGiant climbs the giant branch; false where the wind ends it.
func (w *walk) redGiant() bool {
	f, m0 := w.f, w.birth
	lum, top := f.baseGiant(m0), f.ignition(m0)
	rel := f.relation(m0)
	c := rel.clock(hydrogenRate(m0), w.age, lum)
	core0, core1 := f.baseGiantCore(m0), f.ignitionCore(m0)
	end := c.age(rel.core(top))
	begin := w.age
	w.begin(PhaseRGB)
	n := 100 * w.fine
	lnL, step := math.Log(lum), math.Log(top/lum)/float64(n)
	radius := f.giantRadius(w.m, lum)
	wind := reimers(w.eta, lum, radius, w.m)
	for i := 0; ; i++ {
		core := rel.core(lum)
		if m0 >= f.mHeF {
			core = line(w.age, begin, core0, math.Max(end, begin+1e-9), core1)
		}
		if core >= w.m {
			w.strippedGiant()
			return false
		}
		var bareL, bareR float64
		if m0 < f.mHeF {
			bareL, bareR = f.dwarf(core, coolHe, 0)
			bareR *= 5
		} else {
			bareL, bareR = bareLum(core), bareRadius(core)
		}
		l, r := thin(w.m, core, lum, radius, bareL, bareR)
		w.put(PhaseRGB, core, l, r)
		if i == n {
			return true
		}
		x := lnL + step*float64(i+1)
		lum = math.Exp(x)
		next := c.age(rel.core(lum))
		dt := math.Max(next-w.age, 0)
		guess := math.Max(w.m-wind*dt*1e6, 0.5*w.m)
		ahead := reimers(w.eta, lum, f.giantRadiusLog(math.Log(guess), x), guess)
		w.m = math.Max(w.m-(wind+ahead)/2*dt*1e6, 0.5*w.m)
		w.age = w.age + dt
		radius = f.giantRadiusLog(math.Log(w.m), x)
		wind = reimers(w.eta, lum, radius, w.m)
	}
}

// strippedGiant ends a star whose envelope the wind took on the giant branch.
func (w *walk) strippedGiant() {
	if w.birth < w.f.mHeF {
		w.end = EndHelium
		w.burned = w.age
		w.cool(w.m)
		return
	}
	w.heliumStar(0)
}

// coreHelium burns helium in the core; it returns the clock mass, and false
// where the wind took the envelope.
func (w *walk) coreHelium() (clock float64, ok bool) {
	f := w.f
	clock = w.birth
	if clock < f.mHeF {
		clock = w.m // the flash starts it anew
	}
	b := f.burning(clock)
	length := f.heliumTime(clock, f.ignitionCore(w.birth))
	begin := w.age
	n := 60 * w.fine
	for i := 0; ; i++ {
		tau := float64(i) / float64(n)
		lum, radius, core := b.at(w.m, tau)
		if core >= w.m {
			w.heliumStar(tau)
			return clock, false
		}
		bareL, bareR := bareAt(core, tau)
		l, r := thin(w.m, core, lum, radius, bareL, bareR)
		logL, logR := math.Log10(l), math.Log10(r)
		phase := f.heliumPhase(clock, logTeff(logL, logR))
		if i == 0 {
			w.begin(phase)
		}
		w.putLog(phase, core, logL, logR)
		if i == n {
			return clock, true
		}
		dt := begin + length*float64(i+1)/float64(n) - w.age
		w.m = math.Max(w.m-reimers(w.eta, lum, radius, w.m)*dt*1e6, 0.5*w.m)
		w.age += dt
	}
}

// heliumStar follows a star that lost its envelope while helium burned, from a
// share of the core helium burning on.
func (w *walk) heliumStar(from float64) {
	m := w.m
	w.begin(PhaseHeMS)
	begin, length := w.age, bareTime(m)
	n := 40 * w.fine
	var lum float64
	for i := 0; i <= n; i++ {
		tau := from + (1-from)*float64(i)/float64(n)
		var r float64
		lum, r = bareAt(m, tau)
		w.age = begin + length*(tau-from)
		w.put(PhaseHeMS, m, lum, r)
	}
	rel := bareRelation(m)
	core, last := rel.core(lum), math.Min(bareEnd(m), math.Max(chandrasekhar, 0.773*m-0.35))
	c := rel.clock(heliumRate, w.age, lum)
	if last > core {
		w.begin(PhaseHeGiant)
	}
	for i := 1; i <= n && last > core; i++ {
		x := core + (last-core)*float64(i)/float64(n)
		l := rel.luminosity(x)
		w.age = math.Max(w.age, c.age(x))
		w.put(PhaseHeGiant, x, l, bareGiantRadius(m, l))
	}
	w.end, w.burned = after(m), w.age
	if math.Max(last, core) >= chandrasekhar {
		w.end = EndExplosion
		return
	}
	w.cool(m)
}
