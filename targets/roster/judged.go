package roster

import (
	"strings"

	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
)

// Judged is what is kept of the judgement of a target in a long list.
type Judged struct {
	Best string
	p    [len(targets.Stages)]float32
}

// P returns the probability of a stage, to 1e-7.
func (j *Judged) P(code targets.Stage) float64 {
	for i, s := range targets.Stages {
		if s == code {
			return float64(j.p[i])
		}
	}
	return 0
}

// verdict is the judgement again, without its evidence.
func (j *Judged) verdict() stage.Verdict {
	v := stage.Verdict{Best: j.Best, P: make(map[targets.Stage]float64, len(targets.Stages))}
	for i, s := range targets.Stages {
		v.P[s] = float64(j.p[i])
	}
	return v
}

// Judged returns the stage of a target, without keeping all that its judgement
// holds.
func (r *Roster) Judged(i int) *Judged {
	r.mu.Lock()
	known, p := r.judged[i], r.prepared[i]
	r.mu.Unlock()
	if known != nil {
		return known
	}
	var v stage.Verdict
	if p != nil {
		v = p.Verdict
	} else {
		v = r.models.Stage.Judge(r.entries[i].Target)
	}
	j := &Judged{Best: v.Best}
	for k, s := range targets.Stages {
		j.p[k] = float32(v.P[s])
	}
	r.mu.Lock()
	defer r.mu.Unlock()
	r.judged[i] = j
	return j
}

// Models returns what the roster judges and forecasts with.
func (r *Roster) Models() moment.Models { return r.models }

// Study works out what a target is made of.
func (r *Roster) Study(i int) stage.Study { return r.Prepared(i).Study(r.models) }

// stageNamed returns the stage that a column of a filter names, in any case;
// "" where it names none.
func stageNamed(column string) targets.Stage {
	for _, s := range targets.Stages {
		if strings.EqualFold(column, string(s)) {
			return s
		}
	}
	return ""
}
