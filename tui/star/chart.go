package star

import (
	"context"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// chartKey is what a light curve was drawn for.
type chartKey struct {
	p          *moment.Prepared
	night      *moment.Night
	ask        light.Ask
	cols, rows int
	look       *kit.Look
}

// chart is a light curve: what was measured, tonight, and the forecast of the
// coming months. It is drawn in the background and does not change.
type chart struct {
	key    chartKey
	row    int
	raster *kit.Raster // nil: nothing to draw
	y      []string    // labels by row, "" none
	rule   string      // the axis of time
	dates  string      // its labels
	head   string      // what is expected tonight
	basis  string      // why
	legend []string
}

// How far the chart reaches, days: one period within bounds, as far back as
// magnitudes go.
const (
	leastAhead, mostAhead, usualAhead = 150, 420, 240
	leastBack, mostBack               = 15, 420
)

// mark is a measured magnitude with its sign.
type mark struct {
	days, mag float64
	sign      byte
	ink       kit.Role
}

// The signs of measured magnitudes.
const (
	signSeen, signLimit, signUnlikely, signDoubted, signAside = 'o', 'v', '?', 'V', 'x'
)

// makeChart works out and draws a light curve.
func makeChart(ctx context.Context, key chartKey, row int, from kit.Lights) (*chart, error) {
	c := &chart{key: key, row: row, y: make([]string, key.rows)}
	tonight := key.night.Midnight
	ahead := float64(usualAhead)
	if p := key.p.Target.Var.PeriodD; p.Known && p.Value > 0 {
		ahead = math.Max(leastAhead, math.Min(p.Value, mostAhead))
	}
	first := from.Chart(key.p, []astro.Instant{tonight}, key.ask)
	if len(first) == 0 || ctx.Err() != nil {
		return c, ctx.Err()
	}
	band := first[0].Band
	if band == "" {
		band = key.ask.Band
	}
	c.basis = first[0].Basis
	c.head = key.night.Date.Midnight().Format("tonight, 2 Jan 2006, ") + strings.Join(strings.Fields(kit.ExpectWord(&first[0])), " ")
	marks, other := marksOf(from.Past(key.p), band, tonight)
	back := float64(leastBack)
	for _, m := range marks {
		back = math.Max(back, -m.days+8)
	}
	back = math.Min(back, mostBack)
	b := sheet{c: kit.NewCanvas(key.cols, key.rows), cols: key.cols, rows: key.rows, from: -back, until: ahead, ascii: key.look.Glyphs == kit.ASCII}
	at := make([]astro.Instant, 0, key.cols)
	for col := b.col(0); col < key.cols; col++ {
		at = append(at, tonight.Add(time.Duration(math.Max(b.days(col), 0)*86400e9)))
	}
	list := from.Chart(key.p, at, key.ask)
	if ctx.Err() != nil {
		return c, ctx.Err()
	}
	c.draw(&b, list, marks, tonight, band)
	c.explain(marks, other, &first[0], b.ascii)
	return c, nil
}

// marksOf sorts measured magnitudes into those of a band, with their signs,
// and the number of those in others.
func marksOf(list []light.Seen, band targets.Band, tonight astro.Instant) (marks []mark, other int) {
	for i := range list {
		s := &list[i]
		days := s.At.Sub(tonight).Hours() / 24
		if s.At.IsZero() || math.IsNaN(s.Mag) || days < -mostBack || days > 1 {
			continue
		}
		if s.Band != band && !(sameAs(s.Band) == sameAs(band)) {
			other++
			continue
		}
		m := mark{days, s.Mag, signSeen, kit.Mark}
		switch {
		case !s.Used:
			m.sign, m.ink = signAside, kit.Dim
		case s.Limit && s.Unlikely:
			m.sign, m.ink = signDoubted, kit.Warn
		case s.Limit:
			m.sign, m.ink = signLimit, kit.Text
		case s.Unlikely:
			m.sign, m.ink = signUnlikely, kit.Warn
		}
		marks = append(marks, m)
	}
	return marks, other
}

// sameAs takes visual magnitudes, and those of no band, for V: they differ by
// less than a cell.
func sameAs(b targets.Band) targets.Band {
	if b == "v" || b == "" {
		return "V"
	}
	return b
}

// sheet is the paper: days along, magnitudes down, brighter up.
type sheet struct {
	c           *kit.Canvas
	cols, rows  int
	from, until float64 // days from tonight
	top, bottom float64 // magnitudes
	ascii       bool
}

// col returns the column of a day, days the day of a column's middle.
func (b *sheet) col(days float64) int {
	return min(int((days-b.from)/(b.until-b.from)*float64(b.cols)), b.cols-1)
}
func (b *sheet) days(col int) float64 {
	return b.from + (float64(col)+0.5)/float64(b.cols)*(b.until-b.from)
}

// dot returns the row of dots of a magnitude.
func (b *sheet) dot(mag float64) int {
	return int(math.Floor((mag - b.top) / (b.bottom - b.top) * float64(4*b.rows)))
}

// row returns the row of cells of a magnitude, held within the paper.
func (b *sheet) row(mag float64) int {
	return max(min(int(math.Floor((mag-b.top)/(b.bottom-b.top)*float64(b.rows))), b.rows-1), 0)
}

// scale sets the range of magnitudes.
func (b *sheet) scale(list []light.Forecast, marks []mark) bool {
	lo, hi := math.Inf(1), math.Inf(-1)
	take := func(v float64) {
		if !math.IsNaN(v) && math.Abs(v) < 60 {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
	}
	for i := range list {
		if f := &list[i]; f.Known {
			take(f.Mag.Mags())
			take(f.Lo.Mags())
			take(f.Hi.Mags())
		}
	}
	for _, m := range marks {
		take(m.mag)
	}
	if lo > hi {
		return false
	}
	pad := math.Max(0.06*(hi-lo), (1-(hi-lo))/2)
	b.top, b.bottom = lo-math.Max(pad, 0.05), hi+math.Max(pad, 0.05)
	return true
}

// draw puts everything onto the paper.
func (c *chart) draw(b *sheet, list []light.Forecast, marks []mark, tonight astro.Instant, band targets.Band) {
	if b.cols < 10 || b.rows < 2 || !b.scale(list, marks) {
		return
	}
	c.labels(b)
	now, title := b.col(0), string(band)+", mag"
	left := 1
	if now <= len(title)+1 {
		left = now + 2
	}
	for r := range b.rows {
		b.c.Text(now, r, kit.Dim, "|")
	}
	if b.ascii {
		b.letters(list, now)
	} else {
		b.lines(list, now)
	}
	b.c.Text(left, 0, kit.Dim, title)
	for _, m := range marks {
		b.c.Text(b.col(m.days), b.row(m.mag), m.ink, string(m.sign))
	}
	c.raster = b.c.Raster(c.key.look)
	c.axis(b, tonight, now)
}

// median is the middle of a forecast; NaN where the phase is unknown, as the
// range alone is then worth showing.
func median(f *light.Forecast) float64 {
	if f.Phase != nil && f.Phase.Status == light.PhaseUnknown {
		return math.NaN()
	}
	return f.Mag.Mags()
}

// letters draws the forecast with characters: dots for the interval, = for the
// median.
func (b *sheet) letters(list []light.Forecast, now int) {
	for i := range list {
		f := &list[i]
		if !f.Known || math.IsNaN(f.Lo.Mags()+f.Hi.Mags()) {
			continue
		}
		ink := kit.Dim
		for r := b.row(f.Lo.Mags()); r <= b.row(f.Hi.Mags()); r++ {
			b.c.Text(now+i, r, ink, ".")
		}
		if m := median(f); !math.IsNaN(m) {
			b.c.Text(now+i, b.row(m), kit.Curve, "=")
		}
	}
}

// lines draws it with dots: the ends of the interval broken, the median whole.
func (b *sheet) lines(list []light.Forecast, now int) {
	broken := func(of func(*light.Forecast) float64, ink kit.Role, whole bool) {
		px, py, was := 0, 0, false
		for i := range list {
			f := &list[i]
			v := of(f)
			if !f.Known || math.IsNaN(v) || math.Abs(v) > 60 {
				was = false
				continue
			}
			x, y := 2*(now+i)+1, max(min(b.dot(v), 4*b.rows-1), 0)
			switch {
			case whole && was:
				b.c.Line(px, py, x, y, ink)
			case whole || i%2 == 0:
				b.c.Dot(x, y, ink)
			}
			px, py, was = x, y, true
		}
	}
	broken(func(f *light.Forecast) float64 { return f.Lo.Mags() }, kit.Dim, false)
	broken(func(f *light.Forecast) float64 { return f.Hi.Mags() }, kit.Dim, false)
	broken(median, kit.Curve, true)
}

// magSteps are how an axis of magnitudes may be divided.
var magSteps = []float64{0.1, 0.2, 0.5, 1, 2, 5, 10}

// labels divides the axis of magnitudes.
func (c *chart) labels(b *sheet) {
	step := magSteps[len(magSteps)-1]
	for _, s := range magSteps {
		if (b.bottom-b.top)/s <= float64(b.rows)/2+1 {
			step = s
			break
		}
	}
	for k := math.Ceil(b.top / step); k*step < b.bottom; k++ {
		decimals := 0
		if step < 1 {
			decimals = 1
		}
		c.y[b.row(k*step)] = strconv.FormatFloat(k*step+0, 'f', decimals, 64)
	}
}

// axis divides the axis of time by months and marks tonight.
func (c *chart) axis(b *sheet, tonight astro.Instant, now int) {
	rule, text := []byte(strings.Repeat("-", b.cols)), []byte(strings.Repeat(" ", b.cols))
	write := func(col int, label string) {
		from := col - len(label)/2
		if from < 0 || from+len(label) > b.cols {
			return
		}
		for i := max(from-1, 0); i < min(from+len(label)+1, b.cols); i++ {
			if text[i] != ' ' {
				return
			}
		}
		copy(text[from:], label)
	}
	rule[now] = '^'
	write(min(max(now, 3), b.cols-4), "tonight")
	start := tonight.UTC().Add(time.Duration(b.from * 86400e9))
	for t := time.Date(start.Year(), start.Month()+1, 1, 0, 0, 0, 0, time.UTC); ; t = t.AddDate(0, 1, 0) {
		days := t.Sub(tonight.UTC()).Hours() / 24
		if days >= b.until {
			break
		}
		col := b.col(days)
		if col != now {
			rule[col] = '+'
		}
		label := t.Format("Jan")
		if t.Month() == time.January {
			label = t.Format("2006")
		}
		write(col, label)
	}
	c.rule, c.dates = string(rule), strings.TrimRight(string(text), " ")
}

// explain writes what the signs mean, those that occur.
func (c *chart) explain(marks []mark, other int, f *light.Forecast, ascii bool) {
	words := map[byte]string{signSeen: "measured", signLimit: "fainter than", signUnlikely: "unlikely, kept", signDoubted: "unlikely limit", signAside: "set aside"}
	say := func(s string) { c.legend = append(c.legend, s) }
	for _, sign := range []byte{signSeen, signLimit, signUnlikely, signDoubted, signAside} {
		for _, m := range marks {
			if m.sign == sign {
				say(string(sign) + " " + words[sign])
				break
			}
		}
	}
	line, band := "line median, ", "dots"
	if ascii {
		line, band = "= median, ", "."
	}
	if math.IsNaN(median(f)) {
		line = "" // the phase is unknown
	}
	if c.raster != nil {
		say(fmt.Sprintf("%s%s %.0f %%", line, band, 100*f.Level))
	}
	if other > 0 {
		say(fmt.Sprintf("%d in other bands", other))
	}
	if len(marks) == 0 {
		say("nothing measured; M enters a magnitude")
	}
}

// wanted settles which light curve is wanted; false: none.
func (s *Screen) wanted(w *kit.World) (chartKey, bool) {
	if w.Moment() == nil || s.detail == nil {
		return chartKey{}, false
	}
	l := s.full(w.Width, w.Body())
	if l.chart == 0 {
		return chartKey{}, false
	}
	cols, rows := l.plot(w.Width)
	n := w.Snap.Scene.Night
	want := w.Snap.Roster.Want(n, w.Selected)
	ask := light.Ask{Band: want.Band, Level: want.Level}
	return chartKey{w.Snap.Roster.Prepared(w.Selected), n, ask, cols, rows, w.Look}, cols >= 10 && rows >= 2
}

// redraw asks for another light curve where the one there is no longer holds.
func (s *Screen) redraw(w *kit.World) kit.Job {
	key, ok := s.wanted(w)
	if !ok || key == s.askedChart {
		return nil
	}
	s.askedChart = key
	row, from := w.Selected, kit.LightsOf(w)
	return kit.Work{Name: "drawing the light curve", Run: func(ctx context.Context) (kit.Result, error) {
		return makeChart(ctx, key, row, from)
	}}
}
