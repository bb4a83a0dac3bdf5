package desk

import (
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/roster"
	"evenfall/targets/table"
	"evenfall/tui/kit"
)

// enterMagnitude asks for a magnitude of the selected star.
func (d *Desk) enterMagnitude() {
	switch {
	case d.src.Book == nil:
		d.say("there is no log here; make a run with evenfall new DIR", true)
		return
	case d.w.Entry() == nil:
		d.say("no star is selected", false)
		return
	}
	name, band := d.w.Entry().Target.Name, d.bandInUse(d.w.Selected)
	label := "magnitude of " + name + " in " + string(band)
	d.ask1(prompt{label: label, hint: "e.g. 8.1; <12.5 not seen; now", keep: true, take: func(d *Desk, text string) []Task {
		return d.measured(label, name, band, text)
	}})
}

// bandInUse is the band in which a star is measured: of the take under way, of
// the mode that it is wanted with, of --band, else V.
func (d *Desk) bandInUse(row int) targets.Band {
	if t := d.w.Take; t != nil && d.takeRow == row && table.KnownBand(targets.Band(t.Band)) {
		return targets.Band(t.Band)
	}
	if want := d.src.Roster.Want(d.w.Snap.Scene.Night, row); want.Mode != nil && table.KnownBand(want.Mode.Band) {
		return want.Mode.Band
	}
	if table.KnownBand(d.w.Band) {
		return d.w.Band
	}
	return "V"
}

// measured takes a magnitude as typed, and brings it to the disk.
func (d *Desk) measured(label, name string, band targets.Band, text string) []Task {
	if strings.TrimSpace(text) == "" {
		delete(d.kept, label)
		return nil
	}
	d.kept[label] = text // until it is saved
	m, err := table.TypedMagnitude(text, band, d.w.Wall)
	if err != nil {
		d.say("not taken: "+err.Error(), true)
		return nil
	}
	m.Target = name
	words := table.MagnitudeWord(&m) + " of " + name + ", " + magnitudeTime(&m)
	return d.named(func(d *Desk) []Task {
		return d.save(write{what: "magnitude " + words,
			run: func(ctx context.Context, b *logbook.Book) (any, error) { return b.AddMagnitude(ctx, m) },
			done: func(d *Desk, r any) []Task {
				if d.kept[label] == text {
					delete(d.kept, label)
				}
				d.say(fmt.Sprintf("magnitude %d saved: %s; the forecast heeds it", r.(int64), words), false)
				return d.renew()
			}})
	})
}

// magnitudeTime writes when a magnitude was measured.
func magnitudeTime(m *targets.Magnitude) string {
	at, err := timescale.FromJD(m.JD, "JD_UTC")
	if err != nil {
		return fmt.Sprintf("JD %.4f", m.JD)
	}
	return at.UTC().Round(time.Minute).Format("2 Jan 15:04")
}

// own lists the magnitudes of a target that were entered in this run, oldest
// first.
func own(e *roster.Entry) []targets.Magnitude {
	var out []targets.Magnitude
	for _, m := range e.Magnitudes {
		if _, ok := logbook.Entered(&m); ok {
			out = append(out, m)
		}
	}
	slices.SortStableFunc(out, func(a, b targets.Magnitude) int { return a.At.Line - b.At.Line })
	return out
}

// mostNamed is how many magnitudes are listed to choose from.
const mostNamed = 4

