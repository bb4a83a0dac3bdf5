package degenerate

import (
	"math"

	"evenfall/astro"
)

// Solution is one way to explain what was seen.
type Solution struct {
	TeffK, MassMsun float64 // means over this solution
	Chi2            float64 // of its best model
	Share           float64 // of the probability, 0 to 1
}

// Answer is what a fit says of a star. Intervals go from the 16th to the 84th
// per cent; one that is not valid is not given, and Notes says why.
type Answer struct {
	Composition  Composition
	Prior        Prior
	TeffK        astro.Interval
	MassMsun     astro.Interval
	LogG         astro.Interval // of cm/s²
	RadiusRsun   astro.Interval
	LumLsun      astro.Interval
	CoolingAgeYr astro.Interval
	Solutions    []Solution // by temperature, coolest first; usually one
	Chi2         float64    // of the best model; some 2 degrees of freedom less than data
	AbsMag       float64    // M_G, or M_V where only V was given; 0 without a magnitude
	BPRP0Mag     float64    // BP-RP without dust; 0 without a colour
	AVMag        float64    // extinction used, mean over the distances
	DistancePc   float64    // mean
	HeliumCore   bool       // mass below 0.45: the models do not fit such a star
	IntervalOnly bool       // the temperature is known as an interval alone
	Notes        []string   // what the user must know, in full words
}

// problem is one fit: what was seen, ready to be compared with a grid.
type problem struct {
	g     *grid
	q     quantity // the magnitude in use
	prior []float64

	line          *line // nil without a magnitude
	colour        bool
	bprp, bprpErr float64 // of the colour, where there is no magnitude
	logT, logTErr float64 // error 0: not known
	logG, logGErr float64

	stepT, stepM     int
	rowFrom, rowUpto int   // of the window
	from, upto       []int // its columns in each row

	cells         []cell
	minChi2, best float64
	rowW, rowMW   []float64 // weight, and weight times mass, of each step in log Teff
	rowBest       []float64 // the best likelihood there, as a logarithm
	colW          []float64 // weight of each step in mass
}

// cell is one model of the window and its logarithmic probability.
type cell struct {
	i, j int32
	ln   float64
	chi2 float64
}

// Fit finds which white-dwarf models explain what was seen of a star.
//
//	chi² = [M - M_G(T, m)]² / (σ² + 0.02²) + [c - c(T, m)]² / (σ² + 0.01²) + ...
//	p(T, m) ~ Σ over distances exp(-chi²/2) × prior(m)     flat in log T
//
// Given:
//   - s: what was seen; see [Seen].
//   - prior: [WidePrior] for an answer, [FlatPrior] to compare with catalogues.
//   - c: [Hydrogen] unless spectra say otherwise; run [Helium] too below
//     11 000 K, and give both.
//
// Returns:
//   - medians and the 16th and 84th per cent of each quantity.
//   - [ErrTooLittle], [ErrDistance], [ErrNotANumber], [ErrNoModel].
//
// Notes:
//  1. Steps of 0.0025 in log Teff and 0.005 solar masses, wider where the data
//     are wide, over the models near the star. Against all models, with each
//     distance summed by itself, medians agree to 0.1 per cent and 0.002 solar
//     masses.
//  2. 0.01 mag in colour is 0.6 per cent in Teff at 6000 K, 1.0 at 10 000, 1.9
//     at 15 000, 2.5 at 20 000, 3.3 at 30 000 and 12 at 50 000 K; in mass
//     0.011, 0.014, 0.015, 0.018, 0.026, 0.048. Above 30 000 K Gaia colours do
//     not give the temperature: IntervalOnly.
//  3. Without any reddening temperatures come out 3.4 per cent too low beyond
//     the nearest stars. Beyond 150 pc 0.02 mag in E(BP-RP) is added; it moves
//     magnitude and colour together.
//  4. Below 0.45 solar masses carbon-oxygen models give 0.045 too little: the
//     mass has 0.06 either way, and no age is given.
//  5. Below 4000 K the colour of hydrogen models turns: both solutions stand in
//     Solutions.
//  6. The colour of neither composition tells DA from DB.
//
// Source: models [cite.BedardEtAl2020]; photometric fits as in
// [cite.GentileFusilloEtAl2021], whose numbers they reproduce.
//
// Checked: TestFitCheckValues, TestFitSaysWhatItMust, TestFitAgainstCatalogue,
// TestFastAgainstFull, TestPriors, FuzzFit; BenchmarkFit.
func (m *Models) Fit(s Seen, prior Prior, c Composition) (Answer, error) {
	if c != Hydrogen && c != Helium || prior != WidePrior && prior != FlatPrior {
		return Answer{}, ErrNotANumber
	}
	p, err := m.pose(&s, prior, c)
	if err != nil {
		return Answer{}, err
	}
	const near, far, poor = 5.0, 10.0, 9.2
	if p.window(near) {
		p.weigh()
	}
	if len(p.cells) == 0 || p.minChi2 > poor {
		p.cells = p.cells[:0]
		if p.window(far) {
			p.weigh()
		}
	}
	if len(p.cells) == 0 || p.minChi2 > far*far {
		return Answer{}, ErrNoModel
	}
	a := p.answer()
	a.Composition, a.Prior = c, prior
	a.remark(&s)
	return a, nil
}

// pose checks what was seen and sums out the distance.
func (m *Models) pose(s *Seen, prior Prior, c Composition) (*problem, error) {
	for _, v := range [...]float64{s.GMag, s.GErrMag, s.VMag, s.VErrMag, s.BPRPMag, s.BPRPErrMag,
		s.TeffK, s.TeffErrK, s.LogG, s.LogGErr, s.ReddeningErrMag} {
		if !finite(v) || math.Abs(v) > 1e6 {
			return nil, ErrNotANumber
		}
	}
	if s.GErrMag < 0 || s.VErrMag < 0 || s.BPRPErrMag < 0 || s.TeffK < 0 || s.LogG < 0 {
		return nil, ErrNotANumber
	}
	p := &problem{g: m.grids[c], q: qMG, colour: s.HasBPRP}
	p.prior = p.g.priorOf[prior]
	constraints := 0
	if s.TeffK > 0 && s.TeffErrK > 0 {
		p.logT, p.logTErr = math.Log10(s.TeffK), s.TeffErrK/s.TeffK/math.Ln10
		p.logTErr = math.Max(p.logTErr, gridLogT/2)
		constraints++
	}
	if s.LogG > 0 && s.LogGErr > 0 {
		p.logG, p.logGErr = s.LogG, math.Max(s.LogGErr, 0.004)
		constraints++
	}
	if s.HasBPRP {
		p.bprp, p.bprpErr = s.BPRPMag, math.Hypot(s.BPRPErrMag, floorBPRP)
		constraints++
	}
	if s.GMag != 0 || s.VMag != 0 {
		distances, err := s.distances()
		if err != nil && constraints < 2 {
			return nil, err
		}
		if err == nil {
			p.line = newLine(s, distances)
			constraints++
		}
		if s.GMag == 0 {
			p.q = qMV
		}
	}
	if constraints < 2 {
		return nil, ErrTooLittle
	}
	return p, nil
}

// distances returns those given, in order, or those of the parallax.
func (s *Seen) distances() ([]Distance, error) {
	if s.Distances != nil {
		return normal(s.Distances)
	}
	return FromParallax(s.ParallaxMas, s.ParallaxErrMas)
}
