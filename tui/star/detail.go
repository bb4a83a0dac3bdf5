package star

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
	"evenfall/targets/table"
	"evenfall/targets/taking"
	"evenfall/tui/kit"
)

// Detail is all that the screen shows of one star at one moment. It does not
// change once made.
type Detail struct {
	Row      int
	Name     string
	Scene    moment.Scene
	Moment   moment.Moment
	HandOver []string
	Curve    []moment.Point
	Known    []Line
	asked    key
	wrapped  wrapped
}

// Line is one statement of what is known; a heading where Head is set.
type Line struct {
	Role kit.Role
	Text string
	Head bool
}

// wrapped keeps the lines as broken for a width.
type wrapped struct {
	width int
	lines []Line
}

// document breaks what is known into lines of a width. Called by one
// goroutine only, the one that draws.
func (d *Detail) document(width int) []Line {
	if d.wrapped.width == width && d.wrapped.lines != nil {
		return d.wrapped.lines
	}
	var out []Line
	for _, l := range d.Known {
		if l.Head {
			out = append(out, Line{kit.Title, l.Text, true})
			continue
		}
		for _, text := range kit.Wrap(l.Text, width-2, 2) {
			out = append(out, Line{l.Role, "  " + text, false})
		}
	}
	d.wrapped = wrapped{width, out}
	return out
}

// writer collects lines.
type writer struct{ lines []Line }

func (w *writer) head(s string) { w.lines = append(w.lines, Line{kit.Title, s, true}) }
func (w *writer) say(format string, a ...any) {
	w.lines = append(w.lines, Line{kit.Text, fmt.Sprintf(format, a...), false})
}
func (w *writer) warn(format string, a ...any) {
	w.lines = append(w.lines, Line{kit.Warn, fmt.Sprintf(format, a...), false})
}
func (w *writer) dim(format string, a ...any) {
	w.lines = append(w.lines, Line{kit.Dim, fmt.Sprintf(format, a...), false})
}

// known writes down everything known of a star, what decides first.
func known(sc *moment.Scene, p *moment.Prepared, m *moment.Moment, st *stage.Study, next []light.Event, taken [][]Line) ([]Line, error) {
	var w writer
	w.stage(m, st)
	w.light(next, m)
	w.lines = append(w.lines, taken[0]...)
	w.madeOf(st)
	w.missing(m)
	w.night(m)
	for _, part := range taken[1:] {
		w.lines = append(w.lines, part...)
	}
	w.sky(m)
	w.evidence(m)
	err := w.listed(&p.Target)
	w.head("workings")
	for _, x := range moment.Steps(sc, p, m, st) {
		w.say("%s: %s", x.What, x.Result)
		w.dim("  %s; from %s; source: %s", x.Formula, x.Inputs, x.Source)
	}
	return w.lines, err
}

func (w *writer) missing(m *moment.Moment) {
	if len(m.Why) == 0 {
		return
	}
	w.head("missing, and what it costs")
	for _, why := range m.Why {
		w.warn("- %s", why)
	}
}

// strongest is how many reasons stand beside the probabilities; the others come
// further down.
const strongest = 2

func (w *writer) stage(m *moment.Moment, st *stage.Study) {
	w.head("what it is")
	codes := slices.Clone(targets.Stages[:])
	slices.SortStableFunc(codes, func(a, b targets.Stage) int { return cmp.Compare(m.Stage.P[b], m.Stage.P[a]) })
	var parts []string
	for _, c := range codes {
		if p := m.Stage.P[c]; p >= 0.005 {
			parts = append(parts, fmt.Sprintf("%s %.0f %%", c, math.Min(100*p, 99)))
		}
	}
	w.say("%s", strings.Join(parts, "  "))
	for i, e := range m.Stage.Evidence {
		switch {
		case e.Log10Odds == 0:
			w.warn("%s", e.What)
		case i < strongest:
			w.say("%+.1f %s", e.Log10Odds, e.What)
		}
	}
	for _, d := range st.Decide {
		w.say("would settle it: %s", d)
	}
}

// evidence lists every reason with its source.
func (w *writer) evidence(m *moment.Moment) {
	w.head("evidence, log10 of the odds for the likeliest stage")
	for _, e := range m.Stage.Evidence {
		if e.Log10Odds != 0 {
			w.say("%+.1f %s [%s]", e.Log10Odds, e.What, e.Source)
		}
	}
}

// madeOf lists the physical quantities with their intervals.
func (w *writer) madeOf(st *stage.Study) {
	if len(st.Quantities)+len(st.Notes) == 0 {
		return
	}
	w.head(fmt.Sprintf("what it is made of, %.0f %% intervals", 100*stage.Level))
	for i := range st.Quantities {
		q := &st.Quantities[i]
		w.say("%s %s", q.Words, kit.QuantityWord(q))
		if !st.SharesMethod(i) {
			w.dim("  %s [%s]", q.Method, q.Source)
		}
	}
	for _, n := range st.Notes {
		w.say("%s", n)
	}
}

