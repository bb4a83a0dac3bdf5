package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/astro/skyglow"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/moment"
	"evenfall/targets/run"
	"evenfall/targets/table"
)

// siteChoice is the site that a call is about, and what was found on the way.
type siteChoice struct {
	site    astro.Site
	title   string
	demo    bool
	run     *run.Run // nil: an ad-hoc site
	dir     string   // the run folder; "" where there is none
	refused bool     // something in the input was refused
}

// status returns the error that the exit status follows from.
func (s *siteChoice) status() error {
	if s.refused {
		return errRefused
	}
	return nil
}

// location returns the zone for display.
func (s *siteChoice) location() *time.Location {
	loc, err := time.LoadLocation(s.site.Zone)
	if err != nil || s.site.Zone == "" {
		return time.UTC
	}
	return loc
}

func (s *siteChoice) zoneName() string {
	if s.site.Zone == "" {
		return "UTC"
	}
	return "local, " + s.site.Zone
}

// heading names the site in one line.
func (s *siteChoice) heading() string {
	name := s.site.Name
	if name == "" {
		name = "site"
	}
	line := fmt.Sprintf("%s  lat %+.4f  lon %+.4f (east +)  %.0f m", name,
		s.site.Lat.Deg(), s.site.Lon.Signed().Deg(), s.site.HeightM)
	if s.demo {
		line = "DEMONSTRATION  " + line
	}
	return line
}

// demoNotice says that there is no run folder.
const demoNotice = "evenfall: no run.toml in this folder: showing the demonstration run, an invented observatory; " +
	"make a run with 'evenfall new DIR', or give --lat and --lon"

// openSite finds the site: --lat and --lon, a run folder, or the demonstration.
func openSite(w world, o *options) (*siteChoice, error) {
	if o.latSet {
		s := astro.Site{
			Lat: astro.Deg(o.lat), Lon: astro.Deg(o.lon), HeightM: o.elev,
			Air: astro.DefaultWeather(o.elev), Zone: o.zone, Name: "ad-hoc site",
		}
		return &siteChoice{site: s}, nil
	}
	dir := o.run
	if dir == "" {
		if _, err := os.Stat("run.toml"); err != nil {
			fmt.Fprintln(w.err, demoNotice)
			return openRun(w, builtin.Demo(), "demonstration", true)
		}
		dir = "."
	}
	if info, err := os.Stat(dir); err != nil || !info.IsDir() {
		return nil, usagef("--run %s: no such folder; make one with 'evenfall new %s'", quote(dir), dir)
	}
	if _, err := os.Stat(filepath.Join(dir, "run.toml")); err != nil {
		return nil, usagef("%s has no run.toml; make a run with 'evenfall new DIR'", quote(dir))
	}
	s, err := openRun(w, os.DirFS(dir), dir, false)
	if s != nil {
		s.dir = dir
	}
	return s, err
}

func openRun(w world, fsys fs.FS, name string, demo bool) (*siteChoice, error) {
	r, problems := run.Open(fsys, name)
	s := &siteChoice{demo: demo, run: r}
	s.report(w, problems)
	if r == nil || r.Config == nil {
		return nil, errRefused
	}
	s.site, s.title = r.Config.Site, r.Config.Title
	return s, nil
}

// report prints problems on standard error and remembers whether any of them
// was a refusal.
func (s *siteChoice) report(w world, problems []*table.Error) {
	for _, p := range problems {
		if !p.Warning {
			s.refused = true
		} else if s.demo {
			continue
		}
		fmt.Fprintln(w.err, p)
	}
}

// session is a site with its targets, ready for one instant.
type session struct {
	*siteChoice
	targets    []targets.Target
	requests   []targets.Request
	magnitudes []targets.Magnitude
	limits     targets.Limits
	conditions targets.Conditions
	renew      func(targets.Conditions) // has nights heed other conditions
	at         astro.Instant
	night      *moment.Night
	prepared   []moment.Prepared
	wants      []moment.Want
	courses    []moment.Course
	scene      moment.Scene
	moments    []moment.Moment
	order      []int
	models     moment.Models
	makes      func(targets.Population) moment.Models
	goals      goals
}

