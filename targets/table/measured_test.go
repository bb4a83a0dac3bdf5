package table

import (
	"math"
	"strings"
	"testing"
	"time"

	"evenfall/targets"
)

var typedAt = time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC)

func TestTypedMagnitude(t *testing.T) {
	for text, want := range map[string]targets.Magnitude{
		"8.1":                        {Mag: 8.1, Band: "V", JD: 2461376.6666667},
		"<12.5":                      {Mag: 12.5, Band: "V", JD: 2461376.6666667, Limit: true},
		"< 12.5 B":                   {Mag: 12.5, Band: "B", JD: 2461376.6666667, Limit: true},
		" 8.13+-0.02 R":              {Mag: 8.13, Err: 0.02, Band: "R", JD: 2461376.6666667},
		"8.13 +- 0.02":               {Mag: 8.13, Err: 0.02, Band: "V", JD: 2461376.6666667},
		"-0.3 v 2026-12-01":          {Mag: -0.3, Band: "v", JD: 2461375.5},
		"8.1 2026-12-01T12:00":       {Mag: 8.1, Band: "V", JD: 2461376},
		"8.1 2026-12-01T12:00:00Z B": {Mag: 8.1, Band: "B", JD: 2461376},
		"8.1 2026-12-01 12:00":       {Mag: 8.1, Band: "V", JD: 2461376},
	} {
		m, err := TypedMagnitude(text, "V", typedAt)
		if err != nil || m.Mag != want.Mag || m.Band != want.Band || m.Limit != want.Limit || m.Err != want.Err || math.Abs(m.JD-want.JD) > 1e-6 {
			t.Errorf("%q: %+v, %v", text, m, err)
		}
	}
	for text, says := range map[string]string{
		"": "e.g. 8.1", "abc": "no number", "81": "outside -2 to 25", "-3": "outside", "<": "no number", "8.1 Q": "neither a band", "NaN": "no number", "Inf": "no number",
		"8.1 V 2026-12-03": "in the future", "8.1+-9": "one sigma", "8.1+-x": "0.05", "8.1 V 1200-01-01": "none of our time", "8.1 +-": "0.05",
	} {
		if _, err := TypedMagnitude(text, "V", typedAt); err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%q: %v", text, err)
		}
	}
}

func FuzzTypedMagnitude(f *testing.F) {
	for _, s := range []string{"8.1", "<12.5 B", "8.1+-0.02 V 2026-12-01T12:00", "8.1 2026-12-01 12:00", "< <", "+-"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		m, err := TypedMagnitude(s, "V", typedAt)
		if err == nil && (CheckMagnitude(&m, typedAt) != nil || m.Band == "") {
			t.Errorf("%q is taken as %+v", s, m)
		}
	})
}

func TestCheckMagnitude(t *testing.T) {
	good := targets.Magnitude{Mag: 8, Band: "V", JD: 2461376.6, TimeScale: "JD_UTC"}
	if err := CheckMagnitude(&good, typedAt); err != nil {
		t.Error(err)
	}
	for says, change := range map[string]func(*targets.Magnitude){
		"outside":           func(m *targets.Magnitude) { m.Mag = math.NaN() },
		"not known":         func(m *targets.Magnitude) { m.Band = "X" },
		"in the future":     func(m *targets.Magnitude) { m.JD += 0.1 },
		"one sigma":         func(m *targets.Magnitude) { m.Err = -1 },
		"none of our time;": func(m *targets.Magnitude) { m.JD = math.Inf(1) },
	} {
		m := good
		change(&m)
		if err := CheckMagnitude(&m, typedAt); err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%+v: %v", m, err)
		}
	}
}

func TestSetAside(t *testing.T) {
	one := targets.Magnitude{Target: "R Lep", Mag: 8, Band: "V", JD: 2461370, TimeScale: "JD_UTC"}
	late, twice, absurd, other := one, one, one, one
	late.JD, twice.Target, absurd.Mag, other.Band = 2461380, "r_lep", 99, "B"
	kept, aside := SetAside([]targets.Magnitude{one, late, twice, absurd, other}, typedAt)
	if len(kept) != 2 || kept[1].Band != "B" || len(aside) != 3 {
		t.Fatalf("kept %v, aside %v", kept, aside)
	}
	for i, says := range []string{"in the future", "the same as", "outside"} {
		if !aside[i].Warning || !strings.Contains(aside[i].Error(), says) {
			t.Errorf("%v", aside[i])
		}
	}
}

// Visual and photographic magnitudes by any of their names.
func TestNamedBand(t *testing.T) {
	for name, want := range map[targets.Band]targets.Band{"vis": "v", "Vis.": "v", "visual": "v", "Visual": "v", "v": "v", "V": "V", "pg": "p", "p": "p", "B": "B", "Q": "Q", "": ""} {
		if got := NamedBand(name); got != want {
			t.Errorf("%q is %q", name, got)
		}
	}
	m, err := TypedMagnitude("8.1 vis", "V", typedAt)
	if err != nil || m.Band != "v" {
		t.Errorf("%+v, %v", m, err)
	}
	kept, aside := SetAside([]targets.Magnitude{{Mag: 8, Band: "Vis.", JD: 2461376}, {Mag: 8, Band: "v", JD: 2461376}, {Mag: 9, Band: "pg", JD: 2461376}}, typedAt)
	if len(kept) != 2 || kept[0].Band != "v" || kept[1].Band != "p" || len(aside) != 1 {
		t.Errorf("kept %+v, aside %d", kept, len(aside))
	}
}
