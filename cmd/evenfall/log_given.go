package main

import (
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/reckon"
	"evenfall/targets/table"
)

// given are the flags of an entry, as they were written.
type given struct {
	request, target, programme, start, end, kind string
	frames                                       int
	each, snr, seeing, slit, pa                  float64
	extinction, measured, offset                 float64
	instrument, mode, files, grade, note         string
	reason, key, ra, dec                         string
}

func (g *given) bind(c *cobra.Command, kind string) {
	f := c.Flags()
	f.StringVar(&g.request, "request", "", "request `R` that it serves")
	f.StringVar(&g.target, "target", "", "target `T`: its name or id")
	f.StringVar(&g.ra, "ra", "", "right ascension of a target that the run does not know")
	f.StringVar(&g.dec, "dec", "", "its declination")
	f.StringVar(&g.programme, "programme", "", "programme `P`")
	f.StringVar(&g.start, "start", "", "`TIME` it began, RFC 3339")
	f.StringVar(&g.end, "end", "", "`TIME` it ended")
	f.StringVar(&g.kind, "type", kind, "one of "+strings.Join(logbook.Types, ", "))
	f.IntVar(&g.frames, "frames", 0, "number `N` of frames")
	f.Float64Var(&g.each, "each", 0, "`S` seconds each")
	f.StringVar(&g.instrument, "instrument", "", "instrument `I`")
	f.StringVar(&g.mode, "mode", "", "its mode `M`")
	f.StringVar(&g.files, "files", "", "`FIRST..LAST`")
	f.Float64Var(&g.snr, "snr", 0, "signal-to-noise ratio `X` reached")
	f.Float64Var(&g.seeing, "seeing", 0, "`ARCSEC`")
	f.Float64Var(&g.extinction, "extinction", 0, "`MAG` of thin cloud")
	f.Float64Var(&g.measured, "measured", 0, "magnitude `MAG` measured")
	f.Float64Var(&g.slit, "slit", 0, "`ARCSEC` wide")
	f.Float64Var(&g.pa, "pa", 0, "position angle `DEG`")
	f.Float64Var(&g.offset, "clock-offset", 0, "`S` seconds that the instrument's clock is ahead of UTC")
	f.StringVar(&g.grade, "grade", "", "one of "+strings.Join(logbook.Grades, ", "))
	f.StringVar(&g.note, "note", "", "`TEXT`")
	f.StringVar(&g.reason, "reason", "", "of a closure: "+strings.Join(logbook.Reasons, ", "))
	f.StringVar(&g.key, "key", "", "`WORD` of your own that names the entry: sent twice it comes in once")
}

// put changes an entry by the flags that were given.
func (g *given) put(c *cobra.Command, x *writing, e *logbook.Entry) error {
	on := c.Flags().Changed
	for _, t := range []struct {
		flag, value string
		into        *string
	}{{"request", g.request, &e.Request}, {"target", g.target, &e.Target}, {"programme", g.programme, &e.Programme}, {"instrument", g.instrument, &e.Instrument},
		{"mode", g.mode, &e.Mode}, {"grade", g.grade, &e.Grade}, {"note", g.note, &e.Note}, {"reason", g.reason, &e.Reason}, {"key", g.key, &e.Key}} {
		if on(t.flag) {
			*t.into = table.Clean(t.value)
		}
	}
	if on("type") || e.Type == "" {
		e.Type = g.kind
	}
	for _, n := range []struct {
		flag  string
		value float64
		into  *targets.Measure
	}{{"each", g.each, &e.EachS}, {"snr", g.snr, &e.SNR}, {"seeing", g.seeing, &e.Seeing}, {"extinction", g.extinction, &e.Extinction},
		{"measured", g.measured, &e.MeasuredMag}, {"slit", g.slit, &e.SlitArcsec}, {"pa", g.pa, &e.PositionAngle}, {"clock-offset", g.offset, &e.ClockOffsetS}} {
		if on(n.flag) {
			*n.into = targets.Known(n.value)
		}
	}
	if on("grade") {
		e.Void = g.grade == "void"
	}
	if on("frames") {
		e.Frames = g.frames
	}
	if x.o.band != "" {
		e.Band = targets.Band(x.o.band)
	}
	if on("files") {
		var err error
		if e.FileFirst, e.FileLast, err = logbook.SplitFiles(g.files); err != nil {
			return usagef("--files: %w", err)
		}
	}
	for _, t := range []struct {
		flag, value string
		into        *time.Time
	}{{"start", g.start, &e.Start}, {"end", g.end, &e.End}} {
		if !on(t.flag) {
			continue
		}
		at, err := time.Parse(time.RFC3339Nano, t.value)
		if err != nil {
			return usagef("--%s %s: not a time; write e.g. 2026-12-02T04:10:00Z", t.flag, quote(t.value))
		}
		*t.into = at.UTC()
	}
	return nil
}

