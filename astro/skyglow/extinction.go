package skyglow

import (
	"fmt"
	"math"

	"evenfall/astro"
)

// magsPerNeper turns an optical depth into magnitudes, 2.5 / ln 10.
const magsPerNeper = 2.5 / math.Ln10

// What is assumed of the air where nothing is given.
const (
	defaultOzoneDU = 280 // mid latitudes 300 to 350, tropics 250 to 260
	// Aerosols by height, after [cite.Green1992]; the constants from memory,
	// not checked against the publication, whose sea-level value they give.
	aerosolSea, aerosolHeightKm, aerosolAlpha = 0.05, 1.5, 1.3
	leastAerosol                              = 0.01 // at 1 micrometre, where a measured V asks for less
	mostExtinction                            = 10.0 // mag per airmass; beyond, no star is seen
)

// ozoneNm and ozoneA are the absorption of ozone, per atm cm; 0 outside, the
// first value below.
//
// Source: [cite.BirdRiordan1984], after Leckner. Seen as one other prints it.
var (
	ozoneNm = []float64{300, 305, 310, 315, 320, 325, 330, 335, 340, 345, 350, 360, 440, 450, 460, 470, 480, 490, 500, 510, 520,
		530, 540, 550, 570, 593, 610, 630, 656, 667.6, 690, 710, 718, 724.4, 740, 752.5, 762.5, 780}
	ozoneA = []float64{10, 4.8, 2.7, 1.35, .8, .38, .16, .075, .04, .019, .007, 0, 0, .003, .006, .009, .014, .021, .03, .04, .048,
		.063, .075, .085, .12, .119, .12, .09, .065, .051, .028, .018, .015, .012, .01, .008, .006, 0}
)

// Rayleigh returns the extinction by the molecules of the air.
//
//	k = 0.0094977 λ^-4 n² exp(-h/7.996)                 mag per airmass
//	n = 0.23465 + 107.6/(146 - λ^-2) + 0.93161/(41 - λ^-2)
//
// Given:
//   - at: λ in micrometres here, 0.3 to 2.5.
//   - heightKm: h, height of the site above the sea, kilometres.
//
// Source: [cite.HayesLatham1975], in the form of [cite.Green1992]. Seen as two
// others print it.
//
// Checked: TestExtinctionPublished, against testdata/astro/extinction.csv.
func Rayleigh(at astro.Wavelength, heightKm float64) float64 {
	l2 := 1 / (at.Micron() * at.Micron())
	n := 0.23465 + 107.6/(146-l2) + 0.93161/(41-l2)
	return 0.0094977 * l2 * l2 * n * n * math.Exp(-heightKm/7.996)
}

// Ozone returns the extinction by ozone.
//
//	k = 1.0857 a(λ) DU/1000                             mag per airmass
//
// Given:
//   - du: ozone above the site, Dobson units, 200 to 450.
//
// Notes:
//  1. Hardly any ozone lies below an observatory: it is not reduced with height.
//
// Source: [cite.BirdRiordan1984].
//
// Checked: TestExtinctionPublished.
func Ozone(at astro.Wavelength, du float64) float64 {
	return magsPerNeper * ozoneAt(at.Nm()) * du / 1000
}

func ozoneAt(nm float64) float64 {
	n := len(ozoneNm)
	switch {
	case nm <= ozoneNm[0]:
		return ozoneA[0]
	case nm >= ozoneNm[n-1]:
		return 0
	}
	i := 1
	for nm > ozoneNm[i] {
		i++
	}
	u := (nm - ozoneNm[i-1]) / (ozoneNm[i] - ozoneNm[i-1])
	return ozoneA[i-1] + u*(ozoneA[i]-ozoneA[i-1])
}

// Aerosol is dust and haze: k = K λ^-Alpha, λ in micrometres, mag per airmass.
type Aerosol struct{ K, Alpha float64 }

// The aerosols of two sites that were measured for years, and those assumed by
// height where nothing is known.
//
// Source: [cite.PatatEtAl2011]; [cite.ButonEtAl2013], seen in one copy.
var (
	ParanalAerosol  = Aerosol{0.013, 1.38}
	MaunaKeaAerosol = Aerosol{0.0084, 1.26}
)

// AerosolByHeight returns what is assumed where no aerosol was measured.
//
//	k = 0.05 exp(-h/1.5) λ^-1.3                          h in kilometres
//
// Source: [cite.Green1992]; the constants from memory, not checked against the
// publication.
//
// Checked: TestExtinctionPublished, its value for 510 nm at sea level.
func AerosolByHeight(heightKm float64) Aerosol {
	return Aerosol{aerosolSea * math.Exp(-heightKm/aerosolHeightKm), aerosolAlpha}
}

// infraredK are the extinctions in J, H and K that are assumed.
//
// Source: [cite.KrisciunasEtAl1987], rounded; common practice for other sites.
var infraredK = [3]float64{0.10, 0.06, 0.09}

