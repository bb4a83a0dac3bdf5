package wander

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/targets"
)

//go:embed lpv_prior.csv
var priorCSV string

// averages are the numbers of lpv_prior.csv by group, parameter and term.
//
// Source: this project's measurement on 236 Miras and 52 semiregulars of
// ASAS-3, [cite.Pojmanski2002], matched to [cite.SamusEtAl2017].
var averages = loadAverages()

func loadAverages() map[string]float64 {
	r := csv.NewReader(strings.NewReader(priorCSV))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil || len(rows) < 2 {
		panic("wander: the embedded table of averages cannot be read")
	}
	out := map[string]float64{}
	for _, row := range rows[1:] {
		v, err := strconv.ParseFloat(row[3], 64)
		if err != nil {
			panic("wander: the embedded table of averages has a cell that is no number")
		}
		out[row[0]+"|"+row[1]+"|"+row[2]] = v
		if s, ok := strings.CutPrefix(row[6], "sd "); ok {
			if sd, err := strconv.ParseFloat(s, 64); err == nil {
				out[row[0]+"|"+row[1]+"|"+row[2]+" sd"] = sd
			}
		}
	}
	return out
}

// average looks a number up; an absent one is a slip of the program, which
// TestPrior would show.
func average(group, parameter, term string) float64 {
	v, ok := averages[group+"|"+parameter+"|"+term]
	if !ok {
		panic("wander: no average " + group + ", " + parameter + ", " + term)
	}
	return v
}

const (
	nFixed  = 6 // m0, A, a2, b2, a3, b3
	nDrift  = 3 // u0, u1, w
	nState  = nFixed + nDrift
	nPhase  = 24    // nodes of phase
	periodK = 0.045 // half range of ln(P/Pcat)

	leastAmplitude = 0.4 // floor of A, mag
	leastSR        = 0.3 // clamp of A for semiregulars, mag; not tested
	mostSR         = 1.3

	// wideLevel and wideAmplitude are the prior's standard deviations in a band
	// without averages, mag. A choice.
	wideLevel, wideAmplitude = 1.5, 0.6

	shortestD, longestD = 10.0, 3000.0
	referenceD          = 280.0 // days, of lp = log10(P/280)
	referenceHalf       = 3.0   // mag, of h-3
	referenceAmplitude  = 2.0   // mag, of A-2
)

// restless are the factors of the drifts' sizes, and their weights. The factors
// were chosen with the stars in view that they were then scored on.
var restless = [...]struct{ q, weight float64 }{{0.9, 0.3}, {1.2, 0.4}, {1.6, 0.3}}

// model is a star before any magnitude.
type model struct {
	elements   Elements
	periodD    float64
	calibrated bool // the band has averages
	mean       [nFixed]float64
	cov        [nFixed][nFixed]float64
	driftSD    [nDrift]float64 // at q = 1
	tauD       [nDrift]float64
	jitter     float64
	restlessP  [len(restless)]float64 // weights of the factors
}

// newModel looks up the averages for a star.
//
//	level m0 = mid + c + c1 (h-3) + c2 lp;  A likewise;  harmonics = c0 + c1 lp + c2
//	h = (min-max)/2, mid = (min+max)/2, lp = log10(P/280)
//	cov(A,harm) = c2 sA^2;  cov(harm) = c2 c2' sA^2 + residual (A/2)^2
//
// Source: this project's measurement on ASAS-3, [cite.Pojmanski2002].
//
// Checked: TestPrior.
func newModel(e Elements, band targets.Band) (*model, error) {
	if err := e.check(); err != nil {
		return nil, err
	}
	m := &model{elements: e, periodD: e.PeriodD, calibrated: sharesV(band) && e.catalogued()}
	lp := math.Log10(e.PeriodD / referenceD)
	sdLevel, sdA := m.levels(lp)
	if !m.calibrated {
		sdLevel, sdA = math.Max(sdLevel, wideLevel), math.Max(sdA, wideAmplitude)
	}
	m.harmonics(lp, sdLevel, sdA)
	m.process()
	return m, nil
}

// sharesV tells whether the one model of V and visual holds in a band.
func sharesV(b targets.Band) bool {
	return b == BandV || b == BandVisual || b == "v" || b == ""
}

// catalogued tells whether the extremes are in a system that has averages.
func (e *Elements) catalogued() bool {
	return !e.NoMax && (sharesV(e.Band) || e.Band == BandPhotographic)
}

func (e *Elements) check() error {
	if !(e.PeriodD >= shortestD && e.PeriodD <= longestD) {
		return fmt.Errorf("period %v d: %w", e.PeriodD, ErrPeriod)
	}
	ok := e.PeriodErrD >= 0 && e.PeriodErrD < longestD && e.RiseFraction >= 0 && e.RiseFraction < 1 &&
		(!e.HasEpoch || math.Abs(e.EpochMaxJD) < largestJD) &&
		(e.NoMax || math.Abs(e.MagMax) < largestMag) &&
		(e.NoMin || math.Abs(e.MagMin) < largestMag) &&
		(!e.HasLevel || math.Abs(e.LevelMag) < largestMag) &&
		(e.Class == Mira || e.Class == Semiregular)
	switch {
	case !ok:
		return ErrElements
	case e.NoMax && !e.HasLevel:
		return ErrLevel
	}
	return nil
}

