package main

import (
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/tui/kit"
)

type jsonLog struct {
	Entries []jsonEntry `json:"entries"`
}

type jsonEntry struct {
	ID           int64    `json:"id"`
	Type         string   `json:"type"`
	Request      string   `json:"request,omitempty"`
	Target       string   `json:"target,omitempty"`
	Programme    string   `json:"programme,omitempty"`
	Start        string   `json:"start_utc"`
	End          string   `json:"end_utc,omitempty"`
	Mid          string   `json:"mid_utc,omitempty"`
	MidBJD       *float64 `json:"mid_bjd_tdb,omitempty"`
	Frames       int      `json:"frames,omitempty"`
	EachS        *float64 `json:"each_s,omitempty"`
	Instrument   string   `json:"instrument,omitempty"`
	Mode         string   `json:"mode,omitempty"`
	Band         string   `json:"band,omitempty"`
	Slit         *float64 `json:"slit_arcsec,omitempty"`
	PA           *float64 `json:"position_angle_deg,omitempty"`
	FileFirst    string   `json:"file_first,omitempty"`
	FileLast     string   `json:"file_last,omitempty"`
	AirmassStart *float64 `json:"airmass_start,omitempty"`
	AirmassMid   *float64 `json:"airmass_mid,omitempty"`
	AirmassEnd   *float64 `json:"airmass_end,omitempty"`
	MoonAlt      *float64 `json:"moon_alt_deg,omitempty"`
	MoonSep      *float64 `json:"moon_sep_deg,omitempty"`
	MoonLit      *float64 `json:"moon_illuminated,omitempty"`
	Seeing       *float64 `json:"seeing_arcsec,omitempty"`
	Extinction   *float64 `json:"extinction_mag,omitempty"`
	Expect       *float64 `json:"expect_mag,omitempty"`
	Measured     *float64 `json:"measured_mag,omitempty"`
	SNR          *float64 `json:"snr,omitempty"`
	ClockOffset  *float64 `json:"clock_offset_s,omitempty"`
	Grade        string   `json:"grade,omitempty"`
	Reason       string   `json:"reason,omitempty"`
	Note         string   `json:"note,omitempty"`
	Observer     string   `json:"observer,omitempty"`
	Entered      string   `json:"entered_utc"`
	Replaces     int64    `json:"replaces,omitempty"`
	Void         bool     `json:"void"`
}

func moment3339(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.UTC().Format("2006-01-02T15:04:05.999Z07:00")
}

func logShape(list []logbook.Entry) jsonLog {
	out := jsonLog{Entries: []jsonEntry{}}
	val := func(m targets.Measure, digits int) *float64 {
		if !m.Known {
			return nil
		}
		if digits == 0 { // as it was typed
			return &m.Value
		}
		return rounded(m.Value, digits)
	}
	for i := range list {
		e := &list[i]
		out.Entries = append(out.Entries, jsonEntry{
			ID: e.ID, Type: e.Type, Request: e.Request, Target: e.Target, Programme: e.Programme,
			Start: moment3339(e.Start), End: moment3339(e.End), Mid: moment3339(e.Mid), MidBJD: val(e.MidBJD, 6),
			Frames: e.Frames, EachS: val(e.EachS, 0), Instrument: e.Instrument, Mode: e.Mode, Band: string(e.Band), Slit: val(e.SlitArcsec, 0), PA: val(e.PositionAngle, 0),
			FileFirst: e.FileFirst, FileLast: e.FileLast, AirmassStart: val(e.AirmassStart, 4), AirmassMid: val(e.AirmassMid, 4), AirmassEnd: val(e.AirmEnd, 4),
			MoonAlt: val(e.MoonAltDeg, 3), MoonSep: val(e.MoonSepDeg, 3), MoonLit: val(e.MoonLit, 4), Seeing: val(e.Seeing, 0), Extinction: val(e.Extinction, 0),
			Expect: val(e.ExpectMag, 3), Measured: val(e.MeasuredMag, 0), SNR: val(e.SNR, 0), ClockOffset: val(e.ClockOffsetS, 0),
			Grade: e.Grade, Reason: e.Reason, Note: e.Note, Observer: e.Observer, Entered: moment3339(e.Entered), Replaces: e.Replaces, Void: e.Void,
		})
	}
	return out
}

