package main

import (
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"evenfall/astro"
	"evenfall/astro/ephem"
)

const maxNights = 800 // a range of more is a slip of the pen

func almanacCommand(w world, o *options) *cobra.Command {
	return &cobra.Command{
		Use:   "almanac",
		Short: "Sun, twilights, Moon and dark hours of a night or a range",
		Long: "Sun, twilights, Moon and dark hours of a night (--night) or a range (--night, --until).\n" +
			"A night runs from noon to noon of local mean solar time and bears the date of its evening.\n\n" + caution,
		Example: "  evenfall almanac --lat -29.26 --lon -70.73 --elev 2400 --night 2026-12-01",
		Args:    noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if err := o.oneOf("text", "json", "csv"); err != nil {
				return err
			}
			s, err := openSite(w, o)
			if err != nil {
				return err
			}
			nights, err := nightsOf(w, o, s.site)
			if err != nil {
				return err
			}
			if err := printAlmanac(w.out, o.format, s, nights); err != nil {
				return err
			}
			return s.status()
		},
	}
}

// nightsOf works out the nights asked for; by default the coming one.
func nightsOf(w world, o *options, site astro.Site) ([]ephem.Night, error) {
	first, last, given, err := o.dates()
	if err != nil {
		return nil, err
	}
	if !given {
		at, err := o.now(w, site)
		if err != nil {
			return nil, err
		}
		if first, err = tonight(site, at); err != nil {
			return nil, err
		}
		last = first
	}
	var nights []ephem.Night
	for d := first; !last.Before(d); d = d.Next(1) {
		if len(nights) == maxNights {
			return nil, usagef("--until %s: more than %d nights; ask for fewer at a time", last, maxNights)
		}
		n, err := ephem.NightOf(site, d)
		if err != nil {
			return nil, usagef("%w", err)
		}
		nights = append(nights, n)
	}
	return nights, nil
}

type jsonDuskDawn struct {
	Dusk *string `json:"dusk_utc"`
	Dawn *string `json:"dawn_utc"`
}

type jsonMoonTimes struct {
	Rise []string `json:"rise_utc"`
	Set  []string `json:"set_utc"`
}

type jsonNight struct {
	Night       string        `json:"night"`
	Sunset      *string       `json:"sunset_utc"`
	Sunrise     *string       `json:"sunrise_utc"`
	Civil       jsonDuskDawn  `json:"civil"`
	Nautical    jsonDuskDawn  `json:"nautical"`
	Ast         jsonDuskDawn  `json:"astronomical"`
	Sun         string        `json:"sun"`
	SunLowest   float64       `json:"sun_lowest_deg"`
	SunHighest  float64       `json:"sun_highest_deg"`
	Moon        jsonMoonTimes `json:"moon"`
	Illuminated float64       `json:"illuminated_at_midnight"`
	DarkHours   float64       `json:"dark_hours_h"`
	NightHours  float64       `json:"night_hours_h"`
}

func nightShape(n *ephem.Night) jsonNight {
	twilight := func(t *ephem.Twilight) jsonDuskDawn { return jsonDuskDawn{stampOrNil(t.Dusk), stampOrNil(t.Dawn)} }
	out := jsonNight{
		Night: n.Date.String(), Sunset: stampOrNil(n.Sunset), Sunrise: stampOrNil(n.Sunrise),
		Civil: twilight(&n.Civil), Nautical: twilight(&n.Nautical), Ast: twilight(&n.Ast),
		Sun: n.Sun, SunLowest: round(n.SunLowest.Deg(), 4), SunHighest: round(n.SunHighest.Deg(), 4),
		Moon:        jsonMoonTimes{[]string{}, []string{}},
		Illuminated: round(n.MoonLit, 4),
		DarkHours:   round(astro.Total(n.Dark).Hours(), 4),
		NightHours:  round(astro.Total(n.Ast.Below).Hours(), 4),
	}
	for _, t := range n.Moonrise {
		out.Moon.Rise = append(out.Moon.Rise, stamp(t))
	}
	for _, t := range n.Moonset {
		out.Moon.Set = append(out.Moon.Set, stamp(t))
	}
	return out
}

func printAlmanac(w io.Writer, format string, s *siteChoice, nights []ephem.Night) error {
	if format == "text" {
		return almanacText(w, s, nights)
	}
	var shapes []jsonNight
	for i := range nights {
		shapes = append(shapes, nightShape(&nights[i]))
	}
	if format == "csv" {
		return almanacCSV(w, shapes)
	}
	return printJSON(w, struct {
		Demonstration bool        `json:"demonstration,omitempty"`
		Site          jsonSite    `json:"site"`
		Nights        []jsonNight `json:"nights"`
	}{s.demo, siteShape(s.site), shapes})
}

