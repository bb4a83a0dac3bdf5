package main

import (
	"context"
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"evenfall/astro"
	"evenfall/astro/ephem"
	"evenfall/targets/light"
	"evenfall/targets/roster"
	"evenfall/tui/desk"
	"evenfall/tui/kit"
)

func eventsCommand(w world, o *options) *cobra.Command {
	return &cobra.Command{
		Use:   "events [TARGET...]",
		Short: "eclipses, maxima, phases and other dated happenings of a night or a range",
		Long: "What happens when: eclipses, maxima, phases and other dated happenings of a night (--night) or\n" +
			"a range (--night, --until), of all targets or of those named, in order of time as seen at the site;\n" +
			"with one sigma, where the target stands then and whether it can be observed. Status: good;\n" +
			"assumed, where an error of the elements had to be; expired, uncertain by over a tenth of the period.\n" +
			"--format text, json, csv or md.\n\n" + caution,
		Example: "  evenfall events --night 2026-12-01 --until 2026-12-07\n  evenfall events 'V471 Tau' --format json",
		RunE:    func(cmd *cobra.Command, args []string) error { return runEvents(cmd.Context(), w, o, args) },
	}
}

// dated is what happens in the nights asked for.
type dated struct {
	*session
	first, last astro.Date
	roster      *roster.Roster
	rows        []int32
	list        []roster.Happening
	spans       map[astro.Date]astro.Span
}

func runEvents(ctx context.Context, w world, o *options, names []string) error {
	if err := o.oneOf("text", "json", "csv", "md"); err != nil {
		return err
	}
	if ctx == nil {
		ctx = context.Background()
	}
	first, last, given, err := o.dates()
	if err != nil {
		return err
	}
	one := *o
	one.until = "" // the session is of the first night
	s, err := openSession(w, &one)
	if err != nil {
		return err
	}
	if !given {
		first, last = s.night.Date, s.night.Date
	}
	d := dated{session: s, first: first, last: last}
	for _, name := range names {
		i, err := s.find(name)
		if err != nil {
			return err
		}
		d.rows = append(d.rows, int32(i))
	}
	if len(names) == 0 {
		for i := range s.targets {
			d.rows = append(d.rows, int32(i))
		}
	}
	src := s.source(o)
	d.roster = src.Roster
	if err := d.work(ctx, &src); err != nil {
		return err
	}
	switch o.format {
	case "json":
		err = printJSON(w.out, d.shape())
	case "csv":
		err = d.csv(w.out)
	case "md":
		err = d.markdown(w.out)
	default:
		err = d.text(w.out, w.width)
	}
	if err != nil {
		return err
	}
	return s.status()
}

// work dates what happens and says where the targets stand then, night by
// night.
func (d *dated) work(ctx context.Context, src *desk.Source) error {
	d.spans = map[astro.Date]astro.Span{}
	for n := d.first; !d.last.Before(n); n = n.Next(1) {
		if len(d.spans) == maxNights {
			return usagef("--until %s: more than %d nights; ask for fewer at a time", d.last, maxNights)
		}
		span, err := ephem.NoonToNoon(d.site, n)
		if err != nil {
			return usagef("%w", err)
		}
		d.spans[n] = span
	}
	span := astro.Span{From: d.spans[d.first].From, Until: d.spans[d.last].Until}
	var err error
	if d.list, err = d.roster.Happenings(ctx, d.rows, d.site, span, func(row int, from, until astro.Instant) []light.Event {
		return d.roster.Prepared(row).Light.EventsAsOf(d.site, d.at, from, until)
	}); err != nil {
		return err
	}
	for from := 0; from < len(d.list); {
		until := from
		for until < len(d.list) && d.list[until].Night == d.list[from].Night {
			until++
		}
		n, err := src.Night(d.list[from].Night)
		if err != nil {
			return err
		}
		if err := d.roster.Stand(ctx, n, d.list[from:until]); err != nil {
			return err
		}
		from = until
	}
	return nil
}