func (e *Elements) group() string {
	if e.Class == Semiregular {
		return "SR"
	}
	return "Mira"
}

// levels fills the means of m0 and A, and returns their standard deviations.
// A band without averages takes the means of V.
func (m *model) levels(lp float64) (sdLevel, sdA float64) {
	e := &m.elements
	g := e.group()
	system := g + " V"
	if e.Band == BandPhotographic {
		system = g + " p"
	}
	half, mid := (e.MagMin-e.MagMax)/2, (e.MagMin+e.MagMax)/2
	switch {
	case e.NoMax:
		m.mean[0], sdLevel = e.LevelMag, wideLevel
		m.mean[1], sdA = noExtremes(g, lp)
	case e.NoMin || e.MinIsLimit || half <= 0:
		m.mean[0] = e.MagMax + average(system, "m0_minus_mmax", "mean (no usable minimum)")
		sdLevel = average(system, "m0_minus_mmax", "sd")
		m.mean[1], sdA = noExtremes(g, lp)
	default:
		linear := func(p string) float64 {
			return average(system, p, "1") + average(system, p, "h-3")*(half-referenceHalf) + average(system, p, "lp")*lp
		}
		m.mean[0], sdLevel = mid+linear("m0_minus_mid"), average(system, "m0_minus_mid", "sd")
		m.mean[1], sdA = linear("A"), average(system, "A", "sd")
	}
	// Eight carbon Miras, V extremes, are all that is known of such stars.
	if e.Carbon && e.Class == Mira && !e.NoMax && sharesV(e.Band) {
		m.mean[0] += average("Mira V carbon", "shift", "C m0 shift")
		m.mean[1] += average("Mira V carbon", "shift", "C A shift")
		sdLevel = math.Max(sdLevel, average("Mira V carbon", "shift", "C m0 shift sd"))
	}
	if e.Class == Semiregular {
		m.mean[1] = math.Min(math.Max(m.mean[1], leastSR), mostSR)
	} else {
		m.mean[1] = math.Max(m.mean[1], leastAmplitude)
	}
	return sdLevel, sdA
}

// noExtremes returns mean and standard deviation of A where the catalogue's
// range says nothing of it.
func noExtremes(group string, lp float64) (mean, sd float64) {
	const p = "A_no_extremes"
	return average(group, p, "1") + average(group, p, "lp")*lp, average(group, p, "sd")
}

var harmonicNames = [...]string{"a2", "b2", "a3", "b3"}

// harmonics fills the rest of mean and covariance from the mean of A.
func (m *model) harmonics(lp, sdLevel, sdA float64) {
	g := m.elements.group()
	a, varA := m.mean[1], sdA*sdA
	scale := a * a / (referenceAmplitude * referenceAmplitude)
	var c2 [len(harmonicNames)]float64
	m.cov[0][0], m.cov[1][1] = sdLevel*sdLevel, varA
	for i, name := range harmonicNames {
		c2[i] = average(g, name, "A-2")
		m.mean[2+i] = average(g, name, "1") + average(g, name, "lp")*lp + c2[i]*(a-referenceAmplitude)
		if rise := m.elements.RiseFraction; rise > 0 && m.elements.Class == Mira {
			late := 100*rise - average(g, "rise_mean_pct", "1") - average(g, "rise_mean_pct", "lp")*lp
			m.mean[2+i] += average(g, name, "A*(rise-rise_mean)/10") * a * late / 10
		}
		m.cov[1][2+i], m.cov[2+i][1] = c2[i]*varA, c2[i]*varA
	}
	for i, name := range harmonicNames {
		for j := i; j < len(harmonicNames); j++ {
			c := c2[i]*c2[j]*varA + average(g, "cov_at_A2", name+","+harmonicNames[j])*scale
			m.cov[2+i][2+j], m.cov[2+j][2+i] = c, c
		}
	}
}

// process fills sizes and times of the drifts.
func (m *model) process() {
	g := m.elements.group()
	p := func(name string) float64 { return average(g, "process", name) }
	u1 := "s_u1 (times A/2)"
	scale := m.mean[1] / 2
	if m.elements.Class == Semiregular {
		u1, scale = "s_u1", 1
	}
	m.driftSD = [nDrift]float64{p("s_u0"), p(u1) * scale, p("s_w")}
	m.tauD = [nDrift]float64{p("tau_u") * m.periodD, p("tau_u") * m.periodD, p("tau_w") * m.periodD}
	m.jitter = p("jitter")
	for i, r := range restless {
		m.restlessP[i] = r.weight
	}
}
