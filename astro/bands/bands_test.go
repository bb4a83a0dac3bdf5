package bands

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
)

// Bessell, Castelli & Plez 1998, table A2; Fukugita et al. 1996; Riello et al.
// 2021: wavelengths in angstrom and AB less the band's own zero point.
func TestInfos(t *testing.T) {
	for b, want := range map[Band][2]float64{U: {3660, .768}, B: {4380, -.122}, V: {5450, -.001}, R: {6410, .184}, I: {7980, .442},
		J: {12200, .897}, H: {16300, 1.378}, K: {21900, 1.885}, SU: {3551, -.042}, SG: {4686, 0}, SR: {6166, 0}, SI: {7480, 0}, SZ: {8932, 0},
		G: {6390.7, .1136}, BP: {5182.6, .0155}, RP: {7825.1, .3561}} {
		i, ok := Of(b)
		if !ok || !i.HasAB || i.Source.IsZero() || i.Band != b {
			t.Errorf("%s: %+v", b, i)
		}
		check.Near(t, i.Wavelength.Nm()*10, want[0], 1e-6, "wavelength of %s", b)
		ab, _ := ToAB(b, astro.Mags(10))
		check.Near(t, ab.Mags(), 10+want[1], 1e-9, "AB magnitude of %s = 10", b)
	}
	if _, ok := ToAB(W1, astro.Mags(5)); ok {
		t.Error("W1 has no AB offset here")
	}
	if _, ok := Of("x"); ok || len(All) != len(infos) {
		t.Error("bands that are none")
	}
	// zero of the Gaia bands in jansky: 3270.3, 3579.5, 2615.7
	for b, jy := range map[Band]float64{G: 3270.3, BP: 3579.5, RP: 2615.7} {
		ab, _ := ToAB(b, astro.Mags(0))
		check.Near(t, 3631*math.Pow(10, -0.4*ab.Mags()), jy, 0.06, "Jy of zero magnitude in %s", b)
	}
}

// Riello et al. 2021, appendix C, worked for G = 10 at BP-RP 0.82 and 3.0, to
// the digits printed; J H K by hand: 1.389*0.82 - 0.09338*0.6724 + 0.01798 and
// so on.
func TestFromGaia(t *testing.T) {
	for c, list := range map[float64]map[Band]float64{
		0.82: {V: 10.152, R: 9.788, I: 9.426, B: 10.757, SG: 10.403, SR: 9.983, SI: 9.834, SZ: 9.777, J: 8.90583, H: 8.57398, K: 8.49129},
		3.0:  {V: 11.540, R: 10.024, I: 8.594, SG: 12.910, SR: 10.884},
	} {
		for b, want := range list {
			got, sd, err := FromGaia(b, 10, c, Giant)
			if err != nil {
				t.Fatal(err)
			}
			check.Near(t, got, want, 6e-4, "%s at BP-RP %g", b, c)
			if sd < 0.03 || sd > 0.086 {
				t.Errorf("%s: scatter %g", b, sd)
			}
		}
	}
	// V - G of the Sun is 0.14 +- 0.03 by other ways
	v, _, _ := FromGaia(V, 0, 0.82, Dwarf)
	check.Near(t, v, 0.14, 0.03, "V-G of the Sun")
	for _, c := range []struct {
		b    Band
		c    float64
		lum  Luminosity
		want Reason
	}{
		{V, 5.1, Giant, OutsideRange}, {V, -.51, Giant, OutsideRange}, {SG, 2.5, Dwarf, GiantsOnly}, {SG, 2.5, UnknownLuminosity, GiantsOnly},
		{SG, .2, WhiteDwarf, OutsideRange}, {SR, .3, WhiteDwarf, NeedsModel}, {V, .6, WhiteDwarf, OutsideRange}, {B, 4.2, Giant, OutsideRange},
		{U, 1, Giant, NoRelation}, {W1, 1, Giant, NoRelation}, {V, math.NaN(), Giant, OutsideRange},
	} {
		if _, _, err := FromGaia(c.b, 10, c.c, c.lum); !errors.Is(err, &Refusal{Reason: c.want}) {
			t.Errorf("%s at %g: %v, want %s", c.b, c.c, err, c.want)
		}
	}
	if _, _, err := FromGaia(V, math.NaN(), 1, Giant); !errors.Is(err, &Refusal{Reason: NoMagnitude}) {
		t.Errorf("G that is no number: %v", err)
	}
}

