package instrument

import (
	"fmt"
	"slices"

	"evenfall/targets"
)

// Lack is a value that an exposure cannot be worked out without, and that
// run.toml does not give.
type Lack struct {
	Mode string // of which mode; "": of the instrument
	Key  string // of run.toml
	What string // what is the matter
	Fix  string // what to write
}

// Error says it in one sentence.
func (l Lack) Error() string { return l.What + ": " + l.Fix }

// lineFilter are the narrow bands: where the line is and how wide a filter for
// it is taken to be where the mode gives no range_nm, nanometres (common
// practice, no source, for the widths).
var lineFilter = map[targets.Band][2]float64{"Ha": {656.28, 6.5}, "Hb": {486.13, 6.0}, "O3": {500.68, 6.0}}

// Line returns where the line of a band of nebulae is, nm; false for another
// band.
func Line(b targets.Band) (nm float64, ok bool) {
	l, ok := lineFilter[b]
	return l[0], ok
}

// Narrow returns the middle and the full width of a mode's narrow filter.
//
// Returns:
//   - nm; from range_nm where the mode has both, else 6.5 nm for Ha and 6 nm for
//     Hb and O3. False for a broad band.
func (m *Mode) Narrow() (centreNm, widthNm float64, ok bool) {
	l, ok := lineFilter[m.Band]
	if !ok {
		return 0, 0, false
	}
	if m.RangeNm[1] > m.RangeNm[0] && m.RangeNm[0] > 0 {
		return (m.RangeNm[0] + m.RangeNm[1]) / 2, m.RangeNm[1] - m.RangeNm[0], true
	}
	return l[0], l[1], true
}

// noZeroBands are the bands of a list that have no zero point in the program.
var noZeroBands = []targets.Band{"W1", "W2"}

// HasZero tells whether a magnitude in a band can be turned into photons
// without a measured zero point.
func HasZero(b targets.Band) bool {
	_, line := lineFilter[b]
	return line || slices.Contains(targets.Bands, b) && !slices.Contains(noZeroBands, b)
}

// Lacks lists what the instrument itself wants before exposures can be worked
// out; empty where nothing.
//
// Checked: TestLacks.
func (i *Instrument) Lacks() []Lack {
	var out []Lack
	need := func(v float64, key, what, example string) {
		if !(v > 0) {
			out = append(out, Lack{"", key, "no " + what, "write " + key + " = " + example})
		}
	}
	need(i.ApertureM, "aperture_m", "aperture", "1.5, metres")
	need(i.PixelArcsec, "pixel_arcsec", "size of a pixel on the sky", "0.35, arcsec")
	need(i.ReadNoiseE, "read_noise_e", "read noise", "5, electrons a pixel")
	return out
}

// Any tells whether run.toml says anything of the detector or telescope, so
// that exposures are meant to be worked out.
func (i *Instrument) Any() bool {
	for _, v := range []float64{i.ApertureM, i.PixelArcsec, i.ReadNoiseE, i.GainEADU, i.DarkES, i.FullWellE, i.LinearE} {
		if v > 0 {
			return true
		}
	}
	return false
}

// LacksIn lists what a mode of the instrument wants.
//
// Checked: TestLacks.
func (i *Instrument) LacksIn(m *Mode) []Lack {
	var out []Lack
	lack := func(key, what, fix string) { out = append(out, Lack{m.Name, key, what, fix}) }
	light := m.Throughput.Known || len(m.ThroughputAt) > 0
	name := string(m.Band)
	if m.Band == "" {
		name = m.Name
	}
	switch {
	case m.ZeroPointES.Known:
	case !light:
		lack("zero_point_e_s", "no zero point for band "+name, "write zero_point_e_s or throughput")
	case m.Band != "" && i.Kind != Slit && !HasZero(m.Band):
		lack("zero_point_e_s", fmt.Sprintf("band %s has no zero point of its own", m.Band), "write zero_point_e_s, e/s at magnitude 0")
	}
	if i.Kind != Slit {
		return out
	}
	for _, n := range []struct {
		v                  float64
		key, what, example string
	}{{m.DispersionNm, "dispersion_nm_pixel", "dispersion", "0.2, nm a pixel"},
		{m.SlitScalePixel, "slit_scale_pixel_arcsec", "scale of the slit on the detector", "4, pixels per arcsec of slit"}} {
		if !(n.v > 0) {
			lack(n.key, "no "+n.what, "write "+n.key+" = "+n.example)
		}
	}
	return out
}
