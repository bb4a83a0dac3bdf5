package degenerate

import "math"

// line is what was seen, with the distance summed out: for each absolute
// magnitude how likely it is, and which colour free of dust goes with it.
type line struct {
	m0, perMag   float64   // the first magnitude, and points to a magnitude
	lnH          []float64 // of the density at each point, 0 at its highest
	colour       []float64 // BP-RP without dust, mag
	weight       []float64 // 1/σ² of that colour
	lnWeight     []float64 // half its logarithm
	spread       float64   // one sigma of the absolute magnitude
	middle       float64   // its mean
	colourMiddle float64
	avMiddle     float64 // mean extinction in V
	distance     float64 // mean distance, pc
	colourErr    float64
}

// Shape of the table of a line.
const (
	pointsPerKernel = 3.0
	kernelOfGroup   = 0.5  // distances nearer than this in magnitude go together
	kernelsWide     = 10.0 // how far it goes beyond the outermost distance
	kernelOfSpread  = 16.0 // the kernel is never less than the spread over this
	kernelOfGap     = 0.29 // nor, about, than this much of the gap: 1/√12, as if it were filled evenly
)

// newLine sums out the distances.
//
// At a distance r the star has M = m - 5 log r + 5 - A(r) and the colour c -
// E(r), with variances of the photometry and the floors, and with the error e of
// the reddening in common: it moves M by e/0.49 and the colour by e.
func newLine(s *Seen, distances []Distance) *line {
	mag, err, byV := s.GMag, s.GErrMag, gByV
	if !known(mag) {
		mag, err, byV = s.VMag, s.VErrMag, 1
	}
	n := len(distances)
	mu, ci := make([]float64, n), make([]float64, n)
	l := &line{}
	for k, d := range distances {
		av := s.extinction(d.Pc)
		mu[k] = mag - 5*math.Log10(d.Pc) + 5 - byV*av
		ci[k] = s.BPRPMag - bprpByG*gByV*av
		l.middle += d.Weight * mu[k]
		l.colourMiddle += d.Weight * ci[k]
		l.avMiddle += d.Weight * av
		l.distance += d.Weight * d.Pc
	}
	variance := 0.0
	for k, d := range distances {
		variance += d.Weight * (mu[k] - l.middle) * (mu[k] - l.middle)
	}
	e := s.reddeningErr(l.distance)
	eMag := e / bprpByG * byV / gByV
	own := err*err + floorMag*floorMag + eMag*eMag
	common := e * eMag
	l.spread = math.Sqrt(own + variance)
	l.colourErr = math.Sqrt(s.BPRPErrMag*s.BPRPErrMag + floorBPRP*floorBPRP + e*e)
	kernel := math.Max(math.Sqrt(own), math.Sqrt(variance)/kernelOfSpread)
	l.tabulate(distances, mu, ci, kernel, common)
	return l
}

// tabulate fills the table of a line from the magnitude and the colour at each
// distance, both running to brighter and bluer with distance.
func (l *line) tabulate(distances []Distance, mu, ci []float64, kernel, common float64) {
	n := len(mu)
	lo, hi := mu[n-1]-kernelsWide*kernel, mu[0]+kernelsWide*kernel
	l.m0, l.perMag = lo, pointsPerKernel/kernel
	const most = 4000
	if (hi-lo)*l.perMag > most {
		l.perMag = most / (hi - lo)
	}
	points := int((hi-lo)*l.perMag) + 2
	l.lnH, l.colour = make([]float64, points), make([]float64, points)
	l.weight, l.lnWeight = make([]float64, points), make([]float64, points)
	sum, first, second := make([]float64, points), make([]float64, points), make([]float64, points)
	for _, g := range groups(distances, mu, ci, kernel) {
		own := math.Sqrt(kernel*kernel + g.variance)
		slope := common / (own * own)
		// What the magnitude tells of the reddening is taken off the colour's error.
		left := l.colourErr*l.colourErr - common*slope
		reach := kernelsWide * own
		from := max(0, int((g.mag-reach-lo)*l.perMag))
		upto := min(points-1, int((g.mag+reach-lo)*l.perMag)+1)
		// The normal density step by step: each ratio is the last times a constant.
		x, step := (lo+float64(from)/l.perMag-g.mag)/own, 1/(l.perMag*own)
		w := g.weight / own * math.Exp(-x*x/2)
		ratio, bend := math.Exp(-step*(x+step/2)), math.Exp(-step*step)
		c, perPoint := g.colour+slope*x*own-l.colourMiddle, slope*step*own
		for p := from; p <= upto; p++ {
			sum[p] += w
			first[p] += w * c
			second[p] += w * (c*c + left)
			w *= ratio
			ratio *= bend
			c += perPoint
		}
	}
	top := 0.0
	for _, v := range sum {
		top = math.Max(top, v)
	}
	for p := range points {
		if sum[p] == 0 {
			l.lnH[p], l.colour[p], l.weight[p] = math.Inf(-1), l.colourMiddle, 1
			continue
		}
		mean := first[p] / sum[p]
		l.lnH[p] = math.Log(sum[p] / top)
		l.colour[p] = l.colourMiddle + mean
		l.weight[p] = 1 / math.Max(floorBPRP*floorBPRP, second[p]/sum[p]-mean*mean)
		l.lnWeight[p] = math.Log(l.weight[p]) / 2
	}
}

