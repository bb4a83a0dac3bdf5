package term

import (
	"fmt"
	"os"
	"time"
)

// CrashLog is a file for what went wrong inside the program.
type CrashLog struct{ Path string }

// Write appends a failure with its stack, and says where it stands.
func (c CrashLog) Write(at time.Time, what any, stack []byte) string {
	f, err := os.OpenFile(c.Path, os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o644)
	if err != nil {
		return fmt.Sprintf("%v (no crash log: %v)", what, err)
	}
	defer f.Close()
	_, err = fmt.Fprintf(f, "%s: %v\n%s\n", at.UTC().Format(time.RFC3339), what, stack)
	if err == nil {
		err = f.Sync()
	}
	if err != nil {
		return fmt.Sprintf("%v (crash log: %v)", what, err)
	}
	return fmt.Sprintf("%v; written to %s", what, c.Path)
}
