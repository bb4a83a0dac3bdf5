package roster

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

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
	s.quick = make([]quick, r.Len())
	ranked := make([]place, 0, r.Len())
	for i := range r.entries {
		if i%4096 == 0 && ctx.Err() != nil {
			return fmt.Errorf("ranking %d targets: %w", r.Len(), ctx.Err())
		}
		q := b.judge(&s.Scene.Frame, s.Scene.Sun.Dir, sky.Direction(i), cols, i)
		s.quick[i] = q
		ranked = append(ranked, place{q.nextKey(r.entries[i].Want.Weight), int32(i)})
	}
	sortPlaces(ranked)
	for k, p := range ranked {
		if s.quick[p.row].class < 2 {
			s.rank[p.row] = int32(k + 1)
			s.Take++
		}
	}
	list := ranked[:0]
	for k, p := range ranked {
		if k%4096 == 0 && ctx.Err() != nil {
			return fmt.Errorf("filtering %d targets: %w", r.Len(), ctx.Err())
		}
		if ask.Filter.text(r.search[p.row]) && r.quickPasses(&ask, s, int(p.row)) {
			list = append(list, p)
		}
	}
	return r.order(ctx, s, ask, list)
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
	q := quick{class: 2, airmass: c.Airmass[i], sinAlt: sa, cosMoon: c.CosMoon[i], hours: float32(math.Inf(1))}
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
// without working out its night where that can be avoided.
func (r *Roster) quickPasses(ask *Ask, s *Snapshot, i int) bool {
	f := &ask.Filter
	if len(f.conds) == 0 {
		return true
	}
	q := &s.quick[i]
	var m moment.Moment
	m.At = s.Scene.Instant
	m.Apparent = air.Refract(sweep.Altitude(q.sinAlt), s.Scene.Night.Site.Air)
	if x, err := air.Mass(m.Apparent); err == nil {
		m.Airmass, m.AirOK = x, true
	}
	m.MoonSep = astro.Rad(math.Acos(math.Max(-1, math.Min(1, float64(q.cosMoon)))))
	if q.class < 2 {
		m.Left = timeOf(q.hours)
	}
	for _, c := range f.conds {
		switch c.column {
		case "sun", "ha", "ra", "dec":
			m.Place = s.Scene.Frame.Horizontal(&r.stars[i])
			m.RA, m.Dec = m.Place.ICRS.LonLat()
			m.SunSep = astro.Separation(m.Place.Dir, s.Scene.Sun.Dir)
		case "stage":
			m.Stage.Best = r.Stage(i)
		case "mag":
			if v := r.listed(int32(i)); !math.IsInf(v, 1) {
				m.Expect = light.Forecast{Known: true, Mag: astro.Mags(v)}
			}
		case "sb", "best", "bestx", "ends":
			m = *s.Row(i)
		}
	}
	return f.passes(r, i, &m, ask.Marks)
}

// order sorts what passed.
func (r *Roster) order(ctx context.Context, s *Snapshot, ask Ask, list []place) error {
	defer func() {
		s.Fresh = make([]int32, len(list))
		for k, p := range list {
			s.Fresh[k] = p.row
		}
		if len(list) <= Bulk {
			s.sort(ask)
		}
	}()
	if ask.Sort.Plain() || len(list) <= Bulk {
		return nil
	}
	key := r.quickKey(s, ask)
	if key == nil {
		return fmt.Errorf("%d targets cannot be sorted by %s at once; filter the list down to %d first", len(list), ask.Sort.Key, Bulk)
	}
	for k := range list {
		list[k].key = key(int(list[k].row))
		if ask.Sort.Reverse {
			list[k].key = ^list[k].key
		}
	}
	if ctx.Err() != nil {
		return fmt.Errorf("sorting %d targets: %w", len(list), ctx.Err())
	}
	sortPlaces(list)
	return nil
}

// quickKey returns the number that a long list is ordered by; nil: a key that
// would need every target's night.
func (r *Roster) quickKey(s *Snapshot, ask Ask) func(i int) uint64 {
	q, place := s.quick, func(i int) *targets.Place { return &r.entries[i].Target.Place }
	switch ask.Sort.Key {
	case "", "next":
		return func(i int) uint64 { return q[i].nextKey(r.entries[i].Want.Weight) }
	case "name":
		return func(i int) uint64 { return uint64(r.byName[i]) }
	case "alt", "x":
		return func(i int) uint64 { return bits(-q[i].sinAlt) }
	case "left":
		return func(i int) uint64 { return bits(float64(q[i].class/2)*1e6 + math.Min(float64(q[i].hours), 1e5)) }
	case "moon":
		return func(i int) uint64 { return bits(float64(q[i].cosMoon)) }
	case "ra":
		return func(i int) uint64 { return bits(place(i).RA.Rad()) }
	case "dec":
		return func(i int) uint64 { return bits(place(i).Dec.Rad()) }
	case "kind":
		return func(i int) uint64 { return uint64(slices.Index(targets.Kinds, r.entries[i].Target.Kind)) }
	case "mag":
		return func(i int) uint64 { return bits(r.listed(int32(i))) }
	case "period":
		return func(i int) uint64 {
			if p := r.entries[i].Target.Var.PeriodD; p.Known {
				return bits(p.Value)
			}
			return math.MaxUint64
		}
	case "mark":
		return func(i int) uint64 {
			if ask.Marks[i] {
				return 0
			}
			return 1
		}
	}
	return nil
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

// timeOf turns hours into a duration.
func timeOf(hours float32) time.Duration { return time.Duration(float64(hours) * float64(time.Hour)) }
