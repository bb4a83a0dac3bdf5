//go:build !linux

package clock

// Disciplined says that nothing is known: this system is not asked.
func Disciplined() (ok bool, withinS float64) { return false, 0 }
