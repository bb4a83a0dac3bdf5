package store

import (
	"errors"
	"fmt"
	"os"
	"strings"
	"syscall"

	"modernc.org/sqlite"
	sqlite3 "modernc.org/sqlite/lib"
)

// What can be wrong with a database, in words that say what to do.
var (
	ErrFull     = errors.New("the disk is full; make room, what is on the screen is kept until it is saved")
	ErrReadOnly = errors.New("run folder or run.db cannot be written; check permissions and whether the disk is mounted read-only")
	ErrBusy     = errors.New("another session is writing and does not end; try again, and look for a stopped process with evenfall check")
	ErrCorrupt  = errors.New("run.db is no sound database; keep the file, restore a copy, or move it away to begin a new one")
	ErrNewer    = errors.New("run.db was made by a later evenfall; use that, or a copy of the file from before")
	ErrDisk     = errors.New("the disk failed to read or write; look at the system's log, copy the run folder elsewhere")
)

// judge turns an error of the driver or the system into one of ours, with
// theirs behind it.
func judge(err error) error {
	if err == nil {
		return nil
	}
	if errors.Is(err, syscall.ENOSPC) || errors.Is(err, syscall.EDQUOT) || errors.Is(err, syscall.EFBIG) {
		return fmt.Errorf("%w (%v)", ErrFull, err)
	}
	if errors.Is(err, os.ErrPermission) || isReadOnly(err) {
		return fmt.Errorf("%w (%v)", ErrReadOnly, err)
	}
	var s *sqlite.Error
	if !errors.As(err, &s) {
		return err
	}
	switch s.Code() & 0xff {
	case sqlite3.SQLITE_FULL:
		return fmt.Errorf("%w (%v)", ErrFull, err)
	case sqlite3.SQLITE_READONLY, sqlite3.SQLITE_CANTOPEN, sqlite3.SQLITE_PERM:
		return fmt.Errorf("%w (%v)", ErrReadOnly, err)
	case sqlite3.SQLITE_BUSY, sqlite3.SQLITE_LOCKED:
		return fmt.Errorf("%w (%v)", ErrBusy, err)
	case sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB:
		return fmt.Errorf("%w (%v)", ErrCorrupt, err)
	case sqlite3.SQLITE_IOERR:
		if strings.Contains(err.Error(), "disk is full") {
			return fmt.Errorf("%w (%v)", ErrFull, err)
		}
		return fmt.Errorf("%w (%v)", ErrDisk, err)
	}
	return err
}

func isReadOnly(err error) bool { return errors.Is(err, syscall.EROFS) }
