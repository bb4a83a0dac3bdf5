package skyglow

import (
	"errors"
	"math"

	"evenfall/astro"
	"evenfall/astro/air"
)

// errDirection says that a direction or an altitude is not a number.
var errDirection = errors.New("the direction is not a number; there is no sky")

// errBand says that a band is the zero value.
var errBand = errors.New("no band is given; there is no sky")

// Part is one of the lights that make up the sky.
type Part int

// The parts of the sky's light.
const (
	PartAirglow  Part = iota // of the upper air, and the glow that a measured dark value holds
	PartZodiacal             // sunlight on dust between the planets
	PartStars                // stars too faint to be seen one by one
	PartTwilight             // the Sun below the horizon
	PartMoon                 // scattered moonlight
	PartLamps                // light pollution, where the site gives it apart
	parts
)

// String names the part in the words of a screen.
func (p Part) String() string {
	if p < 0 || p >= parts {
		return "?"
	}
	return [parts]string{"airglow", "zodiacal light", "starlight", "twilight", "moonlight", "light pollution"}[p]
}

// Brightness is the sky at one place in one band.
type Brightness struct {
	Total astro.SurfaceMag
	// Sigma is how far real skies lie from the model, magnitudes: 0.2 dark, 0.3
	// under the Moon, 0.5 in twilight and in J, H and K (as the models' own
	// authors and common practice have it).
	Sigma float64
	// Partial is set in J, H and K with the Moon up or the Sun less than 18
	// degrees down, whose light in these bands is not modelled.
	Partial bool
	share   [parts]float64
}

// Share returns how much of the light a part makes up, 0 to 1; all parts sum to
// 1.
func (b Brightness) Share(p Part) float64 {
	if p < 0 || p >= parts {
		return 0
	}
	return b.share[p]
}

// Of returns the brightness of one part alone; false where it gives no light.
func (b Brightness) Of(p Part) (astro.SurfaceMag, bool) {
	s := b.Share(p)
	if !(s > 0) {
		return astro.SurfaceMag{}, false
	}
	return astro.MagArcsec2(b.Total.MagArcsec2() + mag(s)), true
}

// Without returns the brightness without some parts, e.g. the dark sky that the
// Moon hides; false where no light is left.
func (b Brightness) Without(some ...Part) (astro.SurfaceMag, bool) {
	kept := b.share
	for _, p := range some {
		if p >= 0 && p < parts {
			kept[p] = 0
		}
	}
	left := 0.0
	for _, s := range kept {
		left += s
	}
	if !(left > 0) {
		return astro.SurfaceMag{}, false
	}
	return astro.MagArcsec2(b.Total.MagArcsec2() + mag(left)), true
}

// Direction is a place on the sky.
type Direction struct {
	Dir astro.Vec   // unit vector along the ICRS axes
	Alt astro.Angle // altitude without refraction
}

// Scene is what a sky depends on, at one moment.
type Scene struct {
	Site       *Site
	Sun, Moon  Direction
	MoonPhase  astro.Angle // Sun-Moon-site: 0 full, 180 degrees new
	MoonDistKm float64     // from the site; 0: its mean
}

// Sky is the sky of one moment, ready to be asked in any direction. It does not
// change once made and may be shared.
type Sky struct {
	site     *Site
	sunLon   astro.Angle // ecliptic
	sunAlt   float64     // degrees
	moon     astro.Vec
	moonUp   bool
	moonI    [fives]float64 // illuminance after extinction
	twilight [fives]float64 // light
	infra    [3]float64
}

// NewSky makes the sky of a moment, once for all directions and bands.
//
// Returns:
//   - the sky; an error where the Sun's or the Moon's place is not a number, or
//     there is no site.
//
// Notes:
//  1. It costs about 2 microseconds, [Sky.At] less than one.
func NewSky(s Scene) (*Sky, error) {
	phase := s.MoonPhase.Deg()
	if s.Site == nil || !s.Sun.valid() || !s.Moon.valid() || math.IsNaN(phase) || math.IsInf(phase, 0) || !(s.MoonDistKm >= 0) {
		return nil, errors.New("the Sun or the Moon has no place, or the site no sky; there is no sky")
	}
	out := &Sky{site: s.Site, sunAlt: s.Sun.Alt.Deg(), moon: s.Moon.Dir.Unit(), infra: s.Site.infrared}
	out.sunLon, _ = toEcliptic.Apply(s.Sun.Dir).LonLat()
	for i := range fives {
		if m, ok := twilightMag(i, 90-out.sunAlt); ok {
			out.twilight[i] = flux(m)
		}
	}
	if zm := 90 - s.Moon.Alt.Deg(); zm < 90 {
		out.moonUp = true
		light := moonIlluminance(Moonlight{Phase: s.MoonPhase, DistanceKm: s.MoonDistKm})
		for i, w := range s.Site.moon {
			out.moonI[i] = light * math.Pow(10, -0.4*w.k*path(zm))
		}
	}
	return out, nil
}

// valid tells whether a direction is one.
func (d Direction) valid() bool {
	n, h := d.Dir.Norm(), d.Alt.Deg()
	return n > 0.5 && n < 2 && h >= -90.001 && h <= 90.001
}

// look is what a direction gives the model.
type look struct {
	x               float64 // van Rhijn's path
	zodiacal, stars float64 // S10
	moonSep         astro.Angle
	moonPath        float64 // path for moonlight; 0 without Moon
}