// complete fills what follows from request, target and times, and checks that
// they are known; was is the target of the entry that is amended.
func (x *writing) complete(g *given, e *logbook.Entry, was string) error {
	if e.Request != "" {
		i := slices.IndexFunc(x.requests, func(q targets.Request) bool { return targets.Key(q.ID) == targets.Key(e.Request) })
		if i < 0 {
			return usagef("--request %s: no such request in requests.csv", quote(e.Request))
		}
		q := &x.requests[i]
		e.Request = q.ID
		if e.Target != "" && targets.Key(e.Target) != targets.Key(q.Target) {
			a, err1 := table.Match(x.targets, e.Target)
			b, err2 := table.Match(x.targets, q.Target)
			if err1 != nil || err2 != nil || a != b {
				return usagef("--request %s wants %s, not %s; give one of the two", quote(q.ID), quote(q.Target), quote(e.Target))
			}
		}
		e.Target = first(e.Target, q.Target)
		e.Programme, e.Instrument, e.Mode = first(e.Programme, q.Programme), first(e.Instrument, q.Instrument), first(e.Mode, q.Mode)
		if e.Band == "" {
			e.Band = q.Band
		}
	}
	if e.Instrument != "" && len(x.run.Config.Instruments) > 0 {
		if _, ok := x.run.Config.Instrument(e.Instrument); !ok {
			return usagef("--instrument %s: not in run.toml", quote(e.Instrument))
		}
	}
	if err := e.Check(); err != nil {
		return usagef("%w", err)
	}
	p, err := x.preparedFor(g, e)
	if err != nil && was != "" && targets.Key(was) == targets.Key(e.Target) {
		return nil // given with its place then: what followed from it is kept
	}
	if err != nil {
		return err
	}
	if err := reckon.Fill(e, p, reckon.Sky{Site: x.site, Night: x.nights()}); err != nil {
		return usagef("%w", err)
	}
	return nil
}

// preparedFor prepares the entry's target; nil where it has none.
func (x *writing) preparedFor(g *given, e *logbook.Entry) (*moment.Prepared, error) {
	if e.Target == "" {
		return nil, nil
	}
	if i, err := table.Match(x.targets, e.Target); err == nil {
		e.Target = x.targets[i].Name
		p := moment.Prepare(x.targets[i], x.magnitudesByTarget()[i], x.newModels(x.o))
		return &p, nil
	} else if g.ra == "" || g.dec == "" {
		return nil, usagef("--target %s: %s; give --ra and --dec for one that the run does not know", quote(e.Target), strings.TrimPrefix(err.Error(), "table: "))
	}
	t, problems := table.Typed{Name: e.Target, Position: g.ra + " " + g.dec}.Target()
	for _, p := range problems {
		if !p.Warning {
			return nil, usagef("--ra %s --dec %s: %s", quote(g.ra), quote(g.dec), p.Text)
		}
	}
	p := moment.Prepare(t, nil, x.newModels(x.o))
	return &p, nil
}
