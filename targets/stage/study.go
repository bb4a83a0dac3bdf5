package stage

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

// Study is what is worked out of one target when somebody looks at it: more
// than a list can afford.
type Study struct {
	Quantities []Quantity
	Steps      []Step   // the working, in the order in which one leads to the next
	Notes      []string // in words
	Decide     []string // what observation would settle what it is
}

// Get returns a quantity by its key.
func (s *Study) Get(key string) (Quantity, bool) {
	for _, q := range s.Quantities {
		if q.Key == key {
			return q, true
		}
	}
	return Quantity{}, false
}

// SharesMethod tells whether the quantity after the one at i comes by the same
// method from the same source, so that saying it once is enough.
func (s *Study) SharesMethod(i int) bool {
	return i+1 < len(s.Quantities) && s.Quantities[i].Method == s.Quantities[i+1].Method && s.Quantities[i].Source == s.Quantities[i+1].Source
}

// Study works out the physical quantities of a target with their intervals,
// and what would settle its stage.
//
// Given:
//   - t, v: a target and its judgement by the same models.
//
// Notes:
//  1. An interval holds with probability [Level]. One that is not known is not
//     a number.
//  2. What comes from memory says so in its source.
//
// Checked: TestStudyGiant, TestStudyDwarf, TestStudyNebula, FuzzJudge.
func (m *Models) Study(t targets.Target, v *Verdict) Study {
	s := m.sight(&t, true)
	m.onTracks(s)
	st := &Study{Steps: s.steps}
	s.distances(st)
	switch {
	case t.Kind == targets.PN:
		m.ofNebula(&t, s, st)
	case s.fit != nil:
		m.ofDwarf(&t, s, st)
	default:
		m.ofStar(&t, s, v, st)
	}
	if t.Kind == targets.Interacting {
		m.ofBinary(&t, st)
	}
	st.Decide = decide(&t, s, v)
	return *st
}

func (st *Study) add(key, words, unit string, value, lo, hi float64, method, source string) {
	if math.IsNaN(value) || math.IsInf(value, 0) {
		return
	}
	st.Quantities = append(st.Quantities, Quantity{key, words, unit, value, lo, hi, method, source})
}

func (st *Study) measure(key, words, unit string, m stellar.Measure, method, source string) {
	if m.Known {
		st.add(key, words, unit, m.Value, m.Value-m.Err, m.Value+m.Err, method, source)
	}
}

// inLog adds a quantity whose logarithm is known.
func (st *Study) inLog(key, words, unit string, m stellar.Measure, method, source string) {
	if m.Known {
		st.add(key, words, unit, math.Pow(10, m.Value), math.Pow(10, m.Value-m.Err), math.Pow(10, m.Value+m.Err), method, source)
	}
}

func (st *Study) span(key, words, unit string, i astro.Interval, factor float64, method, source string) {
	if i.Valid() {
		st.add(key, words, unit, i.Mid*factor, i.Lo*factor, i.Hi*factor, method, source)
	}
}

// distances adds how far and how bright it is.
func (s *sight) distances(st *Study) {
	if s.distanceOK {
		st.add("dist_pc", "distance", "pc", 1000*s.distance.Q50, 1000*s.distance.Q16, 1000*s.distance.Q84, s.distanceBy, s.distanceOf)
	}
	how := "as listed, true scale"
	if s.ebvAssumed {
		how = "a layer of dust of 0.5 mag/kpc assumed"
	}
	if s.ebvErr > 0 {
		st.add("ebv", "E(B-V), true scale", "mag", float64(s.ebv), math.Max(0, float64(s.ebv)-s.ebvErr), float64(s.ebv)+s.ebvErr, how, practice)
	}
	for _, b := range []struct {
		band     targets.Band
		key, say string
	}{{"G", "abs_g_mag", "absolute magnitude in G"}, {"V", "abs_v_mag", "absolute magnitude in V"}, {"K", "abs_k_mag", "absolute magnitude in K"}} {
		if m, ok := s.abs[b.band]; ok {
			st.measure(b.key, b.say, "mag", m, "magnitude, distance and extinction", cite.CasagrandeVandenBerg2018.String())
		}
	}
	st.measure("bp_rp_0_mag", "BP-RP without reddening", "mag", s.colours.BPRP, "iterated with the colour", cite.FitzpatrickEtAl2019.String())
}

