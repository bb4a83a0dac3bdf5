package order

import (
	"flag"
	"fmt"
	"os"
	"testing"
)

// TestMain leaves the package out where tests shall be short: the search has no
// goroutines, and takes minutes under the race detector.
func TestMain(m *testing.M) {
	flag.Parse()
	if testing.Short() {
		fmt.Println("left out with -short: the search takes minutes under the race detector")
		return
	}
	os.Exit(m.Run())
}
