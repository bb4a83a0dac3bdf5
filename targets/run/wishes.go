package run

import (
	"slices"
	"strings"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

func (t *tree) upkeep(root *block, c *Config) {
	b, _ := t.sub(root, "upkeep")
	c.Upkeep = Upkeep{FocusEveryH: 2, FocusS: 300}
	c.Upkeep.FocusGiven = t.number(b, "focus_every_h", &c.Upkeep.FocusEveryH, bounds{0.05, 48, "h", "2"})
	t.number(b, "focus_s", &c.Upkeep.FocusS, bounds{0, 7200, "s", "300"})
	t.measure(b, "pointing_check_every_h", &c.Upkeep.PointingCheckEveryH, bounds{0.05, 48, "h", "4"})
	_, c.Upkeep.ArcGiven = b.keys["arc_with_each"]
	t.flag(b, "arc_with_each", &c.Upkeep.ArcWithEach)
	if n, ok := b.ask("flats"); ok {
		switch v := n.value.(type) {
		case bool:
			c.Upkeep.Flats = v
		case string:
			c.Upkeep.Flats, c.Upkeep.FlatsText = v != "" && v != "none", v
		default:
			t.wrong(b, "flats", n, "true, false or a text", "true")
		}
	}
}

// population reads [stage].
func (t *tree) population(root *block, c *Config) {
	var names []string
	for _, p := range targets.Populations {
		names = append(names, string(p))
	}
	b, _ := t.sub(root, "stage")
	word := string(targets.PopulationField)
	t.word(b, "population", &word, word, names...)
	c.Population = targets.Population(word)
}

// defaults reads [defaults.KIND].
func (t *tree) defaults(root *block, c *Config) {
	c.Defaults = map[targets.Kind]Default{}
	all, _ := t.sub(root, "defaults")
	for _, k := range targets.Kinds {
		b, ok := t.sub(all, string(k))
		d := Default{Weight: 1, Given: ok}
		t.word(b, "instrument", &d.Instrument, "imager")
		t.word(b, "mode", &d.Mode, "V")
		t.word(b, "band", (*string)(&d.Band), "V")
		t.measure(b, "snr", &d.SNR, bounds{0.1, 1e6, "", "100"})
		t.measure(b, "exposure_s", &d.ExposureS, bounds{0.001, 1e6, "s", "60"})
		t.number(b, "weight", &d.Weight, bounds{0, 1e9, "", "1"})
		if ok {
			t.knownEquipment(b, c, d.Instrument, d.Mode)
		}
		c.Defaults[k] = d
	}
}

// knownEquipment reports an instrument or mode that is not there.
func (t *tree) knownEquipment(b *block, c *Config, name, mode string) {
	if name == "" {
		return
	}
	i, ok := c.Instrument(name)
	if !ok {
		t.problem(b.keys["instrument"].at, b.field("instrument"), name, "no such instrument", "use one of "+c.instrumentNames())
		return
	}
	if _, ok := i.Mode(mode); mode != "" && !ok {
		t.problem(b.keys["mode"].at, b.field("mode"), mode, "no such mode of "+name, "use one of "+modeNames(i))
	}
}

// handOverFields are the fields that the order of a hand-over may name.
var handOverFields = []string{"name", "ra", "dec", "frame", "epoch", "pmra", "pmdec"}

func (t *tree) handOver(root *block, c *Config) {
	b, _ := t.sub(root, "handover")
	h := HandOver{Motion: "applied", Format: "sexagesimal"}
	t.word(b, "motion", &h.Motion, "applied", "applied", "catalogue")
	t.word(b, "format", &h.Format, "sexagesimal", "sexagesimal", "degrees")
	t.separator(b, &h.Separator)
	if order, ok := t.words(b, "order", `["name", "ra", "dec"]`); ok {
		for _, f := range order {
			if !slices.Contains(handOverFields, f) {
				t.problem(b.keys["order"].at, b.field("order"), f, "no such field", "use "+strings.Join(handOverFields, ", "))
				order = nil
				break
			}
		}
		h.Order = order
	}
	c.HandOver = h
}

// separator keeps blanks, which a text otherwise loses.
func (t *tree) separator(b *block, into *string) {
	n, ok := b.ask("separator")
	if !ok {
		return
	}
	s, ok := n.value.(string)
	if !ok || strings.ContainsAny(s, "\n\r\x1b") || len(s) > 16 {
		t.wrong(b, "separator", n, "a short text", `"  "`)
		return
	}
	*into = s
}

// Instrument returns the named instrument, or false.
func (c *Config) Instrument(name string) (*instrument.Instrument, bool) {
	for k := range c.Instruments {
		if targets.Key(c.Instruments[k].Name) == targets.Key(name) {
			return &c.Instruments[k], true
		}
	}
	return nil, false
}

func (c *Config) instrumentNames() string {
	var names []string
	for k := range c.Instruments {
		names = append(names, c.Instruments[k].Name)
	}
	if len(names) == 0 {
		return "none: run.toml has no [[instrument]]"
	}
	return strings.Join(names, ", ")
}

// LimitsFor returns the limits that hold for an instrument, the site's where
// there is none of that name.
func (c *Config) LimitsFor(name string) targets.Limits {
	if i, ok := c.Instrument(name); ok {
		return i.Limits
	}
	return c.Limits
}

// NightOn returns the allocation of a night; false: it is not listed.
func (c *Config) NightOn(date astro.Date) (NightPlan, bool) {
	for _, n := range c.Nights {
		if n.Date == date {
			return n, true
		}
	}
	return NightPlan{}, false
}

// AllocatedOn returns the times of a night that are ours.
//
// Given:
//   - span: the night, noon to noon.
//
// Returns:
//   - nil for the whole night, also where the run does not list it.
func (c *Config) AllocatedOn(span astro.Span, date astro.Date) []astro.Span {
	n, ok := c.NightOn(date)
	if !ok || (n.From == "" && n.Until == "") {
		return nil
	}
	out := span
	set := func(text string, into *astro.Instant) {
		if text == "" {
			return
		}
		t, err := parseClock(text, span.From.UTC())
		if err != nil {
			return
		}
		if at, err := timescale.AtDUT1(t, span.From.UT1MinusUTC()); err == nil && span.Contains(at) {
			*into = at
		}
	}
	set(n.From, &out.From)
	set(n.Until, &out.Until)
	if !out.From.Before(out.Until) {
		return nil
	}
	return []astro.Span{out}
}

// DefaultRequest returns what is asked of a target of a kind that has no
// request: run.toml's [defaults.KIND], else by kind: giant, postagb and
// standard the first slit with S/N 100 per element; wd slit, 30; lpv the
// imager in V, 50; pn the first line mode, 30 over 10 square arcsec;
// interacting the first fast photometer, else the imager, for 60 minutes.
// Without instruments there is no request: false. Where names of instruments
// are given, those mounted, only they count.
func (c *Config) DefaultRequest(kind targets.Kind, mounted ...string) (targets.Request, bool) {
	r := targets.Request{Band: "V", Visits: 1, Weight: 1}
	d := c.Defaults[kind]
	if d.Given {
		r.Weight = d.Weight
	}
	pick := func(kinds ...string) *instrument.Instrument {
		for _, want := range kinds {
			for k := range c.Instruments {
				on := len(mounted) == 0 || slices.Contains(mounted, c.Instruments[k].Name)
				if c.Instruments[k].Kind == want && on {
					return &c.Instruments[k]
				}
			}
		}
		return nil
	}
	var i *instrument.Instrument
	switch kind {
	case targets.LPV, targets.Other:
		i, r.SNR, r.SNRPer = pick(instrument.Imager, instrument.Fast, instrument.Slit), targets.Known(50), "total"
	case targets.PN:
		i, r.SNR, r.SNRPer = pick(instrument.Imager, instrument.Slit), targets.Known(30), "total"
		r.AreaArcsec2 = targets.Known(10)
	case targets.Interacting:
		i, r.DurationMin = pick(instrument.Fast, instrument.Imager), targets.Known(60)
	case targets.WD:
		i, r.SNR, r.SNRPer = pick(instrument.Slit, instrument.Imager), targets.Known(30), "element"
	default:
		i, r.SNR, r.SNRPer = pick(instrument.Slit, instrument.Imager), targets.Known(100), "element"
	}
	if d.Instrument != "" && (len(mounted) == 0 || slices.Contains(mounted, d.Instrument)) {
		i, _ = c.Instrument(d.Instrument)
	}
	if i == nil {
		return r, false
	}
	r.Instrument, r.Mode = i.Name, modeFor(i, kind)
	override(&r, d)
	return r, true
}

// modeFor picks the mode that suits a kind: V for variables, a line for
// nebulae, else the first.
func modeFor(i *instrument.Instrument, kind targets.Kind) string {
	for k := range i.Modes {
		m := &i.Modes[k]
		line := m.Band == "Ha" || m.Band == "Hb" || m.Band == "O3"
		if (kind == targets.PN && line) || (kind == targets.LPV && m.Band == "V") {
			return m.Name
		}
	}
	if len(i.Modes) > 0 {
		return i.Modes[0].Name
	}
	return ""
}

// override puts what run.toml says of a kind over the defaults of the program.
func override(r *targets.Request, d Default) {
	if d.Mode != "" && (d.Instrument == "" || d.Instrument == r.Instrument) {
		r.Mode = d.Mode
	}
	if d.Band != "" {
		r.Band = d.Band
	}
	if d.SNR.Known {
		r.SNR = d.SNR
	}
	if d.ExposureS.Known {
		r.ExposureS, r.SNR = d.ExposureS, targets.Measure{}
	}
}
