package table

import (
	"math"
	"strings"
	"testing"

	"evenfall/targets"
)

// One position, the Crab's star, in the notations that papers, archives and
// messages use. The reference is its decimal form.
func TestTyped(t *testing.T) {
	for _, position := range []string{
		"05 34 31.94 +22 00 52.2", "05:34:31.94 +22:00:52.2", "05:34:31.94,+22:00:52.2", "5h34m31.94s +22d00m52.2s",
		"05h34m31.94s, +22°00′52.2″", "053431.94+220052.2", "J053431.94+220052.2", "83.633083 22.014500", "83.633083, +22.014500",
		" 05 34 31.94   + 22 00 52.2", "05 34 31.94 \u221222 00 52.2",
	} {
		x, problems := Typed{Name: "new", Position: position}.Target()
		for _, p := range problems {
			if !p.Warning {
				t.Errorf("%q: %+v", position, p)
			}
		}
		dec := 22.0145
		if strings.Contains(position, "\u2212") {
			dec = -dec
		}
		if math.Abs(x.Place.RA.Deg()-83.633083) > 2e-6 || math.Abs(x.Place.Dec.Deg()-dec) > 2e-6 {
			t.Errorf("%q is read as %v %v", position, x.Place.RA, x.Place.Dec)
		}
	}
	x, problems := Typed{Name: "N", Position: "05 34 31.94 -22 00 52", Kind: "wd", Mag: "G 15.25", Motion: "+12.5 -1034", Epoch: "2016.0"}.Target()
	if len(problems) != 0 || x.Kind != targets.WD || x.Mags["G"].Value != 15.25 || x.Place.PMDec.Value != -1034 || x.Place.EpochJyr != 2016 {
		t.Errorf("%+v, %v", x, problems)
	}
	if x, _ := (Typed{Name: "N", Position: "05 34 31.94 -22 00 52", Mag: "12.3"}).Target(); x.Mags["V"].Value != 12.3 {
		t.Errorf("a bare magnitude is read as %v", x.Mags)
	}
	for field, bad := range map[string]Typed{
		"name":     {Position: "05 34 31.94 -22 00 52"},
		"position": {Name: "N", Position: "05 34 61.94 -22 00 52"},
		"kind":     {Name: "N", Position: "05 34 31.94 -22 00 52", Kind: "quasar"},
		"motion":   {Name: "N", Position: "05 34 31.94 -22 00 52", Motion: "fast"},
		"V":        {Name: "N", Position: "05 34 31.94 -22 00 52", Mag: "bright"},
		"epoch":    {Name: "N", Position: "05 34 31.94 -22 00 52", Epoch: "now"},
	} {
		_, problems := bad.Target()
		found := false
		for _, p := range problems {
			found = found || p.Field == field && p.Text != ""
		}
		if !found {
			t.Errorf("%s: %+v gives %+v", field, bad, problems)
		}
	}
}

func TestFromPaste(t *testing.T) {
	for line, want := range map[string]Typed{
		"Nova Vel 2026  10 23 45.6 -47 12 33  V=6.4":       {Name: "Nova Vel 2026", Position: "10 23 45.6 -47 12 33", Mag: "V 6.4"},
		"EX 123, 155.9400, -47.2092, mag 12.5, pm -30 +12": {Name: "EX 123", Position: "155.9400, -47.2092", Mag: "12.5", Motion: "-30 +12"},
		"WD J102345.67-471233.4 G=16.2":                    {Name: "WD J102345.67-471233.4", Position: "102345.67-471233.4", Mag: "G 16.2"},
	} {
		got, ok := FromPaste(line)
		if !ok || got != want {
			t.Errorf("%q is taken as %+v, %v", line, got, ok)
		}
	}
	if _, ok := FromPaste("R Lep is bright tonight"); ok {
		t.Error("a position is found where there is none")
	}
}

func FuzzTyped(f *testing.F) {
	f.Add("N", "05 34 31.94 +22 00 52.2", "wd", "V 12", "1 2", "2000")
	f.Add("\x1b[31m", "J053431.94+220052.2", "pn:x", "mag", "", "")
	f.Fuzz(func(t *testing.T, a, b, c, d, e, g string) {
		x, problems := Typed{a, b, c, d, e, g}.Target()
		usable := true
		for _, p := range problems {
			if p.Text == "" || p.Field == "" && !p.Warning {
				t.Errorf("a problem that says nothing: %+v", p)
			}
			usable = usable && p.Warning
		}
		if usable && (x.Name == "" || math.Abs(x.Place.Dec.Deg()) > 90) {
			t.Errorf("usable: %+v", x)
		}
		if y, ok := FromPaste(b); ok {
			y.Target()
		}
	})
}
