package tracks

import "math"

// Place is a star of the zero-age main sequence on the diagram.
type Place struct {
	Mass       float64 // Msun
	LogT, LogL float64 // log10 of kelvin and Lsun
}

// ZAMSLine returns the zero-age main sequence as a line, by rising mass.
//
// Given:
//   - from, to: masses, Msun, 0.1 to 50, clamped to that and put in order.
//   - n: number of points, evenly in log mass; at least 2 are given.
//
// Source: [cite.ToutEtAl1996].
//
// Checked: TestLines.
func (f *Formulas) ZAMSLine(from, to float64, n int) []Place {
	if math.IsNaN(from) || math.IsNaN(to) {
		from, to = LeastMass, MostMass
	}
	from, to = clamp(math.Min(from, to), LeastMass, MostMass), clamp(math.Max(from, to), LeastMass, MostMass)
	n = min(max(n, 2), 10000)
	out := make([]Place, n)
	for i := range out {
		m := clamp(from*pow(to/from, float64(i)/float64(n-1)), LeastMass, MostMass)
		l, r := f.ZAMS(m)
		out[i].Mass, out[i].LogL = m, math.Log10(l)
		out[i].LogT = logTeff(math.Log10(l), math.Log10(r))
	}
	return out
}

// How far apart two points of a track look: so many dex of temperature or of
// luminosity are one step.
const (
	lookT = 0.01
	lookL = 0.04
)

// Line returns the track thinned to points that lie evenly along it on the
// diagram. Where a phase begins or ends there is always a point.
//
// Given:
//   - n: wanted number of points, some hundreds; as many more as phases change.
//
// Checked: TestLines.
func (t *Track) Line(n int) []Point {
	if len(t.Points) == 0 {
		return nil
	}
	length := 0.0
	for i := 1; i < len(t.Points); i++ {
		length += apart(&t.Points[i-1], &t.Points[i])
	}
	n = max(n, 1)
	step := length / float64(n)
	out := t.thinned(step)
	for i := 0; i < 8 && len(out) < n && len(out) < len(t.Points); i++ {
		step *= 0.9 * float64(len(out)) / float64(n) // long straight pieces took more than their share
		out = t.thinned(step)
	}
	return out
}

// apart is how far from each other two points look.
func apart(p, q *Point) float64 { return math.Hypot((p.LogT-q.LogT)/lookT, (p.LogL-q.LogL)/lookL) }

// thinned keeps a point where a step has been gone, or the phase changes.
func (t *Track) thinned(step float64) []Point {
	out := []Point{t.Points[0]}
	gone := 0.0
	for i := 1; i < len(t.Points); i++ {
		p := &t.Points[i]
		gone += apart(&t.Points[i-1], p)
		turn := i == len(t.Points)-1 || t.Points[i+1].Phase != p.Phase || t.Points[i-1].Phase != p.Phase
		if gone >= step || turn {
			out = append(out, *p)
			gone = 0
		}
	}
	return out
}
