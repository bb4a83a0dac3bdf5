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
	can, should              darkness
	sinLat, cosLat           float64
	horizon                  []targets.HorizonPoint
	sectors                  []sector // of wind and cloud
}

// sector is a part of the sky by azimuth that is kept away from.
type sector struct{ middle, half float64 } // rad

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
	c := &s.Night.Conditions
	if c.WindMS.Known && c.WindFromDeg.Known && c.WindMS.Value > l.WindMS {
		b.sectors = append(b.sectors, sector{astro.Deg(c.WindFromDeg.Value).Rad(), l.WindSector.Rad() / 2})
	}
	if middle, half, cloudy := moment.CloudSector(c); cloudy {
		b.sectors = append(b.sectors, sector{middle.Rad(), astro.Deg(half).Rad()})
	}
	if top := moment.Top(l, s.Night.Site.Lat); top.Deg() < 90 {
		b.sinTop = sin(top)
	}
	can, should := s.Night.CanDark(), s.Night.SunBelow(moment.ShouldSunAltitude)
	if ours := s.Night.Allocated; ours != nil {
		can, should = astro.Intersect(can, ours), astro.Intersect(should, ours)
	}
	if s.Night.Conditions.Closed {
		can, should = nil, nil
	}
	b.can, b.should = darknessAt(can, s.Instant), darknessAt(should, s.Instant)
	return b
}

// darkness is the span of darkness that holds an instant, or the next one,
// hours from it; none is left where until is 0.
type darkness struct{ from, until float64 }

// now tells whether it is dark.
func (d darkness) now() bool { return d.from <= 0 && d.until > 0 }

func darknessAt(spans []astro.Span, t astro.Instant) darkness {
	for _, s := range spans {
		if t.Before(s.Until) {
			return darkness{s.From.Sub(t).Hours(), s.Until.Sub(t).Hours()}
		}
	}
	return darkness{}
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
	if ok && len(b.horizon)+len(b.sectors) > 0 {
		az := astro.Rad(math.Atan2(f.East.Dot(u), f.North.Dot(u)))
		ok = len(b.horizon) == 0 || sa >= moment.HorizonAt(b.horizon, az).Sin()
		for _, s := range b.sectors {
			ok = ok && math.Abs(az.Minus(astro.Rad(s.middle)).Signed().Rad()) >= s.half
		}
	}
	if !ok {
		return q
	}
	hard := b.reach(b.sinHard, sinDec, cosDec)
	inside := sa >= b.sinHard && sa <= b.sinTop && h >= b.hourFrom && h <= b.hourUntil
	switch {
	case inside && b.should.now() && sa >= b.sinWish:
		q.class = 0
		q.hours = float32(math.Min(b.ends(h, b.reach(b.sinWish, sinDec, cosDec), sinDec, cosDec), b.should.until))
	case inside && b.can.now():
		q.class = 1
		q.hours = float32(math.Min(b.ends(h, hard, sinDec, cosDec), b.can.until))
	case hard > 0:
		q.hours = float32(b.opens(h, hard, sinDec, cosDec))
	}
	return q
}

// ends returns the hours until a star at hour angle h leaves the limits: by
// sinking below the altitude it reaches up to, by its hour angle, or by rising
// above the highest one.
func (b *bounds) ends(h, reach, sinDec, cosDec float64) float64 {
	end := math.Min(reach, b.hourUntil)
	if top := b.reach(b.sinTop, sinDec, cosDec); b.sinTop < 1 && top > 0 && h < -top {
		end = math.Min(end, -top)
	}
	return (end - h) * solarHours
}

// opens returns the hours until a star can be taken in the darkness that is
// or comes; infinite where it cannot in it.
func (b *bounds) opens(h, hard, sinDec, cosDec float64) float64 {
	if b.can.until <= 0 {
		return math.Inf(1)
	}
	from, until := math.Max(-hard, b.hourFrom), math.Min(hard, b.hourUntil)
	top := 0.0 // hour angle within which it is too high
	if b.sinTop < 1 {
		top = b.reach(b.sinTop, sinDec, cosDec)
	}
	for _, turn := range []float64{0, 2 * math.Pi} {
		parts := [][2]float64{{from, until}}
		if top > 0 {
			parts = [][2]float64{{from, -top}, {top, until}}
		}
		for _, p := range parts {
			a, z := (p[0]-h+turn)*solarHours, (p[1]-h+turn)*solarHours
			a = math.Max(math.Max(a, b.can.from), 0)
			if a < math.Min(z, b.can.until) {
				return a
			}
		}
	}
	return math.Inf(1)
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
		if c.column == "stage" || c.column == "p" || stageNamed(c.column) != "" {
			m.Stage = r.Judged(i).verdict()
		}
		switch c.column {
		case "sun", "ha", "ra", "dec":
			m.Place = s.Scene.Frame.Horizontal(&r.stars[i])
			m.RA, m.Dec = m.Place.ICRS.LonLat()
			m.SunSep = astro.Separation(m.Place.Dir, s.Scene.Sun.Dir)
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
		return fmt.Errorf("%d targets cannot be sorted by %s: filter to %d or fewer first", len(list), ask.Sort.Key, Bulk)
	}
	for k := range list {
		v, known := key(int(list[k].row))
		switch {
		case !known: // last, reversed too
			v = math.MaxUint64
		case ask.Sort.Reverse:
			v = ^v
		}
		list[k].key = v
	}
	if ctx.Err() != nil {
		return fmt.Errorf("sorting %d targets: %w", len(list), ctx.Err())
	}
	sortPlaces(list)
	return nil
}

// quickKey returns the number that a long list is ordered by, and whether a
// target has one; nil: a key that would need every target's night.
func (r *Roster) quickKey(s *Snapshot, ask Ask) func(i int) (uint64, bool) {
	q, place := s.quick, func(i int) *targets.Place { return &r.entries[i].Target.Place }
	switch ask.Sort.Key {
	case "", "next":
		return func(i int) (uint64, bool) { return q[i].nextKey(r.entries[i].Want.Weight), q[i].class < 2 }
	case "name":
		return func(i int) (uint64, bool) { return uint64(r.byName[i]), true }
	case "alt":
		return func(i int) (uint64, bool) { return bits(-q[i].sinAlt), true }
	case "x":
		return func(i int) (uint64, bool) { return bits(-q[i].sinAlt), q[i].sinAlt > 0 }
	case "left":
		return func(i int) (uint64, bool) { return bits(float64(q[i].hours)), q[i].class < 2 }
	case "moon":
		return func(i int) (uint64, bool) { return bits(float64(q[i].cosMoon)), true }
	case "ra":
		return func(i int) (uint64, bool) { return bits(place(i).RA.Rad()), true }
	case "dec":
		return func(i int) (uint64, bool) { return bits(place(i).Dec.Rad()), true }
	case "kind":
		return func(i int) (uint64, bool) {
			return uint64(slices.Index(targets.Kinds, r.entries[i].Target.Kind)), true
		}
	case "mag":
		return func(i int) (uint64, bool) {
			v := r.listed(int32(i))
			return bits(v), !math.IsInf(v, 1)
		}
	case "period":
		return func(i int) (uint64, bool) {
			p := r.entries[i].Target.Var.PeriodD
			return bits(p.Value), p.Known
		}
	case "mark":
		return func(i int) (uint64, bool) {
			if ask.Marks[i] {
				return 0, true
			}
			return 1, true
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
