package clock

import (
	"testing"
	"time"
)

func TestClocks(t *testing.T) {
	at := time.Date(2026, 12, 2, 4, 0, 0, 0, time.FixedZone("x", 3600))
	if got := (Shifted{Of: Fixed{At: at}, By: time.Hour}).Now(); !got.Equal(at.Add(time.Hour)) || got.Location() != time.UTC {
		t.Errorf("shifted: %v", got)
	}
	if System := (System{}).Now(); System.Location() != time.UTC {
		t.Error("the system's clock is not UTC")
	}
}

func TestDiscipline(t *testing.T) {
	for want, c := range map[string]struct {
		ok     bool
		within float64
	}{"clock not checked": {false, 9}, "clock disciplined, within 3 ms": {true, 0.003}, "clock disciplined, within 1.5 s": {true, 1.5}} {
		if got := DisciplineWords(c.ok, c.within); got != want {
			t.Errorf("%+v: %q", c, got)
		}
	}
	ok, within := Disciplined()
	if within < 0 || !ok && within != 0 {
		t.Errorf("the kernel: %v, %g", ok, within)
	}
}