func almanacCSV(w io.Writer, shapes []jsonNight) error {
	c := csv.NewWriter(w)
	c.Write(strings.Split("night,sunset_utc,civil_dusk_utc,nautical_dusk_utc,astronomical_dusk_utc,"+
		"astronomical_dawn_utc,nautical_dawn_utc,civil_dawn_utc,sunrise_utc,sun,sun_lowest_deg,sun_highest_deg,"+
		"moonrise_utc,moonset_utc,illuminated_at_midnight,dark_hours_h,night_hours_h", ","))
	text := func(s *string) string {
		if s == nil {
			return ""
		}
		return *s
	}
	for _, n := range shapes {
		c.Write([]string{n.Night, text(n.Sunset), text(n.Civil.Dusk), text(n.Nautical.Dusk), text(n.Ast.Dusk),
			text(n.Ast.Dawn), text(n.Nautical.Dawn), text(n.Civil.Dawn), text(n.Sunrise), n.Sun,
			fmt.Sprint(n.SunLowest), fmt.Sprint(n.SunHighest),
			strings.Join(n.Moon.Rise, " "), strings.Join(n.Moon.Set, " "),
			fmt.Sprint(n.Illuminated), fmt.Sprint(n.DarkHours), fmt.Sprint(n.NightHours)})
	}
	c.Flush()
	return c.Error()
}

func almanacText(w io.Writer, s *siteChoice, nights []ephem.Night) error {
	fmt.Fprintln(w, s.heading())
	fmt.Fprintf(w, "Times are %s, to the minute.\n", s.zoneName())
	if d := dip(s.site.HeightM); d > 0 {
		fmt.Fprintf(w, "Sunset and sunrise are for a sea-level horizon; from this height a sea horizon lies %.0f' lower.\n", d)
	}
	if len(nights) == 1 {
		oneNight(w, s, &nights[0])
		return nil
	}
	fmt.Fprintln(w)
	fmt.Fprintln(w, "night       sunset  -6    -12   -18   | -18   -12   -6    sunrise  night h  dark h  Moon lit  up")
	for i := range nights {
		n := &nights[i]
		c := s.hm
		fmt.Fprintf(w, "%s  %s   %s %s %s | %s %s %s %s    %6.2f  %6.2f     %3.0f %%  %s\n",
			n.Date, c(n.Sunset), c(n.Civil.Dusk), c(n.Nautical.Dusk), c(n.Ast.Dusk),
			c(n.Ast.Dawn), c(n.Nautical.Dawn), c(n.Civil.Dawn), c(n.Sunrise),
			astro.Total(n.Ast.Below).Hours(), astro.Total(n.Dark).Hours(), 100*n.MoonLit, moonUp(s, n))
	}
	return nil
}

// oneNight prints a night in the order in which it happens.
func oneNight(w io.Writer, s *siteChoice, n *ephem.Night) {
	fmt.Fprintf(w, "\nNight of %s\n", n.Date)
	line := func(what string, t *astro.Instant) { fmt.Fprintf(w, "  %-28s %s\n", what, s.hm(t)) }
	line("sunset", n.Sunset)
	line("civil dusk, Sun -6 deg", n.Civil.Dusk)
	line("nautical dusk, Sun -12 deg", n.Nautical.Dusk)
	line("dark from, Sun -18 deg", n.Ast.Dusk)
	line("dark until, Sun -18 deg", n.Ast.Dawn)
	line("nautical dawn, Sun -12 deg", n.Nautical.Dawn)
	line("civil dawn, Sun -6 deg", n.Civil.Dawn)
	line("sunrise", n.Sunrise)
	switch n.Sun {
	case ephem.NeverSets:
		fmt.Fprintf(w, "  the Sun does not set: lowest %.1f deg\n", n.SunLowest.Deg())
	case ephem.NeverRises:
		fmt.Fprintf(w, "  the Sun does not rise: highest %.1f deg\n", n.SunHighest.Deg())
	default:
		fmt.Fprintf(w, "  Sun lowest %.1f deg\n", n.SunLowest.Deg())
	}
	fmt.Fprintf(w, "  Moon up %s, %.0f %% lit at solar midnight\n", moonUp(s, n), 100*n.MoonLit)
	fmt.Fprintf(w, "  night (Sun below -18 deg) %.2f h, of it without Moon %.2f h\n",
		astro.Total(n.Ast.Below).Hours(), astro.Total(n.Dark).Hours())
}

// moonUp writes when the Moon stands above the horizon in a night.
func moonUp(s *siteChoice, n *ephem.Night) string {
	var parts []string
	for _, m := range n.MoonUp {
		from, until := "noon", "noon"
		if m.From.After(n.Span.From) {
			from = s.hm(&m.From)
		}
		if m.Until.Before(n.Span.Until) {
			until = s.hm(&m.Until)
		}
		parts = append(parts, from+"-"+until)
	}
	if len(parts) == 0 {
		return "never"
	}
	return strings.Join(parts, ", ")
}

// hm writes a time of day in the site's zone; dashes where it does not come.
func (s *siteChoice) hm(t *astro.Instant) string {
	if t == nil {
		return "--:--"
	}
	return t.UTC().In(s.location()).Round(time.Minute).Format("15:04")
}

// dip returns how far below the level a sea horizon appears from a height.
//
//	1.76' sqrt(h)     h in metres, mean refraction included
//
// Source: common practice of navigation, no source.
func dip(heightM float64) float64 {
	if heightM <= 0 {
		return 0
	}
	return 1.76 * math.Sqrt(heightM)
}
