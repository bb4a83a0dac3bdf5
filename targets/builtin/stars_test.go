package builtin

import (
	"bytes"
	"maps"
	"math"
	"strconv"
	"strings"
	"testing"

	"evenfall/targets"
	"evenfall/targets/table"
)

// stars gives the list by id.
func stars(t *testing.T) map[string]targets.Target {
	t.Helper()
	list, err := Stars()
	if err != nil {
		t.Fatal(err)
	}
	byID := make(map[string]targets.Target, len(list))
	for _, s := range list {
		if _, twice := byID[s.ID]; twice {
			t.Errorf("%s: id %q twice", s.At, s.ID)
		}
		byID[s.ID] = s
	}
	return byID
}

// Counts: the table of facts has 71 giants (12 of them post-AGB stars and
// kin), 49 Miras and semiregulars, 49 nebulae, 52 white dwarfs, 35 binaries;
// none is left out.
func TestStars(t *testing.T) {
	list, err := Stars()
	if err != nil {
		t.Fatal(err)
	}
	if len(list) != 256 {
		t.Errorf("%d targets, want 256", len(list))
	}
	want := map[targets.Kind]int{targets.Giant: 59, targets.PostAGB: 12, targets.LPV: 49, targets.PN: 49,
		targets.WD: 52, targets.Interacting: 35}
	got := map[targets.Kind]int{}
	north, south := 0, 0
	for _, s := range list {
		got[s.Kind]++
		if s.KindInferred || s.Name == "" || s.Source == "" {
			t.Errorf("%s: kind inferred %v, name %q, source %q", s.ID, s.KindInferred, s.Name, s.Source)
		}
		if ra, dec := s.Place.RA.Deg(), s.Place.Dec.Deg(); !(ra > 0 && ra < 360 && dec > -90 && dec < 90 && dec != 0) {
			t.Errorf("%s: position %v %v", s.ID, ra, dec)
		}
		if !s.Place.EpochGiven || (s.Place.EpochJyr != 2000 && s.Place.EpochJyr != 2016) {
			t.Errorf("%s: epoch %v", s.ID, s.Place.EpochJyr)
		}
		if s.Place.Dec.Deg() > 0 {
			north++
		} else {
			south++
		}
	}
	if !maps.Equal(got, want) {
		t.Errorf("kinds %v, want %v", got, want)
	}
	if north != 145 || south != 111 {
		t.Errorf("%d north and %d south, want 145 and 111", north, south)
	}
	stars(t)
}

func TestNothingToReport(t *testing.T) {
	_, problems := table.Read(bytes.NewReader(starsCSV), StarsName)
	for _, p := range problems {
		t.Errorf("%v", p)
	}
}

func TestOwnSlice(t *testing.T) {
	a, _ := Stars()
	a[0].Name = "another"
	b, err := Stars()
	if err != nil || b[0].Name != "bet Hyi" {
		t.Errorf("first target is %q (%v) after a caller changed its own slice", b[0].Name, err)
	}
}

func TestFaultIsAnError(t *testing.T) {
	for _, bad := range []string{
		"id,name,ra_deg,dec_deg\nx,X,10,91\n",
		"id,name,ra_deg,dec_deg,plx_mas\nx,X,10,20,far\n",
	} {
		list, err := parse([]byte(bad), "trial")
		if err == nil || list != nil || !strings.Contains(err.Error(), "trial") {
			t.Errorf("%q: %v, %v", bad, list, err)
		}
	}
}

// A name in unconfirmed is a column with a value; a conflict begins with the
// columns it is about, and they are unconfirmed.
func TestUnconfirmed(t *testing.T) {
	unconfirmed, contested := 0, 0
	for _, s := range stars(t) {
		if len(s.Unconfirmed) > 0 {
			unconfirmed++
		}
		for _, c := range s.Unconfirmed {
			if cell(s, c) == "" {
				t.Errorf("%s: %s unconfirmed but empty", s.ID, c)
			}
		}
		if s.Conflicts != "" {
			contested++
		}
		for _, conflict := range strings.Split(s.Conflicts, "; ") {
			columns, _, ok := strings.Cut(conflict, ": ")
			if !ok || columns == "B-V" { // the second half of a sentence; a colour, of which no column is listed
				continue
			}
			for _, c := range strings.Fields(columns) {
				if !s.IsUnconfirmed(c) {
					t.Errorf("%s: %s in conflict but not unconfirmed", s.ID, c)
				}
			}
		}
	}
	// Counted in the list by the maker's rules.
	if unconfirmed != 188 || contested != 58 {
		t.Errorf("%d targets with unconfirmed values and %d with conflicts, want 188 and 58", unconfirmed, contested)
	}
}

// cell gives a column of a target as text, "" where it is missing.
func cell(s targets.Target, column string) string {
	if f := texts[column]; f != nil {
		return f(s)
	}
	if f := numbers[column]; f != nil {
		if m := f(s); m.Known {
			return strconv.FormatFloat(m.Value, 'f', -1, 64)
		}
	}
	return ""
}

// same compares a column with a number or text as it was typed. Angles pass
// through radians, so the last bits may differ: 1e-9 deg is 4 microarcseconds.
func same(s targets.Target, column, want string) bool {
	f := numbers[column]
	if f == nil {
		return cell(s, column) == want
	}
	m := f(s)
	if want == "" {
		return !m.Known
	}
	v, err := strconv.ParseFloat(want, 64)
	if err != nil || !m.Known {
		return false
	}
	if column == "ra_deg" || column == "dec_deg" {
		return math.Abs(v-m.Value) < 1e-9
	}
	return v == m.Value
}
