package stellar

import (
	"fmt"
	"math"

	"evenfall/astro"
)

const (
	// SkyScaleKpc is the scale length of the distance prior where nothing more
	// is known of a star.
	//
	// Source: [cite.AstraatmadjaBailerJones2016].
	SkyScaleKpc = 1.35
	// WhiteDwarfScaleKpc is that of white dwarfs, the middle of 0.1 to 0.3.
	// Common practice, no source.
	WhiteDwarfScaleKpc = 0.2

	gridNodes          = 300
	gridLoKpc          = 0.001
	gridHiKpc          = 30.0
	compactNodes       = 27
	compactHalfSigmas  = 5.5
	goodParallax       = 10 // parallax over error from which the compact grid serves
	doubtfulParallax   = -5 // and below which the parallax itself is to be doubted
	negligibleExponent = -45
)

// fullGrid is the 300 distances from 1 pc to 30 kpc, even in ln r.
var fullGrid = func() (g struct{ lnR, r, plx, modulus [gridNodes]float64 }) {
	lo, hi := math.Log(gridLoKpc), math.Log(gridHiKpc)
	for i := range gridNodes {
		g.lnR[i] = lo + (hi-lo)*float64(i)/(gridNodes-1)
		g.r[i] = math.Exp(g.lnR[i])
		g.plx[i] = 1 / g.r[i]
		g.modulus[i] = ModulusAt(g.r[i])
	}
	return g
}()

// Distances is what a parallax says of a distance: a grid with its weights, to
// be carried on into whatever hangs on the distance, and what it comes to.
type Distances struct {
	R []float64 // kpc, increasing
	W []float64 // probability of each; they sum to 1

	ModeKpc                  float64
	Q05, Q16, Q50, Q84, Q95  float64 // kpc
	PlxMas, ErrMas, ScaleKpc float64 // what it was made from
	Doubtful                 bool    // the parallax is negative by more than 5 errors
	cum                      []float64
	firstX, stepX            float64 // coordinate of R[0] and step: ln r, or -1/r
	inverse                  bool    // the coordinate is -1/r
}

// DistancePrior is what a distance is derived from.
type DistancePrior struct {
	PlxMas, ErrMas float64 // zero point taken off, error honest: see [Correct]
	ScaleKpc       float64 // scale length L; 0 stands for [SkyScaleKpc]
}

// Distance returns how far a star may be, by its parallax w and a space density
// that falls off exponentially.
//
//	p(r|w) ~ r² exp(-r/L) exp(-(w - 1/r)² / 2σ²)      w, σ in mas; r, L in kpc
//
// Given:
//   - the parallax, of any sign, and its error, above 0.
//
// Returns:
//   - the posterior on 300 distances from 1 pc to 30 kpc, even in ln r; where
//     the parallax is over 10 errors, on 27 about its peak, even in 1/r.
//   - its mode, and its quantiles 5, 16, 50, 84, 95 %.
//   - [ErrInput] for what is not a number, an error or a scale not above 0.
//
// Notes:
//  1. The median is what to print; the mode alone misleads for poor parallaxes.
//  2. 1/w is nowhere used as the distance: at 30 per cent error the median is
//     1.6 times it.
//  3. What follows from the distance should be worked out at every R and
//     weighted with W.
//  4. Poor parallaxes give back the prior: with L = 1.35 the median of no
//     measurement at all is 3.6 kpc.
//
// Source: [cite.BailerJones2015]; the scale of
// [cite.AstraatmadjaBailerJones2016].
//
// Checked: TestDistance, to the digits printed; TestDistanceProperty, against
// a fine grid.
func Distance(p DistancePrior) (Distances, error) {
	l := p.ScaleKpc
	if l == 0 {
		l = SkyScaleKpc
	}
	w, s := p.PlxMas, p.ErrMas
	if !finite(w, s, l, 1/s, 1/l) || !(s > 0) || !(l > 0) || s < 1e-9 || s > 1e9 || math.Abs(w) > 1e9 || l < 1e-4 || l > 1e4 {
		return Distances{}, fmt.Errorf("distance from parallax %g, error %g mas, scale %g kpc: %w", w, s, l, ErrInput)
	}
	d := Distances{PlxMas: w, ErrMas: s, ScaleKpc: l, Doubtful: w/s < doubtfulParallax}
	d.ModeKpc = mode(w, s, l)
	if w/s > goodParallax {
		d.compact()
	} else {
		d.full()
	}
	d.Q05, d.Q16, d.Q50, d.Q84, d.Q95 = d.Quantile(0.05), d.Quantile(0.16), d.Quantile(0.50), d.Quantile(0.84), d.Quantile(0.95)
	return d, nil
}