// ofStar adds what makes a star: temperature, luminosity, radius, gravity,
// mass and age.
func (m *Models) ofStar(t *targets.Target, s *sight, v *Verdict, st *Study) {
	st.measure("teff_k", "temperature", "K", s.teff, s.teffMethod, s.teffSource)
	st.measure("feh", "[Fe/H]", "dex", s.feh, "as listed", "the list")
	st.inLog("lum_lsun", "luminosity", "Lsun", s.logL, s.logLMethod, s.logLSource)
	if !s.place.HROK {
		if s.logG.Known {
			st.measure("logg", "log g (cm/s2)", "", s.logG, s.logGMethod, s.logGSource)
		}
		return
	}
	r := stellar.Radius(s.logL.Value, s.teff.Value)
	rel := math.Hypot(s.logL.Err/2*math.Ln10, 2*s.teff.Err/s.teff.Value)
	st.add("radius_rsun", "radius", "Rsun", r, r*math.Exp(-rel), r*math.Exp(rel), "luminosity and temperature", cite.IAU2015B3.String())
	mass := stellar.Measured(giantsMass, giantsMassErr)
	code := targets.Stage(v.Best)
	if v.Best == targets.Merged || v.Best == targets.Undecided {
		code = likeliest(v.P)
	}
	if of, ok := s.post.ByStage[code]; ok && code != targets.RSG {
		mass = fromInterval(of.Mass)
		st.span("mass_msun", "mass", "Msun", of.Mass, 1, "evolution tracks, as "+string(code), cite.HurleyPolsTout2000.String())
		st.span("age_gyr", "age", "Gyr", of.Age, 1e-3, "evolution tracks, as "+string(code), cite.HurleyPolsTout2000.String())
	}
	if s.seismic.Mass.Known {
		st.measure("mass_seismic_msun", "mass from oscillations", "Msun", s.seismic.Mass, "numax and dnu scaled from the Sun", cite.KjeldsenBedding1995.String())
		mass = s.seismic.Mass
	}
	if s.logG.Known {
		st.measure("logg", "log g (cm/s2)", "", s.logG, s.logGMethod, s.logGSource)
	} else {
		st.measure("logg", "log g (cm/s2)", "", stellar.LogG(mass, s.logL.Value, s.teff.Value), "mass, luminosity and temperature", cite.IAU2015B3.String())
	}
	if s.giant && s.logL.Value > 4.3 && s.teff.Value < 5000 {
		st.Notes = append(st.Notes, "too luminous for a low-mass star: a massive supergiant is not told from the brightest AGB stars by its place alone")
	}
}

// lifetimeYr returns how long a star of solar composition lives before it is a
// white dwarf.
func (m *Models) lifetimeYr(massMsun float64) float64 {
	t, err := m.solar().Lifetime(massMsun, windFactor)
	if err != nil {
		return math.NaN()
	}
	return 1e6 * t
}

// decide says what observation would settle what a target is.
func decide(t *targets.Target, s *sight, v *Verdict) []string {
	var out []string
	say := func(format string, a ...any) { out = append(out, fmt.Sprintf(format, a...)) }
	sure := v.Sureness() >= 0.9 && v.Best != targets.Merged
	p := func(c ...targets.Stage) (sum float64) {
		for _, x := range c {
			sum += v.P[x]
		}
		return sum
	}
	const open = 0.05
	both := func(a, b targets.Stage) bool { return p(a) > open && p(b) > open }
	if !s.distanceOK && !sure && t.Kind != targets.PN {
		say("a parallax: without it its luminosity is not known")
	}
	if s.poor && !sure {
		say("a better parallax: the distance is uncertain by %.0f %%", 100*(math.Pow(10, s.farErr)-1))
	}
	if !s.teff.Known && !sure && t.Kind != targets.PN && t.Kind != targets.Interacting {
		say("a temperature, or a colour that gives one")
	}
	switch {
	case both(targets.RC, targets.RGB):
		say("period spacing of its mixed modes (a month of space photometry) tells clump from giant branch with near certainty; common practice, no source")
		if !s.teffListed || !s.feh.Known {
			say("a spectrum with temperature to 50 K and [Fe/H] to 0.1: raises the share that is called right from 89 to 93 %% (%s)", cite.ElsworthEtAl2019)
		}
	case p(targets.RGB) > open && p(targets.EAGB, targets.TPAGB) > open:
		say("technetium in the spectrum, or pulsation of more than 100 d with a large amplitude, would place it on the thermally pulsing AGB; RGB and early AGB stay together without seismology")
	}
	if both(targets.Dwarf, targets.SDB) || both(targets.SDB, targets.CSPN) || both(targets.Dwarf, targets.CSPN) {
		say("a spectrum of the Balmer lines: log g near 5.5 is a hot subdwarf, 7 and more a white dwarf")
	}
	if both(targets.Dwarf, targets.ACC) {
		say("an hour of fast photometry, or a spectrum: emission lines and flickering show that it accretes")
	}
	if both(targets.PAGB, targets.RSG) || both(targets.TPAGB, targets.RSG) {
		say("a parallax or a cluster: above M_bol -7.1 only a massive star shines")
	}
	if both(targets.SG, targets.MS) || both(targets.SG, targets.RGB) {
		say("log g to 0.1 from a spectrum, or solar-like oscillations")
	}
	if s.fit != nil && s.fit.TeffK.Mid < twoAtmospheres && !s.surfaceKnown {
		say("a spectrum: hydrogen or helium atmosphere; Gaia photometry cannot tell")
	}
	return out
}
