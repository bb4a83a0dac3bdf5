package finding

import (
	"fmt"
	"math"
	"slices"

	"evenfall/astro"
	"evenfall/targets"
)

// Offset is the way from one place to another.
type Offset struct {
	SepArcsec   float64
	PADeg       float64 // at the first, from north through east, 0 to 360; 0 where both are one
	EastArcsec  float64 // separation times sine of the position angle
	NorthArcsec float64 // separation times its cosine
	// RASeconds and DecArcsec are the differences of the coordinates themselves,
	// in seconds of right ascension and of arc, for telescopes that take those.
	RASeconds, DecArcsec float64
}

// Between returns the way from one direction to another, along the great circle.
//
//	tan PA = (e . v) / (n . v),  e east and n north at u
//
// Notes:
//  1. East and north are those of the great circle, not of the plane that
//     touches the sphere: 0.002 arcsec apart at 10 arcmin, 0.4 at a degree.
//
// Source: geometry.
//
// Checked: TestPairs, against ERFA sepp and pap: 0.01 arcsec and 0.01 degree.
func Between(u, v astro.Vec) Offset {
	u, v = u.Unit(), v.Unit()
	east, north := axes(u)
	o := Offset{SepArcsec: astro.Separation(u, v).Arcsec()}
	x, y := east.Dot(v), north.Dot(v)
	if x != 0 || y != 0 {
		o.PADeg = turn(astro.Rad(math.Atan2(x, y)).Deg())
	}
	pa := astro.Deg(o.PADeg)
	o.EastArcsec, o.NorthArcsec = o.SepArcsec*pa.Sin(), o.SepArcsec*pa.Cos()
	ra1, dec1 := u.LonLat()
	ra2, dec2 := v.LonLat()
	o.RASeconds = ra2.Minus(ra1).Signed().Hours() * 3600
	o.DecArcsec = dec2.Minus(dec1).Arcsec()
	return o
}

// axes returns east and north at a direction; at a pole those of right
// ascension 0.
func axes(u astro.Vec) (east, north astro.Vec) {
	east = astro.Vec{X: -u.Y, Y: u.X}
	if east.Norm() < 1e-15 {
		east = astro.Vec{Y: 1}
	}
	east = east.Unit()
	return east, u.Cross(east)
}

// At returns the direction some way off another.
//
// Given:
//   - east, north: arcsec along the great circle.
//
// Checked: TestPairs: [Between] undoes it.
func At(u astro.Vec, eastArcsec, northArcsec float64) astro.Vec {
	e, n := axes(u.Unit())
	sep := astro.Arcsec(math.Hypot(eastArcsec, northArcsec))
	if sep.Rad() == 0 {
		return u.Unit()
	}
	pa := math.Atan2(eastArcsec, northArcsec)
	along := e.Times(math.Sin(pa)).Plus(n.Times(math.Cos(pa)))
	return u.Unit().Times(sep.Cos()).Plus(along.Times(sep.Sin()))
}

// Guide is a star to offset from.
type Guide struct {
	Name        string
	Index       int // in the list
	Mag         float64
	Band        targets.Band
	MotionKnown bool
	// From is the way from the star to the target on the night, both motions
	// applied: what the telescope is moved by.
	From          Offset
	UncertainBy   float64 // arcsec, by motions that are not listed
	Words         string
	Dir           astro.Vec
	RA, Dec       astro.Angle // ICRS, motion applied
	EpochOfMotion float64
}

// Rule is what an offset star must be.
type Rule struct {
	MaxArcsec float64 // from the target; 0: 600
	MinArcsec float64 // so that it is not the target itself; 0: 3
	Faintest  float64 // magnitude; 0: 15
	Most      int     // how many; 0: 5
}

// What is asked of an offset star where nothing is said. Common practice, no
// source.
const (
	offsetMax, offsetMin, offsetFaintest, offsetMost = 600, 3, 15, 5
	// fieldMotion is what a field star without a listed motion may move, arcsec a
	// year.
	fieldMotion = 0.02
)

// magOf returns a star's magnitude: in the band asked if listed, else in one
// where the eye or a guider sees.
func magOf(t *targets.Target, band targets.Band) (float64, targets.Band, bool) {
	for _, b := range append([]targets.Band{band}, "G", "V", "r", "R", "RP", "g", "BP", "B", "I", "i") {
		if m, ok := t.Mags[b]; ok && m.Known && !math.IsNaN(m.Value) {
			return m.Value, b, true
		}
	}
	return 0, "", false
}