// openSession reads everything a call needs and works out every target's
// moment.
func openSession(w world, o *options) (*session, error) {
	site, err := openSite(w, o)
	if err != nil {
		return nil, err
	}
	s := &session{siteChoice: site, limits: targets.DefaultLimits(), makes: w.models}
	if site.run != nil {
		s.limits = site.run.Config.Limits
		s.targets, s.requests, s.magnitudes = site.run.Targets, site.run.Requests, site.run.Magnitudes
	}
	if s.dir != "" {
		at, err := o.now(w, s.site)
		if err != nil {
			return nil, err
		}
		list, mags, conditions, err := bookOf(s.dir, at.UTC())
		if err != nil {
			return nil, err
		}
		s.conditions = conditions
		s.targets, s.magnitudes = slices.Concat(s.targets, list), slices.Concat(s.magnitudes, mags)
	}
	if err := s.readLists(w, o); err != nil {
		return nil, err
	}
	if err := s.setTime(w, o); err != nil {
		return nil, err
	}
	return s, s.setAside(w, o)
}

// setAside reports the magnitudes that cannot be believed: absurd ones, those
// of the future, and those given twice.
func (s *session) setAside(w world, o *options) error {
	now, err := o.now(w, s.site)
	if err != nil {
		return err
	}
	kept, aside := table.SetAside(s.magnitudes, now.UTC())
	s.magnitudes = kept
	s.report(w, aside)
	return nil
}

// readLists reads what the flags name in place of the run's own.
func (s *session) readLists(w world, o *options) error {
	names := o.targets
	if len(names) == 0 && s.run == nil {
		names = []string{"builtin"}
	}
	if len(names) > 0 {
		s.targets = nil
	}
	for _, name := range names {
		if name == "builtin" {
			stars, err := builtin.Stars()
			if err != nil {
				return err
			}
			s.targets = append(s.targets, stars...)
			continue
		}
		list, err := readFile(w, name, table.Read, s)
		if err != nil {
			return err
		}
		s.targets = append(s.targets, list...)
	}
	if o.requests != "" {
		list, err := readFile(w, o.requests, table.ReadRequests, s)
		if err != nil {
			return err
		}
		s.requests = list
		for i := range list {
			s.mustMatch(w, list[i].At, list[i].Target, false)
		}
	}
	for _, name := range o.magnitudes {
		list, err := readFile(w, name, table.ReadMagnitudes, s)
		if err != nil {
			return err
		}
		s.magnitudes = append(s.magnitudes, list...)
		for i := range list {
			s.mustMatch(w, list[i].At, list[i].Target, true)
		}
	}
	return nil
}

// mustMatch reports a row of a file that names no target of the lists.
func (s *session) mustMatch(w world, at targets.Where, name string, warning bool) {
	if _, err := table.Match(s.targets, name); err != nil {
		s.report(w, []*table.Error{{At: at, Field: "target", Value: table.Clean(name), Problem: err.Error(), Fix: "name a target of the lists, by id or name", Warning: warning}})
	}
}

// readFile reads one file, or standard input for -, and reports its problems.
func readFile[T any](w world, name string, read func(io.Reader, string) ([]T, []*table.Error), s *session) ([]T, error) {
	in := w.in
	if name != "-" {
		f, err := os.Open(name)
		if errors.Is(err, fs.ErrNotExist) {
			return nil, usagef("%s: no such file", quote(name))
		}
		if err != nil {
			return nil, err
		}
		defer f.Close()
		in = f
	} else {
		name = "standard input"
	}
	list, problems := read(in, name)
	s.report(w, problems)
	return list, nil
}

