package exposure

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets"
)

// How a standard is matched: airmass, and hours before or after. Common
// practice, no source.
const (
	matchAirmass = 0.1
	matchWithin  = time.Hour
	matchStep    = 5 * time.Minute
)

// IsStandard tells whether a listed target is a standard of a sort.
//
// Given:
//   - sort: flux, telluric, velocity; "": any.
//
// Notes:
//  1. A target of kind standard is one of the sort that its notes name, and of
//     any where they name none; a white dwarf is a flux standard where its notes
//     say spectrophotometric standard.
func IsStandard(t *targets.Target, sort string) bool {
	words := strings.ToLower(t.Notes + " " + t.KindNote)
	flux := strings.Contains(words, "spectrophotometric standard")
	if t.Kind != targets.Standard {
		return flux && (sort == "" || sort == "flux")
	}
	named := flux
	for _, s := range []string{"flux", "telluric", "velocity"} {
		if strings.Contains(words, s) {
			named = true
			if s == sort {
				return true
			}
		}
	}
	return sort == "" || !named || sort == "flux" && flux
}

// Need is a target that wants a standard.
type Need struct {
	Name          string
	At            astro.Instant // when it is taken
	Airmass       float64
	MaxDifference float64       // of airmass; 0: 0.1
	Within        time.Duration // before or after; 0: an hour
}

// Candidate is a star that may serve as a standard.
type Candidate struct {
	Name string
	Mag  astro.Mag
	// AirmassAt returns its airmass at an instant; false: not to be had, for any
	// limit of the site.
	AirmassAt func(astro.Instant) (float64, bool)
	// Answer is its exposure; nil where it does not matter. One with Err, or
	// that saturates, is passed over.
	Answer *Answer
}

// usable tells whether the candidate can be exposed.
func (c *Candidate) usable() bool {
	if c.Answer == nil {
		return true
	}
	return c.Answer.Err == nil && c.Answer.BookedS > 0 && (!c.Answer.SaturatesAt.Known || c.Answer.Mag.Mags() >= c.Answer.SaturatesAt.Value-1e-9)
}

// Matched is a standard for a target.
type Matched struct {
	Name       string
	Index      int // among the candidates
	At         astro.Instant
	Airmass    float64
	Difference float64 // of airmass, the standard's less the target's
	Good       bool    // within what was wanted
	Words      string
}

// Match chooses a standard for a target: of those that pass its airmass within
// the time, the brightest that does not saturate; where none does, the one that
// comes nearest.
//
// Returns:
//   - the match, at the time nearest to the target's at which the airmasses
//     agree; a [*Reason] where no candidate is to be had.
//
// Checked: TestMatch.
func Match(n Need, from []Candidate) (Matched, error) {
	best, found := Matched{}, false
	for i := range from {
		m, ok := n.meet(&from[i])
		if !ok {
			continue
		}
		m.Index = i
		better := !found || m.Good && !best.Good ||
			m.Good && best.Good && from[i].Mag.Brighter(from[best.Index].Mag) ||
			!m.Good && !best.Good && math.Abs(m.Difference) < math.Abs(best.Difference)
		if better {
			best, found = m, true
		}
	}
	if !found {
		return best, fail(targets.CodeWindow, "standard", "widen the limits, or take it at another time", "no standard can be had near the time of %s", n.Name)
	}
	best.Words = fmt.Sprintf("%s at %s UTC, airmass %.2f", best.Name, best.At.UTC().Format("15:04"), best.Airmass)
	if !best.Good {
		best.Words += fmt.Sprintf(": %+.2f from the target's, none comes nearer", best.Difference)
	}
	return best, nil
}

// meet finds when a candidate stands at the airmass of the target.
func (n *Need) meet(c *Candidate) (Matched, bool) {
	if !c.usable() || c.AirmassAt == nil || !(n.Airmass >= 1) {
		return Matched{}, false
	}
	within, most := n.Within, n.MaxDifference
	if within <= 0 {
		within = matchWithin
	}
	if !(most > 0) {
		most = matchAirmass
	}
	out, ok := Matched{Name: c.Name, Difference: math.Inf(1)}, false
	try := func(by time.Duration) {
		at := n.At.Add(by)
		x, up := c.AirmassAt(at)
		if !up || math.IsNaN(x) {
			return
		}
		d := x - n.Airmass
		good := math.Abs(d) <= most
		if !ok || good && !out.Good || good == out.Good && !good && math.Abs(d) < math.Abs(out.Difference) {
			out, ok = Matched{Name: c.Name, At: at, Airmass: x, Difference: d, Good: good}, true
		}
	}
	for by := time.Duration(0); by <= within; by += matchStep { // nearest in time first
		try(by)
		if by > 0 {
			try(-by)
		}
	}
	return out, ok
}

// Service is how many targets a standard serves.
type Service struct {
	Name   string
	Index  int // among the candidates
	Serves []string
	Mag    astro.Mag
}

// Serving ranks candidates by how many targets each serves within the airmass
// and time that these want: the first serves most, the brighter of equals
// first. One that serves none is left out.
//
// Checked: TestMatch.
func Serving(needs []Need, from []Candidate) []Service {
	var out []Service
	for i := range from {
		s := Service{Name: from[i].Name, Index: i, Mag: from[i].Mag}
		for k := range needs {
			if m, ok := needs[k].meet(&from[i]); ok && m.Good {
				s.Serves = append(s.Serves, needs[k].Name)
			}
		}
		if len(s.Serves) > 0 {
			out = append(out, s)
		}
	}
	slices.SortStableFunc(out, func(a, b Service) int {
		if d := len(b.Serves) - len(a.Serves); d != 0 {
			return d
		}
		switch {
		case a.Mag.Brighter(b.Mag):
			return -1
		case b.Mag.Brighter(a.Mag):
			return 1
		}
		return 0
	})
	return out
}
