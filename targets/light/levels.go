package light

import "math"

// What magnitudes teach of the brightness within a state, and of one that no
// state foresees. All choices.
const (
	flickerSD    = 0.15 // what remains of a state however often it is measured, mag
	levelD       = 30.0 // the most that a level learnt counts for, days
	nearSD       = 0.3  // about a last magnitude that no state foresaw, mag
	nearForeseen = 0.1  // the share of all states under which it was not foreseen
	nearD        = 30.0 // the most that such a magnitude counts for, days
)

// within is the spread that no magnitude takes from a state, mag.
func (s *state) within() float64 { return math.Min(flickerSD, s.sd/2) }

// take brings the level of a state nearer to a magnitude, as a Kalman filter
// does with the probability w that the star is in this state.
//
//	K = P/(P + e^2 + f^2);  m += w K v;  P = w (1-K) P + (1-w) P + w (1-w) K^2 v^2;  sd^2 = P + f^2
//
// Source: mixture of the updated level and the old one, to its first two
// moments.
//
// Checked: TestLevels.
func (s *state) take(usual *state, mag, err, w float64) {
	f := usual.within()
	p := math.Max(s.sd*s.sd-f*f, 0)
	k, v := p/(p+err*err+f*f), mag-s.mag
	s.mag += w * k * v
	p = w*(1-k)*p + (1-w)*p + w*(1-w)*k*k*v*v
	s.sd = math.Min(math.Sqrt(p+f*f), math.Max(usual.sd, s.sd))
}

// settle relaxes the level of a state to the usual one, with the time that the
// state lasts, a day where that is not known and levelD at most.
//
//	m -> usual + (m - usual) exp(-dt/tau);  variance likewise with the square
//
// Source: a choice.
func (s *state) settle(usual *state, dt float64) {
	if dt <= 0 {
		return
	}
	tau := usual.dwell
	if tau <= 0 {
		tau = soonD
	}
	k := math.Exp(-dt / math.Min(tau, levelD))
	s.mag = usual.mag + (s.mag-usual.mag)*k
	s.sd = math.Sqrt(s.sd*s.sd*k*k + usual.sd*usual.sd*(1-k*k))
}

// nearTau is for how long a magnitude that no state foresaw counts, days: as
// long as the shortest state lasts, and nearD at most. A choice.
func nearTau(list []state) float64 {
	tau := math.Inf(1)
	for k := range list {
		d := list[k].dwell
		if d <= 0 {
			d = soonD
		}
		tau = math.Min(tau, d)
	}
	return math.Min(tau, nearD)
}

// weigh sets the chance that the star is near a last magnitude, after a
// reading whose likelihood by the states is all, of which own is no outlier's.
//
// Returns:
//   - the probability that the reading is no outlier, by states and by the
//     magnitude before it together.
func (b *belief) weigh(r *reading, all, own float64) float64 {
	foreseen := own / all
	near, nearOwn := 0.0, 0.0
	if b.near.p > 0 {
		near, nearOwn = likelihood(r, b.near.mean, b.near.sd)
	}
	total := (1-b.near.p)*all + b.near.p*near
	p := ((1-b.near.p)*own + b.near.p*nearOwn) / total
	b.near.p *= near / total
	if r.Limit {
		return p
	}
	if foreseen < nearForeseen {
		b.near.p = math.Max(b.near.p, 1-foreseen)
	}
	b.near.mean, b.near.sd = r.Mag, math.Hypot(r.sigma(), nearSD)
	return p
}

// nearLast adds the chance that the star is near its last magnitude, which no
// state foresaw, to the states.
func (b *belief) nearLast(list []state) []state {
	if b.near.p < 1e-4 {
		return list
	}
	out := make([]state, 0, len(list)+1)
	for _, s := range list {
		s.p *= 1 - b.near.p
		out = append(out, s)
	}
	return append(out, state{name: "near the last magnitude", p: b.near.p, mag: b.near.mean, sd: b.near.sd})
}
