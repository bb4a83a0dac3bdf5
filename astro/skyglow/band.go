// Package skyglow says how bright the sky between the stars is, in any
// direction, band and moment, and how much starlight the air takes away:
// airglow, zodiacal light, faint stars, twilight, moonlight, lamps; molecules,
// ozone, aerosols. What the observer has measured takes precedence over what
// the model says. It knows no target and no telescope, and gives no number
// below the horizon or beside the Sun.
package skyglow

import (
	"fmt"
	"math"

	"evenfall/astro"
)

// The five bands that the model is made of, by their index.
const (
	bandU = iota
	bandB
	bandV
	bandR
	bandI
	fives
)

// fiveMicron are the wavelengths at which the five bands stand.
//
// Source: effective wavelengths of [cite.BessellEtAl1998].
var fiveMicron = [fives]float64{0.366, 0.438, 0.545, 0.641, 0.798}

// fiveAB is what makes AB magnitudes of those of the five bands: AB - Vega.
//
// Source: [cite.BessellEtAl1998], from its table of zero points.
var fiveAB = [fives]float64{0.768, -0.122, -0.001, 0.184, 0.442}

// bandZMicron is where z stands; its sky, Moon and twilight apart, is 0.9 mag
// brighter than that of I in AB (common practice, no source).
const (
	bandZMicron = 0.8932
	bandZBright = 0.9
)

// lineBright is how much brighter a narrow band is that holds a line of the
// airglow. Common practice, no source.
const lineBright = 0.5

// airglowLinesMicron are the lines that a narrow band had better not hold:
// [O I], Na D, [O I]; from hydroxylMicron on OH is everywhere.
var airglowLinesMicron = []float64{0.5577, 0.5893, 0.6300}

const hydroxylMicron = 0.68

// Where the optical model may be asked, micrometres.
const (
	shortestMicron = 0.30
	longestMicron  = 1.05
)

// Band is one photometric band, or one wavelength. The zero value is none, and
// refused.
type Band struct {
	name     string
	micron   float64
	ab       bool
	lo, hi   int     // between which of the five it lies
	w        float64 // weight of hi
	zero     float64 // added to the AB magnitude, or to the five's own where own
	own      bool    // one of the five
	infrared bool
	bright   float64 // magnitudes by which all but Moon and twilight are brighter
}

// BandOf returns a band by its name.
//
// Given:
//   - name: U B V R I (Cousins R and I), J H K, G BP RP in Vega magnitudes;
//     u g r i z in AB; case counts.
//
// Returns:
//   - the band; false for a name that the model has no sky for.
//
// Notes:
//  1. G, BP and RP are taken at their mean wavelengths, as no sky has been
//     measured in them from the ground (common practice, no source).
//  2. J, H and K have a dark value and an extinction but neither moonlight nor
//     twilight; see [Brightness].
//
// Checked: TestBandNames.
func BandOf(name string) (Band, bool) {
	for i, n := range [fives]string{"U", "B", "V", "R", "I"} {
		if n == name {
			return Band{name: name, micron: fiveMicron[i], lo: i, hi: i, own: true}, true
		}
	}
	for _, g := range []struct {
		name         string
		micron, vega float64 // vega: AB - Vega, to be taken off
		ab           bool
	}{
		{"u", 0.3551, 0, true}, {"g", 0.4686, 0, true}, {"r", 0.6166, 0, true}, {"i", 0.7480, 0, true}, {"z", bandZMicron, 0, true},
		{"G", 0.63907, 25.8010 - 25.6874, false}, {"BP", 0.51826, 25.3540 - 25.3385, false}, {"RP", 0.78251, 25.1040 - 24.7479, false},
	} {
		if g.name == name {
			b := between(g.micron)
			b.name, b.ab, b.zero = name, g.ab, -g.vega
			return b, true
		}
	}
	for i, n := range infraredNames {
		if n == name {
			return Band{name: name, micron: infraredMicron[i], lo: i, infrared: true}, true
		}
	}
	return Band{}, false
}

// Spectral returns the band of one wavelength, for a spectrum: AB magnitudes,
// the lines of the airglow smeared over the broad bands as they were measured.
//
// Given:
//   - at: 0.30 to 1.05 micrometres.
func Spectral(at astro.Wavelength) (Band, error) {
	if m := at.Micron(); !(m >= shortestMicron && m <= longestMicron) {
		return Band{}, fmt.Errorf("sky at %.4g nm: the model runs from 300 to 1050 nm", at.Nm())
	}
	b := between(at.Micron())
	b.ab = true
	return b, nil
}

// Narrow returns a narrow band in AB magnitudes. One that holds a line of the
// airglow, 557.7, 589.3 or 630.0 nm or anything beyond 680 nm, is 0.5 mag
// brighter, Moon and twilight apart (common practice, no source).
//
// Given:
//   - centre: 0.30 to 1.05 micrometres.
//   - width: full width, 0 or more.
//
// Checked: TestNarrow.
func Narrow(centre, width astro.Wavelength) (Band, error) {
	b, err := Spectral(centre)
	if err != nil {
		return b, err
	}
	half := width.Micron() / 2
	if !(half >= 0) || math.IsInf(half, 0) {
		return Band{}, fmt.Errorf("a filter %.4g nm wide: give its full width in nm, 0 or more", width.Nm())
	}
	if b.micron+half > hydroxylMicron {
		b.bright += lineBright
		return b, nil
	}
	for _, line := range airglowLinesMicron {
		if math.Abs(line-b.micron) <= half {
			b.bright += lineBright
			break
		}
	}
	return b, nil
}

// between places a wavelength among the five bands, in a straight line between
// their AB magnitudes; below U that of U, beyond I towards z.
func between(micron float64) Band {
	b := Band{micron: micron}
	switch last := fives - 1; {
	case micron <= fiveMicron[0]:
	case micron >= fiveMicron[last]:
		b.lo, b.hi = last, last
		b.bright = bandZBright * math.Min(1, (micron-fiveMicron[last])/(bandZMicron-fiveMicron[last]))
	default:
		for micron > fiveMicron[b.hi] {
			b.hi++
		}
		b.lo = b.hi - 1
		b.w = (micron - fiveMicron[b.lo]) / (fiveMicron[b.hi] - fiveMicron[b.lo])
	}
	return b
}

// Name returns the name that [BandOf] knows it by; empty for a wavelength.
func (b Band) Name() string { return b.name }

// AB tells whether the band's magnitudes are AB; Vega otherwise.
func (b Band) AB() bool { return b.ab }

// Wavelength returns where the band stands.
func (b Band) Wavelength() astro.Wavelength { return astro.Micron(b.micron) }

// IsZero tells whether it is no band at all.
func (b Band) IsZero() bool { return b.micron == 0 }
