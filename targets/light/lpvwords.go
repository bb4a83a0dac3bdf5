package light

import (
	"fmt"
	"math"
	"strings"

	"evenfall/astro/cite"
	"evenfall/astro/timescale"
	"evenfall/targets/light/wander"
)

// words says why the forecast of a long-period variable is what it is.
func (l *longPeriod) words(q query, fit *fitted, w *wander.Forecast, m *maximum) string {
	var out []string
	n := w.N + w.NOther
	switch {
	case n > 0:
		out = append(out, l.taught(n, fit, m))
	case math.IsNaN(w.CyclesSinceEpoch):
		out = append(out, "no epoch of maximum to go by, and no magnitude")
	case w.PhaseStatus == PhaseUnknown:
		out = append(out, fmt.Sprintf("elements %.0f cycles old: phase lost", math.Abs(w.CyclesSinceEpoch)))
	default:
		out = append(out, fmt.Sprintf("elements %.0f cycles old: phase known to %.2f", math.Abs(w.CyclesSinceEpoch), w.PhaseSigma))
	}
	if p := fit.found; p != nil {
		out = append(out, fmt.Sprintf("period %.4g d found from the magnitudes, false alarm %.0e", p.Days, p.FalseAlarm))
	}
	if v := l.t.Var.Type; strings.HasPrefix(v, "SRC") || strings.HasPrefix(v, "L") {
		out = append(out, "averages are those of semiregular giants")
	}
	if strings.Contains(l.t.Var.Type, "ZAND") {
		out = append(out, "outbursts of the companion not foreseen")
	}
	said := w.Words()
	if n == 0 { // said above
		said = strings.Replace(said, fmt.Sprintf("; %.1f cycles since the catalogue's maximum", w.CyclesSinceEpoch), "", 1)
	}
	if !w.Calibrated {
		said = strings.Replace(said, "band not calibrated", fmt.Sprintf("band not calibrated until %d magnitudes", calibratedFrom), 1)
	}
	return strings.Join(append(out, said), "; ")
}

// taught says what magnitudes told of the next maximum.
func (l *longPeriod) taught(n int, fit *fitted, m *maximum) string {
	verb := "put"
	if n == 1 {
		verb = "puts"
	}
	s := fmt.Sprintf("%s since %s", counted(n, "magnitude"), fit.since.UTC().Format("January 2006"))
	if n == 1 {
		s = "1 magnitude of " + dateWord(fit.since)
	}
	if fit.others > 0 {
		s += fmt.Sprintf(" (%d of other bands, for the phase alone)", fit.others)
	}
	if m != nil && m.status != PhaseUnknown {
		if at, err := timescale.FromJD(m.jd, "JD_UTC"); err == nil {
			return fmt.Sprintf("%s %s maximum at %s +- %.0f d", s, verb, dateWord(at), m.sigmaD)
		}
	}
	return s + map[bool]string{true: " leaves", false: " leave"}[n == 1] + " the phase open"
}

// steps are the workings of a long-period variable's forecast.
func (l *longPeriod) steps(fit *fitted, w *wander.Forecast, f *Forecast, periodD float64) []Step {
	var out []Step
	if p := fit.found; p != nil {
		out = append(out, Step{"period", "highest peak of the periodogram with a floating mean; trusted below a false alarm of 1e-6",
			counted(len(fit.used), "magnitude"), fmt.Sprintf("%.4g +- %.2g d, false alarm %.1e, half amplitude %.2f mag", p.Days, p.SigmaD, p.FalseAlarm, p.AmplitudeMag),
			cite.ZechmeisterKuerster2009.String() + "; " + cite.Baluev2008.String()})
	}
	if c := w.CyclesSinceEpoch; !math.IsNaN(c) {
		out = append(out, Step{"phase by the elements", "frac((t - T0)/P); sd^2 = 0.030^2 + 0.012^2 N + (0.0048 N)^2, lost in 29 % of such stars",
			fmt.Sprintf("T0 %.1f, P %.4g d, N %.1f", l.elements.EpochMaxJD, periodD, c),
			fmt.Sprintf("%.3f +- %.3f of a cycle", c-math.Floor(c), wander.EpochSigma(c)), cite.EddingtonPlakidis1929.String()})
	}
	e := &l.elements
	listed := "no extremes listed"
	if !e.NoMax {
		listed = fmt.Sprintf("brightest %.1f", e.MagMax)
		if !e.NoMin {
			listed += fmt.Sprintf(", faintest %.1f", e.MagMin)
		}
		listed += " in " + string(bandOf(string(e.Band)))
	}
	return append(out, Step{"expected brightness", "mixture over phase, period and restlessness, in each a linear light curve with drifts kept by a Kalman filter; median and quantiles",
		fmt.Sprintf("P %.4g d, %s, %d magnitudes in the band, %d in others; R %.2f, phase %s", periodD, listed, w.N, w.NOther, w.R, w.PhaseStatus),
		f.result(), filterSource})
}
