// Package logbook is the log of the night, the loop at the telescope, the
// conditions, marks, magnitudes and drafts, on top of the store. It knows what
// an entry is and what may happen to it; where stars stand it is told.
package logbook

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/store"
)

// Types lists the kinds of entries.
var Types = []string{"science", "standard", "telluric", "flat", "bias", "dark", "arc", "focus", "acquisition", "test", "closed", "fault", "condition", "note"}

// Grades lists what an entry may be worth.
var Grades = []string{"good", "usable", "poor", "void"}

// Entry is one line of the log. A number that is not Known was not given.
type Entry struct {
	ID                                int64
	Type                              string
	Request, Target, Programme        string
	Start, End, Mid                   time.Time // zero: not given
	MidBJD                            targets.Measure
	Frames                            int // 0: not given
	EachS                             targets.Measure
	Instrument, Mode                  string
	Band                              targets.Band
	SlitArcsec, PositionAngle         targets.Measure
	FileFirst, FileLast               string
	AirmassStart, AirmassMid, AirmEnd targets.Measure
	MoonAltDeg, MoonSepDeg, MoonLit   targets.Measure
	Seeing, Extinction                targets.Measure
	ExpectMag, MeasuredMag, SNR       targets.Measure
	ClockOffsetS                      targets.Measure
	Grade, Note, Reason, Observer     string
	Entered                           time.Time
	Replaces                          int64
	Planned                           bool
	Void                              bool
	Key                               string // names an entry before it is written: sent twice it comes in once
}

// mostFrames is how many frames a take may have.
const mostFrames = 1_000_000

// ranges are what the numbers of an entry may be.
var ranges = map[string][2]float64{
	"each_s": {0, 1e6}, "slit_arcsec": {0, 3600}, "position_angle_deg": {-360, 360}, "seeing_arcsec": {0, 60}, "extinction_mag": {0, 20},
	"measured_mag": {-30, 40}, "snr": {0, 1e6}, "clock_offset_s": {-86400, 86400},
}

// Check tells what is wrong with an entry before it is written.
func (e *Entry) Check() error {
	if !slices.Contains(Types, e.Type) {
		return fmt.Errorf("type %q: use one of %s", e.Type, strings.Join(Types, ", "))
	}
	if e.Grade != "" && !slices.Contains(Grades, e.Grade) {
		return fmt.Errorf("grade %q: use one of %s", e.Grade, strings.Join(Grades, ", "))
	}
	if e.Start.IsZero() {
		return fmt.Errorf("start: an entry needs the time at which it began, e.g. 2026-12-02T04:10:00Z")
	}
	if !e.End.IsZero() && e.End.Before(e.Start) {
		return fmt.Errorf("end %s comes before start %s", stamp(e.End), stamp(e.Start))
	}
	if e.Frames < 0 {
		return fmt.Errorf("frames %d: a number from 1 on", e.Frames)
	}
	if e.Frames > mostFrames {
		return fmt.Errorf("frames %d: at most %d", e.Frames, mostFrames)
	}
	for _, n := range e.numbers() {
		if r, ok := ranges[n.column]; n.at.Known && (math.IsNaN(n.at.Value) || math.IsInf(n.at.Value, 0) || ok && !(n.at.Value >= r[0] && n.at.Value <= r[1])) {
			return fmt.Errorf("%s %g: outside %g to %g", n.column, n.at.Value, r[0], r[1])
		}
	}
	if e.Type == "science" && e.Target == "" {
		return fmt.Errorf("a science entry needs a target or a request")
	}
	return nil
}

// Taken returns the time spent exposing, from frames where they are given.
func (e *Entry) Taken() time.Duration {
	if e.Frames > 0 && e.EachS.Known {
		return time.Duration(float64(e.Frames) * e.EachS.Value * float64(time.Second))
	}
	if e.End.IsZero() {
		return 0
	}
	return e.End.Sub(e.Start)
}