// room makes the arrays, all in one piece of memory.
func (d *Distances) room(n int) {
	all := make([]float64, 3*n)
	d.R, d.W, d.cum = all[:n:n], all[n:2*n:2*n], all[2*n:]
}

// full lays the grid from 1 pc to 30 kpc, even in ln r, where the density gains
// a factor r.
func (d *Distances) full() {
	d.room(gridNodes)
	copy(d.R, fullGrid.r[:])
	inv, perScale := 1/d.ErrMas, 1/d.ScaleKpc
	for i := range d.W {
		x := (d.PlxMas - fullGrid.plx[i]) * inv
		d.W[i] = 3*fullGrid.lnR[i] - fullGrid.r[i]*perScale - x*x/2
	}
	d.firstX = fullGrid.lnR[0]
	d.stepX = (fullGrid.lnR[gridNodes-1] - fullGrid.lnR[0]) / (gridNodes - 1)
	d.normalise()
}

// compact lays a grid about the peak, even in u = 1/r, where the density gains
// a factor r². The width is from the curvature there.
func (d *Distances) compact() {
	d.room(compactNodes)
	w, s, l := d.PlxMas, d.ErrMas, d.ScaleKpc
	peak := 1 / d.ModeKpc
	curvature := math.Max(1/(s*s)+2/(peak*peak*peak*l)-2/(peak*peak), 0.5/(s*s))
	half := math.Min(compactHalfSigmas/math.Sqrt(curvature), 0.9*peak)
	d.inverse, d.firstX, d.stepX = true, -(peak + half), 2*half/(compactNodes-1)
	for i := range d.W {
		u := -(d.firstX + float64(i)*d.stepX)
		x := (w - u) / s
		d.R[i] = 1 / u
		d.W[i] = -4*math.Log(u) - 1/(u*l) - x*x/2
	}
	d.normalise()
}

// normalise turns logarithms of the density in W into weights, and sums them
// up: between two nodes by the cubic through four.
func (d *Distances) normalise() {
	most := math.Inf(-1)
	for _, v := range d.W {
		if v > most {
			most = v
		}
	}
	sum := 0.0
	for i, v := range d.W {
		d.W[i] = 0
		if v -= most; v > negligibleExponent {
			d.W[i] = math.Exp(v)
		}
		sum += d.W[i]
	}
	per := 1 / sum
	for i := range d.W {
		d.W[i] *= per
	}
	n := len(d.W)
	for i := 1; i < n; i++ {
		cell := (d.W[i-1] + d.W[i]) / 2
		if i > 1 && i < n-1 {
			if cell = (13*(d.W[i-1]+d.W[i]) - d.W[i-2] - d.W[i+1]) / 24; cell < 0 {
				cell = 0
			}
		}
		d.cum[i] = d.cum[i-1] + cell
	}
	per = 1 / d.cum[n-1]
	for i := range d.cum {
		d.cum[i] *= per
	}
	d.cum[n-1] = 1
}

// Quantile returns the distance, kpc, that the star is nearer than with
// probability p.
//
// Returns:
//   - not a number for a p outside 0 to 1, or where there is no grid.
//
// Checked: TestDistance.
func (d Distances) Quantile(p float64) float64 {
	n := len(d.cum)
	if n == 0 || !(p >= 0 && p <= 1) {
		return math.NaN()
	}
	lo, hi := 0, n-1
	for hi-lo > 1 {
		if mid := (lo + hi) / 2; d.cum[mid] < p {
			lo = mid
		} else {
			hi = mid
		}
	}
	cell := d.cum[hi] - d.cum[lo]
	if !(cell > 0) {
		return d.R[hi]
	}
	// The density is taken as a straight line between the nodes.
	a, b, q := d.W[lo], d.W[hi], (p-d.cum[lo])/cell
	t := q
	if under := a*a + (b*b-a*a)*q; a+b > 0 && under > 0 {
		t = (a + b) * q / (a + math.Sqrt(under))
	}
	x := d.firstX + (float64(lo)+clamp(t, 0, 1))*d.stepX
	if d.inverse {
		return -1 / x
	}
	return math.Exp(x)
}

