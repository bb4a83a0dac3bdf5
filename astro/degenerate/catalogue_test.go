package degenerate

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/numeric"
)

// parallaxErr is a usual error of Gaia's parallaxes by brightness, mas; the
// list has none. From memory, not checked against a publication.
func parallaxErr(g float64) float64 {
	c, err := numeric.Linear([]float64{13, 15, 16, 17, 18, 19}, []float64{0.02, 0.03, 0.045, 0.07, 0.115, 0.20})
	if err != nil {
		panic(err)
	}
	v, _ := c.At(g)
	return v * math.Pow(10, 0.25*math.Max(0, g-19))
}

// dwarf is one star of the list with its published fits.
type dwarf struct {
	seen                 Seen
	tH, mH, tHe, mHe, pc float64
	kind                 string
	absG                 float64
}

// outside reads a table kept beside the repository, which has no header of `#`
// lines, or skips the test.
func outside(t testing.TB, rel string) (rows []map[string]string) {
	t.Helper()
	f, err := os.Open(check.Shared(t, rel))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil || len(all) < 2 {
		t.Fatalf("%s: %d rows, %v", rel, len(all), err)
	}
	for _, cells := range all[1:] {
		row := map[string]string{}
		for k, name := range all[0] {
			row[name] = cells[k]
		}
		rows = append(rows, row)
	}
	return rows
}

// value is a cell as a number; an empty one is not a number.
func value(t testing.TB, row map[string]string, column string) float64 {
	t.Helper()
	text, ok := row[column]
	if !ok {
		t.Fatalf("no column %q", column)
	}
	if text == "" {
		return math.NaN()
	}
	v, err := strconv.ParseFloat(strings.TrimSpace(text), 64)
	if err != nil {
		t.Fatalf("column %s: %v", column, err)
	}
	return v
}

func dwarfs(t testing.TB) []dwarf {
	t.Helper()
	var out []dwarf
	for _, r := range outside(t, "data/wd_gaia_open.csv") {
		plx, g := value(t, r, "Plx"), value(t, r, "Gmag")
		b := GalacticLatitude(astro.Deg(value(t, r, "RA_ICRS")), astro.Deg(value(t, r, "DE_ICRS")))
		d := dwarf{kind: r["spectype"], pc: 1000 / plx, tH: value(t, r, "TeffH"), mH: value(t, r, "MassH"),
			tHe: value(t, r, "TeffHe"), mHe: value(t, r, "MassHe"), absG: g + 5*math.Log10(plx) - 10}
		d.seen = Seen{GMag: g, HasBPRP: true, BPRPMag: value(t, r, "BPmag") - value(t, r, "RPmag"),
			ParallaxMas: plx, ParallaxErrMas: parallaxErr(g), AV: Dust(b)}
		out = append(out, d)
	}
	return out
}

// differences gathers how fits differ from those published.
type differences struct{ t, m []float64 }

func (d *differences) add(a Answer, teffK, massMsun float64) {
	d.t = append(d.t, a.TeffK.Mid/teffK-1)
	d.m = append(d.m, a.MassMsun.Mid-massMsun)
}

// summary returns median, median of the size, and scatter (half the 16-84
// range) of a sample, and which part is within a limit.
func summary(t testing.TB, x []float64, limit float64) (median, size, scatter, within float64) {
	t.Helper()
	abs := make([]float64, len(x))
	for k, v := range x {
		abs[k] = math.Abs(v)
		if abs[k] <= limit {
			within += 1 / float64(len(x))
		}
	}
	q, err := numeric.Quantiles(x, 0.16, 0.5, 0.84)
	if err != nil {
		t.Fatal(err)
	}
	s, err := numeric.Quantiles(abs, 0.5)
	if err != nil {
		t.Fatal(err)
	}
	return q[1], s[0], (q[2] - q[0]) / 2, within
}

func (d *differences) log(t testing.TB, name string) (sizeT, sizeM, withinT, withinM float64) {
	t.Helper()
	if len(d.t) == 0 {
		return
	}
	mt, st, ct, wt := summary(t, d.t, 0.05)
	mm, sm, cm, wm := summary(t, d.m, 0.05)
	t.Logf("%-22s n %4d: dT/T median %+.4f size %.4f scatter %.3f, within 5 %% %.3f; dM %+.4f size %.4f scatter %.3f, within 0.05 %.3f",
		name, len(d.t), mt, st, ct, wt, mm, sm, cm, wm)
	return st, sm, wt, wm
}

