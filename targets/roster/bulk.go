package roster

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/sweep"
)

// quick is what the sweep knows of one target.
type quick struct {
	row     int32
	class   uint8   // 0 to take, 1 merely possible, 2 blocked
	hours   float32 // until the window ends; blocked: until it opens, infinite where not tonight
	airmass float32
	sinAlt  float64
	cosMoon float32
}

// bounds are the limits of a night in the terms of the sweep.
type bounds struct {
	sinHard, sinWish, sinTop float64
	cosMoon, cosSun          float64
	moonUp                   bool
	hourFrom, hourUntil      float64 // rad
	decFrom, decUntil        float64 // sines
	dark, darker             bool    // now
	canLeft, shouldLeft      float64 // hours of darkness left
	sinLat, cosLat           float64
	horizon                  []targets.HorizonPoint
}

// bulk ranks a long list by the sweep.
func (r *Roster) bulk(ctx context.Context, s *Snapshot, ask Ask) error {
	s.Bulk = true
	n := s.Scene.Night
	k := r.night(n)
	k.mu.Lock()
	if k.sky == nil {
		mid := frame.At(n.Site, n.Midnight)
		k.sky = sweep.New(&mid, r.stars)
	}
	sky := k.sky
	k.mu.Unlock()
	if ctx.Err() != nil {
		return fmt.Errorf("ranking %d targets: %w", r.Len(), ctx.Err())
	}
	cols := sweep.NewColumns(r.Len())
	sky.At(&s.Scene.Frame, s.Scene.Moon.Dir, cols)
	b := boundsOf(&s.Scene)
	list := make([]quick, 0, r.Len())
	for i := range r.entries {
		if i%4096 == 0 && ctx.Err() != nil {
			return fmt.Errorf("ranking %d targets: %w", r.Len(), ctx.Err())
		}
		if !ask.Filter.text(r.search[i]) {
			continue
		}
		q := b.judge(&s.Scene.Frame, s.Scene.Sun.Dir, sky.Direction(i), cols, i)
		if r.quickPasses(&ask.Filter, &s.Scene, &q) {
			list = append(list, q)
		}
	}
	return r.order(ctx, s, ask.Sort, list)
}

// boundsOf turns the night's limits into sines and cosines.
func boundsOf(s *moment.Scene) bounds {
	l, w := &s.Night.Limits, s.Night.Site.Air
	sin := func(a astro.Angle) float64 { return air.Unrefract(a, w).Sin() }
	wish := l.WishAltitude
	if a := moment.AltitudeOfAirmass(l.WishAirmass); wish.Less(a) {
		wish = a
	}
	b := bounds{
		sinHard: sin(l.MinAltitude), sinWish: sin(wish), sinTop: 1,
		cosMoon: l.Moon.Cos(), cosSun: l.Sun.Cos(), moonUp: s.Moon.Place.Alt.Deg() > -2,
		hourFrom: l.HourAngleH[0] * math.Pi / 12, hourUntil: l.HourAngleH[1] * math.Pi / 12,
		decFrom: math.Sin(l.DeclinationDeg[0] * math.Pi / 180), decUntil: math.Sin(l.DeclinationDeg[1] * math.Pi / 180),
		sinLat: s.Night.Site.Lat.Sin(), cosLat: math.Max(s.Night.Site.Lat.Cos(), 1e-9), horizon: l.Horizon,
	}
	if l.MaxAltitude.Deg() < 90 {
		b.sinTop = sin(l.MaxAltitude)
	}
	b.dark, b.canLeft = leftOf(s.Night.CanDark(), s.Instant)
	b.darker, b.shouldLeft = leftOf(s.Night.SunBelow(moment.ShouldSunAltitude), s.Instant)
	return b
}

// leftOf tells whether an instant lies in one of the spans, and the hours
// until that ends.
func leftOf(spans []astro.Span, t astro.Instant) (bool, float64) {
	for _, s := range spans {
		if s.Contains(t) {
			return true, s.Until.Sub(t).Hours()
		}
	}
	return false, 0
}

// solarHours turns a hour angle in radians into hours of the clock.
const solarHours = 12 / math.Pi / 1.00273790935

// judge works out one target.
//
//	sin H cos dec = -(east . u), cos H cos dec = (sin alt - sin lat sin dec) / cos lat
//	cos H0 = (sin h - sin lat sin dec) / (cos lat cos dec)     H0: where it stands at altitude h
func (b *bounds) judge(f *frame.Frame, sun, u astro.Vec, c *sweep.Columns, i int) quick {
	sa := c.SinAlt[i]
	q := quick{row: int32(i), class: 2, airmass: c.Airmass[i], sinAlt: sa, cosMoon: c.CosMoon[i], hours: float32(math.Inf(1))}
	sinDec := f.ToDate[2].Dot(u)
	cosDec := math.Sqrt(math.Max(1-sinDec*sinDec, 1e-18))
	h := math.Atan2(-f.East.Dot(u), (sa-b.sinLat*sinDec)/b.cosLat)
	ok := sinDec >= b.decFrom && sinDec <= b.decUntil && sun.Dot(u) <= b.cosSun && !(b.moonUp && float64(q.cosMoon) > b.cosMoon)
	if len(b.horizon) > 0 && ok {
		az := math.Atan2(f.East.Dot(u), f.North.Dot(u))
		ok = sa >= moment.HorizonAt(b.horizon, astro.Rad(az)).Sin()
	}
	if !ok {
		return q
	}
	hard := b.reach(b.sinHard, sinDec, cosDec)
	inside := sa >= b.sinHard && sa <= b.sinTop && h >= b.hourFrom && h <= b.hourUntil
	switch {
	case inside && b.darker && sa >= b.sinWish:
		q.class = 0
		end := math.Min(b.reach(b.sinWish, sinDec, cosDec), b.hourUntil)
		q.hours = float32(math.Min((end-h)*solarHours, b.shouldLeft))
	case inside && b.dark:
		q.class = 1
		q.hours = float32(math.Min((math.Min(hard, b.hourUntil)-h)*solarHours, b.canLeft))
	case hard > 0:
		opens := math.Max(-hard, b.hourFrom)
		q.hours = float32(math.Mod(opens-h+4*math.Pi, 2*math.Pi) * solarHours)
	}
	return q
}

