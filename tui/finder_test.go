//go:build unix

package tui

import (
	"testing"
	"time"

	"evenfall/targets"
	"evenfall/tui/check"
)

// Going from field to field sends the name alone; the picture comes when somebody
// rests on one.
func TestFinderBytes(t *testing.T) {
	if testing.Short() {
		t.Skip("some seconds of the real loop; not with -short")
	}
	src := source(t, 1)
	src.Field = neighbours(check.Field(src))
	s := start(t, src, 80, 24, 1, false)
	s.see("1/256")
	s.press("p")
	s.see("[+]")
	time.Sleep(2 * time.Second)
	before, began := s.bytes.Load(), time.Now()
	time.Sleep(3 * time.Second)
	idle := float64(s.bytes.Load()-before) / time.Since(began).Seconds()
	t.Logf("an idle second: %.0f bytes", idle)
	if idle > 150 {
		t.Errorf("an idle second takes %.0f bytes, at most 150", idle)
	}
	const steps = 40
	var most int64
	before, began = s.bytes.Load(), time.Now()
	for range steps {
		was := s.bytes.Load()
		s.press(".")
		time.Sleep(150 * time.Millisecond)
		most = max(most, s.bytes.Load()-was)
	}
	step := (float64(s.bytes.Load()-before) - idle*time.Since(began).Seconds()) / steps
	t.Logf("a step: %.0f bytes, at most %d", step, most)
	if step > 600 {
		t.Errorf("a step takes %.0f bytes, at most 600", step)
	}
	before = s.bytes.Load()
	time.Sleep(2500 * time.Millisecond)
	t.Logf("its field, drawn when rested: %.0f bytes", float64(s.bytes.Load()-before)-2.5*idle)
	s.press("q")
	s.see("/256")
}

// neighbours gives the same stars whenever it is asked.
func neighbours(list []targets.Target) func() []targets.Target {
	return func() []targets.Target { return list }
}
