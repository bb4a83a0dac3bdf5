package star

import (
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/targets/taking"
)

// howTaken are the sections on how a star is taken: exposure first, then
// finding, standards and flats; those that have nothing to say are nil.
func howTaken(sc *moment.Scene, r *roster.Roster, row int, m *moment.Moment, neighbours func() []targets.Target) [][]Line {
	p, w := r.Prepared(row), r.Want(sc.Night, row)
	if w.Goal == nil && neighbours == nil {
		return [][]Line{nil}
	}
	var field []targets.Target
	if neighbours != nil {
		field = neighbours()
	}
	return [][]Line{
		section("exposure", taking.Exposure(sc, p, m, w)),
		section("finding", taking.Finding(sc, p, m, w, field)),
		section("standards", taking.Standards(sc, p, m, w, standards(r, w))),
		section("flats at dusk and dawn, UTC", taking.Flats(sc.Night, w)),
	}
}

func section(head string, lines []taking.Line) []Line {
	if len(lines) == 0 {
		return nil
	}
	var w writer
	w.head(head)
	for _, l := range lines {
		if l.Warn {
			w.warn("%s", l.Text)
		} else {
			w.say("%s", l.Text)
		}
	}
	return w.lines
}

// standards are the targets of a list that may serve, where one is wanted; not
// of lists too long to look through.
func standards(r *roster.Roster, w moment.Want) []*moment.Prepared {
	sort, ok := taking.WantsStandard(w)
	if !ok || r.Len() > roster.Bulk {
		return nil
	}
	var out []*moment.Prepared
	for i := range r.Len() {
		if exposure.IsStandard(&r.Entry(i).Target, sort) {
			out = append(out, r.Prepared(i))
		}
	}
	return out
}
