package builtin

import (
	"embed"
	"io/fs"
)

//go:embed all:demo
var demo embed.FS

// Demo returns the demonstration run as a run folder: an invented observatory
// with invented instruments, programme and magnitudes, and real stars.
func Demo() fs.FS {
	sub, err := fs.Sub(demo, "demo")
	if err != nil {
		panic("builtin: the embedded demonstration is not there")
	}
	return sub
}

// Editions names the built-in data and their editions, for `evenfall version`.
func Editions() []string {
	return []string{
		"built-in stars: 256, edition 2026-12-01",
		"observatory sites: edition 2026-12-01",
		"Earth series: 2010-2053, fitted to ERFA 2.0.0",
		"leap seconds: IERS Bulletin C, to 2027-06-30",
	}
}
