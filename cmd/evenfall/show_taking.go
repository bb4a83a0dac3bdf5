package main

import (
	"fmt"
	"os"
	"strings"

	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/moment"
	"evenfall/targets/run"
	"evenfall/targets/taking"
)

// standardList are the targets that may serve as standards.
func (s *session) standardList() []*moment.Prepared {
	var out []*moment.Prepared
	for i := range s.prepared {
		if exposure.IsStandard(&s.prepared[i].Target, "") {
			out = append(out, &s.prepared[i])
		}
	}
	return out
}

// standards names the standard of each exposure that wants one.
func (s *session) standards() {
	var list []*moment.Prepared
	for i := range s.moments {
		if _, ok := taking.WantsStandard(s.wants[i]); !ok || !s.moments[i].ExposureOK {
			continue
		}
		if list == nil {
			list = s.standardList()
		}
		if got, ok, _ := taking.MatchStandard(&s.scene, &s.prepared[i], &s.moments[i], s.wants[i], list); ok {
			s.moments[i].Exposure.Standard = got.Name
		}
	}
}

// field reads the neighbours of the run's targets; check reports what is wrong
// with them.
func (s *session) field() []targets.Target {
	if s.dir == "" {
		return nil
	}
	list, _ := run.Field(os.DirFS(s.dir), s.dir)
	return list
}

// standards says which standard goes with the target, and which serves most of
// the list.
func (v view) standards() []taking.Line {
	list := v.s.standardList()
	out := taking.Standards(&v.s.scene, v.p, v.m, *v.w, list)
	sort, ok := taking.WantsStandard(*v.w)
	if !ok {
		return out
	}
	all := make([]taking.Wanted, len(v.s.moments))
	for i := range all {
		all[i] = taking.Wanted{Prepared: &v.s.prepared[i], Moment: &v.s.moments[i], Want: v.s.wants[i]}
	}
	if text := taking.Serving(&v.s.scene, sort, *v.w, all, list); text != "" {
		out = append(out, taking.Line{Text: text})
	}
	return out
}

// takingText prints how the target is taken.
func (v view) takingText(b *strings.Builder) {
	for _, part := range []struct {
		head  string
		lines []taking.Line
	}{
		{"exposure", taking.Exposure(&v.s.scene, v.p, v.m, *v.w)},
		{"finding", taking.Finding(&v.s.scene, v.p, v.m, *v.w, v.s.field())},
		{"standards", v.standards()},
		{"tonight's throughput", v.throughput()},
		{"flats at dusk and dawn", taking.Flats(v.s.night, *v.w)},
	} {
		if len(part.lines) == 0 {
			continue
		}
		fmt.Fprintf(b, "\n%s\n", part.head)
		for _, l := range part.lines {
			mark := ""
			if l.Warn {
				mark = "! "
			}
			fmt.Fprintf(b, "  %s%s\n", mark, l.Text)
		}
	}
}