// Extinction is how much light the air above a site takes, by wavelength. It
// does not change once made and may be shared.
type Extinction struct {
	heightKm, ozoneDU, dust float64
	aerosol                 Aerosol
	measured                map[string]float64
}

// AirAbove is what is known of the air above a site. The zero value is the sea
// level with everything assumed.
type AirAbove struct {
	HeightM  float64            // above the sea
	OzoneDU  float64            // 0: 280
	Aerosol  Aerosol            // zero: by height
	DustMag  float64            // grey, mag per airmass, e.g. sand from a desert
	Measured map[string]float64 // by band, mag per airmass; takes precedence
}

// NewExtinction works out the extinction above a site.
//
//	k(λ) = Rayleigh + ozone + K λ^-Alpha + dust
//
// Notes:
//  1. A measured V sets the aerosols of every other wavelength: K = (k - the
//     rest at 545 nm) 0.545^Alpha, at least 0.01. Where V was not measured the
//     measured optical band nearest to it does so. The measured bands
//     themselves keep what was measured.
//  2. Oxygen (687, 760 nm) and water bands are left out.
//  3. Errors: a value that is no number or beyond nature; a measured extinction
//     outside 0 to 10.
//
// Checked: TestExtinctionPublished, TestMeasuredExtinction.
func NewExtinction(a AirAbove) (*Extinction, error) {
	for _, c := range []struct {
		what      string
		v, lo, hi float64
	}{{"height in m", a.HeightM, -500, 9000}, {"ozone in DU", a.OzoneDU, 0, 1000}, {"dust in mag", a.DustMag, 0, mostExtinction},
		{"aerosol in mag", a.Aerosol.K, 0, mostExtinction}, {"exponent of aerosol", a.Aerosol.Alpha, -5, 5}} {
		if !(c.v >= c.lo && c.v <= c.hi) {
			return nil, fmt.Errorf("the air's %s is %v; give %v to %v", c.what, c.v, c.lo, c.hi)
		}
	}
	e := &Extinction{heightKm: a.HeightM / 1000, ozoneDU: a.OzoneDU, dust: a.DustMag, aerosol: a.Aerosol, measured: map[string]float64{}}
	if e.ozoneDU <= 0 {
		e.ozoneDU = defaultOzoneDU
	}
	if e.aerosol == (Aerosol{}) {
		e.aerosol = AerosolByHeight(e.heightKm)
	}
	nearest, anchor := math.Inf(1), Band{}
	for name, k := range a.Measured {
		if !(k >= 0 && k <= mostExtinction) {
			return nil, fmt.Errorf("the extinction in %s is %v; write magnitudes per airmass, 0 to %v", name, k, mostExtinction)
		}
		e.measured[name] = k
		b, ok := BandOf(name)
		if !ok {
			continue // no sky is known for it, and nothing asks
		}
		away := math.Abs(b.micron - fiveMicron[bandV])
		if !b.infrared && (away < nearest || away == nearest && name < anchor.name) {
			nearest, anchor = away, b
		}
	}
	if !anchor.IsZero() {
		at := anchor.Wavelength()
		rest := e.measured[anchor.name] - Rayleigh(at, e.heightKm) - Ozone(at, e.ozoneDU)
		e.aerosol.K = math.Max(leastAerosol, rest*math.Pow(at.Micron(), e.aerosol.Alpha))
		e.dust = 0 // the measured value holds it
	}
	return e, nil
}

// At returns the extinction at one wavelength, mag per airmass, by the model
// whose aerosols agree with what was measured.
//
// Given:
//   - at: 0.3 to 1.05 micrometres; beyond, the absorption by water that is not
//     in it counts for more than what is.
func (e *Extinction) At(at astro.Wavelength) float64 {
	return Rayleigh(at, e.heightKm) + Ozone(at, e.ozoneDU) + e.aerosol.K*math.Pow(at.Micron(), -e.aerosol.Alpha) + e.dust
}

// In returns the extinction in a band, mag per airmass: measured where it was,
// else at the wavelength of the band; J, H and K assumed.
//
// Notes:
//  1. For a very red star in a wide band ask [Extinction.At] at the star's own
//     mean wavelength: in Gaia G it is 0.124 for 10000 K and 0.046 for 2500 K.
func (e *Extinction) In(b Band) float64 {
	if k, ok := e.measured[b.name]; ok && b.name != "" {
		return k
	}
	if b.infrared {
		return infraredK[b.lo] + e.dust
	}
	return e.At(b.Wavelength())
}

// Measured tells whether the extinction in a band is the observer's own.
func (e *Extinction) Measured(b Band) bool {
	_, ok := e.measured[b.name]
	return ok && b.name != ""
}

// Dim returns a magnitude as it is seen through the air.
//
//	m = m0 + k X
func (e *Extinction) Dim(m astro.Mag, b Band, x astro.Airmass) astro.Mag {
	return m.Fainter(e.In(b) * float64(x))
}
