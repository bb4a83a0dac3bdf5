package builtin

import (
	"strings"
	"testing"

	"evenfall/targets"
)

// Rows typed from the table of facts: a number where it belongs, and whether
// an open file bore it out.
func TestSpots(t *testing.T) {
	stars, err := Stars()
	if err != nil {
		t.Fatal(err)
	}
	byID := map[string]targets.Target{}
	for _, s := range stars {
		byID[s.ID] = s
	}
	for _, c := range []struct {
		id, column  string
		want        float64
		unconfirmed bool
	}{
		{"v471-tau", "epoch_min_jd", 2445821.898291, false}, // 'epoch=mid-eclipse', phase agrees with the GCVS
		{"v471-tau", "eclipse_min", 49, true},
		{"ex-hya", "epoch_min_jd", 2437699.94179, true},
		{"nn-ser", "eclipse_min", 11, true},
		{"nn-ser", "mag_min", 22, true}, // GCVS has 17.2
		{"v-hya", "mag_max", 10.9, true},
		{"alf-phe", "plx_mas", 38.50, true}, // HIP97 has 42.14
		{"bet-hyi", "pmra_masyr", 2219.54, false},
		{"bet-hyi", "K", 1.37, false},
		{"r-lep", "period_d", 427.07, false},
		{"r-lep", "plx_mas", 2.42, true},
		{"r-lep", "rise_fraction", 0.55, false},
		{"ngc-3242", "log_fhbeta", -9.79, false},
		{"ngc-3242", "log_f5007", -8.95, false},
		{"ngc-3242", "chbeta", 0.07, true},
		{"ngc-3242", "vexp_kms", 20, true},
		{"40-eri-b", "plx_mas", 199.691, false},
		{"40-eri-b", "pmra_masyr", -2236.2, true},
		{"40-eri-b", "comp_mag", 4.43, true},
		{"sirius-b", "comp_mag", -1.46, true},
		{"gd-50", "ra_deg", 57.209167, true}, // 2.5 arcsec from the CALSPEC place
		{"gd-50", "teff_k", 42700, false},
		{"g-29-38", "pulsation_s", 614, true},
		{"t-crb", "mag_min", 10.8, false},
	} {
		s, ok := byID[c.id]
		if !ok {
			t.Errorf("no %s", c.id)
			continue
		}
		m := numbers[c.column](s)
		if d := m.Value - c.want; !m.Known || d > 1e-9 || d < -1e-9 {
			t.Errorf("%s: %s is %v, want %v", c.id, c.column, m, c.want)
		}
		if got := s.IsUnconfirmed(c.column); got != c.unconfirmed {
			t.Errorf("%s: %s unconfirmed %v, want %v", c.id, c.column, got, c.unconfirmed)
		}
	}
	for id, both := range map[string]string{"v-hya": "mag_max: listed 10.9 (GCVS), from memory 6.0", "alf-phe": "plx_mas: listed 38.50, HIP97 42.14",
		"ex-hya": "mag_min: listed 13.99 (GCVS), from memory 14.3"} {
		if got := byID[id].Conflicts; !strings.Contains(got, both) {
			t.Errorf("%s: conflicts %q, want both values %q", id, got, both)
		}
	}
	still := 0
	for _, s := range stars {
		if s.Kind == targets.WD && !s.MotionKnown() {
			still++
		}
	}
	if still != 14 {
		t.Errorf("%d white dwarfs without a motion, the facts leave 14 without", still)
	}
}
