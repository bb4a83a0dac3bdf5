package main

import (
	"context"
	"os"
	"path/filepath"

	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/store"
	"evenfall/targets/table"
	"evenfall/targets/taking"
)

// steadyMag is how wide a forecast may be for its star to measure the
// throughput by, mag.
const steadyMag = 0.15

// throughput offers what the S/N logged tonight tell of the zero point and the
// extinction of the mode wanted. It changes nothing.
func (v view) throughput() []taking.Line {
	if v.s.dir == "" || v.w.Instrument == nil || v.w.Mode == nil {
		return nil
	}
	var log []exposure.Logged
	for _, e := range v.s.loggedTonight() {
		if l, ok := v.measured(&e); ok {
			log = append(log, l)
		}
	}
	if len(log) == 0 {
		return nil
	}
	got, err := exposure.Tonight(log)
	if err != nil {
		return []taking.Line{{Text: err.Error()}}
	}
	var out []taking.Line
	for _, w := range got.Words {
		out = append(out, taking.Line{Text: w})
	}
	return append(out, taking.Line{Text: "offered, not applied: to use it correct zero_point_e_s of the mode and extinction_mag in run.toml"})
}

// loggedTonight are the entries of the night shown, as the log has them.
func (s *session) loggedTonight() []logbook.Entry {
	path := filepath.Join(s.dir, "run.db")
	if _, err := os.Stat(path); err != nil {
		return nil
	}
	db, err := store.Open(path)
	if err != nil {
		return nil // check says so
	}
	defer db.Close()
	list, err := logbook.Open(db, nil, "").Entries(context.Background(), s.night.Span.From.UTC(), s.night.Span.Until.UTC())
	if err != nil {
		return nil
	}
	return list
}

// measured makes a measurement of the throughput of an entry; false for one of
// another mode, of a star that varies, or without a S/N.
func (v view) measured(e *logbook.Entry) (exposure.Logged, bool) {
	s := v.s
	if e.Void || e.Grade == "poor" || e.Grade == "void" || !e.SNR.Known || e.Start.IsZero() || e.Frames < 1 || !e.EachS.Known ||
		e.Instrument != v.w.Instrument.Name || e.Mode != v.w.Mode.Name {
		return exposure.Logged{}, false
	}
	i, err := table.Match(s.targets, e.Target)
	if err != nil {
		return exposure.Logged{}, false
	}
	mid := e.Mid
	if mid.IsZero() {
		mid = e.Start
	}
	at, err := timescale.AtDUT1(mid, s.site.DUT1)
	if err != nil {
		return exposure.Logged{}, false
	}
	want := s.wants[i]
	want.Instrument, want.Mode, want.Goal, want.Request = v.w.Instrument, v.w.Mode, v.w.Goal, nil
	scene := moment.NewScene(s.night, at)
	course := moment.Tonight(s.night, &s.prepared[i], want)
	m := moment.Of(&scene, &s.prepared[i], &course, want)
	if !m.Expect.Known || m.Expect.Hi.Minus(m.Expect.Lo) > steadyMag {
		return exposure.Logged{}, false
	}
	setting, ok := moment.SettingAt(&scene, &s.prepared[i], &m, want)
	if e.Seeing.Known {
		setting.SeeingArcsec = e.Seeing.Value
	}
	return exposure.Logged{Setting: setting, Frames: e.Frames, EachS: e.EachS.Value, SNR: targets.Known(e.SNR.Value)}, ok
}
