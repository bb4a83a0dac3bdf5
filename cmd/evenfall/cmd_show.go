package main

import (
	"fmt"
	"io"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
	"evenfall/targets/taking"
	"evenfall/tui/kit"
)

func showCommand(w world, o *options) *cobra.Command {
	c := &cobra.Command{
		Use:   "show TARGET",
		Short: "everything known of one target, each figure with its working and source",
		Long: "Everything known of one target at one moment: where it stands, when it is best, what it is,\n" +
			"how bright it should be, what its list says, and the working of each figure.\n" +
			"--handover prints just the lines for the telescope's operator: ICRS, motion stated.\n\n" + caution,
		Example: "  evenfall show 'R Lep'\n  evenfall show r-lep --handover --at 2026-12-02T04:00:00Z",
		Args:    exactly(1, "the name or id of one target"),
		RunE: func(_ *cobra.Command, args []string) error {
			if err := o.oneOf("text", "json"); err != nil {
				return err
			}
			return runShow(w, o, args[0])
		},
	}
	c.Flags().BoolVar(&o.handover, "handover", false, "print just the lines for the telescope's operator")
	return c
}

func runShow(w world, o *options, name string) error {
	s, err := openSession(w, o)
	if err != nil {
		return err
	}
	i, err := s.find(name)
	if err != nil {
		return err
	}
	// a rank needs the others; a look at one star does not
	if o.handover {
		s.only(i)
	}
	s.compute(o)
	if o.handover {
		i = 0
	}
	v := view{s: s, t: &s.targets[i], p: &s.prepared[i], m: &s.moments[i], w: &s.wants[i]}
	if !o.handover {
		v.study = v.p.Study(s.models)
	}
	switch {
	case o.handover && o.format == "json":
		err = printJSON(w.out, v.handOverShape())
	case o.handover:
		_, err = fmt.Fprintln(w.out, strings.Join(v.handOver(), "\n"))
	case o.format == "json":
		shape, failed := v.showShape()
		if failed != nil {
			return failed
		}
		err = printJSON(w.out, shape)
	default:
		err = v.text(w.out)
	}
	if err != nil {
		return err
	}
	return s.status()
}

// only leaves a single target in the session.
func (s *session) only(i int) { s.targets = s.targets[i : i+1] }

// view is one target of a session at its moment.
type view struct {
	s *session
	t *targets.Target
	p *moment.Prepared
	m *moment.Moment
	w *moment.Want

	study stage.Study
}

func (v view) handOver() []string {
	return v.s.handOverFormat().Lines(v.t, v.m, v.p.Drift)
}

// handOverShape is the position handed over, for scripts.
func (v view) handOverShape() any {
	return struct {
		Name  string   `json:"name"`
		At    string   `json:"at_utc"`
		RA    float64  `json:"ra_deg"`
		Dec   float64  `json:"dec_deg"`
		Lines []string `json:"lines"`
	}{v.t.Name, stamp(v.m.At), round(v.m.RA.Deg(), placeDigits), round(v.m.Dec.Deg(), placeDigits), v.handOver()}
}

type jsonStep struct {
	What    string `json:"what"`
	Formula string `json:"formula"`
	Inputs  string `json:"inputs"`
	Result  string `json:"result"`
	Source  string `json:"source"`
}

type jsonListed struct {
	Column      string `json:"column"`
	Value       string `json:"value"`
	Unit        string `json:"unit,omitempty"`
	Unconfirmed bool   `json:"unconfirmed,omitempty"`
}

type jsonShow struct {
	Demonstration bool     `json:"demonstration,omitempty"`
	Site          jsonSite `json:"site"`
	At            string   `json:"at_utc"`
	Night         string   `json:"night"`
	jsonTarget
	Derived  map[string]jsonDerived `json:"derived"`
	Notes    []string               `json:"stage_notes,omitempty"`
	Decide   []string               `json:"stage_decided_by,omitempty"`
	Events   []jsonEvent            `json:"events"`
	HandOver []string               `json:"handover"`
	Listed   []jsonListed           `json:"listed"`
	Steps    []jsonStep             `json:"steps"`
}

// jsonEvent is a dated happening of the target.
type jsonEvent struct {
	Kind   string  `json:"kind"`
	At     string  `json:"at_utc"`
	AtBJD  float64 `json:"at_bjd_tdb"`
	SigmaS float64 `json:"sigma_s"`
	Status string  `json:"status"`
}

func (v view) events() []jsonEvent {
	out := []jsonEvent{}
	for _, e := range v.p.Light.Next(v.m.At) {
		out = append(out, jsonEvent{e.Kind, stamp(e.At), round(e.BJDTDB, jdDigits), round(e.SigmaS, 1), e.Status})
	}
	return out
}

func (v view) showShape() (jsonShow, error) {
	listed, err := v.listed()
	if err != nil {
		return jsonShow{}, err
	}
	out := jsonShow{
		Demonstration: v.s.demo, Site: siteShape(v.s.site), At: stamp(v.m.At), Night: v.s.night.Date.String(),
		jsonTarget: targetShape(v.t, v.p, v.m, v.w), HandOver: v.handOver(), Listed: listed, Derived: v.derived(), Events: v.events(),
		Notes: v.study.Notes, Decide: v.study.Decide,
	}
	for _, st := range moment.Steps(&v.s.scene, v.p, v.m, &v.study) {
		out.Steps = append(out.Steps, jsonStep(st))
	}
	return out, nil
}

