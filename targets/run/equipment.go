package run

import (
	"fmt"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// instruments reads [[instrument]] with their modes.
func (t *tree) instruments(root *block, c *Config) {
	for _, b := range t.each(root, "instrument") {
		i := instrument.Instrument{Limits: c.Limits, Slew: c.Slew, Change: "night"}
		if !t.word(b, "name", &i.Name, "imager") || i.Name == "" {
			t.problem(b.at, b.field("name"), "", "an instrument without a name; it is left out", "write name")
			t.instrument(b, &i)
			continue
		}
		t.instrument(b, &i)
		t.incomplete(b, &i)
		for k := range c.Instruments {
			if targets.Key(c.Instruments[k].Name) == targets.Key(i.Name) {
				t.problem(b.at, b.field("name"), i.Name, "a second instrument of that name", "give each a name of its own")
			}
		}
		c.Instruments = append(c.Instruments, i)
	}
}

// instrument reads one block.
func (t *tree) instrument(b *block, i *instrument.Instrument) {
	t.word(b, "kind", &i.Kind, "imager", instrument.Imager, instrument.Slit, instrument.Fast)
	if i.Kind == "" {
		if _, there := b.keys["kind"]; !there {
			t.problem(b.at, b.field("kind"), "", "missing", `write kind = "imager", "slit" or "fast"`)
		}
	}
	for _, n := range []struct {
		key  string
		into *float64
		may  bounds
	}{
		{"aperture_m", &i.ApertureM, bounds{0.01, 50, "m", "1.5"}},
		{"obstruction_m", &i.ObstructionM, bounds{0, 50, "m", "0.5"}},
		{"pixel_arcsec", &i.PixelArcsec, bounds{0.001, 60, "arcsec", "0.35"}},
		{"field_arcmin", &i.FieldArcmin, bounds{0.01, 600, "arcmin", "24"}},
		{"read_noise_e", &i.ReadNoiseE, bounds{0.01, 1000, "e", "5"}},
		{"gain_e_adu", &i.GainEADU, bounds{0.001, 1000, "e/ADU", "1.4"}},
		{"dark_e_s", &i.DarkES, bounds{0, 1000, "e/s", "0.002"}},
		{"full_well_e", &i.FullWellE, bounds{100, 1e8, "e", "100000"}},
		{"linear_e", &i.LinearE, bounds{100, 1e8, "e", "80000"}},
		{"bias_adu", &i.BiasADU, bounds{0, 1e6, "ADU", "1000"}},
		{"adc_bits", &i.ADCBits, bounds{8, 32, "", "16"}},
		{"dead_s", &i.DeadS, bounds{0, 3600, "s", "15"}},
		{"shutter_min_s", &i.ShutterMinS, bounds{0, 3600, "s", "0.2"}},
		{"shutter_error_s", &i.ShutterErrorS, bounds{0, 60, "s", "0.01"}},
		{"slit_length_arcsec", &i.SlitLengthArcsec, bounds{0.1, 36000, "arcsec", "360"}},
		{"image_quality_arcsec", &i.ImageQualityArcsec, bounds{0, 60, "arcsec", "0.6"}},
		{"rotation_deg", &i.RotationDeg, bounds{-360, 360, "deg", "0"}},
	} {
		t.number(b, n.key, n.into, n.may)
	}
	if i.ObstructionM > 0 && i.ObstructionM >= i.ApertureM {
		t.problem(b.at, b.field("obstruction_m"), fmt.Sprint(i.ObstructionM), "not smaller than the aperture", "write the diameter of the shadow in metres")
		i.ObstructionM = 0
	}
	if v, ok := t.numbers(b, "pixels", 2, "[4096, 4096]"); ok {
		i.Pixels = [2]int{int(v[0]), int(v[1])}
	}
	t.flag(b, "flip", &i.Flip)
	t.word(b, "change", &i.Change, "night", "night", "day")
	t.limits(b, &i.Limits, false)
	t.slew(b, &i.Slew)
	for _, m := range t.each(b, "mode") {
		t.mode(m, i)
	}
	for k := range i.Modes {
		for _, with := range i.Modes[k].With {
			if _, ok := i.Mode(with); !ok {
				t.problem(b.at, b.field("mode"), with, "taken together with a mode that is not there", "use one of "+modeNames(i))
			}
		}
	}
}

// incomplete reports what exposures cannot be worked out without: an error
// where something of telescope or detector is given, so that they are meant to
// be, a warning where nothing is.
func (t *tree) incomplete(b *block, i *instrument.Instrument) {
	lacks := i.Lacks()
	if !i.Any() {
		t.problem(b.at, b.path, i.Name, "neither telescope nor detector are described: no exposures are worked out for it",
			"write aperture_m, pixel_arcsec, read_noise_e and, for each mode, zero_point_e_s or throughput").Warning = true
		return
	}
	for _, l := range lacks {
		if _, there := b.keys[l.Key]; !there { // one out of range was told already
			t.problem(b.at, b.field(l.Key), "", "missing; no exposures are worked out for "+i.Name, l.Fix)
		}
	}
	blocks := t.each(b, "mode")
	for k := range i.Modes {
		m := &i.Modes[k]
		for _, mb := range blocks {
			if n, ok := mb.keys["name"]; !ok || n.value != any(m.Name) {
				continue
			}
			for _, l := range i.LacksIn(m) {
				if _, there := mb.keys[l.Key]; !there {
					t.problem(mb.at, mb.field(l.Key), "", l.What+"; no exposures are worked out in it", l.Fix)
				}
			}
			break
		}
	}
}

func modeNames(i *instrument.Instrument) string {
	var names []string
	for k := range i.Modes {
		names = append(names, i.Modes[k].Name)
	}
	return strings.Join(names, ", ")
}

// mode reads one [[instrument.mode]].
func (t *tree) mode(b *block, i *instrument.Instrument) {
	m := instrument.Mode{}
	named := t.word(b, "name", &m.Name, "V")
	t.word(b, "band", (*string)(&m.Band), "V")
	if v, ok := t.numbers(b, "range_nm", 2, "[340, 930]"); ok {
		m.RangeNm = [2]float64{v[0], v[1]}
	}
	t.measure(b, "zero_point_e_s", &m.ZeroPointES, bounds{1, 1e15, "e/s at magnitude 0", "5.8e9"})
	t.measure(b, "throughput", &m.Throughput, bounds{1e-6, 1, "", "0.42"})
	m.ThroughputAt = t.pairs(b, "throughput_at")
	if v, ok := t.numbers(b, "slit_arcsec", 0, "[0.8, 1.0, 1.5]"); ok {
		m.SlitArcsec = v
	}
	t.number(b, "slit_scale_pixel_arcsec", &m.SlitScalePixel, bounds{0.01, 100, "pixels per arcsec", "4"})
	t.number(b, "dispersion_nm_pixel", &m.DispersionNm, bounds{1e-5, 100, "nm", "0.2"})
	t.number(b, "arc_s", &m.ArcS, bounds{0, 3600, "s", "60"})
	t.number(b, "change_s", &m.ChangeS, bounds{0, 3600, "s", "20"})
	if v, ok := t.words(b, "with", `["red"]`); ok {
		m.With = v
	}
	var sun float64
	if t.number(b, "max_sun_altitude_deg", &sun, bounds{-90, 5, "deg", "-12"}) {
		m.MaxSunAltitude, m.MaxSunAltitudeOK = astro.Deg(sun), true
	}
	t.word(b, "use", &m.Use, "science")
	switch {
	case !named || m.Name == "":
		t.problem(b.at, b.field("name"), "", "a mode without a name; it is left out", "write name")
		return
	case m.Band == "" && m.RangeNm == [2]float64{}:
		t.problem(b.at, b.path, m.Name, "neither band nor range_nm; it is left out", `write band = "V" or range_nm = [340, 930]`)
		return
	}
	if _, twice := i.Mode(m.Name); twice {
		t.problem(b.at, b.field("name"), m.Name, "a second mode of that name", "give each a name of its own")
	}
	i.Modes = append(i.Modes, m)
}

// pairs reads [[350, 0.10], [450, 0.22]].
func (t *tree) pairs(b *block, key string) [][2]float64 {
	n, ok := b.ask(key)
	if !ok {
		return nil
	}
	list, isList := n.value.([]*node)
	var out [][2]float64
	for _, e := range list {
		pair, isPair := e.value.([]*node)
		if !isPair || len(pair) != 2 {
			isList = false
			break
		}
		x, ok1 := pair[0].value.(float64)
		y, ok2 := pair[1].value.(float64)
		if !ok1 || !ok2 || y < 0 || y > 1 || (len(out) > 0 && x <= out[len(out)-1][0]) {
			isList = false
			break
		}
		out = append(out, [2]float64{x, y})
	}
	if !isList || len(out) == 0 {
		t.problem(n.at, b.field(key), n.text, "not a list of pairs of wavelength and throughput", "write "+key+" = [[350, 0.10], [450, 0.22]], nm rising, 0 to 1")
		return nil
	}
	return out
}

// nights reads [[night]] and the shorthand [nights].
func (t *tree) nights(root *block, c *Config) {
	for _, b := range t.each(root, "night") {
		n := NightPlan{ClearProbability: 0.7, At: b.at}
		var date string
		if t.word(b, "date", &date, "2026-12-01") {
			d, err := astro.ParseDate(date)
			if err != nil {
				t.problem(b.keys["date"].at, b.field("date"), date, "no day of the calendar; the night is left out", "write YYYY-MM-DD, the date of its evening")
				date = ""
			}
			n.Date = d
		} else if _, there := b.keys["date"]; !there {
			t.problem(b.at, b.field("date"), "", "missing; the night is left out", "write date = 2026-12-01, the date of its evening")
		}
		t.clock(b, "from_utc", &n.From)
		t.clock(b, "until_utc", &n.Until)
		if v, ok := t.words(b, "instruments", `["imager"]`); ok {
			n.Instruments = v
			t.mounted(b, c, v)
		}
		t.number(b, "clear_probability", &n.ClearProbability, bounds{0, 1, "", "0.7"})
		if date != "" {
			c.Nights = append(c.Nights, n)
		}
	}
	b, ok := t.sub(root, "nights")
	var first, last string
	f, l := t.word(b, "first", &first, "2026-12-01"), t.word(b, "last", &last, "2026-12-05")
	if !ok || len(b.order) == 0 {
		return
	}
	from, err1 := astro.ParseDate(first)
	until, err2 := astro.ParseDate(last)
	const most = 400
	if !f || !l || err1 != nil || err2 != nil || until.Before(from) || from.Next(most).Before(until) {
		t.problem(b.at, "nights", first+" "+last, "no range of nights", "write first = 2026-12-01 and last = 2026-12-05")
		return
	}
	for d := from; !until.Before(d); d = d.Next(1) {
		if _, listed := c.NightOn(d); !listed {
			c.Nights = append(c.Nights, NightPlan{Date: d, ClearProbability: 0.7, At: b.at})
		}
	}
}

func (t *tree) mounted(b *block, c *Config, names []string) {
	for _, name := range names {
		found := false
		var have []string
		for k := range c.Instruments {
			found = found || c.Instruments[k].Name == name
			have = append(have, c.Instruments[k].Name)
		}
		if !found {
			t.problem(b.keys["instruments"].at, b.field("instruments"), name, "no such instrument", "use one of "+strings.Join(have, ", "))
		}
	}
}

// clock reads a time of day or a whole time.
func (t *tree) clock(b *block, key string, into *string) {
	var s string
	if !t.word(b, key, &s, "04:30") {
		return
	}
	if _, err := parseClock(s, time.Time{}); err != nil {
		t.problem(b.keys[key].at, b.field(key), s, "no time", `write "04:30" or 2026-12-02T04:30:00Z, UTC`)
		return
	}
	*into = s
}

// parseClock reads a time of day into the 24 hours that begin at from, or a
// whole time.
func parseClock(s string, from time.Time) (time.Time, error) {
	if t, err := time.Parse(time.RFC3339, s); err == nil {
		return t.UTC(), nil
	}
	layout := "15:04"
	if strings.Count(s, ":") == 2 {
		layout = "15:04:05"
	}
	day, err := time.Parse(layout, s)
	if err != nil {
		return time.Time{}, err
	}
	midnight := from.UTC().Truncate(24 * time.Hour)
	at := midnight.Add(time.Duration(day.Hour())*time.Hour + time.Duration(day.Minute())*time.Minute + time.Duration(day.Second())*time.Second)
	if at.Before(from) {
		at = at.Add(24 * time.Hour)
	}
	return at, nil
}
