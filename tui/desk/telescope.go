package desk

import (
	"cmp"
	"context"
	"fmt"
	"strconv"
	"strings"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/tui/kit"
	"evenfall/tui/log"
	"evenfall/tui/weather"
)

// atTelescope obeys the keys of the loop and the log.
func (d *Desk) atTelescope(a kit.Action) ([]Task, bool) {
	switch a {
	case kit.TakeStep:
		return d.advance(false), true
	case kit.TakeNow:
		return d.advance(true), true
	case kit.FrameDone:
		return d.frameDone(), true
	case kit.StopEarly:
		return d.end(logbook.Stopped), true
	case kit.AbortTake:
		if d.w.Take == nil {
			d.say("nothing is under way", false)
			return nil, true
		}
		d.sure("y aborts "+d.w.Take.Target+" and logs it as void; other keys go on", func(d *Desk) []Task { return d.end(logbook.Aborted) })
	case kit.SetUp:
		d.ask1(prompt{label: "take", hint: "frames x seconds, first file: 3x90 obs0042; flat 11x3", field: kit.NewField(d.setup.String()), take: (*Desk).settle})
	case kit.WriteNote:
		d.ask1(prompt{label: "note", hint: "enter writes it; begin with fault: for a fault", take: (*Desk).note, keep: true})
	case kit.OpenWeather:
		d.screens = append(d.screens, d.weather)
	case kit.OpenLog:
		d.screens = append(d.screens, log.New())
	case kit.ClockOffset:
		d.ask1(prompt{label: "instrument's clock ahead by s", hint: "e.g. -0.4; logged with each take", take: func(d *Desk, text string) []Task {
			v, err := strconv.ParseFloat(strings.TrimSpace(text), 64)
			if err != nil || v < -86400 || v > 86400 {
				d.say("clock: write seconds, e.g. -0.4", true)
				return nil
			}
			d.offset = targets.Known(v)
			d.say(fmt.Sprintf("the instrument's clock is taken to be %+g s ahead", v), false)
			return nil
		}})
	case kit.BellSwitch:
		return d.switchBell(), true
	default:
		return nil, false
	}
	return nil, true
}

func (d *Desk) switchBell() []Task {
	d.w.Silent = !d.w.Silent
	word := "on"
	if d.w.Silent {
		word = "off"
	}
	d.say("bell "+word, false)
	return d.save(write{what: "bell " + word, run: func(ctx context.Context, b *logbook.Book) (any, error) { return nil, b.Set(ctx, "bell", word) }})
}

// settle takes what the take is set up with, for the one under way too.
func (d *Desk) settle(text string) []Task {
	s, err := parseSetup(text)
	if err != nil {
		d.kept["take"] = text
		d.say(err.Error(), true)
		return nil
	}
	d.setup = s
	if t := d.w.Take; t != nil && s.kind != "" && s.kind != cmp.Or(t.Type, "science") {
		d.say("for the next take: "+s.String()+"; the one under way is "+cmp.Or(t.Type, "science"), false)
		return nil
	}
	if t := d.w.Take; t != nil {
		n := *t
		if s.frames > 0 {
			n.Frames, n.EachS = s.frames, s.each
		}
		if s.file != "" {
			n.FileFirst = s.file
		}
		return d.change(n, "set up "+s.String())
	}
	d.say("the next take: "+s.String(), false)
	return nil
}

// note writes a note.
func (d *Desk) note(text string) []Task {
	if strings.TrimSpace(text) == "" {
		return nil
	}
	d.kept["note"] = text // until it is saved
	at, kind, typed := d.w.Wall, "note", text
	if rest, ok := strings.CutPrefix(strings.TrimSpace(text), "fault:"); ok {
		kind, text = "fault", strings.TrimSpace(rest)
	}
	return d.named(func(d *Desk) []Task {
		return d.save(write{what: kind + ": " + text,
			run: func(ctx context.Context, b *logbook.Book) (any, error) {
				return b.Add(ctx, logbook.Entry{Type: kind, Start: at, Note: text})
			},
			done: func(d *Desk, r any) []Task {
				if d.kept["note"] == typed {
					delete(d.kept, "note")
				}
				d.say(fmt.Sprintf("entry %d saved: %s", r.(int64), kind), false)
				return nil
			}})
	})
}

// conditions writes conditions and says what they break.
func (d *Desk) conditions(c logbook.Conditions) []Task {
	words := c.Words()
	return d.save(write{what: "conditions: " + words,
		run: func(ctx context.Context, b *logbook.Book) (any, error) { return b.Conditions(ctx, c) },
		done: func(d *Desk, r any) []Task {
			if d.up().Title() == kit.OnWeather {
				d.close()
			}
			d.weather = weather.New()
			d.say(fmt.Sprintf("entry %d saved: %s", r.(int64), words), false)
			if warnings := c.Warnings(&d.w.Limits); len(warnings) > 0 {
				d.say(strings.Join(warnings, "; "), true)
			}
			d.polled = false // what holds now is read anew
			return d.poll()
		}})
}

// amend grades an entry or declares it void.
func (d *Desk) amend(j kit.Amend) []Task {
	do := func(d *Desk) []Task {
		return d.save(write{what: fmt.Sprintf("entry %d: %s%s", j.Entry, j.Grade, map[bool]string{true: "void"}[j.Void]),
			run: func(ctx context.Context, b *logbook.Book) (any, error) {
				if j.Void {
					return b.Void(ctx, j.Entry, "")
				}
				return b.Amend(ctx, j.Entry, func(e *logbook.Entry) error { e.Grade = j.Grade; return nil })
			},
			done: func(d *Desk, r any) []Task {
				d.say(fmt.Sprintf("saved as entry %d; entry %d is kept in the history", r.(int64), j.Entry), false)
				return d.follow()
			}})
	}
	if j.Void {
		d.sure(fmt.Sprintf("y declares entry %d void; it stays in the log", j.Entry), func(d *Desk) []Task { return d.named(do) })
		return nil
	}
	return d.named(do)
}
