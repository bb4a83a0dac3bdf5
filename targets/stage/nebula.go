package stage

import (
	"fmt"
	"math"
	"slices"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/astro/nebular"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

// Errors of what a list gives of a nebula without saying how good it is.
const (
	fluxErrDex    = 0.1     // of log flux
	diameterErr   = 0.1     // of the diameter
	protonsPerPc3 = 29.4e54 // cm3 in a cubic parsec
	protonPerSun  = 1.19e57 // protons in a solar mass
	withHelium    = 1.4     // mass of gas for each of hydrogen
)

// gas is a nebula without its dust.
type gas struct {
	c, cErr  float64 // c(Hbeta)
	cBy      string
	cSource  string
	logF0    map[nebular.Line]stellar.Measure
	radius   stellar.Measure // arcsec, mean
	distance stellar.Measure // pc
	how      string
}

// seenNebula takes the dust off a nebula's lines.
func (s *sight) seenNebula(t *targets.Target) gas {
	n := &t.Nebula
	g := gas{logF0: map[nebular.Line]stellar.Measure{}}
	fHa, fHb, f5007 := measured(n.LogFHa, fluxErrDex), measured(n.LogFHb, fluxErrDex), measured(n.LogF5007, fluxErrDex)
	switch c := n.CHb; {
	case finite(c) && c.Value >= 0:
		g.c, g.cErr, g.cBy, g.cSource = c.Value, math.Max(c.Err, 0.1*c.Value), "c(Hbeta) as listed", "the list"
	case fHa.Known && fHb.Known && n.NIIIncluded != "yes":
		ratio := math.Pow(10, fHa.Value-fHb.Value)
		if d, err := nebular.Balmer(nebular.Ha, ratio, ratio*math.Ln10*math.Hypot(fHa.Err, fHb.Err)); err == nil {
			g.c, g.cErr, g.cBy, g.cSource = d.C, d.CErr, fmt.Sprintf("Balmer decrement, Halpha/Hbeta = %.2f", ratio), cite.OsterbrockFerland2006.String()
		}
	case s.ebvErr > 0:
		g.c, g.cErr, g.cBy, g.cSource = nebular.CFromEBV(float64(s.ebv)), nebular.CFromEBV(s.ebvErr), "E(B-V)", cite.CardelliEtAl1989.String()
	}
	put := func(l nebular.Line, f stellar.Measure) {
		if v, err := nebular.Dereddened(l, f.Value, g.c); f.Known && err == nil {
			g.logF0[l] = stellar.Measured(v, math.Hypot(f.Err, g.cErr*(1+l.F())))
		}
	}
	put(nebular.Ha, fHa)
	put(nebular.Hb, fHb)
	put(nebular.OIII5007, f5007)
	if a, b := n.DiamArcsec, n.Diam2Arcsec; finite(a) && a.Value > 0 {
		minor := a.Value
		if finite(b) && b.Value > 0 {
			minor = b.Value
		}
		if r, err := nebular.RadiusArcsec(a.Value, minor); err == nil {
			g.radius = stellar.Measured(r, math.Max(a.Err/a.Value*r, diameterErr*r))
		}
	}
	if s.distanceOK {
		q := s.distance
		g.distance, g.how = stellar.Measured(1000*q.Q50, 500*(q.Q84-q.Q16)), s.distanceBy
	}
	return g
}

// statistical returns the distance that brightness and size give.
func (g *gas) statistical() (nebular.Statistical, bool) {
	if ha, ok := g.logF0[nebular.Ha]; ok && g.radius.Known {
		if d, err := nebular.DistanceFromHa(ha.Value, g.radius.Value, nebular.DepthUnknown); err == nil {
			return d, true
		}
	}
	if hb, ok := g.logF0[nebular.Hb]; ok && g.radius.Known {
		const caseB = 0.456 // log10 of 2.86
		if d, err := nebular.DistanceFromHa(hb.Value+caseB, g.radius.Value, nebular.DepthUnknown); err == nil {
			d.Note += "; Halpha by 2.86 times Hbeta"
			return d, true
		}
	}
	return nebular.Statistical{}, false
}

// centralStar places the star inside a nebula, for the diagram.
func (s *sight) centralStar(t *targets.Target) {
	g := s.seenNebula(t)
	if d, ok := g.statistical(); ok && (!g.distance.Known || s.poor) {
		e := d.RelErr
		if e <= 0 {
			e = 0.3
		}
		g.distance, g.how = stellar.Measured(d.DistancePc, e*d.DistancePc), "surface brightness in Halpha"
	}
	s.gas = &g
	v := t.Nebula.CspnV
	if !finite(v) || !g.distance.Known || g.distance.Value <= 0 {
		s.place.Why = "its central star has no listed V or no distance"
		return
	}
	av := extinctionV * nebular.EBVFromC(g.c)
	v0 := astro.Mags(v.Value - av)
	if q := t.Physics.TeffK; finite(q) && q.Value > 2e4 && q.Value < hottestK {
		s.teff = measured(q, 0.1*q.Value)
		s.teffMethod, s.teffSource = "as listed, of the central star", "the list"
	} else if hb, ok := g.logF0[nebular.Hb]; ok {
		if k, err := nebular.ZanstraHI(hb.Value, v0); err == nil {
			s.teff = stellar.Measured(k, 0.15*k)
			s.teffMethod = "Zanstra method with hydrogen, blackbody; a lower limit where light leaks out"
			s.teffSource = cite.Zanstra1931.String() + "; flux of V = 0 " + memory
		}
	}
	if !s.teff.Known {
		s.place.Why = "its central star has no temperature"
		return
	}
	bc, err := nebular.HotBC(s.teff.Value)
	if err != nil {
		s.place.Why = fmt.Sprintf("no bolometric correction for its central star at %.0f K", s.teff.Value)
		return
	}
	absV := v0.Mags() - 5*math.Log10(g.distance.Value) + 5
	e := math.Hypot(2.17*g.distance.Err/g.distance.Value, math.Hypot(0.1, 6.84*s.teff.Err/s.teff.Value/math.Ln10))
	s.logL = stellar.Measured(0.4*(stellar.MbolSun-absV-bc), 0.4*e)
	s.logLMethod, s.logLSource = "V of the central star, "+g.how+", hot bolometric correction (an extrapolation)", cite.VaccaEtAl1996.String()
	s.absV = stellar.Measured(absV, math.Hypot(2.17*g.distance.Err/g.distance.Value, 0.1))
	s.place = Placing{HROK: true, LogT: interval(stellar.Measured(math.Log10(s.teff.Value), s.teff.Err/s.teff.Value/math.Ln10)), LogL: interval(s.logL),
		Why: "the central star"}
}

// ofNebula adds what a nebula's lines and size say.
func (m *Models) ofNebula(t *targets.Target, s *sight, st *Study) {
	g := s.gas
	if g.cBy != "" {
		st.add("c_hbeta", "dust, c(Hbeta)", "dex", g.c, math.Max(0, g.c-g.cErr), g.c+g.cErr, g.cBy, g.cSource)
		if _, listed := excess(t); !listed {
			st.add("ebv_nebula", "E(B-V) from it", "mag", nebular.EBVFromC(g.c), nebular.EBVFromC(math.Max(0, g.c-g.cErr)), nebular.EBVFromC(g.c+g.cErr), g.cBy, cite.CardelliEtAl1989.String())
		}
	}
	s.surfaces(g, st)
	dist := s.nebularDistances(t, g, st)
	if !dist.Known || !g.radius.Known {
		s.starInside(st)
		return
	}
	perArcsec := math.Pi / 180 / 3600
	pc := dist.Value * g.radius.Value * perArcsec
	rel := math.Hypot(dist.Err/dist.Value, g.radius.Err/g.radius.Value)
	st.add("radius_pc", "radius of the nebula", "pc", pc, pc*(1-rel), pc*(1+rel), "angular radius and distance", "geometry")
	s.age(t, pc, rel, st)
	s.ionised(g, dist, pc, st)
	if o3, ok := g.logF0[nebular.OIII5007]; ok {
		s.lineRatios(t, g, o3, dist, st)
	}
	s.starInside(st)
}

// surfaces adds mean surface brightness in the lines, without dust.
func (s *sight) surfaces(g *gas, st *Study) {
	if !g.radius.Known {
		return
	}
	for _, l := range []struct {
		line nebular.Line
		key  string
	}{{nebular.Ha, "log_surface_halpha"}, {nebular.Hb, "log_surface_hbeta"}, {nebular.OIII5007, "log_surface_5007"}} {
		if f, ok := g.logF0[l.line]; ok {
			if v, err := nebular.LogSurface(f.Value, g.radius.Value); err == nil {
				st.measure(l.key, "log surface brightness, "+l.line.String(), "erg/s/cm2/sr", stellar.Measured(v, math.Hypot(f.Err, 0.87*g.radius.Err/g.radius.Value)),
					"mean over the disc, without dust", cite.CardelliEtAl1989.String())
			}
		}
	}
}

// nebularDistances sets the distances side by side and returns the one to use.
func (s *sight) nebularDistances(t *targets.Target, g *gas, st *Study) stellar.Measure {
	d, ok := g.statistical()
	if ok {
		e := d.RelErr * d.DistancePc
		st.add("dist_statistical_pc", "distance by surface brightness", "pc", d.DistancePc, d.DistancePc-e, d.DistancePc+e,
			"Halpha surface brightness and radius", d.Source.String()+noted(d.Note))
	}
	if hb, has := g.logF0[nebular.Hb]; has && g.radius.Known {
		if x, err := nebular.DistanceFromHb(hb.Value, g.radius.Value); err == nil {
			st.add("dist_hbeta_pc", "distance by Hbeta and radius", "pc", x.DistancePc, math.NaN(), math.NaN(), "Hbeta surface brightness and radius"+noted(x.Note), x.Source.String())
		}
	}
	if finite(t.Place.Plx) && !nebular.PreferParallax(t.Place.Plx.Value, t.Place.Plx.Err) && ok {
		st.Notes = append(st.Notes, "its parallax is under five errors: the statistical distance is used")
	}
	return g.distance
}

func noted(s string) string {
	if s == "" {
		return ""
	}
	return "; " + s
}

// age adds how long ago the nebula was let go.
func (s *sight) age(t *targets.Target, pc, rel float64, st *Study) {
	a, err := nebular.AgeByDefault(pc)
	how := "radius over 42 +- 10 km/s, the mean of nebulae's edges"
	source := cite.JacobEtAl2013.String()
	if v := t.Nebula.VexpKms; finite(v) && v.Value > 0 {
		a, err = nebular.AgeFromLine(pc, v.Value)
		how, source = fmt.Sprintf("radius over 1.7 (1.3 to 3) times the %.0f km/s of the line", v.Value), cite.SchonbernerEtAl2005.String()+"; 1.7 common practice, no source"
	}
	if err != nil {
		return
	}
	lo := a.Yr - math.Hypot(a.Yr-a.LoYr, rel*a.Yr)
	hi := a.Yr + math.Hypot(a.HiYr-a.Yr, rel*a.Yr)
	st.add("expansion_age_kyr", "age by expansion", "kyr", a.Yr/1000, math.Max(lo, 0)/1000, hi/1000, how, source)
}

// ionised adds the mass of the gas, at the density that spreads it evenly.
func (s *sight) ionised(g *gas, dist stellar.Measure, pc float64, st *Study) {
	hb, ok := g.logF0[nebular.Hb]
	if !ok {
		return
	}
	kpc := dist.Value / 1000
	perDensity, err := nebular.IonisedMass(hb.Value, kpc, 1) // Msun times density
	if err != nil {
		return
	}
	perVolume := withHelium * 4 / 3 * math.Pi * pc * pc * pc * protonsPerPc3 / protonPerSun // Msun per unit of density
	if perVolume <= 0 {
		return
	}
	ne := math.Sqrt(perDensity / perVolume)
	mass := perDensity / ne
	rel := math.Hypot(2.5*dist.Err/dist.Value, hb.Err*math.Ln10/2)
	st.add("ne_rms_cm3", "electron density if even", "cm-3", ne, math.NaN(), math.NaN(), "Hbeta flux over the sphere; gas in clumps is denser", cite.OsterbrockFerland2006.String())
	st.add("ionised_mass_msun", "ionised mass", "Msun", mass, mass/(1+rel), mass*(1+rel), "Hbeta flux at that density; an upper limit where the gas is in clumps", cite.OsterbrockFerland2006.String())
}

// lineRatios adds excitation, and doubts about what the object is.
func (s *sight) lineRatios(t *targets.Target, g *gas, o3, dist stellar.Measure, st *Study) {
	if hb, ok := g.logF0[nebular.Hb]; ok {
		ratio := math.Pow(10, o3.Value-hb.Value)
		if class, least, err := nebular.Excitation(ratio, 0); err == nil {
			how := fmt.Sprintf("5007/Hbeta = %.1f without dust", ratio)
			if least {
				how += "; at least, He II 4686 not listed"
			}
			st.add("excitation_class", "excitation class", "", class, math.NaN(), math.NaN(), how, cite.DopitaMeatheringham1990.String()+", seen in one copy")
		}
	}
	if ha, ok := g.logF0[nebular.Ha]; ok {
		for _, w := range nebular.Mimics(nebular.Ratios{HaOverOIII: math.Pow(10, ha.Value-o3.Value)}) {
			if line := w.Text + " [" + w.Source + "]"; !slices.Contains(st.Notes, line) {
				st.Notes = append(st.Notes, line)
			}
		}
	}
	if m, err := nebular.Mag5007(o3.Value); err == nil {
		if abs, bright, err := nebular.TooBright(m, dist.Value); err == nil && bright {
			st.Notes = append(st.Notes, fmt.Sprintf("M(5007) = %.2f is brighter than nebulae get: distance or dust is wrong [%s]", abs, cite.CiardulloEtAl2002))
		}
	}
}

// starInside adds the star that lights the nebula.
func (s *sight) starInside(st *Study) {
	st.measure("abs_v_mag", "absolute magnitude of the central star in V", "mag", s.absV, "V, "+s.gas.how+" and dust", cite.CardelliEtAl1989.String())
	st.measure("teff_k", "temperature of the central star", "K", s.teff, s.teffMethod, s.teffSource)
	st.inLog("lum_lsun", "luminosity of the central star", "Lsun", s.logL, s.logLMethod, s.logLSource)
	if s.place.HROK {
		r := stellar.Radius(s.logL.Value, s.teff.Value)
		rel := math.Hypot(s.logL.Err/2*math.Ln10, 2*s.teff.Err/s.teff.Value)
		st.add("radius_rsun", "radius of the central star", "Rsun", r, r*math.Exp(-rel), r*math.Exp(rel), "luminosity and temperature", cite.IAU2015B3.String())
	}
}