// text prints the view for people.
func (v view) text(w io.Writer) error {
	var b strings.Builder
	kind := string(v.t.Kind)
	if v.t.KindNote != "" {
		kind += ", " + v.t.KindNote
	}
	if v.t.KindInferred {
		kind += " (inferred from the list's other columns)"
	}
	fmt.Fprintf(&b, "%s  %s", v.t.Name, kind)
	if v.t.ID != "" {
		fmt.Fprintf(&b, "  id %s", v.t.ID)
	}
	b.WriteString("\n")
	for _, l := range v.handOver() {
		fmt.Fprintln(&b, l)
	}
	b.WriteString("\n")
	v.s.head(&b)
	v.skyText(&b)
	v.nightText(&b)
	v.stageText(&b)
	v.studyText(&b)
	v.lightText(&b)
	v.takingText(&b)
	if err := v.listText(&b); err != nil {
		return err
	}
	b.WriteString("\nworkings\n")
	for _, st := range moment.Steps(&v.s.scene, v.p, v.m, &v.study) {
		fmt.Fprintf(&b, "  %s: %s\n    %s\n    from %s\n    source: %s\n", st.What, st.Result, st.Formula, st.Inputs, st.Source)
	}
	_, err := io.WriteString(w, b.String())
	return err
}

func (v view) skyText(b *strings.Builder) {
	m := v.m
	direction := "sinking"
	if m.Rising {
		direction = "rising"
	}
	air := "below the horizon"
	if m.AirOK {
		air = fmt.Sprintf("airmass %.3f", float64(m.Airmass))
	}
	fmt.Fprintf(b, "\nin the sky\n  altitude %.2f deg (%s), azimuth %.2f deg, %s\n", m.Apparent.Deg(), direction, m.Place.Az.Deg(), air)
	fmt.Fprintf(b, "  hour angle %+.3f h, parallactic angle %+.1f deg (west of the meridian positive)\n", m.Place.HourAngle.Hours(), m.Place.Parallact.Deg())
	fmt.Fprintf(b, "  %.1f deg from the Moon, %.1f deg from the Sun\n", m.MoonSep.Deg(), m.SunSep.Deg())
	fmt.Fprintf(b, "  place of date (true equator and equinox, geocentric; not for the telescope): %s %s\n", m.Place.RA.HMS(2), m.Place.Dec.DMS(1))
	fmt.Fprintf(b, "  radial-velocity correction %+.3f km/s, BJD_TDB %.6f\n", m.Barycentric.RVCorrectionKms, m.Barycentric.BJDTDB)
}

func (v view) nightText(b *strings.Builder) {
	m := v.m
	hm := func(t astro.Instant) string { return t.UTC().Round(time.Minute).Format("15:04") }
	write := func(what string, list []astro.Span) {
		var parts []string
		for _, s := range list {
			parts = append(parts, hm(s.From)+"-"+hm(s.Until))
		}
		if len(parts) == 0 {
			parts = []string{"not tonight"}
		}
		fmt.Fprintf(b, "  %-7s %s\n", what, strings.Join(parts, ", "))
	}
	fmt.Fprintf(b, "\nnight of %s, times in UTC\n", v.s.night.Date)
	write("can", m.Course.Can)
	write("should", m.Course.Should)
	if m.Course.Best != nil {
		fmt.Fprintf(b, "  best    %s at airmass %.2f, altitude %.1f deg%s\n", hm(*m.Course.Best), float64(m.Course.BestAirmass), m.Course.BestAltitude.Deg(), taking.AtBest(m))
	}
	if m.WindowOK {
		fmt.Fprintf(b, "  window until %s, ended by: %s\n", hm(m.Window.Until), m.EndsBy)
	}
	for _, block := range m.BlockedBy {
		fmt.Fprintf(b, "  blocked: %s\n", block.Words)
	}
}

func (v view) lightText(b *strings.Builder) {
	f := &v.m.Expect
	fmt.Fprintf(b, "\nexpected brightness: %s  (%.0f %% interval, brighter end first)\n", strings.TrimSpace(kit.ExpectWord(f)), 100*f.Level)
	if f.SB != nil {
		fmt.Fprintf(b, "  surface brightness %.2f %.2f..%.2f mag per square arcsec in the line\n",
			f.SB.Value.MagArcsec2(), f.SB.Lo.MagArcsec2(), f.SB.Hi.MagArcsec2())
	}
	if f.Phase != nil {
		fmt.Fprintf(b, "  phase %s", f.Phase.Status)
		if f.Phase.Status != "unknown" {
			fmt.Fprintf(b, ": %.2f +- %.2f of a cycle after maximum", f.Phase.Value, f.Phase.Sigma)
		}
		b.WriteString("\n")
	}
	for _, st := range f.States {
		fmt.Fprintf(b, "  %-28s %3.0f %%  %.1f %.1f..%.1f\n", st.Name, 100*st.P, st.Mag.Mags(), st.Lo.Mags(), st.Hi.Mags())
	}
	if f.Basis != "" {
		fmt.Fprintf(b, "  basis: %s\n", f.Basis)
	}
	for _, e := range v.p.Light.Next(v.m.At) {
		fmt.Fprintf(b, "  next %s %s, +- %s (%s)\n", e.Kind, dateOf(&e), kit.Duration(e.SigmaS), e.Status)
	}
	v.tonightText(b)
}