// now returns the instant that a call is about: --at, or the clock.
func (o *options) now(w world, site astro.Site) (astro.Instant, error) {
	t, given, err := o.instant()
	if err != nil {
		return astro.Instant{}, err
	}
	if !given {
		t = w.clock.Now().Truncate(time.Second)
	}
	at, err := timescale.AtDUT1(t, site.DUT1)
	if err != nil {
		return at, usagef("%w", err)
	}
	return at, nil
}

// tonight returns the night an observer means at an instant.
func tonight(site astro.Site, at astro.Instant) (astro.Date, error) {
	d, err := moment.DateOfTonight(site, at)
	if err != nil {
		return d, usagef("%w", err)
	}
	return d, nil
}

// setTime settles the night and the instant.
func (s *session) setTime(w world, o *options) error {
	first, last, given, err := o.dates()
	if err != nil {
		return err
	}
	if first != last {
		return usagef("--until goes with almanac and events; this command looks at one night")
	}
	at, err := o.now(w, s.site)
	if err != nil {
		return err
	}
	date := first
	if !given {
		if date, err = tonight(s.site, at); err != nil {
			return err
		}
	}
	if s.night, err = s.nightOf(date); err != nil {
		return usagef("%w", err)
	}
	if given && o.at == "" {
		at = s.night.DefaultMoment()
	}
	if span := s.night.Span; given && !span.Contains(at) {
		return usagef("--at %s lies outside the night of %s, which runs from %s to %s",
			o.at, date, stamp(span.From), stamp(span.Until))
	}
	s.at = at
	return nil
}

// nightOf prepares one night of the site.
func (s *session) nightOf(date astro.Date) (*moment.Night, error) {
	n, err := moment.NewNight(s.site, date, s.limits, s.conditions)
	if err == nil && s.run != nil {
		n.Sky, n.Seeing = s.skySite(n.Sky), s.run.Config.Sky.SeeingArcsec
		n.Allocated = s.run.Config.AllocatedOn(n.Span, date)
	}
	return n, err
}

// skySite is the sky of the run's site, the given one where run.toml says
// nothing that holds.
func (s *session) skySite(otherwise *skyglow.Site) *skyglow.Site {
	c := s.run.Config.Sky
	site, err := moment.NewSkySite(s.site, skyglow.Conditions{Air: skyglow.AirAbove{Measured: c.ExtinctionMag}, Dark: c.DarkMagArcsec2,
		LightPollution: c.LightPollution, SolarActivity: c.SolarActivity})
	if err != nil {
		return otherwise
	}
	return site
}

// newModels makes what stages are judged with.
func (s *session) newModels(o *options) moment.Models {
	p := targets.PopulationField
	if s.run != nil {
		p = s.run.Config.Population
	}
	if o.population != "" {
		p = targets.Population(o.population)
	}
	return s.makes(p)
}

// compute prepares the targets and works out each one's moment.
func (s *session) compute(o *options) {
	s.scene = moment.NewScene(s.night, s.at)
	s.models = s.newModels(o)
	byTarget, wishes := s.magnitudesByTarget(), s.wishes()
	n := len(s.targets)
	s.prepared, s.wants = make([]moment.Prepared, n), make([]moment.Want, n)
	s.courses, s.moments = make([]moment.Course, n), make([]moment.Moment, n)
	for i := range s.targets {
		s.prepared[i] = moment.Prepare(s.targets[i], byTarget[i], s.models)
		s.wants[i] = s.want(o, wishes, s.night.Date, i, s.targets[i].Kind)
		s.courses[i] = moment.Tonight(s.night, &s.prepared[i], s.wants[i])
		s.moments[i] = moment.Of(&s.scene, &s.prepared[i], &s.courses[i], s.wants[i])
	}
	s.order = moment.Rank(s.moments)
	s.standards()
}

// find returns the target that a name or id means.
func (s *session) find(name string) (int, error) {
	i, err := table.Match(s.targets, name)
	if err != nil {
		return 0, usagef("%s", strings.TrimPrefix(err.Error(), "table: "))
	}
	return i, nil
}
