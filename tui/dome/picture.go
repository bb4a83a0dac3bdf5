package dome

import (
	"context"
	"fmt"
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// most is how many targets are drawn; of longer lists the first of the order.
const most = 1000

// picKey is what a picture was drawn for.
type picKey struct {
	roster *roster.Roster
	night  *moment.Night
	minute int64
	token  int
	marks  uintptr // which map of marks; the picture keeps the map
	look   *kit.Look
	vault  vault
	track  int
}

// spot is one target above the horizon.
type spot struct {
	row    int32
	sign   byte
	place  frame.Place
	altDeg float64 // refracted
	rising bool
	marked bool
}

// picture is the sky without the selected star and the cursor. It is drawn in
// the background and does not change.
type picture struct {
	key             picKey
	marks           map[int]bool
	spots           []spot
	below           int // targets below the horizon
	raster          *kit.Raster
	taken           []bool // cells that are letters, numbers or path
	darkest, bright float64
	skyKnown        bool
	shades          []shade
	zones           map[byte]bool // which signs of zones are drawn
}

// shade is a sign and how many magnitudes brighter than the darkest place the
// sky is from where on it stands.
type shade struct {
	sign  byte
	from  float64
	every int // columns
}

// shading is in steps that the eye sees: half a magnitude, then one and more.
var shading = []shade{{'.', 0.4, 8}, {':', 1, 6}, {'=', 2, 4}, {'#', 3.5, 2}}

// nearest returns the target nearest to a direction; -1: none is up.
func (p *picture) nearest(dir astro.Vec) (i int, away astro.Angle) {
	best, at := -2.0, -1
	for k := range p.spots {
		if c := dir.Dot(p.spots[k].place.Dir); c > best {
			best, at = c, k
		}
	}
	if at < 0 {
		return -1, astro.Angle{}
	}
	return at, astro.Separation(dir, p.spots[at].place.Dir)
}

// draw makes a picture.
func draw(ctx context.Context, key picKey, snap *roster.Snapshot, marks map[int]bool) (*picture, error) {
	p := &picture{key: key, marks: marks, zones: map[byte]bool{}}
	for k, row := range snap.Order[:min(len(snap.Order), most)] {
		if k%64 == 0 && ctx.Err() != nil {
			return nil, fmt.Errorf("drawing the sky: %w", ctx.Err())
		}
		m := snap.Row(int(row))
		if m.Apparent.Deg() < 0 {
			p.below++
			continue
		}
		p.spots = append(p.spots, spot{row, kit.StageSign(m.Stage.Best), m.Place, m.Apparent.Deg(), m.Rising, marks[int(row)]})
	}
	b := newBoard(key.vault, key.look.Glyphs)
	b.arch()
	b.limits(&snap.Scene)
	if key.track >= 0 && key.track < snap.Roster.Len() {
		b.path(&snap.Scene, snap.Roster.Prepared(key.track))
	}
	b.bodies(&snap.Scene)
	b.stars(p.spots)
	b.hourMarks()
	b.scale()
	p.shadeSky(b, &snap.Scene)
	p.taken = b.taken
	p.raster = b.canvas.Raster(key.look)
	return p, nil
}

// shadeSky works out how bright the sky is and draws numbers, shades and
// zones.
func (p *picture) shadeSky(b *board, sc *moment.Scene) {
	v := b.vault
	values := make([]float64, v.cols*v.rows)
	p.darkest, p.bright = math.Inf(-1), math.Inf(1)
	for row := range v.rows {
		for col := range v.cols {
			i := row*v.cols + col
			values[i] = math.NaN()
			az, alt, ok := v.at(col, row)
			if !ok {
				continue
			}
			place := towards(&sc.Frame, az, air.Unrefract(astro.Deg(alt), sc.Night.Site.Air).Deg())
			now := sc.SkyAt(&place, moment.SkyBand)
			if !now.Known {
				continue
			}
			values[i] = now.Total.MagArcsec2()
			p.darkest, p.bright, p.skyKnown = math.Max(p.darkest, values[i]), math.Min(p.bright, values[i]), true
		}
	}
	b.numbers(values)
	z := zonesOf(sc)
	used := map[byte]bool{}
	for row := range v.rows {
		for col := range v.cols {
			i := row*v.cols + col
			az, alt, ok := v.at(col, row)
			if !ok || b.drawn[i] || b.taken[i] {
				continue
			}
			if c, every := z.sign(&sc.Frame, az, alt); c != 0 {
				p.zones[c] = true
				if (col+row*(every/2+1))%every == 0 {
					b.canvas.Text(col, row, kit.Warn, string(c))
				}
				continue
			}
			c, every := shadeOf(p.darkest - values[i])
			if c != 0 && (col+row*every/2)%every == 0 {
				b.canvas.Text(col, row, kit.Dark, string(c))
				used[c] = true
			}
		}
	}
	for _, s := range shading {
		if used[s.sign] {
			p.shades = append(p.shades, s)
		}
	}
}

func shadeOf(brighter float64) (sign byte, every int) {
	every = 1
	for _, s := range shading {
		if brighter >= s.from {
			sign, every = s.sign, s.every
		}
	}
	return sign, every
}

// zones are the parts of the sky that limits and conditions take away.
type zones struct {
	sun, moon           astro.Vec
	sunCos, moonCos     float64
	wind, cloud         bool
	windMid, cloudMid   float64
	windHalf, cloudHalf float64
}

func zonesOf(sc *moment.Scene) zones {
	l, c := &sc.Night.Limits, &sc.Night.Conditions
	z := zones{sun: sc.Sun.Dir, moon: sc.Moon.Dir, sunCos: l.Sun.Cos(), moonCos: l.Moon.Cos()}
	if sc.Moon.Place.Alt.Deg() < -2 {
		z.moonCos = 2
	}
	if c.WindMS.Known && c.WindFromDeg.Known && c.WindMS.Value > l.WindMS {
		z.wind, z.windMid, z.windHalf = true, c.WindFromDeg.Value, l.WindSector.Deg()/2
	}
	if middle, half, ok := moment.CloudSector(c); ok {
		z.cloud, z.cloudMid, z.cloudHalf = true, middle.Deg(), half
	}
	return z
}

// sign returns the sign of the zone that a place is in, and how sparsely it is
// drawn; 0: none.
func (z *zones) sign(f *frame.Frame, azDeg, altDeg float64) (sign byte, every int) {
	dir := towards(f, azDeg, altDeg).Dir
	if dir.Dot(z.sun) > z.sunCos {
		return 'x', 4
	}
	if dir.Dot(z.moon) > z.moonCos {
		return 'o', 4
	}
	return z.sector(azDeg)
}

// sector returns the sign of the sector that an azimuth is in.
func (z *zones) sector(azDeg float64) (sign byte, every int) {
	within := func(mid, half float64) bool { return math.Abs(astro.Deg(azDeg-mid).Signed().Deg()) < half }
	switch {
	case z.cloud && within(z.cloudMid, z.cloudHalf):
		return '~', 6
	case z.wind && within(z.windMid, z.windHalf):
		return '/', 6
	}
	return 0, 1
}

// pathHours is how far ahead the path of the selected star goes.
const pathHours = 8

// path draws where a star goes over the coming hours.
func (b *board) path(sc *moment.Scene, p *moment.Prepared) {
	const step = 5 * time.Minute
	at := sc.Instant
	hour := at.UTC().Truncate(time.Hour).Add(time.Hour)
	var last [2]int
	down := false
	for k := 0; k*int(step) <= pathHours*int(time.Hour); k++ {
		t := at.Add(time.Duration(k) * step)
		f := frame.At(sc.Frame.Site, t)
		place := f.Look(f.Observed(&p.Star))
		x, y, ok := plane(b.vault.middle, place.Az.Deg(), air.Refract(place.Alt, sc.Night.Site.Air).Deg())
		if !ok {
			down = false
			continue
		}
		dx, dy := int((x+1)*float64(b.vault.cols)), int((1-y)*4*float64(b.vault.rows))
		if down && abs(dx-last[0]) < b.vault.cols {
			b.line(last[0], last[1], dx, dy)
		} else {
			b.dot(dx, dy, kit.Curve)
		}
		last, down = [2]int{dx, dy}, true
		if !t.UTC().Before(hour) {
			col, row := b.vault.cellAt(x, y)
			b.marks = append(b.marks, hourMark{col, row, hour.Format("15")})
			hour = hour.Add(time.Hour)
		}
	}
}

func abs(n int) int {
	if n < 0 {
		return -n
	}
	return n
}
