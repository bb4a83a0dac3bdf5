package main

import (
	"fmt"
	"strings"

	"evenfall/targets/moment"
	"evenfall/targets/table"
)

// listed returns the columns of a target's list with their units, as they
// would be written back.
func (v view) listed() ([]jsonListed, error) {
	list, err := table.Listed(v.t)
	var out []jsonListed
	for _, l := range list {
		out = append(out, jsonListed(l))
	}
	return out, err
}

// listText prints what the list says.
func (v view) listText(b *strings.Builder) error {
	listed, err := v.listed()
	if err != nil {
		return err
	}
	b.WriteString("\nlisted\n")
	for _, l := range listed {
		mark := ""
		if l.Unconfirmed {
			mark = "  (unconfirmed)"
		}
		fmt.Fprintf(b, "  %-15s %s %s%s\n", l.Column, l.Value, l.Unit, mark)
	}
	if v.t.Conflicts != "" {
		fmt.Fprintf(b, "  sources disagree: %s\n", v.t.Conflicts)
	}
	if v.t.Notes != "" {
		fmt.Fprintf(b, "  notes: %s\n", v.t.Notes)
	}
	if v.t.Source != "" {
		fmt.Fprintf(b, "  source: %s\n", v.t.Source)
	}
	for _, why := range v.m.Why {
		fmt.Fprintf(b, "  missing: %s\n", why)
	}
	return nil
}

// handOverFormat returns how the run wants coordinates written.
func (s *session) handOverFormat() moment.HandOver {
	if s.run == nil {
		return moment.HandOver{}
	}
	h := s.run.Config.HandOver
	return moment.HandOver{Motion: h.Motion, Format: h.Format, Separator: h.Separator, Order: h.Order}
}
