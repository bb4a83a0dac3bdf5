package stage

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/astro/degenerate"
	"evenfall/targets"
)

// ofDwarf adds what the models say of a white dwarf.
func (m *Models) ofDwarf(t *targets.Target, s *sight, st *Study) {
	fit, source := s.fit, cite.BedardEtAl2020.String()
	how := s.fitMethod(t)
	st.span("teff_k", "temperature", "K", fit.TeffK, 1, how, source)
	st.span("lum_lsun", "luminosity", "Lsun", fit.LumLsun, 1, how, source)
	st.span("radius_rsun", "radius", "Rsun", fit.RadiusRsun, 1, how, source)
	st.span("logg", "log g (cm/s2)", "", fit.LogG, 1, how, source)
	st.span("mass_msun", "mass", "Msun", fit.MassMsun, 1, how, source)
	st.span("cooling_age_gyr", "cooling age", "Gyr", fit.CoolingAgeYr, 1e-9, how, source)
	for _, n := range fit.Notes {
		if !s.surfaceKnown || !strings.Contains(n, "atmosphere matters") && !strings.Contains(n, "cannot tell DA from DB") && !strings.Contains(n, "helium-rich DC") {
			st.Notes = append(st.Notes, n)
		}
	}
	if fit.TeffK.Mid < twoAtmospheres && !s.surfaceKnown {
		m.otherAtmosphere(t, s, st)
	}
	m.crystals(fit, st)
	m.redshift(fit, st)
	m.cold(fit, st)
	if !s.poor {
		m.progenitor(fit, st)
	}
	m.ofCluster(t, fit.CoolingAgeYr.Mid/1e9, st)
	if !s.poor {
		m.pulsation(t, fit, st)
	}
	if x, ok := degenerate.ParseSpectrum(t.Physics.SpType); ok {
		st.Notes = append(st.Notes, "spectrum "+t.Physics.SpType+": "+x.Words)
		if i := x.TeffK; i.Valid() && math.Abs(i.Mid-fit.TeffK.Mid) > 3*math.Hypot(i.Hi-i.Lo, fit.TeffK.Hi-fit.TeffK.Lo)/2 {
			st.Notes = append(st.Notes, fmt.Sprintf("contradiction: the number in %s means %.0f K, the models say %.0f K", t.Physics.SpType, i.Mid, fit.TeffK.Mid))
		}
	}
}

// crystals adds how far the core has turned solid.
func (m *Models) crystals(fit *degenerate.Answer, st *Study) {
	c, err := m.dwarfs().Crystallisation(fit.MassMsun.Mid, fit.TeffK.Mid)
	if err != nil {
		return
	}
	lo, hi := math.NaN(), math.NaN()
	if most := 0.8; c.Part >= most { // the table ends there
		lo, hi = most, 1
	}
	st.add("crystallised_fraction", "solid part of the core", "", c.Part, lo, hi, c.Words+fmt.Sprintf(", onset %.0f K, 80 %% %.0f K", c.OnsetK, c.MostK), cite.BedardEtAl2020.String())
}

// otherAtmosphere adds what a helium atmosphere would make of it.
func (m *Models) otherAtmosphere(t *targets.Target, s *sight, st *Study) {
	seen, ok := s.dwarfSeen(t)
	if !ok {
		return
	}
	he, err := m.dwarfs().Fit(seen, degenerate.WidePrior, degenerate.Helium)
	if err != nil {
		return
	}
	how := strings.Replace(s.fitMethod(t), "hydrogen", "helium", 1)
	st.span("teff_helium_k", "temperature if helium", "K", he.TeffK, 1, how, cite.BedardEtAl2020.String())
	st.span("mass_helium_msun", "mass if helium", "Msun", he.MassMsun, 1, how, cite.BedardEtAl2020.String())
}

// redshift adds what gravity takes from the light.
func (m *Models) redshift(fit *degenerate.Answer, st *Study) {
	at := func(mass, radius float64) float64 { return degenerate.Redshift(mass, radius) }
	if fit.RadiusRsun.Valid() {
		st.add("grav_redshift_kms", "gravitational redshift", "km/s", at(fit.MassMsun.Mid, fit.RadiusRsun.Mid), at(fit.MassMsun.Lo, fit.RadiusRsun.Hi),
			at(fit.MassMsun.Hi, fit.RadiusRsun.Lo), "mass over radius", "general relativity, weak field")
	}
}

// cold adds the radius that the star will have, and the mass that none passes.
func (m *Models) cold(fit *degenerate.Answer, st *Study) {
	const electrons = 2 // nucleons for each
	if c, err := degenerate.ColdOfMass(fit.MassMsun.Mid, electrons); err == nil {
		st.add("radius_cold_rsun", "radius when cold", "Rsun", c.RadiusRsun, math.NaN(), math.NaN(), "degenerate star integrated, ideal electrons, mu_e = 2", cite.Chandrasekhar1939.String())
	}
	st.add("mass_limit_msun", "mass limit", "Msun", m.limit(), math.NaN(), math.NaN(), "the same, limit of infinite density; real cores of carbon and oxygen reach 1.37 to 1.39 ("+memory+")",
		cite.Chandrasekhar1939.String())
}

