package store

import (
	"database/sql"
	"fmt"
)

// Version is the number of the present schema.
const Version = 2

// applicationID marks the file as one of ours for programs that ask ("even").
const applicationID = 0x6576656e

// migrations[n] brings a database from version n to n+1. They are never
// changed once released; a new schema is a new one at the end.
var migrations = []func(*sql.Tx) error{
	firstSchema,
	addKeys,
}

// schema1 is the schema of version 1.
const schema1 = `
CREATE TABLE entries (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"type" TEXT, "request" TEXT, "target" TEXT, "programme" TEXT, "start_utc" TEXT,
	"end_utc" TEXT, "mid_utc" TEXT, "mid_bjd_tdb" REAL, "frames" INTEGER, "each_s" REAL,
	"instrument" TEXT, "mode" TEXT, "band" TEXT, "slit_arcsec" REAL, "position_angle_deg" REAL,
	"file_first" TEXT, "file_last" TEXT, "airmass_start" REAL, "airmass_mid" REAL, "airmass_end" REAL,
	"moon_alt_deg" REAL, "moon_sep_deg" REAL, "moon_lit" REAL, "seeing_arcsec" REAL, "extinction_mag" REAL,
	"expect_mag" REAL, "measured_mag" REAL, "snr" REAL, "clock_offset_s" REAL, "grade" TEXT,
	"note" TEXT, "reason" TEXT, "observer" TEXT, "entered_utc" TEXT, "replaces" INTEGER,
	"planned" INTEGER, "void" INTEGER);
CREATE TABLE takes (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"request" TEXT, "target" TEXT, "phase" TEXT, "phase_utc" TEXT, "began_utc" TEXT,
	"frames" INTEGER, "each_s" REAL, "readout_s" REAL, "done" INTEGER, "instrument" TEXT,
	"mode" TEXT, "band" TEXT, "file_first" TEXT, "observer" TEXT, "session" TEXT,
	"ended_utc" TEXT, "how" TEXT, "entry" INTEGER);
CREATE TABLE conditions (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"from_utc" TEXT, "seeing_arcsec" REAL, "extinction_mag" REAL, "cloud_from_deg" REAL, "cloud_to_deg" REAL,
	"wind_from_deg" REAL, "wind_ms" REAL, "humidity" REAL, "dew_margin_c" REAL, "photometric" TEXT,
	"instrument" TEXT, "dome" TEXT, "reason" TEXT, "note" TEXT, "observer" TEXT,
	"entered_utc" TEXT, "void" INTEGER);
CREATE TABLE magnitudes (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"target" TEXT, "jd" REAL, "time_scale" TEXT, "band" TEXT, "mag" REAL,
	"err" REAL, "faint_limit" INTEGER, "source" TEXT, "observer" TEXT, "entered_utc" TEXT,
	"void" INTEGER);
CREATE TABLE marks (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"target" TEXT, "observer" TEXT, "entered_utc" TEXT);
CREATE TABLE added (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"name" TEXT, "list_row" TEXT, "observer" TEXT, "entered_utc" TEXT);
CREATE TABLE edits (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"night" TEXT, "what" TEXT, "detail" TEXT, "observer" TEXT, "entered_utc" TEXT);
CREATE TABLE drafts (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"session" TEXT, "screen" TEXT, "detail" TEXT, "saved_utc" TEXT);
CREATE TABLE sessions (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"name" TEXT, "observer" TEXT, "host" TEXT, "pid" INTEGER, "began_utc" TEXT,
	"seen_utc" TEXT, "ended_utc" TEXT, "state" TEXT);
CREATE TABLE settings (id INTEGER PRIMARY KEY AUTOINCREMENT,
	"name" TEXT, "value" TEXT);
CREATE INDEX entries_by_start ON entries (start_utc);
CREATE INDEX takes_open ON takes (ended_utc);
CREATE UNIQUE INDEX marks_by_target ON marks (target);
CREATE UNIQUE INDEX settings_by_name ON settings (name);
CREATE UNIQUE INDEX drafts_by_session ON drafts (session, screen);
`

func firstSchema(tx *sql.Tx) error {
	_, err := tx.Exec(schema1)
	return err
}

// addKeys lets a writer name an entry before it is written, so that one sent
// twice, because the answer was lost, comes in once; takes have a type, conditions the entry that says them.
func addKeys(tx *sql.Tx) error {
	for _, s := range []string{
		"ALTER TABLE entries ADD COLUMN key TEXT",
		"CREATE UNIQUE INDEX entries_by_key ON entries (key) WHERE key IS NOT NULL",
		"ALTER TABLE takes ADD COLUMN type TEXT",
		"ALTER TABLE conditions ADD COLUMN entry INTEGER",
	} {
		if _, err := tx.Exec(s); err != nil {
			return fmt.Errorf("%s: %w", s, err)
		}
	}
	return nil
}

func quote(name string) string { return `"` + name + `"` }
