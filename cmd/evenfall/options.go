package main

import (
	"math"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"evenfall/astro"
	"evenfall/targets"
)

// options are the flags that mean the same everywhere, as they were written.
type options struct {
	run                string
	at, night, until   string
	lat, lon, elev     float64
	zone               string
	targets            []string
	requests           string
	magnitudes         []string
	band               string
	level              float64
	format             string
	sort               string
	theme, glyphs      string
	tick               string
	observer           string
	population         string
	handover           bool
	latSet, lonSet     bool
	elevSet, formatSet bool
	zoneSet            bool
}

// bind declares the flags on the root command, for all commands.
func (o *options) bind(root *cobra.Command) {
	f := root.PersistentFlags()
	f.StringVar(&o.run, "run", "", "run folder `DIR` (default: the working directory, else the demonstration)")
	f.StringVar(&o.at, "at", "", "fix the clock at `TIME`, RFC 3339, e.g. 2026-12-02T04:00:00Z")
	f.StringVar(&o.night, "night", "", "the night of `YYYY-MM-DD`, named by its evening")
	f.StringVar(&o.until, "until", "", "last night `YYYY-MM-DD` of a range that --night begins")
	f.Float64Var(&o.lat, "lat", 0, "latitude `DEG` of a site without a run folder")
	f.Float64Var(&o.lon, "lon", 0, "its longitude `DEG`, east positive")
	f.Float64Var(&o.elev, "elev", 0, "its elevation `M`")
	f.StringVar(&o.zone, "zone", "", "its IANA time `ZONE` for display, e.g. America/Santiago (default UTC)")
	f.StringArrayVar(&o.targets, "targets", nil, "list `FILE` instead of the run's lists; repeatable; - is standard input, builtin the built-in list")
	f.StringVar(&o.requests, "requests", "", "requests `FILE` instead of the run's")
	f.StringArrayVar(&o.magnitudes, "magnitudes", nil, "measured magnitudes `FILE`, added to the run's; repeatable")
	f.StringVar(&o.band, "band", "", "photometric `BAND` for brightness, e.g. V (default: the best known)")
	f.Float64Var(&o.level, "level", 0.8, "probability `P` of brightness intervals, between 0 and 1")
	f.StringVar(&o.population, "population", "", "`disc|field|old`: what giants are taken for before they are looked at (default: run.toml, else field)")
	f.StringVar(&o.format, "format", "text", "`text|json|csv`")
	root.PersistentPreRunE = func(cmd *cobra.Command, _ []string) error {
		o.latSet, o.lonSet = cmd.Flags().Changed("lat"), cmd.Flags().Changed("lon")
		o.elevSet, o.zoneSet = cmd.Flags().Changed("elev"), cmd.Flags().Changed("zone")
		o.formatSet = cmd.Flags().Changed("format")
		return o.validate()
	}
	root.RegisterFlagCompletionFunc("format", cobra.FixedCompletions([]string{"text", "json", "csv"}, cobra.ShellCompDirectiveNoFileComp))
}

// validate checks what can be checked without reading anything.
func (o *options) validate() error {
	if o.latSet != o.lonSet {
		return usagef("a site needs both --lat and --lon, in degrees, east positive")
	}
	if o.elevSet && !o.latSet {
		return usagef("--elev goes with --lat and --lon; a run folder has elevation_m in run.toml")
	}
	if o.zoneSet && !o.latSet {
		return usagef("--zone goes with --lat and --lon; a run folder has time_zone in run.toml")
	}
	if o.latSet && o.run != "" {
		return usagef("--run and --lat exclude each other: a run folder brings its own site")
	}
	if !(math.Abs(o.lat) <= 90) {
		return usagef("--lat %g: beyond the pole; write degrees from -90 to 90", o.lat)
	}
	if !(o.lon >= -360 && o.lon <= 360) {
		return usagef("--lon %g: write degrees east from -180 to 360", o.lon)
	}
	if !(o.elev >= -500 && o.elev <= 9000) {
		return usagef("--elev %g: write metres from -500 to 9000", o.elev)
	}
	if !(o.level > 0 && o.level < 1) {
		return usagef("--level %g: a probability lies between 0 and 1; write e.g. 0.8", o.level)
	}
	if o.population != "" && !slices.Contains(targets.Populations, targets.Population(o.population)) {
		return usagef("--population %s: use disc, field or old", quote(o.population))
	}
	if o.until != "" && o.night == "" {
		return usagef("--until ends a range that --night begins; give both")
	}
	if o.band != "" && !knownBand(o.band) {
		return usagef("--band %s: not a band; use one of %s", quote(o.band), bandNames())
	}
	if _, err := time.LoadLocation(o.zone); err != nil {
		return usagef("--zone %s: not a time zone; write an IANA name, e.g. America/Santiago", quote(o.zone))
	}
	return nil
}

// lineBands are the bands of nebulae.
var lineBands = []targets.Band{"Ha", "Hb", "O3"}

func knownBand(b string) bool {
	return slices.Contains(targets.Bands, targets.Band(b)) || slices.Contains(lineBands, targets.Band(b))
}

func bandNames() string {
	var names []string
	for _, b := range slices.Concat(targets.Bands, lineBands) {
		names = append(names, string(b))
	}
	return strings.Join(names, " ")
}

// oneOf checks the format a command is asked for.
func (o *options) oneOf(formats ...string) error {
	if !slices.Contains(formats, o.format) {
		return usagef("--format %s: use one of %s", quote(o.format), strings.Join(formats, ", "))
	}
	return nil
}

// instant returns the time that --at fixes, or false.
func (o *options) instant() (time.Time, bool, error) {
	if o.at == "" {
		return time.Time{}, false, nil
	}
	t, err := time.Parse(time.RFC3339, o.at)
	if err != nil {
		return t, false, usagef("--at %s: not a time; write e.g. 2026-12-02T04:00:00Z", quote(o.at))
	}
	return t.UTC(), true, nil
}

// dates returns the nights of --night and --until; false: none given.
func (o *options) dates() (first, last astro.Date, given bool, err error) {
	if o.night == "" {
		return first, last, false, nil
	}
	if first, err = astro.ParseDate(o.night); err != nil {
		return first, last, false, usagef("--night: %w", err)
	}
	last = first
	if o.until != "" {
		if last, err = astro.ParseDate(o.until); err != nil {
			return first, last, false, usagef("--until: %w", err)
		}
	}
	if last.Before(first) {
		return first, last, false, usagef("--until %s comes before --night %s", last, first)
	}
	return first, last, true, nil
}
