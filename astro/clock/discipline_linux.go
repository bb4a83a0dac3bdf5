package clock

import "golang.org/x/sys/unix"

// Disciplined asks the kernel whether its clock is kept right.
//
// Returns:
//   - whether something disciplines it, and within how many seconds it then is
//     by the kernel's own estimate; false, 0 where nothing does or it cannot be
//     asked.
//
// Source: adjtimex(2): STA_UNSYNC, maxerror.
func Disciplined() (ok bool, withinS float64) {
	var t unix.Timex
	state, err := unix.Adjtimex(&t)
	if err != nil || state == timeError || t.Status&staUnsync != 0 {
		return false, 0
	}
	return true, float64(t.Maxerror) / 1e6
}

// From linux/timex.h.
const (
	timeError = 5    // TIME_ERROR: not synchronised
	staUnsync = 0x40 // STA_UNSYNC
)
