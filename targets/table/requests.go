package table

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"evenfall/targets"
)

type rp = *targets.Request

// requestColumn is one column of requests.csv.
type requestColumn struct {
	ColumnInfo
	lo, hi  float64
	measure func(rp) *targets.Measure
	text    func(rp) *string
	words   []string
	yes     func(rp) *bool
	moment  func(rp) *time.Time
	count   func(rp) *int
	plain   func(rp) *float64 // number with a default of its own
	check   func(string) string
	advice  string
}

func rnum(name, unit, meaning string, lo, hi float64, m func(rp) *targets.Measure) requestColumn {
	return requestColumn{ColumnInfo: ColumnInfo{name, unit, meaning}, lo: lo, hi: hi, measure: m}
}

func rtxt(name, meaning string, f func(rp) *string, words ...string) requestColumn {
	return requestColumn{ColumnInfo: ColumnInfo{name, "", meaning}, text: f, words: words}
}

const forever = math.MaxFloat64

// requestColumns are the columns of requests.csv in the order of writing.
var requestColumns = []requestColumn{
	rtxt("request", "name of the request", func(r rp) *string { return &r.ID }),
	rtxt("target", "id or name of the target", func(r rp) *string { return &r.Target }),
	rtxt("programme", "programme it belongs to", func(r rp) *string { return &r.Programme }),
	rtxt("instrument", "instrument of run.toml", func(r rp) *string { return &r.Instrument }),
	rtxt("mode", "mode of the instrument", func(r rp) *string { return &r.Mode }),
	rtxt("band", "photometric band", func(r rp) *string { return (*string)(&r.Band) }),
	rnum("at_nm", "nm", "wavelength that snr is for", 100, 30000, func(r rp) *targets.Measure { return &r.AtNm }),
	rtxt("line", "emission line", func(r rp) *string { return &r.Line }),
	{ColumnInfo: ColumnInfo{"snr", "", "signal-to-noise ratio wanted"}, lo: math.SmallestNonzeroFloat64, hi: 1e6,
		measure: func(r rp) *targets.Measure { return &r.SNR },
		advice:  "a signal-to-noise ratio is positive; write e.g. 100, or fill exposure_s instead"},
	rtxt("snr_per", "what the ratio is for", func(r rp) *string { return &r.SNRPer }, "pixel", "element", "frame", "total"),
	rnum("exposure_s", "s", "fixed exposure time", 0.001, 1e6, func(r rp) *targets.Measure { return &r.ExposureS }),
	{ColumnInfo: ColumnInfo{"frames", "", "number of frames"}, lo: 1, hi: 1e6, count: func(r rp) *int { return &r.Frames }},
	rnum("area_arcsec2", "arcsec2", "area that snr is for", 1e-6, 1e8, func(r rp) *targets.Measure { return &r.AreaArcsec2 }),
	rnum("aim_e_arcsec", "arcsec", "aim east of the catalogue position", -36000, 36000, func(r rp) *targets.Measure { return &r.AimEArcsec }),
	rnum("aim_n_arcsec", "arcsec", "aim north of it", -36000, 36000, func(r rp) *targets.Measure { return &r.AimNArcsec }),
	{ColumnInfo: ColumnInfo{"position_angle", "deg", "parallactic, any or degrees"}, text: func(r rp) *string { return &r.PositionAngle },
		check: positionAngle, advice: "write parallactic, any, or degrees from -360 to 360"},
	{ColumnInfo: ColumnInfo{"visits", "", "number of visits"}, lo: 1, hi: 10000, count: func(r rp) *int { return &r.Visits }},
	rnum("min_gap_h", "h", "least time between visits", 0, 1e5, func(r rp) *targets.Measure { return &r.MinGapH }),
	rnum("every_d", "d", "cadence", 0, 1e5, func(r rp) *targets.Measure { return &r.EveryD }),
	rnum("every_tol_d", "d", "tolerance of the cadence", 0, 1e5, func(r rp) *targets.Measure { return &r.EveryTolD }),
	rnum("phase_from", "cycle", "first phase wanted", 0, 1, func(r rp) *targets.Measure { return &r.PhaseFrom }),
	rnum("phase_to", "cycle", "last phase wanted", 0, 1, func(r rp) *targets.Measure { return &r.PhaseTo }),
	rtxt("event", "eclipse, maximum, ...", func(r rp) *string { return &r.Event }),
	rnum("event_epoch", "", "which one, counted from the epoch", -forever, forever, func(r rp) *targets.Measure { return &r.EventEpoch }),
	rnum("before_min", "min", "begin before the event", 0, 1e5, func(r rp) *targets.Measure { return &r.BeforeMin }),
	rnum("after_min", "min", "go on after it", 0, 1e5, func(r rp) *targets.Measure { return &r.AfterMin }),
	rnum("duration_min", "min", "continuous series", 0, 1440, func(r rp) *targets.Measure { return &r.DurationMin }),
	{ColumnInfo: ColumnInfo{"phase_spread", "", "visits spread in phase"}, yes: func(r rp) *bool { return &r.PhaseSpread }},
	rnum("slit_arcsec", "arcsec", "slit width", 0.01, 1000, func(r rp) *targets.Measure { return &r.SlitArcsec }),
	rtxt("binning", "binning", func(r rp) *string { return &r.Binning }),
	rtxt("acquisition", "how it is acquired", func(r rp) *string { return &r.Acquisition }, "direct", "offset"),
	{ColumnInfo: ColumnInfo{"earliest_utc", "", "not before"}, moment: func(r rp) *time.Time { return &r.Earliest }},
	{ColumnInfo: ColumnInfo{"latest_utc", "", "not after"}, moment: func(r rp) *time.Time { return &r.Latest }},
	rnum("min_alt_deg", "deg", "least altitude", -90, 90, func(r rp) *targets.Measure { return &r.MinAltDeg }),
	rnum("max_airmass", "", "greatest airmass", 1, 40, func(r rp) *targets.Measure { return &r.MaxAirmass }),
	rnum("min_moon_sep_deg", "deg", "least distance from the Moon", 0, 180, func(r rp) *targets.Measure { return &r.MinMoonSepDeg }),
	rnum("max_seeing_arcsec", "arcsec", "worst seeing", 0.01, 100, func(r rp) *targets.Measure { return &r.MaxSeeingArcsec }),
	rnum("sky_at_least_mag_arcsec2", "mag/arcsec2", "sky at least this dark", 0, 30, func(r rp) *targets.Measure { return &r.SkyAtLeast }),
	{ColumnInfo: ColumnInfo{"photometric", "", "only in photometric weather"}, yes: func(r rp) *bool { return &r.Photometric }},
	rnum("max_extinction_mag", "mag", "most thin cloud", 0, 20, func(r rp) *targets.Measure { return &r.MaxExtinctionMag }),
	{ColumnInfo: ColumnInfo{"weight", "", "weight, 1 by default"}, lo: 0, hi: 1e9, plain: func(r rp) *float64 { return &r.Weight }},
	{ColumnInfo: ColumnInfo{"bonus", "", "points for all visits"}, lo: 0, hi: 1e9, plain: func(r rp) *float64 { return &r.Bonus }},
	{ColumnInfo: ColumnInfo{"backup", "", "for poor sky"}, yes: func(r rp) *bool { return &r.Backup }},
	rtxt("standard", "standard star taken with it", func(r rp) *string { return &r.Standard }, "none", "flux", "telluric", "velocity"),
	rtxt("arc", "arc taken with it", func(r rp) *string { return &r.Arc }, "yes", "no"),
	rtxt("notes", "notes", func(r rp) *string { return &r.Notes }),
}