// logCSV writes the log as a table.
func logCSV(w io.Writer, list []logbook.Entry) error {
	out := csv.NewWriter(w)
	out.Write([]string{"id", "type", "request", "target", "programme", "start_utc", "end_utc", "mid_utc", "mid_bjd_tdb", "frames", "each_s", "instrument", "mode", "band",
		"slit_arcsec", "position_angle_deg", "file_first", "file_last", "airmass_start", "airmass_mid", "airmass_end", "seeing_arcsec", "extinction_mag",
		"expect_mag", "measured_mag", "snr", "clock_offset_s", "grade", "reason", "note", "observer", "entered_utc", "replaces", "void"})
	for _, e := range logShape(list).Entries {
		frames, replaces := "", ""
		if e.Frames > 0 {
			frames = strconv.Itoa(e.Frames)
		}
		if e.Replaces > 0 {
			replaces = strconv.FormatInt(e.Replaces, 10)
		}
		out.Write([]string{strconv.FormatInt(e.ID, 10), e.Type, e.Request, e.Target, e.Programme, e.Start, e.End, e.Mid, opt(e.MidBJD), frames, opt(e.EachS), e.Instrument, e.Mode, e.Band,
			opt(e.Slit), opt(e.PA), e.FileFirst, e.FileLast, opt(e.AirmassStart), opt(e.AirmassMid), opt(e.AirmassEnd), opt(e.Seeing), opt(e.Extinction),
			opt(e.Expect), opt(e.Measured), opt(e.SNR), opt(e.ClockOffset), e.Grade, e.Reason, e.Note, e.Observer, e.Entered, replaces, fmt.Sprint(e.Void)})
	}
	out.Flush()
	return out.Error()
}

// logText prints the log for people, and how far the requests are.
func (x *writing) logText(w io.Writer, list, all []logbook.Entry) error {
	var b strings.Builder
	fmt.Fprintln(&b, x.heading())
	if len(list) == 0 {
		fmt.Fprintln(&b, "the log is empty; evenfall log add writes an entry, evenfall log note a note")
	} else {
		fmt.Fprintln(&b, "  no  UTC                type        target         frames     X  files, note")
	}
	for i := range list {
		fmt.Fprintln(&b, logLine(&list[i]))
	}
	if len(x.requests) > 0 {
		progress := logbook.ProgressOf(x.requests, all)
		b.WriteString("requests\n")
		for i := range x.requests {
			q := &x.requests[i]
			p := progress[targets.Key(q.ID)]
			line := fmt.Sprintf("  %-14s %d of %d visits, %s exposed", q.ID, p.Visits, max(q.Visits, 1), kit.Left(p.Exposed))
			if p.SNR > 0 {
				line += fmt.Sprintf(", S/N %.0f together", p.SNR)
			}
			fmt.Fprintln(&b, line)
		}
	}
	_, err := io.WriteString(w, b.String())
	return err
}

func logLine(e *logbook.Entry) string {
	when := e.Start.Format("02 Jan 15:04")
	if !e.End.IsZero() {
		when += e.End.Format("-15:04")
	}
	x := ""
	if e.AirmassMid.Known {
		x = fmt.Sprintf("%.2f", e.AirmassMid.Value)
	}
	var rest []string
	if e.FileFirst != "" {
		rest = append(rest, e.FileFirst+".."+e.FileLast)
	}
	for _, s := range []string{e.Grade, e.Reason, e.Note, e.Observer} {
		if s != "" {
			rest = append(rest, s)
		}
	}
	line := fmt.Sprintf("%4d  %-18s %-11s %-14s %-7s %4s  %s", e.ID, when, e.Type, cut(e.Target, 14), e.FramesText(), x, strings.Join(rest, "; "))
	if e.Void {
		line += "  VOID"
	}
	return strings.TrimRight(line, " ")
}
