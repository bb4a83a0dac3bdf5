package table

import (
	"bytes"
	"reflect"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/targets"
)

// word draws a text that survives cleaning.
func word(r *rapid.T, what string) string {
	return rapid.StringMatching(`[A-Za-z0-9+,"' äπ-]{0,12}`).Filter(func(s string) bool { return Clean(s) == s && !isNull(s) }).Draw(r, what)
}

func measure(r *rapid.T, c *column) (targets.Measure, bool) {
	if !rapid.Bool().Draw(r, "given") {
		return targets.Measure{}, false
	}
	lo, hi := c.lo, c.hi
	if lo == 0 && hi == 0 {
		lo, hi = -1e6, 1e6
	}
	return targets.Known(rapid.Float64Range(lo, hi).Draw(r, c.Name)), true
}

func target(r *rapid.T, i int) targets.Target {
	t := targets.Target{
		ID: "id" + word(r, "id") + string(rune('a'+i)), Name: "n" + word(r, "name") + string(rune('a'+i)),
		Kind: rapid.SampledFrom(targets.Kinds).Draw(r, "kind"), KindNote: strings.TrimSpace(word(r, "note")),
	}
	t.Place.RA = astro.Deg(rapid.Float64Range(0, 359.9999).Draw(r, "ra")).Turn()
	t.Place.Dec = astro.Deg(rapid.Float64Range(-90, 90).Draw(r, "dec"))
	t.Place.EpochJyr = 2000
	if rapid.Bool().Draw(r, "epoch") {
		t.Place.EpochJyr, t.Place.EpochGiven = rapid.Float64Range(1900, 2100).Draw(r, "jyr"), true
	}
	for k := range columns {
		c := &columns[k]
		switch {
		case c.text != nil && c.words != nil:
			if rapid.Bool().Draw(r, "word") {
				*c.text(&t) = rapid.SampledFrom(c.words).Draw(r, c.Name)
			}
		case c.text != nil:
			*c.text(&t) = word(r, c.Name)
		case c.isErr, c.Name == "period_d", strings.HasPrefix(c.Name, "epoch_"), strings.HasPrefix(c.Name, "mag_m"):
		default:
			if m, ok := measure(r, c); ok {
				c.set(&t, m.Value)
			}
		}
	}
	if m := t.Mags["V"]; m.Known {
		m.Err = rapid.Float64Range(0.001, 1).Draw(r, "e_V")
		t.Mags["V"] = m
	}
	t.Notes = word(r, "notes")
	if x := word(r, "extra"); x != "" {
		t.Extra = []targets.Field{{Name: "my column", Value: x}}
	}
	return t
}

// read(write(x)) = x, to the last bit, but for where a row stood.
func TestRoundTrip(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		var list []targets.Target
		for i := range rapid.IntRange(1, 4).Draw(r, "n") {
			list = append(list, target(r, i))
		}
		var b bytes.Buffer
		if err := Write(&b, list); err != nil {
			r.Fatal(err)
		}
		got, problems := Read(bytes.NewReader(b.Bytes()), "x.csv")
		for _, p := range problems {
			// warnings are about what was drawn: fast stars without an epoch, negative parallaxes
			if !p.Warning && !strings.Contains(p.Problem, "arcsec?") && !strings.Contains(p.Problem, "hours?") {
				r.Fatalf("%v in\n%s", p, b.String())
			}
		}
		if len(got) != len(list) {
			r.Skip("taken for hours")
		}
		for i := range got {
			got[i].At = targets.Where{}
			if len(got[i].Extra) > 0 && len(list[i].Extra) == 0 {
				got[i].Extra = nil
			}
			if !got[i].Place.PMRA.Known {
				list[i].Place.PMRA, list[i].Place.PMDec = got[i].Place.PMRA, got[i].Place.PMDec
			}
			if !reflect.DeepEqual(got[i], list[i]) {
				r.Fatalf("wrote\n%+v\nread\n%+v\nfrom\n%s", list[i], got[i], b.String())
			}
		}
	})
}

func TestRequestsRoundTrip(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		q := targets.Request{ID: "r" + word(r, "id"), Target: "t" + word(r, "target"), Visits: rapid.IntRange(1, 9).Draw(r, "visits"),
			Weight: rapid.Float64Range(0, 9).Draw(r, "weight"), Notes: word(r, "notes"), Photometric: rapid.Bool().Draw(r, "photometric")}
		q.ID, q.Target = strings.TrimSpace(q.ID), strings.TrimSpace(q.Target)
		if rapid.Bool().Draw(r, "snr") {
			q.SNR = targets.Known(rapid.Float64Range(1, 1000).Draw(r, "value"))
		}
		if rapid.Bool().Draw(r, "window") {
			q.Earliest = time.Unix(rapid.Int64Range(1e9, 2e9).Draw(r, "from"), 0).UTC()
			q.Latest = q.Earliest.Add(time.Hour)
		}
		var b bytes.Buffer
		if err := WriteRequests(&b, []targets.Request{q}); err != nil {
			r.Fatal(err)
		}
		got, problems := ReadRequests(bytes.NewReader(b.Bytes()), "x.csv")
		if len(got) != 1 || len(problems) != 0 {
			r.Fatalf("%d rows, %s", len(got), Lines(problems))
		}
		got[0].At = targets.Where{}
		if !reflect.DeepEqual(got[0], q) {
			r.Fatalf("wrote %+v\nread %+v", q, got[0])
		}
	})
}

