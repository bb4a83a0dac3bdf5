package frame

import (
	_ "embed"
	"encoding/csv"
	"math"
	"strconv"
	"strings"

	"evenfall/astro"
	"evenfall/astro/meeusfence"
)

//go:embed earth-series.csv
var earthCSV string

// The years for which the series holds: fitted from 2010, it is good to 1.3 ms
// until 2053.8 and then runs off, 11 ms by the end of 2053. It is used to that
// end, marked as coarse; other dates take another route.
const seriesFrom, seriesGood, seriesUntil = 2010.0, 2053.8, 2054.0

// term is one sine and cosine of the Earth series, for three axes.
type term struct {
	phase, rate    float64 // rad, rad per century
	s, c           [3]float64
	secular        bool
	sSlope, cSlope [3]float64 // per unit of x
}

// series is a position in AU along the ICRS axes as a function of time.
type series struct {
	poly  [3][3]float64 // by axis, powers of x = T - 0.3
	terms []term
}

var baryEarth, helioEarth = loadEarth()

// loadEarth reads the embedded table; a table that cannot be read is a fault
// of the build.
func loadEarth() (bary, helio series) {
	r := csv.NewReader(strings.NewReader(earthCSV))
	r.Comment = '#'
	r.FieldsPerRecord = -1
	rows, err := r.ReadAll()
	if err != nil || len(rows) < 3 {
		panic("frame: the embedded Earth series cannot be read")
	}
	for _, row := range rows[1:] {
		s := &bary
		if row[0] == "heliocentric" {
			s = &helio
		}
		if row[1] == "poly" {
			axis := int(number(row[2]))
			s.poly[axis] = [3]float64{number(row[5]), number(row[6]), number(row[7])}
			continue
		}
		t := term{phase: number(row[3]), rate: number(row[4]), secular: row[11] != ""}
		for k := range 3 {
			t.s[k], t.c[k] = number(row[5+k]), number(row[8+k])
			t.sSlope[k], t.cSlope[k] = number(row[11+k]), number(row[14+k])
		}
		s.terms = append(s.terms, t)
	}
	return bary, helio
}

func number(s string) float64 {
	if s == "" {
		return 0
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		panic("frame: bad number in the embedded Earth series: " + s)
	}
	return v
}

// at returns position, AU, and velocity, AU per century.
func (s *series) at(centuries float64) (pos, vel astro.Vec) {
	x := centuries - 0.3
	var p, v [3]float64
	for k := range 3 {
		c := s.poly[k]
		p[k] = c[0] + x*(c[1]+x*c[2])
		v[k] = c[1] + 2*x*c[2]
	}
	for i := range s.terms {
		t := &s.terms[i]
		sin, cos := math.Sincos(t.phase + t.rate*centuries)
		for k := range 3 {
			a, b := t.s[k], t.c[k]
			if t.secular {
				a += x * t.sSlope[k]
				b += x * t.cSlope[k]
				v[k] += t.sSlope[k]*sin + t.cSlope[k]*cos
			}
			p[k] += a*sin + b*cos
			v[k] += t.rate * (a*cos - b*sin)
		}
	}
	return astro.Vec{X: p[0], Y: p[1], Z: p[2]}, astro.Vec{X: v[0], Y: v[1], Z: v[2]}
}

// Earth is where the Earth's centre is and how fast it moves, along the axes
// of the ICRS.
type Earth struct {
	Bary     astro.Vec // from the barycentre of the solar system, AU
	Helio    astro.Vec // from the Sun's centre, AU
	Velocity astro.Vec // barycentric, units of c
	SunDrift astro.Vec // velocity of the Sun's centre, units of c
	Fallback bool      // outside 2010 to 2053.8: coarser, see EarthAt
}

// Light-time for one AU in seconds, and the day and century.
//
// Source: [cite.IAU2012B2] for the AU, 299792458 m/s by definition.
const (
	auM         = 149597870700.0
	lightMS     = 299792458.0
	auLightS    = auM / lightMS
	centuryS    = 36525 * 86400.0
	arcsecToRad = math.Pi / (180 * 3600)
)

// EarthAt returns the Earth's place and velocity.
//
// Given:
//   - t: 2010 to 2053 for the figures below; other dates fall back.
//
// Notes:
//  1. Mean longitudes of Simon et al. 1994, amplitudes fitted to ERFA epv00:
//     0.66 ms of light-time and 0.14 m/s, over 2010-2053.
//  2. Outside those years Fallback is set: the Sun and four giant planets of
//     Meeus give light-times to 0.1 s, Ron & Vondrak velocities to 0.6 m/s.
//
// Source: [cite.Simon1994] for the arguments; the fit is this project's own.
//
// Checked: TestBarycentre, TestEarthVelocity, against testdata/astro/velocity.csv.
func EarthAt(t astro.Instant) Earth {
	y := t.YearsTT()
	if y < seriesFrom || y > seriesUntil {
		return earthFallback(t)
	}
	T := t.CenturiesTT()
	toC := auLightS / centuryS
	bp, bv := baryEarth.at(T)
	hp, hv := helioEarth.at(T)
	return Earth{Bary: bp, Helio: hp, Velocity: bv.Times(toC), SunDrift: bv.Minus(hv).Times(toC), Fallback: y > seriesGood}
}

func earthFallback(t astro.Instant) Earth {
	p := precessionOf(t.CenturiesTT())
	toICRS := func(ecliptic astro.Vec) astro.Vec {
		return p.matrix(0, 0).ApplyT(astro.Rotation(0, p.obliquity.Neg()).Apply(ecliptic))
	}
	lon, r := meeusfence.SunTrue(t)
	helio := toICRS(astro.Direction(lon, astro.Angle{})).Times(-r)
	sun := toICRS(meeusfence.SunFromBarycentre(t))
	return Earth{Bary: sun.Plus(helio), Helio: helio, Velocity: meeusfence.EarthVelocity(t), Fallback: true}
}