// RequestColumns lists the columns of requests.csv.
func RequestColumns() []ColumnInfo {
	var out []ColumnInfo
	for _, c := range requestColumns {
		out = append(out, c.ColumnInfo)
	}
	return out
}

// positionAngle says what is wrong with a position angle; "" nothing.
func positionAngle(s string) string {
	if s == "parallactic" || s == "any" {
		return ""
	}
	if v, wrong, _ := parseNumber(s); wrong == "" && math.Abs(v) <= 360 {
		return ""
	}
	return "no position angle"
}

// ReadRequests reads requests.csv; see [Read] for how problems are told.
//
// Checked: TestReadRequestsBad, TestRequestsRoundTrip, FuzzReadRequests.
func ReadRequests(r io.Reader, name string) ([]targets.Request, []*Error) {
	s := cut(r, name)
	index, ok := s.headings(func(h string) bool {
		return slices.ContainsFunc(requestColumns, func(c requestColumn) bool { return c.Name == h })
	}, "target")
	if !ok {
		return nil, told(name, s.problems)
	}
	var list []targets.Request
	for n, row := range s.rows {
		q := targets.Request{Visits: 1, Weight: 1, At: targets.Where{File: name, Line: row.line}}
		for i := range requestColumns {
			c := &requestColumns[i]
			k, ok := index[c.Name]
			if ok && k < len(row.cells) && !isNull(row.cells[k].text) {
				c.read(s, row.cells[k], &q)
			}
		}
		for k, h := range s.header.cells {
			if _, ours := index[h.text]; !ours && k < len(row.cells) && row.cells[k].text != "" {
				q.Extra = append(q.Extra, targets.Field{Name: Clean(h.text), Value: Clean(row.cells[k].text)})
			}
		}
		if q.Target == "" {
			s.problem(q.At, "target", "", "empty; the row is left out", "name the target")
			continue
		}
		if q.ID == "" {
			q.ID = strconv.Itoa(n + 1)
		}
		s.consistent(&q)
		list = append(list, q)
	}
	return list, told(name, s.problems)
}

