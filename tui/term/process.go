package term

import (
	"bytes"
	"fmt"
	"os"
	"syscall"
)

// Alive tells whether a process of this machine is there and is this program:
// not one that has ended and was never waited for, nor another that got its
// number. Where the system does not say, being there is enough.
func Alive(pid int) bool {
	if pid <= 0 || syscall.Kill(pid, 0) != nil {
		return false
	}
	name, state, ok := stat(pid)
	if !ok {
		return true
	}
	mine, _, ok := stat(os.Getpid())
	return state != 'Z' && state != 'X' && (!ok || name == mine)
}

// stat reads a process's name and the letter of its state.
//
// Source: proc(5), /proc/pid/stat.
func stat(pid int) (name string, state byte, ok bool) {
	text, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", pid))
	if err != nil {
		return "", 0, false
	}
	from, to := bytes.IndexByte(text, '('), bytes.LastIndexByte(text, ')')
	if from < 0 || to < from || to+2 >= len(text) {
		return "", 0, false
	}
	return string(text[from+1 : to]), text[to+2], true
}
