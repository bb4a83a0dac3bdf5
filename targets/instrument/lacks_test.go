package instrument

import (
	"strings"
	"testing"

	"evenfall/astro/photon"
	"evenfall/targets"
)

// TestLacks: what is missing is named, and nothing else.
func TestLacks(t *testing.T) {
	whole := Instrument{Kind: Imager, ApertureM: 1.5, PixelArcsec: 0.35, ReadNoiseE: 5}
	if l := whole.Lacks(); len(l) != 0 {
		t.Error(l)
	}
	bare := Instrument{Kind: Slit}
	if l := bare.Lacks(); len(l) != 3 || bare.Any() || !whole.Any() {
		t.Error(l)
	}
	for _, c := range []struct {
		kind string
		mode Mode
		want string
	}{
		{Imager, Mode{Band: "V", Throughput: targets.Known(0.4)}, ""},
		{Imager, Mode{Band: "Ha", Throughput: targets.Known(0.4)}, ""},
		{Imager, Mode{Band: "I"}, "no zero point for band I: write zero_point_e_s or throughput"},
		{Imager, Mode{Band: "W1", Throughput: targets.Known(0.4)}, "band W1 has no zero point of its own: write zero_point_e_s, e/s at magnitude 0"},
		{Imager, Mode{Band: "W1", ZeroPointES: targets.Known(1e9)}, ""},
		{Slit, Mode{Name: "low", RangeNm: [2]float64{340, 930}, Throughput: targets.Known(0.2), DispersionNm: 0.2},
			"no scale of the slit on the detector: write slit_scale_pixel_arcsec = 4, pixels per arcsec of slit"},
	} {
		i := Instrument{Kind: c.kind}
		var got []string
		for _, l := range i.LacksIn(&c.mode) {
			got = append(got, l.Error())
		}
		if g := strings.Join(got, "; "); g != c.want {
			t.Errorf("%+v:\n got %s\nwant %s", c.mode, g, c.want)
		}
	}
}

// TestZeroBands: the bands said to have a zero point are those that have.
func TestZeroBands(t *testing.T) {
	for _, b := range append([]targets.Band{"X", "", "Rc"}, targets.Bands...) {
		if _, want := photon.ZeroPointOf(string(b)); want != HasZero(b) {
			t.Errorf("%q: %v, want %v", b, HasZero(b), want)
		}
	}
}

// TestNarrow: a filter for a line is as wide as its range, or as usual.
func TestNarrow(t *testing.T) {
	m := Mode{Band: "O3"}
	if c, w, ok := m.Narrow(); !ok || c != 500.68 || w != 6 {
		t.Error(c, w, ok)
	}
	m.RangeNm = [2]float64{499, 503}
	if c, w, ok := m.Narrow(); !ok || c != 501 || w != 4 {
		t.Error(c, w, ok)
	}
	m.Band = "V"
	if _, _, ok := m.Narrow(); ok {
		t.Error("V is no line")
	}
}
