// Package check serves tests and nothing else: it reads reference tables, finds
// reference material beside the repository and compares numbers. It refuses a
// table that does not say what it is, where it comes from, what its columns are
// and how closely it must be met. No program code may import it.
package check

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// Near fails the test, and lets it run on, unless got is within tol of want.
//
//	|got - want| <= tol
//
// Given:
//   - what: the quantity and the case, a format for args, e.g. "airmass at %g deg".
//
// Notes:
//  1. Not-a-number is near nothing, not even itself. An infinity is near the
//     same infinity.
//  2. The tolerance is a physical statement: say where it comes from beside it.
func Near(t testing.TB, got, want, tol float64, what string, args ...any) {
	t.Helper()
	if got == want || math.Abs(got-want) <= tol {
		return
	}
	t.Errorf("%s: got %.12g, want %.12g within %.3g; off by %.3g",
		fmt.Sprintf(what, args...), got, want, tol, got-want)
}

// Root returns the folder that holds go.mod, found upwards from where the test
// runs.
func Root(t testing.TB) string {
	t.Helper()
	dir, err := os.Getwd()
	if err != nil {
		t.Fatalf("check: no working directory: %v", err)
	}
	root, err := rootAbove(dir)
	if err != nil {
		t.Fatal(err)
	}
	return root
}

// rootAbove walks up to go.mod.
func rootAbove(dir string) (string, error) {
	for at := dir; ; at = filepath.Dir(at) {
		if _, err := os.Stat(filepath.Join(at, "go.mod")); err == nil {
			return at, nil
		}
		if at == filepath.Dir(at) {
			return "", fmt.Errorf("check: no go.mod in %s or above; run the tests inside the module", dir)
		}
	}
}

// Shared returns the path of reference material kept beside the repository and
// not in it, ../shared/rel from the root. Where it is absent the test is
// skipped and says so.
func Shared(t testing.TB, rel string) string {
	t.Helper()
	path := filepath.Join(Root(t), "..", "shared", filepath.FromSlash(rel))
	if _, err := os.Stat(path); err != nil {
		t.Skipf("reference material ../shared/%s is not beside the repository; this comparison is left out", rel)
	}
	return path
}