// OffsetStars chooses stars to offset from out of a list of the field.
//
// Given:
//   - t: the target; field: its neighbours, in any order.
//   - at: the night.
//
// Returns:
//   - the nearest first, those without a listed motion after all others; nil
//     where none will do.
//
// Checked: TestOffsetStars.
func OffsetStars(t *targets.Target, field []targets.Target, at astro.Instant, rule Rule) []Guide {
	fill := func(v *float64, d float64) {
		if !(*v > 0) {
			*v = d
		}
	}
	fill(&rule.MaxArcsec, offsetMax)
	fill(&rule.MinArcsec, offsetMin)
	fill(&rule.Faintest, offsetFaintest)
	if rule.Most <= 0 {
		rule.Most = offsetMost
	}
	own := Tonight(t, at)
	var out []Guide
	for i := range field {
		s := &field[i]
		mag, band, ok := magOf(s, "V")
		if !ok || mag > rule.Faintest {
			continue
		}
		there := Tonight(s, at)
		g := Guide{Name: s.Name, Index: i, Mag: mag, Band: band, MotionKnown: s.MotionKnown(), Dir: there.Dir, RA: there.RA, Dec: there.Dec,
			From: Between(there.Dir, own.Dir), EpochOfMotion: s.Place.EpochJyr}
		if !(g.From.SepArcsec >= rule.MinArcsec && g.From.SepArcsec <= rule.MaxArcsec) {
			continue
		}
		if !g.MotionKnown {
			g.UncertainBy = fieldMotion * math.Abs(there.Years)
		}
		g.UncertainBy = math.Hypot(g.UncertainBy, own.SearchArcsec)
		g.Words = g.words()
		out = append(out, g)
	}
	slices.SortStableFunc(out, func(a, b Guide) int {
		if a.MotionKnown != b.MotionKnown {
			if a.MotionKnown {
				return -1
			}
			return 1
		}
		switch {
		case a.From.SepArcsec < b.From.SepArcsec:
			return -1
		case a.From.SepArcsec > b.From.SepArcsec:
			return 1
		}
		return 0
	})
	return out[:min(len(out), rule.Most)]
}

func (g *Guide) words() string {
	side := func(v float64, plus, minus string) string {
		if v < 0 {
			return fmt.Sprintf("%.2f arcsec %s", -v, minus)
		}
		return fmt.Sprintf("%.2f arcsec %s", v, plus)
	}
	s := fmt.Sprintf("from %s (%s %.1f): %s, %s; %.2f arcsec at position angle %.2f", g.Name, g.Band, g.Mag,
		side(g.From.EastArcsec, "east", "west"), side(g.From.NorthArcsec, "north", "south"), g.From.SepArcsec, g.From.PADeg)
	if g.UncertainBy >= 0.05 {
		s += fmt.Sprintf(", uncertain by %.1f arcsec", g.UncertainBy)
	}
	return s
}

// Camera is how a picture of the sky lies on the detector.
type Camera struct {
	RotationDeg float64 // position angle of the detector's up, from north through east
	Flip        bool    // mirrored: east to the right where north is up
	WidthArcsec float64 // of the field
	HighArcsec  float64
}

// On returns where an offset from the middle falls.
//
// Returns:
//   - right and up, arcsec; and whether it is inside.
//
// Checked: TestCamera.
func (c Camera) On(o Offset) (right, up float64, inside bool) {
	r := astro.Deg(c.RotationDeg)
	up = o.EastArcsec*r.Sin() + o.NorthArcsec*r.Cos()
	right = -o.EastArcsec*r.Cos() + o.NorthArcsec*r.Sin()
	if c.Flip {
		right = -right
	}
	return right, up, math.Abs(right) <= c.WidthArcsec/2 && math.Abs(up) <= c.HighArcsec/2
}

// Corner returns the offset that falls at a place of the detector: undoes
// [Camera.On].
func (c Camera) Corner(right, up float64) (eastArcsec, northArcsec float64) {
	if c.Flip {
		right = -right
	}
	r := astro.Deg(c.RotationDeg)
	return up*r.Sin() - right*r.Cos(), up*r.Cos() + right*r.Sin()
}
