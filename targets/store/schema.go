package store

// Kinds of columns, as SQLite names them.
const (
	Text    = "TEXT"
	Real    = "REAL"
	Integer = "INTEGER"
)

// Column is one column of a table.
type Column struct{ Name, Type string }

// Table is one table with its columns; each has the column id before them,
// which counts up and is never used again.
type Table struct {
	Name    string
	Columns []Column
}

// The tables.
const (
	Entries    = "entries"    // the log
	Takes      = "takes"      // what is being done now: the loop at the telescope
	Conditions = "conditions" // of sky and dome, each from its time on
	Magnitudes = "magnitudes" // measured, entered on the screen or by command
	Marks      = "marks"
	Added      = "added" // targets typed in, as rows of a target list
	Edits      = "edits" // of plans
	Drafts     = "drafts"
	Sessions   = "sessions"
	Settings   = "settings"
)

func columns(kind string, names ...string) []Column {
	out := make([]Column, len(names))
	for i, n := range names {
		out[i] = Column{n, kind}
	}
	return out
}

func join(parts ...[]Column) []Column {
	var out []Column
	for _, p := range parts {
		out = append(out, p...)
	}
	return out
}

// Tables is the schema of the present version, in the order in which tables
// are exported. Times are UTC, RFC 3339 with a fraction where it matters; what
// is unknown is NULL.
var Tables = []Table{
	{Entries, join(
		columns(Text, "type", "request", "target", "programme", "start_utc", "end_utc", "mid_utc"),
		columns(Real, "mid_bjd_tdb"), columns(Integer, "frames"), columns(Real, "each_s"),
		columns(Text, "instrument", "mode", "band"), columns(Real, "slit_arcsec", "position_angle_deg"),
		columns(Text, "file_first", "file_last"),
		columns(Real, "airmass_start", "airmass_mid", "airmass_end", "moon_alt_deg", "moon_sep_deg", "moon_lit",
			"seeing_arcsec", "extinction_mag", "expect_mag", "measured_mag", "snr", "clock_offset_s"),
		columns(Text, "grade", "note", "reason", "observer", "entered_utc"),
		columns(Integer, "replaces", "planned", "void"), columns(Text, "key"))},
	{Takes, join(
		columns(Text, "request", "target", "phase", "phase_utc", "began_utc"),
		columns(Integer, "frames"), columns(Real, "each_s", "readout_s"), columns(Integer, "done"),
		columns(Text, "instrument", "mode", "band", "file_first", "observer", "session", "ended_utc", "how"),
		columns(Integer, "entry"), columns(Text, "type"))},
	{Conditions, join(
		columns(Text, "from_utc"),
		columns(Real, "seeing_arcsec", "extinction_mag", "cloud_from_deg", "cloud_to_deg", "wind_from_deg", "wind_ms", "humidity", "dew_margin_c"),
		columns(Text, "photometric", "instrument", "dome", "reason", "note", "observer", "entered_utc"), columns(Integer, "void", "entry"))},
	{Magnitudes, join(
		columns(Text, "target"), columns(Real, "jd"), columns(Text, "time_scale", "band"), columns(Real, "mag", "err"),
		columns(Integer, "faint_limit"), columns(Text, "source", "observer", "entered_utc"), columns(Integer, "void"))},
	{Marks, columns(Text, "target", "observer", "entered_utc")},
	{Added, columns(Text, "name", "list_row", "observer", "entered_utc")},
	{Edits, columns(Text, "night", "what", "detail", "observer", "entered_utc")},
	{Drafts, columns(Text, "session", "screen", "detail", "saved_utc")},
	{Sessions, join(columns(Text, "name", "observer", "host"), columns(Integer, "pid"), columns(Text, "began_utc", "seen_utc", "ended_utc", "state"))},
	{Settings, columns(Text, "name", "value")},
}

// find returns a table by name.
func find(name string) (Table, bool) {
	for _, t := range Tables {
		if t.Name == name {
			return t, true
		}
	}
	return Table{}, false
}

// has tells whether the table has a column.
func (t *Table) has(column string) bool {
	if column == "id" {
		return true
	}
	for _, c := range t.Columns {
		if c.Name == column {
			return true
		}
	}
	return false
}
