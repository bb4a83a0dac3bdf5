package wander

import (
	"fmt"
	"math"
)

// node is one guess at phase, period and restlessness, with the state that
// the magnitudes taught under that guess.
//
//	y = 2 pi ((t - tref)/P + phi)
//	m(t) = m0 - A cos y + a2 cos 2y + b2 sin 2y + a3 cos 3y + b3 sin 3y + u0 + u1 sin y + w
type node struct {
	phase   int     // of the grid
	perDay  float64 // 1/P
	lnP     float64 // ln(P/Pcat)
	q       int     // of restless
	lnPrior float64 // without the phase
	lnW     float64
	x       [nState]float64
	c       [nState][nState]float64
}

const (
	coarsestLnP   = 0.02 // step of ln(P/Pcat)
	cycleLnP      = 0.05 // step times cycles
	leastCycles   = 0.3
	mostLnPNodes  = 60  // each way
	mostReachLnP  = 0.2 // where a period was found with a poor error
	dropBelow     = -16 // e-folds below the best node
	wideSD        = 1.5 // mag, of the component that outliers fall to
	narrowWeight  = 0.98
	limitSD       = 0.15 // mag, of a limit
	limitWeight   = 0.97
	asymptoteFrom = -8.0 // standard deviations
)

// periodStep is the grid's step in ln P for magnitudes over so many cycles.
func periodStep(cycles float64) float64 {
	return math.Min(coarsestLnP, cycleLnP/math.Max(cycles, leastCycles))
}

// build makes the nodes of the grid at its reference date.
func (f *Filter) build() {
	m := f.m
	own := m.elements.PeriodErrD / m.periodD
	reach := math.Max(periodK, math.Min(3*own, mostReachLnP))
	f.stepLnP = periodStep(f.grid.SpanD / m.periodD)
	k := int(math.Ceil(reach/f.stepLnP - 1e-9))
	if k > mostLnPNodes {
		k = mostLnPNodes
		f.stepLnP = reach / mostLnPNodes
	}
	lnPhase := m.epochLnDensity(f.grid.TrefJD)
	f.nodes = make([]node, 0, nPhase*(2*k+1)*len(restless))
	for q, weight := range m.restlessP {
		first := node{q: q}
		m.start(&first)
		for i := -k; i <= k; i++ {
			first.lnP = float64(i) * f.stepLnP
			first.perDay = math.Exp(-first.lnP) / m.periodD
			first.lnPrior = math.Log(weight * periodDensity(first.lnP, own))
			for p := range nPhase {
				first.phase, first.lnW = p, first.lnPrior+lnPhase[p]
				f.nodes = append(f.nodes, first)
			}
		}
	}
	f.normalise()
}

// start sets a node's state to the prior, its drifts to their stationary sizes.
func (m *model) start(n *node) {
	n.x, n.c = [nState]float64{}, [nState][nState]float64{}
	copy(n.x[:], m.mean[:])
	for i := range nFixed {
		copy(n.c[i][:], m.cov[i][:])
	}
	qq := restless[n.q].q * restless[n.q].q
	for j, sd := range m.driftSD {
		n.c[nFixed+j][nFixed+j] = qq * sd * sd
	}
}

// periodDensity is what catalogue periods are worth, unnormalised.
//
//	ln(P/Pcat) ~ 0.75 N(0, 0.009) + 0.25 N(0, 0.028)
//
// Given:
//   - x: ln(P/Pcat).
//   - own: error of the period itself over the period, added in quadrature.
//
// Source: this project's measurement on 339 Miras of ASAS-3, [cite.Pojmanski2002].
//
// Checked: TestPeriodDensity.
func periodDensity(x, own float64) float64 {
	p := func(name string) float64 { return average("Mira", "catalogue_period", name) }
	core, wide := math.Hypot(p("core_sd_lnP"), own), math.Hypot(p("wide_sd_lnP"), own)
	w := p("core_weight")
	return w*math.Exp(-x*x/(2*core*core))/core + (1-w)*math.Exp(-x*x/(2*wide*wide))/wide
}