func TestParseType(t *testing.T) {
	for text, want := range map[string]Type{
		"K5III":            {Class: 'K', Subclass: 5, Luminosity: Giant},
		"M3/4III":          {Class: 'M', Subclass: 3.5, Spread: 0.5, Luminosity: Giant},
		"M6-III":           {Class: 'M', Subclass: 5.75, Luminosity: Giant},
		"gM4":              {Class: 'M', Subclass: 4, Luminosity: Giant},
		"dM4e":             {Class: 'M', Subclass: 4, Luminosity: Dwarf, Emission: true},
		"M2.5II-III":       {Class: 'M', Subclass: 2.5, Luminosity: Giant},
		"M4+IIIa":          {Class: 'M', Subclass: 4.25, Luminosity: Giant},
		"K0+IV":            {Class: 'K', Subclass: 0.25, Luminosity: Subgiant},
		"K0-IIIa":          {Class: 'K', Subclass: 0, Luminosity: Giant},
		"G8:IIIFe-5":       {Class: 'G', Subclass: 8, Luminosity: Giant, Uncertain: true},
		"K1III-IV":         {Class: 'K', Subclass: 1, Luminosity: Giant},
		"G9.5IIICH-1":      {Class: 'G', Subclass: 9.5, Luminosity: Giant},
		"M5e-M9e":          {Class: 'M', Subclass: 7, Spread: 2, Emission: true},
		"M4e-M7.5e":        {Class: 'M', Subclass: 5.75, Spread: 1.75, Emission: true},
		"M6.5e-M9.0e(Tc:)": {Class: 'M', Subclass: 7.75, Spread: 1.25, Emission: true},
		"M5IIIe-M6IIIe":    {Class: 'M', Subclass: 5.5, Spread: 0.5, Luminosity: Giant, Emission: true},
		"M5e-M8eII-III":    {Class: 'M', Subclass: 6.5, Spread: 1.5, Luminosity: Giant, Emission: true},
		"K5e-M6e":          {Class: 'M', Subclass: 0.5, Spread: 5.5, Emission: true},
		"M1-M2Ia-ab":       {Class: 'M', Subclass: 1.5, Spread: 0.5, Luminosity: Supergiant},
		"M2-Ia":            {Class: 'M', Subclass: 1.75, Luminosity: Supergiant},
		"K2V+DA":           {Class: 'K', Subclass: 2, Luminosity: Dwarf, Composite: true},
		"M4.5+D":           {Class: 'M', Subclass: 4.5, Composite: true},
		"M3III+pec(NOVA)":  {Class: 'M', Subclass: 3, Luminosity: Giant, Composite: true},
		"F9VkA5mA1":        {Class: 'F', Subclass: 9, Luminosity: Dwarf},
		"M3SIII":           {Class: 'M', Subclass: 3, Luminosity: Giant},
		"K 1.5 III":        {Class: 'K', Subclass: 1.5, Luminosity: Giant},
		"S5,7":             {Class: 'S', Subclass: 5},
	} {
		want.Known = true
		got, err := ParseType(text)
		if err != nil || got != want {
			t.Errorf("%s: %+v, want %+v (%v)", text, got, want, err)
		}
	}
	for text, class := range map[string]byte{"C-N5 C2 6+": 'C', "OB+M2ep": 'O', "DA3.3": 'D', "G": 'G'} {
		if got, err := ParseType(text); err != nil || got.Class != class || got.Known {
			t.Errorf("%s: %+v, %v", text, got, err)
		}
	}
	if w, _ := ParseType("DA3.3"); w.Luminosity != WhiteDwarf {
		t.Errorf("DA3.3: %+v", w)
	}
	for _, text := range []string{"", "pec(UG)", "x", "5", "III", "\x00", "k5iii"} {
		if _, err := ParseType(text); !errors.Is(err, &Refusal{Reason: BadType}) {
			t.Errorf("%q: %v", text, err)
		}
	}
}