// Interval returns the median distance and the bounds, kpc, that leave out
// (1-level)/2 on either side.
func (d Distances) Interval(level float64) astro.Interval {
	return astro.Interval{Lo: d.Quantile((1 - level) / 2), Mid: d.Quantile(0.5), Hi: d.Quantile((1 + level) / 2), Level: level}
}

// Expect returns mean and standard deviation of what follows from the distance.
//
// Given:
//   - f: called with each distance, kpc, that has any weight.
//
// Returns:
//   - a measure that is not Known where f gives no finite numbers.
//
// Checked: TestExpect.
func (d Distances) Expect(f func(rKpc float64) float64) Measure {
	var mean, square, sum float64
	for i, w := range d.W {
		if w == 0 {
			continue
		}
		v := f(d.R[i])
		sum += w
		step := (v - mean) * w / sum
		square += w * (v - mean) * (v - mean - step)
		mean += step
	}
	if !(sum > 0) {
		return Measure{}
	}
	return Measured(mean, math.Sqrt(math.Max(square/sum, 0)))
}

// Modulus returns the distance modulus with its error, magnitudes.
//
//	5 log10(r / 10 pc)
//
// Checked: TestExpect.
func (d Distances) Modulus() Measure {
	if d.inverse || len(d.W) != gridNodes {
		return d.Expect(ModulusAt)
	}
	var mean, square float64
	for i, w := range d.W {
		mean += w * fullGrid.modulus[i]
	}
	for i, w := range d.W {
		square += w * (fullGrid.modulus[i] - mean) * (fullGrid.modulus[i] - mean)
	}
	return Measured(mean, math.Sqrt(square))
}

// ModulusAt returns the distance modulus of one distance, magnitudes.
//
//	5 log10(r) + 10      r in kpc
//
// Checked: TestWorkedStar.
func ModulusAt(rKpc float64) float64 { return 5*math.Log10(rKpc) + 10 }

// mode returns the peak of the posterior, kpc: of the real roots of
//
//	r³/L - 2 r² + (w/σ²) r - 1/σ² = 0
//
// the only one, or the least that is positive; for w < 0 only one is. With
// r = L t this is t³ - 2 t² + a t - b = 0.
func mode(w, s, l float64) float64 {
	a, b := w/(s*s)/l, 1/(s*s)/(l*l)
	t := cubicRoot(a, b)
	if near := 1 / (w * l); w > goodParallax*s && !(math.Abs(t-near) < near/2) {
		t = near // the closed form loses its digits where a and b are huge
	}
	for range 12 { // Newton, for the last digits
		slope := (3*t-4)*t + a
		step := (((t-2)*t+a)*t - b) / slope
		if slope == 0 || !(math.Abs(step) < t/2) {
			break
		}
		t -= step
		if math.Abs(step) <= 1e-14*t {
			break
		}
	}
	return t * l
}

// cubicRoot returns the least positive root of t³ - 2 t² + a t - b, b > 0, in
// closed form: with t = y + 2/3 it is y³ + p y + q.
func cubicRoot(a, b float64) float64 {
	p, q := a-4.0/3, -16.0/27+2*a/3-b
	if disc := q*q/4 + p*p*p/27; disc >= 0 {
		u := math.Cbrt(-q/2 + math.Copysign(math.Sqrt(disc), -q))
		if u == 0 {
			return 2.0 / 3
		}
		return u - p/(3*u) + 2.0/3
	}
	m := 2 * math.Sqrt(-p/3)
	angle := math.Acos(clamp(3*q/(p*m), -1, 1)) / 3
	least := math.Inf(1)
	for k := range 3 {
		if t := m*math.Cos(angle-2*math.Pi*float64(k)/3) + 2.0/3; t > 0 && t < least {
			least = t
		}
	}
	return least
}