func TestMagnitudesRoundTrip(t *testing.T) {
	list := []targets.Magnitude{
		{Target: "R Lep", JD: 2461376.123456, TimeScale: "JD_UTC", Band: "V", Mag: 8.25, Err: 0.03, Source: "observer 1"},
		{Target: "CW Leo", JD: 2461370.5, TimeScale: "HJD", Band: "V", Mag: 14.5, Limit: true},
	}
	var b bytes.Buffer
	if err := WriteMagnitudes(&b, list); err != nil {
		t.Fatal(err)
	}
	got, problems := ReadMagnitudes(&b, "x.csv")
	for i := range got {
		got[i].At = targets.Where{}
	}
	if len(problems) != 0 || !reflect.DeepEqual(got, list) {
		t.Errorf("wrote %+v\nread %+v %s", list, got, Lines(problems))
	}
}

func TestReadRequestsBad(t *testing.T) {
	text := "request,target,snr,max_airmass,earliest_utc,latest_utc,position_angle,photometric,visits,phase_from,colour\n" +
		"a,R Lep,-40,0.5,tonight,,sideways,maybe,1.5,0.2,blue\n" +
		",,,,,,,,,,\n" +
		"b,,10,,,,,,,,\n" +
		"c,R Dor,50,2,2026-12-02T05:00:00Z,2026-12-02T04:00:00Z,90,yes,2,,\n"
	list, problems := ReadRequests(strings.NewReader(text), "requests.csv")
	want := `requests.csv:1:101: warning: "colour": no column that is known; kept as it is; see the README for the names
requests.csv:2:9: snr "-40": out of range; a signal-to-noise ratio is positive; write e.g. 100, or fill exposure_s instead
requests.csv:2:26: position_angle "sideways": no position angle; write parallactic, any, or degrees from -360 to 360
requests.csv:2:41: visits "1.5": not a whole number; write a whole number
requests.csv:2:17: earliest_utc "tonight": no date and time; write e.g. 2026-12-02T04:00:00Z
requests.csv:2:13: max_airmass "0.5": out of range; write a number from 1 to 40
requests.csv:2:35: photometric "maybe": neither yes nor no; write yes or no
requests.csv:2: phase_from: phase_from and phase_to go together; both are left out; fill both or none
requests.csv:4: target: empty; the row is left out; name the target
requests.csv:5: latest_utc: not after earliest_utc; both are left out; write the end of the window
`
	got := Lines(problems)
	if len(list) != 2 {
		t.Errorf("%d rows", len(list))
	}
	for _, line := range strings.SplitAfter(want, "\n") {
		if !strings.Contains(got, line) {
			t.Errorf("missing %q in\n%s", line, got)
		}
	}
	if n := strings.Count(got, "\n"); n != strings.Count(want, "\n") {
		t.Errorf("%d problems, want %d:\n%s", n, strings.Count(want, "\n"), got)
	}
}

func TestReadMagnitudesBad(t *testing.T) {
	text := "target,jd,utc,band,mag,err\nR Lep,61376.5,,V,8.1,\nR Lep,,yesterday,V,8.1,\n,2461376,,V,8,\nR Lep,2461376,,V,<15,x\nR Lep,,2026-12-01 04:00:00,V,8.2,0.1\n"
	list, problems := ReadMagnitudes(strings.NewReader(text), "m.csv")
	want := `m.csv:2:7: jd "61376.5": a modified Julian date?; the row is left out; add 2400000.5
m.csv:3:8: utc "yesterday": no date and time; the row is left out; write e.g. 2026-12-02T04:00:00Z
m.csv:4: target: empty; the row is left out; name the target
m.csv:5:22: err "x": no error of a magnitude; left out; write a decimal number, or leave it empty where unknown
`
	if got := Lines(problems); got != want || len(list) != 2 || !list[0].Limit || list[1].JD != 2461375.6666666665 {
		t.Errorf("%d rows %+v\n%s", len(list), list, got)
	}
}

func FuzzReadRequests(f *testing.F) {
	f.Add([]byte("request,target,snr\na,R Lep,50\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		list, problems := ReadRequests(bytes.NewReader(data), "f.csv")
		placed(t, problems)
		for _, q := range list {
			safe(t, q.ID, q.Target, q.Notes, q.Programme, q.Instrument)
		}
	})
}

func FuzzReadMagnitudes(f *testing.F) {
	f.Add([]byte("target,jd,mag\nR Lep,2461376.5,<8.1\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		list, problems := ReadMagnitudes(bytes.NewReader(data), "f.csv")
		placed(t, problems)
		for _, m := range list {
			safe(t, m.Target, m.Source, string(m.Band), m.TimeScale)
		}
	})
}