// FramesText writes frames and seconds each as they are typed, 3x90; ""
// where they were not given.
func (e *Entry) FramesText() string {
	switch {
	case e.Frames == 0:
		return ""
	case e.EachS.Known:
		return fmt.Sprintf("%dx%g", e.Frames, e.EachS.Value)
	}
	return fmt.Sprint(e.Frames)
}

// stamp writes a time as it is stored: to the millisecond where it has a
// fraction.
func stamp(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.UTC().Truncate(time.Millisecond).Format("2006-01-02T15:04:05.999Z07:00")
}

func parse(s string) time.Time {
	t, err := time.Parse(time.RFC3339Nano, s)
	if err != nil {
		return time.Time{}
	}
	return t.UTC()
}

// rowOf writes an entry as a row; what is not given is left out.
func rowOf(e *Entry) store.Row {
	r := store.Row{}
	for _, t := range e.texts() {
		if *t.at != "" {
			r[t.column] = *t.at
		}
	}
	for _, t := range e.times() {
		if !t.at.IsZero() {
			r[t.column] = stamp(*t.at)
		}
	}
	for _, n := range e.numbers() {
		if n.at.Known {
			r[n.column] = n.at.Value
		}
	}
	if e.Band != "" {
		r["band"] = string(e.Band)
	}
	for column, n := range map[string]int64{"frames": int64(e.Frames), "replaces": e.Replaces, "planned": bit(e.Planned), "void": bit(e.Void)} {
		if n != 0 {
			r[column] = n
		}
	}
	return r
}

// entryOf reads a row.
func entryOf(r store.Row) Entry {
	e := Entry{ID: r.Int("id"), Frames: int(r.Int("frames")), Replaces: r.Int("replaces"), Planned: r.Int("planned") != 0, Void: r.Int("void") != 0,
		Band: targets.Band(r.Text("band"))}
	for _, t := range e.texts() {
		*t.at = r.Text(t.column)
	}
	for _, t := range e.times() {
		*t.at = parse(r.Text(t.column))
	}
	for _, n := range e.numbers() {
		if v, ok := r.Real(n.column); ok {
			*n.at = targets.Known(v)
		}
	}
	return e
}

func bit(b bool) int64 {
	if b {
		return 1
	}
	return 0
}

type textAt struct {
	column string
	at     *string
}

func (e *Entry) texts() []textAt {
	return []textAt{{"type", &e.Type}, {"request", &e.Request}, {"target", &e.Target}, {"programme", &e.Programme},
		{"instrument", &e.Instrument}, {"mode", &e.Mode}, {"file_first", &e.FileFirst}, {"file_last", &e.FileLast},
		{"grade", &e.Grade}, {"note", &e.Note}, {"reason", &e.Reason}, {"observer", &e.Observer}, {"key", &e.Key}}
}

type timeAt struct {
	column string
	at     *time.Time
}

func (e *Entry) times() []timeAt {
	return []timeAt{{"start_utc", &e.Start}, {"end_utc", &e.End}, {"mid_utc", &e.Mid}, {"entered_utc", &e.Entered}}
}

type numberAt struct {
	column string
	at     *targets.Measure
}

func (e *Entry) numbers() []numberAt {
	return []numberAt{{"mid_bjd_tdb", &e.MidBJD}, {"each_s", &e.EachS}, {"slit_arcsec", &e.SlitArcsec}, {"position_angle_deg", &e.PositionAngle},
		{"airmass_start", &e.AirmassStart}, {"airmass_mid", &e.AirmassMid}, {"airmass_end", &e.AirmEnd},
		{"moon_alt_deg", &e.MoonAltDeg}, {"moon_sep_deg", &e.MoonSepDeg}, {"moon_lit", &e.MoonLit},
		{"seeing_arcsec", &e.Seeing}, {"extinction_mag", &e.Extinction}, {"expect_mag", &e.ExpectMag}, {"measured_mag", &e.MeasuredMag},
		{"snr", &e.SNR}, {"clock_offset_s", &e.ClockOffsetS}}
}