// normalise makes the weights sum to 1 and drops nodes that are out of it.
func (f *Filter) normalise() {
	best := math.Inf(-1)
	for i := range f.nodes {
		best = math.Max(best, f.nodes[i].lnW)
	}
	kept, sum := f.nodes[:0], 0.0
	for i := range f.nodes {
		if f.nodes[i].lnW >= best+dropBelow {
			sum += math.Exp(f.nodes[i].lnW - best)
			if len(kept) != i {
				kept = append(kept, f.nodes[i])
			} else {
				kept = f.nodes[:i+1]
			}
		}
	}
	f.nodes = kept
	for i := range f.nodes {
		f.nodes[i].lnW -= best + math.Log(sum)
	}
}

// row fills h(t), so that h.x is the magnitude at phase y.
func row(cycles float64) [nState]float64 {
	s, c := math.Sincos(2 * math.Pi * (cycles - math.Floor(cycles)))
	s2, c2 := 2*s*c, 2*c*c-1
	s3, c3 := s2*c+c2*s, c2*c-s2*s
	return [nState]float64{1, -c, c2, s2, c3, s3, 1, s, 1}
}

// cycles returns y/2pi of a node at a date.
func (n *node) cycles(days float64) float64 { return days*n.perDay + gridPhase(n.phase) }

// advance lets the drifts run for so many days.
//
//	k = exp(-dt/tau): x *= k, rows and columns of C *= k, variance += q^2 sd^2 (1-k^2)
//
// Source: [cite.UhlenbeckOrnstein1930].
func (n *node) advance(k, driftVar *[nDrift]float64) {
	qq := restless[n.q].q * restless[n.q].q
	for j := range nDrift {
		a := nFixed + j
		n.x[a] *= k[j]
		for i := range nState {
			n.c[a][i] *= k[j]
		}
		for i := range nState {
			n.c[i][a] *= k[j]
		}
		n.c[a][a] += qq * driftVar[j]
	}
}

// decay returns exp(-dt/tau) and the variance regained, for q = 1.
func (m *model) decay(days float64) (k, driftVar [nDrift]float64) {
	for j := range nDrift {
		k[j] = math.Exp(-math.Abs(days) / m.tauD[j])
		driftVar[j] = m.driftSD[j] * m.driftSD[j] * (1 - k[j]*k[j])
	}
	return k, driftVar
}

// Update takes a magnitude in.
//
//	g = C h, s = h.g, v = mag - h.x;  S1 = s + jitter^2 + err^2, S2 = S1 + 1.5^2
//	L1 = 0.98 N(v; S1), L2 = 0.02 N(v; S2), p = L1/(L1 + L2)
//	k = p/S1 + (1-p)/S2;  d = k - v^2 (p/S1^2 + (1-p)/S2^2 - k^2)
//	x += g k v,  C -= d g g',  weight *= L1 + L2
//
// A limit: S = s + jitter^2 + 0.15^2, z = (h.x - limit)/sqrt S, L1 = 0.97 Phi(z), L = L1 + 0.03,
//
//	r = pdf(z)/Phi(z);  x += g p r/sqrt S,  C -= p r (r+z)/S g g'
//
// Given:
//   - o: in the filter's band, no older than the last. An error not given, or
//     below it, counts as 0.05; estimates by eye 0.15, means of them 0.12.
//
// Returns:
//   - [ErrObs], [ErrOrder]; the filter is then as before.
//
// Notes:
//  1. Outliers are never rejected: the wide component takes them. See
//     [Judged.Outlier].
//  2. The limit's covariance leaves out the spread between its two outcomes.
//
// Source: [cite.Kalman1960], [cite.ChenLiu2000]; the weights of the components
// are this project's choice.
//
// Checked: TestForecastFigures, TestLimit, TestOutlier, FuzzWander.
func (f *Filter) Update(o Obs) error {
	if err := o.check(); err != nil {
		return err
	}
	if o.JD < f.stateJD {
		return fmt.Errorf("magnitude of JD %.4f after that of %.4f: %w", o.JD, f.stateJD, ErrOrder)
	}
	if f.stateJD < o.JD {
		k, driftVar := f.m.decay(o.JD - f.stateJD)
		for i := range f.nodes {
			f.nodes[i].advance(&k, &driftVar)
		}
	}
	noise := f.m.jitter * f.m.jitter
	narrow, weight, best := 0.0, 0.0, math.Inf(-1)
	for i := range f.nodes {
		n := &f.nodes[i]
		p := n.take(o, row(n.cycles(o.JD-f.grid.TrefJD)), noise)
		// the sum is kept relative to the best weight so far
		if n.lnW > best {
			scale := math.Exp(best - n.lnW)
			narrow, weight, best = narrow*scale, weight*scale, n.lnW
		}
		w := math.Exp(n.lnW - best)
		narrow, weight = narrow+w*p, weight+w
	}
	f.used = append(f.used, Judged{o, narrow / weight})
	f.stateJD = o.JD
	if !(f.firstJD <= o.JD) {
		f.firstJD = o.JD
	}
	if !(f.lastJD > o.JD) {
		f.lastJD = o.JD
	}
	f.normalise()
	return nil
}

