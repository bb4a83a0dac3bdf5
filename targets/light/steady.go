package light

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"evenfall/astro/bands"
	"evenfall/targets"
)

// rangeSigmas is the width of a normal 5-95 % range in standard deviations.
const rangeSigmas = 3.29

const (
	// leastRange is the least variation that is given as a number, mag.
	leastRange = 0.01
	// looseSD is what an irregular variable without listed extremes is off its
	// single magnitude by, mag. Common practice, no source.
	looseSD = 0.2
)

// steady is a star that is as its catalogue says, but for what its class
// varies by.
type steady struct {
	t        *targets.Target
	readings []reading
	known    map[bands.Band]bands.Measure
	hints    bands.Hints
	range5   bands.Range // how much giants of the type vary
	varies   bool
	pulse    float64 // one sigma of a pulsation, mag
	why      string  // of the two
	source   string
	extra    []Step
}

// emission names the variables whose lines spoil every relation of colours.
var emission = regexp.MustCompile(`ZAND|^N[ABCRL]?(\b|:|\+)|UG|NL|AM|XM|(^|[^S])XP`)

func newSteady(t *targets.Target, list []reading) *steady {
	s := &steady{t: t, readings: list, known: map[bands.Band]bands.Measure{}}
	for b, m := range t.Mags {
		if usable(m) {
			s.known[bands.Band(b)] = bands.Measure{Mag: m.Value, Err: m.Err}
		}
	}
	s.hints = bands.Hints{SpType: t.Physics.SpType, Emission: t.Kind == targets.PN || emission.MatchString(t.Var.Type)}
	switch t.Kind {
	case targets.Giant, targets.LPV:
		s.hints.Luminosity = bands.Giant
	case targets.WD:
		s.hints.Luminosity = bands.WhiteDwarf
	}
	switch {
	case usable(t.Physics.AV):
		s.hints.AVMag = t.Physics.AV.Value
	case usable(t.Physics.EBV):
		s.hints.AVMag = 3.1 * t.Physics.EBV.Value
	}
	if k, err := bands.ParseType(t.Physics.SpType); err == nil && !k.Composite && (k.Luminosity == bands.Giant ||
		k.Luminosity == bands.UnknownLuminosity && s.hints.Luminosity == bands.Giant) {
		if s.range5, s.varies = bands.VariabilityOf(k); s.varies {
			s.why = fmt.Sprintf("giants of type %s vary by %.2f mag in V (5-95 %%)", k, s.range5.V)
			if s.range5.V < leastRange {
				s.why = fmt.Sprintf("giants of type %s vary by less than %.2f mag", k, leastRange)
			}
			s.source = s.range5.Source
		}
	}
	if a := t.Var.AmplitudeMag; usable(a) && a.Value > 0 {
		s.pulse = a.Value / (2 * math.Sqrt2)
		s.why = fmt.Sprintf("amplitude %.3g mag", a.Value)
	}
	if s.pulse == 0 && !usable(t.Var.MagMin) && (lpvVariable.MatchString(t.Var.Type) || rvVariable.MatchString(t.Var.Type)) {
		s.pulse = looseSD
		s.why = fmt.Sprintf("irregular variable without listed extremes: %.1f mag assumed (common practice, no source)", looseSD)
	}
	return s
}

// redGiant tells whether a star is of the kind that turns out a long-period
// variable when measured.
func redGiant(t *targets.Target) bool {
	if t.Kind != targets.Giant {
		return false
	}
	k, err := bands.ParseType(t.Physics.SpType)
	return err == nil && (k.Class == 'M' || k.Class == 'C' || k.Class == 'S')
}

// preferred is the order in which a band is chosen where none is asked.
var preferred = []targets.Band{"V", "G", "B", "R", "I", "r", "g", "i", "z", "u", "U", "J", "H", "K", "BP", "RP", "W1", "W2"}

func (s *steady) tick() float64 { return forever }

// choose returns the band to answer in where none is asked.
func (s *steady) choose(n int) targets.Band {
	for _, b := range preferred {
		if _, ok := s.known[bands.Band(b)]; ok {
			return b
		}
	}
	for _, b := range preferred {
		if len(in(s.readings, n, b)) > 0 {
			return b
		}
	}
	return ""
}

// intrinsic returns what the star itself varies by, one sigma, mag.
func (s *steady) intrinsic(b targets.Band) float64 {
	r := s.range5.Hp
	if b == "V" || b == "B" || b == "U" || b == "g" || b == "BP" {
		r = s.range5.V
	}
	return math.Hypot(r/rangeSigmas, s.pulse)
}

