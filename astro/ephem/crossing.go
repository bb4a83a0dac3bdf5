package ephem

import (
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/numeric"
)

// Crossing is one passage of a quantity through zero.
type Crossing struct {
	At astro.Instant
	Up bool // from below zero to above
}

// Crossings finds every zero of a smooth function of time.
//
// It samples every step, searches each extremum between samples for a pair of
// zeros hidden there (golden section, given up as soon as the values cannot
// reach zero), and closes in on each change of sign by bracketed root finding.
//
// Given:
//   - f: e.g. the altitude of a body less a threshold, degrees.
//   - span: where to look, both ends included.
//   - step: 30 minutes finds all events of Sun and Moon; at most a quarter of
//     the function's shortest swing.
//
// Returns:
//   - the crossings in order of time, each to 0.05 s. A touch of zero without
//     a change of sign is none.
//   - values: f at the sampled instants, for callers that want extremes.
//
// Checked: TestCrossingsDense, against a search every 10 s at all latitudes.
func Crossings(f func(astro.Instant) float64, span astro.Span, step time.Duration) (found []Crossing, values []float64) {
	n := int(math.Ceil(float64(span.Length()) / float64(step)))
	if n < 2 {
		n = 2
	}
	at := func(i int) astro.Instant { return span.From.Add(span.Length() * time.Duration(i) / time.Duration(n)) }
	values = make([]float64, n+1)
	for i := range values {
		values[i] = f(at(i))
	}
	for i := 0; i < n; i++ {
		if hidden, ok := vertex(f, at, values, i, n); ok {
			found = append(found, closeIn(f, at(i), hidden, values[i] < 0), closeIn(f, hidden, at(i+1), values[i] >= 0))
			continue
		}
		if (values[i] < 0) != (values[i+1] < 0) {
			found = append(found, closeIn(f, at(i), at(i+1), values[i] < 0))
		}
	}
	return found, values
}

// vertex looks for an extremum between samples i and i+1 that reaches across
// zero while both samples lie on the same side.
func vertex(f func(astro.Instant) float64, at func(int) astro.Instant, v []float64, i, n int) (astro.Instant, bool) {
	if v[i]*v[i+1] <= 0 {
		return astro.Instant{}, false
	}
	sign := math.Copysign(1, v[i])
	// only where the function heads for zero before and leaves it after; the
	// outermost stretches are searched too
	before, after := i == 0 || sign*v[i-1] >= sign*v[i], i+1 == n || sign*v[i+2] >= sign*v[i+1]
	if !before || !after {
		return astro.Instant{}, false
	}
	a, b := at(i), at(i+1)
	const golden = 0.3819660112501051
	for range 40 { // each pass shortens the stretch by 0.618: half an hour to 10 microseconds
		w := b.Sub(a)
		c, d := a.Add(time.Duration(golden*float64(w))), b.Add(-time.Duration(golden*float64(w)))
		fc, fd := sign*f(c), sign*f(d)
		switch {
		case fc < 0:
			return c, true
		case fd < 0:
			return d, true
		case fc < fd:
			b = d
		default:
			a = c
		}
		if w < 20*time.Millisecond || parabolaClears(fc, fd, sign*f(a), sign*f(b)) {
			break
		}
	}
	return astro.Instant{}, false
}

// parabolaClears tells that values this far from zero, on a stretch this flat,
// cannot reach it: the least value stands above the whole variation.
func parabolaClears(c, d, a, b float64) bool {
	low := math.Min(math.Min(a, b), math.Min(c, d))
	high := math.Max(math.Max(a, b), math.Max(c, d))
	return low > 2*(high-low)
}

// closeIn returns the crossing between two instants on different sides of zero.
func closeIn(f func(astro.Instant) float64, a, b astro.Instant, up bool) Crossing {
	at := func(ns float64) float64 { return f(a.Add(time.Duration(ns))) }
	root, err := numeric.Root(at, 0, float64(b.Sub(a)), tolerance)
	if err != nil {
		// a jump, as of an hour angle at 12 h: halve the stretch down to it
		root = halve(at, float64(b.Sub(a)), up)
	}
	return Crossing{At: a.Add(time.Duration(root)), Up: up}
}

// tolerance is how near a crossing is closed in on, nanoseconds.
const tolerance = 2e7

// halve finds a change of sign in 0 to hi by bisection.
func halve(at func(float64) float64, hi float64, up bool) float64 {
	lo := 0.0
	for hi-lo > tolerance {
		mid := (lo + hi) / 2
		if (at(mid) < 0) == up {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}

// SpansAbove returns when the function is not below zero, from its crossings
// and its value at the start of the span.
func SpansAbove(found []Crossing, first float64, span astro.Span) []astro.Span {
	var out []astro.Span
	from, inside := span.From, first >= 0
	for _, c := range found {
		switch {
		case c.Up && !inside:
			from, inside = c.At, true
		case !c.Up && inside:
			if from.Before(c.At) {
				out = append(out, astro.Span{From: from, Until: c.At})
			}
			inside = false
		}
	}
	if inside && from.Before(span.Until) {
		out = append(out, astro.Span{From: from, Until: span.Until})
	}
	return out
}
