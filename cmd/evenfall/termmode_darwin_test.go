package main

import (
	"os"

	"golang.org/x/sys/unix"
)

// modeOf tells whether a terminal echoes and gathers lines, as a shell's does.
func modeOf(tty *os.File) (bool, error) {
	m, err := unix.IoctlGetTermios(int(tty.Fd()), unix.TIOCGETA)
	if err != nil {
		return false, err
	}
	return m.Lflag&unix.ECHO != 0 && m.Lflag&unix.ICANON != 0, nil
}