// At returns the brightness of the sky.
//
//	light = A x X a + (Z + L) a + Moon + twilight + lamps
//	a = 10^(-0.4 k (X - 1)),  X = (1 - 0.96 cos² h)^(-1/2)
//
// with A the zenith's airglow, Z and L zodiacal and faint stars' light outside
// the atmosphere, k the extinction in the band. Bands between U, B, V, R and I
// lie on straight lines in wavelength between their AB magnitudes.
//
// Returns:
//   - the brightness and its parts.
//   - [air.ErrBelowHorizon], [ErrNearSun], with not a number.
//
// Notes:
//  1. Twilight is the zenith's in every direction; towards the Sun it is
//     brighter, see [Twilight].
//  2. Good above 10 degrees of altitude; below, the path of 5 airmasses at most
//     is too short.
//
// Source: [cite.Patat2003], appendix C, after [cite.Garstang1989];
// [cite.LeinertEtAl1998], [cite.KrisciunasSchaefer1991], [cite.PatatEtAl2006].
//
// Checked: TestCombined, against testdata/astro/skyglow.csv; TestTrends;
// TestMeasuredSky, against a year's measurements; TestUgriz, against
// [cite.IvezicEtAl2019], 0.22 mag.
func (s *Sky) At(d Direction, b Band) (Brightness, error) {
	none := Brightness{Total: astro.MagArcsec2(math.NaN())}
	if b.IsZero() {
		return none, errBand
	}
	l, err := s.look(d)
	if err != nil {
		return none, err
	}
	return s.brightness(b, l), nil
}

// look works out what all bands share.
func (s *Sky) look(d Direction) (look, error) {
	if !d.valid() {
		return look{}, errDirection
	}
	x, err := air.VanRhijn(d.Alt)
	if err != nil {
		return look{}, err
	}
	lon, lat := toEcliptic.Apply(d.Dir).LonLat()
	l := look{x: float64(x)}
	if l.zodiacal, err = Zodiacal(lon.Minus(s.sunLon), lat); err != nil {
		return look{}, err
	}
	dir := d.Dir.Unit()
	l.stars = Starlight(galacticLat(dir))
	if s.moonUp {
		l.moonSep = astro.Separation(dir, s.moon)
		l.moonPath = l.x
	}
	return l, nil
}

// brightness adds up the parts.
func (s *Sky) brightness(b Band, l look) Brightness {
	p := s.parts(b, l)
	total := 0.0
	for _, v := range p {
		total += v
	}
	out := Brightness{Total: astro.MagArcsec2(mag(total)), share: p}
	for i := range out.share {
		out.share[i] /= total
	}
	const dark, moonlit, twilit = 0.2, 0.3, 0.5
	moon, twi := out.share[PartMoon], out.share[PartTwilight]
	out.Sigma = dark*(1-moon-twi) + moonlit*moon + twilit*twi
	if b.infrared {
		out.Sigma = twilit
		out.Partial = s.moonUp || s.sunAlt > -18
	}
	return out
}

// parts returns the light of each part in a band.
func (s *Sky) parts(b Band, l look) [parts]float64 {
	var p [parts]float64
	switch {
	case b.infrared:
		p[PartAirglow] = s.infra[b.lo] * l.x * math.Exp(-s.site.infraK[b.lo]/magsPerNeper*(l.x-1))
	case b.own:
		p = s.five(b.lo, l)
	default:
		p = s.mixed(b, l)
	}
	if k, ok := s.site.scale[b.name]; ok {
		p[PartAirglow] *= k
	}
	lamps, ok := s.site.lamps[b.name]
	if !ok {
		lamps = s.site.lamps[""]
	}
	p[PartLamps] = lamps
	return p
}

// five returns the light of each part in one of the five bands.
func (s *Sky) five(i int, l look) (p [parts]float64) {
	st := s.site
	a := math.Exp(-st.k[i] / magsPerNeper * (l.x - 1))
	p[PartAirglow] = st.airglow[i] * l.x * a
	p[PartZodiacal] = l.zodiacal * st.sunlike[i] * a
	p[PartStars] = l.stars * st.sunlike[i] * a
	p[PartTwilight] = s.twilight[i]
	if l.moonPath > 0 {
		w := st.moon[i]
		f := scattering(Moonlight{Separation: l.moonSep, rayleigh: w.rayleigh, mie: w.mie})
		nl := Nanolamberts(f * s.moonI[i] * (1 - math.Exp(-w.k/magsPerNeper*l.moonPath)))
		p[PartMoon] = flux(nl.V().MagArcsec2() - moonColour[i])
	}
	return p
}

// mixed returns the light of each part in a band between two of the five: the
// sum lies on a straight line between their AB magnitudes, and is shared out as
// the parts' own magnitudes have it.
func (s *Sky) mixed(b Band, l look) [parts]float64 {
	p := s.five(b.lo, l)
	scale := flux(fiveAB[b.lo] + b.zero)
	if b.hi == b.lo {
		bright := flux(-b.bright)
		for i := range p {
			p[i] *= scale
			if Part(i) != PartMoon && Part(i) != PartTwilight {
				p[i] *= bright
			}
		}
		return p
	}
	q := s.five(b.hi, l)
	other := flux(fiveAB[b.hi] + b.zero)
	var sumP, sumQ, sum float64
	for i := range p {
		p[i] *= scale
		q[i] *= other
		sumP += p[i]
		sumQ += q[i]
		if p[i] > 0 && q[i] > 0 {
			p[i] = math.Exp((1-b.w)*math.Log(p[i]) + b.w*math.Log(q[i]))
		} else {
			p[i] = (1-b.w)*p[i] + b.w*q[i]
		}
		sum += p[i]
	}
	norm := math.Exp((1-b.w)*math.Log(sumP)+b.w*math.Log(sumQ)) / sum
	for i := range p {
		p[i] *= norm
		if b.bright != 0 && Part(i) != PartMoon && Part(i) != PartTwilight {
			p[i] *= flux(-b.bright)
		}
	}
	return p
}
