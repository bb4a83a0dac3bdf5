package taking

import (
	"math"

	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/finding"
	"evenfall/targets/instrument"
	"evenfall/targets/moment"
)

// Finding says how to find a target: how far it has moved, how far to search,
// what star to offset from, what glare there is, where to aim at a nebula.
//
// Given:
//   - field: its neighbours; nil: none are listed.
//
// Checked: TestLines.
func Finding(s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want, field []targets.Target) []Line {
	var l lines
	t := &p.Target
	l.say("%s", finding.Tonight(t, m.At).Words)
	set, exposed := moment.SettingAt(s, p, m, w)
	fwhm, band := set.SeeingArcsec, targets.Band("V")
	if w.Mode != nil && w.Mode.Band != "" {
		band = w.Mode.Band
	}
	if g, ok := finding.GlareOf(t, fwhm, band); ok {
		l.warn("%s", g.Words)
	}
	for _, g := range finding.OffsetStars(t, field, m.At, finding.Rule{Most: 3}) {
		l.say("from %s, %s %.1f: %s", g.Name, g.Band, g.Mag, g.Words)
	}
	if t.Kind == targets.PN {
		nebula(&l, t, m, w, set, exposed)
	}
	if exposed && m.ExposureOK && w.Instrument.Kind != instrument.Slit && len(field) > 0 {
		survivors(&l, set, m, t, field)
	}
	return l
}

// nebula says where to aim and what the axis costs.
func nebula(l *lines, t *targets.Target, m *moment.Moment, w moment.Want, set exposure.Setting, exposed bool) {
	var aim [2]float64
	if w.Goal != nil {
		aim = w.Goal.AimArcsec
	}
	for _, words := range finding.AimAt(t, m.At, aim[0], aim[1]).Words {
		l.say("%s", words)
	}
	if exposed && w.Instrument.Kind == instrument.Slit && t.Nebula.PADeg.Known {
		if axis, err := finding.AlongAxis(set, t.Nebula.PADeg.Value); err == nil {
			l.say("%s", axis.Words)
		}
	}
}

// mostComparisons is how many comparison stars are named.
const mostComparisons = 4

// survivors names the comparison stars of the same frame.
func survivors(l *lines, set exposure.Setting, m *moment.Moment, t *targets.Target, field []targets.Target) {
	said := 0
	for _, c := range finding.Comparisons(set, m.Exposure, t, field, m.At) {
		if said == mostComparisons {
			return
		}
		said++
		if !c.Survives {
			l.say("comparison %s %.1f: %s", c.Name, c.Mag, c.Why)
			continue
		}
		l.say("comparison %s %.1f, %.0f arcsec away towards %s: S/N %.0f", c.Name, c.Mag, math.Round(c.From.SepArcsec), finding.Compass(c.From.PADeg), c.SNR)
	}
}
