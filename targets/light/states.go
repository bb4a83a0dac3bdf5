package light

import (
	"fmt"
	"math"
	"regexp"

	"evenfall/astro"
	"evenfall/targets"
)

// state is a condition that a star may be in, with its brightness.
type state struct {
	name    string
	p       float64
	mag, sd float64
}

// states is a star that is in one of several conditions: never their average.
type states struct {
	t       targets.Target
	band    targets.Band
	list    []state
	how     string
	source  string
	eclipse *eclipse
}

const fromMemory = "duty cycles from memory, not checked against a publication"

// classes lists what the type of an interacting binary makes of its extremes;
// the first that fits counts. a is mag_max, b mag_min.
var classes = []struct {
	pattern *regexp.Regexp
	how     string
	states  func(a, b, periodMin float64) []state
}{
	{regexp.MustCompile(`^EA?/(D|WD)(/|$)`), "detached eclipsing binary", func(a, b, _ float64) []state {
		return []state{{"out of eclipse", 1, a, 0.08}}
	}},
	{regexp.MustCompile(`UGWZ`), "dwarf nova of the rarest outbursts", func(a, b, _ float64) []state {
		return []state{{"quiescence", 0.995, b - 0.2, 0.3}, {"superoutburst", 0.005, a + 0.7, 0.7}}
	}},
	{regexp.MustCompile(`UGZ`), "dwarf nova with standstills", func(a, b, _ float64) []state {
		return []state{{"quiescence", 0.55, b - 0.3, 0.35}, {"outburst", 0.30, a + 0.4, 0.35}, {"standstill", 0.15, a + 0.9, 0.25}}
	}},
	{regexp.MustCompile(`UGSU`), "dwarf nova with superoutbursts", func(a, b, _ float64) []state {
		return []state{{"quiescence", 0.87, b - 0.4, 0.4}, {"outburst", 0.08, a + 1.0, 0.4}, {"superoutburst", 0.05, a + 0.3, 0.3}}
	}},
	{regexp.MustCompile(`UG`), "dwarf nova", func(a, b, _ float64) []state {
		return []state{{"quiescence", 0.82, b - 0.4, 0.4}, {"outburst", 0.18, a + 0.5, 0.4}}
	}},
	{regexp.MustCompile(`ZAND`), "symbiotic star", func(a, b, _ float64) []state {
		return []state{{"quiescence", 0.85, b - 0.25*(b-a), 0.15*(b-a) + 0.2}, {"outburst", 0.15, a + 0.5, 0.5}}
	}},
	{regexp.MustCompile(`^N[ABCR]?(\b|:|\+)`), "nova long after its outburst", func(a, b, _ float64) []state {
		return []state{{"quiescence", 0.9995, b - 0.3, 0.5}, {"eruption", 0.0005, a + 0.7, 0.7}}
	}},
	{regexp.MustCompile(`^AM`), "polar", func(a, b, _ float64) []state {
		return []state{{"high state", 0.5, a + 0.6, 0.4}, {"low state", 0.5, b - 0.5, 0.5}}
	}},
	{regexp.MustCompile(`NL`), "nova-like star", func(a, b, _ float64) []state {
		if b-a < 1.5 {
			return []state{{"usual state", 1, (a + b) / 2, (b-a)/4 + 0.1}}
		}
		return []state{{"high state", 0.9, a + 0.4, 0.3}, {"low state", 0.1, b - 0.7, 0.7}}
	}},
	{regexp.MustCompile(`XM|XP`), "magnetic binary", func(a, b, _ float64) []state {
		return []state{{"usual state", 0.97, a + 0.65*(b-a), 0.15*(b-a) + 0.2}, {"flare or outburst", 0.03, a + 0.3, 0.4}}
	}},
}

// Helium binaries are told by their periods: below 22 min always bright,
// between 22 and 44 min with outbursts, above quiet. From memory, not checked
// against a publication.
const heliumLongestMin, heliumBrightMin, heliumQuietMin = 70, 22, 44