// take updates a node by a magnitude and returns the probability of the narrow
// component.
func (n *node) take(o Obs, h [nState]float64, noise float64) float64 {
	var g [nState]float64
	s, mean := 0.0, 0.0
	for i := range nState {
		sum := 0.0
		for j := range nState {
			sum += n.c[i][j] * h[j]
		}
		g[i] = sum
		s += h[i] * sum
		mean += h[i] * n.x[i]
	}
	s = math.Max(s, 0)
	var u update
	if o.Limit {
		u = fainterThan(o.Mag, mean, s+noise+limitSD*limitSD)
	} else {
		e := o.sigma()
		u = measured(o.Mag-mean, s+noise+e*e)
	}
	for i := range nState {
		n.x[i] += g[i] * u.gain
		for j := range nState {
			n.c[i][j] -= u.shrink * g[i] * g[j]
		}
	}
	n.lnW += u.lnL
	return u.p
}

// update is what a magnitude does to a node: x += g gain, C -= shrink g g'.
type update struct{ gain, shrink, lnL, p float64 }

// measured is the update by a magnitude v away from the mean, S1 its variance.
func measured(v, s1 float64) update {
	s2 := s1 + wideSD*wideSD
	l1 := math.Log(narrowWeight) + lnNormal(v, s1)
	l2 := math.Log(1-narrowWeight) + lnNormal(v, s2)
	top := math.Max(l1, l2)
	lnL := top + math.Log(math.Exp(l1-top)+math.Exp(l2-top))
	p := math.Exp(l1 - lnL)
	k := p/s1 + (1-p)/s2
	d := k - v*v*(p/(s1*s1)+(1-p)/(s2*s2)-k*k)
	return update{k * v, d, lnL, p}
}

// fainterThan is the update by a limit where mean was expected, S the variance.
func fainterThan(limit, mean, s float64) update {
	sd := math.Sqrt(s)
	z := (mean - limit) / sd
	lnPhi, r := lowerTail(z)
	l1 := limitWeight * math.Exp(lnPhi)
	l := l1 + 1 - limitWeight
	p := l1 / l
	return update{p * r / sd, p * r * (r + z) / s, math.Log(l), p}
}

// lnNormal is the log of a normal density of variance s, at v.
func lnNormal(v, s float64) float64 { return -(v*v/s + math.Log(2*math.Pi*s)) / 2 }

// lowerTail returns ln Phi(z) and pdf(z)/Phi(z), far down by the asymptote.
//
//	Phi(z) = pdf(z)/|z| (1 - 1/z^2 + 3/z^4 - 15/z^6 + ...)
//
// Source: [cite.AbramowitzStegun1964], 26.2.12.
//
// Checked: TestLowerTail.
func lowerTail(z float64) (lnPhi, ratio float64) {
	if z >= asymptoteFrom {
		phi := math.Erfc(-z/math.Sqrt2) / 2
		return math.Log(phi), math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) / phi
	}
	i := 1 / (z * z)
	series := 1 - i*(1-3*i*(1-5*i))
	return lnNormal(z, 1) - math.Log(-z) + math.Log(series), -z / series
}
