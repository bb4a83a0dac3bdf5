package desk

import (
	"context"
	"slices"
	"time"

	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/tui/diagram"
	"evenfall/tui/dome"
	"evenfall/tui/events"
	"evenfall/tui/finder"
	"evenfall/tui/kit"
	"evenfall/tui/plain"
	"evenfall/tui/star"
)

// open puts a screen of the selected star on top, or goes back to where it is
// up already, so that going to and fro between two makes no pile of them.
func (d *Desk) open(title string) {
	for i, s := range d.screens {
		if s.Title() == title {
			d.screens = d.screens[:i+1]
			d.drop()
			return
		}
	}
	switch title {
	case kit.OnStar:
		d.screens = append(d.screens, star.New())
	case kit.OnDiagram:
		d.screens = append(d.screens, diagram.New())
	case kit.OnEvents:
		d.screens = append(d.screens, events.New())
	case kit.OnDome:
		d.screens = append(d.screens, dome.New())
	case kit.OnFinder:
		d.screens = append(d.screens, finder.New())
	}
}

func (d *Desk) close() {
	if len(d.screens) > 1 {
		d.screens = d.screens[:len(d.screens)-1]
		d.drop()
	}
}

func (d *Desk) theme() {
	for i, t := range kit.Themes {
		if t == d.w.Look.Theme {
			t = kit.Themes[(i+1)%len(kit.Themes)]
			d.w.Look = kit.NewLook(t, d.w.Look.Level, d.w.Look.Glyphs)
			d.say("theme "+string(t), false)
			return
		}
	}
}

// copy shows the hand-over lines of the selected star plainly and sends them
// to the clipboard.
func (d *Desk) copy() []Task {
	m := d.w.Moment()
	if m == nil {
		d.say("no star is selected, or it is still being worked out", false)
		return nil
	}
	lines := d.w.HandOver.Lines(&d.w.Entry().Target, m, d.w.Snap.Roster.Prepared(d.w.Selected).Drift)
	s := plain.New(lines)
	d.screens = append(d.screens, s)
	return d.do(kit.Copy{Text: s.Text()})
}

// underWay is work of a screen that has not come back yet.
type underWay struct {
	screen string
	ctx    context.Context
	cancel context.CancelFunc
}

// brought is what the work of a screen brings back.
type brought struct {
	id     int
	screen string
	result kit.Result
}

// work makes the task of a screen's own work.
func (d *Desk) work(j kit.Work) Task {
	d.works++
	d.workID++
	id, screen := d.workID, d.up().Title()
	ctx, cancel := context.WithCancel(context.Background())
	d.under[id] = underWay{screen, ctx, cancel}
	return Task{j.Name, func() any {
		r, err := j.Run(ctx)
		if err != nil {
			r = kit.Failed{Name: j.Name, Err: err}
		}
		return brought{id, screen, r}
	}}
}

// over forgets work that has come back; true: it was ended before.
func (d *Desk) over(id int) bool {
	u, ok := d.under[id]
	if !ok {
		return true
	}
	delete(d.under, id)
	ended := u.ctx.Err() != nil
	u.cancel()
	return ended
}

// drop ends the work of screens that were left.
func (d *Desk) drop() {
	for _, u := range d.under {
		if u.screen != kit.OnEntry && !slices.ContainsFunc(d.screens, func(s kit.Screen) bool { return s.Title() == u.screen }) {
			u.cancel()
		}
	}
}

// foreseen is what the dates ahead were worked out for.
type foreseen struct {
	p      *moment.Prepared
	minute time.Time
}

// foresee dates what the selected target does next, once a minute of the
// moment shown.
func (d *Desk) foresee() {
	if d.w.Moment() == nil {
		d.w.Coming, d.foreseen = nil, foreseen{}
		return
	}
	p, at := d.w.Snap.Roster.Prepared(d.w.Selected), d.w.Snap.Scene.Instant
	if of := (foreseen{p, at.UTC().Truncate(time.Minute)}); of != d.foreseen {
		d.foreseen = of
		d.w.Coming = kit.LightsOf(&d.w).Next(p, at)
		slices.SortStableFunc(d.w.Coming, func(a, b light.Event) int { return a.At.UTC().Compare(b.At.UTC()) })
	}
}
