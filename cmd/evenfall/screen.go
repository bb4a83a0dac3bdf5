package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"sync"
	"time"

	"github.com/charmbracelet/x/term"

	"evenfall/astro"
	"evenfall/astro/clock"
	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/targets/store"
	"evenfall/targets/table"
	"evenfall/tui"
	"evenfall/tui/desk"
	"evenfall/tui/kit"
	terminal "evenfall/tui/term"
)

// terminalSize returns the width of the terminal that standard output is, 0
// where it is none, and whether input and output are both a terminal. COLUMNS
// decides where there is no terminal.
func terminalSize() (width int, both bool) {
	out := term.IsTerminal(os.Stdout.Fd())
	if !out {
		width, _ = strconv.Atoi(os.Getenv("COLUMNS"))
		return max(width, 0), false
	}
	width, _, err := term.GetSize(os.Stdout.Fd())
	if err != nil || width <= 0 {
		width = defaultWidth
	}
	return width, term.IsTerminal(os.Stdin.Fd())
}

// ticks is how often the clock on the screen may go on.
var ticks = map[string]time.Duration{"1s": time.Second, "10s": 10 * time.Second, "60s": time.Minute, "off": 0}

// openScreen shows the screens in the terminal.
func openScreen(w world, o *options) error {
	if os.Getenv("TERM") == "dumb" {
		fmt.Fprintln(w.err, "evenfall: TERM is dumb: here is the list as text; evenfall list and evenfall show do the rest")
		return runList(w, o)
	}
	settings := kit.Settings{Theme: first(o.theme, os.Getenv("EVENFALL_THEME")), Glyphs: first(o.glyphs, os.Getenv("EVENFALL_GLYPHS")), Getenv: os.Getenv}
	look, err := settings.Look()
	if err != nil {
		return usagef("%w", err)
	}
	every, ok := ticks[o.tick]
	if !ok {
		return usagef("--tick %s: use one of 1s, 10s, 60s, off", quote(o.tick))
	}
	// what reading has to say would be lost behind the screen
	var said bytes.Buffer
	quiet := w
	quiet.err = &said
	s, err := openSession(quiet, o)
	if err != nil {
		w.err.Write(said.Bytes())
		return err
	}
	src := s.source(o)
	src.Look, src.Every, src.Notices = look, every, notices(said.String())
	db, err := s.openLog(&src)
	if err != nil {
		return err
	}
	defer db.Close()
	s.log(&src, o, w, logbook.Open(db, w.clock.Now, ""))
	opts := tui.Options{Source: src, Clock: w.clock, In: os.Stdin, Out: os.Stdout, Tick: every, Crash: terminal.CrashLog{Path: s.crashPath()},
		Getenv: os.Getenv, Save: func() {}, Exit: os.Exit}
	if o.at != "" {
		opts.Clock = clock.Fixed{At: s.at.UTC()}
	}
	err = tui.Open(opts)
	if err == nil { // left by the user: the next session begins anew
		book := logbook.Open(db, w.clock.Now, src.Observer)
		if last, ok, failed := book.LastSession(context.Background(), src.Session); failed == nil && ok {
			last.Ended, last.State = w.clock.Now(), ""
			book.SaveSession(context.Background(), last)
		}
	}
	w.err.Write(said.Bytes())
	return err
}

func first(values ...string) string {
	for _, v := range values {
		if v != "" {
			return v
		}
	}
	return ""
}

// notices condenses what reading said into what fits the status line.
func notices(said string) []string {
	lines := strings.Split(strings.TrimSpace(said), "\n")
	lines = slices.DeleteFunc(lines, func(l string) bool { return l == "" || l == demoNotice })
	switch len(lines) {
	case 0:
		return nil
	case 1:
		return lines
	}
	return []string{fmt.Sprintf("%d remarks on the files read; evenfall check lists them. The first: %s", len(lines), lines[0])}
}

// crashPath is where a failure inside the program is written down: the run
// folder, or where there is none a folder for what need not last.
func (s *session) crashPath() string {
	if s.demo || s.run == nil {
		return filepath.Join(os.TempDir(), "evenfall-crash-"+strconv.Itoa(os.Getuid())+".log")
	}
	return filepath.Join(s.dir, "crash.log")
}

// source is the session as the screens see it.
func (s *session) source(o *options) desk.Source {
	byTarget, wishes := s.magnitudesByTarget(), s.wishes()
	entries := make([]roster.Entry, len(s.targets))
	for i := range s.targets {
		entries[i] = roster.Entry{Target: s.targets[i], Magnitudes: byTarget[i], Phases: s.phases(i), Want: s.want(o, wishes, s.night.Date, i, s.targets[i].Kind)}
	}
	wants := func(n *moment.Night, i int, e *roster.Entry) moment.Want {
		if n.Date == s.night.Date && !e.Session {
			return e.Want
		}
		return s.want(o, wishes, n.Date, i, e.Target.Kind)
	}
	src := desk.Source{Site: s.site, Title: s.title, Demo: s.demo, Zone: s.location(), HandOver: s.handOverFormat(),
		Band: targets.Band(o.band), Level: o.level, Roster: roster.New(entries, s.newModels(o), wants),
		Night: s.nights(), Fixed: o.at != ""}
	src.Changed, src.Field = s.renew, sync.OnceValue(s.field)
	if o.night != "" && o.at == "" {
		src.Start = s.at.UTC()
	}
	return src
}

