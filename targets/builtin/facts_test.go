package builtin

import (
	"bytes"
	"encoding/csv"
	"errors"
	"io"
	"io/fs"
	"os"
	"regexp"
	"strings"
	"testing"
)

// factsPath is the table of facts beside the repository, ../shared from its root.
const factsPath = "../../../shared/facts/evolved-stars.csv"

// rows reads a CSV table by id, `#` lines left out.
func rows(t *testing.T, r io.Reader) map[string]map[string]string {
	t.Helper()
	in := csv.NewReader(r)
	in.Comment = '#'
	all, err := in.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	byID := map[string]map[string]string{}
	for _, line := range all[1:] {
		row := map[string]string{}
		for i, name := range all[0] {
			row[name] = line[i]
		}
		byID[row["id"]] = row
	}
	return byID
}

// TestFacts: every cell of the facts stands unchanged, digit for digit, in the
// right column of the list, and the reader understood it.
func TestFacts(t *testing.T) {
	f, err := os.Open(factsPath)
	if errors.Is(err, fs.ErrNotExist) {
		t.Skip("the table of facts, ../shared/facts/evolved-stars.csv, is not beside the repository")
	}
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	facts, list, read := rows(t, f), rows(t, bytes.NewReader(starsCSV)), stars(t)
	if len(facts) != len(list) {
		t.Errorf("%d facts, %d targets", len(facts), len(list))
	}
	cells := 0
	for id, fact := range facts {
		own, ok := list[id]
		if !ok {
			t.Errorf("%s is not in the list", id)
			continue
		}
		for column, want := range fact {
			switch column {
			case "checked", "kind", "notes", "id":
				continue // judged, not copied
			case "epoch_max_jd":
				if strings.Contains(fact["notes"], "epoch=mid-eclipse") || strings.Contains(fact["notes"], "T0 ") {
					column = "epoch_min_jd"
				}
			case "vartype":
				want, _, _ = strings.Cut(want, " (GCVS copy")
			case "source":
				if !strings.HasPrefix(own[column], want) {
					t.Errorf("%s: source %q does not begin with %q", id, own[column], want)
				}
				continue
			}
			if own[column] != want {
				t.Errorf("%s: %s is %q, facts %q", id, column, own[column], want)
			}
			if !same(read[id], column, want) {
				t.Errorf("%s: %s was read as %q, facts %q", id, column, cell(read[id], column), want)
			}
			cells++
		}
	}
	if cells < 256*38 { // 38 columns of the facts are copied
		t.Errorf("only %d cells compared", cells)
	}
	notesToColumns(t, facts, list)
}

// notesToColumns: what the notes say in figures stands in its column.
func notesToColumns(t *testing.T, facts, list map[string]map[string]string) {
	t.Helper()
	for column, token := range map[string]*regexp.Regexp{
		"eclipse_min": regexp.MustCompile(`ecl_dur_min=([\d.]+)`),
		"chbeta":      regexp.MustCompile(`c\(Hbeta\)=([\d.]+)`),
		"pulsation_s": regexp.MustCompile(`(?:^|; )period ([\d.]+) s(?:;|$)`),
	} {
		found := 0
		for id, fact := range facts {
			want := ""
			if m := token.FindStringSubmatch(fact["notes"]); m != nil {
				want = m[1]
				found++
			}
			if list[id][column] != want {
				t.Errorf("%s: %s is %q, notes say %q", id, column, list[id][column], want)
			}
			if token.MatchString(list[id]["notes"]) {
				t.Errorf("%s: notes still say %s", id, token)
			}
		}
		if found == 0 {
			t.Errorf("no note for %s", column)
		}
	}
}
