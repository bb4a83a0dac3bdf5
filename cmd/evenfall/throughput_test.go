package main

import (
	"path/filepath"
	"strings"
	"testing"
)

// Two logged S/N of steady stars give a correction, which is offered and not
// applied; one is said to be too few, and without any nothing is said.
func TestThroughputOffered(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	if r := call("", "new", dir); r.code != 0 {
		t.Fatal(r.err)
	}
	show := func() string {
		r := call("", "show", "GD 71", "--targets", "builtin", "--run", dir, "--at", "2026-12-02T04:00:00Z")
		if r.code != 0 {
			t.Fatal(r.err)
		}
		return r.out
	}
	before := show()
	if strings.Contains(before, "tonight's throughput") {
		t.Errorf("something is said of the throughput of a night with nothing logged")
	}
	log := func(start, end, target, each, snr string) {
		r := call("", "log", "add", "--run", dir, "--targets", "builtin", "--target", target, "--start", start, "--end", end, "--type", "standard",
			"--frames", "1", "--each", each, "--instrument", "imager", "--mode", "V", "--snr", snr, "--observer", "observer 1", "--grade", "good")
		if r.code != 0 {
			t.Fatal(r.err)
		}
	}
	// some half of the light that the models expect is lost in both
	log("2026-12-02T04:00:00Z", "2026-12-02T04:00:30Z", "LP 658-2", "20", "165")
	if one := show(); !strings.Contains(one, "tonight's throughput wants two") {
		t.Errorf("one measurement is passed over in silence")
	}
	log("2026-12-02T04:05:00Z", "2026-12-02T04:05:30Z", "G117-B15A", "20", "105")
	after := show()
	i := strings.Index(after, "tonight's throughput")
	if i < 0 || !strings.Contains(after[i:], "offered, not applied") || !strings.Contains(after[i:], "zero point") {
		t.Fatalf("nothing is offered: %s", after[max(i, 0):])
	}
	cut := func(s string) string { a := strings.Index(s, "\nexposure\n"); return s[a : a+80] }
	if cut(before) != cut(after) {
		t.Errorf("the exposure changed unasked: %s against %s", cut(before), cut(after))
	}
}
