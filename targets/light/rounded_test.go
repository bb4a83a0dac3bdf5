package light

import (
	"strings"
	"testing"
	"time"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/stage"
)

// A forecast minutes after a magnitude is taught by one less than a day old,
// never by one after the date; limits are no measured magnitudes.
func TestWordsOfAges(t *testing.T) {
	for minutes := range 40 {
		at := now.Add(time.Duration(minutes) * 23 * time.Minute)
		m := targets.Magnitude{JD: at.JDUTC() - 1e-4, TimeScale: "JD_UTC", Band: "V", Mag: 9, Err: 0.05}
		f := NewState(aMira(150), stage.Verdict{}, []targets.Magnitude{magsAt("V", 40, 8.1), m}).At(at, Ask{})
		if !strings.Contains(f.Basis, "the last less than a day old") {
			t.Fatalf("%d: %s", minutes, f.Basis)
		}
	}
	limit := magsAt("V", 3, 12)
	limit.Limit = true
	star := targets.Target{Name: "a", Kind: targets.WD, Mags: map[targets.Band]targets.Measure{"V": targets.KnownErr(13, 0.1)}}
	f := NewState(star, stage.Verdict{}, []targets.Magnitude{magsAt("V", 5, 13.1), magsAt("V", 4, 12.9), limit}).At(now, Ask{})
	if !strings.Contains(f.Basis, "with 2 magnitudes measured") || !strings.Contains(f.Basis, "1 limit") {
		t.Error(f.Basis)
	}
	f = NewState(star, stage.Verdict{}, []targets.Magnitude{limit}).At(now, Ask{})
	if strings.Contains(f.Basis, "measured: mean") {
		t.Error(f.Basis)
	}
	check.Near(t, f.Mag.Mags(), 13, 1e-5, "a limit alone")
}