// progenitor adds the star that it was.
func (m *Models) progenitor(fit *degenerate.Answer, st *Study) {
	rel := degenerate.CummingsMIST()
	sd := (fit.MassMsun.Hi - fit.MassMsun.Lo) / 2
	born, notes, err := rel.Progenitor(fit.MassMsun.Mid, sd)
	if err != nil {
		st.Notes = append(st.Notes, "progenitor: "+err.Error())
		return
	}
	st.span("progenitor_msun", "initial mass", "Msun", born, 1, "initial-final mass relation of clusters, scatter 0.06 Msun", rel.Source.String())
	age, more, err := rel.TotalAge(fit.MassMsun.Mid, sd, fit.CoolingAgeYr, m.lifetimeYr)
	if err == nil {
		st.span("total_age_gyr", "age since birth", "Gyr", age, 1e-9, "cooling age and the life of the initial mass", cite.HurleyPolsTout2000.String())
	}
	for _, n := range append(notes, more...) {
		if line := "progenitor: " + n; !slices.Contains(st.Notes, line) {
			st.Notes = append(st.Notes, line)
		}
	}
}

// pulsation says in which strips of instability the star may lie, and how fast
// it must be observed there.
func (m *Models) pulsation(t *targets.Target, fit *degenerate.Answer, st *Study) {
	const worth = 0.05
	err := (fit.TeffK.Hi - fit.TeffK.Lo) / 2
	for _, strip := range degenerate.Strips(fit.LogG.Mid) {
		p := strip.Chance(fit.TeffK.Mid, err, fit.LogG.Mid)
		if strip.Name == degenerate.StripSdBp || strip.Name == degenerate.StripSdBg || p < worth {
			continue
		}
		shortest := strip.ShortestS
		line := fmt.Sprintf("%s strip, %.0f to %.0f K: probability %.2f that it lies in it, if its surface is %s; periods %.0f to %.0f s", strip.Name, strip.RedK, strip.BlueK,
			p, strip.Needs, strip.ShortestS, strip.LongestS)
		if mean, ok := degenerate.ZZCetiPeriod(fit.TeffK.Mid, fit.LogG.Mid); ok && strip.Name == degenerate.StripDAV {
			line += fmt.Sprintf(", here about %.0f s", mean.Mid)
			shortest = math.Max(strip.ShortestS, mean.Lo)
		}
		line += fmt.Sprintf("; exposure and readout %s at most, which keeps %.0f %% of the amplitude, for %s at least (%s)", seconds(degenerate.LongestCadence(shortest)),
			100*degenerate.AmplitudeKept(degenerate.LongestCadence(shortest).Seconds(), shortest), degenerate.ShortestRun(strip.LongestS).Round(time.Minute), strip.Source)
		st.Notes = append(st.Notes, line)
		st.add("cadence_s", "exposure and readout for its pulsation", "s", degenerate.LongestCadence(shortest).Seconds(), math.NaN(), math.NaN(),
			"an eighth of the shortest period expected in the "+strip.Name+" strip", practice)
		return
	}
}

func seconds(d time.Duration) string { return fmt.Sprintf("%.0f s", d.Seconds()) }

// Masses of accreting white dwarfs whose novae come back within a century.
// Common practice, no source.
var recurrentMass = astro.Interval{Lo: 1.2, Mid: 1.3, Hi: 1.38, Level: Level}

// typicalPair is the mass of a white dwarf in a close pair, nothing else known.
var typicalPair = astro.Interval{Lo: 0.5, Mid: 0.6, Hi: 0.75, Level: Level}

// ofBinary adds what the orbit of a binary with a white dwarf says.
func (m *Models) ofBinary(t *targets.Target, st *Study) {
	note := strings.ToLower(t.KindNote)
	if strings.Contains(note, "recurrent nova") {
		if j, err := degenerate.SingleDegenerate(recurrentMass); err == nil {
			st.Notes = append(st.Notes, j.Words+"; the mass is that of recurrent novae in general, not measured here ("+practice+")")
		}
	}
	p := t.Var.PeriodD
	if !finite(p) || p.Value <= 0 || p.Value > 1000 || strings.Contains(note, "symbiotic") {
		return
	}
	h := 24 * p.Value
	if rho := degenerate.LobeDensity(h); !math.IsNaN(rho) && t.Kind == targets.Interacting && !detached(t) {
		st.add("donor_density_gcm3", "mean density of the companion that fills its lobe", "g/cm3", rho, math.NaN(), math.NaN(), "107 P(h)^-2 from the period listed, taken as the orbit's", memory)
	}
	if strings.Contains(note, "double white dwarf") || strings.Contains(note, "wd+wd") {
		if j, err := degenerate.DoubleDegenerate(typicalPair, typicalPair, h); err == nil {
			st.span("merger_gyr", "time until the two merge", "Gyr", j.MergerYr, 1e-9, "gravitational waves, circle, two of 0.5 to 0.75 Msun", cite.Peters1964.String())
			st.Notes = append(st.Notes, j.Words+"; masses typical, not measured")
		}
	}
}

// detached tells whether nothing flows in a binary.
func detached(t *targets.Target) bool {
	v := strings.ToUpper(t.Var.Type)
	return strings.Contains(v, "/D") || strings.Contains(v, "WD") || strings.Contains(strings.ToLower(t.KindNote), "pre-cv")
}