// removeMagnitude asks which magnitude of the selected star to declare void.
func (d *Desk) removeMagnitude() {
	if d.w.Entry() == nil {
		d.say("no star is selected", false)
		return
	}
	name, list := d.w.Entry().Target.Name, own(d.w.Entry())
	switch len(list) {
	case 0:
		d.say("no magnitude of "+name+" was entered here; M enters one", false)
		return
	case 1:
		d.voidMagnitude(list[0])
		return
	}
	var words []string
	for i := len(list) - 1; i >= 0 && len(words) < mostNamed; i-- {
		words = append(words, fmt.Sprintf("%d: %s %s", list[i].At.Line, table.MagnitudeWord(&list[i]), magnitudeTime(&list[i])))
	}
	if more := len(list) - len(words); more > 0 {
		words = append(words, fmt.Sprintf("%d before", more))
	}
	d.ask1(prompt{label: "remove number", field: kit.NewField(strconv.Itoa(list[len(list)-1].At.Line)), hint: strings.Join(words, "  "),
		take: func(d *Desk, text string) []Task {
			for _, m := range list {
				if strconv.Itoa(m.At.Line) == strings.TrimSpace(text) {
					d.voidMagnitude(m)
					return nil
				}
			}
			d.say(fmt.Sprintf("%q: no magnitude of %s has that number; R lists them", text, name), true)
			return nil
		}})
}

// voidMagnitude declares a magnitude void once that is confirmed.
func (d *Desk) voidMagnitude(m targets.Magnitude) {
	words := table.MagnitudeWord(&m) + " of " + m.Target + ", " + magnitudeTime(&m)
	id, _ := logbook.Entered(&m)
	d.sure("y removes "+words+"; it stays in run.db as void", func(d *Desk) []Task {
		return d.save(write{what: "removal of " + words,
			run: func(ctx context.Context, b *logbook.Book) (any, error) { return nil, b.VoidMagnitude(ctx, id) },
			done: func(d *Desk, _ any) []Task {
				d.say("removed: "+words, false)
				return d.renew()
			}})
	})
}

// renewed is a roster that heeds the magnitudes of the log.
type renewed struct {
	base, roster *roster.Roster // roster nil: nothing has changed
	err          error
}

// renew has the forecasts heed what magnitudes the log holds now.
func (d *Desk) renew() []Task {
	if d.src.Book == nil {
		return nil
	}
	d.works++
	book, r, now := d.src.Book, d.src.Roster, d.w.Wall
	return []Task{{"heeding magnitudes", func() any {
		list, err := book.Magnitudes(context.Background())
		if err != nil {
			return renewed{base: r, err: err}
		}
		if change := changed(r, list, now); len(change) > 0 {
			n := r.WithMagnitudes(change)
			for i := range change {
				n.Prepared(i)
			}
			return renewed{base: r, roster: n}
		}
		return renewed{base: r}
	}}}
}

// changed lists the targets that have other magnitudes with those of the log,
// which take the place of what was known of the log before.
func changed(r *roster.Roster, list []targets.Magnitude, now time.Time) map[int][]targets.Magnitude {
	byKey := map[string][]targets.Magnitude{}
	for _, m := range list {
		key := targets.Key(m.Target)
		byKey[key] = append(byKey[key], m)
	}
	out := map[int][]targets.Magnitude{}
	for i := range r.Len() {
		e := r.Entry(i)
		if len(byKey) == 0 && len(e.Magnitudes) == 0 {
			continue
		}
		var mags []targets.Magnitude
		for _, m := range e.Magnitudes {
			if _, ok := logbook.Entered(&m); !ok {
				mags = append(mags, m)
			}
		}
		entered := byKey[targets.Key(e.Target.Name)]
		if id := targets.Key(e.Target.ID); id != "" && id != targets.Key(e.Target.Name) {
			entered = slices.Concat(entered, byKey[id])
		}
		mags, _ = table.SetAside(append(mags, entered...), now)
		if !slices.Equal(mags, e.Magnitudes) {
			out[i] = mags
		}
	}
	return out
}

// renewedBy takes the new roster, unless another came meanwhile.
func (d *Desk) renewedBy(r renewed) []Task {
	d.works--
	switch {
	case r.err != nil:
		d.say("magnitudes cannot be read: "+r.err.Error(), true)
		return nil
	case r.base != d.src.Roster:
		return d.renew()
	case r.roster == nil:
		return nil
	}
	d.src.Roster = r.roster
	var keep []int32
	if d.w.Snap != nil && d.cancel == nil { // a question of the user's stays one
		keep = d.w.Snap.Order
	}
	return d.ask(keep)
}