func (w *writer) light(next []light.Event, m *moment.Moment) {
	f := &m.Expect
	w.head("what you will see")
	w.say("%s  (%.0f %% interval, brighter end first)", strings.TrimSpace(kit.ExpectWord(f)), 100*f.Level)
	if f.SB != nil {
		w.say("surface brightness %.2f  %.2f..%.2f mag per square arcsec, in the line", f.SB.Value.MagArcsec2(), f.SB.Lo.MagArcsec2(), f.SB.Hi.MagArcsec2())
	}
	if f.Phase != nil && f.Phase.Status == "unknown" {
		w.warn("phase unknown: any brightness of the cycle")
	} else if f.Phase != nil {
		w.say("phase %.2f +- %.2f of a cycle after maximum, %s", f.Phase.Value, f.Phase.Sigma, f.Phase.Status)
	}
	for _, st := range f.States {
		w.say("%s %.0f %%: %.1f  %.1f..%.1f", st.Name, 100*st.P, st.Mag.Mags(), st.Lo.Mags(), st.Hi.Mags())
	}
	if f.Basis != "" {
		w.dim("basis: %s", f.Basis)
	}
	for _, e := range next {
		text := fmt.Sprintf("next %s %s, in %s, +- %s (%s)", e.Kind, kit.Stamp(e.At.UTC(), e.SigmaS),
			kit.Until(e.At.Sub(m.At)), kit.Duration(e.SigmaS), e.Status)
		if e.Words != "" {
			text += "; " + e.Words
		}
		w.say("%s", text)
	}
}

// kept says of each limit that it is kept.
var kept = map[targets.Code]string{
	targets.CodeDaylight: "Sun low enough", targets.CodeSun: "far enough from the Sun", targets.CodeBelow: "above the horizon",
	targets.CodeAltitude: "high enough", targets.CodeHorizon: "above the site's horizon", targets.CodeZenith: "clear of the zenith",
	targets.CodeHourAngle: "hour angle allowed", targets.CodeDeclination: "declination allowed", targets.CodeMoon: "far enough from the Moon",
	targets.CodeWind: "out of the wind", targets.CodeCloud: "out of the cloud", targets.CodeWindow: "in our hours", targets.CodeClosed: "open", targets.CodeInstrument: "instrument mounted",
	targets.CodeSky: "dark enough", targets.CodeSeeing: "sharp enough", targets.CodeExtinction: "clear enough", targets.CodeSaturates: "does not saturate",
	targets.CodeTooFaint: "bright enough",
}

func (w *writer) night(m *moment.Moment) {
	w.head("tonight, UTC")
	spans := func(list []astro.Span) string {
		var parts []string
		for _, s := range list {
			parts = append(parts, kit.Clock(s.From)+"-"+kit.Clock(s.Until))
		}
		if len(parts) == 0 {
			return "not tonight"
		}
		return strings.Join(parts, ", ")
	}
	w.say("can %s   should %s", spans(m.Course.Can), spans(m.Course.Should))
	if b := m.Course.Best; b != nil {
		w.say("best %s at X %.3f, altitude %.1f deg%s", kit.Clock(*b), float64(m.Course.BestAirmass), m.Course.BestAltitude.Deg(), taking.AtBest(m))
	}
	if m.Course.Transit != nil {
		w.say("transit %s", kit.Clock(*m.Course.Transit))
	}
	for _, b := range m.BlockedBy {
		w.warn("not now: %s", b.Words)
	}
	for _, l := range m.Course.HardLimits() {
		if astro.Total(l.Kept) < 24*time.Hour {
			w.dim("%s %s", kept[l.Code], spans(l.Kept))
		}
	}
}

func (w *writer) sky(m *moment.Moment) {
	w.head("in the sky at " + m.At.UTC().Format("15:04:05"))
	w.say("altitude %.1f deg (refracted), azimuth %.1f deg (north 0, east 90), hour angle %+.2f h, parallactic angle %+.0f deg",
		m.Apparent.Deg(), m.Place.Az.Deg(), m.Place.HourAngle.Hours(), m.Place.Parallact.Deg())
	w.say("%.1f deg from the Moon, %.1f deg from the Sun", m.MoonSep.Deg(), m.SunSep.Deg())
	w.say("radial-velocity correction %+.3f km/s, to be added; BJD_TDB %.5f", m.Barycentric.RVCorrectionKms, m.Barycentric.BJDTDB)
	w.dim("place of date (true equator and equinox, geocentric; not for the telescope): %s %s", m.Place.RA.HMS(2), m.Place.Dec.DMS(1))
}

func (w *writer) listed(t *targets.Target) error {
	list, err := table.Listed(t)
	w.head("as listed")
	for _, l := range list {
		unit, mark := "", ""
		if l.Unit != "" {
			unit = " " + l.Unit
		}
		if l.Unconfirmed {
			mark = "   unconfirmed"
		}
		line := fmt.Sprintf("%-15s %s%s%s", l.Column, l.Value, unit, mark)
		if l.Unconfirmed {
			w.warn("%s", line)
		} else {
			w.say("%s", line)
		}
	}
	if t.Conflicts != "" {
		w.warn("sources disagree: %s", t.Conflicts)
	}
	if t.Notes != "" {
		w.say("notes: %s", t.Notes)
	}
	if t.Source != "" {
		w.dim("source: %s", t.Source)
	}
	return err
}