func (s *steady) at(q query) Forecast {
	b := q.band
	if b == "" {
		b = s.choose(q.n)
	}
	if m := s.t.Var.MagMax; b == "" && usable(m) {
		b = bandOf(s.t.Var.MagBand)
		return s.answer(q, b, bands.Carried{Mag: m.Value, Err: bands.AssumedErr, Route: "brightest magnitude listed", Source: "the list"})
	}
	if b == "" {
		return unknown("", "no magnitude listed")
	}
	c, err := bands.Carry(s.known, bands.Band(b), s.hints)
	if err == nil {
		return s.answer(q, b, c)
	}
	if list := in(s.readings, q.n, b); len(list) > 0 {
		for _, i := range list {
			if r := &s.readings[i]; !r.Limit {
				// so wide that the magnitudes alone count
				return s.answer(q, b, bands.Carried{Mag: r.Mag, Err: 10, Route: "measured only, not listed in " + string(b), Source: "the magnitudes"})
			}
		}
	}
	return unknown(b, err.Error())
}

// level is the mean brightness as far as magnitudes taught it.
type level struct {
	mag, err float64
	used     int // magnitudes, but for limits
	limits   int
	p        []float64 // that each is no outlier
}

// learn takes magnitudes into a mean level.
//
//	k = p/S1 + (1-p)/S2,  m += e^2 k v,  e^2 -= e^4 (k - v^2 (p/S1^2 + (1-p)/S2^2 - k^2))
//
// Notes:
//  1. What the star itself varies by counts as noise of each magnitude,
//     independent from one to the next.
func (s *steady) learn(c bands.Carried, list []int, intrinsic float64) level {
	l := level{mag: c.Mag, err: c.Err, p: make([]float64, len(list))}
	for k, i := range list {
		r := &s.readings[i]
		all, narrow := likelihood(r, l.mag, math.Hypot(l.err, intrinsic))
		l.p[k] = narrow / all
		if r.Limit {
			l.limits++
			continue // says nothing of a level that is known
		}
		l.used++
		v, vv := r.Mag-l.mag, l.err*l.err
		s1 := vv + intrinsic*intrinsic + r.sigma()*r.sigma()
		s2, p := s1+wideSD*wideSD, l.p[k]
		gain := p/s1 + (1-p)/s2
		shrink := gain - v*v*(p/(s1*s1)+(1-p)/(s2*s2)-gain*gain)
		l.mag += vv * gain * v
		// never under a hundredth of what it was: two components can make it negative
		l.err = math.Sqrt(math.Max(vv-vv*vv*shrink, vv/100))
	}
	return l
}

// answer makes the forecast of a level.
func (s *steady) answer(q query, b targets.Band, c bands.Carried) Forecast {
	intrinsic := s.intrinsic(b)
	list := in(s.readings, q.n, b)
	l := s.learn(c, list, intrinsic)
	f := Forecast{Band: b, Basis: c.Route}
	if c.Direct {
		f.Basis = fmt.Sprintf("catalogue magnitude, error %.3g mag", c.Err)
		if c.Assumed {
			f.Basis = fmt.Sprintf("catalogue magnitude, error of %.2f mag assumed", c.Err)
		}
	}
	if l.used > 0 {
		f.Basis += fmt.Sprintf("; with %s measured: mean %.2f +- %.2f", counted(l.used, "magnitude"), l.mag, l.err)
	}
	if l.limits > 0 {
		f.Basis += fmt.Sprintf("; %s, which says nothing of a known level", counted(l.limits, "limit"))
		if l.limits > 1 {
			f.Basis = strings.Replace(f.Basis, "limits, which says", "limits, which say", 1)
		}
	}
	if s.why != "" {
		f.Basis += "; " + s.why
	}
	f.fill(mixture{{1, l.mag, math.Hypot(l.err, intrinsic)}}, q.level)
	if !c.Direct {
		f.Steps = append(f.Steps, Step{"carried to " + string(b), "m = m_known + sum of offsets; sigma^2 = error^2 + sum of scatter^2",
			c.Route, fmt.Sprintf("%.3f +- %.3f", c.Mag, c.Err), c.Source})
	}
	src := c.Source
	if s.source != "" && src != s.source {
		src += "; " + s.source
	}
	if s.varies && b == "V" {
		src += "; V varies about 1.3 times as much as Hp: common practice, no source"
	}
	f.Steps = append(f.Steps, Step{"expected brightness", "mean magnitude; sigma^2 = error^2 + intrinsic^2",
		fmt.Sprintf("%s = %.3f, error %.3f, intrinsic %.3f, %s measured", b, l.mag, l.err, intrinsic, counted(l.used, "magnitude")),
		f.result(), src})
	f.Steps = append(f.Steps, s.extra...)
	return f
}

// result writes median and interval.
func (f *Forecast) result() string {
	return fmt.Sprintf("%.2f, %.2f to %.2f", f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags())
}

func (s *steady) judge(n int) []verdict {
	out := make([]verdict, n)
	done := map[targets.Band]bool{}
	for i := range out {
		b := s.readings[i].band
		if s.readings[i].why != "" || done[b] {
			continue
		}
		done[b] = true
		list := in(s.readings, n, b)
		c, err := bands.Carry(s.known, bands.Band(b), s.hints)
		if err != nil {
			c = bands.Carried{Mag: s.readings[list[0]].Mag, Err: 10}
		}
		l := s.learn(c, list, s.intrinsic(b))
		for k, i := range list {
			out[i] = verdict{used: true, p: l.p[k]}
		}
	}
	return out
}
