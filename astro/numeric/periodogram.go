package numeric

import "math"

// Reading is one value of a series in time, with its standard error.
type Reading struct{ T, Value, Sigma float64 }

// Frequencies is the range that a periodogram searches, in cycles per unit of
// time, and how finely: steps in the width 1/span of a peak.
type Frequencies struct {
	Lo, Hi     float64
	Oversample int // 0: 10
}

// Periodogram is how well a sine and a constant fit at each frequency.
type Periodogram struct {
	Freq, Power []float64 // Power: part of chi squared that the sine takes away, 0 to 1

	Best       float64 // frequency of the highest peak
	BestPower  float64
	BestSigma  float64 // its standard error, for errors independent of each other
	Amplitude  float64 // half of peak to peak there
	FalseAlarm float64 // chance that noise alone makes so high a peak anywhere in the range
}

const (
	usualOversample = 10
	mostFrequencies = 1000000
	leastReadings   = 4 // one more than the sine and the constant need
)

// LombScargle returns the generalised Lomb-Scargle periodogram of an uneven
// series: at each frequency the sine with a floating mean that fits best.
//
//	p = (SS YC^2 + CC YS^2 - 2 CS YC YS) / (YY D),  D = CC SS - CS^2
//	weighted sums over the readings, the means of y, cos and sin taken off
//
// Given:
//   - readings: in any order, at least four, not all at one time or alike.
//   - band: 0 < Lo < Hi; up to a million steps.
//
// Returns:
//   - the periodogram.
//   - [ErrData], [ErrInterval], [ErrNotANumber]; [ErrSingular] where all values
//     are one.
//
// Notes:
//  1. False alarm: 1 - (1 - f) exp(-tau), f = (1 - p)^((N-3)/2) of one frequency,
//     tau = g W (1 - p)^((N-4)/2) sqrt((N-1) p / 2), g = sqrt(2/(N-1)) Gamma((N-1)/2) / Gamma((N-2)/2),
//     W = (Hi - Lo) sqrt(4 pi var t). It is an upper bound where aliases do not
//     matter, and for independent errors: slow drifts make it far too small.
//  2. BestSigma = sqrt(6/N) s / (pi span A), s the scatter about the sine.
//
// Source: [cite.ZechmeisterKuerster2009]; false alarm [cite.Baluev2008], for
// powers in units of chi squared about the mean; BestSigma
// [cite.MontgomeryODonoghue1999]. From memory, not checked against the
// publications.
//
// Checked: TestLombScargle, against [LeastSquares], to 1e-9; TestFalseAlarm,
// against noise; TestFrequencyError; FuzzLombScargle.
func LombScargle(readings []Reading, band Frequencies) (Periodogram, error) {
	s, err := newSeries(readings)
	if err != nil {
		return Periodogram{}, err
	}
	if !finite(band.Lo, band.Hi) || band.Lo <= 0 || band.Hi <= band.Lo {
		return Periodogram{}, ErrInterval
	}
	if band.Oversample <= 0 {
		band.Oversample = usualOversample
	}
	steps := math.Ceil((band.Hi-band.Lo)*s.span*float64(band.Oversample)) + 1
	if !(steps <= mostFrequencies) {
		return Periodogram{}, ErrInterval
	}
	n := max(int(steps), 3)
	out := Periodogram{Freq: make([]float64, n), Power: make([]float64, n)}
	top := 0
	for i := range n {
		out.Freq[i] = band.Lo + (band.Hi-band.Lo)*float64(i)/float64(n-1)
		out.Power[i], _ = s.power(out.Freq[i])
		if out.Power[i] > out.Power[top] {
			top = i
		}
	}
	out.Best = out.Freq[top]
	if top > 0 && top < n-1 {
		f, _, err := Minimum(func(f float64) float64 { p, _ := s.power(f); return -p }, out.Freq[top-1], out.Freq[top+1], 1e-9*out.Best)
		if err == nil {
			out.Best = f
		}
	}
	out.BestPower, out.Amplitude = s.power(out.Best)
	scatter := math.Sqrt(s.yy * (1 - out.BestPower))
	out.BestSigma = math.Sqrt(6/float64(len(readings))) * scatter / (math.Pi * s.span * out.Amplitude)
	out.FalseAlarm = s.falseAlarm(out.BestPower, band.Hi-band.Lo)
	if !finite(out.BestPower, out.Amplitude, out.FalseAlarm) {
		return Periodogram{}, ErrNotANumber
	}
	return out, nil
}

