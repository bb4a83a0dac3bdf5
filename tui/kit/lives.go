package kit

import (
	"evenfall/targets/roster"
	"evenfall/targets/stage"
)

// Lives is where the diagram has its figures from: how each target was judged,
// and the lines of stellar lives. It is asked in tasks, by several goroutines.
type Lives interface {
	// Verdict returns a target's judgement, which is not changed afterwards.
	Verdict(r *roster.Roster, row int) *stage.Verdict
	// Curves returns the lines for a mass, Msun (0: no more than the usual
	// ones), and a metallicity, dex.
	Curves(r *roster.Roster, massMsun, feh float64) []stage.Curve
}

// Judged is what the roster's own models say.
type Judged struct{}

// Verdict returns the roster's judgement.
func (Judged) Verdict(r *roster.Roster, row int) *stage.Verdict { return &r.Prepared(row).Verdict }

// Curves returns the lines that the roster's judgement rests on.
func (Judged) Curves(r *roster.Roster, massMsun, feh float64) []stage.Curve {
	return r.Curves(massMsun, feh)
}
