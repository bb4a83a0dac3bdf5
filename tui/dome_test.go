//go:build unix

package tui

import (
	"testing"
	"time"
)

// Going from star to star in the sky sends the lines that the star was on and
// is on; all others only once somebody rests on one and its path is drawn.
func TestDomeBytes(t *testing.T) {
	if testing.Short() {
		t.Skip("some seconds of the real loop; not with -short")
	}
	s := start(t, source(t, 1), 80, 24, 1, false)
	s.see("1/256")
	s.press("z")
	s.see("darkest")
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
	t.Logf("its path, drawn when rested: %.0f bytes", float64(s.bytes.Load()-before)-2.5*idle)
	before = s.bytes.Load()
	const moves = 10
	for range moves {
		s.press(")")
		time.Sleep(150 * time.Millisecond)
	}
	t.Logf("a step of the cursor: %.0f bytes", float64(s.bytes.Load()-before)/moves)
	s.press("q")
	s.see("/256")
}