// series is readings made ready: times from their weighted mean, values less
// theirs, weights that sum to 1.
type series struct {
	t, y, w        []float64
	yy, varT, span float64
}

func newSeries(readings []Reading) (*series, error) {
	if len(readings) < leastReadings {
		return nil, ErrData
	}
	s := &series{}
	var sum, meanT, meanY float64
	first, last := math.Inf(1), math.Inf(-1)
	for _, r := range readings {
		if !finite(r.T, r.Value, r.Sigma) {
			return nil, ErrNotANumber
		}
		if r.Sigma <= 0 {
			return nil, ErrData
		}
		w := 1 / (r.Sigma * r.Sigma)
		s.t, s.y, s.w = append(s.t, r.T), append(s.y, r.Value), append(s.w, w)
		sum, meanT, meanY = sum+w, meanT+w*r.T, meanY+w*r.Value
		first, last = math.Min(first, r.T), math.Max(last, r.T)
	}
	meanT, meanY, s.span = meanT/sum, meanY/sum, last-first
	largest := 0.0
	for i := range s.t {
		largest = math.Max(largest, math.Abs(s.y[i]))
		s.w[i] /= sum
		s.t[i] -= meanT
		s.y[i] -= meanY
		s.yy += s.w[i] * s.y[i] * s.y[i]
		s.varT += s.w[i] * s.t[i] * s.t[i]
	}
	switch {
	case !finite(sum, meanT, meanY, s.yy, s.varT) || sum <= 0:
		return nil, ErrNotANumber
	case s.span <= 0:
		return nil, ErrData
	case s.yy <= math.Pow(4*epsilon*largest, 2):
		return nil, ErrSingular
	}
	return s, nil
}

// power returns the part of chi squared that a sine of a frequency takes away,
// and its amplitude.
func (s *series) power(freq float64) (p, amplitude float64) {
	var c, sn, cc, cs, yc, ys float64
	for i, t := range s.t {
		turns := freq * t
		sin, cos := math.Sincos(2 * math.Pi * (turns - math.Floor(turns)))
		w := s.w[i]
		c += w * cos
		sn += w * sin
		cc += w * cos * cos
		cs += w * cos * sin
		yc += w * s.y[i] * cos
		ys += w * s.y[i] * sin
	}
	ss := 1 - cc - sn*sn
	cc -= c * c
	cs -= c * sn
	d := cc*ss - cs*cs
	if d <= singular*cc*ss || d <= 0 {
		return 0, 0 // the sine is the constant here
	}
	p = (ss*yc*yc + cc*ys*ys - 2*cs*yc*ys) / (s.yy * d)
	a, b := (yc*ss-ys*cs)/d, (ys*cc-yc*cs)/d
	return math.Min(math.Max(p, 0), 1), math.Hypot(a, b)
}

// falseAlarm is the chance of a power from noise, anywhere in a width of
// frequencies.
func (s *series) falseAlarm(power, width float64) float64 {
	n := float64(len(s.t))
	single := math.Pow(1-power, (n-3)/2)
	up, _ := math.Lgamma((n - 1) / 2)
	down, _ := math.Lgamma((n - 2) / 2)
	gamma := math.Sqrt(2/(n-1)) * math.Exp(up-down)
	tau := gamma * width * math.Sqrt(4*math.Pi*s.varT) * math.Pow(1-power, (n-4)/2) * math.Sqrt((n-1)*power/2)
	// 1 - (1-f) exp(-tau), without losing small chances
	return math.Min(math.Max(single-(1-single)*math.Expm1(-tau), 0), 1)
}