// group is several near distances taken as one.
type group struct{ weight, mag, colour, variance float64 }

// groups joins neighbours that the kernel cannot tell apart, and gives each
// group the variance that it fills.
func groups(distances []Distance, mu, ci []float64, kernel float64) []group {
	out := make([]group, 0, 64)
	for a := 0; a < len(mu); {
		var g group
		b := a
		for ; b < len(mu) && mu[a]-mu[b] <= kernelOfGroup*kernel; b++ {
			w := distances[b].Weight
			g.weight += w
			g.mag += w * mu[b]
			g.colour += w * ci[b]
		}
		g.mag, g.colour = g.mag/g.weight, g.colour/g.weight
		before, after := max(0, a-1), min(len(mu)-1, b)
		gap := (mu[before] - mu[after]) / float64(max(1, after-before)) * kernelOfGap
		for k := a; k < b; k++ {
			d := mu[k] - g.mag
			g.variance += distances[k].Weight / g.weight * d * d
		}
		g.variance += gap * gap
		out = append(out, g)
		a = b
	}
	return out
}

// reach returns the magnitudes over which the line is less than so many sigma
// below its top, and the colours there.
func (l *line) reach(sigmas float64) (lo, hi, blue, red float64) {
	a, b := len(l.lnH), -1
	blue, red = math.Inf(1), math.Inf(-1)
	for p, v := range l.lnH {
		if v > -sigmas*sigmas/2 {
			a, b = min(a, p), p
			blue, red = math.Min(blue, l.colour[p]), math.Max(red, l.colour[p])
		}
	}
	return l.m0 + float64(a)/l.perMag, l.m0 + float64(b)/l.perMag, blue, red
}

// at reads the line at an absolute magnitude: the logarithm of its density, the
// colour, 1/σ² of it and half the logarithm of that.
func (l *line) at(m float64) (lnH, colour, weight, lnWeight float64, ok bool) {
	u := (m - l.m0) * l.perMag
	if !(u >= 0) || u >= float64(len(l.lnH)-1) {
		return 0, 0, 0, 0, false
	}
	p := int(u)
	f := u - float64(p)
	return l.lnH[p] + f*(l.lnH[p+1]-l.lnH[p]), l.colour[p] + f*(l.colour[p+1]-l.colour[p]),
		l.weight[p] + f*(l.weight[p+1]-l.weight[p]), l.lnWeight[p], true
}

// extinction is A_V at a distance.
func (s *Seen) extinction(rPc float64) float64 {
	if s.AV == nil {
		return 0
	}
	if av := s.AV(rPc); av > 0 && !math.IsInf(av, 0) {
		return av
	}
	return 0
}

// reddeningErr is one sigma of E(BP-RP) at a distance.
func (s *Seen) reddeningErr(rPc float64) float64 {
	switch {
	case s.ReddeningErrMag > 0:
		return s.ReddeningErrMag
	case s.ReddeningErrMag == 0 && rPc > reddenedFromPc:
		return reddeningErr
	}
	return 0
}

// known tells a value from the 0 that stands for none.
func known(v float64) bool { return v != 0 && finite(v) }
