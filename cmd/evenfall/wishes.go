package main

import (
	"slices"
	"strings"
	"sync"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/instrument"
	"evenfall/targets/moment"
	"evenfall/targets/table"
)

// magnitudesByTarget sorts the magnitudes to their targets; those that name no
// target were reported when they were read.
func (s *session) magnitudesByTarget() map[int][]targets.Magnitude {
	out := map[int][]targets.Magnitude{}
	for _, m := range s.magnitudes {
		if i, err := table.Match(s.targets, m.Target); err == nil {
			out[i] = append(out[i], m)
		}
	}
	return out
}

// wish is what the requests say of one target: the greatest weight among
// them, and the heaviest that names an instrument.
type wish struct {
	weight  float64
	request *targets.Request // nil: none names an instrument
}

// wishes gathers the requests by target.
func (s *session) wishes() map[int]wish {
	out := map[int]wish{}
	for k := range s.requests {
		q := &s.requests[k]
		i, err := table.Match(s.targets, q.Target)
		if err != nil {
			continue
		}
		w, asked := out[i]
		if !asked || q.Weight > w.weight {
			w.weight = q.Weight
		}
		if q.Instrument != "" && (w.request == nil || q.Weight > w.request.Weight) {
			w.request = q
		}
		out[i] = w
	}
	return out
}

// want settles what a target is wanted with in a night: the instrument and
// mode of its heaviest request, or the default of its kind; their limits hold.
func (s *session) want(o *options, wishes map[int]wish, date astro.Date, i int, kind targets.Kind) moment.Want {
	w := moment.Want{Band: targets.Band(o.band), Level: o.level, Weight: 1}
	asked, ok := wishes[i]
	if ok {
		w.Weight = asked.weight
	}
	if s.run == nil || len(s.run.Config.Instruments) == 0 {
		return w
	}
	night, listed := s.run.Config.NightOn(date)
	request := asked.request
	if request == nil {
		request = s.defaultOf(kind, night.Instruments)
	}
	if request == nil {
		return w
	}
	if w.Instrument, ok = s.run.Config.Instrument(request.Instrument); !ok {
		return w
	}
	w.Mode, _ = w.Instrument.Mode(request.Mode)
	w.Goal, w.Request = s.goalOf(request, w.Instrument)
	if listed && len(night.Instruments) > 0 && !slices.Contains(night.Instruments, w.Instrument.Name) {
		w.NotMounted = w.Instrument.Name
	}
	return w
}

// goals keeps what many targets share: the default request of each kind and
// what every request wants of an exposure. Safe for several goroutines.
type goals struct {
	mu       sync.Mutex
	defaults map[string]*targets.Request
	goals    map[*targets.Request]*exposure.Goal
}

// defaultOf is the default request of a kind with what is mounted; nil: none.
func (s *session) defaultOf(kind targets.Kind, mounted []string) *targets.Request {
	g := &s.goals
	g.mu.Lock()
	defer g.mu.Unlock()
	key := strings.Join(append([]string{string(kind)}, mounted...), "\x00")
	q, ok := g.defaults[key]
	if !ok {
		if r, found := s.run.Config.DefaultRequest(kind, mounted...); found {
			q = &r
		}
		if g.defaults == nil {
			g.defaults = map[string]*targets.Request{}
		}
		g.defaults[key] = q
	}
	return q
}

// goalOf reads what a request wants of an exposure; nil where it cannot be read,
// which reading the request has reported.
func (s *session) goalOf(q *targets.Request, i *instrument.Instrument) (*exposure.Goal, *targets.Request) {
	g := &s.goals
	g.mu.Lock()
	defer g.mu.Unlock()
	goal, ok := g.goals[q]
	if !ok {
		if read, err := exposure.GoalOf(q, i.Kind); err == nil {
			goal = &read
		}
		if g.goals == nil {
			g.goals = map[*targets.Request]*exposure.Goal{}
		}
		g.goals[q] = goal
	}
	return goal, q
}
