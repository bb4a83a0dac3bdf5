package main

import (
	"slices"

	"evenfall/astro"
	"evenfall/targets"
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
	request, ok := s.run.Config.DefaultRequest(kind, night.Instruments...)
	if asked.request != nil {
		request, ok = *asked.request, true
	}
	if !ok {
		return w
	}
	if w.Instrument, ok = s.run.Config.Instrument(request.Instrument); !ok {
		return w
	}
	w.Mode, _ = w.Instrument.Mode(request.Mode)
	if listed && len(night.Instruments) > 0 && !slices.Contains(night.Instruments, w.Instrument.Name) {
		w.NotMounted = w.Instrument.Name
	}
	return w
}