// consistent warns of what cannot go together.
func (s *sheet) consistent(q *targets.Request) {
	if !q.Earliest.IsZero() && !q.Latest.IsZero() && !q.Latest.After(q.Earliest) {
		s.problem(q.At, "latest_utc", "", "not after earliest_utc; both are left out", "write the end of the window")
		q.Earliest, q.Latest = time.Time{}, time.Time{}
	}
	if q.PhaseFrom.Known != q.PhaseTo.Known {
		s.problem(q.At, "phase_from", "", "phase_from and phase_to go together; both are left out", "fill both or none")
		q.PhaseFrom, q.PhaseTo = targets.Measure{}, targets.Measure{}
	}
}

// read takes one cell.
func (c *requestColumn) read(s *sheet, cell cell, q *targets.Request) {
	refuse := func(wrong, fix string) {
		if c.advice != "" {
			fix = c.advice
		}
		s.problem(s.where(cell), c.Name, cell.text, wrong, fix)
	}
	low := strings.ToLower(cell.text)
	switch {
	case c.text != nil:
		text := Clean(cell.text)
		if c.check != nil {
			if wrong := c.check(text); wrong != "" {
				refuse(wrong, "")
				return
			}
		}
		if c.words != nil && !slices.Contains(c.words, low) {
			refuse("not one of the words for it", "use one of "+strings.Join(c.words, ", "))
			return
		}
		*c.text(q) = text
	case c.yes != nil:
		if low != "yes" && low != "no" {
			refuse("neither yes nor no", "write yes or no")
			return
		}
		*c.yes(q) = low == "yes"
	case c.moment != nil:
		t, err := time.Parse(time.RFC3339, cell.text)
		if err != nil {
			refuse("no date and time", "write e.g. 2026-12-02T04:00:00Z")
			return
		}
		*c.moment(q) = t.UTC()
	default:
		c.number(cell, q, refuse)
	}
}

func (c *requestColumn) number(cell cell, q *targets.Request, refuse func(wrong, fix string)) {
	v, wrong, fix := parseNumber(cell.text)
	if wrong == "" && (v < c.lo || v > c.hi) {
		wrong = "out of range"
		fix = fmt.Sprintf("write a number from %g to %g", c.lo, c.hi)
	}
	if wrong == "" && c.count != nil && v != math.Trunc(v) {
		wrong, fix = "not a whole number", "write a whole number"
	}
	switch {
	case wrong != "":
		refuse(wrong, fix)
	case c.count != nil:
		*c.count(q) = int(v)
	case c.plain != nil:
		*c.plain(q) = v
	default:
		m := c.measure(q)
		m.Value, m.Known = v, true
	}
}