// The fits of the catalogue of Gentile Fusillo et al. 2021, made from the same
// photometry with the same kind of models: a test of tables, interpolation and
// reddening, not of truth.
func TestFitAgainstCatalogue(t *testing.T) {
	m := models()
	stars := dwarfs(t)
	var all, near, wide, middle, far, helium differences
	failed := 0
	for _, d := range stars {
		a, err := m.Fit(d.seen, FlatPrior, Hydrogen)
		if err != nil {
			failed++
			continue
		}
		all.add(a, d.tH, d.mH)
		switch {
		case d.pc < 150:
			near.add(a, d.tH, d.mH)
		case d.pc > 200 && d.pc < 300:
			middle.add(a, d.tH, d.mH)
		case d.pc > 300:
			far.add(a, d.tH, d.mH)
		}
		if a, err = m.Fit(d.seen, WidePrior, Hydrogen); err == nil {
			wide.add(a, d.tH, d.mH)
		}
		if a, err = m.Fit(d.seen, FlatPrior, Helium); err == nil && d.tHe > 0 {
			helium.add(a, d.tHe, d.mHe)
		}
	}
	sizeT, sizeM, _, _ := all.log(t, "all, flat")
	_, _, withinT, withinM := near.log(t, "within 150 pc, flat")
	middle.log(t, "200-300 pc, flat")
	far.log(t, "beyond 300 pc, flat")
	wide.log(t, "all, wide prior")
	helium.log(t, "helium, flat")
	if failed > 0 || len(all.t) < 1500 {
		t.Errorf("%d of %d stars without a fit", failed, len(stars))
	}
	if sizeT > 0.02 || sizeM > 0.02 {
		t.Errorf("median sizes %.4f in Teff, %.4f in mass; at most 0.02 each", sizeT, sizeM)
	}
	if withinT < 0.95 || withinM < 0.93 {
		t.Errorf("within 150 pc %.3f agree to 5 per cent, %.3f to 0.05 solar masses; at least 0.95 and 0.93", withinT, withinM)
	}
}

// Of 1503 white dwarfs the cut misses one.
func TestRecognised(t *testing.T) {
	if !Recognised(12.173, 0.134) || Recognised(4.8, 0.8) || Recognised(math.NaN(), 0) || Recognised(5.0, -0.4) {
		t.Error("a model white dwarf, the Sun, nothing and a hot subdwarf")
	}
	if !RoughCut(12.173, 0.134, 20) || RoughCut(12.173, 0.134, 4) || RoughCut(4.8, 0.8, 20) || RoughCut(16, 1.8, 20) {
		t.Error("the wide cut")
	}
	stars := dwarfs(t)
	taken, rough := 0, 0
	for _, d := range stars {
		av := d.seen.AV(d.pc)
		g, c := d.absG-gByV*av, d.seen.BPRPMag-bprpByG*gByV*av
		if Recognised(g, c) {
			taken++
		}
		if RoughCut(g, c, d.seen.ParallaxMas/d.seen.ParallaxErrMas) {
			rough++
		}
	}
	t.Logf("the cut takes %d of %d, the wide one %d", taken, len(stars), rough)
	if float64(taken) < 0.995*float64(len(stars)) {
		t.Errorf("the cut takes %d of %d, at least 99.5 per cent wanted", taken, len(stars))
	}
}

// Every class of the list can be read.
func TestSpectraOfCatalogue(t *testing.T) {
	for _, d := range dwarfs(t) {
		if _, ok := ParseSpectrum(d.kind); !ok {
			t.Errorf("class %q cannot be read", d.kind)
		}
	}
}

// What the note on DC stars says is so: most DC and few DA pass its mass.
func TestDCHintOnCatalogue(t *testing.T) {
	m := models()
	n, hit := map[string]int{}, map[string]int{}
	for _, d := range dwarfs(t) {
		if d.tH < dcCoolK || d.tH > dcHotK {
			continue
		}
		a, err := m.Fit(d.seen, FlatPrior, Hydrogen)
		if err != nil {
			continue
		}
		n[d.kind]++
		if _, _, ok := DCHint(a.TeffK.Mid, a.MassMsun.Mid); ok {
			hit[d.kind]++
		}
	}
	dc, da := float64(hit["DC"])/float64(n["DC"]), float64(hit["DA"])/float64(n["DA"])
	t.Logf("the hint falls on %.2f of %d DC and %.2f of %d DA: ratio %.1f", dc, n["DC"], da, n["DA"], dc/da)
	if dc/da < 3 || dc/da > 5.5 {
		t.Errorf("ratio %.1f, the hint says about 4", dc/da)
	}
}
