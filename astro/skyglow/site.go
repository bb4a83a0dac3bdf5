package skyglow

import (
	"fmt"
	"math"
)

// darkVega is the dark zenith in the five bands: no Moon, high ecliptic and
// galactic latitude, least solar activity.
//
// Source: [cite.BennEllison1998].
var darkVega = [fives]float64{22.0, 22.7, 21.9, 21.0, 20.0}

// The near infrared: names, wavelengths, and the dark zenith in Vega
// magnitudes, which one observatory gives for good conditions; nights differ by
// half a magnitude. Seen in one copy, without a paper that could be named.
var (
	infraredNames  = [3]string{"J", "H", "K"}
	infraredMicron = [3]float64{1.22, 1.63, 2.19}
	infraredDark   = [3]float64{16.5, 14.4, 13.0}
)

// sunColour is (V - b) of the Sun, and so of zodiacal and faint stars' light.
//
// Source: [cite.RamirezEtAl2012]. Seen in its abstract.
var sunColour = [fives]float64{-0.819, -0.653, 0, 0.352, 0.702}

// solarSlope is how much airglow gains from the least to the greatest solar
// activity: 130/145 after [cite.BennEllison1998]; in R and I common practice,
// no source.
var solarSlope = [fives]float64{0.9, 0.9, 0.9, 0.6, 0.2}

// Solar activity, F10.7 in MJy: at its least and span of the slope; bounds.
const (
	quietSun, sunSpan       = 0.8, 1.2
	leastActive, mostActive = 0.7, 2.5
)

// The dark values hold this much zodiacal and faint stars' light, in stars of
// V = 10 per square degree.
//
// Source: [cite.BennEllison1998].
const darkZodiacal, darkStars = 60, 15

// s10Mag is the surface brightness of one star of V = 10 per square degree,
// 10 + 2.5 log 3600².
var s10Mag = 10 + 5*math.Log10(3600)

// flux turns magnitudes into light, magnitude 0 being 1.
func flux(mag float64) float64 { return math.Exp(-mag / magsPerNeper) }

// mag turns light into magnitudes.
func mag(light float64) float64 { return -magsPerNeper * math.Log(light) }

// Conditions are what is known of a site's sky. The zero value is a dark site
// at sea level with everything assumed.
type Conditions struct {
	Air            AirAbove
	Dark           map[string]float64 // dark zenith by band, mag/arcsec2; takes precedence
	LightPollution map[string]float64 // lamps by band, mag/arcsec2; "" for all others
	SolarActivity  float64            // F10.7 in MJy (100 sfu = 1); 0: 0.8, the least
}

// Site is a site's sky made ready, the same for all moments of a night. It does
// not change once made and may be shared.
type Site struct {
	ext      *Extinction
	airglow  [fives]float64 // zenith, solar activity in
	sunlike  [fives]float64 // light of one S10
	k        [fives]float64
	moon     [fives]moonWeights
	infrared [3]float64 // dark zenith
	infraK   [3]float64
	scale    map[string]float64 // of airglow, for bands other than the five that were measured
	lamps    map[string]float64 // light
	measured map[string]bool    // dark values of the observer's own
}

// NewSite makes a site's sky ready.
//
//	airglow = dark value - (60 zodiacal + 15 starlight, in S10, of the Sun's colour)
//	airglow x [1 + s (S - 0.8)/1.2],  S = F10.7 in MJy, 0.7 to 2.5
//	s = 0.9 in U, B, V; 0.6 in R; 0.2 in I
//
// Notes:
//  1. A measured dark value is taken as the zenith's at the least solar
//     activity and high latitudes; what it has above zodiacal and starlight is
//     airglow, lamps included. One that is darker than those leaves none.
//  2. Errors: a dark value or lamps outside 5 to 40 mag/arcsec2; the air's as
//     [NewExtinction] says. A band that [BandOf] does not know is passed over.
//
// Source: [cite.BennEllison1998].
//
// Checked: TestDarkSky, TestMeasuredDark.
func NewSite(c Conditions) (*Site, error) {
	ext, err := NewExtinction(c.Air)
	if err != nil {
		return nil, err
	}
	active := c.SolarActivity
	switch {
	case math.IsNaN(active) || math.IsInf(active, 0) || active < 0:
		return nil, fmt.Errorf("solar activity %v; write F10.7 in MJy, 0.7 to 2.5", active)
	case active == 0:
		active = quietSun
	}
	active = math.Max(leastActive, math.Min(mostActive, active))
	s := &Site{ext: ext, moon: weightsOf(ext), scale: map[string]float64{}, lamps: map[string]float64{}, measured: map[string]bool{}}
	if err := s.lit(c.LightPollution); err != nil {
		return nil, err
	}
	for name, d := range c.Dark {
		if !(d >= 5 && d <= 40) {
			return nil, fmt.Errorf("the dark sky of %v in %q; write mag/arcsec2, 5 to 40", d, name)
		}
		s.measured[name] = true
	}
	for i := range fives {
		b := fiveBand(i)
		dark := darkVega[i]
		if d, ok := c.Dark[b.name]; ok {
			dark = d
		}
		s.k[i] = ext.In(b)
		s.sunlike[i] = flux(s10Mag - sunColour[i])
		s.airglow[i] = math.Max(0, flux(dark)-(darkZodiacal+darkStars)*s.sunlike[i])
	}
	for i, name := range infraredNames {
		s.infrared[i] = flux(infraredDark[i])
		if d, ok := c.Dark[name]; ok {
			s.infrared[i] = flux(d)
		}
		b, _ := BandOf(name)
		s.infraK[i] = ext.In(b)
	}
	s.rescale(c.Dark)
	for i := range fives {
		s.airglow[i] *= 1 + solarSlope[i]*(active-quietSun)/sunSpan
	}
	return s, nil
}

// lit takes over the light of lamps.
func (s *Site) lit(by map[string]float64) error {
	for name, m := range by {
		if !(m >= 5 && m <= 40) {
			return fmt.Errorf("light pollution of %v in %q; write mag/arcsec2, 5 to 40", m, name)
		}
		s.lamps[name] = flux(m)
	}
	return nil
}

// rescale makes airglow agree with dark values measured in bands that lie
// between the five.
func (s *Site) rescale(dark map[string]float64) {
	still := &Sky{site: s, infra: s.infrared}
	for name, d := range dark {
		b, ok := BandOf(name)
		if !ok || b.own || b.infrared {
			continue
		}
		p := still.parts(b, look{x: 1, zodiacal: darkZodiacal, stars: darkStars})
		if rest := p[PartZodiacal] + p[PartStars]; p[PartAirglow] > 0 {
			s.scale[name] = math.Max(0, flux(d)-rest) / p[PartAirglow]
		}
	}
}

// Extinction returns the extinction above the site.
func (s *Site) Extinction() *Extinction { return s.ext }

// MeasuredDark tells whether the dark value of a band is the observer's own.
func (s *Site) MeasuredDark(b Band) bool { return s.measured[b.name] && b.name != "" }