// The types of the built-in stars can be read but for the peculiar ones.
func TestBuiltinTypes(t *testing.T) {
	f, err := os.Open(filepath.Join(check.Root(t), "targets", "builtin", "stars.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment, r.FieldsPerRecord = '#', -1
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	col := slices.Index(rows[0], "sptype")
	if col < 0 {
		t.Fatalf("no column sptype among %v", rows[0])
	}
	read := 0
	for _, row := range rows[1:] {
		s := row[col]
		if s == "" {
			continue
		}
		if _, err := ParseType(s); err != nil {
			if !strings.Contains(strings.ToLower(s), "pec") && s[0] != '[' {
				t.Logf("not read: %q", s)
			}
			continue
		}
		read++
	}
	if read < 150 {
		t.Errorf("only %d types were read", read)
	}
}

// Rows of the table: K5 B-V 1.53, M2 V-I 2.03, M3 BP-RP 2.70, M4 G-K 4.41;
// halfway between M2 and M3 the nearer row M2.5, 2.50.
func TestColour(t *testing.T) {
	for _, c := range []struct {
		sp        string
		blue, red Band
		want, sd  float64
	}{
		{"K5III", B, V, 1.53, 0.08}, {"M2III", V, I, 2.03, 0.23}, {"M3III", BP, RP, 2.70, 0.42}, {"M4III", G, K, 4.41, math.Hypot(0.30, gkBias)},
		{"M2.5III", BP, RP, 2.50, 0.21}, {"G8III", B, V, 0.95, 0.08}, {"M1III", J, K, 1.11, jkScatter}, {"M2.5III", V, I, 2.155, 0.21},
	} {
		sp, _ := ParseType(c.sp)
		v, sd, err := Colour(sp, c.blue, c.red, 0)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, v, c.want, 1e-9, "%s-%s of %s", c.blue, c.red, c.sp)
		if sd < c.sd || sd > c.sd+0.15 {
			t.Errorf("%s-%s of %s: error %.3f, scatter %.3f", c.blue, c.red, c.sp, sd, c.sd)
		}
	}
	m2, _ := ParseType("M2III")
	v, _, _ := Colour(m2, B, V, 3.1)
	check.Near(t, v, 1.62+1, 1e-9, "B-V reddened by A_V 3.1")
	v, _, _ = Colour(m2, BP, RP, 1)
	check.Near(t, v, 2.24+0.40, 1e-9, "BP-RP reddened by A_V 1")
	for _, sp := range []string{"F5III", "M7III", "C5,5", "M"} {
		p, _ := ParseType(sp)
		if _, _, err := Colour(p, B, V, 0); !errors.Is(err, &Refusal{Reason: OutsideRange}) {
			t.Errorf("%s: %v", sp, err)
		}
	}
	k3, _ := ParseType("K3III")
	if _, _, err := Colour(k3, G, K, 0); !errors.Is(err, &Refusal{Reason: OutsideRange}) {
		t.Errorf("G-K of K3: %v", err)
	}
	if _, _, err := Colour(k3, U, B, 0); !errors.Is(err, &Refusal{Reason: NoRelation}) {
		t.Errorf("U-B: %v", err)
	}
}

// Widths of the table: M0 0.02, M2 0.04, M3 0.07, M4 0.13, M5 0.23, M6 0.37,
// M8 about 0.9; in V 1.3 times that for M.
func TestVariability(t *testing.T) {
	for sp, want := range map[string]float64{"M0III": .02, "M2III": .04, "M3III": .07, "M4III": .13, "M5III": .23, "M6III": .37, "M8III": .9, "K3III": 0, "K5III": .01} {
		p, _ := ParseType(sp)
		r, ok := VariabilityOf(p)
		if !ok {
			t.Fatalf("%s: nothing", sp)
		}
		check.Near(t, r.Hp, want, 1e-9, "range of %s", sp)
		if sp[0] == 'M' {
			check.Near(t, r.V, 1.3*want, 1e-9, "range of %s in V", sp)
		}
		if r.Hp16 > r.Hp || r.Hp84 < r.Hp || r.Estimate != (sp == "M8III") {
			t.Errorf("%s: %+v", sp, r)
		}
	}
	p, _ := ParseType("M5III")
	if r, _ := VariabilityOf(p); r.Hp16 != .13 || r.Hp84 != .34 {
		t.Errorf("spread of M5: %+v", r)
	}
	for _, sp := range []string{"M9III", "F0III", "C5,5", "K"} {
		p, _ := ParseType(sp)
		if r, ok := VariabilityOf(p); ok {
			t.Errorf("%s: %+v", sp, r)
		}
	}
}

// The embedded table is the one beside the repository.
func TestTableIsTheSharedOne(t *testing.T) {
	b, err := os.ReadFile(check.Shared(t, "tables/giants_by_type.csv"))
	if err != nil {
		t.Fatal(err)
	}
	if string(b) != giantsCSV {
		t.Error("giants_by_type.csv differs from that beside the repository")
	}
}

func gaiaStar(g, c, e float64) map[Band]Measure {
	return map[Band]Measure{G: {g, e}, BP: {g + 0.4*c, e}, RP: {g - 0.6*c, e}}
}

func TestCarry(t *testing.T) {
	// as listed
	got, err := Carry(map[Band]Measure{V: {13, 0.1}}, V, Hints{})
	if err != nil || got.Mag != 13 || got.Err != 0.1 || !got.Direct {
		t.Fatalf("%+v, %v", got, err)
	}
	got, _ = Carry(map[Band]Measure{V: {13, 0}}, V, Hints{})
	if !got.Assumed || got.Err != AssumedErr || !strings.Contains(got.Route, "assumed") {
		t.Errorf("%+v", got)
	}
	// from Gaia: V = 10.152, error the scatter and little more
	got, err = Carry(gaiaStar(10, 0.82, 0.003), V, Hints{})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, got.Mag, 10.152, 6e-4, "V from Gaia")
	check.Near(t, got.Err, 0.030, 0.001, "its error")
	if got.ByType || got.Source == "" || !strings.Contains(got.Route, "BP-RP 0.82") {
		t.Errorf("%+v", got)
	}
	// V and I give r by way of the colour: the Sun's V-I 0.70 and BP-RP 0.82
	got, err = Carry(map[Band]Measure{V: {10.152, 0.01}, I: {9.426, 0.01}}, SR, Hints{})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, got.Mag, 9.983, 0.03, "r from V and I")
	// V and K give J
	want, _, _ := FromGaia(J, 10, 1.4, Giant)
	v, _, _ := FromGaia(V, 10, 1.4, Giant)
	k, _, _ := FromGaia(K, 10, 1.4, Giant)
	got, err = Carry(map[Band]Measure{V: {v, 0.01}, K: {k, 0.02}}, J, Hints{})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, got.Mag, want, 1e-4, "J from V and K")
	// giants of a type: B of a K5III with V = 5 is 6.53
	got, err = Carry(map[Band]Measure{V: {5, 0.01}}, B, Hints{SpType: "K5III"})
	if err != nil || !got.ByType {
		t.Fatalf("%+v, %v", got, err)
	}
	check.Near(t, got.Mag, 6.53, 1e-9, "B of a K5III")
	if got.Err < 0.08 || got.Err > 0.13 {
		t.Errorf("its error %.3f", got.Err)
	}
	// the same without a class, the list saying giant
	if got, err = Carry(map[Band]Measure{V: {5, 0.01}}, B, Hints{SpType: "K5", Luminosity: Giant}); err != nil || got.Mag != 6.53 {
		t.Errorf("%+v, %v", got, err)
	}
	// R of an M2III from V: G and R by the mean BP-RP 2.24 of the type
	got, err = Carry(map[Band]Measure{V: {5, 0.01}}, R, Hints{SpType: "M2III"})
	if err != nil || !got.ByType {
		t.Fatalf("%+v, %v", got, err)
	}
	gv, _, _ := FromGaia(V, 0, 2.24, Giant)
	gr, _, _ := FromGaia(R, 0, 2.24, Giant)
	check.Near(t, got.Mag, 5-gv+gr, 1e-9, "R of an M2III")
	// a K2III has no mean BP-RP in the table; its V-I 1.17 gives it: 1.2912
	got, err = Carry(map[Band]Measure{V: {5, 0.01}}, SI, Hints{SpType: "K2III"})
	if err != nil || !got.ByType {
		t.Fatalf("%+v, %v", got, err)
	}
	gv, _, _ = FromGaia(V, 0, 1.29109, Giant)
	gi, _, _ := FromGaia(SI, 0, 1.29109, Giant)
	check.Near(t, got.Mag, 5-gv+gi, 1e-4, "i of a K2III")
	// measured colours go before those of the type
	star := gaiaStar(10, 2.24, 0.003)
	if got, err = Carry(star, V, Hints{SpType: "M2III"}); err != nil || got.ByType {
		t.Errorf("%+v, %v", got, err)
	}
}

