package main

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/roster"
	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// jsonDerived is a quantity of the star itself.
type jsonDerived struct {
	Value  float64  `json:"value"`
	Lo     *float64 `json:"lo"`
	Hi     *float64 `json:"hi"`
	Level  *float64 `json:"level"` // null where there is no interval
	Method string   `json:"method"`
	Source string   `json:"source"`
}

// figures keeps a number to so many significant figures.
func figures(v float64, n int) float64 {
	if v == 0 || math.IsNaN(v) || math.IsInf(v, 0) {
		return v
	}
	return round(v, n-1-int(math.Floor(math.Log10(math.Abs(v)))))
}

// derivedFigures is how many significant figures derived quantities carry.
const derivedFigures = 6

// derived returns the quantities of the star by their keys.
func (v view) derived() map[string]jsonDerived {
	out := map[string]jsonDerived{}
	for _, q := range v.study.Quantities {
		d := jsonDerived{Value: figures(q.Value, derivedFigures), Lo: rounded(figures(q.Lo, derivedFigures), 12),
			Hi: rounded(figures(q.Hi, derivedFigures), 12), Method: q.Method, Source: q.Source}
		if level := stage.Level; d.Lo != nil && d.Hi != nil {
			d.Level = &level
		}
		out[q.Key] = d
	}
	return out
}

func (v view) stageText(b *strings.Builder) {
	st := &v.m.Stage
	fmt.Fprintf(b, "\nwhat it is: %s\n ", st.Best)
	codes := slices.Clone(targets.Stages[:])
	slices.SortStableFunc(codes, func(x, y targets.Stage) int { return cmp.Compare(st.P[y], st.P[x]) })
	for _, c := range codes {
		if st.P[c] >= 0.005 {
			fmt.Fprintf(b, " %s %.0f %%", c, 100*st.P[c])
		}
	}
	b.WriteString("\n")
	for _, e := range st.Evidence {
		if e.Log10Odds == 0 {
			fmt.Fprintf(b, "  !     %s\n", e.What)
			continue
		}
		fmt.Fprintf(b, "  %+.1f  %s (%s)\n", e.Log10Odds, e.What, e.Source)
	}
	if len(st.Evidence) > 0 {
		b.WriteString("  (log10 of the odds for it; source)\n")
	}
	for _, d := range v.study.Decide {
		fmt.Fprintf(b, "  would settle it: %s\n", d)
	}
}

// studyText prints what the target is made of.
func (v view) studyText(b *strings.Builder) {
	if len(v.study.Quantities)+len(v.study.Notes) == 0 {
		return
	}
	fmt.Fprintf(b, "\nwhat it is made of, with %.0f %% intervals\n", 100*stage.Level)
	for i := range v.study.Quantities {
		q := &v.study.Quantities[i]
		fmt.Fprintf(b, "  %-34s %s\n", q.Words, kit.QuantityWord(q))
		if !v.study.SharesMethod(i) {
			fmt.Fprintf(b, "      %s (%s)\n", q.Method, q.Source)
		}
	}
	for _, n := range v.study.Notes {
		fmt.Fprintf(b, "  note: %s\n", n)
	}
}

// dateOf writes when something happens, no finer than it is known.
func dateOf(e *light.Event) string {
	switch {
	case e.SigmaS > 86400:
		return e.At.UTC().Format("2006-01-02")
	case e.SigmaS > 600:
		return e.At.UTC().Round(time.Minute).Format("2006-01-02 15:04 UTC")
	}
	return e.At.UTC().Round(time.Second).Format("2006-01-02 15:04:05 UTC")
}

// tonightText lists what happens this night, with when it begins and ends.
func (v view) tonightText(b *strings.Builder) {
	span := v.s.night.Span
	for _, e := range v.p.Light.EventsAsOf(v.s.site, v.m.At, span.From, span.Until) {
		if e.SigmaS > vagueS {
			continue
		}
		fmt.Fprintf(b, "  tonight: %s %s, +- %s (%s)", e.Kind, dateOf(&e), kit.Duration(e.SigmaS), e.Status)
		if h := (roster.Happening{Event: e}); stretch(&h) != "" {
			fmt.Fprintf(b, ", %s", stretch(&h))
		}
		b.WriteString("\n")
	}
}