// byPeriod is for types that no pattern knows.
func byPeriod(a, b, periodMin float64) ([]state, string) {
	switch {
	case periodMin > 0 && periodMin < heliumBrightMin:
		return []state{{"permanent high state", 1, a + 0.4*(b-a), math.Min((b-a)/4, 0.3) + 0.05}}, "helium binary of short period"
	case periodMin >= heliumBrightMin && periodMin < heliumQuietMin:
		return []state{{"quiescence", 0.7, b - 0.3, 0.4}, {"outburst", 0.3, a + 0.4, 0.4}}, "helium binary with outbursts"
	case periodMin >= heliumQuietMin && periodMin < heliumLongestMin:
		return []state{{"quiescence", 0.99, b - 0.2, 0.3}, {"outburst", 0.01, a + 0.5, 0.5}}, "helium binary of long period"
	}
	return []state{{"usual state", 1, (a + b) / 2, math.Max((b-a)/3.3, 0.1)}}, "variable of no predictable kind"
}

func newBinary(t targets.Target) model {
	max, min := t.Var.MagMax, t.Var.MagMin
	if !usable(max) || !usable(min) || min.Value < max.Value {
		return newConstant(t)
	}
	s := &states{t: t, band: bandOf(t.Var.MagBand), source: fromMemory}
	periodMin := 0.0
	if p := t.Var.PeriodD; usable(p) {
		periodMin = p.Value * 1440
	}
	for _, c := range classes {
		if c.pattern.MatchString(t.Var.Type) {
			s.list, s.how = c.states(max.Value, min.Value, periodMin), c.how
			break
		}
	}
	if s.list == nil {
		s.list, s.how = byPeriod(max.Value, min.Value, periodMin)
	}
	s.how = fmt.Sprintf("%s (type %s), extremes %.1f to %.1f in %s", s.how, t.Var.Type, max.Value, min.Value, s.band)
	s.eclipse = newEclipse(t)
	return s
}

// newRCB prepares a star that fades without notice.
//
// Notes:
//  1. A quarter of the time more than a magnitude down: common practice, no
//     source. Depth anywhere between there and the faintest listed.
func newRCB(t targets.Target) model {
	max, min := t.Var.MagMax, t.Var.MagMin
	if !usable(max) || !usable(min) || min.Value < max.Value+1 {
		return newConstant(t)
	}
	a, b := max.Value, min.Value
	return &states{t: t, band: bandOf(t.Var.MagBand), source: "common practice, no source",
		list: []state{{"at maximum", 0.75, a + 0.2, 0.2}, {"in decline", 0.25, (a + 1 + b) / 2, (b-a-1)/4 + 0.2}},
		how:  fmt.Sprintf("R Coronae Borealis star, extremes %.1f to %.1f", a, b)}
}

func (s *states) at(t astro.Instant, band targets.Band, level float64) Forecast {
	if band != "" && band != s.band {
		f := (&constant{t: s.t}).at(t, band, level)
		if f.Known {
			f.Basis = "single catalogue magnitude of a star with several states: " + f.Basis
			return f
		}
		return unknown(band, fmt.Sprintf("extremes are listed in %s; no relation from there to %s", s.t.Var.MagBand, band))
	}
	list, words := s.list, ""
	if s.eclipse != nil && s.eclipse.halfMin > 0 {
		list, words = s.eclipse.overlay(t, s.list)
	}
	f := Forecast{Band: s.band, Basis: s.how + words}
	var m mixture
	best := 0
	for i, st := range list {
		m = append(m, part{st.p, st.mag, st.sd})
		if st.p > list[best].p {
			best = i
		}
		one := Forecast{}
		mixture{{1, st.mag, st.sd}}.interval(&one, level)
		f.States = append(f.States, StateForecast{st.name, st.p, one.Mag, one.Lo, one.Hi})
	}
	m.interval(&f, level)
	f.Mag = f.States[best].Mag
	f.Steps = []Step{{"expected brightness", "median of the likeliest state; interval of all states together",
		s.how, fmt.Sprintf("%s: %.2f; %.2f to %.2f", f.States[best].Name, f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags()), s.source}}
	return f
}