func TestCarryRefuses(t *testing.T) {
	one := map[Band]Measure{V: {10, 0.01}}
	for _, c := range []struct {
		known map[Band]Measure
		want  Band
		h     Hints
		why   Reason
	}{
		{one, "Q", Hints{}, UnknownBand}, {one, "", Hints{}, UnknownBand},
		{nil, V, Hints{}, NoMagnitude}, {map[Band]Measure{V: {math.NaN(), 1}, "Q": {5, 1}}, B, Hints{}, NoMagnitude},
		{one, B, Hints{}, NoRelation}, {one, B, Hints{SpType: "K5V"}, NoRelation},
		{one, B, Hints{SpType: "???"}, BadType},
		{one, W1, Hints{SpType: "K5III"}, NoRelation}, {one, B, Hints{SpType: "M7III"}, OutsideRange}, {gaiaStar(10, 1, 0.01), U, Hints{}, NoRelation},
		{gaiaStar(10, 5.4, 0.01), V, Hints{}, OutsideRange}, {gaiaStar(10, 2.6, 0.01), K, Hints{Luminosity: Giant}, OutsideRange},
		{gaiaStar(10, 2.6, 0.01), SG, Hints{}, GiantsOnly}, {gaiaStar(10, 2.6, 0.01), SG, Hints{SpType: "M4V", Luminosity: Giant}, GiantsOnly},
		{gaiaStar(15, 0.3, 0.01), SR, Hints{Luminosity: WhiteDwarf}, NeedsModel}, {gaiaStar(15, 0.7, 0.01), V, Hints{Luminosity: WhiteDwarf}, OutsideRange},
		{gaiaStar(15, 0.3, 0.01), V, Hints{Emission: true}, Emission}, {map[Band]Measure{V: {15, 0.1}}, B, Hints{SpType: "DA3.3"}, NeedsModel},
		{one, B, Hints{SpType: "K2III+DA"}, NoRelation},
	} {
		got, err := Carry(c.known, c.want, c.h)
		var r *Refusal
		if !errors.As(err, &r) || r.Reason != c.why || r.Words == "" || r.Want != c.want {
			t.Errorf("%v to %s, %+v: %+v, %v; want %s", c.known, c.want, c.h, got, err, c.why)
		}
	}
	// a white dwarf's V follows from Gaia, by a spectral type too
	if _, err := Carry(gaiaStar(15, 0.3, 0.01), V, Hints{SpType: "DA4"}); err != nil {
		t.Error(err)
	}
}

