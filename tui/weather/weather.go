// Package weather is the screen on which conditions of sky and dome are typed.
// What is left empty still holds as it was.
package weather

import (
	"fmt"
	"strconv"
	"strings"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/tui/kit"
)

// The fields, in the order in which they are typed.
const (
	seeing = iota
	extinction
	cloud
	wind
	humidity
	dew
	photometric
	dome
	instrument
	note
)

var lines = []kit.FormField{
	{Label: "seeing", Hint: "arcsec: 1.2"},
	{Label: "thin cloud", Hint: "magnitudes: 0.3; 0 when it has gone"},
	{Label: "cloud", Hint: "azimuths from to, eastward: 270 330"},
	{Label: "wind", Hint: "m/s and azimuth it comes from: 8 320"},
	{Label: "humidity", Hint: "per cent: 45"},
	{Label: "dew margin", Hint: "degrees C above the dew point: 6"},
	{Label: "photometric", Hint: "yes or no"},
	{Label: "dome", Hint: "closed weather, closed fault, closed other, or open"},
	{Label: "instrument", Hint: "in use"},
	{Label: "note", Hint: "enter on this line saves"},
}

// Screen is the form.
type Screen struct{ form kit.Form }

// New returns an empty form.
func New() Screen { return Screen{kit.NewForm(lines)} }

// Title names it.
func (s Screen) Title() string { return kit.OnWeather }

// Typing is always the case here.
func (s Screen) Typing() bool { return true }

// HalfTyped tells whether anything is typed.
func (s Screen) HalfTyped() bool { return !s.form.Empty() }

// Draft writes what is typed, for keeping; Recall reads it back.
func (s Screen) Draft() string { return s.form.Draft() }

// Recall returns the form as a draft had it.
func (s Screen) Recall(draft string) kit.Screen {
	s.form = s.form.Recall(draft)
	return s
}

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	if kit.Lookup(kit.OnWeather, press) == kit.Back {
		return s, kit.Close{}
	}
	form, finished := s.form.Press(kit.OnWeather, press)
	s.form = form
	if !finished {
		return s, nil
	}
	c, field, err := s.conditions()
	if err == nil {
		c.From = w.Wall
		err = c.Check()
	}
	if err != nil {
		if field >= 0 {
			s.form.At = field
		}
		return s, kit.Say{Text: err.Error(), Bad: true}
	}
	return s, kit.Weather{Conditions: c}
}

// Paste puts text into the field.
func (s Screen) Paste(_ *kit.World, text string) (kit.Screen, kit.Job) {
	s.form = s.form.With(s.form.At, s.form.Fields[s.form.At].Insert(text))
	return s, nil
}

// conditions reads the form; the field that is wrong, or -1.
func (s Screen) conditions() (c logbook.Conditions, field int, err error) {
	numbers := func(i int, into ...*targets.Measure) error {
		words := strings.Fields(s.form.Text(i))
		if len(words) > len(into) {
			return fmt.Errorf("%s: at most %d numbers", lines[i].Label, len(into))
		}
		for k, word := range words {
			v, err := strconv.ParseFloat(word, 64)
			if err != nil {
				return fmt.Errorf("%s: %s is not a number; %s", lines[i].Label, word, lines[i].Hint)
			}
			*into[k] = targets.Known(v)
		}
		return nil
	}
	for _, f := range []struct {
		at   int
		into []*targets.Measure
	}{{seeing, []*targets.Measure{&c.Seeing}}, {extinction, []*targets.Measure{&c.Extinction}}, {cloud, []*targets.Measure{&c.CloudFrom, &c.CloudTo}},
		{wind, []*targets.Measure{&c.WindMS, &c.WindFrom}}, {humidity, []*targets.Measure{&c.Humidity}}, {dew, []*targets.Measure{&c.DewMarginC}}} {
		if err := numbers(f.at, f.into...); err != nil {
			return c, f.at, err
		}
	}
	c.Humidity.Value /= 100
	c.Photometric = strings.ToLower(s.form.Text(photometric))
	if words := strings.Fields(strings.ToLower(s.form.Text(dome))); len(words) > 0 {
		c.Dome = words[0]
		if len(words) > 1 {
			c.Reason = words[1]
		} else if c.Dome == "closed" {
			return c, dome, fmt.Errorf("dome: closed by what? %s", lines[dome].Hint)
		}
	}
	c.Instrument, c.Note = s.form.Text(instrument), s.form.Text(note)
	return c, -1, nil
}

// Apply takes nothing.
func (s Screen) Apply(*kit.World, kit.Result) kit.Screen { return s }

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// View draws the form, what holds now, and which limits that breaks.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	header := 2
	if height < 14 {
		header = 1
	}
	kit.Header(w, p, header)
	s.form.Draw(p, height-p.Lines())
	say := func(r kit.Role, text string) {
		for _, line := range kit.Wrap(text, width, 2) {
			if p.Lines() < height {
				p.Put(r, line).Line()
			}
		}
	}
	if words := w.Conditions.Words(); words != "" {
		say(kit.Text, "now: "+words)
	} else {
		say(kit.Dim, "nothing has been said of the conditions yet")
	}
	for _, warning := range w.Warnings() {
		say(kit.Warn, "! "+warning)
	}
	say(kit.Dim, w.ClockWords)
	p.Fill(height)
	return p.String()
}