// phases are the windows of phase that requests want a target in.
func (s *session) phases(i int) [][2]float64 {
	t := &s.targets[i]
	var out [][2]float64
	for k := range s.requests {
		q := &s.requests[k]
		key := targets.Key(q.Target)
		if q.PhaseFrom.Known && q.PhaseTo.Known && key != "" && (key == targets.Key(t.Name) || key == targets.Key(t.ID)) {
			out = append(out, [2]float64{q.PhaseFrom.Value, q.PhaseTo.Value})
		}
	}
	return out
}

// openLog opens run.db of the run folder; the demonstration and places without
// a run folder keep theirs in memory. What is wrong with it is said on the
// screen, and all else works.
func (s *session) openLog(src *desk.Source) (*store.DB, error) {
	if s.dir == "" {
		return store.Memory()
	}
	path := filepath.Join(s.dir, "run.db")
	db, err := store.Open(path)
	switch {
	case err == nil && db.ReadOnly():
		src.Notices = append(src.Notices, "READ-ONLY: "+path+" cannot be written; nothing will be saved")
		return db, nil
	case err == nil:
		if kind := store.NetworkKind(s.dir); kind != "" {
			src.Notices = append(src.Notices, "the run folder lies on "+kind+": "+store.Advice)
		}
		return db, nil
	case errors.Is(err, store.ErrReadOnly) || errors.Is(err, store.ErrFull):
		src.Notices = append(src.Notices, "NOTHING WILL BE SAVED: "+err.Error())
		return store.Memory()
	}
	return nil, err
}

// log gives the screens the run's log, and what an earlier session left.
func (s *session) log(src *desk.Source, o *options, w world, book *logbook.Book) {
	src.Book, src.Observer = book, first(o.observer, os.Getenv("EVENFALL_OBSERVER"))
	src.Requests, src.Limits, src.PID, src.Alive = s.requests, s.limits, os.Getpid(), terminal.Alive
	src.ClockWords = clock.DisciplineWords(clock.Disciplined())
	src.Request = func(target string) (targets.Request, bool) {
		best, found := targets.Request{}, false
		for _, q := range s.requests {
			if targets.Key(q.Target) == targets.Key(target) && (!found || q.Weight > best.Weight) {
				best, found = q, true
			}
		}
		if found {
			return best, true
		}
		return s.defaultRequest(target)
	}
	src.Readout = func(name string) float64 {
		if s.run == nil {
			return 0
		}
		if i, ok := s.run.Config.Instrument(name); ok {
			return i.DeadS
		}
		return 0
	}
	// a session is known by where the observer sits: accounts are shared
	where, _, _ := strings.Cut(os.Getenv("SSH_CONNECTION"), " ")
	src.Session = first(src.Observer, "somebody") + " at " + first(where, "this machine")
	ctx := context.Background()
	former, err := book.Former(ctx, src.Session)
	if err != nil {
		return
	}
	base, alive := src.Session, false
	for _, f := range former {
		if f.Ended.IsZero() && w.clock.Now().Sub(f.Seen) < aliveWithin && terminal.Alive(f.PID) {
			alive = alive || f.Name == base
			continue
		}
		if f.Ended.IsZero() && src.State == "" { // the latest that was cut off
			src.State, src.Former = f.State, f.Name
		}
	}
	if alive {
		src.Session += fmt.Sprintf(", login %d", os.Getpid()) // the other one is still there
	}
}

// defaultRequest is the default of a target's kind among what is mounted: its
// instrument and mode, without a name of its own.
func (s *session) defaultRequest(target string) (targets.Request, bool) {
	if s.run == nil {
		return targets.Request{}, false
	}
	i, err := table.Match(s.targets, target)
	if err != nil {
		return targets.Request{}, false
	}
	night, _ := s.run.Config.NightOn(s.night.Date)
	q, ok := s.run.Config.DefaultRequest(s.targets[i].Kind, night.Instruments...)
	q.ID = ""
	return q, ok
}

// aliveWithin is how lately a session must have been seen to be still there.
const aliveWithin = 12 * time.Hour

// nights prepares nights and keeps them; safe for several goroutines.
func (s *session) nights() func(astro.Date) (*moment.Night, error) {
	var mu sync.Mutex
	kept := map[astro.Date]*moment.Night{s.night.Date: s.night}
	s.renew = func(c targets.Conditions) {
		mu.Lock()
		defer mu.Unlock()
		s.conditions = c
		clear(kept)
	}
	const most = 48 // the month ahead that the screen of events may show
	return func(date astro.Date) (*moment.Night, error) {
		mu.Lock()
		defer mu.Unlock()
		if n, ok := kept[date]; ok {
			return n, nil
		}
		n, err := s.nightOf(date)
		if err != nil {
			return nil, err
		}
		if len(kept) >= most {
			clear(kept)
		}
		kept[date] = n
		return n, nil
	}
}