// A giant with Gaia magnitudes: there and back gives the same within the
// errors, and what is known more closely never comes out with a larger error.
func TestCarryProperties(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		c := rapid.Float64Range(0.5, 2).Draw(r, "c")
		g := rapid.Float64Range(5, 18).Draw(r, "g")
		e := rapid.Float64Range(0.001, 0.3).Draw(r, "e")
		b := rapid.SampledFrom([]Band{V, R, I, B, SG, SR, SI, SZ, J, H, K}).Draw(r, "band")
		star := gaiaStar(g, c, e)
		there, err := Carry(star, b, Hints{Luminosity: Giant})
		if err != nil {
			r.Fatal(err)
		}
		if there.Err < relations[b].scatter || math.IsNaN(there.Mag) {
			r.Fatalf("%+v", there)
		}
		back, err := Carry(map[Band]Measure{b: {there.Mag, e}, BP: star[BP], RP: star[RP]}, G, Hints{Luminosity: Giant})
		if err != nil || math.Abs(back.Mag-g) > 4*math.Hypot(back.Err, there.Err)+1e-9 {
			r.Fatalf("back at %+v from %g, %v", back, g, err)
		}
		finer := gaiaStar(g, c, e/2)
		if f, err := Carry(finer, b, Hints{Luminosity: Giant}); err != nil || f.Err > there.Err+1e-9 {
			r.Fatalf("with half the error %+v, %v, against %+v", f, err, there)
		}
		again, _ := Carry(star, b, Hints{Luminosity: Giant})
		if again != there {
			r.Fatalf("twice the same: %+v and %+v", there, again)
		}
	})
}