// reach returns the hour angle, rad, up to which a star stands above an
// altitude: pi where it never sinks to it, 0 where it never reaches it.
func (b *bounds) reach(sinH, sinDec, cosDec float64) float64 {
	x := (sinH - b.sinLat*sinDec) / (b.cosLat * cosDec)
	switch {
	case x >= 1:
		return 0
	case x <= -1:
		return math.Pi
	}
	return math.Acos(x)
}

// quickPasses tells whether a target passes the conditions of a filter,
// without working out its night.
func (r *Roster) quickPasses(f *Filter, s *moment.Scene, q *quick) bool {
	if len(f.conds) == 0 {
		return true
	}
	i := int(q.row)
	var m moment.Moment
	m.At = s.Instant
	m.Apparent = air.Refract(sweep.Altitude(q.sinAlt), s.Night.Site.Air)
	if x, err := air.Mass(m.Apparent); err == nil {
		m.Airmass, m.AirOK = x, true
	}
	m.MoonSep = astro.Rad(math.Acos(math.Max(-1, math.Min(1, float64(q.cosMoon)))))
	for _, c := range f.conds {
		switch c.column {
		case "sun", "ha", "ra", "dec":
			m.Place = s.Frame.Horizontal(&r.stars[i])
			m.RA, m.Dec = m.Place.ICRS.LonLat()
			m.SunSep = astro.Separation(m.Place.Dir, s.Sun.Dir)
		case "stage":
			m.Stage = r.Prepared(i).Verdict
		case "left":
			if q.class < 2 {
				m.Left = timeOf(q.hours)
			}
		case "mag", "sb":
			m.Expect = r.Prepared(i).Light.At(s.Instant, light.Ask{Band: r.entries[i].Want.Band, Level: r.entries[i].Want.Level})
		case "best", "ends":
			m = r.Moment(s, i)
		}
	}
	return f.passes(r, i, &m)
}

// order sorts what passed.
func (r *Roster) order(ctx context.Context, s *Snapshot, o Sort, list []quick) error {
	next := func(a, b quick) int {
		return cmp.Or(cmp.Compare(a.class, b.class), cmp.Compare(a.hours, b.hours),
			cmp.Compare(r.entries[b.row].Want.Weight, r.entries[a.row].Want.Weight), cmp.Compare(a.airmass, b.airmass), cmp.Compare(a.row, b.row))
	}
	slices.SortFunc(list, next)
	for place, q := range list {
		if q.class < 2 {
			s.rank[int(q.row)] = place + 1
		}
	}
	less, err := r.quickOrder(o)
	if err != nil {
		return err
	}
	if less != nil {
		slices.SortStableFunc(list, less)
	}
	if ctx.Err() != nil {
		return fmt.Errorf("sorting %d targets: %w", len(list), ctx.Err())
	}
	s.Order = make([]int, len(list))
	for k, q := range list {
		s.Order[k] = int(q.row)
	}
	return nil
}

// quickOrder returns how a key compares targets of a long list; nil: what to
// take next.
func (r *Roster) quickOrder(o Sort) (func(a, b quick) int, error) {
	sign := 1
	if o.Reverse {
		sign = -1
	}
	var by func(a, b quick) int
	switch o.Key {
	case "", "next":
		if !o.Reverse {
			return nil, nil
		}
		by = func(a, b quick) int { return cmp.Or(cmp.Compare(a.class, b.class), cmp.Compare(a.hours, b.hours)) }
	case "name":
		by = func(a, b quick) int { return cmp.Compare(r.byName[a.row], r.byName[b.row]) }
	case "alt":
		by = func(a, b quick) int { return cmp.Compare(b.sinAlt, a.sinAlt) }
	case "left":
		by = func(a, b quick) int { return cmp.Or(cmp.Compare(a.class/2, b.class/2), cmp.Compare(a.hours, b.hours)) }
	case "moon":
		by = func(a, b quick) int { return cmp.Compare(a.cosMoon, b.cosMoon) }
	case "ra":
		by = func(a, b quick) int {
			return cmp.Compare(r.entries[a.row].Target.Place.RA.Rad(), r.entries[b.row].Target.Place.RA.Rad())
		}
	case "dec":
		by = func(a, b quick) int {
			return cmp.Compare(r.entries[a.row].Target.Place.Dec.Rad(), r.entries[b.row].Target.Place.Dec.Rad())
		}
	case "kind":
		by = func(a, b quick) int {
			return strings.Compare(string(r.entries[a.row].Target.Kind), string(r.entries[b.row].Target.Kind))
		}
	case "mag":
		by = func(a, b quick) int { return cmp.Compare(r.listed(a.row), r.listed(b.row)) }
	default:
		return nil, fmt.Errorf("a list of %d targets cannot be sorted by %s; filter it first", r.Len(), o.Key)
	}
	return func(a, b quick) int { return sign * by(a, b) }, nil
}

// listed returns a listed magnitude to sort a long list by: V, else G, else
// none.
func (r *Roster) listed(row int32) float64 {
	mags := r.entries[row].Target.Mags
	for _, b := range []targets.Band{"V", "G"} {
		if m := mags[b]; m.Known {
			return m.Value
		}
	}
	return math.Inf(1)
}
