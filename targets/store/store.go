// Package store is run.db: a SQLite database that survives whatever happens to
// the process, the disk or the link. It knows tables, rows and transactions,
// and nothing of what they mean. A call returns without error only after the
// change is on the disk.
package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"sync/atomic"
	"time"

	_ "modernc.org/sqlite" // the driver, in pure Go
)

// DB is an open database. It is safe for use by several goroutines.
type DB struct {
	sql      *sql.DB
	path     string
	readOnly bool
	mu       sync.Mutex
	seen     int64       // data_version when last asked
	busy     atomic.Bool // wrote a moment ago
	fail     func() error
}

// busyMs is how long a writer waits for another one, milliseconds. A
// transaction takes some ten; another one that takes seconds has died.
const busyMs = 5000

// rest is how long a writer that has just written leaves the database to
// others. SQLite has no queue: who writes without a pause would starve them.
const rest = 4 * time.Millisecond

// Open opens run.db, making it where it is missing, and brings it to the
// present schema, after a copy of the old file.
//
// Returns:
//   - [ErrNewer] where a later program made it, [ErrCorrupt] where it is no
//     database; errors of the disk as [ErrFull], [ErrReadOnly], [ErrBusy].
//
// Notes:
//  1. Where file or folder cannot be written it is opened for reading, and
//     ReadOnly says so.
//
// Checked: TestOpen, TestMigrate, TestReadOnly.
func Open(path string) (*DB, error) {
	_, err := os.Stat(path)
	made := errors.Is(err, os.ErrNotExist)
	d := &DB{path: path, readOnly: !writable(path, made)}
	if d.readOnly && made {
		return nil, fmt.Errorf("%s: %w", path, ErrReadOnly)
	}
	mode := "rwc"
	if d.readOnly {
		mode = "ro"
	}
	if err := d.connect("file:" + uriPath.Replace(path) + "?mode=" + mode); err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	if made {
		shareWithGroup(path)
	}
	if err := d.bring(); err != nil {
		d.Close()
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	return d, nil
}

// Memory opens a database that is gone when it is closed.
func Memory() (*DB, error) {
	d := &DB{path: "memory"}
	if err := d.connect("file::memory:?mode=memory"); err != nil {
		return nil, err
	}
	return d, d.bring()
}

// uriPath escapes what has a meaning of its own in a file's URI.
//
// Source: SQLite, "Uniform Resource Identifiers".
var uriPath = strings.NewReplacer("%", "%25", "?", "%3f", "#", "%23")

func (d *DB) connect(dsn string) error {
	for _, p := range []string{fmt.Sprintf("busy_timeout(%d)", busyMs), "journal_mode(DELETE)", "synchronous(FULL)", "foreign_keys(ON)"} {
		if d.readOnly && strings.HasPrefix(p, "journal") {
			continue
		}
		dsn += "&_pragma=" + p
	}
	db, err := sql.Open("sqlite", dsn+"&_txlock=immediate")
	if err != nil {
		return err
	}
	// one connection: SQLite writes one at a time anyway, and what it holds in
	// memory is then one database
	db.SetMaxOpenConns(1)
	db.SetMaxIdleConns(1)
	db.SetConnMaxLifetime(0)
	d.sql = db
	return judge(db.Ping())
}

// bring brings the schema to the present version.
func (d *DB) bring() error {
	var version int
	if err := d.sql.QueryRow("PRAGMA user_version").Scan(&version); err != nil {
		return judge(err)
	}
	switch {
	case version > Version:
		return fmt.Errorf("schema %d, this program knows up to %d: %w", version, Version, ErrNewer)
	case version == Version:
		return nil
	case d.readOnly:
		return fmt.Errorf("schema %d is older than this program's %d and cannot be brought up: %w", version, Version, ErrReadOnly)
	}
	if version > 0 {
		if err := copyFile(d.path, fmt.Sprintf("%s.schema%d", d.path, version)); err != nil {
			return fmt.Errorf("keeping a copy before bringing the schema up: %w", judge(err))
		}
	}
	tx, err := d.sql.Begin()
	if err != nil {
		return judge(err)
	}
	defer tx.Rollback()
	// another process may have done it meanwhile
	if err := tx.QueryRow("PRAGMA user_version").Scan(&version); err != nil {
		return judge(err)
	}
	for v := version; v < Version; v++ {
		if err := migrations[v](tx); err != nil {
			return judge(err)
		}
	}
	for _, s := range []string{fmt.Sprintf("PRAGMA user_version = %d", Version), fmt.Sprintf("PRAGMA application_id = %d", applicationID)} {
		if _, err := tx.Exec(s); err != nil {
			return judge(err)
		}
	}
	return judge(tx.Commit())
}

// Path returns where it is.
func (d *DB) Path() string { return d.path }

// ReadOnly tells whether nothing can be written.
func (d *DB) ReadOnly() bool { return d.readOnly }

// Close closes the database. What was acknowledged is on the disk already.
func (d *DB) Close() error { return d.sql.Close() }

// Changed tells whether another process has changed the database since it was
// last asked; the first time it says yes.
func (d *DB) Changed(ctx context.Context) (bool, error) {
	var v int64
	if err := d.sql.QueryRowContext(ctx, "PRAGMA data_version").Scan(&v); err != nil {
		return false, judge(err)
	}
	d.mu.Lock()
	defer d.mu.Unlock()
	changed := v != d.seen
	d.seen = v
	return changed, nil
}

// Check reads the whole database and tells whether it is sound.
func (d *DB) Check(ctx context.Context) error {
	var word string
	if err := d.sql.QueryRowContext(ctx, "PRAGMA integrity_check").Scan(&word); err != nil {
		return judge(err)
	}
	if word != "ok" {
		return fmt.Errorf("%s: %w", word, ErrCorrupt)
	}
	return nil
}

// writable tells whether a file, or where it is to be made its folder, can be
// written. The folder must be writable in both cases: the journal lies there.
func writable(path string, made bool) bool {
	folder := filepath.Dir(path)
	probe, err := os.CreateTemp(folder, ".run.db-probe-*")
	if err != nil {
		// a full disk is no reason to give up writing
		return !errors.Is(err, os.ErrPermission) && !isReadOnly(err)
	}
	probe.Close()
	os.Remove(probe.Name())
	if made {
		return true
	}
	f, err := os.OpenFile(path, os.O_RDWR, 0)
	if err != nil {
		return false
	}
	f.Close()
	return true
}

// shareWithGroup makes a new file writable for the group where its folder is.
func shareWithGroup(path string) {
	if info, err := os.Stat(filepath.Dir(path)); err == nil && info.Mode().Perm()&0o020 != 0 {
		os.Chmod(path, 0o664)
	}
}

// copyFile copies a file under a temporary name, syncs it and renames it. A
// copy that is there already is left: it is the older one.
func copyFile(from, to string) error {
	if _, err := os.Stat(to); err == nil {
		return nil
	}
	in, err := os.Open(from)
	if err != nil {
		return err
	}
	defer in.Close()
	out, err := os.CreateTemp(filepath.Dir(to), ".copy-*")
	if err != nil {
		return err
	}
	defer os.Remove(out.Name())
	_, err = io.Copy(out, in)
	err = errors.Join(err, out.Sync(), out.Close())
	if err != nil {
		return err
	}
	return os.Rename(out.Name(), to)
}