func FuzzType(f *testing.F) {
	for _, s := range []string{"K5III", "M3/4III", "gM4", "M5e-M9e", "K2V+DA", "sdB", "C5,5J", "G8:IIIFe-5", "\xff"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		p, err := ParseType(s)
		if err != nil {
			if p != (Type{}) || err.Error() == "" {
				t.Fatalf("%q: %+v, %v", s, p, err)
			}
			return
		}
		if !(p.Subclass >= 0 && p.Subclass <= 10.25) || !(p.Spread >= 0) {
			t.Fatalf("%q: %+v", s, p)
		}
		_ = p.String()
		if r, ok := VariabilityOf(p); ok && !(r.Hp >= 0 && r.V < 2) {
			t.Fatalf("%q varies by %+v", s, r)
		}
	})
}

func FuzzCarry(f *testing.F) {
	f.Add(10.0, 10.4, 9.6, 0.01, 5.0, 2.0, "R", "M2III", 3, false, 0.3)
	f.Add(math.NaN(), math.Inf(1), -1e300, -1.0, 5.0, 2.0, "V", "DA", 5, true, -5.0)
	f.Fuzz(func(t *testing.T, g, bp, rp, e, v, k float64, want, sp string, lum int, em bool, av float64) {
		known := map[Band]Measure{G: {g, e}, BP: {bp, e}, RP: {rp, e}, V: {v, e}, K: {k, e}}
		for n := range 3 {
			got, err := Carry(known, Band(want), Hints{SpType: sp, Luminosity: Luminosity(lum), Emission: em, AVMag: av})
			if err == nil && (math.IsNaN(got.Mag) || !(got.Err > 0) || math.IsInf(got.Mag, 0) || got.Route == "" || got.Source == "") {
				t.Fatalf("%+v", got)
			}
			if err != nil && err.Error() == "" {
				t.Fatal("no words")
			}
			delete(known, []Band{BP, G, V}[n])
		}
	})
}

func BenchmarkCarry(b *testing.B) {
	star := gaiaStar(10, 1.2, 0.01)
	star[V], star[I], star[K] = Measure{10.3, 0.01}, Measure{9.2, 0.01}, Measure{7.5, 0.02}
	delete(star, BP)
	for b.Loop() {
		if _, err := Carry(star, SR, Hints{SpType: "K2III"}); err != nil {
			b.Fatal(err)
		}
	}
}

// By hand: 1.0 +- 0.1 and 1.6 +- 0.2 differ by 2.7 of their errors: mean 1.12,
// error^2 = 0.008 + (100 0.12^2 + 25 0.48^2)/125 = 0.0656; those that agree
// leave the better one.
func TestOneColour(t *testing.T) {
	c, ok := oneColour([]colour{{1.0, 0.1, "a", "A", false}, {1.6, 0.2, "b", "B", true}})
	check.Near(t, c.c, 1.12, 1e-9, "mean colour")
	check.Near(t, c.err, math.Sqrt(0.0656), 1e-9, "its error")
	if !ok || !c.byType || !strings.Contains(c.how, "disagree") || c.source == "" {
		t.Errorf("%+v", c)
	}
	if c, _ := oneColour([]colour{{1.0, 0.2, "a", "A", false}, {1.05, 0.1, "b", "B", true}}); c.c != 1.05 || c.err != 0.1 {
		t.Errorf("%+v", c)
	}
	if _, ok := oneColour(nil); ok {
		t.Error("a colour of nothing")
	}
}

// J, H and K of bright stars are off by 0.15 mag at least, of faint ones not.
func TestJohnson(t *testing.T) {
	for _, want := range []Band{J, K, V} {
		known := map[Band]Measure{G: {3, 0.01}, BP: {3.41, 0.01}, RP: {2.59, 0.01}}
		c, err := Carry(known, want, Hints{})
		if err != nil || (want != V) != (c.Err >= johnsonErr) {
			t.Errorf("%s: %+v, %v", want, c, err)
		}
		known[G], known[BP], known[RP] = Measure{10, 0.01}, Measure{10.41, 0.01}, Measure{9.59, 0.01}
		if c, err = Carry(known, want, Hints{}); err != nil || c.Err >= johnsonErr {
			t.Errorf("%s of a faint star: %+v, %v", want, c, err)
		}
	}
}
