package moment

import (
	"fmt"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets"
)

// Ways of giving a position to an operator.
const (
	MotionApplied   = "applied"   // brought to the moment; proper motion then 0
	MotionCatalogue = "catalogue" // as at its epoch, with proper motion and epoch
	Sexagesimal     = "sexagesimal"
	Degrees         = "degrees"
)

// HandOver is how coordinates are written for the telescope's operator.
type HandOver struct {
	Motion    string   // MotionApplied (also "") or MotionCatalogue
	Format    string   // Sexagesimal (also "") or Degrees
	Separator string   // between the fields; "" is two blanks
	Order     []string // of name, ra, dec, frame, epoch, pmra, pmdec; empty: all of them
}

// handOverOrder is the order of the fields where none is set.
var handOverOrder = []string{"name", "ra", "dec", "frame", "epoch", "pmra", "pmdec"}

// HandOverFields lists the names that HandOver.Order may hold.
func HandOverFields() []string { return append([]string(nil), handOverOrder...) }

// Lines writes what an operator is given: ICRS always, never the place of
// date, and either brought to the moment or as catalogued, never a mixture.
//
// Given:
//   - t, m: the target and its moment.
//
// Returns:
//   - first the line to type, then one that says in words what was done about
//     motion, then one for each warning.
//
// Checked: TestHandOver.
func (h HandOver) Lines(t *targets.Target, m *Moment, drift Drift) []string {
	applied := h.Motion != MotionCatalogue
	ra, dec, epoch := m.RA, m.Dec, m.At.YearsTT()
	pmra, pmdec := "0", "0"
	if !applied {
		ra, dec, epoch = t.Place.RA, t.Place.Dec, t.Place.EpochJyr
		pmra, pmdec = motionText(t.Place.PMRA), motionText(t.Place.PMDec)
	}
	field := map[string]string{
		"name": t.Name, "frame": "ICRS", "epoch": fmt.Sprintf("epoch J%.4f", epoch),
		"ra": ra.HMS(3), "dec": dec.DMS(2),
		"pmra": "pmra " + pmra + " mas/yr", "pmdec": "pmdec " + pmdec + " mas/yr",
	}
	if h.Format == Degrees {
		field["ra"], field["dec"] = fmt.Sprintf("%.7f", ra.Turn().Deg()), fmt.Sprintf("%+.7f", dec.Deg())
	}
	order := h.Order
	if len(order) == 0 {
		order = handOverOrder
	}
	var parts []string
	for _, name := range order {
		parts = append(parts, field[name])
	}
	separator := h.Separator
	if separator == "" {
		separator = "  "
	}
	lines := []string{strings.Join(parts, separator), motionWords(t, m.At, applied)}
	if d := drift.words(t.Place.EpochJyr, m.At); d != "" {
		lines = append(lines, "! "+d)
	}
	if t.Physics.CompMag.Known && t.Physics.CompSepArcsec.Known {
		lines = append(lines, companion(t))
	}
	return lines
}

func motionText(m targets.Measure) string {
	if !m.Known {
		return "unknown"
	}
	return fmt.Sprintf("%+.2f", m.Value)
}

func motionWords(t *targets.Target, at astro.Instant, applied bool) string {
	switch {
	case !t.MotionKnown() && applied:
		return fmt.Sprintf("no proper motion listed: the position is that of J%.1f; give the telescope proper motion 0", t.Place.EpochJyr)
	case !t.MotionKnown():
		return "catalogue position; no proper motion listed"
	case applied:
		return fmt.Sprintf("motion applied to %s: give the telescope proper motion 0", at.UTC().Format(time.RFC3339))
	}
	return "catalogue position: the telescope must apply the motion from the epoch given"
}

// companion warns of a bright neighbour that a guider or a slit may take.
func companion(t *targets.Target) string {
	c := fmt.Sprintf("! companion of %.1f mag at %.1f arcsec", t.Physics.CompMag.Value, t.Physics.CompSepArcsec.Value)
	if t.Physics.CompP.Known {
		c += fmt.Sprintf(", position angle %.0f deg", t.Physics.CompP.Value)
	}
	if t.IsUnconfirmed("comp_mag") || t.IsUnconfirmed("comp_sep_arcsec") {
		c += " (unconfirmed)"
	}
	return c
}
