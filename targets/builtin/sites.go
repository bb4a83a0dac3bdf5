package builtin

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"strconv"
	"strings"

	"evenfall/targets"
	"evenfall/targets/table"
)

//go:embed sites.csv
var sitesCSV string

// SiteEntry is a public observatory site.
type SiteEntry struct {
	ID, Name       string
	LatDeg, LonDeg float64 // north and east positive
	ElevM          float64
	Zone           string // IANA
	Aliases        []string
	Source         string
}

var siteList = readSites()

func readSites() []SiteEntry {
	r := csv.NewReader(strings.NewReader(sitesCSV))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil || len(rows) < 2 {
		panic("builtin: the embedded list of sites cannot be read")
	}
	var out []SiteEntry
	for _, row := range rows[1:] {
		e := SiteEntry{ID: row[0], Name: row[1], Zone: row[5], Source: row[7]}
		for i, into := range []*float64{&e.LatDeg, &e.LonDeg, &e.ElevM} {
			v, err := strconv.ParseFloat(row[2+i], 64)
			if err != nil {
				panic("builtin: bad number in the list of sites: " + row[2+i])
			}
			*into = v
		}
		if row[6] != "" {
			e.Aliases = strings.Split(row[6], "|")
		}
		out = append(out, e)
	}
	return out
}

// Sites lists the sites that a new run can be made for.
func Sites() []SiteEntry { return append([]SiteEntry(nil), siteList...) }

// FindSite finds a site by id, name or alias; case, blanks and underscores do
// not count.
//
// Returns:
//   - an error that names the nearest, or all of them.
func FindSite(name string) (SiteEntry, error) {
	key := targets.Key(name)
	best, near := 4, ""
	var all []string
	for _, e := range siteList {
		for _, n := range append([]string{e.ID, e.Name}, e.Aliases...) {
			if targets.Key(n) == key {
				return e, nil
			}
			if d := table.Distance(targets.Key(n), key); d < best {
				best, near = d, e.Name
			}
		}
		all = append(all, e.Name)
	}
	if near != "" {
		return SiteEntry{}, fmt.Errorf("no site %q; did you mean %q", name, near)
	}
	return SiteEntry{}, fmt.Errorf("no site %q; use one of %s, or leave it out and fill in run.toml", name, strings.Join(all, ", "))
}