type jsonHappening struct {
	Target  string   `json:"target"`
	Kind    string   `json:"kind"`
	At      string   `json:"at_utc"`
	AtBJD   *float64 `json:"at_bjd_tdb"`
	SigmaS  *float64 `json:"sigma_s"`
	Start   *string  `json:"start_utc"`
	End     *string  `json:"end_utc"`
	Alt     float64  `json:"alt_deg"`
	Airmass *float64 `json:"airmass"`
	Can     bool     `json:"can"`
	Status  string   `json:"status"`
	Why     string   `json:"why_not,omitempty"`
	Words   string   `json:"words,omitempty"`
}

type jsonEvents struct {
	Demonstration bool            `json:"demonstration,omitempty"`
	Site          jsonSite        `json:"site"`
	Night         string          `json:"night"`
	Until         string          `json:"until"`
	Events        []jsonHappening `json:"events"`
}

func (d *dated) shape() jsonEvents {
	out := jsonEvents{Demonstration: d.demo, Site: siteShape(d.site), Night: d.first.String(), Until: d.last.String(), Events: []jsonHappening{}}
	for i := range d.list {
		h := &d.list[i]
		e := jsonHappening{Target: d.targets[h.Row].Name, Kind: h.Kind, At: stamp(h.At), AtBJD: rounded(h.BJDTDB, jdDigits), SigmaS: rounded(h.SigmaS, 2),
			Start: stampOrNil(h.Start), End: stampOrNil(h.End), Alt: round(h.Altitude.Deg(), placeDigits), Can: h.Can, Status: h.Status, Why: h.Why, Words: h.Words}
		if h.AirOK {
			e.Airmass = rounded(float64(h.Airmass), airDigits)
		}
		out.Events = append(out.Events, e)
	}
	return out
}

func (d *dated) csv(out io.Writer) error {
	c := csv.NewWriter(out)
	c.Write(strings.Split("target,kind,at_utc,at_bjd_tdb,sigma_s,start_utc,end_utc,alt_deg,airmass,can,status,words", ","))
	text := func(s *string) string {
		if s == nil {
			return ""
		}
		return *s
	}
	for _, e := range d.shape().Events {
		c.Write([]string{e.Target, e.Kind, e.At, opt(e.AtBJD), opt(e.SigmaS), text(e.Start), text(e.End), num(e.Alt), opt(e.Airmass), fmt.Sprint(e.Can), e.Status, e.Words})
	}
	c.Flush()
	return c.Error()
}

// vagueS is the uncertainty, s, from which a time of day says nothing.
const vagueS = 43200

// stretch is from when until when it lasts; "" for an instant.
func stretch(h *roster.Happening) string {
	if h.Start == nil || h.End == nil || h.SigmaS > vagueS {
		return ""
	}
	layout, round := "15:04:05", time.Second
	if !(h.SigmaS <= 60) {
		layout, round = "15:04", time.Minute
	}
	return h.Start.UTC().Round(round).Format(layout) + "-" + h.End.UTC().Round(round).Format(layout)
}

// row is a happening as people read it.
func (d *dated) row(h *roster.Happening) (utc, local, alt, air, can string) {
	layout := "15:04:05"
	round := time.Second
	if !(h.SigmaS <= 1800) {
		layout, round = "15:04", time.Minute
	}
	if h.SigmaS > vagueS { // a day is all that can be said
		return "about", "", "-", "-", "-"
	}
	utc = h.At.UTC().Round(round).Format(layout)
	local = h.At.UTC().Round(time.Minute).In(d.location()).Format("15:04")
	alt, air, can = fmt.Sprintf("%.1f", h.Apparent.Deg()), "-", "can"
	if h.AirOK {
		air = fmt.Sprintf("%.2f", float64(h.Airmass))
	}
	if h.AirOK && h.Airmass >= 10 {
		air = ">10"
	}
	if !h.Can {
		can = kit.ShortReason(h.Code)
	}
	return utc, local, alt, air, can
}

func sigma(s float64) string {
	if math.IsNaN(s) || s < 0 {
		return "?"
	}
	return kit.Duration(s)
}

// summary says of how many targets something is dated.
func (d *dated) summary() string {
	of := map[int32]bool{}
	for i := range d.list {
		of[d.list[i].Row] = true
	}
	return fmt.Sprintf("%s of %d of %s", count(len(d.list), "happening"), len(of), count(len(d.rows), "target"))
}

func (d *dated) text(out io.Writer, width int) error {
	var b strings.Builder
	fmt.Fprintln(&b, d.heading())
	zone := d.location() != time.UTC
	local := func(s string) string {
		if !zone {
			return ""
		}
		return fmt.Sprintf("%-5s ", s)
	}
	head := fmt.Sprintf("%-8s %s%-13s %-10s %6s %5s %5s %-17s %s", "UTC", local("local"), "target", "kind", "+-", "alt", "X", "observable", "status")
	for i := range d.list {
		h := &d.list[i]
		if i == 0 || h.Night != d.list[i-1].Night {
			span := d.spans[h.Night]
			fmt.Fprintf(&b, "\nNight of %s, from %s UTC on\n%s\n", h.Night, span.From.UTC().Format("2 Jan 15:04"), head)
		}
		utc, here, alt, air, can := d.row(h)
		line := fmt.Sprintf("%-8s %s%-13s %-10s %6s %5s %5s %-17s %s", utc, local(here), kit.Cut(d.targets[h.Row].Name, 13), kit.Cut(h.Kind, 10), sigma(h.SigmaS), alt, air, can, h.Status)
		if s := stretch(h); s != "" && (width == 0 || len(line)+2+len(s) <= width) {
			line += "  " + s
		}
		fmt.Fprintln(&b, strings.TrimRight(line, " "))
	}
	d.footnotes(&b)
	fmt.Fprintf(&b, "\n%s", d.summary())
	if zone {
		fmt.Fprintf(&b, "; %s", d.zoneName())
	}
	b.WriteString("\n+-: one sigma; alt: refracted, deg; X: airmass; status: assumed, where an error of\n" +
		"the elements had to be; expired: uncertain by over a tenth of the period\n")
	_, err := io.WriteString(out, b.String())
	return err
}

// footnotes explains what was assumed, once for each target.
func (d *dated) footnotes(b *strings.Builder) {
	said := map[string]bool{}
	for i := range d.list {
		h := &d.list[i]
		line := d.targets[h.Row].Name + ": " + h.Words
		if h.Words == "" || said[line] || len(said) >= mostNotes {
			continue
		}
		if len(said) == 0 {
			b.WriteString("\n")
		}
		said[line] = true
		for _, part := range kit.Wrap(line, 86, 2) {
			fmt.Fprintln(b, part)
		}
	}
}

// mostNotes is how many explanations a table is followed by.
const mostNotes = 40

func (d *dated) markdown(out io.Writer) error {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n\n| UTC | %s | target | kind | +- | alt, deg | X | observable | status | from-until |\n|---|---|---|---|---|---|---|---|---|---|\n", d.heading(), d.zoneName())
	for i := range d.list {
		h := &d.list[i]
		utc, here, alt, air, can := d.row(h)
		fmt.Fprintf(&b, "| %s %s | %s | %s | %s | %s | %s | %s | %s | %s | %s |\n", h.At.UTC().Format("2006-01-02"), utc, here,
			strings.ReplaceAll(d.targets[h.Row].Name, "|", "\\|"), h.Kind, sigma(h.SigmaS), alt, air, can, h.Status, stretch(h))
	}
	_, err := fmt.Fprintf(out, "%s\n%s\n", b.String(), d.summary())
	return err
}
